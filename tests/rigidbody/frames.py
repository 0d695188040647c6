"""Rigid placements as 4x4 homogeneous transforms, and the lines and planes they carry.  Lengths mm, angles rad."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

import numpy as np
import numpy.typing as npt

Array = npt.NDArray[np.floating[Any]]
ComplexArray = npt.NDArray[np.complex128]


def shift(x: float, y: float, z: float) -> Array:
    """Displacement by (x, y, z)."""
    placed = np.eye(4)
    placed[:3, 3] = (x, y, z)
    return placed


def turn(x: float, y: float, z: float) -> Array:
    """Rotation about the axis (x, y, z) by its length (Rodrigues), counter-clockwise seen from its tip."""
    angle = math.sqrt(x * x + y * y + z * z)
    placed = np.eye(4)
    cross = np.array([[0.0, -z, y], [z, 0.0, -x], [-y, x, 0.0]])
    # sin(a)/a and (1 - cos a)/a^2, the latter as a half-angle square so that nothing cancels for a small tilt
    first = 1.0 if angle == 0.0 else math.sin(angle) / angle
    second = 0.5 if angle == 0.0 else 0.5 * (math.sin(0.5 * angle) / (0.5 * angle)) ** 2
    placed[:3, :3] += first * cross + second * cross @ cross
    return placed


def turn_z(angle: float) -> Array:
    """Rotation about z."""
    return turn(0.0, 0.0, angle)


def way_round(sign: int) -> Array:
    """+1: as it is; -1: end for end about the x axis (exact, no sine of pi)."""
    if sign not in (1, -1):
        raise ValueError(f"a part stands one way or the other, +1 or -1, not {sign}")
    return np.diag([1.0, float(sign), float(sign), 1.0])


def inverse(placed: Array) -> Array:
    """Inverse of a rigid placement."""
    back = np.eye(4)
    back[:3, :3] = placed[:3, :3].T
    back[:3, 3] = -placed[:3, :3].T @ placed[:3, 3]
    return back


def frame_on(origin: Array, along: Array, mark: Array) -> Array:
    """Frame with z along `along` and x as near to `mark` as a right angle allows; maps its coordinates outwards."""
    z = along / np.linalg.norm(along)
    x = mark - (mark @ z) * z
    x = x / np.linalg.norm(x)
    placed = np.eye(4)
    placed[:3, 0], placed[:3, 1], placed[:3, 2], placed[:3, 3] = x, np.cross(z, x), z, origin
    return placed


def in_plane(vector: Array) -> complex:
    """The transverse part of a vector as x + iy."""
    return complex(float(vector[0]), float(vector[1]))


@dataclass(frozen=True, eq=False, slots=True)
class Line:
    """A straight axis: any point on it and its direction (unit length, +z side)."""

    point: Array
    along: Array

    def moved(self, placed: Array) -> Line:
        return Line(placed[:3, :3] @ self.point + placed[:3, 3], placed[:3, :3] @ self.along)

    def at_height(self, z: float) -> Array:
        """Where it passes the plane z = const."""
        return np.asarray(self.point + self.along * ((z - self.point[2]) / self.along[2]))

    def slope(self) -> complex:
        return in_plane(self.along) / float(self.along[2])


@dataclass(frozen=True, eq=False, slots=True)
class Plane:
    """A flat face: any point in it and its normal."""

    point: Array
    normal: Array

    def moved(self, placed: Array) -> Plane:
        return Plane(placed[:3, :3] @ self.point + placed[:3, 3], placed[:3, :3] @ self.normal)

    def height_on_axis(self) -> float:
        """z where the z axis pierces it."""
        return float(self.normal @ self.point) / float(self.normal[2])

    def slope(self) -> complex:
        """Slope of the normal; the plane is z = height_on_axis - Re(conj(slope) p)."""
        return in_plane(self.normal) / float(self.normal[2])

    def height(self, p: complex) -> float:
        return self.height_on_axis() - (self.slope().conjugate() * p).real


def line_through(at: complex, z: float, slope: complex) -> Line:
    """Line through (at, z) with a slope against z."""
    along = np.array([slope.real, slope.imag, 1.0])
    return Line(np.array([at.real, at.imag, z]), along / np.linalg.norm(along))


def plane_at(z: float, slope: complex) -> Plane:
    """Plane that meets the z axis at z and whose normal has this slope."""
    normal = np.array([slope.real, slope.imag, 1.0])
    return Plane(np.array([0.0, 0.0, z]), normal / np.linalg.norm(normal))
