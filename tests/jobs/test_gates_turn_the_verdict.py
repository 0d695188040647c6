"""Every gate of every shipped job, typed in as the measured value: its figure is where the verdict turns."""

from __future__ import annotations

import math
from functools import cache
from pathlib import Path

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.changing import Change, changed
from setupcheck.report.gates import ends_of, lengths_of
from setupcheck.report.wording import on_the_dial
from setupcheck.shipped import shipped

JOBS = sorted(shipped("jobs").glob("*.yaml"))
NOISE = 1e-9
"""What the sum of a worst case may be off by rounding [base unit]."""


@cache
def judged(job: Path) -> Review:
    return review(job)


def with_typed(job: Path, keys: tuple[str, ...], value: str) -> Review:
    return review(changed(judged(job).loaded, [Change(key, value) for key in keys]))


def margins(found: Review) -> dict[str, float]:
    return {key: r.margin for key, r in found.results.items() if r.margin is not None}


def inside(found: Review) -> set[str]:
    return {key for key, margin in margins(found).items() if margin >= -NOISE}


def not_passed(found: Review) -> set[str]:
    """Requirements of which a rule on stacks says something else than pass."""
    return {f.key for f in found.evaluation.findings if f.rule.startswith("STACK-00") and f.verdict != "pass"}


DIALS = [
    pytest.param(j, n, id=f"{j.stem}-{g.keys[0]}") for j in JOBS for n, g in enumerate(judged(j).gates) if g.reading
]


@pytest.mark.parametrize(("job", "number"), DIALS)
def test_the_dial_reading_printed_passes_and_a_thousandth_above_the_exact_one_does_not(job: Path, number: int) -> None:
    before = judged(job)
    gate = before.gates[number]
    assert gate.reading is not None
    shown = on_the_dial(gate.reading, inches=before.book.inches, step=gate.indicator)
    kept = with_typed(job, gate.keys, shown)
    assert inside(before) <= inside(kept), shown
    over = with_typed(job, gate.keys, f"{gate.reading * 1001.0:.9f} um")
    assert margins(before)[gate.by] >= 0.0 > margins(over)[gate.by]
    assert gate.by in not_passed(over)


LENGTHS = [
    pytest.param(j, n, way, id=f"{j.stem}-{g.key}-{'up' if way else 'down'}")
    for j in JOBS
    for n, g in enumerate(lengths_of(judged(j), everything=False))
    for way in (0, 1)
    if math.isfinite((g.low, g.high)[way])
]


@pytest.mark.parametrize(("job", "number", "way"), LENGTHS)
def test_the_length_printed_passes_and_a_little_beyond_the_exact_one_does_not(job: Path, number: int, way: int) -> None:
    before = judged(job)
    gate = lengths_of(before, everything=False)[number]
    by, end = ((gate.by_low, gate.low), (gate.by_high, gate.high))[way]
    kept = with_typed(job, (gate.key,), ends_of(gate, inches=before.book.inches)[way].removeprefix("+"))
    assert inside(before) <= inside(kept)
    beyond = end + (1.0 if way else -1.0) * 0.001 * abs(end - gate.about)
    over = with_typed(job, (gate.key,), f"{beyond * 1000.0:.9f} um")
    assert margins(before)[by] >= 0.0 > margins(over)[by]
    assert by in not_passed(over)
