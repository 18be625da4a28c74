"""The lightest sections, by group, with which every member passes and the truss keeps its deflection limit.

Forces follow stiffness and self weight follows area, so choosing and solving are repeated until the choice stands.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from strutbook.checks.capacity import MembersToCheck
from strutbook.checks.registry import Standard
from strutbook.sections import Section, Shape, families, section
from strutbook_addin.member_checks import (
    FULL,
    CheckedMembers,
    check_members,
    load_durations,
    members_to_check,
    utilisations,
)
from strutbook_addin.model import Model, with_sections
from strutbook_addin.model.references import IndexArray
from strutbook_addin.results import Results, solve
from strutbook_addin.tables.reading import FloatArray
from strutbook_addin.tables.units import Dimension
from strutbook_addin.tables.writing import ResultColumn

#: Rounds of choosing and solving; after the first ones a group only gets heavier, so that the choice settles.
ROUNDS, FREE_ROUNDS = 30, 8
#: Steps to a heavier section that deflection may ask for.
STIFFER = 200
_FAMILIES = {
    Shape.CIRCULAR_HOLLOW: "CHS",
    Shape.ANGLE: "L",
    Shape.DOUBLE_ANGLE: "2L",
    Shape.I_SECTION: "IPE",
    Shape.CHANNEL: "UPE",
}


class NotSizable(ValueError):
    """Why nothing can be sized; the message is a sentence."""


@dataclass(frozen=True, eq=False)
class SizedGroup:
    """What was chosen for one group of members."""

    name: str
    members: IndexArray
    before: str  #: names of the sections that stood there
    chosen: Section | None  #: None where none could be checked and all was left as it is
    mass_before: float  #: kg
    mass_chosen: float  #: kg
    utilisation: float
    governed_by: str
    remark: str


@dataclass(frozen=True, eq=False)
class Sizing:
    """The truss with the sections that were chosen."""

    groups: tuple[SizedGroup, ...]
    results: Results
    checked: CheckedMembers

    @property
    def passes(self) -> bool:
        """Whether every member that can be checked passes, and the deflection limit is kept."""
        return not self.checked.fails.any() and not self.results.deflection_over_limit() > 1

    @property
    def columns(self) -> list[ResultColumn]:
        """The comparison as a list."""
        groups = self.groups
        return [
            ResultColumn("Group", [group.name for group in groups]),
            ResultColumn("Members", np.array([float(len(group.members)) for group in groups])),
            ResultColumn("Section before", [group.before for group in groups]),
            ResultColumn("Section chosen", [group.chosen.name if group.chosen else group.before for group in groups]),
            ResultColumn("Mass before", np.array([group.mass_before for group in groups]), Dimension.MASS),
            ResultColumn("Mass chosen", np.array([group.mass_chosen for group in groups]), Dimension.MASS),
            ResultColumn("Utilisation", np.array([group.utilisation for group in groups])),
            ResultColumn("Governed by", [group.governed_by for group in groups]),
            ResultColumn("Remark", [group.remark for group in groups]),
        ]


@dataclass
class _Group:
    """A group while its section is looked for."""

    name: str
    members: IndexArray
    candidates: list[Section]  #: the lightest first
    choice: int = -1
    none_passes: bool = False
    stiffened: bool = False

    @property
    def chosen(self) -> Section | None:
        """The choice; None while there is none, or when no candidate can be checked."""
        return None if self.choice < 0 else self.candidates[self.choice]


def size(model: Model, stock: Mapping[str, Sequence[Section]]) -> Sizing:
    """Choose the lightest sections.

    Parameters
    ----------
    model : Model
        Its members must have a standard, a material and a section.
    stock : mapping
        Sections that may be chosen, by group; under the empty name those for every other group. Without any for a
        group, the family of its present section is taken.

    Raises
    ------
    NotSizable
        When no member has a standard.
    strutbook.StrutbookError
        When the truss cannot be solved.
    """
    if not any(model.checks.standards):
        raise NotSizable(
            "no standard is named, so nothing says what passes. Write one beside Standard on the sheet Job."
        )
    groups = _groups(model, stock)
    results = solve(model)
    for round_ in range(ROUNDS):
        changed = _choose(groups, results, only_heavier=round_ >= FREE_ROUNDS)
        if not changed:
            break
        results = solve(_resized(model, groups))
    results = _stiffened(model, groups, results)
    checked = check_members(results)
    if checked is None:
        raise NotSizable("no member has a standard.")
    return Sizing(tuple(_described(group, model, checked) for group in groups), results, checked)


def _groups(model: Model, stock: Mapping[str, Sequence[Section]]) -> list[_Group]:
    """Groups of members; those without a group are grouped by their present section."""
    by_name: dict[str, list[int]] = {}
    for member, name in enumerate(model.geometry.groups):
        place = int(model.properties.section[member])
        if model.checks.standards[member] is None or place < 0 or model.properties.material[member] < 0:
            continue
        by_name.setdefault(name or model.properties.sections[place].name, []).append(member)
    groups = []
    for name, members in by_name.items():
        first = model.properties.sections[int(model.properties.section[members[0]])]
        allowed = list(stock.get(name) or stock.get("") or _family(first))
        groups.append(_Group(name, np.array(members, dtype=np.intp), sorted(allowed, key=lambda one: one.area)))
    return groups


def _family(one: Section) -> list[Section]:
    """Standard sizes of the family to which a section belongs; itself where there is none."""
    if one.shape is Shape.RECTANGULAR_HOLLOW:
        square = np.isclose(one.dimensions["depth"], one.dimensions["width"])
        name = "HSS" if "design_wall" in one.dimensions else "SHS" if square else "RHS"
    else:
        name = _FAMILIES.get(one.shape, "")
    return [section(designation) for designation in families().get(name, ())] or [one]


def _choose(groups: list[_Group], results: Results, *, only_heavier: bool) -> bool:
    """Choose the lightest section that passes under the present forces; whether any choice changed."""
    changed = False
    for group in groups:
        passes, utilisation = _candidates_that_pass(group, results)
        if np.isnan(utilisation).all():
            continue
        first = int(passes.argmax()) if passes.any() else int(np.nanargmin(utilisation))
        group.none_passes = not passes.any()
        if only_heavier:
            first = max(first, group.choice)
        changed = changed or first != group.choice
        group.choice = first
    return changed


def _candidates_that_pass(group: _Group, results: Results) -> tuple[NDArray[np.bool_], FloatArray]:
    """(candidates,) whether every member of the group passes with it, and the largest utilisation."""
    model = results.model
    count = len(group.candidates)
    passes, utilisation = np.ones(count, dtype=np.bool_), np.zeros(count)
    for standard in dict.fromkeys(model.checks.standards[member] for member in group.members.tolist()):
        if standard is None:
            continue
        members = np.array(
            [member for member in group.members.tolist() if model.checks.standards[member] is standard], dtype=np.intp
        )
        ok, largest = _pass_by(standard, members, group.candidates, results)
        passes &= ok
        # A member that cannot be checked keeps its whole group from being known.
        utilisation = np.maximum(utilisation, largest)
    return passes, utilisation


def _pass_by(
    standard: Standard, members: IndexArray, candidates: list[Section], results: Results
) -> tuple[NDArray[np.bool_], FloatArray]:
    model = results.model
    count, size_ = len(candidates), len(members)
    present = members_to_check(model, members)
    holes = present.of_sections("area") - present.net_area
    # Every member with every candidate, candidate after candidate.
    index = np.repeat(np.arange(count), size_)
    areas = np.array([one.area for one in candidates])[index]
    tried = MembersToCheck(
        tuple(candidates),
        index,
        np.tile(present.buckling_length_in, count),
        np.tile(present.buckling_length_out, count),
        areas - np.tile(holes, count),
        np.tile(present.shear_lag, count),
    )
    materials = model.properties.materials
    capacities = standard.check(tried, materials, np.tile(model.properties.material[members], count))
    forces = np.tile(results.forces[np.ix_(members, results.strength)], (count, 1))
    duration = load_durations(model, standard)[results.strength]
    pulled, pushed = utilisations(capacities, forces, duration)
    used = np.maximum(pulled.largest, pushed.largest)
    fits = used <= FULL
    limit = model.checks.slenderness_limit
    if not np.isnan(limit):
        fits &= ~((pushed.largest > 0) & (capacities.slenderness > limit))
    elif capacities.slenderness_limit is not None:
        fits &= ~((pushed.largest > 0) & (capacities.slenderness > capacities.slenderness_limit))
    by_candidate = (count, size_)
    passes = np.asarray(fits.reshape(by_candidate).all(axis=1))
    return passes, used.reshape(by_candidate).max(axis=1)


def _resized(model: Model, groups: list[_Group]) -> Model:
    chosen = {int(member): group.chosen for group in groups if group.chosen for member in group.members}
    return with_sections(model, chosen)


def _stiffened(model: Model, groups: list[_Group], results: Results) -> Results:
    """Heavier sections where deflection asks for them: each time the step that helps most for its mass."""
    for _ in range(STIFFER):
        over = results.deflection_over_limit()
        if not over > 1:
            break
        best: tuple[float, _Group, Results] | None = None
        for group in groups:
            if group.chosen is None or group.choice + 1 >= len(group.candidates):
                continue
            group.choice += 1
            tried = solve(_resized(model, groups))
            group.choice -= 1
            gain = over - tried.deflection_over_limit()
            mass = tried.total_mass() - results.total_mass()
            worth = gain / mass if mass > 0 else gain
            if gain > 0 and (best is None or worth > best[0]):
                best = (worth, group, tried)
        if best is None:
            break
        _, group, results = best
        group.choice += 1
        group.stiffened = True
        if _choose(groups, results, only_heavier=True):
            results = solve(_resized(model, groups))
    return results


def _described(group: _Group, model: Model, checked: CheckedMembers) -> SizedGroup:
    members = group.members
    density, lengths = model.properties.density[members], model.truss.lengths[members]
    utilisation = checked.utilisation[members]
    known = utilisation[~np.isnan(utilisation)]
    governing = int(members[int(np.nanargmax(utilisation))]) if len(known) else int(members[0])
    remarks = []
    if group.chosen is None:
        remarks.append("cannot be checked, so it was left as it is; the sheet Findings says why")
    if group.none_passes:
        remarks.append("no section of the stock passes; this one comes nearest")
    if group.stiffened:
        remarks.append("governed by deflection")
    bent = int(model.bent[members].sum())
    if bent:
        remarks.append(f"bending of {bent} members is not checked")
    before = dict.fromkeys(model.properties.sections[place].name for place in model.properties.section[members])
    name = model.geometry.members.names[governing]
    mass_before = float((model.properties.area[members] * density * lengths).sum())
    chosen = group.chosen
    return SizedGroup(
        group.name,
        members,
        ", ".join(before),
        chosen,
        mass_before,
        mass_before if chosen is None else float((chosen.area * density * lengths).sum()),
        float(known.max()) if len(known) else float("nan"),
        f"{name}, {checked.governed_by[governing]}" if checked.governed_by[governing] else "",
        "; ".join(remarks),
    )
