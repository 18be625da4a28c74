"""Scanning of worksheet parts.

One pass serves reading and writing, so that what is written replaces exactly what was read.
"""

from __future__ import annotations

import gc
from collections.abc import Iterator
from contextlib import contextmanager
from xml.parsers import expat

from strutbook_addin.sheets import column_letters
from strutbook_addin.xlsx.doctypes import forbidden_doctype
from strutbook_addin.xlsx.errors import UnreadableWorkbook
from strutbook_addin.xlsx.markup import MAIN_NAMESPACES, as_utf8, damaged
from strutbook_addin.xlsx.sheet_part import (
    COLUMNS,
    ROWS,
    TEXT_LIMIT,
    Area,
    Cell,
    Row,
    SheetPart,
    area_of,
    column_number,
)

#: Most cells under merged areas and array formulas that are looked at in a sheet.
AREA_LIMIT = 1_000_000
#: Most cells, blank ones with a format included.
CELL_LIMIT = 5_000_000


def scan(data: bytes, part: str) -> SheetPart:
    """Scan a worksheet part.

    Raises
    ------
    UnreadableWorkbook
        When it is not XML, declares a document type, or has rows or cells out of order.
    """
    sheet = SheetPart(part, as_utf8(data, part))
    parser = expat.ParserCreate("utf-8")
    parser.buffer_text = True
    _Scanner(sheet, parser).attach()
    try:
        with _without_collection():
            parser.Parse(sheet.data, True)
    except (expat.ExpatError, ValueError, KeyError) as error:
        raise damaged(part, error) from error
    if sheet.start < 0:
        raise UnreadableWorkbook(f"the part {part} holds no sheet data, so no cells can be read from it.")
    return sheet


@contextmanager
def _without_collection() -> Iterator[None]:
    """Search for no garbage meanwhile: among so many new cells, none of which is, it takes half the time."""
    enabled = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if enabled:
            gc.enable()


