"""Indeterminate trusses against exact arithmetic (sympy), and hand-sized cases against hand calculation."""

from __future__ import annotations

import numpy as np
import pytest
import sympy
from tests.solver.trusses import loads_only

from strutbook import Actions, Supports, Truss, analyse, line_load, projected_line_load, self_weight
from strutbook.member_loads import STANDARD_GRAVITY

#: Joints, members, held (joint, axis), loads (joint, axis, N): 3-4-5 triangles keep lengths rational.
EXACT = {
    "braced square": (
        [(0, 0), (4, 0), (4, 3), (0, 3)],
        [(0, 1), (1, 2), (2, 3), (3, 0), (0, 2), (1, 3)],
        [(0, 0), (0, 1), (1, 1)],
        [(2, 0, 7000), (3, 1, -11000)],
    ),
    "two panels, fixed at both ends": (
        [(0, 0), (4, 0), (8, 0), (0, 3), (4, 3), (8, 3)],
        [(0, 1), (1, 2), (3, 4), (4, 5), (0, 3), (1, 4), (2, 5), (0, 4), (1, 3), (1, 5), (2, 4)],
        [(0, 0), (0, 1), (2, 0), (2, 1)],
        [(1, 1, -20000), (4, 0, 5000)],
    ),
    "square pyramid on pins": (
        [(2, 2, 1), (0, 0, 0), (4, 0, 0), (4, 4, 0), (0, 4, 0)],
        [(0, 1), (0, 2), (0, 3), (0, 4)],
        [(joint, axis) for joint in (1, 2, 3, 4) for axis in range(3)],
        [(0, 2, -9000), (0, 0, 3000)],
    ),
}


@pytest.mark.parametrize("name", EXACT)
def test_indeterminate_forces_equal_exact_arithmetic(name):
    joints, members, held, loads = EXACT[name]
    size = len(joints[0])
    rigidity = [10**7 * (2 + place % 3) for place in range(len(members))]
    free = [axis for axis in range(len(joints) * size) if divmod(axis, size) not in set(held)]
    b = sympy.zeros(len(joints) * size, len(members))
    lengths = []
    for place, (first, second) in enumerate(members):
        arm = [sympy.Integer(end - start) for start, end in zip(joints[first], joints[second], strict=True)]
        length = sympy.sqrt(sum(part**2 for part in arm))
        lengths.append(length)
        for axis, part in enumerate(arm):
            b[first * size + axis, place] = -part / length
            b[second * size + axis, place] = part / length
    b = b.extract(free, list(range(len(members))))
    stiffness = sympy.diag(*[sympy.Integer(value) / length for value, length in zip(rigidity, lengths, strict=True)])
    load = sympy.zeros(len(joints) * size, 1)
    for joint, axis, value in loads:
        load[joint * size + axis] = value
    movement = (b * stiffness * b.T).LUsolve(load.extract(free, [0]))
    exact = [float(force) for force in stiffness * b.T * movement]

    supports = Supports.rigid([joint for joint, _ in held], [np.eye(size)[axis] for _, axis in held])
    truss = Truss(np.array(joints, dtype=float), members, supports, np.array(rigidity, dtype=float))
    joint_loads = np.zeros((len(joints), size, 1))
    for joint, axis, value in loads:
        joint_loads[joint, axis, 0] = value
    analysis = analyse(truss, loads_only(truss, joint_loads))
    assert analysis.stability.indeterminacy == len(members) - len(free)
    assert analysis.forces[:, 0] == pytest.approx(exact, rel=1e-12, abs=1e-9)


def test_short_member_pulls():
    """Two bars in a line between walls, one made 1 mm short: both pull with EA δ / 2L."""
    supports = Supports.rigid([0, 0, 1, 2, 2], [[1, 0], [0, 1], [0, 1], [1, 0], [0, 1]])
    truss = Truss([[0, 0], [2, 0], [4, 0]], [[0, 1], [1, 2]], supports, [2e8, 2e8])
    actions = Actions(np.zeros((3, 2, 1)), [[-1e-3], [0.0]], np.zeros((5, 1)))
    assert analyse(truss, actions).forces[:, 0] == pytest.approx([5e4, 5e4])


