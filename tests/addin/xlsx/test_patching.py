"""Cells spliced into sheets: what changes, and that nothing else does."""

from __future__ import annotations

import pytest

ROW = '<row r="2" spans="2:3" customFormat="1" s="5"><c r="B2" s="1"><v>1</v></c><c r="D2"><v>2</v></c></row>'


def test_cell_keeps_its_format_and_loses_what_belonged_to_its_value(book) -> None:
    book.rows('<row r="1"><c r="A1" s="3" t="str" cm="1" vm="2" ph="1"><v>a</v></c><c r="B1" cm="1"/></row>')
    assert book.sheet_after((0, 0, [[2.5]])) == (
        '<sheetData><row r="1"><c r="A1" s="3"><v>2.5</v></c><c r="B1" cm="1"/></row></sheetData>'
    )


def test_value_that_stands_there_already_is_not_touched(book) -> None:
    rows = '<row r="1"><c r="A1" cm="1"><v>2.50</v></c><c r="B1" t="str" vm="1"><v>a</v></c></row>'
    assert book.rows(rows).sheet_after((0, 0, [[2.5, "a", None]])) == f"<sheetData>{rows}</sheetData>"


def test_boolean_is_not_the_number_that_it_looks_like(book) -> None:
    book.rows('<row r="1"><c r="A1" t="b"><v>1</v></c></row>')
    assert '<c r="A1"><v>1.0</v></c>' in book.sheet_after((0, 0, [[1.0]]))


@pytest.mark.parametrize(
    ("column", "after"),
    [
        (0, '<c r="A2" s="5"><v>9.0</v></c><c r="B2" s="1"><v>1</v></c><c r="D2"><v>2</v></c>'),
        (2, '<c r="B2" s="1"><v>1</v></c><c r="C2" s="5"><v>9.0</v></c><c r="D2"><v>2</v></c>'),
        (7, '<c r="B2" s="1"><v>1</v></c><c r="D2"><v>2</v></c><c r="H2" s="5"><v>9.0</v></c>'),
    ],
)
def test_new_cell_stands_in_order_with_the_format_of_its_row(book, column: int, after: str) -> None:
    assert after in book.rows(ROW).sheet_after((1, column, [[9.0]]))


@pytest.mark.parametrize(("column", "spans"), [(0, "1:3"), (2, "2:3"), (7, "2:8")])
def test_spans_of_a_row_grow_with_it(book, column: int, spans: str) -> None:
    assert f'<row r="2" spans="{spans}" customFormat' in book.rows(ROW).sheet_after((1, column, [[9.0]]))


@pytest.mark.parametrize("spans", ["", "one:two", "1:", "-1:2"])
def test_spans_that_make_no_sense_stay(book, spans: str) -> None:
    after = book.rows(f'<row r="2" spans="{spans}"/>').sheet_after((1, 7, [[9.0]]))
    assert f'<row r="2" spans="{spans}"><c r="H2">' in after


def test_new_rows_stand_in_order(book) -> None:
    row = '<row r="4"><c r="A4"><v>4</v></c></row>'
    after = book.rows(row).sheet_after((5, 0, [[6.0]]), (2, 1, [[3.0]]), (0, 0, [[1.0]]))
    assert after == (
        '<sheetData><row r="1"><c r="A1"><v>1.0</v></c></row><row r="3"><c r="B3"><v>3.0</v></c></row>'
        f'{row}<row r="6"><c r="A6"><v>6.0</v></c></row></sheetData>'
    )


def test_empty_row_opens(book) -> None:
    book.rows('<row r="1" ht="20" /><row r="2"/>')
    assert book.sheet_after((0, 0, [[1.0, 2.0]])) == (
        '<sheetData><row r="1" ht="20"><c r="A1"><v>1.0</v></c><c r="B1"><v>2.0</v></c></row><row r="2"/></sheetData>'
    )


def test_row_without_cells_but_with_an_end_tag_takes_cells(book) -> None:
    book.rows('<row r="1"> </row>')
    assert book.sheet_after((0, 1, [[1.0]])) == ('<sheetData><row r="1"> <c r="B1"><v>1.0</v></c></row></sheetData>')


@pytest.mark.parametrize("data", ["<sheetData/>", "<sheetData />", "<sheetData></sheetData>"])
def test_empty_sheet_takes_rows(book, data: str) -> None:
    after = book.sheet(f"{data}<pageMargins/>").sheet_after((1, 0, [["a"]]))
    assert after == (
        '<sheetData><row r="2"><c r="A2" t="inlineStr"><is><t>a</t></is></c></row></sheetData><pageMargins/>'
    )


def test_new_cell_takes_the_format_of_its_column(book) -> None:
    book.sheet('<cols><col min="2" max="3" width="9" style="4"/><col min="4" max="4" width="9"/></cols><sheetData/>')
    after = book.sheet_after((0, 0, [[1.0, 2.0, 3.0, 4.0]]))
    assert (
        '<c r="A1"><v>1.0</v></c><c r="B1" s="4"><v>2.0</v></c><c r="C1" s="4"><v>3.0</v></c><c r="D1"><v>4.0</v></c>'
    ) in after


def test_format_of_a_row_that_is_not_its_own_is_not_taken(book) -> None:
    book.sheet('<cols><col min="1" max="9" style="4"/></cols><sheetData><row r="1" s="7"/></sheetData>')
    assert '<c r="A1" s="4">' in book.sheet_after((0, 0, [[1.0]]))


@pytest.mark.parametrize(
    ("before", "after"),
    [
        ('<dimension ref="B2:C3"/>', '<dimension ref="A2:E5"/>'),
        ('<dimension ref="A1:Z99"/>', '<dimension ref="A1:Z99"/>'),
        ('<dimension x=" ref=\'A1\'" ref="C3" />', '<dimension x=" ref=\'A1\'" ref="A3:E5" />'),
        ('<dimension ref="all of it"/>', '<dimension ref="all of it"/>'),
        ("<dimension/>", "<dimension/>"),
    ],
)
def test_dimension_grows_where_it_is_one(book, before: str, after: str) -> None:
    book.sheet(f"{before}<sheetData/>")
    found = book.sheet_after((4, 4, [[1.0]]), (2, 0, [[1.0]]))
    # The reference that is missing altogether stands for A1.
    assert found.startswith(after.replace("<dimension/>", '<dimension ref="A1:E5"/>'))


def test_clearing_keeps_the_cell_and_its_format(book) -> None:
    book.rows('<row r="1"><c r="A1" s="3" t="str"><v>x</v></c><c r="B1"><v>1</v></c></row>')
    assert book.sheet_after((0, 0, [[None]])) == (
        '<sheetData><row r="1"><c r="A1" s="3"/><c r="B1"><v>1</v></c></row></sheetData>'
    )


def test_clearing_what_is_not_there_changes_nothing(book) -> None:
    sheet = '<dimension ref="A1"/><sheetData><row r="1" spans="1:1"/></sheetData>'
    assert book.sheet(sheet).sheet_after((0, 0, [[None] * 9] * 9)) == sheet


def test_last_of_several_values_for_a_cell_counts(book) -> None:
    assert '<c r="A1"><v>3.0</v></c>' in book.sheet_after((0, 0, [[1.0]]), (0, 0, [[None]]), (0, 0, [[3.0]]))


def test_writing_back_what_stood_there_changes_nothing(book) -> None:
    rows = '<row r="1"><c r="A1"><v>1.00</v></c></row>'
    assert book.rows(rows).sheet_after((0, 0, [[5.0]]), (0, 0, [[1.0]])) == f"<sheetData>{rows}</sheetData>"
