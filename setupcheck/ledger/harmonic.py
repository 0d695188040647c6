"""One wave of a ring of teeth: what each cause adds to the part of the error that comes k times a turn. mm, rad.

A wave W stands for arcs Re(W exp(-i k theta_j)) over the places theta_j in the part frame; its longest place is at arg(W)/k.
"""

from __future__ import annotations

import cmath
import math

import numpy as np
from numpy.typing import NDArray

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import Draws
from setupcheck.ledger.figures import Tooth
from setupcheck.ledger.route import Scatter
from setupcheck.ledger.teeth import angles, folded
from setupcheck.record import record

Reals = NDArray[np.floating]
Complexes = NDArray[np.complexfloating]


@record(eq=False)
class Part:
    """What one cause adds to a wave: its middle [mm], covariance (2, 2) [mm^2], and as drawn (trials,); x along the mark."""

    cause: Cause
    middle: complex
    covariance: Reals
    drawn: Complexes


@record(eq=False)
class Wave:
    """A planned wave: `known` part without any cause (rounding of settings), what each cause adds, and all of it as drawn."""

    harmonic: int
    known: complex
    parts: tuple[Part, ...]
    drawn: Complexes

    @property
    def middle(self) -> complex:
        return self.known + sum((p.middle for p in self.parts), 0j)


def planned_wave(figure: Tooth, harmonic: int, draws: Draws, *, side: int = 1) -> Wave:
    """The wave of `harmonic` of one flank, as the worm that drives it sees it where the figure is `driven`.

    side  +1 counter-clockwise flank, -1 the other; 0 the middle of the gap (holes)
    Amplitudes are arcs on the pattern radius. What a hand adds anew at every place leaves 2 s^2/N on each axis of every wave.
    Raises: ValueError for a harmonic that this many places cannot tell (below 1, or N/2 and above).
    Source: eccentricity and lean as in ledger.teeth; discrete Fourier sum over N places (textbook).
    """
    pattern = figure.pattern
    if not 1 <= harmonic < pattern.count / 2.0:
        raise ValueError(f"{pattern.count} places cannot tell a wave of {harmonic} round the wheel")
    account = figure.wave(side if figure.flank and pattern.pressure_angle else 0) * -1j if harmonic == 1 else Account()
    parts = [_of(cause, draws.account(Account(0j, {cause: ab}))) for cause, ab in account.terms.items()]
    for periodic in pattern.periodic:
        if folded(periodic.harmonic, pattern.count) == harmonic:
            parts.append(_of(periodic.cause, pattern.radius * draws.cause(periodic.cause)))
    scale = pattern.radius * pattern.turn
    ramp = _wave_of(np.arange(pattern.count) / max(pattern.count - 1, 1), scale, figure, harmonic)
    parts += [_of(cause, ramp * draws.cause(cause)) for cause in pattern.drift]
    parts += [_of(s.cause, _scattered(s, figure, draws)) for s in pattern.scatter if _arc(s, figure) > 0.0]
    known = account.constant
    if pattern.rounding:
        known += _wave_of(np.asarray(pattern.rounding), scale, figure, harmonic)
    total = sum((part.drawn for part in parts), np.full(draws.trials, known))
    return Wave(harmonic, known, tuple(p for p in parts if p.middle or p.covariance.any()), total)


def _arc(scatter: Scatter, figure: Tooth) -> float:
    """Bound of the arc of one place [mm]; a gap cut deeper moves each flank by r tan(alpha)."""
    deeper = math.tan(figure.pattern.pressure_angle or 0.0) if figure.flank else 0.0
    return scatter.bound * {"angle": figure.pattern.radius, "tangential": 1.0, "radial": deeper}[scatter.along]


def _scattered(scatter: Scatter, figure: Tooth, draws: Draws) -> Complexes:
    """The wave in errors that each place draws for itself: 2 s^2/N on either axis, s the arc's standard deviation."""
    spread = _arc(scatter, figure) / math.sqrt(3.0) * math.sqrt(2.0 / figure.pattern.count)
    both = draws.stream(f"wave of {scatter.cause.identity}").standard_normal((2, draws.trials))
    return np.asarray(spread * (both[0] + 1j * both[1]))


def _of(cause: Cause, drawn: Reals | Complexes) -> Part:
    values = np.asarray(drawn, dtype=np.complex128)
    both = np.stack([values.real, values.imag])
    return Part(cause, complex(values.mean()), np.cov(both), values)


def _wave_of(shape: Reals, scale: float, figure: Tooth, harmonic: int) -> complex:
    """The wave in a known error of each place: 2/N sum of arcs exp(i k theta)."""
    turned = np.exp(1j * harmonic * angles(figure.pattern))
    return complex(2.0 / len(shape) * scale * (shape * turned).sum())


def towards(wave: complex, harmonic: int) -> float:
    """Direction of the wave's first longest place in the part frame [rad], 0 .. 2 pi/k."""
    return (cmath.phase(wave) % math.tau) / harmonic
