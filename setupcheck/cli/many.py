"""`setupcheck review` of many jobs: one after another or by workers, a summary at the end, and one after Ctrl-C as well."""

from __future__ import annotations

import os
import signal
import sys
import threading
from collections.abc import Callable, Iterator, Sequence
from contextlib import AbstractContextManager, ExitStack, contextmanager
from functools import partial
from pathlib import Path
from typing import TYPE_CHECKING, Any

from setupcheck.cli.drawer import Drawer, opened
from setupcheck.cli.many_work import lined, ready, started, without_verdict
from setupcheck.errors import SetupcheckError, printable
from setupcheck.many import in_order, lost, unreadable
from setupcheck.record import record
from setupcheck.report.summary import Line, counts_line, skipped_line, summary

if TYPE_CHECKING:
    from concurrent.futures import Executor

EXIT = {"pass": 0, "warn": 1, "open": 1, "unreadable": 2, "fail": 3}
STOPPED = 130
"""Exit code after Ctrl-C: 128 and the number of the signal, as shells write it."""

WORTH_IT = 32
"""Jobs from which workers are started unasked: below, their start takes longer than they save. Source: tried, our choice."""


@record
class Asked:
    """What the command was asked for; paths as text, so that a worker can be told."""

    as_json: bool
    everything: bool
    quiet: bool
    house: str | None
    beside: bool
    on: str | None
    record: str | None
    workers: int | None
    show: Callable[[str], None]
    colour: str


def review_drawer(named: Sequence[Path], asked: Asked) -> int:
    """Reviews all jobs of the files and folders named; the highest exit code of all, 130 after Ctrl-C.

    Raises: SetupcheckError where there is no job, or for a house file or a record that was named and cannot be used.
    """
    drawer: Drawer | None = None
    lines: list[Line] = []
    stopped = False
    with _Held() as held:
        try:
            drawer = opened(named)
            _readable(asked)
            _all(drawer, asked, lines, held)
        except KeyboardInterrupt:
            stopped = True
        held.for_good()
        if drawer is None:
            print("stopped: no job is reviewed", file=sys.stderr)
        else:
            _tell(drawer, asked, lines, stopped=stopped)
    return STOPPED if stopped else max(EXIT[line.verdict] for line in lines)


def _readable(asked: Asked) -> None:
    """What acts on every job is read once before, so that what is wrong with it is told once."""
    if asked.house is not None:
        from setupcheck.flow import read_house

        read_house(asked.house)
    if asked.record is not None:
        from setupcheck.flow import read_devices

        read_devices(asked.record)


def _all(drawer: Drawer, asked: Asked, lines: list[Line], held: _Held) -> None:
    work = partial(
        lined,
        house=asked.house,
        beside=asked.beside,
        on=asked.on,
        record=asked.record,
        as_json=asked.as_json,
        everything=asked.everything and not asked.quiet,
    )
    with ExitStack() as ends:
        pool, ahead = ends.enter_context(_workers(asked.workers, len(drawer.jobs), held))
        step = ends.enter_context(_bar(len(drawer.jobs), asked))
        for line in _shut(drawer, asked):
            with held:
                _one(line, asked, lines, step)
        for line in in_order(work, partial(_lost, as_json=asked.as_json), drawer.jobs, pool, chunk=1, ahead=ahead):
            with held:
                _one(line, asked, lines, step)


def _one(line: Line, asked: Asked, lines: list[Line], step: Callable[[str], None]) -> None:
    """Prints what belongs to one job, whole."""
    lines.append(line)
    if asked.as_json:
        sys.stdout.write(line.text + "\n")
        sys.stdout.flush()
    elif line.text:
        asked.show(line.text + "\n")
        sys.stdout.flush()
    step("" if asked.as_json else line.error)


def _lost(path: str, fault: BaseException, *, as_json: bool) -> Line:
    return without_verdict(lost(path, fault), as_json=as_json)


def _shut(drawer: Drawer, asked: Asked) -> Iterator[Line]:
    """Folders that could not be looked into: whoever reviews a drawer must know that jobs are missing."""
    for path, why in drawer.shut.items():
        wrong = SetupcheckError(f"{printable(path)}: this folder cannot be looked into ({why}). Check its permissions")
        yield without_verdict(unreadable(path, wrong), as_json=asked.as_json)


