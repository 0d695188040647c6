"""Profile of an insert: widths, angles, room at the tip, hollow; inserts of the exact gap and arcs of known radius."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.worm import insert_profile as profile
from setupcheck.worm.gap_insert import envelope_insert, mid_plane_insert, sections
from setupcheck.worm.insert import insert_widths
from setupcheck.worm.plunge_gap import Insert, measured_insert
from tests.unit.worm.wheels import SIZES, blank_of, cut_of, hollow_where_contact_begins, pair_of

INVOLUTE_CASES = [(1, 20.0, 29.75, 9.79), (1, 15.0, 35.0, 3.28), (3, 20.0, 17.5, 18.70), (3, 15.0, 19.4, 11.67)]
"""Case, pressure angle, cutter radius, r2 sin alpha - m/sin alpha."""


def arc(radius: float = 10.0, *, count: int = 51, scatter: float = 0.0, tall: float = 5.0, low: float = -1.0) -> Insert:
    """Both flanks a hollow arc about a centre at height `low`, outside the insert."""
    h = np.linspace(0.0, tall, count)
    noise = np.random.default_rng(3).normal(0.0, 1.0, (2, count)) * scatter
    width = radius + 1.0 - np.sqrt(radius**2 - (h - low) ** 2)
    return Insert(h, width + noise[0], width + noise[1])


def wedge(half_angle: float = 20.0, *, tip: float = 1.1) -> Insert:
    h = np.linspace(0.0, 6.0, 25)
    return measured_insert(h, tip + math.tan(math.radians(half_angle)) * h)


@pytest.mark.parametrize(("case", "alpha", "radius", "_closed"), INVOLUTE_CASES)
def test_the_mid_plane_insert_is_the_closed_form_one(case: int, alpha: float, radius: float, _closed: float) -> None:
    starts, m, d1, teeth, _ = SIZES[case]
    cut = cut_of(case, radius)
    pair = pair_of(case, alpha=alpha)
    insert = mid_plane_insert(sections(pair, blank_of(case)), cut)
    heights = [0.0, 0.2 * m, 1.2 * m, 2.2 * m]
    expected = insert_widths(
        heights,
        axial_module=m,
        wheel_teeth=teeth,
        centre_distance=pair.centre_distance,
        worm_tip_diameter=d1 + 2.0 * m,
        clearance=cut.clearance,
        pressure_angle=math.radians(alpha),
        gap_arc=math.pi * m / 2.0,
        tilt=cut.tilt,
        cutter_radius=radius,
    )
    assert [profile.width_at(insert, h) for h in heights] == pytest.approx(expected, abs=1e-3)
    assert starts == 1


def test_the_envelope_is_as_wide_as_an_independent_sweep_gave() -> None:
    for case, alpha, radius, widths in (
        (1, 20.0, 29.75, (2.165, 2.401, 3.946, 6.590)),
        (3, 20.0, 17.5, (1.155, 1.338, 2.359, 3.675)),
        (3, 15.0, 19.4, (1.544, 1.660, 2.357, 3.403)),
    ):
        insert = envelope_insert(sections(pair_of(case, alpha=alpha), blank_of(case)), cut_of(case, radius))
        m = SIZES[case][1]
        got = [profile.width_at(insert, k * m) for k in (0.0, 0.2, 1.2, 2.2)]
        assert got == pytest.approx(widths, abs=0.002)


@pytest.mark.parametrize(("case", "alpha", "radius", "closed"), INVOLUTE_CASES)
def test_the_hollow_of_a_mid_plane_insert_is_that_of_its_involute(
    case: int, alpha: float, radius: float, closed: float
) -> None:
    m, teeth = SIZES[case][1], SIZES[case][3]
    formula = hollow_where_contact_begins(m * teeth / 2.0, reach=m, pressure_angle=math.radians(alpha))
    assert closed == pytest.approx(formula, abs=0.005)
    pair, cut = pair_of(case, alpha=alpha), cut_of(case, radius)
    insert = mid_plane_insert(sections(pair, blank_of(case)), cut)
    start = profile.contact_begins(pair, cut)
    found = profile.smallest_hollow(insert, side=1, live_from=start)
    on_cutter = formula / math.cos(cut.tilt)
    assert on_cutter == pytest.approx(found.radius, rel=0.03)
    assert start == pytest.approx(found.height, abs=0.05)
    assert found.at_least <= found.radius
    # without knowing where contact begins, windows reach across the bend and the radius comes out too large
    assert profile.smallest_hollow(insert, side=1).radius > found.radius


def test_an_exact_involute_gives_its_radius_within_a_thousandth() -> None:
    base, first, step = 46.985, 9.79, 0.02
    t = np.linspace(first / base, 0.42, int((0.42 - first / base) / (step / 20.0)))
    x, y = np.sin(t) - t * np.cos(t), np.cos(t) + t * np.sin(t)  # hollow seen from the gap
    lean = 0.05
    across = base * (x * math.cos(lean) + y * math.sin(lean))
    up = base * (y * math.cos(lean) - x * math.sin(lean))
    insert = measured_insert(up - up[0], across - across[0] + 1.0)
    assert 9.79 == pytest.approx(profile.smallest_hollow(insert, side=1).radius, rel=1e-3)


@pytest.mark.parametrize("scatter", [0.0, 0.0005, 0.002, 0.004])
def test_scatter_of_the_points_does_not_hide_the_radius(scatter: float) -> None:
    found = profile.smallest_hollow(arc(scatter=scatter, count=101), side=-1)
    assert 10.0 == pytest.approx(found.radius, rel=0.12)
    assert found.at_least <= found.radius
    neighbours = np.diff(arc(scatter=scatter, count=101).right, 2) / 0.05**2
    if scatter > 0.001:
        assert neighbours.max() > 0.5  # from three neighbours the smallest radius would be 2 mm


def test_a_straight_or_round_flank_has_no_hollow() -> None:
    assert math.inf == profile.smallest_hollow(wedge(), side=1).radius
    h = np.linspace(0.0, 5.0, 51)
    bulging = measured_insert(h, 1.0 + np.sqrt(100.0 - (h - 6.0) ** 2) - 8.0)
    assert math.inf == profile.smallest_hollow(bulging, side=1).radius


@given(st.floats(5.0, 40.0), st.integers(15, 200), st.floats(-4.0, -0.2))
def test_the_hollow_of_any_arc_is_its_radius(radius: float, count: int, low: float) -> None:
    tall = min(5.0, 0.6 * radius)
    found = profile.smallest_hollow(arc(radius, count=count, tall=tall, low=max(low, 0.9 * (tall - radius))), side=1)
    assert radius == pytest.approx(found.radius, rel=0.1)


def test_the_width_of_an_arc_is_that_of_its_circle() -> None:
    insert = arc(count=201)
    assert profile.width_at(insert, 0.0) == pytest.approx(2.0 * insert.right[0])
    for height in (0.7, 3.3, 5.0):
        at = np.interp(height, insert.heights, insert.right)
        assert 2.0 * at == pytest.approx(profile.width_at(insert, height), abs=2e-4)


def test_the_angle_of_an_arc_is_that_of_its_radius() -> None:
    insert = arc(count=201)
    for height in (0.0, 1.5, 4.9):
        expected = math.asin((height + 1.0) / 10.0)
        assert expected == pytest.approx(profile.flank_angle(insert, height, side=1), abs=2e-4)
        assert 2.0 * expected == pytest.approx(profile.included_angle(insert, height), abs=4e-4)


def test_an_unlike_pair_of_flanks_adds_both_angles() -> None:
    h = np.linspace(0.0, 6.0, 25)
    insert = measured_insert(h, 1.0 + 0.3 * h, 1.2 + 0.4 * h)
    assert math.atan(0.3) + math.atan(0.4) == pytest.approx(profile.included_angle(insert, 3.0))
    assert math.atan(0.4) == pytest.approx(profile.flank_angle(insert, 3.0, side=-1))


@given(st.floats(5.0, 35.0), st.floats(0.05, 1.0))
def test_the_largest_corner_touches_tip_and_flank_below_the_clearance(half_angle: float, clearance: float) -> None:
    radius = profile.largest_corner(wedge(half_angle, tip=3.0), clearance)
    psi = math.radians(half_angle)
    touches_at = radius - radius * math.sin(psi)
    assert clearance == pytest.approx(touches_at)
    centre = 3.0 + radius * math.tan(psi) - radius / math.cos(psi)
    flank_distance = (3.0 + radius * math.tan(psi) - centre) * math.cos(psi)
    assert radius == pytest.approx(flank_distance)
    assert centre >= 0.0
    pointed = profile.largest_corner(wedge(half_angle, tip=0.01), clearance)
    assert 0.01 * math.cos(psi) / (1.0 - math.sin(psi)) == pytest.approx(pointed)


@pytest.mark.parametrize(
    ("heights", "widths", "says"),
    [
        ([0.0, 1.0, 2.0, 3.0], [1.0, 1.3, 1.6, 1.9], "at least five points"),
        ([0.0, 1.0, 0.9, 2.0, 3.0, 4.0], [1.0, 1.3, 1.6, 1.9, 2.2, 2.5], "after 1 mm comes 0.9 mm: a loop, or points"),
        ([0.0, 0.5, 1.0, 1.5, 4.0], [1.0, 1.3, 1.6, 1.9, 2.2], "between 1.5 and 4 mm the flank has no points"),
        ([0.0, 0.5, 1.0, 1.5, 2.0], [1.0, 1.3, math.nan, 1.9, 2.2], "a height or width of the flank is missing"),
    ],
)
def test_points_that_are_no_profile_are_refused(heights: list[float], widths: list[float], says: str) -> None:
    with pytest.raises(ValueError, match=says):
        profile.bends(np.array(heights), np.array(widths))


def test_what_the_profile_does_not_reach_is_refused() -> None:
    with pytest.raises(ValueError, match=r"goes from 0 to 5 mm above its tip: at 5.1 mm it is not known"):
        profile.width_at(arc(), 5.1)
    with pytest.raises(ValueError, match=r"only 2 points of the insert stand between 4.85 and inf mm: five"):
        profile.smallest_hollow(arc(), side=1, live_from=4.85)
    with pytest.raises(ValueError, match="clearance must not be below zero"):
        profile.largest_corner(wedge(), -0.1)
