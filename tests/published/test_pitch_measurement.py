"""The comparative pitch test, as gear metrology books reduce it (from memory; numbers worked out here).

Readings of adjacent pitches against one setting 12 8 5 11 14 9 6 7 um: mean 9; single pitch 3 -1 -4 2 5 0 -3 -2;
cumulative 3 2 -2 0 5 5 2 0; f_pt = 5, F_p = 7, largest difference of neighbouring pitches 6 (over the closing one too).
An eccentric ring of 8 with e = 10 um and one place on the peak: range 20.0, largest step 7.07, bound 2 e sin(pi/8) = 7.65.
"""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger.teeth import largest_steps, ranges

from .bench import MANY, UM, sampled, stack

READINGS = np.array([12.0, 8.0, 5.0, 11.0, 14.0, 9.0, 6.0, 7.0])


def reduced(readings: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """(single, cumulative): the mean of a closed circle is the true setting."""
    single = readings - readings.mean()
    return single, np.cumsum(single)


def test_the_figures_of_the_reduced_readings() -> None:
    single, cumulative = reduced(READINGS)
    assert 7.0 == ranges(cumulative[None, :])[0]  # F_p, the closing zero included
    assert 5.0 == largest_steps(cumulative[None, :])[0] == np.abs(single).max()  # f_pt
    assert 6.0 == np.abs(np.diff(single, append=single[0])).max()  # difference of neighbouring pitches


def test_figures_do_not_depend_on_the_tooth_that_is_called_the_first() -> None:
    _, cumulative = reduced(READINGS)
    for k in range(8):
        _, turned = reduced(np.roll(READINGS, k))
        assert ranges(cumulative[None, :]) == pytest.approx(ranges(turned[None, :]))
        assert largest_steps(cumulative[None, :]) == pytest.approx(largest_steps(turned[None, :]))


def holes(count: int, high_at: str = "") -> str:
    """A drilled plate with a run-out of 20 um about its bore (invented part)."""
    direction = f", high_at: {high_at}" if high_at else ""
    return f"""
setupcheck: 1
title: Holes off their axis
units: mm
parts:
  plate:
    surfaces:
      pins: {{kind: holes, count: {count}, on_circle: 100, at: 0}}
      bore: {{kind: bore, diameter: 40, from: -10, to: 10}}
    given:
      - {{of: pins, about: bore, runout: {{measured: 20 um{direction}}}, division: 0"}}
require:
  - {{what: gap-centre-pitch, of: plate.pins, about: plate.bore, at_most: 60 um}}
  - {{what: single-pitch, of: plate.pins, about: plate.bore, at_most: 60 um}}
"""


def test_an_eccentric_ring_of_eight_with_a_place_on_the_peak() -> None:
    # the arc is e sin(phi - theta): a place stands on the peak when the offset points 90 degrees ahead of it
    range_, step = stack(holes(8, "90 deg"), 0), stack(holes(8, "90 deg"), 1)
    assert 20.0 == pytest.approx(float(sampled(holes(8, "90 deg"), 0)[0]) / UM)
    assert 7.07 == pytest.approx(float(sampled(holes(8, "90 deg"), 1)[0]) / UM, abs=0.005)
    assert 20.0 == pytest.approx(range_.combined.worst.high / UM)
    assert 7.65 == pytest.approx(step.combined.worst.high / UM, abs=0.005)


def test_the_bound_of_the_step_is_reached_half_way_between_two_places() -> None:
    # 2 e sin(pi/8) where the offset points along the middle of two places
    values = sampled(holes(8, "22.5 deg"), 1)
    assert 7.65 == pytest.approx(float(values[0]) / UM, abs=0.005)


def test_nine_places_never_show_all_of_twice_the_eccentricity() -> None:
    # odd count: 2 e cos(pi/18) = 19.696 um at the worst direction, with e = 10 um
    values = sampled(holes(9), 0, trials=MANY) / UM
    assert 19.696 == pytest.approx(float(values.max()), abs=0.001)
    assert 20.0 * math.cos(math.pi / 18.0) >= values.max() - 1e-9
    assert 20.0 == pytest.approx(stack(holes(9), 0).combined.worst.high / UM)
