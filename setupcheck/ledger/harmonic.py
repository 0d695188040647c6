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
from setupcheck.ledger.draws import Draws
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
    Amplitudes are arcs on the pattern radius.
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
    parts += [
        _of(one.cause, _wave_of(np.asarray(one.shape), scale, figure, harmonic) * draws.cause(one.cause))
        for one in pattern.shaped
    ]
    parts += [_of(s.cause, _scattered(s, figure, harmonic, draws, side)) for s in pattern.scatter]
    known = account.constant
    if pattern.rounding:
        known += _wave_of(np.asarray(pattern.rounding), scale, figure, harmonic)
    if pattern.outwards:
        known += _wave_of(np.asarray(pattern.outwards), side * _deeper(figure), figure, harmonic)
    total = sum((part.drawn for part in parts), np.full(draws.trials, known))
    return Wave(harmonic, known, tuple(p for p in parts if p.middle or p.covariance.any()), total)


def _deeper(figure: Tooth) -> float:
    """What an error outwards moves a flank by, over itself: tan(alpha)."""
    return math.tan(figure.pattern.pressure_angle or 0.0) if figure.flank else 0.0


def _scattered(scatter: Scatter, figure: Tooth, harmonic: int, draws: Draws, side: int) -> Complexes:
    """The wave in errors that each place draws for itself, drawn place by place."""
    pattern = figure.pattern
    arcs: Reals = np.zeros((draws.trials, pattern.count))
    if scatter.goes_round:
        arcs = draws.scatter(scatter, pattern) * pattern.turn
    if scatter.goes_outward and _deeper(figure):
        arcs = arcs + side * _deeper(figure) * draws.scatter(scatter, pattern, outward=True)
    return np.asarray(arcs @ _basis(figure, harmonic))


def _of(cause: Cause, drawn: Reals | Complexes) -> Part:
    values = np.asarray(drawn, dtype=np.complex128)
    both = np.stack([values.real, values.imag])
    return Part(cause, complex(values.mean()), np.cov(both), values)


def _wave_of(shape: Reals, scale: float, figure: Tooth, harmonic: int) -> complex:
    """The wave in a known error of each place."""
    return complex(scale * (shape @ _basis(figure, harmonic)))


def _basis(figure: Tooth, harmonic: int) -> Complexes:
    """2/N exp(i k theta_j) of every place, shape (count,)."""
    return np.asarray(2.0 / figure.pattern.count * np.exp(1j * harmonic * angles(figure.pattern)))


def towards(wave: complex, harmonic: int) -> float:
    """Direction of the wave's first longest place in the part frame [rad], 0 .. 2 pi/k."""
    return (cmath.phase(wave) % math.tau) / harmonic
