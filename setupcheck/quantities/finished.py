"""Which operations are done, by the job's own word: `done: 40` is the last one that is finished."""

from __future__ import annotations

import re

from setupcheck.jobfile.setups import Job, Setup

_OF_SETUP = re.compile(r"setups\.(\d+)(?:\.|$)")


def finished(job: Job) -> frozenset[int]:
    """Operations up to the last one that is done, in the order of the file; none where the job does not say.

    Source: the job file.
    """
    ops = [setup.op for setup in job.setups]
    return frozenset(ops[: ops.index(job.done) + 1]) if job.done in ops else frozenset()


def to_come(job: Job) -> tuple[Setup, ...]:
    """Setups that are still to come."""
    over = finished(job)
    return tuple(setup for setup in job.setups if setup.op not in over)


def op_of(path: str) -> int | None:
    """Operation that a path of the job file belongs to; None for parts, machines and cutters."""
    found = _OF_SETUP.match(path)
    return int(found[1]) if found else None
