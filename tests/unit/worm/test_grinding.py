"""Grinding an insert: offset of arcs, cusps against discs taken out of the metal, rounding, stops out of square, overlays."""

from __future__ import annotations

import itertools
import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.interpolate import CubicSpline

from setupcheck.worm import grinding, overlay, wheel_edge
from setupcheck.worm.gap_insert import envelope_insert, mid_plane_insert, sections
from setupcheck.worm.grinding import Datum
from setupcheck.worm.grinding_stop import Way, ground_against_stop
from setupcheck.worm.insert_profile import Hollow, flank_angle, included_angle, smallest_hollow
from setupcheck.worm.plunge_gap import Insert, measured_insert, revolved
from tests.unit.worm.test_insert_profile import arc, wedge
from tests.unit.worm.wheels import blank_of, cut_of, pair_of

DATUM = Datum(side=8.0)


def real_insert() -> Insert:
    return envelope_insert(sections(pair_of(1), blank_of(1)), cut_of(1))


def equal_chords(insert: Insert, count: int, *, side: int) -> np.ndarray:
    """Heights of `count` points equally far apart along a flank [mm]: lengths of a fine polygon, summed."""
    fine = np.linspace(insert.heights[0], insert.heights[-1], 2001)
    halves = CubicSpline(insert.heights, insert.right if side == 1 else insert.left)(fine)
    length = np.append(0.0, np.cumsum(np.hypot(np.diff(fine), np.diff(halves))))
    return np.asarray(np.interp(np.linspace(0.0, length[-1], count), length, fine))


def left_standing(insert: Insert, centres: np.ndarray, radius: float, *, count: int = 1501) -> np.ndarray:
    """Metal outside the flank, square to it, that no disc about the centres (n, 2) has taken; one for each place of the flank.

    Walks out from the flank along its normal to where the first disc begins; shares no code with the formulas.
    """
    h = np.linspace(insert.heights[0], insert.heights[-1], count)
    flank = CubicSpline(insert.heights, insert.right)
    w, psi = flank(h), np.arctan(flank(h, 1))
    normal = np.stack([np.cos(psi), -np.sin(psi)], axis=1)
    to_disc = centres[np.newaxis] - np.stack([w, h], axis=1)[:, np.newaxis]
    ahead = np.einsum("ijk,ik->ij", to_disc, normal)
    aside2 = (to_disc**2).sum(axis=2) - ahead**2
    entry = np.where(aside2 < radius**2, ahead - np.sqrt(np.maximum(radius**2 - aside2, 0.0)), np.inf)
    return np.asarray(entry.min(axis=1))


def centres_of(insert: Insert, heights: np.ndarray, radius: float) -> np.ndarray:
    at = wheel_edge.wheel_centres(insert, heights, wheel_radius=radius, side=1)
    return np.stack([at.across, at.along], axis=1)


@settings(max_examples=20)
@given(st.floats(0.5, 9.5), st.integers(2, 30))
def test_the_offset_of_an_arc_is_an_arc_about_the_same_centre(radius: float, count: int) -> None:
    heights = np.linspace(0.0, 5.0, count)
    across, along = grinding.readings(arc(count=401), heights, wheel_radius=radius, datum=DATUM, side=1)
    x, h = across + DATUM.side + radius, along - radius
    assert np.hypot(x - 11.0, h + 1.0) == pytest.approx(10.0 - radius, abs=2e-5)


def test_readings_begin_at_the_touches() -> None:
    insert = wedge()
    zero = grinding.readings(insert, np.array([0.0, 3.0]), wheel_radius=4.0, datum=DATUM, side=1)
    moved = Datum(side=8.0, across=12.5, along=-0.3)
    shown = grinding.readings(insert, np.array([0.0, 3.0]), wheel_radius=4.0, datum=moved, side=1)
    assert zero[0] + 12.5 == pytest.approx(shown[0])
    assert zero[1] - 0.3 == pytest.approx(shown[1])
    # a knife edge reads the point itself: half width less the side, height above the tip
    knife = grinding.readings(insert, np.array([3.0]), wheel_radius=1e-9, datum=DATUM, side=1)
    assert [float(v[0]) for v in knife] == pytest.approx([1.1 + 3.0 * math.tan(math.radians(20.0)) - 8.0, 3.0])


