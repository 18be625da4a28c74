"""The truss: joints, members, supports and the rigidity of the members."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from strutbook.arrays import FloatArray, IntArray, check_indices, read_only_floats, read_only_indices
from strutbook.errors import InvalidTruss
from strutbook.supports import JointFrames, Supports, joint_frames


@dataclass(frozen=True, eq=False)
class Truss:
    """A pin-jointed truss, plane or in space.

    Raises
    ------
    InvalidTruss
        When the arrays do not describe a truss; the message names the joint, member or support by index.

    Examples
    --------
    >>> truss = Truss(
    ...     joints=[[0, 0], [4, 0], [2, 1.5]],
    ...     members=[[0, 1], [1, 2], [0, 2]],
    ...     supports=Supports.rigid([0, 0, 1], [[1, 0], [0, 1], [0, 1]]),
    ... )
    >>> truss.lengths
    array([4. , 2.5, 2.5])
    """

    #: (joints, dimensions) coordinates in m; two dimensions (y up) or three (z up)
    joints: FloatArray
    #: (members, 2) joint indices of the two ends
    members: IntArray
    #: directions in which joints are held
    supports: Supports
    #: (members,) EA in N, or None: then statics alone must give the forces
    axial_rigidity: FloatArray | None = None

    def __post_init__(self) -> None:
        joints = read_only_floats(self.joints, "Truss.joints", 2)
        members = read_only_indices(self.members, "Truss.members", 2)
        if joints.shape[1] not in (2, 3):
            raise InvalidTruss(f"Truss.joints has {joints.shape[1]} columns; expected 2 (plane) or 3 (space).")
        if members.shape[1] != 2:
            raise InvalidTruss(f"Truss.members has {members.shape[1]} columns; expected 2, one for each end.")
        check_indices(members, len(joints), "Member", "joint")
        check_indices(self.supports.joint, len(joints), "Support", "joint")
        if self.supports.direction.shape[1] != joints.shape[1]:
            raise InvalidTruss(
                f"Supports have directions of {self.supports.direction.shape[1]} components; "
                f"expected {joints.shape[1]}, as the joints have."
            )
        object.__setattr__(self, "joints", joints)
        object.__setattr__(self, "members", members)
        # Squares of very small or very large coordinates would leave the range of floating-point numbers.
        if not np.isfinite(self.lengths).all():
            raise InvalidTruss(f"Member {int((~np.isfinite(self.lengths)).argmax())} is too long to measure.")
        if not (self.lengths > 0).all():
            raise InvalidTruss(f"Member {int(self.lengths.argmin())} has no length: its ends are at one place.")
        if self.axial_rigidity is not None:
            rigidity = read_only_floats(self.axial_rigidity, "Truss.axial_rigidity", 1)
            if len(rigidity) != len(members):
                raise InvalidTruss(
                    f"Truss.axial_rigidity has {len(rigidity)} values; expected {len(members)}, one a member."
                )
            if not (rigidity > 0).all():
                wrong = int(rigidity.argmin())
                raise InvalidTruss(f"Member {wrong} has the axial rigidity {rigidity[wrong]}; expected above 0 N.")
            object.__setattr__(self, "axial_rigidity", rigidity)
        _ = self.frames  # refuses directions that are held twice

    @property
    def dimensions(self) -> int:
        """2 for a plane truss, 3 for a space truss."""
        return int(self.joints.shape[1])

    @cached_property
    def _vectors(self) -> FloatArray:
        ends = self.joints[self.members]
        return ends[:, 1] - ends[:, 0]

    @cached_property
    def lengths(self) -> FloatArray:
        """(members,) m."""
        lengths: FloatArray = np.sqrt((self._vectors * self._vectors).sum(axis=1))
        lengths.flags.writeable = False
        return lengths

    @cached_property
    def direction_cosines(self) -> FloatArray:
        """(members, dimensions) unit vectors from the first end to the second."""
        cosines = self._vectors / self.lengths[:, np.newaxis]
        cosines.flags.writeable = False
        return cosines

    @cached_property
    def frames(self) -> JointFrames:
        """Local axes of every joint, free or held."""
        return joint_frames(self.supports, len(self.joints), self.dimensions)
