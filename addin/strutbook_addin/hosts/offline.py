"""A workbook file as `Sheets`: no spreadsheet program is needed."""

from __future__ import annotations

import math
import re
from collections.abc import Mapping, Sequence
from operator import itemgetter
from pathlib import Path

from strutbook_addin.findings import Finding
from strutbook_addin.sheets import CellValue, Formula, Grid, Refusal, Written, cell_name
from strutbook_addin.xlsx.book_part import BookPart, read_book_part
from strutbook_addin.xlsx.cell_values import stored_values
from strutbook_addin.xlsx.dependence import following_sheets
from strutbook_addin.xlsx.errors import UnreadableWorkbook, UnwritableWorkbook
from strutbook_addin.xlsx.formula_values import formula_values
from strutbook_addin.xlsx.new_parts import BookChanges
from strutbook_addin.xlsx.objections import Objections
from strutbook_addin.xlsx.package import Package
from strutbook_addin.xlsx.patching import patched, stored_values_changed
from strutbook_addin.xlsx.recalculation import Recalculated, recalculated, refreshed_values, user_formulas
from strutbook_addin.xlsx.saving import check_target, replace_file
from strutbook_addin.xlsx.scanning import scan
from strutbook_addin.xlsx.sheet_part import COLUMNS, ROWS, Cell, SheetPart

#: Most cells, empty ones between them included, that a sheet is read into.
GRID_LIMIT = 5_000_000
_FORMULA = re.compile(rb"<(?:[\w.-]+:)?f[\s/>]")
_Place = tuple[int, int]
_Places = list[tuple[_Place, Written]]


class OfflineWorkbook:
    """A workbook file, read into memory; `save` writes it with what was changed."""

    def __init__(self, path: Path, package: Package, book: BookPart, stamp: tuple[int, int]) -> None:
        self._path = path
        self._package = package
        self._book = book
        self._stamp = stamp
        self._parts: dict[str, SheetPart] = {}
        self._values: dict[str, dict[_Place, CellValue]] = {}
        self._objections: dict[str, Objections] = {}
        self._edits: dict[str, dict[_Place, Written]] = {}
        self._findings: list[Finding] = []
        self._original: Recalculated | None = None

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
        values = self._stored(sheet) if sheet in self._book.sheets else {}
        edits = self._edits.get(sheet)
        if edits:
            written = {place: value.value if isinstance(value, Formula) else value for place, value in edits.items()}
            merged = sorted((values | written).items(), key=itemgetter(0))
            values = {place: value for place, value in merged if value is not None}
        return _grid(values, sheet)

    def write(self, sheet: str, row: int, column: int, values: Sequence[Sequence[Written]]) -> list[Refusal]:
        """Write a rectangle whose upper left cell is given; None clears a cell."""
        if sheet not in self._book.sheets:
            if any(sheet.casefold() == other.casefold() for other in self._book.other_sheets):
                return [Refusal(sheet, row, column, "the sheet of this name holds a chart and no cells")]
            within, refusals = _within_sheet(sheet, row, column, values)
            self._edits.setdefault(sheet, {}).update(within)
            return refusals
        cells, stored = self._part(sheet).cells, self._stored(sheet)
        objections = self._objections_on(sheet)
        edits = self._edits.setdefault(sheet, {})
        within, refusals = _within_sheet(sheet, row, column, values)
        for place, value in within:
            cell = cells.get(place)
            if _holds(cell, stored.get(place), value):
                if place in edits:
                    del edits[place]
                continue
            objection = objections.to_clearing if value is None else objections.to_writing
            reason = objection(place, cell)
            if reason:
                refusals.append(Refusal(sheet, *place, reason))
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
            When the workbook is signed, the target is of another kind, read-only or open,
            or the file was changed meanwhile.
        """
        if any(name.casefold().startswith("_xmlsignatures/") for name in self._package.names()):
            raise UnwritableWorkbook(
                "it carries a digital signature, which any change would break. Remove the signature, or solve a copy."
            )
        kind, named = self._path.suffix, target.suffix
        if kind.casefold() != named.casefold():
            raise UnwritableWorkbook(
                f"results of a {kind} workbook cannot be written as {named or 'a file of no kind'}: "
                f"a spreadsheet program would not open it. Name a {kind} file."
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
        """Values in a sheet as it was opened, row by row; formulas without a trusted value are calculated."""
        if sheet not in self._values:
            part = self._part(sheet)
            values = self._values[sheet] = stored_values(part, self._book)
            if part.formulas:
                found = formula_values(sheet, part, self._book, self._recalculated_original)
                if found.values:
                    self._values[sheet] = dict(sorted((values | found.values).items(), key=itemgetter(0)))
                self._findings.extend(found.findings(sheet))
        return self._values[sheet]

    def _recalculated_original(self) -> Recalculated:
        if self._original is None:
            self._original = recalculated(self._package)
        return self._original

    def _objections_on(self, sheet: str) -> Objections:
        if sheet not in self._objections:
            self._objections[sheet] = Objections(self._package, self._part(sheet))
        return self._objections[sheet]

    def _packed(self) -> bytes:
        """The file with everything that was changed."""
        parts: dict[str, bytes] = {}
        changes = BookChanges(self._book)
        for sheet, edits in self._edits.items():
            if sheet not in self._book.sheets:
                if any(value is not None for value in edits.values()):
                    changes.new_sheets[sheet] = edits
            elif edits:
                part = self._part(sheet)
                parts[self._file_name(sheet)] = patched(part, edits)
                changes.drop_calculation_chain |= _formula_goes(part, edits)
        formulas = self._sheets_with_formulas() if parts else {}
        if formulas:
            changes.calculate_on_load = True
            self._refresh(parts, formulas)
        changed, removed = changes.parts()
        return self._package.packed(parts | changed, removed)

    def _sheets_with_formulas(self) -> dict[str, list[str]]:
        """Sheets with formulas of the user's, and the texts of these."""
        found: dict[str, list[str]] = {}
        for sheet, part in self._book.sheets.items():
            if sheet in self._parts or _FORMULA.search(self._package.read(part)):
                texts = [cell.formula or "" for _, cell in user_formulas(self._part(sheet))]
                if texts:
                    found[sheet] = texts
        return found

    def _refresh(self, parts: dict[str, bytes], formulas: dict[str, list[str]]) -> None:
        """Keep no stored value of a formula that follows from what was overwritten."""
        written = {sheet for sheet, edits in self._edits.items() if edits}
        following = set(formulas)
        if not self._book.has_macros:
            following = following_sheets(written, formulas, self._book.defined_names)
        if not following:
            return
        before = self._recalculated_original()
        after = recalculated(Package(self._package.packed(parts)))
        for sheet in following:
            part = self._file_name(sheet)
            now = scan(parts[part], part) if part in parts else self._part(sheet)
            values = refreshed_values(now, before.cells(sheet), after.cells(sheet))
            if values:
                parts[part] = stored_values_changed(now, values)

    def _file_name(self, sheet: str) -> str:
        """Name of the part of a sheet as the file has it."""
        part = self._book.sheets[sheet]
        return self._package.find(part) or part


