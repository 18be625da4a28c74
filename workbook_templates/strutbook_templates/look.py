"""Colours, fonts and cell styles of the templates."""

from __future__ import annotations

from openpyxl.styles import Alignment, Border, Font, PatternFill, Side
from openpyxl.styles.differential import DifferentialStyle

INK = "1F2A33"
QUIET = "6B747B"
TENSION = "0B7A75"
COMPRESSION = "7A2E5D"
NO_FORCE = "8A8F94"
UNSAFE = "F2B134"
_INPUT_HEADER, _INPUT_CELL = "2F4858", "FBF7EC"
_RESULT_HEADER, _RESULT_CELL = "D3DEDF", "EEF3F3"

#: Arial has metric-compatible replacements on every system, so columns keep their width.
_FONT = "Arial"
_HAIR = Side(style="hair", color="9AA5AB")
_GRID = Border(left=_HAIR, right=_HAIR, top=_HAIR, bottom=_HAIR)
_NO_BORDER = Border()

TITLE_FONT = Font(name=_FONT, size=14, bold=True, color=INK)
MEANING_FONT = Font(name=_FONT, size=10, color=INK)
CAUTION_FONT = Font(name=_FONT, size=8, italic=True, color=QUIET)
CELL_FONT = Font(name=_FONT, size=10, color=INK)
LINK_FONT = Font(name=_FONT, size=10, color=INK, underline="single")
NUMBERS_FONT = Font(name=_FONT, size=7, color=NO_FORCE)
INPUT_HEADER_FONT = Font(name=_FONT, size=10, bold=True, color="FFFFFF")
RESULT_HEADER_FONT = Font(name=_FONT, size=10, bold=True, italic=True, color=INK)

HEADER_ALIGNMENT = Alignment(horizontal="center", vertical="center", wrap_text=True)
UNIT_LINE_ALIGNMENT = Alignment(horizontal="left", vertical="bottom", wrap_text=True)
USE_ALIGNMENT = Alignment(horizontal="center", vertical="bottom", wrap_text=True)
TEXT_ALIGNMENT = Alignment(horizontal="left", vertical="top", wrap_text=True, indent=1)
NAME_ALIGNMENT = Alignment(horizontal="left", vertical="top", indent=1)
NUMBER_ALIGNMENT = Alignment(horizontal="right", vertical="top", indent=1)


def _solid(color: str) -> PatternFill:
    return PatternFill("solid", fgColor=color)


INPUT_HEADER_FILL, RESULT_HEADER_FILL = _solid(_INPUT_HEADER), _solid(_RESULT_HEADER)
INPUT_FILL, RESULT_FILL = _solid(_INPUT_CELL), _solid(_RESULT_CELL)
GRID = _GRID

#: Looks that follow the content of a cell (conditional formats).
IN_USE_INPUT = DifferentialStyle(fill=PatternFill(bgColor=_INPUT_CELL), border=_GRID)
IN_USE_RESULT = DifferentialStyle(fill=PatternFill(bgColor=_RESULT_CELL), border=_GRID)
MADE_HEADER = DifferentialStyle(
    font=Font(bold=True, italic=True, color=INK), fill=PatternFill(bgColor=_RESULT_HEADER), border=_GRID
)
CHOSEN_HEADER = DifferentialStyle(
    font=Font(bold=True, color="FFFFFF"), fill=PatternFill(bgColor=_INPUT_HEADER), border=_GRID
)
# Calc applies the first rule that holds and no other, so the sign brings the look of a result along.
POSITIVE_FORCE = DifferentialStyle(font=Font(color=TENSION), fill=PatternFill(bgColor=_RESULT_CELL), border=_GRID)
NEGATIVE_FORCE = DifferentialStyle(font=Font(color=COMPRESSION), fill=PatternFill(bgColor=_RESULT_CELL), border=_GRID)
NEEDS_CARE = DifferentialStyle(font=Font(bold=True, color=INK), fill=PatternFill(bgColor=UNSAFE))
UNSAFE_FILL = _solid(UNSAFE)
INPUT_TAB, RESULT_TAB = _INPUT_HEADER, "9DB4B8"
LABEL_ALIGNMENT = Alignment(horizontal="left", vertical="top", indent=1)
WRAPPED_ALIGNMENT = Alignment(horizontal="left", vertical="top", wrap_text=True, indent=1)
