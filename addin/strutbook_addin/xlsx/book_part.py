"""The workbook part: which sheets there are, their parts, and what all of them share."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from xml.etree import ElementTree as ET

from strutbook_addin.xlsx.errors import UnreadableWorkbook
from strutbook_addin.xlsx.markup import (
    MAIN_NAMESPACES,
    attribute,
    children,
    local_name,
    parse,
)
from strutbook_addin.xlsx.number_formats import Shown, date_styles
from strutbook_addin.xlsx.package import Package
from strutbook_addin.xlsx.relationships import Relationship, relationships_of
from strutbook_addin.xlsx.shared_texts import shared_texts


@dataclass(frozen=True, eq=False)
class BookPart:
    """What the workbook part and the parts shared by all sheets say."""

    package: Package
    part: str  #: name of the workbook part
    root: ET.Element
    relationships: tuple[Relationship, ...]
    sheets: dict[str, str]  #: part of each worksheet by the name of the sheet, in their order
    other_sheets: tuple[str, ...]  #: names of sheets without cells: charts, dialogs

    @cached_property
    def from_1904(self) -> bool:
        """Whether dates are counted from 1904."""
        return any(attribute(element, "date1904") in ("1", "true") for element in children(self.root, "workbookPr"))

    @property
    def calculates_on_load(self) -> bool:
        """Whether the workbook declares that stored values are to be calculated anew on opening."""
        return any(attribute(element, "fullCalcOnLoad") in ("1", "true") for element in children(self.root, "calcPr"))

    @property
    def defined_names(self) -> dict[str, str]:
        """What the names of the workbook stand for, as formulas."""
        return {
            element.get("name", ""): element.text or ""
            for element in children(self.root, "definedNames", "definedName")
        }

    @property
    def has_macros(self) -> bool:
        """Whether the workbook brings functions of its own, which may read any cell."""
        return self.related("vbaProject") is not None

    def related(self, kind: str) -> str | None:
        """Part to which the workbook has a relationship of a kind (`styles`, `calcChain`), if it is there."""
        for relationship in self.relationships:
            if relationship.kind.endswith(f"/{kind}"):
                return self.package.find(relationship.target)
        return None

    @cached_property
    def shared_texts(self) -> list[str]:
        """Texts that cells refer to by number."""
        part = self.related("sharedStrings")
        if part is None:
            return []
        return shared_texts(self.package.read(part), part)

    @cached_property
    def date_styles(self) -> dict[str, Shown]:
        """Cell formats that show dates or times, by their index as cells write it."""
        part = self.related("styles")
        return {} if part is None else date_styles(parse(self.package.read(part), part))


def read_book_part(package: Package) -> BookPart:
    """Read the workbook part of a package.

    Raises
    ------
    UnreadableWorkbook
        When the package is no .xlsx or .xlsm workbook.
    """
    part = next(
        (found.target for found in relationships_of(package, "") if found.kind.endswith("/officeDocument")),
        None,
    )
    if part is None or package.find(part) is None:
        raise UnreadableWorkbook(f"the file holds no workbook{_kind(package)}. Save it as .xlsx or .xlsm.")
    if part.casefold().endswith(".bin"):
        raise UnreadableWorkbook("the file is a binary workbook (.xlsb). Save it as .xlsx or .xlsm.")
    root = parse(package.read(part), part)
    namespace = root.tag.partition("}")[0].lstrip("{")
    if local_name(root.tag) != "workbook" or namespace not in MAIN_NAMESPACES:
        raise UnreadableWorkbook(f"the file holds no spreadsheet (its main part {part} is another document).")
    relationships = tuple(relationships_of(package, part))
    worksheets = {found.identity: found.target for found in relationships if found.kind.endswith("/worksheet")}
    sheets = {
        element.get("name", ""): worksheets[attribute(element, "id")]
        for element in children(root, "sheets", "sheet")
        if attribute(element, "id") in worksheets
    }
    names = [element.get("name", "") for element in children(root, "sheets", "sheet")]
    _check_sheets(names, sheets, package)
    others = tuple(name for name in names if name not in sheets)
    return BookPart(package, part, root, relationships, sheets, others)


def _check_sheets(names: list[str], sheets: dict[str, str], package: Package) -> None:
    """Refuse a workbook in which it is not clear which cells a sheet has."""
    if len({name.casefold() for name in names}) < len(names):
        raise UnreadableWorkbook(
            "the file holds two sheets of one name. "
            "Open it in your spreadsheet program, let it repair the file, and save it again."
        )
    parts = [package.find(part) or part for part in sheets.values()]
    if len(set(parts)) < len(parts):
        raise UnreadableWorkbook(
            "the file holds two sheets that share their cells. "
            "Open it in your spreadsheet program, let it repair the file, and save it again."
        )


def _kind(package: Package) -> str:
    """What the package is instead, where that can be told."""
    if package.find("mimetype") is not None:
        return " but an OpenDocument file" if b"opendocument" in package.read("mimetype") else ""
    return ""
