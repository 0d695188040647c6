"""The exact gap of a wheel: symmetries, the meshing equation, an involute, and a worm that never enters it."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from setupcheck.worm.conjugate import Pair, conjugate_gap, first_contact, roll_of
from setupcheck.worm.helicoid import Thread, flank, flank_across, flank_slope

from . import exact_gap
from .test_against_the_exact_gap import PAIRS
from .wheels import blank_of, pair_of

MICRON = 1e-3
WHEELS = [
    pair_of(),
    pair_of(alpha=15.0),
    pair_of(3, alpha=15.0),
    pair_of(4),
    pair_of(4, profile="ZI"),
    pair_of(4, profile="ZN", hand="left"),
    pair_of(shift=0.4, thinner=0.1),
    pair_of(shift=-0.3),
]


def grid(pair: Pair, rows: int = 40, columns: int = 41) -> tuple[np.ndarray, np.ndarray]:
    """Radii from a little above the worm's tip to the throat, over a face as wide as the worm's radius."""
    m, half = pair.thread.axial_module, 0.5 * pair.thread.radius
    z = np.linspace(-half, half, columns)
    bottom = pair.centre_distance - np.sqrt(pair.thread.tip**2 - z**2) + 0.02 * m
    return bottom + (pair.rolling + m - bottom) * np.linspace(0.0, 1.0, rows)[:, np.newaxis], np.broadcast_to(
        z, (rows, columns)
    )


def test_angles_of_the_gap_computed_earlier_for_this_project_by_an_independent_prototype() -> None:
    gap = conjugate_gap(pair_of(), np.array([50.0, 51.25, 51.25]), np.array([0.0, 4.0, -4.0]))
    assert gap.angle == pytest.approx([0.039270, 0.038018, 0.052071], abs=6e-7)


@pytest.mark.parametrize("pair", [w for w in WHEELS if w.thread.profile == "ZA"])
def test_the_mid_plane_of_a_za_worm_makes_an_involute(pair: Pair) -> None:
    alpha = pair.thread.pressure_angle
    r = np.linspace(float(first_contact(pair, np.array(0.0))), pair.rolling + pair.thread.axial_module, 101)
    lean = np.arccos(pair.rolling * math.cos(alpha) / r)
    involute = pair.gap_arc / (2.0 * pair.rolling) - (math.tan(alpha) - alpha) + np.tan(lean) - lean
    assert r * conjugate_gap(pair, r, np.zeros_like(r)).angle == pytest.approx(r * involute, abs=1e-9)


@pytest.mark.parametrize("pair", WHEELS)
def test_on_the_rolling_circle_the_gap_is_the_rack(pair: Pair) -> None:
    z = np.linspace(-0.4, 0.4, 9) * pair.thread.radius
    gap = conjugate_gap(pair, np.full_like(z, pair.rolling), z)
    rack = flank(pair.thread, np.full_like(z, pair.centre_distance - pair.rolling), z, side=1)
    assert pair.rolling * gap.angle == pytest.approx(rack, abs=1e-9)


@pytest.mark.parametrize("pair", WHEELS)
def test_half_a_turn_about_the_line_of_centres_brings_the_other_flank(pair: Pair) -> None:
    r, z = grid(pair)
    right, left = conjugate_gap(pair, r, z), conjugate_gap(pair, r, -z, side=-1)
    assert np.array_equal(np.isnan(right.angle), np.isnan(left.angle))
    assert r * left.angle == pytest.approx(-r * right.angle, abs=1e-8, nan_ok=True)


@pytest.mark.parametrize("pair", [WHEELS[0], WHEELS[3], WHEELS[4]])
def test_the_other_hand_is_the_mirror_image(pair: Pair) -> None:
    r, z = grid(pair)
    other = replace(pair, thread=replace(pair.thread, hand="left"))
    assert r * conjugate_gap(other, r, -z).angle == pytest.approx(r * conjugate_gap(pair, r, z).angle, abs=1e-9)


@pytest.mark.parametrize("pair", WHEELS)
@pytest.mark.parametrize("side", [1, -1])
def test_where_they_touch_neither_surface_moves_into_the_other(pair: Pair, side: int) -> None:
    """n (v1 - v2) = 0 in space: the worm turns about its own axis, the wheel about its own, no plane sections used."""
    r, z = grid(pair)
    gap = conjugate_gap(pair, r, z, side=side)  # type: ignore[arg-type]
    s = roll_of(pair, gap, r, z, side=side)  # type: ignore[arg-type]
    x, y = r * np.sin(gap.turned), r * np.cos(gap.turned)
    h, thread = pair.centre_distance - y, pair.thread
    assert x - s == pytest.approx(flank(thread, h, z, side=side), abs=1e-9)
    normal = (np.ones_like(x), -flank_slope(thread, h, z, side=side), -flank_across(thread, h, z, side=side))
    wheel = (y, -x, np.zeros_like(x))  # per radian of the wheel, from +y towards +x
    turn = -thread.sense * pair.rolling / thread.lead  # of the worm per radian of the wheel, from -y towards +z
    worm = (np.zeros_like(x), turn * z, turn * h)
    slip = sum(n * (a - b) for n, a, b in zip(normal, worm, wheel, strict=True))
    assert np.abs(slip[gap.inside]).max() < 1e-7
    assert gap.inside.mean() > 0.6


@pytest.mark.parametrize("pair", WHEELS)
def test_no_point_of_a_turning_worm_ever_enters_the_wheel(pair: Pair) -> None:
    """Random points of the thread, carried round by random turns of worm and wheel."""
    rng = np.random.default_rng(7)
    n, thread, m = 20000, pair.thread, pair.thread.axial_module
    rho = rng.uniform(thread.radius - 0.9 * m, thread.tip, n)
    phi = rng.uniform(-0.5, 0.5, n)
    travel = rng.uniform(-6.0 * m, 6.0 * m, n)
    h, z = rho * np.cos(phi), rho * np.sin(phi)
    y = pair.centre_distance - h
    for side in (1, -1):
        x = flank(thread, h, z, side=side) + travel
        r, angle = np.hypot(x, y), np.arctan2(x, y) - travel / pair.rolling
        gap = conjugate_gap(pair, r, z, side=side)  # type: ignore[arg-type]
        into = side * (angle - gap.angle) * r
        near = r < pair.rolling + 1.2 * m
        assert np.max(into[near]) < 1e-9
        assert np.max(into[near]) > -0.5 * MICRON  # and some points do touch


@pytest.mark.parametrize("p", PAIRS)
def test_it_is_the_gap_of_the_point_by_point_solve(p: exact_gap.Pair) -> None:
    worm = Thread(
        profile="ZA",
        starts=p.starts,
        axial_module=p.module,
        reference_diameter=p.worm_diameter,
        tip_diameter=p.worm_diameter + 2.0 * p.module,
        pressure_angle=p.pressure_angle,
        thickness=math.pi * p.module / 2.0,
    )
    pair = Pair(thread=worm, teeth=p.teeth, centre_distance=p.a)
    for up in (0.0, 0.5):
        for z in (-3.0, 0.0, 2.0):
            r = p.r2 + up * p.module
            ours = float(conjugate_gap(pair, np.array(r), np.array(z)).angle)
            assert r * ours == pytest.approx(r * p.gap(r, z), abs=1e-9)


def test_an_undercut_wheel_is_refused() -> None:
    few = pair_of(alpha=15.0)
    with pytest.raises(ValueError, match=r"undercut.*more teeth, a larger pressure angle or a positive shift"):
        replace(few, teeth=28, centre_distance=15.0 + 35.0)


def test_a_worm_that_does_not_reach_the_rolling_circle_is_refused() -> None:
    with pytest.raises(ValueError, match="outside the rolling circle of 100 mm"):
        replace(pair_of(), centre_distance=68.0)


def test_points_that_the_worm_does_not_reach_have_no_angle() -> None:
    gap = conjugate_gap(pair_of(), np.array([47.0, 50.0]), np.array([0.0, 18.0]))
    assert np.isnan(gap.angle).all() and not gap.inside.any()
    assert blank_of().top(np.array(0.0)) == pytest.approx(52.5)
