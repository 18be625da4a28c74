"""Document types: refused in every part, whether it is read here or only copied.

No spreadsheet program writes one; its entities could exhaust the memory of whoever opens the file next.
"""

from __future__ import annotations

import re
from xml.parsers import expat

from strutbook_addin.xlsx.errors import UnreadableWorkbook

#: A part that begins as nearly all do: the declaration, if any, and then at once the first element.
_BEGINS_AS_USUAL = re.compile(rb"(?:\xef\xbb\xbf)?(?:<\?xml[^<>]*\?>)?\s*<[A-Za-z_]")


class _Told(Exception):
    """The parser has come so far that the answer is known."""


def forbidden_doctype(part: str) -> UnreadableWorkbook:
    """Refusal of a part that declares a document type."""
    return UnreadableWorkbook(
        f"the part {part} declares a document type, which no spreadsheet program writes; the file is not opened."
    )


def declares_doctype(head: bytes) -> bool | None:
    """Whether a part declares a document type, from its first bytes; None where they do not tell.

    >>> declares_doctype(b'<?xml version="1.0"?><!-- remark --><!DOCTYPE a><a/>')
    True
    >>> declares_doctype(b"<a><![CDATA[<!DOCTYPE a>]]></a>")
    False
    """
    if _BEGINS_AS_USUAL.match(head):
        return False
    found: list[str] = []

    def doctype(name: str, *_: object) -> None:
        found.append(name)
        raise _Told

    def element(*_: object) -> None:
        raise _Told

    parser = expat.ParserCreate()
    parser.StartDoctypeDeclHandler = doctype
    parser.StartElementHandler = element
    try:
        parser.Parse(head, False)
    except (_Told, expat.ExpatError, ValueError, LookupError):
        # What is not XML declares nothing; where it is read, it is refused as damaged.
        return bool(found)
    return None
