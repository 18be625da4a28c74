"""The stiffness method: K d = f with K = B diag(EA/L) Bᵀ."""

from __future__ import annotations

import numpy as np

from strutbook.arrays import FloatArray
from strutbook.balance import equivalent_loads, refine
from strutbook.equilibrium import Equilibrium
from strutbook.systems import System


def forces_by_stiffness(
    matrix: Equilibrium, system: System, loads: FloatArray, imposed: FloatArray, scale: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Bar forces (bars, cases) N and movement (free, cases) m of any stable truss.

    Parameters
    ----------
    matrix : Equilibrium
        The equilibrium matrix B.
    system : System
        K, to be solved.
    loads : (free, cases) array of float
        N.
    imposed : (bars, cases) array of float
        m, elongation that the ground imposes less the free elongation: what strains a bar while no joint moves.
    scale : (cases,) array of float
        N, what the residual is measured against.
    """
    stiffness = matrix.bar_stiffness()[:, np.newaxis]
    movement = system.solve(loads - equivalent_loads(matrix, imposed))
    forces = stiffness * (matrix.elongations(movement) + imposed)

    def correction(left_over: FloatArray) -> FloatArray:
        nonlocal movement
        more = system.solve(left_over)
        movement = movement + more
        return stiffness * matrix.elongations(more)

    forces = refine(matrix, loads, forces, scale, correction)
    return forces, movement
