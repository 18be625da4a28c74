"""Sheets as programs write them, and those that none would."""

from __future__ import annotations

import pytest

from strutbook_addin.xlsx import UnreadableWorkbook, scanning

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
SHEET = "xl/worksheets/sheet1.xml"


def refusal(book) -> str:
    """Sentence with which a workbook is refused."""
    with pytest.raises(UnreadableWorkbook) as refused:
        book.read()
    return str(refused.value)


@pytest.mark.parametrize(
    ("rows", "reason"),
    [
        ('<row r="2"/><row r="1"/>', "the row 1 is out of order"),
        ('<row r="2"/><row r="2"/>', "the row 2 is out of order"),
        ('<row r="0"/>', "the row 0 is out of order"),
        ('<row r="1048577"/>', "the row 1048577 is out of order"),
        ('<row r="one"/>', "invalid literal"),
        (f'<row r="{"9" * 5000}"/>', "integer string"),
        ('<row r="1"><c r="B1"/><c r="A1"/></row>', "the cell A1 is out of order"),
        ('<row r="1"><c r="A1"/><c r="A1"/></row>', "the cell A1 is out of order"),
        ('<row r="1"><c r="A2"/></row>', "the cell A2 is out of order"),
        ('<row r="1"><c r="XFE1"/></row>', "the cell XFE1 lies outside of any sheet"),
        ('<row r="1"><c r="XFD1"/><c r="XFE1"/></row>', "the cell XFE1 lies outside of any sheet"),
        ('<row r="1"><c r="XFD1"/><c/></row>', "lies outside of any sheet"),
        ("<c><v>1</v></c>", "lies outside of any sheet"),
        (f'<row r="1"><c r="{"A" * 100_000}1"/></row>', "there is no column AAAAAAAAA"),
        ('<row r="1"><c r="11"/></row>', "the cell 11 is out of order"),
        ('<row r="1"><c r="$A$1"/></row>', "out of order"),
    ],
)
def test_rows_and_cells_out_of_order_or_place_are_refused(book, rows: str, reason: str) -> None:
    sentence = refusal(book.rows(rows))
    assert sentence.startswith(f"the part {SHEET} is damaged")
    assert reason in sentence


def test_last_cell_of_a_sheet_is_read_and_written(book) -> None:
    book.rows('<row r="1048576"><c r="XFC1048576"><v>1</v></c></row>')
    workbook = book.open()
    assert workbook.write("S", 1_048_575, 16_383, [[2.0]]) == []
    workbook.save(book.path)
    grid = book.reopened().read("S")
    assert (len(grid), len(grid[-1]), grid[-1][-2:]) == (1_048_576, 16_384, [1.0, 2.0])


@pytest.mark.parametrize("root", ["worksheet xmlns='urn:other'", "worksheet", f"chartsheet xmlns='{MAIN}'"])
def test_unknown_namespace_is_refused(book, root: str) -> None:
    book.parts[SHEET] = f"<{root}><sheetData/></{root.split()[0]}>"
    assert f"the part {SHEET} is no worksheet" in refusal(book)


def test_sheet_without_sheet_data_is_refused(book) -> None:
    assert "holds no sheet data" in refusal(book.sheet(""))


def test_absurd_merged_area_is_refused(book) -> None:
    book.sheet('<sheetData/><mergeCells><mergeCell ref="A1:XFD1048576"/></mergeCells>')
    assert "merges more than 1,000,000 cells" in refusal(book)


