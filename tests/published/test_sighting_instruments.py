"""Sights, polygons and sine bars: the figures of the trade, and each relation against exact vectors.

The relations c / cos h, i tan h, v sin(az) tan h of a theodolite's axes, which of them two faces take away, the universal
joint's tan^2(b/2) and 206 265" c / D are textbook matter (from memory); the listed seconds were worked out from them once
more. The exact values are computed here from vectors alone.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from numpy.typing import NDArray

from setupcheck.division import ways

from .bench import ARCSEC

DEG = math.pi / 180.0
AROUND = np.linspace(0.0, math.tau, 3601)
FIRST_ORDER = 1e-4
"""Relative: seconds of arc against their second order, at slopes up to 30 deg."""


def seconds(angle: float) -> float:
    return angle / ARCSEC


def reading(azimuth: NDArray[np.float64], slope: float, *, c: float = 0.0, i: float = 0.0) -> NDArray[np.float64]:
    """Circle reading at which a telescope out of square by c, on a trunnion out of level by i, meets the target. Exact.

    The trunnion u = (-sin a cos i, cos a cos i, sin i) and the sight stand at 90 deg - c: T u = sin c.
    """
    return azimuth - np.arcsin((math.sin(c) - math.sin(i) * math.sin(slope)) / (math.cos(i) * math.cos(slope)))


def from_a_leaning_axis(azimuth: NDArray[np.float64], slope: float, lean: float) -> NDArray[np.float64]:
    """Azimuth of the target about an axis that leans towards azimuth 0. Exact, by turning the frame about y."""
    x, y, z = np.cos(azimuth) * math.cos(slope), np.sin(azimuth) * math.cos(slope), math.sin(slope)
    return np.arctan2(y, x * math.cos(lean) - z * math.sin(lean))


def off(found: NDArray[np.float64], true: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.angle(np.exp(1j * (found - true)))


def test_the_seconds_that_the_trade_knows() -> None:
    assert 5.77 == pytest.approx(seconds(ways.collimation_error(5 * ARCSEC, 30 * DEG)), abs=0.005)
    assert 5.77 == pytest.approx(seconds(ways.trunnion_error(10 * ARCSEC, 30 * DEG)), abs=0.005)
    assert 3.64 == pytest.approx(seconds(ways.plumb_wave(10 * ARCSEC, 20 * DEG)), abs=0.005)
    assert 20.6 == pytest.approx(seconds(ways.parallax(1.0, 10_000.0)), abs=0.05)
    assert 3.4 == pytest.approx(seconds(ways.parallax(0.05, 3_000.0)), abs=0.05)
    assert 103.0 == pytest.approx(ways.target_for(1.0, 2 * ARCSEC) / 1000.0, abs=0.5)
    for lean, arc in ((0.25, 1.0), (0.5, 3.9), (1.0, 15.7), (2.0, 62.8)):
        assert arc == pytest.approx(seconds(ways.tilted_axis_wave(lean * DEG)), abs=0.05)


@pytest.mark.parametrize("slope", [-25.0, 0.0, 3.0, 30.0])
def test_collimation_and_trunnion_come_alike_at_every_azimuth_and_go_out_in_two_faces(slope: float) -> None:
    c, i, h = 5 * ARCSEC, 10 * ARCSEC, slope * DEG
    for key, error in (("c", ways.collimation_error(c, h)), ("i", ways.trunnion_error(i, h))):
        given = {"c": c} if key == "c" else {"i": i}
        one = off(reading(AROUND, h, **given), AROUND)
        other = off(reading(AROUND, h, **{k: -v for k, v in given.items()}), AROUND)  # turned over, both change sides
        assert np.ptp(one) < 1e-12
        assert error == pytest.approx(float(np.abs(one).max()), rel=FIRST_ORDER, abs=1e-15)
        assert np.abs(one + other).max() < 1e-12
        assert 2.0 * error == pytest.approx(float(np.abs(one - other).max()), rel=FIRST_ORDER, abs=1e-15)


@pytest.mark.parametrize("slope", [-20.0, 3.0, 20.0, 45.0])
def test_a_leaning_axis_costs_a_wave_once_per_turn_that_faces_do_not_see(slope: float) -> None:
    lean, h = 10 * ARCSEC, slope * DEG
    error = off(from_a_leaning_axis(AROUND, h, lean), AROUND)
    assert ways.plumb_wave(lean, h) == pytest.approx(float(np.abs(error).max()), rel=1e-3)
    assert np.abs(error - ways.plumb_wave(lean, h) * np.sign(slope) * np.sin(AROUND)).max() < 1e-8
    # the instrument turned over stands on the same axis: both faces read the same azimuth about it
    both = (
        reading(from_a_leaning_axis(AROUND, h, lean), h, c=ARCSEC)
        + reading(from_a_leaning_axis(AROUND, h, lean), h, c=-ARCSEC)
    ) / 2.0
    assert np.abs(off(both, AROUND) - error).max() < 1e-12


def test_what_is_left_out_of_a_leaning_axis_is_as_small_as_said() -> None:
    lean = 120 * ARCSEC
    level = off(from_a_leaning_axis(AROUND, 0.0, lean), AROUND)
    assert 0.02 == pytest.approx(seconds(float(np.abs(level).max())), abs=0.005)


@pytest.mark.parametrize(("centring", "target"), [(0.2, 12_000.0), (1.0, 10_000.0), (0.05, 3_000.0), (20.0, 100.0)])
def test_parallax_is_the_largest_angle_of_a_triangle(centring: float, target: float) -> None:
    seen = np.arctan2(centring * np.sin(AROUND), target - centring * np.cos(AROUND))
    assert ways.parallax(centring, target) == pytest.approx(float(seen.max()), rel=1e-5)
    second = 2.0 * abs(np.mean(seen[:-1] * np.sin(2.0 * AROUND[:-1])))
    assert centring**2 / (2.0 * target**2) == pytest.approx(second, rel=1e-3)


def turned(vectors: NDArray[np.float64], about: NDArray[np.float64], angle: float) -> NDArray[np.float64]:
    """Vectors (3, n) turned about an axis, by Rodrigues' formula."""
    c, s = math.cos(angle), math.sin(angle)
    along = about[:, None] * (about @ vectors)
    return vectors * c + np.cross(about, vectors.T).T * s + along * (1.0 - c)


