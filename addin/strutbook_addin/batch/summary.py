"""The summary of a batch: a workbook of its own, with one row a file, an envelope and the findings."""

from __future__ import annotations

import os
from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING

from strutbook_addin.batch.record import Record
from strutbook_addin.findings import Level
from strutbook_addin.xlsx.saving import replace_file

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.worksheet.worksheet import Worksheet

#: Columns of the summary: header, key of the number or text, factor from SI.
COLUMNS: tuple[tuple[str, str, float], ...] = (
    ("Largest utilisation", "utilisation", 1.0),
    ("In member", "utilisation_in", 0.0),
    ("Governed by", "governed_by", 0.0),
    ("Members that fail", "fails", 1.0),
    ("Members not checked", "unchecked", 1.0),
    ("Largest tension [kN]", "tension", 1e3),
    ("Tension in", "tension_in", 0.0),
    ("Largest compression [kN]", "compression", 1e3),
    ("Compression in", "compression_in", 0.0),
    ("Largest displacement [mm]", "displacement", 1e-3),
    ("Deflection over limit", "deflection_over_limit", 1.0),
    ("Lowest reaction upwards [kN]", "lowest_reaction", 1e3),
    ("Mass [kg]", "mass", 1.0),
    ("Members", "members", 1.0),
)
#: Numbers that are counts.
_COUNTS = frozenset({"fails", "unchecked", "members"})
_WIDTHS = {"Workbook": 34, "Outcome": 60, "Governed by": 34, "First finding": 90, "What": 90, "What to do": 60}
_TEAL, _AMBER = "1F6F78", "F2B33D"


def write_summary(records: Sequence[Record], place: Path) -> None:
    """Write the summary workbook; it replaces an earlier one whole or not at all."""
    from io import BytesIO

    book = build_summary(records, place.parent)
    data = BytesIO()
    book.save(data)
    place.parent.mkdir(parents=True, exist_ok=True)
    replace_file(place, data.getvalue())


def rows(records: Sequence[Record]) -> list[dict[str, object]]:
    """One row a workbook, by header; engineering units stand in the headers."""
    table = []
    for record in records:
        row: dict[str, object] = {
            "Workbook": record.name,
            "State": record.state,
            "Outcome": record.sentence,
            **{header: _value(record, key, factor) for header, key, factor in COLUMNS},
            "Seconds": round(record.seconds, 4),
            "First finding": record.first_finding,
        }
        table.append(row)
    return table


def build_summary(records: Sequence[Record], folder: Path) -> Workbook:
    """The summary as a workbook, with links relative to the folder in which it will stand."""
    from openpyxl import Workbook

    book = Workbook()
    sheet: Worksheet = book.worksheets[0]
    sheet.title = "Summary"
    _fill_summary(sheet, records, folder)
    _fill_envelope(book.create_sheet("Envelope"), records)
    _fill_findings(book.create_sheet("Findings"), records)
    return book


def _value(record: Record, key: str, factor: float) -> object:
    if not factor:
        return record.texts.get(key)
    number = record.numbers.get(key)
    if number is None:
        return None
    return int(number) if key in _COUNTS else round(number / factor, 4)


def _fill_summary(sheet: Worksheet, records: Sequence[Record], folder: Path) -> None:
    from openpyxl.formatting.rule import Rule
    from openpyxl.styles import PatternFill
    from openpyxl.styles.differential import DifferentialStyle
    from openpyxl.utils import get_column_letter
    from openpyxl.worksheet.table import Table, TableStyleInfo

    # The worst stands on top: what was not solved, then by utilisation.
    table = rows(sorted(records, key=lambda one: (-one.exit_status, -one.numbers.get("utilisation", 0.0), one.name)))
    by_name = {record.name: record for record in records}
    headers = list(table[0]) if table else ["Workbook"]
    _write_headers(sheet, headers)
    for place, row in enumerate(table, start=2):
        for column, header in enumerate(headers, start=1):
            cell = sheet.cell(place, column)
            value = row[header]
            cell.value = value  # type: ignore[assignment]  # texts, numbers and None only
            if isinstance(value, str) and value.startswith("="):
                cell.data_type = "s"
            if isinstance(value, float) and header != "Seconds":
                cell.number_format = "0.00"
        file = by_name[str(row["Workbook"])].file
        sheet.cell(place, 1).hyperlink = Path(os.path.relpath(file, folder)).as_posix()
    if table:
        last = f"{get_column_letter(len(headers))}{len(table) + 1}"
        listed = Table(displayName="Workbooks", ref=f"A1:{last}")
        listed.tableStyleInfo = TableStyleInfo(name="TableStyleLight1", showRowStripes=True)
        sheet.add_table(listed)
        amber = PatternFill("solid", bgColor=_AMBER)
        for header, rule in (
            ("State", '{0}2="not solved"'),
            ("Largest utilisation", "AND(ISNUMBER({0}2),{0}2>1)"),
            ("Deflection over limit", "AND(ISNUMBER({0}2),{0}2>1)"),
            ("Lowest reaction upwards [kN]", "AND(ISNUMBER({0}2),{0}2<0)"),
        ):
            letter = get_column_letter(headers.index(header) + 1)
            cells = f"{letter}2:{letter}{len(table) + 1}"
            rule_ = Rule(type="expression", formula=[rule.format(letter)], dxf=DifferentialStyle(fill=amber))
            sheet.conditional_formatting.add(cells, rule_)
        _add_chart(sheet, headers, len(table))


