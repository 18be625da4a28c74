"""Sheets that may follow from what was written, and those that cannot."""

from __future__ import annotations

import pytest

from strutbook_addin.xlsx.dependence import following_sheets


@pytest.mark.parametrize(
    "formula",
    [
        "Members!D3",
        "members!D3*2",
        "'Members'!D3",
        "SUM('Members'!D3:D9)",
        "INDIRECT(A1)",
        "indirect (A1)",
        "SUM(First:Last!A1)",
        "SUM('First one:Last one'!A1)",
        "SUM(Table1[Length])",
        "[1]Sheet1!A1",
        "longest*2",
    ],
)
def test_formula_that_may_reach_the_written_sheet_follows(formula: str) -> None:
    names = {"Longest": "MAX(Members!$D$3:$D$9)"}
    assert following_sheets({"Members"}, {"Other": ["1+1", formula]}, names) == {"Other"}


@pytest.mark.parametrize("formula", ["A1*2", "SUM(A1:B9)", "Own!A1", "IF(A1>0,\"a\",'b c'!D4)", "TODAY()", "width"])
def test_formula_that_reaches_only_other_sheets_does_not(formula: str) -> None:
    names = {"Width": "Own!$A$1", "Area": "Members!$A$1"}
    assert following_sheets({"Members"}, {"Other": [formula]}, names) == set()


def test_formulas_of_the_written_sheet_follow() -> None:
    assert following_sheets({"S"}, {"S": ["A1"], "T": ["A1"]}, {}) == {"S"}


def test_sheets_follow_through_others_and_through_names() -> None:
    formulas = {"A": ["B1"], "B": ["A!B1"], "C": ["depth"], "D": ["E!B1"], "E": ["B1"]}
    names = {"depth": "height*2", "height": "B!$A$1"}
    assert following_sheets({"A"}, formulas, names) == {"A", "B", "C"}


def test_sheet_with_an_apostrophe_is_found() -> None:
    assert following_sheets({"Ann's"}, {"Other": ["'Ann''s'!A1"]}, {}) == {"Other"}
