"""Supports in any direction, rigid or springs, and the directions in which they leave a joint free."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from strutbook.arrays import BoolArray, FloatArray, IntArray, read_only_floats, read_only_indices
from strutbook.errors import InvalidTruss

#: Two held directions of one joint count as the same when their sine falls below this.
SAME_DIRECTION = 1e-6


@dataclass(frozen=True, eq=False)
class Supports:
    """Directions in which joints are held; a pin is two (three in space) supports at one joint.

    Raises
    ------
    InvalidTruss
        When the arrays do not fit together, a direction has no length, or a stiffness is not positive.

    Examples
    --------
    >>> supports = Supports.rigid([0, 0, 4], [[1, 0], [0, 1], [0, 2]])
    >>> supports.direction[2]
    array([0., 1.])
    """

    #: (supports,) index of the joint that is held
    joint: IntArray
    #: (supports, dimensions) direction held, of any length when given, unit vectors afterwards
    direction: FloatArray
    #: (supports,) N/m, infinite where the support is rigid
    stiffness: FloatArray

    def __post_init__(self) -> None:
        joint = read_only_indices(self.joint, "Supports.joint", 1)
        direction = np.array(read_only_floats(self.direction, "Supports.direction", 2))
        stiffness = np.array(self.stiffness, dtype=np.float64)
        if len(direction) != len(joint) or stiffness.shape != joint.shape:
            raise InvalidTruss(
                f"Supports has {len(joint)} joints, {len(direction)} directions and {stiffness.size} "
                "stiffnesses; expected one of each for every support."
            )
        length = np.sqrt((direction * direction).sum(axis=1))
        if (length == 0).any():
            raise InvalidTruss(f"Support {int(length.argmin())} has a direction of no length.")
        if not (stiffness > 0).all():
            wrong = int(np.flatnonzero(~(stiffness > 0))[0])
            raise InvalidTruss(
                f"Support {wrong} has the stiffness {stiffness[wrong]}; expected above 0 N/m, or inf for rigid."
            )
        direction /= length[:, np.newaxis]
        direction.flags.writeable = False
        stiffness.flags.writeable = False
        object.__setattr__(self, "joint", joint)
        object.__setattr__(self, "direction", direction)
        object.__setattr__(self, "stiffness", stiffness)

    @classmethod
    def rigid(cls, joint: ArrayLike, direction: ArrayLike) -> Supports:
        """Supports that do not give: joint indices (supports,) and directions (supports, dimensions)."""
        indices = read_only_indices(joint, "Supports.joint", 1)
        return cls(indices, np.asarray(direction, dtype=np.float64), np.full(len(indices), np.inf))

    def __len__(self) -> int:
        return len(self.joint)


@dataclass(frozen=True, eq=False)
class JointFrames:
    """For every joint a set of local axes, each either free or held.

    Local axes are the global ones, except at joints that a rigid support holds in a skew direction.
    """

    #: (joints, dimensions) whether a rigid support holds the local axis
    held: BoolArray
    #: (joints, dimensions, dimensions) local axes as rows; None when all are the global axes
    axes: FloatArray | None
    #: (supports, dimensions) dual directions: reaction = dual . force on the ground; 0 for springs
    dual: FloatArray

    def to_local(self, joint: IntArray, vectors: FloatArray) -> FloatArray:
        """Components along the local axes of `joint` (n,) of vectors (n, dimensions)."""
        if self.axes is None:
            return vectors
        local: FloatArray = np.einsum("nld,nd->nl", self.axes[joint], vectors)
        return local

    def to_global(self, local: FloatArray) -> FloatArray:
        """Vectors (joints, dimensions, cases) of which the components along the local axes are given."""
        if self.axes is None:
            return local
        vectors: FloatArray = np.einsum("jld,jlc->jdc", self.axes, local)
        return vectors


def joint_frames(supports: Supports, joints: int, dimensions: int) -> JointFrames:
    """Local axes of every joint, from the rigid supports that hold it.

    Raises
    ------
    InvalidTruss
        When two rigid supports hold one joint in the same direction, so that what each carries is anybody's
        guess.
    """
    rigid = np.isinf(supports.stiffness)
    direction = supports.direction
    held = np.zeros((joints, dimensions), dtype=np.bool_)
    dual = np.where(rigid[:, np.newaxis], direction, 0.0)
    # A unit vector with one component is along an axis.
    skew = rigid & (np.count_nonzero(direction, axis=1) > 1)
    aligned = rigid
    axes = None
    if skew.any():
        skew_joint = np.zeros(joints, dtype=np.bool_)
        skew_joint[supports.joint[skew]] = True
        aligned = rigid & ~skew_joint[supports.joint]
        axes = np.broadcast_to(np.eye(dimensions), (joints, dimensions, dimensions)).copy()
        together = np.flatnonzero(rigid & skew_joint[supports.joint])
        together = together[np.argsort(supports.joint[together], kind="stable")]
        starts = np.flatnonzero(np.diff(supports.joint[together])) + 1
        for group in np.split(together, starts):
            joint = int(supports.joint[group[0]])
            _refuse_if_dependent(direction[group], joint)
            _, _, rows = np.linalg.svd(direction[group], full_matrices=True)
            axes[joint] = rows
            held[joint, : len(group)] = True
            dual[group] = np.linalg.pinv(direction[group]).T
    place = supports.joint[aligned] * dimensions + np.abs(direction[aligned]).argmax(axis=1)
    held.reshape(-1)[place] = True
    if len(place) and np.bincount(place).max() > 1:
        joint = int(np.bincount(place).argmax()) // dimensions
        raise InvalidTruss(_held_twice(joint))
    return JointFrames(held, axes, dual)


def _refuse_if_dependent(directions: FloatArray, joint: int) -> None:
    if len(directions) > directions.shape[1]:
        raise InvalidTruss(_held_twice(joint))
    if np.linalg.svd(directions, compute_uv=False)[-1] < SAME_DIRECTION:
        raise InvalidTruss(_held_twice(joint))


def _held_twice(joint: int) -> str:
    return (
        f"Rigid supports at joint {joint} hold the same direction more than once, so what each of them carries "
        "cannot be told. Hold each direction of a joint once."
    )
