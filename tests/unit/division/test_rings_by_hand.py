"""Rings of readings, gaps to cut and a backlash, each by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.division.backlash_wave import FEWEST, WIDEST, Wave, fitted, nearest_gap, widest_stretch
from setupcheck.division.prove_out import FLAT, Ring, gap_at, gaps_to_cut, inverse_of, off_the_quarters, reduce


def test_the_inverse_of_three_by_three_is_numpys() -> None:
    rng = np.random.default_rng(5)
    for _ in range(5):
        a = rng.normal(size=(6, 3))
        m = a.T @ a
        assert np.array(inverse_of(m.tolist(), 1)) == pytest.approx(np.linalg.inv(m))
    small = np.diag([1.0, 1.0, FLAT]) * 2.0
    edge = (np.linalg.det(small) / FLAT) ** (1.0 / 3.0)  # rows^3 FLAT is the determinant: two rows
    assert edge == pytest.approx(2.0)
    assert inverse_of((small * 1.01).tolist(), 2)[2][2] == pytest.approx(1.0 / small[2][2] / 1.01)
    with pytest.raises(ValueError, match="too close together"):
        inverse_of((small * 0.99).tolist(), 2)


def test_gaps_to_cut_and_rings_by_hand() -> None:
    assert [gaps_to_cut(n) for n in (1, 2, 3, 4, 5)] == [(1,), (1, 2), (1, 2, 3), (1, 2, 3, 4), (1, 2, 4, 5)]
    assert off_the_quarters(8) == 0.0
    # 5 gaps stand at 0 72 144 216 288: quarters 90 180 270 are met at 72, 144 or 216, 288
    assert math.degrees(off_the_quarters(5)) == pytest.approx(36.0)
    ring = reduce({1: 2.0, 2: 1.0, 3: 0.0, 4: 1.0}, 4)
    assert (ring.mean, ring.x, ring.y) == pytest.approx((1.0, 1.0, 0.0))
    assert (ring.eccentricity, math.sin(ring.direction)) == pytest.approx((1.0, 0.0), abs=1e-12)
    assert (ring.along, ring.across, ring.misfit) == pytest.approx((math.sqrt(0.5), math.sqrt(0.5), 0.0))
    back = reduce({1: 0.0, 2: -3.0, 3: 0.0, 4: 3.0}, 4)
    assert back.direction == pytest.approx(1.5 * math.pi) and back.y == pytest.approx(-3.0)
    still = reduce({1: 1.0, 25: 1.0, 49: 1.0}, 72)
    assert (still.eccentricity, still.misfit) == (pytest.approx(0.0, abs=1e-12), None)
    uneven = reduce({1: 0.0, 13: 0.0, 37: 0.0, 49: 0.0}, 72)
    rows = np.array([[1.0, math.cos(a), math.sin(a)] for a in np.radians([0.0, 60.0, 180.0, 240.0])])
    covariance = np.linalg.inv(rows.T @ rows)
    if uneven.eccentricity == 0.0:  # no direction: along x
        assert (uneven.along, uneven.across) == pytest.approx(
            (math.sqrt(covariance[1, 1]), math.sqrt(covariance[2, 2]))
        )


def test_a_ring_that_stands_out_at_its_first_gap_does_so_at_gap_1_and_not_a_turn_on() -> None:
    """A rounding error below zero, as least squares leave it, is no whole turn."""
    ring = Ring(0.0, 0.010, -1e-19, 0.5, 0.5, None)
    assert ring.direction == 0.0
    assert gap_at(ring.direction, 72) == gap_at(-1e-19, 72) == 1.0
    assert Ring(0.0, 0.0, -0.010, 0.5, 0.5, None).direction == pytest.approx(1.5 * math.pi)


def test_a_backlash_by_hand() -> None:
    assert (FEWEST, math.degrees(WIDEST)) == (4, pytest.approx(120.0))
    wave = fitted({1: 3.0, 2: 1.5, 3: 1.0, 4: 2.5}, 4)
    # mean 2; x = (3 - 1)/2, y = (1.5 - 2.5)/2; left over +- (3 - 1.5 + 1 - 2.5)/4 = 0
    assert (wave.mean, wave.x, wave.y) == pytest.approx((2.0, 1.0, -0.5))
    assert wave.loosest == pytest.approx(math.tau + math.atan2(-0.5, 1.0))
    odd = fitted({1: 3.4, 2: 1.1, 3: 1.4, 4: 2.1}, 4)
    assert list(odd.left.values()) == pytest.approx([0.4, -0.4, 0.4, -0.4])
    assert Wave(0.0, 1.0, 0.0, ((1.0,) * 3,) * 3, {1: 0.1, 2: -0.3, 3: 0.2}).farthest == 2
    plain = Wave(0.0, 1.0, 0.0, ((4.0, 0.1, 0.2), (0.1, 9.0, 0.3), (0.2, 0.3, 16.0)), {})
    assert plain.amplitude_spread == pytest.approx(3.0)
    assert plain.spread_at(math.pi / 2.0) == pytest.approx(math.sqrt(4.0 + 16.0 + 0.4))
    assert plain.spread_at(math.pi) == pytest.approx(math.sqrt(4.0 + 9.0 - 0.2))
    assert widest_stretch({1: 0.0, 5: 0.0, 7: 0.0}, 8) == (pytest.approx(math.pi), 1, 5)
    assert widest_stretch((2, 4, 6, 8), 8) == (pytest.approx(math.pi / 2), 2, 4)  # the first of several alike
    assert [nearest_gap(math.tau * x / 8.0, 8) for x in (0.0, 0.4, 0.6, 7.4, 7.6, -1.0)] == [1, 1, 2, 8, 1, 8]
