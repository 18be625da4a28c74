"""Number formats that show a number as a date or a time."""

from __future__ import annotations

import re
from collections.abc import Callable
from datetime import date, datetime, time, timedelta
from xml.etree import ElementTree as ET

from strutbook_addin.xlsx.markup import children

#: Built-in formats of dates and times (ISO/IEC 29500-1, 18.8.30), those of East Asian languages included.
_BUILT_IN = frozenset({*range(14, 23), *range(27, 37), 45, 46, 47, *range(50, 59)})
#: Text in quotes, escaped characters, colours and conditions, which hold letters that mean no date.
_NOT_CODES = re.compile(r'"[^"]*"|\\.|_.|\*.|\[(?!h+\]|m+\]|s+\])[^\]]*\]', re.IGNORECASE)
_CODES = re.compile(r"[dmyhs]", re.IGNORECASE)
#: Hours, minutes or seconds that run on past a day or an hour.
_ELAPSED = re.compile(r"\[(?:h+|m+|s+)\]", re.IGNORECASE)
_ELAPSED_BUILT_IN = 46
_MICROSECOND = timedelta(microseconds=1)

#: What a number is shown as, from the number and whether dates are counted from 1904.
Shown = Callable[[float, bool], "datetime | date | time | timedelta | float"]


def date_styles(root: ET.Element) -> dict[str, Shown]:
    """Cell formats (of a styles part) that show dates or times, by their index as cells write it."""
    shown: dict[int, Shown] = dict.fromkeys(_BUILT_IN, date_of)
    shown[_ELAPSED_BUILT_IN] = duration_of
    for element in children(root, "numFmts", "numFmt"):
        identity, code = int(element.get("numFmtId", "0")), element.get("formatCode", "")
        shown.pop(identity, None)
        if is_date_format(code):
            shown[identity] = duration_of if _ELAPSED.search(code) else date_of
    formats = (int(element.get("numFmtId", "0")) for element in children(root, "cellXfs", "xf"))
    return {str(index): shown[identity] for index, identity in enumerate(formats) if identity in shown}


def is_date_format(code: str) -> bool:
    """Whether a format code shows a date or a time.

    >>> is_date_format("yyyy-mm-dd"), is_date_format('0.00" mm"'), is_date_format("[Red]0.0;General")
    (True, False, False)
    """
    first = _NOT_CODES.sub("", code).partition(";")[0]
    return "general" not in first.casefold() and _CODES.search(first) is not None


def duration_of(number: float, _: bool = False) -> timedelta | float:
    """Duration that a number of days stands for.

    >>> duration_of(1.5)
    datetime.timedelta(days=1, seconds=43200)
    """
    try:
        return timedelta(milliseconds=round(number * 86_400_000))
    except (OverflowError, ValueError):
        return number


def date_of(number: float, from_1904: bool) -> datetime | date | time | float:
    """Date or time that a number stands for; the number itself where there is no such date.

    >>> date_of(45292.0, False), date_of(0.25, False)
    (datetime.date(2024, 1, 1), datetime.time(6, 0))
    """
    start = datetime(1904, 1, 1) if from_1904 else datetime(1899, 12, 30)
    if not from_1904 and 1 <= number < 60:
        # The format counts a 29 February 1900 that never was.
        number += 1
    try:
        moment = start + timedelta(days=number)
    except OverflowError:
        return number
    # A day holds no binary fraction of a second exactly.
    moment = moment + _MICROSECOND * 500 - _MICROSECOND * ((moment.microsecond + 500) % 1000)
    if 0 <= number < 1:
        return moment.time()
    return moment.date() if moment.time() == time(0) else moment
