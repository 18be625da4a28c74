"""Elastic buckling loads of members with hinged ends."""

from __future__ import annotations

import numpy as np

from strutbook.arrays import BoolArray, FloatArray
from strutbook.checks.capacity import MembersToCheck
from strutbook.sections.angles import principal_shear_centre
from strutbook.sections.section import Section, Shape

#: Shear modulus over modulus of elasticity of steel: 81 000 over 210 000 N/mm² (EN 1993-1-1, 3.2.6).
SHEAR_OF_ELASTIC = 81.0 / 210.0
#: Open sections, which can twist as they buckle.
OPEN = (Shape.ANGLE, Shape.DOUBLE_ANGLE, Shape.TEE, Shape.CHANNEL, Shape.I_SECTION)


def euler_load(elastic_modulus: FloatArray, second_moment: FloatArray, length: FloatArray) -> FloatArray:
    """Euler load, N: π² E I / L² (L. Euler, 1744).

    >>> round(float(euler_load(210e9, 788e-8, 1.936)), -3)
    4357000.0
    """
    load: FloatArray = np.pi**2 * elastic_modulus * second_moment / length**2
    return load


def twisting_load(members: MembersToCheck, elastic_modulus: FloatArray) -> tuple[FloatArray, BoolArray]:
    """Elastic load of torsional or torsional-flexural buckling, N, and for which members it is asked.

    The smallest root of the three coupled equations of bending about both principal axes and twisting
    (S. P. Timoshenko and J. M. Gere, Theory of Elastic Stability, 2nd ed., 5.4; from memory), as the largest eigenvalue
    of a symmetric matrix. Twisting has the buckling length out of the plane. Other members get infinity.

    Returns
    -------
    load : (members,) array of float
    open_section : (members,) array of bool
    """
    opened = members.having(*OPEN)
    load = np.full(len(members.section), np.inf)
    if not opened.any():
        return load, opened
    area = members.of_sections("area")[opened]
    modulus = elastic_modulus[opened]
    length_in, length_out = members.buckling_length_in[opened], members.buckling_length_out[opened]
    angle = members.having(Shape.ANGLE)[opened]
    longest = np.maximum(length_in, length_out)
    about_y = members.of_sections("second_moment_y")[opened]
    about_z = members.of_sections("second_moment_z")[opened]
    weakest = members.of_sections("second_moment_min")[opened]
    # A single angle bends about its principal axes, whatever the plane of the truss.
    strong = np.where(angle, about_y + about_z - weakest, about_y)
    weak = np.where(angle, weakest, about_z)
    bend_strong = euler_load(modulus, strong, np.where(angle, longest, length_in))
    bend_weak = euler_load(modulus, weak, np.where(angle, longest, length_out))
    offsets = np.array([_shear_centre(section) for section in members.sections])[members.section][opened]
    along_strong, along_weak = offsets.T
    polar = (strong + weak) / area + along_strong**2 + along_weak**2
    stiffness = SHEAR_OF_ELASTIC * modulus * members.of_sections("torsion_constant")[opened]
    warping = np.nan_to_num(members.of_sections("warping_constant")[opened])
    twist = (stiffness + euler_load(modulus, warping, np.where(angle, longest, length_out))) / polar
    # Bending that does not couple with twisting is the clause on flexural buckling's, with a curve of its own.
    near = 1e-6 * np.sqrt(polar)
    bend_weak = np.where(np.abs(along_weak) < near, np.inf, bend_weak)
    bend_strong = np.where(np.abs(along_strong) < near, np.inf, bend_strong)
    # Bending about the weak axis moves the section along the strong one, and twists it by its offset along the weak.
    scale = 1 / np.sqrt(np.stack([bend_weak, bend_strong, polar * twist], axis=1))
    matrix = np.zeros((len(area), 3, 3))
    matrix[:, 0, 0] = matrix[:, 1, 1] = 1.0
    matrix[:, 2, 2] = polar
    matrix[:, 0, 2] = matrix[:, 2, 0] = along_weak
    matrix[:, 1, 2] = matrix[:, 2, 1] = -along_strong
    matrix *= scale[:, :, np.newaxis] * scale[:, np.newaxis, :]
    load[opened] = 1 / np.linalg.eigvalsh(matrix)[:, -1]
    return load, opened


def missing_radii(members: MembersToCheck) -> dict[int, str]:
    """Members whose sections have no radii of gyration, without which nobody knows how they buckle."""
    unknown = np.isnan(members.of_sections("second_moment_y") + members.of_sections("second_moment_z"))
    return {
        int(member): f"no radii of gyration of {members.sections[members.section[member]].name} are given"
        for member in np.flatnonzero(unknown)
    }


def _shear_centre(section: Section) -> tuple[float, float]:
    """Offset of the shear centre along the strong and the weak axis, m."""
    if section.shape is Shape.ANGLE:
        return principal_shear_centre(section)
    return section.shear_centre_y, section.shear_centre_z
