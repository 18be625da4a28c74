"""Angles and double angles: EN 10056-1, and the angles of the AISC Manual."""

from __future__ import annotations

from dataclasses import replace
from math import cos, sin

from strutbook.sections.outline import Outline, corner, rectangle
from strutbook.sections.section import Product, Section, Shape, checked, steel_mass


def angle(name: str, leg: float, short_leg: float, thickness: float, root_radius: float) -> Section:
    """Angle with its long leg along z; toes rounded by half the root radius (EN 10056-1); m.

    >>> section = angle("L 100x100x10", 0.1, 0.1, 0.01, 0.012)
    >>> round(section.area * 1e4, 1), round(section.radius_min * 1e2, 2)
    (19.2, 1.95)
    """
    checked(name, 0 < thickness < short_leg <= leg, "legs longer than their thickness")
    figure = _outline(leg, short_leg, thickness, root_radius)
    about_y, about_z, _ = figure.second_moments
    y, z = figure.centroid
    dimensions = {
        "leg": leg,
        "short_leg": short_leg,
        "thickness": thickness,
        "root_radius": root_radius,
        "toe_radius": root_radius / 2,
        "centroid_y": y,
        "centroid_z": z,
    }
    # The shear centre is where the centre lines of the legs meet.
    return Section(
        name,
        Shape.ANGLE,
        Product.ROLLED,
        figure.area,
        about_y,
        about_z,
        figure.smallest_second_moment,
        steel_mass(figure.area),
        dimensions,
        torsion_constant=(leg + short_leg - thickness) * thickness**3 / 3,
        warping_constant=0.0,
        shear_centre_y=-(y - thickness / 2),
        shear_centre_z=-(z - thickness / 2),
    )


def principal_shear_centre(section: Section) -> tuple[float, float]:
    """Distances of an angle's shear centre from its centroid along the strong and the weak axis, m."""
    dimensions = section.dimensions
    figure = _outline(dimensions["leg"], dimensions["short_leg"], dimensions["thickness"], dimensions["root_radius"])
    turn = figure.weak_axis
    y, z = section.shear_centre_y, section.shear_centre_z
    along_weak = y * cos(turn) + z * sin(turn)
    across = -y * sin(turn) + z * cos(turn)
    return across, along_weak


def double_angle(name: str, single: Section, gap: float, *, short_legs_together: bool = False) -> Section:
    """Two angles back to back, their connected legs along z, with a gap between them; m.

    Long legs are together unless the short ones are; both halves are taken to act as one.

    >>> half = angle("L 150x150x15", 0.150, 0.150, 0.015, 0.016)
    >>> pair = double_angle("2L 150x150x15 gap 10", half, 0.010)
    >>> round(pair.second_moment_z * 1e8), round(pair.second_moment_y * 1e8)
    (3735, 1796)
    """
    checked(name, gap >= 0, "a gap of 0 or more")
    dimensions = single.dimensions
    connected, outstanding = dimensions["leg"], dimensions["short_leg"]
    across, along = dimensions["centroid_y"], dimensions["centroid_z"]
    about_y, about_z = single.second_moment_y, single.second_moment_z
    if short_legs_together:
        connected, outstanding = outstanding, connected
        across, along = along, across
        about_y, about_z = about_z, about_y
    arm = gap / 2 + across
    pair_y, pair_z = 2 * about_y, 2 * (about_z + single.area * arm**2)
    return Section(
        name,
        Shape.DOUBLE_ANGLE,
        Product.ROLLED,
        2 * single.area,
        pair_y,
        pair_z,
        min(pair_y, pair_z),
        2 * single.mass,
        {
            **dimensions,
            "connected_leg": connected,
            "outstanding_leg": outstanding,
            "gap": gap,
            "depth": connected,
            "width": 2 * outstanding + gap,
            "single_area": single.area,
            "single_radius_min": single.radius_min,
            "single_radius_parallel": (about_z / single.area) ** 0.5,
        },
        torsion_constant=2 * single.torsion_constant,
        warping_constant=0.0,
        shear_centre_z=-(along - dimensions["thickness"] / 2),
    )


def with_table_values(section: Section, area: float, second_moment: float, radius_min: float) -> Section:
    """An equal-leg angle with the area, second moment and smallest radius that its table prints."""
    return replace(
        section,
        area=area,
        second_moment_y=second_moment,
        second_moment_z=second_moment,
        second_moment_min=area * radius_min**2,
        mass=steel_mass(area),
    )


def _outline(leg: float, short_leg: float, thickness: float, root_radius: float) -> Outline:
    figure = rectangle(0, 0, thickness, leg) + rectangle(thickness, 0, short_leg, thickness)
    figure = figure + corner(thickness, thickness, root_radius, 1, 1)
    toe = root_radius / 2
    return figure - corner(thickness, leg, toe, -1, -1) - corner(short_leg, thickness, toe, -1, -1)
