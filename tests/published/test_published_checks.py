"""Published member checks, within their printed precision, through the public functions."""

from __future__ import annotations

import json
import re
from pathlib import Path

import numpy as np
import pytest

from strutbook.checks import aisc360, en1993, en1995, nds
from strutbook.checks.buckling import euler_load
from strutbook.checks.capacity import MembersToCheck
from strutbook.combinations import en1990
from strutbook.materials import material
from strutbook.sections import Product, Section, Shape, section

CASES = {case["id"]: case for case in json.loads(Path(__file__).with_name("member_checks.json").read_text("utf-8"))}
KSI, KIP, INCH = 6.894757293168361e6, 4448.2216152605, 0.0254
LRFD, ASD = aisc360.Options(2022, aisc360.Method.LRFD), aisc360.Options(2022, aisc360.Method.ASD)


def rows(case: str) -> dict[str, tuple[float, float]]:
    """Published value and tolerance by quantity."""
    return {row["q"]: (float(row["published"]), row["tol"]) for row in CASES[case]["expected"] if "published" in row}


def members(*sections: Section, length_in: float = 1.0, length_out: float = 1.0, **given: float) -> MembersToCheck:
    count = len(sections)
    return MembersToCheck(
        sections,
        np.arange(count),
        np.full(count, length_in),
        np.full(count, length_out),
        np.full(count, given.get("net_area", np.nan)),
        np.full(count, given.get("shear_lag", np.nan)),
    )


def general(area: float, radius_y: float, radius_z: float) -> Section:
    """Section of which a source gives the properties only; m."""
    moments = (area * radius_y**2, area * radius_z**2, area * min(radius_y, radius_z) ** 2)
    return Section("as printed", Shape.GENERAL, Product.UNKNOWN, area, *moments, mass=0.0)


def column(options: aisc360.Options, checked: MembersToCheck, steel: str) -> float:
    """Capacity in compression by AISC 360, N."""
    found = aisc360.capacities(checked, (material(steel),), np.zeros(1, dtype=int), options)
    return float(found.compression[0, 0])


@pytest.mark.parametrize("quantity", rows("BA01"))
def test_available_critical_stress_of_aisc(quantity):
    published, tolerance = rows("BA01")[quantity]
    slenderness, f_y = (float(value) for value in re.findall(r"=([\d.]+)", quantity))
    stress = aisc360.critical_stress(np.array(f_y), np.pi**2 * 29000 / np.array(slenderness) ** 2)
    options = LRFD if quantity.startswith("phi") else ASD
    assert float(options.design(stress, 0.90, 1.67)) == pytest.approx(published, abs=tolerance)


def test_tension_of_a_plate_and_of_a_bolted_angle():
    found = rows("BA03")
    a36 = (material("A36"),)
    plate = members(section("FL 127x12.7"), net_area=(2.5 - 2 * 0.75 * 0.5) * INCH**2)
    for options, mark in ((LRFD, "phiPn"), (ASD, "Pn/Omega")):
        steps = {step.symbol: step for step in aisc360.capacities(plate, a36, np.zeros(1, dtype=int), options).steps}
        for symbol, word in (("P_y", "yield"), ("P_u", "rupture")):
            published, tolerance = found[f"Ex 3.1 {mark} {word}"]
            assert steps[symbol].values[0] / KIP == pytest.approx(published, abs=tolerance)
    angle = general(2.50 * INCH**2, 0.02, 0.02)
    net = (2.50 - 3 / 8 * (7 / 8 + 1 / 8)) * INCH**2
    for options, mark in ((LRFD, "phiPn"), (ASD, "Pn/Omega")):
        checked = members(angle, net_area=net, shear_lag=0.85)
        found_capacity = aisc360.capacities(checked, a36, np.zeros(1, dtype=int), options).tension[0, 0] / KIP
        published, tolerance = found[f"Ex 3.2 {mark} rupture"]
        assert found_capacity == pytest.approx(published, abs=tolerance)


