"""The main job: tables filled in, results written beside them, nothing stale, nothing lost."""

from __future__ import annotations

import openpyxl
import pytest

from strutbook_addin.solving import solve_file


def test_forces_reactions_and_displacements_stand_beside_the_inputs(triangle, make_book):
    """The triangle by hand: reactions from moments, forces from joints A and C."""
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    # Moments about A: 8 By = 12 * 4 + 4 * 3, so By = 7.5 and Ay = 4.5; Ax = -4.
    supports = {row["Joint"]: row for row in book.rows("Supports", "Holds")}
    assert supports["A"]["Reaction x max [kN]"] == pytest.approx(-4)
    assert supports["A"]["Reaction y max [kN]"] == pytest.approx(4.5)
    assert supports["B"]["Reaction y min [kN]"] == pytest.approx(7.5)
    assert supports["B"]["Reaction x max [kN]"] == 0
    # Joint A: AC sin = -4.5 with sin 0.6; AB = 4 - 0.8 AC. Joint B: BC sin = -7.5.
    forces = book.column("Forces", "Member", "Loads [kN]")
    assert forces == pytest.approx({"AB": 10.0, "AC": -7.5, "BC": -12.5})
    members = {row["Member"]: row for row in book.rows("Members", "Member")}
    assert members["AB"]["Tension [kN]"] == pytest.approx(10)
    assert members["AB"]["Tension in"] == "Loads"
    assert members["AB"]["Compression [kN]"] == 0
    assert members["AB"]["Compression in"] == "-"
    assert members["BC"]["Compression [kN]"] == pytest.approx(-12.5)
    assert members["BC"]["Length [m]"] == pytest.approx(5)
    joints = {row["Joint"]: row for row in book.rows("Joints", "Joint")}
    # AB grows by N L / EA = 10 * 8 / 80000 m.
    assert joints["B"]["Displacement x [mm]"] == pytest.approx(1.0)
    assert joints["B"]["Displaced in"] == "Loads"
    assert joints["A"]["Displaced in"] == "-"


def test_job_is_stamped(triangle, make_book):
    book = make_book(triangle)
    solved = book.solve()
    job = {row[0].value: row[1].value for row in openpyxl.load_workbook(book.path)["Job"].iter_rows()}
    assert job["Inputs"] == solved.outcome.digest
    assert job["Outcome"].startswith("Solved: 3 joints, 3 members, 1 combination, statically determinate")
    assert job["Static indeterminacy"] == 0
    assert 0 <= job["Joint residual"] <= 1e-9
    assert job["Largest compression [kN]"] == pytest.approx(-12.5)


def test_governing_combination_is_named(triangle, make_book):
    triangle["Loads"] = [["Case", "Joint", "Fy [kN]"], ["G", "C", -12], ["W", "C", 20]]
    triangle["Combinations"] = [
        ["Combination", "For", "G", "W"],
        ["heavy", "strength", 1.35, None],
        ["uplift", "strength", 0.9, 1.5],
        ["daily", "service", 1, 0.2],
    ]
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    members = {row["Member"]: row for row in book.rows("Members", "Member")}
    assert members["AB"]["Tension in"] == "heavy"
    assert members["AB"]["Compression in"] == "uplift"
    # AB carries 2/3 of the load at the apex.
    assert members["AB"]["Tension [kN]"] == pytest.approx(1.35 * 12 * 2 / 3)
    assert members["AB"]["Compression [kN]"] == pytest.approx((0.9 * 12 - 1.5 * 20) * 2 / 3)
    joints = {row["Joint"]: row for row in book.rows("Joints", "Joint")}
    assert joints["C"]["Displaced in"] == "daily"


def test_results_come_back_in_the_unit_of_their_header(triangle, make_book):
    triangle["Members"][0] += ["Tension [N]", "My remark"]
    triangle["Members"][1] += [None, "keep me"]
    book = make_book(triangle)
    book.solve()
    members = {row["Member"]: row for row in book.rows("Members", "Member")}
    assert members["AB"]["Tension [N]"] == pytest.approx(10_000)
    assert members["AB"]["My remark"] == "keep me"


def test_own_columns_and_titles_stay(triangle, make_book):
    triangle["Joints"] = [
        ["Roof over the boat shed", None, None],
        [],
        ["Remark", "JOINT", "X_ [m]", "y [mm]"],
        ["left", "A", 0, 0],
        ["right", "B", 8, 0],
        ["top", "C", 4, 3000],
    ]
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    sheet = openpyxl.load_workbook(book.path)["Joints"]
    assert sheet["A1"].value == "Roof over the boat shed"
    assert sheet["A6"].value == "top"
    assert sheet["E3"].value == "Displacement x [mm]"


