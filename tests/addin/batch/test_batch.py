"""Folders of workbooks: every one solved once, whatever becomes of files and processes."""

from __future__ import annotations

import json
import os
import shutil
import signal
import subprocess
import sys
import time
from pathlib import Path

import openpyxl
import pytest

from strutbook_addin.batch.engine import solve_in_processes
from strutbook_addin.batch.selection import select
from strutbook_addin.batch.task import Task, solve_task
from strutbook_addin.command_line import main
from strutbook_addin.command_line.batch import SUMMARY

posix_only = pytest.mark.skipif(os.name == "nt", reason="signals and /proc are those of POSIX systems")


@pytest.fixture
def folder(triangle, make_book, tmp_path) -> Path:
    """Four workbooks in two folders, one of them with an error, and files that are none."""
    tree = tmp_path / "tree"
    (tree / "north").mkdir(parents=True)
    triangle["Job"] = [["Standard", "Working stress"]]
    triangle["Sections"] = [["Section", "Area [mm2]", "Radius y [mm]", "Radius z [mm]"], ["tube", 400, 30, 30]]
    triangle["Materials"] = [["Material", "E [kN/mm2]", "Yield [N/mm2]"], ["steel", 200, 300]]
    triangle["Members"] = [
        [*row[:3], *more]
        for row, more in zip(triangle["Members"], [["Section", "Material"], *([["tube", "steel"]] * 3)], strict=True)
    ]
    for place, name in enumerate(("a.xlsx", "b.xlsx", "north/c.xlsx")):
        triangle["Loads"][1][2] = -12 * (place + 1)
        shutil.copy(make_book(triangle, f"made{place}.xlsx").path, tree / name)
    triangle["Joints"][1][1] = "left"
    shutil.copy(make_book(triangle, "bad.xlsx").path, tree / "bad.xlsx")
    (tree / "torn.xlsx").write_bytes(b"PK\3\4 torn")
    (tree / "~$z.xlsx").write_bytes(b"lock")
    (tree / ".a.part.xlsx").write_bytes(b"half")
    (tree / "notes.txt").write_text("no workbook")
    return tree


def summary(folder: Path, sheet: str = "Summary") -> list[dict[str, object]]:
    rows = list(openpyxl.load_workbook(folder / SUMMARY)[sheet].iter_rows(values_only=True))
    return [dict(zip(rows[0], row, strict=True)) for row in rows[1:]]


def test_only_workbooks_are_selected_and_patterns_narrow_them(folder):
    assert [item.name for item in select(folder)] == ["a.xlsx", "b.xlsx", "bad.xlsx", "north/c.xlsx", "torn.xlsx"]
    assert [item.name for item in select(folder, patterns=["b*"])] == ["b.xlsx", "bad.xlsx"]
    assert [item.name for item in select(folder, patterns=["north/*"])] == ["north/c.xlsx"]


@posix_only
def test_links_that_lead_out_of_the_tree_are_passed_over(folder, tmp_path):
    (folder / "link.xlsx").symlink_to(tmp_path / "made0.xlsx")
    assert "link.xlsx" not in {item.name for item in select(folder)}


def test_one_bad_workbook_never_stops_the_rest(folder, capsys):
    assert main(["batch", str(folder), "--jobs", "2"]) == 2
    printed = capsys.readouterr().out
    assert "5 workbooks: 3 solved, 0 solved before and unchanged, 2 not solved" in printed
    states = {row["Workbook"]: row["State"] for row in summary(folder)}
    assert states == {
        "a.xlsx": "solved",
        "b.xlsx": "solved",
        "north/c.xlsx": "solved",
        "bad.xlsx": "not solved",
        "torn.xlsx": "not solved",
    }
    findings = {row["Workbook"]: row["What"] for row in summary(folder, "Findings") if row["Level"] == "stop"}
    assert "expected a number, found the text 'left'" in findings["bad.xlsx"]
    assert "torn.xlsx" in findings


