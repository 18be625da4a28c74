"""Results into tables: where their columns stand, in which unit, and what is cleared."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from strutbook_addin.findings import Findings, Level
from strutbook_addin.sheets import Grid, Sheets, Written
from strutbook_addin.tables.headers import Layout, cell, is_blank
from strutbook_addin.tables.reading import FloatArray
from strutbook_addin.tables.schema import Role
from strutbook_addin.tables.units import Dimension, Unit

#: Significant digits that are written: rounding noise of the last places would only be looked at.
DIGITS = 12


@dataclass(frozen=True, eq=False)
class ResultColumn:
    """One column of results, in SI units or as texts."""

    name: str
    values: FloatArray | Sequence[Written]
    dimension: Dimension | None = None
    unit: Unit | None = None  #: of a header that the run makes, where the usual one does not suit


class TableWriter:
    """Writes result columns through a host and reports cells that it would not write."""

    def __init__(self, sheets: Sheets, default_units: dict[Dimension, Unit], findings: Findings) -> None:
        self._sheets = sheets
        self.default_units = default_units
        self._findings = findings

    def write(self, sheet: str, row: int, column: int, values: Sequence[Sequence[Written]]) -> None:
        """Write a rectangle; what the host refuses becomes a finding."""
        for refusal in self._sheets.write(sheet, row, column, values):
            self._findings.add(
                Level.LOOK,
                f"a result belongs here, but {refusal.reason}, so it was not written.",
                "Move what stands here if the result is wanted in this cell.",
                sheet=refusal.sheet,
                row=refusal.row,
                column=refusal.column,
            )

    def clear(self, sheet: str, row: int, column: int, rows: int) -> None:
        """Clear a piece of a column; a formula of the user's stays and may show what is no longer true."""
        if rows <= 0:
            return
        for refusal in self._sheets.clear(sheet, row, column, rows, 1):
            self._findings.add(
                Level.LOOK,
                f"this result cell could not be cleared: {refusal.reason}.",
                "Do not read it as a result of this run.",
                sheet=refusal.sheet,
                row=refusal.row,
                column=refusal.column,
            )

    def fill(self, layout: Layout, grid: Grid, columns: Iterable[ResultColumn]) -> None:
        """Fill result columns beside their inputs; a column that is missing is made after the last one."""
        next_column = last_used_column(layout, grid) + 1
        for result in columns:
            column = layout.columns.get(result.name)
            unit = layout.units.get(result.name)
            header: list[list[Written]] = []
            if column is None:
                column, next_column = next_column, next_column + 1
                unit = result.unit or (self.default_units[result.dimension] if result.dimension else None)
                header = [[header_text(result.name, unit)]]
            values = [[value] for value in cells(result.values, unit)]
            self.write(layout.sheet, layout.first_row - len(header), column, [*header, *values])
            self.clear(
                layout.sheet,
                layout.first_row + len(values),
                column,
                leftover_rows(layout, grid, column, len(values)),
            )

    def clear_results(self, layout: Layout, grid: Grid, keep: Collection[str] = ()) -> None:
        """Clear the result columns of a table but those to keep, so that no old number stays."""
        for column in layout.table.results:
            place = layout.columns.get(column.name)
            if place is not None and column.name not in keep:
                rows = layout.rows + leftover_rows(layout, grid, place, layout.rows)
                self.clear(layout.sheet, layout.first_row, place, rows)


def header_text(name: str, unit: Unit | None) -> str:
    """Header with its unit: ``Length [m]``."""
    return f"{name} [{unit.text}]" if unit else name


def cells(values: FloatArray | Sequence[Written], unit: Unit | None, digits: int = DIGITS) -> list[Written]:
    """Values as they are written: in the unit of the header, without noise, nothing for NaN."""
    if not isinstance(values, np.ndarray):
        return [value or None for value in values]
    in_unit = values / unit.factor if unit else values
    return [None if number != number else float(f"{number:.{digits}g}") + 0.0 for number in in_unit.tolist()]


def last_used_column(layout: Layout, grid: Grid) -> int:
    """Last column in which the rows of the table hold anything, the user's own columns included."""
    last = max(layout.headers, default=-1)
    for values in grid[layout.header_row : layout.end_row]:
        # Walking back from the end of each row stops at once where rows end at the table's edge.
        for column in range(len(values) - 1, last, -1):
            if not is_blank(values[column]):
                last = column
                break
    return last


def leftover_rows(layout: Layout, grid: Grid, column: int, rows: int) -> int:
    """Rows below the table that still hold results of a run over a longer table.

    They follow without a gap and hold results only; a note that the user typed further down stays.
    """
    results = [place for name, place in layout.columns.items() if layout.table.column(name).role is Role.RESULT]
    keys = [place for place in layout.headers if place not in results]
    row = start = layout.first_row + rows
    while (
        row < len(grid)
        and any(not is_blank(cell(grid, row, place)) for place in results)
        and all(is_blank(cell(grid, row, place)) for place in keys)
    ):
        row += 1
    return row - start if column in results else 0
