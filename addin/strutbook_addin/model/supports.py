"""Supports: the directions that each row holds."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass

import numpy as np

from strutbook_addin.findings import Findings, Level
from strutbook_addin.model.geometry import Geometry
from strutbook_addin.model.references import IndexArray
from strutbook_addin.tables.reading import FloatArray, TableData

_NUMBER = r"[-+]?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?"
_ANGLE = re.compile(rf"^({_NUMBER})\s*(?:deg|degrees|°)$", re.IGNORECASE)
_VECTOR = re.compile(rf"^\(?\s*({_NUMBER})\s*[,;]\s*({_NUMBER})\s*(?:[,;]\s*({_NUMBER})\s*)?\)?$")


@dataclass(frozen=True, eq=False)
class Held:
    """One entry for each direction that is held; a row that holds x and y makes two."""

    joint: IndexArray  #: (supports,) joint index
    direction: FloatArray  #: (supports, dimensions) unit vectors
    stiffness: FloatArray  #: (supports,) N/m, infinite where rigid
    row: IndexArray  #: (supports,) row of the table
    label: tuple[str, ...]  #: the direction as written: `x`, `30 deg`, ...


class HoldsProblem(ValueError):
    """A cell of Holds that names no direction; the message says why."""


def directions(holds: str, dimensions: int) -> list[tuple[str, tuple[float, ...]]]:
    """Directions that a cell of `Holds` names, each with its label and unit vector.

    Raises
    ------
    HoldsProblem
        When the text names no direction.

    Examples
    --------
    >>> directions("x y", 2)
    [('x', (1.0, 0.0)), ('y', (0.0, 1.0))]
    >>> directions("0.6, 0.8, 0", 3)
    [('0.6, 0.8, 0', (0.6, 0.8, 0.0))]
    """
    axes = "xyz"[:dimensions]
    letters = re.sub(r"[\s,;+&/]|and", "", holds.casefold())
    if letters and set(letters) <= set("xyz"):
        if dimensions == 2 and "z" in letters:
            raise HoldsProblem("a plane truss has no z to hold")
        return [(axis, tuple(float(axis == other) for other in axes)) for axis in axes if axis in letters]
    angle = _ANGLE.match(holds.strip())
    if angle:
        if dimensions == 3:
            raise HoldsProblem("an angle does not say which way in space")
        radians = math.radians(float(angle[1]))
        return [(holds.strip(), (math.cos(radians), math.sin(radians)))]
    vector = _VECTOR.match(holds.strip())
    if vector:
        components = [float(component) for component in vector.groups() if component is not None]
        if dimensions == 2 and len(components) == 3 and components[2] == 0:
            components.pop()
        length = math.hypot(*components)
        if len(components) != dimensions:
            raise HoldsProblem(f"a vector here has {dimensions} components")
        if length == 0 or not math.isfinite(length):
            raise HoldsProblem("a vector of no length has no direction")
        return [(holds.strip(), tuple(component / length for component in components))]
    raise HoldsProblem("it names no direction")


def read_supports(table: TableData, geometry: Geometry, findings: Findings) -> Held:
    """Every held direction of the table of supports; what is wrong goes to the findings."""
    joints = geometry.joints.indices(table, "Joint", findings)
    stiffness = table.number("Stiffness")
    joint, vectors, springs, rows, labels = [], [], [], [], []
    for row, holds in enumerate(table.text("Holds")):
        if not holds:
            continue
        try:
            held = directions(holds, geometry.dimensions)
        except HoldsProblem as problem:
            table.report(findings, row, "Holds", _expected(holds, str(problem), geometry), "Write the direction so.")
            continue
        for label, vector in held:
            joint.append(int(joints[row]))
            vectors.append(vector)
            springs.append(math.inf if math.isnan(stiffness[row]) else float(stiffness[row]))
            rows.append(row)
            labels.append(label)
    if not table.rows:
        table.report(
            findings,
            0,
            "Joint",
            "the truss has no supports, so nothing holds it.",
            "Name the joints that are held and the directions.",
        )
    supports = Held(
        np.array(joint, dtype=np.intp),
        np.array(vectors, dtype=np.float64).reshape(-1, geometry.dimensions),
        np.array(springs, dtype=np.float64),
        np.array(rows, dtype=np.intp),
        tuple(labels),
    )
    _report_held_twice(table, supports, geometry, findings)
    return supports


def _expected(holds: str, problem: str, geometry: Geometry) -> str:
    examples = "'x y', '30 deg', '0.6, 0.8'" if geometry.dimensions == 2 else "'x y z', '0.6, 0.8, 0'"
    return f"expected directions such as {examples}, found {holds!r}: {problem}."


def _report_held_twice(table: TableData, supports: Held, geometry: Geometry, findings: Findings) -> None:
    """Rigid directions at one joint must be independent, or their reactions are anybody's guess."""
    rigid = np.isinf(supports.stiffness)
    held: dict[int, list[FloatArray]] = {}
    for index in np.flatnonzero(rigid & (supports.joint >= 0)):
        vectors = held.setdefault(int(supports.joint[index]), [])
        vectors.append(supports.direction[index])
        if np.linalg.matrix_rank(np.array(vectors), tol=1e-6) < len(vectors):
            vectors.pop()
            name = geometry.joints.names[int(supports.joint[index])]
            table.report(
                findings,
                int(supports.row[index]),
                "Holds",
                f"joint {name} is already held in the direction {supports.label[index]}.",
                "Hold each direction of a joint once.",
                Level.STOP,
            )
