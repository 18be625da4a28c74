"""The sheet `Job`: what the calculation is, what the last run says, and a guide to the other sheets."""

from __future__ import annotations

from collections.abc import Sequence

from openpyxl.worksheet.worksheet import Worksheet

from strutbook_addin.tables.schema import Kind, Role, Table
from strutbook_templates import look
from strutbook_templates.contents import Contents
from strutbook_templates.entry_rules import choose_on_job
from strutbook_templates.sheet_frame import FIRST_ROW, NOT_CHECKED_LINE, add_note
from strutbook_templates.unit_systems import number_format

_GUIDE_COLUMN = 4
#: Numbers without a unit are counts, or residuals far below one.
_COUNT_OR_RESIDUAL = "[>=1]0;[>0]0.0E+00;0"
#: Label whose value is a sentence of two lines.
_IN_A_SENTENCE = "Outcome"


def fill_job_sheet(sheet: Worksheet, table: Table, contents: Contents, guide: Sequence[tuple[str, str]]) -> None:
    """Labels in column A with values in column B; to the right the guide: sheets and what they hold."""
    cell = sheet.cell(4, 1, NOT_CHECKED_LINE)
    cell.font = look.CAUTION_FONT
    for row, column in enumerate(table.columns, start=FIRST_ROW):
        label, value = sheet.cell(row, 1, contents.system.header(column)), sheet.cell(row, 2)
        mine = column.role is Role.INPUT
        label.fill = look.INPUT_HEADER_FILL if mine else look.RESULT_HEADER_FILL
        label.font = look.INPUT_HEADER_FONT if mine else look.RESULT_HEADER_FONT
        value.fill = look.INPUT_FILL if mine else look.RESULT_FILL
        label.border = value.border = look.GRID
        label.alignment = look.LABEL_ALIGNMENT
        value.font, value.alignment = look.CELL_FONT, look.TEXT_ALIGNMENT
        if column.kind is Kind.NUMBER:
            unit = contents.system.unit(column)
            value.number_format = number_format(unit) if unit else _COUNT_OR_RESIDUAL
        if column.name == _IN_A_SENTENCE:
            sheet.row_dimensions[row].height = 27
        if mine:
            value.value = contents.job.get(column.name)
            choose_on_job(sheet, column.name, row)
        add_note(label, column, contents.system)
    sheet.column_dimensions["A"].width = 29
    sheet.column_dimensions["B"].width = 64
    sheet.column_dimensions["C"].width = 3
    _add_guide(sheet, guide)
    sheet.freeze_panes = "A4"


def _add_guide(sheet: Worksheet, guide: Sequence[tuple[str, str]]) -> None:
    """Links to the sheets with what they hold, and what the colours mean."""
    sheet.column_dimensions["D"].width = 16
    sheet.column_dimensions["E"].width = 74
    row = FIRST_ROW
    for name, meaning in guide:
        link = sheet.cell(row, _GUIDE_COLUMN, name)
        link.hyperlink = f"#'{name}'!A1"
        link.font, link.alignment = look.LINK_FONT, look.LABEL_ALIGNMENT
        line = sheet.cell(row, _GUIDE_COLUMN + 1, meaning)
        line.font, line.alignment = look.MEANING_FONT, look.LABEL_ALIGNMENT
        row += 1
    for text, fill, explanation in _LEGEND:
        row += 1
        sample = sheet.cell(row, _GUIDE_COLUMN, text)
        sample.fill, sample.border, sample.alignment = fill, look.GRID, look.LABEL_ALIGNMENT
        sample.font = look.INPUT_HEADER_FONT if fill is look.INPUT_HEADER_FILL else look.CELL_FONT
        line = sheet.cell(row, _GUIDE_COLUMN + 1, explanation)
        line.font, line.alignment = look.MEANING_FONT, look.LABEL_ALIGNMENT


_LEGEND = (
    (
        "You fill in",
        look.INPUT_HEADER_FILL,
        "Dark headers and pale cells are inputs. Units stand in the headers.",
    ),
    ("A run fills in", look.RESULT_HEADER_FILL, "Light headers in italics are results; tension is positive."),
    ("Needs care", look.UNSAFE_FILL, "Amber marks what stopped a run or does not pass."),
)
