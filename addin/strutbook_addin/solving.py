"""Solve one workbook file: open, run, save; whatever happens comes back as an outcome."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

from strutbook_addin.findings import Finding, Level
from strutbook_addin.outcome import Outcome
from strutbook_addin.run import check, run, silent


@dataclass(frozen=True, eq=False)
class Solved:
    """What became of one file."""

    file: Path
    outcome: Outcome
    written: Path | None  #: where the results stand, None when nothing was written

    @property
    def exit_status(self) -> int:
        """As the command line returns it for this file."""
        return self.outcome.exit_status


def solve_file(file: Path, target: Path | None, tell: Callable[[str], None] = silent) -> Solved:
    """Solve the workbook `file` and write it to `target` (None: write nothing)."""
    from strutbook_addin.hosts.offline import OfflineWorkbook
    from strutbook_addin.xlsx import RefusedWorkbook
    from strutbook_addin.xlsx.saving import check_target

    try:
        workbook = OfflineWorkbook.open(file)
        if target is None:
            return Solved(file, check(workbook, tell), None)
        check_target(target)
        outcome = run(workbook, tell)
        tell("saving")
        target.parent.mkdir(parents=True, exist_ok=True)
        workbook.save(target)
    except RefusedWorkbook as refused:
        return _stopped(file, f"{file}: {refused}")
    except OSError as error:
        reason = error.strerror or str(error)
        return _stopped(file, f"{file}: {reason}. Nothing was written.")
    except Exception as error:  # noqa: BLE001 - one file must not take the others of a list with it
        kind = type(error).__name__
        return _stopped(file, f"{file}: an error inside strutbook ({kind}: {error}); nothing was written.")
    return Solved(file, outcome, target)


def _stopped(file: Path, sentence: str) -> Solved:
    return Solved(file, Outcome((Finding(Level.STOP, sentence),), "", None), None)
