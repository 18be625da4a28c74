"""A workbook file as the run sees it, from opening to saving."""

from __future__ import annotations

import os
import shutil
import signal
import subprocess
import sys
import time
import zipfile
from pathlib import Path

import openpyxl
import pytest

from strutbook_addin.hosts import offline
from strutbook_addin.hosts.offline import OfflineWorkbook
from strutbook_addin.solving import solve_file
from strutbook_addin.xlsx import UnreadableWorkbook, UnwritableWorkbook
from strutbook_templates import new_workbook


@pytest.fixture
def solved(make_book, triangle):
    """A solved triangle."""
    book = make_book(triangle)
    assert book.solve().exit_status == 0
    return book


def sentence(file: Path, target: Path | None = None) -> str:
    """What is said about a file that is not solved."""
    result = solve_file(file, target or file)
    assert result.written is None
    assert result.exit_status == 2
    (finding,) = result.outcome.findings
    return finding.what


def test_edits_are_read_before_they_are_saved(solved) -> None:
    workbook = OfflineWorkbook.open(solved.path)
    workbook.write("Joints", 1, 0, [["Z", None, 7.5]])
    workbook.write("New", 1, 1, [["x"]])
    workbook.clear("Joints", 3, 0, 1, 20)
    assert workbook.read("Joints")[1][:3] == ["Z", None, 7.5]
    assert len(workbook.read("Joints")) == 3
    assert workbook.read("New") == [[], [None, "x"]]


def test_second_solve_changes_only_when_it_was_solved(solved) -> None:
    def state() -> dict[str, bytes]:
        (stamp,) = (row[1] for row in OfflineWorkbook.open(solved.path).read("Job") if row[0] == "Solved at")
        with zipfile.ZipFile(solved.path) as archive:
            return {name: archive.read(name).replace(stamp.encode(), b"then") for name in archive.namelist()}

    solved.solve()
    before = state()
    assert sum(b"then" in content for content in before.values()) == 1
    solved.solve()
    assert state() == before


def test_signed_workbook_is_not_changed(solved) -> None:
    with zipfile.ZipFile(solved.path, "a") as archive:
        archive.writestr("_xmlsignatures/sig1.xml", "<Signature/>")
    before = solved.path.read_bytes()
    assert "it carries a digital signature" in sentence(solved.path)
    assert solved.path.read_bytes() == before
    assert solve_file(solved.path, None).exit_status == 0


def test_file_that_changes_while_it_is_solved_is_not_overwritten(solved) -> None:
    workbook = OfflineWorkbook.open(solved.path)
    workbook.write("Joints", 0, 7, [["mine"]])
    solved.change("Joints", "H1", "somebody else's")
    before = solved.path.read_bytes()
    with pytest.raises(UnwritableWorkbook, match="changed by another program while it was being solved"):
        workbook.save(solved.path)
    assert solved.path.read_bytes() == before


def test_other_place_may_be_written_though_the_file_changed(solved) -> None:
    workbook = OfflineWorkbook.open(solved.path)
    solved.change("Joints", "H1", "somebody else's")
    workbook.save(solved.path.with_name("other.xlsx"))
    assert solved.path.with_name("other.xlsx").exists()


def test_workbook_with_macros_is_not_written_under_a_name_that_promises_none(solved) -> None:
    macros = solved.path.with_suffix(".xlsm")
    shutil.copy(solved.path, macros)
    assert "of a .xlsm workbook cannot be written as .xlsx" in sentence(macros, macros.with_name("out.xlsx"))
    assert not macros.with_name("out.xlsx").exists()


@pytest.mark.parametrize("lock", ["~$book.xlsx", ".~lock.book.xlsx#"])
def test_open_workbook_is_not_written(solved, lock: str) -> None:
    solved.path.with_name(lock).touch()
    before = solved.path.read_bytes()
    assert f"({lock} stands beside it)" in sentence(solved.path)
    assert solved.path.read_bytes() == before


def test_read_only_workbook_is_not_written(solved) -> None:
    solved.path.chmod(0o444)
    assert "it is read-only" in sentence(solved.path)
    assert solved.path.stat().st_mode & 0o777 == 0o444


