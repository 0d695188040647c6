"""ZI and ZN flanks built from what defines them, against how far they are said to stand off a straight axial line."""

from __future__ import annotations

import math

import pytest
from scipy.optimize import brentq

from setupcheck.worm.profiles import involute_base_radius, off_straight

WORMS = [(1, 2.5, 30.0, 20.0), (2, 3.0, 36.0, 20.0), (1, 1.5, 22.0, 15.0), (3, 4.0, 50.0, 20.0)]
MORE = 1e-4  # mm; the flank is looked at in 40 places, and the largest may lie between two


def said(profile: str, starts: int, module: float, diameter: float, alpha: float) -> float:
    return off_straight(
        profile,
        starts=starts,
        axial_module=module,
        reference_diameter=diameter,
        pressure_angle=math.radians(alpha),
        groove=math.pi * module / 2.0,
        low=diameter - 2.0 * module,
        high=diameter + 2.0 * module,
    )


@pytest.mark.parametrize(("starts", "module", "diameter", "alpha"), WORMS)
def test_a_line_that_rolls_on_the_base_cylinder_makes_the_zi_flank(
    starts: int, module: float, diameter: float, alpha: float
) -> None:
    p, r1 = starts * module / 2.0, diameter / 2.0
    rb = involute_base_radius(
        starts=starts, axial_module=module, reference_radius=r1, pressure_angle=math.radians(alpha)
    )
    lead = p / rb  # slope of the base helix: the line lies in the base cylinder's tangent plane, along that helix

    def axial(radius: float) -> float:
        """Where the screwed line cuts the axial section: the point t along the tangent, turned back by its angle."""
        t = math.sqrt(radius**2 - rb**2)
        return t * lead - p * math.atan2(t, rb)

    slope = (axial(r1 + 1e-4) - axial(r1 - 1e-4)) / 2e-4
    assert math.tan(math.radians(alpha)) == pytest.approx(slope, rel=1e-6)
    off = [abs(axial(r1 + u) - axial(r1) - u * slope) for u in (module * (i / 100.0 - 1.0) for i in range(201))]
    assert max(off) == pytest.approx(said("ZI", starts, module, diameter, alpha), abs=MORE)


@pytest.mark.parametrize(("starts", "module", "diameter", "alpha"), WORMS)
def test_a_straight_tool_in_the_normal_section_makes_the_zn_flank(
    starts: int, module: float, diameter: float, alpha: float
) -> None:
    p, r1, want = starts * module / 2.0, diameter / 2.0, math.tan(math.radians(alpha))
    g = math.atan(p / r1)

    def axial(radius: float, w0: float, lean: float) -> float:
        """Half groove along the axis: the tool's edge at height u, screwed back; its radius found by search."""
        u = brentq(lambda v: math.hypot(r1 + v, (w0 + v * lean) * math.sin(g)) - radius, -0.9 * r1, r1, xtol=1e-14)
        w = w0 + u * lean
        return w * math.cos(g) + p * math.atan2(w * math.sin(g), r1 + u)

    def width(lean: float) -> float:
        return float(
            brentq(lambda w: axial(r1, w, lean) - math.pi * module / 4.0, 0.1 * module, 2.0 * module, xtol=1e-14)
        )

    def slope(lean: float) -> float:
        return (axial(r1 + 1e-4, width(lean), lean) - axial(r1 - 1e-4, width(lean), lean)) / 2e-4

    lean = float(brentq(lambda v: slope(v) - want, 0.5 * want, 1.5 * want, xtol=1e-12))
    w0 = width(lean)
    off = [
        abs(axial(r1 + u, w0, lean) - axial(r1, w0, lean) - u * want)
        for u in (module * (i / 50.0 - 1.0) for i in range(101))
    ]
    assert max(off) == pytest.approx(said("ZN", starts, module, diameter, alpha), abs=MORE)


def test_a_za_flank_is_straight_and_the_ground_ones_are_not_computed() -> None:
    assert said("ZA", 1, 2.5, 30.0, 20.0) == 0.0
    for profile in ("ZK", "ZC"):
        with pytest.raises(ValueError, match="is not computed, only ZA, ZN and ZI"):
            said(profile, 1, 2.5, 30.0, 20.0)
