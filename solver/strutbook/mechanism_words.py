"""Mechanisms in words: what moves, why, and what would stop it."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from strutbook.arrays import FloatArray
from strutbook.mechanisms import Mechanism
from strutbook.truss import Truss

#: Most joints that a sentence names.
NAMES = 6
_DIRECTIONS = {2: ("sideways", "up and down"), 3: ("along x", "along y", "up and down")}


def describe_mechanism(mechanism: Mechanism, truss: Truss, joint_names: Sequence[str]) -> tuple[str, str]:
    """What moves, without a full stop, and what to do about it, in full sentences.

    Examples
    --------
    >>> from strutbook import Supports, Truss, stability
    >>> truss = Truss([[0, 0], [3, 0], [6, 0]], [[0, 1], [1, 2]], Supports.rigid([0, 0, 2, 2], [[1, 0], [0, 1]] * 2))
    >>> what, todo = describe_mechanism(stability(truss).mechanisms[0], truss, ["A", "B", "C"])
    >>> what
    'joint B moves up and down: its bars are in one line; it stiffens only after a movement'
    >>> todo
    'Hold joint B up and down.'
    """
    what = _body(mechanism, truss) if mechanism.rigid else _joints(mechanism, truss, joint_names)
    if mechanism.infinitesimal:
        what += "; it stiffens only after a movement"
    return what, _remedy(mechanism, truss, joint_names)


def _body(mechanism: Mechanism, truss: Truss) -> str:
    """The truss as one body."""
    direction = _common_direction(mechanism.movement, truss.dimensions)
    if direction and len(mechanism.joints) == len(truss.joints):
        return f"the whole truss moves {direction}, and no support stops it"
    return "the whole truss turns, and no support stops it"


def _joints(mechanism: Mechanism, truss: Truss, names: Sequence[str]) -> str:
    """The joints that move, in which direction, and why they can."""
    moving = mechanism.joints
    direction = _common_direction(mechanism.movement[list(moving)], truss.dimensions)
    together = " together" if len(moving) > 1 else ""
    verb = "move" if len(moving) > 1 else "moves"
    what = f"{_listed([names[joint] for joint in moving])} {verb}{f' {direction}' * bool(direction)}{together}"
    if mechanism.panels:
        panels = ["-".join(names[joint] for joint in panel) for panel in mechanism.panels]
        several = len(panels) > 1
        listed = f"{', '.join(panels[:-1])} and {panels[-1]}" if several else panels[0]
        return f"{what}; the panel{'s' * several} {listed} ha{'ve' if several else 's'} no diagonal"
    if len(moving) == 1:
        return f"{what}: {_why_loose(moving[0], truss)}"
    return what


def _why_loose(joint: int, truss: Truss) -> str:
    at_joint = (truss.members == joint).any(axis=1)
    held = truss.supports.direction[truss.supports.joint == joint]
    directions = np.vstack([truss.direction_cosines[at_joint], held])
    rank = int(np.linalg.matrix_rank(directions, tol=1e-6)) if len(directions) else 0
    if rank == 0:
        return "no bar reaches it"
    if rank == 1:
        return "its bars are in one line" if len(directions) > 1 else "it has one bar only"
    return "its bars are in one plane"


def _remedy(mechanism: Mechanism, truss: Truss, names: Sequence[str]) -> str:
    words = _DIRECTIONS[truss.dimensions]
    held = [f"joint {names[joint]} {words[axis]}" for joint, axis in mechanism.held]
    bars = [f"{names[first]}-{names[second]}" for first, second in mechanism.braces]
    if mechanism.rigid or not bars:
        return f"Hold {held[0]}." if held else "Hold one more direction."
    if mechanism.panels:
        remedy = f"Add a diagonal: {bars[0]} or {bars[1]}."
        if len(mechanism.panels) > 1:
            remedy = f"Add a diagonal in one of them, for example {bars[0]}."
    else:
        remedy = f"Add a bar, for example {bars[0]}."
    return f"{remedy} Holding {held[0]} would stop it too."


def _common_direction(movement: FloatArray, dimensions: int) -> str:
    """The direction in words, where all joints move along one; empty where they do not."""
    size = np.linalg.norm(movement, axis=1)
    largest = movement[int(size.argmax())] / size.max()
    across = movement - np.outer(movement @ largest, largest)
    if np.abs(across).max() > 1e-3:
        return ""
    axis = int(np.abs(largest).argmax())
    if abs(largest[axis]) > 1 - 1e-6:
        return _DIRECTIONS[dimensions][axis]
    sign = 1.0 if largest[axis] > 0 else -1.0
    return f"along ({', '.join(f'{sign * component + 0.0:.2f}' for component in largest)})"


def _listed(names: Sequence[str]) -> str:
    """Names of joints in a sentence.

    >>> _listed(["U3", "U4"]), _listed(["C"])
    ('joints U3 and U4', 'joint C')
    """
    if len(names) == 1:
        return f"joint {names[0]}"
    if len(names) > NAMES:
        return f"joints {', '.join(names[:NAMES])} and {len(names) - NAMES} more"
    return f"joints {', '.join(names[:-1])} and {names[-1]}"
