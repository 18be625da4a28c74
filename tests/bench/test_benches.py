"""Every benchmark runs and prints its ratios; how large they are is for people to read, not for a test."""

import importlib.util
import re
from pathlib import Path

import pytest

SCRIPTS = sorted(Path(__file__).parent.glob("bench_*.py"))


@pytest.mark.parametrize("script", SCRIPTS, ids=lambda path: path.stem)
def test_benchmark_prints_its_ratios(script, capsys):
    spec = importlib.util.spec_from_file_location(script.stem, script)
    assert spec
    assert spec.loader
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    assert module.main(["--quick"]) == 0
    printed = capsys.readouterr().out
    assert re.search(r"\d(\.\d+)?(e-?\d+)?\s+\((goal|at most)", printed), printed
