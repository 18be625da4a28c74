"""The committed templates are what the program builds, and all that the schema asks for is in them."""

from __future__ import annotations

import re
import zipfile
from xml.etree import ElementTree as ET

import openpyxl
import pytest

from strutbook_addin import picture
from strutbook_addin.findings import Findings
from strutbook_addin.reporting import CAUTION
from strutbook_addin.tables.headers import locate
from strutbook_addin.tables.schema import BY_SHEET, JOB, TEMPLATE_TABLES, Bound, Kind, Role, Table, normal
from strutbook_addin.tables.units import split_header, unit_of
from strutbook_templates.generate import FOLDER, template_contents
from strutbook_templates.saving import save_workbook
from strutbook_templates.sheet_frame import is_about_z

TEMPLATES = list(template_contents())
#: Tables with a header row, on every template.
TABLES_ON_SHEETS = [
    pytest.param(name, table, id=f"{name}-{table.sheet}")
    for name in TEMPLATES
    for table in TEMPLATE_TABLES
    if not table.labels
]
CHART = {"c": "http://schemas.openxmlformats.org/drawingml/2006/chart"}


def meaning(path):
    """What a workbook says and looks like, sheet by sheet, however its bytes are arranged."""
    workbook = openpyxl.load_workbook(path)
    return {sheet.title: sheet_meaning(sheet) for sheet in workbook} | {"charts": charts(path)}


def sheet_meaning(sheet):
    cells = {
        cell.coordinate: (
            cell.value,
            cell.number_format,
            (cell.font.name, cell.font.sz, cell.font.b, cell.font.i, cell.font.color and cell.font.color.rgb),
            (cell.fill.fill_type, cell.fill.fgColor.rgb),
            (cell.alignment.horizontal, cell.alignment.vertical, cell.alignment.wrap_text),
            cell.border.left.style,
            cell.comment and cell.comment.text,
            cell.hyperlink and cell.hyperlink.location,
        )
        for row in sheet.iter_rows()
        for cell in row
    }
    rules = sorted(
        (str(rule.sqref), rule.type, rule.operator, rule.formula1, rule.formula2, rule.errorStyle, rule.error)
        for rule in sheet.data_validations.dataValidation
    )
    looks = [
        (str(area.sqref), rule.formula, rule.dxf.font and rule.dxf.font.color.rgb)
        for area in sheet.conditional_formatting
        for rule in area.rules
    ]
    printing = (
        sheet.page_setup.orientation,
        sheet.page_setup.paperSize,
        sheet.page_setup.fitToWidth,
        sheet.page_setup.fitToHeight,
        sheet.sheet_properties.pageSetUpPr.fitToPage,
        sheet.print_title_rows,
        sheet.print_area,
        [str(part.text) for line in (sheet.oddHeader, sheet.oddFooter) for part in (line.left, line.right)],
    )
    widths = {letter: column.width for letter, column in sheet.column_dimensions.items()}
    return cells, rules, looks, printing, widths, sheet.freeze_panes


def charts(path):
    with zipfile.ZipFile(path) as package:
        return {
            name: ET.tostring(ET.fromstring(package.read(name)))
            for name in package.namelist()
            if name.startswith("xl/charts/")
        }


@pytest.mark.parametrize("name", TEMPLATES)
def test_committed_template_is_what_the_program_builds(built, name):
    fresh, committed = meaning(built[name].path), meaning(FOLDER / name)
    assert fresh.keys() == committed.keys()
    for sheet in fresh:
        assert committed[sheet] == fresh[sheet], f"{name}, {sheet}: run python -m strutbook_templates"


def test_nothing_else_is_committed():
    assert sorted(path.name for path in FOLDER.glob("*.xlsx")) == sorted(TEMPLATES)


def test_two_builds_have_the_same_bytes(built, tmp_path):
    for file in built.values():
        again = tmp_path / file.path.name
        save_workbook(openpyxl.load_workbook(file.path), again)
        first = again.read_bytes()
        save_workbook(openpyxl.load_workbook(file.path), again)
        assert again.read_bytes() == first


