"""Result sheets that are lists: a header row, and one row for each thing that the run has to say."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from strutbook_addin.sheets import Grid, Written
from strutbook_addin.tables.headers import find_header, is_blank
from strutbook_addin.tables.schema import Table, normal
from strutbook_addin.tables.units import Unit, UnitProblem, split_header, unit_of
from strutbook_addin.tables.writing import ResultColumn, TableWriter, cells, header_text

#: Significant digits of numbers in lists, which are there to be read.
DIGITS = 6


def fill_list(writer: TableWriter, table: Table, sheet: str, grid: Grid, columns: Sequence[ResultColumn]) -> None:
    """Write the columns of a list under their headers, in the units that stand there; what is below goes."""
    header_row, places = list_layout(table, grid, [result.name for result in columns])
    for result in columns:
        column = places[result.name]
        unit = _unit(result, grid, header_row, column, writer)
        values: list[list[Written]] = [[header_text(result.name, unit)]]
        if isinstance(result.values, np.ndarray):
            values += [[value] for value in cells(result.values, unit, DIGITS)]
        else:
            values += [[None if value == "" else value] for value in result.values]
        writer.write(sheet, header_row, column, values)
        below = header_row + len(values)
        writer.clear(sheet, below, column, len(grid) - below)


def list_layout(table: Table, grid: Grid, names: Sequence[str]) -> tuple[int, dict[str, int]]:
    """Header row of a list and the column of each name: where it stands already, or behind what is there."""
    header_row = _header_row(table, grid)
    places = _places(table, grid, header_row)
    spare = max([-1, *places.values(), *(len(row) - 1 for row in grid[header_row : header_row + 1])]) + 1
    for name in names:
        if name not in places:
            places[name], spare = spare, spare + 1
    return header_row, places


def clear_list(writer: TableWriter, table: Table, sheet: str, grid: Grid) -> None:
    """Clear what an earlier run listed; its headers stay."""
    header_row = _header_row(table, grid)
    for column in _places(table, grid, header_row).values():
        writer.clear(sheet, header_row + 1, column, len(grid) - header_row - 1)


def _header_row(table: Table, grid: Grid) -> int:
    found = find_header(table, grid)
    if found is not None:
        return found
    used = max((row for row, values in enumerate(grid) if not all(map(is_blank, values))), default=-1)
    return used + 2 if used >= 0 else 0


def _places(table: Table, grid: Grid, header_row: int) -> dict[str, int]:
    """Columns that stand there already, by the name that the schema gives them."""
    places: dict[str, int] = {}
    for column, header in enumerate(grid[header_row]) if header_row < len(grid) else ():
        known = table.by_normal_name.get(normal(split_header(str(header))[0])) if header is not None else None
        if known is not None:
            places.setdefault(known.name, column)
    return places


def _unit(result: ResultColumn, grid: Grid, header_row: int, column: int, writer: TableWriter) -> Unit | None:
    if result.dimension is None:
        return None
    if header_row < len(grid) and column < len(grid[header_row]):
        text = split_header(str(grid[header_row][column]))[1]
        if text is not None:
            try:
                return unit_of(text, result.dimension)
            except UnitProblem:
                # A unit that was spoilt by hand is replaced.
                pass
    return result.unit or writer.default_units[result.dimension]
