"""Members by working stress: yield over a factor of safety, and Euler's load over another; for quick checks.

The factors are inputs. The defaults are common practice and come from no standard in particular: 1.67 on yield, 2.0 on
Euler's load.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from strutbook.arrays import FloatArray, IntArray
from strutbook.checks.buckling import euler_load, missing_radii
from strutbook.checks.capacity import Capacities, MembersToCheck, Step
from strutbook.materials.material import Material


@dataclass(frozen=True)
class Options:
    """Factors of safety."""

    on_yield: float = 1.67
    on_euler: float = 2.0


def capacities(
    members: MembersToCheck, materials: tuple[Material, ...], material: IntArray, options: Options | None = None
) -> Capacities:
    """Allowable forces of members of any material that has a yield strength."""
    options = options or Options()
    count = len(members.section)
    strengths = np.array([found.strengths[0].yield_strength if found.strengths else np.nan for found in materials])
    moduli = np.array([found.elastic_modulus for found in materials])
    strength: FloatArray = np.append(strengths, np.nan)[material]
    modulus: FloatArray = np.append(moduli, np.nan)[material]
    area = members.of_sections("area")
    net_area = np.where(np.isnan(members.net_area), area, members.net_area)
    net_area = net_area * np.where(np.isnan(members.shear_lag), 1.0, members.shear_lag)
    tension = strength * net_area / options.on_yield
    squash = strength * area / options.on_yield
    about_y = euler_load(modulus, members.of_sections("second_moment_y"), members.buckling_length_in)
    about_z = euler_load(modulus, members.of_sections("second_moment_z"), members.buckling_length_out)
    longest = np.maximum(members.buckling_length_in, members.buckling_length_out)
    weakest = euler_load(modulus, members.of_sections("second_moment_min"), longest)
    euler = np.stack([about_y, about_z, weakest]) / options.on_euler
    choices = np.vstack([squash, euler])
    missing = {
        int(member): "no yield strength of its material is given" for member in np.flatnonzero(np.isnan(strength))
    }
    unknown = {**missing, **missing_radii(members)}
    governing = np.argmin(np.where(np.isnan(choices), np.inf, choices), axis=0)
    compression = choices[governing, np.arange(count)]
    compression[list(unknown)] = np.nan
    ratios = np.stack(
        [
            members.buckling_length_in / members.of_sections("radius_y"),
            members.buckling_length_out / members.of_sections("radius_z"),
            longest / members.of_sections("radius_min"),
        ]
    )
    words = ("yield", "yield", "Euler about y", "Euler about z", "Euler about the weakest axis")
    steps = (
        Step("N_t", "yield strength x net area / factor on yield", "working stress", "N", tension),
        Step("N_s", "yield strength x area / factor on yield", "working stress", "N", squash),
        Step("N_E,y", "Euler's load about y / factor", "working stress", "N", euler[0]),
        Step("N_E,z", "Euler's load about z / factor", "working stress", "N", euler[1]),
        Step("N_E,min", "Euler's load about the weakest axis / factor", "working stress", "N", euler[2]),
    )
    return Capacities(
        tension[:, np.newaxis],
        compression[:, np.newaxis],
        ratios.max(axis=0),
        tuple(f"working stress, {word}" for word in words),
        np.zeros(count, dtype=np.intp),
        governing.astype(np.intp) + 1,
        missing,
        unknown,
        dict.fromkeys(
            range(count), f"factors of safety {options.on_yield:g} on yield and {options.on_euler:g} on Euler's load"
        ),
        steps=steps,
    )
