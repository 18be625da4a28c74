"""New workbooks from shapes: they read clean, solve, and say what is wrong with parameters."""

from __future__ import annotations

import subprocess
import sys

import numpy as np
import pytest

from strutbook_addin.findings import Findings, Level
from strutbook_addin.member_checks import BENT
from strutbook_addin.run import check
from strutbook_addin.workbook import read_workbook
from strutbook_templates import new_workbook, shape_names, workbook_contents, write_demonstration
from strutbook_templates.parameters import SHAPES
from strutbook_templates.unit_systems import UNIT_SYSTEMS

FILLED = [name for name in shape_names() if SHAPES[name].parameters]


def outcome_of(as_read, path):
    return check(as_read(path))


@pytest.mark.parametrize("units", list(UNIT_SYSTEMS))
@pytest.mark.parametrize("shape", FILLED)
def test_shape_solves_at_once(tmp_path, as_read, shape, units):
    file = tmp_path / "new.xlsx"
    new_workbook(file, shape, units=units)
    outcome = outcome_of(as_read, file)
    assert outcome.results is not None
    assert outcome.count(Level.STOP, Level.FAIL, Level.LOOK) == 0
    assert len(outcome.results.model.geometry.members) == len(workbook_contents(shape).truss.members)


@pytest.mark.parametrize("units", list(UNIT_SYSTEMS))
@pytest.mark.parametrize("shape", FILLED)
def test_sizes_of_a_shape_are_a_sensible_first_guess(tmp_path, as_read, shape, units):
    """Largest stress between about a quarter and three quarters of 355 N/mm2, sway or sag above span/300."""
    file = tmp_path / "new.xlsx"
    new_workbook(file, shape, units=units)
    results = outcome_of(as_read, file).results
    stress = np.abs(results.forces) / results.model.properties.area[:, None]
    assert 80e6 < stress.max() < 265e6
    extent = np.ptp(results.model.truss.joints, axis=0).max()
    assert results.largest_displacement() < extent / 300


@pytest.mark.parametrize("units", list(UNIT_SYSTEMS))
@pytest.mark.parametrize("shape", ["plane", "space"])
def test_blank_workbook_reads_clean_and_waits_for_joints(tmp_path, as_read, shape, units):
    file = tmp_path / "new.xlsx"
    new_workbook(file, shape, units=units)
    findings = Findings()
    workbook = read_workbook(as_read(file), findings)
    assert list(findings) == []
    assert {name: data.rows for name, data in workbook.tables.items() if data.rows} == {"Materials": 2}


def test_demonstration_is_realistic(tmp_path, as_read):
    """Sag between span/800 and span/400, stresses below yield over 1.5, checks that pass and some that fail."""
    file = tmp_path / "demonstration.xlsx"
    write_demonstration(file)
    outcome = outcome_of(as_read, file)
    results = outcome.results
    assert results is not None
    assert outcome.count(Level.STOP) == 0
    assert 0 < outcome.checked.fails.sum() < 10
    assert set(outcome.checked.unchecked.values()) == {BENT}
    assert len(outcome.checked.unchecked) == 4
    assert results.deflection_over_limit() < 1
    assert len(results.model.geometry.members) == 53
    assert results.analysis.stability.indeterminacy == 8
    assert 24.0 / 800 < results.largest_displacement() < 24.0 / 400
    stress = np.abs(results.forces) / results.model.properties.area[:, None]
    assert 100e6 < stress.max() < 355e6 / 1.5
    assert results.analysis.residual.max() <= 1e-9


def test_demonstration_has_every_input_table_in_use(built):
    findings = Findings()
    tables = read_workbook(built["demonstration.xlsx"], findings).tables
    assert list(findings) == []
    assert all(data.rows for data in tables.values())
    assert len(tables) == 10
    assert np.nansum(np.abs(tables["Members"].number("Misfit"))) == pytest.approx(0.5e-3)


