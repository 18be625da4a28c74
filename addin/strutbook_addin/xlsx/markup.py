"""XML of package parts: parsed without entities, and changed at places given by byte offsets."""

from __future__ import annotations

import codecs
import re
from collections.abc import Iterable
from html import escape
from xml.etree import ElementTree as ET

from strutbook_addin.xlsx.doctypes import forbidden_doctype
from strutbook_addin.xlsx.errors import UnreadableWorkbook

#: Namespaces of spreadsheet parts: transitional and strict (ISO/IEC 29500).
MAIN_NAMESPACES = (
    "http://schemas.openxmlformats.org/spreadsheetml/2006/main",
    "http://purl.oclc.org/ooxml/spreadsheetml/main",
)
RELATIONSHIP_NAMESPACES = (
    "http://schemas.openxmlformats.org/officeDocument/2006/relationships",
    "http://purl.oclc.org/ooxml/officeDocument/relationships",
)

#: Largest part of which a tree is made.
TREE_LIMIT = 32 << 20

_DECLARED_ENCODING = re.compile(rb"""^<\?xml[^>]*?encoding\s*=\s*["']([A-Za-z0-9._-]+)["'][^>]*\?>""")
#: How a part in UTF-16 begins, with a byte order mark or without.
_UTF_16 = (
    (codecs.BOM_UTF16_LE, "utf-16"),
    (codecs.BOM_UTF16_BE, "utf-16"),
    (b"<\0", "utf-16-le"),
    (b"\0<", "utf-16-be"),
)
#: A start tag or an empty element; `>` may stand inside an attribute's value.
_TAG = re.compile(rb"""<[^\s/>]+(?:[^>"']|"[^"]*"|'[^']*')*>""")
#: One attribute of a tag; found one after the other, so that none is looked for inside a value.
_ATTRIBUTE = re.compile(rb"""\s+([^\s=<>"']+)\s*=\s*(?:"[^"]*"|'[^']*')""")
#: What XML 1.0 cannot hold, and text that reads like the escape for it.
_TO_ESCAPE = re.compile(r"[\x00-\x08\x0b\x0c\x0e-\x1f\ud800-\udfff\ufffe\uffff]|\r|_(?=x[0-9A-Fa-f]{4}_)")
_SURROGATES = re.compile(r"[\ud800-\udfff]")
_ESCAPED = re.compile(r"_x([0-9A-Fa-f]{4})_")


class _NoDoctype(ET.TreeBuilder):
    """Builder of small trees; a document type is refused before any entity of it is read."""

    part = ""

    def doctype(self, *_: str | None) -> None:
        """Refuse the document type."""
        raise forbidden_doctype(self.part)


def parse(data: bytes, part: str) -> ET.Element:
    """Tree of a small part.

    Raises
    ------
    UnreadableWorkbook
        When it is not XML, declares a document type, or is too large to be one of these parts.
    """
    check_small(data, part)
    builder = _NoDoctype()
    builder.part = part
    parser = ET.XMLParser(target=builder)  # noqa: S314 - the builder refuses every document type
    try:
        parser.feed(data)
        root: ET.Element = parser.close()
    except (ET.ParseError, LookupError, ValueError) as error:
        # The latter two say that the declared encoding is unknown, or is none for XML.
        raise damaged(part, error) from error
    return root


def check_small(data: bytes, part: str) -> None:
    """Refuse a part of which a tree would fill the memory; parts that describe the workbook are small."""
    if len(data) > TREE_LIMIT:
        raise UnreadableWorkbook(
            f"the part {part} holds {len(data):,} bytes; at most {TREE_LIMIT:,} are read of a part of its kind."
        )


def damaged(part: str, error: Exception) -> UnreadableWorkbook:
    """Refusal of a part that is not XML."""
    return UnreadableWorkbook(
        f"the part {part} is damaged ({error}). Open the workbook in your spreadsheet program, "
        "let it repair the file, and save it again."
    )


def local_name(tag: str) -> str:
    """Name of an element without its namespace.

    >>> local_name("{urn:x}sheet"), local_name("x:sheet")
    ('sheet', 'sheet')
    """
    return tag.rpartition("}")[2].rpartition(":")[2]