def test_unsolvable_run_clears_every_result(triangle, make_book):
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    book.change("Members", "C4", "nowhere")
    assert book.solve().exit_status == 2
    for sheet, key in (("Members", "Member"), ("Joints", "Joint"), ("Supports", "Holds")):
        for row in book.rows(sheet, key):
            results = [v for k, v in row.items() if k.startswith(("Tens", "Comp", "Disp", "React", "Length", "Out"))]
            assert results
            assert all(value is None for value in results)
    workbook = openpyxl.load_workbook(book.path)
    for sheet in ("Forces", "Reactions", "Displacements"):
        cells = [cell.value for row in workbook[sheet].iter_rows() for cell in row]
        assert not any(isinstance(value, (int, float)) for value in cells)
    job = {row[0].value: row[1].value for row in workbook["Job"].iter_rows()}
    assert job["Outcome"].startswith("Not solved")
    assert job["Inputs"] is None


def test_results_of_a_longer_table_do_not_stay_below_a_shorter_one(triangle, make_book):
    triangle["Joints"].append(["D", 4, 1])
    triangle["Members"] += [
        ["AD", "A", "D", 400, 200],
        ["CD", "C", "D", 400, 200],
        ["BD", "B", "D", 400, 200],
    ]
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    workbook = openpyxl.load_workbook(book.path)
    for cell in ("A5", "B5", "C5"):
        workbook["Joints"][cell] = None
    for row in (5, 6, 7):
        for column in "ABCDE":
            workbook["Members"][f"{column}{row}"] = None
    workbook["Members"]["F12"] = "a note of mine"
    workbook.save(book.path)
    assert book.solve().exit_status == 0
    sheet = openpyxl.load_workbook(book.path)["Members"]
    assert [sheet[f"{column}5"].value for column in "FGHIJ"] == [None] * 5
    assert sheet["F12"].value == "a note of mine"
    assert len(book.rows("Forces", "Member")) == 3


def test_column_of_a_former_combination_goes_and_a_hand_column_stays(triangle, make_book):
    triangle["Loads"] = [["Case", "Joint", "Fy [kN]"], ["G", "C", -12], ["W", "C", 20]]
    book = make_book(triangle)
    book.solve()
    workbook = openpyxl.load_workbook(book.path)
    header = next(row for row in workbook["Forces"].iter_rows() if row[0].value == "Member")
    hand = header[-1].offset(0, 1)
    hand.value = "By hand [kN]"
    hand.offset(1, 0).value = 8
    # The load case W is renamed, so its column belongs to nothing any more.
    workbook["Loads"]["A3"] = "Wind"
    workbook.save(book.path)
    assert book.solve().exit_status == 0
    row = book.rows("Forces", "Member")[0]
    assert set(row) == {"Member", "G [kN]", "Wind [kN]", "By hand [kN]"}
    assert row["By hand [kN]"] == 8


def test_formula_of_the_user_in_a_result_cell_stays_and_is_reported(triangle, make_book):
    book = make_book(triangle)
    book.solve()
    sheet = openpyxl.load_workbook(book.path)["Members"]
    place = next(cell for cell in sheet[1] if cell.value == "Tension [kN]").offset(1, 0).coordinate
    book.change("Members", place, "=1+1")
    solved = book.solve()
    assert solved.exit_status == 0
    assert openpyxl.load_workbook(book.path)["Members"][place].value == "=1+1"
    assert f"Members!{place}" in {finding.where for finding in book.findings("look")}


def test_numbers_are_names_too(triangle, make_book):
    for sheet in triangle.values():
        for row in sheet[1:]:
            row[:] = [{"A": 1, "B": 2.0, "C": 3}.get(value, value) for value in row]
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    assert book.column("Forces", "Member", "Loads [kN]") == pytest.approx({"AB": 10.0, "AC": -7.5, "BC": -12.5})


def test_digest_follows_inputs_and_not_looks(triangle, make_book):
    first = make_book(triangle).solve().outcome.digest
    moved = {name: [["A title"], [], *rows] for name, rows in triangle.items()}
    moved["Joints"] = [[*row, None, "remark"] for row in moved["Joints"]]
    assert make_book(moved).solve().outcome.digest == first
    triangle["Loads"][1][2] = -12.001
    assert make_book(triangle).solve().outcome.digest != first


def test_solving_twice_changes_no_digest(triangle, make_book):
    book = make_book(triangle)
    first = book.solve().outcome.digest
    assert book.solve().outcome.digest == first


