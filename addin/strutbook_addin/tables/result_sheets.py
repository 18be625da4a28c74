"""Result sheets: one row for each member, support or joint axis, one column for each combination."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from strutbook_addin.sheets import Grid, Written
from strutbook_addin.tables.headers import Layout, cell, find_header, is_blank
from strutbook_addin.tables.reading import FloatArray
from strutbook_addin.tables.schema import Table, normal
from strutbook_addin.tables.units import Dimension, Unit, UnitProblem, split_header, unit_of
from strutbook_addin.tables.writing import TableWriter, cells, header_text, last_used_column

#: Stand above the header of each combination's column, and tell it from columns of the user's own.
USES = ("strength", "service", "strength and service")


@dataclass(frozen=True, eq=False)
class CombinationColumn:
    """The column of one combination."""

    combination: str
    use: str  #: one of `USES`
    values: FloatArray  #: one for each row, SI


@dataclass(frozen=True, eq=False)
class ResultSheet:
    """What stands on one result sheet."""

    title: str  #: what the numbers are; it stands in the line above the headers
    dimension: Dimension
    keys: Sequence[Sequence[str]]  #: cells under the headers that the schema names
    columns: Sequence[CombinationColumn]


def fill_sheet(writer: TableWriter, layout: Layout, grid: Grid, sheet: ResultSheet) -> None:
    """Fill a result sheet; columns of combinations that are no more go."""
    former = _former_columns(layout, grid)
    next_column = last_used_column(layout, grid) + 1
    top = layout.header_row - 1
    default = writer.default_units[sheet.dimension]
    units = {unit.text for _, unit in former.values() if unit} or {default.text}
    for place, schema in enumerate(layout.table.columns):
        line = f"{sheet.title}, in {' and '.join(sorted(units))}" if place == 0 else None
        values: list[list[Written]] = [] if line is None else [[line]]
        values.append([schema.name])
        values.extend([key[place]] for key in sheet.keys)
        first = top + (line is None)
        column = layout.columns[schema.name]
        writer.write(layout.sheet, first, column, values)
        writer.clear(layout.sheet, first + len(values), column, len(grid) - first - len(values))
    for result in sheet.columns:
        column, unit = former.pop(result.combination, (next_column, None))
        next_column += column == next_column
        unit = unit or default
        values = [[result.use], [header_text(result.combination, unit)]]
        values += [[value] for value in cells(result.values, unit)]
        writer.write(layout.sheet, top, column, values)
        writer.clear(layout.sheet, top + len(values), column, len(grid) - top - len(values))
    for column, _ in former.values():
        writer.clear(layout.sheet, top, column, len(grid) - top)


def clear_sheet(writer: TableWriter, layout: Layout, grid: Grid) -> None:
    """Clear what earlier runs wrote on a result sheet."""
    for column in layout.columns.values():
        writer.clear(layout.sheet, layout.first_row, column, len(grid) - layout.first_row)
    for column, _ in _former_columns(layout, grid).values():
        writer.clear(layout.sheet, layout.header_row - 1, column, len(grid) - layout.header_row + 1)


def result_layout(table: Table, sheet: str, grid: Grid) -> Layout:
    """Where a result sheet's table stands; a sheet without its headers gets them below what is there."""
    header_row = find_header(table, grid)
    # Headers in the first row leave no room for the line above them; a table of our own goes below.
    if not header_row:
        used = max((row for row, values in enumerate(grid) if not all(map(is_blank, values))), default=-1)
        header_row = used + 2
        headers = {column: schema.name for column, schema in enumerate(table.columns)}
    else:
        headers = {column: str(value).strip() for column, value in enumerate(grid[header_row]) if not is_blank(value)}
    places: dict[str, int] = {}
    for column, header in headers.items():
        places.setdefault(normal(header), column)
    spare = max(headers, default=-1) + 1
    columns: dict[str, int] = {}
    for key, schema in table.by_normal_name.items():
        columns[schema.name] = places.get(key, spare)
        spare += key not in places
    open_columns = {header: column for column, header in headers.items() if column not in columns.values()}
    return Layout(table, sheet, header_row, columns, headers, {}, open_columns, header_row + 1, len(grid))


def _former_columns(layout: Layout, grid: Grid) -> dict[str, tuple[int, Unit | None]]:
    """Columns that an earlier run made, by the name of their combination."""
    open_columns = layout.table.open_columns
    dimension = open_columns.dimension if open_columns else None
    former: dict[str, tuple[int, Unit | None]] = {}
    for header, column in layout.open_columns.items():
        name, text = split_header(header)
        if dimension is None or text is None or cell(grid, layout.header_row - 1, column) not in USES:
            continue
        try:
            unit = unit_of(text, dimension)
        except UnitProblem:
            # A unit that was spoilt by hand is replaced; the column is still ours.
            unit = None
        former.setdefault(name, (column, unit))
    return former
