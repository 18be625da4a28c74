"""What starting costs: help against bare Python, and one workbook against loading the libraries (goal 8).

Every ratio is of processor time of child processes, run in turn in one run; the median is printed.
"""

from __future__ import annotations

import argparse
import resource  # POSIX only, like the measurement
import subprocess
import sys
import tempfile
from pathlib import Path
from statistics import median

from strutbook_templates import new_workbook

BARE = "pass"
HELP = "from strutbook_addin.command_line import main; main(['--help'])"
SOLVE = "import sys; from strutbook_addin.command_line import main; main(['solve', sys.argv[1]])"
LIBRARIES = (
    "import sys, openpyxl, pandas, scipy.sparse.linalg; "
    "book = openpyxl.load_workbook(sys.argv[1]); book.save(sys.argv[1])"
)


def cpu_seconds(code: str, *arguments: str) -> float:
    """Processor time of a Python process that runs the code."""
    before = resource.getrusage(resource.RUSAGE_CHILDREN)
    subprocess.run([sys.executable, "-c", code, *arguments], stdout=subprocess.DEVNULL, check=True)
    after = resource.getrusage(resource.RUSAGE_CHILDREN)
    return after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime


def main(argv: list[str] | None = None) -> int:
    """Print the two ratios."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="few repetitions, to see that it runs")
    repetitions = 1 if parser.parse_args(argv).quick else 15
    with tempfile.TemporaryDirectory() as folder:
        solved, saved = Path(folder, "solved.xlsx"), Path(folder, "saved.xlsx")
        for file in (solved, saved):
            new_workbook(file, "pratt", panels=12)
        runs = [
            (
                cpu_seconds(BARE),
                cpu_seconds(HELP),
                cpu_seconds(SOLVE, str(solved)),
                cpu_seconds(LIBRARIES, str(saved)),
            )
            for _ in range(repetitions)
        ]
    help_ratio = median(help_time / bare for bare, help_time, _, _ in runs)
    solve_ratio = median(solve / libraries for _, _, solve, libraries in runs)
    print(f"help over bare Python                         {help_ratio:5.2f}   (goal 8: at most 3)")
    print(f"one workbook over libraries, load and save    {solve_ratio:5.2f}   (goal 8: at most 0.3)")
    return 0


if __name__ == "__main__":
    sys.exit(main())
