"""The digest that ties results to the inputs from which they follow."""

from __future__ import annotations

import hashlib

from strutbook_addin.tables.labels import Labels
from strutbook_addin.tables.reading import TableData
from strutbook_addin.tables.schema import INPUT_TABLES, JOB, Kind


def digest(tables: dict[str, TableData], labels: Labels) -> str:
    """Short digest of the parsed inputs: values in SI units and names, not their looks or places.

    Moving a table, reordering columns or adding columns of one's own leaves it as it is.
    """
    hashed = hashlib.sha256()
    for table in INPUT_TABLES:
        data = tables.get(table.sheet)
        if data is None or not data.rows:
            continue
        hashed.update(f"[{table.sheet}]".encode())
        for column in table.inputs:
            hashed.update(f"<{column.name}>".encode())
            if column.kind is Kind.NUMBER:
                # Adding zero makes -0.0 the same number as 0.0.
                hashed.update((data.number(column.name) + 0.0).tobytes())
            else:
                hashed.update("\x1f".join(data.text(column.name)).encode())
        for header in sorted(data.open_numbers):
            hashed.update(f"<{header}>".encode())
            hashed.update((data.open_numbers[header] + 0.0).tobytes())
    # Labels that change what is checked; a blank one leaves the digest as it is without the label.
    for name in ("Standard", "Factors", "Slenderness limit", "Deflection limit", "Span"):
        value = labels.texts.get(name, "") or labels.numbers.get(name)
        if value:
            hashed.update(f"<{JOB.sheet}: {name}={value!r}>".encode())
    return hashed.hexdigest()[:16]
