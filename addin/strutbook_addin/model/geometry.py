"""Joints and members: coordinates, ends, and what can be wrong with them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from strutbook_addin.findings import Findings
from strutbook_addin.model.references import IndexArray, Names
from strutbook_addin.tables.reading import FloatArray, TableData

#: Lengths below this share of the truss's extent are no lengths.
SAME_PLACE = 1e-9


@dataclass(frozen=True, eq=False)
class Geometry:
    """The truss as lines between points."""

    joints: Names
    members: Names
    coordinates: FloatArray  #: (joints, 2 or 3) m
    ends: IndexArray  #: (members, 2) joint indices
    groups: tuple[str, ...]  #: (members,) group of each member, empty where none is given

    @property
    def dimensions(self) -> int:
        """2 for a plane truss, 3 for a space truss."""
        return int(self.coordinates.shape[1])

    @property
    def axes(self) -> str:
        """Names of the axes."""
        return "xyz"[: self.dimensions]


def read_geometry(joints: TableData, members: TableData, findings: Findings) -> Geometry:
    """Geometry from the tables of joints and members; what is wrong goes to the findings."""
    joint_names = Names(joints.layout.sheet, "joint", joints.text("Joint"))
    member_names = Names(members.layout.sheet, "member", members.text("Member"))
    z = joints.number("z")
    columns = [joints.number("x"), joints.number("y")]
    if not np.isnan(z).all():
        columns.append(z)
        for row in np.flatnonzero(np.isnan(z)):
            joints.report(
                findings,
                int(row),
                "z",
                "expected a number, found an empty cell; other joints have a z, so this is a space truss.",
                "Fill in z, or clear it everywhere for a plane truss.",
            )
    coordinates = np.column_stack(columns)
    ends = np.column_stack(
        [joint_names.indices(members, "From", findings), joint_names.indices(members, "To", findings)]
    )
    _report_empty(joints, members, findings)
    _report_joints_at_one_place(joints, joint_names, coordinates, findings)
    _report_members_without_length(members, coordinates, ends, findings)
    _report_duplicate_members(members, member_names, ends, findings)
    _report_unreached_joints(joints, joint_names, ends, findings)
    return Geometry(joint_names, member_names, coordinates, ends, tuple(members.text("Group")))


def _report_empty(joints: TableData, members: TableData, findings: Findings) -> None:
    for table, column, what in ((joints, "Joint", "joint"), (members, "Member", "member")):
        if not table.rows:
            table.report(
                findings,
                0,
                column,
                f"the table holds no {what}.",
                "Fill it in below its headers, without a gap.",
            )


def _extent(coordinates: FloatArray) -> float:
    if not len(coordinates) or np.isnan(coordinates).all():
        return 0.0
    span = np.nanmax(coordinates, axis=0) - np.nanmin(coordinates, axis=0)
    return float(np.nanmax(span))


def _report_joints_at_one_place(table: TableData, names: Names, coordinates: FloatArray, findings: Findings) -> None:
    if len(coordinates) < 2 or np.isnan(coordinates).any():
        return
    step = max(_extent(coordinates) * SAME_PLACE, np.finfo(np.float64).tiny)
    cells = np.round(coordinates / step)
    order = np.lexsort(cells.T)
    same = (np.diff(cells[order], axis=0) == 0).all(axis=1)
    for place in np.flatnonzero(same):
        first, second = sorted((int(order[place]), int(order[place + 1])))
        table.report(
            findings,
            second,
            "x",
            f"joint {names.names[second]} is at the same place as joint {names.names[first]}.",
            "Use one joint, or correct the coordinates.",
        )


def _report_members_without_length(
    table: TableData, coordinates: FloatArray, ends: IndexArray, findings: Findings
) -> None:
    known = (ends >= 0).all(axis=1)
    for row in np.flatnonzero(known & (ends[:, 0] == ends[:, 1])):
        table.report(
            findings,
            int(row),
            "To",
            "the member begins and ends at the same joint.",
            "Name two different joints.",
        )
    if np.isnan(coordinates).any() or not known.any():
        return
    lengths = np.linalg.norm(coordinates[ends[:, 1]] - coordinates[ends[:, 0]], axis=1)
    short = known & (ends[:, 0] != ends[:, 1]) & (lengths <= SAME_PLACE * _extent(coordinates))
    for row in np.flatnonzero(short):
        table.report(
            findings,
            int(row),
            "To",
            "the member has no length: its two joints are at the same place.",
            "Correct the coordinates of the joints, or remove the member.",
        )


def _report_duplicate_members(table: TableData, names: Names, ends: IndexArray, findings: Findings) -> None:
    if not len(ends):
        return
    sorted_ends = np.sort(ends, axis=1)
    first: dict[tuple[int, int], int] = {}
    pairs: Sequence[tuple[int, int]] = [(int(a), int(b)) for a, b in sorted_ends]
    for row, pair in enumerate(pairs):
        if pair[0] < 0 or pair[0] == pair[1]:
            continue
        if pair in first:
            table.report(
                findings,
                row,
                "From",
                f"member {names.names[row]} joins the same two joints as member {names.names[first[pair]]}.",
                "Remove one, or give the other the area of both.",
            )
        first.setdefault(pair, row)


def _report_unreached_joints(table: TableData, names: Names, ends: IndexArray, findings: Findings) -> None:
    reached = np.zeros(len(names) + 1, dtype=np.bool_)
    reached[ends.ravel()] = True
    # An unknown end is a finding of its own; the joint that was meant would be reported twice.
    if (ends < 0).any():
        return
    for row in np.flatnonzero(~reached[:-1]):
        table.report(
            findings,
            int(row),
            "Joint",
            f"no member reaches joint {names.names[int(row)]}.",
            "Join it to the truss, or remove the row.",
        )
