"""What cells hold, from what is stored for them, and back."""

from __future__ import annotations

import math
from datetime import date, datetime, time, timedelta

import numpy as np
import pytest

from strutbook_addin.sheets import ErrorValue, Formula
from strutbook_addin.xlsx import UnreadableWorkbook

SHARED = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
STYLES = (
    f'<styleSheet xmlns="{SHARED}"><numFmts count="4"><numFmt numFmtId="164" formatCode="0.0&quot; mm&quot;"/>'
    '<numFmt numFmtId="165" formatCode="d\\.\\ mmm yyyy"/><numFmt numFmtId="166" formatCode="[h]:mm"/>'
    '<numFmt numFmtId="15" formatCode="0.000"/></numFmts><cellXfs count="7"><xf numFmtId="0"/>'
    '<xf numFmtId="164"/><xf numFmtId="165"/><xf numFmtId="166"/><xf numFmtId="14"/><xf numFmtId="15"/>'
    '<xf numFmtId="46"/></cellXfs></styleSheet>'
)
NUMBER, LENGTH, DAY, ELAPSED, BUILT_IN, REDEFINED, BUILT_IN_ELAPSED = range(7)


def value(book, cell: str):
    """Value of A1, of which the element is given without its reference."""
    (row,) = book.rows(f'<row r="1">{cell.replace("<c", "<c r=" + chr(34) + "A1" + chr(34), 1)}</row>').read()
    return row[0]


@pytest.mark.parametrize(
    ("cell", "expected"),
    [
        ("<c><v>1.5</v></c>", 1.5),
        ("<c><v> -2e-3 </v></c>", -0.002),
        ('<c t="n"><v>3</v></c>', 3.0),
        ('<c t="b"><v>1</v></c>', True),
        ('<c t="b"><v>0</v></c>', False),
        ('<c t="e"><v>#N/A</v></c>', ErrorValue("#N/A")),
        ('<c t="e"><f>1/0</f><v>#DIV/0!</v></c>', ErrorValue("#DIV/0!", "=1/0")),
        ('<c t="str"><f>"a"&amp;"b"</f><v>ab</v></c>', "ab"),
        ('<c t="str"><f>""</f><v></v></c>', ""),
        ('<c t="inlineStr"><is><t>plain</t></is></c>', "plain"),
        ('<c t="inlineStr"><is><t xml:space="preserve"> a </t></is></c>', " a "),
        ('<c t="inlineStr"><is><r><rPr><b/></rPr><t>U</t></r><r><t>3</t></r></is></c>', "U3"),
        ('<c t="inlineStr"><is><t>東京</t><rPh sb="0" eb="2"><t>トウキョウ</t></rPh></is></c>', "東京"),
        ('<c t="d"><v>2024-02-29</v></c>', date(2024, 2, 29)),
        ('<c t="d"><v>2024-02-29T06:30:00</v></c>', datetime(2024, 2, 29, 6, 30)),
        ('<c t="d"><v>2024-02-29T06:30:00Z</v></c>', datetime(2024, 2, 29, 6, 30)),
        ('<c t="d"><v>06:30:00</v></c>', time(6, 30)),
        ('<c t="str"><v>a_x000D_b_x005F_x000D_</v></c>', "a\rb_x000D_"),
        ('<c t="str"><v>_xD83D__xDE00_ _xD83D_</v></c>', "\U0001f600 \ufffd"),
        ("<c><v>1e999</v></c>", ErrorValue("1e999")),
        ("<c><v>nan</v></c>", ErrorValue("nan")),
    ],
)
def test_stored_value_is_read(book, cell: str, expected: object) -> None:
    found = value(book, cell)
    assert found == expected
    assert type(found) is type(expected)


@pytest.mark.parametrize("cell", ["<c/>", "<c><v/></c>", '<c t="s"><v/></c>', '<c t="inlineStr"><is/></c>'])
def test_cell_without_value_is_blank(book, cell: str) -> None:
    assert book.rows(f'<row r="1">{cell}</row>').read() == []


@pytest.mark.parametrize(
    "cell",
    [
        "<c><v>one</v></c>",
        '<c t="s"><v>5</v></c>',
        '<c t="s"><v>-1</v></c>',
        '<c t="odd"><v>5</v></c>',
        '<c t="d"><v>2024-02-31</v></c>',
    ],
)
def test_value_that_is_not_what_it_says_names_the_cell(book, cell: str) -> None:
    book.relate("rId8", "sharedStrings", "sharedStrings.xml", f'<sst xmlns="{SHARED}"><si><t>a</t></si></sst>')
    with pytest.raises(UnreadableWorkbook, match=r"sheet1\.xml, cell A1, is damaged"):
        value(book, cell)


