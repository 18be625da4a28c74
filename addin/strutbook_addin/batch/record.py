"""What a batch keeps of one workbook: plain values that travel between processes."""

from __future__ import annotations

from dataclasses import dataclass, field
from time import perf_counter
from typing import TYPE_CHECKING

import numpy as np

from strutbook_addin.batch.selection import Item
from strutbook_addin.findings import Finding, Level
from strutbook_addin.outcome import Outcome

if TYPE_CHECKING:
    from strutbook_addin.results import Results

#: States of a workbook after a batch.
SOLVED, UNCHANGED, FAILED = "solved", "unchanged", "not solved"


@dataclass(frozen=True)
class Envelope:
    """Extreme forces of the members over the strength combinations, N, and their combinations."""

    members: tuple[str, ...]
    tension: tuple[float, ...]
    tension_in: tuple[str, ...]
    compression: tuple[float, ...]
    compression_in: tuple[str, ...]


@dataclass(frozen=True)
class Record:
    """One workbook; numbers are SI, None where there is none."""

    name: str
    file: str
    state: str
    exit_status: int
    sentence: str
    findings: tuple[Finding, ...]
    seconds: float
    digest: str = ""
    numbers: dict[str, float] = field(default_factory=dict)
    texts: dict[str, str] = field(default_factory=dict)
    envelope: Envelope | None = None

    @property
    def first_finding(self) -> str:
        """The gravest finding as a sentence, empty for none above a note."""
        return next((finding.sentence for finding in self.findings if finding.level is not Level.NOTE), "")


def record_of(item: Item, outcome: Outcome, state: str, started: float) -> Record:
    """What is kept of an outcome."""
    numbers: dict[str, float] = {}
    texts: dict[str, str] = {}
    envelope = None
    if outcome.results is not None:
        numbers, texts = _values(outcome, outcome.results)
        envelope = _envelope(outcome.results)
    kept = tuple(finding for finding in outcome.findings if finding.level is not Level.NOTE)
    return Record(
        item.name,
        str(item.target),
        state if outcome.results is not None else FAILED,
        outcome.exit_status,
        outcome.sentence if outcome.digest else "Not solved.",
        kept,
        perf_counter() - started,
        outcome.digest,
        numbers,
        texts,
        envelope,
    )


def failed(item: Item, sentence: str, seconds: float = 0.0) -> Record:
    """Record of a workbook of which a process could not say anything itself."""
    finding = Finding(Level.STOP, sentence)
    return Record(item.name, str(item.target), FAILED, 2, "Not solved.", (finding,), seconds)


def _values(outcome: Outcome, results: Results) -> tuple[dict[str, float], dict[str, str]]:
    model = results.model
    forces = results.forces[:, results.strength]
    reactions = results.support_columns(int(model.held.row.max(initial=-1)) + 1)
    up = "xyz"[model.geometry.dimensions - 1]
    lowest = next((column.values for column in reactions if column.name == f"Reaction {up} min"), np.zeros(0))
    numbers = {
        "tension": float(forces.max(initial=0.0)),
        "compression": float(forces.min(initial=0.0)),
        "displacement": results.largest_displacement(),
        "deflection_over_limit": results.deflection_over_limit(),
        "mass": results.total_mass(),
        "lowest_reaction": float(np.min(np.asarray(lowest, dtype=np.float64), initial=np.inf)),
        "residual": float(results.analysis.residual.max(initial=0.0)),
        "members": float(len(model.geometry.members)),
    }
    names = model.geometry.members.names
    texts: dict[str, str] = {}
    if forces.size:
        texts["tension_in"] = names[int(forces.max(axis=1).argmax())]
        texts["compression_in"] = names[int(forces.min(axis=1).argmin())]
    checked = outcome.checked
    if checked is not None:
        numbers["fails"] = float(checked.fails.sum())
        numbers["unchecked"] = float(len(checked.unchecked))
        if checked.largest is not None:
            numbers["utilisation"] = float(checked.utilisation[checked.largest])
            texts["utilisation_in"] = names[checked.largest]
            texts["governed_by"] = checked.governed_by[checked.largest]
    known = {name: value for name, value in numbers.items() if np.isfinite(value)}
    return known, texts


def _envelope(results: Results) -> Envelope:
    forces = results.forces[:, results.strength]
    names = [results.model.combinations.names[place] for place in results.strength.tolist()]
    high, low = forces.argmax(axis=1), forces.argmin(axis=1)
    rows = np.arange(len(forces))
    return Envelope(
        tuple(results.model.geometry.members.names),
        tuple(np.maximum(forces[rows, high], 0.0).tolist()),
        tuple(names[place] for place in high.tolist()),
        tuple(np.minimum(forces[rows, low], 0.0).tolist()),
        tuple(names[place] for place in low.tolist()),
    )
