"""The wave of a backlash read at some gaps, against numpy's and scipy's own least squares."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.division.backlash_wave import Wave, fitted, nearest_gap, widest_stretch

COUNT = 72


def planted(seed: int, places: int, scatter: float) -> tuple[dict[int, float], float, complex]:
    """Readings of a known mean and eccentricity at places unevenly spread, with a known scatter [mm]."""
    rng = np.random.default_rng(seed)
    mean, amplitude, way = rng.uniform(0.03, 0.1), rng.uniform(0.0, 0.02), rng.uniform(0.0, math.tau)
    step = COUNT / places
    gaps = [1 + int(k * step + rng.uniform(0.0, 0.7) * step) for k in range(places)]
    angles = np.array([math.tau * (gap - 1) / COUNT for gap in gaps])
    values = mean + amplitude * np.cos(angles - way) + scatter * rng.standard_normal(places)
    return dict(zip(gaps, values.tolist(), strict=True)), mean, amplitude * complex(math.cos(way), math.sin(way))


def design(gaps: list[int]) -> np.ndarray:
    angles = np.array([math.tau * (gap - 1) / COUNT for gap in gaps])
    return np.column_stack([np.ones(len(gaps)), np.cos(angles), np.sin(angles)])


@pytest.mark.parametrize("places", range(3, 17))
@pytest.mark.parametrize("seed", range(5))
def test_mean_and_wave_agree_with_numpys_least_squares(places: int, seed: int) -> None:
    readings, _, _ = planted(100 * places + seed, places, 0.002)
    wave = fitted(readings, COUNT)
    want, *_ = np.linalg.lstsq(design(list(readings)), np.array(list(readings.values())), rcond=None)
    assert (wave.mean, wave.x, wave.y) == pytest.approx(want.tolist(), abs=1e-12)
    left = np.array(list(readings.values())) - design(list(readings)) @ want
    assert list(wave.left.values()) == pytest.approx(left.tolist(), abs=1e-12)


@pytest.mark.parametrize("places", range(3, 17))
def test_without_scatter_what_was_planted_comes_back(places: int) -> None:
    readings, mean, vector = planted(places, places, 0.0)
    wave = fitted(readings, COUNT)
    assert wave.mean == pytest.approx(mean, abs=1e-12)
    assert complex(wave.x, wave.y) == pytest.approx(vector, abs=1e-12)
    assert max(abs(one) for one in wave.left.values()) < 1e-12


@pytest.mark.parametrize("places", [4, 5, 8, 13])
def test_uncertainties_agree_with_scipys_covariance_and_with_draws(places: int) -> None:
    optimize = pytest.importorskip("scipy.optimize")
    readings, _, _ = planted(7 * places, places, 0.002)
    wave, sigma = fitted(readings, COUNT), 0.0025

    def model(at: np.ndarray, mean: float, x: float, y: float) -> np.ndarray:
        return mean + x * np.cos(at) + y * np.sin(at)

    angles = np.array([math.tau * (gap - 1) / COUNT for gap in readings])
    _, covariance = optimize.curve_fit(
        model,
        angles,
        np.array(list(readings.values())),
        p0=(0.05, 0.0, 0.0),
        sigma=np.full(places, sigma),
        absolute_sigma=True,
    )
    for at in (0.0, 1.0, wave.loosest, wave.loosest + math.pi):
        v = np.array([1.0, math.cos(at), math.sin(at)])
        assert wave.spread_at(at) * sigma == pytest.approx(math.sqrt(v @ covariance @ v), rel=1e-5)
    along = np.array([0.0, math.cos(wave.loosest), math.sin(wave.loosest)])
    assert wave.amplitude_spread * sigma == pytest.approx(math.sqrt(along @ covariance @ along), rel=1e-5)
    rng = np.random.default_rng(places)
    drawn = [
        fitted({gap: value + sigma * rng.standard_normal() for gap, value in readings.items()}, COUNT)
        for _ in range(1500)
    ]
    towards = np.array([one.x * along[1] + one.y * along[2] for one in drawn])
    assert towards.std() == pytest.approx(wave.amplitude_spread * sigma, rel=0.08)


def test_eight_even_places_know_mean_and_swing_by_the_roots_of_their_number() -> None:
    wave = fitted(dict.fromkeys(range(1, 72, 9), 0.05) | {1: 0.06}, COUNT)
    assert wave.amplitude_spread == pytest.approx(math.sqrt(2.0 / 8.0))
    assert wave.spread_at(0.3) == pytest.approx(math.sqrt(1.0 / 8.0 + 2.0 / 8.0))


def test_the_tight_place_is_half_a_turn_from_the_loose_one() -> None:
    wave = fitted({1: 0.062, 10: 0.058, 19: 0.052, 28: 0.048, 37: 0.047, 46: 0.050, 55: 0.056, 64: 0.061}, COUNT)
    assert nearest_gap(wave.loosest + math.pi, COUNT) == 34
    assert nearest_gap(wave.loosest, COUNT) == 70
    assert isinstance(wave, Wave) and wave.farthest in wave.left


@pytest.mark.parametrize(
    ("gaps", "wide", "between"),
    [
        ((1, 19, 37, 55), 90.0, (1, 19)),
        ((1, 10, 19, 28), 225.0, (28, 1)),
        ((5,), 360.0, (5, 5)),
        ((1, 25, 49, 60), 120.0, (1, 25)),
    ],
)
def test_the_widest_stretch_is_told_with_its_ends(gaps: tuple[int, ...], wide: float, between: tuple[int, int]) -> None:
    angle, one, other = widest_stretch(gaps, COUNT)
    assert math.degrees(angle) == pytest.approx(wide)
    assert (one, other) == between


def test_places_all_at_one_side_tell_no_wave() -> None:
    with pytest.raises(ValueError, match="too close together"):
        fitted({1: 0.05, 2: 0.05, 3: 0.05}, COUNT)