def test_shared_texts_are_read_without_their_looks(book) -> None:
    book.relate(
        "rId8",
        "sharedStrings",
        "sharedStrings.xml",
        f'<sst xmlns="{SHARED}"><si><t>a</t></si><si><r><t>ri</t></r><r><rPr/><t xml:space="preserve">ch </t></r>'
        '<rPh sb="0" eb="1"><t>reading</t></rPh></si><si/></sst>',
    )
    rows = '<row r="1">' + "".join(f'<c t="s"><v>{index}</v></c>' for index in range(3)) + "</row>"
    assert book.rows(rows).read() == [["a", "rich ", ""]]


@pytest.mark.parametrize(
    ("style", "number", "expected"),
    [
        (NUMBER, 45351, 45351.0),
        (LENGTH, 45351, 45351.0),
        (REDEFINED, 45351, 45351.0),
        (DAY, 45351, date(2024, 2, 29)),
        (BUILT_IN, 45351.25, datetime(2024, 2, 29, 6)),
        (DAY, 0.75, time(18)),
        (DAY, 1, date(1900, 1, 1)),
        (DAY, 59, date(1900, 2, 28)),
        (DAY, 61, date(1900, 3, 1)),
        (DAY, 1e99, 1e99),
        (ELAPSED, 1.5, timedelta(hours=36)),
        (BUILT_IN_ELAPSED, 0.25, timedelta(hours=6)),
    ],
)
def test_number_is_a_date_where_its_format_shows_one(book, style: int, number: float, expected: object) -> None:
    book.relate("rId9", "styles", "styles.xml", STYLES)
    assert value(book, f'<c s="{style}"><v>{number}</v></c>') == expected


def test_dates_may_be_counted_from_1904(book) -> None:
    book.relate("rId9", "styles", "styles.xml", STYLES)
    book.replace("xl/workbook.xml", "<sheets>", '<workbookPr date1904="1"/><sheets>')
    assert value(book, f'<c s="{DAY}"><v>43889</v></c>') == date(2024, 2, 29)


@pytest.mark.parametrize(
    ("written", "cell"),
    [
        (1.0, '<c r="A1"><v>1.0</v></c>'),
        (3, '<c r="A1"><v>3</v></c>'),
        (-1e-300, '<c r="A1"><v>-1e-300</v></c>'),
        (np.float64(0.1), '<c r="A1"><v>0.1</v></c>'),
        (np.int64(4), '<c r="A1"><v>4.0</v></c>'),
        ("=U1", '<c r="A1" t="inlineStr"><is><t>=U1</t></is></c>'),
        ("a <b> & c", '<c r="A1" t="inlineStr"><is><t>a &lt;b&gt; &amp; c</t></is></c>'),
        (" U1", '<c r="A1" t="inlineStr"><is><t xml:space="preserve"> U1</t></is></c>'),
        ("two\nlines", '<c r="A1" t="inlineStr"><is><t xml:space="preserve">two\nlines</t></is></c>'),
        ("_x0041_", '<c r="A1" t="inlineStr"><is><t>_x005F_x0041_</t></is></c>'),
        ("a\r\x07", '<c r="A1" t="inlineStr"><is><t>a_x000D__x0007_</t></is></c>'),
        (Formula("=SUM(B1:B3)", 6.0), '<c r="A1"><f>SUM(B1:B3)</f><v>6.0</v></c>'),
        (Formula('="<"', "<"), '<c r="A1" t="str"><f>"&lt;"</f><v>&lt;</v></c>'),
        (Formula("=0/0", math.nan), '<c r="A1"><f>0/0</f></c>'),
    ],
)
def test_value_is_stored(book, written: object, cell: str) -> None:
    after = book.sheet_after((0, 0, [[written]]))
    assert after == f'<sheetData><row r="1">{cell}</row></sheetData>'


@pytest.mark.parametrize("number", [math.nan, math.inf, -math.inf, np.float64("nan")])
def test_what_is_no_number_clears_the_cell(book, number: float) -> None:
    book.rows('<row r="1"><c r="A1" s="0"><v>1</v></c></row>')
    assert book.sheet_after((0, 0, [[number]])) == '<sheetData><row r="1"><c r="A1" s="0"/></row></sheetData>'


def test_text_longer_than_a_cell_can_hold_is_cut(book) -> None:
    book.write((0, 0, [["x" * 40_000]]))
    assert book.reopened().read("S") == [["x" * 32_767]]
