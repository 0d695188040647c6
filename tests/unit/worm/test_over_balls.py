"""A worm wheel over balls against a search point by point on the exact gap, and why it takes balls and not pins."""

from __future__ import annotations

import math

import pytest
from scipy.optimize import brentq, minimize

from setupcheck.worm.geometry import contact_reach
from setupcheck.worm.over_balls import GapOverBalls, OverBalls, best_ball, gap_over_balls, over_balls

from .exact_gap import Pair

ALPHA = math.radians(20.0)
PAIRS = [
    Pair(1, 2.5, 30.0, 40, ALPHA, 60.0, math.atan(2.5 / 30.0)),
    Pair(1, 2.5, 30.0, 40, math.radians(15.0), 60.0, math.atan(2.5 / 30.0)),
    Pair(2, 3.0, 36.0, 60, ALPHA, 72.0, math.atan(6.0 / 36.0)),
    Pair(1, 1.5, 22.0, 90, ALPHA, 44.0, math.atan(1.5 / 22.0), shift=0.3),
    Pair(3, 4.0, 40.0, 36, ALPHA, 80.0, math.atan(12.0 / 40.0)),
]


def gap_of(p: Pair) -> float:
    """Arc of the exact gap at the reference circle: the rack is as wide as the thread at r1, wider nearer the wheel."""
    return math.pi * p.module / 2.0 - 2.0 * p.shift * p.module * math.tan(p.pressure_angle)


def searched(p: Pair, ball: float) -> float:
    """Size over two balls: the height of the centre at which the nearest point of the flank is half a ball away."""

    def distance(height: float) -> float:
        def squared(v: tuple[float, float]) -> float:
            r, angle = p.contact(*v)
            return (r * math.sin(angle)) ** 2 + (r * math.cos(angle) - height) ** 2 + v[1] ** 2

        best = minimize(
            squared, [p.r2, 0.0], method="Nelder-Mead", options={"xatol": 1e-10, "fatol": 1e-16, "maxiter": 2000}
        )
        return math.sqrt(best.fun)

    low, high = p.r2 - 0.3 * p.module, p.r2 + 1.5 * p.module
    return 2.0 * float(brentq(lambda h: distance(h) - ball / 2.0, low, high, xtol=1e-9)) + ball


def ours(p: Pair, ball: float, gap: float | None = None) -> OverBalls:
    return over_balls(
        starts=p.starts,
        axial_module=p.module,
        teeth=p.teeth,
        pitch_diameter=2.0 * (p.a - p.r2),
        pressure_angle=p.pressure_angle,
        gap=gap_of(p) if gap is None else gap,
        ball=ball,
    )


def best(p: Pair) -> float:
    g = math.atan(p.starts * p.module / p.worm_diameter)
    return best_ball(wheel_diameter=2.0 * p.r2, pressure_angle=p.pressure_angle, lead_angle=g, gap=gap_of(p))


@pytest.mark.parametrize("p", PAIRS)
@pytest.mark.parametrize("share", [0.95, 1.1])
def test_the_size_over_balls_agrees_with_a_search(p: Pair, share: float) -> None:
    ball = round(share * best(p), 2)
    assert searched(p, ball) == pytest.approx(ours(p, ball).size, abs=1e-6)


@pytest.mark.parametrize("p", PAIRS)
def test_the_best_ball_touches_near_the_reference_circle(p: Pair) -> None:
    assert 2.0 * p.r2 == pytest.approx(ours(p, best(p)).contact_diameter, abs=0.03 * p.module * p.starts)


def test_a_wider_gap_lets_the_balls_sink_by_the_slope_of_the_flank() -> None:
    p = PAIRS[0]
    sunk = ours(p, best(p)).size - ours(p, best(p), gap_of(p) + 0.010).size
    assert 0.010 / math.tan(ALPHA + gap_of(p) / (2.0 * p.r2)) == pytest.approx(sunk, rel=0.02)


def test_an_odd_count_is_measured_across_a_tooth() -> None:
    even, odd = Pair(1, 2.5, 30.0, 40, ALPHA, 60.0, 0.0), Pair(1, 2.5, 30.0, 41, ALPHA, 60.0, 0.0)
    centres = 2.0 * math.cos(math.pi / 82.0)
    assert ours(odd, 4.2).size < ours(even, 4.2).size + 2.5
    seat = (ours(odd, 4.2).size - 4.2) / centres
    assert seat == pytest.approx((searched(odd, 4.2) - 4.2) / 2.0, abs=1e-6)


