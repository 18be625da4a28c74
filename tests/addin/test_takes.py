"""Members that take one kind of force only, through the workbook."""

import pytest


@pytest.fixture
def braced_frame():
    """A square on pins braced by two crossed rods, pushed from either side."""
    return {
        "Joints": [["Joint", "x [m]", "y [m]"], ["A", 0, 0], ["B", 3, 0], ["C", 0, 3], ["D", 3, 3]],
        "Members": [
            ["Member", "From", "To", "Area [mm2]", "E [kN/mm2]", "Takes"],
            ["AC", "A", "C", 500, 200, None],
            ["BD", "B", "D", 500, 200, "both"],
            ["CD", "C", "D", 500, 200, None],
            ["AD", "A", "D", 500, 200, "tension"],
            ["BC", "B", "C", 500, 200, "tension"],
        ],
        "Supports": [["Joint", "Holds"], ["A", "x y"], ["B", "x y"]],
        "Loads": [["Case", "Joint", "Fx [kN]"], ["right", "C", 6], ["left", "D", -6]],
    }


def test_each_rod_acts_in_its_own_direction(braced_frame, make_book):
    book = make_book(braced_frame)
    assert book.solve().exit_status == 0
    right, left = (book.column("Forces", "Member", f"{case} [kN]") for case in ("right", "left"))
    assert (right["AD"], right["BC"]) == (pytest.approx(6 * 2**0.5), 0)
    assert (left["AD"], left["BC"]) == (0, pytest.approx(6 * 2**0.5))
    (note,) = [finding for finding in book.findings("note") if finding.header == "Takes"]
    assert "2 members go slack" in note.what


def test_rod_that_would_have_to_push_brings_the_frame_down_and_is_named(braced_frame, make_book):
    del braced_frame["Members"][-1]
    book = make_book(braced_frame)
    assert book.solve().exit_status == 2
    (stop,) = book.findings("stop")
    assert stop.where == "Members!F5"
    assert "in the combination left the member AD goes slack, and then the truss can move" in stop.what
    assert "C and D move sideways together" in stop.what


def test_unknown_word_is_told_the_choices(braced_frame, make_book):
    braced_frame["Members"][4][5] = "pull"
    book = make_book(braced_frame)
    assert book.solve().exit_status == 2
    assert book.findings("stop")[0].sentence == (
        "stop: Members!F5 (Takes): expected one of: both, tension, compression, found the text 'pull'. "
        "Choose one of them."
    )
