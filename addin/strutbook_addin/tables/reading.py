"""Cells of a table to arrays in SI units; every cell that does not fit becomes a finding."""

from __future__ import annotations

import math
from collections.abc import Collection, Sequence
from dataclasses import dataclass
from datetime import date, time, timedelta

import numpy as np
from numpy.typing import NDArray

from strutbook_addin.findings import Findings, Level
from strutbook_addin.sheets import CellValue, ErrorValue, Grid
from strutbook_addin.tables.headers import Layout, error_words, is_blank, locate, name_text, nearest
from strutbook_addin.tables.schema import Bound, Column, Kind, Role, Table

FloatArray = NDArray[np.float64]
#: Largest number that a cell may hold; its inverse is the smallest where a column takes only numbers above 0.
#: Nothing in a truss comes near, and beyond it products of a few of them are no longer numbers.
LARGEST = 1e25


@dataclass(frozen=True, eq=False)
class TableData:
    """The inputs of one table, row by row."""

    layout: Layout
    numbers: dict[str, FloatArray]  #: SI values by column, NaN where blank
    texts: dict[str, list[str]]  #: names, texts and choices by column, empty where blank
    open_numbers: dict[str, FloatArray]  #: factors by the header of an open column, 0 where blank

    @property
    def rows(self) -> int:
        """How many rows the table has."""
        return self.layout.rows

    def number(self, name: str) -> FloatArray:
        """Column in SI units; NaN all along when the sheet has no such column."""
        return self.numbers.get(name, np.full(self.rows, np.nan))

    def text(self, name: str) -> list[str]:
        """Column of names, texts or choices; empty all along when the sheet has no such column."""
        return self.texts.get(name, [""] * self.rows)

    def report(
        self, findings: Findings, row: int, name: str, what: str, todo: str = "", level: Level = Level.STOP
    ) -> None:
        """Add a finding about the cell in this column (or, without the column, about the row)."""
        layout = self.layout
        column = layout.columns.get(name)
        findings.add(
            level,
            what,
            todo,
            sheet=layout.sheet,
            row=layout.first_row + row,
            column=min(layout.columns.values()) if column is None else column,
            header="" if column is None else layout.headers[column],
        )


def read_table(
    table: Table, sheet: str, grid: Grid, findings: Findings, open_names: Collection[str] = ()
) -> TableData | None:
    """Read the inputs of a table from its sheet; None when no header row was found.

    `open_names` are the headers under which an open column (a factor for each case) must hold numbers.
    """
    layout = locate(table, sheet, grid, findings)
    if layout is None:
        return None
    numbers: dict[str, FloatArray] = {}
    texts: dict[str, list[str]] = {}
    for column in table.inputs:
        if column.name not in layout.columns:
            continue
        values = _column_values(layout, grid, layout.columns[column.name])
        reader = _Reader(layout, layout.columns[column.name], column, findings)
        if column.kind is Kind.NUMBER:
            unit = layout.units.get(column.name)
            factor = unit.factor if unit else 1.0
            numbers[column.name] = reader.numbers(values) * factor
        else:
            texts[column.name] = reader.texts(values)
        if column.key:
            reader.report_duplicates(texts[column.name])
    open_numbers: dict[str, FloatArray] = {}
    if table.open_columns is not None and table.open_columns.role is Role.INPUT:
        open_numbers = _read_open_columns(layout, grid, open_names, findings)
    return TableData(layout, numbers, texts, open_numbers)


def found(value: CellValue) -> str:
    """What a cell holds, in words.

    >>> found(-5.0), found("abc"), found(True), found(None)
    ('-5', "the text 'abc'", 'TRUE', 'an empty cell')
    """
    if is_blank(value):
        return "an empty cell"
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    if isinstance(value, ErrorValue):
        return error_words(value)
    if isinstance(value, (date, time, timedelta)):
        return f"the date or time {value}"
    if isinstance(value, str):
        text = value.strip()
        return f"the text {text!r}" if len(text) <= 40 else f"the text {text[:37] + '...'!r}"
    return f"{value:.10g}" if isinstance(value, float) else str(value)


def cell_number(column: Column, value: CellValue) -> float | None:
    """Number of a cell when it is one that the column takes."""
    if isinstance(value, (int, float)) and not isinstance(value, bool):
        number = float(value)
        if math.isfinite(number) and _within(column, np.array([number]))[0]:
            return number
    return None


def _within(column: Column, numbers: FloatArray) -> NDArray[np.bool_]:
    """Which numbers lie in the bounds of the column."""
    sensible: NDArray[np.bool_] = np.abs(numbers) <= LARGEST
    if column.bound is Bound.POSITIVE:
        return sensible & (numbers >= 1 / LARGEST)
    if column.bound is Bound.NOT_NEGATIVE:
        return sensible & (numbers >= 0)
    return sensible