@pytest.mark.parametrize("radius", [3.0, 6.0])
def test_cusps_are_what_plunged_discs_leave(radius: float) -> None:
    for insert in (arc(count=401), real_insert()):
        heights = equal_chords(insert, 12, side=1)
        centres = centres_of(insert, heights, radius)
        left = left_standing(insert, centres, radius)
        assert left.min() > -2e-6  # nothing bites
        places = np.linspace(insert.heights[0], insert.heights[-1], len(left))
        told = wheel_edge.cusps(insert, heights, wheel_radius=radius, side=1)
        found = [left[(places >= a) & (places <= b)].max() for a, b in itertools.pairwise(heights)]
        assert told == pytest.approx(found, rel=0.04, abs=3e-4)


def test_cusps_of_an_arc_are_those_of_two_circles() -> None:
    radius, rho = 6.0, 10.0
    heights = equal_chords(arc(count=401), 8, side=1)
    turn = np.diff(np.arcsin((heights + 1.0) / rho))
    meet = (rho - radius) * np.cos(turn / 2.0) + np.sqrt(radius**2 - ((rho - radius) * np.sin(turn / 2.0)) ** 2)
    told = wheel_edge.cusps(arc(count=401), heights, wheel_radius=radius, side=1)
    assert rho - meet == pytest.approx(told, rel=0.01)


@given(st.integers(6, 60), st.floats(1.0, 7.0))
def test_equal_errors_are_equal_and_never_above_equal_chords(count: int, radius: float) -> None:
    insert = arc(count=201)
    spread = grinding.equal_errors(insert, count, wheel_radius=radius, side=1)
    assert (0.0, 5.0) == pytest.approx((spread[0], spread[-1]))
    told = wheel_edge.cusps(insert, spread, wheel_radius=radius, side=1)
    assert told.max() == pytest.approx(told.min(), rel=0.02, abs=1e-7)
    even = wheel_edge.cusps(insert, equal_chords(insert, count, side=1), wheel_radius=radius, side=1)
    assert told.max() <= even.max() * 1.001


def test_equal_errors_take_fewer_points_where_the_flank_is_hollow() -> None:
    insert = mid_plane_insert(sections(pair_of(1, alpha=15.0), blank_of(1)), cut_of(1, 35.0))
    count, radius = 15, 3.0
    chords = np.diff(grinding.equal_errors(insert, count, wheel_radius=radius, side=1))
    place = np.searchsorted(grinding.equal_errors(insert, count, wheel_radius=radius, side=1), 1.6) - 1
    assert chords[place] > 1.3 * chords[-1]
    even = wheel_edge.cusps(insert, equal_chords(insert, count, side=1), wheel_radius=radius, side=1).max()
    best = grinding.cusps_of(insert, count, radius, 1)
    assert best < even


@settings(max_examples=20)
@given(st.floats(0.002, 0.02), st.floats(1.0, 6.0), st.sampled_from([0.0005, 0.001, 0.002]))
def test_so_many_points_hold_the_form_and_one_less_does_not(form_error: float, radius: float, step: float) -> None:
    insert = arc(count=201)
    at_worst = grinding.rounding_bound(insert, step=step, side=1)
    count = grinding.points_for(insert, form_error=form_error, wheel_radius=radius, step=step, side=1)
    assert grinding.cusps_of(insert, count, radius, 1) + at_worst <= form_error
    if count > 2:
        assert grinding.cusps_of(insert, count - 1, radius, 1) + at_worst > form_error * 0.999
    heights = grinding.equal_errors(insert, count, wheel_radius=radius, side=1)
    table = grinding.coordinates(insert, heights, wheel_radius=radius, datum=DATUM, step=step, side=1)
    assert table.form_error <= form_error + 1e-9


