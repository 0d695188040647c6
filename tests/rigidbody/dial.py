"""What an indicator reads while the spindle makes one turn: real intersections of the surface with the dial's line.

The frame is the spindle's: its z is the axis of rotation, the part rests, the dial goes round.  Lengths mm, angles rad.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from .frames import Array, Line, Plane

Reading = Callable[[Array], Array]  # angles of the dial -> readings, larger = metal nearer the probe


@dataclass(frozen=True, slots=True)
class Swept:
    """Full indicator movement and where, in the frame of the sweep, the dial stood highest."""

    fim: float
    high_at: float


def radial(axis: Line, radius: float, *, inside: bool, z: float) -> Reading:
    """Dial pointing at the axis of rotation at height z, on an outside cylinder or in a bore."""
    from_axis = np.array([0.0, 0.0, z]) - axis.point
    across = from_axis - (from_axis @ axis.along) * axis.along

    def read(angles: Array) -> Array:
        # the ray rho * u meets the cylinder where |rho * u_perp + across| = radius
        rays = np.stack([np.cos(angles), np.sin(angles), np.zeros_like(angles)], axis=-1)
        perpendicular = rays - (rays @ axis.along)[..., None] * axis.along
        a = np.sum(perpendicular**2, axis=-1)
        b = perpendicular @ across
        rho = (-b + np.sqrt(b * b - a * (across @ across - radius * radius))) / a
        # the probe stands outside a shaft (metal near = large radius) but within a bore (metal near = small radius)
        return np.asarray(-rho if inside else rho)

    return read


def axial(plane: Plane, radius: float, *, looks: int) -> Reading:
    """Dial parallel to the axis of rotation on a circle, from the side (+1, -1 along z) to which the face looks."""

    def read(angles: Array) -> Array:
        nx, ny, nz = plane.normal
        through = float(plane.normal @ plane.point)
        height = (through - radius * (nx * np.cos(angles) + ny * np.sin(angles))) / nz
        return np.asarray(looks * height, dtype=np.float64)

    return read


def highest(read: Reading, samples: int = 72) -> tuple[float, float]:
    """Angle and value of the highest reading: a full turn in steps, then Newton on a five-point stencil."""
    angles = np.arange(samples) * (2.0 * np.pi / samples)
    values = read(angles)
    at = float(angles[int(np.argmax(values))])
    if float(np.ptp(values)) == 0.0:
        return at, float(values[0])
    h = 0.02
    for _ in range(12):
        far_left, left, here, right, far_right = read(at + h * np.array([-2.0, -1.0, 0.0, 1.0, 2.0]))
        rise = (far_left - 8.0 * left + 8.0 * right - far_right) / (12.0 * h)
        bend = (-far_left + 16.0 * left - 30.0 * here + 16.0 * right - far_right) / (12.0 * h * h)
        if bend >= 0.0:  # flat to rounding: the coarse place is as good as any
            break
        step = float(-rise / bend)
        at += max(-0.1, min(0.1, step))
        if abs(step) < 1e-10:
            break
    return at, float(read(np.array([at]))[0])


def sweep(read: Reading) -> Swept:
    """One full turn of the spindle under the dial."""
    high_at, high = highest(read)
    _, low = highest(lambda angles: -read(angles))
    return Swept(high + low, high_at)
