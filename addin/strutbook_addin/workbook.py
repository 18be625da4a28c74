"""The sheets of a workbook that the schema knows, as cells and as tables."""

from __future__ import annotations

from dataclasses import dataclass

from strutbook_addin.findings import Findings, Level
from strutbook_addin.model.combinations import ONLY_CASE
from strutbook_addin.sheets import Grid, Sheets
from strutbook_addin.tables.headers import nearest
from strutbook_addin.tables.labels import Labels, read_labels
from strutbook_addin.tables.reading import TableData, read_table
from strutbook_addin.tables.schema import COMBINATIONS, INPUT_TABLES, JOB, TABLES, Table, normal


@dataclass(frozen=True, eq=False)
class Rows:
    """Rows that a run fills into a sheet of inputs because the user asked for it."""

    sheet: str
    top: int  #: row of the first line, counted from zero
    lines: Grid


@dataclass(frozen=True, eq=False)
class Workbook:
    """The known sheets as they were read; keys are the names that the schema gives them."""

    names: dict[str, str]  #: name of each sheet in the workbook
    grids: dict[str, Grid]
    tables: dict[str, TableData]  #: input tables whose headers were found
    labels: Labels  #: inputs of the sheet `Job`
    filled_in: tuple[Rows, ...] = ()  #: inputs that the run makes, to be written


def read_workbook(sheets: Sheets, findings: Findings) -> Workbook:
    """Read every known sheet; what is missing, unclear or wrong goes to the findings."""
    names = _sheet_names(sheets, findings)
    grids = {known: sheets.read(name) for known, name in names.items()}
    tables: dict[str, TableData] = {}

    def read(table: Table, open_names: set[str]) -> None:
        if table.sheet in names:
            data = read_table(table, names[table.sheet], grids[table.sheet], findings, open_names)
            if data is not None:
                tables[table.sheet] = data

    for table in INPUT_TABLES:
        if table is not COMBINATIONS:
            read(table, set())
    # The cases are known now, so a column of factors can be told from a remark.
    read(COMBINATIONS, {ONLY_CASE, *(name for data in tables.values() for name in data.text("Case"))})
    labels = read_labels(JOB, names.get(JOB.sheet, JOB.sheet), grids.get(JOB.sheet, []), findings)
    findings.extend(sheets.findings())
    return Workbook(names, grids, tables, labels)


def _sheet_names(sheets: Sheets, findings: Findings) -> dict[str, str]:
    by_normal = {normal(table.sheet): table.sheet for table in TABLES}
    names: dict[str, str] = {}
    for name in sheets.names():
        known = by_normal.get(normal(name))
        if known is None:
            continue
        if known in names:
            findings.add(
                Level.STOP,
                f"the sheets {names[known]} and {name} have the same name but for case and spaces.",
                "Rename one of them.",
                sheet=name,
            )
            continue
        names[known] = name
    for table in INPUT_TABLES:
        if table.required and table.sheet not in names:
            findings.add(
                Level.STOP,
                f"the sheet {table.sheet} is missing.{nearest(table.sheet, sheets.names())}",
                f"Add it: {table.meaning}",
                sheet=table.sheet,
            )
    return names
