"""Combinations to EN 1990:2002, annex A1 (buildings), recommended values; from memory unless a test names a source."""

from __future__ import annotations

from dataclasses import dataclass, field

from strutbook.combinations.generated import ACCIDENTAL, PERMANENT, Generated, by_nature, choices, distinct

#: Table A1.1: psi_0, psi_1 and psi_2 by nature. Imposed: category A to D has 0.7, 0.5, 0.3 for A and B; snow: up to
#: 1000 m above the sea. Moving loads are taken as category F.
PSI = {
    "imposed": (0.7, 0.5, 0.3),
    "moving": (0.7, 0.7, 0.6),
    "snow": (0.5, 0.2, 0.0),
    "wind": (0.6, 0.2, 0.0),
    "temperature": (0.6, 0.5, 0.0),
}
#: Table A1.1: imposed loads by category.
IMPOSED = {
    "A": (0.7, 0.5, 0.3),
    "B": (0.7, 0.5, 0.3),
    "C": (0.7, 0.7, 0.6),
    "D": (0.7, 0.7, 0.6),
    "E": (1.0, 0.9, 0.8),
    "F": (0.7, 0.7, 0.6),
    "G": (0.7, 0.5, 0.3),
    "H": (0.0, 0.0, 0.0),
}
#: Table A1.1: snow above 1000 m, and in Finland, Iceland, Norway and Sweden.
SNOW_HIGH = (0.7, 0.5, 0.2)


@dataclass(frozen=True)
class Factors:
    """Table A1.2(B), recommended values; national ones go in their place."""

    permanent_unfavourable: float = 1.35
    permanent_favourable: float = 1.00
    variable: float = 1.50
    #: reduction of permanent actions in 6.10b
    xi: float = 0.85
    psi: dict[str, tuple[float, float, float]] = field(default_factory=lambda: dict(PSI))


def expression_6_10(natures: dict[str, str], factors: Factors | None = None) -> list[Generated]:
    """Strength by 6.10, and service by 6.14 to 6.16.

    Every variable action leads in turn; permanent actions once unfavourable and once favourable.
    """
    values = factors or Factors()
    return _strength(natures, values, pair=False) + _service(natures, values)


def expressions_6_10_a_and_b(natures: dict[str, str], factors: Factors | None = None) -> list[Generated]:
    """Strength by the pair 6.10a and 6.10b, of which the less favourable holds, and service by 6.14 to 6.16."""
    values = factors or Factors()
    return _strength(natures, values, pair=True) + _service(natures, values)


def _strength(natures: dict[str, str], values: Factors, *, pair: bool) -> list[Generated]:
    cases = by_nature(natures)
    found: list[Generated] = []
    signs = (("", values.permanent_unfavourable), (" G inf", values.permanent_favourable))
    for mark, gamma in signs:
        found.append(_made(f"6.10{'a' * pair}{mark} permanent", cases, gamma, {}, f"6.10{'a' * pair}"))
    for way in choices(cases):
        for mark, gamma in signs:
            words = " + ".join(way.values())
            accompanying = {case: values.variable * values.psi[nature][0] for nature, case in way.items()}
            if pair:
                found.append(_made(f"6.10a{mark} {words}", cases, gamma, accompanying, "6.10a"))
                # Favourable permanent actions are not reduced.
                gamma = gamma * values.xi if gamma > 1 else gamma
            for case in way.values():
                leading = {**accompanying, case: values.variable}
                name = f"6.10{'b' * pair}{mark} {_led(case, way)}"
                found.append(_made(name, cases, gamma, leading, f"6.10{'b' * pair}"))
    for case in cases.get(ACCIDENTAL, []):
        frequent = {other: values.psi[nature][2] for nature in values.psi for other in cases.get(nature, [])[:1]}
        found.append(_made(f"6.11 {case}", cases, 1.0, {case: 1.0, **frequent}, "6.11"))
    return distinct(found)


def _service(natures: dict[str, str], values: Factors) -> list[Generated]:
    cases = by_nature(natures)
    found = [_made("6.14 permanent", cases, 1.0, {}, "6.14", "service")]
    for way in choices(cases):
        for case in way.values():
            rare = {other: 1.0 if other == case else values.psi[nature][0] for nature, other in way.items()}
            often = {
                other: values.psi[nature][1] if other == case else values.psi[nature][2]
                for nature, other in way.items()
            }
            found.append(_made(f"6.14 {_led(case, way)}", cases, 1.0, rare, "6.14", "service"))
            found.append(_made(f"6.15 {_led(case, way)}", cases, 1.0, often, "6.15", "service"))
        lasting = {other: values.psi[nature][2] for nature, other in way.items()}
        found.append(_made(f"6.16 {' + '.join(way.values())}", cases, 1.0, lasting, "6.16", "service"))
    return distinct(found)


def _led(case: str, way: dict[str, str]) -> str:
    others = [other for other in way.values() if other != case]
    return " + ".join([case, *others])


def _made(
    name: str,
    cases: dict[str, list[str]],
    gamma: float,
    variable: dict[str, float],
    rule: str,
    purpose: str = "strength",
) -> Generated:
    permanent = {case: gamma for nature in PERMANENT for case in cases.get(nature, [])}
    factors = {case: round(factor, 6) for case, factor in {**permanent, **variable}.items() if factor}
    return Generated(name, purpose, factors, f"EN 1990 {rule}")
