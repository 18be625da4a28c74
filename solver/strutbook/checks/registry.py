"""Standards by the name that a user writes."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, fields, replace
from difflib import get_close_matches
from typing import Any

from strutbook.arrays import IntArray
from strutbook.checks import aisc360, en1993, en1995, nds, working_stress
from strutbook.checks.capacity import Capacities, MembersToCheck
from strutbook.errors import StrutbookError
from strutbook.materials.material import Material

#: A public function of a standard: members, materials, index of each member's material, options.
Check = Callable[[MembersToCheck, tuple[Material, ...], IntArray, Any], Capacities]


class UnknownStandard(StrutbookError):
    """A name that is no standard that is known."""


class UnknownFactor(StrutbookError):
    """A factor that the standard does not know, or a value that it cannot have."""


@dataclass(frozen=True, eq=False)
class Standard:
    """A standard, or a method of one."""

    name: str
    capacities: Check
    #: national values and choices: a frozen dataclass of the standard's module
    options: Any
    #: load durations on which capacities depend, the longest first; one where they do not
    durations: tuple[str, ...] = ("any",)
    #: duration of actions by nature, as an index into `durations`
    duration_of_nature: Mapping[str, int] | None = None

    def check(self, members: MembersToCheck, materials: tuple[Material, ...], material: IntArray) -> Capacities:
        """Capacities of members by this standard with its options."""
        return self.capacities(members, materials, material, self.options)

    @property
    def factors(self) -> dict[str, float]:
        """Numbers among the options, which a user may set, by name."""
        values = {field.name: getattr(self.options, field.name) for field in fields(self.options)}
        return {name: value for name, value in values.items() if type(value) in (int, float) and name != "edition"}

    def with_factors(self, given: Mapping[str, float]) -> Standard:
        """The same standard with other factors.

        Raises
        ------
        UnknownFactor
            When it has no factor of that name, or the value is not above 0.
        """
        by_spelling = {_spelled(name): name for name in self.factors}
        changed: dict[str, float] = {}
        for name, value in given.items():
            known = by_spelling.get(_spelled(name))
            if known is None:
                names = ", ".join(self.factors) or "none"
                raise UnknownFactor(f"{self.name} has no factor {name}; it has {names}.")
            whole = type(self.factors[known]) is int
            if value <= 0 or (whole and not float(value).is_integer()):
                raise UnknownFactor(f"the factor {name} is {value:g}; expected a number above 0.")
            changed[known] = int(value) if whole else value
        try:
            return replace(self, options=replace(self.options, **changed))
        except ValueError as wrong:
            raise UnknownFactor(str(wrong)) from wrong


def _all() -> list[Standard]:
    found = [
        Standard(f"AISC 360-{edition % 100} {method.value}", aisc360.capacities, aisc360.Options(edition, method))
        for edition in (2022, 2016, 2010)
        for method in aisc360.Method
    ]
    found.append(Standard("EN 1993-1-1", en1993.capacities, en1993.Options()))
    timber = (en1995.DURATIONS, en1995.DURATION_OF_NATURE)
    found += [
        Standard(
            "EN 1995-1-1" + (f" service class {number}" if number > 1 else ""),
            en1995.capacities,
            en1995.Options(number),
            *timber,
        )
        for number in (1, 2, 3)
    ]
    found += [
        Standard(
            f"NDS 2018 {'LRFD' if lrfd else 'ASD'}",
            nds.capacities,
            nds.Options(lrfd),
            nds.DURATIONS,
            nds.DURATION_OF_NATURE,
        )
        for lrfd in (False, True)
    ]
    return [*found, Standard("Working stress", working_stress.capacities, working_stress.Options())]


#: Standards by name.
STANDARDS = {standard.name: standard for standard in _all()}


def standard(name: str) -> Standard:
    """Standard by its name; case, spaces and hyphens do not matter.

    Raises
    ------
    UnknownStandard
        With the nearest known name and the names of all.

    Examples
    --------
    >>> standard("aisc 360-22 lrfd").name
    'AISC 360-22 LRFD'
    """
    by_spelling = {_spelled(known): found for known, found in STANDARDS.items()}
    found = by_spelling.get(_spelled(name))
    if found is None:
        close = get_close_matches(name, list(STANDARDS), n=1, cutoff=0.5)
        question = f" Did you mean {close[0]}?" if close else ""
        raise UnknownStandard(f"{name!r} is no standard that is known.{question} Known are: {', '.join(STANDARDS)}.")
    return found


def _spelled(name: str) -> str:
    return "".join(letter for letter in name.casefold() if letter.isalnum())
