"""Many jobs in a line each, worst first, and how many of each verdict. A line fits 80 columns."""

from __future__ import annotations

import os
from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING

from setupcheck.errors import cells, printable
from setupcheck.record import record

if TYPE_CHECKING:
    from setupcheck.flow import Review

WIDTH = 80
"""As everywhere in the reports; said again, as a command that leaves the reviews to its workers loads nothing of them."""
WORST_FIRST = ("unreadable", "fail", "open", "warn", "pass")
_VERDICT = max(map(len, WORST_FIRST))
_WIDEST_FILE = 32
"""Columns for the name of a file; of a longer one the end is shown. Source: our choice."""


@record
class Line:
    """One job of many: what is printed of it.

    told   the first finding of its verdict, the tightest requirement of a job that passes, or the first problem of its file
    text   what is printed of it beside its line (its JSON, its whole report); empty where nothing is asked for
    error  what is wrong with an unreadable file
    """

    path: str
    verdict: str
    told: str
    text: str = ""
    error: str = ""


def told_of(found: Review) -> str:
    """The first finding of a job's verdict; of a job that passes its tightest requirement."""
    if found.verdict == "pass":
        return _tightest(found)
    for finding in found.evaluation.findings:
        if finding.verdict == found.verdict:
            at = f" op {finding.op}" if finding.op is not None else ""
            return f"{finding.rule}{at}: {finding.message}"
    for caution in found.evaluation.cautions:
        if caution.severity == "stop-and-check" and not caution.answered:
            at = f" op {caution.op}" if caution.op is not None else ""
            return f"{caution.id}{at}: {caution.text}"
    return "nothing was judged"


def _tightest(found: Review) -> str:
    from setupcheck.report.wording import title_of

    titles = {scope.key: title_of(scope) for scope in found.book.instances("stack")}
    shares = [(one.margin_share, key) for key, one in found.results.items() if one.margin_share is not None]
    if not shares:
        return "no requirement with a limit"
    share, key = min(shares)
    return f"{share * 100.0:.0f} % left: {titles[key]}"


def summary(lines: Sequence[Line], skipped: Sequence[str] = ()) -> list[str]:
    """A line a job, worst first and then in the order given, what was skipped, and the counts with the folder of all.

    >>> made = [Line("drawer/a.yaml", "pass", "9 % left: mid-plane"), Line("drawer/b.yaml", "fail", "HOLD-001 op 30: x")]
    >>> print(*summary(made), sep="\\n")
    fail        HOLD-001 op 30: x    b.yaml
    pass        9 % left: mid-plane  a.yaml
    <BLANKLINE>
    2 jobs in drawer: 1 fail, 1 pass
    """
    folder = _folder_of([*(one.path for one in lines), *skipped])
    return [
        *_jobs(lines, folder),
        *(skipped_line(_inside(folder, path)) for path in skipped),
        *([""] if lines or skipped else []),
        counts_line(lines, skipped, folder),
    ]


def _folder_of(paths: Sequence[str]) -> str:
    """The folder that all of several files stand in, as it was written; empty where they share none."""
    try:
        return os.path.commonpath([os.path.dirname(path) for path in paths]) if len(paths) > 1 else ""  # noqa: PTH120
    except ValueError:  # some from the root, some not; two drives
        return ""


def _inside(folder: str, path: str) -> str:
    return os.path.relpath(path, folder) if folder else path


def _jobs(lines: Sequence[Line], folder: str) -> Iterator[str]:
    names = [_end_of(printable(_inside(folder, one.path)), _WIDEST_FILE) for one in lines]
    room = WIDTH - _VERDICT - 2 - 2 - max(map(cells, names), default=0)
    told = [_start_of(" ".join(printable(one.told).split()), room) for one in lines]
    column = max(map(cells, told), default=0)
    rows = sorted(zip(lines, told, names, strict=True), key=lambda row: WORST_FIRST.index(row[0].verdict))
    for one, says, name in rows:
        yield f"{one.verdict:<{_VERDICT}}  {says}{' ' * (column - cells(says))}  {name}"


def skipped_line(path: str) -> str:
    """That a file of a folder is no job."""
    reason = "no key `setupcheck`"
    return f"{'skipped':<{_VERDICT}}  {reason}  {_end_of(printable(path), WIDTH - _VERDICT - len(reason) - 4)}"


def counts_line(lines: Sequence[Line], skipped: Sequence[str] = (), folder: str = "") -> str:
    """`12 jobs in drawer: 1 unreadable, 2 fail, 9 pass; 1 file skipped`."""
    each = [(sum(one.verdict == word for one in lines), word) for word in WORST_FIRST]
    told = ", ".join(f"{number} {word}" for number, word in each if number)
    files = f"; {len(skipped)} {'file' if len(skipped) == 1 else 'files'} skipped" if skipped else ""
    where = f" in {_end_of(printable(folder), _WIDEST_FILE)}" if folder else ""
    return f"{len(lines)} {'job' if len(lines) == 1 else 'jobs'}{where}{': ' if told else ''}{told}{files}"


def _start_of(text: str, room: int) -> str:
    """Text cut to its room [columns]."""
    if cells(text) <= room:
        return text
    while cells(text) > room - 1:
        text = text[:-1]
    return text.rstrip(" ,;:") + "…"


def _end_of(text: str, room: int) -> str:
    """The end of a path that fits its room [columns]."""
    if cells(text) <= room:
        return text
    while cells(text) > room - 1:
        text = text[1:]
    return "…" + text
