"""Bounds, shares and chances of the ledger against every corner tried, and against sums on paper. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math
from itertools import product

import numpy as np
import pytest

from setupcheck.ledger.account import Account, face_reading_to_lean, real
from setupcheck.ledger.causes import TRUNCATION, TRUNCATION_2D, Cause, stream_key
from setupcheck.ledger.combine import combine
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import (
    Length,
    Push,
    Stock,
    Tooth,
    Vector,
    alternatives,
    merged,
    taken_away,
    vector_pushes,
)
from setupcheck.ledger.harmonic import planned_wave, towards
from setupcheck.ledger.heads import share_left
from setupcheck.ledger.holes import HoleChord, HolePosition, PitchCircle
from setupcheck.ledger.route import Pattern, Periodic, Scatter, Shaped, index_error
from setupcheck.ledger.teeth import oblique, oblique_turn

from .seven_places import (
    ALPHA,
    COUNT,
    DRIFT,
    LEAN,
    NEAR,
    OFFSET,
    RADIUS,
    ROUNDING,
    SHAPE,
    drawn,
    index_arcs,
    known,
    pattern,
    places,
    steps,
)


def test_worst_cases_of_teeth_are_those_of_the_worst_corner() -> None:
    """Four places: eccentricity in any direction, each place's own scatter at either end; every corner tried."""
    ring = Pattern(4, 20.0, pressure_angle=ALPHA, scatter=(Scatter(Cause("own", "length", high=1e-4), "angle", 1e-4),))
    offset = Account.of(Cause("e", "disc", high=0.02))
    for stepwise in (False, True):
        worst = 0.0
        for k in range(720):
            e = 0.02 * cmath.exp(1j * math.pi * k / 360)
            base = [(e * (1j * 1j**j).conjugate()).real / math.cos(ALPHA) for j in range(4)]
            for signs in product((-1, 1), repeat=4):
                arcs = [b + s * 20.0 * 1e-4 for b, s in zip(base, signs, strict=True)]
                worst = max(worst, steps(arcs) if stepwise else max(arcs) - min(arcs))
        figure = Tooth(offset, ring, flank=True, stepwise=stepwise)
        assert figure.base() + sum(p.up for p in figure.pushes()) == pytest.approx(worst, rel=1e-4)


def test_shares_rss_and_chance_of_three_lengths() -> None:
    """30, 40 and 120 um: worst 190, rss 130, shares 3/19, 4/19, 12/19."""
    causes = [Cause(name, "length", high=high) for name, high in (("a", 0.030), ("b", 0.040), ("c", 0.120))]
    account = real(10.0) + Account.of(causes[0]) - Account.of(causes[1]) + Account.of(causes[2])
    found = combine(Length(account), Draws(20_000), low=9.9, high=10.1, confidence=0.9)
    assert (found.worst.low, found.worst.high) == pytest.approx((9.81, 10.19))
    assert (found.rss.low, found.rss.high) == pytest.approx((9.87, 10.13))
    assert [(s.cause.key, s.share) for s in found.shares] == [
        ("c", pytest.approx(12 / 19)),
        ("b", pytest.approx(4 / 19)),
        ("a", pytest.approx(3 / 19)),
    ]
    assert found.likely.low - 10.0 == pytest.approx(10.0 - found.likely.high, abs=0.003)
    assert found.chance is not None and found.chance_error is not None
    # of the sum of three rectangles, by quadrature over the two smaller ones
    a, b = np.meshgrid(np.linspace(-0.03, 0.03, 401), np.linspace(-0.04, 0.04, 401))
    inside = np.clip(np.minimum(0.12, 0.1 - a - b) - np.maximum(-0.12, -0.1 - a - b), 0.0, None) / 0.24
    assert found.chance == pytest.approx(float(inside.mean()), abs=4.0 * found.chance_error)
    assert found.chance_error == pytest.approx(math.sqrt(found.chance * (1.0 - found.chance) / 20_000))
    one_sided = combine(Length(account), Draws(20_000), low=None, high=10.1, confidence=0.9)
    assert one_sided.likely.high < found.likely.high  # 90 % to one side, not 5 % left out on both
    near_low = combine(Length(account), Draws(500), low=9.9, high=11.0, confidence=0.9)
    assert (near_low.end, found.end, one_sided.end) == ("low", "high", "high")


