"""Files replaced whole or not at all."""

from __future__ import annotations

import contextlib
import os
import stat
import tempfile
from pathlib import Path

from strutbook_addin.xlsx.errors import UnwritableWorkbook


def check_target(target: Path) -> None:
    """Refuse a target that must not be replaced.

    Raises
    ------
    UnwritableWorkbook
        When it is read-only, or open in a spreadsheet program.
    """
    named, target = target, target.resolve()
    if target.is_dir():
        raise UnwritableWorkbook("it is a folder. Name a file.")
    # A program puts its lock beside the name that it was given, which may be a link.
    for path in {named, target}:
        lock = next((lock for lock in _locks(path) if lock.exists()), None)
        if lock is not None:
            raise UnwritableWorkbook(
                f"it is open in a spreadsheet program ({lock.name} stands beside it). "
                "Close it there and solve again; if no program has it open, delete that file."
            )
    if target.exists():
        # Replacing a file needs no right to write to it, so a file marked read-only must be asked for it.
        marked = not target.stat().st_mode & (stat.S_IWUSR | stat.S_IWGRP | stat.S_IWOTH)
        if marked or not os.access(target, os.W_OK):
            raise UnwritableWorkbook("it is read-only. Allow writing to it, or name another place with --out.")
    folder = next(parent for parent in target.parents if parent.exists())
    if not os.access(folder, os.W_OK):
        raise UnwritableWorkbook(f"the folder {folder} is read-only. Name another place with --out.")


def _locks(path: Path) -> tuple[Path, Path]:
    """Files that Excel and LibreOffice put beside a workbook while it is open in them."""
    return path.with_name(f"~${path.name}"), path.with_name(f".~lock.{path.name}#")


def replace_file(target: Path, data: bytes) -> None:
    """Write a file so that at any moment either the old or the whole new one stands there.

    A symbolic link stays and its file is replaced; the mode of an existing file is kept.
    """
    target = target.resolve()
    handle, name = tempfile.mkstemp(prefix=f".{target.stem[:40]}-", suffix=".part", dir=target.parent)
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        Path(name).chmod(_mode(target))
        Path(name).replace(target)
    except BaseException:
        with contextlib.suppress(FileNotFoundError):
            Path(name).unlink()
        raise
    _keep_folder(target.parent)


def _mode(target: Path) -> int:
    if target.exists():
        return stat.S_IMODE(target.stat().st_mode)
    mask = os.umask(0)
    os.umask(mask)
    return 0o666 & ~mask


def _keep_folder(folder: Path) -> None:
    """Have the new name of the file survive a loss of power, where the system can be asked to."""
    if os.name == "nt":
        return
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)
