"""Load combinations that published rules make from the natures of load cases."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

from strutbook.combinations import asce7, en1990
from strutbook.combinations.generated import Generated, NatureNeeded

__all__ = ["RULES", "Generated", "NatureNeeded"]

#: Rules by the name that a user writes; each takes the nature of every case by its name.
RULES: dict[str, Callable[[dict[str, str]], list[Generated]]] = {
    "EN 1990 6.10": en1990.expression_6_10,
    "EN 1990 6.10a/b": en1990.expressions_6_10_a_and_b,
    "ASCE 7-22 LRFD": partial(asce7.strength_design, edition=2022),
    "ASCE 7-22 ASD": partial(asce7.allowable_stress_design, edition=2022),
    "ASCE 7-16 LRFD": partial(asce7.strength_design, edition=2016),
    "ASCE 7-16 ASD": partial(asce7.allowable_stress_design, edition=2016),
}
