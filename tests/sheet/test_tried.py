"""What the sheet says may be accepted of heats, joint sizes and angles as set: typed in, there the findings turn.

Trials are made on the typed job; here the same value goes the other way, as text through `--set` and the reader.
"""

from __future__ import annotations

import math
import re
from dataclasses import replace
from functools import cache
from pathlib import Path

import pytest

from setupcheck.allowed import FINEST, NO_ROUTE, Allowed, allowed, entry_of
from setupcheck.flow import Review, review
from setupcheck.jobfile.changing import Change, changed
from setupcheck.quantities.entries import node_at
from setupcheck.quantities.trial import with_entry
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
    entry = entry_of(slipped, "setups.40.head.tilt")
    right = found(WHEEL, "setups.40.head.tilt")
    assert entry is not None
    assert right is not None
    told = allowed(slipped, entry)
    assert (told.low, told.high) == pytest.approx((right.low, right.high), abs=2.0 * FINEST["angle"])


def test_what_the_planner_has_waived_sets_no_end() -> None:
    """The end float fails nothing here; at the limit of MESH-003 it is a warning, and waived it limits the box no longer."""
    loose = [Change("worm.end_float", "20 um"), Change("waive", "[{rule: MESH-003, at: mesh, reason: as found}]")]
    waived = review(changed(judged(WHEEL).loaded, loose))
    assert "waived" in {f.verdict for f in waived.evaluation.findings if f.rule == "MESH-003"}
    entry = entry_of(waived, "worm.end_float")
    assert entry is not None
    assert "MESH-003" not in allowed(waived, entry).by_high


def test_a_range_is_not_told_while_what_hears_of_it_is_open() -> None:
    unknown = review(changed(judged(WHEEL).loaded, [Change("parts.wheel.material", "unobtainium")]))
    told = Boxes(unknown).tried.accept("parts.wheel.surfaces.bore.diameter")
    assert told.what == "cannot be told"
    assert re.match(r"while this is open: [A-Z]+-\d{3} ", told.by)


def test_a_value_with_which_the_route_cannot_be_walked_is_not_let_through() -> None:
    """No rule speaks where there is no route; that is no pass. Beyond 2 um here a direction is named that is not there yet."""
    loaded, path = judged(WHEEL).loaded, "setups.30.cut.throat.error"
    entry = entry_of(judged(WHEEL), path)
    assert entry is not None
    lost = with_entry(loaded, ("setups.20.hold.centre.runout",), measured=0.001, high_at="tooth 3")
    told = allowed(judged(WHEEL), replace(entry, with_=lambda value: entry.with_(value) if value < 0.002 else lost))
    assert told.high == pytest.approx(0.002, abs=2.0 * FINEST["error"])
    assert (told.by_low, told.by_high) == ((), (NO_ROUTE,))
