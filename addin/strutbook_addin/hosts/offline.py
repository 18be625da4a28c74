"""A workbook file as `Sheets`: no spreadsheet program is needed."""

from __future__ import annotations

import math
import re
from collections.abc import Sequence
from pathlib import Path

from strutbook_addin.findings import Finding, Level
from strutbook_addin.sheets import CellValue, ErrorValue, Formula, Grid, Refusal, Written, cell_name, is_ours
from strutbook_addin.xlsx.book_part import BookPart, read_book_part
from strutbook_addin.xlsx.cell_values import value_of
from strutbook_addin.xlsx.errors import UnreadableWorkbook, UnwritableWorkbook
from strutbook_addin.xlsx.markup import attribute, damaged, parse
from strutbook_addin.xlsx.new_parts import BookChanges
from strutbook_addin.xlsx.package import Package
from strutbook_addin.xlsx.patching import patched, stored_values_changed
from strutbook_addin.xlsx.recalculation import (
    Recalculated,
    recalculated,
    refreshed_values,
    same_value,
    user_formulas,
)
from strutbook_addin.xlsx.relationships import relationships_of
from strutbook_addin.xlsx.saving import check_target, replace_file
from strutbook_addin.xlsx.sheet_part import Cell, SheetPart, area_of, scan

#: Most cells, empty ones between them included, that a sheet is read into.
GRID_LIMIT = 5_000_000
_FORMULA = re.compile(rb"<(?:[\w.-]+:)?f[\s/>]")
_Place = tuple[int, int]


