"""Published trusses through workbook, `strutbook solve` and workbook again.

Each case names its source and how it is known; figures are compared within their printed precision.
"""

from __future__ import annotations

import json
import math
from pathlib import Path
from typing import Any

import pytest

CASES = {case["id"]: case for case in json.loads(Path(__file__).with_name("trusses.json").read_text("utf-8"))}
ANALYSES = [name for name, case in CASES.items() if case["kind"] == "analysis"]
INSTABILITIES = [name for name, case in CASES.items() if case["kind"] == "instability"]


def holds(direction: list[float]) -> str:
    """Text of a cell of `Holds`."""
    for axis, component in zip("xyz", direction, strict=False):
        if component == 1 and sum(map(abs, direction)) == 1:
            return axis
    return ", ".join(map(repr, direction))


def tables(case: dict[str, Any]) -> dict[str, list[list[Any]]]:
    """Sheets of a case in the units of its source; EA stands as an area with a modulus of one."""
    force, length = case["force_unit"], case["length_unit"]
    axes = "xyz"[: len(next(iter(case["joints"].values())))]
    stiff = all("EA" in member for member in case["members"].values())
    members: list[list[Any]] = [["Member", "From", "To"]]
    if stiff:
        members[0] += [f"Area [{length}2]", f"E [{force}/{length}2]", f"Misfit [{length}]"]
    for name, member in case["members"].items():
        row = [name, *member["ends"]]
        if stiff:
            row += [member["EA"], 1, case.get("free_elongations", {}).get(name)]
        members.append(row)
    sheets = {
        "Joints": [
            ["Joint", *(f"{axis} [{length}]" for axis in axes)],
            *([name, *place] for name, place in case["joints"].items()),
        ],
        "Members": members,
        "Supports": [
            ["Joint", "Holds"],
            *([joint, holds(direction)] for joint, direction in case["supports"]),
        ],
        "Loads": [
            ["Case", "Joint", *(f"F{axis} [{force}]" for axis in axes)],
            *(
                [load_case, joint, *components]
                for load_case, loads in case["loads"].items()
                for joint, components in loads.items()
            ),
        ],
    }
    if "prescribed_displacements" in case:
        settlements: list[list[Any]] = [["Case", "Joint", *(f"d{axis} [{length}]" for axis in axes)]]
        for (joint, direction), movement in zip(case["supports"], case["prescribed_displacements"], strict=True):
            if movement:
                settlements.append(["LC1", joint, *(movement * component for component in direction)])
        sheets["Settlements"] = settlements
    return sheets


def found(book: Any, case: dict[str, Any], quantity: str) -> float:
    """Quantity of a case (`N:AB`, `R:0`, `U:C:y`, `S:AB`) from the solved workbook."""
    kind, *where = quantity.split(":")
    combination = next(iter(case["loads"])) if any(case["loads"].values()) else None
    force, length = case["force_unit"], case["length_unit"]
    if combination is None:
        combination = "LC1" if "prescribed_displacements" in case else "Loads"
    if kind in {"N", "S"}:
        value = book.column("Forces", "Member", f"{combination} [{force}]")[where[0]]
        return value / (case["members"][where[0]]["A"] if kind == "S" else 1.0)
    if kind == "R":
        return book.rows("Reactions", "Joint")[int(where[0])][f"{combination} [{force}]"]
    unit, size = ("in", {"in": 1.0, "ft": 12.0}) if length in {"in", "ft"} else ("mm", {"m": 1e3, "mm": 1.0, "cm": 10})
    joint, direction = where
    moved = {
        row["Direction"]: row[f"{combination} [{unit}]"] / size[length]
        for row in book.rows("Displacements", "Joint")
        if str(row["Joint"]) == joint
    }
    if direction in moved:
        return moved[direction]
    vector = [float(part) for part in direction.strip("()").split(",")]
    along = sum(part * moved[axis] for part, axis in zip(vector, "xyz", strict=False))
    return along / math.hypot(*vector)