def test_settlement_of_a_redundant_support_bends_nothing_but_pulls():
    """A bar between walls of which one moves away by 2 mm stretches by as much."""
    supports = Supports.rigid([0, 0, 1, 1], [[1, 0], [0, 1], [1, 0], [0, 1]])
    truss = Truss([[0, 0], [4, 0]], [[0, 1]], supports, [2e8])
    actions = Actions(np.zeros((2, 2, 1)), [[0.0]], [[0.0], [0.0], [2e-3], [0.0]])
    analysis = analyse(truss, actions)
    assert analysis.forces[0, 0] == pytest.approx(2e8 * 2e-3 / 4)
    assert analysis.reactions[2, 0] == pytest.approx(2e8 * 2e-3 / 4)
    assert analysis.displacements[1, 0, 0] == pytest.approx(2e-3)


def test_skew_roller_pushes_square_to_its_slope():
    """A triangle of 4 m span on a roller that slopes at 45 degrees: moments about the pin give its reaction."""
    supports = Supports.rigid([0, 0, 1], [[1, 0], [0, 1], [-1, 1]])
    truss = Truss([[0, 0], [4, 0], [2, 1.5]], [[0, 1], [1, 2], [0, 2]], supports)
    loads = np.zeros((3, 2, 1))
    loads[2, 1] = -12e3
    analysis = analyse(truss, loads_only(truss, loads))
    assert analysis.reactions[2, 0] == pytest.approx(6e3 * np.sqrt(2))
    assert analysis.reactions[0, 0] == pytest.approx(6e3)


def test_spring_carries_its_share():
    """A bar hung from a rigid support beside a spring at its end: load shared by stiffness."""
    supports = Supports([0, 0, 1, 1], [[1, 0], [0, 1], [1, 0], [0, 1]], [np.inf, np.inf, 3e6, np.inf])
    truss = Truss([[0, 0], [2, 0]], [[0, 1]], supports, [2e6])
    loads = np.zeros((2, 2, 1))
    loads[1, 0] = 8e3
    analysis = analyse(truss, loads_only(truss, loads))
    # The bar has EA/L = 1e6 N/m against 3e6 N/m of the spring.
    assert analysis.forces[0, 0] == pytest.approx(2e3)
    assert analysis.reactions[2, 0] == pytest.approx(-6e3)
    assert analysis.displacements[1, 0, 0] == pytest.approx(2e-3)


def test_loads_along_members_keep_their_sum_and_moment():
    truss = Truss([[0, 0], [4, 3], [9, 3]], [[0, 1], [1, 2]], Supports.rigid([0], [[1, 0]]))
    for lump, sizes in ((line_load, (5.0, 5.0)), (projected_line_load, (4.0, 5.0))):
        loads = lump(truss, [0, 1], [[0, -1e3], [0, -2e3]])
        assert loads[:, 1].sum() == pytest.approx(-1e3 * sizes[0] - 2e3 * sizes[1])
        moment = (truss.joints[:, 0] * loads[:, 1]).sum()
        assert moment == pytest.approx(-1e3 * sizes[0] * 2.0 - 2e3 * sizes[1] * 6.5)


def test_self_weight_is_mass_times_gravity_downwards():
    truss = Truss([[0, 0, 0], [0, 0, 3], [4, 0, 3]], [[0, 1], [1, 2]], Supports.rigid([0], [[1, 0, 0]]))
    loads = self_weight(truss, [10.0, 20.0])
    assert loads[:, 2].sum() == pytest.approx(-(10 * 3 + 20 * 4) * STANDARD_GRAVITY)
    assert not loads[:, :2].any()
