"""Shapes stand, and plane ones are statically determinate, by the rank of their equilibrium matrix."""

from __future__ import annotations

import numpy as np
import pytest

import strutbook
from strutbook_templates.demonstration import demonstration_truss
from strutbook_templates.plane_shapes import howe, k_truss, pratt, warren, warren_with_verticals
from strutbook_templates.roof_shapes import fink
from strutbook_templates.tower_shapes import square_tower

GIRDERS = [pratt, howe, warren, warren_with_verticals, k_truss]
SYMMETRICAL = [pratt, howe, warren_with_verticals, k_truss]


def stability(truss):
    joints, directions = truss.held
    supports = strutbook.Supports.rigid(joints, directions)
    return strutbook.stability(strutbook.Truss(truss.coordinates, truss.ends, supports))


@pytest.mark.parametrize("shape", GIRDERS)
@pytest.mark.parametrize("panels", [4, 6, 8, 14, 40])
def test_girder_is_determinate(shape, panels):
    found = stability(shape(24.0, panels, 3.0))
    assert found.stable
    assert found.indeterminacy == 0


@pytest.mark.parametrize("panels", [2, 3, 5, 7, 8])
def test_warren_takes_odd_panels(panels):
    found = stability(warren(24.0, panels, 3.0))
    assert found.stable
    assert found.indeterminacy == 0


@pytest.mark.parametrize("panels", [4, 8, 16])
@pytest.mark.parametrize("rise", [1.0, 4.0, 7.9])
def test_fink_is_determinate(panels, rise):
    found = stability(fink(16.0, panels, rise))
    assert found.stable
    assert found.indeterminacy == 0


@pytest.mark.parametrize("bays", [1, 2, 6, 15])
@pytest.mark.parametrize("top", [2.0, 4.0])
def test_tower_stands_with_one_spare_brace_a_level(bays, top):
    found = stability(square_tower(24.0, bays, 4.0, top))
    assert found.stable
    assert found.indeterminacy == bays


def test_demonstration_stands_with_eight_spare_diagonals():
    truss = demonstration_truss()
    assert len(truss.members) == 53
    assert truss.dimension == 2
    found = stability(truss)
    assert found.stable
    assert found.indeterminacy == 8


@pytest.mark.parametrize("shape", SYMMETRICAL)
def test_odd_panels_of_a_symmetrical_shape_are_refused(shape):
    with pytest.raises(ValueError, match=r"panels is 7.*give an even number of panels such as 8\."):
        shape(24.0, 7, 3.0)


@pytest.mark.parametrize("panels", [5, 6, 12])
def test_fink_panels_that_do_not_halve_are_refused(panels):
    with pytest.raises(ValueError, match=rf"panels is {panels}.*give 4, 8 or 16\."):
        fink(16.0, panels, 4.0)


def test_fink_steeper_than_its_webs_allow_is_refused():
    with pytest.raises(ValueError, match="give a rise below half the span"):
        fink(16.0, 8, 8.0)


@pytest.mark.parametrize("panels", [4, 8, 16])
def test_fink_struts_stand_square_on_the_rafters(panels):
    truss = fink(16.0, panels, 4.0)
    struts = [bar for bar in truss.members if bar.group == "strut"]
    assert len(struts) == panels - 2
    for bar in struts:
        along = np.subtract(truss.joints[bar.end], truss.joints[bar.start])
        rafter = np.array([8.0, 4.0 if truss.joints[bar.start][0] < 8.0 else -4.0])
        assert along @ rafter == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize(("shape", "sign"), [(pratt, 1.0), (howe, -1.0)])
def test_diagonals_under_load_from_above(shape, sign):
    """Pratt diagonals pull, Howe diagonals push."""
    truss = shape(24.0, 8, 3.0)
    matrix = np.zeros((2 * len(truss.joints), len(truss.members)))
    along = truss.coordinates[truss.ends[:, 1]] - truss.coordinates[truss.ends[:, 0]]
    along /= np.linalg.norm(along, axis=1)[:, None]
    for member, (start, end) in enumerate(truss.ends):
        matrix[2 * start : 2 * start + 2, member] = along[member]
        matrix[2 * end : 2 * end + 2, member] = -along[member]
    free = [row for row in range(len(matrix)) if row not in (0, 1, 2 * list(truss.joints).index("L8") + 1)]
    load = np.zeros(len(matrix))
    load[[2 * list(truss.joints).index(name) + 1 for name in truss.shares]] = -1.0
    forces = np.linalg.solve(matrix[free], -load[free])
    diagonals = [force for bar, force in zip(truss.members, forces, strict=True) if bar.group == "diagonal"]
    assert len(diagonals) == 6
    assert all(sign * force > 0 for force in diagonals)


@pytest.mark.parametrize(
    "truss",
    [*(shape(24.0, 8, 3.0) for shape in GIRDERS), fink(24.0, 8, 3.0)],
    ids=["pratt", "howe", "warren", "warren with verticals", "k", "fink"],
)
def test_plane_shape_is_drawn_as_asked(truss):
    assert np.ptp(truss.coordinates, axis=0) == pytest.approx((24.0, 3.0))
    # Every metre of the load goes to some joint, and joints and members have names of their own.
    assert sum(truss.shares.values()) == pytest.approx(24.0)
    assert len({bar.name for bar in truss.members}) == len(truss.members)
    assert truss.supports == {"L0": "x y", "L8" if "L8" in truss.joints else "L5": "y"}


def test_tower_tapers_about_its_middle():
    tower = square_tower(24.0, 6, 4.0, 2.0)
    assert tower.joints["A0"] == (0.0, 0.0, 0.0)
    assert tower.joints["C6"] == pytest.approx((3.0, 3.0, 24.0))
    assert sum(tower.shares.values()) == pytest.approx(24.0 - 24.0 / 6 / 2)
    assert set(tower.supports.values()) == {"x y z"}
