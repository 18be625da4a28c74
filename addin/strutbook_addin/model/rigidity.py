"""What members are made of: areas, moduli, densities and thermal expansion."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from strutbook_addin.findings import Findings
from strutbook_addin.model.references import Names
from strutbook_addin.tables.reading import FloatArray, TableData


@dataclass(frozen=True, eq=False)
class Rigidity:
    """Properties of every member; NaN where the workbook does not give them."""

    area: FloatArray  #: (members,) m2
    modulus: FloatArray  #: (members,) Pa
    density: FloatArray  #: (members,) kg/m3
    expansion: FloatArray  #: (members,) 1/K

    @property
    def axial(self) -> FloatArray | None:
        """(members,) EA in N, or None when no member has any: forces come from statics alone."""
        rigidity = self.area * self.modulus
        return None if np.isnan(rigidity).all() else rigidity


def read_rigidity(
    members: TableData, sections: TableData | None, materials: TableData | None, findings: Findings
) -> Rigidity:
    """Properties of the members from their own columns, or from the section and material they name."""
    area = _own_or_named(members, "Area", "Section", sections, "Sections", "Area", findings)
    modulus = _own_or_named(members, "E", "Material", materials, "Materials", "E", findings)
    density = _named(members, "Material", materials, "Density")
    expansion = _named(members, "Material", materials, "Expansion")
    given = ~np.isnan(np.column_stack([area, modulus]))
    if given.any():
        for column, other, values in (("Area", "Section", given[:, 0]), ("E", "Material", given[:, 1])):
            for row in np.flatnonzero(~values):
                # A name that is not known is a finding already.
                if not members.text(other)[row]:
                    members.report(
                        findings,
                        int(row),
                        column if column in members.layout.columns else other,
                        f"the member has no {column}, though others or its own columns state stiffness.",
                        f"Fill in {column} or {other} for every member, or for none to use statics alone.",
                    )
    return Rigidity(area, modulus, density, expansion)


def _own_or_named(
    members: TableData,
    own: str,
    reference: str,
    table: TableData | None,
    sheet: str,
    column: str,
    findings: Findings,
) -> FloatArray:
    values = members.number(own)
    names = members.text(reference)
    if any(names):
        known = Names(sheet, reference.lower(), table.text(reference) if table else [])
        known.indices(members, reference, findings)
    return np.where(np.isnan(values), _named(members, reference, table, column), values)


def _named(members: TableData, reference: str, table: TableData | None, column: str) -> FloatArray:
    names = members.text(reference)
    if table is None or not any(names):
        return np.full(members.rows, np.nan)
    values = dict(zip(reversed(table.text(reference)), reversed(table.number(column).tolist()), strict=True))
    return np.array([values.get(name, np.nan) for name in names], dtype=np.float64)
