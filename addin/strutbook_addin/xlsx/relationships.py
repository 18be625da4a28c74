"""Relationships between the parts of a package (ISO/IEC 29500-2)."""

from __future__ import annotations

import posixpath
from dataclasses import dataclass
from xml.etree import ElementTree as ET

from strutbook_addin.xlsx.markup import parse
from strutbook_addin.xlsx.package import Package


@dataclass(frozen=True)
class Relationship:
    """One relationship of a part to another one."""

    identity: str
    kind: str  #: type as it is written, a URI
    target: str  #: name of the part in the package; empty where it lies outside


def relationships_part(part: str) -> str:
    """Name of the part that holds the relationships of a part.

    >>> relationships_part("xl/workbook.xml")
    'xl/_rels/workbook.xml.rels'
    """
    folder, name = posixpath.split(part)
    return posixpath.join(folder, "_rels", f"{name}.rels")


def relationships_of(package: Package, part: str) -> list[Relationship]:
    """Relationships of a part (of the package itself: an empty name) to other parts."""
    name = package.find(relationships_part(part))
    if name is None:
        return []
    root = parse(package.read(name), name)
    return [
        Relationship(element.get("Id", ""), element.get("Type", ""), _target(element, part, package))
        for element in root
    ]


def _target(element: ET.Element, part: str, package: Package) -> str:
    if element.get("TargetMode") == "External":
        return ""
    target = element.get("Target", "").replace("\\", "/").partition("#")[0]
    path = target[1:] if target.startswith("/") else posixpath.join(posixpath.dirname(part), target)
    path = posixpath.normpath(path)
    found = package.find(path)
    if found is None and "%" in path:
        from urllib.parse import unquote

        found = package.find(unquote(path))
    return found or path
