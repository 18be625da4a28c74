"""Any cells and any edits: independent readers find the original with the edits, and no other byte changes."""

from __future__ import annotations

import math
import re
from io import BytesIO
from pathlib import Path
from tempfile import TemporaryDirectory

import openpyxl
from hypothesis import given, settings
from hypothesis import strategies as st
from python_calamine import CalamineWorkbook

from strutbook_addin.hosts.offline import OfflineWorkbook

places = st.tuples(st.integers(0, 12), st.integers(0, 30))
# Line ends are read alike by no two readers; a lone carriage return is tested by itself.
texts = st.text(
    st.characters(exclude_categories=["Cs", "Cc"], exclude_characters="\ufffe\uffff"), min_size=1, max_size=12
)
numbers = st.floats(-1e307, 1e307) | st.integers(-(2**53), 2**53)
# The library that writes the originals keeps no more digits.
short_numbers = numbers.map(lambda number: float(f"{number:.15g}"))
grids = st.dictionaries(places, short_numbers | texts | st.booleans(), max_size=40)
edits = st.dictionaries(places, st.none() | numbers | texts | st.just(math.nan), max_size=40)
Cells = dict[tuple[int, int], object]


def workbook_of(cells: Cells, folder: Path) -> Path:
    """Workbook with these cells; texts stay texts even where they look like formulas."""
    workbook = openpyxl.Workbook()
    sheet = workbook.active
    for (row, column), value in cells.items():
        cell = sheet.cell(row + 1, column + 1)
        if isinstance(value, str):
            # The library would look for formulas and errors in the text, and escapes nothing.
            cell.value = "text"
            cell._value = re.sub(r"_(?=x[0-9A-Fa-f]{4}_)", "_x005F_", value)
        else:
            cell.value = value
    path = folder / "book.xlsx"
    workbook.save(path)
    return path


def by_openpyxl(path: Path) -> Cells:
    """Cells as openpyxl reads them."""
    sheet = openpyxl.load_workbook(path, rich_text=False).active
    return {
        (cell.row - 1, cell.column - 1): cell.value
        for row in sheet.iter_rows()
        for cell in row
        if cell.value is not None
    }


def by_calamine(path: Path) -> Cells:
    """Cells as calamine reads them."""
    sheet = CalamineWorkbook.from_filelike(BytesIO(path.read_bytes())).get_sheet_by_index(0)
    return {
        (row, column): value
        for row, values in enumerate(sheet.to_python(skip_empty_area=False))
        for column, value in enumerate(values)
        if value != ""
    }


def by_ourselves(path: Path) -> Cells:
    """Cells as a run reads them."""
    return {
        (row, column): value
        for row, values in enumerate(OfflineWorkbook.open(path).read("Sheet"))
        for column, value in enumerate(values)
        if value is not None
    }


def expected_after(cells: Cells, changes: Cells) -> Cells:
    """The original with the edits."""
    merged = cells | changes
    return {
        place: value
        for place, value in merged.items()
        if value is not None and not (isinstance(value, float) and math.isnan(value))
    }


def edited(path: Path, changes: Cells) -> None:
    """Write the edits one by one."""
    workbook = OfflineWorkbook.open(path)
    for place, value in changes.items():
        assert workbook.write("Sheet", *place, [[value]]) == []
    workbook.save(path)


def unescaped(cells: Cells) -> Cells:
    """What openpyxl reads, with the escapes of the format that it leaves in texts resolved."""
    return {
        place: re.sub(r"_x005F_", "_", value) if isinstance(value, str) else value for place, value in cells.items()
    }


@settings(deadline=None, max_examples=40)
@given(grids, edits)
def test_readers_find_the_original_with_the_edits(cells: Cells, changes: Cells) -> None:
    with TemporaryDirectory() as folder:
        path = workbook_of(cells, Path(folder))
        edited(path, changes)
        expected = expected_after(cells, changes)
        assert by_ourselves(path) == expected
        assert unescaped(by_openpyxl(path)) == expected
        assert by_calamine(path) == expected


@settings(deadline=None, max_examples=40)
@given(grids, edits)
def test_cells_that_are_not_edited_keep_their_bytes(cells: Cells, changes: Cells) -> None:
    cell = re.compile(r'<c r="([A-Z]+\d+)".*?(?:/>|</c>)', re.DOTALL)
    with TemporaryDirectory() as folder:
        path = workbook_of(cells, Path(folder))
        before = OfflineWorkbook.open(path)._package
        edited(path, changes)
        after = OfflineWorkbook.open(path)._package
        sheet = "xl/worksheets/sheet1.xml"
        changed = {openpyxl.utils.get_column_letter(column + 1) + str(row + 1) for row, column in changes}
        kept = [
            [found.group() for found in cell.finditer(package.read(sheet).decode()) if found[1] not in changed]
            for package in (before, after)
        ]
        assert kept[0] == kept[1]
        for part in before.names():
            assert part == sheet or before.read(part) == after.read(part)


@settings(deadline=None, max_examples=30)
@given(grids, edits)
def test_the_same_edits_a_second_time_change_nothing(cells: Cells, changes: Cells) -> None:
    with TemporaryDirectory() as folder:
        path = workbook_of(cells, Path(folder))
        edited(path, changes)
        once = path.read_bytes()
        edited(path, changes)
        assert path.read_bytes() == once