@pytest.mark.parametrize("lean", [0.25, 0.5, 1.0, 2.0, 10.0])
@pytest.mark.parametrize("towards", [0.0, 77.0])
def test_the_normals_of_a_leaning_polygon_run_ahead_twice_a_turn(lean: float, towards: float) -> None:
    normals = np.stack([np.cos(AROUND), np.sin(AROUND), 0.0 * AROUND])
    axis = np.array([math.cos(towards * DEG), math.sin(towards * DEG), 0.0])
    leaning = turned(normals, axis, lean * DEG)
    ahead = off(np.arctan2(leaning[1], leaning[0]), AROUND)
    second = np.mean(ahead[:-1] * np.exp(2j * AROUND[:-1])) * 2.0
    assert ways.tilted_axis_wave(lean * DEG) == pytest.approx(abs(second), rel=1e-6)
    assert np.ptp(ahead) / 2.0 == pytest.approx(abs(second), rel=1e-3)


@pytest.mark.parametrize("count", [7, 8, 12, 72])
def test_a_sine_bar_against_its_arcsine(count: int) -> None:
    length, blocks = 200.0, 0.001
    found = ways.sine_bar_errors(count, length, blocks)
    for place, error in enumerate(found):
        angle = place / count * math.tau
        rest = abs(angle - round(angle / (math.pi / 2.0) - 1e-9) * math.pi / 2.0)
        exact = math.asin((length * math.sin(rest) + blocks) / length) - rest if rest > 1e-9 else 0.0
        assert exact == pytest.approx(error, rel=1e-5)
        assert rest <= math.pi / 4.0 + 1e-9
    assert max(found) <= blocks / (length * math.cos(math.pi / 4.0)) * (1.0 + 1e-12)


def test_no_instrument_stands_as_far_off_as_its_target() -> None:
    with pytest.raises(ValueError, match="as far off"):
        ways.parallax(5.0, 5.0)
    with pytest.raises(ValueError, match="above zero"):
        ways.rounded_coordinates((0.0,), 10.0, 0.0)
