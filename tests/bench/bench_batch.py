"""A batch against openpyxl, two processes against one, and a killed process against none (goals 6, 7 and 10).

Workbooks of 51 members; processor time of the batch and its processes over that of loading and saving the same files
with openpyxl, and times of whole batches over each other, in one run.
"""

from __future__ import annotations

import argparse
import os
import resource
import shutil
import signal
import sys
import tempfile
from pathlib import Path
from time import perf_counter

import openpyxl

from strutbook_addin.batch.engine import solve_in_processes
from strutbook_addin.batch.selection import select
from strutbook_addin.batch.task import Task
from strutbook_templates import new_workbook


def batch(folder: Path, jobs: int, kill_after: int = 0) -> float:
    """Time of a batch over a folder; optionally one of its processes is killed on the way."""
    tasks = [Task(item, again=True) for item in select(folder)]
    start = perf_counter()
    for done, _ in enumerate(solve_in_processes(tasks, jobs), start=1):
        if done == kill_after:
            os.kill(_child(), signal.SIGKILL)
    return perf_counter() - start


def _child() -> int:
    for stat in Path("/proc").glob("[0-9]*/stat"):
        fields = stat.read_text().rpartition(") ")[2].split()
        if int(fields[1]) == os.getpid() and b"spawn_main" in stat.with_name("cmdline").read_bytes():
            return int(stat.parent.name)
    raise RuntimeError("no process of the batch was found")


def cpu() -> float:
    """Processor time of this process and of those it has ended, s."""
    used = [resource.getrusage(who) for who in (resource.RUSAGE_SELF, resource.RUSAGE_CHILDREN)]
    return sum(one.ru_utime + one.ru_stime for one in used)


def main(argv: list[str] | None = None) -> int:
    """Print the ratios."""
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--quick", action="store_true", help="few workbooks, to see that it runs")
    parser.add_argument("--workbooks", type=int, default=300)
    options = parser.parse_args(argv)
    count = 12 if options.quick else options.workbooks
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        new_workbook(folder / "base.xlsx", "warren", panels=13)
        for place in range(count - 1):
            shutil.copy(folder / "base.xlsx", folder / f"copy{place}.xlsx")
        batch(folder, 2)
        before = cpu()
        two = batch(folder, 2)
        ours = cpu() - before
        one = batch(folder, 1)
        killed = batch(folder, 2, kill_after=count // 2)
        before = cpu()
        for file in folder.glob("*.xlsx"):
            openpyxl.load_workbook(file).save(file)
        theirs = cpu() - before
    print(f"{count} workbooks: processor time over openpyxl load and save {ours / theirs:6.3f}   (goal 6: at most 0.2)")
    print(f"one process over two, time                           {one / two:6.2f}   (goal 7: at least 1.7)")
    print(f"with a process killed half way over without          {killed / two:6.2f}   (goal 10: at most 1.3)")
    return 0


if __name__ == "__main__":
    sys.exit(main())