def test_missing_file_folder_and_text_are_answered_with_a_sentence(tmp_path: Path) -> None:
    text = tmp_path / "text.xlsx"
    text.write_text("Joint;x;y\n")
    assert "No such file" in sentence(tmp_path / "none.xlsx")
    assert "it is a folder" in sentence(tmp_path)
    assert "is not a workbook" in sentence(text)


def test_link_stays_a_link_and_the_mode_stays(solved) -> None:
    solved.path.chmod(0o604)
    link = solved.path.with_name("link.xlsx")
    link.symlink_to(solved.path.name)
    solved.change("Loads", "C2", -50)
    assert solve_file(link, link).exit_status == 0
    assert link.is_symlink()
    assert solved.path.stat().st_mode & 0o777 == 0o604
    assert OfflineWorkbook.open(solved.path).read("Loads")[1][2] == -50


def test_cells_far_away_are_refused_before_they_fill_the_memory(tmp_path: Path) -> None:
    workbook = openpyxl.Workbook()
    for row in range(1, 400):
        workbook.active.cell(row, 16_384, row)
    workbook.save(tmp_path / "far.xlsx")
    book = OfflineWorkbook.open(tmp_path / "far.xlsx")
    with pytest.raises(UnreadableWorkbook, match=r"the sheet Sheet reaches to XFD307, too far to be read"):
        book.read("Sheet")
    assert offline.GRID_LIMIT == 5_000_000


@pytest.mark.parametrize("sheet", ["Joints", "New"])
def test_results_that_would_lie_beyond_the_sheet_are_refused(solved, sheet: str) -> None:
    workbook = OfflineWorkbook.open(solved.path)
    refusals = workbook.write(sheet, 1_048_574, 16_383, [[1.0, 2.0], [3.0, None], [5.0]])
    assert workbook.write(sheet, 0, 16_383, [[1.0, 2.0], [3.0]])
    assert [(refusal.row, refusal.column) for refusal in refusals] == [(1_048_574, 16_384), (1_048_576, 16_383)]
    assert refusals[0].reason == "no sheet reaches so far"
    workbook.save(solved.path)
    assert [row[-1] for row in OfflineWorkbook.open(solved.path).read(sheet)[-2:]] == [1.0, 3.0]


def test_one_cell_far_away_costs_nothing_but_its_row(tmp_path: Path) -> None:
    workbook = openpyxl.Workbook()
    workbook.active["A1"], workbook.active["XFD9999"] = 1, 2
    workbook.save(tmp_path / "far.xlsx")
    grid = OfflineWorkbook.open(tmp_path / "far.xlsx").read("Sheet")
    assert (len(grid), sum(map(len, grid))) == (9999, 1 + 16_384)


SOLVE_FOR_EVER = """
import sys
from pathlib import Path
from strutbook_addin.hosts.offline import OfflineWorkbook
path, number = Path(sys.argv[1]), 0
while True:
    number += 1
    workbook = OfflineWorkbook.open(path)
    workbook.write("Members", 0, 9, [["Round"], *[[number]] * 300])
    workbook.save(path)
    print(number, flush=True)
"""


@pytest.mark.skipif(os.name == "nt", reason="needs a signal that cannot be caught")
def test_run_that_is_killed_leaves_a_whole_workbook(tmp_path: Path) -> None:
    folder = tmp_path / "job"
    folder.mkdir()
    path = folder / "book.xlsx"
    new_workbook(path, "pratt", panels=8)
    rounds = 0
    for milliseconds in (0, 1, 2, 3, 5, 8, 11, 15, 20, 30):
        child = subprocess.Popen([sys.executable, "-c", SOLVE_FOR_EVER, str(path)], stdout=subprocess.PIPE, text=True)
        assert child.stdout is not None
        assert child.stdout.readline()
        time.sleep(milliseconds / 1000)
        child.send_signal(signal.SIGKILL)
        child.communicate()
        with zipfile.ZipFile(path) as archive:
            assert archive.testzip() is None
        column = [row[9] for row in OfflineWorkbook.open(path).read("Members")[1:301]]
        assert len(set(column)) == 1
        rounds += column[0] >= 1
    assert rounds == 10
    assert [file.name for file in folder.iterdir() if file.suffix in (".xlsx", ".xlsm")] == ["book.xlsx"]
    assert all(file.name.startswith(".") for file in folder.iterdir() if file != path)
