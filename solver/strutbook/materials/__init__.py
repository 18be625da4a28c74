"""Materials of published standards: steel grades and timber strength classes."""

from strutbook.materials.catalogue import UnknownMaterial, material, materials
from strutbook.materials.material import Material, StrengthStep, Substance

__all__ = ["Material", "StrengthStep", "Substance", "UnknownMaterial", "material", "materials"]