def test_tension_of_a_single_angle():
    found = rows("BA05")
    angle = section("L 4x4x1/2")
    shear_lag = 1 - 1.18 / 9
    net = (3.75 - 0.5 * (13 / 16 + 1 / 16)) * INCH**2
    for options, mark in ((LRFD, "phiPn"), (ASD, "Pn/Omega")):
        checked = members(angle, net_area=net, shear_lag=shear_lag)
        capacities = aisc360.capacities(checked, (material("A36"),), np.zeros(1, dtype=int), options)
        steps = {step.symbol: step.values[0] / KIP for step in capacities.steps if step.unit == "N"}
        for symbol, word in (("P_y", "yield"), ("P_u", "rupture")):
            published, tolerance = found[f"{mark} {word}"]
            assert steps[symbol] == pytest.approx(published, abs=tolerance)
    published, tolerance = found["L at L/rz=300, ft"]
    assert 300 * angle.radius_min / 0.3048 == pytest.approx(published, abs=tolerance)


def test_column_of_a_wide_flange():
    found = rows("BA06")
    checked = members(general(21.8 * INCH**2, 10.0, 2.48 * INCH), length_in=240 * INCH, length_out=240 * INCH)
    published, tolerance = found["phiPn"]
    assert column(LRFD, checked, "A992") / KIP == pytest.approx(published, abs=tolerance)
    published, tolerance = found["Pn/Omega"]
    assert column(ASD, checked, "A992") / KIP == pytest.approx(published, abs=tolerance)


def test_slender_walls_by_the_editions_of_2010_and_2016():
    found = rows("BA08")
    length = 24 * 12 * INCH
    checked = members(section("HSS 12x8x3/16"), length_in=length, length_out=length)
    for method, quantity in ((aisc360.Method.LRFD, "phiPn"), (aisc360.Method.ASD, "Pn/Omega")):
        published, tolerance = found[f"360-10 {quantity}"]
        capacity = column(aisc360.Options(2010, method), checked, "A500 Gr. B") / KIP
        assert capacity == pytest.approx(published, abs=max(tolerance, 0.1))
    newer = column(aisc360.Options(2016), checked, "A500 Gr. B") / KIP
    assert newer == pytest.approx(146.5563, rel=1e-3)


def test_effective_width_factors():
    for row in CASES["BA09"]["expected"]:
        c_1 = float(re.search(r"c1=([\d.]+)", row["q"]).group(1))
        assert aisc360.effective_width_factor_c2(c_1) == float(row.get("value", row.get("published")))


def test_effective_slenderness_of_single_angles():
    for row in CASES["BA10"]["expected"]:
        ratio = np.array([float(re.search(r"L/ra=([\d.]+)", row["q"]).group(1))])
        formula = aisc360.angle_slenderness if "planar" in row["q"] else aisc360.angle_slenderness_in_space
        assert formula(ratio)[0] == pytest.approx(float(row.get("value", row.get("published"))))


@pytest.mark.parametrize("quantity", rows("BE01"))
def test_reduction_factor_chi(quantity):
    published, tolerance = rows("BE01")[quantity]
    slenderness, curve = re.match(r"chi lambda=([\d.]+) curve (\w+)", quantity).groups()
    chi = en1993.reduction_factor(np.array(float(slenderness)), np.array(en1993.IMPERFECTION[curve]))
    assert float(chi) == pytest.approx(published, abs=tolerance)


def test_upper_chord_of_class_4_about_both_axes():
    found = rows("BE02")
    checked = members(section("IPE 330"), length_in=8.504, length_out=1.936)
    steps = {
        step.symbol: float(step.values[0])
        for step in en1993.capacities(checked, (material("S355"),), np.zeros(1, dtype=int)).steps
    }
    for axis, plane in (("z", "in plane"), ("y", "out of plane")):
        for quantity, symbol, unit in (
            ("Ncr {} ({}) kN", "N_cr,{}", 1e3),
            ("lambda {} ({})", "lambda_{}", 1.0),
            ("chi {} ({})", "chi_{}", 1.0),
            ("Nb,Rd {} ({}) kN", "N_b,Rd,{}", 1e3),
        ):
            published, tolerance = found[quantity.format(axis, plane)]
            value = steps[symbol.format(axis)] / unit
            # The source rounds the section's properties before it goes on.
            assert value == pytest.approx(published, abs=max(tolerance, 4e-4 * published)), quantity
    published, tolerance = found["Aeff mm2"]
    assert steps["A_eff"] * 1e6 == pytest.approx(published, abs=max(tolerance, 2))


