"""Small pieces of the ledger, each by hand: spans, clocking, turned patterns, gains of scatter and shapes, draws. mm, rad."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import combine
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Stock, Tooth, ToothRunOut
from setupcheck.ledger.holes import HolePosition
from setupcheck.ledger.route import Pattern, Periodic, Scatter, Seat, Shaped, State, clocked, joined, untouched

from .seven_places import known, level

NONE = Account()
THETA = 0.5 + math.tau / 4.0
"""Second of four places that begin at 0.5 rad."""


def state(offset: Account, pattern: Pattern) -> State:
    return State("ring", "holes", 10, "holes", 0.0, 8.0, None, 0, offset, NONE, NONE, real(0.001), pattern=pattern)


def test_a_real_cause_counts_by_the_sum_of_both_its_factors() -> None:
    """0.3 X + 0.5 conj(X) of a real X about 2, within 0.1, is 0.8 X: 1.6 within 0.08."""
    account = Account(0j, {Cause("length", "length", high=0.1, mean=2.0 + 0j): (0.3 + 0j, 0.5 + 0j)})
    assert account.span() == pytest.approx((1.52, 1.68))
    exact = Account(0j, {Cause("known", "length", mean=2.0 + 0j): (0.3 + 0j, 0.5 + 0j)})
    assert Draws(3).account(exact) == pytest.approx([1.6] * 3)


def test_a_cause_is_replaced_within_a_high_point_too() -> None:
    old, new = Cause("lean", "disc", high=0.001), Cause("lean", "disc", high=0.003)
    point = Cause("point", "high-point", of=Account.of(old) * 20.0)
    changed = Account.of(point).with_cause(old, new)
    assert list(changed.origins()) == [new]
    assert changed.span()[1] == pytest.approx(0.06)


def test_a_place_that_clocks_a_part_turns_it_by_its_shift_round_the_circle() -> None:
    """The second of four places stands off by (0.01, 0.02); along its tangent i e^(i theta) that turns by the component / 20."""
    ring = Pattern(4, 20.0, start=0.5)
    tangent = 1j * cmath.exp(1j * THETA)
    across = 0.01 * tangent.real + 0.02 * tangent.imag
    found = clocked(state(known("e", 0.01 + 0.02j), ring), ring, NONE, number=2)
    assert found.known() == pytest.approx(0.001 + across / 20.0)


@pytest.mark.parametrize("sense", [1, -1])
def test_a_pattern_put_into_another_part_begins_where_it_was_turned_to(sense: int) -> None:
    made = joined(
        state(NONE, Pattern(4, 20.0, start=0.5)), Seat(sense, 3.0, 0.2), offset=NONE, lean=NONE, axial=NONE, clock=NONE,
        unknown=Cause("unknown", "ring", high=1.0),
    )  # fmt: skip
    assert made.pattern is not None
    assert (made.pattern.turn, made.pattern.start) == (sense, pytest.approx(sense * 0.5 + 0.2))
    assert (made.low, made.high) == ((3.0, 11.0) if sense > 0 else (-5.0, 3.0))


def test_a_surface_nobody_stated_anything_of_stands_off_by_its_own_causes_once() -> None:
    causes = [Cause(n, law, mean=m) for n, law, m in (("offset", "disc", 0.1 + 0.2j), ("lean", "disc", 0.3j),
                                                     ("axial", "length", 0.4 + 0j), ("clock", "length", 0.5 + 0j))]  # fmt: skip
    made = untouched(
        "ring", "rim", kind="cylinder", low=0.0, high=8.0, diameter=40.0, facing=0,
        causes=(causes[0], causes[1], causes[2], causes[3]),
    )  # fmt: skip
    found = [account.known() for account in (made.offset, made.lean, made.axial, made.clock)]
    assert found == pytest.approx([0.1 + 0.2j, 0.3j, 0.4, 0.5])


def test_places_that_share_a_draw_still_differ_from_those_of_another() -> None:
    ring, cause = Pattern(4, 20.0), Cause("scatter", "length", high=0.003)

    def gain(*groups: int) -> float:
        scatter = Scatter(cause, "tangential", 0.003, groups=groups)
        return teeth.scatter_gain(scatter, ring, stepwise=False, deeper=0.0)

    assert gain() == gain(0, 1, 0, 1) == pytest.approx(0.006)
    assert gain(0, 0, 0, 0) == 0.0


def test_range_and_largest_step_of_a_shape() -> None:
    """0, 2, 3, 1: the range is 3, the steps are 2, 1, 2 and 1 back to the first."""
    assert teeth.shape_gain((0.0, 2.0, 3.0, 1.0), stepwise=False) == 3.0
    assert teeth.shape_gain((0.0, 2.0, 3.0, 1.0), stepwise=True) == 2.0


@pytest.mark.parametrize("side", [1, -1])
def test_oblique_flanks_turn_as_their_formulas_say(side: int) -> None:
    """Half a gap of nine teeth is 10 deg: large enough to see every factor."""
    ring, alpha, b = Pattern(9, 20.0, pressure_angle=math.radians(20.0)), math.radians(20.0), math.radians(10.0)
    plain = cmath.exp(-1j * side * b) * (math.cos(b) - math.tan(alpha) * math.sin(b))
    assert teeth.oblique_turn(ring, side=side, driven=False) == pytest.approx(plain)
    # 1 + i s b cos(a) (cos a + i s sin a) = 1 - b cos(a) sin(a) + i s b cos(a)^2
    driven = complex(1.0 - b * math.cos(alpha) * math.sin(alpha), -side * b * math.cos(alpha) ** 2)
    assert teeth.oblique_turn(ring, side=side, driven=True) == pytest.approx(driven)


def test_run_out_of_gaps_is_twice_what_each_cause_can_move_them() -> None:
    """Off centre by 10 um: 20 um; each gap 3 um deeper or shallower: 6 um; known depths 0, 4, -1 um: 5 um. Times 0.7."""
    deep = Scatter(Cause("depth", "length", high=0.003), "radial", 0.003)
    figure = ToothRunOut(
        Account.of(Cause("e", "disc", high=0.010)).plus_constant(0.002 + 0j),
        Pattern(3, 20.0, scatter=(deep,), outwards=(0.0, 0.004, -0.001)), 0.7,
    )  # fmt: skip
    assert figure.base() == pytest.approx(0.7 * (0.005 + 0.004))
    assert {p.cause.key: p.up for p in figure.pushes()} == pytest.approx({"e": 0.7 * 0.020, "depth": 0.7 * 0.006})
    assert [p.down for p in figure.pushes()] == [0.0, 0.0]


def test_errors_of_dividing_only_ever_add_to_a_range() -> None:
    wave = Periodic(Cause("wave", "disc", high=1e-4), 2)
    drift = Shaped(Cause("drift", "length", high=2e-4), (0.0, 0.2, 0.5, 0.7, 1.0))
    spread = Scatter(Cause("scatter", "length", high=0.003), "tangential", 0.003)
    figure = Tooth(
        NONE, Pattern(5, 20.0, periodic=(wave,), scatter=(spread,), shaped=(drift,)), flank=False, stepwise=False
    )
    ups = {p.cause.key: p.up for p in figure.pushes()}
    assert ups == pytest.approx({"wave": 2.0 * 20.0 * 1e-4, "scatter": 0.006, "drift": 20.0 * 2e-4})
    assert [p.down for p in figure.pushes()] == [0.0, 0.0, 0.0]


@pytest.mark.parametrize("turned", [0.0004, -0.0004])
def test_the_hole_that_stands_farthest_off_has_shift_and_turn_together(turned: float) -> None:
    """Three holes on radius 25 shifted by (0.006, 0.002) and turned: each is off by the shift and r t along its tangent."""
    ring = Pattern(3, 25.0)
    off = [(0.006 + 0.002j) + 25.0 * turned * 1j * cmath.exp(1j * math.tau * j / 3.0) for j in range(3)]
    figure = HolePosition(known("e", 0.006 + 0.002j), ring, level("turn", turned))
    worst = figure.base() + sum(p.up for p in figure.pushes())
    assert worst == pytest.approx(2.0 * max(map(abs, off)))


def test_a_scatter_of_either_end_has_nothing_between() -> None:
    either = Scatter(Cause("slot", "length", high=0.004), "tangential", 0.004, either=True)
    found = np.abs(Draws(200).scatter(either, Pattern(4, 20.0)))
    assert found == pytest.approx(np.full((200, 4), 0.004))


def test_arcs_of_patterns_alike_are_handed_over_and_others_are_not() -> None:
    def figure(bound: float) -> Tooth:
        spread = Scatter(Cause("scatter", "length", high=0.003), "tangential", bound)
        return Tooth(NONE, Pattern(5, 20.0, scatter=(spread,)), flank=False, stepwise=False)

    theirs, same, wider = figure(0.003), figure(0.003), figure(0.006)
    source, draws = Draws(20), Draws(20)
    arcs = source.arcs(theirs.pattern)
    draws.take_over(source, same, theirs)
    draws.take_over(source, wider, theirs)
    assert draws.arcs(same.pattern) is arcs  # the work is saved
    assert draws.arcs(wider.pattern) == pytest.approx(2.0 * np.asarray(arcs), rel=1e-6)


def test_the_chance_of_meeting_a_limit_is_known_to_its_sampling_error() -> None:
    """A share p of n trials strays by sqrt(p (1 - p)/n); where all meet it or none, by one trial of n."""
    stock = Stock(0.5, (Account.of(Cause("e", "disc", high=0.2)),))
    found = combine(stock, Draws(400), low=0.36, high=None, confidence=0.95)
    p = float((stock.sample(Draws(400)) >= 0.36).mean())
    assert 0.2 < p < 0.8
    assert (found.chance, found.chance_error) == pytest.approx((p, math.sqrt(p * (1.0 - p) / 400.0)))
    none = combine(stock, Draws(400), low=0.6, high=None, confidence=0.95)
    assert (none.chance, none.chance_error) == pytest.approx((0.0, 1.0 / 400.0))
