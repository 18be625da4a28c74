"""Workbooks full of what is not ours come through a run with all of it."""

from __future__ import annotations

from collections.abc import Callable
from io import BytesIO
from pathlib import Path

import openpyxl
import pytest
import xlsxwriter
from PIL import Image

from strutbook_addin.solving import solve_file

# That library drops extensions when it saves, and says so when it reads.
pytestmark = pytest.mark.filterwarnings("ignore:.* extension is not supported:UserWarning")

Parts = dict[str, bytes]
#: Parts that a run changes in a workbook to which it adds sheets.
OURS = {"[Content_Types].xml", "xl/workbook.xml", "xl/_rels/workbook.xml.rels"}
TABLES = ("Joints", "Members", "Supports", "Loads")


def picture() -> BytesIO:
    """A small picture."""
    file = BytesIO()
    Image.new("RGB", (8, 6), (0, 90, 90)).save(file, "PNG")
    file.seek(0)
    return file


def rich_workbook(path: Path, tables: dict[str, list[list[object]]]) -> None:
    """Workbook with our tables and with as much else as the library can write."""
    with xlsxwriter.Workbook(path) as book:
        bold = book.add_format({"bold": True, "bg_color": "#DDEEEE", "border": 1})
        unit = book.add_format({"num_format": '0.00" m"', "italic": True})
        sheets = {name: book.add_worksheet(name) for name in TABLES}
        for name, rows in tables.items():
            sheets[name].write_row(0, 0, rows[0], bold)
            for row, values in enumerate(rows[1:], 1):
                sheets[name].write_row(row, 0, values)
        members = sheets["Members"]
        members.write("H1", "My remark")
        members.write_rich_string("H2", "part ", bold, "bold", " part")
        members.write_formula("I2", "=D2*2", unit, 800)
        members.write_comment("H2", "a remark", {"author": "A. N. Other"})
        members.insert_image("L2", "picture.png", {"image_data": picture()})
        members.insert_textbox("L20", "see drawing 12")
        members.conditional_format("D2:D9", {"type": "data_bar", "data_bar_2010": True})
        members.conditional_format("D2:D9", {"type": "3_color_scale"})
        members.data_validation("H3:H9", {"validate": "list", "source": ["checked", "open"]})
        members.add_sparkline("J2", {"range": "Members!D2:D4"})
        members.set_header("&L&Gjob 17&R&D", {"image_left": "picture.png", "image_data_left": picture()})
        members.set_footer("&CPage &P of &N")
        members.freeze_panes(1, 1)
        members.autofilter("A1:E4")
        members.set_column("B:C", 14, unit)
        members.set_row(2, 30, bold)
        members.protect("", {"format_cells": True})
        chart = book.add_chart({"type": "column"})
        chart.add_series({"values": "=Members!$D$2:$D$4", "trendline": {"type": "linear"}})
        sheets["Loads"].insert_chart("H2", chart)
        other = book.add_worksheet("My own sheet")
        other.add_table("B2:C4", {"columns": [{"header": "Bolt"}, {"header": "Count"}]})
        other.write_dynamic_array_formula("E2", "=SORT(C3:C4)", None, 0)
        other.write_url("G2", "https://example.org/", string="link")
        other.insert_checkbox("G4", True)
        line = book.add_chart({"type": "line"})
        line.add_series({"values": "=Members!$E$2:$E$4"})
        book.add_chartsheet("My chart").set_chart(line)
        book.define_name("Steel", "=Members!$E$2")
        book.set_properties({"title": "Footbridge", "comments": "kept"})
        book.set_custom_property("Job number", 17)


def our_sheets(parts: Parts, names: tuple[str, ...]) -> set[str]:
    """Parts of the first sheets, which both programs number in their order."""
    found = {f"xl/worksheets/sheet{number}.xml" for number in range(1, len(names) + 1)}
    assert found <= parts.keys()
    return found