def test_absurd_number_of_merged_areas_is_refused(book, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(scanning, "AREA_LIMIT", 8)
    book.sheet("<sheetData/><mergeCells>" + '<mergeCell ref="A1:B2"/>' * 3 + "</mergeCells>")
    assert "merges more than 8 cells" in refusal(book)


def test_absurd_number_of_cells_is_refused(book, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(scanning, "CELL_LIMIT", 8)
    assert len(book.rows("<row>" + "<c><v>1</v></c>" * 8 + "</row>").read()[0]) == 8
    assert "holds more than 8 cells" in refusal(book.rows("<row><c/><c/><c/></row>" * 3))


def test_text_in_runs_without_end_is_refused(book) -> None:
    runs = f"<r><t>{'long ' * 5000}</t></r>" * 9
    book.rows(f'<row r="1"><c r="A1" t="inlineStr"><is>{runs}</is></c></row>')
    assert "a text is longer than any cell can hold" in refusal(book)


def test_absurd_array_formula_is_refused(book) -> None:
    book.rows('<row r="1"><c r="A1"><f t="array" ref="A1:Z99999">1</f><v>1</v></c></row>')
    assert "fills them with one array formula" in refusal(book)


def test_merged_area_without_reference_is_refused(book) -> None:
    assert "is damaged" in refusal(book.sheet("<sheetData/><mergeCells><mergeCell/></mergeCells>"))


def test_rows_and_cells_may_leave_out_where_they_stand(book) -> None:
    book.rows('<row><c><v>1</v></c><c r="C1"><v>3</v></c><c><v>4</v></c></row><row r="3"/><row><c><v>9</v></c></row>')
    assert book.read() == [[1.0, None, 3.0, 4.0], [], [], [9.0]]


def test_rows_without_places_are_written_in_place(book) -> None:
    book.rows("<row><c><v>1</v></c><c><v>2</v></c></row><row><c><v>3</v></c></row>")
    after = book.sheet_after((0, 1, [[20.0]]), (1, 1, [[40.0]]), (2, 0, [[50.0]]))
    assert after == (
        '<sheetData><row><c><v>1</v></c><c r="B1"><v>20.0</v></c></row>'
        '<row><c><v>3</v></c><c r="B2"><v>40.0</v></c></row>'
        '<row r="3"><c r="A3"><v>50.0</v></c></row></sheetData>'
    )


def test_remarks_and_character_data_that_look_like_cells_are_not(book) -> None:
    rows = (
        '<!-- <row r="9"><c r="A9"><v>9</v></c></row> --><row r="1" a=">"><!-- <c r="A1"/> -->'
        '<c r="A1" t="str"><v><![CDATA[<c r="B1"><v>1</v></c>]]></v></c>'
        "<c r='B1' b='/>' ><v>2<!-- 3 --></v></c ></row >"
    )
    assert book.rows(rows).read() == [['<c r="B1"><v>1</v></c>', 2.0]]
    after = book.sheet_after((0, 1, [[5.0]]), (1, 0, [[6.0]]))
    assert after == (
        "<sheetData>"
        + rows[: rows.index("<c r='B1'")]
        + '<c r="B1"><v>5.0</v></c></row ><row r="2"><c r="A2"><v>6.0</v></c></row></sheetData>'
    )


@pytest.mark.parametrize(
    ("encoding", "mark"),
    [
        ("utf-8", ""),
        ("utf-8", "\ufeff"),
        ("utf-16", ""),
        ("utf-16-le", ""),
        ("utf-16-be", ""),
        ("utf-16-be", "\ufeff"),
        ("iso-8859-1", ""),
    ],
)
def test_other_encodings_are_read_and_written(book, encoding: str, mark: str) -> None:
    rows = '<row r="1"><c r="A1" t="str"><v>Stäbe</v></c><c r="B1"><v>1</v></c></row>'
    declared = encoding.removesuffix("-le").removesuffix("-be")
    text = f'{mark}<?xml version="1.0" encoding="{declared}"?>\n{book.rows(rows).parts[SHEET]}'
    book.parts[SHEET] = text.encode(encoding)
    assert book.read() == [["Stäbe", 1.0]]
    book.write((0, 1, [[2.0, "Δ"]]))
    assert book.reopened().read("S") == [["Stäbe", 2.0, "Δ"]]


def test_unknown_encoding_is_refused(book) -> None:
    book.parts[SHEET] = '<?xml version="1.0" encoding="no-such-thing"?>' + str(book.parts[SHEET])
    assert "is damaged (unknown encoding" in refusal(book)


def test_dimension_of_the_sheet_is_not_believed(book) -> None:
    book.sheet('<dimension ref="A1:XFD1048576"/><sheetData><row r="1"><c r="A1"><v>1</v></c></row></sheetData>')
    assert book.read() == [[1.0]]


def test_tables_and_columns_inside_of_extensions_are_not_taken(book) -> None:
    book.sheet(
        '<sheetData><row r="1"><c r="A1"><v>1</v></c></row></sheetData>'
        '<extLst><ext xmlns:y="urn:y"><y:row r="0"/><y:c r="A0"/><y:mergeCell/></ext></extLst>'
    )
    assert book.read() == [[1.0]]
