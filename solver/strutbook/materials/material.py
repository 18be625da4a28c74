"""A material: what stiffness, weight and checks need to know of it."""

from __future__ import annotations

from dataclasses import dataclass, field
from enum import StrEnum
from math import inf


class Substance(StrEnum):
    """What a standard is written for."""

    STEEL = "steel"
    TIMBER = "timber"
    OTHER = "other"


@dataclass(frozen=True)
class StrengthStep:
    """Yield and ultimate strength up to a thickness."""

    #: m, the largest thickness for which the values hold
    thickness: float
    #: Pa
    yield_strength: float
    ultimate_strength: float


@dataclass(frozen=True)
class Material:
    """A material in SI units."""

    name: str
    substance: Substance
    #: standard that defines it
    source: str
    #: Pa
    elastic_modulus: float
    #: kg/m³
    density: float
    #: 1/K
    expansion: float
    #: strengths by thickness, the thinnest first (steel)
    strengths: tuple[StrengthStep, ...] = ()
    #: characteristic or reference values by the symbol of the standard, Pa (kg/m³ for densities): timber
    values: dict[str, float] = field(default_factory=dict)

    def strength(self, thickness: float) -> StrengthStep:
        """Strengths at a thickness in m.

        Raises
        ------
        ValueError
            When the standard gives none for so thick a part.
        """
        for step in self.strengths:
            if thickness <= step.thickness * (1 + 1e-9):
                return step
        thickest = self.strengths[-1].thickness if self.strengths else inf
        raise ValueError(
            f"{self.source} gives no strength of {self.name} above {thickest * 1e3:g} mm; "
            f"the part is {thickness * 1e3:g} mm thick"
        )
