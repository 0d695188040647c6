"""Draws handed from one figure to another, the end that a share of them does not pass, and what gaps add to an index figure."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import combine
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Stock, Tooth, Vector
from setupcheck.ledger.route import Pattern
from setupcheck.ledger.running import AsItRuns


def off(name: str, high: float) -> Cause:
    return Cause(name, "disc", high=high)


def test_values_of_causes_alike_are_handed_over_and_a_changed_one_is_drawn_anew() -> None:
    """A disc of twice the size has values twice as large from the same stream, never those of the smaller one."""
    same, small, large = off("same", 0.01), off("changed", 0.01), off("changed", 0.02)
    alone = off("nowhere else", 0.03)
    theirs = Vector((Account.of(same) + Account.of(small),), 2.0)
    mine = Vector((Account.of(off("same", 0.01)) + Account.of(large) + Account.of(alone),), 2.0)
    source, draws = Draws(50), Draws(50)
    theirs.sample(source)
    draws.take_over(source, mine, theirs)
    assert draws.cause(same) is source.cause(same)  # the work is saved
    assert draws.cause(large) == pytest.approx(2.0 * source.cause(small), rel=1e-6)
    plain = Draws(50)
    assert mine.sample(draws) == pytest.approx(mine.sample(plain))


@pytest.mark.parametrize("trials", [2, 5, 11, 1000])
@pytest.mark.parametrize("confidence", [0.5, 0.83, 0.99])
def test_the_likely_value_is_numpys_quantile(trials: int, confidence: float) -> None:
    stock = Stock(0.5, (Account.of(off("e", 0.2)),))
    values = stock.sample(Draws(trials))
    least = combine(stock, Draws(trials), low=0.1, high=None, confidence=confidence).likely
    assert least.low == pytest.approx(np.quantile(values, 1.0 - confidence))
    both = combine(stock, Draws(trials), low=0.1, high=0.6, confidence=confidence).likely
    sides = (1.0 - confidence) / 2.0
    assert (both.low, both.high) == pytest.approx(np.quantile(values, [sides, 1.0 - sides]))


def test_what_gaps_add_within_their_pitch_by_hand() -> None:
    """A ring of radius 50 off centre by 2 um at most: 4 um as an angle of 80 urad. Gaps cut as planned add 3 um; a setting off
    by 5 um at most, two times it, adds 2 x 5 = 10 um in the arc at half a um of error for each um, so 5 um."""
    offset = Account.of(off("offset", 0.002))
    factor = 1.0 / 50.0
    # places so many that those at both ends of a diameter are among them
    ring = Tooth(offset, Pattern(360, 50.0), flank=False, stepwise=False, factor=factor)
    planned = Cause("as planned", "length", mean=0.003 + 0j)
    setting, other = off("setting", 0.005), off("other", 0.5)
    figure = AsItRuns(
        ring, planned, (Vector((Account.of(setting),), 2.0), Vector((Account.of(other),), 2.0)), (0.5, 0.0)
    )
    assert figure.within_a_pitch() == pytest.approx((0.003 + 0.005) * factor)
    ups = {push.cause.key: push.up for push in figure.pushes()}
    assert ups == pytest.approx({"offset": 0.004 * factor, "as planned": 0.003 * factor, "setting": 0.005 * factor})
    assert {p.cause.key: p.known for p in figure.pushes() if p.known} == pytest.approx({"as planned": 0.003 * factor})
    worst = combine(figure, Draws(500), low=None, high=1.0, confidence=0.95).worst.high
    assert worst == pytest.approx(0.012 * factor)
    assert max(figure.sample(Draws(500))) <= worst * (1.0 + 1e-6)


def test_shares_of_a_figure_that_nothing_moves_are_none() -> None:
    found = combine(Vector((Account.of(off("e", 0.0)),), 2.0), Draws(10), low=None, high=1.0, confidence=0.95)
    assert [s.share for s in found.shares] == [0.0] * len(found.shares)
    assert not math.isnan(found.worst.high)
