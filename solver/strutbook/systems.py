"""Systems of linear equations: dense LAPACK for everyday trusses, sparse factors for large ones.

Importing the sparse solver costs more than solving a truss of a thousand degrees of freedom densely, so the sparse
module is imported only for trusses beyond that.
"""

from __future__ import annotations

from typing import Protocol

import numpy as np

from strutbook.arrays import FloatArray
from strutbook.equilibrium import Equilibrium, equilibrium
from strutbook.truss import Truss

#: Most free degrees of freedom that are solved densely.
DENSE_LIMIT = 1500


class System(Protocol):
    """A square matrix that can be solved for many right-hand sides."""

    def solve(self, right: FloatArray) -> FloatArray:
        """Solution (n, cases) of A x = right."""
        ...

    def solve_transposed(self, right: FloatArray) -> FloatArray:
        """Solution (n, cases) of Aᵀ x = right."""
        ...


class DenseSystem:
    """A dense matrix; raises `numpy.linalg.LinAlgError` from `solve` when it is exactly singular."""

    def __init__(self, matrix: FloatArray) -> None:
        self._matrix = matrix

    def solve(self, right: FloatArray) -> FloatArray:
        """Solution (n, cases) of A x = right."""
        return np.linalg.solve(self._matrix, right).astype(np.float64, copy=False)

    def solve_transposed(self, right: FloatArray) -> FloatArray:
        """Solution (n, cases) of Aᵀ x = right."""
        return np.linalg.solve(self._matrix.T, right).astype(np.float64, copy=False)


def is_large(truss: Truss) -> bool:
    """Whether the truss takes the sparse route."""
    return truss.joints.size - int(np.count_nonzero(truss.frames.held)) > DENSE_LIMIT


def ordered_equilibrium(truss: Truss) -> Equilibrium:
    """Equilibrium matrix with its rows in the order that suits the route which the truss takes."""
    if is_large(truss):
        from strutbook.ordering import minimum_degree_order

        return equilibrium(truss, minimum_degree_order(truss))
    return equilibrium(truss)


def equilibrium_system(matrix: Equilibrium) -> System:
    """The system B N = P of a truss with as many bars as degrees of freedom."""
    if matrix.free > DENSE_LIMIT:
        from strutbook.sparse import factor_equilibrium

        return factor_equilibrium(matrix)
    return DenseSystem(matrix.dense())


def stiffness_system(matrix: Equilibrium, bar_stiffness: FloatArray) -> System:
    """The system K d = f with K = B diag(bar_stiffness) Bᵀ."""
    if matrix.free > DENSE_LIMIT:
        from strutbook.sparse import factor_stiffness

        return factor_stiffness(matrix, bar_stiffness)
    b = matrix.dense()
    return DenseSystem((b * bar_stiffness) @ b.T)
