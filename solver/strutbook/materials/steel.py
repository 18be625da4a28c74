"""Structural steels: EN 1993-1-1 and the product standards behind it, and ASTM grades; from memory of the tables."""

from __future__ import annotations

from strutbook.materials.material import Material, StrengthStep, Substance

_MPA = 1e6
_KSI = 6.894757293168361e6
#: Pa, kg/m³ and 1/K: EN 1993-1-1, 3.2.6; EN 1991-1-1, table A.4.
_EUROPE = (210e9, 7850.0, 12e-6)
#: The same: AISC 360, list of symbols (E = 29 000 ksi); AISC Manual, part 17 (490 lb/ft3, 6.5e-6 a degree Fahrenheit).
_AMERICA = (29_000 * _KSI, 7849.0, 11.7e-6)

#: Yield strength by thickness up to so many mm, MPa (EN 10025-2 table 7), and ultimate strength to 3 and 100 mm.
_EN_10025 = {
    "S235": ((16, 235), (40, 225), (63, 215), (80, 215), (100, 215)),
    "S275": ((16, 275), (40, 265), (63, 255), (80, 245), (100, 235)),
    "S355": ((16, 355), (40, 345), (63, 335), (80, 325), (100, 315)),
    "S450": ((16, 450), (40, 430), (63, 410), (80, 390), (100, 380)),
}
#: The lower bound of the tensile strength from 3 to 100 mm.
_EN_10025_ULTIMATE = {"S235": 360, "S275": 410, "S355": 470, "S450": 550}

#: EN 10210-1 and EN 10219-1, hollow sections: yield by thickness, and ultimate, MPa.
_HOLLOW = {
    "S235H": (((16, 235), (40, 225)), 360),
    "S275H": (((16, 275), (40, 265)), 410),
    "S355H": (((16, 355), (40, 345)), 470),
    "S420H": (((16, 420), (40, 400)), 520),
    "S460H": (((16, 460), (40, 440)), 540),
}

#: ASTM grades: yield and ultimate strength, ksi (AISC Manual tables 2-4 and 2-5).
_ASTM = {
    "A36": (36, 58),
    "A572 Gr. 42": (42, 60),
    "A572 Gr. 50": (50, 65),
    "A572 Gr. 55": (55, 70),
    "A572 Gr. 60": (60, 75),
    "A572 Gr. 65": (65, 80),
    "A992": (50, 65),
    "A53 Gr. B": (35, 60),
    "A500 Gr. B round": (42, 58),
    "A500 Gr. B": (46, 58),
    "A500 Gr. C round": (46, 62),
    "A500 Gr. C": (50, 62),
    "A1085": (50, 65),
}


def steels() -> dict[str, Material]:
    """Every steel by its name."""
    found = {name: _european(name, "EN 10025-2", steps, _EN_10025_ULTIMATE[name]) for name, steps in _EN_10025.items()}
    for name, (steps, ultimate) in _HOLLOW.items():
        found[name] = _european(name, "EN 10210-1 and EN 10219-1", steps, ultimate)
    for name, (tensile, ultimate) in _ASTM.items():
        step = StrengthStep(float("inf"), tensile * _KSI, ultimate * _KSI)
        found[name] = Material(name, Substance.STEEL, f"ASTM {name.split()[0]}", *_AMERICA, strengths=(step,))
    return found


def _european(name: str, source: str, steps: tuple[tuple[int, int], ...], ultimate: int) -> Material:
    strengths = tuple(StrengthStep(most * 1e-3, tensile * _MPA, ultimate * _MPA) for most, tensile in steps)
    return Material(name, Substance.STEEL, source, *_EUROPE, strengths=strengths)
