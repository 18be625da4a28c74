"""The work of one process on one workbook: solve it, or find that it is solved already."""

from __future__ import annotations

from dataclasses import dataclass
from time import perf_counter

from strutbook_addin.batch.record import SOLVED, UNCHANGED, Record, failed, record_of
from strutbook_addin.batch.selection import Item
from strutbook_addin.hosts.offline import OfflineWorkbook
from strutbook_addin.outcome import Outcome
from strutbook_addin.run import calculate
from strutbook_addin.tables.labels import VALUES, label_rows
from strutbook_addin.tables.schema import JOB, normal
from strutbook_addin.version import __version__
from strutbook_addin.writing_back import write_results
from strutbook_addin.xlsx import RefusedWorkbook
from strutbook_addin.xlsx.saving import check_target


@dataclass(frozen=True)
class Task:
    """One workbook and how it is to be treated."""

    item: Item
    again: bool = False  #: solve it even if it is solved already
    write: bool = True  #: write the results; otherwise they only enter the summary


def solve_task(task: Task) -> Record:
    """Solve one workbook; whatever happens to it becomes its record and stops nothing else."""
    item, started = task.item, perf_counter()
    try:
        workbook = OfflineWorkbook.open(item.source)
        outcome, tables = calculate(workbook)
        if not task.write or (not task.again and _is_solved(workbook, outcome, item)):
            return record_of(item, outcome, UNCHANGED if task.write else SOLVED, started)
        item.target.parent.mkdir(parents=True, exist_ok=True)
        check_target(item.target)
        outcome = write_results(workbook, outcome, tables)
        workbook.save(item.target)
        return record_of(item, outcome, SOLVED, started)
    except RefusedWorkbook as refused:
        return failed(item, f"{item.name}: {refused}", perf_counter() - started)
    except MemoryError:
        return failed(item, f"{item.name}: it needs more memory than a process may use. Nothing was written.")
    except OSError as error:
        return failed(item, f"{item.name}: {error.strerror or error}. Nothing was written.", perf_counter() - started)
    except Exception as error:  # noqa: BLE001 - one workbook must not take the others with it
        kind = type(error).__name__
        return failed(item, f"{item.name}: an error inside strutbook ({kind}: {error}); nothing was written.")


def _is_solved(workbook: OfflineWorkbook, outcome: Outcome, item: Item) -> bool:
    """Whether the results that stand in the workbook are those of its inputs, by this version.

    A target elsewhere counts as solved when it carries the stamp of these inputs.
    """
    if outcome.results is None:
        return False
    written = workbook
    if item.target != item.source:
        if not item.target.exists():
            return False
        written = OfflineWorkbook.open(item.target)
    name = next((name for name in written.names() if normal(name) == normal(JOB.sheet)), None)
    if name is None:
        return False
    grid = written.read(name)
    rows = {label: grid[row] for label, (row, _) in label_rows(JOB, grid).items()}
    stamps = {label: row[VALUES] for label, row in rows.items() if len(row) > VALUES}
    return stamps.get("Inputs") == outcome.digest and stamps.get("Solved by") == f"strutbook {__version__}"
