"""Flanks of real gaps: exact involutes (or straight flanks), met by a fixed probe or by a worm.  Lengths mm, angles rad.

A gap's frame has its origin on the pitch circle, x outwards, y counter-clockwise, z along the part.  Its section square
to z is fixed; it runs along z, obliquely by the lead.  `side` +1 is the counter-clockwise flank, -1 the clockwise one.
With h the half angle of the gap at radius rho, about the axis of cutting:
    involute   h(rho) = pi/2N + inv(alpha_rho) - inv(alpha),  cos(alpha_rho) = r cos(alpha)/rho
    straight   y(x) = pi r/2N + x tan(alpha),  x measured from the pitch circle
"""

from __future__ import annotations

import numpy as np

from .frames import Array
from .route import Surface

Flank = tuple[Surface, Array, int]  # drawing, change of gap width (N,), side
_H = 1e-3  # mm, step of the slopes; the curves bend over many millimetres, so the slopes err by some 1e-10


def _curve(flank: Flank, u: Array) -> tuple[Array, Array]:
    """(x, y) in the gap's frame; u = r (roll angle - that at the pitch circle), so the base circle is no corner.

    Straight flank: u is x itself.
    """
    drawn, width, side = flank
    r, alpha = drawn.radius, drawn.pressure_angle
    half_pitch_gap = np.pi * r / (2.0 * drawn.count) + 0.5 * width
    if drawn.form == "straight":
        return u, side * (half_pitch_gap + u * np.tan(alpha))
    roll = np.tan(alpha) + u / r  # tan(alpha_rho)
    rho = r * np.cos(alpha) * np.sqrt(1.0 + roll * roll)
    half = half_pitch_gap / r + (roll - np.arctan(roll)) - (np.tan(alpha) - alpha)
    return rho * np.cos(half) - r, side * rho * np.sin(half)


def _point(frames: Array, flank: Flank, u: Array, s: Array) -> Array:
    """Points (N, 3) of the flanks at section parameter u and distance s along z."""
    x, y = _curve(flank, u)
    local = np.stack([x, y + s * np.tan(flank[0].lead_angle), s, np.ones_like(s)], axis=-1)
    return np.asarray((frames @ local[..., None])[:, :3, 0])


def _slopes(frames: Array, flank: Flank, u: Array, s: Array) -> tuple[Array, Array]:
    """Derivatives of the points by u and by s."""
    by_u = (_point(frames, flank, u + _H, s) - _point(frames, flank, u - _H, s)) / (2.0 * _H)
    oblique = np.array([0.0, np.tan(flank[0].lead_angle), 1.0])
    return by_u, np.asarray(frames[:, :3, :3] @ oblique)


def flank_at_radius(frames: Array, flank: Flank, radius: float) -> Array:
    """Where each flank meets the circle of this radius about the z axis in the plane z = 0; (N, 3)."""
    u, s = np.zeros(len(frames)), np.zeros(len(frames))
    for _ in range(20):
        p = _point(frames, flank, u, s)
        by_u, by_s = _slopes(frames, flank, u, s)
        rho = np.hypot(p[:, 0], p[:, 1])
        out_u = (p[:, 0] * by_u[:, 0] + p[:, 1] * by_u[:, 1]) / rho
        out_s = (p[:, 0] * by_s[:, 0] + p[:, 1] * by_s[:, 1]) / rho
        wrong_r, wrong_z = rho - radius, p[:, 2]
        determinant = out_u * by_s[:, 2] - out_s * by_u[:, 2]
        step_u = (wrong_r * by_s[:, 2] - wrong_z * out_s) / determinant
        step_s = (wrong_z * out_u - wrong_r * by_u[:, 2]) / determinant
        u, s = u - step_u, s - step_s
        if max(float(np.max(np.abs(step_u))), float(np.max(np.abs(step_s)))) < 1e-12:
            return _point(frames, flank, u, s)
    raise ArithmeticError("the probe does not meet a flank")


def perfect_gap(drawn: Surface) -> Array:
    """Frame (1, 4, 4) of a perfect gap at angle 0."""
    frame = np.eye(4)[None]
    frame[0, 0, 3] = drawn.radius
    return frame


def perfect_flank_angle(drawn: Surface, side: int) -> float:
    """Angle from the gap's middle at which a perfect flank meets the pitch circle (involute: side * pi/2N)."""
    x, y, _ = flank_at_radius(perfect_gap(drawn), (drawn, np.zeros(1), side), drawn.radius)[0]
    return float(np.arctan2(y, x))


def index_on_worm(frames: Array, flank: Flank, angle: Array) -> Array:
    """Angle each gap must be turned about z beyond -angle until its flank lies on one fixed worm flank; (N,).

    The worm in the plane z = 0 is a rack: its flank is the straight line square to n = (sin(alpha), -side cos(alpha))
    that a perfect gap touches when it stands at angle 0.  The section of a real flank touches that line where its
    tangent is square to n; the angle is found by Newton on n . (turned touching point) = that of the perfect gap.
    """
    drawn, _, side = flank
    n = np.array([np.sin(drawn.pressure_angle), -side * np.cos(drawn.pressure_angle)])
    line = _support(perfect_gap(drawn), (drawn, np.zeros(1), side), np.array([n]))[0][0]
    turned = np.zeros(len(frames))
    for _ in range(20):
        back = turned - angle  # the part is turned by this; the line's normal, seen from the part, by its opposite
        normals = np.stack(
            [n[0] * np.cos(back) + n[1] * np.sin(back), -n[0] * np.sin(back) + n[1] * np.cos(back)], axis=-1
        )
        reach, touching = _support(frames, flank, normals)
        # d(n . turned point)/d(turned): at a touching point only the turning counts
        rate = -normals[:, 0] * touching[:, 1] + normals[:, 1] * touching[:, 0]
        step = -(reach - line) / rate
        turned = turned + step
        if float(np.max(np.abs(step))) < 1e-12:
            return np.asarray(turned)
    raise ArithmeticError("a flank does not come to lie on the worm")


def _support(frames: Array, flank: Flank, normals: Array) -> tuple[Array, Array]:
    """n . p and p where the section z = 0 of each flank has its tangent square to n (N, 2)."""
    u, s = np.zeros(len(frames)), np.zeros(len(frames))
    h = 0.01
    run_z = _slopes(frames, flank, u, s)[1][:, 2]

    def square(values: Array) -> tuple[Array, Array]:
        along = -_point(frames, flank, values, s)[:, 2] / run_z  # onto the plane z = 0; exact, heights are linear in s
        by_u, by_s = _slopes(frames, flank, values, along)
        tangent = by_u - by_s * (by_u[:, 2] / by_s[:, 2])[:, None]
        return normals[:, 0] * tangent[:, 0] + normals[:, 1] * tangent[:, 1], along

    for _ in range(20):
        here, along = square(u)
        bend = (square(u + h)[0] - square(u - h)[0]) / (2.0 * h)
        step = np.clip(-here / bend, -1.0, 1.0)
        u = u + step
        if float(np.max(np.abs(step))) < 1e-6:  # n . p is stationary: 1e-6 mm of u is some 1e-14 mm of n . p
            break
    _, along = square(u)
    p = _point(frames, flank, u, along)
    return normals[:, 0] * p[:, 0] + normals[:, 1] * p[:, 1], p
