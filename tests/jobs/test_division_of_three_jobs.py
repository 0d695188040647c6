"""A spur gear, an index plate and a worm wheel, from the index table over the division test to then and now.

The tests come from `division_files`, which shares no code with the program: 200 draws a job, planted values against the 95 %
intervals that are told (200 draws scatter a share of 0.95 by 0.015).
"""

from __future__ import annotations

import math
import re
from collections import Counter
from dataclasses import dataclass
from pathlib import Path

import pytest

from setupcheck.division.readings import read_test
from setupcheck.division.results import Interval, Reduced
from setupcheck.flow import prepare, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.teeth_read import reduced, teeth_of
from setupcheck.report.index_table import as_index_table
from setupcheck.report.text import as_text
from setupcheck.shipped import shipped

from ..published.division_files import ARCSEC, Shop, as_deviations, rows, stations


@dataclass(frozen=True)
class Case:
    """A job, its teeth or holes, where they are read, what closes its table, and a dial that is read meanwhile."""

    of: str | None
    count: int
    stations: list[float]
    closes: str
    planned: str
    measured: str


CASES = {
    "spur-gear-on-mandrel": Case(
        None, 40, stations(20), "800 holes = 40 turns of the crank", "runout: {at_most: 4 um, device", "runout: {at_most: 4 um, measured: 2 um, uncertainty: 0.4 um, device",
    ),
    "index-plate": Case(
        "plate.holes", 24, stations(24), "24 times 15 deg = 360 deg", "by: indicator, at: 0.3125, runout: 0.2 thou",
        "by: indicator, at: 0.3125, runout: {at_most: 0.2 thou, measured: 0.1 thou, uncertainty: 0.02 thou}",
    ),
    "rotator-worm-wheel": Case(
        None, 72, stations(24, 8, (0.0, 120.0)), "720 holes = 40 turns of the crank", "rests: pushed, runout: 3 um",
        "rests: pushed, runout: {at_most: 3 um, measured: 2 um, uncertainty: 0.3 um}",
    ),
}  # fmt: skip


def text_of(job: str) -> str:
    return shipped(f"jobs/{job}.yaml").read_text(encoding="utf-8")


@pytest.mark.parametrize("job", CASES)
def test_the_index_table_prints_and_closes(job: str) -> None:
    loaded = read_job_text(text_of(job), "job.yaml")
    _, book = prepare(loaded)
    said = " ".join(as_index_table(loaded, book).split())
    assert "The last line is place 1 again" in said
    assert CASES[job].closes in said and "so the table closes" in said


def inside(value: float, told: Interval) -> bool:
    return told.low <= value <= told.high


def held(shop: Shop, found: Reduced, worm: float | None) -> Counter[str]:
    """Which of the planted values lie inside what is told."""
    e, waves = found.eccentric, {w.harmonic: w.length for w in found.waves}
    assert e is not None and found.drift is not None and found.reversal is not None
    yes = Counter[str]()
    yes["eccentricity"] = inside(shop.e, e.amount)
    away = abs((e.direction - math.radians(shop.phi) + math.pi) % math.tau - math.pi)
    yes["direction"] = e.within is None or away <= e.within
    yes["drift"] = inside(shop.drift * ARCSEC, found.drift)
    yes["reversal"] = inside(shop.reversal * ARCSEC, found.reversal)
    yes["oval"] = waves[2.0].low <= shop.second * ARCSEC <= waves[2.0].high
    if worm in waves:
        yes["worm"] = waves[worm].low <= shop.worm * ARCSEC <= waves[worm].high
    return yes


@pytest.mark.parametrize("job", CASES)
def test_planted_errors_are_taken_apart_in_every_job(job: str, tmp_path: Path) -> None:
    case = CASES[job]
    floor, _ = prepare(read_job_text(text_of(job), "job.yaml"))
    teeth = teeth_of(floor, case.of)
    assert case.count == teeth.count
    worm = teeth.worm_ratio or teeth.head_ratio
    assert worm is not None
    yes: Counter[str] = Counter()
    opened = 0
    for seed in range(200):
        shop = Shop(
            seed, ratio=round(worm), radius=teeth.radius, alpha=math.degrees(teeth.pressure_angle or 0.0), noise=0.8
        )
        passes = rows(shop, [(1, 1), (1, -1), (2, 1), (2, -1)], case.stations, turned=False)
        file = tmp_path / "test.csv"
        file.write_text(as_deviations(passes, column="angle_deg"), encoding="utf-8")
        found = reduced(read_test(file), teeth)
        opened += found.verdict == "open"
        yes += held(shop, found, worm)
    shares = {what: n / 200 for what, n in yes.items()}
    assert {} == {what: share for what, share in shares.items() if not 0.90 <= share <= 0.99}
    assert ("worm" in shares) == (job != "spur-gear-on-mandrel")  # 40 turns of the crank on 20 stations: alike at each
    assert opened <= 0.08 * 200


@pytest.mark.parametrize("job", CASES)
def test_a_measured_dial_shows_then_and_now(job: str) -> None:
    case, text = CASES[job], text_of(job)
    assert case.planned in text
    said = as_text(review(read_job_text(text.replace(case.planned, case.measured), "job.yaml")))
    block = re.search(r"^THEN AND NOW.*?(?=\n\n)", said, re.S | re.M)
    assert block is not None
    assert "margin grew by" in " ".join(block[0].split())


def test_what_a_circle_that_does_not_fit_leaves_over_is_in_the_stacks() -> None:
    """72 teeth on 20 holes at 40:1: a step of 11.11 holes; places stand up to 4/9 of a hole beside theirs, 1/800 turn each."""
    found = review(read_job_text(text_of("rotator-worm-wheel").replace("circle: 18", "circle: 20"), "job.yaml"))
    good = review(read_job_text(text_of("rotator-worm-wheel"), "job.yaml"))
    key = "cumulative-pitch.wheel-teeth.spindle-bearings"
    more = found.results[key].combined.worst.high - good.results[key].combined.worst.high
    assert more == pytest.approx(2.0 * 4.0 / 9.0 / 800.0 * math.tau * 54.0)
    assert {"DIVIDE-001", "DIVIDE-014", "STACK-001"} <= {
        f.rule for f in found.evaluation.findings if f.verdict == "fail"
    }
