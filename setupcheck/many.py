"""Many jobs: each reviewed for itself, in this process or by any executor, in the order given.

>>> from setupcheck.shipped import example
>>> for one in review_many([example("index-plate"), "no-such-job.yaml"]):
...     print(one.verdict, one.error or one.data["job"]["title"])
pass Index plate, 24 holes
unreadable no-such-job.yaml: there is no such file. Check the name and the directory

An executor of the standard library, or that of an engine which spreads work over machines, takes the same call:

>>> from concurrent.futures import ThreadPoolExecutor
>>> with ThreadPoolExecutor(2) as executor:
...     [one.verdict for one in review_many([example("index-plate"), example("sprocket")], executor)]
['pass', 'pass']
"""

from __future__ import annotations

import json
import os
from collections import deque
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from contextlib import suppress
from functools import partial
from itertools import islice
from pathlib import Path
from typing import TYPE_CHECKING, Any, TypeVar

from setupcheck.errors import JobError, SetupcheckError, printable
from setupcheck.record import record

if TYPE_CHECKING:
    from concurrent.futures import Executor, Future

    from setupcheck.flow import Review

T = TypeVar("T")

UNREADABLE = "unreadable"
"""Stands where a verdict stands, for a file that could not be reviewed."""

CHUNK = 4
"""Jobs handed over together: enough that handing over costs little, few enough to share out. Source: our choice."""

AHEAD = 32
"""Chunks handed over before the first is back; no more are in memory, however many jobs there are. Source: our choice."""


@record
class Reviewed:
    """One of many jobs, as plain data that can be sent between processes.

    path     as it was given
    verdict  "pass", "warn", "open", "fail", or "unreadable"
    data     what `as_records` says of the review; {"file", "error": [problems]} for an unreadable file
    error    text of what is wrong with an unreadable file, None for a job that was reviewed

    >>> from setupcheck import Reviewed, review_many
    >>> one = next(iter(review_many(["nowhere.yaml"])))
    >>> isinstance(one, Reviewed), one.verdict, one.error.split(". ")[0]
    (True, 'unreadable', 'nowhere.yaml: there is no such file')
    """

    path: str
    verdict: str
    data: Mapping[str, Any]
    error: str | None = None


def review_many(
    paths: Iterable[str | os.PathLike[str]],
    executor: Executor | None = None,
    *,
    house: str | Path | None = None,
    on: str | None = None,
    devices: str | Path | None = None,
    chunk: int = CHUNK,
    ahead: int = AHEAD,
) -> Iterator[Reviewed]:
    """Review many jobs; one that cannot be read never stops the rest. Yields in the order of the paths.

    executor  any `concurrent.futures.Executor`, which stays open; without one, one job after another in this process
    chunk, ahead  jobs in one piece of work, pieces handed over at a time: paths may come from an endless source
    house, on, devices  as for `review`, files by their path; they act on every job

    >>> from setupcheck import example, review_many
    >>> [one.verdict for one in review_many([example("sprocket"), "nowhere.yaml"])]
    ['pass', 'unreadable']
    """
    work = partial(
        reviewed,
        house=None if house is None else os.fspath(house),
        on=on,
        devices=None if devices is None else os.fspath(devices),
    )
    return in_order(work, lost, (os.fspath(path) for path in paths), executor, chunk=chunk, ahead=ahead)


def reviewed(path: str, *, house: str | None, on: str | None, devices: str | None) -> Reviewed:
    """One job as plain data. Whatever goes wrong with it becomes a record, never an error."""
    from setupcheck.flow import review
    from setupcheck.report.json import as_data

    def judged() -> Reviewed:
        found: Review = review(path, house=house, on=on, devices=devices)
        return Reviewed(path, found.verdict, as_data(found))

    return guarded(judged, path)


def guarded(work: Callable[[], T], path: str) -> T | Reviewed:
    """What `work` gives for a job, or the record of why there is none."""
    try:
        return work()
    except SetupcheckError as wrong:
        return unreadable(path, wrong)
    except Exception as fault:  # of this program: the other jobs are not to suffer for it
        return lost(path, fault)


def unreadable(path: str, wrong: SetupcheckError) -> Reviewed:
    """The record of a file that cannot be reviewed."""
    told: list[dict[str, object]]
    if isinstance(wrong, JobError):
        told = [
            {"at": p.path, "line": p.line, "column": p.column, "problem": p.problem, "hint": p.hint}
            for p in wrong.problems
        ]
    else:
        told = [{"at": "", "line": 0, "column": 0, "problem": str(wrong), "hint": ""}]
    return Reviewed(
        path,
        UNREADABLE,
        {"file": printable(path), "error": told},
        wrong.wrapped(),
    )


def lost(path: str, fault: BaseException) -> Reviewed:
    """The record of a job whose review broke off, by a fault of the program or of the worker that had it."""
    says = printable(f"{type(fault).__name__}: {fault}".splitlines()[0])
    return unreadable(
        path,
        SetupcheckError(f"{printable(path)}: its review broke off ({says}). Review it alone to see why"),
    )


def one_line(data: Mapping[str, Any]) -> str:
    """A record as one line of JSON, without its end: the same keys and values as `setupcheck review --json`.

    >>> one_line({"file": "a.yaml", "error": ["two" + chr(0x2028) + "lines"]})
    '{"file": "a.yaml", "error": ["two\\\\u2028lines"]}'
    """
    text = json.dumps(data, ensure_ascii=False, allow_nan=False)
    if any(
        "\ud800" <= c <= "\udfff" or c in "\x85\u2028\u2029" for c in text
    ):  # no text, or taken for the end of a line
        text = json.dumps(data, allow_nan=False)
    return text


def in_order(
    work: Callable[[str], T],
    lost: Callable[[str, BaseException], T],
    paths: Iterable[str],
    executor: Executor | None,
    *,
    chunk: int,
    ahead: int,
) -> Iterator[T]:
    """`work` of each path in the order given, `chunk` paths in a piece, never more than `ahead` pieces handed over.

    work  must survive pickling, as must what it gives;  lost  what stands for a path whose worker never gave anything
    An executor that breaks loses what it had in hand; the rest is done in this process.
    """
    if executor is None:
        yield from map(work, paths)
        return
    if chunk < 1 or ahead < 1:
        raise ValueError("chunk and ahead are numbers from 1 on")
    from concurrent.futures import BrokenExecutor

    source = iter(paths)
    waiting: deque[tuple[Future[list[T]], list[str]]] = deque()
    piece: list[str] = []  # taken from the source, in nobody's hand yet
    broken = False
    try:
        while True:
            while not broken and len(waiting) < ahead and (piece := list(islice(source, chunk))):
                try:
                    waiting.append((executor.submit(_each, work, piece), piece))
                except BrokenExecutor:
                    broken = True
                    break
                piece = []
            if not waiting:
                break
            future, given = waiting[0]
            try:
                found = future.result()
            except Exception as fault:  # of the engine, each with errors of its own: told of every job it held
                found = [lost(path, fault) for path in given]
            waiting.popleft()
            yield from found
        yield from map(work, piece)
        yield from map(work, source)
    finally:
        for future, _ in waiting:
            with suppress(Exception):  # other engines have reasons of their own to refuse
                future.cancel()


def _each(work: Callable[[str], T], paths: Sequence[str]) -> list[T]:
    """One piece of work; a function of the module, so that it can be sent to another process."""
    return [work(path) for path in paths]
