"""Combinations to ASCE/SEI 7, chapter 2, editions of 2016 and 2022; from memory unless a test names its source.

Imposed loads stand for L of floors. Snow is a strength-level load since 2022: it must come from the same edition.
"""

from __future__ import annotations

from dataclasses import dataclass

from strutbook.combinations.generated import ACCIDENTAL, PERMANENT, Generated, by_nature, choices, distinct


@dataclass(frozen=True)
class _Term:
    """One basic combination: factors by nature, and on dead loads."""

    rule: str
    dead: float
    factors: dict[str, float]


def _lrfd(snow: float, accompanying_snow: float) -> tuple[_Term, ...]:
    """2.3.1, combinations 1 to 5; temperature is a self-straining force (2.3.4) with 1.0 beside the leading load."""
    return (
        _Term("1", 1.4, {}),
        _Term("2", 1.2, {"imposed": 1.6, "moving": 1.6, "snow": accompanying_snow, "temperature": 1.0}),
        _Term("3a", 1.2, {"snow": snow, "imposed": 1.0, "moving": 1.0, "temperature": 1.0}),
        _Term("3b", 1.2, {"snow": snow, "wind": 0.5, "temperature": 1.0}),
        _Term("4", 1.2, {"wind": 1.0, "imposed": 1.0, "moving": 1.0, "snow": accompanying_snow, "temperature": 1.0}),
        _Term("5", 0.9, {"wind": 1.0}),
    )


def _asd(snow: float) -> tuple[_Term, ...]:
    """2.4.1, combinations 1 to 7."""
    return (
        _Term("1", 1.0, {}),
        _Term("2", 1.0, {"imposed": 1.0, "moving": 1.0, "temperature": 1.0}),
        _Term("3", 1.0, {"snow": snow, "temperature": 1.0}),
        _Term("4", 1.0, {"imposed": 0.75, "moving": 0.75, "snow": 0.75 * snow, "temperature": 0.75}),
        _Term("5", 1.0, {"wind": 0.6}),
        _Term("6", 1.0, {"imposed": 0.75, "moving": 0.75, "wind": 0.45, "snow": 0.75 * snow, "temperature": 0.75}),
        _Term("7", 0.6, {"wind": 0.6}),
    )


#: Factors of snow leading and accompanying: 1.6 S and 0.5 S to 2016, 1.0 S and 0.3 S since 2022; in ASD 1.0 and 0.7.
_EDITIONS = {
    2016: (_lrfd(1.6, 0.5), _asd(1.0)),
    2022: (_lrfd(1.0, 0.3), _asd(0.7)),
}


def strength_design(natures: dict[str, str], edition: int = 2022) -> list[Generated]:
    """2.3.1, and service with full loads and with 0.5 L as appendix C suggests."""
    return _made(natures, _EDITIONS[edition][0], f"ASCE 7-{edition % 100} 2.3.1") + _service(natures)


def allowable_stress_design(natures: dict[str, str], edition: int = 2022) -> list[Generated]:
    """2.4.1, and service as for strength design."""
    return _made(natures, _EDITIONS[edition][1], f"ASCE 7-{edition % 100} 2.4.1") + _service(natures)


def _made(natures: dict[str, str], terms: tuple[_Term, ...], rule: str) -> list[Generated]:
    cases = by_nature(natures)
    found: list[Generated] = []
    for term in terms:
        for way in [{}, *choices(cases)]:
            variable = {case: term.factors.get(nature, 0.0) for nature, case in way.items()}
            # A load that a combination leaves out belongs to another one.
            if len(variable) != len([factor for factor in variable.values() if factor]):
                continue
            words = " + ".join(way.values()) or "dead"
            factors = {**_dead(cases, term.dead), **variable}
            found.append(Generated(f"{term.rule} {words}", "strength", factors, f"{rule} ({term.rule})"))
    for case in cases.get(ACCIDENTAL, []):
        # 2.5.2.1 with the dead load once against and once for the structure.
        for dead in (0.9, 1.2):
            factors = {**_dead(cases, dead), case: 1.0}
            found.append(Generated(f"2.5 {dead:g} D + {case}", "strength", factors, "ASCE 7 2.5.2.1"))
    return distinct(found)


def _service(natures: dict[str, str]) -> list[Generated]:
    """Commentary to appendix C: dead loads with one variable load, and with half of the imposed load."""
    cases = by_nature(natures)
    found = [Generated("service dead", "service", _dead(cases, 1.0), "ASCE 7 appendix C")]
    for nature in ("imposed", "moving", "snow", "wind", "temperature"):
        for case in cases.get(nature, []):
            factor = 0.5 if nature == "snow" else 1.0
            factors = {**_dead(cases, 1.0), case: factor}
            found.append(Generated(f"service {case}", "service", factors, "ASCE 7 appendix C"))
    return distinct(found)


def _dead(cases: dict[str, list[str]], factor: float) -> dict[str, float]:
    return {case: factor for nature in PERMANENT for case in cases.get(nature, [])}
