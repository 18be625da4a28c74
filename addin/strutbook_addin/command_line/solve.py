"""``strutbook solve FILE...``: read, solve, write back in place."""

from __future__ import annotations

import argparse
import sys
from pathlib import Path

from strutbook_addin.command_line.printing import Reporter, say
from strutbook_addin.solving import Solved, solve_file


def add_options(parser: argparse.ArgumentParser) -> None:
    """Declare the options of the verb."""
    parser.add_argument("files", nargs="+", type=Path, metavar="FILE", help="a workbook, .xlsx or .xlsm")
    parser.add_argument(
        "--out",
        type=Path,
        metavar="PLACE",
        help="write here instead of in place: a file, or a folder (always a folder for several files)",
    )
    parser.add_argument("--check-only", action="store_true", help="solve and report, but write nothing")
    parser.add_argument("--json", action="store_true", help="print findings and results as JSON, in SI units")


def work(options: argparse.Namespace) -> int:
    """Solve every file that was named; one that fails does not stop the others."""
    problem = _problem(options)
    if problem:
        say(f"strutbook solve: {problem}", file=sys.stderr)
        return 2
    reporter = Reporter(len(options.files), machine=options.json)
    status = 0
    for file in options.files:
        solved: Solved = solve_file(
            file,
            None if options.check_only else _target(file, options),
            reporter.stage,
        )
        reporter.report(solved)
        status = max(status, solved.exit_status)
    reporter.finish()
    return status


def _problem(options: argparse.Namespace) -> str:
    out: Path | None = options.out
    if out is None:
        return ""
    if options.check_only:
        return "--check-only writes nothing, so --out has no meaning beside it. Leave one of them out."
    if len(options.files) > 1 and out.exists() and not out.is_dir():
        return f"--out {out} is a file, but several workbooks are to be written. Name a folder."
    targets = [_target(file, options) for file in options.files]
    twice = {target for target in targets if targets.count(target) > 1}
    if twice:
        return f"two of the workbooks would be written to {min(twice)}. Solve them one at a time."
    return ""


def _target(file: Path, options: argparse.Namespace) -> Path:
    out: Path | None = options.out
    if out is None:
        return file
    if out.is_dir() or len(options.files) > 1 or not out.suffix:
        return out / file.name
    return out
