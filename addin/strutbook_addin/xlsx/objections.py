"""Why cells of a sheet are not written: what stands there is the user's, or would not be seen."""

from __future__ import annotations

from collections.abc import Iterator

from strutbook_addin.sheets import is_ours
from strutbook_addin.xlsx.markup import attribute, damaged, parse
from strutbook_addin.xlsx.package import Package
from strutbook_addin.xlsx.relationships import relationships_of
from strutbook_addin.xlsx.sheet_part import Area, Cell, SheetPart, area_of

_IN_ARRAY = "it belongs to an array formula or a data table of yours"
_MERGED = "it is hidden under a merged cell; unmerge it"
_SHARED = "other cells share the formula that stands there; clear them first"
_Place = tuple[int, int]


class Objections:
    """The cells of one sheet that a run does not write, with the reasons."""

    def __init__(self, package: Package, part: SheetPart) -> None:
        self._part = part
        self._areas: dict[_Place, str] = {}
        for area in part.arrays:
            self._areas.update(dict.fromkeys(_places(area), _IN_ARRAY))
        for area in part.merged:
            anchor = (area.first_row, area.first_column)
            self._areas.update((place, _MERGED) for place in _places(area) if place != anchor)
        self._headers = dict(_table_headers(package, part))

    def to_writing(self, place: _Place, cell: Cell | None) -> str:
        """Why a value is not written to a cell, or nothing."""
        return self._about_formula(place, cell) or self._areas.get(place, "") or self._headers.get(place, "")

    def to_clearing(self, place: _Place, cell: Cell | None) -> str:
        """Why a cell is not cleared, or nothing; what holds no value needs no clearing."""
        if cell is None or (cell.value is None and cell.formula is None):
            return ""
        return self.to_writing(place, cell)

    def _about_formula(self, place: _Place, cell: Cell | None) -> str:
        if cell is None or cell.formula is None:
            return ""
        if is_ours(cell.formula):
            master = self._part.shared_masters.get(place)
            return _SHARED if master in self._part.shared_users else ""
        text = f" (={cell.formula})" if cell.formula else ""
        return f"a formula of yours stands there{text}"


def _places(area: Area) -> Iterator[_Place]:
    return (
        (row, column)
        for row in range(area.first_row, area.last_row + 1)
        for column in range(area.first_column, area.last_column + 1)
    )


def _table_headers(package: Package, part: SheetPart) -> Iterator[tuple[_Place, str]]:
    """Header cells of the tables of a sheet: their texts name the tables' columns."""
    if not part.table_relationships:
        return
    for relationship in relationships_of(package, part.name):
        if relationship.identity not in part.table_relationships:
            continue
        root = parse(package.read(relationship.target), relationship.target)
        if attribute(root, "headerRowCount") == "0":
            continue
        try:
            area = area_of(attribute(root, "ref"))
        except ValueError as error:
            raise damaged(relationship.target, error) from error
        name = attribute(root, "displayName")
        for column in range(area.first_column, area.last_column + 1):
            yield (area.first_row, column), f"it is the header of a column of the table {name}"