def children(root: ET.Element, *path: str) -> Iterable[ET.Element]:
    """Elements found along a path of local names, whatever their namespace."""
    level = [root]
    for name in path:
        level = [child for element in level for child in element if local_name(child.tag) == name]
    return level


def attribute(element: ET.Element, name: str) -> str:
    """Attribute by its local name, or an empty text."""
    for key, value in element.attrib.items():
        if local_name(key) == name:
            return value
    return ""


def as_utf8(data: bytes, part: str) -> bytes:
    """The same part in UTF-8, in which byte offsets can be trusted; UTF-8 itself comes back as it is."""
    encoding = next((name for mark, name in _UTF_16 if data.startswith(mark)), "")
    if not encoding:
        declared = _DECLARED_ENCODING.match(data)
        encoding = declared.group(1).decode("ascii") if declared else "utf-8"
    if encoding.casefold() in ("utf-8", "us-ascii", "ascii"):
        return data
    try:
        text = data.decode(encoding)
    except (LookupError, UnicodeDecodeError) as error:
        raise damaged(part, error) from error
    return re.sub(r"^(<\?xml[^>]*?)\s+encoding\s*=\s*[\"'][^\"']*[\"']", r"\1", text).encode()


def tag_at(data: bytes, start: int) -> bytes:
    """The start tag (or empty element) that begins at a byte."""
    found = _TAG.match(data, start)
    if found is None:
        raise ValueError(f"no tag at byte {start}")
    return found.group()


def element_end(data: bytes, start: int, close: int) -> int:
    """Byte after an element, from the bytes where its tag and its end tag begin.

    For an empty element the parser reports an end tag where the next thing begins; only its tag counts.
    """
    opening = tag_at(data, start)
    return start + len(opening) if opening.endswith(b"/>") else data.index(b">", close) + 1


def with_attribute(tag: bytes, name: str, value: str | None) -> bytes:
    """A start tag with an attribute set, or without it where the value is None.

    >>> with_attribute(b'<row r="3" spans="1:2"/>', "spans", "1:4")
    b'<row r="3" spans="1:4"/>'
    >>> with_attribute(b"<calcPr/>", "fullCalcOnLoad", "1")
    b'<calcPr fullCalcOnLoad="1"/>'
    >>> with_attribute(b'<c r="A1" t="e">', "t", None)
    b'<c r="A1">'
    """
    new = b"" if value is None else f' {name}="{value}"'.encode()
    for found in _ATTRIBUTE.finditer(tag):
        if found.group(1) == name.encode():
            return tag[: found.start()] + new + tag[found.end() :]
    end = -2 if tag.endswith(b"/>") else -1
    return tag[:end].rstrip() + new + tag[end:] if new else tag


def spliced(data: bytes, changes: Iterable[tuple[int, int, bytes]]) -> bytes:
    """Bytes with stretches replaced: (start, end, new), in any order, none overlapping.

    >>> spliced(b"abcdef", [(4, 5, b"E"), (1, 3, b"-")])
    b'a-dEf'
    """
    pieces: list[bytes] = []
    position = 0
    for start, end, new in sorted(changes, key=lambda change: change[:2]):
        pieces += (data[position:start], new)
        position = end
    pieces.append(data[position:])
    return b"".join(pieces)


def text_markup(text: str) -> str:
    r"""Text of a cell as markup; characters that XML cannot hold are escaped as the format has it.

    >>> text_markup("a < b"), text_markup("bell \x07"), text_markup("_x0041_")
    ('a &lt; b', 'bell _x0007_', '_x005F_x0041_')
    """
    return escape(_TO_ESCAPE.sub(lambda found: f"_x{ord(found.group()):04X}_", text), quote=False)


def plain_text(text: str) -> str:
    r"""Text of a cell as the user sees it.

    >>> plain_text("two_x000D_lines"), plain_text("_x005F_x0041_")
    ('two\rlines', '_x0041_')
    """
    if "_x" not in text:
        return text
    text = _ESCAPED.sub(lambda found: chr(int(found.group(1), 16)), text)
    if _SURROGATES.search(text):
        # Halves of a character that were escaped one by one; a half without its other one is none.
        return text.encode("utf-16-le", "surrogatepass").decode("utf-16-le", "replace")
    return text
