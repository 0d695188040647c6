"""Ends of a wave that readings allow, and whose it is, against scipy and by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy import integrate, stats

from setupcheck.division.amplitude import _ends, _root, _within, length_of, t_at
from setupcheck.division.owners import AS_PLANNED, Explained, Owner
from setupcheck.physics.student_t import t_quantile


@pytest.mark.parametrize(("along", "across"), [(1.0, 1.0), (0.5, 2.0), (2.0, 0.3), (1.0, 0.0)])
@pytest.mark.parametrize("value", [4.0, 9.0])
def test_ends_are_those_of_the_chance_integrated_by_scipy(value: float, along: float, across: float) -> None:
    """P(|(L + s1 u, s2 v)| < value) = integral over v of the normal law between both ends of the chord."""

    def below(length: float) -> float:
        def inner(v: float) -> float:
            square = value**2 - (across * v) ** 2
            if square <= 0.0:
                return 0.0
            chord = math.sqrt(square)
            return stats.norm.pdf(v) * (
                stats.norm.cdf((chord - length) / along) - stats.norm.cdf((-chord - length) / along)
            )

        if across == 0.0:
            return float(stats.norm.cdf((value - length) / along) - stats.norm.cdf((-value - length) / along))
        return float(integrate.quad(inner, -6.0, 6.0, limit=200)[0])

    low, high = _ends(value, along, across)
    assert below(high) == pytest.approx(0.025, abs=0.003)
    if low > 0.0:
        assert below(low) == pytest.approx(0.975, abs=0.003)
    else:
        assert below(0.0) <= 0.978


def test_ends_without_scatter_along_are_chords() -> None:
    assert _ends(3.0, 0.0, 0.0) == (3.0, 3.0)
    low, high = _ends(5.0, 0.0, 1.0)
    assert 0.0 < low <= high <= 5.001
    assert _ends(0.5, 3.0, 2.0)[0] == 0.0
    assert _ends(0.0, 2.0, 7.0)[1] >= 7.0
    assert _root(lambda x: 2.0 - x, 0.0, 10.0) == pytest.approx(2.0)
    assert _root(lambda x: -1.0 - x, 3.0, 10.0) == 3.0
    assert _root(lambda x: 0.0 * x, 3.0, 10.0) == 3.0


@pytest.mark.parametrize(("along", "across"), [(1.0, 1.0), (3.0, 0.5), (0.5, 2.0)])
def test_the_turn_that_readings_allow_is_fiellers(along: float, across: float) -> None:
    """Turned by psi, the component across L sin psi equals t sqrt(s1^2 sin^2 + s2^2 cos^2): tan^2 = t^2 s2^2/(L^2 - t^2 s1^2)."""
    t, value = 2.2, 10.0
    for base in (0.0, 2.0, -2.5):
        turn = np.array([[math.cos(base), -math.sin(base)], [math.sin(base), math.cos(base)]])
        vector, covariance = turn @ [value, 0.0], turn @ np.diag([along**2, across**2]) @ turn.T
        wanted = math.atan(t * across / math.sqrt(value**2 - (t * along) ** 2))
        assert _within(vector, covariance, t) == pytest.approx(wanted, rel=1e-6)
    assert _within(np.array([2.0, 0.0]), np.eye(2), 2.2) is None
    skew = np.array([[1.0, 0.8], [0.8, 1.0]])
    both = [_within(np.array([10.0, 0.0]), skew, 2.0), _within(np.array([10.0, 0.0]), skew * [[1, -1], [-1, 1]], 2.0)]
    assert both[0] == pytest.approx(both[1])  # the worse side, whichever it is


def test_a_bound_besides_takes_the_direction_where_it_is_as_long_as_the_wave() -> None:
    far = length_of(np.array([0.0, -20.0]), np.eye(2), 9.0, also=1.0)
    assert far.direction == pytest.approx(1.5 * math.pi)
    assert length_of(np.array([20.0, 0.0]), np.eye(2), 9.0, also=20.0).within is None
    assert length_of(np.array([20.0, 0.0]), np.eye(2), 9.0, also=19.0).low == 0.0
    assert length_of(np.array([20.0, 0.0]), np.zeros((2, 2)), 9.0, also=10.0).within == pytest.approx(math.asin(0.5))
    assert t_at(1e12) == t_at(1e9) == pytest.approx(1.95996, abs=1e-4)
    assert t_at(4.0, 0.9) == pytest.approx(t_quantile(0.9, 4.0)) == pytest.approx(stats.t.ppf(0.9, 4))


def test_owners_are_told_apart_by_three_to_one() -> None:
    def told(*odds: float) -> bool:
        return Explained(0.5, tuple(Owner(AS_PLANNED, x, (0.0, 0.0)) for x in odds)).told_apart

    assert [told(1.0), told(0.75, 0.25), told(0.74, 0.26), told(0.62, 0.2, 0.18)] == [True, True, False, True]


@pytest.mark.parametrize("base", [0.5, 2.0, -1.0])
def test_turning_the_frame_changes_no_end_and_no_angle(base: float) -> None:
    turn = np.array([[math.cos(base), -math.sin(base)], [math.sin(base), math.cos(base)]])
    for vector, wide in (([10.0, 0.0], np.diag([4.0, 0.3])), ([3.0, 0.0], np.array([[0.2, 0.3], [0.3, 1.5]]))):
        plain = length_of(np.array(vector), wide, 7.0)
        turned = length_of(turn @ vector, turn @ wide @ turn.T, 7.0)
        assert (turned.low, turned.high) == pytest.approx((plain.low, plain.high), rel=1e-6)
        assert turned.within == (None if plain.within is None else pytest.approx(plain.within, rel=1e-5))
        assert turned.direction == pytest.approx((plain.direction + base) % math.tau)


@pytest.mark.parametrize("value", [0.0, 0.5, 1.9])
def test_a_wave_shorter_than_its_scatter_across_may_lie_any_way(value: float) -> None:
    """Its direction is not known then, so the wider of both scatters counts along it too."""
    found = length_of(np.array([value, 0.0]), np.diag([1.0, 4.0]), 1e9)
    assert (found.low, found.high) == pytest.approx(_ends(value, 2.0, 2.0), rel=1e-4)
    assert found.within is None
