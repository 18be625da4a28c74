"""Fink roof trusses: two stiff triangles that lean on each other and are tied at their feet."""

from __future__ import annotations

import numpy as np

from strutbook_templates.trusses import Bar, Truss

_Point = tuple[float, float]

#: Rafter panels on both slopes together, and how often each half is subdivided.
_SUBDIVISIONS = {4: 1, 8: 2, 16: 3}


def fink(span: float, panels: int, rise: float) -> Truss:
    """Fink roof truss with webs square to the rafters.

    Lower joints are L0, L1, ..., rafter joints U1, U2, ... from the left, joints between them W1, W2, ....
    The load stands on the rafters, by its length on plan.

    >>> truss = fink(16.0, 8, 4.0)
    >>> len(truss.members) == 2 * len(truss.joints) - 3
    True
    """
    if panels not in _SUBDIVISIONS:
        raise ValueError(f"panels is {panels}, and the webs of a Fink truss halve again and again; give 4, 8 or 16.")
    if rise >= span / 2:
        raise ValueError(
            f"rise is {rise:g} and span {span:g}, and webs square to rafters of 45 degrees or more miss the "
            "tie; give a rise below half the span."
        )
    left_heel, apex, right_heel = (0.0, 0.0), (span / 2, rise), (span, 0.0)
    # The foot of the main strut is equally far from heel and apex: half the rafter over its cosine.
    foot = (span / 4 * (1 + (2 * rise / span) ** 2), 0.0)
    far_foot = (span - foot[0], 0.0)
    lines = _half(left_heel, apex, foot, _SUBDIVISIONS[panels])
    lines += _half(apex, right_heel, far_foot, _SUBDIVISIONS[panels])
    lines.append((foot, far_foot, "tie"))
    names = _names(lines, span, rise)
    bars = tuple(
        Bar(f"{names[_key(start)]}-{names[_key(end)]}", names[_key(start)], names[_key(end)], group)
        for start, end, group in lines
    )
    joints = {name: point for point, name in names.items()}
    order = sorted(joints, key=lambda name: ("LUW".index(name[0]), int(name[1:])))
    heels = "L0", f"L{sum(name[0] == 'L' for name in joints) - 1}"
    panel = span / panels
    shares = {heels[0]: panel / 2, **{f"U{i}": panel for i in range(1, panels)}, heels[1]: panel / 2}
    return Truss({name: joints[name] for name in order}, bars, {heels[0]: "x y", heels[1]: "y"}, shares, span, rise)


def _half(start: _Point, end: _Point, foot: _Point, subdivisions: int) -> list[tuple[_Point, _Point, str]]:
    """Isosceles triangle over a rafter, with a strut from the rafter's middle to its foot."""
    middle = _midpoint(start, end)
    if subdivisions == 1:
        return [
            (start, middle, "rafter"),
            (middle, end, "rafter"),
            (middle, foot, "strut"),
            (start, foot, "tie"),
            (foot, end, "tie"),
        ]
    near, far = _midpoint(start, foot), _midpoint(foot, end)
    return [
        *_half(start, middle, near, subdivisions - 1),
        *_half(middle, end, far, subdivisions - 1),
        (middle, foot, "strut"),
        (near, foot, "tie"),
        (foot, far, "tie"),
    ]


def _midpoint(a: _Point, b: _Point) -> _Point:
    return (a[0] + b[0]) / 2, (a[1] + b[1]) / 2


def _key(point: _Point) -> _Point:
    """Points that two halves reach by different sums are one joint."""
    return round(point[0], 9), round(point[1], 9)


def _names(lines: list[tuple[_Point, _Point, str]], span: float, rise: float) -> dict[_Point, str]:
    """Names by point: L on the level of the heels, U on the rafters, W between them."""
    points = sorted({_key(point) for start, end, _ in lines for point in (start, end)})
    lower = [point for point in points if point[1] == 0]
    # A joint is on the rafter when its height is what the slope gives there.
    slope = [rise * (1 - abs(2 * x / span - 1)) for x, _ in points]
    upper = [point for point, height in zip(points, slope, strict=True) if point[1] and np.isclose(point[1], height)]
    between = [point for point in points if point not in lower and point not in upper]
    return (
        {point: f"L{i}" for i, point in enumerate(lower)}
        | {point: f"U{i}" for i, point in enumerate(upper, start=1)}
        | {point: f"W{i}" for i, point in enumerate(between, start=1)}
    )
