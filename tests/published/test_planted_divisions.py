"""Planted division tests: what is planted lies inside what is told, about as often as 95 % says, and slips never pass.

The files come from `division_files`, which shares no code with the program. 200 draws scatter a share of 0.95 by 0.015, so
0.90 to 0.99 is what an honest 95 % gives; an interval that is told too narrow or far too wide fails.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Callable
from pathlib import Path

import pytest

from setupcheck.division.readings import read_test
from setupcheck.division.reduction import reduce
from setupcheck.division.results import Reduced

from .division_files import ARCSEC, Shop, as_circle, as_deviations, one_flank, pitch_off, rows, stations

DRAWS = 200
SLIPS = 30
FEWEST, MOST = 0.90, 0.99
THERE_AND_BACK = [(1, 1), (1, -1)]
TWO_RUNS = [*THERE_AND_BACK, (2, 1), (2, -1)]


def read(folder: Path, text: str) -> Reduced:
    file = folder / "test.csv"
    file.write_text(text, encoding="utf-8", newline="")
    return reduce(
        read_test(file),
        count=72,
        worm_ratio=72.0,
        radius=54.0,
        pressure_angle=math.radians(20.0),
        head_ratio=40.0,
    )


def held(shop: Shop, found: Reduced) -> Counter[str]:
    """Which of the planted values lie inside what is told."""
    e, waves = found.eccentric, {w.harmonic: w for w in found.waves}
    assert e is not None and found.drift is not None and found.reversal is not None
    yes = Counter[str]()
    yes["eccentricity"] = int(e.amount.low <= shop.e <= e.amount.high)
    away = abs((e.direction - math.radians(shop.phi) + math.pi) % math.tau - math.pi)
    yes["direction"] = int(e.within is None or away <= e.within)
    yes["drift"] = int(found.drift.low <= shop.drift * ARCSEC <= found.drift.high)
    yes["reversal"] = int(found.reversal.low <= shop.reversal * ARCSEC <= found.reversal.high)
    yes["oval"] = int(waves[2.0].length.low <= shop.second * ARCSEC <= waves[2.0].length.high)
    if 72.0 in waves:
        worm = waves[72.0].length
        yes["worm"] = int(worm.low <= shop.worm * ARCSEC <= worm.high)
        away = abs((worm.direction - math.radians(shop.worm_at) + math.pi) % math.tau - math.pi)
        yes["worm's direction"] = int(worm.within is None or away <= worm.within)
    return yes


def on_the_work(shop: Shop) -> str:
    """A theodolite on the work, both faces, 24 stations and two crank turns in eighths, two runs there and back."""
    at = stations(24, 8, (0.0, 120.0))
    # the file's worm angle counts with the work turned; planted in the frame of the work, so it must come back there
    return as_circle(shop, rows(shop, TWO_RUNS, at, turned=True), orientation=33.0)


def twelve(shop: Shop) -> str:
    """Twelve stations there and back, deviations, the first again at both ends."""
    return as_deviations(rows(shop, THERE_AND_BACK, stations(12), turned=False), column="angle_deg")


@pytest.mark.parametrize(
    ("made", "more"),
    [(on_the_work, {"collimation": 6.0}), (twelve, {}), (twelve, {"teeth": 1.0, "e": 0.003})],
    ids=["on-the-work", "twelve", "teeth-stray"],
)
def test_what_was_planted_lies_inside_what_is_told(
    made: Callable[[Shop], str], more: dict[str, float], tmp_path: Path
) -> None:
    yes: Counter[str] = Counter()
    opened = 0
    for seed in range(DRAWS):
        shop = Shop(seed, **more)  # type: ignore[arg-type]
        found = read(tmp_path, made(shop))
        opened += found.verdict == "open"
        yes += held(shop, found)
    shares = {what: n / DRAWS for what, n in yes.items()}
    wide = (
        {"drift", "reversal"} if "teeth" in more else set()
    )  # the teeth's own errors cancel in these, and are counted
    assert {} == {what: share for what, share in shares.items() if not FEWEST <= share <= MOST and what not in wide}
    assert all(shares[what] >= FEWEST for what in wide)
    assert opened <= 0.08 * DRAWS  # files without fault are not refused


def test_a_ring_without_eccentricity_is_told_to_have_little(tmp_path: Path) -> None:
    nothing = 0
    for seed in range(SLIPS):
        found = read(tmp_path, twelve(Shop(seed, e=0.0, second=0.0, worm=0.0))).eccentric
        assert found is not None
        assert found.amount.high < 0.0007
        nothing += found.amount.low == 0.0
        assert (found.within is None) == (found.amount.low == 0.0) or found.within is None
    assert nothing >= 0.85 * SLIPS


SLIP = {
    "a station a tooth off in one run": {"pitch": 5.0, "at": 120.0, "later": False, "runs": (1,)},
    "every later station a tooth off": {"pitch": 5.0, "at": 120.0, "later": True, "runs": (1,)},
    "a station a hole of the plate off": {"pitch": 0.02, "at": 120.0, "later": False, "runs": (1,)},
    "every later station a hole off": {"pitch": 0.02, "at": 210.0, "later": True, "runs": (1,)},
}


@pytest.mark.parametrize("slip", SLIP)
def test_a_slip_of_counting_is_never_a_confident_answer(slip: str, tmp_path: Path) -> None:
    for seed in range(SLIPS):
        shop = Shop(seed)
        found = rows(shop, THERE_AND_BACK, stations(24), turned=False)
        pitch_off(found, **SLIP[slip])  # type: ignore[arg-type]
        told = read(tmp_path, as_deviations(found, column="angle_deg"))
        assert "open" == told.verdict
        if SLIP[slip]["pitch"] == 5.0:  # named as whole pitches, and the answer without them is the planted one
            assert {1} == {abs(w.pitches) for w in told.whole}
            assert told.eccentric is not None
            assert shop.e == pytest.approx(told.eccentric.amount.value, abs=0.0005)
        else:
            assert told.flags or told.steps


def test_the_lines_of_a_missed_tooth_are_named(tmp_path: Path) -> None:
    found = rows(Shop(1), THERE_AND_BACK, stations(24), turned=False)
    pitch_off(found, pitch=5.0, at=120.0, later=False, runs=(1,))
    told = read(tmp_path, as_deviations(found, column="angle_deg"))
    # station 120 is the ninth of the way there and the seventeenth of the way back, below one line of names
    assert [(10, 10), (43, 43)] == [(w.first_line, w.last_line) for w in told.whole]


@pytest.mark.parametrize("bend", [3.0, 10.0, 30.0])
def test_a_bent_drift_is_in_the_interval_or_makes_it_open(bend: float, tmp_path: Path) -> None:
    inside = 0
    for seed in range(SLIPS):
        shop = Shop(seed, bend=bend)
        two_ways = read(tmp_path, twelve(shop))
        yes = held(shop, two_ways)
        inside += two_ways.verdict == "open" or bool(yes["eccentricity"] and yes["direction"])
        one_way = read(tmp_path, as_deviations(one_flank(Shop(seed, bend=bend), stations(36)), column="angle_deg"))
        assert "open" == one_way.verdict  # one pass cannot show the bend
    assert inside >= 0.8 * SLIPS  # two intervals of 95 % in 30 draws


def test_flanks_tell_an_eccentric_ring_from_dividing(tmp_path: Path) -> None:
    eccentric = Counter(read(tmp_path, twelve(Shop(seed))).eccentric.looks for seed in range(SLIPS))  # type: ignore[union-attr]
    assert eccentric["eccentric"] >= 0.85 * SLIPS
    assert not eccentric["division"]

    def divided(seed: int) -> Reduced:
        # the same wave on both flanks: no pressure angle between them
        return read(tmp_path, twelve(Shop(seed, alpha=0.0)))

    dividing = Counter(divided(seed).eccentric.looks for seed in range(SLIPS))  # type: ignore[union-attr]
    assert dividing["division"] >= 0.85 * SLIPS
    assert not dividing["eccentric"]