@pytest.mark.parametrize("name", ANALYSES)
def test_published_analysis_is_reproduced(name, make_book):
    case = CASES[name]
    book = make_book(tables(case))
    assert book.solve().exit_status == 0, book.findings("stop")
    for expected in case["expected"]:
        value = found(book, case, expected["q"])
        assert value == pytest.approx(float(expected["published"]), abs=expected["tol"]), expected["q"]


@pytest.mark.parametrize("name", [name for name in ANALYSES if CASES[name]["id"].startswith("AD")])
def test_statics_alone_finds_the_published_forces(name, make_book):
    case = CASES[name]
    members = {key: {"ends": member["ends"]} for key, member in case["members"].items()}
    book = make_book(tables({**case, "members": members}))
    assert book.solve().exit_status == 0, book.findings("stop")
    for expected in case["expected"]:
        if expected["q"][0] in "NR":
            value = found(book, case, expected["q"])
            assert value == pytest.approx(float(expected["published"]), abs=expected["tol"]), expected["q"]


@pytest.mark.parametrize("name", INSTABILITIES)
def test_published_instability_is_refused(name, make_book):
    case = CASES[name]
    loaded = next(iter(case["joints"]))
    book = make_book(tables({**case, "loads": {"LC1": {loaded: [0.0, -1.0]}}}))
    solved = book.solve()
    assert solved.exit_status == 2
    stops = [finding.sentence for finding in book.findings("stop")]
    deficiency = next(e["value"] for e in case["expected"] if e["q"].startswith("rank deficiency"))
    assert len(stops) == deficiency
    assert all("can move" in stop for stop in stops)


def test_hexagon_off_its_conic_is_stable(make_book):
    case = CASES["AU04"]
    joints = {**case["joints"], "1": case["control"]["joint_1_moved_to"]}
    book = make_book(tables({**case, "joints": joints, "loads": {"LC1": {"3": [0.0, -1.0]}}}))
    assert book.solve().exit_status == 0


@pytest.mark.parametrize("design", CASES["AO03"]["group_areas"])
def test_25_bar_tower_meets_its_published_displacement(design, make_book):
    case = CASES["AO03"]
    areas = case["group_areas"][design]
    members = {
        name: {**member, "EA": areas[member["group"] - 1] * case["E"]} for name, member in case["members"].items()
    }
    book = make_book(tables({**case, "members": members}))
    assert book.solve().exit_status == 0, book.findings("stop")
    largest = max(
        abs(row[f"{combination} [in]"])
        for row in book.rows("Displacements", "Joint")
        for combination in case["loads"]
        if str(row["Joint"]) in {"1", "2"} and row["Direction"] in "xy"
    )
    expected = next(e for e in case["expected"] if design in e["q"] and "max |u|" in e["q"])
    assert largest == pytest.approx(float(expected["published"]), abs=expected["tol"])


@pytest.mark.parametrize("design", CASES["AO03"]["group_areas"])
def test_25_bar_tower_weighs_what_was_published(design, make_book):
    """Self weight alone, with the published density as a material: the reactions carry the weight."""
    case = CASES["AO03"]
    areas = case["group_areas"][design]
    sheets = tables({**case, "loads": {"LC1": {}}})
    sheets["Members"] = [
        ["Member", "From", "To", "Area [in2]", "Material"],
        *([n, *m["ends"], areas[m["group"] - 1], "aluminium"] for n, m in case["members"].items()),
    ]
    sheets["Materials"] = [
        ["Material", "E [psi]", "Density [lb/in3]"],
        ["aluminium", case["E"], case["density"]],
    ]
    sheets["Cases"] = [["Case", "Nature", "Self weight"], ["G", "permanent", 1]]
    book = make_book(sheets)
    assert book.solve().exit_status == 0, book.findings("stop")
    weight = sum(row["G [lbf]"] for row in book.rows("Reactions", "Joint") if row["Direction"] == "z")
    expected = next(e for e in case["expected"] if design in e["q"] and "weight" in e["q"])
    assert weight == pytest.approx(float(expected["published"]), abs=expected["tol"])
