"""What can be wrong with a truss, and what the solver raises then.

::

    StrutbookError
    ├── InvalidTruss       the arrays do not describe a truss, or actions on it
    ├── Unstable           the truss can move; carries the mechanisms
    ├── SlackMechanism     the truss can move once members have gone slack
    ├── NotSettled         no state of slack members was found that is consistent
    ├── StiffnessNeeded    forces depend on stiffness, and none is given
    └── NotBalanced        rounding leaves joints out of balance; carries the residual

Messages speak of joints, members and supports by index, counted from 0.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from strutbook.arrays import IntArray
    from strutbook.stability import Stability


class StrutbookError(Exception):
    """Base of everything that the solver raises on purpose."""


class InvalidTruss(StrutbookError):
    """The arrays do not describe a truss, or the actions do not fit it."""


class Unstable(StrutbookError):
    """The truss can move without any bar changing its length.

    Attributes
    ----------
    stability : Stability
        Rank and every independent mechanism.
    """

    def __init__(self, stability: Stability) -> None:
        count = len(stability.mechanisms)
        ways = "one way" if count == 1 else f"{count} independent ways"
        first = stability.mechanisms[0].joints[:6]
        super().__init__(
            f"The truss can move in {ways} without any bar changing its length; joints such as "
            f"{', '.join(str(joint) for joint in first)} (counted from 0) move. Add a bar or a support "
            "that stops each of the mechanisms."
        )
        self.stability = stability


class SlackMechanism(StrutbookError):
    """The truss can move once the members that would be loaded the wrong way have gone slack.

    Attributes
    ----------
    stability : Stability
        Rank and mechanisms of what is left; members are counted without the slack ones.
    combination : int
        Index of the combination.
    slack : (slack members,) array of int
        Indices of the members that are slack.
    """

    def __init__(self, stability: Stability, combination: int, slack: IntArray) -> None:
        listed = ", ".join(str(member) for member in slack[:6].tolist())
        super().__init__(
            f"In combination {combination} (counted from 0) members such as {listed} go slack, and then the truss "
            "can move."
        )
        self.stability = stability
        self.combination = combination
        self.slack = slack


class NotSettled(StrutbookError):
    """No state was found in which slack and acting members agree with their forces.

    Attributes
    ----------
    combination : int
        Index of the combination.
    """

    def __init__(self, combination: int) -> None:
        super().__init__(
            f"In combination {combination} (counted from 0) members keep going slack and tight in turn; no consistent "
            "state was found. Look at misfits and at members that take one kind of force only."
        )
        self.combination = combination


class StiffnessNeeded(StrutbookError):
    """Statics alone does not give the forces, and no axial rigidity is given.

    Attributes
    ----------
    indeterminacy : int
        Degree of static indeterminacy.
    """

    def __init__(self, indeterminacy: int) -> None:
        super().__init__(
            f"The truss is statically indeterminate to degree {indeterminacy}, so its forces depend on the "
            "stiffness of its members. Give the axial rigidity EA of every member."
        )
        self.indeterminacy = indeterminacy


class NotBalanced(StrutbookError):
    """The equations were solved, but what came out is not finite.

    Attributes
    ----------
    residual : float
        Largest force out of balance at a joint over the largest load.
    """

    def __init__(self, residual: float) -> None:
        super().__init__(
            f"The forces do not balance the loads: {residual:.1e} of the largest load is left over at a joint. "
            "Look for axial rigidities, spring stiffnesses or lengths that differ by many powers of ten."
        )
        self.residual = residual
