"""How far a worm's flank stands off a straight line in its axial section: ZA, ZN and ZI worms. Lengths mm, angles rad.

All three have the pressure angle `alpha` in the axial section at the reference radius; what differs is the curve.
"""

from __future__ import annotations

import math
from collections.abc import Callable

from setupcheck.worm.geometry import above_zero, steep_enough

POINTS = 40
"""Heights between root and tip at which the curve is looked at. Source: our choice; the curve has no wiggles."""


def involute_base_radius(*, starts: int, axial_module: float, reference_radius: float, pressure_angle: float) -> float:
    """Base radius of an involute helicoid [mm]: r_b = p/tan g_b, cos g_b = cos g cos alpha_n.

    Raises: ValueError for sizes not above zero or angles outside 0 .. 45 deg.  Source: ISO 1122-2 quantities (from memory).

    >>> round(involute_base_radius(starts=1, axial_module=2.5, reference_radius=15.0, pressure_angle=math.radians(20.0)), 4)
    3.3477
    """
    above_zero(starts=starts, axial_module=axial_module, reference_radius=reference_radius)
    steep_enough(pressure_angle=pressure_angle)
    p = starts * axial_module / 2.0
    g = math.atan(p / reference_radius)
    normal = math.atan(math.tan(pressure_angle) * math.cos(g))
    return p / math.tan(math.acos(math.cos(g) * math.cos(normal)))


def _involute(radius: float, *, p: float, base: float) -> float:
    """Axial fall of an involute helicoid's flank [mm]: p (sqrt(r^2/rb^2 - 1) - acos(rb/r))."""
    if radius < base:
        raise ValueError(f"an involute worm has no flank inside its base radius {base:.3f} mm")
    return p * (math.sqrt((radius / base) ** 2 - 1.0) - math.acos(base / radius))


def _straight_in_the_normal_section(
    *, p: float, reference_radius: float, slope: float, groove: float
) -> Callable[[float], float]:
    """Half width of the groove along the axis over the radius, for a groove with straight sides in its normal section.

    Side of the groove in the plane square to the helix at r1: w = w0 + u tan(beta) at height u. Screwed back into the axial
    section: x = w cos g + p atan(w sin g/(r1 + u)), rho = hypot(r1 + u, w sin g). w0 and beta are such that width and slope
    at r1 are those asked for.
    """
    g = math.atan(p / reference_radius)
    sine, cosine = math.sin(g), math.cos(g)

    def at(radius: float, w0: float, lean: float) -> float:
        u = radius - reference_radius
        for _ in range(30):
            w = w0 + u * lean
            before, u = u, math.sqrt(max(radius**2 - (w * sine) ** 2, 0.0)) - reference_radius
            if abs(u - before) < 1e-14:
                break
        w = w0 + u * lean
        return w * cosine + p * math.atan2(w * sine, reference_radius + u)

    w0, lean, step = groove / 2.0 * cosine, slope * cosine, 1e-4 * reference_radius
    for _ in range(30):
        w0 += (groove / 2.0 - at(reference_radius, w0, lean)) * cosine
        leaning = (at(reference_radius + step, w0, lean) - at(reference_radius - step, w0, lean)) / (2.0 * step)
        lean += (slope - leaning) * cosine
    return lambda radius: at(radius, w0, lean)


def off_straight(
    profile: str,
    *,
    starts: int,
    axial_module: float,
    reference_diameter: float,
    pressure_angle: float,
    groove: float,
    low: float,
    high: float,
) -> float:
    """Largest distance of the flank from a straight axial line of the same pressure angle at d1 [mm], along the axis.

    profile    ZA (0 by definition), ZN (groove straight in its normal section) or ZI (involute helicoid)
    groove     axial width of the groove at d1;  low, high  diameters between which it is looked at, such as root and tip
    Raises: ValueError for another profile, or diameters where the flank does not exist.
    Source: derived from the definitions of the profiles (ISO/TR 10828 names, from memory).

    >>> of = dict(starts=1, axial_module=2.5, reference_diameter=30.0, pressure_angle=math.radians(20.0), groove=3.927,
    ...           low=25.0, high=35.0)
    >>> [round(1e3 * off_straight(name, **of), 1) for name in ("ZA", "ZN", "ZI")]
    [0.0, 0.8, 4.8]
    """
    above_zero(starts=starts, axial_module=axial_module, reference_diameter=reference_diameter, groove=groove)
    above_zero(low=low, high_over_low=high - low)
    steep_enough(pressure_angle=pressure_angle)
    if profile == "ZA":
        return 0.0
    r1, p, slope = reference_diameter / 2.0, starts * axial_module / 2.0, math.tan(pressure_angle)
    if profile == "ZI":
        base = involute_base_radius(
            starts=starts, axial_module=axial_module, reference_radius=r1, pressure_angle=pressure_angle
        )
        start = _involute(r1, p=p, base=base)

        def half(radius: float) -> float:
            return groove / 2.0 + _involute(radius, p=p, base=base) - start

        of: Callable[[float], float] = half
    elif profile == "ZN":
        of = _straight_in_the_normal_section(p=p, reference_radius=r1, slope=slope, groove=groove)
    else:
        raise ValueError(f"the flank of a {profile} worm is not computed, only ZA, ZN and ZI")
    radii = [(low + (high - low) * i / POINTS) / 2.0 for i in range(POINTS + 1)]
    return max(abs(of(r) - (groove / 2.0 + (r - r1) * slope)) for r in radii)
