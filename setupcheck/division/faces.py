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


def both_faces(left: Reals, right: Reals) -> tuple[Reals, Reals]:
    """(direction, collimation) of each pair of readings [rad], 0 .. 2 pi: (L + R -+ pi)/2 and (R - L -+ pi)/2.

    What has opposite signs in both faces cancels in the mean: collimation and a trunnion axis out of square. A vertical
    axis out of plumb does not.  Source: trade practice (from memory).

    >>> d, c = both_faces(np.radians([45.175]), np.radians([225 + 10/60 + 44/3600]))
    >>> [round(x * 648000 / math.pi) for x in (d[0] - math.radians(45), c[0])]      # 10'37" and 7"
    [637, 7]
    """
    half = wrapped(right - left - math.pi) / 2.0
    return np.remainder(left + half, math.tau), half


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