def test_double_angle_is_of_class_4_by_the_second_limit():
    found = rows("BE04")
    pair = section("2L 150x150x15 gap 10")
    for quantity, moment in (
        ("Iy out of plane (gap 10 mm)", pair.second_moment_z),
        ("Iz in plane", pair.second_moment_y),
    ):
        published, tolerance = found[quantity]
        assert moment * 1e8 == pytest.approx(published, abs=max(tolerance, 2.5))
    eps = float(en1993.epsilon(np.array(355e6)))
    assert 11.5 * eps < (0.150 + 0.150) / (2 * 0.015)
    assert 15 * eps > 0.150 / 0.015


def test_angle_connected_by_one_leg():
    for row in CASES["BE06"]["expected"]:
        value = float(row.get("value", row.get("published")))
        if match := re.match(r"beta(\d) p1=([\d.]+)d0", row["q"]):
            assert en1993.one_leg_factor(int(match[1]), float(match[2])) == pytest.approx(value)
    assert en1993.one_bolt_tension(0.035, 0.022, 0.008, 430e6, 1.25) / 1e3 == pytest.approx(132.096)
    net = (1227 - 22 * 8) * 1e-6
    beta = en1993.one_leg_factor(3, 3.0)
    assert float(en1993.net_tension(np.array(beta), np.array(net), np.array(430e6), 1.25)) / 1e3 == pytest.approx(
        195.2338, rel=1e-4
    )


@pytest.mark.parametrize(
    ("designation", "product", "f_y", "curves"),
    [
        ("CHS 88.9x5", Product.HOT_FINISHED, 355e6, ("a", "a")),
        ("CHS 88.9x5", Product.HOT_FINISHED, 460e6, ("a0", "a0")),
        ("SHS 100x5", Product.COLD_FORMED, 355e6, ("c", "c")),
        ("L 80x80x8", None, 355e6, ("b", "b")),
        ("UPE 200", None, 355e6, ("c", "c")),
        ("IPE 330", None, 355e6, ("a", "b")),
        ("IPE 330", None, 460e6, ("a0", "a0")),
        ("HEB 200", None, 355e6, ("b", "c")),
        ("HEB 200", None, 460e6, ("a", "a")),
    ],
)
def test_buckling_curves_of_table_6_2(designation, product, f_y, curves):
    """EN 1993-1-1:2005, table 6.2 (from memory)."""
    assert en1993.buckling_curves(section(designation, product), f_y) == curves


def test_timber_tie():
    found = rows("BT01")
    strength = en1995.design_strength(np.array(0.6), np.array(12e6), np.array(1.3)) / 1e6
    published, tolerance = found["ft,0,d (without kh)"]
    assert float(strength) == pytest.approx(published, abs=tolerance)
    with_size = float(strength) * float(en1995.size_factor(np.array(0.050), np.array(False)))
    assert with_size == pytest.approx(CASES["BT01"]["recomputed"]["with_kh"], rel=1e-4)


def test_timber_truss_tie():
    values = {row["q"]: float(row["value"]) for row in CASES["BT02"]["expected"] if "value" in row}
    size = float(en1995.size_factor(np.array(0.125), np.array(False)))
    assert size == pytest.approx(values["kh"], rel=1e-5)
    strength = float(en1995.design_strength(np.array(0.8), np.array(size * 11e6), np.array(1.3))) / 1e6
    assert strength == pytest.approx(values["ft,0,d"], rel=1e-5)


