"""Worm and cutter as clouds of points in space: a judge of the exact gap that shares neither equations nor code with it.

The worm is its axial section, turned about its axis step by step while it advances; the cutter is its insert, turned about a
tilted axis by rotation matrices. Worm and wheel turn about their own axes. Distances are to the nearest of many points
(scipy's tree) and the plane through it. No rack, no meshing equation, no angle of a gap.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from scipy.spatial import cKDTree

FAR = 1e3


def turned(points: np.ndarray, angle: float, axis: str) -> np.ndarray:
    """Points (n, 3) turned about an axis through the origin, right-handed [rad]."""
    s, c = math.sin(angle), math.cos(angle)
    i, j = {"x": (1, 2), "y": (2, 0), "z": (0, 1)}[axis]
    out = points.copy()
    out[..., i] = c * points[..., i] - s * points[..., j]
    out[..., j] = s * points[..., i] + c * points[..., j]
    return out


def normals(grid: np.ndarray) -> np.ndarray:
    """Unit normals of a surface given as a grid of points (m, n, 3), from its neighbours."""
    across = np.cross(np.gradient(grid, axis=0), np.gradient(grid, axis=1))
    return across / np.linalg.norm(across, axis=-1, keepdims=True)


@dataclass(frozen=True, slots=True)
class Worm:
    """Right-hand worm with straight axial flanks, axis along x through the origin, thread crossing (0, -r1, 0) [mm, rad]."""

    starts: int
    module: float
    diameter: float
    pressure_angle: float
    turns: float
    """How far its thread is made on either side [rad]."""

    def right_flank(self, step: float) -> np.ndarray:
        """Points of the right flank about `step` apart, from below the root to the tip, (m, n, 3)."""
        tip, root = self.diameter / 2.0 + self.module, self.diameter / 2.0 - 1.5 * self.module
        section = np.zeros((max(8, round((tip - root) / step)), 3))
        height = np.linspace(root, tip, len(section))
        section[:, 1] = -height  # towards the wheel
        section[:, 0] = math.pi * self.module / 4.0 - (height - self.diameter / 2.0) * math.tan(self.pressure_angle)
        angles = np.linspace(-self.turns, self.turns, round(2.0 * self.turns * tip / step))
        lead = math.pi * self.module * self.starts
        out = np.stack([turned(section, a, "x") for a in angles], axis=1)
        out[..., 0] += lead * angles / (2.0 * math.pi)  # a right-hand screw goes on along x as it turns about x
        return out


@dataclass(frozen=True, slots=True)
class Turning:
    """Distances of points of a wheel from a worm, place by place as both turn.

    distance  square to the worm's flank, negative inside it, (places, points) [mm]; FAR where its flank has ended
    arm       how fast that distance shrinks as the wheel turns back, (places, points) [mm per rad]
    """

    distance: np.ndarray
    arm: np.ndarray


def run(points: np.ndarray, worm: Worm, *, centre: float, teeth: int, step: float, places: np.ndarray) -> Turning:
    """Turn the worm through `places` [rad] and the wheel with it; points (n, 3) of the wheel about its own axis z."""
    grid = worm.right_flank(step)
    normal = normals(grid)
    if normal[:, :, 0].mean() < 0.0:
        normal = -normal
    tree = cKDTree(grid.reshape(-1, 3))
    last = grid.shape[0] - 1
    distances, arms = [], []
    for place in places:
        # the thread turned by a positive angle about x moves along -x under the wheel, which then turns from +x to +y
        here = turned(points, place * worm.starts / teeth, "z")
        pushed = np.stack([-here[:, 1], here[:, 0], np.zeros(len(here))], axis=1)  # by a radian of the wheel
        seen = turned(here - np.array([0.0, centre, 0.0]), -place, "x")
        i = tree.query(seen)[1]
        row = i // grid.shape[1]
        column = i % grid.shape[1]
        n = normal[row, column]
        out = np.einsum("ij,ij->i", seen - grid[row, column], n)
        edge = (row == 0) | (row == last) | (column == 0) | (column == grid.shape[1] - 1)
        distances.append(np.where(edge, FAR, out))
        arms.append(-np.einsum("ij,ij->i", turned(n, place, "x"), pushed))
    return Turning(np.array(distances), np.array(arms))


def body(
    heights: np.ndarray, widths: np.ndarray, radius: float, *, tilt: float, axis: float, half: float
) -> np.ndarray:
    """Right flank of the body an insert sweeps, in the wheel's frame: (m, n, 3); half  angle swept either way [rad]."""
    profile = np.stack([widths, heights - radius, np.zeros(len(heights))], axis=1)
    swept = np.stack([turned(profile, b, "x") for b in np.linspace(-half, half, 2 * len(heights))], axis=1)
    return turned(swept, -tilt, "y") + np.array([0.0, axis, 0.0])
