"""The sheet `Picture`: two native scatter charts over the cells that a run fills with numbers."""

from __future__ import annotations

from typing import Literal

from openpyxl import Workbook
from openpyxl.chart import ScatterChart
from openpyxl.chart.layout import Layout, ManualLayout
from openpyxl.chart.legend import Legend
from openpyxl.chart.marker import Marker
from openpyxl.chart.reference import Reference
from openpyxl.chart.series import Series, SeriesLabel
from openpyxl.chart.series_factory import SeriesFactory
from openpyxl.chart.shapes import GraphicalProperties
from openpyxl.chart.text import RichText, Text
from openpyxl.chart.title import Title
from openpyxl.drawing.line import LineProperties
from openpyxl.drawing.text import (
    CharacterProperties,
    Font,
    Paragraph,
    ParagraphProperties,
    RegularTextRun,
    RichTextProperties,
)
from openpyxl.utils import get_column_letter
from openpyxl.worksheet.worksheet import Worksheet

from strutbook_addin import picture
from strutbook_addin.picture import Line
from strutbook_templates import look
from strutbook_templates.contents import Contents
from strutbook_templates.printing import set_up_printing
from strutbook_templates.sheet_frame import set_heading

#: What the sheet holds, in one line.
PICTURE_MEANING = "The truss by the sign of its forces, and its deflected shape, as the last run left them."

#: Size of the charts and of their plot areas (cm); the plot areas have the ratio of sides of the frame.
_WIDTH, _HEIGHT = 27, 15.0
_PLOT_WIDTH = 25.5
_PLOT_HEIGHT = _PLOT_WIDTH * picture.FRAME[1] / picture.FRAME[0]
_PLOT_LEFT, _PLOT_TOP = (_WIDTH - _PLOT_WIDTH) / 2, 1.1
#: Column at the right edge of the charts, the last one that is printed.
_LAST_PRINTED = "L"
#: Width of each column up to there, in characters; together they are as wide as the charts.
_COLUMN_WIDTH = 11.6

_POINT = 12700  # English metric units, in which the file format counts line widths


def fill_picture_sheet(workbook: Workbook, contents: Contents) -> Worksheet:
    """Add the sheet with its charts; a truss that is there already is drawn as not solved."""
    sheet: Worksheet = workbook.create_sheet(picture.SHEET)
    set_heading(sheet, picture.SHEET, PICTURE_MEANING)
    sheet.sheet_properties.tabColor = look.RESULT_TAB
    for row, column in (picture.ROOM_CELL, picture.FORCES_CELL, picture.DEFLECTED_CELL):
        sheet.cell(row + 1, column + 1).font = look.MEANING_FONT
    for line in Line:
        for offset, axis in enumerate("xy"):
            header = picture.header(line, axis)
            cell = sheet.cell(picture.DATA_HEADER_ROW + 1, line.column + 1 + offset, header)
            cell.font = look.NUMBERS_FONT
    cell = sheet.cell(
        picture.DATA_HEADER_ROW, picture.DATA_FIRST_COLUMN + 1, "Numbers of the charts; a run writes them."
    )
    cell.font = look.NUMBERS_FONT
    for column in range(1, 13):
        sheet.column_dimensions[get_column_letter(column)].width = _COLUMN_WIDTH
    sheet.add_chart(_forces_chart(sheet), _cell(picture.FORCES_CHART))
    sheet.add_chart(_deflected_chart(sheet), _cell(picture.DEFLECTED_CHART))
    _draw_unsolved(sheet, contents)
    set_up_printing(sheet, contents, rows_repeated=0)
    # Two wide charts, one above the other, fill an upright page.
    sheet.page_setup.orientation = "portrait"
    sheet.page_setup.fitToHeight = 1
    sheet.print_area = f"A1:{_LAST_PRINTED}{picture.DEFLECTED_CHART[0] + 30}"
    return sheet


def _draw_unsolved(sheet: Worksheet, contents: Contents) -> None:
    if contents.truss is None:
        return
    joints, directions = contents.truss.held
    blocks = picture.picture_values(
        contents.truss.coordinates,
        contents.truss.ends,
        support_joints=joints,
        support_directions=directions,
    )
    for block in blocks:
        for row, values in enumerate(block.values, start=block.row + 1):
            for column, value in enumerate(values, start=block.column + 1):
                if isinstance(value, (str, float)):
                    sheet.cell(row, column, value)