def test_known_run_outs_count_by_their_component_along_their_sum() -> None:
    """3 along x and 4 along y: sum 5 at 53.13 deg, components 9/5 and 16/5; an opposite one counts negative."""
    account = known("x", 3.0) + known("y", 4.0j)
    base, pushes = vector_pushes(account, 2.0)
    assert base == 0.0
    assert [(p.up, p.down, p.known) for p in pushes] == [
        pytest.approx((3.6, 0.0, 3.6)),
        pytest.approx((6.4, 0.0, 6.4)),
    ]
    against = vector_pushes(known("x", 3.0) + known("y", -1.0), 1.0)[1]
    assert [(p.up, p.down) for p in against] == [pytest.approx((3.0, 0.0)), pytest.approx((-1.0, 1.0))]
    found = combine(Vector((account,), 2.0), Draws(10), low=None, high=20.0, confidence=0.95)
    assert found.worst.high == pytest.approx(10.0)
    assert found.chance == 1.0 and found.chance_error == 0.0


def test_bounds_of_laws() -> None:
    assert Cause("a", "ring", high=0.02, spread=0.001).bound == pytest.approx(0.02 + 3.0 * 0.001)
    assert Cause("a", "blur", spread=0.001).bound == pytest.approx(math.sqrt(-2.0 * math.log(0.0027)) * 0.001, rel=1e-4)
    assert Cause("a", "rectangle", low=0.003, high=0.004).bound == pytest.approx(0.005)
    assert Cause("a", "clearance-ring", low=0.003, high=0.004).bound == pytest.approx(0.002)
    assert Cause("a", "undetermined").bound == math.inf
    assert (TRUNCATION, TRUNCATION_2D) == pytest.approx((3.0, math.sqrt(-2.0 * math.log(0.0027))), rel=1e-4)
    assert 0 <= stream_key("a") < 2**128
    twice = Cause("a", "ring", high=0.02, low=0.01, spread=0.001, mean=0.5j).scaled(2.0)
    assert (twice.high, twice.low, twice.spread, twice.mean) == (0.04, 0.02, 0.001, 1j)


def test_accounts_mirror_turn_and_take_their_component() -> None:
    x = Cause("x", "disc", mean=0.3 + 0.4j)
    account = Account(1.0 + 2.0j, {x: (2.0 + 1.0j, 0.5j)})
    value = 1.0 + 2.0j + (2.0 + 1.0j) * (0.3 + 0.4j) + 0.5j * (0.3 - 0.4j)
    assert account.known() == pytest.approx(value)
    assert account.mirrored().known() == pytest.approx(value.conjugate())
    assert account.along(1j).known() == pytest.approx((value.conjugate() * 1j).real)
    assert (account - account).terms == {} and (account * 0).constant == 0
    wide = Account.of(Cause("w", "disc", high=0.1)) * (0.6 + 0.8j)
    assert wide.largest() == pytest.approx(0.1)
    chip = Account.of(Cause("chip", "one-sided", high=0.01)) * -2.0 + real(0.5)
    assert chip.span() == pytest.approx((0.48, 0.5))
    with pytest.raises(ValueError, match="no size"):
        face_reading_to_lean(0.02, 0.0)


def test_read_heads_leave_two_sines_of_half_the_angle() -> None:
    assert share_left(2, 0.5) == pytest.approx(abs(cmath.exp(0.5j) - 1.0))
    assert share_left(1, 0.5) == 1.0
    assert share_left(4, 3.0) == 1.0
    for heads, off in ((0, 0.1), (2, -0.1)):
        with pytest.raises(ValueError, match="head"):
            share_left(heads, off)


def test_places_that_a_figure_is_the_worst_of() -> None:
    ends = (known("a", 1.0), known("b", 2.0))
    assert [f.base() + sum(p.up for p in f.pushes()) for f in alternatives(Vector(ends, 2.0))] == [2.0, 4.0]
    assert [drawn(f) for f in alternatives(Stock(5.0, ends))] == [[4.0], [3.0]]
    single = Length(real(1.0))
    assert alternatives(single) == (single,)


