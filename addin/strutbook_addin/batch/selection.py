"""Which files of a folder tree are workbooks to solve."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fnmatch import fnmatch
from pathlib import Path

#: Endings of workbooks that can be solved.
ENDINGS = frozenset({".xlsx", ".xlsm"})
#: How names of files begin that programs put beside workbooks while they are open or being written.
_PASSED_OVER = ("~$", ".")


@dataclass(frozen=True)
class Item:
    """One workbook to solve, and where it is written."""

    source: Path
    target: Path
    name: str  #: as the summary shows it: the path below the folder


def select(
    folder: Path, out: Path | None = None, patterns: Sequence[str] = (), passed_over: Sequence[Path] = ()
) -> list[Item]:
    """Workbooks below a folder, in the order of their paths.

    Parameters
    ----------
    folder : Path
        Its subfolders are searched too; symbolic links that lead out of it are passed over.
    out : Path, optional
        Folder in which the tree is mirrored; in place when left out.
    patterns : sequence of str
        Names or paths below the folder (`bridge*`, `north/*.xlsx`) of which one must match; any when left out.
    passed_over : sequence of Path
        Files that are no input, such as the summary.
    """
    root = folder.resolve()
    left_out = {path.resolve() for path in passed_over}
    items: list[Item] = []
    for file in _files(root, None if out is None else out.resolve()):
        name = file.relative_to(root).as_posix()
        if file.resolve() in left_out or (patterns and not _matches(name, file.name, patterns)):
            continue
        items.append(Item(file, file if out is None else out / name, name))
    return items


def _files(root: Path, out: Path | None) -> Iterator[Path]:
    for file in sorted(root.rglob("*")):
        below = file.relative_to(root)
        if file.suffix.lower() not in ENDINGS or any(part.startswith(_PASSED_OVER) for part in below.parts):
            continue
        real = file.resolve()
        # Results of an earlier run into a folder inside the tree are no input of this one.
        if not file.is_file() or not real.is_relative_to(root) or (out is not None and real.is_relative_to(out)):
            continue
        yield file


def _matches(name: str, file_name: str, patterns: Sequence[str]) -> bool:
    return any(fnmatch(name, pattern) or fnmatch(file_name, pattern) for pattern in patterns)
