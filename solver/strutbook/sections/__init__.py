"""Cross-sections: properties from dimensions, and sections by designation."""

from strutbook.sections.designation import families, section
from strutbook.sections.section import Product, Section, Shape, UnknownSection

__all__ = ["Product", "Section", "Shape", "UnknownSection", "families", "section"]
