"""The null space of Bᵀ: every movement of the joints that changes the length of no bar.

B has direction cosines for entries, so its singular values have no unit and do not depend on the stiffness of the
members: badly scaled axial rigidities cannot hide a mechanism or feign one.
"""

from __future__ import annotations

import numpy as np

from strutbook.arrays import FloatArray
from strutbook.equilibrium import Equilibrium
from strutbook.systems import DENSE_LIMIT

#: Most degrees of freedom for which all singular values are computed.
SINGULAR_VALUE_LIMIT = 500
#: Added to the diagonal of a unit stiffness that may be singular: far below what any bar adds.
SHIFT = 1e-12
#: Movements that are iterated together at first, and how often.
FIRST_BLOCK = 4
ITERATIONS = 3
#: An inverse of B Bᵀ smaller than this proves full rank: rounding in B Bᵀ is a thousand times too small to matter.
FULL_RANK_BELOW = 1e10


def cut(free: int) -> float:
    """Singular values of B below this count as 0.

    The smallest singular value of a slender truss falls with the square of its number of panels, to about 1e-8 at
    40,000 degrees of freedom. The cut stays well below that at every size, and above what coordinates
    typed with seven digits make of an exact mechanism in a small truss.
    """
    return min(1e-6, 1e-9 * max(1.0, (3000.0 / max(free, 1)) ** 2))


def null_space(matrix: Equilibrium) -> tuple[FloatArray, float]:
    """Orthonormal basis (free, mechanisms) of the null space of Bᵀ, and about the smallest singular value of B."""
    free = matrix.free
    if free == 0:
        return np.zeros((0, 0)), 1.0
    if free > DENSE_LIMIT:
        return null_space_by_inverse_iteration(matrix)
    b = matrix.dense()
    if matrix.bars >= free:
        margin = proven_margin(b @ b.T)
        if margin > 0:
            return np.zeros((free, 0)), margin
    return null_space_by_singular_values(b)


def null_space_by_inverse_iteration(matrix: Equilibrium) -> tuple[FloatArray, float]:
    """Null space of Bᵀ (free, mechanisms) of a large truss.

    Inverse iteration on the stiffness of bars of unit stiffness brings a block of movements down to those that
    stretch the bars least; the singular values of their elongations tell which stretch none. A block that stretches
    none at all may not hold every mechanism and is doubled.
    """
    from strutbook.sparse import factor_stiffness

    factor = factor_stiffness(matrix, np.ones(matrix.bars), SHIFT)
    random = np.random.default_rng(0)
    block = FIRST_BLOCK
    while True:
        movement = random.standard_normal((matrix.free, min(block, matrix.free)))
        for _ in range(ITERATIONS):
            movement, _ = np.linalg.qr(factor.solve(movement))
        _, values, right = np.linalg.svd(matrix.elongations(movement), full_matrices=False)
        none = int(np.count_nonzero(values <= cut(matrix.free)))
        if none < len(values) or block >= matrix.free:
            return movement @ right[len(values) - none :].T, 0.0 if none else float(values[-1])
        block *= 2


def proven_margin(unit_stiffness: FloatArray) -> float:
    """Lower bound of the smallest singular value of B from B Bᵀ, or 0 when this way cannot tell.

    The inverse is not used but for its size: |K⁻¹| >= 1 / (smallest singular value of B)².
    """
    try:
        inverse = np.linalg.inv(unit_stiffness)
    except np.linalg.LinAlgError:
        return 0.0
    size = float(np.sqrt(np.vdot(inverse, inverse)))
    return size**-0.5 if size < FULL_RANK_BELOW else 0.0


def null_space_by_singular_values(b: FloatArray) -> tuple[FloatArray, float]:
    """Null space of Bᵀ (free, mechanisms) from all singular values of B (free, bars)."""
    free = b.shape[0]
    if b.shape[1] == 0:
        return np.eye(free), 0.0
    left, values, _ = np.linalg.svd(b, full_matrices=True)
    rank = int(np.count_nonzero(values > cut(free)))
    margin = float(values[-1]) if rank == free else 0.0
    return left[:, rank:], margin
