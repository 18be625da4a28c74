"""Published tables of sections, within their printed precision, by designation."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from strutbook.sections import Product, section

CASES = json.loads(Path(__file__).with_name("sections.json").read_text("utf-8"))
INCH = 0.0254
ROWS = [(case["id"], case["units"], row) for case in CASES for row in case["expected"]]


@pytest.mark.parametrize(
    ("case", "units", "row"), ROWS, ids=lambda value: value["q"] if isinstance(value, dict) else ""
)
def test_published_property_is_reproduced(case, units, row):
    name, quantity = row["q"].partition(" (")[0].rsplit(" ", 1)
    found = section(name.replace("Pipe4", "Pipe 4"), Product.COLD_FORMED if case == "C02" else None)
    unit = INCH if units.startswith("in") else 0.01
    about_y, about_z = found.second_moment_y, found.second_moment_z
    weakest = found.second_moment_min
    strongest = about_y + about_z - weakest
    # EN 10365 calls the axes y and z as we do; the tables of hollow sections and angles call them x and y.
    second = about_y if case == "C06" else about_z
    lengths = {
        "i": found.radius_y,
        "r": found.radius_y,
        "ix": found.radius_y,
        "rx": found.radius_y,
        "iy": found.radius_z,
        "ry": found.radius_z,
        "iz": found.radius_z,
        "iv": found.radius_min,
        "rz": found.radius_min,
        "iu": (strongest / found.area) ** 0.5,
        "cx": found.dimensions.get("centroid_z"),
        "x": found.dimensions.get("centroid_y"),
        "e": found.dimensions.get("centroid_y"),
    }
    moments = {"I": about_y, "Ix": about_y, "Iy": second, "Iz": about_z, "Iu": strongest, "Iv": weakest}
    if quantity == "A":
        value = found.area / unit**2
    elif quantity in moments:
        value = moments[quantity] / unit**4
    else:
        value = lengths[quantity] / unit
    assert value == pytest.approx(float(row["published"]), abs=row["tol"])


def test_published_sections_come_out_of_a_workbook(make_book):
    """Areas and radii of tubes and angles on the sheet Sections, in cm as the tables print them."""
    printed: dict[str, dict[str, dict[str, float]]] = {}
    for case, units, row in ROWS:
        if units.startswith("cm") and case in {"C01", "C04"}:
            name, quantity = row["q"].rsplit(" ", 1)
            printed.setdefault(name, {})[quantity] = row
    book = make_book(
        {
            "Joints": [["Joint", "x [m]", "y [m]"], *([f"J{place}", place, 0] for place in range(len(printed) + 1))],
            "Members": [
                ["Member", "From", "To", "Section", "Material"],
                *([name, f"J{place}", f"J{place + 1}", name, "S355"] for place, name in enumerate(printed)),
            ],
            "Supports": [["Joint", "Holds"], *([f"J{place}", "x y"] for place in range(len(printed) + 1))],
            "Loads": [["Joint", "Fx [kN]"]],
            "Sections": [
                ["Section", "Designation", "Area used [cm2]", "Radius y used [cm]", "Radius min used [cm]"],
                *([name, name] for name in printed),
            ],
        }
    )
    assert book.solve().exit_status == 0, book.findings("stop")
    found = {row["Section"]: row for row in book.rows("Sections", "Section")}
    compared = 0
    for name, rows in printed.items():
        for quantity, header in (
            ("A", "Area used [cm2]"),
            ("i", "Radius y used [cm]"),
            ("ix", "Radius y used [cm]"),
            ("iv", "Radius min used [cm]"),
        ):
            if quantity in rows:
                expected = pytest.approx(float(rows[quantity]["published"]), abs=rows[quantity]["tol"])
                assert found[name][header] == expected, f"{name} {quantity}"
                compared += 1
    assert compared >= 20
