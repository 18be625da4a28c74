"""The order in which the joints of a large truss are eliminated.

Minimum degree is run on the joint graph and not on the stiffness matrix. Members along an axis leave zeros inside the
blocks of that matrix; an ordering that sees those zeros loses the blocks, and the factor can grow four hundredfold.
"""

from __future__ import annotations

import numpy as np

from strutbook.arrays import IntArray
from strutbook.truss import Truss


def minimum_degree_order(truss: Truss) -> IntArray:
    """Joints (joints,) in the order of their elimination: fewest remaining neighbours first."""
    from scipy.sparse import coo_array, csc_array
    from scipy.sparse.linalg import spilu

    joints = len(truss.joints)
    first, second = truss.members.T.astype(np.int32)
    every = np.arange(joints, dtype=np.int32)
    # Any matrix on the joint graph will do; a dominant diagonal lets the factorisation run without pivoting.
    graph = csc_array(
        coo_array(
            (
                np.concatenate(
                    [
                        np.full(2 * len(first), -1.0),
                        np.bincount(truss.members.ravel(), minlength=joints) + 1.0,
                    ]
                ),
                (np.concatenate([first, second, every]), np.concatenate([second, first, every])),
            ),
            shape=(joints, joints),
        )
    )
    # An incomplete factor that drops every entry: the ordering is computed, and hardly anything else.
    factor = spilu(
        graph,
        drop_tol=1.0,
        fill_factor=1.0,
        permc_spec="MMD_AT_PLUS_A",
        diag_pivot_thresh=0.0,
        options={"SymmetricMode": True},
    )
    order = np.empty(joints, dtype=np.intp)
    order[factor.perm_c] = np.arange(joints)
    return order
