"""What bad input gets: the sentence, its cell, and never a number."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable
from typing import Any

import openpyxl
import pytest

Sheets = dict[str, list[list[Any]]]


def put(sheet: str, row: int, column: int, value: Any) -> Callable[[Sheets], None]:
    """Set one cell; rows and columns count from one, as on the sheet."""

    def change(sheets: Sheets) -> None:
        line = sheets[sheet][row - 1]
        line.extend([None] * (column - len(line)))
        line[column - 1] = value

    return change


def add(sheet: str, *rows: list[Any]) -> Callable[[Sheets], None]:
    """Append rows to a sheet, which is made if need be."""

    def change(sheets: Sheets) -> None:
        sheets.setdefault(sheet, []).extend([list(row) for row in rows])

    return change


def both(*changes: Callable[[Sheets], None]) -> Callable[[Sheets], None]:
    """Make several changes."""

    def change(sheets: Sheets) -> None:
        for one in changes:
            one(sheets)

    return change


def without_column(sheet: str, column: int) -> Callable[[Sheets], None]:
    """Remove a column from a sheet."""

    def change(sheets: Sheets) -> None:
        for row in sheets[sheet]:
            del row[column - 1]

    return change


#: What was done to the triangle, and the sentence that it gets.
WRONG: dict[str, tuple[Callable[[Sheets], None], str]] = {
    "missing sheet": (
        lambda sheets: sheets.pop("Supports"),
        "stop: Supports: the sheet Supports is missing. Add it: Where the truss is held; "
        "a joint may stand on several rows.",
    ),
    "misspelt sheet": (
        lambda sheets: sheets.update({"Suports": sheets.pop("Supports")}),
        "stop: Supports: the sheet Supports is missing. Did you mean Suports? "
        "Add it: Where the truss is held; a joint may stand on several rows.",
    ),
    "missing column": (
        without_column("Members", 3),
        "stop: Members!A1: the column To is missing. Add a column with the header To.",
    ),
    "misspelt column": (
        put("Members", 1, 2, "Form"),
        "stop: Members!A1: the column From is missing. Did you mean Form? Add a column with the header From.",
    ),
    "no header row": (
        lambda sheets: sheets.update({"Loads": [["C", 4, -12]]}),
        "stop: Loads: no header row was found in the first 30 rows. Write a row of headers such as: Joint.",
    ),
    "header twice": (
        put("Joints", 1, 4, "x [mm]"),
        "stop: Joints!D1: the header x stands twice in this row. Rename or remove one of the two columns.",
    ),
    "no unit": (
        put("Joints", 1, 2, "x"),
        "stop: Joints!B1: the header 'x' states no unit, and the column holds a length. "
        "Write x [m] or x [mm] or x [ft].",
    ),
    "unknown unit": (
        put("Joints", 1, 2, "x [metre-ish]"),
        "stop: Joints!B1: in the header 'x [metre-ish]', the unit 'metre-ish' is not known; "
        "expected a unit of a length. Write x [m] or x [mm] or x [ft].",
    ),
    "wrong dimension": (
        put("Joints", 1, 2, "x [kN]"),
        "stop: Joints!B1: in the header 'x [kN]', 'kN' is a unit of a force; expected a unit of a length. "
        "Write x [m] or x [mm] or x [ft].",
    ),
    "text for a number": (
        put("Joints", 3, 2, "8 m"),
        "stop: Joints!B3 (x [m]): expected a number, found the text '8 m'. "
        "Type a number; its unit stands in the header, not in the cell.",
    ),
    "blank for a number": (
        put("Joints", 3, 2, None),
        "stop: Joints!B3 (x [m]): expected a number, found an empty cell. Fill the cell in, or clear the whole row.",
    ),
    "error value": (
        put("Joints", 3, 2, "#DIV/0!"),
        "stop: Joints!B3 (x [m]): expected a number, found the error #DIV/0!. "
        "Mend the formula in this cell, or type the value.",
    ),
    "date for a number": (
        put("Loads", 2, 3, dt.datetime(2026, 3, 1)),
        "stop: Loads!C2 (Fy [kN]): expected a number, found the date or time 2026-03-01. "
        "Set the cell's number format to a plain number and type the value again.",
    ),
    "number beyond all measure": (
        put("Loads", 2, 3, -1e300),
        "stop: Loads!C2 (Fy [kN]): expected a number of at most 1e+25, found -1e+300. Correct the number.",
    ),
    "header that shows an error": (
        put("Loads", 1, 2, "=1/0"),
        "stop: Loads!B1: the header is the error #DIV/0! of the formula =1/0. Type the header, or clear the cell.",
    ),
    "blank row below the headers": (
        lambda sheets: sheets["Joints"].insert(1, [None]),
        "stop: Joints!A2 (Joint): the table holds no joint. Fill it in below its headers, without a gap.",
    ),
    "boolean for a number": (
        put("Joints", 3, 2, True),
        "stop: Joints!B3 (x [m]): expected a number, found TRUE. Type a number.",
    ),
    "boolean for a name": (
        put("Members", 2, 1, False),
        "stop: Members!A2 (Member): expected a name, found FALSE. Type a name.",
    ),
    "negative area": (
        put("Members", 3, 4, -5),
        "stop: Members!D3 (Area [mm2]): expected a number above 0, found -5. Correct the number.",
    ),
    "zero modulus": (
        put("Members", 3, 5, 0),
        "stop: Members!E3 (E [kN/mm2]): expected a number above 0, found 0. Correct the number.",
    ),
    "area without modulus": (
        put("Members", 3, 5, None),
        "stop: Members!E3 (E [kN/mm2]): the member has no E, though others or its own columns state "
        "stiffness. Fill in E or Material for every member, or for none to use statics alone.",
    ),
    "unknown joint": (
        put("Members", 4, 3, "CC"),
        "stop: Members!C4 (To): there is no joint CC on the sheet Joints. Did you mean C? "
        "Correct the name here, or add CC to the sheet Joints.",
    ),
    "duplicate joint": (
        put("Joints", 4, 1, "A"),
        "stop: Joints!A4 (Joint): the name A stands already in row 2. Give each row a name of its own.",
    ),
    "duplicate member name": (
        put("Members", 4, 1, "AB"),
        "stop: Members!A4 (Member): the name AB stands already in row 2. Give each row a name of its own.",
    ),
    "member to itself": (
        put("Members", 4, 3, "B"),
        "stop: Members!C4 (To): the member begins and ends at the same joint. Name two different joints.",
    ),
    "member twice": (
        add("Members", ["BA", "B", "A", 400, 200]),
        "stop: Members!B5 (From): member BA joins the same two joints as member AB. "
        "Remove one, or give the other the area of both.",
    ),
    "two joints at one place": (
        both(add("Joints", ["D", 4, 3]), add("Members", ["AD", "A", "D", 400, 200])),
        "stop: Joints!B5 (x [m]): joint D is at the same place as joint C. Use one joint, or correct the coordinates.",
    ),
    "zero-length member": (
        both(add("Joints", ["D", 4, 3]), add("Members", ["CD", "C", "D", 400, 200])),
        "stop: Members!C5 (To): the member has no length: its two joints are at the same place. "
        "Correct the coordinates of the joints, or remove the member.",
    ),
    "joint that no member reaches": (
        add("Joints", ["D", 9, 9]),
        "stop: Joints!A5 (Joint): no member reaches joint D. Join it to the truss, or remove the row.",
    ),
    "no supports": (
        lambda sheets: sheets.update({"Supports": [["Joint", "Holds"]]}),
        "stop: Supports!A2 (Joint): the truss has no supports, so nothing holds it. "
        "Name the joints that are held and the directions.",
    ),
    "no members": (
        lambda sheets: sheets.update({"Members": sheets["Members"][:1]}),
        "stop: Members!A2 (Member): the table holds no member. Fill it in below its headers, without a gap.",
    ),
    "direction that is none": (
        put("Supports", 2, 2, "pinned"),
        "stop: Supports!B2 (Holds): expected directions such as 'x y', '30 deg', '0.6, 0.8', found 'pinned': "
        "it names no direction. Write the direction so.",
    ),
    "z held in a plane truss": (
        put("Supports", 2, 2, "x y z"),
        "stop: Supports!B2 (Holds): expected directions such as 'x y', '30 deg', '0.6, 0.8', found 'x y z': "
        "a plane truss has no z to hold. Write the direction so.",
    ),
    "held twice": (
        add("Supports", ["A", "30 deg"]),
        "stop: Supports!B4 (Holds): joint A is already held in the direction 30 deg. "
        "Hold each direction of a joint once.",
    ),
    "load on a missing joint": (
        put("Loads", 2, 1, "Q"),
        "stop: Loads!A2 (Joint): there is no joint Q on the sheet Joints. "
        "Correct the name here, or add Q to the sheet Joints.",
    ),
    "load along z in a plane truss": (
        both(put("Loads", 1, 4, "Fz [kN]"), put("Loads", 2, 4, -3)),
        "stop: Loads!D2 (Fz [kN]): a plane truss takes nothing along z. "
        "Clear the cell, or fill in z of the joints for a space truss.",
    ),
    "case that is not on its sheet": (
        both(
            lambda sheets: sheets.update({"Loads": [["Case", "Joint", "Fy [kN]"], ["Snw", "C", -12]]}),
            add("Cases", ["Case", "Nature"], ["Snow", "snow"]),
        ),
        "stop: Loads!A2 (Case): there is no case Snw on the sheet Cases. Did you mean Snow? "
        "Correct the name here, or add Snw to the sheet Cases.",
    ),
    "nature that is none": (
        both(
            lambda sheets: sheets.update({"Loads": [["Case", "Joint", "Fy [kN]"], ["S", "C", -12]]}),
            add("Cases", ["Case", "Nature"], ["S", "snowy"]),
        ),
        "stop: Cases!B2 (Nature): expected one of: permanent, imposed, snow, wind, temperature, settlement, "
        "moving, accidental, found the text 'snowy'. Did you mean snow? Choose one of them.",
    ),
    "combination of no case": (
        add("Combinations", ["Combination", "For", "Loads", "Wind"], ["C1", "strength", 1.35, 1.5]),
        "stop: Combinations!D1: this column holds factors, but there is no case Wind. "
        "Write the name of a case as the header, or remove the column.",
    ),
    "factor that is text": (
        add("Combinations", ["Combination", "For", "Loads"], ["C1", "strength", "1,35"]),
        "stop: Combinations!C2 (Loads): expected a number, found the text '1,35'. "
        "Type a number; its unit stands in the header, not in the cell.",
    ),
    "settlement where nothing holds": (
        add("Settlements", ["Joint", "dx [mm]", "dy [mm]"], ["C", None, -10]),
        "stop: Settlements!C2 (dy [mm]): joint C is not held along y, so no support can move it that way. "
        "Remove the movement, or hold the joint on the sheet Supports.",
    ),
    "temperature without expansion": (
        add("Member loads", ["Member", "Temperature change [K]"], ["AB", 30]),
        "stop: Member loads!B2 (Temperature change [K]): the thermal expansion of member AB is not known. "
        "Give the member a material with a value in Expansion.",
    ),
    "self weight without density": (
        both(
            lambda sheets: sheets.update({"Loads": [["Case", "Joint", "Fy [kN]"], ["G", "C", -12]]}),
            add("Cases", ["Case", "Nature", "Self weight"], ["G", "permanent", 1]),
        ),
        "stop: Members!A2: the sheet Cases asks for self weight, but member AB and 2 more lack "
        "a material with a density. "
        "Give every member a material with a density, or clear the factors of self weight.",
    ),
    "some z and some not": (
        both(put("Joints", 1, 4, "z [m]"), put("Joints", 2, 4, 0)),
        "stop: Joints!D3 (z [m]): expected a number, found an empty cell; other joints have a z, so this "
        "is a space truss. Fill in z, or clear it everywhere for a plane truss.",
    ),
}


@pytest.mark.parametrize("wrong", WRONG)
def test_bad_input_gets_its_sentence(wrong, triangle, make_book):
    change, sentence = WRONG[wrong]
    change(triangle)
    book = make_book(triangle)
    assert book.solve().exit_status == 2
    assert sentence in [finding.sentence for finding in book.findings("stop")]
    # The sentence stands in the workbook too, and no number beside the inputs.
    told = [f"{row['Level']}: {row['Where']}" for row in book.rows("Findings", "Level")]
    assert any(sentence.startswith(start.split("!")[0]) for start in told)
    assert "Forces" not in openpyxl.load_workbook(book.path).sheetnames


def test_all_errors_are_told_at_once(triangle, make_book):
    put("Joints", 3, 2, "8 m")(triangle)
    put("Members", 3, 4, -5)(triangle)
    put("Members", 4, 3, "CC")(triangle)
    put("Supports", 2, 2, "pinned")(triangle)
    put("Loads", 2, 1, "Q")(triangle)
    book = make_book(triangle)
    book.solve()
    assert {finding.where for finding in book.findings("stop")} == {
        "Joints!B3",
        "Members!D3",
        "Members!C4",
        "Supports!B2",
        "Loads!A2",
    }


def test_load_on_a_held_direction_is_noted(triangle, make_book):
    add("Loads", ["B", None, -7])(triangle)
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    assert "Loads!C3" in {finding.where for finding in book.findings("note")}
    assert book.column("Reactions", "Joint", "Loads [kN]")["B"] == pytest.approx(6 + 1.5 + 7)


def test_rows_below_a_gap_are_pointed_out(triangle, make_book):
    add("Loads", [None, None, None], ["C", 0, -5])(triangle)
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    look = next(finding for finding in book.findings("look") if finding.where == "Loads!A4")
    assert "the table ends at the blank row 3" in look.what


def test_case_in_no_combination_is_pointed_out(triangle, make_book):
    triangle["Loads"] = [["Case", "Joint", "Fy [kN]"], ["G", "C", -12], ["S", "C", -6]]
    add("Combinations", ["Combination", "For", "G"], ["C1", "strength", 1.35])(triangle)
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    assert any("the case S is in no combination" in finding.what for finding in book.findings("look"))


def test_infinity_is_not_a_number(triangle):
    """No file holds an infinity, but a live host can hand one over."""
    from strutbook_addin.findings import Findings
    from strutbook_addin.tables.reading import read_table
    from strutbook_addin.tables.schema import JOINTS

    triangle["Joints"][2][1] = float("inf")
    findings = Findings()
    read_table(JOINTS, "Joints", triangle["Joints"], findings)
    assert [finding.sentence for finding in findings] == [
        "stop: Joints!B3 (x [m]): expected a number, found inf. Correct the number."
    ]


def test_flat_space_truss_is_told_to_clear_z(triangle, make_book):
    triangle["Joints"] = [[*row, z] for row, z in zip(triangle["Joints"], ["z [m]", 0, 0, 0], strict=True)]
    book = make_book(triangle)
    assert book.solve().exit_status == 2
    assert any("Clear z everywhere" in finding.todo for finding in book.findings("stop"))


def test_misspelt_factor_column_with_remarks_is_left_alone(triangle, make_book):
    add("Combinations", ["Combination", "For", "Loads", "Remark"], ["C1", "strength", 1.35, "from the brief"])(triangle)
    book = make_book(triangle)
    assert book.solve().exit_status == 0
