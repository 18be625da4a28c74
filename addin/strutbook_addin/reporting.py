"""What a solved and checked truss has to say to its engineer: findings about results."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from strutbook_addin.findings import Findings, Level
from strutbook_addin.results import Results
from strutbook_addin.tables.reading import TableData

if TYPE_CHECKING:
    from strutbook_addin.member_checks import CheckedMembers
    from strutbook_addin.workbook import Workbook

#: What no run checks unless a standard, or a limit, asks for it.
OF_MEMBERS, OF_DEFLECTION = "strength and buckling of members", "deflection limits"
#: What no run of this version checks.
NEVER = "connections, bending of members, fatigue, fire, vibration, erection, second-order effects"
#: The whole list, as it stands where nothing was asked for.
NOT_CHECKED = f"not checked: {OF_MEMBERS}, {OF_DEFLECTION}, {NEVER}."
CAUTION = "For use by a competent engineer; local codes, national annexes and licensed practice govern."
#: Largest joint residual that needs no remark.
RESIDUAL = 1e-9
#: Members that fail are told one by one up to so many.
TOLD = 25


def unchecked(results: Results | None, checked: CheckedMembers | None) -> str:
    """What was not checked in this run, as a sentence."""
    items = [NEVER]
    if results is None or np.isnan(results.deflection_over_limit()):
        items.insert(0, OF_DEFLECTION)
    if checked is None:
        items.insert(0, OF_MEMBERS)
    elif checked.unchecked:
        count = len(checked.unchecked)
        items.insert(0, f"strength and buckling of {count} member{'s' * (count > 1)}")
    return f"not checked: {', '.join(items)}."


def report_solution(results: Results, tables: dict[str, TableData], findings: Findings) -> None:
    """Findings about joint balance, slack members and displacements that are missing."""
    worst = float(results.analysis.residual.max(initial=0.0))
    if worst > RESIDUAL:
        findings.add(
            Level.LOOK,
            f"the joints balance only to {worst:.1e} of the largest load; {RESIDUAL:.0e} is usual.",
            "The truss may be close to a mechanism; look at its stiffnesses and geometry.",
            sheet=tables["Joints"].layout.sheet,
        )
    if results.slack.any():
        members = tables["Members"]
        first = int(results.slack.any(axis=1).argmax())
        count = int(results.slack.any(axis=1).sum())
        members.report(
            findings,
            first,
            "Takes",
            f"{count} member{'s go' if count > 1 else ' goes'} slack in some combination and carr"
            f"{'y' if count > 1 else 'ies'} nothing there; combinations were solved one by one.",
            level=Level.NOTE,
        )
    if results.displacements is None:
        findings.add(
            Level.NOTE,
            "no member has an area and a modulus, so forces come from statics alone, without displacements.",
            "Fill in Area and E, or Section and Material, for displacements.",
            sheet=tables["Members"].layout.sheet,
        )


def report_checks(results: Results, checked: CheckedMembers | None, workbook: Workbook, findings: Findings) -> None:
    """Findings about members that fail, were not checked or need a look, and about deflection."""
    over = results.deflection_over_limit()
    if over > 1:
        limit = results.model.checks.deflection_limit
        workbook.labels.report(
            findings,
            "Deflection limit",
            f"the largest displacement is {over:.2f} times the limit of span/{limit:g}.",
            "Use larger sections or a deeper truss.",
            Level.FAIL,
        )
    if checked is None:
        return
    _report_unknown_workings(results, workbook, findings)
    members = workbook.tables["Members"]
    names = results.model.geometry.members.names
    failing = np.flatnonzero(checked.fails)
    worst_first = failing[np.argsort(-checked.utilisation[failing], kind="stable")]
    for member in worst_first[:TOLD].tolist():
        members.report(
            findings,
            member,
            "Utilisation",
            f"member {names[member]} {checked.verdicts[member]}: {checked.utilisation[member]:.2f} of its capacity "
            f"by {checked.governed_by[member]}.",
            "Use a larger section, or hold it at shorter buckling lengths.",
            Level.FAIL,
        )
    if len(failing) > TOLD:
        what = f"{len(failing) - TOLD} more members fail; see the column Verdict."
        findings.add(Level.FAIL, what, sheet=members.layout.sheet)
    for why, where in _by_words(checked.unchecked).items():
        members.report(
            findings,
            where[0],
            "Verdict",
            f"{_counted(len(where))} not checked: {why} ({_listed([names[member] for member in where])}).",
            "Check them by other means, or give what is missing.",
            Level.LOOK,
        )
    for remark, where in _by_words(checked.remarks).items():
        members.report(
            findings,
            where[0],
            "Slenderness",
            f"member {names[where[0]]}: {remark}.",
            "Look whether that is acceptable.",
            Level.LOOK,
        )


def _report_unknown_workings(results: Results, workbook: Workbook, findings: Findings) -> None:
    names = results.model.geometry.members.names
    asked = [word.strip() for word in workbook.labels.texts.get("Workings for", "").replace(";", ",").split(",")]
    unknown = [word for word in asked if word and word.casefold() != "worst" and word not in names]
    if unknown:
        what = f"there is no member {_listed(unknown)}, so nothing is worked out for it."
        workbook.labels.report(
            findings, "Workings for", what, "Write names of members with commas between them, or worst.", Level.LOOK
        )


def _by_words(told: dict[int, str]) -> dict[str, list[int]]:
    """Members by what is said of them."""
    found: dict[str, list[int]] = {}
    for member, words in sorted(told.items()):
        found.setdefault(words, []).append(member)
    return found


def _counted(count: int) -> str:
    return f"{count} member{'s were' if count > 1 else ' was'}"


def _listed(names: list[str]) -> str:
    return ", ".join(names[:6]) + (f" and {len(names) - 6} more" if len(names) > 6 else "")
