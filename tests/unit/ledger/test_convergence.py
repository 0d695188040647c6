"""Draws come nearer to the exact value with their number, by the standard error that is told beside the chance.

Exact values, from geometry and arithmetic alone: a point anywhere in a disc of radius b lies within r of the middle with
probability (r/b)^2; of two steps of equal length in directions nobody knows, the sum is at most one step long with
probability 1/3 (the angle between them is 120 degrees or more); the sum of two lengths anywhere within +-b is below t
with probability 1 - (2 b - t)^2 / (8 b^2) for t >= 0; a length cut at three sigma is below s sigma by erf alone.
"""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy as np
import pytest
from scipy import stats

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import TRUNCATION, Cause
from setupcheck.ledger.combine import Combined, combine
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Figure, Length, Vector

COUNTS = (500, 2_000, 8_000, 32_000)
STREAMS = 60
"""Figures alike but for the names of their causes, so that each has draws of its own."""
ALMOST_NEVER = 1e-4
"""How seldom a right error may be called wrong. All streams are fixed, so a test that passes once passes always."""


def disc(name: str) -> Figure:
    return Vector((Account.of(Cause(f"{name} disc", "disc", high=0.02)),), 2.0)


def two_steps(name: str) -> Figure:
    one, two = (Account.of(Cause(f"{name} step {i}", "ring", high=0.01)) for i in "ab")
    return Vector((one + two,), 1.0)


def two_lengths(name: str) -> Figure:
    one, two = (Account.of(Cause(f"{name} length {i}", "length", high=0.01)) for i in "ab")
    return Length(one - two)


def reading(name: str) -> Figure:
    return Length(Account.of(Cause(f"{name} reading", "gauss", spread=0.004)))


def cut_normal(z: float) -> float:
    whole = math.erf(TRUNCATION / math.sqrt(2.0))
    return 0.5 + 0.5 * math.erf(z / math.sqrt(2.0)) / whole


CASES: dict[str, tuple[Callable[[str], Figure], float, float]] = {
    "a disc": (disc, 0.03, (0.03 / 0.04) ** 2),
    "two steps": (two_steps, 0.01, 1.0 / 3.0),
    "two lengths": (two_lengths, 0.012, 1.0 - (0.02 - 0.012) ** 2 / (8.0 * 0.01**2)),
    "a reading": (reading, 0.005, cut_normal(1.25)),
}


def drawn(case: str, stream: int, trials: int) -> Combined:
    make, limit, _ = CASES[case]
    return combine(make(f"{case} {stream}"), Draws(trials), low=None, high=limit, confidence=0.95)


@pytest.mark.parametrize("trials", COUNTS)
@pytest.mark.parametrize("case", CASES)
def test_the_chance_strays_from_the_exact_one_as_far_as_its_standard_error_says(case: str, trials: int) -> None:
    exact = CASES[case][2]
    strays = []
    for stream in range(STREAMS):
        found = drawn(case, stream, trials)
        assert found.chance is not None and found.chance_error
        assert found.chance_error == pytest.approx(math.sqrt(found.chance * (1.0 - found.chance) / trials), rel=1e-9)
        strays.append((found.chance - exact) / found.chance_error)
    squares = float(np.sum(np.square(strays)))
    # neither further off than told, nor suspiciously near: both tails of the sum of squares of normal numbers
    assert stats.chi2.ppf(ALMOST_NEVER, STREAMS) < squares < stats.chi2.ppf(1.0 - ALMOST_NEVER, STREAMS)
    # and to neither side: the mean of so many strays
    assert abs(np.mean(strays)) < stats.norm.isf(ALMOST_NEVER) / math.sqrt(STREAMS)


@pytest.mark.parametrize("case", CASES)
def test_four_times_the_draws_halve_the_error(case: str) -> None:
    exact = CASES[case][2]
    off = [
        math.sqrt(np.mean([(float(drawn(case, s, n).chance or 0.0) - exact) ** 2 for s in range(STREAMS)]))
        for n in COUNTS
    ]
    slope = np.polyfit(np.log(COUNTS), np.log(off), 1)[0]
    # an rms of 60 strays is known to 1/sqrt(2 60) = 9 %; over a factor of 64 in draws that leaves the slope within 0.03
    assert slope == pytest.approx(-0.5, abs=4.0 * 0.03)


@pytest.mark.parametrize("trials", COUNTS)
def test_the_likely_value_of_a_disc_comes_to_its_exact_one(trials: int) -> None:
    """0.95 of a disc lie within sqrt(0.95) of its radius; an end strays by sqrt(p q / n) over the density there."""
    exact, density = 0.04 * math.sqrt(0.95), 2.0 * math.sqrt(0.95) / 0.04
    strays = [
        (drawn("a disc", stream, trials).likely.high - exact) * density / math.sqrt(0.95 * 0.05 / trials)
        for stream in range(STREAMS)
    ]
    squares = float(np.sum(np.square(strays)))
    assert stats.chi2.ppf(ALMOST_NEVER, STREAMS) < squares < stats.chi2.ppf(1.0 - ALMOST_NEVER, STREAMS)


def test_a_chance_that_no_draw_missed_still_has_an_error() -> None:
    """Of 1000 draws none may pass a limit just under the worst case; it is not told as certain to the last digit."""
    found = combine(two_steps("none missed"), Draws(1000), low=None, high=0.01999999, confidence=0.95)
    assert found.chance is not None and found.chance_error is not None
    assert found.chance_error >= 1.0 / 1000.0
