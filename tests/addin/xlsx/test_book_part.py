"""The workbook part: what is no workbook, and the ways in which parts refer to each other."""

from __future__ import annotations

import re

import pytest

from strutbook_addin.xlsx import UnreadableWorkbook, markup
from strutbook_addin.xlsx.package import Package

CELLS = '<row r="1"><c r="A1"><v>7</v></c></row>'
STRICT = (
    ("http://schemas.openxmlformats.org/spreadsheetml/2006/main", "http://purl.oclc.org/ooxml/spreadsheetml/main"),
    (
        "http://schemas.openxmlformats.org/officeDocument/2006/relationships",
        "http://purl.oclc.org/ooxml/officeDocument/relationships",
    ),
)


def refusal(book) -> str:
    """Sentence with which a workbook is refused."""
    with pytest.raises(UnreadableWorkbook) as refused:
        book.read()
    return str(refused.value)


def test_open_document_is_refused_by_its_name(book) -> None:
    book.parts = {"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": "<a/>"}
    assert "no workbook but an OpenDocument file. Save it as .xlsx" in refusal(book)


def test_binary_workbook_is_refused_by_its_name(book) -> None:
    book.replace("_rels/.rels", "xl/workbook.xml", "xl/workbook.bin")
    book.parts["xl/workbook.bin"] = b"\x83\x01\x00"
    assert "a binary workbook (.xlsb)" in refusal(book)


def test_package_without_workbook_is_refused(book) -> None:
    del book.parts["_rels/.rels"]
    assert "the file holds no workbook." in refusal(book)


def test_package_that_names_a_missing_workbook_is_refused(book) -> None:
    del book.parts["xl/workbook.xml"]
    assert "the file holds no workbook." in refusal(book)


def test_text_document_is_refused(book) -> None:
    book.parts["xl/workbook.xml"] = '<w:document xmlns:w="urn:words"/>'
    assert "holds no spreadsheet (its main part xl/workbook.xml is another document)" in refusal(book)


def test_unknown_namespace_of_the_workbook_is_refused(book) -> None:
    book.replace("xl/workbook.xml", "spreadsheetml/2006/main", "spreadsheetml/2099/main")
    assert "holds no spreadsheet" in refusal(book)


def test_sheet_without_its_part_is_refused(book) -> None:
    del book.parts["xl/worksheets/sheet1.xml"]
    assert "its part xl/worksheets/sheet1.xml is missing" in refusal(book)


def test_two_sheets_of_one_name_are_refused(book) -> None:
    book.replace("xl/workbook.xml", "</sheets>", '<sheet name="s" sheetId="2" r:id="rId1"/></sheets>')
    assert "two sheets of one name" in refusal(book)


def test_two_sheets_with_one_part_are_refused(book) -> None:
    book.replace("xl/workbook.xml", "</sheets>", '<sheet name="T" sheetId="2" r:id="rId1"/></sheets>')
    assert "two sheets that share their cells" in refusal(book)


@pytest.mark.parametrize("part", ["xl/workbook.xml", "_rels/.rels", "xl/worksheets/sheet1.xml"])
def test_part_that_is_no_xml_is_refused(book, part: str) -> None:
    book.parts[part] = book.parts[part][:-1]
    assert f"the part {part} is damaged" in refusal(book)


@pytest.mark.parametrize("part", ["xl/workbook.xml", "_rels/.rels", "xl/styles.xml"])
def test_description_larger_than_any_is_refused(book, monkeypatch: pytest.MonkeyPatch, part: str) -> None:
    book.rows('<row r="1"><c r="A1" s="1"><v>7</v></c></row>')
    book.relate("rId9", "styles", "styles.xml", "<styleSheet/>")
    monkeypatch.setattr(markup, "TREE_LIMIT", 5_000)
    assert book.read() == [[7.0]]
    book.parts[part] = str(book.parts[part]) + " " * 5_000
    assert f"the part {part} holds " in refusal(book)


