"""What a spreadsheet host offers to a run, and the values that cells hold.

The offline file, an open Calc document and an open Excel workbook are small adapters of `Sheets`;
the run reads and writes through it and cannot tell which of them it is in.
Rows and columns are counted from zero in code; `cell_name` turns them into what the user sees.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date, datetime, time, timedelta
from functools import lru_cache
from typing import TYPE_CHECKING, Protocol

if TYPE_CHECKING:
    from strutbook_addin.findings import Finding


@dataclass(frozen=True)
class ErrorValue:
    """An error that a cell shows, such as ``#DIV/0!``, and the formula that gives it."""

    text: str
    formula: str = ""


@dataclass(frozen=True)
class Formula:
    """A live formula of our own with the value it has now, so that every reader sees a value.

    `text` starts with ``=`` and is written as the file format has it (English names, commas).
    """

    text: str
    value: float | str


CellValue = None | str | int | float | bool | date | datetime | time | timedelta | ErrorValue
Written = None | str | int | float | Formula
Grid = list[list[CellValue]]


@dataclass(frozen=True)
class Refusal:
    """A cell that the host did not write or clear, and why (`a formula stands there`, ...)."""

    sheet: str
    row: int
    column: int
    reason: str


#: How the link to a cell begins that stands beside each finding.
LINK = "HYPERLINK(\"#'"


#: How a live formula of workings begins: adding nothing marks it as ours, so that the next run may write over it.
LIVE = "N(0)+"


class Sheets(Protocol):
    """The spreadsheet as a run sees it."""

    def names(self) -> list[str]:
        """Names of the sheets that hold cells, in their order."""
        ...

    def read(self, sheet: str) -> Grid:
        """Values from A1 to the last used cell, as rows; rows may differ in length."""
        ...

    def write(self, sheet: str, row: int, column: int, values: Sequence[Sequence[Written]]) -> list[Refusal]:
        """Write a rectangle whose upper left cell is given; None clears a cell.

        A sheet that does not exist is made. The look of a cell stays. What cannot be written
        (a formula of the user's, a merged cell) is left as it was and returned.
        """
        ...

    def clear(self, sheet: str, row: int, column: int, rows: int, columns: int) -> list[Refusal]:
        """Remove the values of a rectangle and keep its look."""
        ...

    def findings(self) -> list[Finding]:
        """What the host has to say about the sheets read so far (formulas that it evaluated, ...)."""
        ...


def is_ours(formula: str) -> bool:
    r"""Whether a formula is one that a run writes, so that the next run may write over it.

    >>> is_ours("HYPERLINK(\"#'Joints'!B3\",\"Joints!B3\")"), is_ours("=SUM(B3:B9)")
    (True, False)
    """
    return formula.removeprefix("=").startswith((LINK, LIVE))


@lru_cache(maxsize=4096)
def column_letters(column: int) -> str:
    """Letters of a column counted from zero.

    >>> column_letters(0), column_letters(27)
    ('A', 'AB')
    """
    letters = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(ord("A") + rest) + letters
    return letters


def cell_name(row: int, column: int) -> str:
    """Name of a cell as the user sees it, from a row and a column counted from zero.

    >>> cell_name(2, 3)
    'D3'
    """
    return f"{column_letters(column)}{row + 1}"
