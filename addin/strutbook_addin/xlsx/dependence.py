"""Which sheets hold formulas that may follow from cells that were written.

The rule errs on one side only: a sheet that is left out holds no formula that could have changed.
"""

from __future__ import annotations

import re
from collections.abc import Collection, Iterable, Mapping

#: References of which the text does not name the sheet: made at run time, structured, to other files,
#: and through a row of sheets.
_ANYWHERE = re.compile(r"\bINDIRECT\s*\(|\bSHEETS\s*\(|\[|'[^']*:[^']*'!|:\w+!", re.IGNORECASE)


def following_sheets(
    written: Collection[str], formulas: Mapping[str, Iterable[str]], names: Mapping[str, str]
) -> set[str]:
    """Sheets of which formulas may follow from what was written, directly or through others.

    Parameters
    ----------
    written : collection of str
        Sheets on which cells were written.
    formulas : mapping
        Texts of the formulas of each sheet that has any.
    names : mapping
        Defined names of the workbook with what they stand for.

    >>> sorted(following_sheets({"A"}, {"A": ["B1"], "B": ["A!B1*2"], "C": ["B!C1"], "D": ["D1+1"]}, {}))
    ['A', 'B', 'C']
    """
    folded = {sheet: [text.casefold() for text in texts] for sheet, texts in formulas.items()}
    named = {name.casefold(): text.casefold() for name, text in names.items()}
    reached = {end for sheet in written for end in _as_written(sheet)}
    following = {sheet for sheet in folded if sheet in written}
    while True:
        reached_names = {name for name, text in named.items() if name not in reached and _mentions(text, reached)}
        found = {
            sheet
            for sheet, texts in folded.items()
            if sheet not in following and any(_mentions(text, reached | reached_names) for text in texts)
        }
        if not reached_names and not found:
            return following
        reached |= reached_names | {end for sheet in found for end in _as_written(sheet)}
        following |= found


def _as_written(sheet: str) -> tuple[str, str]:
    """Name of a sheet as it stands in references, plain and in apostrophes, which are doubled inside."""
    name = sheet.casefold()
    return f"{name}!", name.replace("'", "''") + "'!"


def _mentions(formula: str, names: Iterable[str]) -> bool:
    return _ANYWHERE.search(formula) is not None or any(name in formula for name in names)
