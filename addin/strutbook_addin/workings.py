"""The workings of checks: every value of every clause for chosen members, as a checker would write them."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from strutbook_addin.member_checks import CheckedMembers
from strutbook_addin.results import Results
from strutbook_addin.sheets import LIVE, Formula, Written, cell_name
from strutbook_addin.tables.list_sheets import DIGITS
from strutbook_addin.tables.writing import ResultColumn

if TYPE_CHECKING:
    from strutbook.checks.capacity import Step
    from strutbook.checks.registry import Standard

#: The word for the member with the largest utilisation.
WORST = "worst"
#: Units in which an engineer reads the values that steps hold in SI.
_SHOWN = {"N": ("kN", 1e3), "m": ("mm", 1e-3), "m2": ("mm2", 1e-6), "Pa": ("N/mm2", 1e6), "": ("", 1.0)}


COLUMNS = ("Member", "Clause", "Symbol", "Meaning", "Value", "Unit", "By")


def workings_columns(
    results: Results, checked: CheckedMembers, asked: str, header_row: int, value_column: int
) -> list[ResultColumn]:
    """Lines of the workings of the members that are asked for: names with commas between them, or `worst`.

    `header_row` and `value_column` say where the list stands, so that values can refer to each other.
    """
    names = results.model.geometry.members.names
    wanted = [word.strip() for word in re.split(r"[,;]", asked)]
    members = [names.index(word) for word in wanted if word in names]
    if any(word.casefold() == WORST for word in wanted) and checked.largest is not None:
        members.append(checked.largest)
    lines: list[tuple[Written, ...]] = []
    for member in dict.fromkeys(members):
        lines += _lines(member, results, checked, header_row + 1 + len(lines), value_column)
    return [ResultColumn(name, [line[place] for line in lines]) for place, name in enumerate(COLUMNS)]


def _lines(
    member: int, results: Results, checked: CheckedMembers, first_row: int, value_column: int
) -> list[tuple[Written, ...]]:
    name = results.model.geometry.members.names[member]
    lines: list[tuple[Written, ...]] = []
    for standard, members, capacities in checked.groups:
        places = np.flatnonzero(members == member)
        if not len(places):
            continue
        place = int(places[0])
        known: dict[str, tuple[str, float]] = {}
        for step in capacities.steps:
            values = _values(step, standard, place)
            for label, value in values:
                shown, factor = _SHOWN[step.unit]
                number = float(f"{value / factor:.{DIGITS}g}")
                cell = cell_name(first_row + len(lines), value_column)
                live = _live(step.formula, known, number) if len(values) == 1 else None
                clause, meaning = f"{standard.name} {step.clause}", f"{step.meaning}{label}"
                lines.append((name, clause, step.symbol, meaning, live or number, shown, step.formula))
                if len(values) == 1:
                    known[step.symbol] = (cell, number)
        lines.append((name, "", "", checked.verdicts[member], None, "", ""))
    return lines


def _live(formula: str, known: dict[str, tuple[str, float]], number: float) -> Formula | None:
    """Live formula of products and quotients of values that stand above; None where it is not so simple.

    >>> _live("A * f_y / gamma", {"A": ("E2", 873.0), "f_y": ("E3", 355.0), "gamma": ("E4", 1.0)}, 309.915).text
    '=N(0)+E2*E3/E4*0.001'
    """
    words = formula.split()
    symbols, operators = words[::2], words[1::2]
    if not words or not set(operators) <= {"*", "/"} or not all(symbol in known for symbol in symbols):
        return None
    text, product = known[symbols[0]]
    for operator, symbol in zip(operators, symbols[1:], strict=True):
        cell, value = known[symbol]
        text += operator + cell
        product = product * value if operator == "*" else product / value
    # Values stand in units of their own; what is left is a power of ten, or the formula says less than the value.
    factor = float(f"{number / product:.3g}") if product else 0.0
    if factor not in (1.0, 1e-3, 1e-6, 1e3, 1e6):
        return None
    return Formula(f"={LIVE}{text}" + ("" if factor == 1 else f"*{factor:g}"), number)


def _values(step: Step, standard: Standard, place: int) -> list[tuple[str, float]]:
    """Values of a step for one member, one for each load duration on which it depends; without those that are none."""
    values = np.atleast_1d(step.values[place])
    labels = [""] if len(values) == 1 else [f" ({duration})" for duration in standard.durations]
    return [(label, float(value)) for label, value in zip(labels, values, strict=True) if np.isfinite(value)]
