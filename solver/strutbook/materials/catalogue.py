"""Materials by the name that a user writes."""

from __future__ import annotations

import re
from difflib import get_close_matches
from functools import lru_cache

from strutbook.errors import StrutbookError
from strutbook.materials.material import Material
from strutbook.materials.steel import steels
from strutbook.materials.timber import timbers

#: Toughness and delivery behind a European grade, which change no strength: S355J2H is S355H, S355JR is S355.
_QUALITY = re.compile(r"(s\d{3})(?:jr|j0|j2|k2|n|nl|m|ml)*(?:\+[a-z]+)?(h?)")


class UnknownMaterial(StrutbookError):
    """A name that is no grade or class that is known."""


@lru_cache(maxsize=1)
def materials() -> dict[str, Material]:
    """Every material by its name."""
    return steels() | timbers()


@lru_cache(maxsize=1024)
def material(name: str) -> Material:
    """Material by its name; case, spaces, points and hyphens do not matter.

    Raises
    ------
    UnknownMaterial
        With the nearest known name.

    Examples
    --------
    >>> material("s355 J2").strength(0.020).yield_strength
    345000000.0
    >>> material("a500 grade c").name
    'A500 Gr. C'
    """
    found = _by_spelling().get(_spelled(name))
    if found is None:
        close = get_close_matches(name, list(materials()), n=1, cutoff=0.5)
        question = f" Did you mean {close[0]}?" if close else ""
        raise UnknownMaterial(f"{name!r} is no grade or class that is known.{question}")
    return found


@lru_cache(maxsize=1)
def _by_spelling() -> dict[str, Material]:
    return {_spelled(name): found for name, found in materials().items()}


def _spelled(name: str) -> str:
    plain = re.sub(r"[\s._-]|astm|en(?=10)", "", name.casefold()).replace("grade", "gr")
    quality = _QUALITY.fullmatch(plain)
    return quality[1] + quality[2] if quality else plain
