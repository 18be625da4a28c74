"""``strutbook batch FOLDER``: every workbook of a folder tree, in parallel, and one summary."""

from __future__ import annotations

import argparse
import json
import signal
import sys
from dataclasses import asdict
from pathlib import Path
from types import FrameType
from typing import Any

from strutbook_addin.batch.engine import default_jobs, solve_in_processes
from strutbook_addin.batch.record import FAILED, UNCHANGED, Record
from strutbook_addin.batch.selection import select
from strutbook_addin.batch.task import Task
from strutbook_addin.command_line.printing import say

SUMMARY = "strutbook summary.xlsx"


def add_options(parser: argparse.ArgumentParser) -> None:
    """Declare the options of the verb."""
    parser.add_argument("folder", type=Path, metavar="FOLDER", help="its workbooks and those of its subfolders")
    parser.add_argument("--out", type=Path, metavar="FOLDER", help="mirror the tree here instead of in place")
    parser.add_argument(
        "--pattern", action="append", default=[], metavar="PATTERN", help="names to take, such as 'bridge*'; repeatable"
    )
    parser.add_argument("--summary", type=Path, metavar="FILE", help=f"summary workbook (default: {SUMMARY})")
    parser.add_argument("--csv", type=Path, metavar="FILE", help="the rows of the summary as CSV as well")
    parser.add_argument("--jobs", type=int, default=0, metavar="N", help="processes (default: one a processor)")
    parser.add_argument("--again", action="store_true", help="solve workbooks that are solved already as well")
    parser.add_argument("--check-only", action="store_true", help="write only the summary")
    parser.add_argument("--json", action="store_true", help="one line of JSON a workbook, for machines")
    parser.add_argument("--time-limit", type=float, metavar="SECONDS", help="longest time for one workbook")
    parser.add_argument("--memory-limit", type=int, metavar="MIB", help="most memory of one process")


def work(options: argparse.Namespace) -> int:
    """Solve the folder and write the summary."""
    folder: Path = options.folder
    if not folder.is_dir():
        say(f"strutbook batch: {folder} is no folder.", sys.stderr)
        return 2
    summary: Path = options.summary or (options.out or folder) / SUMMARY
    items = select(folder, options.out, options.pattern, [summary])
    if not items:
        say(f"strutbook batch: no workbook to solve was found in {folder}.", sys.stderr)
        return 2
    tasks = [Task(item, again=options.again, write=not options.check_only) for item in items]
    with _Interrupt() as interrupted:
        records = _solve(tasks, options, interrupted)
    _finish(records, summary, options)
    left = len(items) - len(records)
    if left:
        say(f"interrupted: {left} workbooks are left; the same command goes on with them.", sys.stderr)
        return 2
    return max(record.exit_status for record in records)


class _Interrupt:
    """Ctrl-C and SIGTERM end the batch after the workbooks in hand."""

    def __init__(self) -> None:
        self.asked = False
        self._before: dict[int, Any] = {}

    def __enter__(self) -> _Interrupt:
        for number in (signal.SIGINT, signal.SIGTERM):
            self._before[number] = signal.signal(number, self._ask)
        return self

    def __exit__(self, *_: object) -> None:
        for number, handler in self._before.items():
            signal.signal(number, handler)

    def _ask(self, _number: int, _frame: FrameType | None) -> None:
        self.asked = True

    def __call__(self) -> bool:
        return self.asked


def _solve(tasks: list[Task], options: argparse.Namespace, interrupted: _Interrupt) -> list[Record]:
    from tqdm import tqdm

    jobs = min(options.jobs or default_jobs(), len(tasks))
    records: list[Record] = []
    on_terminal = sys.stderr.isatty()
    with tqdm(total=len(tasks), unit="workbook", disable=not on_terminal, file=sys.stderr) as bar:
        done = solve_in_processes(
            tasks, jobs, seconds=options.time_limit, memory=options.memory_limit, stopped=interrupted
        )
        for record in done:
            records.append(record)
            bar.update()
            if options.json:
                say(json.dumps(asdict(record) | {"envelope": None}, ensure_ascii=False))
            elif record.state == FAILED or not on_terminal:
                bar.clear()
                say(f"{record.name}: {record.state}. {record.first_finding or record.sentence}")
    return records


def _finish(records: list[Record], summary: Path, options: argparse.Namespace) -> None:
    from strutbook_addin.batch.summary import rows, write_summary

    write_summary(records, summary)
    if options.csv:
        import pandas as pd  # noqa: TID251 - the edge at which people want frames

        pd.DataFrame(rows(records)).to_csv(options.csv, index=False)
    if not options.json:
        counts = {state: sum(record.state == state for record in records) for state in ("solved", UNCHANGED, FAILED)}
        fails = sum(record.exit_status == 1 for record in records)
        say(
            f"{len(records)} workbooks: {counts['solved']} solved, {counts[UNCHANGED]} solved before and unchanged, "
            f"{counts[FAILED]} not solved; {fails} with members or limits that fail"
        )
        say(f"summary: {summary}")
