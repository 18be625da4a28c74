"""What a run has to say to its user: one finding, one sentence, one cell."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from enum import StrEnum

from strutbook_addin.sheets import cell_name


class Level(StrEnum):
    """How much a finding matters."""

    STOP = "stop"  #: nothing was solved because of it
    FAIL = "fail"  #: solved, and something does not pass
    LOOK = "look"  #: solved; an engineer should look at this
    NOTE = "note"  #: worth knowing


_ORDER = {level: place for place, level in enumerate(Level)}


@dataclass(frozen=True)
class Finding:
    """One finding: where it stands, what was found, and what to do about it."""

    level: Level
    what: str
    todo: str = ""
    sheet: str = ""
    row: int | None = None
    column: int | None = None
    header: str = ""  #: header of the column, so that the sentence says what the cell is for

    @property
    def cell(self) -> str:
        """Name of the cell (``D3``), or nothing where the finding is about a whole sheet."""
        if self.row is None or self.column is None:
            return ""
        return cell_name(self.row, self.column)

    @property
    def where(self) -> str:
        """Sheet and cell as the user writes them: ``Members!D3``."""
        return f"{self.sheet}!{self.cell}" if self.cell else self.sheet

    @property
    def sentence(self) -> str:
        """The finding as one line of text."""
        header = f" ({self.header})" if self.header else ""
        place = f"{self.where}{header}: " if self.where else ""
        todo = f" {self.todo}" if self.todo else ""
        return f"{self.level}: {place}{self.what}{todo}"


@dataclass
class Findings:
    """The findings of one run, collected so that the user sees all of them at once."""

    _items: list[Finding] = field(default_factory=list)

    def add(
        self,
        level: Level,
        what: str,
        todo: str = "",
        *,
        sheet: str = "",
        row: int | None = None,
        column: int | None = None,
        header: str = "",
    ) -> None:
        """Collect one finding; the same one twice counts once."""
        finding = Finding(level, what, todo, sheet, row, column, header)
        if finding not in self._items:
            self._items.append(finding)

    def extend(self, findings: list[Finding]) -> None:
        """Collect several findings."""
        self._items.extend(finding for finding in findings if finding not in self._items)

    @property
    def stopped(self) -> bool:
        """True when something forbids to solve."""
        return any(finding.level is Level.STOP for finding in self._items)

    def __iter__(self) -> Iterator[Finding]:
        """Findings, the gravest first, otherwise in the order in which they were found."""
        return iter(sorted(self._items, key=lambda finding: _ORDER[finding.level]))

    def __len__(self) -> int:
        """How many findings there are."""
        return len(self._items)
