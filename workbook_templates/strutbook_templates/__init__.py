"""New strutbook workbooks: blank, from a parametric truss, or the demonstration.

Importing the package loads neither numpy nor openpyxl; the functions load them when they are called.
"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from os import PathLike

    from strutbook_templates.contents import Contents

__all__ = ["new_workbook", "shape_names", "write_demonstration"]


def shape_names() -> list[str]:
    """Shapes that a new workbook can begin with.

    `strutbook_templates.parameters.SHAPES` declares what each one is and the parameters it takes.

    >>> shape_names()
    ['plane', 'space', 'pratt', 'howe', 'warren', 'fink', 'k', 'tower']
    """
    from strutbook_templates.parameters import SHAPES

    return list(SHAPES)


def new_workbook(path: str | PathLike[str], shape: str, *, units: str = "metric", **parameters: float | str) -> None:
    """Write a new workbook with all tables of the schema, filled in for a shape.

    Parameters
    ----------
    path : path
        File to write, which ends in .xlsx; there must be none of that name.
    shape : str
        One of `shape_names`.
    units : str
        `metric` (m, kN, mm, cm2, N/mm2) or `us` (ft, kip, in, in2, ksi).
    **parameters : float or str
        Parameters of the shape, in these units; those that are not given have defaults.

    Raises
    ------
    ValueError
        With a sentence that says what is wrong with the shape, the units, a parameter or the path.
    FileExistsError
        When a file of that name is there already.
    """
    contents = workbook_contents(shape, units=units, **parameters)
    target = Path(path)
    if target.suffix.casefold() != ".xlsx":
        raise ValueError(f"the file {target.name!r} does not end in .xlsx; give a name such as bridge.xlsx.")
    if target.exists():
        raise FileExistsError(f"the file {target} exists already; give another name, or remove it first.")
    from strutbook_templates.building import write_workbook

    write_workbook(contents, target)


def workbook_contents(shape: str, *, units: str = "metric", **parameters: float | str) -> Contents:
    """Rows that `new_workbook` writes, by sheet and column, without writing a file."""
    from strutbook_templates.filling import blank_contents, shape_contents
    from strutbook_templates.parameters import shape_of, unit_system

    chosen, system = shape_of(shape), unit_system(units)
    values = chosen.values(parameters, system)
    if chosen.name in {"plane", "space"}:
        return blank_contents(2 if chosen.name == "plane" else 3, system)
    return shape_contents(chosen, values, system)


def write_demonstration(path: str | PathLike[str]) -> None:
    """Write the demonstration workbook: a 53-member footbridge truss with every table in use.

    A file of that name is replaced.
    """
    from strutbook_templates.building import write_workbook
    from strutbook_templates.demonstration import demonstration_contents

    write_workbook(demonstration_contents(), Path(path))