class OfflineWorkbook:
    """A workbook file, read into memory; `save` writes it with what was changed."""

    def __init__(self, path: Path, package: Package, book: BookPart, stamp: tuple[int, int]) -> None:
        self._path = path
        self._package = package
        self._book = book
        self._stamp = stamp
        self._parts: dict[str, SheetPart] = {}
        self._blocked: dict[str, dict[_Place, str]] = {}
        self._edits: dict[str, dict[_Place, Written]] = {}
        self._findings: list[Finding] = []
        self._original: Recalculated | None = None
        self._formula_gone = False

    @classmethod
    def open(cls, path: Path) -> OfflineWorkbook:
        """Read a workbook file.

        Raises
        ------
        UnreadableWorkbook
            With a sentence that says why.
        OSError
            When the file is not there or may not be read.
        """
        stamp = _stamp(path)
        package = Package.open(path)
        return cls(path, package, read_book_part(package), stamp)

    def names(self) -> list[str]:
        """Names of the sheets that hold cells, in their order."""
        return [*self._book.sheets, *(name for name in self._edits if name not in self._book.sheets)]

    def read(self, sheet: str) -> Grid:
        """Values from A1 to the last used cell, as rows; rows may differ in length."""
        values: dict[_Place, CellValue] = {}
        if sheet in self._book.sheets:
            values = self._stored(sheet)
        for place, written in self._edits.get(sheet, {}).items():
            values[place] = written.value if isinstance(written, Formula) else written
        return _grid(values, sheet)

    def write(self, sheet: str, row: int, column: int, values: Sequence[Sequence[Written]]) -> list[Refusal]:
        """Write a rectangle whose upper left cell is given; None clears a cell."""
        if sheet not in self._book.sheets:
            if any(sheet.casefold() == other.casefold() for other in self._book.other_sheets):
                return [Refusal(sheet, row, column, "the sheet of this name holds a chart and no cells")]
            edits = self._edits.setdefault(sheet, {})
            for place, value in _places(row, column, values):
                edits[place] = value
            return []
        part, blocked = self._part(sheet), self._blocked_cells(sheet)
        edits = self._edits.setdefault(sheet, {})
        refusals: list[Refusal] = []
        for place, value in _places(row, column, values):
            cell = part.cells.get(place)
            reason = self._objection(place, cell, value, blocked)
            if reason:
                refusals.append(Refusal(sheet, *place, reason))
            elif self._holds(cell, value):
                edits.pop(place, None)
            else:
                edits[place] = value
        return refusals

    def clear(self, sheet: str, row: int, column: int, rows: int, columns: int) -> list[Refusal]:
        """Remove the values of a rectangle and keep its look."""
        if sheet not in self._book.sheets and sheet not in self._edits:
            return []
        return self.write(sheet, row, column, [[None] * columns] * rows)

    def findings(self) -> list[Finding]:
        """Formulas that were calculated here because no value was stored, or none that can be trusted."""
        return list(self._findings)

    def save(self, target: Path) -> None:
        """Write the workbook; the target is replaced whole or not at all.

        Raises
        ------
        UnwritableWorkbook
            When the workbook is signed, the target is read-only or open, or the file was changed meanwhile.
        """
        if any(name.casefold().startswith("_xmlsignatures/") for name in self._package.names()):
            raise UnwritableWorkbook(
                "it carries a digital signature, which any change would break. Remove the signature, or solve a copy."
            )
        check_target(target)
        data = self._packed()
        if target.exists() and target.samefile(self._path) and _stamp(self._path) != self._stamp:
            raise UnwritableWorkbook("it was changed by another program while it was being solved. Solve it again.")
        replace_file(target, data)

    def _part(self, sheet: str) -> SheetPart:
        if sheet not in self._parts:
            part = self._book.sheets[sheet]
            self._parts[sheet] = scan(self._package.read(part), part)
        return self._parts[sheet]

    def _stored(self, sheet: str) -> dict[_Place, CellValue]:
        """Values of the cells of a sheet, formulas without a trusted value calculated."""
        part = self._part(sheet)
        book = self._book
        values: dict[_Place, CellValue] = {}
        place = (0, 0)
        try:
            for place, cell in part.cells.items():
                value = value_of(cell, book)
                if value is not None:
                    values[place] = value
        except (ValueError, IndexError) as error:
            raise damaged(f"{part.name}, cell {cell_name(*place)},", error) from error
        if part.has_formulas:
            values.update(self._calculated(sheet, part))
        return values

    def _calculated(self, sheet: str, part: SheetPart) -> dict[_Place, CellValue]:
        """Values of formulas that store none, or one that the workbook itself declares out of date."""
        on_load = self._book.calculates_on_load
        wanted = {place: cell for place, cell in user_formulas(part) if on_load or cell.awaits_value}
        if not wanted:
            return {}
        calculated = self._recalculated_original()
        cells = calculated.cells(sheet)
        values: dict[_Place, CellValue] = {}
        done: list[_Place] = []
        unsure: list[_Place] = []
        for place, cell in wanted.items():
            new = cells.get(place)
            failed = new is None or new.kind == "e"
            if cell.awaits_value:
                if new is None:
                    error = f"not calculated ({calculated.reason or 'the library left it out'})"
                    values[place] = ErrorValue(error, f"={cell.formula}")
                    continue
                new.attributes.setdefault("s", cell.attributes.get("s", "0"))
                values[place] = value_of(new, calculated.book or self._book)
                if isinstance(values[place], ErrorValue):
                    values[place] = ErrorValue(new.value or "", f"={cell.formula}")
                else:
                    done.append(place)
            elif failed and (new is None or not same_value(new, cell)):
                unsure.append(place)
            elif new is not None and not same_value(new, cell):
                values[place] = value_of(new, calculated.book or self._book)
                done.append(place)
        self._note_calculated(sheet, done, unsure)
        return values

    def _note_calculated(self, sheet: str, done: list[_Place], unsure: list[_Place]) -> None:
        if done:
            self._findings.append(
                Finding(
                    Level.NOTE,
                    f"the file stores no current value for {_listed(done)}; calculated here.",
                    "Open the workbook in your spreadsheet program and save it to have its values used.",
                    sheet,
                    *done[0],
                )
            )
        if unsure:
            self._findings.append(
                Finding(
                    Level.LOOK,
                    f"{_listed(unsure)} could not be calculated here; the stored values were used, "
                    "though the file declares them out of date.",
                    "Open the workbook in your spreadsheet program, save it, and solve again.",
                    sheet,
                    *unsure[0],
                )
            )

    def _recalculated_original(self) -> Recalculated:
        if self._original is None:
            self._original = recalculated(self._package, self._package.data)
        return self._original

    def _objection(self, place: _Place, cell: Cell | None, value: Written, blocked: dict[_Place, str]) -> str:
        """Why a cell is not written, or nothing."""
        if cell is not None and cell.formula is not None:
            if not is_ours(cell.formula):
                return (
                    f"a formula of yours stands there (={cell.formula})"
                    if cell.formula
                    else ("a formula of yours stands there")
                )
            self._formula_gone = self._formula_gone or not isinstance(value, Formula)
        reason = blocked.get(place, "")
        if reason and value is None and (cell is None or cell.value is None):
            return ""
        if reason.startswith("it is the header") and self._holds(cell, value):
            return ""
        return reason

    def _holds(self, cell: Cell | None, value: Written) -> bool:
        """Whether a cell stores a value already."""
        if cell is None:
            return value is None
        if cell.formula is not None:
            return isinstance(value, Formula) and (cell.formula, cell.value) == (value.text[1:], value.value)
        stored = None if cell.value is None else value_of(cell, self._book)
        if isinstance(value, (int, float)) and isinstance(stored, (int, float)):
            return not isinstance(stored, bool) and stored == value
        return type(stored) is type(value) and stored == value

    def _blocked_cells(self, sheet: str) -> dict[_Place, str]:
        if sheet not in self._blocked:
            part = self._part(sheet)
            blocked: dict[_Place, str] = {}
            for area in part.arrays:
                for row in range(area.first_row, area.last_row + 1):
                    for column in range(area.first_column, area.last_column + 1):
                        blocked[row, column] = "it belongs to an array formula or a data table of yours"
            for area in part.merged:
                for row in range(area.first_row, area.last_row + 1):
                    for column in range(area.first_column, area.last_column + 1):
                        blocked[row, column] = "it is hidden under a merged cell; unmerge it"
                blocked.pop((area.first_row, area.first_column), None)
            blocked.update(self._table_headers(part))
            self._blocked[sheet] = blocked
        return self._blocked[sheet]

    def _table_headers(self, part: SheetPart) -> dict[_Place, str]:
        """Header cells of the tables of a sheet: their texts name the tables' columns."""
        if not part.table_relationships:
            return {}
        headers: dict[_Place, str] = {}
        for relationship in relationships_of(self._package, part.name):
            if relationship.identity not in part.table_relationships:
                continue
            root = parse(self._package.read(relationship.target), relationship.target)
            if attribute(root, "headerRowCount") == "0":
                continue
            area = area_of(attribute(root, "ref"))
            name = attribute(root, "displayName")
            for column in range(area.first_column, area.last_column + 1):
                headers[area.first_row, column] = f"it is the header of a column of the table {name}"
        return headers

    def _packed(self) -> bytes:
        """The file with everything that was changed."""
        parts: dict[str, bytes] = {}
        changes = BookChanges(self._book)
        for sheet, edits in self._edits.items():
            if sheet not in self._book.sheets:
                if any(value is not None for value in edits.values()):
                    changes.new_sheets[sheet] = edits
            elif edits:
                parts[self._package.find(self._book.sheets[sheet]) or ""] = patched(self._part(sheet), edits)
        formulas = self._sheets_with_formulas() if parts else []
        if formulas:
            changes.calculate_on_load = True
            self._refresh(parts, formulas)
        changes.drop_calculation_chain = self._formula_gone
        changed, removed = changes.parts()
        return self._package.packed(parts | changed, removed)

    def _sheets_with_formulas(self) -> list[str]:
        """Sheets with formulas of the user's."""
        return [
            sheet
            for sheet, part in self._book.sheets.items()
            if (sheet in self._parts or _FORMULA.search(self._package.read(part)))
            and any(True for _ in user_formulas(self._part(sheet)))
        ]

    def _refresh(self, parts: dict[str, bytes], formulas: list[str]) -> None:
        """Keep no stored value of a formula that follows from what was overwritten."""
        before = self._recalculated_original()
        after = recalculated(self._package, self._package.packed(parts))
        for sheet in formulas:
            part = self._package.find(self._book.sheets[sheet]) or ""
            now = scan(parts.get(part, self._part(sheet).data), part)
            values = refreshed_values(now, before.cells(sheet), after.cells(sheet))
            if values:
                parts[part] = stored_values_changed(now, values)


