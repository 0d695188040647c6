"""Readings in two faces of a sighting instrument, and what a set of sightings repeats to. Angles rad."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from setupcheck.physics.student_t import chi2_quantile
from setupcheck.record import record

Reals = NDArray[np.floating]


@record
class Collimation:
    """Half the difference of both faces [rad]: its mean, and how far it strays (largest less smallest); pairs it rests on."""

    mean: float
    spread: float
    pairs: int
    single: int


def wrapped(angle: Reals) -> Reals:
    """Angles brought to -pi .. pi."""
    return np.asarray(np.remainder(np.asarray(angle) + math.pi, math.tau) - math.pi)


def spread_of_sets(sets: Reals) -> tuple[float, int]:
    """(standard deviation of a direction read once in both faces, degrees of freedom) of sets of the same targets.

    sets  directions, one row a set, one column a target, any unit;  each set has a zero of its own
    d = direction - mean of its target over the sets, less the mean of d in its set;  s^2 = sum / ((sets - 1)(targets - 1))
    Source: ISO 17123-3, from memory.

    >>> spread_of_sets(np.array([[10., 31, 52, 18], [12, 30, 55, 21], [9, 33, 50, 19]]))[1]
    6
    """
    off = sets - sets.mean(axis=0)
    off = off - off.mean(axis=1, keepdims=True)
    nu = (sets.shape[0] - 1) * (sets.shape[1] - 1)
    return math.sqrt(float((off**2).sum()) / nu), nu


def acceptance(nu: int) -> float:
    """How far above the stated figure the standard deviation of a sample may come out, at 95 %: sqrt(chi2_0.95(nu)/nu).

    Source: ISO 17123-3, from memory.

    >>> round(acceptance(32), 2), round(acceptance(8), 2)
    (1.2, 1.39)
    """
    return math.sqrt(chi2_quantile(0.95, nu) / nu)