def test_check_only_writes_nothing(triangle, make_book):
    book = make_book(triangle)
    before = book.path.read_bytes()
    assert solve_file(book.path, None).exit_status == 0
    assert book.path.read_bytes() == before


def test_truss_without_a_diagonal_is_told_its_panel(make_book):
    book = make_book(
        {
            "Joints": [
                ["Joint", "x [m]", "y [m]"],
                *(["L0", 0, 0], ["L1", 4, 0], ["L2", 8, 0], ["L3", 12, 0]),
                *(["U1", 4, 3], ["U2", 8, 3]),
            ],
            "Members": [
                ["Member", "From", "To"],
                *(["b1", "L0", "L1"], ["b2", "L1", "L2"], ["b3", "L2", "L3"], ["t", "U1", "U2"]),
                *(["e1", "L0", "U1"], ["e2", "L3", "U2"], ["v1", "L1", "U1"], ["v2", "L2", "U2"]),
            ],
            "Supports": [["Joint", "Holds"], ["L0", "x y"], ["L3", "y"]],
            "Loads": [["Joint", "Fy [kN]"], ["L1", -10]],
        }
    )
    assert book.solve().exit_status == 2
    (stop,) = book.findings("stop")
    assert "L1-L2-U2-U1" in stop.what.replace("U1-L1-L2-U2", "L1-L2-U2-U1")
    assert "L1-U2" in stop.todo
    assert "Forces" not in openpyxl.load_workbook(book.path).sheetnames


def test_skew_support_takes_force_along_its_direction_only(triangle, make_book):
    triangle["Supports"] = [["Joint", "Holds"], ["A", "x y"], ["B", "45 deg"]]
    triangle["Loads"] = [["Joint", "Fy [kN]"], ["C", -12]]
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    supports = {row["Joint"]: row for row in book.rows("Supports", "Holds")}
    # Moments about A: 8 By = 4 * 12; the reaction at B is along (1, 1).
    assert supports["B"]["Reaction x max [kN]"] == pytest.approx(6)
    assert supports["B"]["Reaction y max [kN]"] == pytest.approx(6)
    assert supports["A"]["Reaction x max [kN]"] == pytest.approx(-6)


def test_spring_support_gives_by_force_over_stiffness(triangle, make_book):
    triangle["Supports"] = [["Joint", "Holds", "Stiffness [kN/mm]"], ["A", "x y", None], ["B", "y", 2]]
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    joints = {row["Joint"]: row for row in book.rows("Joints", "Joint")}
    assert joints["B"]["Displacement y [mm]"] == pytest.approx(-7.5 / 2)


def test_loads_per_length_and_per_projection_differ_by_the_slope(triangle, make_book):
    triangle["Loads"] = [["Joint", "Fy [kN]"]]
    triangle["Member loads"] = [
        ["Member", "Per", "wy [kN/m]"],
        ["AC", "length", -2],
        ["BC", "projection", -2],
    ]
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    reactions = {(row["Joint"], row["Direction"]): row["Loads [kN]"] for row in book.rows("Reactions", "Joint")}
    # AC is 5 m long and 4 m wide: 10 kN and 8 kN, half to each end, and 9 kN at the apex shared evenly.
    assert reactions["A", "y"] == pytest.approx(5 + 4.5)
    assert reactions["B", "y"] == pytest.approx(4 + 4.5)
    assert any("bending" in finding.what for finding in book.findings("look"))


def test_same_truss_in_kip_and_feet_agrees(triangle, make_book):
    metric = make_book(triangle, "metric.xlsx").solve().outcome.results
    foot, kip, inch = 0.3048, 4.4482216152605, 0.0254
    triangle["Joints"] = [
        ["Joint", "x [ft]", "y [ft]"],
        *([name, x / foot, y / foot] for name, x, y in triangle["Joints"][1:]),
    ]
    triangle["Members"] = [
        ["Member", "From", "To", "Area [in2]", "E [ksi]"],
        *([*row[:3], row[3] * 1e-6 / inch**2, row[4] * 1e6 / kip * inch**2] for row in triangle["Members"][1:]),
    ]
    triangle["Loads"] = [["Joint", "Fx [kip]", "Fy [kip]"], ["C", 4 / kip, -12 / kip]]
    book = make_book(triangle, "customary.xlsx")
    customary = book.solve().outcome.results
    assert customary.forces == pytest.approx(metric.forces, rel=1e-12)
    assert customary.displacements == pytest.approx(metric.displacements, rel=1e-9)
    assert book.column("Forces", "Member", "Loads [kip]")["AB"] == pytest.approx(10 / kip)
    assert "Displacement x [in]" in book.rows("Joints", "Joint")[0]
