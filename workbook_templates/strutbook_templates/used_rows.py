"""Looks that follow what stands in the cells: rows in use, sign of a force, levels of findings."""

from __future__ import annotations

from openpyxl.formatting.rule import Rule
from openpyxl.styles.differential import DifferentialStyle
from openpyxl.utils import get_column_letter
from openpyxl.worksheet.worksheet import Worksheet

from strutbook_addin.tables.schema import Column, Role, Table
from strutbook_addin.tables.units import Dimension
from strutbook_templates import look
from strutbook_templates.sheet_frame import FIRST_ROW, HEADER_ROW, LAST_ROW


def follow_use(sheet: Worksheet, table: Table, columns: tuple[Column, ...], open_columns: int) -> None:
    """Conditional formats of a table: forces by sign first, then rows beyond those drawn as a table."""
    first_open = len(columns) + 1
    last_open = len(columns) + max(open_columns, 1)
    if table.sheet == "Findings":
        _add(sheet, "A", "A", FIRST_ROW, f'OR($A{FIRST_ROW}="stop",$A{FIRST_ROW}="fail")', look.NEEDS_CARE)
    for place, column in enumerate(columns, start=1):
        if column.role is Role.RESULT and column.name in {"Tension", "Compression"}:
            _by_sign(sheet, place, place)
        letter = get_column_letter(place)
        cell = f"${letter}{FIRST_ROW}"
        if column.name == "Utilisation":
            _add(sheet, letter, letter, FIRST_ROW, f"AND(ISNUMBER({cell}),{cell}>1)", look.NEEDS_CARE)
        if column.name == "Verdict":
            _add(sheet, letter, letter, FIRST_ROW, f'OR(LEFT({cell},5)="fails",LEFT({cell},3)="not")', look.NEEDS_CARE)
    opened = table.open_columns
    if opened is not None:
        made = opened.role is Role.RESULT
        if opened.dimension is Dimension.FORCE and table.sheet == "Forces":
            _by_sign(sheet, first_open, last_open)
        left, right = get_column_letter(first_open), get_column_letter(last_open)
        header = f"{left}${HEADER_ROW}"
        _add(
            sheet,
            left,
            right,
            HEADER_ROW,
            f'{header}<>""',
            look.MADE_HEADER if made else look.CHOSEN_HEADER,
            last=HEADER_ROW,
        )
        _add(
            sheet,
            left,
            right,
            FIRST_ROW,
            f'AND({header}<>"",$A{FIRST_ROW}<>"")',
            look.IN_USE_RESULT if made else look.IN_USE_INPUT,
        )
    for place, column in enumerate(columns, start=1):
        letter = get_column_letter(place)
        style = look.IN_USE_INPUT if column.role is Role.INPUT else look.IN_USE_RESULT
        _add(sheet, letter, letter, FIRST_ROW, f"{_row_in_use(columns)}", style)


def _row_in_use(columns: tuple[Column, ...]) -> str:
    """A row is in use when a name stands in one of its first two columns."""
    named = [f'${get_column_letter(place)}{FIRST_ROW}<>""' for place in (1, 2) if place <= len(columns)]
    return f"OR({','.join(named)})"


def _by_sign(sheet: Worksheet, first: int, last: int) -> None:
    left, right = get_column_letter(first), get_column_letter(last)
    cell = f"{left}{FIRST_ROW}"
    _add(sheet, left, right, FIRST_ROW, f"AND(ISNUMBER({cell}),{cell}>0)", look.POSITIVE_FORCE)
    _add(sheet, left, right, FIRST_ROW, f"AND(ISNUMBER({cell}),{cell}<0)", look.NEGATIVE_FORCE)


def _add(
    sheet: Worksheet,
    left: str,
    right: str,
    row: int,
    formula: str,
    style: DifferentialStyle,
    *,
    last: int = LAST_ROW,
) -> None:
    sheet.conditional_formatting.add(
        f"{left}{row}:{right}{last}", Rule(type="expression", dxf=style, formula=[formula])
    )
