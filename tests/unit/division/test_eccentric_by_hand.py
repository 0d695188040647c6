"""An eccentric ring told from an error of dividing by its flanks, by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy import stats

from setupcheck.division.design import Term
from setupcheck.division.eccentric import Wheel, _chance, _looks, _side, apart, eccentric
from setupcheck.division.fit import Fit
from setupcheck.division.results import Eccentric, Flanks, Interval, Length, Wave
from setupcheck.physics.student_t import f_above
from tests.unit.division.few_points import by_terms, points

ALPHA = math.radians(20.0)


def wave(direction: float, within: float | None = 0.1, harmonic: float = 1.0, why: str = "") -> Wave:
    a, b = 1e-4 * math.cos(direction), 1e-4 * math.sin(direction)
    length = Length(1e-4, 0.8e-4, 1.3e-4, direction % math.tau, within)
    return Wave("once per turn", harmonic, a, b, (1e-12, 0.0, 1e-12), 9.0, 0.0, length, why)


@pytest.mark.parametrize(("way", "turned", "grows", "side"), [
    (1, False, 1, -1), (-1, False, 1, 1), (1, True, 1, 1), (-1, True, 1, -1), (1, False, -1, 1), (0, False, 1, 0),
])  # fmt: skip
def test_one_flank_leans_its_wave_by_the_pressure_angle(way: int, turned: bool, grows: int, side: int) -> None:
    """One flank is highest at phi - 90 deg - side alpha: phi is 90 deg and side alpha on from there; e = r cos(alpha) delta."""
    data = points([0, 90, 180, 270], [0] * 4, direction=[way] * 4)
    fit = by_terms(data, Term("zero", 0.0), Term("wave", 1.0))
    at = math.radians(300.0)
    off = eccentric(fit, 1.0, 9.0, (wave(at),), Wheel(36, 50.0, ALPHA), turned=turned, grows=grows, points=data)
    assert off is not None
    assert _side(data, turned=turned) * grows == side == off.side
    assert off.flanks == ("one" if side else "unknown")
    assert off.direction == pytest.approx((at + math.pi / 2.0 + side * ALPHA) % math.tau)
    assert off.within == pytest.approx(0.1 + (0.0 if side else ALPHA))
    assert (off.amount.value, off.amount.low, off.amount.high) == pytest.approx(
        tuple(50.0 * math.cos(ALPHA) * x for x in (1e-4, 0.8e-4, 1.3e-4))
    )
    assert (off.looks, off.open) == ("", "")
    # teeth of 10 deg: tooth n spans 10 (n - 1) to 10 n
    assert off.tooth == math.floor(math.degrees(off.direction) / 10.0) + 1
    bare = eccentric(fit, 1.0, 9.0, (wave(at),), Wheel(36, 50.0), turned=turned, grows=grows, points=data)
    assert bare is not None
    assert bare.direction == pytest.approx((at + math.pi / 2.0) % math.tau)
    assert bare.amount.value == pytest.approx(50.0 * 1e-4)
    assert bare.open == "the pressure angle of the teeth is not stated"
    assert bare.within == pytest.approx(0.1)
    shut = eccentric(
        fit, 1.0, 9.0, (wave(at, None, why="a reason"),), Wheel(36, 50.0), turned=False, grows=1, points=data
    )
    assert shut is not None and (shut.open, shut.within) == ("a reason", None)
    for waves, wheel in (((wave(at, harmonic=2.0),), Wheel(36, 50.0)), ((wave(at),), Wheel(36)), ((), Wheel(36, 50.0))):
        assert eccentric(fit, 1.0, 9.0, waves, wheel, turned=False, grows=1, points=data) is None


def test_readings_of_both_directions_name_no_flank() -> None:
    assert _side(points([0, 90], [0, 0], direction=[1, -1]), turned=False) == 0
    assert _side(points([0, 90], [0, 0], direction=[1, 0]), turned=True) == 0


@pytest.mark.parametrize(("share", "grows", "looks"), [
    (1.0, 1, "eccentric"), (0.0, 1, "division"), (0.5, 1, "neither"), (1.0, -1, "neither"), (-1.0, -1, "eccentric"),
])  # fmt: skip
def test_both_flanks_look_like_an_eccentric_ring_or_like_dividing(share: float, grows: int, looks: str) -> None:
    """Mean (a, b) of an eccentric ring has the difference 2 tan(alpha) (-b, a); of dividing none."""
    mean, terms = np.array([3.0, 4.0]), (Term("wave", 1.0), Term("swing", 1.0))
    seen = share * 2.0 * math.tan(ALPHA) * np.array([-4.0, 3.0])
    fit = Fit(terms, np.concatenate([mean, seen]), np.eye(4), np.zeros(1), 0.0, 9)
    assert _looks(fit, 0.01, 30.0, ALPHA, grows) == looks
    assert _looks(fit, 100.0, 30.0, ALPHA, grows) == "undecided"


def test_the_chance_of_a_vector_is_hotellings() -> None:
    vector, covariance = np.array([2.0, -1.0]), np.array([[2.0, 0.3], [0.3, 0.5]])
    square = float(vector @ np.linalg.inv(covariance) @ vector)
    assert _chance(vector, covariance, 7.0) == pytest.approx(f_above(square / 2.0, 2.0, 7.0))
    assert _chance(vector, covariance, 0.3) == pytest.approx(f_above(square / 2.0, 2.0, 1.0))
    assert _chance(vector, covariance, 1e9) == pytest.approx(math.exp(-square / 2.0), rel=1e-3)  # chi square of two
    assert _chance(vector, np.zeros((2, 2)), 7.0) == 1.0


@pytest.mark.parametrize("missing", ["flanks", "off", "looks", "alpha", "radius"])
def test_nothing_is_taken_apart_where_a_part_is_missing(missing: str) -> None:
    flanks: Flanks | None = Flanks(
        (1e-4, 2e-4, 3e-5, 1e-5), tuple(tuple(1e-12 * (i == j) for j in range(4)) for i in range(4))
    )
    off: Eccentric | None = Eccentric(
        Interval(1.0, 1.0, 1.0), 0.0, 0.1, 1, "both", 0, "division" if missing == "looks" else "neither"
    )
    wheel = Wheel(30, None if missing == "radius" else 40.0, None if missing == "alpha" else ALPHA)
    flanks, off = None if missing == "flanks" else flanks, None if missing == "off" else off
    assert apart(flanks, off, wheel, 20.0) is None


def test_what_is_taken_apart_is_known_as_the_wider_of_its_two() -> None:
    square = [[0.0] * 4 for _ in range(4)]
    square[2][2], square[3][3] = 4e-12, 9e-12
    off = Eccentric(Interval(1.0, 1.0, 1.0), 0.0, 0.1, 1, "both", 0, "neither")
    found = apart(Flanks((1e-4, 2e-4, 3e-5, 1e-5), tuple(map(tuple, square))), off, Wheel(30, 40.0, ALPHA), 20.0)
    assert found is not None
    assert found.within == pytest.approx(40.0 * stats.t.ppf(0.975, 20) * 3e-6 / (2.0 * math.tan(ALPHA)))
    assert found.tooth == Wheel(30).tooth(found.direction)
