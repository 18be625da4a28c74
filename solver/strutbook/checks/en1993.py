"""Steel members to EN 1993-1-1:2005 (and EN 1993-1-8, 3.10.3; EN 1993-1-5, 4.4), one clause a function.

Axis y is the section's axis for buckling in the plane of the truss, axis z the one for buckling out of it. National
values are inputs; the recommended ones are the defaults. From memory of the standard unless a test names its source.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from strutbook.arrays import BoolArray, FloatArray, IntArray
from strutbook.checks.buckling import euler_load, missing_radii, twisting_load
from strutbook.checks.capacity import Capacities, MembersToCheck, Step
from strutbook.checks.strengths import steel_strengths
from strutbook.materials.material import Material
from strutbook.sections.section import Product, Section, Shape

#: Table 6.1: imperfection factor of each buckling curve.
IMPERFECTION = {"a0": 0.13, "a": 0.21, "b": 0.34, "c": 0.49, "d": 0.76}
_CURVES = tuple(IMPERFECTION)
#: Grades from which table 6.2 has more favourable curves, Pa.
_S460 = 459e6


@dataclass(frozen=True)
class Options:
    """National values and choices."""

    #: 6.1: partial factors, recommended values
    gamma_m0: float = 1.0
    gamma_m1: float = 1.0
    gamma_m2: float = 1.25


def gross_tension(area: FloatArray, f_y: FloatArray, gamma_m0: float) -> FloatArray:
    """6.2.3(2)a: N_pl,Rd = A f_y / gamma_M0, N."""
    return area * f_y / gamma_m0


def net_tension(factor: FloatArray, net_area: FloatArray, f_u: FloatArray, gamma_m2: float) -> FloatArray:
    """6.2.3(2)b: N_u,Rd = 0.9 A_net f_u / gamma_M2, N; EN 1993-1-8, 3.10.3 puts beta in the place of 0.9."""
    return factor * net_area * f_u / gamma_m2


def one_leg_factor(bolts: int, pitch_over_hole: float) -> float:
    """EN 1993-1-8, 3.10.3 and table 3.8: beta_2 or beta_3 of an angle bolted by one leg.

    Parameters
    ----------
    bolts : int
        In one row, 2 or more.
    pitch_over_hole : float
        p_1 / d_0.

    >>> one_leg_factor(2, 3.75), round(one_leg_factor(3, 3.0), 2)
    (0.55, 0.54)
    """
    low, high = (0.4, 0.7) if bolts == 2 else (0.5, 0.7)
    return float(np.interp(pitch_over_hole, (2.5, 5.0), (low, high)))


def one_bolt_tension(end_distance: float, hole: float, thickness: float, f_u: float, gamma_m2: float) -> float:
    """EN 1993-1-8, 3.10.3(2), expression 3.11: N_u,Rd = 2.0 (e_2 - 0.5 d_0) t f_u / gamma_M2, N.

    >>> round(one_bolt_tension(0.035, 0.022, 0.008, 430e6, 1.25))
    132096
    """
    return 2.0 * (end_distance - 0.5 * hole) * thickness * f_u / gamma_m2


def epsilon(f_y: FloatArray) -> FloatArray:
    """Table 5.2: sqrt(235 / f_y), f_y in N/mm² there and in Pa here."""
    value: FloatArray = np.sqrt(235e6 / f_y)
    return value


def internal_reduction(slenderness: FloatArray) -> FloatArray:
    """EN 1993-1-5, 4.4(2), expression 4.2, uniform compression: rho of internal parts."""
    reduced = (slenderness - 0.22) / np.maximum(slenderness, 1e-9) ** 2
    return np.where(slenderness <= 0.673, 1.0, np.minimum(reduced, 1.0))


def outstand_reduction(slenderness: FloatArray) -> FloatArray:
    """EN 1993-1-5, 4.4(2), expression 4.3: rho of outstand parts."""
    reduced = (slenderness - 0.188) / np.maximum(slenderness, 1e-9) ** 2
    return np.where(slenderness <= 0.748, 1.0, np.minimum(reduced, 1.0))


def plate_slenderness(width_over_thickness: FloatArray, eps: FloatArray, k_sigma: float) -> FloatArray:
    """EN 1993-1-5, 4.4(2): lambda_p = (b / t) / (28.4 eps sqrt(k_sigma))."""
    value: FloatArray = width_over_thickness / (28.4 * eps * np.sqrt(k_sigma))
    return value


def reduction_factor(slenderness: FloatArray, imperfection: FloatArray) -> FloatArray:
    """6.3.1.2(1), expression 6.49: chi; 1 up to a slenderness of 0.2 (6.3.1.2(4)).

    >>> float(reduction_factor(np.array(1.0), np.array(0.34)).round(4))
    0.597
    """
    capital_phi = 0.5 * (1 + imperfection * (slenderness - 0.2) + slenderness**2)
    chi = 1 / (capital_phi + np.sqrt(np.maximum(capital_phi**2 - slenderness**2, 0.0)))
    return np.where(slenderness <= 0.2, 1.0, np.minimum(chi, 1.0))


def buckling_curves(section: Section, f_y: float) -> tuple[str, str]:
    """Table 6.2: curves for buckling about y and about z; empty where the table does not say."""
    if section.buckling_curve:
        return section.buckling_curve, section.buckling_curve
    high = f_y > _S460
    if section.shape in (Shape.CIRCULAR_HOLLOW, Shape.RECTANGULAR_HOLLOW):
        curve = ("a0" if high else "a") if section.product is Product.HOT_FINISHED else "c"
        return curve, curve
    if section.shape in (Shape.ANGLE, Shape.DOUBLE_ANGLE):
        return "b", "b"
    if section.shape is Shape.I_SECTION:
        slender = section.dimensions["depth"] / section.dimensions["width"] > 1.2
        flange = section.dimensions["flange"]
        if slender and flange <= 0.040:
            return ("a0", "a0") if high else ("a", "b")
        if flange <= 0.100:
            return ("a", "a") if high else ("b", "c")
        return ("c", "c") if high else ("d", "d")
    return ("", "") if section.shape is Shape.GENERAL else ("c", "c")


def angle_web_member_slenderness(about_v: FloatArray, about_y: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Annex BB.1.2(2): effective slendernesses of an angle web member held at its ends by two bolts or welds."""
    return 0.35 + 0.7 * about_v, 0.50 + 0.7 * about_y


