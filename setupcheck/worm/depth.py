"""Depth of a gap: from the surface that was touched, and as the passes make it up. Lengths mm."""

from __future__ import annotations

import math
from collections.abc import Sequence

from setupcheck.worm.geometry import above_zero


def early_touch(*, throat_radius: float, cutter_radius: float, throat_width: float) -> float:
    """How much earlier a turning cutter touches the corners of a throat than its bottom [mm]; 0 where it fits in.

    [rg - sqrt(rg^2 - h^2)] - [R - sqrt(R^2 - h^2)], h half the width of the hollow; above 0 for every R > rg, and a fly
    cutter is always larger than the throat. Add it to the depth from the throat, or touch with the tool standing still,
    its tip in the mid-plane.

    throat_width  of the hollow between its two corners [mm], at most 2 rg
    Validity: sharp corners, equal on both sides; the tilt changes it by its square (1 % at 6 deg).
    Raises: ValueError for sizes not above zero or a hollow wider than its circle.  Source: geometry, derived here.

    >>> round(early_touch(throat_radius=12.5, cutter_radius=29.75, throat_width=10.9), 2)
    0.75
    """
    above_zero(throat_radius=throat_radius, cutter_radius=cutter_radius, throat_width=throat_width)
    half = throat_width / 2.0
    if not half <= throat_radius:
        raise ValueError(f"a throat of {throat_radius:g} mm radius cannot be {throat_width:g} mm wide")
    if cutter_radius <= throat_radius:
        return 0.0
    return (throat_radius - math.sqrt(throat_radius**2 - half**2)) - (
        cutter_radius - math.sqrt(cutter_radius**2 - half**2)
    )


def left_by_passes(depth: float, passes: Sequence[float]) -> float:
    """Depth that the listed passes leave [mm]: depth less their sum; below zero they go too deep.

    Raises: ValueError for a depth or a pass not above zero, or no pass.  Source: arithmetic.

    >>> round(left_by_passes(3.3, [2.0, 1.0, 0.3]), 9)
    0.0
    """
    above_zero(depth=depth)
    if not passes:
        raise ValueError("no pass is listed")
    for number, cut in enumerate(passes, start=1):
        above_zero(**{f"pass_{number}": cut})
    left = depth - math.fsum(passes)
    return 0.0 if abs(left) < 1e-9 else left
