"""Laws of a length that swings once a turn: both rows of a draw, worst case, limits, gates, on figures drawn at random."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import combine
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import OverATurn, alternatives
from setupcheck.ledger.route import Pattern, Scatter
from setupcheck.quantities.gates import origins, reaches, room, span, with_cause, worst_excess

from .drawn_jobs import few

SINGLE = 2e-6
"""Rounding of draws in single precision, relative to the figure."""
REAL = [
    Cause("bound", "length", high=0.01),
    Cause("reading", "gauss", spread=0.002, mean=0.003 + 0j),
    Cause("chip", "one-sided", high=0.01),
    Cause("misfit", "high-point", of=Account.of(Cause("bound", "length", high=0.01)) * 0.4),
]
VECTORS = [
    Cause("disc", "disc", high=0.02),
    Cause("ring", "ring", high=0.01, spread=0.001),
    Cause("seen", "blur", spread=0.001, mean=0.006 + 0.004j),
    Cause("seen too", "blur", spread=0.001, mean=-0.005 - 0.002j),
    Cause("hung", "clearance-ring", low=0.002, high=0.02),
    Cause("four-jaw-B, mark kept: run-out 8 um", "disc", high=0.004, shared=True),
    Cause("zero", "rectangle", low=0.004, high=0.007),
]
RADIAL = Cause("each gap: outwards", "length", high=0.004)
coefficients = st.floats(-2.0, 2.0).map(lambda v: round(v, 3))


@st.composite
def swings(draw: st.DrawFn) -> OverATurn:
    """A figure of some causes; a vector may move the length too, as a touched surface that runs out does."""
    account = Account().plus_constant(draw(st.floats(-0.1, 0.1)))
    for cause in draw(st.lists(st.sampled_from(REAL), unique=True)):
        account += Account.of(cause) * draw(coefficients)
    offset = Account()
    for cause in draw(st.lists(st.sampled_from(VECTORS), unique=True, min_size=1)):
        own = Account.of(cause) * complex(draw(coefficients), draw(coefficients))
        offset += own.mirrored() if draw(st.booleans()) else own
    if draw(st.booleans()):
        account += offset.along(1) * draw(coefficients)
    pattern = None
    if draw(st.booleans()):
        each = (Scatter(RADIAL, "radial", RADIAL.high),) if draw(st.booleans()) else ()
        pattern = Pattern(draw(st.integers(3, 40)), 20.0, scatter=each)
    return OverATurn(account, offset, draw(st.floats(0.1, 2.0)), pattern)


def room_for(figure: OverATurn) -> float:
    found = combine(figure, Draws(2), low=None, high=None, confidence=0.9).worst
    return SINGLE * (max(abs(found.low), abs(found.high)) + 0.2)


@few
@given(swings())
def test_no_turn_of_any_draw_passes_the_worst_case(figure: OverATurn) -> None:
    draws = Draws(2000)
    worst = combine(figure, draws, low=None, high=None, confidence=0.95).worst
    least, most = figure.sample(draws)
    assert (least <= most + 1e-12).all()
    assert least.min() >= worst.low - room_for(figure)
    assert most.max() <= worst.high + room_for(figure)


@few
@given(swings())
def test_the_pushes_add_up_to_the_worst_case_both_ways(figure: OverATurn) -> None:
    found = combine(figure, Draws(10), low=None, high=1.0, confidence=0.95)
    assert found.worst.high == pytest.approx(figure.base() + sum(p.up for p in figure.pushes()))
    assert found.worst.low == pytest.approx(figure.base() - sum(p.down for p in figure.pushes()))
    swing = figure.factor * (figure.offset.largest() + (RADIAL.high if figure._outwards() else 0.0))
    low, high = figure.account.span()
    assert (found.worst.low, found.worst.high) == pytest.approx((low - swing, high + swing))


@few
@given(swings())
def test_limits_at_the_worst_case_are_met_for_certain_and_inside_the_least_swing_never(figure: OverATurn) -> None:
    draws = Draws(500)
    worst = combine(figure, draws, low=None, high=None, confidence=0.95).worst
    assert 1.0 == combine(figure, draws, low=worst.low, high=worst.high, confidence=0.95).chance
    least, most = figure.sample(draws)
    under = float(most.min()) - 1e-6
    assert 0.0 == combine(figure, draws, low=None, high=under, confidence=0.95).chance
    assert 0.0 == combine(figure, draws, low=float(least.max()) + 1e-6, high=None, confidence=0.95).chance


@few
@given(swings(), st.floats(-0.05, 0.05), st.floats(0.0, 0.2))
def test_a_turn_meets_its_limits_only_where_both_of_its_ends_do(figure: OverATurn, low: float, width: float) -> None:
    draws = Draws(500)
    found = combine(figure, draws, low=low, high=low + width, confidence=0.95)
    least, most = figure.sample(draws)
    both = float(((least >= low) & (most <= low + width)).mean())
    assert found.chance is not None
    assert found.chance == pytest.approx(both) or found.chance == 1.0
    assert found.chance <= min(float((least >= low).mean()), float((most <= low + width).mean())) + 1e-12 or (
        found.worst.low >= low and found.worst.high <= low + width
    )


@few
@given(swings(), st.sampled_from([0.6, 0.9, 0.95, 0.999]))
def test_likely_and_rss_lie_within_the_worst_case_and_likely_grows_with_confidence(
    figure: OverATurn, confidence: float
) -> None:
    draws = Draws(2000)
    found = combine(figure, draws, low=-1.0, high=1.0, confidence=confidence)
    surer = combine(figure, draws, low=-1.0, high=1.0, confidence=(1.0 + confidence) / 2.0)
    assert found.worst.low <= found.likely.low <= found.likely.high <= found.worst.high
    assert surer.likely.low <= found.likely.low
    assert found.likely.high <= surer.likely.high
    slack = room_for(figure)
    assert found.worst.low - slack <= found.rss.low <= found.rss.high <= found.worst.high + slack


def test_a_turn_in_the_draws_is_the_turn_worked_out_place_by_place() -> None:
    seen = VECTORS[2]
    figure = OverATurn(Account().plus_constant(0.05), Account.of(replace(seen, spread=0.0)), 0.7)
    least, most = figure.sample(Draws(5))
    places = np.linspace(0.0, math.tau, 3601)
    turn = 0.05 - 0.7 * (seen.mean * np.exp(-1j * places)).real
    assert least == pytest.approx(turn.min(), rel=1e-6)
    assert most == pytest.approx(turn.max(), rel=1e-6)


def test_gaps_that_scatter_outwards_widen_the_turn_and_stay_in_the_worst_case() -> None:
    plain = OverATurn(Account().plus_constant(0.05), Account.of(VECTORS[0]), 0.7)
    scattered = replace(plain, pattern=Pattern(72, 54.0, scatter=(Scatter(RADIAL, "radial", 0.004),)))
    draws = Draws(4000)
    a, b = (combine(f, draws, low=None, high=None, confidence=0.95) for f in (plain, scattered))
    assert b.worst.high - a.worst.high == pytest.approx(0.7 * 0.004)
    assert a.worst.low - b.worst.low == pytest.approx(0.7 * 0.004)
    assert b.likely.low < a.likely.low - 0.5 * 0.7 * 0.004  # 72 gaps: some stand out by nearly all of it


def test_known_run_outs_that_cancel_leave_no_swing() -> None:
    one = Cause("one", "blur", mean=0.006 + 0.004j)
    other = Cause("other", "blur", mean=-0.006 - 0.004j)
    figure = OverATurn(Account(), Account.of(one) + Account.of(other), 0.7)
    worst = combine(figure, Draws(10), low=None, high=None, confidence=0.95).worst
    assert (worst.low, worst.high) == pytest.approx((0.0, 0.0), abs=1e-15)


def test_a_kept_device_that_held_both_surfaces_cancels_and_one_put_on_anew_does_not() -> None:
    kept = VECTORS[5]
    both = Account.of(kept) - Account.of(kept)
    assert OverATurn(Account(), both, 0.7).pushes() == []
    anew = Account.of(kept) - Account.of(kept).turned_by_an_unknown_angle(Cause("put on", "ring", 60, high=1.0))
    worst = combine(OverATurn(Account(), anew, 0.7), Draws(10), low=None, high=None, confidence=0.95).worst
    assert worst.high == pytest.approx(0.7 * 2.0 * 0.004)


@few
@given(swings(), st.floats(0.01, 0.3))
def test_a_gate_of_every_cause_just_holds(figure: OverATurn, width: float) -> None:
    middle = figure.base()
    low, high = middle - width, middle + width
    assert alternatives(figure) == (figure,)
    for cause in origins(reaches(figure)):
        planned = abs(cause.mean) or cause.high
        guard = 3.0 * cause.spread if cause.law == "ring" else 0.0
        if not planned or cause == RADIAL or cause.law in ("gauss", "blur", "clearance-ring", "rectangle"):
            continue  # no dial reading: scatter of each gap, or a law with two sizes
        least, most = span(figure, reaches(figure), cause, planned, guard, low=low, high=high)
        for reading in {least, most} - {0.0, math.inf}:
            at = with_cause(figure, cause, cause.scaled(reading / planned))
            assert worst_excess(at, low, high) <= 1e-9
            over = with_cause(figure, cause, cause.scaled(reading / planned * 1.01))
            assert least > 0.0 or worst_excess(over, low, high) > 0.0


@few
@given(swings())
def test_room_of_a_cause_is_what_the_worst_case_leaves(figure: OverATurn) -> None:
    worst = combine(figure, Draws(2), low=None, high=None, confidence=0.95).worst
    mine = next((p for p in figure.pushes() if not p.known and p.up > 1e-6 and p.down > 1e-6), None)
    if mine is None:
        return
    grow = room(reaches(figure), mine.cause, low=worst.low - mine.down, high=worst.high + 2.0 * mine.up)
    assert grow == pytest.approx(2.0, rel=1e-6)