def _tell(drawer: Drawer, asked: Asked, lines: Sequence[Line], *, stopped: bool) -> None:
    left = len(drawer.jobs) + len(drawer.shut) - len(lines)
    partly = (
        f"stopped: {len(lines)} of {len(lines) + left} jobs are reviewed, {left} {'is' if left == 1 else 'are'} left"
    )
    if asked.as_json:
        told = [*map(skipped_line, drawer.skipped), *([partly] if stopped else [])]
        sys.stderr.write("".join(f"{line}\n" for line in told))
        return
    told = [counts_line(lines, drawer.skipped)] if asked.quiet else summary(lines, drawer.skipped)
    asked.show("\n".join([*told, *([partly] if stopped else [])]) + "\n")
    sys.stdout.flush()


class _Held(AbstractContextManager["_Held"]):
    """Ctrl-C waits while something is printed or started, so that nothing is half done; then it ends the run.

    The outermost `with` takes the signal over and gives it back; in a thread that hears no signal it does nothing.
    """

    def __init__(self) -> None:
        self._depth = 0
        self._pending = False
        self._over = False
        self._before: Any = None

    def _asked(self, *_: object) -> None:
        if self._over:
            return
        if self._depth > 1:
            self._pending = True
            return
        raise KeyboardInterrupt

    def for_good(self) -> None:
        """From here on Ctrl-C changes nothing: what is left is to tell what was done."""
        self._over = True

    def __enter__(self) -> _Held:
        self._depth += 1
        if self._depth == 1 and threading.current_thread() is threading.main_thread():
            self._before = signal.signal(signal.SIGINT, self._asked)
        return self

    def __exit__(self, *_: object) -> None:
        self._depth -= 1
        if self._depth == 0:
            if self._before is not None:
                signal.signal(signal.SIGINT, self._before)
        elif self._pending and self._depth == 1 and not self._over:
            self._pending = False
            raise KeyboardInterrupt


@contextmanager
def _workers(asked: int | None, jobs: int, held: _Held) -> Iterator[tuple[Executor | None, int]]:
    """Worker processes where they are worth it, and how many jobs may wait for them; none for a few jobs."""
    count = min(asked if asked is not None else _processors() if jobs >= WORTH_IT else 1, jobs)
    if count < 2:
        yield None, 1
        return
    from concurrent.futures import ProcessPoolExecutor
    from multiprocessing import active_children, get_context

    # Spawned, not forked: it works alike on every system, and the thread of the bar would not survive a fork.
    pool = ProcessPoolExecutor(min(count, 61), mp_context=get_context("spawn"), initializer=started)
    try:
        with held, _deaf():
            for _ in range(count):
                pool.submit(ready)
        yield pool, 3 * count
    except KeyboardInterrupt:
        for process in active_children():  # they write nothing: there is nothing to wait for
            process.terminate()
        raise
    finally:
        with held:
            pool.shutdown(wait=True, cancel_futures=True)


def _processors() -> int:
    """Processors this process may use."""
    if hasattr(os, "sched_getaffinity"):
        return len(os.sched_getaffinity(0))
    return os.cpu_count() or 1


@contextmanager
def _deaf() -> Iterator[None]:
    """Processes started inside never hear Ctrl-C, not even before their first line; where the system knows such a thing."""
    if not hasattr(signal, "pthread_sigmask"):
        yield
        return
    before = signal.pthread_sigmask(signal.SIG_BLOCK, {signal.SIGINT})
    try:
        yield
    finally:
        signal.pthread_sigmask(signal.SIG_SETMASK, before)


@contextmanager
def _bar(jobs: int, asked: Asked) -> Iterator[Callable[[str], None]]:
    """What is called after each job, with the text of what is wrong with it: a bar on a terminal, else only that text."""
    printing = (asked.as_json or asked.everything) and sys.stdout.isatty()  # then that shows how far it is
    if asked.quiet or printing or not sys.stderr.isatty() or os.environ.get("TERM") == "dumb":

        def tell(error: str) -> None:
            if error:
                print(error, file=sys.stderr, flush=True)

        yield tell
        return
    from rich.console import Console
    from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeRemainingColumn

    plain = asked.colour == "never" or (asked.colour == "auto" and bool(os.environ.get("NO_COLOR")))
    console = Console(stderr=True, no_color=plain, highlight=False, markup=False, soft_wrap=True)
    columns = (TextColumn("reviewing"), BarColumn(), MofNCompleteColumn(), TimeRemainingColumn())
    with Progress(*columns, console=console, transient=True, redirect_stdout=False, redirect_stderr=False) as progress:
        task = progress.add_task("reviewing", total=jobs)

        def step(error: str) -> None:
            if error:
                console.print(error)
            progress.advance(task)

        yield step
