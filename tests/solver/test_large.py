"""Large trusses take the sparse route: the same numbers, the same mechanisms, no false alarm."""

from __future__ import annotations

import numpy as np
import pytest
from tests.solver.trusses import loads_only, panelled_girder, random_actions, square_grid

from strutbook import Supports, Truss, analyse, describe_mechanism, stability
from strutbook.equilibrium import equilibrium
from strutbook.null_space import null_space_by_singular_values
from strutbook.systems import DENSE_LIMIT, is_large


def rotated(truss: Truss, degrees: float) -> Truss:
    angle = np.radians(degrees)
    turn = np.array([[np.cos(angle), -np.sin(angle)], [np.sin(angle), np.cos(angle)]])
    supports = Supports.rigid(truss.supports.joint, truss.supports.direction @ turn.T)
    return Truss(truss.joints @ turn.T, truss.members, supports, truss.axial_rigidity)


@pytest.mark.parametrize("degrees", [0.0, 17.0])
def test_sparse_and_dense_routes_agree(degrees):
    truss = rotated(square_grid(29), degrees)
    assert is_large(truss)
    actions = random_actions(truss, 2, np.random.default_rng(3))
    analysis = analyse(truss, actions)
    b = equilibrium(truss)
    dense, rigidity = b.dense(), b.bar_stiffness()[:, np.newaxis]
    imposed = b.ground_elongations(actions.settlement) - actions.free_elongation
    loads = b.rows_of_vectors(actions.joint_loads) - dense @ (rigidity * imposed)
    movement = np.linalg.solve((dense * rigidity[:, 0]) @ dense.T, loads)
    forces = rigidity * (dense.T @ movement + imposed)
    assert analysis.forces == pytest.approx(forces, abs=1e-8 * np.abs(forces).max())
    assert analysis.residual.max() <= 1e-9


def test_large_determinate_girder_balances_by_statics():
    girder = panelled_girder(1200)
    truss = Truss(girder.joints, girder.members, girder.supports)
    assert is_large(truss)
    loads = np.zeros((*truss.joints.shape, 1))
    loads[:1201, 1] = -1e3
    analysis = analyse(truss, loads_only(truss, loads))
    assert analysis.residual.max() <= 1e-9
    # Moment at mid span over the depth of 1 m; the chord force there follows by the method of sections.
    assert np.abs(analysis.forces).max() == pytest.approx(1e3 * 1200**2 / 8, rel=2e-3)


def test_slender_girder_of_many_panels_is_no_mechanism():
    for panels in (700, 2000, 10_000):
        assert stability(panelled_girder(panels)).stable


@pytest.mark.parametrize("missing", [(400,), (100, 800), (3, 500, 996)])
def test_mechanisms_of_a_large_girder_are_found_at_their_panels(missing):
    truss = panelled_girder(1000, without_diagonal=missing)
    assert is_large(truss)
    names = [f"{chord}{place}" for chord in "LU" for place in range(1001)]
    found = [describe_mechanism(mechanism, truss, names)[0] for mechanism in stability(truss).mechanisms]
    panels = sorted(what.partition("the panel ")[2] for what in found)
    assert panels == sorted(f"L{p}-L{p + 1}-U{p + 1}-U{p} has no diagonal" for p in missing)


def test_mechanisms_between_the_limits_are_those_of_the_singular_values():
    truss = panelled_girder(300, without_diagonal=(150,))
    b = equilibrium(truss)
    assert 500 < b.free <= DENSE_LIMIT
    basis, _ = null_space_by_singular_values(b.dense())
    assert basis.shape[1] == len(stability(truss).mechanisms) == 1


def test_more_mechanisms_than_the_first_block_are_all_found():
    missing = tuple(range(50, 950, 100))
    truss = panelled_girder(1000, without_diagonal=missing)
    assert len(stability(truss).mechanisms) == len(missing)
