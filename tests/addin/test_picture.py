"""The numbers behind the charts on the sheet Picture."""

from __future__ import annotations

import re

import numpy as np
import pytest

from strutbook_addin.picture import (
    AREAS,
    DATA_FIRST_ROW,
    DEFLECTED_CELL,
    FORCES_CELL,
    FRAME,
    MEMBERS_DRAWN,
    ROOM_CELL,
    Line,
    picture_values,
)

#: A triangle 4 wide and 3 high on a pin (joint 0) and a roller (joint 1).
TRIANGLE = np.array([[0.0, 0.0], [4.0, 0.0], [2.0, 3.0]])
ENDS = np.array([[0, 1], [0, 2], [1, 2]])
SUPPORTS = {
    "support_joints": np.array([0, 0, 1]),
    "support_directions": np.array([[1.0, 0.0], [0.0, 1.0], [0.0, 1.0]]),
}
MOVED = np.array([[0.0, 0.0], [0.001, 0.0], [0.0005, -0.002]])


def points(blocks, line):
    """Rows of the pair of columns of a line; empty when nothing is written there."""
    found = [block for block in blocks if (block.row, block.column) == (DATA_FIRST_ROW, line.column)]
    return found[0].values if found else []


def sentence(blocks, cell):
    return next((block.values[0][0] for block in blocks if (block.row, block.column) == cell), "")


def drawn(blocks, line):
    """Segments of a line as unordered pairs of points."""
    rows = points(blocks, line)
    return {frozenset(map(tuple, rows[place : place + 2])) for place in range(0, len(rows), 3)}


def test_members_are_told_apart_by_the_sign_of_their_force():
    blocks = picture_values(TRIANGLE, ENDS, **SUPPORTS, forces=np.array([5.0, -3.0, 0.0]), forces_in="ULS1")
    corners = points(blocks, Line.JOINTS)
    assert drawn(blocks, Line.TENSION) == {frozenset(map(tuple, (corners[0], corners[1])))}
    assert drawn(blocks, Line.COMPRESSION) == {frozenset(map(tuple, (corners[0], corners[2])))}
    assert drawn(blocks, Line.NO_FORCE) == {frozenset(map(tuple, (corners[1], corners[2])))}
    assert points(blocks, Line.NOT_SOLVED) == []
    assert sentence(blocks, FORCES_CELL) == "Members by the sign of their force in the combination ULS1."


def test_unsolved_truss_is_drawn_as_such():
    blocks = picture_values(TRIANGLE, ENDS, **SUPPORTS)
    assert len(drawn(blocks, Line.NOT_SOLVED)) == 3
    for line in (Line.TENSION, Line.COMPRESSION, Line.NO_FORCE, Line.DEFLECTED):
        assert points(blocks, line) == []
    assert sentence(blocks, FORCES_CELL).startswith("Not solved")


def test_lines_break_after_each_member_and_never_go_on_from_the_same_point():
    chord = np.array([[float(x), 0.0] for x in range(5)])
    ends = np.array([[joint, joint + 1] for joint in range(4)])
    rows = points(picture_values(chord, ends, **SUPPORTS), Line.NOT_SOLVED)
    assert rows[2::3] == [[None, None]] * 3
    assert len(rows) == 11
    for end, start in zip(rows[1::3], rows[3::3], strict=False):
        assert end != start


@pytest.mark.parametrize("stretch", [(1.0, 1.0), (30.0, 1.0), (1.0, 30.0)])
def test_both_directions_have_the_same_scale_and_all_fits_the_frame(stretch):
    coordinates = TRIANGLE * stretch + 1000.0
    corners = np.array(points(picture_values(coordinates, ENDS, **SUPPORTS), Line.JOINTS))
    scale = np.ptp(corners, axis=0) / np.ptp(coordinates, axis=0)
    # Written numbers are rounded to a thousandth of the frame's unit.
    assert scale[0] == pytest.approx(scale[1], rel=2e-3)
    assert (corners > 0).all()
    assert (corners < FRAME).all()


def test_straight_line_of_members_is_drawn_in_the_middle():
    bar = np.array([[0.0, 7.0], [3.0, 7.0]])
    corners = points(picture_values(bar, ENDS[:1], **SUPPORTS), Line.JOINTS)
    assert [y for _, y in corners] == [FRAME[1] / 2] * 2


