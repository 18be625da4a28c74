"""Areas and moments of outlines made of rectangles and of corners that are filled or rounded; all exact."""

from __future__ import annotations

from dataclasses import dataclass
from math import atan2, hypot, pi


@dataclass(frozen=True)
class Outline:
    """Area and moments of a figure about fixed axes y (to the right) and z (up)."""

    #: m²
    area: float = 0.0
    #: m³: integrals of y and of z
    moment_y: float = 0.0
    moment_z: float = 0.0
    #: m⁴: integrals of y², z² and y z
    square_y: float = 0.0
    square_z: float = 0.0
    product: float = 0.0

    def __add__(self, other: Outline) -> Outline:
        return Outline(
            self.area + other.area,
            self.moment_y + other.moment_y,
            self.moment_z + other.moment_z,
            self.square_y + other.square_y,
            self.square_z + other.square_z,
            self.product + other.product,
        )

    def __neg__(self) -> Outline:
        return Outline(-self.area, -self.moment_y, -self.moment_z, -self.square_y, -self.square_z, -self.product)

    def __sub__(self, other: Outline) -> Outline:
        return self + -other

    @property
    def centroid(self) -> tuple[float, float]:
        """Coordinates y and z of the centroid, m."""
        return self.moment_y / self.area, self.moment_z / self.area

    @property
    def second_moments(self) -> tuple[float, float, float]:
        """Second moments about the centroidal axes y and z, and the product, m⁴."""
        y, z = self.centroid
        return (
            self.square_z - self.area * z * z,
            self.square_y - self.area * y * y,
            self.product - self.area * y * z,
        )

    @property
    def smallest_second_moment(self) -> float:
        """Second moment about the weakest centroidal axis, m⁴ (Mohr's circle)."""
        about_y, about_z, product = self.second_moments
        return (about_y + about_z) / 2 - hypot((about_y - about_z) / 2, product)

    @property
    def weak_axis(self) -> float:
        """Angle from axis y to the weakest axis, radians."""
        about_y, about_z, product = self.second_moments
        return atan2(2 * product, about_z - about_y) / 2


def rectangle(left: float, bottom: float, right: float, top: float) -> Outline:
    """Rectangle between two corners, m.

    >>> rectangle(0, 0, 2, 3).second_moments[0]
    4.5
    """
    width, height = right - left, top - bottom
    area = width * height
    y, z = (left + right) / 2, (bottom + top) / 2
    return Outline(
        area, area * y, area * z, area * (y * y + width**2 / 12), area * (z * z + height**2 / 12), area * y * z
    )


def quarter_disc(y: float, z: float, radius: float, towards_y: int, towards_z: int) -> Outline:
    """Quarter of a disc about a centre, in the quadrant of the signs `towards_y` and `towards_z`."""
    area = pi * radius**2 / 4
    arm = 4 * radius / (3 * pi)
    own = pi * radius**4 / 16 - area * arm**2
    product = (radius**4 / 8 - area * arm**2) * towards_y * towards_z
    y, z = y + towards_y * arm, z + towards_z * arm
    return Outline(area, area * y, area * z, own + area * y * y, own + area * z * z, product + area * y * z)


def corner(y: float, z: float, radius: float, towards_y: int, towards_z: int) -> Outline:
    """What lies between a corner and the arc that touches both its sides.

    Added in a re-entrant corner (pointing into the void) it is a fillet; subtracted from an outer corner
    (pointing into the material) it rounds the corner off.
    """
    square = rectangle(
        min(y, y + towards_y * radius),
        min(z, z + towards_z * radius),
        max(y, y + towards_y * radius),
        max(z, z + towards_z * radius),
    )
    return square - quarter_disc(y + towards_y * radius, z + towards_z * radius, radius, -towards_y, -towards_z)
