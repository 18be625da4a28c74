"""The sheet `Picture` of a workbook that has one: the numbers behind its charts follow every run."""

from __future__ import annotations

import numpy as np

from strutbook_addin import picture
from strutbook_addin.results import Results
from strutbook_addin.sheets import Grid, Sheets, Written
from strutbook_addin.tables.headers import cell
from strutbook_addin.tables.schema import normal
from strutbook_addin.tables.writing import TableWriter

_NOT_SOLVED = "Not solved: the sheet Findings says why."


def write_picture(sheets: Sheets, writer: TableWriter, results: Results | None) -> None:
    """Draw the results, or nothing where there are none; a workbook without our charts is left as it is."""
    name = next((name for name in sheets.names() if normal(name) == normal(picture.SHEET)), None)
    if name is None:
        return
    grid = sheets.read(name)
    if cell(grid, picture.DATA_HEADER_ROW, picture.DATA_FIRST_COLUMN) != picture.header(picture.Line.TENSION, "x"):
        return
    unsolved = picture.Block(*picture.FORCES_CELL, [[_NOT_SOLVED]])
    blocks = [unsolved] if results is None else _blocks(results)
    by_corner = {(block.row, block.column): block.values for block in blocks}
    for area in picture.AREAS:
        values = by_corner.get((area.row, area.column), [])
        rows = max(len(values), _used_rows(grid, area))
        empty: list[Written] = [None] * area.columns
        writer.write(name, area.row, area.column, [*values, *([empty] * (rows - len(values)))])


def _blocks(results: Results) -> list[picture.Block]:
    """What to draw: forces of the combination with the largest, displacements of that with the largest."""
    model, truss = results.model, results.model.truss
    names = model.combinations.names
    strength = results.strength
    governing = int(strength[np.abs(results.forces[:, strength]).max(axis=0, initial=0.0).argmax()])
    displacements, displaced_in = None, ""
    if results.displacements is not None:
        service = results.service
        sizes = np.linalg.norm(results.displacements[:, :, service], axis=1).max(axis=0, initial=0.0)
        displaced = int(service[sizes.argmax()])
        displacements, displaced_in = results.displacements[:, :, displaced], names[displaced]
    return picture.picture_values(
        truss.joints,
        truss.members,
        support_joints=truss.supports.joint,
        support_directions=truss.supports.direction,
        forces=results.forces[:, governing],
        forces_in=names[governing],
        displacements=displacements,
        displaced_in=displaced_in,
    )


def _used_rows(grid: Grid, area: picture.Area) -> int:
    """Rows of an area down to the last one that holds anything."""
    last = min(len(grid), area.row + area.rows) - 1
    for row in range(last, area.row - 1, -1):
        if any(value is not None for value in grid[row][area.column : area.column + area.columns]):
            return row - area.row + 1
    return 0
