"""Load cases and the combinations of them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from strutbook_addin.findings import Findings, Level
from strutbook_addin.model.references import IndexArray, Names
from strutbook_addin.tables.headers import name_text, nearest
from strutbook_addin.tables.reading import FloatArray, TableData

#: Name of the one case of a workbook that names none.
ONLY_CASE = "Loads"


@dataclass(frozen=True, eq=False)
class Cases:
    """The load cases of the workbook."""

    names: Names
    self_weight: FloatArray  #: (cases,) factor on the weight of the members
    table: TableData | None  #: the sheet `Cases`, where there is one

    @property
    def natures(self) -> tuple[str, ...]:
        """Nature of each case, empty where none is given."""
        return ("",) * len(self.names) if self.table is None else tuple(self.table.text("Nature"))

    def indices(self, table: TableData, findings: Findings) -> IndexArray:
        """Case of every row of a load table; -1 where it is not known."""
        texts = table.text("Case")
        if not any(texts):
            only = self.names.get(ONLY_CASE)
            if only is None and table.rows:
                table.report(
                    findings,
                    0,
                    "Case",
                    "the rows name no case, and the workbook has named cases.",
                    "Write the case of every row.",
                )
            return np.full(table.rows, -1 if only is None else only, dtype=np.intp)
        for row, name in enumerate(texts):
            if not name:
                table.report(
                    findings,
                    row,
                    "Case",
                    "expected the name of a case, found an empty cell; other rows name theirs.",
                    "Write the case of every row, or of none.",
                )
        return self.names.indices(table, "Case", findings)


@dataclass(frozen=True, eq=False)
class Combinations:
    """Factors on the cases."""

    names: tuple[str, ...]
    factors: FloatArray  #: (cases, combinations)
    strength: NDArray[np.bool_]  #: (combinations,) used for member forces
    service: NDArray[np.bool_]  #: (combinations,) used for displacements
    natures: tuple[str, ...]  #: (cases,) nature of each case, empty where none is given


def read_cases(cases: TableData | None, load_tables: list[TableData]) -> Cases:
    """Cases from their sheet, or else in the order in which the load tables name them."""
    if cases is not None:
        weight = np.nan_to_num(cases.number("Self weight"))
        return Cases(Names(cases.layout.sheet, "case", cases.text("Case")), weight, cases)
    # Without names there is one case; an entirely empty table of loads still has it.
    named = dict.fromkeys(name for table in load_tables for name in table.text("Case") if name)
    names = list(named)
    if not names or any(table.rows and not any(table.text("Case")) for table in load_tables):
        names = names if ONLY_CASE in named else [*names, ONLY_CASE]
    return Cases(Names("Loads", "case", names), np.zeros(len(names)), None)


def read_combinations(table: TableData | None, cases: Cases, findings: Findings) -> Combinations:
    """Combinations from their sheet; without it (or without rows) each case is one, for both uses."""
    count = len(cases.names)
    if table is None or not table.rows:
        both = np.ones(count, dtype=np.bool_)
        return Combinations(tuple(cases.names.names), np.eye(count), both, both, cases.natures)
    factors = np.zeros((count, table.rows))
    used = np.zeros(count, dtype=np.bool_)
    for header, values in table.open_numbers.items():
        case = cases.names.get(name_text(header))
        if case is None:
            findings.add(
                Level.STOP,
                f"this column holds factors, but there is no case {header}.{nearest(header, cases.names.names)}",
                "Write the name of a case as the header, or remove the column.",
                sheet=table.layout.sheet,
                row=table.layout.header_row,
                column=table.layout.open_columns[header],
            )
            continue
        factors[case] += values
        used[case] = True
    for unused in np.flatnonzero(~used):
        name = cases.names.names[int(unused)]
        findings.add(
            Level.LOOK,
            f"the case {name} is in no combination, so its loads act nowhere.",
            f"Add a column {name} with factors if that is not meant.",
            sheet=table.layout.sheet,
            row=table.layout.header_row,
            column=min(table.layout.columns.values()),
        )
    uses = table.text("For")
    return Combinations(
        tuple(table.text("Combination")),
        factors,
        np.array([use != "service" for use in uses], dtype=np.bool_),
        np.array([use != "strength" for use in uses], dtype=np.bool_),
        cases.natures,
    )
