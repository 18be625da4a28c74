"""What acts on the truss: joint loads, member loads, temperature, misfit, settlements, self weight."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike, NDArray

import strutbook
from strutbook_addin.findings import Findings, Level
from strutbook_addin.model.combinations import Cases
from strutbook_addin.model.geometry import Geometry
from strutbook_addin.model.properties import Properties
from strutbook_addin.model.references import IndexArray
from strutbook_addin.model.supports import Held
from strutbook_addin.tables.reading import FloatArray, TableData

#: Brings loads (loads, dimensions) on members to (joints, dimensions) loads.
_Lumping = Callable[[strutbook.Truss, ArrayLike, ArrayLike], FloatArray]


class ActionReader:
    """Collects the actions of every case; the last case holds the misfits, which act always."""

    def __init__(
        self, geometry: Geometry, properties: Properties, held: Held, cases: Cases, findings: Findings
    ) -> None:
        self._geometry = geometry
        self._properties = properties
        self._held = held
        self._cases = cases
        self._findings = findings
        count = len(cases.names) + 1
        self._joint_loads = np.zeros((*geometry.coordinates.shape, count))
        self._free_elongation = np.zeros((len(geometry.members), count))
        self._settlement = np.zeros((len(held.joint), count))
        self.bent = np.zeros(len(geometry.members), dtype=np.bool_)  #: (members,) whether line loads bend them
        self._line_loads: list[tuple[_Lumping, IndexArray, IndexArray, FloatArray]] = []
        self._warmings: list[tuple[IndexArray, IndexArray, FloatArray]] = []

    def add_joint_loads(self, table: TableData) -> None:
        """Add the table of joint loads."""
        case = self._cases.indices(table, self._findings)
        joint = self._geometry.joints.indices(table, "Joint", self._findings)
        forces = self._components(table, ("Fx", "Fy", "Fz"))
        known = (case >= 0) & (joint >= 0)
        np.add.at(self._joint_loads.transpose(2, 0, 1), (case[known], joint[known]), forces[known])
        self._note_loads_on_supports(table, joint, forces)

    def add_member_loads(self, table: TableData) -> None:
        """Add the table of member loads and temperature changes."""
        case = self._cases.indices(table, self._findings)
        member = self._geometry.members.indices(table, "Member", self._findings)
        intensity = self._components(table, ("wx", "wy", "wz"))
        known = (case >= 0) & (member >= 0)
        projected = np.array([per == "projection" for per in table.text("Per")], dtype=np.bool_)
        for lump, rows in (
            (strutbook.line_load, known & ~projected),
            (strutbook.projected_line_load, known & projected),
        ):
            self._line_loads.append((lump, case[rows], member[rows], intensity[rows]))
        loaded = known & (intensity != 0).any(axis=1)
        self.bent[member[loaded]] = True
        if loaded.any():
            row = int(np.flatnonzero(loaded)[0])
            count = len(set(member[loaded].tolist()))
            table.report(
                self._findings,
                row,
                "Member",
                f"line loads on {count} member{'s' * (count > 1)} were shared between the end joints; "
                "the bending that they cause in the member is not included.",
                "Check these members for bending as well.",
                Level.LOOK,
            )
        self._add_temperature(table, member, case, known)

    def add_settlements(self, table: TableData) -> None:
        """Add the table of settlements, along the directions that the supports hold."""
        case = self._cases.indices(table, self._findings)
        joint = self._geometry.joints.indices(table, "Joint", self._findings)
        movement = self._components(table, ("dx", "dy", "dz"))
        for row in np.flatnonzero((case >= 0) & (joint >= 0)):
            supports = np.flatnonzero(self._held.joint == joint[row])
            along = self._held.direction[supports]
            self._settlement[supports, case[row]] += along @ movement[row]
            # What the held directions cannot follow moves nothing, and was hardly meant.
            rest = (
                movement[row] - np.linalg.lstsq(along, along @ movement[row], rcond=None)[0]
                if len(along)
                else movement[row]
            )
            if np.abs(rest).max(initial=0.0) > 1e-9 * np.abs(movement[row]).max(initial=0.0):
                axis = "xyz"[int(np.abs(rest).argmax())]
                table.report(
                    self._findings,
                    int(row),
                    f"d{axis}",
                    f"joint {table.text('Joint')[row]} is not held along {axis}, so no support can move it that way.",
                    "Remove the movement, or hold the joint on the sheet Supports.",
                )

    def add_misfits(self, members: TableData) -> None:
        """Add the misfits of the members; they act in every combination."""
        self._free_elongation[:, -1] += np.nan_to_num(members.number("Misfit"))

    def check_self_weight(self, members: TableData) -> None:
        """Report members whose weight is asked for and not known."""
        table = self._cases.table
        if table is None or not np.any(self._cases.self_weight):
            return
        mass = self._properties.area * self._properties.density
        missing = np.flatnonzero(np.isnan(mass))
        if len(missing):
            first = int(missing[0])
            column, what = ("Material", "a material with a density")
            if np.isnan(self._properties.area[first]):
                column, what = ("Area", "an area")
            others = f" and {len(missing) - 1} more lack" if len(missing) > 1 else " lacks"
            members.report(
                self._findings,
                first,
                column,
                f"the sheet {table.layout.sheet} asks for self weight, but member "
                f"{self._geometry.members.names[first]}{others} {what}.",
                f"Give every member {what}, or clear the factors of self weight.",
            )

    def actions(self, truss: strutbook.Truss) -> strutbook.Actions:
        """All that was added, brought to the joints and members of the truss."""
        for lump, case, member, intensity in self._line_loads:
            # A set, because np.unique loads another library.
            for one in sorted(set(case.tolist())):
                rows = case == one
                self._joint_loads[:, :, one] += lump(truss, member[rows], intensity[rows])
        for case, member, change in self._warmings:
            warmed = np.zeros(self._free_elongation.shape)
            np.add.at(warmed, (member, case), change)
            expansion = np.nan_to_num(self._properties.expansion)
            self._free_elongation += strutbook.thermal_elongation(truss, expansion, warmed)
        if np.any(self._cases.self_weight):
            weight = strutbook.self_weight(truss, self._properties.area * self._properties.density)
            self._joint_loads[:, :, :-1] += weight[:, :, np.newaxis] * self._cases.self_weight
        return strutbook.Actions(self._joint_loads, self._free_elongation, self._settlement)

    def _components(self, table: TableData, columns: tuple[str, str, str]) -> FloatArray:
        """(rows, dimensions) components; a third one in a plane truss is a finding."""
        values = np.column_stack([np.nan_to_num(table.number(column)) for column in columns])
        dimensions = self._geometry.dimensions
        for row in np.flatnonzero((values[:, dimensions:] != 0).any(axis=1)):
            table.report(
                self._findings,
                int(row),
                columns[2],
                "a plane truss takes nothing along z.",
                "Clear the cell, or fill in z of the joints for a space truss.",
            )
        return values[:, :dimensions]

    def _note_loads_on_supports(self, table: TableData, joint: IndexArray, forces: FloatArray) -> None:
        """Note the loads that act along held directions; one note for all, since many are usual."""
        rigid = np.isinf(self._held.stiffness)
        into_ground: list[tuple[int, str]] = []
        for row in np.flatnonzero((joint >= 0) & (forces != 0).any(axis=1)):
            along = self._held.direction[rigid & (self._held.joint == joint[row])]
            if not len(along):
                continue
            rest = forces[row] - np.linalg.lstsq(along, along @ forces[row], rcond=None)[0]
            if np.abs(rest).max() <= 1e-9 * np.abs(forces[row]).max():
                into_ground.append((int(row), ("Fx", "Fy", "Fz")[int(np.abs(forces[row]).argmax())]))
        if into_ground:
            others = len(into_ground) - 1
            more = f" {others} more load{'s' * (others > 1)} below do so too." if others else ""
            table.report(
                self._findings,
                *into_ground[0],
                f"the support holds this direction, so the load goes straight into the reaction.{more}",
                level=Level.NOTE,
            )

    def _add_temperature(
        self, table: TableData, member: IndexArray, case: IndexArray, known: NDArray[np.bool_]
    ) -> None:
        change = np.nan_to_num(table.number("Temperature change"))
        warmed = np.flatnonzero(known & (change != 0))
        expansion = self._properties.expansion[member[warmed]]
        for row in warmed[np.isnan(expansion)]:
            table.report(
                self._findings,
                int(row),
                "Temperature change",
                f"the thermal expansion of member {table.text('Member')[row]} is not known.",
                "Give the member a material with a value in Expansion.",
            )
        self._warmings.append((case[warmed], member[warmed], change[warmed]))
