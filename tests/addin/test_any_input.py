"""Whatever the cells hold: a sentence or a result, never a fault, and the same when solved again."""

from __future__ import annotations

import datetime as dt
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Any

import openpyxl
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from tests.conftest import TRIANGLE

from strutbook_addin.findings import Level
from strutbook_addin.solving import solve_file

#: Every table in use, so that anything can go wrong anywhere.
FULL: dict[str, list[list[Any]]] = {
    "Job": [
        ["Title", "A triangle"],
        ["Reference", 7],
        ["Standard", "EN 1993-1-1"],
        ["Factors", "gamma_M1 = 1.1"],
        ["Deflection limit", 200],
        ["Span [m]", 8],
        ["Workings for", "worst"],
        ["Combination rule", "EN 1990 6.10"],
    ],
    **TRIANGLE,
    "Members": [
        ["Member", "From", "To", "Section", "Material", "Misfit [mm]", "Takes", "K in", "Standard", "Shear lag"],
        ["AB", "A", "B", "S1", "M1", 0, "both", 1, None, None],
        ["AC", "A", "C", "SHS 100x5", "S355", 0, None, 0.9, "AISC 360-22 LRFD", None],
        ["BC", "B", "C", "L 60x60x6", "S355", 1, None, None, None, 0.8],
    ],
    "Member loads": [
        ["Case", "Member", "Per", "wx [kN/m]", "wy [kN/m]", "Temperature change [K]"],
        [None, "AB", "length", 0, -1, 10],
    ],
    "Settlements": [["Case", "Joint", "dx [mm]", "dy [mm]"], [None, "A", 0, -1]],
    "Cases": [["Case", "Nature", "Self weight"], ["Loads", "imposed", 1]],
    "Combinations": [["Combination", "For", "Loads"], ["C1", "strength", 1.5], ["C2", "service", 1]],
    "Sections": [
        ["Section", "Designation", "Area [mm2]", "Radius y [mm]", "Radius z [mm]", "Buckling curve"],
        ["S1", None, 400, 20, 20, "c"],
    ],
    "Bill": [],
    "Materials": [
        ["Material", "E [GPa]", "Yield [MPa]", "Density [kg/m3]", "Expansion [1/K]"],
        ["M1", 200, 300, 7850, 1.2e-5],
    ],
}

WORDS = [
    *(
        "",
        " ",
        "abc",
        "A",
        "B",
        "x",
        "x y z",
        "0.6,0.8",
        "0,0",
        "30 deg",
        "nan",
        "inf",
        "[m]",
        "x [m]",
        "E [",
    ),
    *("Area [furlong]", "Fx", "Joint", "Member", "strength", "length", "A" * 300, "Δ"),
    *("=1/0", "=A1", "=NONE(1)", "SHS 100x5", "CHS 88.9x50", "IPE 200", "S355", "C24", "EN 1995-1-1", "worst", "d"),
]
NUMBERS = [0, 1, -1, 1.5, 1e300, -1e300, 1e-300, 1e25, 1e-25, 12345678901234567, True, False]
JUNK = st.sampled_from([None, dt.datetime(2024, 1, 1), dt.time(3, 4), *WORDS, *NUMBERS])


@st.composite
def spoiled_tables(draw: st.DrawFn) -> dict[str, list[list[Any]]]:
    """Tables with cells overwritten, rows removed or put in, sheets missing."""
    tables = {sheet: [list(row) for row in rows] for sheet, rows in FULL.items()}
    for _ in range(draw(st.integers(1, 5))):
        sheet = draw(st.sampled_from(sorted(tables)))
        rows = tables[sheet]
        what = draw(st.sampled_from(["cell", "cell", "cell", "cell", "row out", "row in", "sheet out"]))
        if what == "sheet out" and len(tables) > 1:
            del tables[sheet]
        elif what == "row in":
            rows.insert(draw(st.integers(0, len(rows))), draw(st.lists(JUNK, max_size=4)))
        elif what == "row out" and rows:
            del rows[draw(st.integers(0, len(rows) - 1))]
        elif rows:
            row = draw(st.sampled_from(rows))
            if row:
                row[draw(st.integers(0, len(row) - 1))] = draw(JUNK)
    return tables


@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(spoiled_tables())
def test_no_input_is_a_fault_and_solving_again_says_the_same(tables):
    book = openpyxl.Workbook()
    book.remove(book.worksheets[0])
    for sheet, rows in tables.items():
        worksheet = book.create_sheet(sheet)
        for row, values in enumerate(rows, start=1):
            for column, value in enumerate(values, start=1):
                worksheet.cell(row, column, value)
    with TemporaryDirectory() as folder:
        file = Path(folder, "book.xlsx")
        book.save(file)
        first, second = solve_file(file, file), solve_file(file, file)
    for solved in (first, second):
        sentences = [finding.sentence for finding in solved.outcome.findings]
        assert not [sentence for sentence in sentences if "inside strutbook" in sentence]
        assert solved.exit_status == 2 or not solved.outcome.count(Level.STOP)
        assert solved.exit_status != 2 or solved.outcome.count(Level.STOP)
    assert first.exit_status == second.exit_status