def test_displacements_are_drawn_a_round_number_of_times():
    blocks = picture_values(TRIANGLE, ENDS, **SUPPORTS, displacements=MOVED, displaced_in="SLS1")
    words = re.fullmatch(
        r"Deflected shape in the combination SLS1; displacements drawn ([\d.]+) times\.",
        sentence(blocks, DEFLECTED_CELL),
    )
    assert words is not None
    times = float(words[1])
    assert f"{times:e}"[0] in "125"
    before, after = (drawn(blocks, line) for line in (Line.UNLOADED, Line.DEFLECTED))
    top = max(y for segment in before for _, y in segment)
    lowered = max(y for segment in after for _, y in segment)
    corners = points(blocks, Line.JOINTS)
    scale = (corners[1][0] - corners[0][0]) / 4.0
    assert top - lowered == pytest.approx(0.002 * times * scale, abs=2e-3)


@pytest.mark.parametrize("size", [1e-9, 1e-3, 0.7, 50.0])
def test_drawn_displacements_stay_visible_and_inside_the_frame(size):
    blocks = picture_values(TRIANGLE, ENDS, **SUPPORTS, displacements=MOVED / 0.002 * size, displaced_in="S")
    moved = np.array([point for segment in drawn(blocks, Line.DEFLECTED) for point in segment])
    still = np.array([point for segment in drawn(blocks, Line.UNLOADED) for point in segment])
    assert (moved > 0).all()
    assert (moved < FRAME).all()
    assert still[:, 1].max() - moved[:, 1].max() > 1.0


def test_no_displacement_draws_no_deflected_shape():
    blocks = picture_values(TRIANGLE, ENDS, **SUPPORTS, displacements=np.zeros((3, 2)), displaced_in="S")
    assert points(blocks, Line.DEFLECTED) == []
    assert sentence(blocks, DEFLECTED_CELL) == "No displacements are drawn."


def test_pins_and_rollers_have_different_signs_below_their_joints():
    blocks = picture_values(TRIANGLE, ENDS, **SUPPORTS)
    corners = points(blocks, Line.JOINTS)
    (pin,), (roller,) = points(blocks, Line.HELD_FULLY), points(blocks, Line.HELD_PARTLY)
    assert (pin[0], roller[0]) == (corners[0][0], corners[1][0])
    assert pin[1] < corners[0][1]


def test_two_rows_that_hold_one_direction_are_no_pin():
    blocks = picture_values(
        TRIANGLE,
        ENDS,
        support_joints=np.array([0, 0]),
        support_directions=np.array([[0.0, 1.0], [0.0, -1.0]]),
    )
    assert points(blocks, Line.HELD_FULLY) == []
    assert len(points(blocks, Line.HELD_PARTLY)) == 1


def test_corners_of_a_cube_do_not_hide_each_other():
    cube = np.array([[x, y, z] for x in (0.0, 1.0) for y in (0.0, 1.0) for z in (0.0, 1.0)])
    ends = np.array([[a, b] for a in range(8) for b in range(a)])
    corners = np.array(
        points(
            picture_values(cube, ends, support_joints=np.array([0]), support_directions=np.array([[0.0, 0.0, 1.0]])),
            Line.JOINTS,
        )
    )
    between = np.linalg.norm(corners[:, None] - corners[None], axis=2) + 100 * np.eye(8)
    assert between.min() > 2.0
    # z is up: of two corners one above the other, the upper one is drawn straight above.
    assert (corners[1::2, 1] > corners[::2, 1]).all()
    assert corners[1::2, 0] == pytest.approx(corners[::2, 0])


def test_what_has_no_room_is_left_out_and_said():
    count = MEMBERS_DRAWN + 200
    chord = np.array([[float(x), 0.0] for x in range(count + 1)])
    ends = np.array([[joint, joint + 1] for joint in range(count)])
    blocks = picture_values(chord, ends, **SUPPORTS, forces=np.ones(count), forces_in="U", displacements=chord * 1e-3)
    assert sentence(blocks, ROOM_CELL) == f"Only the first {MEMBERS_DRAWN} of {count} members are drawn."
    assert len(drawn(blocks, Line.TENSION)) == MEMBERS_DRAWN
    for block in blocks:
        areas = [
            area
            for area in AREAS
            if area.row <= block.row
            and block.row + len(block.values) <= area.row + area.rows
            and area.column <= block.column
            and block.column + len(block.values[0]) <= area.column + area.columns
        ]
        assert areas, f"rows {block.row} and on are not cleared before the next run"