def test_column_stability_of_the_nds():
    """6x6 of No. 1 Douglas Fir-Larch posts: F_c 1000 psi, E_min 580 000 psi (sources in the data)."""
    for row in CASES["BT04"]["expected"]:
        quantity, length = re.match(r"(\w+)(?: allowable)? le=(\d+)", row["q"]).groups()
        value = float(row.get("value", row.get("published")))
        critical = float(nds.critical_buckling_design_value(np.array(580e3), np.array(float(length) / 5.5)))
        factor = float(nds.column_stability(np.array(critical / 1000), np.array(0.8)))
        found = {"FcE": critical, "CP": factor, "P": factor * 1000 * 5.5**2}[quantity]
        assert found == pytest.approx(value, rel=2e-4)


def test_modification_factors_of_timber():
    assert en1995.K_MOD[1] == en1995.K_MOD[2] == (0.60, 0.70, 0.80, 0.90, 1.10)
    assert en1995.K_MOD[3] == (0.50, 0.55, 0.65, 0.70, 0.90)
    assert float(en1995.size_factor(np.array(0.047), np.array(False))) == pytest.approx(1.26, abs=0.005)
    assert float(en1995.size_factor(np.array(0.400), np.array(True))) == pytest.approx(1.041, abs=0.0005)


def test_factors_of_en_1990():
    factors = en1990.Factors()
    assert (factors.permanent_unfavourable, factors.permanent_favourable, factors.variable) == (1.35, 1.0, 1.5)
    assert factors.xi == 0.85
    printed = {row["q"]: row["value"] for row in CASES["D01"]["expected"]}
    for key, psi in (("wind", "wind"), ("temperature", "temperature"), ("snow H<=1000 m", "snow")):
        assert tuple(float(value) for value in printed[key].split(" (")[0].split()) == en1990.PSI[psi]
    for key, categories in (
        ("psi0,1,2 category A, B (domestic, office)", "AB"),
        ("C, D", "CD"),
        ("E storage", "E"),
        ("F vehicles<=30kN", "F"),
        ("G", "G"),
    ):
        for category in categories:
            assert tuple(float(value) for value in printed[key].split()) == en1990.IMPOSED[category]


def test_euler_load_of_the_chord():
    assert euler_load(np.array(210e9), np.array(11770e-8), np.array(8.504)) / 1e3 == pytest.approx(3373, abs=1)


def test_published_columns_come_out_of_a_workbook(make_book):
    """The slender HSS by AISC 360-10, and the chord of class 4 by EN 1993-1-1, typed into tables."""
    book = make_book(
        {
            "Joints": [["Joint", "x [m]", "y [m]"], ["A", 0, 0], ["B", 24 * 0.3048, 0], ["C", 8.504, 3], ["D", 0, 3]],
            "Members": [
                ["Member", "From", "To", "Section", "Material", "Standard", "Buckling length out [m]"],
                ["HSS", "A", "B", "HSS 12x8x3/16", "A500 Gr. B", "AISC 360-10 LRFD", None],
                ["IPE", "D", "C", "IPE 330", "S355", "EN 1993-1-1", 1.936],
            ],
            "Supports": [["Joint", "Holds"], ["A", "x y"], ["B", "y"], ["D", "x y"], ["C", "y"]],
            "Loads": [["Joint", "Fx [kN]"], ["B", -10], ["C", -1477]],
        }
    )
    assert book.solve().exit_status == 0, book.findings("stop")
    capacity = book.column("Members", "Member", "Compression capacity [kN]")
    published, _ = rows("BA08")["360-10 phiPn"]
    assert -capacity["HSS"] * 1e3 / KIP == pytest.approx(published, abs=0.5)
    published, _ = rows("BE02")["Nb,Rd z (in plane) kN"]
    assert -capacity["IPE"] == pytest.approx(published, abs=1)
    utilisation = book.column("Members", "Member", "Utilisation")
    published, tolerance = rows("BE02")["utilisation z"]
    assert utilisation["IPE"] == pytest.approx(published, abs=max(tolerance, 1e-3))
