"""The search for an end: exact where margins are straight, within the finest step where they bend, jump or are not known."""

from __future__ import annotations

import math
from collections.abc import Callable

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.allowed.search import SHORT_OF_IT, _closed_in

FINE = 5e-5
Guess = Callable[[float, float], float | None]


def closed(margin: Callable[[float], float], between: tuple[float, float], guess: Guess) -> tuple[float, int]:
    """Where the margin is found to turn, and how often it was asked."""
    asked = 0

    def bad(value: float) -> tuple[str, ...]:
        nonlocal asked
        asked += 1
        return ("rule",) if margin(value) < 0.0 else ()

    end, by = _closed_in(bad, guess, between, ("before",), FINE)
    assert by in (("rule",), ("before",))
    return end, asked


def chord(margin: Callable[[float], float]) -> Guess:
    def guess(good: float, worse: float) -> float | None:
        here, there = margin(good), margin(worse)
        return good + (worse - good) * here / (here - there)

    return guess


@pytest.mark.parametrize("between", [(0.0, 1.0), (1.0, -2.0)])
def test_a_straight_margin_is_closed_in_by_two_trials(between: tuple[float, float]) -> None:
    turn = between[0] + 0.37 * (between[1] - between[0])

    def margin(value: float) -> float:
        return (turn - value) * math.copysign(3.0, between[1] - between[0])

    end, asked = closed(margin, between, chord(margin))
    assert abs(end - turn) <= 2.0 * SHORT_OF_IT * FINE and margin(end) >= 0.0
    assert asked == 2


@given(
    st.floats(-5.0, 5.0),
    st.floats(0.01, 3.0),
    st.floats(0.02, 0.98),
    st.sampled_from([-1.0, 1.0]),
    st.sampled_from(["bent", "jump", "none", "wrong"]),
)
def test_whatever_the_margin_does_the_end_is_good_and_what_lies_beyond_it_is_not(
    start: float, length: float, share: float, way: float, kind: str
) -> None:
    worse, turn = start + way * length, start + way * share * length

    def margin(value: float) -> float:
        left = way * (turn - value)
        return math.copysign(1.0, left) if kind == "jump" else math.copysign(abs(left) ** 3, left)

    def wrong(good: float, there: float) -> float | None:
        return None if kind == "none" else good + 7.0 * (there - good)

    guess = chord(margin) if kind in ("bent", "jump") else wrong
    end, asked = closed(margin, (start, worse), guess)
    assert margin(end) >= 0.0
    assert margin(end + way * FINE) < 0.0
    assert asked <= 3.0 * (math.log2(length / FINE) + 2.0)