@pytest.mark.parametrize(("step", "count"), [(0.001, 12), (0.01, 5), (0.005, 30)])
def test_rounding_moves_the_flank_as_discs_at_the_rounded_places_do(step: float, count: int) -> None:
    insert, radius = arc(count=401), 5.0
    heights = equal_chords(insert, count, side=1)
    table = grinding.coordinates(insert, heights, wheel_radius=radius, datum=DATUM, step=step, side=1)
    for shown in (table.across, table.along):
        assert np.abs(shown / step - np.round(shown / step)).max() < 1e-6
    assert np.abs(table.rounding).max() <= grinding.rounding_bound(insert, step=step, side=1)
    centres = np.stack([table.across + DATUM.side + radius, table.along - radius], axis=1)
    places = np.linspace(0.0, 5.0, 4001)
    left = left_standing(insert, centres, radius, count=4001)
    between = (places >= heights[0]) & (places <= heights[-1])
    assert max(left[between].max(), -left[between].min()) == pytest.approx(table.form_error, rel=0.05, abs=2e-5)
    if count < 30:  # further apart no neighbour set too deep reaches over
        at_points = [left[np.abs(places - h).argmin()] for h in heights]
        assert at_points == pytest.approx(table.rounding, abs=0.05 * step)


def test_an_envelope_holds_a_sharp_bend_that_a_wheel_hardly_misses() -> None:
    insert = real_insert()
    assert smallest_hollow(insert, side=1).radius < 4.0
    smooth = smallest_hollow(insert, side=1, live_from=0.98, live_to=4.5).radius
    assert 10.0 == pytest.approx(smooth, abs=0.5)
    left = wheel_edge.metal_left(insert, wheel_radius=7.8, side=1)
    assert 5.34 == pytest.approx(left.height, abs=0.1)
    assert 0.001 < left.most < 0.002
    assert 10.2 == pytest.approx(wheel_edge.largest_wheel(insert, side=1), abs=0.2)


def test_a_sharp_bend_keeps_what_a_disc_between_two_lines_keeps() -> None:
    h = np.linspace(0.0, 6.0, 601)
    bent = Insert(h, 1.0 + 0.3 * h + 0.1 * np.maximum(h - 3.0, 0.0), 1.0 + 0.3 * h)
    turn = math.atan(0.4) - math.atan(0.3)
    left = wheel_edge.metal_left(bent, wheel_radius=5.0, side=1)
    assert 5.0 * (1.0 / math.cos(turn / 2.0) - 1.0) == pytest.approx(left.most, rel=0.03)
    assert wheel_edge.metal_left(bent, wheel_radius=5.0, side=-1).most < 1e-7


def test_a_wheel_that_does_not_fit_is_refused_with_one_that_does() -> None:
    says = r"an edge of 12 mm radius is too large for the hollow of the right flank: .* leaves 63 um; 8 mm or less"
    for act in (
        lambda: grinding.readings(arc(count=401), np.array([1.0]), wheel_radius=12.0, datum=DATUM, side=1),
        lambda: grinding.points_for(arc(count=401), form_error=0.01, wheel_radius=12.0, step=0.001, side=1),
    ):
        with pytest.raises(ValueError, match=says):
            act()
    wheel_edge.refuse_gouging(arc(count=401), wheel_radius=8.0, side=1)


def test_the_radius_of_an_arc_is_the_largest_wheel() -> None:
    assert 10.0 == pytest.approx(wheel_edge.largest_wheel(arc(count=401), side=1, left=1e-4), rel=0.005)
    assert isinstance(smallest_hollow(arc(count=401), side=1), Hollow)
    assert math.inf == wheel_edge.largest_wheel(wedge(), side=1)


