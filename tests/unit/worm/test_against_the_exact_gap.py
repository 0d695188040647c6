"""Crowning, twist, tilt and insert width against an exact gap computed point by point."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from scipy.optimize import brentq

from setupcheck.worm import cutter, geometry, insert

from .exact_gap import Pair

PAIRS = [
    Pair(1, 2.5, 30.0, 40, math.radians(20.0), 29.75, 0.0),
    Pair(1, 2.5, 30.0, 40, math.radians(20.0), 50.0, 0.0),
    Pair(1, 2.5, 30.0, 40, math.radians(15.0), 35.0, 0.0),
    Pair(2, 3.0, 36.0, 60, math.radians(20.0), 45.0, 0.0),
    Pair(1, 1.5, 22.0, 90, math.radians(15.0), 19.4, 0.0),
    Pair(1, 2.5, 30.0, 40, math.radians(20.0), 29.75, 0.0, shift=0.4),
    Pair(1, 2.5, 30.0, 40, math.radians(20.0), 29.75, 0.0, shift=-0.3),
]


def pair_of(p: Pair) -> dict[str, float]:
    at = p.worm_diameter + 2.0 * p.shift * p.module  # worm's diameter at the pitch point
    return {
        "pitch_diameter": at,
        "wheel_diameter": 2.0 * p.r2,
        "pressure_angle": p.pressure_angle,
        "lead_angle": geometry.lead_angle(starts=p.starts, axial_module=p.module, diameter=at),
        "gap_arc": gap(p),
        "oversize": cutter.oversize(
            cutter_radius=p.cutter_radius, worm_tip_diameter=p.worm_diameter + 2.0 * p.module, clearance=0.2 * p.module
        ),
    }


def gap(p: Pair) -> float:
    return insert.gap_arc(
        thread_thickness=math.pi * p.module / 2.0,
        backlash=0.0,
        axial_module=p.module,
        pressure_angle=p.pressure_angle,
        shift=p.shift,
    )


@pytest.mark.parametrize("p", PAIRS)
def test_crowning_and_twist_agree_with_the_exact_gap(p: Pair) -> None:
    pair = pair_of(p)
    a, b, _ = replace(p, tilt=pair["lead_angle"]).crowning_and_twist()
    crowning = cutter.crowning(cutter.Plunge(**pair))
    assert a == pytest.approx(crowning, rel=0.04)
    assert crowning < a  # on the careful side
    assert b == pytest.approx(cutter.twist(cutter.Plunge(**pair)), rel=0.005)


@pytest.mark.parametrize("p", PAIRS)
def test_at_the_square_tilt_the_contact_stays_in_the_mid_plane(p: Pair) -> None:
    pair = pair_of(p)
    at_lead_angle = replace(p, tilt=pair["lead_angle"]).crowning_and_twist()[2]
    cut = cutter.Plunge(**pair)
    # a little above g:  tan tau = tan g [1 + tan(alpha + th0) (s2/2) (1/(r1 + D) + 1/r2)]  (derived)
    more = cut.wall * cut.gap_arc / 2.0 * (1.0 / cut.at_pitch + 2.0 / cut.wheel_diameter)
    square = math.atan(math.tan(cut.lead_angle) * (1.0 + more))
    at_square = replace(p, tilt=square).crowning_and_twist()[2]
    assert abs(at_square) < 0.02 * abs(at_lead_angle)


def test_the_other_hand_is_the_mirror_image() -> None:
    right = replace(PAIRS[0], tilt=math.atan(1.0 / 12.0))
    a, b, c = right.crowning_and_twist()
    assert (a, -b, -c) == pytest.approx(replace(right, hand=-1).crowning_and_twist(), rel=1e-6)


@pytest.mark.parametrize("p", PAIRS)
def test_the_gap_of_the_thread_as_measured(p: Pair) -> None:
    assert 2.0 * p.r2 * p.gap(p.r2, 0.0) == pytest.approx(gap(p), abs=1e-9)


@pytest.mark.parametrize("p", PAIRS)
def test_the_insert_above_the_start_of_the_involute(p: Pair) -> None:
    at = replace(p, tilt=math.atan(p.starts * p.module / p.worm_diameter))
    heights = [k * p.module for k in (1.0, 1.2, 2.0)]
    ours = insert.insert_widths(
        heights,
        axial_module=p.module,
        wheel_teeth=p.teeth,
        centre_distance=p.a,
        worm_tip_diameter=p.worm_diameter + 2.0 * p.module,
        clearance=0.2 * p.module,
        pressure_angle=p.pressure_angle,
        gap_arc=gap(p),
        tilt=at.tilt,
        cutter_radius=p.cutter_radius,
    )
    assert [2.0 * at.insert(p.cutter_radius - h) for h in heights] == pytest.approx(ours, abs=1e-9)


def test_the_exact_gap_gives_its_own_check_values() -> None:
    # angles of an earlier program: at the pitch point, and 1.25 mm outside it at both ends of 8 mm
    p = replace(PAIRS[0], tilt=math.atan(1.0 / 12.0))
    assert (0.039270, 0.038018, 0.052071) == pytest.approx((p.gap(50, 0), p.gap(51.25, 4), p.gap(51.25, -4)), abs=6e-7)


@pytest.mark.parametrize("p", PAIRS[:5])
def test_the_floor_lies_just_above_the_radius_at_which_the_exact_crowning_vanishes(p: Pair) -> None:
    pair = {k: v for k, v in pair_of(p).items() if k != "oversize"}
    tip, at = p.worm_diameter + 2.0 * p.module, replace(p, tilt=pair["lead_angle"])
    exact = brentq(lambda r: replace(at, cutter_radius=r).crowning_and_twist()[0], 0.52 * tip, tip, xtol=1e-6)
    floor = cutter.smallest_radius(worm_tip_diameter=tip, clearance=0.2 * p.module, **pair)
    assert exact < floor < 1.02 * exact
