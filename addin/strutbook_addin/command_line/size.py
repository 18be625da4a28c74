"""``strutbook size FILE``: the lightest sections, by group, with which everything passes."""

from __future__ import annotations

import argparse
from pathlib import Path
from typing import TYPE_CHECKING

from strutbook_addin.command_line.printing import say
from strutbook_addin.findings import Level

if TYPE_CHECKING:
    from strutbook_addin.sizing import Sizing


def add_options(parser: argparse.ArgumentParser) -> None:
    """Declare the options of the verb."""
    parser.add_argument("file", type=Path, metavar="FILE", help="a workbook, .xlsx or .xlsm")
    parser.add_argument(
        "--from",
        dest="allowed",
        nargs="+",
        default=[],
        metavar="SECTION",
        help="families (SHS, CHS, L ...) or designations that may be chosen, where there is no sheet Stock; "
        "default: the family of each group's present section",
    )
    parser.add_argument(
        "--apply", action="store_true", help="write the chosen designations into the sheet Members as well"
    )
    parser.add_argument("--out", type=Path, metavar="FILE", help="write here instead of in place")


def work(options: argparse.Namespace) -> int:
    """Size and tell."""
    from strutbook_addin.sizing_file import size_file

    sized = size_file(options.file, options.out or options.file, allowed=options.allowed, apply=options.apply)
    if sized.sizing is None:
        say(f"{options.file}: not sized.")
        for finding in sized.solved.outcome.findings:
            if finding.level is Level.STOP:
                say(f"  {finding.sentence}")
        return sized.exit_status
    for line in comparison(sized.sizing):
        say(line)
    where = "the sheets Members and Sizing" if options.apply else "the sheet Sizing; --apply takes them over"
    say(f"\nwritten to {sized.solved.written}: {where}")
    return sized.exit_status


def comparison(sizing: Sizing) -> list[str]:
    """What was chosen, group by group, for people."""
    rows = [("group", "members", "before", "chosen", "kg before", "kg chosen", "used", "governed by")]
    rows += [
        (
            group.name,
            str(len(group.members)),
            group.before,
            group.chosen.name if group.chosen else group.before,
            f"{group.mass_before:.0f}",
            f"{group.mass_chosen:.0f}",
            "-" if group.utilisation != group.utilisation else f"{group.utilisation:.2f}",
            "; ".join(filter(None, (group.governed_by, group.remark))),
        )
        for group in sizing.groups
    ]
    widths = [max(len(row[place]) for row in rows) for place in range(len(rows[0]) - 1)]
    text = [
        "  ".join([*(cell.ljust(width) for cell, width in zip(row, widths, strict=False)), row[-1]]) for row in rows
    ]
    before = sum(group.mass_before for group in sizing.groups)
    chosen = sum(group.mass_chosen for group in sizing.groups)
    text.append(f"\nmass {before:.0f} kg before, {chosen:.0f} kg with the sections that were chosen")
    verdict = "every member that can be checked passes the checks listed" if sizing.passes else "not everything passes"
    return [*text, f"{verdict}; {len(sizing.checked.unchecked)} members were not checked"]
