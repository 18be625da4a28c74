"""Combinations that a rule makes from the natures of the load cases."""

from __future__ import annotations

from dataclasses import dataclass

from strutbook.errors import StrutbookError

#: Natures that a rule knows; those after the first two are variable.
PERMANENT = ("permanent", "settlement")
VARIABLE = ("imposed", "moving", "snow", "wind", "temperature")
ACCIDENTAL = "accidental"


class NatureNeeded(StrutbookError):
    """A case of which the nature is not known, and so no factor.

    Attributes
    ----------
    case : str
        Name of the case.
    """

    def __init__(self, case: str) -> None:
        super().__init__(f"the case {case} has no nature, so no rule can give it a factor.")
        self.case = case


@dataclass(frozen=True)
class Generated:
    """One combination."""

    name: str
    #: `strength` or `service`
    purpose: str
    #: factor of each case that takes part
    factors: dict[str, float]
    #: expression of the standard
    rule: str


def by_nature(natures: dict[str, str]) -> dict[str, list[str]]:
    """Cases of each nature, in their order.

    Raises
    ------
    NatureNeeded
        When a case has none.
    """
    cases: dict[str, list[str]] = {}
    for case, nature in natures.items():
        if not nature:
            raise NatureNeeded(case)
        cases.setdefault(nature, []).append(case)
    return cases


def choices(cases: dict[str, list[str]]) -> list[dict[str, str]]:
    """Ways in which variable cases can act together: one case of each nature, or none.

    Cases of one nature (wind from the left, wind from the right) exclude each other; what acts together belongs into
    one case. Each way is a case by its nature; the way without any variable case is not among them.
    """
    ways: list[dict[str, str]] = [{}]
    for nature in VARIABLE:
        ways += [{**way, nature: case} for way in ways for case in cases.get(nature, [])]
    return [way for way in ways if way]


def distinct(combinations: list[Generated]) -> list[Generated]:
    """The same combinations without those that repeat the factors of an earlier one."""
    seen: set[tuple[str, frozenset[tuple[str, float]]]] = set()
    kept: list[Generated] = []
    for combination in combinations:
        key = (combination.purpose, frozenset(item for item in combination.factors.items() if item[1]))
        if key[1] and key not in seen:
            seen.add(key)
            kept.append(combination)
    return kept
