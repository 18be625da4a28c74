"""Formulas of the user's: read where no value is stored, and never left with a value that is no longer true."""

from __future__ import annotations

from pathlib import Path

import openpyxl
import pytest
import xlsxwriter

from strutbook_addin.findings import Level
from strutbook_addin.hosts.offline import OfflineWorkbook
from strutbook_addin.sheets import ErrorValue, Formula

DOUBLED = '<row r="1"><c r="A1"><v>2</v></c><c r="B1"><f>A1*2</f><v>4</v></c></row>'
MACRO = "application/vnd.ms-excel.sheet.macroEnabled.main+xml"


def by_script(path: Path, cells: dict[str, object]) -> OfflineWorkbook:
    """Workbook written by openpyxl, which stores no values of formulas."""
    workbook = openpyxl.Workbook()
    for name, value in cells.items():
        workbook.active[name] = value
    workbook.active.title = "S"
    workbook.save(path)
    return OfflineWorkbook.open(path)


def second_sheet(book, rows: str, name: str = "T") -> None:
    """Add a sheet to a hand-written workbook."""
    sheet = str(book.parts["xl/worksheets/sheet1.xml"])
    start, end = sheet.index("<sheetData>"), sheet.index("</sheetData>")
    book.relate("rId2", "worksheet", "worksheets/sheet2.xml", f"{sheet[:start]}<sheetData>{rows}{sheet[end:]}")
    book.replace("xl/workbook.xml", "</sheets>", f'<sheet name="{name}" sheetId="2" r:id="rId2"/></sheets>')


def test_formula_without_stored_value_is_calculated_and_noted(tmp_path: Path) -> None:
    workbook = by_script(tmp_path / "a.xlsx", {"A1": 3, "B1": "=A1*2", "C1": '="U"&B1', "D1": "=A1>1"})
    assert workbook.read("S") == [[3.0, 6.0, "U6", True]]
    (finding,) = workbook.findings()
    assert (finding.level, finding.where) == (Level.NOTE, "S!B1")
    assert "no current value for the formulas in B1, C1, D1; calculated here" in finding.what


def test_sheet_that_is_read_twice_is_noted_once(tmp_path: Path) -> None:
    workbook = by_script(tmp_path / "a.xlsx", {"A1": "=1+1"})
    assert workbook.read("S") == workbook.read("S")
    assert len(workbook.findings()) == 1


def test_calculated_values_stand_in_their_places(tmp_path: Path) -> None:
    workbook = by_script(tmp_path / "a.xlsx", {"A1": "=B2", "B2": 1, "C2": "=B2+1", "A3": 5, "B3": "=C2+1"})
    assert workbook.read("S") == [[1.0], [None, 1.0, 2.0], [5.0, 3.0]]


@pytest.mark.parametrize(
    ("formula", "error"), [("=NOSUCHFUNCTION(1)", "#NAME?"), ("=1/0", "#DIV/0!"), ('=1+"a"', "#VALUE!")]
)
def test_formula_that_gives_an_error_is_an_error_with_its_formula(tmp_path: Path, formula: str, error: str) -> None:
    workbook = by_script(tmp_path / "a.xlsx", {"A1": formula})
    assert workbook.read("S") == [[ErrorValue(error, formula)]]
    assert workbook.findings() == []


def test_formula_that_is_shown_as_a_date_is_a_date(tmp_path: Path) -> None:
    workbook = openpyxl.Workbook()
    workbook.active["A1"] = "=45351+0"
    workbook.active["A1"].number_format = "yyyy-mm-dd"
    workbook.save(tmp_path / "a.xlsx")
    ((value,),) = OfflineWorkbook.open(tmp_path / "a.xlsx").read("Sheet")
    assert str(value) == "2024-02-29"


def test_stored_value_is_read_where_there_is_one(book) -> None:
    book.rows('<row r="1"><c r="A1"><v>2</v></c><c r="B1"><f>A1*2</f><v>5</v></c></row>')
    workbook = book.open()
    assert workbook.read("S") == [[2.0, 5.0]]
    assert workbook.findings() == []


def test_zeros_that_a_script_stored_are_not_believed(tmp_path: Path) -> None:
    path = tmp_path / "a.xlsx"
    with xlsxwriter.Workbook(path) as written:
        sheet = written.add_worksheet("S")
        sheet.write("A1", 3)
        sheet.write_formula("B1", "=A1*2")
        sheet.write_formula("C1", "=A1-3")
    workbook = OfflineWorkbook.open(path)
    assert workbook.read("S") == [[3.0, 6.0, 0.0]]
    assert "the formula in B1" in workbook.findings()[0].what


