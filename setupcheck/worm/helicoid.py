"""Flanks of a worm's thread as surfaces: straight-sided (ZA), straight in a normal section (ZN), involute (ZI). mm, rad.

Frame of the gap modules: wheel's axis z, mid-plane z = 0, worm's axis along x at y = a; h = a - y, rho = hypot(h, z).
A flank of the thread centred at x = 0 is a plane curve in screw motion,
    X(y, z) = side S(rho) + hs p atan(z/h)      side +1 right, -1 left;  hs -1 right-hand, +1 left-hand worm
with S the axial half thickness and p = z1 m/2 the reduced lead. All that differs between the profiles is S.
"""

from __future__ import annotations

import math
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from setupcheck.record import record
from setupcheck.worm.geometry import above_zero, steep_enough

Array = NDArray[np.float64]
Hand = Literal["right", "left"]

COMPUTED = ("ZA", "ZN", "ZI")
"""Profiles with a flank here; ZK and ZC depend on the grinding wheel's diameter, which nobody states."""


@record
class Generator:
    """Straight line of a ZN flank in the section square to the thread: width v over height u, v = v1 + k (u - u1).

    u1, v1  where it crosses the reference cylinder [mm];  k  slope, negative on a thread, positive in a space
    sine, cosine  of the lead angle at the reference diameter
    """

    u1: float
    v1: float
    k: float
    sine: float
    cosine: float


@record(kw_only=True)
class Thread:
    """Thread of a worm as a solid [mm, rad].

    profile         ZA, ZN or ZI;  hand  right or left
    pressure_angle  axial, at the reference diameter, whatever the profile
    thickness       axial, at the reference diameter or at `thickness_at` [mm]
    thickness_at    diameter at which the thickness was measured [mm]; None: the reference diameter
    straight_in     for ZN: whether the section of the space or of the thread is straight
    Raises: ValueError for a profile not computed, sizes not above zero, angles outside 0 .. 45 deg, a thread that has no
    thickness at its tip, or a ZI whose base cylinder is not inside it.
    """

    profile: str
    starts: int
    axial_module: float
    reference_diameter: float
    tip_diameter: float
    pressure_angle: float
    thickness: float
    thickness_at: float | None = None
    hand: Hand = "right"
    straight_in: Literal["space", "thread"] = "space"

    def __post_init__(self) -> None:
        if self.profile not in COMPUTED:
            raise ValueError(f"a {self.profile} worm is not computed, only {', '.join(COMPUTED)}")
        if self.hand not in ("right", "left"):
            raise ValueError(f"the hand of a worm is right or left, not {self.hand}")
        above_zero(starts=self.starts, axial_module=self.axial_module, reference_diameter=self.reference_diameter)
        above_zero(thickness=self.thickness, thickness_at=self.thickness_at or self.reference_diameter)
        steep_enough(pressure_angle=self.pressure_angle, lead_angle=math.atan(self.lead / self.radius))
        if not self.tip > self.radius:
            raise ValueError(
                f"the worm's tip diameter {self.tip_diameter:g} mm must be above its reference diameter "
                f"{self.reference_diameter:g} mm"
            )
        if not self.axial_thickness(self.reference_diameter) < self.pitch:
            raise ValueError(f"a thread of {self.thickness:g} mm fills its pitch of {self.pitch:.4g} mm: less, please")
        if not self.axial_thickness(self.tip_diameter) > 0.0:
            raise ValueError(f"the thread is pointed below its tip diameter of {self.tip_diameter:g} mm")

    @property
    def lead(self) -> float:
        """Reduced lead p = z1 m/2 [mm per rad]."""
        return self.starts * self.axial_module / 2.0

    @property
    def pitch(self) -> float:
        """Axial pitch pi m [mm]."""
        return math.pi * self.axial_module

    @property
    def radius(self) -> float:
        """Reference radius r1 [mm]."""
        return self.reference_diameter / 2.0

    @property
    def tip(self) -> float:
        """Tip radius ra1 [mm]."""
        return self.tip_diameter / 2.0

    @property
    def innermost(self) -> float:
        """Radius inside which there is no flank [mm]: the base cylinder of ZI, else 0."""
        return self.lead / _base_rise(self) if self.profile == "ZI" else 0.0

    @property
    def sense(self) -> float:
        """hs: -1 right-hand, +1 left-hand."""
        return -1.0 if self.hand == "right" else 1.0

    def axial_thickness(self, diameter: float) -> float:
        """Axial thickness of the thread at a diameter [mm].

        >>> worm = Thread(profile="ZA", starts=1, axial_module=2.0, reference_diameter=28.0, tip_diameter=32.0,
        ...               pressure_angle=math.radians(20.0), thickness=3.1, thickness_at=28.0)
        >>> round(worm.axial_thickness(30.0), 4)
        2.3721
        """
        return 2.0 * float(half_thickness(self, np.array(diameter / 2.0)))