@pytest.mark.parametrize(
    ("act", "says"),
    [
        (lambda: Datum(side=0.0), "side must be above zero"),
        (lambda: Datum(side=8.0, along=math.nan), "readings at touch-off must be numbers"),
        (lambda: grinding.equal_errors(wedge(), 1, wheel_radius=5.0, side=1), "at two points or more"),
        (
            lambda: grinding.coordinates(wedge(), np.array([1.0]), wheel_radius=5.0, datum=DATUM, step=0.001, side=1),
            "at two points or more",
        ),
        (
            lambda: grinding.points_for(wedge(), form_error=0.005, wheel_radius=5.0, step=0.01, side=1),
            r"rounded to 10 um move the flank by up to 6.4 um, so a form error of 5 um cannot be held: a step of 3.9 um",
        ),
        (
            lambda: grinding.points_for(wedge(), form_error=1e-6, wheel_radius=0.01, step=1e-9, side=1),
            r"\d+ points would be needed: a larger wheel edge",
        ),
        (
            lambda: wheel_edge.cusps(wedge(), np.array([0.0, 5.0]), wheel_radius=2.0, side=1),
            r"points 5.32 mm apart leave a wheel of 2 mm edge radius no common metal: more points",
        ),
        (
            lambda: wheel_edge.cusps(wedge(), np.array([0.0, 2.0, 1.0]), wheel_radius=2.0, side=1),
            "must rise from tip to top",
        ),
        (
            lambda: grinding.readings(wedge(), np.array([7.0]), wheel_radius=2.0, datum=DATUM, side=1),
            "at 7 mm it is not known",
        ),
        (lambda: grinding.rounding_bound(wedge(), step=0.0, side=1), "step must be above zero"),
        (lambda: overlay.scale_for(0.0005), r"0.5 um needs an enlargement of 500:1, and 100:1 is the largest"),
        (
            lambda: overlay.off_profile(wedge(), np.array([1.0, 2.0]), np.array([1.0, math.nan]), side=1),
            "needs its height and its half width",
        ),
        (
            lambda: ground_against_stop(wedge(), angle=1.0, way="swung", side=8.0, touched_at=0.0),
            "less than 45 deg",
        ),
        (
            lambda: ground_against_stop(wedge(), angle=-0.5, way="turned over", side=8.0, touched_at=0.0),
            r"-28.6479 deg out of square leaves no insert: the insert's right flank must grow wider",
        ),
        (
            lambda: ground_against_stop(wedge(), angle=0.01, way="tilted", side=8.0, touched_at=0.0),  # type: ignore[arg-type]
            "by 'swung' or 'turned over', not 'tilted'",
        ),
    ],
)
def test_what_cannot_be_ground_is_refused(act: object, says: str) -> None:
    with pytest.raises(ValueError, match=says):
        act()  # type: ignore[operator]


ARCMIN = math.radians(1.0 / 60.0)


@given(st.floats(-60.0, 60.0), st.floats(0.0, 20.0))
def test_turned_over_changes_the_width_and_swung_leans(minutes: float, touched_at: float) -> None:
    d = minutes * ARCMIN
    got = {
        way: ground_against_stop(wedge(), angle=d, way=way, side=8.0, touched_at=touched_at)
        for way in ("swung", "turned over")
    }
    over, swung = got["turned over"], got["swung"]
    # straight flanks: the angles change by exactly the angle of the stop, both alike or one against the other
    assert (d, d) == pytest.approx((over.right, over.left), abs=1e-9)
    assert (d, -d) == pytest.approx((swung.right, swung.left), abs=1e-9)
    assert math.radians(40.0) + 2.0 * d == pytest.approx(included_angle(over.insert, 3.0), abs=1e-7)
    assert math.radians(40.0) == pytest.approx(included_angle(swung.insert, 3.0), abs=1e-7)
    assert 0.0 == pytest.approx(over.lean, abs=1e-12)
    slope = math.tan(math.radians(20.0))
    assert d * (1.0 + slope**2) == pytest.approx(swung.lean, rel=1e-3, abs=1e-9)
    # widths: nothing of first order when swung, twice the angle times the height when turned over
    second_order = 30.0 * d * d
    assert 0.0 == pytest.approx(swung.tip_width, abs=second_order + 1e-12)
    assert 0.0 == pytest.approx(swung.top_width, abs=second_order + 1e-12)
    for told, height in ((over.tip_width, 0.0), (over.top_width, 6.0)):
        half = 1.1 + slope * height
        assert 2.0 * d * (height - touched_at + slope * half) == pytest.approx(told, abs=second_order + 1e-12)


