"""Joint balance: what the residual is measured against, and the refinement that brings it down.

Forces taken from displacements lose joint balance on long slender trusses, where the difference of two large
displacements carries the force: 7 % of the load is left over at 10,000 panels. Solving again for what is left
over mends it.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from strutbook.actions import Actions
from strutbook.arrays import FloatArray
from strutbook.equilibrium import Equilibrium

#: Residual at which refinement stops.
BALANCED = 1e-9
#: Most rounds of refinement.
ROUNDS = 3


def refine(
    matrix: Equilibrium,
    loads: FloatArray,
    forces: FloatArray,
    scale: FloatArray,
    correction: Callable[[FloatArray], FloatArray],
) -> FloatArray:
    """Bar forces that balance the loads, from forces that nearly do.

    Parameters
    ----------
    matrix : Equilibrium
        The equilibrium matrix B.
    loads : (free, cases) array of float
        N.
    forces : (bars, cases) array of float
        N, tension positive.
    scale : (cases,) array of float
        N, what the residual is measured against.
    correction : callable
        Bar forces (bars, cases) that carry what is left over (free, cases).
    """
    left_over = loads - matrix.forces_on_rows(forces)
    worst = _largest(left_over, scale)
    for _ in range(ROUNDS):
        # A residual that is not finite cannot be refined; it is reported as it is.
        if not BALANCED < worst < np.inf:
            break
        better = forces + correction(left_over)
        rest = loads - matrix.forces_on_rows(better)
        if not _largest(rest, scale) < worst:
            break
        forces, left_over, worst = better, rest, _largest(rest, scale)
    return forces


def equivalent_loads(matrix: Equilibrium, strained: FloatArray) -> FloatArray:
    """(free, cases) N: loads that stretch the bars as much as strains (bars, cases) m do when held in."""
    return matrix.forces_on_rows(matrix.bar_stiffness()[:, np.newaxis] * strained)


def load_scale(matrix: Equilibrium, actions: Actions, factors: FloatArray) -> FloatArray:
    """(combinations,) N: the load against which residuals are measured.

    The largest factored joint load among the cases of the combination. Where there is none, and where it is less
    than a millionth of what follows, the largest of the joint loads that misfits and settlements are equivalent to.
    """
    weights = np.abs(factors)
    largest = np.sqrt((actions.joint_loads**2).sum(axis=1)).max(axis=0, initial=0.0)
    scale: FloatArray = (weights * largest[:, np.newaxis]).max(axis=0, initial=0.0)
    if matrix.truss.axial_rigidity is not None and (actions.free_elongation.any() or actions.settlement.any()):
        strained = matrix.ground_elongations(actions.settlement)
        strained[: len(actions.free_elongation)] -= actions.free_elongation
        held_in = np.abs(equivalent_loads(matrix, strained)).max(axis=0, initial=0.0)
        other = (weights * held_in[:, np.newaxis]).max(axis=0, initial=0.0)
        scale = np.where(scale > 1e-6 * other, scale, other)
    return np.where(scale > 0, scale, 1.0)


def _largest(left_over: FloatArray, scale: FloatArray) -> float:
    return float((np.abs(left_over) / scale).max(initial=0.0))
