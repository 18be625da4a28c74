"""Changes to the package beside its cells: a sheet added, calculation asked for when it is opened."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from html import escape
from xml.parsers import expat

from strutbook_addin.sheets import Formula, Written
from strutbook_addin.xlsx.book_part import BookPart
from strutbook_addin.xlsx.doctypes import forbidden_doctype
from strutbook_addin.xlsx.markup import (
    MAIN_NAMESPACES,
    RELATIONSHIP_NAMESPACES,
    as_utf8,
    check_small,
    damaged,
    element_end,
    local_name,
    spliced,
    tag_at,
    with_attribute,
)
from strutbook_addin.xlsx.patching import patched
from strutbook_addin.xlsx.relationships import relationships_part
from strutbook_addin.xlsx.scanning import scan

_WORKSHEET_CONTENT = "application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"
_CONTENT_TYPES = "[Content_Types].xml"
#: Elements that come before ``calcPr`` in a workbook part (ISO/IEC 29500-1, 18.2.27), the last first.
_BEFORE_CALCULATION = ("definedNames", "externalReferences", "functionGroups", "sheets")


@dataclass
class Element:
    """Where an element of a part stands, and the bytes of its start tag."""

    name: str
    attributes: dict[str, str]
    start: int
    close: int = 0
    children: list[Element] = field(default_factory=list)


def elements_of(data: bytes, part: str) -> Element:
    """Tree of the places of all elements of a part in UTF-8."""
    check_small(data, part)
    root = Element("", {}, 0)
    path = [root]
    parser = expat.ParserCreate("utf-8")

    def start(name: str, attributes: dict[str, str]) -> None:
        element = Element(name, attributes, parser.CurrentByteIndex)
        path[-1].children.append(element)
        path.append(element)

    def end(_: str) -> None:
        path.pop().close = parser.CurrentByteIndex

    def refuse_doctype(*_: object) -> None:
        raise forbidden_doctype(part)

    parser.StartElementHandler = start
    parser.EndElementHandler = end
    parser.StartDoctypeDeclHandler = refuse_doctype
    try:
        parser.Parse(data, True)
    except expat.ExpatError as error:
        raise damaged(part, error) from error
    return root.children[0]


@dataclass
class BookChanges:
    """Changes of the workbook part and its companions, collected before they are written."""

    book: BookPart
    new_sheets: dict[str, dict[tuple[int, int], Written]] = field(default_factory=dict)
    calculate_on_load: bool = False
    drop_calculation_chain: bool = False

    def parts(self) -> tuple[dict[str, bytes], frozenset[str]]:
        """Changed and new parts, and the names of those that go."""
        chain = self.book.related("calcChain") if self.drop_calculation_chain else None
        removed = frozenset([chain] if chain else [])
        changed: dict[str, bytes] = {}
        names = self._new_part_names()
        for sheet, part in names.items():
            changed[part] = _sheet_bytes(self.book, self.new_sheets[sheet])
        if names or removed:
            self._change_relationships(changed, names, removed)
            self._change_content_types(changed, names, removed)
        asked = self.calculate_on_load and not self.book.calculates_on_load
        if names or asked:
            self._change_workbook(changed, names, asked=asked)
        return changed, removed

    def _new_part_names(self) -> dict[str, str]:
        folder = self.book.part.rpartition("/")[0]
        package, number, names = self.book.package, 1, {}
        for sheet in self.new_sheets:
            while package.find(part := f"{folder}/worksheets/sheet{number}.xml".lstrip("/")) is not None:
                number += 1
            names[sheet] = part
            number += 1
        return names

    def _identities(self, names: Mapping[str, str]) -> dict[str, str]:
        """Relationship identities of the new sheets."""
        used = {relationship.identity for relationship in self.book.relationships}
        free = (f"rId{number}" for number in range(1, 1_000_000) if f"rId{number}" not in used)
        return {sheet: next(free) for sheet in names}

    @property
    def _relationship_namespace(self) -> str:
        """Where types of relationships come from: strict workbooks have their own."""
        namespace = self.book.root.tag.partition("}")[0].lstrip("{")
        return RELATIONSHIP_NAMESPACES[MAIN_NAMESPACES.index(namespace)]

    def _change_relationships(
        self, changed: dict[str, bytes], names: Mapping[str, str], removed: frozenset[str]
    ) -> None:
        part, data, root = self._small_part(relationships_part(self.book.part))
        kind = f"{self._relationship_namespace}/worksheet"
        prefix = _prefix(root.name)
        new = "".join(
            f'<{prefix}Relationship Id="{identity}" Type="{kind}" Target="/{names[sheet]}"/>'
            for sheet, identity in self._identities(names).items()
        )
        changes = [_inside(data, root, new)]
        targets = {found.identity for found in self.book.relationships if found.target in removed}
        changes += [
            (element.start, element_end(data, element.start, element.close), b"")
            for element in root.children
            if element.attributes.get("Id") in targets
        ]
        changed[part] = spliced(data, changes)

    def _change_content_types(
        self, changed: dict[str, bytes], names: Mapping[str, str], removed: frozenset[str]
    ) -> None:
        part, data, root = self._small_part(_CONTENT_TYPES)
        prefix = _prefix(root.name)
        new = "".join(
            f'<{prefix}Override PartName="/{name}" ContentType="{_WORKSHEET_CONTENT}"/>' for name in names.values()
        )
        changes = [_inside(data, root, new)]
        gone = {f"/{name}".casefold() for name in removed}
        changes += [
            (element.start, element_end(data, element.start, element.close), b"")
            for element in root.children
            if element.attributes.get("PartName", "").casefold() in gone
        ]
        changed[part] = spliced(data, changes)

    def _change_workbook(self, changed: dict[str, bytes], names: Mapping[str, str], *, asked: bool) -> None:
        part, data, root = self._small_part(self.book.part)
        prefix = _prefix(root.name)
        found = {local_name(element.name): element for element in root.children}
        changes: list[tuple[int, int, bytes]] = []
        if names:
            sheets = found.get("sheets")
            if sheets is None:
                raise damaged(part, ValueError("it lists no sheets"))
            changes.append(_inside(data, sheets, self._sheet_tags(sheets, names)))
        if asked:
            if "calcPr" in found:
                start = found["calcPr"].start
                tag = tag_at(data, start)
                changes.append((start, start + len(tag), with_attribute(tag, "fullCalcOnLoad", "1")))
            else:
                before = next(found[name] for name in _BEFORE_CALCULATION if name in found)
                end = element_end(data, before.start, before.close)
                changes.append((end, end, f'<{prefix}calcPr fullCalcOnLoad="1"/>'.encode()))
        changed[part] = spliced(data, changes)

    def _sheet_tags(self, sheets: Element, names: Mapping[str, str]) -> str:
        """Elements of the new sheets, written like those that are there (some readers know only `r:id`)."""
        named = ((sheet, name) for sheet in sheets.children for name in sheet.attributes if name.endswith(":id"))
        like, identity_name = next(named, (None, ""))
        if like is None:
            raise damaged(self.book.part, ValueError("none of its sheets refers to a part"))
        declared = f"xmlns:{identity_name.partition(':')[0]}"
        namespace = f' {declared}="{like.attributes[declared]}"' if declared in like.attributes else ""
        numbers = (sheet.attributes.get("sheetId", "") for sheet in sheets.children)
        first = 1 + max((int(number) for number in numbers if number.isdecimal()), default=0)
        return "".join(
            f'<{like.name}{namespace} name="{escape(sheet)}" sheetId="{first + place}" {identity_name}="{identity}"/>'
            for place, (sheet, identity) in enumerate(self._identities(names).items())
        )

    def _small_part(self, name: str) -> tuple[str, bytes, Element]:
        part = self.book.package.find(name) or name
        data = as_utf8(self.book.package.read(part), part)
        return part, data, elements_of(data, part)


def _sheet_bytes(book: BookPart, values: Mapping[tuple[int, int], Written]) -> bytes:
    """A new worksheet part, in the namespace of the workbook."""
    namespace = book.root.tag.partition("}")[0].lstrip("{")
    assert namespace in MAIN_NAMESPACES  # noqa: S101 - read_book_part refuses any other
    columns = "".join(
        f'<col min="{column + 1}" max="{column + 1}" width="{width}" customWidth="1"/>'
        for column, width in _widths(values).items()
    )
    empty = (
        '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n'
        f'<worksheet xmlns="{namespace}"><sheetFormatPr defaultColWidth="16" defaultRowHeight="15"/>'
        f"{f'<cols>{columns}</cols>' if columns else ''}<sheetData/></worksheet>"
    )
    return patched(scan(empty.encode(), "new sheet"), values)


def _widths(values: Mapping[tuple[int, int], Written]) -> dict[int, int]:
    """Width of each column, in characters, that shows its texts; numbers shorten themselves."""
    widths: dict[int, int] = {}
    for (_, column), value in values.items():
        text = value.value if isinstance(value, Formula) else value
        if isinstance(text, str):
            widths[column] = max(widths.get(column, 12), min(len(text) + 2, 70))
    return dict(sorted(widths.items()))


def _prefix(name: str) -> str:
    prefix, colon, _ = name.rpartition(":")
    return prefix + colon


def _inside(data: bytes, element: Element, new: str) -> tuple[int, int, bytes]:
    """Change that puts markup at the end of an element's content."""
    opening = tag_at(data, element.start)
    if opening.endswith(b"/>"):
        close = f"</{element.name}>".encode()
        return (
            element.start,
            element.start + len(opening),
            opening[:-2].rstrip() + b">" + new.encode() + close,
        )
    return (element.close, element.close, new.encode())