@pytest.mark.parametrize("way", ["swung", "turned over"])
def test_the_hollow_insert_turns_in_its_whole_profile(way: Way) -> None:
    insert, d = real_insert(), 15.0 * ARCMIN
    got = ground_against_stop(insert, angle=d, way=way, side=8.0, touched_at=12.0)
    assert flank_angle(insert, 3.0, side=1) + d == pytest.approx(flank_angle(got.insert, 3.0, side=1), abs=1.5e-3)
    if way == "turned over":
        assert got.insert.left == pytest.approx(got.insert.right)
        assert -2.0 * 12.0 * d == pytest.approx(got.tip_width, rel=0.05)
    else:
        assert abs(got.top_width) < 1e-3
        assert -12.0 * d == pytest.approx(got.tip_aside, rel=0.05)


def test_swung_is_the_cutter_whose_insert_is_turned_in_its_face() -> None:
    insert, d = real_insert(), 5.0 * ARCMIN
    ground = ground_against_stop(insert, angle=d, way="swung", side=8.0, touched_at=0.0).insert
    rc = np.linspace(25.0, 29.5, 10)
    for side in (1, -1):
        turned = revolved(insert, cut_of(1, turned=d), side=side).at(rc)[0]  # type: ignore[arg-type]
        assert turned == pytest.approx(revolved(ground, cut_of(1), side=side).at(rc)[0], abs=2e-5)  # type: ignore[arg-type]


def test_a_square_stop_changes_nothing() -> None:
    got = ground_against_stop(real_insert(), angle=0.0, way="swung", side=8.0, touched_at=12.0)
    assert (0.0, 0.0, 0.0) == pytest.approx((got.tip_width, got.top_width, got.lean), abs=1e-12)


@given(st.floats(0.0025, 1.0), st.floats(0.1, 0.25))
def test_an_overlay_shows_the_error_it_was_chosen_for(error: float, line: float) -> None:
    scale = overlay.scale_for(error, line=line)
    assert error >= overlay.error_shown(scale, line=line) * (1.0 - 1e-9)
    smaller = [s for s in overlay.SCALES if s < scale]
    assert not smaller or error < overlay.error_shown(smaller[-1], line=line)


def test_measured_points_come_back_as_distances_square_to_the_flank() -> None:
    insert = arc(count=401)
    turn = np.linspace(0.15, 0.55, 9)
    off = np.linspace(-0.01, 0.01, 9)
    x, h = 11.0 - (10.0 - off) * np.cos(turn), -1.0 + (10.0 - off) * np.sin(turn)
    assert off == pytest.approx(overlay.off_profile(insert, h, x, side=1), abs=1e-5)
    with pytest.raises(ValueError, match="it is not known"):
        overlay.off_profile(insert, np.array([6.0]), np.array([3.0]), side=1)


def test_the_insert_of_the_tests_is_a_profile() -> None:
    given = real_insert()
    read = measured_insert(given.heights, given.right, given.left)
    assert read.width(1.0) == pytest.approx(given.width(1.0))
