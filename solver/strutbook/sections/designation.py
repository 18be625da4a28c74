"""Sections by their designation, read forgivingly: case, spaces, `x` or `×`, fractions."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass
from difflib import get_close_matches
from fractions import Fraction
from functools import lru_cache
from math import pi, sqrt

from strutbook.sections import sizes
from strutbook.sections.angles import angle, double_angle, with_table_values
from strutbook.sections.hollow import circular, rectangular, us_circular, us_rectangular
from strutbook.sections.rolled import channel, i_section, tee
from strutbook.sections.section import Product, Section, UnknownSection
from strutbook.sections.solid import flat, round_bar, timber

INCH = 0.0254
_MM = 1e-3
#: Angles and HSS with every size below this are in inches, others in mm.
_LARGEST_INCHES = 20.0

_NUMBER = r"\d+(?:\.\d+)?(?:[- ]\d+/\d+)?|\d+/\d+|\.\d+"
_SIZES = rf"(?P<sizes>(?:{_NUMBER})(?: ?x ?(?:{_NUMBER})){{0,2}})"
_FORM = re.compile(rf"(?P<family>2?[a-z]+) ?{_SIZES}(?: (?P<rest>.*))?")
_TABLED = re.compile(r"(?P<family>ipe|hea|heb|upe) ?(?P<size>\d+)|he ?(?P<he>\d+) ?(?P<kind>[ab])")
_GAP = re.compile(rf"(?:(?P<legs>llbb|slbb) ?)?(?:gap ?(?P<gap>{_NUMBER}))?")
_PIPE = re.compile(rf"pipe ?(?P<size>{_NUMBER}) ?(?P<weight>std|xs|xxs)?")
_W = re.compile(r"(?P<kind>wt?) ?(?P<depth>\d+(?:\.\d+)?) ?x ?(?P<weight>\d+(?:\.\d+)?)")
_COLD = re.compile(r"(?:cf|cold(?: formed)?)")


@lru_cache(maxsize=4096)
def section(designation: str, product: Product | None = None) -> Section:
    """Section of a designation.

    Metric: `CHS 88.9x4`, `SHS 80x80x5` (or `SHS 80x5`), `RHS 120x80x6` (hot finished; `CF` behind it: cold formed),
    `L 60x60x6` (or `L 60x6`), `2L 60x60x6 gap 8`, `2L 100x75x8 SLBB gap 10`, `IPE 200`, `HEA 160`, `HE 160 B`,
    `UPE 160`, `FL 80x10`, `RD 20`, `TIM 75x200`, `GL 140x360`. In inches: `HSS 4x4x1/4`, `HSS 6.625x0.280`,
    `Pipe 4 STD`, `L 4x4x1/2`, `2L 4x3x3/8 LLBB gap 3/8`, `W 8x31`, `WT 4x15.5`. Angles whose sizes are all below 20
    are in inches.

    Parameters
    ----------
    designation : str
        As above; case and spaces do not matter.
    product : Product, optional
        How a hollow section is made, where the designation does not say.

    Raises
    ------
    UnknownSection
        With the nearest known designation, or what is wrong with the dimensions.

    Examples
    --------
    >>> round(section("shs 100 X 100 x 5").area * 1e4, 1)
    18.7
    >>> round(section("HSS6x6x1/4").area / INCH**2, 2)
    5.24
    """
    spelled = " ".join(designation.casefold().replace("×", "x").replace("*", "x").replace(",", ".").split())
    tabled = _tabled(designation, spelled)
    if tabled is not None:
        return tabled
    form = _FORM.fullmatch(spelled)
    reader = _READERS.get(form["family"]) if form else None
    if form is None or reader is None:
        raise UnknownSection(f"{designation!r} is no designation that is known.{_nearest(spelled)}")
    rest = form["rest"] or ""
    if rest and form["family"] not in _WITH_MORE:
        raise UnknownSection(f"what stands behind the sizes of {designation!r} is not known.")
    numbers = [_number(size) for size in re.split(r" ?x ?", form["sizes"])]
    return reader(_Spelled(designation, numbers, rest, product))


@lru_cache(maxsize=1)
def families() -> dict[str, tuple[str, ...]]:
    """Preferred sizes of every family as designations, the lightest first."""
    listed = {
        "CHS": [f"CHS {size}" for size in sizes.CHS],
        "SHS": [f"SHS {size}" for size in sizes.SHS],
        "RHS": [f"RHS {size}" for size in sizes.RHS],
        "L": [f"L {size}" for size in sizes.ANGLES],
        "2L": [f"2L {size} gap 10" for size in sizes.ANGLES],
        "IPE": [name for name in sizes.I_SECTIONS if name.startswith("IPE")],
        "HEA": [name for name in sizes.I_SECTIONS if name.startswith("HEA")],
        "HEB": [name for name in sizes.I_SECTIONS if name.startswith("HEB")],
        "UPE": list(sizes.CHANNELS),
        "HSS": [f"HSS {size}" for size in sizes.HSS],
        "Pipe": [f"Pipe {size} {weight}" for size, (_, walls) in sizes.PIPES.items() for weight in walls],
    }
    return {family: tuple(sorted(names, key=lambda name: section(name).area)) for family, names in listed.items()}


def _tabled(designation: str, spelled: str) -> Section | None:
    """A section of which the table gives the dimensions."""
    if found := _TABLED.fullmatch(spelled):
        name = f"HE{found['kind']} {found['he']}" if found["he"] else f"{found['family']} {found['size']}"
        name = name.upper()
        if name in sizes.I_SECTIONS:
            return i_section(designation, *(size * _MM for size in sizes.I_SECTIONS[name]))
        if name in sizes.CHANNELS:
            return channel(designation, *(size * _MM for size in sizes.CHANNELS[name]))
    if found := _PIPE.fullmatch(spelled):
        size, weight = found["size"].replace(" ", "-"), (found["weight"] or "std").upper()
        if size in sizes.PIPES and weight in sizes.PIPES[size][1]:
            diameter, walls = sizes.PIPES[size]
            return us_circular(designation, diameter * INCH, walls[weight] * INCH)
    if found := _W.fullmatch(spelled):
        halves = 2 if found["kind"] == "wt" else 1
        name = f"W{float(found['depth']) * halves:g}X{float(found['weight']) * halves:g}"
        if name in sizes.W_SHAPES:
            depth, width, web, flange, area = sizes.W_SHAPES[name]
            sharp = 2 * width * flange + (depth - 2 * flange) * web
            radius = sqrt(max(area - sharp, 0.0) / (4 - pi))
            lengths = [size * INCH for size in (depth / halves, width, web, flange, radius)]
            return tee(designation, *lengths) if halves == 2 else i_section(designation, *lengths)
    return None


def _nearest(spelled: str) -> str:
    known = {name.casefold(): name for names in families().values() for name in names}
    close = get_close_matches(spelled, known, n=1, cutoff=0.6)
    return f" Did you mean {known[close[0]]}?" if close else ""


def _number(text: str) -> float:
    """Number with a fraction: `1/4`, `1-1/2`, `3 1/2`, `0.25`."""
    return float(sum(Fraction(part) for part in re.split(r"[- ]", text)))


@dataclass(frozen=True)
class _Spelled:
    """A designation taken apart."""

    name: str
    numbers: list[float]
    rest: str  #: what stands behind the sizes
    product: Product | None

    def expect(self, counts: tuple[int, ...], form: str) -> None:
        """Refuse another number of sizes."""
        if len(self.numbers) not in counts:
            raise UnknownSection(f"{self.name!r} has {len(self.numbers)} sizes; expected the form {form}.")

    def lengths(self, unit: float = _MM) -> list[float]:
        """Sizes in m."""
        return [number * unit for number in self.numbers]

    @property
    def made(self) -> Product:
        """How a hollow section is made."""
        if _COLD.fullmatch(self.rest):
            return Product.COLD_FORMED
        if self.rest:
            raise UnknownSection(f"what stands behind the sizes of {self.name!r} is not known; CF means cold formed.")
        return self.product or Product.HOT_FINISHED


def _chs(spelled: _Spelled) -> Section:
    spelled.expect((2,), "CHS 88.9x4")
    diameter, wall = spelled.lengths()
    return circular(spelled.name, diameter, wall, spelled.made)


def _rhs(spelled: _Spelled) -> Section:
    spelled.expect((2, 3), "SHS 80x80x5")
    depth, width, wall = spelled.lengths()[0], spelled.lengths()[-2], spelled.lengths()[-1]
    return rectangular(spelled.name, depth, width, wall, spelled.made)


def _hss(spelled: _Spelled) -> Section:
    spelled.expect((2, 3), "HSS 4x4x1/4 or HSS 6.625x0.280")
    inches = spelled.lengths(INCH)
    return us_circular(spelled.name, *inches) if len(inches) == 2 else us_rectangular(spelled.name, *inches)


def _angle(spelled: _Spelled) -> Section:
    spelled.expect((2, 3), "L 60x60x6")
    numbers = spelled.numbers
    leg, short_leg, thickness = max(numbers[0], numbers[-2]), min(numbers[0], numbers[-2]), numbers[-1]
    if max(numbers) < _LARGEST_INCHES:
        # The Manual's areas have sharp corners; its smallest radii do not follow from the outline.
        single = angle(spelled.name, leg * INCH, short_leg * INCH, thickness * INCH, 0.0)
        if tabled := sizes.US_ANGLES.get((leg, short_leg, thickness)):
            return with_table_values(single, tabled[0] * INCH**2, tabled[1] * INCH**4, tabled[2] * INCH)
        if uneven := sizes.US_UNEQUAL_ANGLES.get((leg, short_leg, thickness)):
            return single.with_smallest_radius(uneven[1] * INCH)
        return single
    radius = sizes.ROOT_RADII.get((round(leg), round(short_leg)))
    if radius is None:
        # Between the sizes of the standard the radius grows about with the legs.
        radius = min(4.0 + 0.08 * short_leg, short_leg / 4)
    return angle(spelled.name, leg * _MM, short_leg * _MM, thickness * _MM, radius * _MM)


def _double_angle(spelled: _Spelled) -> Section:
    behind = _GAP.fullmatch(spelled.rest)
    if behind is None:
        raise UnknownSection(
            f"what stands behind the sizes of {spelled.name!r} is not known; expected gap 10, LLBB or SLBB."
        )
    unit = INCH if max(spelled.numbers) < _LARGEST_INCHES else _MM
    gap = _number(behind["gap"]) * unit if behind["gap"] else 0.0
    return double_angle(spelled.name, _angle(spelled), gap, short_legs_together=behind["legs"] == "slbb")


def _flat(spelled: _Spelled) -> Section:
    spelled.expect((2,), "FL 80x10")
    return flat(spelled.name, max(spelled.lengths()), min(spelled.lengths()))


def _round(spelled: _Spelled) -> Section:
    spelled.expect((1,), "RD 20")
    return round_bar(spelled.name, *spelled.lengths())


def _timber(spelled: _Spelled) -> Section:
    spelled.expect((2,), "TIM 75x200")
    width, depth = spelled.lengths()
    return timber(spelled.name, width, depth, Product.SAWN)


def _glued(spelled: _Spelled) -> Section:
    spelled.expect((2,), "GL 140x360")
    width, depth = spelled.lengths()
    return timber(spelled.name, width, depth, Product.GLUED_LAMINATED)


_READERS: dict[str, Callable[[_Spelled], Section]] = {
    "chs": _chs,
    "shs": _rhs,
    "rhs": _rhs,
    "hss": _hss,
    "l": _angle,
    "2l": _double_angle,
    "fl": _flat,
    "pl": _flat,
    "rd": _round,
    "tim": _timber,
    "gl": _glued,
}
#: Families behind whose sizes something may stand.
_WITH_MORE = frozenset({"chs", "shs", "rhs", "2l"})
