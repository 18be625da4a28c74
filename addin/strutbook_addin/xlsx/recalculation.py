"""Formulas calculated by a library on a copy in memory, and what that says about stored values."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass

from strutbook_addin.sheets import is_ours
from strutbook_addin.xlsx.book_part import BookPart, read_book_part
from strutbook_addin.xlsx.errors import UnreadableWorkbook
from strutbook_addin.xlsx.package import Package
from strutbook_addin.xlsx.patching import Stored
from strutbook_addin.xlsx.scanning import scan
from strutbook_addin.xlsx.sheet_part import Cell, SheetPart

_MACRO_CONTENT = b"application/vnd.ms-excel.sheet.macroEnabled.main+xml"
_PLAIN_CONTENT = b"application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"
_TEXT_KINDS = ("str", "inlineStr")


@dataclass(frozen=True, eq=False)
class Recalculated:
    """A copy of a workbook with all its formulas calculated, or why there is none."""

    book: BookPart | None
    reason: str = ""

    def cells(self, sheet: str) -> dict[tuple[int, int], Cell]:
        """Cells of a sheet with calculated values; none where the workbook could not be calculated."""
        if self.book is None or sheet not in self.book.sheets:
            return {}
        part = self.book.sheets[sheet]
        return scan(self.book.package.read(part), part).cells


def recalculated(package: Package) -> Recalculated:
    """Calculate every formula of a workbook; the workbook itself stays as it is."""
    from formualizer import recalculate_xlsx_bytes

    data = package.data
    name = package.find("[Content_Types].xml") or ""
    content_types = package.read(name)
    if _MACRO_CONTENT in content_types:
        # The library opens workbooks without macros only.
        data = package.packed({name: content_types.replace(_MACRO_CONTENT, _PLAIN_CONTENT)})
    try:
        result = recalculate_xlsx_bytes(data)["bytes"]
        return Recalculated(read_book_part(Package(result)))
    except (KeyboardInterrupt, SystemExit):
        raise
    except UnreadableWorkbook as error:
        return Recalculated(None, str(error))
    except BaseException as error:  # noqa: BLE001 - a fault inside the library arrives outside of Exception
        return Recalculated(None, str(error).removeprefix("recalculate XLSX failed: "))


def user_formulas(sheet: SheetPart) -> Iterator[tuple[tuple[int, int], Cell]]:
    """Formula cells of a sheet that are not of our making."""
    for place in sheet.formulas:
        cell = sheet.cells[place]
        if not is_ours(cell.formula or ""):
            yield place, cell


def refreshed_values(
    sheet: SheetPart, before: dict[tuple[int, int], Cell], after: dict[tuple[int, int], Cell]
) -> dict[tuple[int, int], Stored]:
    """New stored values of the formulas of a sheet on which something written had an effect.

    A formula is refreshed only where the library reproduces the value that was stored for it before;
    otherwise its stored value goes (None), and the program that opens the workbook calculates it.

    Parameters
    ----------
    sheet : SheetPart
        The sheet with the values that are stored now.
    before, after : dict
        Calculated cells of the sheet, without and with what was written.
    """
    changed: dict[tuple[int, int], Stored] = {}
    for place, cell in user_formulas(sheet):
        if cell.value is None:
            continue
        new, old = after.get(place), before.get(place)
        if new is None or old is None or (new.kind == "e" and not same_value(new, cell)):
            changed[place] = None
        elif (new.kind, new.value) != (old.kind, old.value):
            changed[place] = _stored(new) if same_value(old, cell) else None
    return changed


def same_value(one: Cell, other: Cell) -> bool:
    """Whether two cells store one value, but for rounding."""
    if one.kind == other.kind == "n" and one.value and other.value:
        return math.isclose(float(one.value), float(other.value), rel_tol=1e-9, abs_tol=1e-12)
    same_kind = one.kind == other.kind or (one.kind in _TEXT_KINDS and other.kind in _TEXT_KINDS)
    return same_kind and (one.value or "") == (other.value or "")


def _stored(cell: Cell) -> Stored:
    if cell.kind == "n" and cell.value:
        return float(cell.value)
    if cell.kind == "b":
        return cell.value == "1"
    return cell.value if cell.kind in _TEXT_KINDS else None
