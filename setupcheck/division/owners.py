"""Whose error is it? A measured wave set against what each setup was planned to add: vectors, never ranges alone. Any one unit.

Waves are vectors in one frame: (x, y), and with both flanks read (x, y) of their mean and (x, y) of their difference. What each
setup may add is a spread around a known middle, taken as Gaussian of the same covariance, so the odds are a guide and no proof.
Source: Gaussian linear model and Bayes' rule (textbook), derived here.
"""

from __future__ import annotations

import math
from collections.abc import Mapping

import numpy as np
from numpy.typing import NDArray

from setupcheck.record import record

Reals = NDArray[np.floating]

OUT_OF_HAND = 4.0
"""How many times its planned spread a setup is taken to err by where it went wrong. Our screening choice."""

AS_PLANNED = "as planned"
"""Name of the explanation that nothing went wrong."""


@record
class Owner:
    """A setup that may own a measured wave.

    odds   probability that this setup erred far beyond its plan and no other did, against the others and against `as planned`
    share  what of the measured wave is most likely its own under that supposition, as a vector
    """

    name: str
    odds: float
    share: tuple[float, ...]

    @property
    def length(self) -> float:
        """Length of its share in the wave itself, the first two of the vector."""
        return math.hypot(*self.share[:2])


@record
class Explained:
    """A measured wave against the plan.

    beyond  how often a plan that is kept gives a wave as far off its middle as this one, 0 .. 1
    owners  most likely first; `as planned` is one of them
    """

    beyond: float
    owners: tuple[Owner, ...]

    @property
    def told_apart(self) -> bool:
        """Whether one explanation is at least three times as likely as the next. Our screening choice."""
        return len(self.owners) < 2 or self.owners[0].odds >= 3.0 * self.owners[1].odds


def explained(measured: Reals, uncertainty: Reals, *, expected: Reals, spreads: Mapping[str, Reals]) -> Explained:
    """Which setup explains a measured wave, with odds.

    measured, expected  the wave as read and as planned, vectors (n,) in one unit, n = 2 or 4
    uncertainty         covariance (n, n) of the measured one;  spreads  covariance (n, n) of what each setup may add
    Each explanation in turn supposes one setup out of hand by OUT_OF_HAND, all others as planned; all alike beforehand.
    Raises: ValueError where no covariance has any width.
    Source: evidence of a Gaussian, Bayes' rule with equal odds beforehand.

    >>> small, wide = np.eye(2) * 1.0, np.eye(2) * 25.0
    >>> found = explained(np.array([18.0, 0.0]), np.eye(2) * 0.1, expected=np.zeros(2), spreads={"op 30": small, "op 40": wide})
    >>> found.owners[0].name, round(found.owners[0].odds, 2), found.beyond < 0.01
    ('op 40', 0.75, True)
    """
    off = np.subtract(measured, expected)
    planned = uncertainty + sum(spreads.values(), np.zeros((len(off), len(off))))
    if not np.linalg.det(planned) > 0.0:
        raise ValueError("neither the plan nor the measurement leaves any room: nothing to compare")
    wider = {name: planned + (OUT_OF_HAND**2 - 1.0) * spread for name, spread in spreads.items()}
    evidence = {AS_PLANNED: _log_density(off, planned)} | {name: _log_density(off, one) for name, one in wider.items()}
    most = max(evidence.values())
    weights = {name: math.exp(value - most) for name, value in evidence.items()}
    total = sum(weights.values())
    owners = []
    for name, weight in weights.items():
        share = np.zeros(len(off))
        if name != AS_PLANNED:
            share = OUT_OF_HAND**2 * spreads[name] @ np.linalg.solve(wider[name], off)
        owners.append(Owner(name, weight / total, tuple(map(float, share))))
    owners.sort(key=lambda one: (-one.odds, one.name))
    half = float(off @ np.linalg.solve(planned, off)) / 2.0
    beyond = math.exp(-half) * sum(half**k / math.factorial(k) for k in range(len(off) // 2))
    return Explained(beyond, tuple(owners))


def _log_density(off: Reals, covariance: Reals) -> float:
    """Logarithm of a Gaussian's density, but for a constant. Source: textbook."""
    return -0.5 * (float(off @ np.linalg.solve(covariance, off)) + math.log(np.linalg.det(covariance)))
