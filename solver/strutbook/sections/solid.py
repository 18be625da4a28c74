"""Flats, plates, round and square bars, and timber rectangles."""

from __future__ import annotations

from math import pi

from strutbook.sections.section import Product, Section, Shape, checked, steel_mass


def flat(name: str, width: float, thickness: float) -> Section:
    """Flat or plate, standing with its width along z; m."""
    checked(name, 0 < thickness <= width, "a thickness of at most the width")
    area = width * thickness
    strong, weak = thickness * width**3 / 12, width * thickness**3 / 12
    torsion = width * thickness**3 * (1 / 3 - 0.21 * thickness / width * (1 - (thickness / width) ** 4 / 12))
    return Section(
        name,
        Shape.FLAT,
        Product.ROLLED,
        area,
        strong,
        weak,
        weak,
        steel_mass(area),
        {"width": width, "depth": width, "thickness": thickness},
        torsion_constant=torsion,
        warping_constant=0.0,
    )


def round_bar(name: str, diameter: float) -> Section:
    """Round bar; m."""
    checked(name, diameter > 0, "a diameter above 0")
    area, moment = pi * diameter**2 / 4, pi * diameter**4 / 64
    return Section(
        name,
        Shape.ROUND,
        Product.ROLLED,
        area,
        moment,
        moment,
        moment,
        steel_mass(area),
        {"diameter": diameter, "thickness": diameter},
        torsion_constant=2 * moment,
        warping_constant=0.0,
    )


def timber(name: str, width: float, depth: float, product: Product) -> Section:
    """Rectangle of timber, its depth along z; m. Its mass follows from the density of its class."""
    checked(name, width > 0 and depth > 0, "two sides above 0")
    area = width * depth
    about_y, about_z = width * depth**3 / 12, depth * width**3 / 12
    return Section(
        name,
        Shape.TIMBER,
        product,
        area,
        about_y,
        about_z,
        min(about_y, about_z),
        mass=float("nan"),
        dimensions={"depth": depth, "width": width},
    )
