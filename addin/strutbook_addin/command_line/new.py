"""``strutbook new FILE``: start a workbook, blank or with a truss of a usual shape."""

from __future__ import annotations

import argparse
import sys
from pathlib import Path

from strutbook_addin.command_line.printing import say


def add_options(parser: argparse.ArgumentParser) -> None:
    """Declare the options of the verb; those of the shapes follow from the table of shapes."""
    from strutbook_templates.parameters import SHAPES
    from strutbook_templates.unit_systems import UNIT_SYSTEMS

    parser.formatter_class = argparse.RawDescriptionHelpFormatter
    parser.add_argument("file", type=Path, metavar="FILE", help="the workbook to make, .xlsx")
    parser.add_argument(
        "--shape",
        default="plane",
        choices=list(SHAPES),
        help="what it holds (default: plane, with empty tables)",
    )
    parser.add_argument("--units", default="metric", choices=list(UNIT_SYSTEMS), help="default: metric")
    options: dict[str, str] = {}
    for shape in SHAPES.values():
        for parameter in shape.parameters:
            options.setdefault(parameter.name, parameter.meaning)
    group = parser.add_argument_group("options of the shapes")
    for name, meaning in options.items():
        group.add_argument(f"--{name}", metavar="VALUE", default=argparse.SUPPRESS, help=meaning)
    parser.epilog = "\n".join(_shape_lines())


def work(options: argparse.Namespace) -> int:
    """Make the workbook; a file that is there already is never replaced."""
    from strutbook_templates import new_workbook

    file: Path = options.file
    given = {key: value for key, value in vars(options).items() if key not in {"file", "shape", "units", "verb"}}
    problem = ""
    if file.suffix.lower() != ".xlsx":
        problem = f"{file} does not end in .xlsx. Name the workbook so."
    elif file.exists():
        problem = f"{file} exists and was left alone. Choose another name, or remove it first."
    else:
        try:
            file.parent.mkdir(parents=True, exist_ok=True)
            new_workbook(file, options.shape, units=options.units, **given)
        except ValueError as error:
            problem = str(error)
        except OSError as error:
            problem = f"{file} could not be written: {error.strerror or error}."
    if problem:
        say(f"strutbook new: {problem}", sys.stderr)
        return 2
    what = "with empty tables" if options.shape in {"plane", "space"} else f"with a {options.shape} truss"
    say(f"{file}: a workbook {what} was written.")
    say(f"Fill in or change its tables, then run: strutbook solve {file}")
    return 0


def _shape_lines() -> list[str]:
    """Shapes with their parameters and defaults, for the help."""
    from strutbook_templates.parameters import SHAPES
    from strutbook_templates.unit_systems import UNIT_SYSTEMS

    lines = ["shapes and the options that each takes, with their defaults (metric; us):"]
    for shape in SHAPES.values():
        lines.append(f"  {shape.name}: {shape.meaning}")
        for parameter in shape.parameters:
            defaults = [
                f"{parameter.defaults[system.name]} {parameter.unit(system)}".strip()
                for system in UNIT_SYSTEMS.values()
            ]
            lines.append(f"      --{parameter.name:<10} {'; '.join(dict.fromkeys(defaults))}: {parameter.meaning}")
    return lines
