"""Sheets that a run adds, and the request to calculate when the workbook is opened."""

from __future__ import annotations

import re

import openpyxl
import pytest

from strutbook_addin.xlsx import UnreadableWorkbook

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
FORMULA = '<row r="1"><c r="A1"><f>B1*2</f><v>2</v></c><c r="B1"><v>1</v></c></row>'


def workbook_part(book) -> str:
    """The workbook part of the file as it stands."""
    return book.reopened()._package.read("xl/workbook.xml").decode()


def test_sheet_that_is_missing_is_added_last(book, parts) -> None:
    workbook = book.open()
    assert workbook.write("Forces", 1, 0, [["Member", 1.5], ["=U1", None]]) == []
    assert workbook.names() == ["S", "Forces"]
    workbook.save(book.path)
    assert book.reopened().names() == ["S", "Forces"]
    assert book.reopened().read("Forces") == [[], ["Member", 1.5], ["=U1"]]
    assert list(parts(book.path)) == [*book.parts, "xl/worksheets/sheet2.xml"]
    sheet = openpyxl.load_workbook(book.path)["Forces"]
    assert [[cell.value for cell in row] for row in sheet["A2:B3"]] == [["Member", 1.5], ["=U1", None]]
    assert sheet["A3"].data_type == "s"


def test_sheet_to_which_nothing_is_written_is_not_added(book) -> None:
    workbook = book.open()
    assert workbook.clear("Forces", 0, 0, 5, 5) == []
    workbook.write("Ledger", 0, 0, [[None, float("nan")]])
    workbook.save(book.path)
    assert book.reopened().names() == ["S"]


def test_new_sheets_take_free_names_and_numbers(book, parts) -> None:
    book.parts["xl/worksheets/Sheet2.XML"] = "<stray/>"
    book.relate("rId2", "theme", "theme.xml", "<theme/>")
    book.replace("xl/workbook.xml", 'sheetId="1"', 'sheetId="7"')
    workbook = book.open()
    for name in ("One", "Two & three"):
        workbook.write(name, 0, 0, [[name]])
    workbook.save(book.path)
    assert list(parts(book.path))[-2:] == ["xl/worksheets/sheet3.xml", "xl/worksheets/sheet4.xml"]
    assert re.findall(r'<sheet name="(.*?)" sheetId="(\d+)" r:id="(\w+)"/>', workbook_part(book)) == [
        ("S", "7", "rId1"),
        ("One", "8", "rId3"),
        ("Two &amp; three", "9", "rId4"),
    ]
    again = book.reopened()
    assert [again.read(name) for name in again.names()[1:]] == [[["One"]], [["Two & three"]]]


@pytest.mark.parametrize("number", ["", "x", "-3"])
def test_sheets_without_proper_numbers_are_no_obstacle(book, number: str) -> None:
    book.replace("xl/workbook.xml", 'sheetId="1"', f'sheetId="{number}"')
    workbook = book.open()
    workbook.write("T", 0, 0, [["x"]])
    workbook.save(book.path)
    assert 'name="T" sheetId="1"' in workbook_part(book)


def test_workbook_whose_sheets_refer_to_nothing_is_refused(book) -> None:
    book.replace("xl/workbook.xml", 'r:id="rId1"', "")
    workbook = book.open()
    workbook.write("T", 0, 0, [["x"]])
    with pytest.raises(UnreadableWorkbook, match="none of its sheets refers to a part"):
        workbook.save(book.path)


def test_new_sheet_is_written_with_the_prefix_of_the_others(book) -> None:
    declared = 'xmlns:r="http://schemas.openxmlformats.org/officeDocument/2006/relationships"'
    book.replace("xl/workbook.xml", f" {declared}", "").replace("xl/workbook.xml", " r:id", f" {declared} r:id")
    workbook = book.open()
    workbook.write("T", 0, 0, [["x"]])
    workbook.save(book.path)
    assert book.reopened().read("T") == [["x"]]


@pytest.mark.parametrize(
    ("before", "after"),
    [
        ("</sheets>", '</sheets><calcPr fullCalcOnLoad="1"/>'),
        (
            '</sheets><definedNames><definedName name="a">1</definedName></definedNames><extLst/>',
            '</sheets><definedNames><definedName name="a">1</definedName></definedNames>'
            '<calcPr fullCalcOnLoad="1"/><extLst/>',
        ),
        ('</sheets><calcPr calcId="9"/>', '</sheets><calcPr calcId="9" fullCalcOnLoad="1"/>'),
        (
            '</sheets><calcPr fullCalcOnLoad="0"></calcPr>',
            '</sheets><calcPr fullCalcOnLoad="1"></calcPr>',
        ),
        ('</sheets><calcPr fullCalcOnLoad="true"/>', '</sheets><calcPr fullCalcOnLoad="true"/>'),
    ],
)
def test_calculation_on_opening_is_asked_for_where_there_are_formulas(book, before: str, after: str) -> None:
    book.rows(FORMULA).replace("xl/workbook.xml", "</sheets>", before)
    book.write((0, 1, [[3.0]]))
    assert f"{after}</workbook>" in workbook_part(book)


def test_workbook_without_formulas_is_not_asked_to_calculate(book) -> None:
    book.rows('<row r="1"><c r="B1"><v>1</v></c></row>').write((0, 1, [[3.0]]))
    assert workbook_part(book) == book.parts["xl/workbook.xml"]


def test_run_that_changes_no_cell_changes_no_byte(book) -> None:
    book.rows(FORMULA)
    before = book.file().read_bytes()
    workbook = book.reopened()
    workbook.write("S", 0, 1, [[1.0]])
    workbook.save(book.path)
    assert book.path.read_bytes() == before
