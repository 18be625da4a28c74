"""What the command line prints: sentences for people, JSON for machines, progress on a terminal."""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING, TextIO

from strutbook_addin.findings import Level
from strutbook_addin.solving import Solved

if TYPE_CHECKING:
    from strutbook_addin.results import Results

#: With this many files or more, progress is worth a line.
MANY = 3


def say(text: str, file: TextIO | None = None) -> None:
    """Print one line, above a progress display if there is one."""
    print(text, file=file or sys.stdout, flush=True)


class Reporter:
    """Reports on each file as it is done, and keeps a progress display on a terminal."""

    def __init__(self, files: int, *, machine: bool) -> None:
        self._machine = machine
        self._reports: list[dict[str, object]] = []
        self._bar = None
        if sys.stderr.isatty():
            from tqdm import tqdm

            # A single small workbook is done before anybody could read a progress display.
            self._bar = tqdm(total=files, unit="workbook", leave=False, disable=files < 1, delay=0.5, file=sys.stderr)

    def stage(self, stage: str) -> None:
        """Show what is being done."""
        if self._bar is not None:
            self._bar.set_description_str(stage)

    def report(self, solved: Solved) -> None:
        """Print what became of a file, or keep it for the JSON at the end."""
        if self._machine:
            self._reports.append(as_json(solved))
        else:
            if self._bar is not None:
                self._bar.clear()
            for line in lines(solved):
                say(line)
        if self._bar is not None:
            self._bar.update()

    def finish(self) -> None:
        """Close the progress display and print what was kept."""
        if self._bar is not None:
            self._bar.close()
        if self._machine:
            import json

            say(json.dumps(self._reports, indent=1, ensure_ascii=False))


def lines(solved: Solved) -> list[str]:
    """What became of a file, for people."""
    outcome = solved.outcome
    text = [f"{solved.file}: {outcome.sentence}" if outcome.digest else f"{solved.file}: not solved."]
    text += [f"  {finding.sentence}" for finding in outcome.findings if finding.level is not Level.NOTE]
    notes = [f"  {finding.sentence}" for finding in outcome.findings if finding.level is Level.NOTE]
    text += notes
    if solved.written is not None:
        text.append(f"  written to {solved.written}")
    return text


def as_json(solved: Solved) -> dict[str, object]:
    """What became of a file, for machines; results in SI units (N, m)."""
    outcome = solved.outcome
    return {
        "file": str(solved.file),
        "written": None if solved.written is None else str(solved.written),
        "exit_status": solved.exit_status,
        "outcome": outcome.sentence,
        "inputs": outcome.digest or None,
        "findings": [
            {
                "level": finding.level.value,
                "sheet": finding.sheet or None,
                "cell": finding.cell or None,
                "header": finding.header or None,
                "what": finding.what,
                "todo": finding.todo or None,
            }
            for finding in outcome.findings
        ],
        "results": None if outcome.results is None else _results(outcome.results),
    }


def _results(results: Results) -> dict[str, object]:
    model, combinations = results.model, results.model.combinations.names
    joints = model.geometry.joints.names
    supports = [
        {"joint": joints[joint], "direction": label}
        for joint, label in zip(model.held.joint, model.held.label, strict=True)
    ]
    found: dict[str, object] = {
        "units": "SI: N, m; tension positive; reactions along their directions",
        "static_indeterminacy": results.analysis.stability.indeterminacy,
        "joint_residual": float(results.analysis.residual.max(initial=0.0)),
        "combinations": list(combinations),
        "forces": dict(zip(model.geometry.members.names, results.forces.tolist(), strict=True)),
        "reactions": [
            {**support, "values": values} for support, values in zip(supports, results.reactions.tolist(), strict=True)
        ],
    }
    if results.displacements is not None:
        found["displacements"] = dict(zip(joints, results.displacements.tolist(), strict=True))
    return found
