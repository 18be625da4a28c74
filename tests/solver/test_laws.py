"""Laws of statics that hold for every truss."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from tests.solver.trusses import determinate_trusses, loads_only, random_actions, with_more_bars

from strutbook import Actions, Supports, Truss, analyse, stability

SEEDS = st.integers(0, 2**32 - 1)
few = settings(max_examples=40, deadline=None)


@few
@given(determinate_trusses(), SEEDS)
def test_henneberg_trusses_are_stable_and_determinate(truss, seed):
    found = stability(truss)
    assert found.stable
    assert found.indeterminacy == 0
    assert found.margin > 0


@few
@given(determinate_trusses(), SEEDS)
def test_joints_balance_and_reactions_carry_the_loads(truss, seed):
    random = np.random.default_rng(seed)
    for checked in (truss, with_more_bars(truss, 3, random)):
        actions = random_actions(checked, 3, random)
        analysis = analyse(checked, actions)
        assert analysis.residual.max() <= 1e-9
        total = np.einsum("sd,sc->dc", checked.supports.direction, analysis.reactions)
        assert total == pytest.approx(-actions.joint_loads.sum(axis=0), abs=1e-3)


@few
@given(determinate_trusses(), SEEDS)
def test_statics_and_stiffness_give_the_same_forces(truss, seed):
    random = np.random.default_rng(seed)
    actions = random_actions(truss, 2, random)
    statics = analyse(Truss(truss.joints, truss.members, truss.supports), actions)
    stiffness = analyse(truss, actions)
    # The stiffness route itself, which a determinate truss does not take by default.
    b = _dense(truss)
    rigidity = truss.axial_rigidity / truss.lengths
    loads = _free(truss, actions.joint_loads)
    movement = np.linalg.solve((b * rigidity) @ b.T, loads)
    plain = rigidity[:, np.newaxis] * (b.T @ movement)
    scale = np.abs(statics.forces).max()
    assert stiffness.forces == pytest.approx(statics.forces, abs=1e-9 * scale)
    assert plain == pytest.approx(statics.forces, abs=1e-6 * scale)
    assert statics.displacements is None


@few
@given(determinate_trusses(), SEEDS)
def test_misfits_and_settlements_move_a_determinate_truss_without_force(truss, seed):
    random = np.random.default_rng(seed)
    actions = random_actions(truss, 1, random)
    strained = Actions(np.zeros_like(actions.joint_loads), actions.free_elongation, actions.settlement)
    analysis = analyse(truss, strained)
    assert not analysis.forces.any()
    # Every member takes its free elongation, so the joints move as the misfits ask.
    ends = analysis.displacements[truss.members]
    elongation = np.einsum("md,mdc->mc", truss.direction_cosines, ends[:, 1] - ends[:, 0])
    assert elongation == pytest.approx(actions.free_elongation, abs=1e-12)


@few
@given(determinate_trusses(), SEEDS)
def test_combinations_superpose(truss, seed):
    random = np.random.default_rng(seed)
    redundant = with_more_bars(truss, 2, random)
    actions = random_actions(redundant, 3, random)
    factors = random.uniform(-2, 2, (3, 5))
    alone, together = analyse(redundant, actions), analyse(redundant, actions, factors)
    for name in ("forces", "reactions", "displacements"):
        expected = getattr(alone, name) @ factors
        assert getattr(together, name) == pytest.approx(expected, abs=1e-9 * np.abs(expected).max())


@few
@given(determinate_trusses(), SEEDS)
def test_turning_the_truss_turns_nothing_but_directions(truss, seed):
    random = np.random.default_rng(seed)
    turn, _ = np.linalg.qr(random.standard_normal((truss.dimensions,) * 2))
    redundant = with_more_bars(truss, 2, random)
    actions = random_actions(redundant, 1, random)
    turned = Truss(
        redundant.joints @ turn.T,
        redundant.members,
        Supports.rigid(redundant.supports.joint, redundant.supports.direction @ turn.T),
        redundant.axial_rigidity,
    )
    loads = np.einsum("ed,jdc->jec", turn, actions.joint_loads)
    before = analyse(redundant, actions)
    after = analyse(turned, Actions(loads, actions.free_elongation, actions.settlement))
    scale = np.abs(before.forces).max()
    assert after.forces == pytest.approx(before.forces, abs=1e-8 * scale)
    assert after.reactions == pytest.approx(before.reactions, abs=1e-8 * scale)


@few
@given(determinate_trusses(), SEEDS)
def test_maxwell_displacements_are_reciprocal(truss, seed):
    """J. C. Maxwell (1864): a unit load at one joint moves another as much as the other way round."""
    random = np.random.default_rng(seed)
    redundant = with_more_bars(truss, 2, random)
    first, second = random.choice(len(truss.joints), 2, replace=False)
    loads = np.zeros((*truss.joints.shape, 2))
    loads[first, 0, 0] = loads[second, 1, 1] = 1e4
    moved = analyse(redundant, loads_only(redundant, loads)).displacements
    assert moved[second, 1, 0] == pytest.approx(moved[first, 0, 1], rel=1e-6, abs=1e-12)


@few
@given(determinate_trusses(), SEEDS)
def test_work_of_the_loads_is_the_strain_energy(truss, seed):
    """B. P. E. Clapeyron: loads times displacements equal the sum of N² L / EA."""
    random = np.random.default_rng(seed)
    redundant = with_more_bars(truss, 2, random)
    loads = random.uniform(-1e5, 1e5, (*truss.joints.shape, 1))
    analysis = analyse(redundant, loads_only(redundant, loads))
    energy = (analysis.forces[:, 0] ** 2 * redundant.lengths / redundant.axial_rigidity).sum()
    assert (loads * analysis.displacements).sum() == pytest.approx(energy, rel=1e-7)


@few
@given(determinate_trusses(), SEEDS)
def test_a_very_stiff_spring_is_a_rigid_support(truss, seed):
    random = np.random.default_rng(seed)
    redundant = with_more_bars(truss, 2, random)
    actions = random_actions(redundant, 1, random)
    supports = redundant.supports
    springs = Supports(supports.joint, supports.direction, np.full(len(supports), 1e15))
    rigid = analyse(redundant, actions)
    sprung = analyse(Truss(redundant.joints, redundant.members, springs, redundant.axial_rigidity), actions)
    assert sprung.reactions == pytest.approx(rigid.reactions, abs=1e-4 * np.abs(rigid.forces).max())


def _dense(truss: Truss) -> np.ndarray:
    """B by the textbook: joint by joint, axis by axis, for supports along axes."""
    free = _free_axes(truss)
    b = np.zeros((truss.joints.size, len(truss.members)))
    for member, (first, second) in enumerate(truss.members):
        cosines = (truss.joints[second] - truss.joints[first]) / truss.lengths[member]
        b[first * truss.dimensions : (first + 1) * truss.dimensions, member] = -cosines
        b[second * truss.dimensions : (second + 1) * truss.dimensions, member] = cosines
    return b[free]


def _free(truss: Truss, vectors: np.ndarray) -> np.ndarray:
    return vectors.reshape(truss.joints.size, -1)[_free_axes(truss)]


def _free_axes(truss: Truss) -> np.ndarray:
    free = np.ones(truss.joints.shape, dtype=bool)
    free[truss.supports.joint, np.abs(truss.supports.direction).argmax(axis=1)] = False
    return free.ravel()
