"""What acts along members, brought to the joints: self weight, line loads, temperature.

A line load goes half and half to the end joints, as statics has it for a member with hinged ends. The bending
that it causes in the member between them is not part of a truss analysis.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from strutbook.arrays import FloatArray, IntArray, check_indices
from strutbook.truss import Truss

#: Standard acceleration of gravity, m/s2 (ISO 80000-3).
STANDARD_GRAVITY = 9.80665


def self_weight(truss: Truss, mass_per_length: ArrayLike, gravity: float = STANDARD_GRAVITY) -> FloatArray:
    """Joint loads (joints, dimensions) N of the weight of the members, down along the last axis.

    Parameters
    ----------
    truss : Truss
        Its last axis points up.
    mass_per_length : (members,) array of float
        kg/m.
    gravity : float
        m/s2.
    """
    intensity = np.zeros((len(truss.members), truss.dimensions))
    intensity[:, -1] = -gravity * np.asarray(mass_per_length, dtype=np.float64)
    return line_load(truss, np.arange(len(truss.members)), intensity)


def line_load(truss: Truss, member: ArrayLike, intensity: ArrayLike) -> FloatArray:
    """Joint loads (joints, dimensions) N of loads per length of the member.

    Parameters
    ----------
    truss : Truss
        Joints and members.
    member : (loads,) array of int
        Members that carry the loads; a member may occur more than once.
    intensity : (loads, dimensions) array of float
        N/m along the global axes.

    Examples
    --------
    >>> from strutbook import Supports, Truss
    >>> rafter = Truss([[0, 0], [4, 3]], [[0, 1]], Supports.rigid([0], [[1, 0]]))
    >>> line_load(rafter, [0], [[0, -1000]])
    array([[    0., -2500.],
           [    0., -2500.]])
    """
    loaded = _loaded_members(truss, member)
    force = np.asarray(intensity, dtype=np.float64) * truss.lengths[loaded, np.newaxis]
    return _half_to_each_end(truss, loaded, force)


def projected_line_load(truss: Truss, member: ArrayLike, intensity: ArrayLike) -> FloatArray:
    """Joint loads (joints, dimensions) N of loads per projected length, as snow and wind are given.

    Each component acts on the projection of the member on the plane (in a plane truss: the line) perpendicular
    to that component: wy on a rafter acts per horizontal length, wx per vertical length. A member along the
    component catches nothing of it.

    Parameters
    ----------
    truss : Truss
        Joints and members.
    member : (loads,) array of int
        Members that carry the loads; a member may occur more than once.
    intensity : (loads, dimensions) array of float
        N per m of projection, along the global axes.

    Examples
    --------
    >>> from strutbook import Supports, Truss
    >>> rafter = Truss([[0, 0], [4, 3]], [[0, 1]], Supports.rigid([0], [[1, 0]]))
    >>> projected_line_load(rafter, [0], [[0, -1000]])
    array([[    0., -2000.],
           [    0., -2000.]])
    """
    loaded = _loaded_members(truss, member)
    vectors = truss.direction_cosines[loaded] * truss.lengths[loaded, np.newaxis]
    squares = vectors * vectors
    # Summing the other components, and not subtracting from the length, leaves an exact 0 along an axis.
    projected = np.sqrt(squares @ (1.0 - np.eye(truss.dimensions)))
    return _half_to_each_end(truss, loaded, np.asarray(intensity, dtype=np.float64) * projected)


def thermal_elongation(truss: Truss, expansion: ArrayLike, temperature_change: ArrayLike) -> FloatArray:
    """Free elongation (members, ...) m of members that are warmed.

    Parameters
    ----------
    truss : Truss
        Joints and members.
    expansion : (members,) array of float
        Coefficient of thermal expansion, 1/K.
    temperature_change : (members,) or (members, cases) array of float
        K, positive when warmed.
    """
    per_kelvin = np.asarray(expansion, dtype=np.float64) * truss.lengths
    change = np.asarray(temperature_change, dtype=np.float64)
    return per_kelvin.reshape(-1, *(1,) * (change.ndim - 1)) * change


def _loaded_members(truss: Truss, member: ArrayLike) -> IntArray:
    loaded = np.asarray(member, dtype=np.intp)
    check_indices(loaded, len(truss.members), "Load", "member")
    return loaded


def _half_to_each_end(truss: Truss, member: IntArray, force: FloatArray) -> FloatArray:
    loads = np.zeros(truss.joints.shape)
    for end in (0, 1):
        np.add.at(loads, truss.members[member, end], 0.5 * force)
    return loads
