"""Sizing: the lightest sections with which everything passes, told group by group."""

from __future__ import annotations

import openpyxl
import pytest

from strutbook_addin.command_line import main
from strutbook_addin.sizing_file import size_file
from strutbook_addin.solving import solve_file
from strutbook_templates import write_demonstration


@pytest.fixture
def demonstration(tmp_path):
    file = tmp_path / "footbridge.xlsx"
    write_demonstration(file)
    return file


@pytest.fixture
def frame(triangle):
    """The triangle with sections, checked to EN 1993-1-1."""
    triangle["Job"] = [["Standard", "EN 1993-1-1"]]
    triangle["Members"] = [
        ["Member", "From", "To", "Group", "Section", "Material"],
        ["AB", "A", "B", "tie", "SHS 150x10", "S355"],
        ["AC", "A", "C", "rafter", "SHS 150x10", "S355"],
        ["BC", "B", "C", "rafter", "SHS 150x10", "S355"],
    ]
    triangle["Loads"] = [["Joint", "Fx [kN]", "Fy [kN]"], ["C", -120, -450]]
    return triangle


def test_the_failing_demonstration_becomes_a_lighter_one_that_passes(demonstration, tmp_path):
    before = solve_file(demonstration, demonstration).outcome
    assert before.checked.fails.any()
    sized = size_file(demonstration, tmp_path / "sized.xlsx", apply=True)
    assert sized.exit_status == 0
    assert sized.sizing.passes
    after = solve_file(tmp_path / "sized.xlsx", None).outcome
    assert not after.checked.fails.any()
    assert after.results.total_mass() < 0.8 * before.results.total_mass()
    assert after.results.deflection_over_limit() <= 1
    assert after.results.total_mass() == pytest.approx(sized.sizing.results.total_mass())


def test_no_lighter_section_of_the_stock_would_pass(frame, make_book):
    """Each choice is the lightest: with the next lighter size the group fails."""
    book = make_book(frame)
    sized = size_file(book.path, book.path)
    from strutbook.sections import families

    for group in sized.sizing.groups:
        sizes = list(families()["SHS"])
        lighter = sizes[sizes.index(group.chosen.name) - 1]
        worse = {sheet: [list(row) for row in rows] for sheet, rows in frame.items()}
        for row in worse["Members"][1:]:
            row[4] = lighter if row[3] == group.name else row[4]
        other = make_book(worse, "worse.xlsx")
        other.solve()
        assert other.solved.outcome.checked.fails.any(), group.name


def test_comparison_stands_beside_what_was_there_and_nothing_else_changes(frame, make_book):
    book = make_book(frame)
    size_file(book.path, book.path)
    rows = {row["Group"]: row for row in book.rows("Sizing", "Group")}
    assert rows["rafter"]["Section before"] == "SHS 150x10"
    assert rows["rafter"]["Members"] == 2
    assert rows["rafter"]["Mass chosen [kg]"] < rows["rafter"]["Mass before [kg]"]
    assert book.column("Members", "Member", "Section")["AC"] == "SHS 150x10"
    book.solve()
    assert book.rows("Sizing", "Group") == [], "a plain run leaves no comparison that it did not make"


def test_apply_writes_the_designations_and_clears_areas_that_would_go_before_them(frame, make_book):
    frame["Members"][0].append("Area [mm2]")
    for row in frame["Members"][1:]:
        row.append(9999)
    book = make_book(frame)
    size_file(book.path, book.path, apply=True)
    for row in book.rows("Members", "Member"):
        assert row["Section"].startswith("SHS ")
        assert row["Section"] != "SHS 150x10"
        assert row["Area [mm2]"] is None
        assert row["Verdict"] == "passes the checks listed"


def test_stock_of_the_workbook_goes_before_families(frame, make_book):
    frame["Stock"] = [["Section", "Group"], ["CHS 168.3x6.3", None], ["CHS 219.1x8", None], ["FL 60x10", "tie"]]
    book = make_book(frame)
    sized = size_file(book.path, book.path, allowed=["SHS"])
    assert {group.name: group.chosen.name for group in sized.sizing.groups} == {
        "tie": "FL 60x10",
        "rafter": "CHS 168.3x6.3",
    }


