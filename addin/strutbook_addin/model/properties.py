"""What members are made of: sections and materials, by name, by designation or by their own columns."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import TypeVar

import numpy as np

from strutbook.materials.material import Material, StrengthStep, Substance
from strutbook.sections.section import Product, Section, Shape
from strutbook_addin.findings import Findings
from strutbook_addin.model.references import IndexArray
from strutbook_addin.tables.headers import nearest
from strutbook_addin.tables.reading import FloatArray, TableData

#: Pa, moduli between which a material of the user's own with a yield strength is taken for steel.
STEEL = (180e9, 225e9)
_Named = TypeVar("_Named")


@dataclass(frozen=True, eq=False)
class Properties:
    """Properties of every member; NaN or -1 where the workbook does not give them."""

    sections: tuple[Section, ...]  #: distinct sections
    section: IndexArray  #: (members,) index into `sections`, -1 for none
    materials: tuple[Material, ...]  #: distinct materials
    material: IndexArray  #: (members,) index into `materials`, -1 for none
    area: FloatArray  #: (members,) m2
    modulus: FloatArray  #: (members,) Pa
    density: FloatArray  #: (members,) kg/m3
    expansion: FloatArray  #: (members,) 1/K

    @property
    def axial(self) -> FloatArray | None:
        """(members,) EA in N, or None when no member has any: forces come from statics alone."""
        rigidity = self.area * self.modulus
        return None if np.isnan(rigidity).all() else rigidity


def read_properties(
    members: TableData, sections: TableData | None, materials: TableData | None, findings: Findings
) -> Properties:
    """Properties of the members from their own columns, or from the section and material they name."""
    used_sections, section = _distinct(members, "Section", sections, "Sections", _section, findings)
    used_materials, material = _distinct(members, "Material", materials, "Materials", _material, findings)
    area = _own_or(members.number("Area"), section, [found.area for found in used_sections])
    modulus = _own_or(members.number("E"), material, [found.elastic_modulus for found in used_materials])
    unset = np.full(members.rows, np.nan)
    density = _own_or(unset, material, [found.density for found in used_materials])
    expansion = _own_or(unset, material, [found.expansion for found in used_materials])
    given = ~np.isnan(np.column_stack([area, modulus]))
    if given.any():
        for column, other, known in (("Area", "Section", given[:, 0]), ("E", "Material", given[:, 1])):
            for row in np.flatnonzero(~known):
                # A name that is not known is a finding already.
                if not members.text(other)[row]:
                    members.report(
                        findings,
                        int(row),
                        column if column in members.layout.columns else other,
                        f"the member has no {column}, though others or its own columns state stiffness.",
                        f"Fill in {column} or {other} for every member, or for none to use statics alone.",
                    )
    return Properties(used_sections, section, used_materials, material, area, modulus, density, expansion)


def _own_or(own: FloatArray, index: IndexArray, values: list[float]) -> FloatArray:
    # The last entry serves the members whose index is -1.
    named = np.array([*values, np.nan])[index]
    return np.where(np.isnan(own), named, own)


def _distinct(
    members: TableData,
    column: str,
    table: TableData | None,
    sheet: str,
    resolve: Callable[[str, TableData | None, int, Findings], _Named | str],
    findings: Findings,
) -> tuple[tuple[_Named, ...], IndexArray]:
    """Distinct sections or materials that members name, and the index of each member's; -1 for none.

    `resolve` returns a text where a name means nothing: what is wrong and what would be right.
    """
    rows = {} if table is None else {name: row for row, name in reversed(list(enumerate(table.text(column))))}
    places: dict[str, int] = {}
    found: list[_Named] = []
    index = np.full(members.rows, -1, dtype=np.intp)
    for member, name in enumerate(members.text(column)):
        if not name:
            continue
        if name not in places:
            resolved = resolve(name, table, rows.get(name, -1), findings)
            if isinstance(resolved, str):
                what = f"there is no {column.lower()} {name} on the sheet {sheet}, and {resolved}"
                question = nearest(name, list(rows))
                todo = f"Correct the name here, or add {name} to the sheet {sheet}."
                members.report(findings, member, column, f"{what}{question}", todo)
                places[name] = -1
            else:
                places[name] = len(found)
                found.append(resolved)
        index[member] = places[name]
    return tuple(found), index


def _section(name: str, table: TableData | None, row: int, findings: Findings) -> Section | str:
    if table is not None and row >= 0:
        # A row that is wrong has its finding; NaN keeps what depends on it blank.
        return _section_of_row(table, row, findings) or _general(name, np.nan, np.nan, np.nan, np.nan)
    from strutbook.sections import UnknownSection, section

    try:
        return section(name)
    except UnknownSection as unknown:
        return f"it is no designation either: {unknown}"


def _section_of_row(table: TableData, row: int, findings: Findings) -> Section | None:
    """Section of a row: that of its designation, with what the row states itself in its place."""
    name, designation = table.text("Section")[row], table.text("Designation")[row]
    area, radius_y, radius_z, radius_min = (
        float(table.number(column)[row]) for column in ("Area", "Radius y", "Radius z", "Radius min")
    )
    base = None
    if designation or np.isnan(area):
        from strutbook.sections import UnknownSection, section

        try:
            base = section(designation or name)
        except UnknownSection as unknown:
            if designation:
                table.report(findings, row, "Designation", f"{unknown}", "Correct the designation, or clear it.")
            else:
                what = f"the row states no area, and its name is no designation: {unknown}"
                table.report(findings, row, "Area", what, "Fill in the area, or a designation.")
            return None
    curve = table.text("Buckling curve")[row]
    if base is None:
        return replace(_general(name, area, radius_y, radius_z, radius_min), buckling_curve=curve)
    area = base.area if np.isnan(area) else area
    stated = {"y": radius_y, "z": radius_z, "min": radius_min}
    moments = {f"second_moment_{axis}": area * radius**2 for axis, radius in stated.items() if not np.isnan(radius)}
    return replace(base, name=name, area=area, buckling_curve=curve, **moments)  # type: ignore[arg-type]  # every field named is a float


def _general(name: str, area: float, radius_y: float, radius_z: float, radius_min: float) -> Section:
    if np.isnan(radius_min):
        radius_min = min(radius_y, radius_z) if not np.isnan(radius_y + radius_z) else np.nan
    return Section(
        name,
        Shape.GENERAL,
        Product.UNKNOWN,
        area,
        area * radius_y**2,
        area * radius_z**2,
        area * radius_min**2,
        mass=np.nan,
    )


def _material(name: str, table: TableData | None, row: int, findings: Findings) -> Material | str:
    from strutbook.materials import UnknownMaterial, material

    grade, problem = None, ""
    try:
        grade = material(name)
    except UnknownMaterial as unknown:
        problem = str(unknown)
    if table is None or row < 0:
        return grade or f"it is no grade either: {problem}"
    modulus, density, expansion, tensile, ultimate = (
        float(table.number(column)[row]) for column in ("E", "Density", "Expansion", "Yield", "Ultimate")
    )
    if grade is None:
        if np.isnan(modulus):
            what = f"the row states no E, and its name is no grade: {problem}"
            table.report(findings, row, "E", what, "Fill in the modulus of elasticity.")
        strengths = () if np.isnan(tensile) else (StrengthStep(np.inf, tensile, ultimate),)
        substance = Substance.STEEL if strengths and STEEL[0] <= modulus <= STEEL[1] else Substance.OTHER
        return Material(name, substance, "the sheet Materials", modulus, density, expansion, strengths)
    own = {"elastic_modulus": modulus, "density": density, "expansion": expansion}
    stated = {key: value for key, value in own.items() if not np.isnan(value)}
    if not np.isnan(tensile):
        first = grade.strengths[0].ultimate_strength if grade.strengths else np.nan
        step = StrengthStep(np.inf, tensile, first if np.isnan(ultimate) else ultimate)
        return replace(grade, strengths=(step,), **stated)  # type: ignore[arg-type]  # every field named is a float
    return replace(grade, **stated)  # type: ignore[arg-type]  # every field named is a float
