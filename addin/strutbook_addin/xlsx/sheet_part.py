"""A worksheet part: its cells, each with the bytes that it takes in the part."""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from functools import cache

ROWS, COLUMNS = 1 << 20, 1 << 14
#: Longest text of a cell; a spreadsheet program would call a workbook with a longer one damaged.
TEXT_LIMIT = 32_767

_REFERENCE = re.compile(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})")


class Cell:
    """One cell element: where it stands in the part, and what it holds as text."""

    #: Value as it is stored, None where there is none.
    value: str | None = None
    #: Formula without ``=``; empty where it is shared with another cell, None where there is none.
    formula: str | None = None
    #: Of a formula, bytes where the tag and the end tag of its stored value begin.
    stored: tuple[int, int] = (-1, -1)

    def __init__(self, start: int, kind: str, style: str) -> None:
        self.start = start  #: byte where its tag begins
        self.close = start  #: byte where its end tag begins; for an empty element, the byte after it
        self.kind = kind  #: type of the value: `n`, `s`, `str`, `inlineStr`, `b`, `e` or `d`
        self.style = style  #: index of its format as it is written, empty for the usual one

    @property
    def awaits_value(self) -> bool:
        """Whether it is a formula of which no value is stored."""
        # An empty text is a value, and is stored as an empty element.
        return self.formula is not None and (
            self.value is None or (not self.value and self.kind not in ("str", "inlineStr"))
        )


@dataclass(slots=True)
class Row:
    """One row element."""

    start: int  #: byte where its tag begins
    spans: str  #: columns in which to expect cells, as it is written
    style: str  #: format of new cells, empty where their columns have it
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
