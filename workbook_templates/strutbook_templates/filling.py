"""What stands in the tables of a workbook that begins from a shape: loads, cases, sizes and factors.

Sizes are a first guess from the largest bending moment and shear as a beam, for about half of the yield
stress; buckling is left to the engineer, as the sheets say.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence

from strutbook_addin.tables.units import Dimension
from strutbook_templates.contents import Contents, Row, geometry_rows
from strutbook_templates.factors import CASE_NAMES, case_rows, combination_rows
from strutbook_templates.parameters import Shape, Value
from strutbook_templates.plane_shapes import howe, k_truss, pratt, warren, warren_with_verticals
from strutbook_templates.roof_shapes import fink
from strutbook_templates.tower_shapes import square_tower
from strutbook_templates.trusses import Truss
from strutbook_templates.unit_systems import UnitSystem

_CHORDS = frozenset({"top chord", "bottom chord", "end post", "rafter", "tie", "leg"})

_STEEL: Mapping[str, tuple[Row, ...]] = {
    # EN 1991-1-1 table A.4 (77 to 78.5 kN/m3) and EN 1993-1-1, 3.2.6: E and the expansion of steel.
    "metric": (
        {"Material": "S355", "E": 210000.0, "Density": 7850.0, "Expansion": 12.0},
        {"Material": "S235", "E": 210000.0, "Density": 7850.0, "Expansion": 12.0},
    ),
    # AISC 360-16, list of symbols (E), and the Steel Construction Manual, part 17 (density, expansion).
    "us": (
        {"Material": "A992", "E": 29000.0, "Density": 490.0, "Expansion": 6.5},
        {"Material": "A36", "E": 29000.0, "Density": 490.0, "Expansion": 6.5},
    ),
}
#: Working stress of the first guess of sizes, as force units over area units (kN/cm2, kip/in2).
_GUESSED_STRESS = {"metric": 16.0, "us": 22.0}
#: Sizes go up in these steps (cm2, in2).
_AREA_STEP = {"metric": 2.0, "us": 0.5}


def blank_contents(dimension: int, system: UnitSystem) -> Contents:
    """Empty tables; only the sheet of materials holds steels to choose from."""
    return Contents(system, dimension, {"Materials": _STEEL[system.name]})


def shape_contents(shape: Shape, values: Mapping[str, Value], system: UnitSystem) -> Contents:
    """Filled tables of a shape.

    Raises
    ------
    ValueError
        When the parameters do not make a truss of this shape.
    """
    numbers = {name: float(value) for name, value in values.items() if not isinstance(value, str)}
    truss = _truss(shape.name, values, numbers)
    if shape.name == "tower":
        return _tower(truss, numbers, system)
    return _roof(truss, shape, numbers, system) if shape.name == "fink" else _girder(truss, shape, numbers, system)


def _truss(name: str, values: Mapping[str, Value], numbers: Mapping[str, float]) -> Truss:
    if name == "tower":
        return square_tower(numbers["height"], int(numbers["bays"]), numbers["base"], numbers["top"])
    span, panels = numbers["span"], int(numbers["panels"])
    if name == "fink":
        return fink(span, panels, numbers["rise"])
    if name == "warren" and values["verticals"] == "yes":
        return warren_with_verticals(span, panels, numbers["depth"])
    makers = {"pratt": pratt, "howe": howe, "warren": warren, "k": k_truss}
    return makers[name](span, panels, numbers["depth"])


def _girder(truss: Truss, shape: Shape, numbers: Mapping[str, float], system: UnitSystem) -> Contents:
    """Deck on the lower chord: permanent and imposed load per length."""
    natures = ("permanent", "imposed")
    loads = {nature: -numbers[nature] for nature in natures}
    return _plane(truss, shape, "girder", loads, natures, system)


def _roof(truss: Truss, shape: Shape, numbers: Mapping[str, float], system: UnitSystem) -> Contents:
    """Roof on the rafters: permanent load and snow downwards, wind upwards."""
    loads = {"permanent": -numbers["permanent"], "snow": -numbers["snow"], "wind": numbers["uplift"]}
    return _plane(truss, shape, "roof", loads, ("permanent", "snow", "wind"), system)


def _plane(
    truss: Truss,
    shape: Shape,
    use: str,
    line_loads: Mapping[str, float],
    natures: Sequence[str],
    system: UnitSystem,
) -> Contents:
    names = CASE_NAMES[system.name]
    downwards = 1.5 * sum(-load for load in line_loads.values() if load < 0)
    upwards = 1.5 * max(line_loads.values())
    load = max(downwards, upwards, 0.0)
    moment, shear = load * truss.span**2 / 8, load * truss.span / 2
    # Web members and end posts slope; a roof is as deep as its rise only at the apex.
    slope = math.sqrt(2)
    web = shear * slope
    chord = max(moment / truss.height * (slope if use == "roof" else 1.0), web)
    rows = _sized(truss, chord, web, system)
    rows["Loads"] = [
        {"Case": names[nature], "Joint": joint, "Fy": round(line_loads[nature] * share, 6)}
        for nature in natures
        for joint, share in truss.shares.items()
    ]
    panels = len(truss.shares) - 1
    length = f"{truss.span:g} {system.units[Dimension.LENGTH]}"
    title = f"{shape.name.capitalize()} truss, span {length}, {panels} panels"
    return _with_cases(truss, rows, title, use, natures, system)


def _tower(truss: Truss, numbers: Mapping[str, float], system: UnitSystem) -> Contents:
    """Loads on the top, wind along x on the windward corners of every level, and two legs in the sun."""
    natures = ("permanent", "imposed", "wind", "temperature")
    names = CASE_NAMES[system.name]
    level = int(numbers["bays"])
    height, wind = numbers["height"], numbers["wind"]
    weight = 1.5 * (numbers["permanent"] + numbers["imposed"])
    # Overturning goes into two legs on each side, the shear into the faces along the wind.
    leg = weight / 4 + 1.5 * wind * height**2 / 2 / (2 * truss.span)
    web = 1.5 * wind * height / 2 * math.sqrt(2)
    rows = _sized(truss, leg, web, system)
    on_top: list[Row] = [
        {"Case": names[nature], "Joint": f"{corner}{level}", "Fz": round(-numbers[nature] / 4, 6)}
        for nature in ("permanent", "imposed")
        for corner in "ABCD"
    ]
    sideways: list[Row] = [
        {"Case": names["wind"], "Joint": joint, "Fx": round(wind * share, 6)} for joint, share in truss.shares.items()
    ]
    rows["Loads"] = on_top + sideways
    warmer = {"metric": 20.0, "us": 35.0}[system.name]
    rows["Member loads"] = [
        {"Case": names["temperature"], "Member": bar.name, "Temperature change": warmer}
        for bar in truss.members
        if bar.group == "leg" and bar.start[0] in "AB"
    ]
    title = f"Square tower, height {height:g} {system.units[Dimension.LENGTH]}, {level} bays"
    return _with_cases(truss, rows, title, "tower", natures, system)


def _sized(truss: Truss, chord: float, web: float, system: UnitSystem) -> dict[str, list[Row]]:
    """Geometry with sections for two sizes of member: chords, and everything between them."""
    areas = {"Chord": _area(chord, system), "Web": _area(web, system)}
    groups = {bar.group for bar in truss.members}
    sections = {group: "Chord" if group in _CHORDS else "Web" for group in groups}
    steels = _STEEL[system.name]
    rows = geometry_rows(truss, sections, str(steels[0]["Material"]))
    rows["Sections"] = [{"Section": name, "Area": area} for name, area in areas.items()]
    rows["Materials"] = list(steels)
    return rows


def _area(force: float, system: UnitSystem) -> float:
    step = _AREA_STEP[system.name]
    return max(2, math.ceil(force / _GUESSED_STRESS[system.name] / step)) * step


def _with_cases(
    truss: Truss, rows: dict[str, list[Row]], title: str, use: str, natures: Sequence[str], system: UnitSystem
) -> Contents:
    rows["Cases"] = case_rows(system.name, natures)
    rows["Combinations"] = combination_rows(system.name, use)
    cases = tuple(str(row["Case"]) for row in rows["Cases"])
    return Contents(system, truss.dimension, rows, {"Title": title}, cases, truss)
