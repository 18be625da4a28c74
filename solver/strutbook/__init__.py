"""Pin-jointed trusses: arrays in, arrays out, SI units.

The main job is :func:`analyse`; see its example. The theory stands on one matrix, see `strutbook.equilibrium`.
"""

from strutbook.actions import Actions
from strutbook.analysis import Analysis, analyse
from strutbook.equilibrium import Equilibrium, equilibrium
from strutbook.errors import (
    InvalidTruss,
    NotBalanced,
    NotSettled,
    SlackMechanism,
    StiffnessNeeded,
    StrutbookError,
    Unstable,
)
from strutbook.mechanism_words import describe_mechanism
from strutbook.mechanisms import Mechanism
from strutbook.member_loads import (
    STANDARD_GRAVITY,
    line_load,
    projected_line_load,
    self_weight,
    thermal_elongation,
)
from strutbook.one_sided import OneSided, Takes, analyse_one_sided
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
    "NotSettled",
    "OneSided",
    "SlackMechanism",
    "Stability",
    "StiffnessNeeded",
    "StrutbookError",
    "Supports",
    "Takes",
    "Truss",
    "Unstable",
    "analyse",
    "analyse_one_sided",
    "describe_mechanism",
    "equilibrium",
    "line_load",
    "projected_line_load",
    "self_weight",
    "stability",
    "thermal_elongation",
]
