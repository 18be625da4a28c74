"""Tasks over the processes of an executor: few at a time, each done once, whatever becomes of a process."""

from __future__ import annotations

import os
from collections import deque
from collections.abc import Callable, Iterator, Sequence
from concurrent.futures import FIRST_COMPLETED, Future, ProcessPoolExecutor, wait
from concurrent.futures.process import BrokenProcessPool
from multiprocessing import get_context, parent_process
from multiprocessing.connection import wait as wait_for
from threading import Lock, Thread
from time import monotonic

from strutbook_addin.batch.record import Record, failed
from strutbook_addin.batch.task import Task, solve_task

#: Futures in flight for each process: one at work and one waiting behind it.
AHEAD = 2
MEBIBYTE = 1 << 20


def default_jobs() -> int:
    """As many processes as there are processors for this one."""
    return len(os.sched_getaffinity(0)) if hasattr(os, "sched_getaffinity") else os.cpu_count() or 1


def solve_in_processes(
    tasks: Sequence[Task],
    jobs: int,
    *,
    seconds: float | None = None,
    memory: int | None = None,
    stopped: Callable[[], bool] = lambda: False,
) -> Iterator[Record]:
    """Records of the tasks as they are done.

    Parameters
    ----------
    tasks : sequence of Task
        Workbooks to solve.
    jobs : int
        Number of processes.
    seconds : float, optional
        Longest time for one workbook; its process is then replaced and the workbook reported.
    memory : int, optional
        Most memory of a process in MiB (where the system can set it).
    stopped : callable
        Asked between workbooks; when true, those in hand are finished and no other is begun.
    """
    waiting = deque(tasks)
    while waiting and not stopped():
        suspects: list[Task] = []
        with _pool(jobs, memory) as pool:
            yield from _run_pool(pool, waiting, suspects, jobs, seconds, stopped)
        # A process died, and nobody knows over which of the workbooks in hand: one at a time they show it.
        again = deque(suspects)
        while again:
            culprits: list[Task] = []
            with _pool(1, memory) as pool:
                yield from _run_pool(pool, again, culprits, 1, seconds, lambda: False, ahead=1)
            for task in culprits:
                yield failed(task.item, f"{task.item.name}: its process ended without a result. Nothing was written.")


def _pool(jobs: int, memory: int | None) -> ProcessPoolExecutor:
    # Forking copies whatever the parent holds, threads' locks included; a fresh process starts clean.
    return ProcessPoolExecutor(jobs, mp_context=get_context("spawn"), initializer=_limit, initargs=(memory,))


#: Held while a workbook is in hand, so that a process whose parent is gone finishes it first.
_IN_HAND = Lock()


def _solve(task: Task) -> Record:
    with _IN_HAND:
        return solve_task(task)


def _ready() -> None:
    """Do nothing, once the process has loaded all that it needs."""


def _follow_parent() -> None:
    """End this process once its parent is gone: nobody would ever ask it for anything again."""
    parent = parent_process()
    if parent is not None:
        wait_for([parent.sentinel])
    _IN_HAND.acquire()
    os._exit(1)


def _limit(memory: int | None) -> None:
    """Set up a process: it follows its parent, interrupts belong to the parent, memory to its limit."""
    import signal

    signal.signal(signal.SIGINT, signal.SIG_IGN)
    Thread(target=_follow_parent, daemon=True).start()
    if memory is not None:
        try:
            import resource
        except ImportError:
            return
        resource.setrlimit(resource.RLIMIT_AS, (memory * MEBIBYTE, memory * MEBIBYTE))


def _run_pool(
    pool: ProcessPoolExecutor,
    waiting: deque[Task],
    suspects: list[Task],
    jobs: int,
    seconds: float | None,
    stopped: Callable[[], bool],
    ahead: int = AHEAD,
) -> Iterator[Record]:
    """Work off the tasks until they are done or the pool breaks; those in hand then are suspects."""
    in_hand: dict[Future[Record], tuple[Task, float]] = {}
    # With a time limit nothing waits behind a workbook, so that the time counted is its own.
    room = jobs if seconds is not None else jobs * ahead
    if seconds is not None:
        # Starting a process takes time that belongs to no workbook.
        for started in [pool.submit(_ready) for _ in range(jobs)]:
            started.result()
    while waiting or in_hand:
        while waiting and len(in_hand) < room and not stopped():
            task = waiting.popleft()
            try:
                in_hand[pool.submit(_solve, task)] = (task, monotonic())
            except BrokenProcessPool:
                suspects.append(task)
                break
        if not in_hand:
            return
        done, _ = wait(in_hand, timeout=0.2, return_when=FIRST_COMPLETED)
        for future in done:
            task, _ = in_hand.pop(future)
            try:
                yield future.result()
            except BrokenProcessPool:
                suspects.append(task)
        late = _late(in_hand, seconds)
        if late is not None:
            task, _ = in_hand.pop(late)
            sentence = f"{task.item.name}: it took longer than {seconds:g} s and was stopped. Nothing was written."
            yield failed(task.item, sentence, seconds or 0.0)
            _end_processes(pool)
            waiting.extendleft(task for task, _ in in_hand.values())
            return
        if suspects:
            suspects.extend(task for task, _ in in_hand.values())
            return


def _late(in_hand: dict[Future[Record], tuple[Task, float]], seconds: float | None) -> Future[Record] | None:
    """A workbook that has been at work for too long."""
    if seconds is None:
        return None
    return next((future for future, (_, begun) in in_hand.items() if monotonic() - begun > seconds), None)


def _end_processes(pool: ProcessPoolExecutor) -> None:
    """Stop the processes of a pool, which its interface does not offer."""
    for process in list((pool._processes or {}).values()):
        process.kill()
