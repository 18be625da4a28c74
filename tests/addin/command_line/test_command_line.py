"""The command line as its user meets it: what it prints, what it writes, how it exits."""

import json
import subprocess
import sys
from pathlib import Path

import pytest

from strutbook_addin.command_line import VERBS, main
from strutbook_templates import shape_names


@pytest.fixture
def book(triangle, make_book) -> Path:
    return make_book(triangle).path


@pytest.fixture
def bad_book(triangle, make_book) -> Path:
    joints = [["Joint", "x [m]", "y [m]"], ["A", "left", 0], ["B", 8, 0], ["C", 4, 3]]
    return make_book({**triangle, "Joints": joints}, "bad.xlsx").path


def test_solve_writes_in_place_and_exits_with_0(book, capsys):
    before = book.read_bytes()
    assert main(["solve", str(book)]) == 0
    printed = capsys.readouterr().out
    assert f"{book}: Solved: 3 joints, 3 members, 1 combination, statically determinate." in printed
    assert "not checked: strength and buckling of members" in printed
    assert book.read_bytes() != before


def test_solve_that_cannot_solve_exits_with_2_and_names_the_cell(bad_book, capsys):
    assert main(["solve", str(bad_book)]) == 2
    assert "stop: Joints!B2 (x [m]): expected a number, found the text 'left'." in capsys.readouterr().out


def test_one_bad_workbook_does_not_stop_the_others(bad_book, book, capsys):
    assert main(["solve", str(bad_book), str(book)]) == 2
    assert f"{book}: Solved" in capsys.readouterr().out


def test_file_that_is_not_there_gets_a_sentence(tmp_path, capsys):
    assert main(["solve", str(tmp_path / "none.xlsx")]) == 2
    assert "none.xlsx: No such file or directory. Nothing was written." in capsys.readouterr().out


def test_check_only_writes_nothing(book, capsys):
    before = book.read_bytes()
    assert main(["solve", "--check-only", str(book)]) == 0
    assert "Solved" in capsys.readouterr().out
    assert book.read_bytes() == before
    assert [path.name for path in book.parent.iterdir()] == [book.name]


def test_out_names_a_file_or_a_folder(book, tmp_path):
    before = book.read_bytes()
    assert main(["solve", str(book), "--out", str(tmp_path / "solved.xlsx")]) == 0
    assert main(["solve", str(book), "--out", str(tmp_path / "results")]) == 0
    assert (tmp_path / "solved.xlsx").is_file()
    assert (tmp_path / "results" / book.name).is_file()
    assert book.read_bytes() == before


@pytest.mark.parametrize(
    ("words", "sentence"),
    [
        (["--check-only", "--out", "x"], "--check-only writes nothing, so --out has no meaning beside it."),
        (["other/book.xlsx", "--out", "x"], "two of the workbooks would be written to"),
    ],
)
def test_options_that_contradict_each_other_are_told(book, words, sentence, capsys):
    before = book.read_bytes()
    assert main(["solve", str(book), *words]) == 2
    assert sentence in capsys.readouterr().err
    assert book.read_bytes() == before


def test_json_holds_findings_and_results_in_si_units(book, bad_book, capsys):
    assert main(["solve", "--json", str(book), str(bad_book)]) == 2
    good, bad = json.loads(capsys.readouterr().out)
    assert good["exit_status"] == 0
    assert good["results"]["forces"]["BC"] == [pytest.approx(-12_500)]
    assert good["results"]["joint_residual"] <= 1e-9
    assert bad["results"] is None
    assert bad["findings"][0]["cell"] == "B2"
    assert bad["findings"][0]["header"] == "x [m]"


@pytest.mark.parametrize("units", ["metric", "us"])
@pytest.mark.parametrize("shape", [name for name in shape_names() if name not in {"plane", "space"}])
def test_every_shape_is_solved_as_it_is_made(tmp_path, shape, units, capsys):
    file = tmp_path / "new.xlsx"
    assert main(["new", str(file), "--shape", shape, "--units", units]) == 0
    assert main(["solve", str(file)]) == 0
    assert "to look at" not in capsys.readouterr().out


@pytest.mark.parametrize("shape", ["plane", "space"])
def test_blank_workbook_says_what_to_fill_in(tmp_path, shape, capsys):
    file = tmp_path / "new.xlsx"
    assert main(["new", str(file), "--shape", shape]) == 0
    assert main(["solve", str(file)]) == 2
    printed = capsys.readouterr().out
    assert "the table holds no joint. Fill it in below its headers" in printed
    assert "the truss has no supports" in printed


def test_new_never_replaces_a_file(book, capsys):
    before = book.read_bytes()
    assert main(["new", str(book)]) == 2
    assert "exists and was left alone" in capsys.readouterr().err
    assert book.read_bytes() == before


def test_new_tells_a_parameter_that_does_not_fit(tmp_path, capsys):
    assert main(["new", str(tmp_path / "odd.xlsx"), "--shape", "pratt", "--panels", "7"]) == 2
    assert "panels" in capsys.readouterr().err
    assert not (tmp_path / "odd.xlsx").exists()


def test_demo_is_written_solved_and_told(tmp_path, capsys):
    assert main(["demo", str(tmp_path)]) == 0
    printed = capsys.readouterr().out
    assert "53 members" in printed
    assert "largest tension" in printed
    assert (tmp_path / "footbridge.xlsx").is_file()
    assert main(["demo", str(tmp_path)]) == 0
    assert (tmp_path / "footbridge-2.xlsx").is_file(), "a demonstration that is there already is kept"


def test_help_names_every_verb_and_loads_no_library():
    """Help answers at once: numpy, openpyxl and the rest are loaded by the work, not by the words."""
    code = (
        "import sys\n"
        "from strutbook_addin.command_line import main\n"
        "try: main(['--help'])\n"
        "except SystemExit: pass\n"
        "heavy = {'numpy', 'scipy', 'pandas', 'pint', 'openpyxl', 'formualizer'} & sys.modules.keys()\n"
        "print('loaded:', sorted(heavy))"
    )
    printed = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True).stdout
    assert "loaded: []" in printed
    assert all(verb in printed for verb in VERBS)
    assert "Exit status: 0 everything solved and passed" in printed


def test_one_small_workbook_is_solved_without_the_slow_libraries(book):
    """Of the libraries only numpy is needed for an everyday workbook."""
    code = (
        "import sys\n"
        "from strutbook_addin.command_line import main\n"
        f"assert main(['solve', {str(book)!r}, '--check-only']) == 0\n"
        "print('loaded:', sorted({'scipy', 'pandas', 'pint', 'openpyxl'} & sys.modules.keys()))"
    )
    printed = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True).stdout
    assert "loaded: []" in printed


def test_the_installed_command_answers():
    command = Path(sys.executable).with_name("strutbook.exe" if sys.platform == "win32" else "strutbook")
    printed = subprocess.run([command, "--version"], capture_output=True, text=True, check=True).stdout
    assert printed.startswith("strutbook ")
