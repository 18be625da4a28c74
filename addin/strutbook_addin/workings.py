"""The workings of checks: every value of every clause for chosen members, as a checker would write them."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from strutbook_addin.member_checks import CheckedMembers
from strutbook_addin.results import Results
from strutbook_addin.sheets import Written
from strutbook_addin.tables.list_sheets import DIGITS
from strutbook_addin.tables.writing import ResultColumn

if TYPE_CHECKING:
    from strutbook.checks.capacity import Step
    from strutbook.checks.registry import Standard

#: The word for the member with the largest utilisation.
WORST = "worst"
#: Units in which an engineer reads the values that steps hold in SI.
_SHOWN = {"N": ("kN", 1e3), "m": ("mm", 1e-3), "m2": ("mm2", 1e-6), "Pa": ("N/mm2", 1e6), "": ("", 1.0)}


def workings_columns(results: Results, checked: CheckedMembers, asked: str) -> list[ResultColumn]:
    """Lines of the workings of the members that are asked for: names with commas between them, or `worst`."""
    names = results.model.geometry.members.names
    wanted = [word.strip() for word in re.split(r"[,;]", asked)]
    members = [names.index(word) for word in wanted if word in names]
    if any(word.casefold() == WORST for word in wanted) and checked.largest is not None:
        members.append(checked.largest)
    lines: list[tuple[Written, ...]] = []
    for member in dict.fromkeys(members):
        lines += _lines(member, results, checked)
    columns = ("Member", "Clause", "Symbol", "Meaning", "Value", "Unit", "By")
    return [ResultColumn(name, [line[place] for line in lines]) for place, name in enumerate(columns)]


def _lines(member: int, results: Results, checked: CheckedMembers) -> list[tuple[Written, ...]]:
    name = results.model.geometry.members.names[member]
    lines: list[tuple[Written, ...]] = []
    for standard, members, capacities in checked.groups:
        places = np.flatnonzero(members == member)
        if not len(places):
            continue
        place = int(places[0])
        for step in capacities.steps:
            for label, value in _values(step, standard, place):
                shown, factor = _SHOWN[step.unit]
                number = float(f"{value / factor:.{DIGITS}g}")
                meaning = f"{step.meaning}{label}"
                lines.append(
                    (name, f"{standard.name} {step.clause}", step.symbol, meaning, number, shown, step.formula)
                )
        lines.append((name, "", "", checked.verdicts[member], None, "", ""))
    return lines


def _values(step: Step, standard: Standard, place: int) -> list[tuple[str, float]]:
    """Values of a step for one member, one for each load duration on which it depends; without those that are none."""
    values = np.atleast_1d(step.values[place])
    labels = [""] if len(values) == 1 else [f" ({duration})" for duration in standard.durations]
    return [(label, float(value)) for label, value in zip(labels, values, strict=True) if np.isfinite(value)]