def test_stored_value_declared_out_of_date_is_used_with_a_remark_where_nothing_better_is_known(book) -> None:
    book.rows('<row r="1"><c r="A1"><f>NOSUCHFUNCTION(1)</f><v>5</v></c></row>')
    book.replace("xl/workbook.xml", "</sheets>", '</sheets><calcPr fullCalcOnLoad="1"/>')
    workbook = book.open()
    assert workbook.read("S") == [[5.0]]
    (finding,) = workbook.findings()
    assert (finding.level, finding.where) == (Level.LOOK, "S!A1")
    assert "could not be calculated here; the stored values were used" in finding.what


def test_formula_is_refreshed_when_its_input_is_written(book) -> None:
    assert "<f>A1*2</f><v>14.0</v>" in book.rows(DOUBLED).sheet_after((0, 0, [[7.0]]))


@pytest.mark.parametrize(
    ("formula", "kind", "before", "after"),
    [
        ('IF(A1&gt;5,"long","short")', "str", "short", '<c r="B1" t="str"><f>{}</f><v>long</v></c>'),
        ("A1&gt;5", "b", "0", '<c r="B1" t="b"><f>{}</f><v>1</v></c>'),
        ("IF(A1&gt;5,1,TRUE)", "b", "1", '<c r="B1"><f>{}</f><v>1.0</v></c>'),
        ('IF(A1&gt;5,"long",0)', "n", "0", '<c r="B1" t="str"><f>{}</f><v>long</v></c>'),
        ("A1*0", "n", "0", '<c r="B1" t="n"><f>{}</f><v>0</v></c>'),
        ("1/(A1-7)", "n", "-0.2", '<c r="B1"><f>{}</f></c>'),
        ("NOSUCHFUNCTION(A1)", "n", "4", '<c r="B1"><f>{}</f></c>'),
        ("A1*2", "n", "5", '<c r="B1"><f>{}</f></c>'),
    ],
    ids=["text", "truth", "truth to number", "number to text", "same", "to an error", "unknown", "disagrees"],
)
def test_no_stored_value_is_left_that_is_no_longer_true(book, formula: str, kind: str, before: str, after: str) -> None:
    cell = f'<c r="B1" t="{kind}"><f>{formula}</f><v>{before}</v></c>'
    book.rows(f'<row r="1"><c r="A1"><v>2</v></c>{cell}</row>')
    assert after.format(formula) in book.sheet_after((0, 0, [[7.0]]))


def test_formula_of_another_sheet_is_refreshed(book) -> None:
    book.rows('<row r="1"><c r="A1"><v>2</v></c></row>')
    second_sheet(book, '<row r="1"><c r="A1"><f>S!A1*3</f><v>6</v></c></row>')
    book.write((0, 0, [[7.0]]))
    assert book.reopened().read("T") == [[21.0]]


def test_formula_of_a_macro_workbook_is_refreshed(book) -> None:
    kind = "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"
    book.rows(DOUBLED).replace("[Content_Types].xml", kind, MACRO)
    book.relate("rId6", "vbaProject", "vbaProject.bin", b"macros")
    after = book.sheet_after((0, 0, [[7.0]]))
    assert "<f>A1*2</f><v>14.0</v>" in after
    assert MACRO.encode() in book.reopened()._package.read("[Content_Types].xml")


def test_workbook_that_the_library_cannot_calculate_loses_only_values_that_may_be_wrong(book) -> None:
    # A cell outside of the declared dimension is one of the things that the library refuses.
    book.sheet(f'<dimension ref="A1:A1"/><sheetData>{DOUBLED}</sheetData>')
    rows = '<row r="1"><c r="A1"><f>S!B1+1</f><v>5</v></c></row>'
    second_sheet(book, rows)
    third = str(book.parts["xl/worksheets/sheet2.xml"]).replace("S!B1+1", "2+3")
    book.relate("rId3", "worksheet", "worksheets/sheet3.xml", third)
    book.replace("xl/workbook.xml", "</sheets>", '<sheet name="Own" sheetId="3" r:id="rId3"/></sheets>')
    book.write((0, 0, [[7.0]]))
    package = book.reopened()._package
    assert b"<f>A1*2</f></c>" in package.read("xl/worksheets/sheet1.xml")
    assert b"<f>S!B1+1</f></c>" in package.read("xl/worksheets/sheet2.xml")
    assert package.read("xl/worksheets/sheet3.xml").decode() == third


def test_link_of_our_own_needs_no_calculation(book) -> None:
    link = Formula('=HYPERLINK("#\'S\'!A1","S!A1")', "S!A1")
    book.rows('<row r="1"><c r="A1"><v>2</v></c></row>').write((0, 1, [[link]]))
    assert b"calcPr" not in book.reopened()._package.read("xl/workbook.xml")
    assert book.reopened().read("S") == [[2.0, "S!A1"]]