@pytest.mark.parametrize(("name", "table"), TABLES_ON_SHEETS)
def test_every_column_of_the_schema_is_found_with_its_unit(built, name, table):
    findings = Findings()
    layout = locate(table, table.sheet, built[name].read(table.sheet), findings)
    assert layout is not None
    assert list(findings) == []
    plane = "plane" in name or name == "demonstration.xlsx"
    expected = [column.name for column in table.columns if not (plane and is_about_z(column))]
    assert list(layout.columns) == expected
    dimensioned = {column.name for column in table.columns if column.dimension} & set(expected)
    assert layout.units.keys() == dimensioned


@pytest.mark.parametrize("name", TEMPLATES)
def test_job_has_every_label_with_its_unit(built, name):
    labels = {normal(split_header(str(row[0]))[0]): str(row[0]) for row in built[name].read("Job") if row[0]}
    for column in JOB.columns:
        label = labels[normal(column.name)]
        if column.dimension is not None:
            unit_text = split_header(label)[1]
            assert unit_text is not None
            assert unit_of(unit_text, column.dimension).factor > 0


@pytest.mark.parametrize("name", TEMPLATES)
def test_sheets_stand_in_the_order_of_the_schema_with_the_picture_before_the_findings(built, name):
    order = [table.sheet for table in TEMPLATE_TABLES]
    order.insert(order.index("Findings"), picture.SHEET)
    assert built[name].names() == order


@pytest.mark.parametrize("name", TEMPLATES)
def test_every_sheet_carries_the_caution_and_prints_whole(built, name):
    for sheet in built[name].workbook:
        assert CAUTION in {cell.value for cell in sheet["A"][:4]}
        assert sheet.oddFooter.left.text.startswith("Not checked: ")
        assert len(sheet.oddFooter.left.text) < 240  # the file format holds 255 in all
        assert sheet.oddFooter.right.text == "Page &P of &N"
        assert sheet.page_setup.fitToWidth == (2 if sheet.title == "Members" else 1)
        upright = sheet.title == picture.SHEET
        assert sheet.page_setup.orientation == ("portrait" if upright else "landscape")
        assert sheet.sheet_properties.pageSetUpPr.fitToPage


@pytest.mark.parametrize(("name", "table"), TABLES_ON_SHEETS)
def test_headers_stay_in_sight_on_screen_and_paper_and_have_notes(built, name, table):
    sheet = built[name].workbook[table.sheet]
    header_row = next(row for row in range(1, 31) if sheet.cell(row, 1).value == table.columns[0].name)
    assert re.fullmatch(rf"[A-C]{header_row + 1}", sheet.freeze_panes)
    assert sheet.print_title_rows == f"$1:${header_row}"
    for cell in sheet[header_row]:
        if cell.value is None or split_header(str(cell.value))[0] not in {c.name for c in table.columns}:
            continue
        column = table.column(split_header(str(cell.value))[0])
        assert column.meaning in cell.comment.text
        if column.dimension is not None:
            assert f"Unit: {split_header(cell.value)[1]};" in cell.comment.text


def rules_of(sheet, column):
    """Validations that reach the first cell below the header of a column."""
    header = next(cell for cell in sheet[5] if cell.value and split_header(str(cell.value))[0] == column.name)
    below = f"{header.column_letter}6"
    return [rule for rule in sheet.data_validations.dataValidation if below in rule.cells]


@pytest.mark.parametrize(("name", "table"), TABLES_ON_SHEETS)
def test_inputs_are_guarded_by_the_rule_of_their_column(built, name, table: Table):
    sheet = built[name].workbook[table.sheet]
    present = {split_header(str(cell.value))[0] for cell in sheet[5] if cell.value}
    for column in (column for column in table.columns if column.name in present):
        rules = rules_of(sheet, column)
        if column.role is Role.RESULT:
            assert rules == []
        elif column.kind is Kind.NUMBER:
            operator = {
                Bound.ANY: "between",
                Bound.POSITIVE: "greaterThan",
                Bound.NOT_NEGATIVE: "greaterThanOrEqual",
            }[column.bound]
            assert [(rule.type, rule.operator) for rule in rules] == [("decimal", operator)]
            assert column.expected in rules[0].error
        elif column.kind is Kind.CHOICE:
            assert [rule.formula1 for rule in rules] == ['"' + ",".join(column.choices) + '"']
        elif column.refers_to:
            (rule,) = rules
            assert (rule.type, rule.errorStyle) == ("list", "warning")
            assert f"OFFSET({column.refers_to}!$A$6," in rule.formula1
            key = BY_SHEET[column.refers_to].columns[0].name
            assert built[name].workbook[column.refers_to]["A5"].value == key


