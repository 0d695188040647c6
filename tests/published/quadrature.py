"""Exact laws by scipy's quadrature, to hold the ledger's draws against. Shares no code with the package.

Sums of independent symmetric errors: F(x) = 1/2 + (1/pi) integral of sin(x t) prod phi_i(t) / t over t > 0 (Gil-Pelaez).
Lengths of sums of vectors with independent isotropic directions: F(x) = x integral of J1(x s) prod h_i(s) over s > 0
(Kluyver), h = J0(e s) for a fixed length e, 2 J1(c s)/(c s) for a point anywhere in a disc of radius c.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import simpson
from scipy.optimize import brentq
from scipy.special import erf, j0, j1, wofz

Reals = NDArray[np.float64]
Transform = Callable[[Reals], Reals]


def rectangular(half_width: float) -> Transform:
    """Characteristic function of the law uniform in +-half_width."""
    return lambda t: np.sinc(half_width * t / np.pi)


def normal(deviation: float) -> Transform:
    """Characteristic function of the uncut normal law."""
    return lambda t: np.exp(-((deviation * t) ** 2) / 2.0)


def cut_normal(deviation: float, at: float = 3.0) -> Transform:
    """Characteristic function of the normal law cut at `at` standard deviations (Faddeeva function)."""

    def phi(t: Reals) -> Reals:
        u = deviation * t
        tail = np.exp(-(at**2) / 2.0 - 1j * at * u) * wofz(1j * (at + 1j * u) / math.sqrt(2.0))
        return np.real(np.exp(-(u**2) / 2.0) - tail) / erf(at / math.sqrt(2.0))

    return phi


def cut_deviation(at: float = 3.0) -> float:
    """Standard deviation of the standard normal law cut at +-`at`: sqrt(1 - 2 a pdf(a) / (2 Phi(a) - 1))."""
    pdf = math.exp(-(at**2) / 2.0) / math.sqrt(2.0 * math.pi)
    return math.sqrt(1.0 - 2.0 * at * pdf / math.erf(at / math.sqrt(2.0)))


class Sum:
    """Distribution of a sum of independent symmetric errors of unit-like size (largest spread between 0.1 and 100)."""

    def __init__(self, terms: Sequence[Transform], *, up_to: float = 400.0) -> None:
        self.t = np.linspace(1e-9, up_to, 200_001)
        self.phi = np.prod([term(self.t) for term in terms], axis=0)

    def below(self, x: float) -> float:
        return 0.5 + float(simpson(np.sin(x * self.t) / self.t * self.phi, x=self.t)) / math.pi

    def density(self, x: float) -> float:
        return float(simpson(np.cos(x * self.t) * self.phi, x=self.t)) / math.pi

    def quantile(self, p: float, high: float) -> float:
        return float(brentq(lambda x: self.below(x) - p, 0.0, high, xtol=1e-7))


def ring(e: float) -> Transform:
    """Hankel transform of a vector of fixed length e."""
    return lambda s: j0(e * s)


def disc(c: float) -> Transform:
    """Hankel transform of a point anywhere in a disc of radius c."""
    return lambda s: 2.0 * j1(c * s) / (c * s)


class Walk:
    """Distribution of the length of a sum of three or more isotropic vectors of length about 1 (integral cut at s = 4,000).

    The integrand falls as s^-(1 + n)/2 for n rings and faster for discs: what is left out is below 1e-4 for n = 3.
    """

    def __init__(self, terms: Sequence[Transform], *, up_to: float = 4000.0) -> None:
        self.s = np.linspace(1e-9, up_to, 400_001)
        self.h = np.prod([term(self.s) for term in terms], axis=0)

    def below(self, x: float) -> float:
        return x * float(simpson(j1(x * self.s) * self.h, x=self.s))
