"""A cross-section: its dimensions and the properties that follow from them."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from enum import StrEnum
from math import nan, sqrt

from strutbook.errors import StrutbookError


class Shape(StrEnum):
    """What a cross-section looks like; checks choose their clauses by it."""

    CIRCULAR_HOLLOW = "circular hollow"
    RECTANGULAR_HOLLOW = "rectangular hollow"
    ANGLE = "angle"
    DOUBLE_ANGLE = "double angle"
    CHANNEL = "channel"
    I_SECTION = "I or H"
    TEE = "tee"
    FLAT = "flat or plate"
    ROUND = "round bar"
    TIMBER = "timber rectangle"
    GENERAL = "general"  #: properties given, shape not


class Product(StrEnum):
    """How a section is made, on which buckling curves and corner radii depend."""

    HOT_FINISHED = "hot finished"
    COLD_FORMED = "cold formed"
    ROLLED = "rolled"
    WELDED = "welded"
    SAWN = "sawn"
    GLUED_LAMINATED = "glued laminated"
    UNKNOWN = "unknown"


#: kg/m³ (EN 1991-1-1 table A.4, and the product standards of sections)
STEEL_DENSITY = 7850.0


class UnknownSection(StrutbookError):
    """A designation that names no section, or dimensions that make none."""


def steel_mass(area: float) -> float:
    """Mass of a steel section in kg/m from its area in m²."""
    return STEEL_DENSITY * area


def checked(name: str, fits: bool, expected: str) -> None:
    """Refuse dimensions that make no section.

    Raises
    ------
    UnknownSection
        With a sentence, when they do not fit.
    """
    if not fits:
        raise UnknownSection(f"the dimensions of {name} make no section; expected {expected}.")


@dataclass(frozen=True)
class Section:
    """A cross-section in SI units.

    Axis y is parallel to the flanges (to the width of a rectangle, the connected legs' outstanding legs of a double
    angle), axis z to the web, as in EN 1993-1-1 Figure 1.1. A member stands in its truss so that it bends about y
    when it buckles in the plane of the truss, and about z when it buckles out of it.
    """

    name: str
    shape: Shape
    product: Product
    #: m²
    area: float
    #: m⁴ about the centroidal axes y and z
    second_moment_y: float
    second_moment_z: float
    #: m⁴ about the weakest centroidal axis
    second_moment_min: float
    #: kg/m
    mass: float
    #: overall dimensions, m; by name: depth, width, web, flange, wall, leg, short_leg, gap, root_radius ...
    dimensions: dict[str, float] = field(default_factory=dict)
    #: buckling curve of EN 1993-1-1 table 6.2, where the user states it
    buckling_curve: str = ""
    #: St. Venant torsion constant m⁴ and warping constant m⁶
    torsion_constant: float = nan
    warping_constant: float = nan
    #: m from the centroid to the shear centre along y and z
    shear_centre_y: float = 0.0
    shear_centre_z: float = 0.0

    def with_mass(self, mass: float) -> Section:
        """The same section with another mass in kg/m."""
        return replace(self, mass=mass)

    def with_smallest_radius(self, radius: float) -> Section:
        """The same section with the smallest radius of gyration, m, that its table prints."""
        return replace(self, second_moment_min=self.area * radius**2)

    @property
    def radius_y(self) -> float:
        """Radius of gyration about y, m."""
        return sqrt(self.second_moment_y / self.area)

    @property
    def radius_z(self) -> float:
        """Radius of gyration about z, m."""
        return sqrt(self.second_moment_z / self.area)

    @property
    def radius_min(self) -> float:
        """Radius of gyration about the weakest axis, m."""
        return sqrt(self.second_moment_min / self.area)
