"""What checks need of members beside their sections: standard, buckling lengths, net areas."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from strutbook_addin.findings import Findings
from strutbook_addin.tables.labels import Labels
from strutbook_addin.tables.reading import FloatArray, TableData

if TYPE_CHECKING:
    from strutbook.checks.registry import Standard


@dataclass(frozen=True, eq=False)
class Checks:
    """One entry a member; NaN where the workbook says nothing."""

    standards: tuple[Standard | None, ...]
    factor_in: FloatArray  #: (members,) K in the plane of the truss
    factor_out: FloatArray  #: (members,) K out of it
    length_in: FloatArray  #: (members,) m
    length_out: FloatArray  #: (members,) m
    net_area: FloatArray  #: (members,) m2
    shear_lag: FloatArray  #: (members,)
    slenderness_limit: float  #: largest slenderness in compression, NaN for what the standard recommends
    deflection_limit: float  #: span over the largest deflection, NaN for no limit
    span: float  #: m, NaN for the largest distance between supports


def read_checks(members: TableData, labels: Labels, findings: Findings) -> Checks:
    """Checks that the sheet `Job` and the rows of the members ask for."""
    nan = float("nan")
    names = members.text("Standard")
    default = labels.texts.get("Standard", "")
    found: dict[str, Standard | None] = {"": None}
    if default:
        found[""] = _with_factors(_standard(default, findings, labels=labels), labels, findings)
    standards: list[Standard | None] = []
    for row, name in enumerate(names):
        if name not in found:
            found[name] = _standard(name, findings, members=members, row=row)
        standards.append(found[name])
    return Checks(
        tuple(standards),
        factor_in=members.number("K in"),
        factor_out=members.number("K out"),
        length_in=members.number("Buckling length in"),
        length_out=members.number("Buckling length out"),
        net_area=members.number("Net area"),
        shear_lag=members.number("Shear lag"),
        slenderness_limit=labels.numbers.get("Slenderness limit", nan),
        deflection_limit=labels.numbers.get("Deflection limit", nan),
        span=labels.numbers.get("Span", nan),
    )


def largest_distance(points: FloatArray) -> float:
    """Largest distance between two of some points, m.

    >>> largest_distance(np.array([[0.0, 0.0], [24.0, 0.0], [12.0, 1.0]]))
    24.0
    """
    if len(points) < 2:
        return 0.0
    apart = points[:, np.newaxis] - points[np.newaxis]
    return float(np.sqrt((apart * apart).sum(axis=2)).max())


def _with_factors(standard: Standard | None, labels: Labels, findings: Findings) -> Standard | None:
    """The standard of the job with the factors that the job sets; those of single members keep theirs."""
    text = labels.texts.get("Factors", "")
    if standard is None or not text:
        return standard
    from strutbook.checks.registry import UnknownFactor

    given: dict[str, float] = {}
    for part in text.replace(",", ";").split(";"):
        name, sign, value = part.partition("=")
        try:
            given[name.strip()] = float(value) if sign else float("nan")
        except ValueError:
            given[name.strip()] = float("nan")
    todo = f"{standard.name} takes: " + (", ".join(f"{k} = {v:g}" for k, v in standard.factors.items()) or "none") + "."
    wrong = [name for name, value in given.items() if value != value]
    if wrong:
        labels.report(findings, "Factors", f"expected name = number, found {wrong[0]!r}.", todo)
        return standard
    try:
        return standard.with_factors(given)
    except UnknownFactor as unknown:
        labels.report(findings, "Factors", f"{unknown}", todo)
        return standard


def _standard(
    name: str,
    findings: Findings,
    *,
    labels: Labels | None = None,
    members: TableData | None = None,
    row: int = 0,
) -> Standard | None:
    # Checks are asked for by few workbooks, and loading them takes longer than solving one.
    from strutbook.checks.registry import UnknownStandard, standard

    try:
        return standard(name)
    except UnknownStandard as unknown:
        what, todo = f"{unknown}", "Correct the name, or clear the cell to check nothing."
        if labels is not None:
            labels.report(findings, "Standard", what, todo)
        elif members is not None:
            members.report(findings, row, "Standard", what, todo)
        return None
