"""The part of texts that cells refer to by number."""

from __future__ import annotations

from xml.parsers import expat

from strutbook_addin.xlsx.doctypes import forbidden_doctype
from strutbook_addin.xlsx.errors import UnreadableWorkbook
from strutbook_addin.xlsx.markup import as_utf8, damaged, local_name, plain_text

#: Most texts that are kept: as many as the cells that could show them.
TEXTS_LIMIT = 5_000_000


def shared_texts(data: bytes, part: str) -> list[str]:
    """Texts of the part, their runs one after the other, without looks and phonetic readings.

    The part may be large, so no tree of it is made.

    Raises
    ------
    UnreadableWorkbook
        When it is not XML, declares a document type, or holds too many texts.
    """
    texts: list[str] = []
    pieces: list[str] = []
    phonetic = False
    parser = expat.ParserCreate("utf-8")
    parser.buffer_text = True

    def start(name: str, _: dict[str, str]) -> None:
        nonlocal phonetic
        name = local_name(name)
        if name == "t" and not phonetic:
            parser.CharacterDataHandler = pieces.append
        elif name == "rPh":
            phonetic = True

    def end(name: str) -> None:
        nonlocal phonetic
        name = local_name(name)
        if name == "t":
            parser.CharacterDataHandler = None
        elif name == "rPh":
            phonetic = False
        elif name == "si":
            if len(texts) == TEXTS_LIMIT:
                raise UnreadableWorkbook(f"the part {part} holds more than {TEXTS_LIMIT:,} texts.")
            texts.append(plain_text("".join(pieces)))
            pieces.clear()

    def refuse_doctype(*_: object) -> None:
        raise forbidden_doctype(part)

    parser.StartElementHandler = start
    parser.EndElementHandler = end
    parser.StartDoctypeDeclHandler = refuse_doctype
    try:
        parser.Parse(as_utf8(data, part), True)
    except expat.ExpatError as error:
        raise damaged(part, error) from error
    return texts