def remedy(value: CellValue, column: Column) -> str:
    """What to do about a cell that does not hold what its column takes."""
    if is_blank(value):
        return "Fill the cell in, or clear the whole row."
    if isinstance(value, ErrorValue):
        return "Mend the formula in this cell, or type the value."
    if isinstance(value, (date, time, timedelta)):
        return "Set the cell's number format to a plain number and type the value again."
    if column.kind is Kind.NUMBER:
        if isinstance(value, str):
            return "Type a number; its unit stands in the header, not in the cell."
        if isinstance(value, bool):
            return "Type a number."
        return "Correct the number."
    if column.kind is Kind.CHOICE:
        return "Choose one of them."
    return "Type a name."


def _column_values(layout: Layout, grid: Grid, column: int) -> list[CellValue]:
    return [row[column] if column < len(row) else None for row in grid[layout.first_row : layout.end_row]]


def _read_open_columns(
    layout: Layout, grid: Grid, open_names: Collection[str], findings: Findings
) -> dict[str, FloatArray]:
    """Columns under headers of the user's own choice that hold numbers."""
    factor = Column("factor", Kind.NUMBER, "Factor on the case.")
    numbers: dict[str, FloatArray] = {}
    for header, column in layout.open_columns.items():
        values = _column_values(layout, grid, column)
        # Without a number or a known name the column is the user's own: remarks, sources.
        if header in open_names or any(type(value) in (int, float) for value in values):
            numbers[header] = np.nan_to_num(_Reader(layout, column, factor, findings).numbers(values))
    return numbers


class _Reader:
    """Reads the cells of one column."""

    def __init__(self, layout: Layout, position: int, column: Column, findings: Findings) -> None:
        self._layout = layout
        self._position = position
        self._column = column
        self._findings = findings

    def numbers(self, values: Sequence[CellValue]) -> FloatArray:
        """Numbers as they stand in the cells, NaN where a cell is blank or wrong."""
        if {type(value) for value in values} <= {float, int}:
            numbers = np.array(values, dtype=np.float64)
            if np.isfinite(numbers).all() and _within(self._column, numbers).all():
                return numbers
        return np.array([self._number(row, value) for row, value in enumerate(values)], dtype=np.float64)

    def texts(self, values: Sequence[CellValue]) -> list[str]:
        """Names, texts or choices; empty where a cell is blank or wrong."""
        return [self._text(row, value) for row, value in enumerate(values)]

    def report_duplicates(self, names: Sequence[str]) -> None:
        """Two rows with one name: the later one is a finding that points to the first."""
        first: dict[str, int] = {}
        for row, name in enumerate(names):
            if name and name in first:
                self._add(
                    row,
                    f"the name {name} stands already in row {self._layout.first_row + first[name] + 1}.",
                    "Give each row a name of its own.",
                )
            first.setdefault(name, row)

    def _number(self, row: int, value: CellValue) -> float:
        if is_blank(value) and not self._column.required:
            return math.nan
        number = cell_number(self._column, value)
        if number is None:
            self._wrong(row, value)
            return math.nan
        return number

    def _text(self, row: int, value: CellValue) -> str:
        if is_blank(value):
            if self._column.required:
                self._wrong(row, value)
            return ""
        dated = isinstance(value, (date, time, timedelta))
        own_words = self._column.kind is Kind.TEXT and not self._column.required
        if isinstance(value, (bool, ErrorValue)) or (dated and not own_words):
            self._wrong(row, value)
            return ""
        text = name_text(value)
        if self._column.kind is Kind.CHOICE:
            choices = {choice.casefold(): choice for choice in self._column.choices}
            if text.casefold() not in choices:
                self._wrong(row, value, nearest(text, self._column.choices))
            return choices.get(text.casefold(), "")
        return text

    def _wrong(self, row: int, value: CellValue, question: str = "") -> None:
        expected = self._column.expected
        if isinstance(value, (int, float)) and not isinstance(value, bool) and LARGEST < abs(value) < math.inf:
            expected += f" of at most {LARGEST:.0e}"
        self._add(
            row,
            f"expected {expected}, found {found(value)}.{question}",
            remedy(value, self._column),
        )

    def _add(self, row: int, what: str, todo: str) -> None:
        self._findings.add(
            Level.STOP,
            what,
            todo,
            sheet=self._layout.sheet,
            row=self._layout.first_row + row,
            column=self._position,
            header=self._layout.headers[self._position],
        )
