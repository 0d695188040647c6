"""Every gate of every shipped job, typed in as the measured value: its figure is where the verdict turns."""

from __future__ import annotations

import math
import re
from functools import cache
from pathlib import Path

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.changing import Change, changed
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.gates import bands_of, ends_of, lengths_of
from setupcheck.report.text import as_text
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


WHEEL = shipped("jobs/rotator-worm-wheel.yaml")
HUB = "setups.50.hold.centre.runout"


def after(*changes: tuple[str, str], job: Path = WHEEL) -> Review:
    return review(changed(judged(job).loaded, [Change(key, value) for key, value in changes]))


def reading(found: Review, key: str) -> float:
    gate = next(g for g in found.gates if g.key == key)
    assert gate.reading is not None
    return gate.reading


def test_a_hold_that_came_out_better_leaves_more_to_the_others() -> None:
    before, better = judged(WHEEL), after((f"{HUB}.measured", "2 um"))
    for key in ("40/centre", "40/square", "50/square"):
        assert reading(better, key) > reading(before, key) + 1e-4
    assert reading(better, "50/centre") == pytest.approx(reading(before, "50/centre"))  # its own does not hear of it
    worse = after((f"{HUB}.measured", "5 um"))
    assert reading(worse, "40/centre") < reading(before, "40/centre") - 1e-4
    stop = "setups.50.hold.stop.error.measured"
    wide, free = (
        next(g for g in lengths_of(x, everything=False) if g.path == "setups.40.hold.stop.error")
        for x in (before, after((stop, "0 um")))
    )
    assert free.low < wide.low - 1e-3
    assert free.high > wide.high + 1e-3


KNOWN = ((f"{HUB}.high_at", "tooth 14"),)


def directions(high_at: str, off: float) -> str:
    """So many degrees beside a direction, as `high_at` takes it."""
    word, _, number = high_at.partition(" ")
    if word == "tooth":
        return f"tooth {(int(number) - 1 + round(off / 5.0)) % 72 + 1}"  # 72 teeth: five degrees each
    return f"{(float(word) + off) % 360.0:g} deg"


@pytest.mark.parametrize("key", ["40/centre", "40/square", "50/square"])
def test_a_band_holds_as_wide_as_it_says_and_not_on_the_other_side(key: str) -> None:
    found = after(*KNOWN)
    gate = next(g for g in found.gates if g.key == key)
    bands = bands_of(found, gate)
    assert bands
    assert [b.within for b in bands] == sorted((b.within for b in bands), reverse=True)
    assert gate.reading is not None
    assert gate.reading < bands[0].reading <= bands[-1].reading

    def missed(at: float, size: float) -> set[str]:
        entry = f"{{measured: {size * 1000.0:.6f} um, high_at: {directions(bands[0].high_at, at)}}}"
        return inside(found) - inside(after(*KNOWN, (gate.paths[0], entry)))

    for band in bands:
        offs = (-band.within, -band.within / 4.0, 0.0, band.within / 4.0, band.within)
        assert not any(missed(5.0 * round(off / 5.0), band.reading) for off in offs), band
        assert any(missed(5.0 * round(off / 5.0), band.reading * 1.03) for off in offs), band
        assert missed(180.0, band.reading)


def test_there_is_no_band_where_nothing_else_has_a_direction() -> None:
    for job in JOBS:
        assert not any(bands_of(judged(job), gate) for gate in judged(job).gates)


def test_the_review_says_where_a_high_spot_may_lie() -> None:
    told = " ".join(as_text(after(*KNOWN)).split())
    assert (
        "op 50, face run-out on seat: up to 13 um (4 um planned), set by backlash-swing at teeth about bearings; up to "
        in told
    )
    assert re.search(
        r"op 40, run-out on hub: up to 4\.9 um \(3 um planned\), .*?; up to [\d.]+ um if it is high within "
        r"\d+ deg of \d+ deg, up to [\d.]+ um within \d+ deg",
        told,
    )


def test_a_known_direction_that_a_turn_takes_away_is_worked_out_on_the_route() -> None:
    """Where the throat was touched nobody knows, so the backlash hears of the hub's run-out as a ring, direction or not."""
    directed = after(("setups.40.hold.centre.runout", "{measured: 3 um, uncertainty: 1 um, high_at: 40 deg}"), *KNOWN)
    gate = next(g for g in directed.gates if g.key == "40/centre")
    backlash = next(one for one in gate.limits if one.by.startswith("backlash."))
    for size, good in ((backlash.high * 0.9999, True), (backlash.high * 1.001, False)):
        entry = f"{{measured: {size * 1000.0:.6f} um, uncertainty: 1 um, high_at: 40 deg}}"
        again = margins(after(("setups.40.hold.centre.runout", entry), *KNOWN))
        assert (again[backlash.by] >= 0.0) is good


