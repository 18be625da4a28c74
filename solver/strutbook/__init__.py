"""Pin-jointed trusses: arrays in, arrays out, SI units.

The main job is :func:`analyse`; see its example. The theory stands on one matrix, see `strutbook.equilibrium`.
"""

from strutbook.actions import Actions
from strutbook.analysis import Analysis, analyse
from strutbook.equilibrium import Equilibrium, equilibrium
from strutbook.errors import InvalidTruss, NotBalanced, StiffnessNeeded, StrutbookError, Unstable
from strutbook.mechanism_words import describe_mechanism
from strutbook.mechanisms import Mechanism
from strutbook.member_loads import (
    STANDARD_GRAVITY,
    line_load,
    projected_line_load,
    self_weight,
    thermal_elongation,
)
from strutbook.stability import Stability, stability
from strutbook.supports import Supports
from strutbook.truss import Truss

__all__ = [
    "STANDARD_GRAVITY",
    "Actions",
    "Analysis",
    "Equilibrium",
    "InvalidTruss",
    "Mechanism",
    "NotBalanced",
    "Stability",
    "StiffnessNeeded",
    "StrutbookError",
    "Supports",
    "Truss",
    "Unstable",
    "analyse",
    "describe_mechanism",
    "equilibrium",
    "line_load",
    "projected_line_load",
    "self_weight",
    "stability",
    "thermal_elongation",
]
