"""Cells that a run leaves as they are, with the reason."""

from __future__ import annotations

import pytest

from strutbook_addin.sheets import Formula
from strutbook_addin.xlsx import UnreadableWorkbook

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
RELATIONS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
SHEET = "xl/worksheets/sheet1.xml"
LINK = 'HYPERLINK("#\'S\'!A1","S!A1")'
LINK_MARKUP = LINK.replace('"', "&quot;")


def reasons(book, *rectangles) -> dict[tuple[int, int], str]:
    """Reasons for which cells were not written; all else of the sheet must be as it was."""
    before = str(book.parts[SHEET])
    refusals = book.write(*rectangles)
    assert book.reopened()._package.read(SHEET).decode() == before
    return {(refusal.row, refusal.column): refusal.reason for refusal in refusals}


def test_formula_of_the_user_stays(book) -> None:
    book.rows('<row r="1"><c r="A1"><f>1+1</f><v>2</v></c></row>')
    assert reasons(book, (0, 0, [[5.0]])) == {(0, 0): "a formula of yours stands there (=1+1)"}
    assert reasons(book, (0, 0, [[None]])) == {(0, 0): "a formula of yours stands there (=1+1)"}


def test_formula_of_the_user_stays_even_with_the_value_to_write(book) -> None:
    book.rows('<row r="1"><c r="A1"><f>1+1</f><v>2</v></c></row>')
    assert reasons(book, (0, 0, [[2.0]]))


def test_formula_without_value_is_not_cleared(book) -> None:
    book.rows('<row r="1"><c r="A1"><f>1+1</f></c></row>')
    assert reasons(book, (0, 0, [[None]])) == {(0, 0): "a formula of yours stands there (=1+1)"}


def test_users_of_a_shared_formula_stay_and_so_does_its_master(book) -> None:
    book.rows(
        '<row r="1"><c r="A1"><f t="shared" si="0" ref="A1:A2">B1</f><v>1</v></c></row>'
        '<row r="2"><c r="A2"><f t="shared" si="0"/><v>2</v></c></row>'
    )
    found = reasons(book, (0, 0, [[9.0], [9.0]]))
    assert found == {(0, 0): "a formula of yours stands there (=B1)", (1, 0): "a formula of yours stands there"}


def test_array_formula_and_its_range_stay(book) -> None:
    book.rows('<row r="1"><c r="A1"><f t="array" ref="A1:B2">C1:D2</f><v>1</v></c><c r="B1"><v>2</v></c></row>')
    found = reasons(book, (0, 1, [[9.0]]), (1, 0, [[9.0, 9.0]]))
    assert set(found) == {(0, 1), (1, 0), (1, 1)}
    assert set(found.values()) == {"it belongs to an array formula or a data table of yours"}


def test_range_of_a_data_table_stays(book) -> None:
    book.rows('<row r="1"><c r="A1"><f t="dataTable" ref="A1:A3" dt2D="0" r1="C1"/><v>1</v></c></row>')
    assert reasons(book, (2, 0, [[9.0]])) == {(2, 0): "it belongs to an array formula or a data table of yours"}


def test_merged_cells_stay_but_for_the_first(book) -> None:
    book.sheet('<sheetData/><mergeCells><mergeCell ref="A1:B2"/></mergeCells>')
    reason = "it is hidden under a merged cell; unmerge it"
    assert reasons(book, (0, 1, [[9.0]]), (1, 0, [[9.0, 9.0]])) == dict.fromkeys([(0, 1), (1, 0), (1, 1)], reason)
    assert book.write((0, 0, [[9.0]])) == []


def test_blank_cells_that_could_not_be_written_are_cleared_without_a_word(book) -> None:
    book.sheet(
        '<sheetData><row r="1"><c r="A1"/><c r="B1" s="0"/></row></sheetData>'
        '<mergeCells><mergeCell ref="A1:B2"/></mergeCells>'
    )
    assert reasons(book, (0, 0, [[None, None], [None, None]])) == {}


