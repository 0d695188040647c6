"""Thread flanks against what each profile is by name: straight in a section, or made of tangents to a cylinder."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from setupcheck.worm.helicoid import Thread, flank, flank_across, flank_slope, half_thickness, slope

STEEP = Thread(
    profile="ZA",
    starts=3,
    axial_module=3.0,
    reference_diameter=36.0,
    tip_diameter=42.0,
    pressure_angle=math.radians(20.0),
    thickness=4.6,
)
PROFILES = [
    STEEP,
    replace(STEEP, profile="ZI"),
    replace(STEEP, profile="ZN"),
    replace(STEEP, profile="ZN", straight_in="thread"),
    replace(STEEP, profile="ZI", hand="left", thickness_at=38.0),
    replace(STEEP, profile="ZN", thickness_at=38.0),
]


@pytest.mark.parametrize("thread", PROFILES)
def test_thickness_and_pressure_angle_are_the_stated_ones_where_they_are_stated(thread: Thread) -> None:
    assert thread.axial_thickness(thread.thickness_at or thread.reference_diameter) == pytest.approx(4.6, abs=1e-12)
    assert float(slope(thread, np.array(18.0))) == pytest.approx(math.tan(math.radians(20.0)), abs=1e-12)


@pytest.mark.parametrize("thread", PROFILES)
@pytest.mark.parametrize("side", [1, -1])
def test_the_slopes_are_those_of_the_surface(thread: Thread, side: int) -> None:
    h, z, d = np.array([15.5, 17.0, 20.0]), np.array([-6.0, 0.5, 3.0]), 1e-5
    up = (flank(thread, h - d, z, side=side) - flank(thread, h + d, z, side=side)) / (2.0 * d)  # y = a - h
    across = (flank(thread, h, z + d, side=side) - flank(thread, h, z - d, side=side)) / (2.0 * d)
    assert flank_slope(thread, h, z, side=side) == pytest.approx(up, abs=1e-9)
    assert flank_across(thread, h, z, side=side) == pytest.approx(across, abs=1e-9)


@pytest.mark.parametrize("thread", PROFILES)
def test_a_turn_of_the_worm_is_a_shift_along_it(thread: Thread) -> None:
    rho, phi, turn = 19.0, 0.2, 0.3
    here, there = (
        float(flank(thread, np.array(rho * math.cos(v)), np.array(rho * math.sin(v)), side=1))
        for v in (phi, phi + turn)
    )
    assert there - here == pytest.approx(thread.sense * thread.lead * turn, abs=1e-12)


def test_an_involute_thread_is_made_of_lines_that_touch_its_base_cylinder() -> None:
    thread = replace(STEEP, profile="ZI")
    base = thread.innermost
    u = np.linspace(5.0, 17.0, 9)  # along the tangent from where it leaves the cylinder
    h, z = base + 0.0 * u, u
    for side, along in ((1, u), (-1, u)):
        x = flank(thread, h, along, side=side)
        other = flank(thread, h, -along, side=side)
        bent = [np.abs(np.diff(v, 2)).max() for v in (x, other)]
        assert min(bent) < 1e-12  # straight on the one tangent
        assert max(bent) > 1e-3  # and not on the other, which shows that the first is no accident
    assert np.hypot(h, z).max() < 21.0 + 1e-9


@pytest.mark.parametrize(("straight_in", "sign"), [("space", 1.0), ("thread", -1.0)])
def test_a_zn_thread_is_straight_square_to_its_helix(straight_in: str, sign: float) -> None:
    """Points of the flank in the plane through the middle line of space or thread that is square to the helix there."""
    thread = replace(STEEP, profile="ZN", straight_in=straight_in)
    g = math.atan(thread.lead / thread.radius)
    middle = thread.pitch / 2.0 if straight_in == "space" else 0.0
    side = -1 if straight_in == "space" else 1  # the left flank of the next thread bounds the space to the right
    offset = thread.pitch if straight_in == "space" else 0.0
    points = []
    for u in np.linspace(15.0, 20.5, 7):
        v = 1.0
        for _ in range(60):  # the place across at which the plane meets the flank at this height
            x, z = v * math.cos(g), -thread.sense * v * math.sin(g)
            v += (offset - middle + float(flank(thread, np.array(u), np.array(z), side=side)) - x) / math.cos(g)
        points.append(v)
    assert np.abs(np.diff(points, 2)).max() < 1e-9
    assert sign * (points[-1] - points[0]) > 1.0


def test_profiles_nearly_agree_on_a_small_lead_angle() -> None:
    flat = replace(STEEP, starts=1, axial_module=2.5, reference_diameter=30.0, tip_diameter=35.0, thickness=3.927)
    rho = np.linspace(12.5, 17.5, 11)
    za, zi, zn = (half_thickness(replace(flat, profile=p), rho) for p in ("ZA", "ZI", "ZN"))
    assert np.abs(zn - za).max() < 0.002
    assert np.abs(zi - za).max() < 0.012


@pytest.mark.parametrize(
    ("wrong", "words"),
    [
        ({"profile": "ZK"}, "a ZK worm is not computed"),
        ({"hand": "up"}, "right or left"),
        ({"pressure_angle": math.radians(50.0)}, "between 0 and 45 deg"),
        ({"thickness": 9.5}, "fills its pitch"),
        ({"thickness": 1.5}, "pointed below its tip"),
        ({"thickness": math.nan}, "above zero"),
        ({"tip_diameter": 35.0}, "above its reference diameter"),
        ({"starts": 12}, "between 0 and 45 deg"),
    ],
)
def test_a_thread_that_cannot_be_is_refused(wrong: dict[str, object], words: str) -> None:
    with pytest.raises(ValueError, match=words):
        replace(STEEP, **wrong)


def test_inside_its_base_cylinder_an_involute_thread_has_no_flank() -> None:
    with pytest.raises(ValueError, match="base cylinder"):
        half_thickness(replace(STEEP, profile="ZI"), np.array(8.0))
