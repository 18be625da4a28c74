"""Square towers: four legs, a diagonal in every face of every bay, and a plan brace on every level."""

from __future__ import annotations

from itertools import pairwise

from strutbook_templates.trusses import Bar, Truss

_CORNERS = "ABCD"  #: anticlockwise, from the corner at the origin


def square_tower(height: float, bays: int, base: float, top: float) -> Truss:
    """Square tower on four pinned feet, straight or tapering.

    Joints are named by corner and level (A0 at a foot). Face diagonals change direction from bay to bay.
    `shares` holds the length of tower that wind on the two windward corners acts on.

    >>> tower = square_tower(24.0, 6, 4.0, 2.0)
    >>> len(tower.joints), len(tower.members)
    (28, 78)
    """
    levels = range(bays + 1)
    joints = {
        f"{corner}{level}": point
        for level in levels
        for corner, point in zip(_CORNERS, _square(height, level / bays, base, top), strict=True)
    }
    bars: list[Bar] = []
    for level in levels[1:]:
        bars += [_bar(f"{corner}{level - 1}", f"{corner}{level}", "leg") for corner in _CORNERS]
        ring = [f"{corner}{level}" for corner in (*_CORNERS, _CORNERS[0])]
        below = [f"{corner}{level - 1}" for corner in (*_CORNERS, _CORNERS[0])]
        bars += [_bar(start, end, "horizontal") for start, end in pairwise(ring)]
        falling = level % 2
        for (low, next_low), (high, next_high) in zip(pairwise(below), pairwise(ring), strict=True):
            bars.append(_bar(low, next_high, "face diagonal") if falling else _bar(next_low, high, "face diagonal"))
        bars.append(_bar(f"A{level}", f"C{level}", "plan brace"))
    bay = height / bays
    shares = {f"{corner}{level}": bay / (4 if level == bays else 2) for level in levels[1:] for corner in ("A", "D")}
    feet = {f"{corner}0": "x y z" for corner in _CORNERS}
    return Truss(joints, tuple(bars), feet, shares, base, height)


def _square(height: float, part: float, base: float, top: float) -> list[tuple[float, ...]]:
    """Corners of the tower at a part of its height; the middle of the plan stays where it is."""
    inset = (base - top) * part / 2
    low, high, up = inset, base - inset, height * part
    return [(low, low, up), (high, low, up), (high, high, up), (low, high, up)]


def _bar(start: str, end: str, group: str) -> Bar:
    return Bar(f"{start}-{end}", start, end, group)