def half_thickness(thread: Thread, rho: Array) -> Array:
    """Axial half thickness S of the thread at radii rho [mm]; any shape.

    ZA  S = S1 - (rho - r1) tan alpha
    ZI  S = S1 - p [f(rho) - f(r1)],  f = sqrt(rho^2/rb^2 - 1) - acos(rb/rho),  p/rb = sqrt(tan^2 alpha + p^2/r1^2)
    ZN  S = v cos g + p atan(v sin g/u) on the line v = v1 + k (u - u1), u the height in the section, rho^2 = u^2 +
        v^2 sin^2 g; in the space the same for half its width, S = px/2 - that
    All three have the stated pressure angle at r1 exactly.
    Source: definitions of the profiles in ISO/TR 10828 (from memory); written for one axial half thickness here.

    >>> worm = Thread(profile="ZI", starts=2, axial_module=3.0, reference_diameter=36.0, tip_diameter=42.0,
    ...               pressure_angle=math.radians(20.0), thickness=4.7)
    >>> [round(float(s), 4) for s in half_thickness(worm, np.array([15.0, 18.0, 21.0]))]
    [3.4187, 2.35, 1.2419]
    """
    return _shape(thread, rho, reference_half(thread))


def reference_half(thread: Thread) -> float:
    """Half the axial thickness at the reference diameter [mm], from wherever it was measured.

    Source: `half_thickness` turned round; for ZN the line depends on the result, by its second order only.
    """
    half = thread.thickness / 2.0
    if thread.thickness_at is None:
        return half
    at = np.array(thread.thickness_at / 2.0)
    for _ in range(12):
        step = thread.thickness / 2.0 - float(_shape(thread, at, half))
        half += step
        if abs(step) < 1e-15 * thread.radius:
            break
    return half


def slope(thread: Thread, rho: Array) -> Array:
    """Tangent of the axial pressure angle at radii rho: -dS/drho; any shape.  Source: derivative of `half_thickness`.

    >>> worm = Thread(profile="ZN", starts=2, axial_module=3.0, reference_diameter=36.0, tip_diameter=42.0,
    ...               pressure_angle=math.radians(20.0), thickness=4.7)
    >>> [round(math.degrees(math.atan(float(t))), 3) for t in slope(worm, np.array([15.0, 18.0, 21.0]))]
    [20.148, 20.0, 19.911]
    """
    if thread.profile == "ZA":
        return np.full_like(rho, math.tan(thread.pressure_angle))
    if thread.profile == "ZI":
        return np.sqrt(_base_rise(thread) ** 2 - (thread.lead / rho) ** 2)
    line = generator(thread, reference_half(thread))
    u = _height_in_section(line, rho)
    v = line.v1 + line.k * (u - line.u1)
    per_height = line.k * line.cosine + thread.lead * line.sine * (line.k * u - v) / rho**2
    rise = per_height * rho / (u + line.k * v * line.sine**2)
    return rise if thread.straight_in == "space" else -rise


def _base_rise(thread: Thread) -> float:
    """Tangent of the lead angle on the base cylinder of a ZI worm: p/rb."""
    return math.hypot(math.tan(thread.pressure_angle), thread.lead / thread.radius)


