"""Readings of a comparative pitch test, reduced. Any unit; arrays of one value for each pitch."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Reals = NDArray[np.floating]


def pitch_from_differences(readings: Reals) -> tuple[Reals, Reals]:
    """Single and cumulative pitch deviations from readings of adjacent pitches against one setting.

    readings  comparator readings, one per pitch, whole circle, any unit.  Returns (single, cumulative), same unit.
    The mean of a closed circle is the true setting; the cumulative sum closes on zero.
    Source: closure of the circle, the usual reduction of a comparative pitch test (from memory).

    >>> pitch_from_differences(np.array([12., 8., 5., 11., 14., 9., 6., 7.]))[1].tolist()
    [3.0, 2.0, -2.0, 0.0, 5.0, 5.0, 2.0, 0.0]
    """
    single = readings - readings.mean()
    return single, np.cumsum(single)
