"""What a drawing laid over an insert can show: scale for an error, error for a scale, measured points off the profile. mm."""

from __future__ import annotations

import numpy as np

from setupcheck.worm.conjugate import Side
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.helicoid import Array
from setupcheck.worm.insert_profile import slope_and_width
from setupcheck.worm.plunge_gap import Insert

LINE = 0.25
"""Width of a drawn or projected line [mm]. Common practice: thin pens of 0.25; about 0.2 on a projector's screen."""

SCALES = (1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0)
"""Enlargements in use: those of drawings (ISO 5455, from memory) and of projectors' lenses (common practice)."""


def scale_for(error: float, *, line: float = LINE) -> float:
    """Smallest usual enlargement at which an error is at least a line's width wide, so two lines stand beside each other.

    Raises: ValueError for sizes not above zero, or an error that 100:1 does not show.  Source: error times scale >= line.

    >>> scale_for(0.01), scale_for(0.0125), scale_for(0.3)
    (50.0, 20.0, 1.0)
    """
    above_zero(error=error, line=line)
    for scale in SCALES:
        if error * scale >= line * (1.0 - 1e-9):
            return scale
    raise ValueError(
        f"an error of {1e3 * error:g} um needs an enlargement of {line / error:.0f}:1, and {SCALES[-1]:g}:1 is the largest in "
        f"use: measure it with an indicator or over wires instead"
    )


def error_shown(scale: float, *, line: float = LINE) -> float:
    """Smallest error an enlargement shows as two lines side by side [mm]: line/scale.

    Raises: ValueError for sizes not above zero.

    >>> error_shown(10.0), error_shown(50.0)
    (0.025, 0.005)
    """
    above_zero(scale=scale, line=line)
    return line / scale


def off_profile(insert: Insert, heights: Array, half_widths: Array, *, side: Side) -> Array:
    """Distance of measured points from a flank, square to it [mm], (n,); positive: metal stands out beyond the profile.

    heights, half_widths  of the points, (n,), in the frame of the intended insert, in any order
    Raises: ValueError for points without both numbers, or heights the profile does not reach.
    Source: first order, (w - W) cos psi.

    >>> from setupcheck.worm.plunge_gap import measured_insert
    >>> h = np.linspace(0.0, 6.0, 13)
    >>> flat = measured_insert(h, 1.0 + 0.75 * h)
    >>> [round(1e3 * float(d), 3) for d in off_profile(flat, np.array([2.0]), np.array([2.51]), side=1)]
    [8.0]
    """
    heights, half_widths = (np.asarray(v, dtype=float) for v in (heights, half_widths))
    if heights.shape != half_widths.shape or not (np.isfinite(heights).all() and np.isfinite(half_widths).all()):
        raise ValueError("every measured point needs its height and its half width")
    slope, width = slope_and_width(insert, heights, side=side)
    return np.asarray((half_widths - width) / np.hypot(1.0, slope), dtype=float)
