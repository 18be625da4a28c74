"""Files replaced whole or not at all, and those that are not replaced."""

from __future__ import annotations

import os
import stat
from pathlib import Path

import pytest

from strutbook_addin.xlsx import UnwritableWorkbook
from strutbook_addin.xlsx.saving import check_target, replace_file


def refusal(target: Path) -> str:
    """Sentence with which a target is refused."""
    with pytest.raises(UnwritableWorkbook) as refused:
        check_target(target)
    return str(refused.value)


@pytest.fixture
def target(tmp_path: Path) -> Path:
    """A file to be replaced."""
    path = tmp_path / "book.xlsx"
    path.write_bytes(b"old")
    return path


@pytest.mark.parametrize("lock", ["~$book.xlsx", ".~lock.book.xlsx#"])
def test_file_that_is_open_in_a_program_is_refused(target: Path, lock: str) -> None:
    target.with_name(lock).touch()
    assert f"open in a spreadsheet program ({lock} stands beside it)" in refusal(target)


@pytest.mark.parametrize("place", ["", "linked"])
def test_lock_is_found_beside_the_link_and_beside_its_file(target: Path, place: str) -> None:
    folder = target.parent / "linked"
    folder.mkdir()
    link = folder / "link.xlsx"
    link.symlink_to(target)
    name = "~$link.xlsx" if place else "~$book.xlsx"
    (target.parent / place / name).touch()
    assert name in refusal(link)


def test_read_only_file_is_refused(target: Path) -> None:
    target.chmod(0o444)
    assert "it is read-only" in refusal(target)


def test_read_only_folder_is_refused(target: Path) -> None:
    if os.name == "nt" or os.geteuid() == 0:
        pytest.skip("every folder is writable for this user")
    target.parent.chmod(0o555)
    try:
        assert "is read-only" in refusal(target.parent / "new.xlsx")
    finally:
        target.parent.chmod(0o755)


def test_folder_is_refused(tmp_path: Path) -> None:
    assert "it is a folder" in refusal(tmp_path)


def test_new_file_in_a_folder_that_is_to_be_made_is_allowed(tmp_path: Path) -> None:
    check_target(tmp_path / "new" / "deeper" / "book.xlsx")


def test_replacing_keeps_the_mode_and_leaves_nothing_else(target: Path) -> None:
    target.chmod(0o640)
    replace_file(target, b"new")
    assert target.read_bytes() == b"new"
    assert stat.S_IMODE(target.stat().st_mode) == 0o640
    assert list(target.parent.iterdir()) == [target]


def test_new_file_gets_the_usual_mode(tmp_path: Path) -> None:
    usual, made = tmp_path / "usual", tmp_path / "made.xlsx"
    usual.touch()
    replace_file(made, b"new")
    assert made.stat().st_mode == usual.stat().st_mode


def test_link_stays_and_its_file_is_replaced(target: Path) -> None:
    link = target.with_name("link.xlsx")
    link.symlink_to(target.name)
    replace_file(link, b"new")
    assert link.is_symlink()
    assert target.read_bytes() == b"new"


def test_long_name_is_no_obstacle(tmp_path: Path) -> None:
    target = tmp_path / ("n" * 250 + ".xlsx")
    replace_file(target, b"new")
    assert target.read_bytes() == b"new"


def test_failure_leaves_the_old_file_and_nothing_else(target: Path) -> None:
    with pytest.raises(TypeError):
        replace_file(target, ["not bytes"])  # type: ignore[arg-type]
    assert target.read_bytes() == b"old"
    assert list(target.parent.iterdir()) == [target]
