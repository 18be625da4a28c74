"""Units in headers; factors from NIST SP 811, appendix B (from memory: lbf, ksi, kip/ft, degF)."""

import pytest

from strutbook_addin.tables.units import Dimension, UnitProblem, split_header, unit_of


@pytest.mark.parametrize(
    ("text", "dimension", "factor"),
    [
        ("mm2", Dimension.AREA, 1e-6),
        ("cm²", Dimension.AREA, 1e-4),
        ("kN", Dimension.FORCE, 1e3),
        ("kip", Dimension.FORCE, 4448.222),
        ("lbf", Dimension.FORCE, 4.448222),
        ("ksi", Dimension.STRESS, 6.894757e6),
        ("N/mm2", Dimension.STRESS, 1e6),
        ("kip/ft", Dimension.LINE_LOAD, 14593.9),
        ("klf", Dimension.LINE_LOAD, 14593.9),
        ("lb/in3", Dimension.DENSITY, 27679.9),
        ("°F", Dimension.TEMPERATURE, 5 / 9),
        ("1e-6/K", Dimension.EXPANSION, 1e-6),
    ],
)
def test_everyday_units_have_their_published_factors(text, dimension, factor):
    assert unit_of(text, dimension).factor == pytest.approx(factor, rel=1e-6)


def test_rare_unit_is_worked_out_by_pint():
    assert unit_of("furlong", Dimension.LENGTH).factor == pytest.approx(201.168, rel=1e-5)


@pytest.mark.parametrize(
    ("text", "dimension", "sentence"),
    [
        ("kN", Dimension.LENGTH, "'kN' is a unit of a force"),
        ("kg", Dimension.FORCE, "'kg' does not measure a force"),
        ("bananas", Dimension.FORCE, "the unit 'bananas' is not known"),
        ("", Dimension.FORCE, "the brackets are empty"),
        ("9**9**9**9", Dimension.LENGTH, "the unit '9**9**9**9' is not known"),
        ("__import__('os')", Dimension.LENGTH, "the unit \"__import__('os')\" is not known"),
    ],
)
def test_wrong_unit_is_told_apart_from_an_unknown_one(text, dimension, sentence):
    with pytest.raises(UnitProblem) as problem:
        unit_of(text, dimension)
    assert str(problem.value) == sentence


@pytest.mark.parametrize(
    ("header", "name", "unit"),
    [
        ("x [m]", "x", "m"),
        ("Area[ cm2 ]", "Area", "cm2"),
        ("x (mm)", "x", "mm"),
        ("Wind (left) [kN]", "Wind (left)", "kN"),
        ("Member", "Member", None),
    ],
)
def test_header_splits_into_name_and_unit(header, name, unit):
    assert split_header(header) == (name, unit)
