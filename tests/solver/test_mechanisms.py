"""Trusses that can move: never by the count of members, and each mechanism by its joints."""

from __future__ import annotations

import numpy as np
import pytest
from tests.solver.trusses import loads_only, panelled_girder

from strutbook import Supports, Truss, Unstable, analyse, describe_mechanism, stability

PIN_AND_ROLLER = ([0, 0, 4], [[1, 0], [0, 1], [0, 1]])


def named(truss: Truss, names: list[str] | None = None) -> list[tuple[str, str]]:
    names = names or [str(joint) for joint in range(len(truss.joints))]
    return [describe_mechanism(mechanism, truss, names) for mechanism in stability(truss).mechanisms]


def girder_names(panels: int) -> list[str]:
    return [f"{chord}{place}" for chord in "LU" for place in range(panels + 1)]


def test_panel_without_a_diagonal_is_named_with_both_diagonals():
    ((what, todo),) = named(panelled_girder(4, without_diagonal=(1,)), girder_names(4))
    assert what.endswith("move together; the panel L1-L2-U2-U1 has no diagonal")
    assert todo.startswith("Add a diagonal: L1-U2 or L2-U1. Holding joint ")


def test_two_mechanisms_are_named_apart():
    found = named(panelled_girder(7, without_diagonal=(1, 5)), girder_names(7))
    panels = sorted(what.partition("the panel ")[2] for what, _ in found)
    assert panels == ["L1-L2-U2-U1 has no diagonal", "L5-L6-U6-U5 has no diagonal"]


@pytest.mark.parametrize("panel", range(5))
def test_either_diagonal_or_the_support_that_is_named_stops_the_truss(panel):
    truss = panelled_girder(5, without_diagonal=(panel,))
    (mechanism,) = stability(truss).mechanisms
    for first, second in mechanism.braces:
        assert stability(Truss(truss.joints, [*truss.members.tolist(), [first, second]], truss.supports)).stable
    for joint, axis in mechanism.held:
        supports = Supports.rigid([*truss.supports.joint, joint], [*truss.supports.direction, np.eye(2)[axis]])
        assert stability(Truss(truss.joints, truss.members, supports)).stable


def test_count_that_suits_does_not_make_it_stable():
    """One panel with two diagonals, one with none: as many bars as degrees of freedom, and still it moves."""
    truss = panelled_girder(4, without_diagonal=(1,))
    crossed = Truss(truss.joints, [*truss.members.tolist(), [3, 7]], truss.supports)
    found = stability(crossed)
    assert found.bars == found.free
    assert found.indeterminacy == 1
    assert len(found.mechanisms) == 1


def test_symmetric_load_does_not_hide_a_mechanism():
    """A square without a diagonal on pins carries a load straight down its posts, and falls over all the same."""
    truss = Truss(
        [[0, 0], [4, 0], [0, 3], [4, 3]],
        [[0, 2], [1, 3], [2, 3]],
        Supports.rigid([0, 0, 1, 1], [[1, 0], [0, 1]] * 2),
    )
    loads = np.zeros((4, 2, 1))
    loads[2:, 1] = -1e3
    with pytest.raises(Unstable) as caught:
        analyse(truss, loads_only(truss, loads))
    assert caught.value.stability.mechanisms[0].joints == (2, 3)
    ((what, _),) = named(truss, list("ABCD"))
    assert what == "joints C and D move sideways together"


def test_truss_that_slides_on_its_rollers_is_told_so():
    truss = panelled_girder(4)
    sliding = Truss(truss.joints, truss.members, Supports.rigid([0, 4], [[0, 1], [0, 1]]))
    assert named(sliding) == [
        ("the whole truss moves sideways, and no support stops it", "Hold joint 0 sideways."),
    ]


def test_truss_on_one_pin_turns():
    truss = panelled_girder(4)
    ((what, todo),) = named(Truss(truss.joints, truss.members, Supports.rigid([0, 0], np.eye(2))))
    assert what == "the whole truss turns, and no support stops it"
    assert todo.startswith("Hold joint ")


