"""The reference of all tables, derived from the schema.

``python -m strutbook_addin.tables.reference README.md`` writes it anew into the README.
"""

from __future__ import annotations

import sys
from pathlib import Path

from strutbook_addin.tables.schema import ON_REQUEST, RESULT_TABLES, TABLES, Column, Kind, Table

START, END = "<!-- tables -->", "<!-- end of tables -->"


def reference() -> str:
    """Every table and column in Markdown."""
    listed = (*RESULT_TABLES, *(table for table in ON_REQUEST if not table.inputs))
    parts = [_table(table) for table in TABLES if table not in listed]
    results = "\n".join(f"| `{table.sheet}` | {table.meaning} | {_columns(table)} |" for table in listed)
    parts.append(
        "Sheets that a run writes whole (it makes those that are missing):\n\n"
        f"| sheet | holds | columns |\n| --- | --- | --- |\n{results}\n"
    )
    return "\n".join(parts)


def written_into(text: str) -> str:
    """A text with its reference between the two marks replaced by the present one."""
    head, _, rest = text.partition(START)
    _, _, tail = rest.partition(END)
    return f"{head}{START}\n\n{reference()}\n{END}{tail}"


def _table(table: Table) -> str:
    needed = " (needed)" if table.required else ""
    lines = [f"**`{table.sheet}`**{needed}: {table.meaning}\n"]
    kind = "label" if table.labels else "column"
    lines += [f"| {kind} | takes | meaning |", "| --- | --- | --- |"]
    lines += [f"| {_header(column)} | {_takes(column)} | {column.meaning} |" for column in table.inputs]
    if table.open_columns is not None:
        lines.append(f"| one column a {table.open_columns.of[:-1]} | a number | {table.open_columns.meaning} |")
    if table.results:
        names = ", ".join(_header(column) for column in table.results)
        lines.append(f"\nResults: {names}.")
    return "\n".join(lines) + "\n"


def _columns(table: Table) -> str:
    names = [column.name for column in table.columns]
    if table.open_columns is not None:
        names.append(f"one a {table.open_columns.of[:-1]}")
    return ", ".join(names)


def _header(column: Column) -> str:
    return f"{column.name} [{column.dimension.suggested[0]}]" if column.dimension else column.name


def _takes(column: Column) -> str:
    if column.kind is Kind.CHOICE:
        takes = ", ".join(column.choices)
    elif column.refers_to:
        takes = f"a name from `{column.refers_to}`"
    else:
        takes = column.expected
    return f"{takes}; needed" if column.required else takes


if __name__ == "__main__":
    readme = Path(sys.argv[1])
    readme.write_text(written_into(readme.read_text("utf-8")), "utf-8")
