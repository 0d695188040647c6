"""Seven places with known errors of every kind, and what they come to in plain complex numbers. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math

import numpy as np

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import (
    Figure,
)
from setupcheck.ledger.route import Pattern, Periodic, Shaped

NEAR = {"rel": 2e-6, "abs": 2e-8}
"""Single precision of the draws."""


def known(name: str, value: complex) -> Account:
    """A vector that is known exactly."""
    return Account.of(Cause(name, "disc", mean=value))


def level(name: str, value: float) -> Account:
    """A length or an angle that is known exactly."""
    return Account.of(Cause(name, "length", mean=complex(value)))


def drawn(figure: Figure) -> list[float]:
    return [float(v[0]) for v in np.atleast_2d(figure.sample(Draws(4)))]


OFFSET, LEAN = 0.013 - 0.021j, 0.0004 + 0.0007j
ROUNDING = (0.0, 3e-5, -2e-5, 5e-5, 1e-5, -4e-5, 2e-5)
OUTWARDS = (0.004, -0.006, 0.001, 0.009, -0.002, 0.003, -0.008)
WAVE, DRIFT = 6e-5 - 2e-5j, 4e-5
SHAPE = (0.0, 0.1, 0.3, 0.4, 0.6, 0.8, 1.0)
COUNT, RADIUS, ALPHA = 7, 31.0, math.radians(20.0)


def pattern(turn: int, **more: object) -> Pattern:
    """Seven places with every error that a division may have, all known."""
    return Pattern(
        COUNT,
        RADIUS,
        turn=turn,
        start=0.4,
        pressure_angle=ALPHA,
        periodic=(Periodic(Cause("wave", "disc", mean=WAVE), 2),),
        rounding=ROUNDING,
        outwards=OUTWARDS,
        shaped=(Shaped(Cause("drift", "length", mean=DRIFT + 0j), SHAPE),),
        **more,  # type: ignore[arg-type]
    )


def places(turn: int) -> list[float]:
    return [0.4 + turn * math.tau * j / COUNT for j in range(COUNT)]


def index_arcs(turn: int) -> list[float]:
    """Arcs counter-clockwise that dividing leaves: the work turns on by too much, in the sense of the places."""
    found = []
    for j in range(COUNT):
        wave = (WAVE * cmath.exp(-1j * 2 * math.tau * j / COUNT)).real
        # a wave stands as Re(X e^(-i h theta)): X turned back by the place
        found.append(turn * RADIUS * (wave + ROUNDING[j] + DRIFT * SHAPE[j]))
    return found


def steps(values: list[float]) -> float:
    return max(abs(a - b) for a, b in zip(values, [*values[1:], values[0]], strict=True))
