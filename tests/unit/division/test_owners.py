"""Odds of the owner of a measured wave: against scipy's Gaussian, and against plans where one setup really went wrong."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.stats import chi2, multivariate_normal

from setupcheck.division.owners import AS_PLANNED, OUT_OF_HAND, explained

SPREADS = {"op 20": np.diag([4.0, 4.0]), "op 30": np.array([[9.0, 3.0], [3.0, 5.0]]), "op 50": np.diag([30.0, 1.0])}
READ = np.array([[0.5, 0.1], [0.1, 0.4]])


def test_odds_are_those_of_scipys_gaussians() -> None:
    measured, expected = np.array([9.0, -2.0]), np.array([1.0, 0.5])
    off = np.subtract(measured, expected)
    planned = READ + sum(SPREADS.values())
    density = {AS_PLANNED: multivariate_normal(cov=planned).pdf(off)}
    for name, spread in SPREADS.items():
        density[name] = multivariate_normal(cov=planned + (OUT_OF_HAND**2 - 1.0) * spread).pdf(off)
    found = explained(measured, READ, expected=expected, spreads=SPREADS)
    total = sum(density.values())
    assert {one.name: one.odds for one in found.owners} == pytest.approx({n: d / total for n, d in density.items()})
    assert found.beyond == pytest.approx(chi2.sf(off @ np.linalg.inv(planned) @ off, 2))


def test_a_wave_in_the_middle_of_the_plan_is_best_explained_as_planned() -> None:
    found = explained(np.array([1.0, 0.5]), READ, expected=np.array([1.0, 0.5]), spreads=SPREADS)
    assert found.owners[0].name == AS_PLANNED and found.beyond == pytest.approx(1.0)
    assert all(one.length == 0.0 for one in found.owners)


def test_turning_the_frame_turns_the_shares_and_leaves_the_odds() -> None:
    turn = np.array([[0.0, -1.0], [1.0, 0.0]])
    first = explained(np.array([9.0, -2.0]), READ, expected=np.zeros(2), spreads=SPREADS)
    second = explained(
        turn @ (9.0, -2.0),
        turn @ READ @ turn.T,
        expected=np.zeros(2),
        spreads={n: turn @ s @ turn.T for n, s in SPREADS.items()},
    )
    for a, b in zip(first.owners, second.owners, strict=True):
        assert (a.name, a.odds) == (b.name, pytest.approx(b.odds))
        assert b.share == pytest.approx(tuple(turn @ a.share))


def test_the_setup_that_went_wrong_is_named_as_often_as_its_odds_say() -> None:
    """Calibration: over plans drawn with one setup at a time out of hand, the odds told are the share that is right."""
    rng = np.random.default_rng(7)
    names = [AS_PLANNED, *SPREADS]
    told, right = [], []
    for _ in range(3000):
        truth = names[rng.integers(len(names))]
        wave = rng.multivariate_normal((0.0, 0.0), READ)
        for name, spread in SPREADS.items():
            wave += rng.multivariate_normal((0.0, 0.0), spread * (OUT_OF_HAND**2 if name == truth else 1.0))
        best = explained(wave, READ, expected=np.zeros(2), spreads=SPREADS).owners[0]
        told.append(best.odds)
        right.append(best.name == truth)
    assert np.mean(right) == pytest.approx(np.mean(told), abs=4.0 * math.sqrt(0.25 / 3000))
    assert np.mean(right) > 0.4  # four explanations: a guess would be right in a quarter


def test_a_plan_without_room_is_refused() -> None:
    with pytest.raises(ValueError, match="any room"):
        explained(np.array([1.0, 0.0]), np.zeros((2, 2)), expected=np.zeros(2), spreads={})


def test_with_four_numbers_the_chance_is_that_of_four() -> None:
    spreads = {"op 20": np.diag([4.0, 4.0, 1.0, 1.0]), "op 40": np.diag([9.0, 9.0, 0.0, 0.0])}
    read = 0.2 * np.eye(4)
    off = np.array([6.0, -2.0, 0.1, 0.3])
    found = explained(off, read, expected=np.zeros(4), spreads=spreads)
    planned = read + sum(spreads.values())
    assert found.beyond == pytest.approx(chi2.sf(off @ np.linalg.inv(planned) @ off, 4))
    assert found.owners[0].name in ("op 40", AS_PLANNED)  # the difference of the flanks clears op 20
    assert found.owners[-1].name == "op 20"
