"""Workbooks from the schema: one sheet a table, its headers, notes, drop-downs and print set-up.

This module and those it imports need openpyxl; import it only where a workbook is built.
"""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from openpyxl import Workbook
from openpyxl.cell import Cell
from openpyxl.styles import Alignment
from openpyxl.worksheet.worksheet import Worksheet

from strutbook_addin import picture
from strutbook_addin.tables.schema import TEMPLATE_TABLES, Column, Kind, OpenColumns, Role, Table
from strutbook_templates import look
from strutbook_templates.contents import Contents, Row
from strutbook_templates.entry_rules import add_entry_rules, choose_cases
from strutbook_templates.job_sheet import fill_job_sheet
from strutbook_templates.picture_sheet import PICTURE_MEANING, fill_picture_sheet
from strutbook_templates.printing import set_up_printing
from strutbook_templates.saving import save_workbook
from strutbook_templates.sheet_frame import (
    FIRST_ROW,
    HEADER_ROW,
    add_note,
    cell_at,
    columns_of,
    set_heading,
)
from strutbook_templates.unit_systems import UnitSystem, number_format
from strutbook_templates.used_rows import follow_use

#: A table that is empty in a template still shows this many rows.
_ROWS_SHOWN = 25
#: Rows that stay free below what a template fills in.
_ROWS_TO_SPARE = 5
#: Columns that hold whole sentences, and widths that show most of them in two lines.
_SENTENCES = {"Where": 20.0, "What": 88.0, "What to do": 60.0}
#: Other columns whose texts are longer than their kind usually is.
_LONG = {"Governed by": 36.0, "Verdict": 58.0, "Designation": 20.0}
#: Number formats of ratios.
_RATIOS = {"Utilisation": "0.00", "Slenderness": "0", "Shear lag": "0.00", "K in": "0.00", "K out": "0.00"}
#: Calc does not make rows higher for wrapped text when it opens a file, so these rows are ready for it.
_FINDINGS_READY, _TWO_LINES = 40, 27
#: Columns that are ready for results of combinations, or factors of cases.
_OPEN_COLUMNS = 12


def build_workbook(contents: Contents) -> Workbook:
    """Workbook with a sheet for every table of the schema, and the sheet `Picture`."""
    workbook = Workbook()
    workbook.remove(workbook.worksheets[0])
    # Widths of columns are counted in digits of this font.
    workbook._named_styles["Normal"].font = look.CELL_FONT  # type: ignore[attr-defined] # the stubs lack it
    for table in TEMPLATE_TABLES:
        if table.sheet == "Findings":
            fill_picture_sheet(workbook, contents)
        sheet = workbook.create_sheet(table.sheet)
        set_heading(sheet, table.sheet, table.meaning)
        sheet.sheet_properties.tabColor = look.INPUT_TAB if table.inputs else look.RESULT_TAB
        if table.labels:
            fill_job_sheet(sheet, table, contents, _guide(table))
        else:
            _fill_table_sheet(sheet, table, contents)
        set_up_printing(sheet, contents, rows_repeated=0 if table.labels else HEADER_ROW)
    return workbook


def _guide(first: Table) -> list[tuple[str, str]]:
    """All sheets but the first, with what they hold, in their order."""
    guide = [(table.sheet, table.meaning) for table in TEMPLATE_TABLES if table is not first]
    guide.insert(len(guide) - 1, (picture.SHEET, PICTURE_MEANING))
    return guide


def write_workbook(contents: Contents, path: Path) -> None:
    """Build the workbook and write it to `path`."""
    save_workbook(build_workbook(contents), path)


def _fill_table_sheet(sheet: Worksheet, table: Table, contents: Contents) -> None:
    columns = columns_of(table, contents.dimension)
    rows = contents.rows.get(table.sheet, ())
    # Result sheets take their look where a run fills them, so that they print what is there and no more.
    shown = max(_ROWS_SHOWN, len(rows) + _ROWS_TO_SPARE) if table.inputs else 0
    for place, column in enumerate(columns, start=1):
        header = cell_at(sheet, HEADER_ROW, place)
        header.value = contents.system.header(column)
        _dress_header(header, column.role)
        add_note(header, column, contents.system)
        _dress_column(sheet, header.column_letter, column, contents.system.unit(column), contents.system.header(column))
        for row in range(FIRST_ROW, FIRST_ROW + shown):
            _dress_cell(cell_at(sheet, row, place), column, contents.system.unit(column))
    for offset, values in enumerate(rows):
        _write_row(sheet, FIRST_ROW + offset, [column.name for column in columns], 1, values)
    if table.open_columns is not None:
        _add_open_columns(sheet, table.open_columns, len(columns) + 1, contents)
        by_user = table.open_columns.role is Role.INPUT
        for offset, values in enumerate(rows if by_user else ()):
            _write_row(sheet, FIRST_ROW + offset, contents.cases, len(columns) + 1, values)
    add_entry_rules(sheet, columns, contents.dimension)
    follow_use(sheet, table, columns, _OPEN_COLUMNS)
    _say_who_fills_in(sheet, table, contents.system)
    sheet.row_dimensions[HEADER_ROW].height = 30
    if any(column.name in _SENTENCES for column in columns):
        for row in range(FIRST_ROW, FIRST_ROW + _FINDINGS_READY):
            sheet.row_dimensions[row].height = _TWO_LINES
    sheet.freeze_panes = cell_at(sheet, FIRST_ROW, 1 + _frozen_columns(columns)).coordinate


