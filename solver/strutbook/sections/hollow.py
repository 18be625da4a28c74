"""Hollow sections: hot-finished (EN 10210-2), cold-formed (EN 10219-2), and HSS and pipe (AISC Manual)."""

from __future__ import annotations

from math import floor, pi

from strutbook.sections.outline import Outline, corner, rectangle
from strutbook.sections.section import Product, Section, Shape, checked, steel_mass

#: ASTM A500 and A53: the wall on which design counts, as a part of the nominal one (AISC 360 B4.2).
DESIGN_WALL = 0.93
_MIL = 0.0254e-3


def circular(name: str, diameter: float, wall: float, product: Product) -> Section:
    """Circular hollow section; diameter and wall in m.

    >>> section = circular("CHS 88.9x5", 0.0889, 0.005, Product.HOT_FINISHED)
    >>> round(section.area * 1e4, 2), round(section.radius_y * 1e2, 2)
    (13.18, 2.97)
    """
    checked(name, 0 < 2 * wall < diameter, "a wall of less than half the diameter")
    return _tube(name, diameter, wall, product, {"wall": wall})


def us_circular(name: str, diameter: float, nominal_wall: float) -> Section:
    """Round HSS or pipe: properties of the design wall, mass of the nominal one."""
    checked(name, 0 < 2 * nominal_wall < diameter, "a wall of less than half the diameter")
    wall = DESIGN_WALL * nominal_wall
    section = _tube(name, diameter, wall, Product.COLD_FORMED, {"wall": nominal_wall, "design_wall": wall})
    nominal = pi * nominal_wall * (diameter - nominal_wall)
    return section.with_mass(steel_mass(nominal))


def rectangular(name: str, depth: float, width: float, wall: float, product: Product) -> Section:
    """Rectangular or square hollow section; m.

    Outer and inner corner radii for properties: 1.5 t and 1.0 t hot finished (EN 10210-2, annex B); cold formed 2 t to
    6 mm, 2.5 t to 10 mm, 3 t above, and t less inside (EN 10219-2, annex B).

    >>> section = rectangular("RHS 60x40x3", 0.060, 0.040, 0.003, Product.COLD_FORMED)
    >>> round(section.area * 1e4, 2), round(section.second_moment_y * 1e8, 2)
    (5.41, 25.38)
    """
    checked(name, 0 < 2 * wall < min(depth, width), "a wall of less than half the width")
    if product is Product.HOT_FINISHED:
        outer, inner = 1.5 * wall, 1.0 * wall
    else:
        outer = (2.0 if wall <= 0.006 else 2.5 if wall <= 0.010 else 3.0) * wall
        inner = outer - wall
    return _box(name, depth, width, wall, outer, inner, product, {"wall": wall})


def us_rectangular(name: str, depth: float, width: float, nominal_wall: float) -> Section:
    """Rectangular or square HSS: design wall, outer radius 2 t and inner t (AISC Manual, part 1).

    The Manual's tables stand on design walls rounded to a thousandth of an inch.
    """
    checked(name, 0 < 2 * nominal_wall < min(depth, width), "a wall of less than half the width")
    wall = floor(DESIGN_WALL * nominal_wall / _MIL + 0.5 + 1e-9) * _MIL
    named = {"wall": nominal_wall, "design_wall": wall}
    section = _box(name, depth, width, wall, 2 * wall, wall, Product.COLD_FORMED, named)
    nominal = _box(name, depth, width, nominal_wall, 2 * nominal_wall, nominal_wall, Product.COLD_FORMED, {})
    return section.with_mass(nominal.mass)


def _tube(name: str, diameter: float, wall: float, product: Product, walls: dict[str, float]) -> Section:
    inside = diameter - 2 * wall
    area = pi * (diameter**2 - inside**2) / 4
    moment = pi * (diameter**4 - inside**4) / 64
    return Section(
        name,
        Shape.CIRCULAR_HOLLOW,
        product,
        area,
        moment,
        moment,
        moment,
        steel_mass(area),
        {"diameter": diameter, "depth": diameter, "width": diameter, **walls},
        torsion_constant=2 * moment,
        warping_constant=0.0,
    )


def _box(
    name: str,
    depth: float,
    width: float,
    wall: float,
    outer: float,
    inner: float,
    product: Product,
    walls: dict[str, float],
) -> Section:
    figure = _rounded(width, depth, outer) - _rounded(width - 2 * wall, depth - 2 * wall, inner)
    about_y, about_z, _ = figure.second_moments
    # Bredt's formula on the centre line of the wall, whose corners have the mean radius.
    radius = (outer + inner) / 2
    line = 2 * (width + depth - 2 * wall) - 2 * radius * (4 - pi)
    enclosed = (width - wall) * (depth - wall) - radius**2 * (4 - pi)
    return Section(
        name,
        Shape.RECTANGULAR_HOLLOW,
        product,
        figure.area,
        about_y,
        about_z,
        min(about_y, about_z),
        steel_mass(figure.area),
        {"depth": depth, "width": width, "outer_radius": outer, "inner_radius": inner, **walls},
        torsion_constant=4 * enclosed**2 * wall / line,
        warping_constant=0.0,
    )


def _rounded(width: float, height: float, radius: float) -> Outline:
    """Rectangle about the origin with rounded corners."""
    right, top = width / 2, height / 2
    figure = rectangle(-right, -top, right, top)
    for side_y in (-1, 1):
        for side_z in (-1, 1):
            figure = figure - corner(side_y * right, side_z * top, radius, -side_y, -side_z)
    return figure