def test_header_of_a_table_stays(book) -> None:
    book.sheet(
        '<sheetData><row r="2"><c r="B2" t="str"><v>Member</v></c><c r="C2" t="str"><v>Note</v></c></row>'
        '</sheetData><tableParts count="1"><tablePart r:id="rId1"/></tableParts>'
    )
    book.parts["xl/worksheets/_rels/sheet1.xml.rels"] = (
        '<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">'
        f'<Relationship Id="rId1" Type="{RELATIONS}/table" Target="../tables/table1.xml"/></Relationships>'
    )
    book.parts["xl/tables/table1.xml"] = f'<table xmlns="{MAIN}" id="1" displayName="T" ref="B2:C9"/>'
    reason = "it is the header of a column of the table T"
    assert reasons(book, (1, 1, [["Member", "Length"]])) == {(1, 2): reason}
    book.parts["xl/tables/table1.xml"] = f'<table xmlns="{MAIN}" displayName="T" ref="B2:C9" headerRowCount="0"/>'
    assert book.write((1, 2, [["Length"]])) == []


def test_table_that_does_not_say_where_it_stands_is_refused(book) -> None:
    book.sheet('<sheetData/><tableParts count="1"><tablePart r:id="rId1"/></tableParts>')
    book.parts["xl/worksheets/_rels/sheet1.xml.rels"] = (
        '<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">'
        f'<Relationship Id="rId1" Type="{RELATIONS}/table" Target="../tables/table1.xml"/></Relationships>'
    )
    book.parts["xl/tables/table1.xml"] = f'<table xmlns="{MAIN}" displayName="T" ref="somewhere"/>'
    with pytest.raises(UnreadableWorkbook, match=r"the part xl/tables/table1\.xml is damaged"):
        book.write((0, 0, [[1.0]]))


def test_formula_of_our_own_is_overwritten(book) -> None:
    book.rows(f'<row r="1"><c r="A1" t="str"><f>{LINK_MARKUP}</f><v>S!A1</v></c></row>')
    assert book.sheet_after((0, 0, [["S"]])) == (
        '<sheetData><row r="1"><c r="A1" t="inlineStr"><is><t>S</t></is></c></row></sheetData>'
    )


def test_formula_of_our_own_that_is_the_same_is_left(book) -> None:
    book.rows(f'<row r="1"><c r="A1" x="kept" t="str"><f>{LINK_MARKUP}</f><v>S!A1</v></c></row>')
    assert reasons(book, (0, 0, [[Formula(f"={LINK}", "S!A1")]])) == {}


def test_formula_of_our_own_on_which_others_depend_stays(book) -> None:
    book.rows(
        f'<row r="1"><c r="A1" t="str"><f t="shared" si="3" ref="A1:A2">{LINK_MARKUP}</f><v>S!A1</v></c></row>'
        '<row r="2"><c r="A2" t="str"><f t="shared" si="3"/><v>S!A1</v></c></row>'
    )
    found = reasons(book, (0, 0, [["S"]]))
    assert found == {(0, 0): "other cells share the formula that stands there; clear them first"}


def test_chain_of_calculation_goes_only_with_a_formula(book) -> None:
    book.relate("rId5", "calcChain", "calcChain.xml", f'<calcChain xmlns="{MAIN}"><c r="A1" i="1"/></calcChain>')
    book.rows(f'<row r="1"><c r="A1" t="str"><f>{LINK_MARKUP}</f><v>S!A1</v></c></row>')
    book.write((0, 1, [[1.0]]), (0, 0, [[Formula("=" + LINK.replace("A1", "A2"), "S!A2")]]))
    assert "xl/calcChain.xml" in book.reopened()._package.names()
    book.write((0, 0, [["none"]]))
    package = book.reopened()._package
    assert "xl/calcChain.xml" not in package.names()
    assert b"calcChain" not in package.read("[Content_Types].xml")
    assert b"calcChain" not in package.read("xl/_rels/workbook.xml.rels")
