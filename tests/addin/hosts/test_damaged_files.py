"""A workbook file that is damaged anywhere is read, or refused with a sentence; never anything else."""

from __future__ import annotations

import zipfile
from io import BytesIO
from pathlib import Path

import pytest
import xlsxwriter
from hypothesis import given, settings
from hypothesis import strategies as st

from strutbook_addin.hosts.offline import OfflineWorkbook
from strutbook_addin.xlsx import RefusedWorkbook

PIECES = st.sampled_from(
    [b"", b"<", b">", b'"', b"&", b"\xff", b"\0", b"0", b"-1", b"9" * 12, b"1e999", b'<c r="A1"/>', b"A1:XFD1048576"]
)
#: Where a part is cut open, how much goes, and what comes instead.
DAMAGE = st.lists(st.tuples(st.floats(0, 1), st.integers(0, 40), PIECES), min_size=1, max_size=3)


@pytest.fixture(scope="module")
def whole() -> dict[str, bytes]:
    """Parts of a workbook with a bit of everything that is read."""
    file = BytesIO()
    with xlsxwriter.Workbook(file, {"in_memory": True}) as book:
        date = book.add_format({"num_format": "yyyy-mm-dd"})
        sheet = book.add_worksheet("S")
        sheet.add_table("A1:B3", {"data": [["a", 1], ["b", 2]]})
        sheet.merge_range("D1:E2", "merged")
        sheet.write_formula("D4", "=B2*2", None, 2)
        sheet.write_array_formula("D5:D6", "{=B2:B3}", None, 1)
        sheet.write("D7", 45351, date)
        sheet.set_column("F:G", 9, date)
        book.add_worksheet("T").write("A1", "x")
    with zipfile.ZipFile(file) as archive:
        return {name: archive.read(name) for name in archive.namelist() if "docProps" not in name}


def damaged(content: bytes, damage: list[tuple[float, int, bytes]]) -> bytes:
    """Content with pieces cut out and others put in."""
    for place, length, piece in damage:
        start = int(place * len(content))
        content = content[:start] + piece + content[start + length :]
    return content


def refusal(path: Path) -> str:
    """Open, read, write, clear and save; the sentence of a refusal, or nothing."""
    try:
        workbook = OfflineWorkbook.open(path)
        for sheet in workbook.names():
            workbook.read(sheet)
        for sheet in [*workbook.names(), "New"]:
            workbook.write(sheet, 0, 0, [[1.5, "x", None]] * 9)
            workbook.clear(sheet, 3, 1, 3, 3)
        workbook.save(path)
        OfflineWorkbook.open(path).read("New")
    except RefusedWorkbook as refused:
        return str(refused)
    return ""


@settings(deadline=None, max_examples=150)
@given(part=st.integers(0, 99), damage=DAMAGE)
def test_damaged_part_is_no_fault(whole, tmp_path_factory, part: int, damage) -> None:
    path = tmp_path_factory.mktemp("damaged") / "book.xlsx"
    chosen = list(whole)[part % len(whole)]
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, content in whole.items():
            archive.writestr(name, damaged(content, damage) if name == chosen else content)
    assert refusal(path)[-1:] in ("", ".")


@settings(deadline=None, max_examples=100)
@given(damage=DAMAGE)
def test_damaged_package_is_no_fault(whole, tmp_path_factory, damage) -> None:
    path = tmp_path_factory.mktemp("damaged") / "book.xlsx"
    file = BytesIO()
    with zipfile.ZipFile(file, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, content in whole.items():
            archive.writestr(name, content)
    path.write_bytes(damaged(file.getvalue(), damage))
    assert refusal(path)[-1:] in ("", ".")