def test_truss_without_supports_has_three_movements_as_one_body():
    truss = panelled_girder(3)
    loose = Truss(truss.joints, truss.members, Supports.rigid([], np.zeros((0, 2))))
    found = stability(loose).mechanisms
    assert [mechanism.rigid for mechanism in found] == [True] * 3


def test_space_truss_without_supports_has_six():
    joints = [[0, 0, 0], [3, 0, 0], [0, 3, 0], [0, 0, 3]]
    members = [[a, b] for b in range(4) for a in range(b)]
    loose = Truss(joints, members, Supports.rigid([], np.zeros((0, 3))))
    assert sum(mechanism.rigid for mechanism in stability(loose).mechanisms) == 6


def test_concurrent_reactions_let_it_turn_a_little():
    """Three rollers whose lines meet in one point: enough in number, and no hold against turning."""
    joints = [[-2, 0], [2, 0], [0, 2]]
    directions = [[1, 1], [-1, 1], [0, 1]]  # all towards (0, 2)
    truss = Truss(joints, [[0, 1], [1, 2], [0, 2]], Supports.rigid([0, 1, 2], directions))
    ((what, _),) = named(truss)
    assert what.startswith("the whole truss turns")


def test_loose_joint_beside_a_sliding_truss_is_named_apart():
    truss = panelled_girder(4)
    joints = np.vstack([truss.joints, [5.0, 2.0]])
    members = [*truss.members.tolist(), [9, 10]]
    found = stability(Truss(joints, members, Supports.rigid([0, 4], [[0, 1], [0, 1]]))).mechanisms
    assert [mechanism.rigid for mechanism in found] == [True, False]
    assert found[1].joints == (10,)


def test_joint_between_bars_in_one_line_stiffens_only_after_a_movement():
    truss = Truss([[0, 0], [3, 0], [6, 0]], [[0, 1], [1, 2]], Supports.rigid([0, 0, 2, 2], [[1, 0], [0, 1]] * 2))
    (mechanism,) = stability(truss).mechanisms
    assert mechanism.infinitesimal
    assert stability(truss).indeterminacy == 1


def test_four_bar_chain_moves_far():
    (mechanism,) = stability(panelled_girder(3, without_diagonal=(1,))).mechanisms
    assert not mechanism.infinitesimal


def test_joint_of_a_flat_roof_leaves_its_plane():
    """A space joint whose bars all lie in one plane has no hold across it."""
    joints = [[0, 0, 0], [4, 0, 0], [4, 4, 0], [0, 4, 0], [2, 2, 0]]
    held = np.repeat(range(4), 3)
    truss = Truss(joints, [[4, corner] for corner in range(4)], Supports.rigid(held, np.tile(np.eye(3), (4, 1))))
    ((what, todo),) = named(truss, list("ABCDE"))
    assert what == "joint E moves up and down: its bars are in one plane; it stiffens only after a movement"
    assert todo == "Hold joint E up and down."


def test_spring_holds_what_would_move():
    truss = panelled_girder(4)
    supports = Supports([0, 4, 4], [[0, 1], [0, 1], [1, 0]], [np.inf, np.inf, 1e5])
    sprung = Truss(truss.joints, truss.members, supports, truss.axial_rigidity)
    assert stability(sprung).stable


def test_badly_scaled_rigidities_neither_hide_nor_feign_a_mechanism():
    random = np.random.default_rng(1)
    for missing, count in (((), 0), ((2,), 1)):
        truss = panelled_girder(6, without_diagonal=missing)
        rigidity = 10.0 ** random.uniform(2, 12, len(truss.members))
        assert len(stability(Truss(truss.joints, truss.members, truss.supports, rigidity)).mechanisms) == count


def test_coordinates_typed_with_seven_digits_still_tell_a_mechanism():
    """Bars that are in line but for rounding of their coordinates."""
    slope = np.tan(np.radians(23.0))
    xs = np.array([0.0, 1.3, 3.1])
    joints = np.column_stack([xs, np.round(xs * slope, 7)])
    truss = Truss(joints, [[0, 1], [1, 2]], Supports.rigid([0, 0, 2, 2], [[1, 0], [0, 1]] * 2))
    assert len(stability(truss).mechanisms) == 1
