"""An empty sheet `Combinations` is filled in by the rule that `Job` names."""

from __future__ import annotations

import pytest

from strutbook_addin.findings import Level


@pytest.fixture
def frame(triangle):
    triangle["Loads"] = [["Case", "Joint", "Fy [kN]"], ["G", "C", -10], ["S", "C", -6], ["W", "C", 4]]
    triangle["Cases"] = [["Case", "Nature"], ["G", "permanent"], ["S", "snow"], ["W", "wind"]]
    triangle["Job"] = [["Combination rule", "EN 1990 6.10"]]
    return triangle


def test_every_variable_action_leads_and_permanent_is_favourable_once(frame, make_book):
    book = make_book(frame)
    assert book.solve().exit_status == 0
    rows = {row["Combination"]: row for row in book.rows("Combinations", "Combination")}
    assert (rows["6.10 S + W"]["G"], rows["6.10 S + W"]["S"], rows["6.10 S + W"]["W"]) == (1.35, 1.5, 0.9)
    assert (rows["6.10 W + S"]["G"], rows["6.10 W + S"]["S"], rows["6.10 W + S"]["W"]) == (1.35, 0.75, 1.5)
    assert (rows["6.10 G inf W"]["G"], rows["6.10 G inf W"]["W"]) == (1.0, 1.5)
    assert rows["6.14 S"]["For"] == "service"
    assert rows["6.10 S"]["Made by"] == "EN 1990 6.10"
    forces = book.rows("Forces", "Member")[0]
    assert "6.10 S + W [kN]" in forces


def test_what_was_filled_in_is_read_like_typed_rows(frame, make_book):
    book = make_book(frame)
    first = book.solve().outcome
    second = book.solve().outcome
    assert first.digest == second.digest
    assert any("combinations were made by EN 1990 6.10" in finding.what for finding in first.findings)
    assert not any("combinations were made" in finding.what for finding in second.findings)


def test_typed_combinations_are_left_alone(frame, make_book):
    frame["Combinations"] = [["Combination", "For", "G", "S", "W"], ["mine", "strength", 1, 1, 1]]
    book = make_book(frame)
    book.solve()
    assert [row["Combination"] for row in book.rows("Combinations", "Combination")] == ["mine"]


def test_headers_that_stand_there_are_used(frame, make_book):
    frame["Combinations"] = [["My title"], [], ["W", "remark", "For", "Combination"]]
    book = make_book(frame)
    assert book.solve().exit_status == 0
    row = next(row for row in book.rows("Combinations", "Combination") if row["Combination"] == "6.10 G inf W")
    assert (row["W"], row["G"], row["remark"]) == (1.5, 1.0, None)


def test_check_only_uses_the_combinations_and_writes_none(frame, make_book):
    from strutbook_addin.solving import solve_file

    book = make_book(frame)
    before = book.path.read_bytes()
    outcome = solve_file(book.path, None).outcome
    assert "6.10 S" in outcome.results.model.combinations.names
    assert book.path.read_bytes() == before


@pytest.mark.parametrize(
    ("change", "where", "sentence"),
    [
        (lambda sheets: sheets["Cases"][2].__setitem__(1, None), "Cases!B3", "the case S has no nature"),
        (lambda sheets: sheets.pop("Cases"), "Job!B1", "the case G has no nature"),
        (lambda sheets: sheets["Job"][0].__setitem__(1, "EN 1991"), "Job!B1", "'EN 1991' is no rule that is known"),
    ],
)
def test_what_a_rule_cannot_do_gets_a_sentence(frame, make_book, change, where, sentence):
    change(frame)
    book = make_book(frame)
    assert book.solve().exit_status == 2
    (stop,) = book.findings(Level.STOP)
    assert stop.where == where
    assert sentence in stop.what
