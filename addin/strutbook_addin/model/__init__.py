"""From the tables of a workbook to the truss that the solver takes."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

import strutbook
from strutbook.sections.section import Section
from strutbook_addin.findings import Findings
from strutbook_addin.model.actions import ActionReader
from strutbook_addin.model.checks import Checks, read_checks
from strutbook_addin.model.combinations import Combinations, read_cases, read_combinations
from strutbook_addin.model.geometry import Geometry, read_geometry
from strutbook_addin.model.properties import Properties, read_properties
from strutbook_addin.model.references import IndexArray
from strutbook_addin.model.supports import Held, read_supports
from strutbook_addin.tables.labels import Labels
from strutbook_addin.tables.reading import FloatArray, TableData

_TAKES = {
    "": strutbook.Takes.BOTH,
    "both": strutbook.Takes.BOTH,
    "tension": strutbook.Takes.TENSION,
    "compression": strutbook.Takes.COMPRESSION,
}


@dataclass(frozen=True, eq=False)
class Model:
    """A truss with its actions and combinations, and the names that its user gave."""

    geometry: Geometry
    held: Held
    properties: Properties
    takes: IndexArray  #: (members,) strutbook.Takes
    bent: NDArray[np.bool_]  #: (members,) whether line loads bend the member
    combinations: Combinations
    checks: Checks
    truss: strutbook.Truss
    actions: strutbook.Actions
    self_weight: FloatArray  #: (cases,) factor on the weight of the members


def build_model(tables: dict[str, TableData], labels: Labels, findings: Findings) -> Model | None:
    """Model from the tables by sheet; None (and findings that say why) when it cannot be built."""
    joints, members = tables["Joints"], tables["Members"]
    geometry = read_geometry(joints, members, findings)
    held = read_supports(tables["Supports"], geometry, findings)
    properties = read_properties(members, tables.get("Sections"), tables.get("Materials"), findings)
    load_tables = [tables[sheet] for sheet in ("Loads", "Member loads", "Settlements") if sheet in tables]
    cases = read_cases(tables.get("Cases"), load_tables)
    combinations = read_combinations(tables.get("Combinations"), cases, findings)
    reader = ActionReader(geometry, properties, held, cases, findings)
    reader.add_joint_loads(tables["Loads"])
    if "Member loads" in tables:
        reader.add_member_loads(tables["Member loads"])
    if "Settlements" in tables:
        reader.add_settlements(tables["Settlements"])
    reader.add_misfits(members)
    reader.check_self_weight(members)
    checks = read_checks(members, labels, findings)
    if findings.stopped:
        return None
    truss = strutbook.Truss(
        joints=geometry.coordinates,
        members=geometry.ends,
        supports=strutbook.Supports(held.joint, held.direction, held.stiffness),
        axial_rigidity=properties.axial,
    )
    takes = np.array([_TAKES[word] for word in members.text("Takes")], dtype=np.intp)
    return Model(
        geometry,
        held,
        properties,
        takes,
        reader.bent,
        combinations,
        checks,
        truss,
        reader.actions(truss),
        cases.self_weight,
    )


def with_sections(model: Model, chosen: Mapping[int, Section]) -> Model:
    """The same model with other sections of some members; stiffness and self weight follow."""
    before = model.properties
    sections = [*before.sections]
    places: dict[int, int] = {}
    section, area = before.section.copy(), before.area.copy()
    for member, one in chosen.items():
        if id(one) not in places:
            places[id(one)] = len(sections)
            sections.append(one)
        section[member], area[member] = places[id(one)], one.area
    properties = replace(before, sections=tuple(sections), section=section, area=area)
    truss = strutbook.Truss(
        model.truss.joints, model.truss.members, model.truss.supports, axial_rigidity=properties.axial
    )
    actions = model.actions
    if np.any(model.self_weight):
        heavier = strutbook.self_weight(truss, (area - before.area) * before.density)
        joint_loads = actions.joint_loads.copy()
        # The last case holds the misfits and weighs nothing.
        joint_loads[:, :, :-1] += heavier[:, :, np.newaxis] * model.self_weight
        actions = strutbook.Actions(joint_loads, actions.free_elongation, actions.settlement)
    return replace(model, properties=properties, truss=truss, actions=actions)