def numbers(path: Path, sheet: str, header: str) -> list[float]:
    """Numbers below a header, from the stored values."""
    rows = list(openpyxl.load_workbook(path, data_only=True)[sheet].iter_rows(values_only=True))
    column = rows[0].index(header)
    return [row[column] for row in rows[1:] if isinstance(row[column], int | float)]


@pytest.fixture
def rich(tmp_path: Path, triangle, parts: Callable[[Path], Parts]) -> tuple[Path, Parts]:
    """The rich workbook, solved in place, and its parts before."""
    path = tmp_path / "rich.xlsx"
    rich_workbook(path, triangle)
    before = parts(path)
    assert solve_file(path, path).exit_status == 0
    return path, before


def test_every_part_that_is_not_ours_keeps_its_bytes(rich, parts) -> None:
    path, before = rich
    after = parts(path)
    ours = OURS | our_sheets(before, TABLES)
    assert {name for name in before if after.get(name) != before[name]} <= ours
    assert list(after)[: len(before)] == list(before)
    kinds = ("charts/", "drawings/", "media/", "tables/", "comments", "featurePropertyBag", "metadata", "custom.xml")
    assert all(any(kind in name for name in before) for kind in kinds)


def test_sheet_with_results_keeps_everything_around_its_cells(rich, parts) -> None:
    path, before = rich
    sheet = "xl/worksheets/sheet2.xml"
    old, new = before[sheet].decode(), parts(path)[sheet].decode()
    assert new[new.index("</sheetData>") :] == old[old.index("</sheetData>") :]
    start = old.index("<sheetViews>")
    assert new[new.index("<sheetViews>") : new.index("<sheetData>")] == old[start : old.index("<sheetData>")]
    assert "sparkline" in old
    assert "dataBar" in old


def test_columns_of_the_user_stay(rich, parts) -> None:
    path, before = rich
    old, new = before["xl/worksheets/sheet2.xml"].decode(), parts(path)["xl/worksheets/sheet2.xml"].decode()
    for cell in ("A2", "B3", "D4", "E2", "H1", "H2"):
        start = old.index(f'<c r="{cell}"')
        element = old[start : old.index("</c>", start)]
        assert element in new
    assert "<f>D2*2</f>" in new


def test_openpyxl_reads_the_solved_workbook_as_it_was(rich) -> None:
    path, _ = rich
    book = openpyxl.load_workbook(path)
    assert book.sheetnames[:6] == [*TABLES, "My own sheet", "My chart"]
    assert {"Forces", "Reactions", "Displacements", "Findings"} <= set(book.sheetnames)
    assert book["Members"]["H2"].value == "part bold part"
    assert book["Members"]["H2"].comment.text == "a remark"
    assert book.defined_names["Steel"].attr_text == "Members!$E$2"
    assert numbers(path, "Members", "Length [m]") == [8, 5, 5]


def test_libreoffice_shows_the_same_numbers(rich, converted) -> None:
    path, _ = rich
    seen = converted(path, "xlsx")
    for sheet, header in (("Members", "Tension [kN]"), ("Members", "Length [m]"), ("Members", "Area [mm2]")):
        assert numbers(seen, sheet, header) == pytest.approx(numbers(path, sheet, header), rel=1e-9)
    assert openpyxl.load_workbook(seen, data_only=True)["Members"]["I2"].value == 800


def test_workbook_of_libreoffice_comes_through(make_book, triangle, converted, parts, tmp_path) -> None:
    triangle["Members"][0].append("My remark")
    triangle["Members"][1].append("=D2*2")
    path = converted(make_book(triangle).path, "xlsx")
    before = parts(path)
    result = tmp_path / "result.xlsx"
    assert solve_file(path, result).exit_status == 0
    after = parts(result)
    changed = {name for name in before if after.get(name) != before[name]}
    assert changed <= OURS | our_sheets(before, TABLES)
    seen = converted(result, "xlsx")
    for header in ("Tension [kN]", "Compression [kN]", "Length [m]", "My remark"):
        assert numbers(seen, "Members", header) == pytest.approx(numbers(result, "Members", header), rel=1e-9)
    assert numbers(seen, "Members", "My remark") == [800]