def capacities(
    members: MembersToCheck, materials: tuple[Material, ...], material: IntArray, options: Options | None = None
) -> Capacities:
    """Design resistances of steel members in tension and compression.

    Single angles are checked in compression as web members by annex BB.1.2. Double angles are taken to act as one
    (6.4.4). Torsional-flexural buckling is checked for open sections (6.3.1.4).
    """
    options = options or Options()
    found = steel_strengths(members, materials, material)
    f_y, f_u, modulus = found.yield_strength, found.ultimate_strength, found.elastic_modulus
    with np.errstate(invalid="ignore", divide="ignore"):
        tension, tension_clause, tension_steps, no_tension = _tension(members, f_y, f_u, options)
        effective, parts_steps, no_compression = _effective_area(members, f_y)
        compression, clause, slenderness, steps = _compression(members, f_y, modulus, effective, options)
    no_curve = {
        int(member): f"no buckling curve is known for {one.name}; state one on the sheet Sections"
        for place, one in enumerate(members.sections)
        if not buckling_curves(one, 0.0)[0]
        for member in np.flatnonzero(members.section == place)
    }
    no_compression = {**no_curve, **no_compression, **missing_radii(members), **found.missing}
    no_tension = {**no_tension, **found.missing}
    compression[list(no_compression)] = np.nan
    tension[list(no_tension)] = np.nan
    assumed = "packing plates at most 15 i_min apart (6.4.4)"
    clauses = ("6.2.3(2)a", "6.2.3(2)b", "6.2.4", "6.3.1 about y", "6.3.1 about z", "6.3.1 about v", "6.3.1.4")
    return Capacities(
        tension[:, np.newaxis],
        compression[:, np.newaxis],
        slenderness,
        tuple(f"EN 1993-1-1 {text}" for text in clauses),
        tension_clause,
        clause,
        no_tension,
        no_compression,
        {int(member): assumed for member in np.flatnonzero(members.having(Shape.DOUBLE_ANGLE))},
        steps=(*_factors(options, len(members.section)), *tension_steps, *parts_steps, *steps),
    )


def _factors(options: Options, count: int) -> tuple[Step, ...]:
    """6.1(1): the partial factors that were used."""
    return tuple(
        Step(f"gamma_M{place}", "partial factor", "6.1(1)", "", np.full(count, value))
        for place, value in enumerate((options.gamma_m0, options.gamma_m1, options.gamma_m2))
    )