def test_summary_says_which_workbook_governs_and_why(folder):
    main(["batch", str(folder)])
    rows = {row["Workbook"]: row for row in summary(folder)}
    assert rows["north/c.xlsx"]["Largest utilisation"] > rows["b.xlsx"]["Largest utilisation"] > 0
    assert rows["north/c.xlsx"]["Largest compression [kN]"] == pytest.approx(-32.5, abs=3)
    envelope = {row["Member"]: row for row in summary(folder, "Envelope")}
    assert envelope["BC"]["Of workbook "] == "north/c.xlsx"
    assert envelope["BC"]["Workbooks"] == 3
    book = openpyxl.load_workbook(folder / SUMMARY)
    assert book["Summary"]["A4"].hyperlink.target in {"a.xlsx", "b.xlsx", "north/c.xlsx", "bad.xlsx", "torn.xlsx"}
    assert "Workbooks" in book["Summary"].tables


def test_unchanged_workbooks_are_skipped_until_they_change(folder, capsys):
    main(["batch", str(folder)])
    before = {path: path.read_bytes() for path in folder.rglob("[abc].xlsx")}
    capsys.readouterr()
    main(["batch", str(folder)])
    assert "0 solved, 3 solved before and unchanged" in capsys.readouterr().out
    assert {path: path.read_bytes() for path in before} == before
    book = openpyxl.load_workbook(folder / "a.xlsx")
    book["Loads"]["C2"] = -99
    book.save(folder / "a.xlsx")
    main(["batch", str(folder)])
    assert "1 solved, 2 solved before and unchanged" in capsys.readouterr().out
    main(["batch", str(folder), "--again"])
    assert "3 solved, 0 solved before" in capsys.readouterr().out


def test_tree_is_mirrored_and_its_results_are_no_input(folder, capsys):
    out = folder / "results"
    before = (folder / "a.xlsx").read_bytes()
    main(["batch", str(folder), "--out", str(out)])
    assert (out / "north" / "c.xlsx").is_file()
    assert (folder / "a.xlsx").read_bytes() == before
    capsys.readouterr()
    main(["batch", str(folder), "--out", str(out)])
    assert "5 workbooks: 0 solved, 3 solved before and unchanged, 2 not solved" in capsys.readouterr().out


def test_json_has_one_line_a_workbook_and_csv_the_rows(folder, tmp_path, capsys):
    csv = tmp_path / "rows.csv"
    assert main(["batch", str(folder), "--json", "--check-only", "--csv", str(csv)]) == 2
    lines = [json.loads(line) for line in capsys.readouterr().out.splitlines()]
    assert {line["name"] for line in lines} == {"a.xlsx", "b.xlsx", "bad.xlsx", "north/c.xlsx", "torn.xlsx"}
    assert next(line for line in lines if line["name"] == "a.xlsx")["numbers"]["tension"] > 0
    assert csv.read_text("utf-8").startswith("Workbook,State,Outcome")
    assert "Forces" not in openpyxl.load_workbook(folder / "a.xlsx").sheetnames


def test_workbook_that_takes_too_long_is_stopped_and_the_others_are_solved(folder):
    _write_long_girder(folder / "huge.xlsx", 4000)
    items = select(folder, patterns=["[abc].xlsx", "huge.xlsx"])
    records = {record.name: record for record in solve_in_processes([Task(item) for item in items], 2, seconds=0.4)}
    assert "huge.xlsx: it took longer than 0.4 s and was stopped" in records["huge.xlsx"].first_finding
    assert [records[name].state for name in ("a.xlsx", "b.xlsx", "north/c.xlsx")] == ["solved"] * 3
    assert "Forces" not in openpyxl.load_workbook(folder / "huge.xlsx", read_only=True).sheetnames


