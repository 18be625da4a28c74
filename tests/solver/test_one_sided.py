"""Members that take tension or compression only."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from tests.solver.trusses import determinate_trusses, loads_only, panelled_girder, with_more_bars

from strutbook import Actions, SlackMechanism, Supports, Takes, Truss, analyse, analyse_one_sided


def crossed_panels(panels: int) -> tuple[Truss, np.ndarray]:
    """A girder with crossed rods in every panel, which take tension only."""
    girder = panelled_girder(panels)
    counters = [[i + 1, panels + 1 + i] for i in range(panels)]
    members = [*girder.members.tolist(), *counters]
    takes = np.zeros(len(members), dtype=int)
    takes[-2 * panels :] = Takes.TENSION
    return Truss(girder.joints, members, girder.supports, np.full(len(members), 1e8)), takes


def test_of_two_crossed_rods_one_goes_slack_as_the_load_turns():
    truss, takes = crossed_panels(4)
    loads = np.zeros((*truss.joints.shape, 2))
    loads[1:4, 1, 0] = -1e4
    loads[1:4, 1, 1] = 1e4
    found = analyse_one_sided(truss, loads_only(truss, loads), takes)
    assert (found.slack[-8:].sum(axis=0) == 4).all()
    assert (found.slack[-8:, 0] != found.slack[-8:, 1]).all()
    # What is left is determinate, so the method of sections gives the rod beside the support: shear times root 2.
    assert found.analysis.forces[-8:, 0].max() == pytest.approx(1.5e4 * np.sqrt(2))
    assert found.analysis.residual.max() <= 1e-9


def test_slack_members_carry_nothing_and_the_rest_is_the_truss_without_them():
    truss, takes = crossed_panels(5)
    loads = np.zeros((*truss.joints.shape, 1))
    loads[1:5, 1] = [[-3e3], [-9e3], [2e3], [-4e3]]
    found = analyse_one_sided(truss, loads_only(truss, loads), takes)
    kept = ~found.slack[:, 0]
    plain = analyse(
        Truss(truss.joints, truss.members[kept], truss.supports, truss.axial_rigidity[kept]),
        Actions(loads, np.zeros((kept.sum(), 1)), np.zeros((3, 1))),
    )
    assert not found.analysis.forces[~kept].any()
    assert found.analysis.forces[kept] == pytest.approx(plain.forces)
    assert found.analysis.displacements == pytest.approx(plain.displacements)


@settings(max_examples=60, deadline=None)
@given(determinate_trusses(), st.integers(0, 2**32 - 1))
def test_no_acting_member_is_loaded_the_wrong_way_and_no_slack_one_wants_to_act(truss, seed):
    random = np.random.default_rng(seed)
    redundant = with_more_bars(truss, 4, random)
    extra = len(redundant.members) - len(truss.members)
    takes = np.zeros(len(redundant.members), dtype=int)
    takes[len(takes) - extra :] = random.choice([Takes.TENSION, Takes.COMPRESSION], extra)
    actions = loads_only(redundant, random.uniform(-1e5, 1e5, (*truss.joints.shape, 3)))
    found = analyse_one_sided(redundant, actions, takes)
    forces = found.analysis.forces
    largest = np.abs(forces).max()
    assert (takes[:, np.newaxis] * forces >= -1e-8 * largest).all()
    ends = found.analysis.displacements[redundant.members]
    stretch = np.einsum("md,mdc->mc", redundant.direction_cosines, ends[:, 1] - ends[:, 0])
    wanting = np.where(found.slack, takes[:, np.newaxis] * stretch, 0.0)
    assert wanting.max() <= 1e-8 * np.abs(stretch).max()
    assert found.analysis.residual.max() <= 1e-9


def test_rod_alone_in_its_panel_goes_slack_and_the_truss_falls():
    girder = panelled_girder(3)
    takes = np.zeros(len(girder.members), dtype=int)
    takes[-3] = Takes.COMPRESSION
    loads = np.zeros((*girder.joints.shape, 2))
    loads[1, 1, 0], loads[1, 1, 1] = 1e3, -1e3
    with pytest.raises(SlackMechanism) as caught:
        analyse_one_sided(girder, loads_only(girder, loads), takes)
    signs = np.sign(analyse(girder, loads_only(girder, loads)).forces[-3])
    assert caught.value.combination == int(np.flatnonzero(signs > 0)[0])
    assert caught.value.slack.tolist() == [len(girder.members) - 3]
    assert len(caught.value.stability.mechanisms) == 1


def test_a_prop_that_is_too_short_acts_only_once_the_gap_is_closed():
    """A cantilever of two bars, its tip above a prop with a gap of 1 mm."""
    truss = Truss(
        [[0, 0], [0, 1], [1, 0], [1, -1]],
        [[0, 2], [1, 2], [2, 3]],
        Supports.rigid([0, 0, 1, 1, 3, 3], [[1, 0], [0, 1]] * 3),
        [1e7, 1e7, 1e7],
    )
    loads = np.zeros((4, 2, 2))
    loads[2, 1] = [-1e3, -1e4]
    gap = np.array([[0.0, 0.0], [0.0, 0.0], [-1e-3, -1e-3]])
    found = analyse_one_sided(truss, Actions(loads, gap, np.zeros((6, 2))), [0, 0, Takes.COMPRESSION])
    assert found.slack[2].tolist() == [True, False]
    alone = found.analysis.displacements[2, 1]
    assert alone[0] > -1e-3 > alone[1]


def test_with_nothing_one_sided_it_is_the_ordinary_analysis():
    girder = panelled_girder(4)
    loads = np.zeros((*girder.joints.shape, 1))
    loads[2, 1] = -5e3
    actions = loads_only(girder, loads)
    found = analyse_one_sided(girder, actions, np.zeros(len(girder.members), dtype=int), factors=[[1.5]])
    assert found.analysis.forces == pytest.approx(1.5 * analyse(girder, actions).forces)
    assert not found.slack.any()
