"""What acts on a truss, case by case."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from strutbook.arrays import FloatArray, read_only_floats
from strutbook.errors import InvalidTruss
from strutbook.truss import Truss


@dataclass(frozen=True, eq=False)
class Actions:
    """Loads on joints, free elongations of members and movements of the ground, for every case.

    Raises
    ------
    InvalidTruss
        When a value is not finite or the three arrays do not have the same number of cases.
    """

    #: (joints, dimensions, cases) N, along the global axes
    joint_loads: FloatArray
    #: (members, cases) m, positive when the member is too long or heated
    free_elongation: FloatArray
    #: (supports, cases) m, movement of the ground along the direction of the support
    settlement: FloatArray

    def __post_init__(self) -> None:
        joint_loads = read_only_floats(self.joint_loads, "Actions.joint_loads", 3)
        free_elongation = read_only_floats(self.free_elongation, "Actions.free_elongation", 2)
        settlement = read_only_floats(self.settlement, "Actions.settlement", 2)
        cases = (joint_loads.shape[2], free_elongation.shape[1], settlement.shape[1])
        if len(set(cases)) != 1:
            raise InvalidTruss(
                f"Actions has {cases[0]} cases of joint loads, {cases[1]} of free elongations and {cases[2]} of "
                "settlements; expected the same number of each."
            )
        object.__setattr__(self, "joint_loads", joint_loads)
        object.__setattr__(self, "free_elongation", free_elongation)
        object.__setattr__(self, "settlement", settlement)

    @classmethod
    def zero(cls, truss: Truss, cases: int = 1) -> Actions:
        """Actions of that many cases in which nothing acts."""
        return cls(
            np.zeros((*truss.joints.shape, cases)),
            np.zeros((len(truss.members), cases)),
            np.zeros((len(truss.supports), cases)),
        )

    @property
    def cases(self) -> int:
        """Number of cases."""
        return int(self.joint_loads.shape[2])

    def check_fit(self, truss: Truss) -> None:
        """Refuse actions that were made for another truss.

        Raises
        ------
        InvalidTruss
            When the number of joints, members or supports differs.
        """
        given = (self.joint_loads.shape[:2], len(self.free_elongation), len(self.settlement))
        wanted = (truss.joints.shape, len(truss.members), len(truss.supports))
        if given != wanted:
            raise InvalidTruss(
                f"Actions are for {given[0][0]} joints in {given[0][1]} dimensions, {given[1]} members and "
                f"{given[2]} supports; the truss has {wanted[0][0]} in {wanted[0][1]}, {wanted[1]} and {wanted[2]}."
            )
