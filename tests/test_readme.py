"""What the README says is so: its tables, commands, example and cautions."""

import argparse
import re
from importlib import import_module
from pathlib import Path

import pytest

from strutbook_addin.command_line import EXIT_STATUSES, VERBS
from strutbook_addin.reporting import CAUTION, NEVER, OF_MEMBERS
from strutbook_addin.tables.reference import written_into
from strutbook_templates import new_workbook, shape_names

ROOT = Path(__file__).resolve().parent.parent
README = (ROOT / "README.md").read_text("utf-8")
WORDS = " ".join(README.split())


def test_tables_follow_the_schema():
    assert written_into(README) == README, "run: python -m strutbook_addin.tables.reference README.md"


@pytest.mark.parametrize("verb", VERBS)
def test_every_verb_and_option_is_explained(verb):
    parser = argparse.ArgumentParser()
    import_module(f"strutbook_addin.command_line.{verb}").add_options(parser)
    assert f"strutbook {verb} " in README
    options = {option for action in parser._actions for option in action.option_strings}
    if verb == "new":
        # Sizes of the shapes are listed by the help; the README shows how they look.
        options = {"--shape", "--units", "--span", "--panels"}
    for option in options - {"-h", "--help"}:
        assert option in README, option


def test_shapes_exit_statuses_and_cautions_are_those_of_the_program():
    for shape in shape_names():
        assert re.search(rf"\b{shape}\b", README), shape
    assert EXIT_STATUSES in WORDS
    assert NEVER in WORDS
    assert OF_MEMBERS in WORDS
    assert CAUTION.partition("; ")[2].lower() in WORDS.lower()


def test_python_example_runs(tmp_path, monkeypatch, capsys):
    example = re.search(r"```python\n(.*?)```", README, re.DOTALL)
    assert example
    monkeypatch.chdir(tmp_path)
    new_workbook("roof.xlsx", "fink")
    exec(compile(example.group(1), "README.md", "exec"), {})  # noqa: S102 - the example is ours
    printed = capsys.readouterr().out
    assert "Solved: 15 joints, 27 members" in printed
    assert "Member" in printed


def test_pictures_are_there():
    for picture in re.findall(r"!\[[^\]]*\]\(([^)]+)\)", README):
        assert (ROOT / picture).is_file(), picture


def test_first_paragraph_says_the_job_and_two_commands_set_up_everything():
    assert README.startswith("# strutbook\n\nA structural engineer who ")
    commands = re.findall(r"^python3 -m venv .*$", README, re.MULTILINE)
    assert len(commands) == 2
    assert commands[0].endswith("strutbook demo")
    assert commands[1].endswith(".ci/check.py")