def _tension(
    members: MembersToCheck, f_y: FloatArray, f_u: FloatArray, options: Options
) -> tuple[FloatArray, IntArray, tuple[Step, ...], dict[int, str]]:
    area = members.of_sections("area")
    holes = ~np.isnan(members.net_area)
    factor = np.where(np.isnan(members.shear_lag), 0.9, members.shear_lag)
    net_area = np.where(holes, members.net_area, area)
    gross = gross_tension(area, f_y, options.gamma_m0)
    net = net_tension(factor, net_area, f_u, options.gamma_m2)
    asked = holes | ~np.isnan(members.shear_lag)
    governs = asked & (net < gross)
    by_one_leg = members.having(Shape.ANGLE) & np.isnan(members.shear_lag)
    unknown = {
        int(member): "a single angle is connected by one leg: give beta of EN 1993-1-8, 3.10.3 as Shear lag"
        for member in np.flatnonzero(by_one_leg)
    }
    steps = (
        Step("A", "gross area", "6.2.3(2)a", "m2", area),
        Step("f_y", "yield strength", "3.2.1", "Pa", f_y),
        Step("N_pl,Rd", "plastic resistance of the gross area", "6.2.3(2)a", "N", gross, "A * f_y / gamma_M0"),
        Step("A_net", "net area", "6.2.2.2", "m2", net_area),
        Step("f_u", "ultimate strength", "3.2.1", "Pa", f_u),
        Step("N_u,Rd", "resistance of the net area", "6.2.3(2)b", "N", np.where(asked, net, np.nan)),
    )
    return np.where(governs, net, gross), governs.astype(np.intp), steps, unknown


def _effective_area(members: MembersToCheck, f_y: FloatArray) -> tuple[FloatArray, tuple[Step, ...], dict[int, str]]:
    """6.2.2.5 and table 5.2: area less what buckles locally in uniform compression (class 4)."""
    area = members.of_sections("area")
    eps = epsilon(f_y)
    lost = np.zeros(len(area))
    dim = members.dimension
    wall, flange, web, thickness = (dim(name) for name in ("wall", "flange", "web", "thickness"))
    root = np.nan_to_num(dim("root_radius"))
    box = members.having(Shape.RECTANGULAR_HOLLOW)
    for side in ("depth", "width"):
        flat = dim(side) - 3 * wall
        lost += _lost(box, flat, wall, 2, 42 * eps, plate_slenderness(flat / wall, eps, 4.0), internal_reduction)
    straight = dim("depth") - 2 * flange - 2 * root
    webs = members.having(Shape.I_SECTION, Shape.CHANNEL)
    rho = plate_slenderness(straight / web, eps, 4.0)
    lost += _lost(webs, straight, web, 1, 42 * eps, rho, internal_reduction)
    for shapes, outstand, count in (
        ((Shape.I_SECTION,), (dim("width") - web) / 2 - root, 4),
        ((Shape.TEE,), (dim("width") - web) / 2 - root, 2),
        ((Shape.CHANNEL,), dim("width") - web - root, 2),
    ):
        rho = plate_slenderness(outstand / flange, eps, 0.43)
        lost += _lost(members.having(*shapes), outstand, flange, count, 14 * eps, rho, outstand_reduction)
    stem = dim("depth") - flange - root
    rho = plate_slenderness(stem / web, eps, 0.43)
    lost += _lost(members.having(Shape.TEE), stem, web, 1, 14 * eps, rho, outstand_reduction)
    # Both limits of sheet 3 of the table hold for an angle; its legs are outstands of their full width.
    angles = members.having(Shape.ANGLE, Shape.DOUBLE_ANGLE)
    both = np.where(members.having(Shape.DOUBLE_ANGLE), 2, 1)
    leg, short_leg = dim("leg"), dim("short_leg")
    class_4 = angles & ((leg / thickness > 15 * eps) | ((leg + short_leg) / (2 * thickness) > 11.5 * eps))
    for part in (leg, short_leg):
        rho = outstand_reduction(plate_slenderness(part / thickness, eps, 0.43))
        lost += np.where(class_4, both * (1 - rho) * part * thickness, 0.0)
    tube = members.having(Shape.CIRCULAR_HOLLOW) & (dim("diameter") / wall > 90 * eps**2)
    beyond = {
        int(member): "the tube is of class 4 (table 5.2: d/t above 90 eps2), for which EN 1993-1-6 holds"
        for member in np.flatnonzero(tube)
    }
    effective = area - lost
    steps = (
        Step("eps", "sqrt(235 / f_y)", "table 5.2", "", eps),
        Step("A_eff", "area less what buckles locally", "6.2.2.5", "m2", effective),
    )
    return effective, steps, beyond


def _lost(
    where: BoolArray,
    width: FloatArray,
    thickness: FloatArray,
    count: int,
    limit: FloatArray,
    slenderness: FloatArray,
    reduction: Callable[[FloatArray], FloatArray],
) -> FloatArray:
    """(members,) m²: what `count` equal parts lose where they are of class 4."""
    class_4 = where & (width / thickness > limit)
    return np.where(class_4, count * (1 - reduction(slenderness)) * width * thickness, 0.0)


