"""Numbers that the two charts on the sheet `Picture` draw: the truss by sign of force, and deflected.

The charts are native scatter charts with fixed, hidden axes; what they show follows the cells beside
them. So a run draws a truss by writing numbers: every drawing is scaled into one fixed frame whose units
are equally long both ways on the screen. A member is two points and an empty row, which breaks the line.
The layout constants are shared with the program that builds the templates.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import Enum
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from strutbook_addin.sheets import Written

FloatArray = NDArray[np.float64]
IntArray = NDArray[np.int64]

#: Name of the sheet.
SHEET = "Picture"
#: How many members the charts have room for; the rest are not drawn, and the sheet says so.
MEMBERS_DRAWN = 600
#: Rows of the chart ranges: two ends and a gap for each member.
DATA_ROWS = 3 * MEMBERS_DRAWN
#: Frame in which everything is drawn, in chart units; the plot areas have the same ratio of sides.
FRAME = (100.0, 50.0)
#: Room left free at each edge of the frame, for supports and displacements.
MARGIN = 4.5

#: Cells (row, column from zero) of the sentences above the charts.
ROOM_CELL = (3, 0)
FORCES_CELL = (4, 0)
DEFLECTED_CELL = (35, 0)
#: Upper left cells of the two charts.
FORCES_CHART = (5, 0)
DEFLECTED_CHART = (36, 0)
#: Where the numbers stand: a row of names, then the rows that the charts refer to.
DATA_HEADER_ROW = 4
DATA_FIRST_ROW = 5
DATA_FIRST_COLUMN = 13

#: A force this small beside the largest one is none.
_NO_FORCE = 1e-6
#: A displacement is drawn at most this long, in chart units.
_DRAWN_DISPLACEMENT = 3.5
#: Support signs stand a little below their joint, in chart units.
_SIGN_BELOW = 0.9
#: Space trusses are seen from the front, turned by an azimuth and from an elevation (degrees); with
#: 45 degrees the opposite corners of a square tower would hide each other.
_AZIMUTH, _ELEVATION = 30.0, 20.0


class Line(Enum):
    """What is drawn, in the order of its pair of columns (x, then y)."""

    TENSION = "tension"
    COMPRESSION = "compression"
    NO_FORCE = "no force"
    NOT_SOLVED = "not solved"
    HELD_FULLY = "held in every direction"
    HELD_PARTLY = "free to move one way"
    JOINTS = "joint"
    UNLOADED = "as built"
    DEFLECTED = "deflected"

    @property
    def column(self) -> int:
        """Column of its x values, counted from zero; the y values stand right of it."""
        return DATA_FIRST_COLUMN + 2 * list(Line).index(self)


class Block(NamedTuple):
    """A rectangle of values to write onto the sheet, upper left cell first."""

    row: int
    column: int
    values: list[list[Written]]


class Area(NamedTuple):
    """A rectangle of cells to clear."""

    row: int
    column: int
    rows: int
    columns: int


def header(line: Line, axis: str) -> str:
    """Header above the numbers of a line.

    >>> header(Line.TENSION, "x")
    'tension, x'
    """
    return f"{line.value}, {axis}"


#: What a run fills or clears: the numbers of each line and the sentences above the charts.
AREAS = (
    *(Area(DATA_FIRST_ROW, line.column, DATA_ROWS, 2) for line in Line),
    *(Area(*corner, 1, 1) for corner in (ROOM_CELL, FORCES_CELL, DEFLECTED_CELL)),
)


def picture_values(
    coordinates: FloatArray,
    ends: IntArray,
    *,
    support_joints: IntArray,
    support_directions: FloatArray,
    forces: FloatArray | None = None,
    forces_in: str = "",
    displacements: FloatArray | None = None,
    displaced_in: str = "",
) -> list[Block]:
    """Blocks of numbers and sentences that make the charts show this truss.

    Parameters
    ----------
    coordinates : (joints, 2 or 3)
        Coordinates of the joints, in any unit.
    ends : (members, 2)
        Joint indices of the ends of the members.
    support_joints : (supports,)
        Joint index of each held direction.
    support_directions : (supports, 2 or 3)
        Unit vector of each held direction.
    forces : (members,), optional
        Force of each member in one combination, tension positive; without them the truss is drawn
        as not solved.
    forces_in : str
        Name of that combination.
    displacements : (joints, 2 or 3), optional
        Displacements in one combination, in the unit of the coordinates.
    displaced_in : str
        Name of that combination.

    Returns
    -------
    list of Block
        Rectangles to write, after clearing `AREAS`. Only rows that are in use are among them.

    Examples
    --------
    >>> bar = np.array([[0.0, 0.0], [3.0, 0.0]])
    >>> blocks = picture_values(bar, np.array([[0, 1]]), support_joints=np.array([0, 0, 1]),
    ...     support_directions=np.array([[1.0, 0.0], [0.0, 1.0], [0.0, 1.0]]),
    ...     forces=np.array([5.0]), forces_in="ULS1")
    >>> [block.values for block in blocks if block.column == Line.TENSION.column]
    [[[4.5, 25.0], [95.5, 25.0]]]
    """
    members = len(ends)
    drawn = ends[:MEMBERS_DRAWN]
    joints = np.unique(drawn)
    view = _View.onto(coordinates, joints)
    flat = view.points(coordinates)
    lines: dict[Line, FloatArray] = {Line.JOINTS: flat[joints], Line.UNLOADED: _segments(flat, drawn)}
    if forces is None:
        lines[Line.NOT_SOLVED] = _segments(flat, drawn)
    else:
        lines |= _by_sign(flat, drawn, forces)
    lines |= _support_signs(flat, joints, support_joints, support_directions)
    scale = _drawing_scale(view, displacements, joints)
    if displacements is not None and scale:
        lines[Line.DEFLECTED] = _segments(view.points(coordinates + scale * displacements), drawn)
    blocks = [Block(DATA_FIRST_ROW, line.column, _rows(points)) for line, points in lines.items()]
    sentences = {
        ROOM_CELL: _room_sentence(members),
        FORCES_CELL: _forces_sentence(forces, forces_in),
        DEFLECTED_CELL: _deflected_sentence(scale, displaced_in),
    }
    blocks += [Block(row, column, [[text]]) for (row, column), text in sentences.items() if text]
    return [block for block in blocks if block.values]


@dataclass(frozen=True, eq=False)
class _View:
    """Parallel projection into the frame, the same scale both ways."""

    projection: FloatArray  #: (2 or 3, 2), model axes to right and up
    scale: float  #: chart units per model unit
    shift: FloatArray  #: (2,), chart units

    @classmethod
    def onto(cls, coordinates: FloatArray, joints: IntArray) -> _View:
        """View that fits these joints into the middle of the frame."""
        projection = _projection(coordinates.shape[1])
        shadow = coordinates[joints] @ projection
        low, high = shadow.min(axis=0), shadow.max(axis=0)
        room = np.array(FRAME) - 2 * MARGIN
        extent = high - low
        scale = float(np.min(room / np.maximum(extent, 1e-9 * max(float(extent.max()), 1e-300))))
        return cls(projection, scale, np.array(FRAME) / 2 - scale * (low + high) / 2)

    def points(self, coordinates: FloatArray) -> FloatArray:
        """Chart coordinates (n, 2) of points of the model."""
        points: FloatArray = (coordinates @ self.projection) * self.scale + self.shift
        return points


def _projection(dimension: int) -> FloatArray:
    if dimension == 2:
        return np.eye(2)
    azimuth, elevation = math.radians(_AZIMUTH), math.radians(_ELEVATION)
    right = (math.cos(azimuth), math.sin(azimuth), 0.0)
    away = (-math.sin(azimuth), math.cos(azimuth))
    up = (away[0] * math.sin(elevation), away[1] * math.sin(elevation), math.cos(elevation))
    return np.array([right, up]).T


def _segments(points: FloatArray, ends: IntArray) -> FloatArray:
    """Points of lines that break after each member: start, end, nothing."""
    lines = np.full((len(ends), 3, 2), np.nan)
    lines[:, :2] = points[_turned(ends)]
    return lines.reshape(-1, 2)[:-1]


def _turned(ends: IntArray) -> IntArray:
    """The same members, none starting where the one before it ended.

    Calc leaves out a point that equals the last one it drew, whatever the gap between them, and
    with it the line to the next.
    """
    turned, last = [], -1
    for start, end in ends.tolist():
        pair = (end, start) if start == last else (start, end)
        turned.append(pair)
        last = pair[1]
    return np.array(turned, dtype=np.int64).reshape(-1, 2)


def _by_sign(points: FloatArray, ends: IntArray, forces: FloatArray) -> dict[Line, FloatArray]:
    none = _NO_FORCE * float(np.max(np.abs(forces), initial=0.0))
    drawn = forces[: len(ends)]
    return {
        Line.TENSION: _segments(points, ends[drawn > none]),
        Line.COMPRESSION: _segments(points, ends[drawn < -none]),
        Line.NO_FORCE: _segments(points, ends[np.abs(drawn) <= none]),
    }


def _support_signs(
    points: FloatArray, joints: IntArray, support_joints: IntArray, directions: FloatArray
) -> dict[Line, FloatArray]:
    fully: list[FloatArray] = []
    partly: list[FloatArray] = []
    for joint in np.intersect1d(support_joints, joints):
        held = np.linalg.matrix_rank(directions[support_joints == joint])
        (fully if held == directions.shape[1] else partly).append(points[joint] - (0.0, _SIGN_BELOW))
    return {
        Line.HELD_FULLY: np.array(fully).reshape(-1, 2),
        Line.HELD_PARTLY: np.array(partly).reshape(-1, 2),
    }


def _drawing_scale(view: _View, displacements: FloatArray | None, joints: IntArray) -> float:
    """Round number (1, 2 or 5 times a power of ten) of times that displacements are drawn; 0 for none."""
    if displacements is None:
        return 0.0
    largest = float(np.max(np.linalg.norm(displacements[joints] @ view.projection, axis=1), initial=0.0))
    if largest * view.scale < 1e-12:
        return 0.0
    wanted = _DRAWN_DISPLACEMENT / (largest * view.scale)
    power = 10.0 ** math.floor(math.log10(wanted))
    return float(max(step for step in (1.0, 2.0, 5.0) if step * power <= wanted * (1 + 1e-9)) * power)


def _rows(points: FloatArray) -> list[list[Written]]:
    return [[None, None] if math.isnan(x) else [x, y] for x, y in np.round(points, 3).tolist()]


def _room_sentence(members: int) -> str:
    if members <= MEMBERS_DRAWN:
        return ""
    return f"Only the first {MEMBERS_DRAWN} of {members} members are drawn."


def _forces_sentence(forces: FloatArray | None, combination: str) -> str:
    if forces is None:
        return "Not solved: the truss as the tables describe it."
    return f"Members by the sign of their force in the combination {combination}."


def _deflected_sentence(scale: float, combination: str) -> str:
    if not scale:
        return "No displacements are drawn."
    return f"Deflected shape in the combination {combination}; displacements drawn {scale:.10g} times."