def test_a_device_that_only_names_its_typical_reading_has_a_gate_too() -> None:
    found = after((HUB, "{device: four-jaw}"))
    gate = next(g for g in found.gates if g.key == "50/centre")
    assert (0.010, False) == (gate.planned, gate.measured)
    assert gate.reading == pytest.approx(reading(judged(WHEEL), "50/centre") + 1.5e-3)  # without the guard of a reading


def test_a_kept_device_that_a_bought_part_names_too_has_one_gate_with_every_key() -> None:
    kept = "{at_most: 3 um, device: chuck-A, mark: kept}"
    found = after(("setups.40.hold.centre.runout", kept), ("parts.spindle.given[1].runout", kept))
    gate = next(g for g in found.gates if g.key == "40/centre")
    assert gate.keys == ("setups.40.hold.centre.runout.measured", "parts.spindle.given[1].runout.measured")
    assert (gate.op, gate.also) == (40, ())


def test_a_touched_diameter_keeps_its_requirements_within_its_range() -> None:
    gates = [g for g in lengths_of(judged(WHEEL), everything=True) if g.path.endswith(".depth_from")]
    for gate in gates:
        for end, inwards in (
            (gate.low, 1e-5),
            (gate.high, -1e-5),
        ):  # a step of what is typed, so that it is not rounded out
            if math.isfinite(end):
                kept = with_typed(WHEEL, (gate.key,), f"{end + inwards:.6f} mm")
                assert inside(judged(WHEEL)) <= inside(kept)


BUSH = """
setupcheck: 1
title: A bush turned in two holdings, invented
units: mm
parts:
  bush: {surfaces: {bar: {kind: cylinder, diameter: 60, from: -30, to: 40, made: stock}, out: {kind: cylinder, diameter: 50, from: 0, to: 20},
                    end: {kind: face, at: 20, facing: +z, diameter: 50}, bore: {kind: bore, diameter: 20, from: 0, to: 20}, rim: {kind: cylinder, diameter: 40, from: 20, to: 30}}}
machines: {lathe-A: {kind: lathe, axis_runout: 0 um}}
setups:
  - {op: 10, machine: lathe-A, looks_at_tool: +z, hold: {centre: {on: bar, by: three-jaw, at: -20, runout: 0.1 mm}, and_centre: {on: bar, at: 5,
     runout: 0.1 mm}}, cut: {out: {}, end: {}}}
  - {op: 20, machine: lathe-A, looks_at_tool: +z, hold: {centre: {on: out, by: four-jaw, runout: 4 um}, square: {on: end,
     face_runout: 0 um, across: 40}}, cut: {rim: {}}}
  - {op: 30, machine: lathe-A, looks_at_tool: +z, hold: {centre: {on: rim, by: four-jaw, runout: 3 um}, square: {on: end,
     face_runout: 0 um, across: 40}}, cut: {bore: {}}}
require: [{what: run-out, of: bush.bore, about: bush.out, at_most: 8 um}]
"""


def bush(*changes: tuple[str, str]) -> Review:
    return review(changed(read_job_text(BUSH, "bush.yaml"), [Change(key, value) for key, value in changes]))


def test_two_readings_that_add_up_share_their_limit() -> None:
    """By hand: 8 um less the other reading."""
    assert reading(bush(), "20/centre") == pytest.approx(0.005)
    assert reading(bush(), "30/centre") == pytest.approx(0.004)


def test_the_band_of_a_reading_beside_a_known_one_is_that_of_two_vectors() -> None:
    """By hand: 4 um high at 0 deg and r high at phi are together |4 + r exp(i phi)| <= 8, so that at phi = 180 - w
    r = 4 cos w + sqrt(64 - 16 sin(w)^2); 5 deg between the directions tried take cos 2.5 deg from it.
    """
    found = bush(("setups.20.hold.centre.runout", "{measured: 4 um, uncertainty: 0 um, high_at: 0 deg}"))
    gate = next(g for g in found.gates if g.key == "30/centre")
    assert gate.reading == pytest.approx(0.004)
    told = {b.within: b.reading for b in bands_of(found, gate)}
    assert list(told) == [80.0, 45.0, 20.0]
    for within, size in told.items():
        w = math.radians(within)
        by_hand = 4.0 * math.cos(w) + math.sqrt(64.0 - 16.0 * math.sin(w) ** 2)
        assert size * 1000.0 == pytest.approx(by_hand * math.cos(math.radians(2.5)), rel=1e-5)
    assert {b.high_at for b in bands_of(found, gate)} == {"180 deg"}
    told_in_words = " ".join(as_text(found).split())
    assert (
        "up to 4.0 um (3 um planned), set by run-out at bore about out; up to 7.6 um if it is high within 80 deg of 180 deg, up to 10 um within 45 deg, up to 11 um within 20 deg"
        in told_in_words
    )
