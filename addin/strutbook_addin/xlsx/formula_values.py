"""Values of formulas for which the file stores none that can be trusted."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field

from strutbook_addin.findings import Finding, Level
from strutbook_addin.sheets import CellValue, ErrorValue, cell_name
from strutbook_addin.xlsx.book_part import BookPart
from strutbook_addin.xlsx.cell_values import value_of
from strutbook_addin.xlsx.recalculation import Recalculated, same_value, user_formulas
from strutbook_addin.xlsx.sheet_part import SheetPart

_Place = tuple[int, int]


@dataclass
class FormulaValues:
    """What calculation says about the formulas of a sheet, where the file does not say it itself."""

    values: dict[_Place, CellValue] = field(default_factory=dict)
    calculated: list[_Place] = field(default_factory=list)
    #: Declared out of date by the file, and not calculated either.
    unsure: list[_Place] = field(default_factory=list)

    def findings(self, sheet: str) -> Iterator[Finding]:
        """Which cells were calculated here, and which stored values were used for want of better ones."""
        if self.calculated:
            yield Finding(
                Level.NOTE,
                f"the file stores no current value for {_listed(self.calculated)}; calculated here.",
                "Open the workbook in your spreadsheet program and save it to have its values used.",
                sheet,
                *self.calculated[0],
            )
        if self.unsure:
            yield Finding(
                Level.LOOK,
                f"{_listed(self.unsure)} could not be calculated here; the stored values were used, "
                "though the file declares them out of date.",
                "Open the workbook in your spreadsheet program, save it, and solve again.",
                sheet,
                *self.unsure[0],
            )


def formula_values(sheet: str, part: SheetPart, book: BookPart, calculate: Callable[[], Recalculated]) -> FormulaValues:
    """Values of formulas that store none, or one that the workbook itself declares out of date.

    `calculate` is called only where there is such a formula.
    """
    found = FormulaValues()
    out_of_date = book.calculates_on_load
    wanted = {place: cell for place, cell in user_formulas(part) if out_of_date or cell.awaits_value}
    if not wanted:
        return found
    result = calculate()
    cells = result.cells(sheet)
    for place, cell in wanted.items():
        new = cells.get(place)
        if cell.awaits_value:
            if new is None or new.kind == "e":
                error = new.value if new is not None else None
                reason = error or f"not calculated ({result.reason or 'the library left it out'})"
                found.values[place] = ErrorValue(reason, f"={cell.formula}")
                continue
        elif new is not None and same_value(new, cell):
            continue
        if new is None or new.kind == "e":
            found.unsure.append(place)
        else:
            found.values[place] = value_of(new, result.book or book)
            found.calculated.append(place)
    return found


def _listed(places: list[_Place]) -> str:
    names = ", ".join(cell_name(*place) for place in places[:6])
    more = f" and {len(places) - 6} more" if len(places) > 6 else ""
    return f"the formula{'s' if len(places) > 1 else ''} in {names}{more}"
