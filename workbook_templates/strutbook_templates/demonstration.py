"""The demonstration: one truss of an invented footbridge, with every table in use.

Twelve panels of two metres with crossed diagonals in the eight middle ones: 53 members, eight times
statically indeterminate, so that warming, a misfit and the order of assembly show in the forces. The chords are more
than they need and the diagonals less, so that checks pass and fail and `strutbook size` has something to do.
"""

from __future__ import annotations

from strutbook_templates.contents import Contents, Row, geometry_rows
from strutbook_templates.plane_shapes import pratt
from strutbook_templates.trusses import Bar, Truss
from strutbook_templates.unit_systems import METRIC

_SPAN, _PANELS, _DEPTH = 24.0, 12, 2.0

#: Line loads on one truss, which carries half of a deck three metres wide (kN/m).
_DECK, _CROWD, _UPLIFT = -2.0, -7.5, 1.2

_SECTIONS = {
    "top chord": "Chord",
    "bottom chord": "Chord",
    "end post": "Chord",
    "post": "Post",
    "diagonal": "Diagonal",
    "counter diagonal": "Diagonal",
}

#: Strength: EN 1990:2002, expression 6.10 with the partial factors of its table A1.2(B) (1.35 or 1.0
#: permanent, 1.5 variable) and psi factors of table A2.2 (crowd 0.4, wind 0.3, temperature 0.6) beside the
#: leading action. Service: expression 6.14b, characteristic.
_COMBINATIONS: tuple[Row, ...] = (
    {"Combination": "ULS1", "For": "strength", "G": 1.35, "Q": 1.5, "T": 0.9},
    {"Combination": "ULS2", "For": "strength", "G": 1.35, "Q left": 1.5, "T": 0.9},
    {"Combination": "ULS3", "For": "strength", "G": 1.0, "W": 1.5},
    {"Combination": "ULS4", "For": "strength", "G": 1.35, "Q": 0.6, "T": 1.5, "A": 1.0},
    {"Combination": "SLS1", "For": "service", "G": 1.0, "Q": 1.0, "T": 0.6},
    {"Combination": "SLS2", "For": "service", "G": 1.0, "Q left": 1.0, "T": 0.6},
    {"Combination": "SLS3", "For": "service", "G": 1.0, "T": 1.0, "A": 1.0},
)


def demonstration_truss() -> Truss:
    """The truss of the demonstration, in metres."""
    truss = pratt(_SPAN, _PANELS, _DEPTH)
    half = _PANELS // 2
    # The outermost braced panel on each side has one diagonal only, as the shear there never turns.
    counters = [(f"L{i}", f"U{i + 1}") for i in range(2, half)] + [
        (f"L{i}", f"U{i - 1}") for i in range(half + 1, _PANELS - 1)
    ]
    bars = [Bar(f"{start}-{end}", start, end, "counter diagonal") for start, end in counters]
    return Truss(truss.joints, truss.members + tuple(bars), truss.supports, truss.shares, _SPAN, _DEPTH)


def demonstration_contents() -> Contents:
    """Tables of the demonstration workbook."""
    truss = demonstration_truss()
    rows = geometry_rows(truss, _SECTIONS, "S355")
    # One counter diagonal came half a millimetre too long from the workshop.
    rows["Members"] = [{**row, "Misfit": 0.5} if row["Member"] == "L5-U6" else row for row in rows["Members"]]
    rows["Loads"] = _joint_loads(truss)
    rows["Member loads"] = _member_loads(truss)
    rows["Settlements"] = [{"Case": "A", "Joint": f"L{_PANELS}", "dy": -6.0}]
    rows["Cases"] = [
        {"Case": "G", "Nature": "permanent", "Self weight": 1.0},
        {"Case": "Q", "Nature": "imposed"},
        {"Case": "Q left", "Nature": "imposed"},
        {"Case": "W", "Nature": "wind"},
        {"Case": "T", "Nature": "temperature"},
        {"Case": "A", "Nature": "settlement"},
    ]
    rows["Combinations"] = list(_COMBINATIONS)
    # The deck holds the bottom chord sideways at every joint, frames the top chord at every second one.
    rows["Members"] = [
        {**row, "Buckling length out": 4.0} if row["Group"] == "top chord" else row for row in rows["Members"]
    ]
    rows["Sections"] = [
        {"Section": "Chord", "Designation": "SHS 120x120x8"},
        {"Section": "Post", "Designation": "SHS 60x60x5"},
        {"Section": "Diagonal", "Designation": "SHS 50x50x5"},
    ]
    rows["Materials"] = [{"Material": "S355", "E": 210000.0, "Density": 7850.0, "Expansion": 12.0}]
    return Contents(
        METRIC,
        2,
        rows,
        {
            "Title": "Footbridge at Osterfenn lock, north truss",
            "Reference": "Demonstration (an invented bridge)",
            "Date": "2 March 2026",
            "Standard": "EN 1993-1-1",
            "Deflection limit": 400.0,
        },
        tuple(str(row["Case"]) for row in rows["Cases"]),
        truss,
    )


def _joint_loads(truss: Truss) -> list[Row]:
    """Deck, crowd on the whole deck and on its left half, and wind that lifts the deck."""
    left = {joint: share for joint, share in truss.shares.items() if truss.joints[joint][0] < _SPAN / 2}
    left[f"L{_PANELS // 2}"] = _SPAN / _PANELS / 2
    shares = {"G": truss.shares, "Q": truss.shares, "Q left": left, "W": truss.shares}
    line_loads = {"G": _DECK, "Q": _CROWD, "Q left": _CROWD, "W": _UPLIFT}
    return [
        {"Case": case, "Joint": joint, "Fx": None, "Fy": round(line_loads[case] * share, 6)}
        for case, carried in shares.items()
        for joint, share in carried.items()
    ]


def _member_loads(truss: Truss) -> list[Row]:
    """A cable duct under four bottom chord members, and a top chord that the sun warms."""
    duct: list[Row] = [{"Case": "G", "Member": f"L{i}-L{i + 1}", "Per": "length", "wy": -0.4} for i in range(4, 8)]
    sun: list[Row] = [
        {"Case": "T", "Member": bar.name, "Temperature change": 15.0}
        for bar in truss.members
        if bar.group == "top chord"
    ]
    return duct + sun
