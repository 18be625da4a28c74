"""The equilibrium matrix B: free degrees of freedom by bars.

One matrix carries the whole theory (S. Pellegrino and C. R. Calladine, Matrix analysis of statically and
kinematically indeterminate frameworks, Int. J. Solids Structures 22 (1986) 409-428): B N = P balances the joints,
Bᵀ d is the elongation of the bars, the null space of Bᵀ holds the mechanisms, that of B the states of self-stress,
and B diag(EA/L) Bᵀ is the stiffness matrix.

Bars are the members, then the spring supports as bars to the ground. A spring bar lengthens when its joint moves
along the direction of the support.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from strutbook.arrays import FloatArray, IntArray
from strutbook.truss import Truss


@dataclass(frozen=True, eq=False)
class Equilibrium:
    """The matrix B of a truss, as the entries that each bar has in it."""

    #: the truss that it belongs to
    truss: Truss
    #: number of free degrees of freedom (rows of B)
    free: int
    #: (joints, dimensions) row of B of each local axis; `free` where the axis is held
    rows_of_joints: IntArray
    #: (bars, 2 x dimensions) row of each entry; `free` (the ground) where the axis is held
    rows: IntArray
    #: (bars, 2 x dimensions) entries along the local axes, zeros kept
    entries: FloatArray
    #: (springs,) indices of the supports that are springs
    springs: IntArray
    #: (joints,) joints in the order of their rows
    joint_order: IntArray

    @property
    def bars(self) -> int:
        """Number of bars (columns of B): members and spring supports."""
        return len(self.rows)

    @property
    def ends(self) -> IntArray:
        """(bars, 2) joints of each bar; a spring has its joint twice, for the ground has no index."""
        joint = self.truss.supports.joint[self.springs]
        return np.concatenate([self.truss.members, np.column_stack([joint, joint])])

    def dense(self) -> FloatArray:
        """B as an array (free, bars)."""
        matrix = np.zeros((self.free + 1, self.bars))
        matrix[self.rows, np.arange(self.bars)[:, np.newaxis]] = self.entries
        return matrix[: self.free]

    def bar_stiffness(self) -> FloatArray:
        """(bars,) N/m: EA/L of the members, then the stiffness of the springs.

        Raises
        ------
        ValueError
            When the truss has no axial rigidity.
        """
        if self.truss.axial_rigidity is None:
            raise ValueError("bar_stiffness needs a truss with an axial rigidity")
        members = self.truss.axial_rigidity / self.truss.lengths
        return np.concatenate([members, self.truss.supports.stiffness[self.springs]])

    def forces_on_rows(self, bar_forces: FloatArray) -> FloatArray:
        """B N: (free, cases) of bar forces (bars, cases), in N."""
        return _scatter(self.rows, self.entries, bar_forces, self.free + 1)[: self.free]

    def elongations(self, movement: FloatArray) -> FloatArray:
        """Bᵀ d: (bars, cases) of movements of the free degrees of freedom (free, cases), in m."""
        with_ground = np.concatenate([movement, np.zeros((1, movement.shape[1]))])
        total: FloatArray = self.entries[:, :1] * with_ground[self.rows[:, 0]]
        for column in range(1, self.rows.shape[1]):
            total += self.entries[:, column : column + 1] * with_ground[self.rows[:, column]]
        return total

    def rows_of_vectors(self, vectors: FloatArray) -> FloatArray:
        """(free, cases) components along the free axes of vectors at the joints (joints, dimensions, cases)."""
        frames = self.truss.frames
        local = vectors if frames.axes is None else np.einsum("jld,jdc->jlc", frames.axes, vectors)
        out = np.empty((self.free, vectors.shape[2]))
        free = ~frames.held
        out[self.rows_of_joints[free]] = local[free]
        return out

    def vectors_of_rows(self, values: FloatArray) -> FloatArray:
        """(joints, dimensions, cases) vectors at the joints of components along the free axes (free, cases)."""
        with_ground = np.concatenate([values, np.zeros((1, values.shape[1]))])
        return self.truss.frames.to_global(with_ground[self.rows_of_joints])

    def forces_on_joints(self, bar_forces: FloatArray) -> FloatArray:
        """Pull of the bars on their joints, held axes too: (joints, dimensions, cases) of (bars, cases), in N.

        It is - B N over all degrees of freedom, in global axes.
        """
        truss = self.truss
        joints, dimensions = truss.joints.shape
        count = len(truss.members)
        axis = np.arange(dimensions)
        cosines = truss.direction_cosines
        place = (truss.members[:, :, np.newaxis] * dimensions + axis).reshape(count, -1)
        pull = _scatter(place, np.hstack([cosines, -cosines]), bar_forces[:count], joints * dimensions)
        if len(self.springs):
            place = truss.supports.joint[self.springs, np.newaxis] * dimensions + axis
            direction = truss.supports.direction[self.springs]
            pull -= _scatter(place, direction, bar_forces[count:], joints * dimensions)
        return pull.reshape(joints, dimensions, -1)

    def ground_movement(self, settlement: FloatArray) -> FloatArray:
        """(joints, dimensions, cases) m: how rigid supports that move (supports, cases) carry their joints."""
        truss = self.truss
        joints, dimensions = truss.joints.shape
        place = truss.supports.joint[:, np.newaxis] * dimensions + np.arange(dimensions)
        moved = _scatter(place, truss.frames.dual, settlement, joints * dimensions)
        return moved.reshape(joints, dimensions, -1)

    def ground_elongations(self, settlement: FloatArray) -> FloatArray:
        """(bars, cases) m: elongation of the bars when the ground moves (supports, cases) and no free axis does."""
        moved = self.ground_movement(settlement)
        ends = moved[self.truss.members]
        members = np.einsum("md,mdc->mc", self.truss.direction_cosines, ends[:, 1] - ends[:, 0])
        # A spring stretches by what its joint is carried along beside it, less its own movement.
        carried = np.einsum(
            "sd,sdc->sc",
            self.truss.supports.direction[self.springs],
            moved[self.truss.supports.joint[self.springs]],
        )
        return np.concatenate([members, carried - settlement[self.springs]])


def equilibrium(truss: Truss, joint_order: IntArray | None = None) -> Equilibrium:
    """Equilibrium matrix of a truss.

    Parameters
    ----------
    truss : Truss
        Joints, members and supports.
    joint_order : (joints,) array of int, optional
        Joints in the order in which their rows are to stand; by index when left out.
    """
    joints, dimensions = truss.joints.shape
    frames = truss.frames
    order = np.arange(joints) if joint_order is None else joint_order
    free_axes = ~frames.held[order]
    free = int(np.count_nonzero(free_axes))
    numbers = np.full((joints, dimensions), free, dtype=np.intp)
    numbers[free_axes] = np.arange(free)
    rows_of_joints = np.empty_like(numbers)
    rows_of_joints[order] = numbers

    first, second = truss.members[:, 0], truss.members[:, 1]
    cosines = truss.direction_cosines
    rows = np.hstack([rows_of_joints[first], rows_of_joints[second]])
    entries = np.hstack([-frames.to_local(first, cosines), frames.to_local(second, cosines)])
    springs = np.flatnonzero(np.isfinite(truss.supports.stiffness))
    if len(springs):
        joint = truss.supports.joint[springs]
        ground = np.full((len(springs), dimensions), free, dtype=np.intp)
        direction = frames.to_local(joint, truss.supports.direction[springs])
        rows = np.concatenate([rows, np.hstack([ground, rows_of_joints[joint]])])
        entries = np.concatenate([entries, np.hstack([np.zeros_like(direction), direction])])
    return Equilibrium(truss, free, rows_of_joints, rows, entries, springs, order)


def _scatter(place: IntArray, weight: FloatArray, values: FloatArray, size: int) -> FloatArray:
    """Sum weight x value of every entry at its place: (size, cases) of values (entries, cases)."""
    cases = values.shape[1]
    target = place[:, :, np.newaxis] * cases + np.arange(cases)
    amount = weight[:, :, np.newaxis] * values[:, np.newaxis, :]
    summed = np.bincount(target.reshape(-1), amount.reshape(-1), minlength=size * cases)
    return summed.astype(np.float64, copy=False).reshape(size, cases)
