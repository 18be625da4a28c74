"""Names in tables to indices, once, at the border."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from strutbook_addin.findings import Findings
from strutbook_addin.tables.headers import nearest
from strutbook_addin.tables.reading import TableData

IndexArray = NDArray[np.intp]


class Names:
    """The names that a table gives to its rows."""

    def __init__(self, sheet: str, what: str, names: Sequence[str]) -> None:
        self.sheet = sheet
        self.what = what  #: `joint`, `member`, ... as a sentence says it
        self.names = list(names)
        self._index: dict[str, int] = {}
        for index, name in enumerate(self.names):
            # Of two rows with one name the first counts; the duplicate is a finding already.
            self._index.setdefault(name, index)

    def __len__(self) -> int:
        """How many rows there are."""
        return len(self.names)

    def get(self, name: str) -> int | None:
        """Index of a name, None when it is not there."""
        return self._index.get(name)

    def indices(self, table: TableData, column: str, findings: Findings) -> IndexArray:
        """Index of every cell of a column; -1 where the cell is blank or names nothing known."""
        get = self._index.get
        indices = np.array([get(name, -1) for name in table.text(column)], dtype=np.intp)
        for row in np.flatnonzero(indices < 0):
            name = table.text(column)[row]
            if name:
                table.report(findings, int(row), column, self._unknown(name), self._remedy(name))
        return indices

    def _unknown(self, name: str) -> str:
        return f"there is no {self.what} {name} on the sheet {self.sheet}.{nearest(name, self.names)}"

    def _remedy(self, name: str) -> str:
        return f"Correct the name here, or add {name} to the sheet {self.sheet}."