def test_parameters_change_the_truss(tmp_path):
    """Values may be texts, as a command line has them."""
    contents = workbook_contents("pratt", units="us", span="120", panels="10", depth=12.0)
    assert len(contents.truss.members) == 37
    assert contents.truss.joints["U9"] == (108.0, 12.0)
    assert contents.title == "Pratt truss, span 120 ft, 10 panels"
    with_posts = workbook_contents("warren", verticals="yes")
    assert "post" in {bar.group for bar in with_posts.truss.members}


def test_loads_follow_from_the_loads_per_length():
    contents = workbook_contents("howe", span=20.0, panels=4, permanent=3.0, imposed=0)
    loads = {(row["Case"], row["Joint"]): row["Fy"] for row in contents.rows["Loads"]}
    assert [loads["G", f"L{i}"] for i in range(5)] == [-7.5, -15.0, -15.0, -15.0, -7.5]
    assert {loads["Q", f"L{i}"] for i in range(5)} == {0.0}


@pytest.mark.parametrize(
    ("shape", "units", "parameters", "sentence"),
    [
        ("arch", "metric", {}, r"the shape 'arch' is not known; expected one of: plane, space, pratt"),
        ("pratt", "si", {}, r"the units 'si' are not known; expected one of: metric, us\."),
        ("pratt", "metric", {"span": -3}, r"span is -3; expected a number above 0 in m\."),
        ("pratt", "us", {"span": "wide"}, r"span is 'wide'; expected a number above 0 in ft\."),
        ("pratt", "metric", {"span": float("nan")}, r"span is nan; expected a number above 0"),
        ("pratt", "metric", {"depth": float("inf")}, r"depth is inf; expected a number above 0"),
        ("pratt", "metric", {"panels": 7}, r"panels is 7.*give an even number of panels such as 8\."),
        ("pratt", "metric", {"panels": 8.5}, r"panels is 8\.5; expected a whole number from 4 to 200\."),
        ("pratt", "metric", {"panels": True}, r"panels is True; expected a whole number"),
        ("pratt", "metric", {"imposed": -1}, r"imposed is -1; expected a number of 0 or more in kN/m\."),
        ("pratt", "metric", {"rise": 3}, r"the shape pratt has no parameter 'rise'; it takes span, panels"),
        ("plane", "metric", {"span": 3}, r"the shape plane has no parameter 'span'; it takes no parameters"),
        ("warren", "metric", {"verticals": "some"}, r"verticals is 'some'; expected one of: no, yes\."),
        ("fink", "metric", {"panels": 6}, r"give 4, 8 or 16\."),
        ("fink", "metric", {"rise": 9.0}, r"give a rise below half the span\."),
    ],
)
def test_what_does_not_make_a_truss_gets_a_sentence(tmp_path, shape, units, parameters, sentence):
    with pytest.raises(ValueError, match=sentence):
        new_workbook(tmp_path / "new.xlsx", shape, units=units, **parameters)
    assert list(tmp_path.iterdir()) == []


def test_existing_file_is_left_alone(tmp_path):
    file = tmp_path / "bridge.xlsx"
    file.write_text("mine")
    with pytest.raises(FileExistsError, match="exists already; give another name"):
        new_workbook(file, "plane")
    assert file.read_text() == "mine"


def test_file_of_another_kind_is_refused(tmp_path):
    with pytest.raises(ValueError, match=r"does not end in \.xlsx"):
        new_workbook(tmp_path / "bridge.ods", "plane")


@pytest.mark.parametrize("shape", list(SHAPES.values()), ids=list(SHAPES))
def test_every_parameter_is_documented_with_defaults_that_fit(shape):
    assert shape.meaning
    for parameter in shape.parameters:
        assert parameter.meaning
        assert set(parameter.defaults) == set(UNIT_SYSTEMS)
        for system in UNIT_SYSTEMS.values():
            default = parameter.defaults[system.name]
            assert parameter.checked(default, system) == default


def test_importing_the_package_loads_neither_openpyxl_nor_numpy():
    code = (
        "import sys, strutbook_templates, strutbook_templates.parameters\n"
        "strutbook_templates.shape_names()\n"
        "print([name for name in ('openpyxl', 'numpy', 'pandas', 'scipy') if name in sys.modules])"
    )
    printed = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert printed.stdout.strip() == "[]"
