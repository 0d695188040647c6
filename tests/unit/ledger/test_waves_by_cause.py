"""Waves of a ring by cause, against errors drawn tooth by tooth in plain numpy and taken apart by its own Fourier sum."""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Tooth
from setupcheck.ledger.harmonic import planned_wave, towards
from setupcheck.ledger.route import Pattern, Periodic, Scatter, Shaped

N, R, ALPHA = 39, 50.0, math.radians(20.0)
TRIALS = 20_000
SECOND = 1.0 / 206264.806


def ring(turn: int, rounding: tuple[float, ...] = ()) -> Pattern:
    return Pattern(
        N,
        R,
        turn,
        0.3,
        ALPHA,
        periodic=(
            Periodic(Cause("head, once a turn", "disc", high=20.0 * SECOND), 1),
            Periodic(Cause("head, once a crank turn", "disc", high=6.0 * SECOND), 40),
        ),
        scatter=(
            Scatter(Cause("setting", "length", high=5.0 * SECOND), "angle", 5.0 * SECOND),
            Scatter(Cause("depth of a gap", "length", high=0.004), "radial", 0.004),
        ),
        shaped=(Shaped(Cause("drift", "length", high=8.0 * SECOND), tuple(j / (N - 1) for j in range(N))),),
        rounding=rounding,
    )


def drawn(turn: int, side: int) -> np.ndarray:
    """First waves W of many rings, Re(W exp(-i theta)), from each tooth's own arc."""
    rng = np.random.default_rng(3)
    number = np.arange(N)
    theta = 0.3 + turn * 2.0 * np.pi * number / N

    def disc(high: float) -> np.ndarray:
        return high * np.sqrt(rng.random(TRIALS)) * np.exp(2j * np.pi * rng.random(TRIALS))

    e = disc(0.010)[:, None] + 0.004 * np.exp(0.7j)  # a known run-out with a direction among it
    away = ALPHA + np.pi / (2 * N)
    arcs = np.abs(e) / np.cos(ALPHA) * np.sin(np.angle(e) - theta - side * away)
    arcs = arcs + R * turn * np.real(disc(20 * SECOND)[:, None] * np.exp(-2j * np.pi * number / N))
    arcs = arcs + R * turn * np.real(disc(6 * SECOND)[:, None] * np.exp(-2j * np.pi * 40 * number / N))
    arcs = arcs + R * 5 * SECOND * rng.uniform(-1, 1, (TRIALS, N))
    arcs = arcs + math.tan(ALPHA) * 0.004 * rng.uniform(-1, 1, (TRIALS, N))
    arcs = arcs + R * turn * 8 * SECOND * rng.uniform(-1, 1, TRIALS)[:, None] * (number / (N - 1))
    return 2.0 / N * (arcs * np.exp(1j * theta)).sum(axis=1)


@pytest.mark.parametrize("turn", [1, -1])
@pytest.mark.parametrize("side", [1, -1])
def test_the_first_wave_of_a_ring_is_that_of_its_teeth_drawn_one_by_one(turn: int, side: int) -> None:
    chuck = Cause("chuck", "disc", high=0.010)
    known = Cause("register", "ring", mean=0.004 * np.exp(0.7j))
    figure = Tooth(Account.of(chuck) + Account.of(known), ring(turn), flank=True, stepwise=False)
    wave = planned_wave(figure, 1, Draws(), side=side)
    values = drawn(turn, side)
    assert wave.middle == pytest.approx(values.mean(), abs=0.0002)
    told = sum(part.covariance for part in wave.parts)
    assert told == pytest.approx(np.cov(np.stack([values.real, values.imag])), rel=0.05, abs=2e-6)
    assert len(wave.parts) == 7


def test_the_heads_crank_error_is_in_the_wave_it_folds_to_and_in_no_other() -> None:
    figure = Tooth(Account(), ring(1), flank=True, stepwise=False)
    draws = Draws()
    names = {k: {part.cause.key for part in planned_wave(figure, k, draws).parts} for k in (1, 2, 3)}
    assert "head, once a crank turn" in names[1]
    assert all("head" not in key for k in (2, 3) for key in names[k])


def test_rounded_settings_are_a_known_wave() -> None:
    step = 30.0 * SECOND
    rounding = tuple(step * math.cos(2.0 * math.pi * j / N) for j in range(N))
    figure = Tooth(Account(), ring(1, rounding), flank=True, stepwise=False)
    wave = planned_wave(figure, 1, Draws())
    assert abs(wave.known) == pytest.approx(R * step)
    assert towards(wave.known, 1) == pytest.approx(0.3)  # the longest arc stands at the first place
    assert abs(planned_wave(figure, 2, Draws()).known) == pytest.approx(0.0, abs=1e-12)


@pytest.mark.parametrize("harmonic", [0, 20, 39])
def test_a_wave_that_the_places_cannot_tell_is_refused(harmonic: int) -> None:
    with pytest.raises(ValueError, match="39 places cannot tell"):
        planned_wave(Tooth(Account(), ring(1), flank=True, stepwise=False), harmonic, Draws())
