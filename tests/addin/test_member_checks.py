"""Checks of members through the workbook: capacities, verdicts, what was not checked and why."""

from __future__ import annotations

import math

import pytest

from strutbook_addin.findings import Level


@pytest.fixture
def strut():
    """A bar between a pin and a roller that is pushed with 1 kN in one case and pulled in another."""
    return {
        "Job": [["Standard", "EN 1993-1-1"]],
        "Joints": [["Joint", "x [m]", "y [m]"], ["A", 0, 0], ["B", 3, 0]],
        "Members": [["Member", "From", "To", "Section", "Material"], ["AB", "A", "B", "CHS 88.9x5", "S355"]],
        "Supports": [["Joint", "Holds"], ["A", "x y"], ["B", "y"]],
        "Loads": [["Case", "Joint", "Fx [kN]"], ["push", "B", -100], ["pull", "B", 100]],
    }


def column(strut, name, value):
    """Give the member one more column."""
    strut["Members"][0].append(name)
    strut["Members"][1].append(value)


def member(book):
    (row,) = book.rows("Members", "Member")
    return row


def test_capacity_utilisation_clause_and_verdict_stand_beside_the_member(strut, make_book):
    """EN 1993-1-1, curve a, by hand: i = 29.7 mm, slenderness 101, relative 1.322, chi 0.459."""
    book = make_book(strut)
    assert book.solve().exit_status == 0
    row = member(book)
    assert row["Compression capacity [kN]"] == pytest.approx(-0.459 * 1317.9e-6 * 355e6 / 1e3, rel=3e-3)
    assert row["Tension capacity [kN]"] == pytest.approx(1317.9e-6 * 355e6 / 1e3, rel=1e-3)
    assert row["Slenderness"] == pytest.approx(101, abs=0.5)
    assert row["Utilisation"] == pytest.approx(100 / -row["Compression capacity [kN]"])
    assert row["Governed by"] == "EN 1993-1-1 6.3.1 about y, push"
    assert row["Verdict"] == "passes the checks listed"
    assert "safe" not in str(book.solved.outcome.findings)


def test_member_that_fails_makes_a_finding_and_exit_status_1(strut, make_book):
    strut["Loads"][1][2] = -300
    book = make_book(strut)
    assert book.solve().exit_status == 1
    (fail,) = book.findings(Level.FAIL)
    assert fail.what.startswith("member AB fails: 1.4")
    assert member(book)["Verdict"] == "fails"
    assert "1 member fails" in book.solved.outcome.sentence
    labels = {row[0]: row[1] for row in _labels(book)}
    assert labels["Governing member"] == "AB"
    assert labels["Largest utilisation"] > 1


def test_buckling_lengths_by_factor_or_given(strut, make_book):
    column(strut, "K in", 0.5)
    column(strut, "Buckling length out [m]", 1.5)
    shorter = make_book(strut, "shorter.xlsx")
    shorter.solve()
    strut["Members"] = [row[:5] for row in strut["Members"]]
    strut["Joints"][2][1] = 1.5
    short = make_book(strut, "short.xlsx")
    short.solve()
    assert member(shorter)["Compression capacity [kN]"] == pytest.approx(member(short)["Compression capacity [kN]"])


def test_standard_of_a_member_goes_before_that_of_the_job(strut, make_book):
    column(strut, "Standard", "aisc 360-22 lrfd")
    book = make_book(strut)
    book.solve()
    assert member(book)["Governed by"].startswith("AISC 360-22 E3")


@pytest.mark.parametrize(
    ("standard", "section", "material", "why"),
    [
        ("EN 1993-1-1", "CHS 88.9x5", "C24", "C24 is not a steel, for which this standard is written"),
        ("EN 1995-1-1", "CHS 88.9x5", "S355", "S355 is not a timber, for which this standard is written"),
        ("EN 1993-1-1", "L 60x60x6", "S355", "a single angle is connected by one leg"),
        ("EN 1993-1-1", "FL 200x120", "S355", "EN 10025-2 gives no strength of S355 above 100 mm"),
        ("EN 1993-1-1", "Own", "S355", "no radii of gyration of Own are given"),
        ("EN 1993-1-1", "Known", "S355", "no buckling curve is known for Known"),
        ("EN 1993-1-1", "CHS 508x5", "S355", "the tube is of class 4"),
    ],
)
def test_what_lies_outside_a_clause_is_told_and_never_passed(strut, make_book, standard, section, material, why):
    strut["Job"][0][1] = standard
    strut["Members"][1][3:5] = [section, material]
    strut["Sections"] = [
        ["Section", "Area [mm2]", "Radius y [mm]", "Radius z [mm]"],
        ["Own", 1200, None, None],
        ["Known", 1200, 30, 30],
    ]
    book = make_book(strut)
    assert book.solve().exit_status == 0
    row = member(book)
    assert row["Verdict"].startswith(f"not checked: {why}")
    assert row["Utilisation"] is None
    assert any(why in finding.what for finding in book.findings(Level.LOOK))


def test_line_load_makes_a_member_one_that_bends(strut, make_book):
    strut["Member loads"] = [["Case", "Member", "wy [kN/m]"], ["push", "AB", -1]]
    book = make_book(strut)
    book.solve()
    verdict = member(book)["Verdict"]
    assert verdict.startswith("not checked: line loads bend it")
    assert "axial force alone takes" in verdict


