"""Lint, types and tests, as CI runs them: the first that fails stops the rest."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

STEPS = (
    ("lint", ["ruff", "check", "."]),
    ("format", ["ruff", "format", "--check", "."]),
    ("types", ["mypy"]),
    ("tests", ["pytest"]),
)


def main() -> int:
    root = Path(__file__).resolve().parent.parent
    for name, command in STEPS:
        print(f"== {name}: {' '.join(command)}", flush=True)
        status = subprocess.run([sys.executable, "-m", *command], cwd=root, check=False).returncode
        if status:
            print(f"== {name} failed", flush=True)
            return status
    return 0


if __name__ == "__main__":
    sys.exit(main())
