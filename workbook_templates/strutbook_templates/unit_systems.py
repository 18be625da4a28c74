"""The two sets of units in which templates are written, chosen once for every dimension of the schema."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from strutbook_addin.tables.schema import Column
from strutbook_addin.tables.units import Dimension

#: Lengths of the size of the truss; all other lengths (displacements, misfits) are of the size of a gap.
_LARGE_LENGTHS = frozenset({"x", "y", "z", "Length", "Span", "Buckling length in", "Buckling length out"})

#: Digits behind the point that an engineer reads in each unit; units that are not here show what was typed.
_DECIMALS = {"m": 3, "mm": 2, "ft": 3, "in": 3, "kN": 2, "kip": 2}


@dataclass(frozen=True)
class UnitSystem:
    """Units of one set of templates."""

    name: str  #: as the user asks for it
    units: Mapping[Dimension, str]
    small_length: str  #: for displacements, misfits and settlements
    paper: str  #: `A4` or `Letter`

    def unit(self, column: Column) -> str:
        """Unit of a column, empty when it has no dimension."""
        if column.dimension is None:
            return ""
        if column.dimension is Dimension.LENGTH and column.name not in _LARGE_LENGTHS:
            return self.small_length
        return self.units[column.dimension]

    def header(self, column: Column) -> str:
        """Header of a column with its unit: `x [m]`."""
        unit = self.unit(column)
        return f"{column.name} [{unit}]" if unit else column.name

    def unit_of_results(self, dimension: Dimension) -> str:
        """Unit of result columns that a run makes."""
        return self.small_length if dimension is Dimension.LENGTH else self.units[dimension]


def number_format(unit: str) -> str:
    """Number format of cells in a unit.

    >>> number_format("m"), number_format("1e-6/K")
    ('0.000', 'General')
    """
    decimals = _DECIMALS.get(unit)
    return "General" if decimals is None else "0." + "0" * decimals


METRIC = UnitSystem(
    "metric",
    {
        Dimension.LENGTH: "m",
        Dimension.AREA: "cm2",
        Dimension.FORCE: "kN",
        Dimension.STRESS: "N/mm2",
        Dimension.LINE_LOAD: "kN/m",
        Dimension.SPRING: "kN/mm",
        Dimension.TEMPERATURE: "K",
        Dimension.DENSITY: "kg/m3",
        Dimension.EXPANSION: "1e-6/K",
        Dimension.MASS: "kg",
    },
    small_length="mm",
    paper="A4",
)

US = UnitSystem(
    "us",
    {
        Dimension.LENGTH: "ft",
        Dimension.AREA: "in2",
        Dimension.FORCE: "kip",
        Dimension.STRESS: "ksi",
        Dimension.LINE_LOAD: "kip/ft",
        Dimension.SPRING: "kip/in",
        Dimension.TEMPERATURE: "degF",
        Dimension.DENSITY: "lb/ft3",
        Dimension.EXPANSION: "1e-6/degF",
        Dimension.MASS: "lb",
    },
    small_length="in",
    paper="Letter",
)

#: Systems by the name that a user gives.
UNIT_SYSTEMS = {system.name: system for system in (METRIC, US)}