def test_coordinates_of_holes_change_a_chord_by_the_worst_two_neighbours() -> None:
    """Each hole draws one error with a share round the circle and one outwards; every corner of all five is tried."""
    n, radius, bound = 5, 30.0, 0.004
    around, outward = (0.9, -0.3, 0.5, 0.1, -0.8), (0.2, 0.7, -0.6, 1.0, 0.4)
    scatter = Scatter(Cause("x", "length", high=bound), "coordinate", bound, around=around, outward=outward)
    worst = 0.0
    for signs in product((-1, 1), repeat=n):
        points = [
            cmath.exp(1j * math.tau * j / n) * (radius + bound * s * (outward[j] + 1j * around[j]))
            for j, s in enumerate(signs)
        ]
        nominal = 2.0 * radius * math.sin(math.pi / n)
        worst = max(worst, *(abs(abs(points[j] - points[j - 1]) - nominal) for j in range(n)))
    figure = HoleChord(Pattern(n, radius, scatter=(scatter,)))
    second_order = 4.0 * bound**2 / radius
    assert figure.base() + sum(p.up for p in figure.pushes()) == pytest.approx(worst, abs=second_order)
    (push,) = PitchCircle(Pattern(n, radius, scatter=(scatter,))).pushes()
    assert push.up == push.down == pytest.approx(2.0 * bound * sum(map(abs, outward)) / n)
    pitch = Tooth(Account(), Pattern(n, radius, scatter=(scatter,)), flank=False, stepwise=True)
    assert sum(p.up for p in pitch.pushes()) == pytest.approx(bound * max(0.9 + 0.3, 0.3 + 0.5, 0.5 + 0.1, 0.9, 1.7))
    ring = Tooth(Account(), Pattern(n, radius, scatter=(scatter,)), flank=False, stepwise=False)
    assert sum(p.up for p in ring.pushes()) == pytest.approx(bound * (0.9 + 0.8))


def test_what_each_error_of_holes_does_to_one_chord() -> None:
    """Six holes on 30 mm: neighbours 60 deg apart, so an arc counts cos 30, an error outwards of both 2 sin 30 = 1."""
    wave, drift = Cause("wave", "disc", high=1e-4), Cause("drift", "length", high=2e-4)
    size = Account.of(Cause("size", "length", high=0.004)) * 0.5
    ring = Pattern(
        6,
        30.0,
        periodic=(Periodic(wave, 2),),
        shaped=(Shaped(drift, (0.0, 0.2, 0.4, 0.6, 0.8, 1.0)),),
        scatter=(
            Scatter(Cause("angle", "length", high=1e-5), "angle", 1e-5),
            Scatter(Cause("round", "length", high=0.003), "tangential", 0.003),
            Scatter(Cause("out", "length", high=0.002), "radial", 0.002),
        ),
        radial=size,
    )
    found = {p.cause.key: p.up for p in HoleChord(ring).pushes()}
    arc = math.cos(math.pi / 6)
    assert found == pytest.approx(
        {
            # two waves round six places: neighbours 120 deg of a wave apart, chord of a unit circle 2 sin 60
            "wave": arc * 30.0 * 1e-4 * 2.0 * math.sin(math.pi / 3),
            "drift": arc * 30.0 * 2e-4 * 1.0,  # from the last place back to the first
            "angle": arc * 30.0 * 2e-5,
            "round": arc * 0.006,
            "out": 0.002,
            "size": 0.002,
        }
    )
    position = {p.cause.key: p.up for p in HolePosition(Account(), ring, Account()).pushes()}
    assert position == pytest.approx(
        {
            "wave": 2.0 * 30.0 * 1e-4,
            "drift": 2.0 * 30.0 * 2e-4,
            "angle": 2.0 * 30.0 * 1e-5,
            "round": 0.006,
            "out": 0.004,
            "size": 0.004,
        }
    )


def test_the_division_error_that_clocks_a_part_by_hand() -> None:
    assert index_error(Pattern(4, 10.0), 1).known() == 0
    for turn in (1, -1):
        ring = pattern(turn)
        for number, arc in enumerate(index_arcs(turn), 1):
            assert index_error(ring, number).known().real == pytest.approx(arc / RADIUS)
    own = Scatter(Cause("own", "length", high=0.003), "tangential", 0.003)
    assert index_error(Pattern(4, 10.0, scatter=(own,)), 2).largest() == pytest.approx(0.0003)
    out = Scatter(Cause("out", "length", high=0.003), "radial", 0.003)
    assert index_error(Pattern(4, 10.0, scatter=(out,)), 2).terms == {}


@pytest.mark.parametrize("right_hand", [True, False])
def test_a_leaning_ring_of_oblique_gaps_shifts_each_gap_by_what_it_wobbles_times_its_lead(right_hand: bool) -> None:
    """A gap that stands w too high and runs at the lead angle is met beside its place by w tan(gamma), one way or the other."""
    ring, gamma = Pattern(9, RADIUS), math.radians(6.0)
    lean = known("t", LEAN)
    seen = oblique(lean, ring, lead_angle=gamma, right_hand=right_hand)
    arcs = []
    for j in range(9):
        u = cmath.exp(1j * math.tau * j / 9)
        wobble = -RADIUS * (LEAN.conjugate() * u).real
        arcs.append((OFFSET * (1j * u).conjugate()).real - (1 if right_hand else -1) * wobble * math.tan(gamma))
    figure = Tooth(known("e", OFFSET), ring, flank=False, stepwise=False, oblique=seen)
    assert drawn(figure) == [pytest.approx(max(arcs) - min(arcs), **NEAR)]
    assert oblique_turn(ring, side=0, driven=True) == oblique_turn(ring, side=0, driven=False) == 1