def _compression(
    members: MembersToCheck, f_y: FloatArray, modulus: FloatArray, effective: FloatArray, options: Options
) -> tuple[FloatArray, IntArray, FloatArray, tuple[Step, ...]]:
    count = len(members.section)
    squash = effective * f_y
    angle = members.having(Shape.ANGLE)
    longest = np.maximum(members.buckling_length_in, members.buckling_length_out)
    lengths = (
        np.where(angle, longest, members.buckling_length_in),
        np.where(angle, longest, members.buckling_length_out),
        longest,
    )
    moments = [members.of_sections(f"second_moment_{axis}") for axis in ("y", "z", "min")]
    critical = [euler_load(modulus, moment, length) for moment, length in zip(moments, lengths, strict=True)]
    relative = [np.sqrt(squash / load) for load in critical]
    about_v, about_y = angle_web_member_slenderness(relative[2], relative[0])
    _, about_z = angle_web_member_slenderness(relative[2], relative[1])
    relative = [
        np.where(angle, about_y, relative[0]),
        np.where(angle, about_z, relative[1]),
        # Only an angle buckles about an axis of its own between the two planes.
        np.where(angle, about_v, 0.0),
    ]
    twisting, opened = twisting_load(members, modulus)
    relative.append(np.where(opened, np.sqrt(squash / twisting), 0.0))
    curve_y, curve_z = _imperfections(members, f_y)
    chi = [
        reduction_factor(slenderness, curve)
        for slenderness, curve in zip(relative, (curve_y, curve_z, curve_z, curve_z), strict=True)
    ]
    resistances = np.stack([squash / options.gamma_m0, *(factor * squash / options.gamma_m1 for factor in chi)])
    governing = np.argmin(np.where(np.isnan(resistances), np.inf, resistances), axis=0)
    radii = [np.sqrt(moment / members.of_sections("area")) for moment in moments]
    ratios = np.stack([length / radius for length, radius in zip(lengths, radii, strict=True)])
    slenderness = np.where(angle, ratios[2], np.maximum(ratios[0], ratios[1]))
    steps = (
        Step("N_c,Rd", "resistance of the section", "6.2.4(2)", "N", resistances[0], "A_eff * f_y / gamma_M0"),
        *(
            step
            for axis, place, factor, load in (
                ("y", 0, curve_y, critical[0]),
                ("z", 1, curve_z, critical[1]),
            )
            for step in (
                Step(f"L_cr,{axis}", f"buckling length, about {axis}", "6.3.1.3", "m", lengths[place]),
                Step(f"N_cr,{axis}", f"elastic critical force, about {axis}", "6.3.1.2(1)", "N", load),
                Step(f"lambda_{axis}", f"non-dimensional slenderness, about {axis}", "6.3.1.3(1)", "", relative[place]),
                Step(f"alpha_{axis}", f"imperfection factor, about {axis}", "table 6.1", "", factor),
                Step(f"chi_{axis}", f"reduction factor, about {axis}", "6.3.1.2(1)", "", chi[place]),
                Step(
                    f"N_b,Rd,{axis}",
                    f"buckling resistance, about {axis}",
                    "6.3.1.1(3)",
                    "N",
                    resistances[1 + place],
                    f"chi_{axis} * A_eff * f_y / gamma_M1",
                ),
            )
        ),
        Step("lambda_v", "effective slenderness of an angle", "BB.1.2(2)", "", np.where(angle, relative[2], np.nan)),
        Step("N_b,Rd,v", "buckling resistance of an angle", "6.3.1.1(3)", "N", np.where(angle, resistances[3], np.nan)),
        Step("lambda_T", "slenderness for twisting", "6.3.1.4(2)", "", np.where(opened, relative[3], np.nan)),
        Step("N_b,Rd,T", "resistance to twisting", "6.3.1.4", "N", np.where(opened, resistances[4], np.nan)),
    )
    values = resistances[governing, np.arange(count)]
    # Clauses of compression stand behind the two of tension.
    return values, governing.astype(np.intp) + 2, slenderness, steps


def _imperfections(members: MembersToCheck, f_y: FloatArray) -> tuple[FloatArray, FloatArray]:
    """(members,) imperfection factors for buckling about y and about z; NaN where no curve is known."""
    table = np.array(
        [
            [
                [IMPERFECTION.get(curve, np.nan) for curve in buckling_curves(one, strength)]
                for strength in (0.0, _S460 + 1)
            ]
            for one in members.sections
        ]
    )
    rows = table[members.section, (f_y > _S460).astype(np.intp)]
    return rows[:, 0], rows[:, 1]
