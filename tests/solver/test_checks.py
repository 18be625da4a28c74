"""Standards: laws that every clause keeps, and clauses line by line."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from strutbook.checks import aisc360, en1993, en1995, nds, working_stress
from strutbook.checks.buckling import euler_load, twisting_load
from strutbook.checks.capacity import Capacities, MembersToCheck
from strutbook.checks.registry import STANDARDS, UnknownStandard, standard
from strutbook.materials import UnknownMaterial, material
from strutbook.sections import families, section

STEEL = ["CHS 88.9x5", "SHS 100x5", "RHS 120x80x5", "IPE 200", "HEB 200", "UPE 200", "2L 80x80x8 gap 10", "RD 30"]


def checked(name: str, designations: list[str], grade: str, lengths: list[float]) -> Capacities:
    """Capacities of a section at each of some lengths, by the name of a standard."""
    sections = tuple(section(designation) for designation in designations)
    count = len(designations)
    length = np.array(lengths)
    members = MembersToCheck(sections, np.arange(count), length, length, np.full(count, np.nan), np.full(count, np.nan))
    return standard(name).check(members, (material(grade),), np.zeros(count, dtype=int))


STEEL_STANDARDS = [name for name in STANDARDS if name.startswith(("AISC", "EN 1993", "Working"))]


@pytest.mark.parametrize("name", STEEL_STANDARDS)
@pytest.mark.parametrize("designation", STEEL)
def test_compression_falls_with_length_and_never_exceeds_the_squash_load_or_euler(name, designation):
    lengths = np.linspace(0.3, 9, 40)
    found = checked(name, [designation] * 40, "S355", lengths.tolist())
    capacity = found.compression[:, 0]
    known = ~np.isnan(capacity)
    assert known.any()
    assert (np.diff(capacity[known]) <= 1e-9 * capacity[known][:-1]).all()
    one = section(designation)
    assert (capacity[known] <= 355e6 * one.area * (1 + 1e-9)).all()
    euler = euler_load(np.array(210e9), np.array(one.second_moment_min), lengths)
    assert (capacity[known] <= euler[known] * (1 + 1e-9)).all()


@pytest.mark.parametrize("name", STEEL_STANDARDS)
def test_stronger_steel_is_never_weaker(name):
    lengths = [1.0, 2.0, 3.0, 5.0]
    weak, strong = (checked(name, ["SHS 100x5"] * 4, grade, lengths) for grade in ("S235", "S355"))
    assert (strong.tension >= weak.tension).all()
    assert (strong.compression >= weak.compression * (1 - 1e-9)).all()


@given(st.floats(0.0, 5.0), st.sampled_from(list(en1993.IMPERFECTION)))
def test_chi_lies_between_nothing_and_one_and_has_no_step(slenderness, curve):
    imperfection = np.array(en1993.IMPERFECTION[curve])
    near = np.array([slenderness, slenderness + 1e-6])
    chi = en1993.reduction_factor(near, imperfection)
    assert (chi > 0).all()
    assert (chi <= 1).all()
    assert abs(chi[1] - chi[0]) < 1e-5


def test_curves_of_en_1993_stand_in_their_order():
    for slenderness in (0.3, 0.8, 1.5, 3.0):
        chi = [float(en1993.reduction_factor(np.array(slenderness), np.array(a))) for a in en1993.IMPERFECTION.values()]
        assert chi == sorted(chi, reverse=True)


def test_the_column_curve_of_aisc_has_no_step_where_it_changes():
    f_y = np.array(345e6)
    below, above = (aisc360.critical_stress(f_y, f_y / ratio) for ratio in (2.25 - 1e-9, 2.25 + 1e-9))
    assert float(below) == pytest.approx(float(above), rel=2e-3)


def test_lrfd_over_asd_is_phi_times_omega():
    lrfd, asd = (checked(f"AISC 360-22 {method}", STEEL, "A992", [2.0] * len(STEEL)) for method in ("LRFD", "ASD"))
    assert lrfd.tension / asd.tension == pytest.approx(0.9 * 1.67)
    known = ~np.isnan(asd.compression)
    assert (lrfd.compression / asd.compression)[known] == pytest.approx(0.9 * 1.67)


def test_editions_differ_only_where_elements_are_slender():
    stocky, slender = "HSS 6x6x3/8", "HSS 12x8x3/16"
    old, new = (checked(f"AISC 360-{year} LRFD", [stocky, slender], "A500 Gr. C", [4.0, 4.0]) for year in (10, 22))
    assert old.compression[0, 0] == pytest.approx(new.compression[0, 0])
    assert old.compression[1, 0] != pytest.approx(new.compression[1, 0], rel=1e-3)
    assert old.clauses[old.compression_clause[1]].endswith("E7")


def test_single_angles_are_checked_by_the_clause_for_them():
    found = checked("AISC 360-22 LRFD", ["L 4x4x1/2"], "A36", [2.0])
    assert found.clauses[found.compression_clause[0]] == "AISC 360-22 E5"
    assert "U of table D3.1" in found.tension_not_checked[0]
    slender = checked("AISC 360-22 LRFD", ["L 4x4x1/2"], "A36", [6.0])
    assert "above 200" in slender.compression_not_checked[0]
    assert np.isnan(slender.compression[0, 0])


def test_twisting_of_a_tee_is_below_bending_and_that_of_a_doubly_symmetric_section_is_pure():
    sections = (section("WT 4x15.5"), section("IPE 200"), section("CHS 88.9x5"))
    length = np.full(3, 2.0)
    members = MembersToCheck(sections, np.arange(3), length, length, np.full(3, np.nan), np.full(3, np.nan))
    load, opened = twisting_load(members, np.full(3, 210e9))
    assert opened.tolist() == [True, True, False]
    assert load[0] < euler_load(np.array(210e9), np.array(sections[0].second_moment_z), np.array(2.0))
    ipe = sections[1]
    polar = (ipe.second_moment_y + ipe.second_moment_z) / ipe.area
    pure = (81e9 * ipe.torsion_constant + np.pi**2 * 210e9 * ipe.warping_constant / 4) / polar
    assert load[1] == pytest.approx(pure)
    assert load[2] == np.inf


def test_sections_of_class_4_lose_area():
    """EN 1993-1-5, 4.4: SHS 200x200x4 in S355 has c/t = 47 against 42 eps = 34.2."""
    found = checked("EN 1993-1-1", ["SHS 200x4"], "S355", [1.0])
    effective = next(step for step in found.steps if step.symbol == "A_eff").values[0]
    one = section("SHS 200x4")
    plate = 47 / (28.4 * 0.8136 * 2)
    rho = (plate - 0.22) / plate**2
    assert effective == pytest.approx(one.area - 4 * (1 - rho) * 0.188 * 0.004, rel=1e-3)


@settings(max_examples=50)
@given(st.floats(0.0, 4.0))
def test_k_c_of_timber_lies_between_nothing_and_one(relative):
    for beta in (0.1, 0.2):
        k_c = float(en1995.instability_factor(np.array(relative), np.array(beta)))
        assert 0 < k_c <= 1
        beyond = float(en1995.instability_factor(np.array(relative + 0.01), np.array(beta)))
        assert beyond <= k_c


@given(st.floats(1e-3, 100))
def test_c_p_of_the_nds_lies_between_nothing_and_one(ratio):
    for c in (0.8, 0.9):
        c_p = float(nds.column_stability(np.array(ratio), np.array(c)))
        assert 0 < c_p <= 1
        assert c_p <= ratio * (1 + 1e-9)


def test_timber_is_weakest_under_lasting_loads():
    for name, grade in (("EN 1995-1-1", "C24"), ("NDS 2018 ASD", "Douglas Fir-Larch No. 2")):
        found = checked(name, ["TIM 50x200"], grade, [1.0])
        assert (np.diff(found.tension[0]) >= 0).all()
        assert (np.diff(found.compression[0]) >= 0).all()


def test_e_min_of_the_nds_knows_no_duration():
    """A slender column carries Euler's load whatever the duration: C_D raises F_c* and lowers C_P."""
    found = checked("NDS 2018 ASD", ["TIM 50x200"], "Hem-Fir No. 2", [2.4])
    assert found.compression[0].max() / found.compression[0].min() < 1.05


