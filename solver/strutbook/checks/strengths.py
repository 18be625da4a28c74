"""Strengths of every member, by its material and the thickness of its section, and why there are none."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from strutbook.arrays import FloatArray, IntArray
from strutbook.checks.capacity import MembersToCheck
from strutbook.materials.material import Material, Substance
from strutbook.sections.section import Section, Shape

#: Dimensions that are thicknesses of parts.
_PARTS = ("flange", "web", "wall", "thickness")


@dataclass(frozen=True, eq=False)
class Strengths:
    """Strengths of steel members; NaN where the material gives none, and why."""

    #: (members,) Pa
    yield_strength: FloatArray
    ultimate_strength: FloatArray
    elastic_modulus: FloatArray
    #: member -> why it has no strength
    missing: dict[int, str]


def steel_strengths(members: MembersToCheck, materials: tuple[Material, ...], material: IntArray) -> Strengths:
    """Strengths of members of steel; any other material, or none, is missing."""
    # Members are many and pairs of section and material few.
    pair = members.section * (len(materials) + 1) + material + 1
    table = np.full((len(members.sections) * (len(materials) + 1), 3), np.nan)
    missing: dict[int, str] = {}
    for one in sorted(set(pair.tolist())):
        place, named = divmod(one, len(materials) + 1)
        found = _strength(members.sections[place], materials[named - 1] if named else None)
        if isinstance(found, str):
            missing.update(dict.fromkeys(np.flatnonzero(pair == one).tolist(), found))
        else:
            table[one] = found
    f_y, f_u, modulus = table[pair].T
    return Strengths(f_y, f_u, modulus, missing)


def _strength(section: Section, material: Material | None) -> tuple[float, float, float] | str:
    if material is None:
        return "no material is named"
    if material.substance is not Substance.STEEL:
        return f"{material.name} is not a steel, for which this standard is written"
    if not material.strengths:
        return f"no yield strength of {material.name} is given"
    thickness = max((section.dimensions.get(part, 0.0) for part in _PARTS), default=0.0)
    try:
        step = material.strength(thickness)
    except ValueError as too_thick:
        return str(too_thick)
    return step.yield_strength, step.ultimate_strength, material.elastic_modulus


def timber_missing(
    members: MembersToCheck, materials: tuple[Material, ...], material: IntArray, value: str, words: str
) -> dict[int, str]:
    """Members that a timber standard cannot check, and why: no timber, no rectangle, or values of another standard.

    `value` is a key of the material's values that the standard needs, `words` what such values are called.
    """
    found: dict[int, str] = {}
    timber = members.having(Shape.TIMBER)
    for member, place in enumerate(material.tolist()):
        if place < 0:
            found[member] = "no material is named"
        elif materials[place].substance is not Substance.TIMBER:
            found[member] = f"{materials[place].name} is not a timber, for which this standard is written"
        elif value not in materials[place].values:
            found[member] = f"{materials[place].name} has no {words}"
        elif not timber[member]:
            found[member] = f"{members.sections[members.section[member]].name} is no rectangle of timber"
    return found
