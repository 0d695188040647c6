"""Overlays made in their good jobs and reviewed: what spoke, and was it the rule that the slip deserves?"""

from __future__ import annotations

import copy
import json
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cache

from setupcheck.errors import JobError
from setupcheck.flow import Review, load_job, review, rules
from setupcheck.jobfile.changing import changed
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.shipped import shipped
from tests.catch.table import LEVELS, READER, Overlay, slips

RIGHT, OTHER, MISSED, WAITS = "caught by the right rule", "caught by another", "missed", "waiting for their rule"


@dataclass(frozen=True)
class Caught:
    """What became of one overlay: how it was caught, and all that spoke, (rule, instance, verdict)."""

    overlay: Overlay
    how: str
    spoke: tuple[tuple[str, str, str], ...]


@cache
def good(job: str) -> LoadedJob:
    """A shipped job as it is."""
    return load_job(shipped(f"jobs/{job}.yaml"))


def without(loaded: LoadedJob, keys: Iterable[str]) -> LoadedJob:
    """The job with entries taken out, read again. JSON is YAML too, and keeps everything but the comments.

    Raises: JobError.
    """
    data = copy.deepcopy(loaded.tree.data)
    for key in keys:
        *way, last = loaded.loc(key)
        node: object = data
        try:
            for step in way:
                node = node[step]  # type: ignore[index]
            del node[last]  # type: ignore[attr-defined]
        except (KeyError, IndexError, TypeError):
            raise AssertionError(f"{loaded.file} has no {key} to take out; change the overlay with the job") from None
    return read_job_text(json.dumps(data, ensure_ascii=False), loaded.file)


def made(overlay: Overlay) -> LoadedJob:
    """The good job with the slip in it.

    Raises: JobError where the reader refuses it.
    """
    loaded = good(overlay.of)
    loaded = without(loaded, overlay.takes) if overlay.takes else loaded
    return changed(loaded, overlay.sets) if overlay.sets else loaded


def spoken(found: Review) -> tuple[tuple[str, str, str], ...]:
    """All findings that do not pass."""
    return tuple((f.rule, f.at, f.verdict) for f in found.evaluation.findings if f.verdict != "pass")


def waits(overlay: Overlay) -> bool:
    """Is the rule of an overlay still to come?"""
    return overlay.rule != READER and overlay.rule not in {rule.id for rule in rules().rules}


def judge(overlay: Overlay) -> Caught:
    """One overlay made and reviewed, unless the book does not have its rule yet."""
    if waits(overlay):
        return Caught(overlay, WAITS, ())
    try:
        spoke = spoken(review(made(overlay)))
    except JobError as refused:
        words = " ".join(f"{p.path}: {p.problem} {p.hint}" for p in refused.problems)
        right = bool(overlay.says) and overlay.says in words
        return Caught(overlay, RIGHT if right else OTHER, (("reader", "", words),))
    if not spoke:
        return Caught(overlay, MISSED, ())
    level = LEVELS.index(slips()[overlay.slip].level)
    right = any((rule, at) == (overlay.rule, overlay.at) and verdict in LEVELS[level:] for rule, at, verdict in spoke)
    return Caught(overlay, RIGHT if right else OTHER, spoke)


def false_alarms(jobs: Sequence[str]) -> tuple[tuple[str, str, str, str], ...]:
    """What speaks in the good jobs as they are: (job, rule, instance, verdict)."""
    return tuple((job, *one) for job in jobs for one in spoken(review(good(job))))
