"""Workbooks as the program builds them, read back by openpyxl."""

from __future__ import annotations

from pathlib import Path

import openpyxl
import pytest

from strutbook_addin.sheets import CellValue
from strutbook_templates.building import write_workbook
from strutbook_templates.generate import template_contents


class BuiltFile:
    """A built workbook as a run reads it: the sheet names and the values in their cells."""

    def __init__(self, path: Path) -> None:
        self.path = path
        self._workbook = openpyxl.load_workbook(path)

    def names(self) -> list[str]:
        """Names of the sheets."""
        return self._workbook.sheetnames

    def read(self, sheet: str) -> list[list[CellValue]]:
        """Values of a sheet, row by row."""
        return [list(row) for row in self._workbook[sheet].iter_rows(values_only=True)]

    def findings(self) -> list[object]:
        """Reading a built workbook needs no remarks."""
        return []

    @property
    def workbook(self) -> openpyxl.Workbook:
        """The workbook with its looks."""
        return self._workbook


@pytest.fixture(scope="session")
def built(tmp_path_factory: pytest.TempPathFactory) -> dict[str, BuiltFile]:
    """Every template, freshly built, by file name."""
    folder = tmp_path_factory.mktemp("templates")
    files = {}
    for name, contents in template_contents().items():
        write_workbook(contents, folder / name)
        files[name] = BuiltFile(folder / name)
    return files


@pytest.fixture
def as_read():
    """Open a workbook as a run reads it."""
    return BuiltFile
