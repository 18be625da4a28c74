"""A truss as its drawing names it: joints, members, supports and the joints that carry the load."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray


@dataclass(frozen=True)
class Bar:
    """One member between two joints."""

    name: str
    start: str
    end: str
    group: str  #: what the member is: `top chord`, `diagonal`


@dataclass(frozen=True, eq=False)
class Truss:
    """A truss in the unit of length of its workbook; y is up in a plane truss, z in a space truss."""

    joints: Mapping[str, tuple[float, ...]]  #: coordinates by joint name, in drawing order
    members: tuple[Bar, ...]
    supports: Mapping[str, str]  #: what each held joint holds: `x y`
    shares: Mapping[str, float]  #: length of load that each loaded joint carries
    span: float  #: distance between the supports, or width at the foot
    height: float  #: depth, rise or height

    @cached_property
    def dimension(self) -> int:
        """2 for a plane truss, 3 for a space truss."""
        return len(next(iter(self.joints.values())))

    @cached_property
    def coordinates(self) -> NDArray[np.float64]:
        """(joints, dimension) coordinates in the order of `joints`."""
        return np.array(list(self.joints.values()))

    @cached_property
    def ends(self) -> NDArray[np.int64]:
        """(members, 2) joint indices."""
        index = {name: place for place, name in enumerate(self.joints)}
        return np.array([[index[bar.start], index[bar.end]] for bar in self.members], dtype=np.int64)

    @cached_property
    def held(self) -> tuple[NDArray[np.int64], NDArray[np.float64]]:
        """(supports,) joint indices and (supports, dimension) unit vectors of the held directions."""
        index = {name: place for place, name in enumerate(self.joints)}
        axes = np.eye(self.dimension)
        pairs = [(index[joint], "xyz".index(axis)) for joint, holds in self.supports.items() for axis in holds.split()]
        return (
            np.array([joint for joint, _ in pairs], dtype=np.int64),
            np.array([axes[axis] for _, axis in pairs]).reshape(-1, self.dimension),
        )

    def length(self, bar: Bar) -> float:
        """Distance between the ends of a member."""
        return float(np.linalg.norm(np.subtract(self.joints[bar.end], self.joints[bar.start])))