@pytest.mark.parametrize(("name", "table"), TABLES_ON_SHEETS)
def test_inputs_are_told_from_results_by_look(built, name, table):
    looks = {Role.INPUT: set(), Role.RESULT: set()}
    for cell in built[name].workbook[table.sheet][5]:
        known = table.by_normal_name.get(normal(split_header(str(cell.value))[0]))
        if known is not None:
            looks[known.role].add((cell.fill.fgColor.rgb, bool(cell.font.i)))
    assert not looks[Role.INPUT] & looks[Role.RESULT]
    assert all(len(look) <= 1 for look in looks.values())


@pytest.mark.parametrize("name", TEMPLATES)
def test_charts_follow_the_cells_that_a_run_fills(built, name):
    """Each series refers to the pair of columns of its line, as long as the room for members."""
    lines = {line.value: line for line in picture.Line}
    seen = set()
    with zipfile.ZipFile(built[name].path) as package:
        for chart in (1, 2):
            root = ET.fromstring(package.read(f"xl/charts/chart{chart}.xml"))
            assert root.find(".//c:dispBlanksAs", CHART).get("val") == "gap"
            axes = root.findall(".//c:valAx", CHART)
            assert [axis.find("c:delete", CHART).get("val") for axis in axes] == ["1", "1"]
            limits = [float(axis.find("c:scaling/c:max", CHART).get("val")) for axis in axes]
            assert limits == list(picture.FRAME)
            for series in root.findall(".//c:ser", CHART):
                line = lines[series.find("c:tx/c:v", CHART).text.casefold()]
                seen.add(line)
                first, last = picture.DATA_FIRST_ROW + 1, picture.DATA_FIRST_ROW + picture.DATA_ROWS
                for offset, axis in enumerate(("xVal", "yVal")):
                    letter = openpyxl.utils.get_column_letter(line.column + 1 + offset)
                    cells = series.find(f"c:{axis}//c:f", CHART).text
                    assert cells == f"'Picture'!${letter}${first}:${letter}${last}"
    assert seen == set(picture.Line)


def test_plot_areas_have_the_ratio_of_the_frame(built):
    """With it, a square is drawn as a square."""
    with zipfile.ZipFile(built["demonstration.xlsx"].path) as package:
        drawing = ET.fromstring(package.read("xl/drawings/drawing1.xml"))
        for number, extent in enumerate(drawing.iter(), start=0):
            if not extent.tag.endswith("}ext") or "cx" not in extent.attrib:
                continue
            assert number
            size = int(extent.get("cx")), int(extent.get("cy"))
            root = ET.fromstring(package.read("xl/charts/chart1.xml"))
            layout = root.find(".//c:plotArea/c:layout/c:manualLayout", CHART)
            width, height = (float(layout.find(f"c:{side}", CHART).get("val")) for side in "wh")
            assert layout.find("c:layoutTarget", CHART).get("val") == "inner"
            ratio = (width * size[0]) / (height * size[1])
            assert ratio == pytest.approx(picture.FRAME[0] / picture.FRAME[1], rel=1e-3)


def test_lines_are_told_apart_without_colour(built):
    """Tension, compression and no force differ in dash, and compression from tension in a grey print."""
    with zipfile.ZipFile(built["demonstration.xlsx"].path) as package:
        root = ET.fromstring(package.read("xl/charts/chart1.xml"))
    dashes = {}
    for series in root.findall(".//c:ser", CHART):
        dash = series.find(".//{http://schemas.openxmlformats.org/drawingml/2006/main}prstDash")
        if dash is not None:
            dashes[series.find("c:tx/c:v", CHART).text] = dash.get("val")
    assert [dashes[name] for name in ("Tension", "Compression", "No force")] == ["solid", "dash", "sysDot"]
