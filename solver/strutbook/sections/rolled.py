"""I and H sections, channels and tees from their dimensions (EN 10365; AISC Manual)."""

from __future__ import annotations

from strutbook.sections.outline import Outline, corner, rectangle
from strutbook.sections.section import Product, Section, Shape, checked, steel_mass


def i_section(name: str, depth: float, width: float, web: float, flange: float, root_radius: float) -> Section:
    """I or H section with parallel flanges; m.

    >>> section = i_section("IPE 200", 0.200, 0.100, 0.0056, 0.0085, 0.012)
    >>> round(section.area * 1e4, 1), round(section.second_moment_y * 1e8)
    (28.5, 1943)
    """
    _check(name, depth, width, web, flange)
    figure = _web_and_flanges(depth, width, web, flange, root_radius)
    about_y, about_z, _ = figure.second_moments
    return Section(
        name,
        Shape.I_SECTION,
        Product.ROLLED,
        figure.area,
        about_y,
        about_z,
        min(about_y, about_z),
        steel_mass(figure.area),
        _dimensions(depth, width, web, flange, root_radius),
        torsion_constant=(2 * width * flange**3 + (depth - 2 * flange) * web**3) / 3,
        warping_constant=about_z * (depth - flange) ** 2 / 4,
    )


def channel(name: str, depth: float, width: float, web: float, flange: float, root_radius: float) -> Section:
    """Channel with parallel flanges, its web along z; m.

    >>> section = channel("UPE 200", 0.200, 0.080, 0.006, 0.011, 0.013)
    >>> round(section.area * 1e4, 1), round(section.second_moment_z * 1e8)
    (29.0, 187)
    """
    _check(name, depth, width, web, flange)
    figure = (
        rectangle(0, 0, web, depth)
        + rectangle(web, 0, width, flange)
        + rectangle(web, depth - flange, width, depth)
        + corner(web, flange, root_radius, 1, 1)
        + corner(web, depth - flange, root_radius, 1, -1)
    )
    about_y, about_z, _ = figure.second_moments
    y, _ = figure.centroid
    # Thin-walled formulas on the centre lines (W. F. Chen and E. M. Lui, Structural Stability, 1987; from memory).
    breadth, height = width - web / 2, depth - flange
    offset = 3 * breadth**2 * flange / (6 * breadth * flange + height * web)
    warping = (
        flange
        * breadth**3
        * height**2
        / 12
        * (3 * breadth * flange + 2 * height * web)
        / (6 * breadth * flange + height * web)
    )
    return Section(
        name,
        Shape.CHANNEL,
        Product.ROLLED,
        figure.area,
        about_y,
        about_z,
        min(about_y, about_z),
        steel_mass(figure.area),
        {**_dimensions(depth, width, web, flange, root_radius), "centroid_y": y},
        torsion_constant=(2 * width * flange**3 + (depth - 2 * flange) * web**3) / 3,
        warping_constant=warping,
        shear_centre_y=-(y - web / 2 + offset),
    )


def tee(name: str, depth: float, width: float, web: float, flange: float, root_radius: float) -> Section:
    """Tee cut from an I section, its flange below; m."""
    _check(name, 2 * depth, width, web, flange)
    figure = (
        rectangle(-width / 2, 0, width / 2, flange)
        + rectangle(-web / 2, flange, web / 2, depth)
        + corner(web / 2, flange, root_radius, 1, 1)
        + corner(-web / 2, flange, root_radius, -1, 1)
    )
    about_y, about_z, _ = figure.second_moments
    _, z = figure.centroid
    return Section(
        name,
        Shape.TEE,
        Product.ROLLED,
        figure.area,
        about_y,
        about_z,
        min(about_y, about_z),
        steel_mass(figure.area),
        {**_dimensions(depth, width, web, flange, root_radius), "centroid_z": z},
        torsion_constant=(width * flange**3 + (depth - flange) * web**3) / 3,
        warping_constant=0.0,
        shear_centre_z=-(z - flange / 2),
    )


def _web_and_flanges(depth: float, width: float, web: float, flange: float, root_radius: float) -> Outline:
    inside = depth / 2 - flange
    figure = (
        rectangle(-width / 2, inside, width / 2, depth / 2)
        + rectangle(-width / 2, -depth / 2, width / 2, -inside)
        + rectangle(-web / 2, -inside, web / 2, inside)
    )
    for side_y in (-1, 1):
        for side_z in (-1, 1):
            figure = figure + corner(side_y * web / 2, side_z * inside, root_radius, side_y, -side_z)
    return figure


def _check(name: str, depth: float, width: float, web: float, flange: float) -> None:
    fits = 0 < 2 * flange < depth and 0 < web < width
    checked(name, fits, "flanges of less than half the depth and a web of less than the width")


def _dimensions(depth: float, width: float, web: float, flange: float, root_radius: float) -> dict[str, float]:
    return {"depth": depth, "width": width, "web": web, "flange": flange, "root_radius": root_radius}
