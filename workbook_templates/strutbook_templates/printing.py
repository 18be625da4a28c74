"""Print set-up: landscape, as wide as the page, headers on every page, caution at the foot."""

from __future__ import annotations

from openpyxl.worksheet.header_footer import HeaderFooterItem
from openpyxl.worksheet.properties import PageSetupProperties
from openpyxl.worksheet.worksheet import Worksheet

from strutbook_templates.contents import Contents
from strutbook_templates.sheet_frame import NOT_CHECKED_LINE

#: Width of columns together, in characters, that still prints in a size that can be read.
_READABLE = 260.0
_PAPER = {"A4": 9, "Letter": 1}  # numbers of the paper sizes in the file format


def set_up_printing(sheet: Worksheet, contents: Contents, *, rows_repeated: int) -> None:
    """Page set-up of one sheet; `rows_repeated` rows stand at the top of each page (0 for none)."""
    sheet.page_setup.orientation = "landscape"
    sheet.page_setup.paperSize = _PAPER[contents.system.paper]
    # A table too wide to be read on one page takes two, its first column on both.
    wide = sum(column.width for column in sheet.column_dimensions.values()) > _READABLE
    sheet.page_setup.fitToWidth = 2 if wide else 1
    if wide:
        sheet.print_title_cols = "A:A"
    sheet.page_setup.fitToHeight = 0
    sheet.sheet_properties.pageSetUpPr = PageSetupProperties(fitToPage=True)
    sheet.print_options.horizontalCentered = True
    margins = sheet.page_margins
    margins.left = margins.right = 0.5
    margins.top, margins.bottom = 0.75, 0.75
    margins.header = margins.footer = 0.35
    if rows_repeated:
        sheet.print_title_rows = f"1:{rows_repeated}"
    # A page head cannot refer to a cell, so the title is the one that the workbook began with.
    title = contents.title.replace("&", "&&") or "&F"
    _write(sheet.oddHeader, (title, 9), ("&A", 9))
    _write(sheet.oddFooter, (NOT_CHECKED_LINE, 7), ("Page &P of &N", 8))


def _write(line: HeaderFooterItem | None, left: tuple[str, int], right: tuple[str, int]) -> None:
    if line is None:
        return
    line.left.text, line.left.size = left
    line.right.text, line.right.size = right
