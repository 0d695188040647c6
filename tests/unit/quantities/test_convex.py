"""The searches behind gates, against roots by hand: a sum of absolute values and a norm are convex and known everywhere."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from setupcheck.quantities.convex import _least_possible, convex_span

PLACE = st.floats(0.05, 0.95)
SLOPE = st.floats(0.1, 50.0)


@settings(derandomize=True, max_examples=60, database=None, deadline=None)
@given(PLACE, SLOPE, SLOPE, st.floats(0.001, 0.5))
def test_a_bent_line_is_below_zero_between_its_two_roots(bend: float, down: float, up: float, depth: float) -> None:
    """max(-down (x - bend), up (x - bend)) = depth at bend - depth/down and at bend + depth/up."""
    low, high = convex_span(lambda x: max(-down * (x - bend), up * (x - bend)) - depth, 0.999, least=0.0, most=1.0)
    assert low == pytest.approx(max(bend - depth / down, 0.0), abs=1e-8)
    assert high == pytest.approx(min(bend + depth / up, 1.0), abs=1e-8)


@settings(derandomize=True, max_examples=60, database=None, deadline=None)
@given(PLACE, SLOPE, SLOPE, st.floats(1e-9, 10.0))
def test_a_function_above_zero_everywhere_has_no_span_and_soon_says_so(
    bend: float, down: float, up: float, least: float
) -> None:
    asked = 0

    def excess(x: float) -> float:
        nonlocal asked
        asked += 1
        return max(-down * (x - bend), up * (x - bend)) + least

    assert convex_span(excess, 0.5, least=0.0, most=1.0) == (math.inf, -math.inf)
    assert asked < 12 or least < 0.05 * max(down, up)


@settings(derandomize=True, max_examples=60, database=None, deadline=None)
@given(st.lists(st.integers(0, 200), min_size=4, max_size=4, unique=True), PLACE, SLOPE, st.floats(-1.0, 1.0))
def test_nothing_convex_is_lower_than_what_four_of_its_points_allow(
    at: list[int], bend: float, steep: float, height: float
) -> None:
    """A parabola and a norm, each at its own lowest place."""
    places = [one / 200.0 for one in sorted(at)]
    for of in (lambda x: steep * (x - bend) ** 2 + height, lambda x: steep * math.hypot(x - bend, 0.1) + height):
        allowed = _least_possible(*((x, of(x)) for x in places))
        lowest = of(min(max(bend, places[0]), places[-1]))
        assert allowed <= lowest + 1e-9 * (1.0 + abs(lowest))


def test_what_four_points_of_a_bent_line_allow_is_its_bend() -> None:
    assert _least_possible((0.0, 4.0), (1.0, 2.0), (3.5, 0.5), (4.0, 1.0)) == pytest.approx(-2.0 / 3.0)
