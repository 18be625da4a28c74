"""Size the members of one workbook file: read, choose, write the comparison or the choice."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

import strutbook
from strutbook_addin.combination_rule import with_generated_combinations
from strutbook_addin.findings import Finding, Findings, Level
from strutbook_addin.model import build_model
from strutbook_addin.outcome import Outcome
from strutbook_addin.run import run, silent
from strutbook_addin.sheets import Sheets
from strutbook_addin.sizing import NotSizable, Sizing, size
from strutbook_addin.solving import Solved
from strutbook_addin.tables.reading import TableData, read_table
from strutbook_addin.tables.schema import SIZING, STOCK, normal
from strutbook_addin.tables.writing import TableWriter
from strutbook_addin.workbook import Workbook, read_workbook
from strutbook_addin.writing_back import default_units, write_list

if TYPE_CHECKING:
    from strutbook.sections import Section


@dataclass(frozen=True, eq=False)
class Sized:
    """What became of one file."""

    solved: Solved
    sizing: Sizing | None  #: None where nothing could be sized

    @property
    def exit_status(self) -> int:
        """0 everything passes, 1 something fails with every section that is allowed, 2 not sized."""
        return 2 if self.sizing is None else int(not self.sizing.passes)


def size_file(
    file: Path,
    target: Path,
    *,
    allowed: Sequence[str] = (),
    apply: bool = False,
    tell: Callable[[str], None] = silent,
) -> Sized:
    """Size the members of the workbook `file` and write it to `target`.

    Parameters
    ----------
    file, target : Path
        The workbook, and where it is written.
    allowed : sequence of str
        Names of families (`SHS`, `CHS` ...) or designations, where the workbook has no sheet `Stock`.
    apply : bool
        Write the chosen designations into the sheet `Members`; otherwise only the comparison is written.
    tell : callable
        Called with the name of each stage.
    """
    from strutbook_addin.hosts.offline import OfflineWorkbook
    from strutbook_addin.xlsx import RefusedWorkbook

    try:
        sheets = OfflineWorkbook.open(file)
        findings = Findings()
        tell("reading tables")
        workbook = with_generated_combinations(read_workbook(sheets, findings), findings)
        sizing = _size(workbook, sheets, allowed, findings, tell)
        if sizing is None:
            return Sized(Solved(file, Outcome(tuple(findings), "", None), None), None)
        if apply:
            _apply(sizing, workbook, sheets)
        tell("solving with the present sections")
        outcome = run(sheets)
        _write_comparison(sizing, sheets)
        tell("saving")
        sheets.save(target)
    except RefusedWorkbook as refused:
        return _stopped(file, f"{file}: {refused}")
    except OSError as error:
        return _stopped(file, f"{file}: {error.strerror or error}. Nothing was written.")
    return Sized(Solved(file, outcome, target), sizing)


def _size(
    workbook: Workbook, sheets: Sheets, allowed: Sequence[str], findings: Findings, tell: Callable[[str], None]
) -> Sizing | None:
    stock = _stock(sheets, allowed, findings)
    needed = ("Joints", "Members", "Supports", "Loads")
    if not all(sheet in workbook.tables for sheet in needed):
        return None
    model = build_model(workbook.tables, workbook.labels, findings)
    if model is None:
        return None
    tell("choosing sections")
    try:
        return size(model, stock)
    except NotSizable as reason:
        findings.add(Level.STOP, f"{reason}", sheet=workbook.labels.sheet)
    except strutbook.StrutbookError as error:
        findings.add(Level.STOP, f"the truss could not be solved: {error}", "Solve the workbook to see where.")
    return None


def _stock(sheets: Sheets, allowed: Sequence[str], findings: Findings) -> dict[str, list[Section]]:
    """Sections that may be chosen, by group."""
    from strutbook.sections import UnknownSection, families, section

    stock: dict[str, list[Section]] = {}
    name = next((name for name in sheets.names() if normal(name) == normal(STOCK.sheet)), None)
    table = None if name is None else read_table(STOCK, name, sheets.read(name), findings)
    if table is not None and table.rows:
        for row, (designation, group) in enumerate(zip(table.text("Section"), table.text("Group"), strict=True)):
            try:
                stock.setdefault(group, []).append(section(designation))
            except UnknownSection as unknown:
                table.report(findings, row, "Section", f"{unknown}", "Correct the designation.")
        return stock
    known = {family.casefold(): sizes for family, sizes in families().items()}
    for word in allowed:
        for designation in known.get(word.casefold(), (word,)):
            try:
                stock.setdefault("", []).append(section(designation))
            except UnknownSection as unknown:
                findings.add(Level.STOP, f"{unknown}", f"Families are: {', '.join(families())}.")
    return stock


def _apply(sizing: Sizing, workbook: Workbook, sheets: Sheets) -> None:
    """Write the chosen designations beside the members; an area of the row's own would go before them, and goes."""
    members: TableData = workbook.tables["Members"]
    layout = members.layout
    own_area = layout.columns.get("Area")
    for group in sizing.groups:
        if group.chosen is None:
            continue
        for member in group.members.tolist():
            row = layout.first_row + member
            sheets.write(layout.sheet, row, layout.columns["Section"], [[group.chosen.name]])
            if own_area is not None:
                sheets.clear(layout.sheet, row, own_area, 1, 1)


def _write_comparison(sizing: Sizing, sheets: Sheets) -> None:
    findings = Findings()
    workbook = read_workbook(sheets, findings)
    write_list(TableWriter(sheets, default_units(workbook), findings), SIZING, sizing.columns, workbook)


def _stopped(file: Path, sentence: str) -> Sized:
    return Sized(Solved(file, Outcome((Finding(Level.STOP, sentence),), "", None), None), None)
