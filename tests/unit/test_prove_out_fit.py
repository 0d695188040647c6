"""Dial readings over a ball in a few gaps: the fit against numpy, an exact circle, and circles through three points."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.division.prove_out import (
    angle_of,
    flank_shift,
    flank_stock,
    gap_at,
    gaps_to_cut,
    off_the_quarters,
    reduce,
)

RADIUS = 54.0
COUNTS = st.integers(5, 400)


def exact_reading(angle: float, centre: complex, radius: float = RADIUS) -> float:
    """How far out a circle off the axis stands along a ray, exactly: |p| with p on the ray and |p - centre| = radius."""
    along = (centre * complex(math.cos(angle), -math.sin(angle))).real
    return along + math.sqrt(radius**2 - abs(centre) ** 2 + along**2)


@given(COUNTS, st.floats(0.0, 0.05), st.floats(0.0, math.tau), st.data())
def test_an_exact_circle_off_its_axis_is_found_within_second_order(
    count: int, e: float, towards: float, data: st.DataObject
) -> None:
    centre = e * complex(math.cos(towards), math.sin(towards))
    gaps = data.draw(st.sampled_from([gaps_to_cut(count), tuple(range(1, count + 1))]))
    ring = reduce({gap: exact_reading(angle_of(gap, count), centre) for gap in gaps}, count)
    assert complex(ring.x, ring.y) == pytest.approx(centre, abs=2.0 * e * e / RADIUS + 1e-12)


@given(COUNTS, st.data())
def test_the_fit_is_that_of_numpy_with_its_covariance(count: int, data: st.DataObject) -> None:
    gaps = data.draw(st.lists(st.integers(1, count), min_size=4, max_size=9, unique=True))
    values = data.draw(st.lists(st.floats(-0.02, 0.02), min_size=len(gaps), max_size=len(gaps)))
    angles = np.array([2.0 * math.pi * (gap - 1) / count for gap in gaps])
    rows = np.column_stack([np.ones(len(gaps)), np.cos(angles), np.sin(angles)])
    if np.linalg.cond(rows) > 50.0:
        return
    theirs, _, _, _ = np.linalg.lstsq(rows, np.array(values), rcond=None)
    ring = reduce(dict(zip(gaps, values, strict=True)), count)
    assert (ring.mean, ring.x, ring.y) == pytest.approx(tuple(theirs), abs=1e-12)
    left = np.array(values) - rows @ theirs
    assert ring.misfit == pytest.approx(math.sqrt(left @ left / (len(gaps) - 3)), abs=1e-12)
    covariance = np.linalg.inv(rows.T @ rows)[1:, 1:]
    if ring.eccentricity > 1e-6:
        way = np.array([ring.x, ring.y]) / ring.eccentricity
        assert ring.along == pytest.approx(math.sqrt(way @ covariance @ way), rel=1e-6)
        square = np.array([-way[1], way[0]])
        assert ring.across == pytest.approx(math.sqrt(square @ covariance @ square), rel=1e-6)


def test_the_stated_uncertainty_is_what_many_noisy_rings_scatter_by() -> None:
    rng = np.random.default_rng(7)
    count, sigma, centre = 73, 0.001, 0.006 + 0.003j
    gaps = gaps_to_cut(count)
    true = np.array([exact_reading(angle_of(gap, count), centre) for gap in gaps])
    rings = [reduce(dict(zip(gaps, true + rng.normal(0.0, sigma, len(gaps)), strict=True)), count) for _ in range(4000)]
    one = reduce(dict(zip(gaps, true, strict=True)), count)
    sizes = np.array([ring.eccentricity for ring in rings])
    turns = np.angle([complex(ring.x, ring.y) / centre for ring in rings])
    assert np.std(sizes) == pytest.approx(sigma * one.along, rel=0.05)
    assert np.std(turns) == pytest.approx(sigma * one.across / one.eccentricity, rel=0.08)
    assert np.mean([ring.misfit**2 for ring in rings]) == pytest.approx(sigma**2, rel=0.08)


def test_three_gaps_give_the_circle_through_three_points() -> None:
    """Centre of the circle through three points on rays, by perpendicular bisectors: no least squares in it."""
    count, centre = 72, 0.009 - 0.004j
    gaps = (1, 25, 49)
    points = []
    for gap in gaps:
        angle = angle_of(gap, count)
        points.append(exact_reading(angle, centre) * complex(math.cos(angle), math.sin(angle)))
    (ax, ay), (bx, by), (cx, cy) = ((p.real, p.imag) for p in points)
    d = 2.0 * (ax * (by - cy) + bx * (cy - ay) + cx * (ay - by))
    a2, b2, c2 = (abs(p) ** 2 for p in points)
    through = complex(
        (a2 * (by - cy) + b2 * (cy - ay) + c2 * (ay - by)) / d, (a2 * (cx - bx) + b2 * (ax - cx) + c2 * (bx - ax)) / d
    )
    ring = reduce({gap: abs(p) for gap, p in zip(gaps, points, strict=True)}, count)
    assert complex(ring.x, ring.y) == pytest.approx(through, abs=3e-6)
    assert ring.misfit is None


def test_quarters_show_an_oval_and_a_bad_reading_as_half_their_closure() -> None:
    oval = {gap: 0.004 * math.cos(2.0 * angle_of(gap, 72)) for gap in (1, 19, 37, 55)}
    ring = reduce(oval, 72)
    assert ring.eccentricity == pytest.approx(0.0, abs=1e-12)
    r1, r2, r3, r4 = oval.values()
    assert ring.misfit == pytest.approx(abs(r1 - r2 + r3 - r4) / 2.0)
    assert reduce({1: 0.0, 19: 0.005, 37: 0.010, 55: 0.005}, 72).misfit == pytest.approx(0.0, abs=1e-12)


@pytest.mark.parametrize("common", [-0.3, 0.0, 2.5])
def test_what_is_common_to_all_gaps_drops_out(common: float) -> None:
    ring = reduce({1: common, 19: common + 0.006, 37: common + 0.011, 55: common + 0.004}, 72)
    assert ring.x == pytest.approx(-0.0055)
    assert ring.y == pytest.approx(0.001)


@given(COUNTS)
def test_gaps_stand_as_near_to_the_quarters_as_the_count_has_them(count: int) -> None:
    gaps = gaps_to_cut(count)
    assert len(set(gaps)) == 4
    for k, gap in enumerate(gaps):
        best = min(range(1, count + 1), key=lambda g: abs(angle_of(g, count) - k * math.pi / 2.0))
        assert abs(angle_of(gap, count) - k * math.pi / 2.0) == pytest.approx(
            abs(angle_of(best, count) - k * math.pi / 2.0)
        )
    assert off_the_quarters(count) <= math.pi / count + 1e-12
    assert (off_the_quarters(count) < 1e-12) == (count % 4 == 0)


@given(st.integers(3, 400), st.data())
def test_a_gap_and_its_angle_are_inverse(count: int, data: st.DataObject) -> None:
    gap = data.draw(st.integers(1, count))
    assert math.remainder(gap_at(angle_of(gap, count), count) - gap, count) == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize(
    ("readings", "says"),
    [
        ({1: 0.0, 37: 0.01}, "2 gaps were read"),
        ({1: 0.0, 19: 0.0, 73: 0.0}, "no gap 73"),
        ({0: 0.0, 19: 0.0, 37: 0.0}, "no gap 0"),
    ],
)
def test_readings_that_tell_no_circle_are_refused(readings: dict[int, float], says: str) -> None:
    with pytest.raises(ValueError, match=says):
        reduce(readings, 72)


def test_gaps_that_stand_all_one_way_are_refused() -> None:
    with pytest.raises(ValueError, match="too close together"):
        reduce({1: 0.0, 2: 0.001, 3: 0.0}, 400)


def test_a_moved_gap_needs_on_its_flank_what_a_search_over_all_directions_finds() -> None:
    """The old gap inside the new one: half-width at a height, both gaps straight-sided, moved by e any way."""
    alpha, e, rest = math.radians(20.0), 0.03, 0.4

    def left(direction: float) -> float:
        """Metal between old and new flank at one height, the smaller of both sides."""
        out, aside = e * math.cos(direction), e * math.sin(direction)
        return (rest - out) * math.tan(alpha) - abs(aside)

    least = min(left(k * math.tau / 3600.0) for k in range(3600))
    assert least == pytest.approx(flank_stock(rest, alpha) - flank_shift(e, alpha), abs=1e-6)
