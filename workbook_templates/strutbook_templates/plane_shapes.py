"""Plane trusses with parallel chords: Pratt, Howe, Warren and K, as pure functions of their dimensions.

Lower joints are L0, L1, ... from the left, upper joints U1, U2, ... above or between them, and middle
joints of K trusses M1, M2, .... The load stands on the lower chord, half a panel on its two ends.
All of them are statically determinate on a pin and a roller.
"""

from __future__ import annotations

from strutbook_templates.trusses import Bar, Truss

_Points = dict[str, tuple[float, ...]]


def pratt(span: float, panels: int, depth: float) -> Truss:
    """Pratt truss: diagonals fall towards the middle and are in tension under load from above.

    >>> truss = pratt(24.0, 8, 3.0)
    >>> len(truss.members) == 2 * len(truss.joints) - 3
    True
    """
    half = _even(panels) // 2
    left = [("U", i, "L", i + 1) for i in range(1, half)]
    right = [("U", i, "L", i - 1) for i in range(half + 1, panels)]
    return _with_posts(span, panels, depth, left + right)


def howe(span: float, panels: int, depth: float) -> Truss:
    """Howe truss: diagonals rise towards the middle and are in compression under load from above."""
    half = _even(panels) // 2
    left = [("L", i, "U", i + 1) for i in range(1, half)]
    right = [("L", i, "U", i - 1) for i in range(half + 1, panels)]
    return _with_posts(span, panels, depth, left + right)


def warren(span: float, panels: int, depth: float) -> Truss:
    """Warren truss: diagonals rise and fall in turn, upper joints stand over the middle of the panels."""
    panel = span / panels
    lower = _lower(span, panels)
    upper: _Points = {f"U{i}": ((i - 0.5) * panel, depth) for i in range(1, panels + 1)}
    bars = [
        *_chord("L", 0, panels, "bottom chord"),
        *_chord("U", 1, panels, "top chord"),
        *(_bar(f"L{joint}", f"U{i}", "diagonal") for i in range(1, panels + 1) for joint in (i - 1, i)),
    ]
    return _on_pin_and_roller(lower | upper, bars, span, panels, depth)


def warren_with_verticals(span: float, panels: int, depth: float) -> Truss:
    """Warren truss whose upper joints stand over the lower ones, with a vertical at each."""
    _even(panels)
    diagonals = [("L", i, "U", i + step) for i in range(2, panels - 1, 2) for step in (-1, 1)]
    return _with_posts(span, panels, depth, diagonals)


def k_truss(span: float, panels: int, depth: float) -> Truss:
    """K truss: from the middle of each post two diagonals open towards the middle of the span."""
    half = _even(panels) // 2
    lower, upper = _lower(span, panels), _upper(span, panels, depth)
    halved = [i for i in range(1, panels) if i != half]
    middle: _Points = {f"M{i}": (i * span / panels, depth / 2) for i in halved}
    bars = [
        *_chord("L", 0, panels, "bottom chord"),
        *_chord("U", 1, panels - 1, "top chord"),
        _bar("L0", "U1", "end post"),
        _bar(f"L{panels}", f"U{panels - 1}", "end post"),
        *(bar for i in halved for bar in (_bar(f"L{i}", f"M{i}", "post"), _bar(f"M{i}", f"U{i}", "post"))),
        _bar(f"L{half}", f"U{half}", "post"),
    ]
    for i in halved:
        inner = i + 1 if i < half else i - 1
        bars += [_bar(f"M{i}", f"U{inner}", "diagonal"), _bar(f"M{i}", f"L{inner}", "diagonal")]
    return _on_pin_and_roller(lower | middle | upper, bars, span, panels, depth)


def _even(panels: int) -> int:
    if panels % 2:
        raise ValueError(
            f"panels is {panels}, and this shape is symmetrical about a post in the middle; "
            f"give an even number of panels such as {panels + 1}."
        )
    return panels


def _with_posts(span: float, panels: int, depth: float, diagonals: list[tuple[str, int, str, int]]) -> Truss:
    """Truss with sloping end posts, a post at every inner joint and the given diagonals."""
    bars = [
        *_chord("L", 0, panels, "bottom chord"),
        *_chord("U", 1, panels - 1, "top chord"),
        _bar("L0", "U1", "end post"),
        _bar(f"L{panels}", f"U{panels - 1}", "end post"),
        *(_bar(f"L{i}", f"U{i}", "post") for i in range(1, panels)),
        *(_bar(f"{row}{i}", f"{other}{j}", "diagonal") for row, i, other, j in diagonals),
    ]
    joints = _lower(span, panels) | _upper(span, panels, depth)
    return _on_pin_and_roller(joints, bars, span, panels, depth)


def _lower(span: float, panels: int) -> _Points:
    return {f"L{i}": (i * span / panels, 0.0) for i in range(panels + 1)}


def _upper(span: float, panels: int, depth: float) -> _Points:
    return {f"U{i}": (i * span / panels, depth) for i in range(1, panels)}


def _chord(row: str, first: int, last: int, group: str) -> list[Bar]:
    return [_bar(f"{row}{i}", f"{row}{i + 1}", group) for i in range(first, last)]


def _bar(start: str, end: str, group: str) -> Bar:
    return Bar(f"{start}-{end}", start, end, group)


def _on_pin_and_roller(joints: _Points, bars: list[Bar], span: float, panels: int, height: float) -> Truss:
    panel = span / panels
    shares = {f"L{i}": panel / 2 if i in (0, panels) else panel for i in range(panels + 1)}
    return Truss(joints, tuple(bars), {"L0": "x y", f"L{panels}": "y"}, shares, span, height)
