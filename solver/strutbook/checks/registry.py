"""Standards by the name that a user writes."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from functools import partial

from strutbook.arrays import IntArray
from strutbook.checks import aisc360, en1993, en1995, nds, working_stress
from strutbook.checks.capacity import Capacities, MembersToCheck
from strutbook.errors import StrutbookError
from strutbook.materials.material import Material

Check = Callable[[MembersToCheck, tuple[Material, ...], IntArray], Capacities]


class UnknownStandard(StrutbookError):
    """A name that is no standard that is known."""


@dataclass(frozen=True, eq=False)
class Standard:
    """A standard, or a method of one."""

    name: str
    check: Check
    #: load durations on which capacities depend, the longest first; one where they do not
    durations: tuple[str, ...] = ("any",)
    #: duration of actions by nature, as an index into `durations`
    duration_of_nature: Mapping[str, int] | None = None


def _all() -> list[Standard]:
    found = [
        Standard(
            f"AISC 360-{edition % 100} {method.value}",
            partial(aisc360.capacities, options=aisc360.Options(edition, method)),
        )
        for edition in (2022, 2016, 2010)
        for method in aisc360.Method
    ]
    found += [
        Standard("EN 1993-1-1", en1993.capacities),
        Standard("EN 1995-1-1", en1995.capacities, en1995.DURATIONS, en1995.DURATION_OF_NATURE),
    ]
    found += [
        Standard(
            f"EN 1995-1-1 service class {service_class}",
            partial(en1995.capacities, options=en1995.Options(service_class)),
            en1995.DURATIONS,
            en1995.DURATION_OF_NATURE,
        )
        for service_class in (2, 3)
    ]
    found += [
        Standard(
            f"NDS 2018 {'LRFD' if lrfd else 'ASD'}",
            partial(nds.capacities, options=nds.Options(lrfd)),
            nds.DURATIONS,
            nds.DURATION_OF_NATURE,
        )
        for lrfd in (False, True)
    ]
    return [*found, Standard("Working stress", working_stress.capacities)]


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