def _add_chart(sheet: Worksheet, headers: list[str], count: int) -> None:
    """Bars of the largest utilisations, where anything was checked."""
    from openpyxl.chart import BarChart, Reference

    column = headers.index("Largest utilisation") + 1
    if not any(sheet.cell(row, column).value is not None for row in range(2, count + 2)):
        return
    shown = min(count, 30)
    chart = BarChart()
    chart.type = "bar"
    chart.title = "Largest utilisation, the highest on top"
    chart.add_data(Reference(sheet, min_col=column, min_row=2, max_row=shown + 1))
    chart.set_categories(Reference(sheet, min_col=1, min_row=2, max_row=shown + 1))
    chart.series[0].graphicalProperties.solidFill = _TEAL
    chart.legend = None
    chart.x_axis.scaling.orientation = "maxMin"
    chart.x_axis.delete = chart.y_axis.delete = False
    chart.y_axis.scaling.min = 0
    chart.height, chart.width = max(7.0, 0.55 * shown + 3), 24
    sheet.add_chart(chart, f"B{count + 4}")


def _fill_envelope(sheet: Worksheet, records: Sequence[Record]) -> None:
    """Extreme forces of every member name over all workbooks, and which workbook governs."""
    headers = ["Member", "Workbooks", "Tension [kN]", "Of workbook", "In", "Compression [kN]", "Of workbook ", "In "]
    _write_headers(sheet, headers)
    envelope: dict[str, list[object]] = {}
    for record in records:
        found = record.envelope
        if found is None:
            continue
        values = zip(
            found.members, found.tension, found.tension_in, found.compression, found.compression_in, strict=True
        )
        for member, tension, tension_in, compression, compression_in in values:
            line = envelope.setdefault(member, [0, 0.0, "", "", 0.0, "", ""])
            line[0] = int(str(line[0])) + 1
            if tension > float(str(line[1])):
                line[1:4] = [tension, record.name, tension_in]
            if compression < float(str(line[4])):
                line[4:7] = [compression, record.name, compression_in]
    for place, (member, line) in enumerate(envelope.items(), start=2):
        count, tension_, of, within, compression_, of_, within_ = line
        shown = [member, count, _kilo(tension_), of, within, _kilo(compression_), of_, within_]
        for column, value in enumerate(shown, start=1):
            sheet.cell(place, column).value = value or None  # type: ignore[assignment]  # texts and numbers only
    sheet.auto_filter.ref = f"A1:H{max(len(envelope) + 1, 2)}"


def _kilo(force: object) -> float:
    return round(float(str(force)) / 1e3, 4)


def _fill_findings(sheet: Worksheet, records: Sequence[Record]) -> None:
    _write_headers(sheet, ["Workbook", "Level", "Where", "What", "What to do"])
    place = 2
    for record in records:
        for finding in record.findings:
            if finding.level is Level.NOTE:
                continue
            for column, value in enumerate(
                (record.name, finding.level.value, finding.where, finding.what, finding.todo), start=1
            ):
                cell = sheet.cell(place, column)
                cell.value = value
                cell.data_type = "s"
            place += 1
    sheet.auto_filter.ref = f"A1:E{max(place - 1, 2)}"


def _write_headers(sheet: Worksheet, headers: Sequence[str]) -> None:
    from openpyxl.styles import Alignment, Font
    from openpyxl.utils import get_column_letter
    from openpyxl.worksheet.properties import PageSetupProperties

    for column, header in enumerate(headers, start=1):
        cell = sheet.cell(1, column)
        cell.value = header
        cell.font = Font(name="Calibri", size=11, bold=True)
        cell.alignment = Alignment(wrap_text=True, vertical="top")
        width = _WIDTHS.get(header.strip(), max(12, len(header) * 0.75))
        sheet.column_dimensions[get_column_letter(column)].width = width
    sheet.row_dimensions[1].height = 32
    sheet.freeze_panes = "B2"
    sheet.page_setup.orientation = "landscape"
    sheet.page_setup.fitToWidth, sheet.page_setup.fitToHeight = 2, 0
    sheet.sheet_properties.pageSetUpPr = PageSetupProperties(fitToPage=True)
    sheet.print_title_rows, sheet.print_title_cols = "1:1", "A:A"
