"""What a run came to."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from strutbook_addin.findings import Finding, Level
from strutbook_addin.results import Results

if TYPE_CHECKING:
    from strutbook_addin.member_checks import CheckedMembers


@dataclass(frozen=True, eq=False)
class Outcome:
    """The findings of a run and, where it could solve, its results."""

    findings: tuple[Finding, ...]
    digest: str  #: of the inputs
    results: Results | None
    checked: CheckedMembers | None = None  #: None where no standard was asked for

    @property
    def exit_status(self) -> int:
        """0 solved and nothing fails, 1 solved and something fails, 2 not solved."""
        return 2 if self.results is None else int(self.count(Level.FAIL) > 0)

    def count(self, *levels: Level) -> int:
        """How many findings of these levels there are."""
        return sum(finding.level in levels for finding in self.findings)

    @property
    def sentence(self) -> str:
        """The run in one sentence."""
        if self.results is None:
            stops = _counted(self.count(Level.STOP), "finding")
            return f"Not solved: {stops} to mend first, see the sheet Findings."
        model = self.results.model
        degree = self.results.analysis.stability.indeterminacy
        kind = f"statically indeterminate to degree {degree}" if degree else "statically determinate"
        looks = self.count(Level.FAIL, Level.LOOK)
        remarks = f"; {_counted(looks, 'finding')} to look at" if looks else ""
        if self.checked is not None:
            fails = int(self.checked.fails.sum())
            unchecked = len(self.checked.unchecked)
            not_all = f", {unchecked} not checked" if unchecked else ""
            remarks = f"; {_counted(fails, 'member')} fail{'s' * (fails == 1)}{not_all}{remarks}"
        return (
            f"Solved: {_counted(len(model.geometry.joints), 'joint')}, "
            f"{_counted(len(model.geometry.members), 'member')}, "
            f"{_counted(len(model.combinations.names), 'combination')}, {kind}{remarks}."
        )


def _counted(count: int, what: str) -> str:
    return f"{count} {what}{'' if count == 1 else 's'}"
