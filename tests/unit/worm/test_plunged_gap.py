"""The gap a plunged cutter leaves: against the point-by-point solve, by symmetry, and what it refuses."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from setupcheck.worm import cutter
from setupcheck.worm.ease_off import second_order
from setupcheck.worm.insert import insert_widths
from setupcheck.worm.plunge_gap import Cut, Insert, curve, cut_gap, measured_insert, on_curves, on_cutter, revolved
from setupcheck.worm.wheel_flank import Blank, wheel_flank

from . import exact_gap
from .wheels import ARCMIN, MICRON, SIZES, Wheel, blank_of, cut_of, pair_of, planes


def test_a_mid_plane_insert_leaves_the_gap_of_the_point_by_point_solve() -> None:
    point = exact_gap.Pair(1, 2.5, 30.0, 40, math.radians(20.0), 35.0, math.atan(1.0 / 12.0))
    wheel, cut = Wheel(pair_of(), blank_of()), cut_of(radius=35.0)
    insert = wheel.insert(cut, "mid-plane")
    for r, z in ((50.0, 0.0), (49.5, 2.0), (51.5, -3.0)):
        at, plane, start = np.array([r]), np.array([z]), np.array([point.gap(r, z)])
        ours = float(cut_gap(wheel.pair, cut, insert, at, plane, side=1, start=start)[0])
        assert r * ours == pytest.approx(r * point.cut(r, z), abs=2e-6)


@pytest.mark.parametrize(("case", "radius"), [(1, 24.0), (1, 29.75), (1, 50.0), (3, 17.5), (4, 46.0)])
def test_nothing_of_the_worm_enters_what_an_envelope_insert_leaves(case: int, radius: float) -> None:
    wheel, cut = Wheel(pair_of(case), blank_of(case), rows=60, columns=121), cut_of(case, radius)
    play = wheel.map(cut, wheel.insert(cut)).play
    assert -0.05 * MICRON < play < 0.5 * MICRON  # nothing enters, and it touches


def test_a_mid_plane_insert_is_too_narrow_for_the_worm() -> None:
    wheel, cut = Wheel(pair_of(), blank_of()), cut_of(radius=30.0)
    assert wheel.map(cut, wheel.insert(cut, "mid-plane")).play < -20.0 * MICRON


def test_the_cut_flank_lies_on_the_body_that_the_insert_sweeps() -> None:
    wheel, cut = Wheel(pair_of(4, hand="left"), blank_of(4)), cut_of(4, 46.0, offset=0.05, turned=10 * ARCMIN)
    insert = wheel.insert(cut_of(4, 46.0))
    for side in (1, -1):
        flank = wheel_flank(wheel.pair, wheel.blank, side=side)  # type: ignore[arg-type]
        angle = cut_gap(wheel.pair, cut, insert, flank.r, planes(flank), side=flank.side, start=flank.angle)
        rc, v = on_cutter(wheel.pair, cut, flank.r, angle, planes(flank))
        assert side * v == pytest.approx(revolved(insert, cut, side=flank.side).at(rc)[0], abs=1e-9)


@pytest.mark.parametrize(
    ("errors", "turned"),
    [
        ({"tilt": 5 * ARCMIN}, {"tilt": 5 * ARCMIN}),
        ({"clearance": 0.02}, {"clearance": 0.02}),
        ({"offset": 0.05}, {"offset": -0.05}),
        ({"turned": 5 * ARCMIN}, {"turned": -5 * ARCMIN}),
        ({"off_centre": 0.5}, {"off_centre": 0.5}),
    ],
)
def test_half_a_turn_makes_the_right_flank_the_left_one(errors: dict[str, float], turned: dict[str, float]) -> None:
    right, left = Wheel(pair_of(), blank_of()), Wheel(pair_of(), blank_of(), side=-1)
    insert = right.insert(cut_of())
    ours = right.map(cut_of(**errors), insert).missing
    theirs = left.map(cut_of(**turned), insert).missing
    assert theirs[:, ::-1] == pytest.approx(ours, abs=1e-8)


def test_a_left_hand_pair_is_the_mirror_image() -> None:
    right, left = Wheel(pair_of(), blank_of()), Wheel(pair_of(hand="left"), blank_of())
    insert = right.insert(cut_of())
    assert left.insert(cut_of()).right == pytest.approx(insert.right, abs=1e-9)
    ours, mirrored = right.map(cut_of(offset=0.05), insert), left.map(cut_of(offset=-0.05), insert)
    assert mirrored.missing[:, ::-1] == pytest.approx(ours.missing, abs=1e-8)


@pytest.mark.parametrize(
    ("case", "alpha", "radius"), [(1, 20.0, 29.75), (1, 20.0, 50.0), (3, 15.0, 19.4), (3, 20.0, 30.0)]
)
def test_crowning_and_twist_of_the_map_are_those_of_the_second_order(case: int, alpha: float, radius: float) -> None:
    starts, m, d1, teeth, _ = SIZES[case]
    wheel, cut = Wheel(pair_of(case, alpha=alpha), blank_of(case)), cut_of(case, radius)
    a, b, c0 = second_order(wheel.map(cut, wheel.insert(cut, "mid-plane")))
    plunge = cutter.Plunge(
        pitch_diameter=d1,
        wheel_diameter=m * teeth,
        pressure_angle=math.radians(alpha),
        lead_angle=math.atan(starts * m / d1),
        gap_arc=math.pi * m / 2.0,
        oversize=radius - d1 / 2.0 - 1.2 * m,
    )
    assert 0.965 < cutter.crowning(plunge) / a < 1.0
    assert b == pytest.approx(cutter.twist(plunge), rel=0.005)
    point = exact_gap.Pair(starts, m, d1, teeth, math.radians(alpha), radius, math.atan(starts * m / d1))
    assert (a, b, c0) == pytest.approx(point.crowning_and_twist(), rel=2e-3)


def test_a_thinner_thread_makes_a_thinner_insert_but_not_evenly() -> None:
    """0.2 mm of axial thickness: 0.2025 at pitch height, 0.1883 at the tip, computed earlier by an independent prototype."""
    full, thin = Wheel(pair_of(), blank_of()), Wheel(pair_of(thinner=0.2), blank_of())
    cut = cut_of(radius=30.0)
    a, b = full.insert(cut, "mid-plane"), thin.insert(cut, "mid-plane")
    assert a.width(3.0) - b.width(3.0) == pytest.approx(0.2025, abs=2e-4)
    assert a.width(0.0) - b.width(0.0) == pytest.approx(0.1883, abs=2e-4)


@pytest.mark.parametrize(("case", "alpha", "radius"), [(1, 20.0, 29.75), (3, 15.0, 19.4), (4, 20.0, 46.0)])
def test_the_mid_plane_insert_has_the_widths_of_the_closed_form(case: int, alpha: float, radius: float) -> None:
    _, m, d1, teeth, _ = SIZES[case]
    wheel, cut = Wheel(pair_of(case, alpha=alpha), blank_of(case)), cut_of(case, radius)
    heights = [k * m for k in (0.0, 0.2, 0.7, 1.2, 2.2)]
    closed = insert_widths(
        heights,
        axial_module=m,
        wheel_teeth=teeth,
        centre_distance=(d1 + m * teeth) / 2.0,
        worm_tip_diameter=d1 + 2.0 * m,
        clearance=0.2 * m,
        pressure_angle=math.radians(alpha),
        gap_arc=math.pi * m / 2.0,
        tilt=cut.tilt,
        cutter_radius=radius,
    )
    ours = wheel.insert(cut, "mid-plane")
    assert [ours.width(h) for h in heights[2:]] == pytest.approx(closed[2:], abs=2e-6)
    assert [ours.width(h) for h in heights[:2]] == pytest.approx(closed[:2], abs=1e-3)  # the tangent, in another frame


def test_measured_points_of_an_envelope_leave_its_gap() -> None:
    wheel, cut = Wheel(pair_of(), blank_of()), cut_of()
    made = wheel.insert(cut)
    heights = np.linspace(0.0, 6.1, 25)
    points = [np.array([0.5 * made.width(h) for h in heights]) for _ in (1, -1)]
    again = wheel.map(cut, measured_insert(heights, *points)).missing
    assert again == pytest.approx(wheel.map(cut, made).missing, abs=1.5 * MICRON)


def test_a_flank_measured_too_wide_by_itself_moves_only_its_own_side() -> None:
    wheel, cut = Wheel(pair_of(), blank_of()), cut_of()
    made = wheel.insert(cut)
    wider = Insert(made.heights, made.right + 0.01, made.left)
    moved = wheel.map(cut, wider).missing - wheel.map(cut, made).missing
    assert moved.min() > 0.009
    left = Wheel(pair_of(), blank_of(), side=-1)
    assert left.map(cut, wider).missing == pytest.approx(left.map(cut, made).missing, abs=1e-12)


def test_a_face_swung_or_raked_by_a_degree_hardly_shows() -> None:
    """0.15 um for each mm of width or height and degree: cos 1 deg."""
    made = Wheel(pair_of(), blank_of()).insert(cut_of())
    plain = revolved(made, cut_of(), side=1)
    at = plain.x[20:-20]
    for errors in ({"swung": math.radians(1.0)}, {"raked": math.radians(1.0)}):
        body = revolved(made, cut_of(**errors), side=1)
        assert np.abs(body.at(at)[0] - plain.at(at)[0]).max() < 1.0 * MICRON
        assert np.abs(body.at(at)[0] - plain.at(at)[0]).max() > 0.1 * MICRON


def test_a_face_off_the_bars_axis_turns_on_a_larger_circle() -> None:
    assert cut_of(off_centre=0.5).tip_circle - 29.75 == pytest.approx(0.5**2 / (2.0 * 29.75), rel=1e-3)


def test_the_hollow_of_a_throat_and_a_plain_rim() -> None:
    hollow = Blank(face_width=16.0, throat_diameter=105.0, throat_radius=12.5, outside_diameter=107.5)
    assert hollow.top(np.array([0.0, 3.0, 7.9])) == pytest.approx([52.5, 65.0 - math.sqrt(12.5**2 - 9.0), 53.75])
    assert Blank(face_width=16.0, throat_diameter=105.0).top(np.array([0.0, 8.0])) == pytest.approx([52.5, 52.5])


HEIGHTS = np.linspace(0.0, 6.0, 25)


@pytest.mark.parametrize(
    ("heights", "widths", "words"),
    [
        (HEIGHTS[:4], 1.0 + 0.4 * HEIGHTS[:4], "at least five points"),
        (HEIGHTS + 0.1, 1.0 + 0.4 * HEIGHTS, "begin at its tip"),
        (np.sort(np.append(HEIGHTS[:-1], 1.0)), 1.0 + 0.4 * HEIGHTS, "rise from point to point"),
        (np.delete(HEIGHTS, slice(8, 16)), 1.0 + 0.4 * np.delete(HEIGHTS, slice(8, 16)), "has no points"),
        (HEIGHTS, 1.0 + 0.4 * HEIGHTS - 0.5 * (HEIGHTS > 3.0), "grow wider from tip to throat"),
        (HEIGHTS, np.where(HEIGHTS == 3.0, np.nan, 1.0 + 0.4 * HEIGHTS), "is missing"),
        (HEIGHTS, 0.4 * HEIGHTS - 0.5, "no width at its tip"),
    ],
)
def test_a_measured_profile_that_is_none_is_refused(heights: np.ndarray, widths: np.ndarray, words: str) -> None:
    with pytest.raises(ValueError, match=words):
        measured_insert(heights, widths)


def test_an_insert_that_ends_below_the_throat_is_refused() -> None:
    wheel, cut = Wheel(pair_of(), blank_of()), cut_of()
    short = np.linspace(0.0, 4.0, 17)
    made = wheel.insert(cut)
    with pytest.raises(ValueError, match="too short: its profile must go on above the throat"):
        wheel.map(cut, measured_insert(short, np.array([0.5 * made.width(h) for h in short])))


@pytest.mark.parametrize(
    ("wrong", "words"),
    [
        ({"radius": 0.0}, "above zero"),
        ({"clearance": -0.1}, "run on the bottom of the gap: cut deeper"),
        ({"tilt": 1.0}, "within 45 deg"),
        ({"off_centre": 40.0}, "within the cutter"),
        ({"offset": math.nan}, "be a number"),
    ],
)
def test_a_setting_that_cannot_be_is_refused(wrong: dict[str, float], words: str) -> None:
    with pytest.raises(ValueError, match=words):
        replace(cut_of(), **wrong)


def test_a_cutter_smaller_than_the_worm_is_refused() -> None:
    wheel = Wheel(pair_of(), blank_of())
    with pytest.raises(ValueError, match=r"smaller than the worm's tip, 17\.5 mm: the worm would ride on the ends"):
        wheel.insert(cut_of(radius=17.0))


def test_an_insert_turned_until_its_flank_overhangs_is_refused() -> None:
    made = Wheel(pair_of(), blank_of()).insert(cut_of())
    with pytest.raises(ValueError, match="no longer grows wider"):
        revolved(made, Cut(radius=29.75, tilt=0.08, clearance=0.5, turned=0.7), side=-1)


@pytest.mark.parametrize(
    ("blank", "words"),
    [
        (blank_of(face=36.0), "as wide as the worm's tip diameter 35 mm"),
        (blank_of(face=28.0), "wider than throat and worm allow: the worm reaches 26"),
        (Blank(face_width=16.0, throat_diameter=94.0), "does not reach the worm: its tip comes to 95 mm"),
        (Blank(face_width=16.0, throat_diameter=122.0), "run into the worm's core"),
    ],
)
def test_a_blank_that_does_not_go_with_the_worm_is_refused(blank: Blank, words: str) -> None:
    with pytest.raises(ValueError, match=words):
        wheel_flank(pair_of(), blank)


@pytest.mark.parametrize(
    ("wrong", "words"),
    [
        ({"face_width": 30.0, "throat_diameter": 105.0, "throat_radius": 12.5}, "cannot be 30 mm wide"),
        ({"face_width": 16.0, "throat_diameter": 105.0, "outside_diameter": 107.0}, "a plain rim has one diameter"),
        (
            {"face_width": 16.0, "throat_diameter": 105.0, "throat_radius": 12.5, "outside_diameter": 104.0},
            "must not be below the throat's 105 mm",
        ),
        ({"face_width": 0.0, "throat_diameter": 105.0}, "above zero"),
    ],
)
def test_a_blank_that_cannot_be_is_refused(wrong: dict[str, float], words: str) -> None:
    with pytest.raises(ValueError, match=words):
        Blank(**wrong)


def test_many_curves_at_once_are_the_curves_one_by_one() -> None:
    """numpy.gradient stands behind the one by one; beyond its ends every curve is its tangent."""
    rng = np.random.default_rng(20_240)
    x, y = np.cumsum(rng.uniform(0.1, 1.0, (7, 40)), axis=1), rng.normal(size=(7, 40))
    at = np.linspace(-3.0, 40.0, 240)
    alone = np.array([curve(mine, of).at(at)[0] for mine, of in zip(x, y, strict=True)])
    assert alone == pytest.approx(on_curves(x, y, at), rel=1e-11, abs=1e-11)