@pytest.mark.parametrize("encoding", ["no-such-thing", "utf-7", "hex"])
def test_encoding_that_is_none_for_markup_is_refused(book, encoding: str) -> None:
    book.parts["xl/workbook.xml"] = f'<?xml version="1.0" encoding="{encoding}"?>{book.parts["xl/workbook.xml"]}'
    assert "the part xl/workbook.xml is damaged" in refusal(book)


@pytest.mark.parametrize(
    "target",
    [
        "/xl/worksheets/sheet1.xml",
        "worksheets\\sheet1.xml",
        "/xl\\worksheets\\sheet1.xml",
        "../xl/worksheets/sheet1.xml",
        "./worksheets/SHEET1.xml",
        "worksheets/sheet%31.xml",
    ],
)
def test_target_of_a_relationship_may_be_written_in_many_ways(book, target: str) -> None:
    book.rows(CELLS).replace("xl/_rels/workbook.xml.rels", "worksheets/sheet1.xml", target)
    assert book.read() == [[7.0]]
    book.write((0, 0, [[8.0]]))
    package = Package.open(book.path)
    assert b"<v>8.0</v>" in package.read("xl/worksheets/sheet1.xml")
    assert len(package.names()) == len(book.parts)


def test_target_outside_of_the_file_is_no_sheet(book) -> None:
    book.replace("xl/_rels/workbook.xml.rels", 'sheet1.xml"', 'sheet1.xml" TargetMode="External"')
    assert "is missing" in refusal(book)


def test_strict_workbook_is_read_and_written(book) -> None:
    book.rows(CELLS)
    for part, content in book.parts.items():
        for transitional, strict in STRICT:
            content = content.replace(transitional, strict)
        book.parts[part] = content
    assert book.read() == [[7.0]]
    workbook = book.open()
    workbook.write("S", 0, 0, [[8.0]])
    workbook.write("New", 0, 0, [["x"]])
    workbook.save(book.path)
    again = book.reopened()
    assert (again.read("S"), again.read("New")) == ([[8.0]], [["x"]])
    assert b"schemas.openxmlformats.org/office" not in Package.open(book.path).read("xl/_rels/workbook.xml.rels")


def test_prefixed_workbook_is_read_and_written(book) -> None:
    book.rows(CELLS)
    for part in ("xl/workbook.xml", "xl/worksheets/sheet1.xml"):
        text = re.sub(r"<(/?)(\w)", r"<\1x:\2", book.parts[part])
        book.parts[part] = text.replace("xmlns=", "xmlns:x=")
    assert book.read() == [[7.0]]
    workbook = book.open()
    workbook.write("S", 0, 0, [[8.0, "text"], [None, 9.0]])
    workbook.write("New", 1, 1, [["x"]])
    workbook.save(book.path)
    again = book.reopened()
    assert again.read("S") == [[8.0, "text"], [None, 9.0]]
    assert again.read("New") == [[], [None, "x"]]


def test_chart_sheet_has_no_cells_and_is_not_written(book) -> None:
    book.relate("rId7", "chartsheet", "chartsheets/sheet1.xml", "<chartsheet/>")
    book.replace("xl/workbook.xml", "</sheets>", '<sheet name="Forces" sheetId="2" r:id="rId7"/></sheets>')
    workbook = book.open()
    assert workbook.names() == ["S"]
    (refusal,) = workbook.write("forces", 3, 4, [[1.0]])
    assert (refusal.row, refusal.column) == (3, 4)
    assert refusal.reason == "the sheet of this name holds a chart and no cells"
    assert workbook.names() == ["S"]


def test_workbook_of_charts_alone_takes_a_sheet(book) -> None:
    book.replace("xl/_rels/workbook.xml.rels", '/worksheet"', '/chartsheet"')
    workbook = book.open()
    assert workbook.names() == []
    workbook.write("Findings", 0, 0, [["stop"]])
    workbook.save(book.path)
    assert book.reopened().read("Findings") == [["stop"]]
