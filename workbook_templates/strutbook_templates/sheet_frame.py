"""What all sheets share: heading, caution, place of the header row, notes on headers."""

from __future__ import annotations

from openpyxl.cell import Cell, MergedCell
from openpyxl.comments import Comment
from openpyxl.worksheet.worksheet import Worksheet

from strutbook_addin.reporting import CAUTION, NEVER
from strutbook_addin.tables.schema import Column, Kind, Role, Table
from strutbook_templates import look
from strutbook_templates.unit_systems import UnitSystem

#: Rows of the sheets, counted from one.
HEADER_ROW = 5
FIRST_ROW = HEADER_ROW + 1
#: Drop-downs, bounds and looks reach down to here.
LAST_ROW = FIRST_ROW + 1999

#: Stands at the foot of every printed page, under the caution that stands on every sheet.
NOT_CHECKED_LINE = f"Not checked: {NEVER}. Members and deflection: as the sheet Findings says."


def cell_at(sheet: Worksheet, row: int, column: int) -> Cell:
    """Cell in a row and a column counted from one."""
    cell = sheet.cell(row, column)
    if isinstance(cell, MergedCell):
        raise TypeError(f"{sheet.title}!{cell.coordinate} is merged, and templates have no merged cells.")
    return cell


def set_heading(sheet: Worksheet, title: str, meaning: str) -> None:
    """Title, meaning and caution in the first three rows."""
    lines = (title, look.TITLE_FONT), (meaning, look.MEANING_FONT), (CAUTION, look.CAUTION_FONT)
    for row, (text, font) in enumerate(lines, start=1):
        cell = sheet.cell(row, 1, text)
        cell.font = font
    sheet.row_dimensions[1].height = 21
    sheet.sheet_view.showGridLines = False
    sheet.sheet_view.zoomScale = 100
    sheet.sheet_format.defaultRowHeight = 15


def columns_of(table: Table, dimension: int) -> tuple[Column, ...]:
    """Columns of a table, without those about z for a plane truss."""
    return tuple(column for column in table.columns if dimension == 3 or not is_about_z(column))


def is_about_z(column: Column) -> bool:
    """True for a column that only a space truss needs (`z`, `Fz`, `Displacement z`).

    >>> from strutbook_addin.tables.schema import LOADS, SUPPORTS
    >>> is_about_z(LOADS.column("Fz")), is_about_z(SUPPORTS.column("Stiffness"))
    (True, False)
    """
    return any(len(word) <= 2 and word.endswith("z") for word in column.name.split())


def add_note(cell: Cell, column: Column, system: UnitSystem, first: str = "") -> None:
    """Note on a header: what the column means, its unit and what it takes, as the schema says it."""
    parts = [first, column.meaning]
    if column.dimension is not None:
        unit = system.unit(column) if column.name else system.unit_of_results(column.dimension)
        parts.append(f"Unit: {unit}; write another unit into the header to change it.")
    if column.role is Role.RESULT:
        parts.append("A run fills this in.")
    else:
        needed = "Needed" if column.required else "May be blank"
        parts.append(
            f"{needed}: {column.expected}." if column.kind is not Kind.TEXT or column.required else f"{needed}."
        )
    text = "\n".join(part for part in parts if part)
    note = Comment(text, "strutbook")
    note.width, note.height = 300, 26 + 17 * sum(1 + len(part) // 46 for part in parts if part)
    cell.comment = note
