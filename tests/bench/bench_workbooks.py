"""What a workbook file costs: solving one in place, and reading a large one, against openpyxl (goal 6).

Both sides are timed in turn in one process by its processor time; the median ratio is printed.
"""

from __future__ import annotations

import argparse
import gc
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path
from statistics import median

import openpyxl

from strutbook_addin.hosts.offline import OfflineWorkbook
from strutbook_addin.solving import solve_file
from strutbook_templates import new_workbook


def everyday_workbook(path: Path) -> None:
    """A roof truss of 51 members, with every table of the schema."""
    new_workbook(path, "warren", panels=13)


def large_workbook(path: Path, members: int) -> None:
    """A workbook whose table of members goes on to so many rows; it is only read."""
    new_workbook(path, "warren", panels=100)
    workbook = OfflineWorkbook.open(path)
    rows = workbook.read("Members")
    first = next(place for place, row in enumerate(rows) if row and row[0] == "Member") + 1
    there = [row for row in rows[first:] if row and row[0] is not None]
    copies = [[f"M{number}", *there[number % len(there)][1:]] for number in range(members - len(there))]
    workbook.write("Members", first + len(there), 0, copies)
    workbook.save(path)


def solve_in_place(path: Path) -> None:
    """What `strutbook solve` does with one file."""
    if solve_file(path, path).exit_status == 2:
        raise RuntimeError("the workbook of the benchmark was not solved")


def load_and_save(path: Path) -> None:
    """The same file through openpyxl, without anything being done to it."""
    openpyxl.load_workbook(path).save(path.with_name("saved.xlsx"))


def read_members(path: Path) -> None:
    """Every value of the large table."""
    OfflineWorkbook.open(path).read("Members")


def read_members_by_openpyxl(path: Path) -> None:
    """The same values through openpyxl's quickest way of reading."""
    workbook = openpyxl.load_workbook(path, read_only=True, data_only=True)
    list(workbook["Members"].iter_rows(values_only=True))
    workbook.close()


def cpu_seconds(work: Callable[[Path], None], path: Path) -> float:
    """Processor time of this process for one piece of work."""
    # What the work before has left behind is not collected at the cost of this one.
    gc.collect()
    start = time.process_time()
    work(path)
    return time.process_time() - start


def compared(
    ours: Callable[[Path], None], theirs: Callable[[Path], None], path: Path, repetitions: int
) -> tuple[float, float, float]:
    """Median ratio, and the median seconds of each, after each was done once to warm up."""
    ours(path)
    theirs(path)
    pairs = [(cpu_seconds(ours, path), cpu_seconds(theirs, path)) for _ in range(repetitions)]
    return (
        median(mine / other for mine, other in pairs),
        median(mine for mine, _ in pairs),
        median(other for _, other in pairs),
    )


def main(argv: list[str] | None = None) -> int:
    """Print the two ratios."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="few repetitions, to see that it runs")
    quick = parser.parse_args(argv).quick
    with tempfile.TemporaryDirectory() as folder:
        everyday, large = Path(folder, "everyday.xlsx"), Path(folder, "large.xlsx")
        everyday_workbook(everyday)
        members = 2_000 if quick else 20_000
        large_workbook(large, members)
        for what, goal, comparison in (
            (
                "51 members solved in place over openpyxl, load and save",
                "goal 6: at most 0.2",
                compared(solve_in_place, load_and_save, everyday, 5 if quick else 25),
            ),
            (
                f"{members:,} members read over openpyxl, read-only",
                "no goal",
                compared(read_members, read_members_by_openpyxl, large, 1 if quick else 5),
            ),
        ):
            ratio, mine, other = comparison
            print(f"{what:56} {ratio:6.3f}   ({goal}; {1000 * mine:.1f} ms against {1000 * other:.1f} ms)")
    return 0


if __name__ == "__main__":
    sys.exit(main())