def test_working_stress_is_euler_over_its_factor_for_slender_members():
    one = section("RD 20")
    found = checked("Working stress", ["RD 20"], "S235", [3.0])
    euler = float(euler_load(np.array(210e9), np.array(one.second_moment_y), np.array(3.0)))
    assert found.compression[0, 0] == pytest.approx(euler / working_stress.Options().on_euler)


def test_standards_are_named_forgivingly_and_unknown_ones_told():
    assert standard("en1993-1-1").name == "EN 1993-1-1"
    with pytest.raises(UnknownStandard, match="Did you mean AISC 360-22 LRFD"):
        standard("AISC 360-23 LRFD")


def test_materials_are_named_forgivingly_and_thickness_steps_hold():
    assert material("S 355 J2").strength(0.017).yield_strength == 345e6
    assert material("astm A992").strengths[0].yield_strength == pytest.approx(50 * 6.894757e6, rel=1e-6)
    assert material("c24").values["f_t_0_k"] == 14.5e6
    with pytest.raises(UnknownMaterial, match="Did you mean S355"):
        material("S356")
    with pytest.raises(ValueError, match="above 100 mm"):
        material("S355").strength(0.150)


def test_every_standard_size_can_be_checked_in_compression():
    for name, family in families().items():
        steel = "A992" if name in ("HSS", "Pipe") else "S355"
        rule = "AISC 360-22 LRFD" if name in ("HSS", "Pipe") else "EN 1993-1-1"
        found = checked(rule, list(family), steel, [1.5] * len(family))
        assert not np.isnan(found.compression).any(), name
