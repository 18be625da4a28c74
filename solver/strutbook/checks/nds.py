"""Timber members to the NDS 2018, one clause a function; from memory unless a test names its source.

The National Design Specification for Wood Construction. Capacities come for every load duration, since C_D (or the
time effect factor) follows the shortest load of a combination. Adjustment factors other than C_D, C_F, C_P, and those
of LRFD are inputs, 1 by default.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from strutbook.arrays import FloatArray, IntArray
from strutbook.checks.capacity import Capacities, MembersToCheck, Step
from strutbook.checks.strengths import timber_missing
from strutbook.materials.material import Material
from strutbook.sections.section import Product

_INCH = 0.0254
#: Table 2.3.2: load durations, the longest first, and their factors C_D.
DURATIONS = ("permanent", "ten years", "two months", "seven days", "ten minutes", "impact")
C_D = (0.9, 1.0, 1.15, 1.25, 1.6, 2.0)
#: Appendix N, table N3: time effect factor lambda of LRFD for the governing action of the same durations.
TIME_EFFECT = (0.6, 0.8, 0.8, 0.8, 1.0, 1.0)
#: Duration of actions by their nature, as an index.
DURATION_OF_NATURE = {
    "permanent": 0,
    "settlement": 0,
    "imposed": 1,
    "snow": 2,
    "temperature": 3,
    "moving": 3,
    "wind": 4,
    "accidental": 5,
}
#: 3.7.1.4: largest slenderness of a column.
LARGEST_SLENDERNESS = 50.0
#: Tables N1 and N2: format conversion and resistance factors for tension, compression and stability.
_K_F = {"tension": 2.70, "compression": 2.40, "stability": 1.76}
_PHI = {"tension": 0.80, "compression": 0.90, "stability": 0.85}
#: Supplement table 4A: C_F of dimension lumber 2 to 4 in thick, by the nominal width in in: tension, compression.
_SIZE = ((4.5, 1.5, 1.15), (5.5, 1.4, 1.1), (6.5, 1.3, 1.1), (8.5, 1.2, 1.05), (10.5, 1.1, 1.0), (12.5, 1.0, 1.0))


@dataclass(frozen=True)
class Options:
    """Method and adjustment factors."""

    lrfd: bool = False
    wet_service: float = 1.0
    temperature: float = 1.0
    incising: float = 1.0


def column_stability(ratio: FloatArray, c: FloatArray) -> FloatArray:
    """3.7-1: C_P from F_cE / F_c*; c is 0.8 for sawn lumber, 0.9 for glued-laminated timber.

    >>> round(float(column_stability(np.array(1564.89 / 1000), np.array(0.8))), 4)
    0.8197
    """
    half = (1 + ratio) / (2 * c)
    return half - np.sqrt(half**2 - ratio / c)


def critical_buckling_design_value(modulus: FloatArray, slenderness: FloatArray) -> FloatArray:
    """3.7.1.5: F_cE = 0.822 E_min' / (l_e / d)², Pa; the duration of the load does not enter."""
    return 0.822 * modulus / slenderness**2


def size_factors(width: FloatArray, thickness: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Supplement table 4A: C_F in tension and in compression of dimension lumber; sizes in m as dressed."""
    tension, compression = np.full(width.shape, 0.9), np.full(width.shape, 0.9)
    for most, in_tension, in_compression in reversed(_SIZE):
        tension = np.where(width <= most * _INCH, in_tension, tension)
        compression = np.where(width <= most * _INCH, in_compression, compression)
    # Five inches and more is a post or timber, of another table without a factor.
    thick = thickness >= 4.4 * _INCH
    return np.where(thick, 1.0, tension), np.where(thick, 1.0, compression)


def capacities(
    members: MembersToCheck, materials: tuple[Material, ...], material: IntArray, options: Options | None = None
) -> Capacities:
    """Adjusted capacities of timber members for every load duration."""
    options = options or Options()
    count = len(members.section)
    keys = ("F_t", "F_c", "E_min")
    values = np.array([[found.values.get(key, np.nan) for key in keys] for found in materials] + [[np.nan] * 3])
    f_t, f_c, e_min = values[material].T
    glued = np.array([section.product is Product.GLUED_LAMINATED for section in members.sections])[members.section]
    depth, width = members.dimension("depth"), members.dimension("width")
    area = members.of_sections("area")
    net_area = np.where(np.isnan(members.net_area), area, members.net_area)
    in_tension, in_compression = size_factors(np.fmax(depth, width), np.fmin(depth, width))
    in_tension, in_compression = np.where(glued, 1.0, in_tension), np.where(glued, 1.0, in_compression)
    common = options.wet_service * options.temperature * options.incising
    duration = np.array(TIME_EFFECT if options.lrfd else C_D)
    convert = {key: _K_F[key] * _PHI[key] if options.lrfd else 1.0 for key in _K_F}
    with np.errstate(invalid="ignore", divide="ignore"):
        tensile = (f_t * common * in_tension * convert["tension"])[:, np.newaxis] * duration
        starred = (f_c * common * in_compression * convert["compression"])[:, np.newaxis] * duration
        ratios = (members.buckling_length_in / depth, members.buckling_length_out / width)
        slenderness = np.fmax(*ratios)
        critical = critical_buckling_design_value(e_min * common * convert["stability"], slenderness)
        c = np.where(glued, 0.9, 0.8)[:, np.newaxis]
        stability = column_stability(critical[:, np.newaxis] / starred, c)
        tension = net_area[:, np.newaxis] * tensile
        compression = area[:, np.newaxis] * stability * starred
        slender = slenderness > LARGEST_SLENDERNESS
    missing = timber_missing(members, materials, material, "F_t", "reference values of the NDS Supplement")
    no_compression = {
        **{
            int(member): f"its slenderness l_e/d is above {LARGEST_SLENDERNESS:g} (3.7.1.4)"
            for member in np.flatnonzero(slender)
        },
        **missing,
    }
    tension[list(missing)] = np.nan
    compression[list(no_compression)] = np.nan
    steps = (
        Step("F_t'", "adjusted tension design value, by load duration", "table 4.3.1", "Pa", tensile),
        Step("T'", "capacity in tension", "3.8.1", "N", tension, "A_net * F_t'"),
        Step("F_c*", "compression design value but for C_P, by load duration", "3.7.1.5", "Pa", starred),
        Step("l_e/d", "slenderness", "3.7.1.3", "", slenderness),
        Step("F_cE", "critical buckling design value", "3.7.1.5", "Pa", critical),
        Step("C_P", "column stability factor, by load duration", "3.7-1", "", stability),
        Step("P'", "capacity in compression", "3.6.3", "N", compression),
    )
    return Capacities(
        tension,
        compression,
        slenderness,
        ("NDS 3.8.1", "NDS 3.7.1 in the plane", "NDS 3.7.1 out of the plane"),
        np.zeros(count, dtype=np.intp),
        np.where(ratios[0] >= ratios[1], 1, 2).astype(np.intp),
        missing,
        no_compression,
        slenderness_limit=np.full(count, LARGEST_SLENDERNESS),
        steps=steps,
    )
