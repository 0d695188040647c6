"""The work of one job among many, sent to another process as it stands: no typer here, as no worker needs it."""

from __future__ import annotations

import gc
import os
import signal
import threading

from setupcheck.many import UNREADABLE, Reviewed, guarded, one_line, reviewed
from setupcheck.report.summary import Line, told_of


def lined(
    path: str, *, house: str | None, beside: bool, on: str | None, record: str | None, as_json: bool, everything: bool
) -> Line:
    """The line of one job, with its JSON or its whole report where that is asked for.

    beside  whether a house file that lies beside the job acts, where `house` names none
    """

    def judged() -> Line:
        from setupcheck.flow import house_beside, review

        lies = house_beside(path) if house is None and beside else house
        if as_json:
            one = reviewed(path, house=None if lies is None else str(lies), on=on, devices=record)
            return Line(path, one.verdict, "", one_line(one.data), one.error or "")
        found = review(path, house=lies, on=on, devices=record)
        if everything:
            from setupcheck.report.text import as_text

            return Line(path, found.verdict, told_of(found), as_text(found, everything=True))
        return Line(path, found.verdict, told_of(found))

    one = guarded(judged, path)
    return without_verdict(one, as_json=as_json) if isinstance(one, Reviewed) else one


def without_verdict(one: Reviewed, *, as_json: bool) -> Line:
    """The line of a file that could not be reviewed."""
    first = one.data["error"][0]
    at = f"line {first['line']}: " if first["line"] else ""
    return Line(one.path, UNREADABLE, f"{at}{first['problem']}", one_line(one.data) if as_json else "", one.error or "")


def started() -> None:
    """First act of a worker: Ctrl-C is for the command, which lets its workers end; a worker never outlives it."""
    from multiprocessing import parent_process

    signal.signal(signal.SIGINT, signal.SIG_IGN)
    gc.set_threshold(200_000)  # as in the command
    parent = parent_process()
    if parent is not None:

        def leave_with_it() -> None:
            parent.join()
            os._exit(1)

        threading.Thread(target=leave_with_it, daemon=True).start()


def ready() -> None:
    """Nothing: what a worker is started with."""
