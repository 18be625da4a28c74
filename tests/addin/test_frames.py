"""Results as frames."""

import pytest

from strutbook_addin import frames


def test_frames_carry_names_and_si_units(triangle, make_book):
    results = make_book(triangle).solve().outcome.results
    assert frames.forces(results).loc["BC", "Loads"] == pytest.approx(-12_500)
    assert frames.reactions(results).loc[("B", "y"), "Loads"] == pytest.approx(7_500)
    assert frames.displacements(results).loc[("B", "x"), "Loads"] == pytest.approx(1e-3)


def test_statics_alone_gives_no_frame_of_displacements(triangle, make_book):
    triangle["Members"] = [row[:3] for row in triangle["Members"]]
    results = make_book(triangle).solve().outcome.results
    assert frames.displacements(results) is None
