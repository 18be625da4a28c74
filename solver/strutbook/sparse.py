"""Sparse matrices and factors of large trusses. The rows of B must stand in the order of elimination."""

from __future__ import annotations

import numpy as np

from strutbook.arrays import FloatArray
from strutbook.equilibrium import Equilibrium

from scipy.sparse import coo_array, csc_array
from scipy.sparse.linalg import SuperLU, splu

#: Right-hand sides that are solved together: more would only take memory.
BLOCK = 16


class SparseSystem:
    """A factored sparse matrix."""

    def __init__(self, factor: SuperLU) -> None:
        self.factor = factor

    def solve(self, right: FloatArray) -> FloatArray:
        """Solution (n, cases) of A x = right."""
        return self._in_blocks(right, "N")

    def solve_transposed(self, right: FloatArray) -> FloatArray:
        """Solution (n, cases) of Aᵀ x = right."""
        return self._in_blocks(right, "T")

    def _in_blocks(self, right: FloatArray, side: str) -> FloatArray:
        solution = np.empty_like(right)
        for start in range(0, right.shape[1], BLOCK):
            part = slice(start, start + BLOCK)
            solution[:, part] = self.factor.solve(np.asfortranarray(right[:, part]), side)
        return solution


def sparse_equilibrium(matrix):
    """B as a sparse matrix (free, bars); zeros of members along an axis are kept."""
    inside = matrix.rows < matrix.free
    columns = np.broadcast_to(np.arange(matrix.bars, dtype=np.int32)[:, np.newaxis], matrix.rows.shape)
    return csc_array(
        coo_array(
            (matrix.entries[inside], (matrix.rows[inside].astype(np.int32), columns[inside])),
            shape=(matrix.free, matrix.bars),
        )
    )


def sparse_stiffness(matrix, bar_stiffness, shift=0.0):
    size = matrix.rows.shape[1]
    rows = matrix.rows.astype(np.int32)
    weighted = matrix.entries * bar_stiffness[:, np.newaxis]
    values = (weighted[:, :, np.newaxis] * matrix.entries[:, np.newaxis, :])
    r = np.broadcast_to(rows[:, :, np.newaxis], values.shape)
    c = np.broadcast_to(rows[:, np.newaxis, :], values.shape)
    inside = (r < matrix.free) & (c < matrix.free)
    d = np.arange(matrix.free, dtype=np.int32)
    return csc_array(coo_array((values[inside], (r[inside], c[inside])), shape=(matrix.free, matrix.free)))


def factor_equilibrium(matrix: Equilibrium) -> SparseSystem:
    """Factor of a square B."""
    return SparseSystem(splu(sparse_equilibrium(matrix)))


def factor_stiffness(matrix: Equilibrium, bar_stiffness: FloatArray, shift: float = 0.0) -> SparseSystem:
    """Factor of K = B diag(bar_stiffness) Bᵀ, plus a shift of its diagonal."""
    stiffness = sparse_stiffness(matrix, bar_stiffness, shift)
    return SparseSystem(
        splu(stiffness, permc_spec="NATURAL", diag_pivot_thresh=0.0, options={"SymmetricMode": True})
    )
