"""Rules of combination: every action leads, nothing is said twice."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from strutbook.combinations import RULES, NatureNeeded

NATURES = ["permanent", "imposed", "snow", "wind", "temperature", "settlement", "accidental"]
cases = st.dictionaries(st.text("ABCDEFGH", min_size=1, max_size=3), st.sampled_from(NATURES), min_size=1, max_size=6)


@pytest.mark.parametrize("rule", RULES)
@given(natures=cases)
def test_every_combination_is_distinct_and_every_case_takes_part(rule, natures):
    made = RULES[rule](natures)
    keys = [(one.purpose, tuple(sorted(one.factors.items()))) for one in made]
    assert len(set(keys)) == len(keys)
    assert len({one.name for one in made}) == len(made)
    taking_part = {case for one in made for case, factor in one.factors.items() if factor}
    assert taking_part == set(natures)
    for one in made:
        assert set(one.factors) <= set(natures)
        permanent = {case for case, nature in natures.items() if nature in ("permanent", "settlement")}
        assert permanent <= set(one.factors)


def test_each_variable_action_leads_in_turn_with_the_others_beside_it():
    made = {one.name: one.factors for one in RULES["EN 1990 6.10"]({"G": "permanent", "S": "snow", "W": "wind"})}
    assert made["6.10 S + W"] == {"G": 1.35, "S": 1.5, "W": 0.9}
    assert made["6.10 W + S"] == {"G": 1.35, "W": 1.5, "S": 0.75}
    assert made["6.10 G inf W"] == {"G": 1.0, "W": 1.5}


def test_the_pair_reduces_permanent_or_variable_actions():
    made = {one.name: one.factors for one in RULES["EN 1990 6.10a/b"]({"G": "permanent", "Q": "imposed"})}
    assert made["6.10a Q"] == {"G": 1.35, "Q": pytest.approx(1.05)}
    assert made["6.10b Q"] == {"G": pytest.approx(1.35 * 0.85), "Q": 1.5}


@pytest.mark.parametrize(("rule", "snow", "beside"), [("ASCE 7-16 LRFD", 1.6, 0.5), ("ASCE 7-22 LRFD", 1.0, 0.3)])
def test_snow_of_the_editions_is_never_mixed(rule, snow, beside):
    made = {one.name: one.factors for one in RULES[rule]({"D": "permanent", "L": "imposed", "S": "snow", "W": "wind"})}
    assert made["3a L + S"] == {"D": 1.2, "L": 1.0, "S": snow}
    assert made["2 L + S"] == {"D": 1.2, "L": 1.6, "S": beside}
    assert made["5 W"] == {"D": 0.9, "W": 1.0}


def test_allowable_stress_design_has_its_uplift_combination():
    made = {one.name: one.factors for one in RULES["ASCE 7-22 ASD"]({"D": "permanent", "S": "snow", "W": "wind"})}
    assert made["7 W"] == {"D": 0.6, "W": 0.6}
    assert made["3 S"] == {"D": 1.0, "S": 0.7}


def test_winds_from_two_sides_never_blow_together():
    for rule in RULES.values():
        for one in rule({"D": "permanent", "left": "wind", "right": "wind"}):
            assert not {"left", "right"} <= {case for case, factor in one.factors.items() if factor}


def test_case_without_a_nature_is_named():
    with pytest.raises(NatureNeeded, match="the case Q has no nature"):
        RULES["EN 1990 6.10"]({"G": "permanent", "Q": ""})