def _shape(thread: Thread, rho: Array, half: float) -> Array:
    """S for a half thickness at r1."""
    r1, p = thread.radius, thread.lead
    if thread.profile == "ZA":
        return half - (rho - r1) * math.tan(thread.pressure_angle)
    if thread.profile == "ZI":
        base = p / _base_rise(thread)
        if np.any(rho < base):
            raise ValueError(
                f"an involute thread has no flank inside its base cylinder of {2.0 * base:.4g} mm diameter"
            )

        def f(radius: Array) -> Array:
            return np.sqrt((radius / base) ** 2 - 1.0) - np.arccos(base / radius)

        return half - p * (f(rho) - f(np.array(r1)))
    line = generator(thread, half)
    u = _height_in_section(line, rho)
    v = line.v1 + line.k * (u - line.u1)
    width = v * line.cosine + p * np.arctan(v * line.sine / u)
    return width if thread.straight_in == "thread" else thread.pitch / 2.0 - width


def generator(thread: Thread, half_thickness: float) -> Generator:
    """The straight line of a ZN flank, from half thickness [mm] and pressure angle at the reference cylinder.

    The half width G of thread or space and its slope there fix the line: G = v1 cos g + p atan(v1 sin g/u1),
    u1^2 + v1^2 sin^2 g = r1^2, and dG/drho = -+ tan alpha, which is linear in k.
    Source: derived here.
    """
    p, r1 = thread.lead, thread.radius
    g = math.atan(p / r1)
    in_thread = thread.straight_in == "thread"
    half = half_thickness if in_thread else thread.pitch / 2.0 - half_thickness
    tan_alpha = -math.tan(thread.pressure_angle) if in_thread else math.tan(thread.pressure_angle)
    sine, cosine = math.sin(g), math.cos(g)
    v = half * cosine
    for _ in range(60):  # dG/dv is 1/cos g but for terms of second order, so this closes quickly
        if not abs(v * sine) < r1:
            raise ValueError("a thread as thick as that has no straight normal section: less, please")
        step = (half - v * cosine - p * math.asin(v * sine / r1)) * cosine
        v += step
        if abs(step) < 1e-15 * r1:
            break
    u = math.sqrt(r1 * r1 - (v * sine) ** 2)
    k = (tan_alpha * u / r1 + p * sine * v / r1**2) / (cosine + p * sine * u / r1**2 - tan_alpha * v * sine**2 / r1)
    return Generator(u, v, k, sine, cosine)


def _height_in_section(line: Generator, rho: Array) -> Array:
    """Height u of the line's point at radius rho: u^2 + sin^2 g (v1 + k (u - u1))^2 = rho^2."""
    s2, c = line.sine**2, line.v1 - line.k * line.u1
    a, b = 1.0 + s2 * line.k**2, s2 * line.k * c
    return (-b + np.sqrt(b * b - a * (s2 * c * c - rho * rho))) / a


def flank(thread: Thread, h: Array, z: Array, *, side: int) -> Array:
    """X of a flank of the thread centred at x = 0 [mm]; h = a - y below the worm's axis, > 0, and z broadcast.

    side  +1 right, -1 left
    Source: a plane curve in screw motion (definition of a helicoid).

    >>> worm = Thread(profile="ZA", starts=1, axial_module=2.0, reference_diameter=28.0, tip_diameter=32.0,
    ...               pressure_angle=math.radians(20.0), thickness=3.1)
    >>> [round(float(x), 4) for x in flank(worm, np.array(14.0), np.array([0.0, 3.0]), side=1)]
    [1.55, 1.2232]
    """
    rho = np.sqrt(h * h + z * z)
    return side * half_thickness(thread, rho) + (thread.sense * thread.lead) * np.arctan(z / h)


def flank_slope(thread: Thread, h: Array, z: Array, *, side: int) -> Array:
    """dX/dy of the same flank, per mm; h and z broadcast.  Source: derivative of `flank`, y = a - h.

    dX/dy = side (-dS/drho) h/rho + hs p z/rho^2
    """
    rho2 = h * h + z * z
    rho = np.sqrt(rho2)
    return side * slope(thread, rho) * h / rho + (thread.sense * thread.lead) * z / rho2


def flank_across(thread: Thread, h: Array, z: Array, *, side: int) -> Array:
    """dX/dz of the same flank, per mm; h and z broadcast.  Source: derivative of `flank`.

    dX/dz = -side (-dS/drho) z/rho + hs p h/rho^2
    """
    rho2 = h * h + z * z
    rho = np.sqrt(rho2)
    return -side * slope(thread, rho) * z / rho + (thread.sense * thread.lead) * h / rho2