class _Scanner:
    """Handlers of the parser's events, with the state between them."""

    def __init__(self, sheet: SheetPart, parser: expat.XMLParserType) -> None:
        self._sheet = sheet
        self._parser = parser
        self._area = 0

    def attach(self) -> None:
        """Take the events from the first element on."""
        self._parser.StartDoctypeDeclHandler = self._refuse_doctype
        self._parser.StartElementHandler = self._root

    def _refuse_doctype(self, *_: object) -> None:
        raise forbidden_doctype(self._sheet.name)

    def _root(self, name: str, attributes: dict[str, str]) -> None:
        prefix, _, local = name.rpartition(":")
        namespace = attributes.get(f"xmlns:{prefix}" if prefix else "xmlns", "")
        if local != "worksheet" or namespace not in MAIN_NAMESPACES:
            raise UnreadableWorkbook(f"the part {self._sheet.name} is no worksheet ({name} in {namespace!r}).")
        self._sheet.prefix = f"{prefix}:" if prefix else ""
        self._take_cells()

    def _take_cells(self) -> None:
        # Closures over local names: this runs for every element.
        sheet, parser, cells = self._sheet, self._parser, self._sheet.cells
        prefix = sheet.prefix
        c_tag, v_tag, f_tag, t_tag, row_tag = (prefix + tag for tag in ("c", "v", "f", "t", "row"))
        phonetic_tag, data_tag = prefix + "rPh", prefix + "sheetData"
        others = {
            prefix + "mergeCell": self._merge,
            prefix + "col": self._column,
            prefix + "dimension": self._dimension,
            prefix + "tablePart": self._table,
        }
        row, row_text, column = -1, "", -1
        phonetic = False
        cell: Cell | None = None
        texts: list[str] = []

        def start_outside(name: str, attributes: dict[str, str]) -> None:
            if name in others:
                others[name](attributes)
            elif name == data_tag and sheet.start < 0:
                sheet.start = parser.CurrentByteIndex
                parser.StartElementHandler = start
                parser.EndElementHandler = end
                parser.CharacterDataHandler = texts.append

        def start(name: str, attributes: dict[str, str]) -> None:
            nonlocal row, row_text, column, cell, phonetic
            if name == c_tag:
                column += 1
                reference = attributes.get("r")
                # Nearly every cell stands right beside the one before it.
                if reference is not None and reference != column_letters(column) + row_text:
                    column = self._column_after(column, reference, row_text)
                if column >= COLUMNS or row < 0:
                    raise ValueError(f"the cell {reference or ''} lies outside of any sheet")
                cell = cells[row, column] = Cell(
                    parser.CurrentByteIndex, attributes.get("t", "n"), attributes.get("s", "")
                )
            elif cell is not None:
                texts.clear()
                if name == v_tag:
                    if cell.formula is not None:
                        cell.stored = (parser.CurrentByteIndex, -1)
                elif name == f_tag:
                    self._formula(attributes, (row, column))
                elif name == phonetic_tag:
                    phonetic = True
            elif name == row_tag:
                row_text = attributes.get("r", str(row + 2))
                number = int(row_text) - 1
                if not row < number < ROWS:
                    raise ValueError(f"the row {row_text} is out of order")
                row, column = number, -1
                style = attributes.get("s", "") if attributes.get("customFormat") in ("1", "true") else ""
                sheet.rows[row] = Row(parser.CurrentByteIndex, attributes.get("spans", ""), style)

        def end(name: str) -> None:
            nonlocal cell, phonetic
            if cell is not None:
                if name == c_tag:
                    cell.close = parser.CurrentByteIndex
                    cell = None
                elif name == v_tag or (name == t_tag and not phonetic):
                    text = "".join(texts)
                    cell.value = text if cell.value is None else self._joined(cell.value, text)
                    if cell.formula is not None:
                        cell.stored = (cell.stored[0], parser.CurrentByteIndex)
                elif name == f_tag:
                    cell.formula = "".join(texts)
                    sheet.formulas.append((row, column))
                elif name == phonetic_tag:
                    phonetic = False
            elif name == row_tag:
                if len(cells) > CELL_LIMIT:
                    raise UnreadableWorkbook(
                        f"the part {sheet.name} holds more than {CELL_LIMIT:,} cells. "
                        "Delete what stands outside of the tables, formats included."
                    )
                sheet.rows[row].close = parser.CurrentByteIndex
            elif name == data_tag:
                sheet.close = parser.CurrentByteIndex
                parser.StartElementHandler = start_outside
                parser.EndElementHandler = None
                parser.CharacterDataHandler = None

        parser.StartElementHandler = start_outside

    @staticmethod
    def _joined(text: str, more: str) -> str:
        """Text of a cell with one more run; runs without end would take a time that grows with its square."""
        if len(text) > 2 * TEXT_LIMIT:
            raise ValueError("a text is longer than any cell can hold")
        return text + more

    @staticmethod
    def _column_after(least: int, reference: str, row_text: str) -> int:
        """Column of a cell that leaves some out; it must stand in the row around it."""
        letters = reference.rstrip("0123456789")
        column = column_number(letters)
        if column < least or reference[len(letters) :] != row_text:
            raise ValueError(f"the cell {reference} is out of order")
        return column

    def _formula(self, attributes: dict[str, str], place: tuple[int, int]) -> None:
        kind, shared = attributes.get("t", "normal"), attributes.get("si", "")
        if kind in ("array", "dataTable") and "ref" in attributes:
            self._take_area(self._sheet.arrays, attributes["ref"])
        elif kind == "shared" and "ref" in attributes:
            self._sheet.shared_masters[place] = shared
        elif kind == "shared":
            self._sheet.shared_users.add(shared)

    def _take_area(self, areas: list[Area], reference: str) -> None:
        area = area_of(reference)
        areas.append(area)
        self._area += area.cells
        if self._area > AREA_LIMIT:
            raise UnreadableWorkbook(
                f"the part {self._sheet.name} merges more than {AREA_LIMIT:,} cells "
                "(or fills them with one array formula). Undo that for cells that hold nothing."
            )

    def _merge(self, attributes: dict[str, str]) -> None:
        self._take_area(self._sheet.merged, attributes["ref"])

    def _column(self, attributes: dict[str, str]) -> None:
        if "style" in attributes:
            first, last = int(attributes["min"]) - 1, int(attributes["max"]) - 1
            self._sheet.column_styles.append((first, last, int(attributes["style"])))

    def _dimension(self, attributes: dict[str, str]) -> None:
        self._sheet.dimension = (self._parser.CurrentByteIndex, attributes.get("ref", "A1"))

    def _table(self, attributes: dict[str, str]) -> None:
        self._sheet.table_relationships.extend(
            value for key, value in attributes.items() if key.rpartition(":")[2] == "id"
        )
