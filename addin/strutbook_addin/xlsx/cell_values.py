"""Values of cells: from what a part stores, and to the markup that stores them."""

from __future__ import annotations

import math
from datetime import date, datetime, time
from html import escape

from strutbook_addin.sheets import CellValue, ErrorValue, Formula, Written, cell_name
from strutbook_addin.xlsx.book_part import BookPart
from strutbook_addin.xlsx.markup import damaged, plain_text, text_markup
from strutbook_addin.xlsx.sheet_part import TEXT_LIMIT, Cell, SheetPart


def stored_values(part: SheetPart, book: BookPart) -> dict[tuple[int, int], CellValue]:
    """Values of the cells of a sheet that hold any, in their order.

    Raises
    ------
    UnreadableWorkbook
        When a cell stores what is not of its type.
    """
    values: dict[tuple[int, int], CellValue] = {}
    place = (0, 0)
    try:
        for place, cell in part.cells.items():
            if cell.value is not None:
                value = value_of(cell, book)
                if value is not None:
                    values[place] = value
    except (ValueError, IndexError) as error:
        raise damaged(f"{part.name}, cell {cell_name(*place)},", error) from error
    return values


def value_of(cell: Cell, book: BookPart) -> CellValue:
    """Value that a cell shows.

    Raises
    ------
    ValueError, IndexError
        When what it stores is not what its type says.
    """
    text = cell.value
    if text is None:
        return None
    kind = cell.kind
    if kind == "n":
        if not text:
            return None
        number = float(text)
        if cell.style and (shown := book.date_styles.get(cell.style)):
            return shown(number, book.from_1904)
        # A number too large for a float is no number that could be calculated with.
        return number if math.isfinite(number) else ErrorValue(text)
    if kind in ("str", "inlineStr"):
        return plain_text(text)
    if not text:
        return None
    if kind == "s":
        return book.shared_texts[_index(text)]
    if kind == "b":
        return text.strip() in ("1", "true")
    if kind == "e":
        return ErrorValue(text, f"={cell.formula}" if cell.formula else "")
    if kind == "d":
        return _iso_moment(text.strip())
    raise ValueError(f"{kind!r} is no type of a cell")


def _index(text: str) -> int:
    index = int(text)
    if index < 0:
        raise ValueError(f"there is no shared text {text}")
    return index


def _iso_moment(text: str) -> datetime | date | time:
    if "-" not in text:
        return time.fromisoformat(text.removeprefix("T"))
    moment = datetime.fromisoformat(text)
    return moment.replace(tzinfo=None) if "T" in text else moment.date()


def markup(row: int, column: int, value: Written, style: str, prefix: str) -> bytes:
    """The element of a cell that holds a value and keeps its look.

    What else the old element carried (metadata, a phonetic reading) belonged to the old value.

    >>> markup(1, 0, 2.5, "3", "")
    b'<c r="A2" s="3"><v>2.5</v></c>'
    >>> markup(1, 0, "=no formula", "", "x:")
    b'<x:c r="A2" t="inlineStr"><x:is><x:t>=no formula</x:t></x:is></x:c>'
    >>> markup(1, 0, float("nan"), "", "")
    b'<c r="A2"/>'
    """
    look = f' s="{escape(style)}"' if style else ""
    head = f'<{prefix}c r="{cell_name(row, column)}"{look}'
    close = f"</{prefix}c>"
    if isinstance(value, Formula):
        formula = f"<{prefix}f>{text_markup(value.text.removeprefix('='))}</{prefix}f>"
        if isinstance(value.value, str):
            stored = f"<{prefix}v>{text_markup(value.value)}</{prefix}v>"
            return f'{head} t="str">{formula}{stored}{close}'.encode()
        number = number_text(value.value)
        stored = f"<{prefix}v>{number}</{prefix}v>" if number else ""
        return f"{head}>{formula}{stored}{close}".encode()
    if isinstance(value, str):
        value = value[:TEXT_LIMIT]
        space = ' xml:space="preserve"' if value != value.strip() or "\n" in value else ""
        text = f"<{prefix}is><{prefix}t{space}>{text_markup(value)}</{prefix}t></{prefix}is>"
        return f'{head} t="inlineStr">{text}{close}'.encode()
    number = "" if value is None else number_text(value)
    if not number:
        return f"{head}/>".encode()
    return f"{head}><{prefix}v>{number}</{prefix}v>{close}".encode()


def number_text(number: float) -> str:
    """A number as a cell stores it; nothing for what the format cannot hold.

    >>> number_text(0.1), number_text(3), number_text(float("inf"))
    ('0.1', '3', '')
    """
    if not math.isfinite(number):
        return ""
    # Numbers of numpy are floats too, with a `repr` of their own.
    return repr(number) if type(number) is int else repr(float(number))
