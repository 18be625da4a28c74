"""What a run writes: result columns, result sheets, the stamp on `Job`, the findings."""

from __future__ import annotations

from dataclasses import replace
from datetime import UTC, datetime
from typing import TYPE_CHECKING

import numpy as np

from strutbook_addin.findings import Finding, Findings
from strutbook_addin.outcome import Outcome
from strutbook_addin.picture_writing import write_picture
from strutbook_addin.results import Results
from strutbook_addin.sheets import LINK, CellValue, Formula, Grid, Sheets, Written
from strutbook_addin.tables.headers import Layout
from strutbook_addin.tables.labels import VALUES, label_rows
from strutbook_addin.tables.list_sheets import clear_list, fill_list, list_layout
from strutbook_addin.tables.result_sheets import clear_sheet, fill_sheet, result_layout
from strutbook_addin.tables.schema import (
    BILL,
    DISPLACEMENTS,
    FINDINGS,
    FORCES,
    JOB,
    REACTIONS,
    SIZING,
    WORKINGS,
    Column,
    Table,
)
from strutbook_addin.tables.units import Dimension, Unit, UnitProblem, split_header, unit_of
from strutbook_addin.tables.writing import ResultColumn, TableWriter, cells, header_text
from strutbook_addin.version import __version__
from strutbook_addin.workbook import Workbook

if TYPE_CHECKING:
    from strutbook_addin.member_checks import CheckedMembers

_COMBINATION_SHEETS = (FORCES, REACTIONS, DISPLACEMENTS)
_US_UNITS = ("ft", "in", "inch", "kip", "kips", "lb", "lbs", "lbf")


#: Label on the sheet `Job` that asks for workings.
WORKINGS_FOR = "Workings for"


def write_results(sheets: Sheets, outcome: Outcome, workbook: Workbook) -> Outcome:
    """Write results (or clear them, where the run could not solve) and the findings.

    Returns the outcome with the findings that writing itself added.
    """
    findings = Findings()
    findings.extend(list(outcome.findings))
    writer = TableWriter(sheets, default_units(workbook), findings)
    for rows in workbook.filled_in:
        writer.write(rows.sheet, rows.top, 0, [[_written(value) for value in line] for line in rows.lines])
    if outcome.results is None:
        _clear(writer, workbook)
    else:
        _fill(writer, outcome.results, outcome.checked, workbook)
    write_picture(sheets, writer, outcome.results)
    outcome = replace(outcome, findings=tuple(findings))
    _write_job(writer, outcome, workbook)
    outcome = replace(outcome, findings=tuple(findings))
    _write_findings(writer, outcome.findings, workbook)
    return outcome


def _written(value: CellValue) -> Written:
    """A value of a row that a run fills in; it holds texts and numbers only."""
    return value if isinstance(value, (str, int, float)) else None


def default_units(workbook: Workbook) -> dict[Dimension, Unit]:
    """Units of headers that a run makes: the force unit of `Loads`; displacements in mm, or in."""
    loads, joints = workbook.tables.get("Loads"), workbook.tables.get("Joints")
    forces = [] if loads is None else list(loads.layout.units.values())
    lengths = [] if joints is None else list(joints.layout.units.values())
    customary = any(unit.text in _US_UNITS for unit in forces or lengths)
    return {
        Dimension.FORCE: forces[0] if forces else unit_of("kip" if customary else "kN", Dimension.FORCE),
        Dimension.LENGTH: unit_of("in" if customary else "mm", Dimension.LENGTH),
        Dimension.AREA: unit_of("in2" if customary else "cm2", Dimension.AREA),
        Dimension.MASS: unit_of("lb" if customary else "kg", Dimension.MASS),
    }


def _fill(writer: TableWriter, results: Results, checked: CheckedMembers | None, workbook: Workbook) -> None:
    joints, members, supports = (workbook.tables[sheet] for sheet in ("Joints", "Members", "Supports"))
    member_columns = results.member_columns(joints.layout.units["x"]) + (checked.columns if checked else [])
    filled = [
        (joints, results.joint_columns()),
        (members, member_columns),
        (supports, results.support_columns(supports.rows)),
    ]
    if "Sections" in workbook.tables:
        sections = workbook.tables["Sections"]
        filled.append((sections, results.section_columns(sections.text("Section"))))
    for data, columns in filled:
        grid = workbook.grids[data.layout.table.sheet]
        writer.clear_results(data.layout, grid, keep={column.name for column in columns})
        writer.fill(data.layout, grid, columns)
    _write_lists(writer, results, checked, workbook)
    sheets = results.sheets()
    for table in _COMBINATION_SHEETS:
        layout, grid = _result_sheet(table, workbook)
        if table.sheet in sheets:
            fill_sheet(writer, layout, grid, sheets[table.sheet])
        else:
            clear_sheet(writer, layout, grid)


def _clear(writer: TableWriter, workbook: Workbook) -> None:
    """No old number may stand beside inputs from which it does not follow."""
    for sheet, data in workbook.tables.items():
        writer.clear_results(data.layout, workbook.grids[sheet])
    for table in _COMBINATION_SHEETS:
        clear_sheet(writer, *_result_sheet(table, workbook))
    _write_lists(writer, None, None, workbook)


