"""What the sheet says may be accepted of heats, joint sizes and angles as set: typed in, there the findings turn.

Trials are made on the typed job; here the same value goes the other way, as text through `--set` and the reader.
"""

from __future__ import annotations

import math
from functools import cache
from pathlib import Path

import pytest

from setupcheck.allowed import FINEST, Allowed, allowed, entry_at
from setupcheck.flow import Review, review
from setupcheck.jobfile.changing import Change, changed
from setupcheck.quantities.entries import node_at
from setupcheck.report.sheet.boxes import Boxes
from setupcheck.rulebook import VERDICTS
from setupcheck.shipped import shipped

JOBS = [
    shipped(f"jobs/{name}.yaml")
    for name in (
        "bearing-ring-seat",
        "bevel-pinion-blank",
        "coupling-hub",
        "index-plate",
        "pressed-bush",
        "rotator-worm-wheel",
    )
]
"""Between them every kind of value that is tried; the other jobs repeat them and take as long again."""
UNIT = {
    "size": ("mm", 1.0),
    "error": ("mm", 1.0),
    "most": ("mm", 1.0),
    "angle": ("deg", 180.0 / math.pi),
    "heat": ("degC", 1.0),
}


@cache
def judged(job: Path) -> Review:
    return review(job)


@cache
def boxes(job: Path) -> Boxes:
    return Boxes(judged(job))


def keys(job: Path) -> list[str]:
    made = boxes(job)
    rows = [
        *made.incoming(),
        *(row for setup in judged(job).loaded.job.setups for row in made.of_setup(setup)),
        *made.finished(),
    ]
    return list(dict.fromkeys(row.key for row in rows if row.key not in made.accept))


def found(job: Path, key: str) -> Allowed | None:
    boxes(job).tried.accept(key)
    return boxes(job).tried.ranges.get(key)


def typed(job: Path, one: Allowed, value: float) -> Review:
    node = node_at(judged(job).loaded, one.path)
    if one.kind == "time":
        return review(changed(judged(job).loaded, [Change(one.path, f"{value:.9f} s")]))
    unit, factor = UNIT[one.kind]
    text = f"{value * factor:.9f} {unit}"
    if isinstance(node, tuple):
        return review(changed(judged(job).loaded, [Change(one.path, f"[{node[0]:.9f} mm, {text}]")]))
    if isinstance(node, float | int):
        return review(changed(judged(job).loaded, [Change(one.path, text)]))
    known = getattr(node, "uncertainty", None) or 0.0
    return review(
        changed(
            judged(job).loaded,
            [Change(f"{one.path}.measured", text), Change(f"{one.path}.uncertainty", f"{known:.9f} mm")],
        )
    )


def rank(one: Review, name: str) -> int:
    """The worst that a rule, or a requirement at its worst, says; lower is worse."""
    result = one.results.get(name)
    if result is not None and result.margin is not None:
        return VERDICTS.index("pass" if result.margin >= 0.0 else "fail")
    return min((VERDICTS.index(f.verdict) for f in one.evaluation.findings if f.rule == name), default=len(VERDICTS))


@pytest.mark.parametrize("job", JOBS, ids=lambda job: job.stem)
def test_at_its_ends_a_value_still_does_and_a_little_beyond_something_says_worse(job: Path) -> None:
    ends = 0
    for key in keys(job):
        one = found(job, key)
        if one is None or one.lost:
            continue
        for way, end, by in ((-1.0, one.low, one.by_low), (1.0, one.high, one.by_high)):
            if not math.isfinite(end):
                continue
            ends += 1
            out = way * FINEST[one.kind]
            assert by, key
            at_plan, kept, over = (typed(job, one, value) for value in (one.planned, end - 0.01 * out, end + 2.0 * out))
            assert all(rank(kept, name) >= min(rank(at_plan, name), VERDICTS.index("warn")) for name in by), (key, end)
            assert any(rank(over, name) < rank(kept, name) for name in by), (key, end, by)
    assert ends, "a job of which no value but those with gates is limited tells nothing here"


def test_every_box_says_what_may_be_accepted() -> None:
    for job in JOBS:
        made = boxes(job)
        rows = [
            *made.incoming(),
            *(r for setup in judged(job).loaded.job.setups for r in made.of_setup(setup)),
            *made.finished(),
        ]
        assert not [row.key for row in rows if not row.accept.what]


WHEEL = shipped("jobs/rotator-worm-wheel.yaml")


def test_heat_and_sizes_of_a_joint_are_told_with_the_rule_that_sets_each_end() -> None:
    """175 degC planned; tempering sets the top, twenty degrees in hand above the least the bottom."""
    heat = boxes(WHEEL).tried.accept("setups.70.join.heat.hub")
    assert heat.what == "171 to 190 degC"
    assert [name in heat.by for name in ("HEAT-003", "HEAT-002")] == [True, True]
    bore = boxes(WHEEL).tried.accept("parts.wheel.surfaces.bore.diameter")
    assert bore.by.endswith("beyond its own limits only if the planner agrees")


def test_what_nobody_looks_at_says_so() -> None:
    assert boxes(WHEEL).tried.accept("setups.30.cut.throat.error").what == "no rule looks at it"
    bevel = boxes(shipped("jobs/bevel-pinion-blank.yaml"))
    assert bevel.tried.accept("parts.pinion.surfaces.bore.diameter").what == "no rule looks at it: keep its limits"


def test_a_value_that_fails_as_planned_is_told_where_it_would_do() -> None:
    """A head set four degrees where the lead angle asks for less: the range is that of the lead angle, not of the slip."""
    slipped = review(changed(judged(WHEEL).loaded, [Change("setups.40.head.tilt", "4 deg")]))
    entry = entry_at(slipped.loaded, "setups.40.head.tilt")
    right = found(WHEEL, "setups.40.head.tilt")
    assert entry is not None
    assert right is not None
    told = allowed(slipped, entry)
    assert (told.low, told.high) == pytest.approx((right.low, right.high), abs=2.0 * FINEST["angle"])
