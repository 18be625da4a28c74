"""Values of cells: from what a part stores, and to the markup that stores them."""

from __future__ import annotations

import math
from datetime import datetime
from html import escape

from strutbook_addin.sheets import CellValue, ErrorValue, Formula, Written, cell_name
from strutbook_addin.xlsx.book_part import BookPart
from strutbook_addin.xlsx.markup import plain_text, text_markup
from strutbook_addin.xlsx.number_formats import date_of
from strutbook_addin.xlsx.sheet_part import Cell

#: Attributes that a cell keeps when its value changes: its format, and whether its phonetic reading shows.
_KEPT = ("s", "ph")


def value_of(cell: Cell, book: BookPart) -> CellValue:
    """Value that a cell shows.

    Raises
    ------
    ValueError, IndexError
        When what it stores is not what its type says.
    """
    text = cell.value
    kind = cell.kind
    if text is None or (not text and kind not in ("str", "inlineStr")):
        return None
    if kind == "n":
        number = float(text)
        if cell.style and cell.style in book.date_styles:
            return date_of(number, book.from_1904)
        return number
    if kind == "s":
        return book.shared_texts[int(text)]
    if kind in ("str", "inlineStr"):
        return plain_text(text)
    if kind == "b":
        return text.strip() in ("1", "true")
    if kind == "e":
        return ErrorValue(text, f"={cell.formula}" if cell.formula else "")
    if kind == "d":
        moment = datetime.fromisoformat(text)
        return moment.date() if "T" not in text else moment
    raise ValueError(f"{kind!r} is no type of a cell")


def markup(row: int, column: int, value: Written, attributes: dict[str, str], prefix: str) -> bytes:
    """The element of a cell that holds a value and keeps its look.

    >>> markup(1, 0, 2.5, {"r": "A2", "s": "3", "t": "s"}, "")
    b'<c r="A2" s="3"><v>2.5</v></c>'
    >>> markup(1, 0, "=no formula", {}, "x:")
    b'<x:c r="A2" t="inlineStr"><x:is><x:t>=no formula</x:t></x:is></x:c>'
    >>> markup(1, 0, float("nan"), {}, "")
    b'<c r="A2"/>'
    """
    kept = "".join(f' {name}="{escape(attributes[name])}"' for name in _KEPT if name in attributes)
    head = f'<{prefix}c r="{cell_name(row, column)}"{kept}'
    close = f"</{prefix}c>"
    if isinstance(value, Formula):
        formula = f"<{prefix}f>{text_markup(value.text.removeprefix('='))}</{prefix}f>"
        if isinstance(value.value, str):
            stored = f"<{prefix}v>{text_markup(value.value)}</{prefix}v>"
            return f'{head} t="str">{formula}{stored}{close}'.encode()
        return f"{head}>{formula}<{prefix}v>{value.value!r}</{prefix}v>{close}".encode()
    if isinstance(value, str):
        space = ' xml:space="preserve"' if value != value.strip() or "\n" in value else ""
        text = f"<{prefix}is><{prefix}t{space}>{text_markup(value)}</{prefix}t></{prefix}is>"
        return f'{head} t="inlineStr">{text}{close}'.encode()
    if value is None or not math.isfinite(value):
        return f"{head}/>".encode()
    return f"{head}><{prefix}v>{value!r}</{prefix}v>{close}".encode()