def _dress_header(cell: Cell, role: Role) -> None:
    cell.fill = look.INPUT_HEADER_FILL if role is Role.INPUT else look.RESULT_HEADER_FILL
    cell.font = look.INPUT_HEADER_FONT if role is Role.INPUT else look.RESULT_HEADER_FONT
    cell.alignment = look.HEADER_ALIGNMENT
    cell.border = look.GRID


def _dress_column(sheet: Worksheet, letter: str, column: Column, unit: str, title: str) -> None:
    """Width of a column, and the look of its cells below those that the template prepares."""
    below = sheet.column_dimensions[letter]
    below.width = _width(column, title)
    below.font = look.CELL_FONT
    below.alignment = _alignment(column)
    if column.kind is Kind.NUMBER:
        below.number_format = _RATIOS.get(column.name) or number_format(unit)


def _dress_cell(cell: Cell, column: Column, unit: str) -> None:
    cell.font = look.CELL_FONT
    cell.border = look.GRID
    cell.fill = look.INPUT_FILL if column.role is Role.INPUT else look.RESULT_FILL
    cell.alignment = _alignment(column)
    if column.kind is Kind.NUMBER:
        cell.number_format = _RATIOS.get(column.name) or number_format(unit)


def _alignment(column: Column) -> Alignment:
    if column.kind is Kind.NUMBER:
        return look.NUMBER_ALIGNMENT
    return look.WRAPPED_ALIGNMENT if column.name in _SENTENCES else look.NAME_ALIGNMENT


def _write_row(sheet: Worksheet, row: int, names: Sequence[str], first: int, values: Row) -> None:
    for place, name in enumerate(names, start=first):
        value = values.get(name)
        if value is not None:
            sheet.cell(row, place).value = value


def _add_open_columns(sheet: Worksheet, opened: OpenColumns, first: int, contents: Contents) -> None:
    """Columns whose headers are cases that the user names, or combinations that the run names."""
    by_user = opened.role is Role.INPUT
    unit = contents.system.unit_of_results(opened.dimension) if opened.dimension else ""
    column = Column("", Kind.NUMBER, opened.meaning, opened.role, opened.dimension)
    for place in range(first, first + _OPEN_COLUMNS):
        header, use = cell_at(sheet, HEADER_ROW, place), cell_at(sheet, HEADER_ROW - 1, place)
        header.font, header.alignment = look.CELL_FONT, look.HEADER_ALIGNMENT
        use.font, use.alignment = look.CAUTION_FONT, look.USE_ALIGNMENT
        _dress_column(sheet, header.column_letter, column, unit, "")
    if by_user:
        for offset, case in enumerate(contents.cases):
            sheet.cell(HEADER_ROW, first + offset).value = case
        choose_cases(sheet, first, _OPEN_COLUMNS)
    how = "One column a case: its name stands here." if by_user else "A run makes one column a combination."
    add_note(cell_at(sheet, HEADER_ROW, first), column, contents.system, how)


def _say_who_fills_in(sheet: Worksheet, table: Table, system: UnitSystem) -> None:
    """Line above the headers: which columns are whose, or the unit of all results."""
    opened = table.open_columns
    if opened is not None and opened.dimension is not None:
        text = f"Values in {system.unit_of_results(opened.dimension)}; a run fills this sheet."
    elif not table.inputs:
        text = "A run fills this sheet."
    elif table.results:
        text = "Dark headers: you fill in. Light headers in italics: a run fills in."
    else:
        text = "You fill in this sheet."
    cell = sheet.cell(HEADER_ROW - 1, 1, text)
    cell.font = look.CAUTION_FONT
    if opened is not None and opened.role is Role.RESULT:
        # A run writes the unit here and the use of each combination to its right, above the headers.
        cell.alignment = look.UNIT_LINE_ALIGNMENT
        sheet.column_dimensions["A"].width = 24
        sheet.row_dimensions[HEADER_ROW - 1].height = 36


def _frozen_columns(columns: tuple[Column, ...]) -> int:
    """Names on the left that stay in sight: up to the key, else all that lead the row."""
    if columns[0].key:
        return 1
    leading = 0
    for column in columns:
        if column.kind is not Kind.NAME:
            break
        leading += 1
    return leading


def _width(column: Column, title: str) -> float:
    """Width that shows the header in two lines and what usually stands below it."""
    if column.name in _SENTENCES:
        return _SENTENCES[column.name]
    if column.name in _LONG:
        return _LONG[column.name]
    # Programs break lines at a minus sign too, which would tear 1e-6/K apart.
    words = [title] if "-" in title else title.split()
    longest_word = max((len(word) for word in words), default=0)
    usual = {Kind.NUMBER: 11, Kind.CHOICE: 13, Kind.NAME: 12, Kind.TEXT: 17}[column.kind]
    return max(usual, longest_word + 5)