@posix_only
def test_every_workbook_is_done_exactly_once_though_a_process_is_killed(folder):
    for copy in range(30):
        shutil.copy(folder / "a.xlsx", folder / f"copy{copy}.xlsx")
    items = select(folder, patterns=["copy*"])
    records = []
    for record in solve_in_processes([Task(item) for item in items], 2):
        records.append(record)
        if len(records) == 5:
            children = _children(os.getpid())
            os.kill(children[0], signal.SIGKILL)
    assert sorted(record.name for record in records) == sorted(item.name for item in items)
    assert {record.state for record in records} <= {"solved", "unchanged"}
    assert {solve_task(Task(item)).state for item in items} == {"unchanged"}


@posix_only
@pytest.mark.parametrize("how", [signal.SIGINT, signal.SIGTERM, signal.SIGKILL])
def test_interrupted_batch_is_taken_up_again_without_repeating_or_losing_one(folder, how):
    for copy in range(60):
        shutil.copy(folder / "a.xlsx", folder / f"copy{copy}.xlsx")
    command = [sys.executable, "-c", "from strutbook_addin.command_line import main; raise SystemExit(main())"]
    arguments = ["batch", str(folder), "--pattern", "copy*", "--jobs", "2"]
    first = subprocess.Popen([*command, *arguments], stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True)
    assert first.stdout
    for _ in range(5):
        first.stdout.readline()
    first.send_signal(how)
    rest, errors = first.communicate(timeout=60)
    done = 5 + sum(": solved." in line for line in rest.splitlines())
    if how != signal.SIGKILL:
        assert first.returncode == 2
        assert "workbooks are left; the same command goes on with them" in errors
    # What was killed may leave processes that finish the workbook in hand.
    time.sleep(1.0)
    states = [solve_task(Task(item, write=False)).state for item in select(folder, patterns=["copy*"])]
    assert len(states) == 60, "every file is still a workbook that can be read"
    second = subprocess.run([*command, *arguments], capture_output=True, text=True, check=False)
    assert second.returncode == 0
    unchanged = second.stdout.count(": unchanged.")
    assert unchanged >= done
    assert unchanged + second.stdout.count(": solved.") == 60


def test_nothing_to_do_is_told(tmp_path, capsys):
    assert main(["batch", str(tmp_path)]) == 2
    assert "no workbook to solve was found" in capsys.readouterr().err
    assert main(["batch", str(tmp_path / "none")]) == 2
    assert "is no folder" in capsys.readouterr().err


def _children(parent: int) -> list[int]:
    """Worker processes of this one (Linux)."""
    found = []
    for status in Path("/proc").glob("[0-9]*/stat"):
        try:
            fields = status.read_text().rpartition(") ")[2].split()
            command = status.with_name("cmdline").read_bytes()
        except OSError:
            continue
        if int(fields[1]) == parent and b"spawn_main" in command:
            found.append(int(status.parent.name))
    return found


def _write_long_girder(file: Path, panels: int) -> None:
    """A workbook that takes seconds: a girder of very many panels."""
    book = openpyxl.Workbook(write_only=True)
    joints = book.create_sheet("Joints")
    joints.append(["Joint", "x [m]", "y [m]"])
    members = book.create_sheet("Members")
    members.append(["Member", "From", "To"])
    for place in range(panels + 1):
        joints.append([f"L{place}", place, 0])
        joints.append([f"U{place}", place, 1])
        members.append([f"v{place}", f"L{place}", f"U{place}"])
    for place in range(panels):
        for name, start, end in (("l", "L", "L"), ("u", "U", "U"), ("d", "L", "U")):
            members.append([f"{name}{place}", f"{start}{place}", f"{end}{place + 1}"])
    for sheet, rows in (
        ("Supports", [["Joint", "Holds"], ["L0", "x y"], [f"L{panels}", "y"]]),
        ("Loads", [["Joint", "Fy [kN]"], ["U1", -1]]),
    ):
        worksheet = book.create_sheet(sheet)
        for row in rows:
            worksheet.append(row)
    book.save(file)
