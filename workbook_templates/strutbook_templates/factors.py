"""Cases and combinations that a filled-in workbook begins with, to be adapted by the engineer.

Metric: EN 1990:2002, expression 6.10 with 1.35 or 1.0 on permanent and 1.5 on variable actions (table
A1.2(B)), psi0 of 0.7 for imposed load (category C) and 0.6 for wind and temperature (table A1.1), and
expression 6.14b for service. US: ASCE/SEI 7-16, section 2.3.1 (2.3.4 for temperature), and factors of 1
with 0.6 W (section 2.4.1) for service.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from strutbook_templates.contents import Row

#: What a case is called, by the name of the unit system and the nature of the action.
CASE_NAMES: Mapping[str, Mapping[str, str]] = {
    "metric": {"permanent": "G", "imposed": "Q", "snow": "S", "wind": "W", "temperature": "T"},
    "us": {"permanent": "D", "imposed": "L", "snow": "S", "wind": "W", "temperature": "T"},
}

_Factors = Mapping[str, float]

_STRENGTH: Mapping[str, Mapping[str, tuple[_Factors, ...]]] = {
    "metric": {
        "girder": ({"permanent": 1.35, "imposed": 1.5}, {"permanent": 1.0, "imposed": 1.5}),
        "roof": ({"permanent": 1.35, "snow": 1.5}, {"permanent": 1.0, "wind": 1.5}),
        "tower": (
            {"permanent": 1.35, "imposed": 1.5, "wind": 0.9},
            {"permanent": 1.35, "imposed": 1.05, "wind": 1.5},
            {"permanent": 1.0, "wind": 1.5},
            {"permanent": 1.35, "imposed": 1.05, "wind": 0.9, "temperature": 1.5},
        ),
    },
    "us": {
        "girder": ({"permanent": 1.4}, {"permanent": 1.2, "imposed": 1.6}),
        "roof": ({"permanent": 1.4}, {"permanent": 1.2, "snow": 1.6}, {"permanent": 0.9, "wind": 1.0}),
        "tower": (
            {"permanent": 1.4},
            {"permanent": 1.2, "imposed": 1.6},
            {"permanent": 1.2, "imposed": 1.0, "wind": 1.0},
            {"permanent": 0.9, "wind": 1.0},
            {"permanent": 1.2, "imposed": 0.5, "temperature": 1.0},
        ),
    },
}

_SERVICE: Mapping[str, Mapping[str, tuple[_Factors, ...]]] = {
    "metric": {
        "girder": ({"permanent": 1.0, "imposed": 1.0}, {"permanent": 1.0}),
        "roof": ({"permanent": 1.0, "snow": 1.0}, {"permanent": 1.0, "wind": 1.0}),
        "tower": (
            {"permanent": 1.0, "imposed": 1.0, "wind": 0.6},
            {"permanent": 1.0, "imposed": 0.7, "wind": 1.0},
        ),
    },
    "us": {
        "girder": ({"permanent": 1.0, "imposed": 1.0}, {"permanent": 1.0}),
        "roof": ({"permanent": 1.0, "snow": 1.0}, {"permanent": 1.0, "wind": 0.6}),
        "tower": ({"permanent": 1.0, "imposed": 1.0}, {"permanent": 1.0, "wind": 0.6}),
    },
}

_PREFIXES = {"metric": ("ULS", "SLS"), "us": ("LRFD", "Service ")}


def case_rows(system: str, natures: Sequence[str]) -> list[Row]:
    """Rows of the sheet Cases; the permanent case carries the self weight."""
    names = CASE_NAMES[system]
    return [
        {"Case": names[nature], "Nature": nature, "Self weight": 1.0 if nature == "permanent" else None}
        for nature in natures
    ]


def combination_rows(system: str, use: str) -> list[Row]:
    """Rows of the sheet Combinations for a use: `girder`, `roof` or `tower`."""
    names = CASE_NAMES[system]
    strength, service = _PREFIXES[system]
    kinds = (("strength", strength, _STRENGTH), ("service", service, _SERVICE))
    return [
        {"Combination": f"{prefix}{number}", "For": kind}
        | {names[nature]: factor for nature, factor in factors.items()}
        for kind, prefix, table in kinds
        for number, factors in enumerate(table[system][use], start=1)
    ]
