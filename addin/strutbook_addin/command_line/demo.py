"""``strutbook demo [FOLDER]``: write the demonstration workbook, solve it, print what was found."""

from __future__ import annotations

import argparse
import sys
from itertools import count
from pathlib import Path

import numpy as np

from strutbook_addin.command_line.printing import lines, say
from strutbook_addin.results import Results
from strutbook_addin.solving import solve_file


def add_options(parser: argparse.ArgumentParser) -> None:
    """Declare the options of the verb."""
    parser.add_argument(
        "folder",
        nargs="?",
        type=Path,
        default=Path("demo"),
        metavar="FOLDER",
        help="where the workbook is written (default: the folder demo)",
    )


def work(options: argparse.Namespace) -> int:
    """Write, solve and report; a demonstration that is there already is kept beside the new one."""
    from strutbook_templates import write_demonstration

    folder: Path = options.folder
    try:
        folder.mkdir(parents=True, exist_ok=True)
        file = _free_name(folder)
        write_demonstration(file)
    except OSError as error:
        say(f"strutbook demo: {folder} could not be written: {error.strerror or error}.", sys.stderr)
        return 2
    solved = solve_file(file, file)
    checked = solved.outcome.checked
    for line in lines(solved):
        say(line)
    if solved.outcome.results is not None:
        say("")
        if checked is not None and checked.largest is not None:
            member = solved.outcome.results.model.geometry.members.names[checked.largest]
            say(f"largest utilisation  {checked.utilisation[checked.largest]:6.2f} of its capacity in member {member}")
        for line in _highlights(solved.outcome.results):
            say(line)
        say(f"\nOpen {file} in a spreadsheet program: results stand beside the inputs,")
        say("and the sheet Picture draws them.")
    # Members that fail belong to the demonstration.
    return 0 if solved.outcome.results is not None else solved.exit_status


def _free_name(folder: Path) -> Path:
    names = (folder / f"footbridge{'' if number == 1 else f'-{number}'}.xlsx" for number in count(1))
    return next(name for name in names if not name.exists())


def _highlights(results: Results) -> list[str]:
    """The largest values in plain words."""
    members, combinations = results.model.geometry.members.names, results.model.combinations.names
    text = []
    for what, place in (("tension", results.forces.argmax()), ("compression", results.forces.argmin())):
        member, combination = np.unravel_index(int(place), results.forces.shape)
        value = results.forces[member, combination] / 1e3
        text.append(
            f"largest {what:<12} {value:9.1f} kN in member {members[int(member)]}, "
            f"combination {combinations[int(combination)]}"
        )
    text.append(f"largest displacement {results.largest_displacement() * 1e3:6.1f} mm in a service combination")
    residual = float(results.analysis.residual.max(initial=0.0))
    text.append(f"every joint balances to {residual:.0e} of the largest load")
    return text
