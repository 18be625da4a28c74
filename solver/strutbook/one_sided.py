"""Members that take tension only (rods, cables, slender crossed diagonals), or compression only (props).

A member that would be loaded the other way goes slack and carries nothing. Which ones do differs from combination to
combination, so combinations no longer superpose: each is brought to a state of its own in which no member that acts is
loaded the wrong way and no slack one would be loaded the right way.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from enum import IntEnum

import numpy as np
from numpy.typing import ArrayLike

from strutbook.actions import Actions
from strutbook.analysis import Analysis, analyse
from strutbook.arrays import BoolArray, FloatArray, IntArray
from strutbook.errors import NotSettled, SlackMechanism, Unstable
from strutbook.truss import Truss

#: Rounds in which every member that is wrong changes at once, and rounds in all.
TOGETHER, ROUNDS = 8, 60
#: Forces and elongations below this share of the largest one are none.
NONE = 1e-9


class Takes(IntEnum):
    """What a member can carry."""

    COMPRESSION = -1
    BOTH = 0
    TENSION = 1


@dataclass(frozen=True, eq=False)
class OneSided:
    """Results with members that go slack."""

    analysis: Analysis
    #: (members, combinations) whether the member is slack
    slack: BoolArray


def analyse_one_sided(truss: Truss, actions: Actions, takes: ArrayLike, factors: ArrayLike | None = None) -> OneSided:
    """Forces, reactions and displacements of a truss with members that take one kind of force only.

    Parameters
    ----------
    truss : Truss
        With every member acting it must be stable.
    actions : Actions
        Loads, free elongations and settlements of every case.
    takes : (members,) array of int
        `Takes` of each member.
    factors : (cases, combinations) array of float, optional
        Factor of each case in each combination; each case by itself when left out.

    Raises
    ------
    SlackMechanism
        When the truss can move once members have gone slack; it names the combination and the members.
    NotSettled
        When no consistent state was found.
    StrutbookError
        Whatever `analyse` raises for the truss with all its members.

    Examples
    --------
    A square on pins, braced by two crossed rods; a push to the right leaves one of them slack:

    >>> from strutbook import Supports
    >>> truss = Truss(
    ...     [[0, 0], [3, 0], [0, 3], [3, 3]],
    ...     [[0, 2], [1, 3], [2, 3], [0, 3], [1, 2]],
    ...     Supports.rigid([0, 0, 1, 1], [[1, 0], [0, 1]] * 2),
    ...     axial_rigidity=[1e8] * 5,
    ... )
    >>> joint_loads = np.zeros((4, 2, 1))
    >>> joint_loads[2, 0] = 6e3
    >>> actions = Actions(joint_loads, np.zeros((5, 1)), np.zeros((4, 1)))
    >>> found = analyse_one_sided(truss, actions, [0, 0, 0, 1, 1])
    >>> found.slack[:, 0]
    array([False, False, False, False,  True])
    >>> float(found.analysis.forces[3, 0].round())
    8485.0
    """
    combined = _combined(actions, factors)
    sign = np.asarray(takes, dtype=np.float64)
    whole = analyse(truss, combined)
    state = _State(truss, combined, sign, whole)
    for combination in range(combined.cases):
        state.settle(combination)
    return OneSided(state.analysis(whole), state.slack)


def _combined(actions: Actions, factors: ArrayLike | None) -> Actions:
    if factors is None:
        return actions
    weights = np.asarray(factors, dtype=np.float64)
    return Actions(actions.joint_loads @ weights, actions.free_elongation @ weights, actions.settlement @ weights)


class _State:
    """Results of every combination, as far as they are settled."""

    def __init__(self, truss: Truss, actions: Actions, sign: FloatArray, whole: Analysis) -> None:
        self._truss = truss
        self._actions = actions
        self._sign = sign
        self._results: list[Analysis] = [_column(whole, combination) for combination in range(actions.cases)]
        self.slack: BoolArray = np.zeros((len(truss.members), actions.cases), dtype=np.bool_)

    def settle(self, combination: int) -> None:
        """Bring one combination to a consistent state."""
        seen: set[bytes] = set()
        for round_ in range(ROUNDS):
            wrong = self._wrong(combination)
            if not wrong.any():
                return
            slack = self.slack[:, combination]
            # Changing all at once is quick and can swing to and fro; one at a time gets there in the end.
            worst = np.arange(len(wrong)) == int(wrong.argmax())
            for change in (wrong > 0, worst) if round_ < TOGETHER else (worst,):
                state = slack ^ change
                if state.tobytes() in seen and change is not worst:
                    continue
                try:
                    self._results[combination] = self._solve(state, combination)
                except Unstable as unstable:
                    if change is worst:
                        raise SlackMechanism(unstable.stability, combination, np.flatnonzero(state)) from unstable
                    continue
                seen.add(state.tobytes())
                self.slack[:, combination] = state
                break
        raise NotSettled(combination)

    def analysis(self, whole: Analysis) -> Analysis:
        """Results of all combinations."""
        together: dict[str, FloatArray] = {
            name: np.stack([getattr(result, name)[..., 0] for result in self._results], axis=-1)
            for name in ("forces", "reactions", "out_of_balance", "residual")
        }
        moved = [result.displacements for result in self._results if result.displacements is not None]
        displacements = np.concatenate(moved, axis=2) if len(moved) == len(self._results) else None
        return Analysis(**together, displacements=displacements, stability=whole.stability)

    def _wrong(self, combination: int) -> FloatArray:
        """(members,) how wrong each member's state is, as a share of the largest force or elongation; 0 if right."""
        result, slack = self._results[combination], self.slack[:, combination]
        force = self._sign * result.forces[:, 0]
        against = np.where(slack, 0.0, -force) / max(float(np.abs(force).max(initial=0.0)), np.finfo(float).tiny)
        if slack.any() and result.displacements is not None:
            ends = result.displacements[self._truss.members, :, 0]
            stretch = np.einsum("md,md->m", self._truss.direction_cosines, ends[:, 1] - ends[:, 0])
            stretch = self._sign * (stretch - self._actions.free_elongation[:, combination])
            scale = max(float(np.abs(stretch).max(initial=0.0)), np.finfo(float).tiny)
            against = np.where(slack, stretch / scale, against)
        return np.where(against > NONE, against, 0.0)

    def _solve(self, slack: BoolArray, combination: int) -> Analysis:
        """Results of the combination without its slack members."""
        kept: IntArray = np.flatnonzero(~slack)
        truss, actions = self._truss, self._actions
        rigidity = None if truss.axial_rigidity is None else truss.axial_rigidity[kept]
        one = slice(combination, combination + 1)
        found = analyse(
            Truss(truss.joints, truss.members[kept], truss.supports, rigidity),
            Actions(actions.joint_loads[:, :, one], actions.free_elongation[kept, one], actions.settlement[:, one]),
        )
        forces = np.zeros((len(truss.members), 1))
        forces[kept] = found.forces
        return replace(found, forces=forces)


def _column(analysis: Analysis, combination: int) -> Analysis:
    one = slice(combination, combination + 1)
    displacements = analysis.displacements
    return Analysis(
        analysis.forces[:, one],
        analysis.reactions[:, one],
        None if displacements is None else displacements[:, :, one],
        analysis.out_of_balance[:, one],
        analysis.residual[one],
        analysis.stability,
    )