def _forces_chart(sheet: Worksheet) -> ScatterChart:
    chart = _chart("Axial forces by sign")
    # Lines are told apart by dash and width as well as by colour, so that a grey print can be read.
    chart.series.append(_line(sheet, Line.NOT_SOLVED, look.INK, 1.25, "solid"))
    chart.series.append(_line(sheet, Line.NO_FORCE, look.NO_FORCE, 1.0, "sysDot"))
    chart.series.append(_line(sheet, Line.TENSION, look.TENSION, 2.25, "solid"))
    chart.series.append(_line(sheet, Line.COMPRESSION, look.COMPRESSION, 2.5, "dash"))
    chart.series.append(_marks(sheet, Line.HELD_FULLY, "triangle", 10))
    chart.series.append(_marks(sheet, Line.HELD_PARTLY, "circle", 9))
    chart.series.append(_marks(sheet, Line.JOINTS, "circle", 4))
    return chart


def _deflected_chart(sheet: Worksheet) -> ScatterChart:
    chart = _chart("Deflected shape")
    chart.series.append(_line(sheet, Line.UNLOADED, look.NO_FORCE, 0.75, "solid"))
    chart.series.append(_line(sheet, Line.DEFLECTED, look.INK, 1.75, "solid"))
    chart.series.append(_marks(sheet, Line.HELD_FULLY, "triangle", 10))
    chart.series.append(_marks(sheet, Line.HELD_PARTLY, "circle", 9))
    return chart


def _chart(title: str) -> ScatterChart:
    chart = ScatterChart()
    chart.title = _title(title)
    chart.style = 2
    chart.scatterStyle = "lineMarker"
    chart.width, chart.height = _WIDTH, _HEIGHT
    chart.roundedCorners = False
    chart.display_blanks = "gap"
    for axis, length in zip((chart.x_axis, chart.y_axis), picture.FRAME, strict=True):
        axis.scaling.min, axis.scaling.max = 0.0, length
        axis.majorGridlines = None
        axis.delete = True
    chart.layout = Layout(
        manualLayout=ManualLayout(
            layoutTarget="inner",
            xMode="edge",
            yMode="edge",
            x=_PLOT_LEFT / _WIDTH,
            y=_PLOT_TOP / _HEIGHT,
            w=_PLOT_WIDTH / _WIDTH,
            h=_PLOT_HEIGHT / _HEIGHT,
        )
    )
    small = ParagraphProperties(defRPr=_characters(900))
    chart.legend = Legend(
        legendPos="b",
        overlay=False,
        txPr=RichText(RichTextProperties(), p=[Paragraph(small, CharacterProperties())]),
    )
    chart.graphical_properties = GraphicalProperties(
        solidFill="FFFFFF", ln=LineProperties(solidFill=look.NO_FORCE, w=_POINT // 2)
    )
    return chart


def _title(text: str) -> Title:
    words = Paragraph(
        ParagraphProperties(defRPr=_characters(1100, bold=True)),
        r=[RegularTextRun(_characters(1100, bold=True), t=text)],
    )
    return Title(tx=Text(rich=RichText(RichTextProperties(), p=[words])), overlay=False)


def _characters(size: int, *, bold: bool = False) -> CharacterProperties:
    return CharacterProperties(sz=size, b=bold, solidFill=look.INK, latin=Font(typeface="Arial"))


def _series(sheet: Worksheet, line: Line) -> Series:
    first = picture.DATA_FIRST_ROW + 1
    last = picture.DATA_FIRST_ROW + picture.DATA_ROWS
    x, y = (Reference(sheet, min_col=line.column + offset, min_row=first, max_row=last) for offset in (1, 2))
    series: Series = SeriesFactory(y, x)
    series.tx = SeriesLabel(v=line.value[0].upper() + line.value[1:])
    series.smooth = False
    return series


def _line(sheet: Worksheet, line: Line, color: str, width: float, dash: str) -> Series:
    series = _series(sheet, line)
    series.marker = Marker(symbol="none")
    series.graphicalProperties.line.solidFill = color
    series.graphicalProperties.line.width = round(width * _POINT)
    series.graphicalProperties.line.dashStyle = dash
    return series


def _marks(sheet: Worksheet, line: Line, symbol: Literal["triangle", "circle"], size: int) -> Series:
    series = _series(sheet, line)
    series.graphicalProperties.line.noFill = True
    edge = LineProperties(solidFill=look.INK, w=_POINT)
    series.marker = Marker(symbol=symbol, size=size, spPr=GraphicalProperties(solidFill=look.INK, ln=edge))
    return series


def _cell(corner: tuple[int, int]) -> str:
    row, column = corner
    return f"{get_column_letter(column + 1)}{row + 1}"
