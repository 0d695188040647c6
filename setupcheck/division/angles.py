"""Angles once round the wheel. Angles rad."""

from __future__ import annotations

import math

NOISE = 1e-9
"""Below a whole turn by less than this is the start of the turn [rad]. Our choice: far below any reading, far above rounding."""


def once_round(angle: float) -> float:
    """The same direction from 0 up to, and never, 2 pi [rad]. Source: definition.

    `angle % tau` alone gives 2 pi for a rounding error below zero, which a count of teeth shows as a whole turn on.

    >>> once_round(-1e-17), once_round(math.tau), round(once_round(-math.pi / 2.0) / math.pi, 9)
    (0.0, 0.0, 1.5)
    """
    turned = angle % math.tau
    return turned if math.tau - turned > NOISE else 0.0