def _formula_goes(part: SheetPart, edits: Mapping[_Place, Written]) -> bool:
    """Whether a formula is overwritten by something else, so that the calculation chain is wrong."""
    return any(
        place in part.cells and part.cells[place].formula is not None and not isinstance(value, Formula)
        for place, value in edits.items()
    )


def _stamp(path: Path) -> tuple[int, int]:
    state = path.stat()
    return state.st_mtime_ns, state.st_size


def _within_sheet(
    sheet: str, row: int, column: int, values: Sequence[Sequence[Written]]
) -> tuple[_Places, list[Refusal]]:
    """Values with their places, and refusals of those to whose places no sheet reaches."""
    places = _places(row, column, values)
    if row + len(values) <= ROWS and column + max(map(len, values), default=0) <= COLUMNS:
        return places, []
    within = [(place, value) for place, value in places if place[0] < ROWS and place[1] < COLUMNS]
    kept = dict(within)
    return within, [
        Refusal(sheet, *place, "no sheet reaches so far")
        for place, value in places
        if place not in kept and value is not None
    ]


def _holds(cell: Cell | None, stored: CellValue, value: Written) -> bool:
    """Whether a cell holds already what is to be written."""
    if cell is None:
        return value is None
    if cell.formula is not None:
        return isinstance(value, Formula) and (cell.formula, cell.value) == (value.text[1:], value.value)
    # True and 1.0 are equal, and only one of them is a result.
    return stored == value and (type(stored) is type(value) or not isinstance(stored, bool))


def _places(row: int, column: int, values: Sequence[Sequence[Written]]) -> _Places:
    """Values with their places; what is no number clears its cell."""
    return [
        ((at, column + across), None if isinstance(value, float) and not math.isfinite(value) else value)
        for at, line in enumerate(values, row)
        for across, value in enumerate(line)
    ]


def _grid(values: Mapping[_Place, CellValue], sheet: str) -> Grid:
    """Rows of values that come row by row."""
    grid: Grid = []
    line: list[CellValue] = []
    size, last = 0, -1
    for (row, column), value in values.items():
        if row != last:
            size += len(line) + row - last
            if size > GRID_LIMIT:
                raise UnreadableWorkbook(
                    f"the sheet {sheet} reaches to {cell_name(row, column)}, too far to be read. "
                    "Delete what stands far outside of the tables."
                )
            grid.extend([] for _ in range(row - last))
            line, last = grid[row], row
        if column > len(line):
            line.extend([None] * (column - len(line)))
        line.append(value)
    return grid
