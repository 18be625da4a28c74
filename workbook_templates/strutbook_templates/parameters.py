"""Every shape that a workbook can start from and the parameters it takes, declared once.

The check of values, the defaults and the help of the command line all follow from `SHAPES`.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from strutbook_addin.tables.units import Dimension
from strutbook_templates.unit_systems import UNIT_SYSTEMS, UnitSystem

Value = float | int | str


@dataclass(frozen=True)
class Parameter:
    """One parameter of a shape: a quantity, a whole number, or a choice."""

    name: str
    meaning: str  #: for the help of the command line
    defaults: Mapping[str, Value]  #: by the name of the unit system
    dimension: Dimension | None = None
    whole: bool = False
    least: int = 0  #: smallest whole number
    most: int = 0  #: largest whole number
    may_be_zero: bool = False
    choices: tuple[str, ...] = ()

    def unit(self, system: UnitSystem) -> str:
        """Unit in which the parameter is given, empty for numbers and choices."""
        return system.units[self.dimension] if self.dimension else ""

    def checked(self, value: object, system: UnitSystem) -> Value:
        """The value when it fits.

        Raises
        ------
        ValueError
            With a sentence that says what was given and what was expected.
        """
        if self.choices:
            return self._choice(value)
        number = _number(value)
        if number is not None and self.whole and number.is_integer() and self.least <= number <= self.most:
            return int(number)
        if number is not None and not self.whole and (number > 0 or (self.may_be_zero and number == 0)):
            return number
        raise ValueError(f"{self.name} is {value!r}; expected {self._expected(system)}.")

    def _choice(self, value: object) -> str:
        text = str(value).strip().casefold()
        if text not in self.choices:
            raise ValueError(f"{self.name} is {value!r}; expected one of: {', '.join(self.choices)}.")
        return text

    def _expected(self, system: UnitSystem) -> str:
        if self.whole:
            return f"a whole number from {self.least} to {self.most}"
        bound = "of 0 or more" if self.may_be_zero else "above 0"
        return f"a number {bound} in {self.unit(system)}"


@dataclass(frozen=True)
class Shape:
    """One shape of truss, or a workbook with empty tables."""

    name: str
    meaning: str
    parameters: tuple[Parameter, ...] = ()

    def values(self, given: Mapping[str, object], system: UnitSystem) -> dict[str, Value]:
        """All parameters of the shape, those that are not given at their defaults.

        Raises
        ------
        ValueError
            When a parameter is not known or does not fit.
        """
        names = [parameter.name for parameter in self.parameters]
        for name in given:
            if name not in names:
                takes = f"it takes {', '.join(names)}" if names else "it takes no parameters"
                raise ValueError(f"the shape {self.name} has no parameter {name!r}; {takes}.")
        return {
            parameter.name: parameter.checked(given.get(parameter.name, parameter.defaults[system.name]), system)
            for parameter in self.parameters
        }


def shape_of(name: str) -> Shape:
    """Shape by its name.

    Raises
    ------
    ValueError
        When there is no such shape.
    """
    if name not in SHAPES:
        raise ValueError(f"the shape {name!r} is not known; expected one of: {', '.join(SHAPES)}.")
    return SHAPES[name]


def unit_system(name: str) -> UnitSystem:
    """Set of units by its name.

    Raises
    ------
    ValueError
        When there is no such set.
    """
    if name not in UNIT_SYSTEMS:
        raise ValueError(f"the units {name!r} are not known; expected one of: {', '.join(UNIT_SYSTEMS)}.")
    return UNIT_SYSTEMS[name]


def _number(value: object) -> float | None:
    if isinstance(value, bool) or not isinstance(value, (int, float, str)):
        return None
    try:
        number = float(value)
    except ValueError:
        return None
    # Beyond this no unit of a truss makes sense, and products of parameters could overflow.
    return number if abs(number) < 1e9 else None


def _quantity(
    name: str, dimension: Dimension, metric: float, us: float, meaning: str, *, may_be_zero: bool = False
) -> Parameter:
    return Parameter(name, meaning, {"metric": metric, "us": us}, dimension, may_be_zero=may_be_zero)


def _count(name: str, default: int, least: int, most: int, meaning: str) -> Parameter:
    return Parameter(name, meaning, dict.fromkeys(UNIT_SYSTEMS, default), whole=True, least=least, most=most)


def _choice(name: str, default: str, choices: tuple[str, ...], meaning: str) -> Parameter:
    return Parameter(name, meaning, dict.fromkeys(UNIT_SYSTEMS, default), choices=choices)


_SPAN = _quantity("span", Dimension.LENGTH, 24.0, 80.0, "distance between the supports")
_DEPTH = _quantity("depth", Dimension.LENGTH, 3.0, 10.0, "distance between the chords")
_PERMANENT = _quantity(
    "permanent",
    Dimension.LINE_LOAD,
    4.0,
    0.25,
    "permanent load beside self weight, downwards",
    may_be_zero=True,
)
_IMPOSED = _quantity("imposed", Dimension.LINE_LOAD, 10.0, 0.75, "imposed load, downwards", may_be_zero=True)
_ROOF_LOADS = (
    _quantity(
        "permanent",
        Dimension.LINE_LOAD,
        2.0,
        0.15,
        "permanent load beside self weight, downwards",
        may_be_zero=True,
    ),
    _quantity("snow", Dimension.LINE_LOAD, 4.0, 0.3, "snow load on plan, downwards", may_be_zero=True),
    _quantity("uplift", Dimension.LINE_LOAD, 3.0, 0.2, "wind uplift on plan, upwards", may_be_zero=True),
)
_EVEN_PANELS = _count("panels", 8, 4, 200, "number of panels, even")
_GIRDER = (_SPAN, _EVEN_PANELS, _DEPTH, _PERMANENT, _IMPOSED)

#: Every shape by its name, in the order in which they are offered.
SHAPES = {
    shape.name: shape
    for shape in (
        Shape("plane", "empty tables of a plane truss"),
        Shape("space", "empty tables of a space truss"),
        Shape("pratt", "Pratt truss, deck on the lower chord", _GIRDER),
        Shape("howe", "Howe truss, deck on the lower chord", _GIRDER),
        Shape(
            "warren",
            "Warren truss, deck on the lower chord",
            (
                _SPAN,
                _count("panels", 8, 2, 200, "number of panels (even with verticals)"),
                _DEPTH,
                _choice("verticals", "no", ("no", "yes"), "a vertical at every joint of the lower chord"),
                _PERMANENT,
                _IMPOSED,
            ),
        ),
        Shape(
            "fink",
            "Fink roof truss, load on the rafters",
            (
                _quantity("span", Dimension.LENGTH, 16.0, 48.0, "distance between the supports"),
                _count("panels", 8, 4, 16, "number of rafter panels on both slopes: 4, 8 or 16"),
                _quantity("rise", Dimension.LENGTH, 4.0, 12.0, "height of the apex above the supports"),
                *_ROOF_LOADS,
            ),
        ),
        Shape("k", "K truss, deck on the lower chord", _GIRDER),
        Shape(
            "tower",
            "square tower with four legs, braced faces and plan bracing",
            (
                _quantity("height", Dimension.LENGTH, 24.0, 80.0, "height"),
                _count("bays", 6, 1, 60, "number of bays over the height"),
                _quantity("base", Dimension.LENGTH, 4.0, 12.0, "width at the foot"),
                _quantity("top", Dimension.LENGTH, 2.0, 6.0, "width at the top"),
                _quantity(
                    "permanent",
                    Dimension.FORCE,
                    40.0,
                    8.0,
                    "permanent load on the top beside self weight, downwards",
                    may_be_zero=True,
                ),
                _quantity(
                    "imposed",
                    Dimension.FORCE,
                    20.0,
                    4.0,
                    "imposed load on the top, downwards",
                    may_be_zero=True,
                ),
                _quantity("wind", Dimension.LINE_LOAD, 2.0, 0.15, "wind on the height, along x", may_be_zero=True),
            ),
        ),
    )
}
