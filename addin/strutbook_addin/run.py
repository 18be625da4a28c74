"""The one run: read the tables, build the model, solve, write the columns, say what was found.

It knows its host only as `Sheets`, so a file, an open Calc document and an open Excel workbook
get the same results and the same sentences.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

import strutbook
from strutbook_addin.combination_rule import with_generated_combinations
from strutbook_addin.digest import digest
from strutbook_addin.findings import Findings, Level
from strutbook_addin.model import Model, build_model
from strutbook_addin.outcome import Outcome
from strutbook_addin.reporting import CAUTION, report_checks, report_solution, unchecked
from strutbook_addin.results import Results, solve
from strutbook_addin.sheets import Sheets
from strutbook_addin.tables.reading import TableData
from strutbook_addin.tables.schema import INPUT_TABLES
from strutbook_addin.workbook import Workbook, read_workbook
from strutbook_addin.writing_back import write_results


def silent(stage: str) -> None:
    """Tell nobody which stage a run has reached."""


def run(sheets: Sheets, tell: Callable[[str], None] = silent) -> Outcome:
    """Solve the workbook behind `sheets` and write what was found into it.

    `tell` is called with the name of each stage as it begins.
    """
    outcome, workbook = calculate(sheets, tell)
    tell("writing results")
    return write_results(sheets, outcome, workbook)


def check(sheets: Sheets, tell: Callable[[str], None] = silent) -> Outcome:
    """Solve the workbook behind `sheets` and write nothing."""
    return calculate(sheets, tell)[0]


def calculate(sheets: Sheets, tell: Callable[[str], None] = silent) -> tuple[Outcome, Workbook]:
    """Read and solve the workbook behind `sheets`: what was found, and the tables from which it follows."""
    findings = Findings()
    tell("reading tables")
    workbook = with_generated_combinations(read_workbook(sheets, findings), findings)
    results = checked = None
    # With every needed table there, names are checked across tables even after errors in cells.
    if all(table.sheet in workbook.tables for table in INPUT_TABLES if table.required):
        model = build_model(workbook.tables, workbook.labels, findings)
        tell("solving")
        if model is not None:
            results = _solve(model, workbook.tables, findings)
    if results is not None:
        report_solution(results, workbook.tables, findings)
        if any(results.model.checks.standards):
            tell("checking members")
            from strutbook_addin.member_checks import check_members

            checked = check_members(results)
        report_checks(results, checked, workbook, findings)
    findings.add(Level.NOTE, unchecked(results, checked), CAUTION)
    stamp = digest(workbook.tables, workbook.labels)
    return Outcome(tuple(findings), stamp, results, checked), workbook


def _solve(model: Model, tables: dict[str, TableData], findings: Findings) -> Results | None:
    """Solve the model; what forbids it becomes findings about joints and members."""
    joints = tables["Joints"]
    try:
        return solve(model)
    except strutbook.Unstable as unstable:
        names = model.geometry.joints.names
        for mechanism in unstable.stability.mechanisms:
            what, todo = strutbook.describe_mechanism(mechanism, model.truss, names)
            joints.report(findings, int(mechanism.joints[0]), "Joint", f"the truss can move: {what}.", todo)
        if model.geometry.dimensions == 3 and not np.ptp(model.truss.joints[:, 2]):
            joints.report(
                findings,
                0,
                "z",
                "every joint has the same z, so the truss is flat and nothing holds it across its plane.",
                "Clear z everywhere for a plane truss.",
            )
    except strutbook.SlackMechanism as slack:
        _report_slack_mechanism(slack, model, tables["Members"], findings)
    except strutbook.NotSettled as unsettled:
        combination = model.combinations.names[unsettled.combination]
        tables["Members"].report(
            findings,
            int(np.flatnonzero(model.takes)[0]),
            "Takes",
            f"in the combination {combination} members keep going slack and tight in turn; "
            "no consistent state was found.",
            "Look at misfits, and at members that take one kind of force only.",
        )
    except strutbook.StiffnessNeeded as needed:
        tables["Members"].report(
            findings,
            0,
            "Area",
            f"the truss is statically indeterminate to degree {needed.indeterminacy}, "
            "so its forces depend on stiffness.",
            "Fill in Area and E (or Section and Material) for every member.",
        )
    except strutbook.StrutbookError as error:
        findings.add(Level.STOP, f"the truss could not be solved: {error}.", sheet=joints.layout.sheet)
    return None


def _report_slack_mechanism(
    slack: strutbook.SlackMechanism, model: Model, members: TableData, findings: Findings
) -> None:
    """The truss falls once members have gone slack: which, in which combination, and what then moves."""
    left = np.delete(model.truss.members, slack.slack, axis=0)
    truss = strutbook.Truss(model.truss.joints, left, model.truss.supports)
    what, _ = strutbook.describe_mechanism(slack.stability.mechanisms[0], truss, model.geometry.joints.names)
    names = [model.geometry.members.names[member] for member in slack.slack.tolist()]
    several = len(names) > 1
    listed = ", ".join(names[:6]) + (f" and {len(names) - 6} more" if len(names) > 6 else "")
    members.report(
        findings,
        int(slack.slack[0]),
        "Takes",
        f"in the combination {model.combinations.names[slack.combination]} the member{'s' * several} {listed} "
        f"go{'es' * (not several)} slack, and then the truss can move: {what}.",
        "Let the member take both kinds of force, or add one that takes the other kind.",
    )
