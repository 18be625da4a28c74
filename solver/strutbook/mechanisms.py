"""Mechanisms: which joints move together, and what would stop them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from strutbook.arrays import FloatArray
from strutbook.equilibrium import Equilibrium
from strutbook.truss import Truss
from collections.abc import Sequence


@dataclass(frozen=True, eq=False)
class Mechanism:
    """One independent way in which a truss can move."""

    #: (joints, dimensions) movement, the largest of a joint scaled to 1
    movement: FloatArray
    #: indices of the joints that move
    joints: tuple[int, ...]
    #: whether self-stress stops it after a small movement
    infinitesimal: bool = False
    #: cycles of four joints without a diagonal that change their shape
    panels: tuple[tuple[int, ...], ...] = ()
    #: pairs of joints: each, joined by a bar, would stop it; the best first
    braces: tuple[tuple[int, int], ...] = ()
    #: joint and direction: each, held, would stop it; the best first
    held: tuple[tuple[int, tuple[float, ...]], ...] = ()

    def __post_init__(self) -> None:
        self.movement.flags.writeable = False


def mechanisms_of(matrix: Equilibrium, basis: FloatArray) -> tuple[Mechanism, ...]:
    """Mechanisms from a basis (free, mechanisms) of the null space of Bᵀ."""
    found = []
    for column in range(basis.shape[1]):
        movement = matrix.vectors_of_rows(basis[:, column : column + 1])[:, :, 0]
        size = np.sqrt((movement * movement).sum(axis=1))
        movement = movement / size.max()
        joints = tuple(int(j) for j in np.flatnonzero(size > 1e-6 * size.max()))
        found.append(Mechanism(movement, joints))
    return tuple(found)


def describe_mechanism(mechanism: Mechanism, truss: Truss, joint_names: Sequence[str]) -> tuple[str, str]:
    """What moves, and what to do about it."""
    names = ", ".join(joint_names[joint] for joint in mechanism.joints)
    return f"joints {names} can move together", "Add a bar or a support."
