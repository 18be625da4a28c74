"""Timber members to EN 1995-1-1:2004 with A1, one clause a function; from memory unless a test names its source.

Capacities come for every load-duration class, since k_mod follows the shortest action of a combination.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from strutbook.arrays import FloatArray, IntArray
from strutbook.checks.capacity import Capacities, MembersToCheck, Step
from strutbook.checks.strengths import timber_missing
from strutbook.materials.material import Material
from strutbook.sections.section import Product

#: Table 2.1: load-duration classes, the longest first.
DURATIONS = ("permanent", "long-term", "medium-term", "short-term", "instantaneous")
#: Table 3.1, solid and glued-laminated timber: k_mod by service class and load-duration class.
K_MOD = {
    1: (0.60, 0.70, 0.80, 0.90, 1.10),
    2: (0.60, 0.70, 0.80, 0.90, 1.10),
    3: (0.50, 0.55, 0.65, 0.70, 0.90),
}
#: Table 2.2 (and national choices in its place): load-duration class of actions by their nature, as an index.
DURATION_OF_NATURE = {
    "permanent": 0,
    "settlement": 0,
    "imposed": 2,
    "snow": 3,
    "moving": 3,
    "temperature": 3,
    "wind": 4,
    "accidental": 4,
}
#: 6.3.2(3): straightness factor beta_c.
_BETA_C = {Product.SAWN: 0.2, Product.GLUED_LAMINATED: 0.1}


@dataclass(frozen=True)
class Options:
    """National values and choices."""

    #: 2.3.1.3: 1, 2 or 3
    service_class: int = 1
    #: table 2.3, recommended values
    gamma_m_solid: float = 1.30
    gamma_m_glued: float = 1.25

    def __post_init__(self) -> None:
        if self.service_class not in K_MOD:
            raise ValueError(f"the service class is {self.service_class}; expected 1, 2 or 3.")


def size_factor(depth: FloatArray, glued: FloatArray) -> FloatArray:
    """3.2(3), 3.3(3): k_h; in tension the depth is the larger dimension of the section, m.

    >>> size_factor(np.array([0.125, 0.400]), np.array([False, True])).round(3)
    array([1.037, 1.041])
    """
    solid = np.where(depth < 0.150, np.minimum((0.150 / depth) ** 0.2, 1.3), 1.0)
    laminated = np.where(depth < 0.600, np.minimum((0.600 / depth) ** 0.1, 1.1), 1.0)
    return np.where(glued, laminated, solid)


def design_strength(k_mod: FloatArray, characteristic: FloatArray, gamma_m: FloatArray) -> FloatArray:
    """2.4.1(1): X_d = k_mod X_k / gamma_M."""
    return k_mod * characteristic / gamma_m


def relative_slenderness(slenderness: FloatArray, f_c_0_k: FloatArray, modulus: FloatArray) -> FloatArray:
    """6.3.2(1): lambda_rel = lambda / pi sqrt(f_c,0,k / E_0,05), with the modulus of the 5 % fractile."""
    return slenderness / np.pi * np.sqrt(f_c_0_k / modulus)


def instability_factor(relative: FloatArray, beta_c: FloatArray) -> FloatArray:
    """6.3.2(3), expressions 6.25 to 6.28: k_c; 1 up to a relative slenderness of 0.3."""
    k = 0.5 * (1 + beta_c * (relative - 0.3) + relative**2)
    reduced = 1 / (k + np.sqrt(np.maximum(k**2 - relative**2, 0.0)))
    return np.where(relative <= 0.3, 1.0, np.minimum(reduced, 1.0))


def capacities(
    members: MembersToCheck, materials: tuple[Material, ...], material: IntArray, options: Options | None = None
) -> Capacities:
    """Design capacities of timber members for every load-duration class."""
    options = options or Options()
    count = len(members.section)
    keys = ("f_t_0_k", "f_c_0_k", "E_0_05")
    values = np.array([[found.values.get(key, np.nan) for key in keys] for found in materials] + [[np.nan] * 3])
    f_t, f_c, modulus = values[material].T
    glued = np.array([section.product is Product.GLUED_LAMINATED for section in members.sections])[members.section]
    depth, width = members.dimension("depth"), members.dimension("width")
    area = members.of_sections("area")
    net_area = np.where(np.isnan(members.net_area), area, members.net_area)
    gamma = np.where(glued, options.gamma_m_glued, options.gamma_m_solid)[:, np.newaxis]
    k_mod = np.array(K_MOD[options.service_class])
    with np.errstate(invalid="ignore", divide="ignore"):
        k_h = size_factor(np.fmax(depth, width), glued)
        tension = net_area[:, np.newaxis] * design_strength(k_mod, (k_h * f_t)[:, np.newaxis], gamma)
        ratios = (
            members.buckling_length_in / members.of_sections("radius_y"),
            members.buckling_length_out / members.of_sections("radius_z"),
        )
        relative = [relative_slenderness(ratio, f_c, modulus) for ratio in ratios]
        beta = np.where(glued, _BETA_C[Product.GLUED_LAMINATED], _BETA_C[Product.SAWN])
        k_c = [instability_factor(value, beta) for value in relative]
        least = np.minimum(*k_c)
        f_c_d = design_strength(k_mod, f_c[:, np.newaxis], gamma)
        compression = least[:, np.newaxis] * area[:, np.newaxis] * f_c_d
    missing = timber_missing(members, materials, material, "f_t_0_k", "characteristic values of EN 338 or EN 14080")
    tension[list(missing)] = compression[list(missing)] = np.nan
    clause = np.where(least >= 1, 1, np.where(k_c[0] <= k_c[1], 2, 3))
    steps = (
        Step("A_net", "net area", "6.1.2(1)", "m2", net_area),
        Step("k_h", "size factor in tension", "3.2(3), 3.3(3)", "", k_h),
        Step("k_mod", "by load duration: " + ", ".join(DURATIONS), "table 3.1", "", np.tile(k_mod, (count, 1))),
        Step(
            "f_t,0,d", "design tensile strength", "2.4.1(1)", "Pa", design_strength(k_mod, (k_h * f_t)[:, None], gamma)
        ),
        Step("F_t,d", "capacity in tension", "6.1.2(1)", "N", tension, "A_net * f_t,0,d"),
        Step("lambda_rel,y", "relative slenderness about y", "6.3.2(1)", "", relative[0]),
        Step("lambda_rel,z", "relative slenderness about z", "6.3.2(1)", "", relative[1]),
        Step("k_c,y", "instability factor about y", "6.3.2(3)", "", k_c[0]),
        Step("k_c,z", "instability factor about z", "6.3.2(3)", "", k_c[1]),
        Step("f_c,0,d", "design compressive strength", "2.4.1(1)", "Pa", f_c_d),
        Step("F_c,d", "capacity in compression", "6.3.2(3)", "N", compression),
    )
    clauses = ("6.1.2", "6.1.4", "6.3.2 about y", "6.3.2 about z")
    return Capacities(
        tension,
        compression,
        np.maximum(*ratios),
        tuple(f"EN 1995-1-1 {text}" for text in clauses),
        np.zeros(count, dtype=np.intp),
        clause.astype(np.intp),
        missing,
        missing,
        dict.fromkeys(range(count), f"service class {options.service_class}"),
        steps=steps,
    )
