"""The command ``strutbook``: verbs and options; the work is imported when a verb needs it."""

from __future__ import annotations

import argparse
import os
import sys
from collections.abc import Callable, Sequence
from importlib import import_module

from strutbook_addin.version import __version__

EXIT_STATUSES = (
    "Exit status: 0 everything solved and passed; 1 solved, something failed a check; "
    "2 something could not be solved or read."
)
CAUTION = (
    "Results are for use by a competent engineer. What was not checked is listed on the sheet Findings. "
    "Local codes, national annexes and licensed practice govern."
)
#: Verb and its line of help; the verb's module declares its options and does its work.
VERBS = {
    "demo": "write the demonstration workbook, solve it and print what was found",
    "new": "start a workbook: blank, or a truss of a usual shape",
    "solve": "solve workbooks and write the results into them",
    "size": "find the lightest sections, by group, with which everything passes",
    "batch": "solve every workbook of a folder tree, in parallel, and write one summary",
}


def main(arguments: Sequence[str] | None = None) -> int:
    """Run the command line and return its exit status."""
    words = list(sys.argv[1:] if arguments is None else arguments)
    parser = argparse.ArgumentParser(
        prog="strutbook",
        description="Pin-jointed trusses calculated inside a spreadsheet.",
        epilog=f"{EXIT_STATUSES} {CAUTION}",
    )
    parser.add_argument("--version", action="version", version=f"strutbook {__version__}")
    verbs = parser.add_subparsers(dest="verb", metavar="VERB", required=True)
    works: dict[str, Callable[[argparse.Namespace], int]] = {}
    for verb, help_line in VERBS.items():
        subparser = verbs.add_parser(verb, help=help_line, description=help_line[0].upper() + help_line[1:] + ".")
        # Only the verb that is asked for is loaded, so that help for all of them stays quick.
        if words[:1] == [verb]:
            module = import_module(f"strutbook_addin.command_line.{verb}")
            module.add_options(subparser)
            works[verb] = module.work
    options = parser.parse_args(words)
    try:
        return works[options.verb](options)
    except KeyboardInterrupt:
        from strutbook_addin.command_line.printing import say

        say("strutbook: interrupted; the file in hand was left as it was.", file=sys.stderr)
        return 2
    except BrokenPipeError:
        # Whoever was reading (head, a pager) has had enough; the last flush must not fail again.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 2
