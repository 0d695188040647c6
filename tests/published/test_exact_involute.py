"""The involute itself: a perfect gear about its own centre, turned about another axis. No formula of the package is used.

Each flank is the curve of a taut thread unwound from the base circle (Huygens 1673, Euler 1765), probed at one fixed radius
about the axis of use, as pitch deviations are defined (ISO 1328-1:1995, definitions of f_pt and F_p, from memory).
Recomputed here with z = 90, r = 90 mm, e = 20 um: F_p = 41.31, 42.54, 44.13, 46.19 um at 14.5, 20, 25, 30 degrees,
f_pt = 1.485 um at 20 degrees; in the limit of many teeth 2 e / cos(alpha) = 41.32, 42.57, 44.14, 46.19 um.

Tolerance 0.01 um unless said otherwise: the first order leaves out terms of e^2/r = 0.004 um.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.optimize import brentq

from setupcheck.ledger.route import Pattern
from setupcheck.ledger.teeth import angles, flank_turn, waves

from .bench import ARCSEC, UM, sampled, stack

R, E = 90.0, 20.0 * UM
SECOND_ORDER = 0.01
"""Allowed difference between the first order and the exact curve [um]."""


def flank(offset: NDArray[np.complex128], pattern: Pattern, hand: int) -> NDArray[np.float64]:
    """What the ledger says of one flank of every gap, for a wheel eccentric by `offset` [mm]: arc deviations [um]."""
    wave: NDArray[np.float64] = waves(offset * (flank_turn(pattern, side=hand, driven=False) * -1j), angles(pattern))[0]
    return wave / UM


def probed(
    teeth: int, alpha: float, hand: int, *, e: float = E, towards: float = 0.0, first: float | None = None
) -> NDArray[np.float64]:
    """Arc deviation of every flank at radius R about the axis of use [um], counter-clockwise positive.

    hand   +1 for flanks that unwind counter-clockwise, which close a gap on its counter-clockwise side; -1 for the others
    first  where the first flank stands [rad]; None: a quarter of a pitch beside the middle of gap 1, at 0
    """
    beside = hand * math.pi / (2.0 * teeth) if first is None else first
    base = R * math.cos(alpha)
    centre = e * complex(math.cos(towards), math.sin(towards))

    def point(roll: float) -> complex:
        """The thread's end after unwinding by `roll`, for a thread that starts at direction 0."""
        p = base * complex(math.cos(roll) + roll * math.sin(roll), math.sin(roll) - roll * math.cos(roll))
        return p if hand > 0 else p.conjugate()

    true_roll = math.tan(alpha)
    true_angle = math.atan2(point(true_roll).imag, point(true_roll).real)
    deviations = []
    for j in range(teeth):
        stands = 2.0 * math.pi * j / teeth + beside  # where this flank crosses radius R when e = 0
        turn = complex(math.cos(stands - true_angle), math.sin(stands - true_angle))
        roll = brentq(
            lambda t, turn=turn: abs(centre + turn * point(t)) - R, true_roll - 0.05, true_roll + 0.05, xtol=1e-14
        )
        found = centre + turn * point(roll)
        away = found * complex(math.cos(stands), -math.sin(stands))
        deviations.append(R * math.atan2(away.imag, away.real) / UM)
    return np.array(deviations)


def wheel(teeth: int = 90, alpha: float = 20.0, high_at: float = 0.0) -> str:
    """A bought wheel whose teeth run out by 40 um about its bore, with the high point known (invented part)."""
    return f"""
setupcheck: 1
title: A wheel with a known run-out
units: mm
parts:
  wheel:
    surfaces:
      teeth: {{kind: teeth, count: {teeth}, on_circle: 180, at: 0, pressure_angle: {alpha} deg}}
      bore:  {{kind: bore, diameter: 40, from: -10, to: 10}}
    given:
      - {{of: teeth, about: bore, runout: {{measured: 40 um, high_at: {high_at} deg}}, division: 0"}}
require:
  - {{what: cumulative-pitch, of: wheel.teeth, about: wheel.bore, at_most: 60 um}}
  - {{what: single-pitch, of: wheel.teeth, about: wheel.bore, at_most: 10 um}}
  - {{what: gap-centre-pitch, of: wheel.teeth, about: wheel.bore, at_most: 60 um}}
  - {{what: index-within, of: wheel.teeth, about: wheel.bore, at_most: 60"}}
  - {{what: backlash-swing, of: wheel.teeth, about: wheel.bore, at_most: 60 um}}
  - {{what: run-out, of: wheel.teeth, about: wheel.bore, at_most: 60 um}}
  - {{what: index-range, of: wheel.teeth, about: wheel.bore, at_most: 120"}}
"""


@pytest.mark.parametrize(("alpha", "published"), [(14.5, 41.314), (20.0, 42.542), (25.0, 44.128), (30.0, 46.188)])
def test_an_exact_involute_of_90_teeth_gives_the_cumulative_pitch_of_a_review(alpha: float, published: float) -> None:
    # with the first flank in the direction of the offset; the sampled peak depends on it by up to 2 e (1 - cos(pi/z))
    assert published == pytest.approx(np.ptp(probed(90, math.radians(alpha), 1, first=0.0)), abs=0.001)
    for high_at in (0.0, 0.7, 1.0, 2.0):
        exact = max(np.ptp(probed(90, math.radians(alpha), hand, towards=math.radians(high_at))) for hand in (1, -1))
        assert exact == pytest.approx(float(sampled(wheel(alpha=alpha, high_at=high_at))[0]) / UM, abs=SECOND_ORDER)


