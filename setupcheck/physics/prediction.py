"""What the next value of a series may be, from the values so far. One unit throughout, standard library only."""

from __future__ import annotations

import math
from collections.abc import Sequence

from setupcheck.physics.student_t import t_quantile


def mean_of(values: Sequence[float]) -> float:
    """Arithmetic mean.

    >>> mean_of([5.0, 7.0, 6.0])
    6.0
    """
    return math.fsum(values) / len(values)


def spread_of(values: Sequence[float]) -> float:
    """Standard deviation of single values about their mean, s = sqrt(sum (x - mean)^2 / (n - 1)); n at least 2.

    Exactly 0 for values that are all alike.

    >>> round(spread_of([5.0, 7.0, 6.0, 8.0]), 4)
    1.291
    """
    if len(values) < 2:
        raise ValueError("one value has no spread. Give two or more")
    if min(values) == max(values):
        return 0.0
    middle = mean_of(values)
    return math.sqrt(math.fsum((x - middle) ** 2 for x in values) / (len(values) - 1))


def prediction_limit(values: Sequence[float], *, confidence: float = 0.95, both_ways: bool = False) -> float:
    """The limit that the next value of the series keeps below with a confidence.

    mean + t(confidence, n - 1) s sqrt(1 + 1/n): the spread of one value, and what the mean itself may be out by.

    values      of one Gaussian law, n at least 2, any unit, which the limit has as well
    both_ways   values have a sign: the limit is one of their size, |mean| + t((1 + confidence) / 2, n - 1) s sqrt(1 + 1/n)
    Holds for a Gaussian law.  A run-out whose direction is left to chance has a skewed law (Rayleigh's), and keeps below it
    93 in 100 times instead of 95, as tests draw it.
    Source: textbook prediction interval for one future observation, as in Hahn & Meeker, Statistical Intervals (from memory).

    >>> round(prediction_limit([5.0, 7.0, 6.0, 8.0, 6.0]), 3)
    9.063
    """
    middle, count = mean_of(values), len(values)
    share = (1.0 + confidence) / 2.0 if both_ways else confidence
    reach = t_quantile(share, count - 1) * spread_of(values) * math.sqrt(1.0 + 1.0 / count)
    return (abs(middle) if both_ways else middle) + reach