def test_group_that_nothing_suits_is_told_and_fails(frame, make_book):
    frame["Stock"] = [["Section"], ["SHS 40x3"], ["SHS 50x3"]]
    book = make_book(frame)
    sized = size_file(book.path, book.path)
    assert sized.exit_status == 1
    rafter = next(group for group in sized.sizing.groups if group.name == "rafter")
    assert rafter.chosen.name == "SHS 50x3"
    assert "no section of the stock passes" in rafter.remark


def test_group_that_cannot_be_checked_is_left_as_it_is(frame, make_book):
    frame["Members"][1][4] = "L 60x60x6"
    book = make_book(frame)
    sized = size_file(book.path, book.path, apply=True)
    tie = next(group for group in sized.sizing.groups if group.name == "tie")
    assert tie.chosen is None
    assert "cannot be checked" in tie.remark
    assert book.column("Members", "Member", "Section")["AB"] == "L 60x60x6"


def test_deflection_asks_for_more_than_strength(frame, make_book):
    book = make_book(frame)
    by_strength = size_file(book.path, book.path).sizing
    frame["Job"].append(["Deflection limit", 2000])
    stiff = make_book(frame, "stiff.xlsx")
    sized = size_file(stiff.path, stiff.path).sizing
    assert sized.results.deflection_over_limit() <= 1
    assert sized.results.total_mass() > by_strength.results.total_mass()
    assert any("governed by deflection" in group.remark for group in sized.groups)


def test_command_tells_the_comparison_and_what_is_missing(frame, make_book, capsys):
    book = make_book(frame)
    assert main(["size", str(book.path), "--from", "CHS"]) == 0
    printed = capsys.readouterr().out
    assert "rafter" in printed
    assert "CHS" in printed
    assert "every member that can be checked passes the checks listed" in printed
    del frame["Job"]
    without = make_book(frame, "without.xlsx")
    assert main(["size", str(without.path)]) == 2
    assert "no standard is named" in capsys.readouterr().out
    assert main(["size", str(book.path), "--from", "TUBES"]) == 2
    assert "Families are: CHS, SHS" in capsys.readouterr().out


def test_bill_and_workings_are_written_when_they_are_asked_for(frame, make_book):
    frame["Bill"] = []
    frame["Job"].append(["Workings for", "worst, AB"])
    book = make_book(frame)
    assert book.solve().exit_status == 0
    bill = book.rows("Bill", "Mark")
    assert [(row["Mark"], row["Count"]) for row in bill] == [("tie", 1), ("rafter", 2)]
    assert bill[1]["Length [m]"] == 5
    assert sum(row["Mass [kg]"] for row in bill) == pytest.approx(book.solved.outcome.results.total_mass(), rel=1e-4)
    lines = book.rows("Workings", "Clause")
    assert {line["Member"] for line in lines} == {"AB", "AC"}
    by_symbol = {line["Symbol"]: line for line in lines if line["Member"] == "AC"}
    chi, area, strength = (by_symbol[symbol]["Value"] for symbol in ("chi_y", "A_eff", "f_y"))
    assert by_symbol["N_b,Rd,y"]["Value"] == pytest.approx(chi * area * strength / 1e3, rel=1e-4)
    assert by_symbol["chi_y"]["Clause"] == "EN 1993-1-1 6.3.1.2(1)"
    # Simple formulas are live, and a later run writes over them.
    assert any(str(value).startswith("=N(0)+E") for value in live_values(book))
    assert book.solve().exit_status == 0
    assert not book.findings("look")


def live_values(book):
    return [cell.value for cell in openpyxl.load_workbook(book.path)["Workings"]["E"]]


def test_workings_go_when_nobody_asks_for_them_any_more(frame, make_book):
    frame["Job"].append(["Workings for", "AB"])
    book = make_book(frame)
    book.solve()
    book.change("Job", "B2", None)
    book.solve()
    assert book.rows("Workings", "Clause") == []