@pytest.mark.parametrize(("alpha", "limit"), [(14.5, 41.316), (20.0, 42.567), (25.0, 44.135), (30.0, 46.188)])
def test_the_worst_case_is_the_limit_of_many_teeth(alpha: float, limit: float) -> None:
    # 2 e / cos(alpha); 42.57 um at 20 degrees, approached by 1440 teeth
    assert limit == pytest.approx(stack(wheel(alpha=alpha)).combined.worst.high / UM, abs=0.0005)
    ring = Pattern(90, 90.0, pressure_angle=math.radians(alpha))
    assert limit == pytest.approx(2.0 * E * abs(flank_turn(ring, side=1, driven=False)) / UM, abs=0.0005)
    many = max(np.ptp(probed(1440, math.radians(alpha), hand)) for hand in (1, -1))
    assert limit == pytest.approx(many, abs=0.001 + SECOND_ORDER)


def test_a_run_out_alone_would_hide_six_percent() -> None:
    # 1/cos 20 deg = 1.064: the gap centres range over 2 e, one flank over more
    gap, flank = (stack(wheel(), i).combined.worst.high for i in (2, 0))
    assert 40.0 == pytest.approx(gap / UM)
    assert 1.064 == pytest.approx(flank / gap, abs=0.0005)


@pytest.mark.parametrize("alpha", [14.5, 20.0, 30.0])
@pytest.mark.parametrize("high_at", [0.0, 33.0, 200.0])
def test_every_flank_of_both_hands_stands_where_the_involute_puts_it(alpha: float, high_at: float) -> None:
    a, towards = math.radians(alpha), math.radians(high_at)
    pattern = Pattern(37, R, pressure_angle=a)
    offset = np.array([E * complex(math.cos(towards), math.sin(towards))])
    for hand in (1, -1):
        exact = probed(37, a, hand, towards=towards)
        ours = flank(offset, pattern, hand)
        assert exact == pytest.approx(ours, abs=SECOND_ORDER)
        other = flank(offset, pattern, -hand)
        assert np.abs(exact - other).max() > 5.0  # the two hands are 2 alpha apart in phase, not the same curve


def test_the_largest_step_between_neighbours_is_the_published_one() -> None:
    # f_pt = 1.485 um exact, 1.486 um = 2 e sin(pi/90)/cos 20 deg
    steps = [np.abs(np.diff(x, append=x[0])).max() for x in (probed(90, math.radians(20.0), h) for h in (1, -1))]
    assert 1.485 == pytest.approx(max(steps), abs=0.001)
    assert max(steps) == pytest.approx(float(sampled(wheel(), 1)[0]) / UM, abs=0.002)
    assert 1.486 == pytest.approx(stack(wheel(), 1).combined.worst.high / UM, abs=0.0005)


@pytest.mark.parametrize(("teeth", "alpha"), [(9, 20.0), (12, 14.5), (31, 25.0), (72, 20.0)])
def test_the_worst_case_is_never_passed_at_any_direction(teeth: int, alpha: float) -> None:
    worst = stack(wheel(teeth, alpha)).combined.worst.high / UM
    step = stack(wheel(teeth, alpha), 1).combined.worst.high / UM
    ranges, steps = [], []
    for towards in np.linspace(0.0, 2.0 * math.pi / teeth, 9):
        exact = probed(teeth, math.radians(alpha), 1, towards=float(towards))
        ranges.append(np.ptp(exact))
        steps.append(np.abs(np.diff(exact, append=exact[0])).max())
    assert max(ranges) <= worst + SECOND_ORDER
    assert max(steps) <= step + SECOND_ORDER
    # geometry: odd teeth see at best 2 e cos(pi/2z)/cos(alpha), even ones all of it
    share = math.cos(math.pi / (2 * teeth)) if teeth % 2 else 1.0
    assert worst * share == pytest.approx(max(ranges), rel=0.001)


@pytest.mark.parametrize(("alpha", "swing"), [(20.0, 29.1), (14.5, 20.7)])
def test_backlash_swings_by_what_both_exact_flanks_leave(alpha: float, swing: float) -> None:
    # 4 e tan(alpha) along the pitch circle: 29.1 um at 20 degrees, 20.7 um at 14.5: what two flanks that
    # stand in the direction of the worm open and close between them
    a = math.radians(alpha)
    gap = probed(360, a, 1, first=0.0) - probed(360, a, -1, first=0.0)
    assert swing == pytest.approx(np.ptp(gap), abs=0.05)
    assert np.ptp(gap) == pytest.approx(stack(wheel(alpha=alpha), 4).combined.worst.high / UM, abs=SECOND_ORDER)


def test_the_angle_with_a_worm_on_one_flank_is_the_shift_over_the_base_radius() -> None:
    # 206265 e/(r cos alpha) = 48.8" for e = 20 um at r = 90; a range of twice of it
    assert 48.78 == pytest.approx(stack(wheel(), 3).combined.worst.high / ARCSEC, abs=0.01)
    assert 2.0 * 48.78 == pytest.approx(stack(wheel(), 6).combined.worst.high / ARCSEC, abs=0.02)
    exact = np.ptp(probed(1440, math.radians(20.0), 1)) * UM / R
    assert 2.0 * 48.78 == pytest.approx(exact / ARCSEC, abs=0.03)


def test_the_run_out_of_the_teeth_stays_twice_the_eccentricity() -> None:
    # radial shift e cos(theta): F_r = 2 e, not F_p
    assert 40.0 == pytest.approx(stack(wheel(), 5).combined.worst.high / UM)