def test_timber_follows_the_shortest_load_of_the_combination(strut, make_book):
    """k_mod of EN 1995-1-1 table 3.1: 0.6 permanent, 1.1 wind."""
    strut["Job"][0][1] = "EN 1995-1-1"
    strut["Members"][1][3:5] = ["TIM 75x200", "C24"]
    strut["Cases"] = [["Case", "Nature"], ["push", "permanent"], ["pull", "wind"]]
    book = make_book(strut)
    assert book.solve().exit_status in (0, 1)
    row = member(book)
    assert row["Tension capacity [kN]"] == pytest.approx(1.1 * 14.5 / 1.3 * 75 * 200 / 1e3, rel=1e-6)
    permanent = -row["Compression capacity [kN]"]
    strut["Cases"][1][1] = "wind"
    other = make_book(strut, "wind.xlsx")
    other.solve()
    assert -member(other)["Compression capacity [kN]"] == pytest.approx(permanent * 1.1 / 0.6)


@pytest.mark.parametrize(
    ("sheet", "row", "place", "value", "sentence"),
    [
        (
            "Members",
            1,
            3,
            "SHS 100x101x5x3",
            "there is no section SHS 100x101x5x3 on the sheet Sections, and it is no designation either",
        ),
        ("Members", 1, 3, "IPE 205", "Did you mean IPE 2"),
        ("Members", 1, 3, "CHS 88.9x50", "the dimensions of CHS 88.9x50 make no section; expected a wall of less"),
        ("Members", 1, 4, "S356", "Did you mean S355?"),
        ("Job", 0, 1, "EN 1993", "'EN 1993' is no standard that is known. Did you mean EN 1993-1-1?"),
    ],
)
def test_names_that_mean_nothing_are_told_with_the_nearest(strut, make_book, sheet, row, place, value, sentence):
    strut[sheet][row][place] = value
    book = make_book(strut)
    assert book.solve().exit_status == 2
    assert any(sentence in finding.sentence for finding in book.findings(Level.STOP)), book.findings(Level.STOP)


def test_sections_by_designation_show_what_was_used(strut, make_book):
    strut["Members"][1][3] = "Post"
    strut["Sections"] = [["Section", "Designation"], ["Post", "chs 88.9 x 5"], ["Spare", "IPE 200"]]
    book = make_book(strut)
    assert book.solve().exit_status == 0
    post, spare = book.rows("Sections", "Section")
    assert post["Area used [cm2]"] == pytest.approx(13.18, abs=0.01)
    assert post["Radius y used [mm]"] == pytest.approx(29.7, abs=0.05)
    assert spare["Area used [cm2]"] is None


def test_deflection_is_held_against_its_limit(strut, make_book):
    strut["Job"] += [["Deflection limit", 10000], ["Span [m]", 3]]
    book = make_book(strut)
    assert book.solve().exit_status == 1
    # Stretch 100 kN x 3 m over EA, against 3 m over 10 000.
    stretch = 100e3 * 3 / (210e9 * math.pi / 4 * (0.0889**2 - 0.0789**2))
    labels = {row[0]: row[1] for row in _labels(book)}
    assert labels["Deflection over limit"] == pytest.approx(stretch / 3e-4)
    assert labels["Total mass [kg]"] == pytest.approx(13.18e-4 * 7850 * 3, rel=1e-3)
    (fail,) = book.findings(Level.FAIL)
    assert "times the limit of span/10000" in fail.what


def test_without_a_standard_nothing_is_checked_and_the_findings_say_so(strut, make_book):
    del strut["Job"]
    book = make_book(strut)
    assert book.solve().exit_status == 0
    assert "Verdict" not in member(book)
    assert any("not checked: strength and buckling of members" in f.what for f in book.findings(Level.NOTE))


def test_old_verdicts_go_when_the_standard_goes(strut, make_book):
    book = make_book(strut)
    book.solve()
    book.change("Job", "B1", None)
    book.solve()
    assert member(book)["Verdict"] is None
    assert member(book)["Utilisation"] is None


def _labels(book):
    import openpyxl

    return list(openpyxl.load_workbook(book.path, data_only=True)["Job"].iter_rows(values_only=True))


def test_factors_of_the_job_go_before_the_recommended_ones(strut, make_book):
    book = make_book(strut)
    book.solve()
    recommended = member(book)["Compression capacity [kN]"]
    strut["Job"].append(["Factors", "gamma_M1 = 1.1"])
    national = make_book(strut, "national.xlsx")
    national.solve()
    assert member(national)["Compression capacity [kN]"] == pytest.approx(recommended / 1.1)


@pytest.mark.parametrize(
    ("text", "sentence"),
    [
        ("gamma_M7 = 1.1", "EN 1993-1-1 has no factor gamma_M7; it has gamma_m0, gamma_m1, gamma_m2."),
        ("gamma_M1 1.1", "expected name = number, found 'gamma_M1 1.1'."),
        ("gamma_M1 = x", "expected name = number, found 'gamma_M1'."),
        ("gamma_M1 = -1", "the factor gamma_M1 is -1; expected a number above 0."),
    ],
)
def test_factors_that_mean_nothing_are_told(strut, make_book, text, sentence):
    strut["Job"].append(["Factors", text])
    book = make_book(strut)
    assert book.solve().exit_status == 2
    assert sentence in book.findings(Level.STOP)[0].what


def test_slenderness_limit_of_the_job_fails_what_exceeds_it(strut, make_book):
    strut["Job"].append(["Slenderness limit", 90])
    book = make_book(strut)
    assert book.solve().exit_status == 1
    assert member(book)["Verdict"] == "fails; slenderness 101 above the limit 90"
