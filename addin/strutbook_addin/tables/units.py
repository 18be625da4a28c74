"""Units in headers: ``Area [cm2]`` becomes a name, a unit and one factor to SI.

Everyday units stand in a table; a unit that is not there is worked out once by pint and remembered.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from enum import Enum
from functools import lru_cache


class Dimension(Enum):
    """Physical dimension of a column: what it is called, its SI unit and units to suggest."""

    LENGTH = ("a length", "m", ("m", "mm", "ft", "in"))
    AREA = ("an area", "m2", ("mm2", "cm2", "m2", "in2"))
    FORCE = ("a force", "N", ("kN", "N", "kip", "lbf"))
    STRESS = ("a stress", "Pa", ("N/mm2", "MPa", "GPa", "ksi"))
    LINE_LOAD = ("a force per length", "N/m", ("kN/m", "N/m", "kip/ft", "lbf/ft"))
    SPRING = ("a force per length", "N/m", ("kN/mm", "kN/m", "kip/in"))
    TEMPERATURE = ("a temperature difference", "K", ("K", "degC", "degF"))
    DENSITY = ("a mass per volume", "kg/m3", ("kg/m3", "lb/ft3"))
    MASS = ("a mass", "kg", ("kg", "t", "lb"))
    EXPANSION = ("a strain per temperature", "1/K", ("1/K", "1e-6/K", "1/degF"))

    def __init__(self, words: str, si_unit: str, suggested: tuple[str, ...]) -> None:
        self.words = words
        self.si_unit = si_unit
        self.suggested = suggested


class UnitProblem(ValueError):
    """A unit that is not known, or that measures something else; the message says which."""


_INCH = 0.0254
_FOOT = 12 * _INCH
#: The pound-force follows from the avoirdupois pound and standard gravity (exact, NIST SP 811, appendix B).
_POUND = 0.45359237
_POUND_FORCE = _POUND * 9.80665

_LENGTHS = {"m": 1.0, "mm": 1e-3, "cm": 1e-2, "km": 1e3, "in": _INCH, "inch": _INCH, "ft": _FOOT}
_FORCES = {
    "N": 1.0,
    "kN": 1e3,
    "MN": 1e6,
    "lbf": _POUND_FORCE,
    # An engineer who writes lb over a column of forces means pounds of force.
    "lb": _POUND_FORCE,
    "lbs": _POUND_FORCE,
    "kip": 1e3 * _POUND_FORCE,
    "kips": 1e3 * _POUND_FORCE,
    "kgf": 9.80665,
    "tonf": 2e3 * _POUND_FORCE,
}


def _quotients(tops: dict[str, float], bottoms: dict[str, float], power: str = "") -> dict[str, float]:
    exponent = int(power or 1)
    return {
        f"{top}/{bottom}{power}": top_factor / bottom_factor**exponent
        for top, top_factor in tops.items()
        for bottom, bottom_factor in bottoms.items()
    }


_PER_LENGTH = {
    **_quotients(_FORCES, _LENGTHS),
    "plf": _POUND_FORCE / _FOOT,
    "klf": 1e3 * _POUND_FORCE / _FOOT,
}

_FACTORS: dict[Dimension, dict[str, float]] = {
    Dimension.LENGTH: _LENGTHS,
    Dimension.AREA: {f"{unit}2": factor**2 for unit, factor in _LENGTHS.items()},
    Dimension.FORCE: _FORCES,
    Dimension.STRESS: {
        **_quotients(_FORCES, _LENGTHS, "2"),
        "Pa": 1.0,
        "kPa": 1e3,
        "MPa": 1e6,
        "GPa": 1e9,
        "psi": _POUND_FORCE / _INCH**2,
        "ksi": 1e3 * _POUND_FORCE / _INCH**2,
        "psf": _POUND_FORCE / _FOOT**2,
        "ksf": 1e3 * _POUND_FORCE / _FOOT**2,
    },
    Dimension.LINE_LOAD: _PER_LENGTH,
    Dimension.SPRING: _PER_LENGTH,
    Dimension.TEMPERATURE: {"K": 1.0, "degC": 1.0, "C": 1.0, "degF": 5 / 9, "F": 5 / 9},
    Dimension.DENSITY: {
        "kg/m3": 1.0,
        "t/m3": 1e3,
        "g/cm3": 1e3,
        "lb/ft3": _POUND / _FOOT**3,
        "pcf": _POUND / _FOOT**3,
        "lb/in3": _POUND / _INCH**3,
    },
    Dimension.MASS: {"kg": 1.0, "t": 1e3, "lb": _POUND, "lbs": _POUND, "kip": 1e3 * _POUND},
    Dimension.EXPANSION: {
        "1/K": 1.0,
        "1/degC": 1.0,
        "1e-6/K": 1e-6,
        "1e-6/degC": 1e-6,
        "1/degF": 9 / 5,
        "1e-6/degF": 9e-6 / 5,
    },
}

_SPELLING = str.maketrans({"²": "2", "³": "3", "⁻": "-", "·": "*", "°": "deg", " ": None, "^": None, "_": None})
_PRODUCT_OF_UNITS = re.compile(r"(?:1/)?[A-Za-zµ]+[1-4]?(?:[*/][A-Za-zµ]+[1-4]?){0,4}")
_HEADER = re.compile(r"^\s*(?P<name>.*?)\s*[\[(]\s*(?P<unit>[^\[\]()]*?)\s*[\])]\s*$", re.DOTALL)


@dataclass(frozen=True)
class Unit:
    """A unit as the header writes it and its factor: SI value = number in the cell times factor."""

    text: str
    factor: float


@lru_cache(maxsize=4096)
def split_header(header: str) -> tuple[str, str | None]:
    """Split a header into its name and the unit in brackets, None without brackets.

    >>> split_header("Area [cm2]"), split_header("Member")
    (('Area', 'cm2'), ('Member', None))
    """
    match = _HEADER.match(header)
    if match is None:
        return header.strip(), None
    return match["name"], match["unit"]


@lru_cache(maxsize=4096)
def unit_of(text: str, dimension: Dimension) -> Unit:
    """Unit from its text in a header of a column of this dimension.

    Raises
    ------
    UnitProblem
        When nobody knows the unit, or it measures something else.

    Examples
    --------
    >>> unit_of("kip", Dimension.FORCE).factor
    4448.2216152605
    """
    spelled = text.translate(_SPELLING)
    factor = _FACTORS[dimension].get(spelled)
    if factor is None:
        factor = _factor_from_pint(text, spelled, dimension)
    return Unit(text, factor)


def _factor_from_pint(text: str, spelled: str, dimension: Dimension) -> float:
    if not spelled:
        raise UnitProblem("the brackets are empty")
    if dimension is not Dimension.FORCE and spelled in _FORCES:
        raise UnitProblem(f"{text!r} is a unit of a force")
    # pint computes what it parses (9**9**9 would never end), so only products of unit names reach it.
    if not _PRODUCT_OF_UNITS.fullmatch(spelled):
        raise UnitProblem(f"the unit {text!r} is not known")
    # Loading pint takes longer than solving a truss, so it is left to units that stand in no table.
    import pint  # noqa: TID251 - this is the one place that parses units

    try:
        quantity = pint.UnitRegistry().Quantity(1, _powers(spelled))
        return float(quantity.to(_powers(dimension.si_unit)).magnitude)
    except pint.DimensionalityError:
        raise UnitProblem(f"{text!r} does not measure {dimension.words}") from None
    except (pint.PintError, AttributeError):
        raise UnitProblem(f"the unit {text!r} is not known") from None


def _powers(spelled: str) -> str:
    """Headers write powers as plain digits (mm2); pint wants mm**2."""
    return re.sub(r"(?<=[A-Za-z])(\d)", r"**\1", spelled)
