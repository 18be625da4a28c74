"""Mechanisms: which joints move together, and what would stop them.

A basis of the null space of Bᵀ mixes independent mechanisms. They are taken apart here: movements of the truss as one
body first, then one mechanism for each of a few joints that can be moved one without the other.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from itertools import combinations

import numpy as np

from strutbook.arrays import BoolArray, FloatArray, IntArray
from strutbook.equilibrium import Equilibrium
from strutbook.truss import Truss

#: A joint whose movement is below this share of the largest one stands still.
STILL = 1e-6
#: Most joints for which pairs are found in a dense matrix; beyond it a sparse one is quicker.
DENSE_JOINTS = 750
#: Most free degrees of freedom for which states of self-stress are worked out.
SELF_STRESS_LIMIT = 1000
#: Most panels and braces that are named.
NAMED = 4


@dataclass(frozen=True, eq=False)
class Mechanism:
    """One independent way in which a truss can move."""

    #: (joints, dimensions) movement, the largest of a joint scaled to 1
    movement: FloatArray
    #: indices of the joints that move
    joints: tuple[int, ...]
    #: whether the whole truss moves as one body
    rigid: bool = False
    #: whether self-stress stops it after a small movement
    infinitesimal: bool = False
    #: cycles of four joints without a diagonal that change their shape
    panels: tuple[tuple[int, ...], ...] = ()
    #: pairs of joints: each, joined by a bar, would stop it; the best first
    braces: tuple[tuple[int, int], ...] = ()
    #: joint and axis: each, held, would stop it; the best first
    held: tuple[tuple[int, int], ...] = ()

    def __post_init__(self) -> None:
        self.movement.flags.writeable = False


def mechanisms_of(matrix: Equilibrium, basis: FloatArray) -> tuple[Mechanism, ...]:
    """Mechanisms from a basis (free, mechanisms) of the null space of Bᵀ."""
    truss = matrix.truss
    neighbours = _Neighbours(truss)
    as_one = _movements_as_one_body(matrix)
    alone = _taken_apart(matrix, basis, as_one, neighbours)
    stresses = _self_stresses(matrix, basis.shape[1])
    found = []
    for values, rigid in ((as_one, True), (alone, False)):
        for vectors in np.moveaxis(matrix.vectors_of_rows(values), 2, 0):
            size = np.sqrt((vectors * vectors).sum(axis=1))
            movement = vectors / size.max()
            movement[size <= STILL * size.max()] = 0.0
            joints = tuple(np.flatnonzero(movement.any(axis=1)).tolist())
            panels, braces = ((), ()) if rigid else neighbours.stretched(movement)
            found.append(
                Mechanism(
                    movement,
                    joints,
                    rigid,
                    _stiffens(truss, movement, stresses),
                    panels,
                    braces,
                    _largest_components(movement),
                )
            )
    return tuple(found)


def _movements_as_one_body(matrix: Equilibrium) -> FloatArray:
    """(free, movements) movements of the whole truss that no support stops, translations before turns."""
    truss = matrix.truss
    joints, dimensions = truss.joints.shape
    arm = truss.joints - truss.joints.mean(axis=0)
    arm = arm / max(float(np.abs(arm).max(initial=0.0)), np.finfo(np.float64).tiny)
    planes = list(combinations(range(dimensions), 2))
    motions = np.zeros((joints, dimensions, dimensions + len(planes)))
    for axis in range(dimensions):
        motions[:, axis, axis] = 1.0
    for turn, (first, second) in enumerate(planes, start=dimensions):
        motions[:, first, turn] = -arm[:, second]
        motions[:, second, turn] = arm[:, first]
    supports = truss.supports
    stopped = np.einsum("sd,sdm->sm", supports.direction, motions[supports.joint])
    _, values, right = np.linalg.svd(np.vstack([stopped, np.zeros((1, motions.shape[2]))]))
    # A turn about the line on which all joints stand moves nothing: it counts for no movement either.
    kept = right[np.count_nonzero(values > 1e-9) :]
    allowed = matrix.rows_of_vectors(motions @ _staircase(kept).T)
    return allowed[:, np.abs(allowed).max(axis=0, initial=0.0) > 1e-9]


def _staircase(rows: FloatArray) -> FloatArray:
    """Rows combined so that each begins where the others are 0."""
    rows = rows.copy()
    done = 0
    for column in range(rows.shape[1]):
        if done == len(rows):
            break
        pivot = done + int(np.abs(rows[done:, column]).argmax())
        if abs(rows[pivot, column]) < 1e-9:
            continue
        rows[[done, pivot]] = rows[[pivot, done]]
        rows[done] /= rows[done, column]
        others = np.arange(len(rows)) != done
        rows[others] -= rows[others, column, np.newaxis] * rows[done]
        done += 1
    return rows


def _taken_apart(matrix: Equilibrium, basis: FloatArray, as_one: FloatArray, neighbours: _Neighbours) -> FloatArray:
    """(free, mechanisms) the movements beside those as one body.

    Each stretches a pair of joints that no other one stretches, and so deforms panels of its own; those that stretch
    no pair (a joint that leaves a plane) each move a joint that no other one moves.
    """
    if as_one.shape[1]:
        # Joints with many bars belong to the body of the truss, against which the rest moves.
        bars = np.bincount(matrix.truss.members.ravel(), minlength=len(matrix.truss.joints))
        weight = np.empty(matrix.free)
        free = matrix.rows_of_joints < matrix.free
        weight[matrix.rows_of_joints[free]] = np.broadcast_to(bars[:, np.newaxis], free.shape)[free]
        anchors = _independent_rows(as_one * weight[:, np.newaxis])
        _, _, right = np.linalg.svd(basis[anchors])
        basis = basis @ right[len(anchors) :].T
    # What is weighed low is taken only when nothing else is left.
    marks = np.vstack([neighbours.stretch(matrix.vectors_of_rows(basis)), 1e-3 * basis])
    rows = _independent_rows(marks)
    return basis @ np.linalg.inv(marks[rows]) if len(rows) else basis


def _independent_rows(values: FloatArray) -> list[int]:
    """As many rows as there are columns, far from dependent: elimination with the largest row next."""
    rest = values.copy()
    rows: list[int] = []
    for _ in range(values.shape[1]):
        sizes = (rest * rest).sum(axis=1)
        row = int(sizes.argmax())
        rows.append(row)
        direction = rest[row] / np.sqrt(sizes[row])
        rest -= np.outer(rest @ direction, direction)
    return rows


class _Neighbours:
    """Pairs of joints that share a neighbour and are not joined: where a bar could be put in."""

    def __init__(self, truss: Truss) -> None:
        self._truss = truss

    @cached_property
    def _joined(self) -> list[set[int]]:
        joined: list[set[int]] = [set() for _ in range(len(self._truss.joints))]
        for first, second in self._truss.members.tolist():
            joined[first].add(second)
            joined[second].add(first)
        return joined

    @cached_property
    def _pairs(self) -> IntArray:
        """(pairs, 2) indices, the smaller one first."""
        count = len(self._truss.joints)
        first, second = self._truss.members.T
        ends = np.concatenate([first, second]), np.concatenate([second, first])
        if count <= DENSE_JOINTS:
            joined = np.zeros((count, count), dtype=np.float32)
            joined[ends] = 1.0
            shared = np.triu((joined @ joined > 0) & (joined == 0), 1)
            return np.argwhere(shared)
        from scipy.sparse import coo_array

        ones = np.ones(len(ends[0]), dtype=np.int32)
        near = coo_array((ones, ends), shape=(count, count)).tocsr()
        two_steps = near @ near
        two_steps.data[:] = 1
        # A pair that is joined as well drops out: its entry becomes 0.
        two_steps = two_steps - two_steps.multiply(near > 0)
        left, right = two_steps.nonzero()
        kept = left < right
        return np.column_stack([left[kept], right[kept]]).astype(np.intp)

    def stretch(self, movement: FloatArray) -> FloatArray:
        """(pairs, movements) strain of every pair under movements (joints, dimensions, movements)."""
        first, second = self._pairs.T
        apart = self._truss.joints[second] - self._truss.joints[first]
        square = np.maximum((apart * apart).sum(axis=1), np.finfo(np.float64).tiny)
        strain: FloatArray = np.einsum("pd,pdm->pm", apart, movement[second] - movement[first]) / square[:, np.newaxis]
        strain *= self._truss.lengths.mean()
        return strain

    def stretched(self, movement: FloatArray) -> tuple[tuple[tuple[int, ...], ...], tuple[tuple[int, int], ...]]:
        """Panels that change their shape, and pairs of joints that change their distance, the best first."""
        pairs = self._pairs
        moving: BoolArray = (movement != 0).any(axis=1)
        pairs = pairs[moving[pairs].any(axis=1)]
        if not len(pairs):
            return (), ()
        joints = self._truss.joints
        apart = joints[pairs[:, 1]] - joints[pairs[:, 0]]
        distance = np.sqrt((apart * apart).sum(axis=1))
        stretch = ((movement[pairs[:, 1]] - movement[pairs[:, 0]]) * apart).sum(axis=1)
        with np.errstate(divide="ignore", invalid="ignore"):
            # A short bar that is stretched much is worth more than a long one; rounding keeps equals in order.
            worth = np.where(distance > 0, np.abs(stretch) / distance, 0.0)
            worth = np.round(worth / (1 + distance / self._truss.lengths.mean()), 9)
        order = np.argsort(-worth, kind="stable")
        order = order[worth[order] > STILL]
        braces = [(int(first), int(second)) for first, second in pairs[order[: 16 * NAMED]]]
        panels: dict[frozenset[int], tuple[int, ...]] = {}
        for first, second in braces:
            between = sorted(self._joined[first] & self._joined[second])
            for one, other in combinations(between, 2):
                if other not in self._joined[one]:
                    cycle = _from_smallest((first, one, second, other))
                    panels.setdefault(frozenset(cycle), cycle)
        named = list(panels.values())[:NAMED]
        diagonals = [pair for panel in named for pair in ((panel[0], panel[2]), (panel[1], panel[3]))]
        best = dict.fromkeys([*((min(pair), max(pair)) for pair in diagonals), *braces])
        return tuple(named), tuple(best)[: 2 * NAMED]


def _from_smallest(cycle: tuple[int, int, int, int]) -> tuple[int, ...]:
    """The same cycle from its smallest joint on, towards the smaller of its neighbours."""
    start = cycle.index(min(cycle))
    turned = cycle[start:] + cycle[:start]
    return turned if turned[1] < turned[3] else (turned[0], *reversed(turned[1:]))


def _largest_components(movement: FloatArray) -> tuple[tuple[int, int], ...]:
    """Joint and axis of the largest movements; each, held, stops the mechanism."""
    size = np.round(np.abs(movement), 9)
    order = np.argsort(-size, axis=None, kind="stable")[:NAMED]
    places = zip(*np.unravel_index(order, size.shape), strict=True)
    return tuple((int(joint), int(axis)) for joint, axis in places if size[joint, axis] > STILL)


def _self_stresses(matrix: Equilibrium, mechanisms: int) -> FloatArray:
    """(bars, states) states of self-stress, none where the truss has none or is too large for the question."""
    rank = matrix.free - mechanisms
    if matrix.bars == rank or matrix.free > SELF_STRESS_LIMIT:
        return np.zeros((matrix.bars, 0))
    _, _, right = np.linalg.svd(matrix.dense())
    return right[rank:].T


def _stiffens(truss: Truss, movement: FloatArray, stresses: FloatArray) -> bool:
    """Whether a state of self-stress does work when the bars turn: then the movement stops before it is large.

    Pellegrino and Calladine (1986), section 5: sum over the bars of N/L |turn|², for each state by itself.
    """
    turn = movement[truss.members[:, 1]] - movement[truss.members[:, 0]]
    work = ((turn * turn).sum(axis=1) / truss.lengths) @ stresses[: len(truss.members)]
    return bool((np.abs(work) > 1e-6 / truss.lengths.max()).any())
