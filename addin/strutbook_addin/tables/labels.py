"""The sheet `Job`: labels in column A, values in column B."""

from __future__ import annotations

from dataclasses import dataclass

from strutbook_addin.findings import Findings, Level
from strutbook_addin.sheets import Grid
from strutbook_addin.tables.headers import cell, header_unit, is_blank, name_text
from strutbook_addin.tables.reading import cell_number, found, remedy
from strutbook_addin.tables.schema import Column, Kind, Table, normal
from strutbook_addin.tables.units import split_header

#: Column of the values.
VALUES = 1


@dataclass(frozen=True, eq=False)
class Labels:
    """Inputs of the sheet by their label; what is not there or blank is missing from both."""

    sheet: str
    rows: dict[str, int]  #: row of every label of the schema that stands on the sheet
    texts: dict[str, str]
    numbers: dict[str, float]  #: SI

    def report(self, findings: Findings, label: str, what: str, todo: str, level: Level = Level.STOP) -> None:
        """Add a finding about the value beside a label."""
        row = self.rows.get(label)
        findings.add(level, what, todo, sheet=self.sheet, row=row, column=None if row is None else VALUES, header=label)


def label_rows(table: Table, grid: Grid) -> dict[str, tuple[int, str]]:
    """Row and full text of every label of the schema that stands in column A; the first of two counts."""
    rows: dict[str, tuple[int, str]] = {}
    for row, values in enumerate(grid):
        if values and isinstance(values[0], str):
            column = table.by_normal_name.get(normal(split_header(values[0])[0]))
            if column is not None:
                rows.setdefault(column.name, (row, values[0]))
    return rows


def read_labels(table: Table, sheet: str, grid: Grid, findings: Findings) -> Labels:
    """Read the inputs of a sheet of labels; a value that does not fit is a finding."""
    rows = label_rows(table, grid)
    labels = Labels(sheet, {name: row for name, (row, _) in rows.items()}, {}, {})
    for column in table.inputs:
        if column.name not in rows:
            continue
        row, label = rows[column.name]
        value = cell(grid, row, VALUES)
        if is_blank(value):
            continue
        if column.kind is not Kind.NUMBER:
            labels.texts[column.name] = name_text(value)
            continue
        number = cell_number(column, value)
        factor = _factor(column, label, sheet, row, findings)
        if number is None:
            labels.report(
                findings,
                column.name,
                f"expected {column.expected}, found {found(value)}.",
                remedy(value, column),
            )
        elif factor is not None:
            labels.numbers[column.name] = number * factor
    return labels


def _factor(column: Column, label: str, sheet: str, row: int, findings: Findings) -> float | None:
    if column.dimension is None:
        return 1.0
    unit = header_unit(label, column.dimension, findings, sheet, row, 0)
    return None if unit is None else unit.factor
