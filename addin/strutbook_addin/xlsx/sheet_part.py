"""A worksheet part: its cells, each with the bytes that it takes in the part.

One pass serves reading and writing, so that what is written replaces exactly what was read.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from functools import cache
from xml.parsers import expat

from strutbook_addin.sheets import column_letters
from strutbook_addin.xlsx.doctypes import forbidden_doctype
from strutbook_addin.xlsx.errors import UnreadableWorkbook
from strutbook_addin.xlsx.markup import MAIN_NAMESPACES, as_utf8, damaged

ROWS, COLUMNS = 1 << 20, 1 << 14
#: Most cells under merged areas, array formulas and tables' headers that are looked at in a sheet.
AREA_LIMIT = 1_000_000

_REFERENCE = re.compile(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})")


class Cell:
    """One cell element: where it stands in the part, and what it holds as text."""

    #: Value as it is stored, None where there is none.
    value: str | None = None
    #: Formula without ``=``; empty where it is shared with another cell, None where there is none.
    formula: str | None = None
    #: Of a formula, bytes where the tag and the end tag of its stored value begin.
    stored: tuple[int, int] = (-1, -1)

    def __init__(self, start: int, attributes: dict[str, str]) -> None:
        self.start = start  #: byte where its tag begins
        self.close = start  #: byte where its end tag begins; for an empty element, the byte after it
        self.attributes = attributes

    @property
    def kind(self) -> str:
        """Type of the value: `n`, `s`, `str`, `inlineStr`, `b`, `e` or `d`."""
        return self.attributes.get("t", "n")

    @property
    def awaits_value(self) -> bool:
        """Whether it is a formula of which no value is stored."""
        # An empty text is a value, and is stored as an empty element.
        return self.formula is not None and (
            self.value is None or (not self.value and self.kind not in ("str", "inlineStr"))
        )


@dataclass
class Row:
    """One row element."""

    start: int  #: byte where its tag begins
    attributes: dict[str, str]
    close: int = 0  #: byte where its end tag begins; for an empty element, the byte after it


@dataclass(frozen=True)
class Area:
    """A rectangle of cells, ends included."""

    first_row: int
    first_column: int
    last_row: int
    last_column: int

    @property
    def cells(self) -> int:
        """How many cells it has."""
        return (self.last_row - self.first_row + 1) * (self.last_column - self.first_column + 1)


@dataclass
class SheetPart:
    """A worksheet part as it was scanned."""

    name: str  #: of the part
    data: bytes  #: the part in UTF-8
    prefix: str = ""  #: of the namespace, with its colon
    cells: dict[tuple[int, int], Cell] = field(default_factory=dict)
    rows: dict[int, Row] = field(default_factory=dict)
    start: int = -1  #: byte where the tag of the sheet data begins
    close: int = -1  #: byte where its end tag begins; for an empty element, the byte after it
    dimension: tuple[int, str] | None = None  #: byte and reference of the dimension
    column_styles: list[tuple[int, int, int]] = field(default_factory=list)  #: first and last column, format
    formulas: list[tuple[int, int]] = field(default_factory=list)  #: cells that hold one
    merged: list[Area] = field(default_factory=list)
    arrays: list[Area] = field(default_factory=list)  #: array formulas and data tables
    shared_masters: dict[tuple[int, int], str] = field(default_factory=dict)  #: their index, by their cell
    shared_users: set[str] = field(default_factory=set)  #: shared formulas on which further cells depend
    table_relationships: list[str] = field(default_factory=list)


@cache
def column_number(letters: str) -> int:
    """Column, counted from zero, of its letters.

    >>> column_number("A"), column_number("AB")
    (0, 27)
    """
    if len(letters) > 3:
        raise ValueError(f"there is no column {letters[:9]}")
    number = 0
    for letter in letters.upper():
        number = number * 26 + ord(letter) - 64
    return number - 1


def area_of(reference: str) -> Area:
    """Rectangle of a reference such as ``B2:D9`` or ``B2``.

    >>> area_of("B2:D9")
    Area(first_row=1, first_column=1, last_row=8, last_column=3)
    """
    ends = [_REFERENCE.fullmatch(end) for end in reference.split(":")]
    if len(ends) > 2 or not all(ends):
        raise ValueError(f"{reference!r} is no reference to cells")
    corners = [(int(end.group(2)) - 1, column_number(end.group(1))) for end in ends if end]
    first, last = corners[0], corners[-1]
    return Area(min(first[0], last[0]), min(first[1], last[1]), max(first[0], last[0]), max(first[1], last[1]))


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
        parser.Parse(sheet.data, True)
    except (expat.ExpatError, ValueError, KeyError) as error:
        raise damaged(part, error) from error
    if sheet.start < 0:
        raise UnreadableWorkbook(f"the part {part} holds no sheet data, so no cells can be read from it.")
    if sum(area.cells for area in sheet.merged + sheet.arrays) > AREA_LIMIT:
        raise UnreadableWorkbook(
            f"the part {part} merges more than {AREA_LIMIT:,} cells (or fills them with one array formula). "
            "Undo that for cells that hold nothing."
        )
    return sheet


class _Scanner:
    """Handlers of the parser's events, with the state between them."""

    def __init__(self, sheet: SheetPart, parser: expat.XMLParserType) -> None:
        self._sheet = sheet
        self._parser = parser

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
        # Closures over local names: this runs for every element of every sheet.
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
                cell = cells[row, column] = Cell(parser.CurrentByteIndex, attributes)
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
                sheet.rows[row] = Row(parser.CurrentByteIndex, attributes)

        def end(name: str) -> None:
            nonlocal cell, phonetic
            if cell is not None:
                if name == c_tag:
                    cell.close = parser.CurrentByteIndex
                    cell = None
                elif name == v_tag or (name == t_tag and not phonetic):
                    text = "".join(texts)
                    cell.value = text if cell.value is None else cell.value + text
                    if cell.formula is not None:
                        cell.stored = (cell.stored[0], parser.CurrentByteIndex)
                elif name == f_tag:
                    cell.formula = "".join(texts)
                    sheet.formulas.append((row, column))
                elif name == phonetic_tag:
                    phonetic = False
            elif name == row_tag:
                if column >= COLUMNS:
                    raise ValueError(f"the row {row_text} goes on past the last column of any sheet")
                sheet.rows[row].close = parser.CurrentByteIndex
            elif name == data_tag:
                sheet.close = parser.CurrentByteIndex
                parser.StartElementHandler = start_outside
                parser.EndElementHandler = None
                parser.CharacterDataHandler = None

        parser.StartElementHandler = start_outside

    @staticmethod
    def _column_after(least: int, reference: str, row_text: str) -> int:
        """Column of a cell that leaves some out; it must stand in the row around it."""
        letters = reference.rstrip("0123456789")
        column = column_number(letters)
        if column < least or reference[len(letters) :] != row_text:
            raise ValueError(f"the cell {reference} is out of order")
        if column >= COLUMNS:
            raise ValueError(f"the cell {reference} lies outside of any sheet")
        return column

    def _formula(self, attributes: dict[str, str], place: tuple[int, int]) -> None:
        kind, shared = attributes.get("t", "normal"), attributes.get("si", "")
        if kind in ("array", "dataTable") and "ref" in attributes:
            self._sheet.arrays.append(area_of(attributes["ref"]))
        elif kind == "shared" and "ref" in attributes:
            self._sheet.shared_masters[place] = shared
        elif kind == "shared":
            self._sheet.shared_users.add(shared)

    def _merge(self, attributes: dict[str, str]) -> None:
        self._sheet.merged.append(area_of(attributes["ref"]))

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
