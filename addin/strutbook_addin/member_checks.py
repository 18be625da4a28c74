"""Members against the standard that `Job` or their row names: capacities, utilisation, verdict."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from strutbook.checks.capacity import Capacities, MembersToCheck
from strutbook.checks.registry import Standard
from strutbook_addin.model import Model
from strutbook_addin.model.references import IndexArray
from strutbook_addin.results import Results
from strutbook_addin.tables.reading import FloatArray
from strutbook_addin.tables.units import Dimension
from strutbook_addin.tables.writing import ResultColumn

#: Utilisation up to which a member passes: rounding must not fail what is exactly full.
FULL = 1.0 + 1e-9
PASSES, FAILS, NOT_CHECKED = "passes the checks listed", "fails", "not checked"
#: Why a member under line loads is not checked.
BENT = "line loads bend it"


@dataclass(frozen=True, eq=False)
class CheckedMembers:
    """What the standards say of every member; NaN or blank where none was asked."""

    tension: FloatArray  #: (members,) N, capacity in the combination that governs tension
    compression: FloatArray  #: (members,) N, the same for compression
    slenderness: FloatArray  #: (members,)
    utilisation: FloatArray  #: (members,) largest force over capacity
    governed_by: list[str]  #: clause and combination
    verdicts: list[str]
    fails: NDArray[np.bool_]  #: (members,)
    remarks: dict[int, str]  #: member -> what an engineer should look at
    unchecked: dict[int, str]  #: member -> why it was not checked
    groups: list[tuple[Standard, IndexArray, Capacities]]  #: members of each standard with their capacities

    @property
    def columns(self) -> list[ResultColumn]:
        """Columns beside the members."""
        return [
            ResultColumn("Tension capacity", self.tension, Dimension.FORCE),
            ResultColumn("Compression capacity", self.compression, Dimension.FORCE),
            ResultColumn("Slenderness", self.slenderness),
            ResultColumn("Utilisation", self.utilisation),
            ResultColumn("Governed by", self.governed_by),
            ResultColumn("Verdict", self.verdicts),
        ]

    @property
    def largest(self) -> int | None:
        """Member with the largest utilisation."""
        return None if np.isnan(self.utilisation).all() else int(np.nanargmax(self.utilisation))


def check_members(results: Results) -> CheckedMembers | None:
    """Check every member that has a standard; None when none has."""
    model = results.model
    standards = model.checks.standards
    if not any(standards):
        return None
    count = len(standards)
    checked = CheckedMembers(
        tension=np.full(count, np.nan),
        compression=np.full(count, np.nan),
        slenderness=np.full(count, np.nan),
        utilisation=np.full(count, np.nan),
        governed_by=[""] * count,
        verdicts=[""] * count,
        fails=np.zeros(count, dtype=np.bool_),
        remarks={},
        unchecked={},
        groups=[],
    )
    for standard in dict.fromkeys(filter(None, standards)):
        members = np.array([place for place, own in enumerate(standards) if own is standard], dtype=np.intp)
        _check_group(standard, members, results, checked)
    return checked


def _check_group(standard: Standard, members: IndexArray, results: Results, checked: CheckedMembers) -> None:
    """Check the members of one standard and put what it says into `checked`."""
    model = results.model
    sectionless = model.properties.section[members] < 0
    for member in members[sectionless].tolist():
        _skip(checked, member, "no section is named")
    members = members[~sectionless]
    if not len(members):
        return
    capacities = standard.check(
        members_to_check(model, members), model.properties.materials, model.properties.material[members]
    )
    checked.groups.append((standard, members, capacities))
    strength = results.strength
    forces = results.forces[np.ix_(members, strength)]
    duration = load_durations(model, standard)[strength]
    pulled, pushed = utilisations(capacities, forces, duration)
    rows = np.arange(len(members))
    pulls = ~(pulled.largest < pushed.largest)
    at = np.where(pulls, pulled.at, pushed.at)
    utilisation = np.where(pulls, pulled.largest, pushed.largest)
    unknown = np.isnan(pulled.largest) | np.isnan(pushed.largest)
    checked.tension[members] = capacities.tension[rows, duration[pulled.at]]
    checked.compression[members] = -capacities.compression[rows, duration[pushed.at]]
    checked.slenderness[members] = capacities.slenderness
    checked.utilisation[members] = np.where(unknown, np.nan, utilisation)
    names = model.combinations.names
    for place, member in enumerate(members.tolist()):
        if unknown[place]:
            why = _why(capacities, place, tension=bool(np.isnan(pulled.largest[place])))
            _skip(checked, member, why)
            continue
        if not utilisation[place]:
            checked.verdicts[member] = f"{PASSES}: no force"
            continue
        clause = capacities.tension_clause if pulls[place] else capacities.compression_clause
        checked.governed_by[member] = f"{capacities.clauses[clause[place]]}, {names[strength[at[place]]]}"
        is_pushed, bent = bool(pushed.largest[place] > 0), bool(model.bent[member])
        _give_verdict(
            checked,
            member,
            place,
            capacities,
            float(utilisation[place]),
            pushed=is_pushed,
            bent=bent,
            limit=model.checks.slenderness_limit,
        )


@dataclass(frozen=True, eq=False)
class Utilisation:
    """Largest utilisation of every member by one kind of force."""

    largest: FloatArray  #: (members,) 0 without such a force, NaN where there is one and no capacity
    at: IndexArray  #: (members,) combination


def utilisations(capacities: Capacities, forces: FloatArray, duration: IndexArray) -> tuple[Utilisation, Utilisation]:
    """Largest utilisation in tension and in compression.

    Capacities change with the load duration only, so of all combinations of one duration the largest force governs.

    Parameters
    ----------
    capacities : Capacities
        Of the members.
    forces : (members, combinations) array of float
        N, tension positive.
    duration : (combinations,) array of int
        Load duration of each combination, as an index.
    """
    return (
        _largest(forces, capacities.tension, duration, np.argmax, 1.0),
        _largest(forces, capacities.compression, duration, np.argmin, -1.0),
    )


def _largest(
    forces: FloatArray,
    capacity: FloatArray,
    duration: IndexArray,
    extreme: Callable[..., IndexArray],
    sign: float,
) -> Utilisation:
    rows = np.arange(len(forces))
    largest, at = np.full(len(forces), -1.0), np.zeros(len(forces), dtype=np.intp)
    for one in sorted(set(duration.tolist())):
        # With one duration for all, as for steel, no copy of the forces is made.
        combinations = np.flatnonzero(duration == one)
        of_duration = forces if len(combinations) == forces.shape[1] else forces[:, combinations]
        place = extreme(of_duration, axis=1)
        force = sign * of_duration[rows, place]
        with np.errstate(invalid="ignore", divide="ignore"):
            used = np.where(force > 0, force / capacity[:, one], 0.0)
        # NaN wins: a force without a capacity leaves the member unchecked.
        better = (used > largest) | np.isnan(used)
        largest, at = np.where(better, used, largest), np.where(better, combinations[place], at)
    return Utilisation(largest, at)


def _give_verdict(
    checked: CheckedMembers,
    member: int,
    place: int,
    capacities: Capacities,
    utilisation: float,
    *,
    pushed: bool,
    bent: bool,
    limit: float,
) -> None:
    slenderness = capacities.slenderness[place]
    too_slender = pushed and slenderness > limit
    fails = utilisation > FULL or too_slender
    checked.fails[member] = fails
    if bent and not fails:
        _skip(checked, member, BENT)
        checked.verdicts[member] += f"; axial force alone takes {utilisation:.2f}"
        return
    words = [FAILS if fails else PASSES]
    if too_slender:
        words.append(f"slenderness {slenderness:.0f} above the limit {limit:g}")
    recommended = capacities.slenderness_limit if pushed else capacities.tension_slenderness_limit
    if np.isnan(limit) and recommended is not None and slenderness > recommended[place]:
        remark = f"slenderness {slenderness:.0f} above the recommended {recommended[place]:.0f}"
        words.append(remark)
        checked.remarks[member] = remark
    if place in capacities.assumptions:
        words.append(f"assumed: {capacities.assumptions[place]}")
    checked.verdicts[member] = "; ".join(words)


def _skip(checked: CheckedMembers, member: int, why: str) -> None:
    checked.verdicts[member] = f"{NOT_CHECKED}: {why}"
    checked.unchecked[member] = why


def _why(capacities: Capacities, place: int, *, tension: bool) -> str:
    reasons = capacities.tension_not_checked if tension else capacities.compression_not_checked
    return reasons.get(place, "the standard gives no capacity")


def members_to_check(model: Model, members: IndexArray) -> MembersToCheck:
    """Members as a standard is asked about them; each must have a section."""
    checks, lengths = model.checks, model.truss.lengths[members]

    def buckling_length(given: FloatArray, factor: FloatArray) -> FloatArray:
        times = np.where(np.isnan(factor[members]), 1.0, factor[members])
        return np.where(np.isnan(given[members]), times * lengths, given[members])

    return MembersToCheck(
        model.properties.sections,
        model.properties.section[members],
        buckling_length(checks.length_in, checks.factor_in),
        buckling_length(checks.length_out, checks.factor_out),
        checks.net_area[members],
        checks.shear_lag[members],
    )


def load_durations(model: Model, standard: Standard) -> IndexArray:
    """(combinations,) load duration of each combination: that of its shortest action."""
    combinations = model.combinations
    if standard.duration_of_nature is None:
        return np.zeros(len(combinations.names), dtype=np.intp)
    # A case without a nature counts as permanent, which is the least favourable.
    durations = np.array([standard.duration_of_nature.get(nature, 0) for nature in combinations.natures])
    takes_part = combinations.factors != 0
    shortest: IndexArray = np.where(takes_part, durations[:, np.newaxis], 0).max(axis=0, initial=0).astype(np.intp)
    return shortest
