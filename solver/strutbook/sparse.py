"""Sparse matrices and factors of large trusses.

The rows of B must stand in the order of elimination (`strutbook.ordering`): the factors keep it as it is.
"""

from __future__ import annotations

from typing import Literal

import numpy as np
from scipy.sparse import coo_array, csc_array
from scipy.sparse.linalg import SuperLU, splu

from strutbook.arrays import FloatArray, IntArray
from strutbook.equilibrium import Equilibrium

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

    def _in_blocks(self, right: FloatArray, side: Literal["N", "T"]) -> FloatArray:
        solution = np.empty_like(right)
        for start in range(0, right.shape[1], BLOCK):
            part = slice(start, start + BLOCK)
            solution[:, part] = self.factor.solve(np.asfortranarray(right[:, part]), side)  # type: ignore[call-overload]  # stubs leave out `trans`
        return solution


def factor_equilibrium(matrix: Equilibrium) -> SparseSystem:
    """Factor of a square B."""
    return SparseSystem(splu(sparse_equilibrium(matrix)))


def factor_stiffness(matrix: Equilibrium, bar_stiffness: FloatArray, shift: float = 0.0) -> SparseSystem:
    """Factor of K = B diag(bar_stiffness) Bᵀ, with `shift` added to its diagonal."""
    stiffness = sparse_stiffness(matrix, bar_stiffness, shift)
    return SparseSystem(splu(stiffness, permc_spec="NATURAL", diag_pivot_thresh=0.0, options={"SymmetricMode": True}))


def sparse_equilibrium(matrix: Equilibrium) -> csc_array:
    """B as a sparse matrix (free, bars); zeros of members along an axis are kept."""
    inside = matrix.rows < matrix.free
    columns = np.broadcast_to(np.arange(matrix.bars)[:, np.newaxis], matrix.rows.shape)
    return csc_array(
        coo_array(
            (matrix.entries[inside], (matrix.rows[inside], columns[inside])),
            shape=(matrix.free, matrix.bars),
        )
    )


def sparse_stiffness(matrix: Equilibrium, bar_stiffness: FloatArray, shift: float = 0.0) -> csc_array:
    """K = B diag(bar_stiffness) Bᵀ as a sparse matrix (free, free), zeros inside the joint blocks kept.

    Parameters
    ----------
    matrix : Equilibrium
        B.
    bar_stiffness : (bars,) array of float
        N/m, or ones for the unit stiffness.
    shift : float
        Added to the diagonal, in the unit of the stiffness.
    """
    joints, size = matrix.rows_of_joints.shape
    position = np.empty(joints, dtype=np.intp)
    position[matrix.joint_order] = np.arange(joints)
    block, place_of_pair, place_of_joint = _blocks(position[matrix.ends], joints)
    values = _block_values(matrix, bar_stiffness, position[matrix.ends], place_of_pair, place_of_joint, len(block))
    for axis in range(size):
        values[axis, axis, place_of_joint] += shift

    # From blocks, sorted by joint, to rows: row by row of a joint, then block by block, then along the block.
    row_joint, column_joint = block // joints, block % joints
    in_row = np.bincount(row_joint, minlength=joints)
    first = np.concatenate([[0], np.cumsum(in_row)[:-1]])
    start = size * size * first[row_joint] + size * (np.arange(len(block)) - first[row_joint])
    numbers = matrix.rows_of_joints[matrix.joint_order].astype(np.int32)
    ground = np.int32(matrix.free)
    data = np.empty(values.size)
    indices = np.empty(values.size, dtype=np.int32)
    for row in range(size):
        is_held = numbers[row_joint, row] == ground
        for column in range(size):
            target = start + row * size * in_row[row_joint] + column
            data[target] = values[row, column]
            indices[target] = np.where(is_held, ground, numbers[column_joint, column])
    kept = indices < ground
    free_in_joint = np.count_nonzero(numbers < ground, axis=1)
    length = np.bincount(row_joint, weights=free_in_joint[column_joint], minlength=joints).astype(np.int32)
    lengths = np.broadcast_to(length[:, np.newaxis], numbers.shape)[numbers < ground]
    pointers = np.concatenate([[0], np.cumsum(lengths)]).astype(np.int32)
    # K is symmetric, so its rows are its columns.
    return csc_array((data[kept], indices[kept], pointers), shape=(matrix.free, matrix.free))


def _blocks(ends: IntArray, joints: int) -> tuple[IntArray, IntArray, IntArray]:
    """Keys of the blocks of K, sorted, and the places of each pair (both ways) and each joint among them."""
    first, second = ends[:, 0], ends[:, 1]
    keys = np.concatenate([first * joints + second, second * joints + first, np.arange(joints) * (joints + 1)])
    block, place = np.unique(keys, return_inverse=True)
    pairs = 2 * len(ends)
    return block, place[:pairs].reshape(2, -1), place[pairs:]


def _block_values(
    matrix: Equilibrium,
    bar_stiffness: FloatArray,
    ends: IntArray,
    place_of_pair: IntArray,
    place_of_joint: IntArray,
    blocks: int,
) -> FloatArray:
    """Entries of the blocks of K: (dimensions, dimensions, blocks)."""
    size = matrix.rows_of_joints.shape[1]
    first, second = matrix.entries[:, :size].T, matrix.entries[:, size:].T
    place = np.concatenate([place_of_pair[0], place_of_pair[1], *place_of_joint[ends.T]])
    values = np.empty((size, size, blocks))
    for row in range(size):
        for column in range(size):
            pairs = [
                first[row] * second[column],
                second[row] * first[column],
                first[row] * first[column],
                second[row] * second[column],
            ]
            weights = np.concatenate([bar_stiffness * pair for pair in pairs])
            values[row, column] = np.bincount(place, weights, minlength=blocks)
    return values