def test_a_straight_pin_would_ride_on_the_ends_of_the_gap() -> None:
    # the flank at the height of the pin's contact, in the mid-plane and 4 mm off it: the gap has closed by 0.2 mm and more
    p = PAIRS[0]
    left_and_right = [p.gap(p.r2, z) * p.r2 + p.gap(p.r2, -z) * p.r2 for z in (0.0, 4.0)]
    assert left_and_right[0] - left_and_right[1] > 0.2


@pytest.mark.parametrize(
    ("starts", "module", "d1", "teeth", "alpha", "face", "reach"),
    [
        (1, 2.5, 30.0, 40, 20.0, 16.0, 10.4),
        (1, 2.5, 30.0, 40, 15.0, 16.0, 12.4),
        (2, 3.0, 36.0, 60, 20.0, 20.0, 15.3),
        (2, 3.0, 36.0, 60, 15.0, 20.0, 18.8),
        (1, 1.5, 22.0, 90, 20.0, 11.0, 6.8),
        (1, 1.5, 22.0, 90, 15.0, 11.0, 8.6),
    ],
)
def test_the_reach_along_the_worm_is_that_of_an_earlier_program(
    starts: int, module: float, d1: float, teeth: int, alpha: float, face: float, reach: float
) -> None:
    # that program went by grids, which end a little inside: 2 % are allowed
    found = contact_reach(
        starts=starts,
        axial_module=module,
        pitch_diameter=d1,
        tip_diameter=d1 + 2.0 * module,
        wheel_diameter=module * teeth,
        throat_radius=d1 / 2.0 - module,
        outside_diameter=module * (teeth + 3.0),
        pressure_angle=math.radians(alpha),
        face_width=face,
    )
    assert reach <= found + 0.05
    assert reach == pytest.approx(found, rel=0.02)


def inverse(p: Pair, ball: float, size: float) -> GapOverBalls:
    return gap_over_balls(
        size=size,
        starts=p.starts,
        axial_module=p.module,
        teeth=p.teeth,
        pitch_diameter=2.0 * (p.a - p.r2),
        pressure_angle=p.pressure_angle,
        ball=ball,
    )


ODD = Pair(1, 2.5, 30.0, 41, ALPHA, 60.0, 0.0)


@pytest.mark.parametrize("p", [*PAIRS, ODD])
@pytest.mark.parametrize("share", [0.9, 1.0, 1.15])
@pytest.mark.parametrize("wider", [-0.10, 0.0, 0.05, 0.20])
def test_a_size_over_balls_gives_back_the_gap_it_came_from(p: Pair, share: float, wider: float) -> None:
    ball, gap = round(share * best(p), 2), gap_of(p) + wider
    there = ours(p, ball, gap)
    back = inverse(p, ball, there.size)
    assert gap == pytest.approx(back.gap, abs=1e-9)
    assert there.contact_diameter == pytest.approx(back.contact_diameter, abs=1e-7)


@pytest.mark.parametrize("p", [*PAIRS, ODD])
@pytest.mark.parametrize("share", [0.9, 1.15])
def test_the_derivative_of_the_gap_is_that_of_a_small_step(p: Pair, share: float) -> None:
    ball = round(share * best(p), 2)
    size, step = ours(p, ball).size, 1e-3
    moved = (inverse(p, ball, size + step).gap - inverse(p, ball, size - step).gap) / (2.0 * step)
    assert moved == pytest.approx(inverse(p, ball, size).per_size, rel=1e-6)
    assert moved < 0.0  # a wider gap lets the ball sink


def test_the_gap_found_by_a_search_on_the_exact_flank_is_given_back() -> None:
    p = PAIRS[0]
    assert gap_of(p) == pytest.approx(inverse(p, 4.2, searched(p, 4.2)).gap, abs=1e-6)


@pytest.mark.parametrize("size", [5.0, 98.0, 114.0, 150.0])
def test_a_size_that_no_gap_gives_is_refused_with_both_sizes(size: float) -> None:
    with pytest.raises(ValueError, match=rf"^{size:g} mm over balls of 4\.2 mm fits no gap of 7\.85398 mm pitch$"):
        inverse(PAIRS[0], 4.2, size)


@pytest.mark.parametrize("key", ["size", "ball"])
def test_a_size_of_nothing_is_refused(key: str) -> None:
    with pytest.raises(ValueError, match=key):
        inverse(PAIRS[0], **({"ball": 4.2, "size": 105.6} | {key: 0.0}))
