"""How many waves, what bend and which gap the stations of a test allow, on stations few enough to count by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.division import doubts
from setupcheck.division.design import Sums, Term, design, sums_of
from setupcheck.division.points import gap_of
from setupcheck.division.reduction import _found
from tests.unit.division.few_points import points, round_the_circle


@pytest.mark.parametrize(("stations", "fits"), [(7, False), (8, True)])
def test_a_higher_wave_needs_three_stations_beyond_its_unknowns(stations: int, fits: bool) -> None:
    """Zero, once and twice per turn are 1 + 2 + 2 unknowns; with three to spare that makes eight, however often each is read."""
    plan = design(points(round_the_circle(stations, 3)), [1.0, 2.0])
    assert plan.stations == stations
    assert (Term("wave", 2.0) in plan.terms) == fits
    assert [a.why for a in plan.alike] == ([] if fits else ["few"])


def test_three_stations_round_the_circle_are_no_arc() -> None:
    """At 0, 100 and 200 deg the widest stretch is the one over zero, 160 deg; at 0, 85 and 170 it is 190."""
    assert not design(points([0.0, 100.0, 200.0] * 2), [1.0]).arc
    assert design(points([0.0, 85.0, 170.0] * 2), [1.0]).arc


def test_where_nothing_is_taken_out_a_column_is_left_whole() -> None:
    """Twelve even stations: the squares of cos and sin come to 6 each and their product to nothing."""
    wave = Term("wave", 1.0)
    sums = sums_of(points(round_the_circle(12, 1)), [Term("zero", 0.0), wave, Term("drift")])
    assert isinstance(sums, Sums)
    assert sums.left([], sums.at([wave])) == pytest.approx(6.0 * np.eye(2), abs=1e-12)
    assert sums.told([], Term("drift")) == pytest.approx(1.0)
    assert sums.shares([], wave) == pytest.approx([1.0, 1.0])


def test_four_readings_beyond_the_unknowns_are_enough_to_see_a_bend() -> None:
    """Four stations read twice: zero, drift and one wave leave four. A bent drift is then taken for itself, not for a wave."""
    degrees = round_the_circle(4, 2)
    t = np.linspace(-0.5, 0.5, 8)
    theta = np.radians(degrees)
    y = 3.0 * np.cos(theta) - 2.0 * np.sin(theta) + 5.0 * (4.0 * t * t) + 0.7 * t
    found = _found(points(degrees, list(y)), [1.0])
    assert found.plan.has("drift")
    assert found.bends[:1] == (Term("bend", 2.0),)
    assert found.fit.vector(Term("wave", 1.0)) == pytest.approx([3.0, -2.0], abs=1e-9)
    assert found.fit.vector(Term("bend", 2.0)) == pytest.approx([5.0], abs=1e-9)


@pytest.mark.parametrize("unit", [1.0, 5e-6])
def test_residuals_that_follow_each_other_do_so_in_any_unit(unit: float) -> None:
    """Eight periods of cos(j 45 deg): products of neighbours over squares are cos 45 deg, but for the pair across the end,
    which is one of 32 in the mean: cos 45 deg (1 - 1/32)."""
    wave = unit * np.cos(np.radians(45.0) * np.arange(64))
    assert doubts.follows(wave, 64) == pytest.approx(math.cos(math.radians(45.0)) * (1.0 - 1.0 / 32.0))
    assert doubts.follows(unit * np.cos(np.pi * np.arange(64)), 64) == 0.0
    assert doubts.follows(wave[:7], 7) == doubts.follows(np.zeros(64), 64) == 0.0


def test_readings_that_follow_each_other_count_as_fewer() -> None:
    """n readings of serial correlation r are worth n (1 - r)/(1 + r), and their mean scatters as much more (textbook)."""
    degrees = round_the_circle(64, 2)
    y = np.cos(8.0 * np.radians(degrees)) + np.random.default_rng(3).normal(0.0, 0.05, 128)
    found = _found(points(degrees, list(y)), [1.0])
    left = found.fit.residuals
    r = float(left[1:] @ left[:-1] / (left @ left))
    assert found.follows == pytest.approx(r, abs=0.01)  # and a little for what the fit takes away
    assert r > 0.6
    f = found.follows
    assert found.nu == pytest.approx(found.scatter.nu * (1.0 - f) / (1.0 + f))
    assert found.spread == pytest.approx(found.scatter.used * (1.0 + f) / (1.0 - f))


def test_one_wide_stretch_among_four_is_a_gap_and_two_are_none() -> None:
    """Stations at 0, 60, 120, 180 deg: steps of 60 and one of 180. With two of four wide there is no usual step."""
    found = gap_of(points([0.0, 60.0, 120.0, 180.0]))
    assert found is not None
    assert [math.degrees(x) for x in found] == pytest.approx([180.0, 0.0, 60.0])
    assert gap_of(points([0.0, 60.0, 180.0, 240.0])) is None
    assert gap_of(points([0.0, 90.0, 180.0, 270.0])) is None
