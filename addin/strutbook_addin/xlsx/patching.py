"""Cells spliced into a worksheet part: every byte that belongs to no changed cell stays.

Rows and cells that are missing are made in their order.
"""

from __future__ import annotations

import re
from bisect import bisect_left
from collections.abc import Iterator, Mapping

from strutbook_addin.sheets import Written, cell_name
from strutbook_addin.xlsx.cell_values import markup
from strutbook_addin.xlsx.markup import element_end, spliced, tag_at, text_markup, with_attribute
from strutbook_addin.xlsx.sheet_part import Cell, Row, SheetPart, area_of

#: A stored value of a formula; None removes it.
Stored = float | str | bool | None
_Change = tuple[int, int, bytes]


def patched(sheet: SheetPart, edits: Mapping[tuple[int, int], Written]) -> bytes:
    """The part with cells changed: `edits` holds values by row and column; None clears."""
    by_row: dict[int, dict[int, Written]] = {}
    for (row, column), value in edits.items():
        if (row, column) in sheet.cells or value is not None:
            by_row.setdefault(row, {})[column] = value
    columns_of = _columns_by_row(sheet, by_row)
    changes: list[_Change] = []
    new_rows: dict[int, bytes] = {}
    for row, values in by_row.items():
        if row in sheet.rows:
            changes += _row_changes(sheet, row, values, columns_of.get(row, []))
        else:
            cells = b"".join(_new_cells(sheet, row, values))
            new_rows[row] = f'<{sheet.prefix}row r="{row + 1}">'.encode() + cells + f"</{sheet.prefix}row>".encode()
    changes += _rows_inserted(sheet, new_rows)
    changes += _dimension_grown(sheet, by_row)
    return spliced(sheet.data, changes)


def stored_values_changed(sheet: SheetPart, values: Mapping[tuple[int, int], Stored]) -> bytes:
    """The part with the stored values of formulas replaced, and removed where a value is None.

    Nothing else of the cells changes: formulas, formats and their metadata stay.
    """
    changes: list[_Change] = []
    for place, value in values.items():
        changes.extend(_value_change(sheet, sheet.cells[place], value))
    return spliced(sheet.data, changes)


def _value_change(sheet: SheetPart, cell: Cell, value: Stored) -> Iterator[_Change]:
    start, close = cell.stored
    if start < 0:
        return
    kind, text = None, ""
    if isinstance(value, bool):
        kind, text = "b", str(int(value))
    elif isinstance(value, str):
        kind, text = "str", text_markup(value)
    elif value is not None:
        text = repr(value)
    opening = tag_at(sheet.data, cell.start)
    yield (cell.start, cell.start + len(opening), with_attribute(opening, "t", kind))
    new = "" if value is None else f"<{sheet.prefix}v>{text}</{sheet.prefix}v>"
    yield (start, element_end(sheet.data, start, close), new.encode())


def _columns_by_row(sheet: SheetPart, wanted: Mapping[int, object]) -> dict[int, list[int]]:
    """Columns of the cells that stand in some rows; cells are scanned in order, so the lists are sorted."""
    columns: dict[int, list[int]] = {}
    for row, column in sheet.cells:
        if row in wanted:
            columns.setdefault(row, []).append(column)
    return columns


def _row_changes(sheet: SheetPart, row: int, values: Mapping[int, Written], columns: list[int]) -> Iterator[_Change]:
    element = sheet.rows[row]
    opening = tag_at(sheet.data, element.start)
    empty = opening.endswith(b"/>")
    end_of_cells = element.start + len(opening) if empty else element.close
    inserted: dict[int, list[bytes]] = {}
    for column in sorted(values):
        cell = sheet.cells.get((row, column))
        if cell is not None:
            yield (
                cell.start,
                element_end(sheet.data, cell.start, cell.close),
                markup(row, column, values[column], cell.style, sheet.prefix),
            )
            continue
        place = bisect_left(columns, column)
        before = sheet.cells[row, columns[place]].start if place < len(columns) else end_of_cells
        inserted.setdefault(before, []).append(_new_cell(sheet, row, column, values[column]))
    if inserted:
        yield from _opening_changes(sheet, element, opening, min(values), max(values), inserted, empty=empty)
    if not empty:
        yield from ((before, before, b"".join(cells)) for before, cells in inserted.items())


def _opening_changes(
    sheet: SheetPart,
    element: Row,
    opening: bytes,
    first: int,
    last: int,
    inserted: Mapping[int, list[bytes]],
    *,
    empty: bool,
) -> Iterator[_Change]:
    """The start tag of a row that gets new cells: its spans grow, and an empty element opens."""
    new = opening
    ends = re.split("[: ]", element.spans.strip())
    # Spans only tell readers how many cells to expect; those that make no sense stay as they are.
    if all(end.isdecimal() for end in ends):
        columns = [first + 1, last + 1, *map(int, ends)]
        new = with_attribute(new, "spans", f"{min(columns)}:{max(columns)}")
    if empty:
        cells = b"".join(cell for group in inserted.values() for cell in group)
        new = new[:-2].rstrip() + b">" + cells + f"</{sheet.prefix}row>".encode()
    if new != opening:
        yield (element.start, element.start + len(opening), new)


def _rows_inserted(sheet: SheetPart, new_rows: Mapping[int, bytes]) -> Iterator[_Change]:
    if not new_rows:
        return
    opening = tag_at(sheet.data, sheet.start)
    if opening.endswith(b"/>"):
        rows = b"".join(new_rows[row] for row in sorted(new_rows))
        close = f"</{sheet.prefix}sheetData>".encode()
        yield (sheet.start, sheet.start + len(opening), opening[:-2].rstrip() + b">" + rows + close)
        return
    present = list(sheet.rows)
    inserted: dict[int, list[bytes]] = {}
    for row in sorted(new_rows):
        place = bisect_left(present, row)
        before = sheet.rows[present[place]].start if place < len(present) else sheet.close
        inserted.setdefault(before, []).append(new_rows[row])
    yield from ((before, before, b"".join(rows)) for before, rows in inserted.items())


def _dimension_grown(sheet: SheetPart, by_row: Mapping[int, Mapping[int, Written]]) -> Iterator[_Change]:
    if sheet.dimension is None or not by_row:
        return
    start, reference = sheet.dimension
    try:
        area = area_of(reference)
    except ValueError:
        # It is only a hint to readers, so what was wrong before stays as it was.
        return
    columns = [column for values in by_row.values() for column in (min(values), max(values))]
    first = cell_name(min(area.first_row, *by_row), min(area.first_column, *columns))
    last = cell_name(max(area.last_row, *by_row), max(area.last_column, *columns))
    grown = f"{first}:{last}"
    if area_of(grown) != area:
        tag = tag_at(sheet.data, start)
        yield (start, start + len(tag), with_attribute(tag, "ref", grown))


def _new_cells(sheet: SheetPart, row: int, values: Mapping[int, Written]) -> Iterator[bytes]:
    return (_new_cell(sheet, row, column, values[column]) for column in sorted(values))


def _new_cell(sheet: SheetPart, row: int, column: int, value: Written) -> bytes:
    """A cell that was not there takes the format of its row, or else of its column."""
    element = sheet.rows.get(row)
    style = element.style if element is not None else ""
    if not style:
        styles = (style for first, last, style in sheet.column_styles if first <= column <= last)
        style = str(next(styles, 0))
    return markup(row, column, value, "" if style == "0" else style, sheet.prefix)
