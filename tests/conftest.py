"""Workbooks for tests: written by openpyxl, solved by the offline run, read back by openpyxl."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from pathlib import Path
from typing import Any

import openpyxl
import pytest

from strutbook_addin.findings import Finding
from strutbook_addin.solving import Solved, solve_file

Tables = Mapping[str, Sequence[Sequence[Any]]]

#: A determinate triangle in kN and m with a 48 kN load at its apex.
TRIANGLE: dict[str, list[list[Any]]] = {
    "Joints": [["Joint", "x [m]", "y [m]"], ["A", 0, 0], ["B", 8, 0], ["C", 4, 3]],
    "Members": [
        ["Member", "From", "To", "Area [mm2]", "E [kN/mm2]"],
        ["AB", "A", "B", 400, 200],
        ["AC", "A", "C", 400, 200],
        ["BC", "B", "C", 400, 200],
    ],
    "Supports": [["Joint", "Holds"], ["A", "x y"], ["B", "y"]],
    "Loads": [["Joint", "Fx [kN]", "Fy [kN]"], ["C", 4, -12]],
}


class Book:
    """A workbook on disk that a test fills in, solves and reads."""

    def __init__(self, path: Path) -> None:
        self.path = path
        self.solved: Solved | None = None

    def solve(self) -> Solved:
        """Solve in place, as the command line does."""
        self.solved = solve_file(self.path, self.path)
        return self.solved

    def rows(self, sheet: str, header: str) -> list[dict[str, Any]]:
        """Rows below the header row that contains `header`, by header, from the file."""
        worksheet = openpyxl.load_workbook(self.path, data_only=True)[sheet]
        rows = [list(row) for row in worksheet.iter_rows(values_only=True)]
        top = next(place for place, row in enumerate(rows) if header in row)
        names = rows[top]
        return [
            {str(name): value for name, value in zip(names, row, strict=True) if name is not None}
            for row in rows[top + 1 :]
            if any(value is not None for value in row)
        ]

    def column(self, sheet: str, key: str, header: str) -> dict[str, Any]:
        """Values of one column by those of another."""
        return {str(row[key]): row[header] for row in self.rows(sheet, key)}

    def change(self, sheet: str, cell: str, value: Any) -> None:
        """Change one cell of the file by openpyxl."""
        workbook = openpyxl.load_workbook(self.path)
        workbook[sheet][cell] = value
        workbook.save(self.path)

    def findings(self, level: str = "") -> list[Finding]:
        """Findings of the last run."""
        assert self.solved is not None
        return [f for f in self.solved.outcome.findings if not level or f.level == level]


@pytest.fixture
def triangle() -> dict[str, list[list[Any]]]:
    """Tables of the triangle, for a test to change."""
    return {sheet: [list(row) for row in rows] for sheet, rows in TRIANGLE.items()}


@pytest.fixture
def make_book(tmp_path: Path) -> Callable[[Tables], Book]:
    """Write tables as sheets of a new workbook."""

    def make(tables: Tables, name: str = "book.xlsx") -> Book:
        workbook = openpyxl.Workbook()
        workbook.remove(workbook.worksheets[0])
        for sheet, rows in tables.items():
            worksheet = workbook.create_sheet(sheet)
            for row in rows:
                worksheet.append(list(row))
        workbook.save(tmp_path / name)
        return Book(tmp_path / name)

    return make
