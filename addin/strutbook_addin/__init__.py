"""The calculation layer between a workbook's tables and the solver.

`solve_file` does the whole job for one workbook; `strutbook_addin.run.run` does it for any host that
offers `Sheets`.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from strutbook_addin.findings import Finding, Findings, Level
    from strutbook_addin.outcome import Outcome
    from strutbook_addin.sheets import Sheets
    from strutbook_addin.solving import Solved, solve_file

__all__ = ["Finding", "Findings", "Level", "Outcome", "Sheets", "Solved", "solve_file"]

_MODULES = {
    "Finding": "findings",
    "Findings": "findings",
    "Level": "findings",
    "Outcome": "outcome",
    "Sheets": "sheets",
    "Solved": "solving",
    "solve_file": "solving",
}


def __getattr__(name: str) -> object:
    # Names are loaded when they are asked for: the command line's help needs none of them.
    if name in _MODULES:
        return getattr(import_module(f"strutbook_addin.{_MODULES[name]}"), name)
    raise AttributeError(f"module 'strutbook_addin' has no attribute {name!r}")
