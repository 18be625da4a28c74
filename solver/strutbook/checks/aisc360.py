"""Steel members to ANSI/AISC 360, chapters D and E, one clause a function; editions of 2010, 2016 and 2022.

Axis y is the section's axis for buckling in the plane of the truss, axis z the one for buckling out of it. From memory
of the standard unless a test names its source. Stresses and lengths in SI units; the clauses hold in any.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum
from typing import NamedTuple

import numpy as np

from strutbook.arrays import BoolArray, FloatArray, IntArray
from strutbook.checks.buckling import missing_radii, twisting_load
from strutbook.checks.capacity import Capacities, MembersToCheck, Step
from strutbook.checks.strengths import steel_strengths
from strutbook.materials.material import Material
from strutbook.sections.section import Shape

#: Slenderness that the user notes of D1 and E2 recommend not to exceed.
TENSION_SLENDERNESS, COMPRESSION_SLENDERNESS = 300.0, 200.0


class Method(Enum):
    """B3: load and resistance factor design, or allowable strength design."""

    LRFD = "LRFD"
    ASD = "ASD"


@dataclass(frozen=True)
class Options:
    """Edition and method."""

    edition: int = 2022
    method: Method = Method.LRFD

    def design(self, nominal: FloatArray, phi: float, omega: float) -> FloatArray:
        """B3.1, B3.2: phi R_n, or R_n / Omega."""
        return phi * nominal if self.method is Method.LRFD else nominal / omega


def tensile_yielding(gross_area: FloatArray, f_y: FloatArray) -> FloatArray:
    """D2(a): P_n = F_y A_g, N; phi = 0.90, Omega = 1.67."""
    return f_y * gross_area


def tensile_rupture(effective_area: FloatArray, f_u: FloatArray) -> FloatArray:
    """D2(b): P_n = F_u A_e, N; phi = 0.75, Omega = 2.00."""
    return f_u * effective_area


def effective_net_area(net_area: FloatArray, shear_lag: FloatArray) -> FloatArray:
    """D3: A_e = A_n U, m²."""
    return net_area * shear_lag


def critical_stress(f_y: FloatArray, f_e: FloatArray) -> FloatArray:
    """E3-2 and E3-3: F_cr, Pa; the two meet at F_y / F_e = 2.25.

    >>> F_y, F_e = 50.0, np.pi**2 * 29000 / 96.77**2
    >>> round(float(critical_stress(np.array(F_y), np.array(F_e))), 2)
    25.21
    """
    ratio = f_y / f_e
    return np.where(ratio <= 2.25, 0.658**ratio * f_y, 0.877 * f_e)


def angle_slenderness(length_over_radius: FloatArray) -> FloatArray:
    """E5(a): effective slenderness of a single-angle web member of a plane truss (E5-1, E5-2).

    `length_over_radius` is L / r_a, about the geometric axis parallel to the connected leg (the longer one).

    >>> angle_slenderness(np.array([60.0, 80.0, 100.0]))
    array([117., 132., 157.])
    """
    return np.where(length_over_radius <= 80, 72 + 0.75 * length_over_radius, 32 + 1.25 * length_over_radius)


def angle_slenderness_in_space(length_over_radius: FloatArray) -> FloatArray:
    """E5(b): the same in box and space trusses (E5-3, E5-4).

    >>> angle_slenderness_in_space(np.array([60.0, 75.0, 100.0]))
    array([108., 120., 145.])
    """
    return np.where(length_over_radius <= 75, 60 + 0.8 * length_over_radius, 45 + length_over_radius)


def effective_width_factor_c2(c_1: float) -> float:
    """Table E7.1: c_2 = (1 - sqrt(1 - 4 c_1)) / (2 c_1), with the digits that the table prints.

    >>> [effective_width_factor_c2(c_1) for c_1 in (0.18, 0.20, 0.22)]
    [1.31, 1.38, 1.49]
    """
    return round(float((1 - np.sqrt(1 - 4 * c_1)) / (2 * c_1)), 2)


def effective_width(
    width: FloatArray, slenderness: FloatArray, limit: FloatArray, c_1: float, f_y: FloatArray, f_cr: FloatArray
) -> FloatArray:
    """360-16 and later, E7-2 to E7-5: b_e, m.

    Parameters
    ----------
    width, slenderness, limit : (members,) array of float
        b in m, lambda = b / t, and lambda_r of table B4.1a.
    c_1 : float
        Imperfection adjustment factor of table E7.1.
    f_y, f_cr : (members,) array of float
        Pa; F_cr by E3 or E4 of the full section.
    """
    f_el = (effective_width_factor_c2(c_1) * limit / slenderness) ** 2 * f_y
    root = np.sqrt(f_el / f_cr)
    return np.where(slenderness <= limit * np.sqrt(f_y / f_cr), width, width * (1 - c_1 * root) * root)


def effective_width_2010(
    thickness: FloatArray, slenderness: FloatArray, modulus: FloatArray, stress: FloatArray, factor: float
) -> FloatArray:
    """360-10, E7-17 and E7-18: b_e = 1.92 t sqrt(E / f) (1 - factor / (b/t) sqrt(E / f)), m.

    `factor` is 0.34, or 0.38 in the walls of rectangular HSS.
    """
    root = np.sqrt(modulus / stress)
    return 1.92 * thickness * root * (1 - factor / slenderness * root)


def round_hss_area_factor(diameter_over_wall: FloatArray, f_y: FloatArray, modulus: FloatArray) -> FloatArray:
    """E7 (round HSS): A_e / A_g, 1 up to D/t = 0.11 E / F_y, by E7-19 of 360-10 (E7-7 of 360-16) above."""
    reduced = 0.038 * modulus / (f_y * diameter_over_wall) + 2 / 3
    return np.where(diameter_over_wall <= 0.11 * modulus / f_y, 1.0, reduced)


def capacities(
    members: MembersToCheck, materials: tuple[Material, ...], material: IntArray, options: Options | None = None
) -> Capacities:
    """Design strengths (LRFD) or allowable strengths (ASD) of steel members in tension and compression.

    Single angles are checked in compression as web members of a plane truss by E5(a). Double angles are taken to have
    welded or pretensioned connectors at most 40 r_i apart, for which E6 changes no slenderness.
    """
    options = options or Options()
    found = steel_strengths(members, materials, material)
    f_y, f_u, modulus = found.yield_strength, found.ultimate_strength, found.elastic_modulus
    with np.errstate(invalid="ignore", divide="ignore"):
        tension, tension_clause, tension_steps = _tension(members, f_y, f_u, options)
        compression, clause, slenderness, steps, no_compression = _compression(members, f_y, modulus, options)
    angle = members.having(Shape.ANGLE)
    no_tension = {
        int(member): "a single angle is connected by one leg: give U of table D3.1 as Shear lag"
        for member in np.flatnonzero(angle & np.isnan(members.shear_lag))
    }
    no_tension = {**no_tension, **found.missing}
    no_compression = {**no_compression, **missing_radii(members), **found.missing}
    tension[list(no_tension)] = np.nan
    compression[list(no_compression)] = np.nan
    assumptions = {
        int(member): "connectors welded or pretensioned, at most 40 r_i apart (E6)"
        for member in np.flatnonzero(members.having(Shape.DOUBLE_ANGLE))
    }
    assumptions |= {
        int(member): "connected by the longer leg, welded or with two bolts, without load between (E5)"
        for member in np.flatnonzero(angle)
    }
    edition = f"AISC 360-{options.edition % 100}"
    clauses = ("D2(a)", "D2(b)", "E3 about y", "E3 about z", "E4", "E5", "E7")
    return Capacities(
        tension[:, np.newaxis],
        compression[:, np.newaxis],
        slenderness,
        tuple(f"{edition} {text}" for text in clauses),
        tension_clause,
        clause,
        no_tension,
        no_compression,
        assumptions,
        np.full(len(members.section), COMPRESSION_SLENDERNESS),
        np.full(len(members.section), TENSION_SLENDERNESS),
        (*tension_steps, *steps),
    )


def _tension(
    members: MembersToCheck, f_y: FloatArray, f_u: FloatArray, options: Options
) -> tuple[FloatArray, IntArray, tuple[Step, ...]]:
    area = members.of_sections("area")
    net_area = np.where(np.isnan(members.net_area), area, members.net_area)
    shear_lag = np.where(np.isnan(members.shear_lag), 1.0, members.shear_lag)
    effective = effective_net_area(net_area, shear_lag)
    yielding = options.design(tensile_yielding(area, f_y), 0.90, 1.67)
    rupture = options.design(tensile_rupture(effective, f_u), 0.75, 2.00)
    # A welded member without shear lag has no net section at which it could break.
    asked = ~(np.isnan(members.net_area) & np.isnan(members.shear_lag))
    governs = asked & (rupture < yielding)
    steps = (
        Step("A_g", "gross area", "D3", "m2", area),
        Step("F_y", "yield stress", "B3", "Pa", f_y),
        Step("P_y", "design strength in yielding", "D2(a)", "N", yielding),
        Step("A_e", "effective net area", "D3", "m2", np.where(asked, effective, np.nan), "A_n * U"),
        Step("F_u", "tensile strength", "B3", "Pa", f_u),
        Step("P_u", "design strength in rupture", "D2(b)", "N", np.where(asked, rupture, np.nan)),
    )
    return np.where(governs, rupture, yielding), governs.astype(np.intp), steps


def _compression(
    members: MembersToCheck, f_y: FloatArray, modulus: FloatArray, options: Options
) -> tuple[FloatArray, IntArray, FloatArray, tuple[Step, ...], dict[int, str]]:
    area = members.of_sections("area")
    angle = members.having(Shape.ANGLE)
    longest = np.maximum(members.buckling_length_in, members.buckling_length_out)
    about_y = members.buckling_length_in / members.of_sections("radius_y")
    about_z = members.buckling_length_out / members.of_sections("radius_z")
    by_angle = angle_slenderness(longest / members.of_sections("radius_z"))
    ratios = np.where(angle, by_angle, np.maximum(about_y, about_z))
    flexural = np.pi**2 * modulus / ratios**2
    twisting, opened = twisting_load(members, modulus)
    # E4 is for double angles, tees and channels; E5 covers single angles, and W shapes seldom twist before they bend.
    opened = opened & ~angle
    f_e = np.where(opened, np.minimum(flexural, twisting / area), flexural)
    f_cr = critical_stress(f_y, f_e)
    if options.edition < 2016:
        effective = area
        f_cr, reduced = _stress_2010(members, f_y, f_e, modulus)
    else:
        effective = _effective_area(members, f_y, f_cr, modulus)
        reduced = effective < area * (1 - 1e-9)
    nominal = f_cr * effective
    clause = np.where(about_y >= about_z, 2, 3)
    clause = np.where(opened & (f_e < flexural), 4, clause)
    clause = np.where(angle, 5, clause)
    clause = np.where(reduced, 6, clause)
    beyond = {
        int(member): "the tube is more slender than E7 allows (D/t above 0.45 E / F_y)"
        for member in np.flatnonzero(
            members.having(Shape.CIRCULAR_HOLLOW) & (_tube_slenderness(members) > 0.45 * modulus / f_y)
        )
    }
    beyond |= {
        int(member): "the effective slenderness of the single angle is above 200 (E5)"
        for member in np.flatnonzero(angle & (ratios > COMPRESSION_SLENDERNESS))
    }
    design = options.design(nominal, 0.90, 1.67)
    steps = (
        Step("L_c/r_y", "slenderness about y", "E3", "", np.where(angle, np.nan, about_y)),
        Step("L_c/r_z", "slenderness about z", "E3", "", np.where(angle, np.nan, about_z)),
        Step("L_c/r", "effective slenderness of the angle", "E5(a)", "", np.where(angle, ratios, np.nan)),
        Step("F_e", "elastic buckling stress", "E3-4 or E4", "Pa", f_e),
        Step("F_cr", "critical stress", "E3-2, E3-3", "Pa", f_cr),
        Step("A_e", "effective area", "E7", "m2", effective),
        Step("P_n", "nominal strength", "E3-1", "N", nominal, "F_cr * A_e"),
        Step("P_c", "design strength in compression", "E1", "N", design),
    )
    return design, clause.astype(np.intp), ratios, steps, beyond


def _tube_slenderness(members: MembersToCheck) -> FloatArray:
    wall = np.where(
        np.isnan(members.dimension("design_wall")), members.dimension("wall"), members.dimension("design_wall")
    )
    return members.dimension("diameter") / wall


class _Part(NamedTuple):
    """Parts of sections that can buckle locally; arrays have one entry a member."""

    kind: str  #: `wall` and `web` are held along both edges, `flange`, `leg` and `stem` along one
    where: BoolArray
    width: FloatArray
    thickness: FloatArray
    pieces: FloatArray
    limit: FloatArray  #: lambda_r of table B4.1a

    @property
    def slenderness(self) -> FloatArray:
        """Width over thickness."""
        return self.width / self.thickness


#: Table E7.1: c_1 of stiffened elements, of walls of square and rectangular HSS, and of all others.
_C1 = {"web": 0.18, "wall": 0.20, "flange": 0.22, "leg": 0.22, "stem": 0.22}


def _parts(members: MembersToCheck, f_y: FloatArray, modulus: FloatArray) -> list[_Part]:
    dim = members.dimension
    wall = np.where(np.isnan(dim("design_wall")), dim("wall"), dim("design_wall"))
    flange, web, thickness, root = (dim(name) for name in ("flange", "web", "thickness", "root_radius"))
    unit = np.sqrt(modulus / f_y)
    box, i_section = members.having(Shape.RECTANGULAR_HOLLOW), members.having(Shape.I_SECTION)
    channel, tee = members.having(Shape.CHANNEL), members.having(Shape.TEE)
    angles = members.having(Shape.ANGLE, Shape.DOUBLE_ANGLE)
    one = np.ones(len(f_y))
    pairs = np.where(members.having(Shape.DOUBLE_ANGLE), 2.0, 1.0)
    straight = dim("depth") - 2 * flange - 2 * root
    return [
        _Part("wall", box, dim("depth") - 3 * wall, wall, 2 * one, 1.40 * unit),
        _Part("wall", box, dim("width") - 3 * wall, wall, 2 * one, 1.40 * unit),
        _Part("web", i_section | channel, straight, web, one, 1.49 * unit),
        _Part("flange", i_section, dim("width") / 2, flange, 4 * one, 0.56 * unit),
        _Part("flange", tee, dim("width") / 2, flange, 2 * one, 0.56 * unit),
        _Part("flange", channel, dim("width"), flange, 2 * one, 0.56 * unit),
        _Part("stem", tee, dim("depth"), web, one, 0.75 * unit),
        _Part("leg", angles, dim("leg"), thickness, pairs, 0.45 * unit),
        _Part("leg", angles, dim("short_leg"), thickness, pairs, 0.45 * unit),
    ]


def _effective_area(members: MembersToCheck, f_y: FloatArray, f_cr: FloatArray, modulus: FloatArray) -> FloatArray:
    """360-16 and later, E7: A_e = A_g - sum of (b - b_e) t, m²."""
    area = members.of_sections("area")
    lost = np.zeros(len(area))
    for part in _parts(members, f_y, modulus):
        kept = effective_width(part.width, part.slenderness, part.limit, _C1[part.kind], f_y, f_cr)
        lost += np.where(part.where, part.pieces * (part.width - kept) * part.thickness, 0.0)
    tube = members.having(Shape.CIRCULAR_HOLLOW)
    factor = round_hss_area_factor(_tube_slenderness(members), f_y, modulus)
    return np.where(tube, factor * area, area - lost)


def _stress_2010(
    members: MembersToCheck, f_y: FloatArray, f_e: FloatArray, modulus: FloatArray
) -> tuple[FloatArray, BoolArray]:
    """360-10, E7-1 to E7-3: F_cr with the factor Q = Q_s Q_a inside the column curve, and where Q is below 1."""
    area = members.of_sections("area")
    unstiffened = np.ones(len(area))
    lost = np.zeros(len(area))
    f_cr = critical_stress(f_y, f_e)
    for part in _parts(members, f_y, modulus):
        slender = part.where & (part.slenderness > part.limit)
        if part.kind in _UNSTIFFENED:
            factor = _unstiffened_factor(part.kind, part.slenderness, f_y, modulus)
            unstiffened = np.where(slender, np.minimum(unstiffened, factor), unstiffened)
            continue
        # The stress may be taken as F_y in walls of HSS, and is F_cr with Q = 1 in webs.
        stress, constant, limit = (f_y, 0.38, 1.40) if part.kind == "wall" else (f_cr, 0.34, 1.49)
        kept = effective_width_2010(part.thickness, part.slenderness, modulus, stress, constant)
        kept = np.where(part.slenderness > limit * np.sqrt(modulus / stress), np.minimum(kept, part.width), part.width)
        lost += np.where(part.where, part.pieces * (part.width - kept) * part.thickness, 0.0)
    tube = members.having(Shape.CIRCULAR_HOLLOW)
    stiffened = np.where(tube, round_hss_area_factor(_tube_slenderness(members), f_y, modulus), 1 - lost / area)
    q = unstiffened * stiffened
    return q * critical_stress(q * f_y, f_e) / q, q < 1 - 1e-9


#: 360-10, E7.1: limits of b/t in units of sqrt(E / F_y) up to which Q_s falls in a line, the line, and what follows.
_UNSTIFFENED = {
    "flange": (1.03, 1.415, 0.74, 0.69),
    "leg": (0.91, 1.34, 0.76, 0.53),
    "stem": (1.03, 1.908, 1.22, 0.69),
}


def _unstiffened_factor(kind: str, slenderness: FloatArray, f_y: FloatArray, modulus: FloatArray) -> FloatArray:
    """360-10, E7-4 to E7-15: Q_s of rolled flanges, of angles and of stems of tees beyond lambda_r."""
    limit, start, slope, beyond = _UNSTIFFENED[kind]
    relative = slenderness * np.sqrt(f_y / modulus)
    return np.where(relative <= limit, start - slope * relative, beyond / relative**2)