def _stamp(path: Path) -> tuple[int, int]:
    state = path.stat()
    return state.st_mtime_ns, state.st_size


def _places(row: int, column: int, values: Sequence[Sequence[Written]]) -> list[tuple[_Place, Written]]:
    return [
        (
            (row + down, column + across),
            None if isinstance(value, float) and not math.isfinite(value) else value,
        )
        for down, line in enumerate(values)
        for across, value in enumerate(line)
    ]


def _grid(values: dict[_Place, CellValue], sheet: str) -> Grid:
    grid: Grid = []
    size = 0
    for row, column in sorted(values):
        value = values[row, column]
        if value is None:
            continue
        if row >= len(grid):
            grid.extend([] for _ in range(row + 1 - len(grid)))
        line = grid[row]
        size += column + 1 - len(line)
        if size + row > GRID_LIMIT:
            raise UnreadableWorkbook(
                f"the sheet {sheet} reaches to {cell_name(row, column)}, too far to be read. "
                "Delete what stands far outside of the tables."
            )
        line.extend([None] * (column - len(line)))
        line.append(value)
    return grid


def _listed(places: list[_Place]) -> str:
    names = ", ".join(cell_name(*place) for place in places[:6])
    more = f" and {len(places) - 6} more" if len(places) > 6 else ""
    return f"the formula{'s' if len(places) > 1 else ''} in {names}{more}"