def test_coordinates_that_cancel_on_one_flank_add_up_on_the_other() -> None:
    """Each place draws one error: a round the circle and -a / tan(alpha) outwards; a + tan(alpha) out is nothing, or 2 a."""
    around = tuple(0.1 * (j + 1) for j in range(COUNT))
    outward = tuple(-a / math.tan(ALPHA) for a in around)
    own = Scatter(Cause("own", "length", high=0.002), "coordinate", 0.002, around=around, outward=outward)
    figure = Tooth(Account(), Pattern(COUNT, RADIUS, pressure_angle=ALPHA, scatter=(own,)), flank=True, stepwise=False)
    draws = Draws(5000)
    nothing, twice = (planned_wave(figure, 2, draws, side=side) for side in (1, -1))
    assert np.abs(nothing.drawn).max() < 1e-9
    # 2/N sum of 2 a_j x_j cos: variance 4/N^2 4 a_j^2 b^2/3 cos^2, by hand
    expected = sum(
        (4.0 * a / COUNT) ** 2 * 0.002**2 / 3.0 * math.cos(2 * math.tau * j / COUNT) ** 2 for j, a in enumerate(around)
    )
    assert twice.parts[0].covariance[0][0] == pytest.approx(expected, rel=0.1)


def test_a_planned_wave_is_the_fourier_sum_of_its_known_errors() -> None:
    ring = pattern(1)
    figure = Tooth(Account(), ring, flank=False, stepwise=False)
    found = planned_wave(figure, 3, Draws(4))
    whole = sum(
        2.0 / COUNT * RADIUS * (ROUNDING[j] + DRIFT * SHAPE[j]) * cmath.exp(3j * places(1)[j]) for j in range(COUNT)
    )
    assert found.middle == pytest.approx(whole, rel=1e-5)
    assert complex(found.drawn[0]) == pytest.approx(whole, rel=1e-5)
    assert 0.0 <= towards(whole, 3) < math.tau / 3
    assert cmath.exp(3j * towards(whole, 3)) == pytest.approx(whole / abs(whole))
    for harmonic in (0, 4):
        with pytest.raises(ValueError, match="cannot tell"):
            planned_wave(figure, harmonic, Draws(4))


def test_bounds_of_rounded_and_drifting_divisions() -> None:
    """Settings rounded to +-1e-4 rad on 30 mm: holes stand 3 um off, twice of that; a drift steps back at the close."""
    rounded = Pattern(4, 30.0, rounding=(0.0, 1e-4, 0.0, -1e-4))
    position = combine(HolePosition(Account(), rounded, Account()), Draws(4), low=None, high=1.0, confidence=0.95)
    assert position.worst.high == pytest.approx(0.006)
    drift = Cause("drift", "length", high=2e-4)
    ring = Pattern(4, 30.0, shaped=(Shaped(drift, (0.0, 0.25, 0.5, 0.8)),))
    for stepwise in (True, False):
        (push,) = Tooth(Account(), ring, flank=False, stepwise=stepwise, factor=0.5).pushes()
        assert push.up == pytest.approx(0.5 * 30.0 * 2e-4 * 0.8)


def test_known_parts_of_one_cause_add_up_and_stock_loses_them() -> None:
    cause = Cause("a", "length")
    (one,) = merged([Push(cause, 1.0, 2.0, 0.5)], [Push(cause, 3.0, 4.0, 0.25)])
    assert (one.down, one.up, one.known) == (4.0, 6.0, 0.75)
    found = combine(Stock(0.25, (known("e", 0.03),)), Draws(4), low=0.0, high=None, confidence=0.95)
    assert (found.worst.low, found.rss.low, found.likely.low) == pytest.approx((0.22,) * 3)
    (less,) = taken_away([Push(cause, 0.01, 0.03, 0.02)])
    assert (less.down, less.up, less.known) == (0.03, 0.0, -0.02)


def test_a_turn_nobody_recorded_makes_a_ring_of_what_is_known() -> None:
    angle = Cause("angle", "ring", high=1.0)
    turned = known("e", 0.3 + 0.4j).turned_by_an_unknown_angle(angle)
    assert turned.known() == 0
    assert turned.largest() == pytest.approx(0.5)
    assert angle not in Account.of(Cause("d", "disc", high=0.1)).turned_by_an_unknown_angle(angle).terms
