"""Statics alone: B N = P, for trusses with as many bars as degrees of freedom."""

from __future__ import annotations

from strutbook.arrays import FloatArray
from strutbook.balance import refine
from strutbook.equilibrium import Equilibrium
from strutbook.systems import System


def forces_by_statics(matrix: Equilibrium, system: System, loads: FloatArray, scale: FloatArray) -> FloatArray:
    """Bar forces (bars, cases) N of a statically determinate truss.

    Misfits, temperature and settlements add no force to it, so they are not asked for.

    Parameters
    ----------
    matrix : Equilibrium
        The equilibrium matrix B, square.
    system : System
        B, to be solved.
    loads : (free, cases) array of float
        N.
    scale : (cases,) array of float
        N, what the residual is measured against.
    """
    return refine(matrix, loads, system.solve(loads), scale, system.solve)


def movement_from_elongations(system: System, elongations: FloatArray) -> FloatArray:
    """Movement (free, cases) m that gives the bars these elongations (bars, cases) m: Bᵀ d = e."""
    return system.solve_transposed(elongations)
