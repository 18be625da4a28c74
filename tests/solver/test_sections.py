"""Sections: formulas against numerical integration of the outline, and forgiving designations."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from strutbook.sections import Product, Section, Shape, UnknownSection, families, section
from strutbook.sections.outline import corner, quarter_disc, rectangle

MM = 1e-3


def integrated(inside, left, bottom, right, top, steps=2000):
    """Area and second moments of a figure, counted cell by cell."""
    y = np.linspace(left, right, steps + 1)
    z = np.linspace(bottom, top, steps + 1)
    y, z = (y[:-1] + y[1:]) / 2, (z[:-1] + z[1:]) / 2
    grid_y, grid_z = np.meshgrid(y, z)
    weight = inside(grid_y, grid_z) * (right - left) * (top - bottom) / steps**2
    area = weight.sum()
    mean_y, mean_z = (grid_y * weight).sum() / area, (grid_z * weight).sum() / area
    about_y = ((grid_z - mean_z) ** 2 * weight).sum()
    about_z = ((grid_y - mean_y) ** 2 * weight).sum()
    product = ((grid_y - mean_y) * (grid_z - mean_z) * weight).sum()
    weakest = (about_y + about_z) / 2 - np.hypot((about_y - about_z) / 2, product)
    return area, about_y, about_z, weakest


def rounded(y, z, width, height, radius):
    """Inside of a rectangle about the origin with rounded corners."""
    over_y, over_z = np.abs(y) - (width / 2 - radius), np.abs(z) - (height / 2 - radius)
    in_corner = (over_y > 0) & (over_z > 0)
    within = (np.abs(y) <= width / 2) & (np.abs(z) <= height / 2)
    return within & (~in_corner | (over_y**2 + over_z**2 <= radius**2))


def box_outline(y, z):
    """RHS 120x80x6.3 hot finished: outer radius 1.5 t, inner 1.0 t."""
    t = 6.3
    return rounded(y, z, 80, 120, 1.5 * t) & ~rounded(y, z, 80 - 2 * t, 120 - 2 * t, t)


def i_outline(y, z):
    """IPE 200."""
    h, b, web, flange, r = 200, 100, 5.6, 8.5, 12
    y, z = np.abs(y), np.abs(z)
    fillet = (y < web / 2 + r) & (z > h / 2 - flange - r)
    fillet &= (y - web / 2 - r) ** 2 + (z - h / 2 + flange + r) ** 2 >= r**2
    return (z <= h / 2) & (y <= b / 2) & ((z >= h / 2 - flange) | (y <= web / 2) | fillet)


def angle_outline(y, z):
    """L 100x65x8 from EN 10056-1: root radius 10 mm, toes 5 mm."""
    leg, short, t, root, toe = 100, 65, 8, 10, 5
    legs = ((y <= t) & (z <= leg)) | ((z <= t) & (y <= short))
    fillet = (y < t + root) & (z < t + root) & ((y - t - root) ** 2 + (z - t - root) ** 2 >= root**2)
    tip = (y > t - toe) & (z > leg - toe) & ((y - t + toe) ** 2 + (z - leg + toe) ** 2 > toe**2)
    tip |= (z > t - toe) & (y > short - toe) & ((z - t + toe) ** 2 + (y - short + toe) ** 2 > toe**2)
    return (legs | fillet) & ~tip & (y <= short) & (z <= leg)


def channel_outline(y, z):
    """UPE 200."""
    h, b, web, flange, r = 200, 80, 6, 11, 13
    z = np.abs(z)
    fillet = (y < web + r) & (z > h / 2 - flange - r)
    fillet &= (y - web - r) ** 2 + (z - h / 2 + flange + r) ** 2 >= r**2
    return (z <= h / 2) & (y <= b) & ((z >= h / 2 - flange) | (y <= web) | fillet)


@pytest.mark.parametrize(
    ("designation", "outline", "frame"),
    [
        ("RHS 120x80x6.3", box_outline, (-40, -60, 40, 60)),
        ("IPE 200", i_outline, (-50, -100, 50, 100)),
        ("L 100x65x8", angle_outline, (0, 0, 65, 100)),
        ("UPE 200", channel_outline, (0, -100, 80, 100)),
    ],
)
def test_properties_equal_the_integrated_outline(designation, outline, frame):
    found = section(designation)
    area, about_y, about_z, weakest = integrated(outline, *frame)
    assert found.area / MM**2 == pytest.approx(area, rel=2e-3)
    assert found.second_moment_y / MM**4 == pytest.approx(about_y, rel=3e-3)
    assert found.second_moment_z / MM**4 == pytest.approx(about_z, rel=3e-3)
    assert found.second_moment_min / MM**4 == pytest.approx(weakest, rel=3e-3)


def test_a_square_is_its_four_quarters_and_corners():
    whole = rectangle(-1, -1, 1, 1)
    parts = sum(
        (
            quarter_disc(0, 0, 1, side_y, side_z) + corner(side_y, side_z, 1, -side_y, -side_z)
            for side_y in (-1, 1)
            for side_z in (-1, 1)
        ),
        start=rectangle(0, 0, 0, 0),
    )
    for name in ("area", "moment_y", "square_y", "square_z", "product"):
        assert getattr(parts, name) == pytest.approx(getattr(whole, name), abs=1e-12)


@given(st.floats(20, 300), st.floats(0.02, 0.2), st.floats(1.1, 4))
def test_properties_scale_with_the_powers_of_length(size, wall, scale):
    small, large = (section(f"SHS {side:.6f}x{side:.6f}x{side * wall:.6f}") for side in (size, size * scale))
    assert large.area == pytest.approx(small.area * scale**2, rel=1e-4)
    assert large.second_moment_y == pytest.approx(small.second_moment_y * scale**4, rel=1e-4)


@pytest.mark.parametrize("family", families())
def test_standard_sizes_are_sections_with_sensible_properties(family):
    names = families()[family]
    found = [section(name) for name in names]
    assert [one.area for one in found] == sorted(one.area for one in found)
    for one in found:
        assert 0 < one.second_moment_min <= min(one.second_moment_y, one.second_moment_z) * (1 + 1e-9)
        assert one.mass == pytest.approx(7850 * one.area, rel=0.08)
        assert one.torsion_constant > 0


def test_thin_and_thick_formulas_meet_for_a_tube():
    """A long way round a thin tube: A = pi d t, I = A d^2 / 8, J = 2 I."""
    tube = section("CHS 1000x1")
    assert tube.area == pytest.approx(np.pi * 0.999 * 0.001, rel=1e-9)
    assert tube.second_moment_y == pytest.approx(tube.area * 0.999**2 / 8, rel=1e-5)
    assert tube.torsion_constant == 2 * tube.second_moment_y


def test_two_angles_are_two_halves_by_the_parallel_axis_theorem():
    half, pair = section("L 75x50x8"), section("2L 75x50x8 gap 10")
    across = half.dimensions["centroid_y"] + 5 * MM
    assert pair.area == pytest.approx(2 * half.area)
    assert pair.second_moment_y == pytest.approx(2 * half.second_moment_y)
    assert pair.second_moment_z == pytest.approx(2 * (half.second_moment_z + half.area * across**2))
    short = section("2L 75x50x8 SLBB gap 10")
    assert short.second_moment_y == pytest.approx(2 * half.second_moment_z)


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("CHS 88.9x4", "chs88.9 X 4"),
        ("SHS 80x80x5", "SHS 80 × 5"),
        ("RHS 120x80x6", "rhs 120*80*6"),
        ("L 60x60x6", "l60x6"),
        ("2L 60x60x6 gap 8", "2l 60x60x6  GAP 8"),
        ("HEB 160", "HE 160 B"),
        ("HSS 4x4x1/4", "hss 4 x 4 x 0.25"),
        ("L 4x3-1/2x1/2", "L 4x3 1/2x.5"),
        ("Pipe 4 STD", "pipe 4"),
        ("TIM 75x200", "tim 75 x 200"),
    ],
)
def test_designations_are_read_forgivingly(one, other):
    first, second = section(one), section(other)
    assert (first.area, first.second_moment_y) == (second.area, second.second_moment_y)


def test_cold_formed_sections_have_larger_corners_than_hot_finished():
    hot, cold = section("SHS 100x100x5"), section("SHS 100x100x5 CF")
    assert (hot.product, cold.product) == (Product.HOT_FINISHED, Product.COLD_FORMED)
    assert cold.area < hot.area
    assert 0.01 < 1 - cold.second_moment_y / hot.second_moment_y < 0.06


@pytest.mark.parametrize(
    ("designation", "sentence"),
    [
        ("CHS 88.9x45", "expected a wall of less than half the diameter"),
        ("SHS 80x0", "make no section"),
        ("L 60x60x70", "expected legs longer than their thickness"),
        ("CHS 88.9", "has 1 sizes; expected the form CHS 88.9x4"),
        ("SHS 80x5 galvanised", "what stands behind the sizes"),
        ("FL 80x10 black", "what stands behind the sizes"),
        ("IPA 200", "Did you mean IPE 200?"),
        ("", "is no designation that is known"),
    ],
)
def test_what_is_no_section_gets_a_sentence(designation, sentence):
    with pytest.raises(UnknownSection, match=sentence.replace("?", r"\?").replace(".", r"\.")):
        section(designation)


def test_shapes_are_told_apart():
    shapes = {
        "CHS 88.9x4": Shape.CIRCULAR_HOLLOW,
        "HSS 6.625x0.280": Shape.CIRCULAR_HOLLOW,
        "W 14x74": Shape.I_SECTION,
        "WT 4x15.5": Shape.TEE,
        "RD 20": Shape.ROUND,
        "GL 140x360": Shape.TIMBER,
    }
    for designation, shape in shapes.items():
        found: Section = section(designation)
        assert found.shape is shape