def _write_lists(
    writer: TableWriter, results: Results | None, checked: CheckedMembers | None, workbook: Workbook
) -> None:
    """Lists that a workbook asks for: `Bill` by having the sheet, `Workings` by a label of `Job`.

    What another command listed (`Sizing`) does not follow from these inputs and goes.
    """
    asked = workbook.labels.texts.get(WORKINGS_FOR, "")
    for table in (BILL, WORKINGS, SIZING):
        columns: list[ResultColumn] = []
        if results is not None and table is BILL and BILL.sheet in workbook.names:
            from strutbook_addin.bill import bill_columns

            columns = bill_columns(results)
        if results is not None and checked is not None and table is WORKINGS and asked:
            from strutbook_addin.workings import COLUMNS, workings_columns

            header_row, places = list_layout(WORKINGS, workbook.grids.get(WORKINGS.sheet, []), COLUMNS)
            columns = workings_columns(results, checked, asked, header_row, places["Value"])
        if columns:
            write_list(writer, table, columns, workbook)
        elif table.sheet in workbook.names:
            clear_list(writer, table, workbook.names[table.sheet], workbook.grids[table.sheet])


def _result_sheet(table: Table, workbook: Workbook) -> tuple[Layout, Grid]:
    grid = workbook.grids.get(table.sheet, [])
    return result_layout(table, workbook.names.get(table.sheet, table.sheet), grid), grid


def _write_job(writer: TableWriter, outcome: Outcome, workbook: Workbook) -> None:
    """Stamp the sheet `Job`: what was solved, when, by which version, from which inputs."""
    sheet, grid = workbook.names.get(JOB.sheet, JOB.sheet), workbook.grids.get(JOB.sheet, [])
    rows = label_rows(JOB, grid)
    next_row = len(grid)
    stamp = _stamp(outcome)
    for column in JOB.results:
        row, label = rows.get(column.name, (next_row, ""))
        if not label and column.name not in stamp:
            continue
        unit = _label_unit(label, column, writer)
        if not label:
            next_row += 1
            writer.write(sheet, row, 0, [[header_text(column.name, unit)]])
        value = stamp.get(column.name)
        number = isinstance(value, float)
        writer.write(sheet, row, VALUES, [[cells(np.array([value]), unit)[0] if number else value]])


def _label_unit(label: str, column: Column, writer: TableWriter) -> Unit | None:
    if column.dimension is None:
        return None
    text = split_header(label)[1]
    if text is not None:
        try:
            return unit_of(text, column.dimension)
        except UnitProblem:
            # No value stands under a label that it would not suit.
            return Unit(text, float("nan"))
    return writer.default_units[column.dimension]


def _stamp(outcome: Outcome) -> dict[str, float | str]:
    """Values of the labels of `Job`, in SI units; a run that could not solve has an outcome only."""
    results = outcome.results
    if results is None:
        return {"Outcome": outcome.sentence}
    stamp: dict[str, float | str] = {
        "Solved at": datetime.now(UTC).strftime("%Y-%m-%d %H:%M:%S UTC"),
        "Solved by": f"strutbook {__version__}",
        "Inputs": outcome.digest,
        "Outcome": outcome.sentence,
        "Static indeterminacy": float(results.analysis.stability.indeterminacy),
        "Joint residual": float(results.analysis.residual.max(initial=0.0)),
        "Largest tension": float(results.forces.max(initial=0.0)),
        "Largest compression": float(results.forces.min(initial=0.0)),
        "Largest displacement": results.largest_displacement(),
        "Deflection over limit": results.deflection_over_limit(),
        "Total mass": results.total_mass(),
    }
    if outcome.checked is not None and outcome.checked.largest is not None:
        member = outcome.checked.largest
        stamp["Largest utilisation"] = float(outcome.checked.utilisation[member])
        stamp["Governing member"] = results.model.geometry.members.names[member]
    # A label that a workbook does not have is made for a value, not for the lack of one.
    return {label: value for label, value in stamp.items() if value == value}


def _write_findings(writer: TableWriter, findings: tuple[Finding, ...], workbook: Workbook) -> None:
    columns = [
        ResultColumn("Level", [finding.level.value for finding in findings]),
        ResultColumn("Where", [_link(finding, workbook) for finding in findings]),
        ResultColumn("What", [_what(finding) for finding in findings]),
        ResultColumn("What to do", [finding.todo for finding in findings]),
    ]
    write_list(writer, FINDINGS, columns, workbook)


def write_list(writer: TableWriter, table: Table, columns: list[ResultColumn], workbook: Workbook) -> None:
    """Write a list onto its sheet, which is made if need be."""
    fill_list(writer, table, workbook.names.get(table.sheet, table.sheet), workbook.grids.get(table.sheet, []), columns)


def _what(finding: Finding) -> str:
    return f"{finding.header}: {finding.what}" if finding.header else finding.what


def _link(finding: Finding, workbook: Workbook) -> Written:
    """Link to the cell, where the workbook has its sheet."""
    if not finding.cell or finding.sheet not in workbook.names.values():
        return finding.where
    quoted = finding.sheet.replace("'", "''").replace('"', '""')
    text = finding.where.replace('"', '""')
    return Formula(f'={LINK}{quoted}\'!{finding.cell}","{text}")', finding.where)
