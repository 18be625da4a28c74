"""The committed templates: which they are, and the program that writes them anew."""

from __future__ import annotations

from pathlib import Path

from strutbook_templates import workbook_contents
from strutbook_templates.building import write_workbook
from strutbook_templates.contents import Contents
from strutbook_templates.demonstration import demonstration_contents

#: Where the committed templates stand.
FOLDER = Path(__file__).parent


def template_contents() -> dict[str, Contents]:
    """Contents of every committed template by its file name."""
    blanks = {
        f"blank_{shape}_{units}.xlsx": workbook_contents(shape, units=units)
        for shape in ("plane", "space")
        for units in ("metric", "us")
    }
    return blanks | {"demonstration.xlsx": demonstration_contents()}


def write_templates(folder: Path = FOLDER) -> list[Path]:
    """Write every template into a folder and return the files."""
    written = []
    for name, contents in template_contents().items():
        write_workbook(contents, folder / name)
        written.append(folder / name)
    return written
