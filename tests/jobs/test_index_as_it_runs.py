"""Index figures of a wheel whose gaps are worked out exactly: what the cutter's setting adds, judged by cuts with all of it off."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.running import AsItRuns
from setupcheck.quantities.book import Known, Open
from setupcheck.quantities.contact import Drill, run
from setupcheck.quantities.judged import Result
from setupcheck.report.text import as_text
from setupcheck.worm.plunge_gap import Cut

from .test_contact import JOBS, changed, judged, spoken, the_cut
from .worm_jobs import NINETY

GRID = 0.0007
"""What the grid of the map leaves of transmission error [mm] (worm.meshing)."""


def index(found: Review) -> Result | Open:
    scope = next(s for s in found.book.instances("stack") if s.key.startswith("index-within"))
    answer = found.book.get("stack.combined", scope)
    if isinstance(answer, Known):
        assert isinstance(answer.value, Result)
        return answer.value
    assert isinstance(answer, Open)
    return answer


def planned(found: Review) -> tuple[Drill, Cut, str]:
    got = [found.book.get(f"contact.{name}", the_cut(found)) for name in ("drill", "setting", "made")]
    drill, setting, made = (a.value for a in got if isinstance(a, Known))
    assert isinstance(drill, Drill) and isinstance(setting, Cut) and isinstance(made, str)
    return drill, setting, made


@pytest.mark.parametrize("seed", range(3))
def test_settings_off_together_stay_below_the_sum_of_what_each_adds(seed: int) -> None:
    """The exact map of cuts with tilt, mid-plane, depth and turn off at once; each at its bound in one of them."""
    found = judged(JOBS["spindle"])
    result = index(found)
    assert isinstance(result, Result) and isinstance(result.figure, AsItRuns)
    drill, setting, made = planned(found)
    worst: dict[str, float] = {}
    rises: dict[str, float] = {}
    names = ("tilt", "tilt", "offset", "clearance", "turned")
    for name, one, rise in zip(names, result.figure.off, result.figure.rises, strict=True):
        worst[name] = worst.get(name, 0.0) + one.base() + sum(p.up for p in one.pushes())
        rises[name] = rise
    assert all(rise > 0.0 for rise in rises.values())
    rng = np.random.default_rng(seed)
    as_planned = result.figure.planned.mean.real
    for shares in (np.sign(rng.normal(size=4)), rng.uniform(-1.0, 1.0, size=4)):
        off = {name: float(share) * worst[name] for name, share in zip(rises, shares, strict=True)}
        at = replace(setting, **{name: getattr(setting, name) + size for name, size in off.items()})
        error = max(run(drill, setting.radius, made, at, side).transmission_error for side in (1, -1))
        told = as_planned + sum(rises[name] * abs(size) for name, size in off.items())
        assert error <= told + GRID, off


def test_the_ring_alone_is_what_a_job_without_the_exact_gap_is_told() -> None:
    exact = index(judged(JOBS["spindle"]))
    ring = index(judged(changed("spindle", (", contact: exact, error_budget: 10 um", ""))))
    assert isinstance(exact, Result) and isinstance(ring, Result) and isinstance(exact.figure, AsItRuns)
    radius = 60.0
    added = exact.figure.planned.mean.real + sum(
        rise * (one.base() + sum(p.up for p in one.pushes()))
        for one, rise in zip(exact.figure.off, exact.figure.rises, strict=True)
    )
    assert exact.combined.worst.high == pytest.approx(ring.combined.worst.high + 0.5 * added / radius, rel=1e-9)
    assert exact.combined.likely.high < exact.combined.worst.high
    assert exact.combined.likely.high > ring.combined.likely.high


def test_a_mid_plane_insert_is_a_known_part_of_the_index() -> None:
    found = judged(changed("spindle", ("insert: envelope", "insert: mid-plane")))
    result = index(found)
    assert isinstance(result, Result) and isinstance(result.figure, AsItRuns)
    assert result.figure.planned.mean.real == pytest.approx(0.027, abs=0.0005)  # what CUTTER-012 tells
    assert result.combined.worst.high * math.degrees(1) * 3600 > 75.0
    assert "gaps that do not fit the thread even as planned" in as_text(found)


def test_an_insert_turned_in_its_bar_is_told_and_cured() -> None:
    found = judged(changed("spindle", ("turned: 2'", "turned: 40'")))
    assert spoken(found, {"INSERT-007"}) == {"INSERT-007": "warn"}
    finding = next(f for f in found.evaluation.findings if f.rule == "INSERT-007")
    assert "turned in its face by 40.0'" in finding.message
    within = finding.remedy.split("within ")[1].split("'")[0]
    assert spoken(judged(changed("spindle", ("turned: 2'", f"turned: {within}'"))), {"INSERT-007"}) == {}


def test_the_stop_counts_only_where_the_insert_is_swung_round_on_it() -> None:
    grinding = "grinding: {wheel_radius: 1 mm, step: 1 um, form_error: 5 um, stop_error: 3', way: WAY, shank_side: 6 mm, touched_at: 8 mm}"
    turned = {}
    for way in ("swung", "turned-over"):
        text = changed("spindle", ("turned: 2'", f"turned: 2', {grinding.replace('WAY', way)}"))
        found = judged(text)
        answer = found.book.get("contact.turned_error", the_cut(found))
        assert isinstance(answer, Known)
        turned[way] = math.degrees(float(str(answer.value))) * 60.0
    assert turned["turned-over"] == pytest.approx(2.0)
    assert 5.0 < turned["swung"] < 6.0  # 2' in the bar, 3' of the stop and a little more


@pytest.mark.parametrize(
    ("gone", "fill"),
    [
        (", turned: 2'", "cutters.fly.turned"),
        (", shaft_angle_error: 1'", "mesh.shaft_angle_error"),
        (", depth_error: 10 um", "setups.50.cut.teeth.depth_error"),
    ],
)
def test_what_is_not_stated_leaves_the_index_open_and_the_pitch_known(gone: str, fill: str) -> None:
    found = judged(changed("spindle", (gone, "")))
    result = index(found)
    assert isinstance(result, Open) and fill in result.missing
    pitch = next(s for s in found.book.instances("stack") if s.key.startswith("cumulative-pitch"))
    assert isinstance(found.book.get("stack.combined", pitch), Known)


def test_on_a_workpiece_it_counts_over_the_stated_diameter() -> None:
    asked = NINETY.replace(
        "require:\n", "require:\n  - {what: on-workpiece, of: wheel.teeth, on_diameter: 100, at_most: 0.2 mm}\n"
    )
    assert asked != NINETY
    found = review(read_job_text(asked, "job.yaml"))
    scope = next(s for s in found.book.instances("stack") if s.key.startswith("on-workpiece"))
    answer = found.book.get("stack.combined", scope)
    assert isinstance(answer, Known) and isinstance(answer.value, Result)
    figure = answer.value.figure
    assert isinstance(figure, AsItRuns)
    assert figure.ring.factor == pytest.approx(100.0 / 135.0)  # 90 teeth of module 1.5
