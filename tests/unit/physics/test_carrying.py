"""Hub and shaft on their way: laws, limits, and scipy beside our own search and our own two bodies."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import solve_ivp  # type: ignore[import-untyped, unused-ignore]

from setupcheck.physics.carrying import Body, opened, time_open, time_to_close
from setupcheck.physics.heating import (
    AIR_CONDUCTIVITY,
    BRIGHT,
    DULL,
    Ring,
    carry_time,
    cooled_temperature,
    film_coefficient,
    heat_loss,
    interference_at,
    joining_temperature,
)

HUB = Ring(bore=60, outside=110, length=30, density=8700, specific_heat=373, emissivity=DULL)
SEAT = Ring(bore=0, outside=60, length=30, density=7830, specific_heat=468, emissivity=DULL)
BRONZE, STEEL = 17.0e-6, 8.5e-6
STILL = Body(ring=None, start=20.0, expansion=STEEL)

temperatures = st.floats(-196.0, 20.0)


@given(st.floats(20.0, 300.0), temperatures, st.floats(8e-6, 25e-6), st.floats(8e-6, 25e-6), st.floats(5, 500))
def test_what_heat_and_cold_open_is_the_interference_they_take_away(
    hot: float, cold: float, hub: float, shaft: float, diameter: float
) -> None:
    bodies = Body(ring=None, start=hot, expansion=hub), Body(ring=None, start=cold, expansion=shaft)
    left = interference_at(
        0.0,
        diameter=diameter,
        hub_expansion=hub,
        hub_temperature=hot,
        shaft_expansion=shaft,
        shaft_temperature=cold,
    )
    assert -left == pytest.approx(opened(*bodies, diameter=diameter, seconds=0.0, air=20.0), abs=1e-12)


@given(st.floats(0.0, 0.1), temperatures)
def test_a_hub_at_the_joining_temperature_is_open_just_as_far_as_it_must(u: float, cold: float) -> None:
    parts = {"diameter": 60.0, "hub_expansion": BRONZE, "shaft_expansion": STEEL, "shaft_temperature": cold}
    hot = joining_temperature(u, play=0.06, **parts)
    bodies = Body(ring=None, start=hot, expansion=BRONZE), Body(ring=None, start=cold, expansion=STEEL)
    assert u + 0.06 == pytest.approx(opened(*bodies, diameter=60.0, seconds=0.0, air=20.0), abs=1e-12)


@pytest.mark.parametrize("emissivity", [BRIGHT, DULL])
def test_with_a_shaft_that_keeps_its_temperature_the_time_is_that_of_the_hub_alone(emissivity: float) -> None:
    ring = replace(HUB, emissivity=emissivity)
    hub = Body(ring=ring, start=180.0, expansion=BRONZE)
    time = time_open(hub, STILL, needed=BRONZE * 60.0 * 120.0, diameter=60.0, air=20.0)
    assert time == pytest.approx(carry_time(ring, start=180.0, until=140.0, air=20.0), rel=1e-4)


def test_a_chilled_shaft_warms_meanwhile_and_the_time_is_shorter() -> None:
    cold = Body(ring=SEAT, start=-70.0, expansion=STEEL)
    hub = Body(ring=HUB, start=120.0, expansion=BRONZE)
    stays = time_open(hub, replace(cold, ring=None), needed=0.12, diameter=60.0, air=20.0)
    warms = time_open(hub, cold, needed=0.12, diameter=60.0, air=20.0)
    assert 10.0 < warms < 0.9 * stays
    # at that moment both, followed by the fine integration, are open just so far
    hot = cooled_temperature(HUB, start=120.0, seconds=warms, air=20.0)
    shaft = cooled_temperature(SEAT, start=-70.0, seconds=warms, air=20.0)
    assert 0.12 == pytest.approx(60.0 * (BRONZE * (hot - 20.0) + STEEL * (20.0 - shaft)), rel=1e-5)


def test_by_cold_alone_the_shaft_decides() -> None:
    hub = Body(ring=None, start=20.0, expansion=BRONZE)
    shaft = Body(ring=SEAT, start=-190.0, expansion=STEEL)
    time = time_open(hub, shaft, needed=STEEL * 60.0 * 190.0, diameter=60.0, air=20.0)
    assert -170.0 == pytest.approx(cooled_temperature(SEAT, start=-190.0, seconds=time, air=20.0), abs=1e-3)


def test_what_is_never_open_enough_lasts_no_time_and_what_always_is_lasts_for_ever() -> None:
    hub = Body(ring=HUB, start=120.0, expansion=BRONZE)
    assert 0.0 == time_open(hub, STILL, needed=0.2, diameter=60.0, air=20.0)
    assert math.inf == time_open(hub, STILL, needed=-0.001, diameter=60.0, air=20.0)


@given(st.floats(0.01, 0.11), st.floats(0.005, 0.02))
def test_more_that_must_be_open_lasts_shorter(needed: float, more: float) -> None:
    hub, shaft = (
        Body(ring=HUB, start=150.0, expansion=BRONZE),
        Body(ring=SEAT, start=-70.0, expansion=STEEL),
    )
    long, short = (time_open(hub, shaft, needed=n, diameter=60.0, air=20.0) for n in (needed, needed + more))
    assert short < long


# -- a shaft that warms in the air, by the same law as a hub that cools


@pytest.mark.parametrize("start", [-35.0, -78.5, -196.0])
def test_a_chilled_seat_warms_as_scipy_says(start: float) -> None:
    capacity = SEAT.heat_capacity
    answer = solve_ivp(
        lambda _t, y: [-heat_loss(SEAT, temperature=float(y[0]), air=20.0) / capacity],
        (0, 600),
        [start],
        rtol=1e-10,
        atol=1e-10,
    )
    assert answer.y[0][-1] == pytest.approx(cooled_temperature(SEAT, start=start, seconds=600.0, air=20.0), abs=1e-3)
    coarse = cooled_temperature(SEAT, start=start, seconds=600.0, air=20.0, steps=24)
    assert answer.y[0][-1] == pytest.approx(coarse, abs=1e-3)


def test_the_film_on_a_shaft_from_liquid_nitrogen_agrees_with_tables_of_cold_air() -> None:
    """Air of 185 K by a textbook's table (from memory): k 0.0168, nu 6.6e-6, a 8.9e-6. Ra 4.2e7, Nu 43.7, h 12.2 W/m2K."""
    assert 12.2 == pytest.approx(film_coefficient(surface=-196.0, air=20.0, diameter=60.0), rel=0.05)


def test_what_a_seat_from_liquid_nitrogen_gains_in_ten_seconds_by_hand() -> None:
    """60 x 30 mm of steel, 311 J/K and 113 cm2: 216 K at 12.2 W/m2K and 250 W/m2 of radiation take 33 W, a kelvin in 10 s."""
    gained = cooled_temperature(SEAT, start=-196.0, seconds=10.0, air=20.0) + 196.0
    radiated = 0.6 * 5.67e-8 * (293.15**4 - 77.15**4)
    by_hand = 0.0113 * (12.2 * 216.0 + radiated) * 10.0 / 311.0
    assert by_hand == pytest.approx(gained, rel=0.05)


# -- over the shaft


def two_bodies(hub: Ring, shaft: Ring, hot: float, cold: float, *, gap: float, closes: float) -> float:
    """The same closing followed step by step: hub and shaft exchange heat through the gap."""
    conductance = AIR_CONDUCTIVITY * math.pi * hub.bore * hub.length / gap * 1e-3

    def rate(_t: float, y: list[float]) -> list[float]:
        q = conductance * (y[0] - y[1])
        return [-q / hub.heat_capacity, q / shaft.heat_capacity]

    def near(_t: float, y: list[float]) -> float:
        return hub.bore * (BRONZE * (hot - y[0]) + STEEL * (y[1] - cold)) - closes

    near.terminal = True  # type: ignore[attr-defined]
    answer = solve_ivp(rate, (0, 1e4), [hot, cold], events=near, rtol=1e-9, atol=1e-9)
    return float(answer.t_events[0][0])


@pytest.mark.parametrize(("hot", "cold"), [(150.0, 20.0), (113.0, -40.0), (20.0, -190.0)])
def test_the_time_over_the_shaft_is_that_of_two_bodies_followed_step_by_step(hot: float, cold: float) -> None:
    ours = time_to_close(HUB, SEAT, closes=0.04, apart=hot - cold, gap=0.03, expansions=(BRONZE, STEEL))
    assert ours == pytest.approx(two_bodies(HUB, SEAT, hot, cold, gap=0.03, closes=0.04), rel=1e-5)


def test_a_shaft_of_endless_mass_leaves_the_hub_to_cool_alone() -> None:
    """m c s / (k pi D L) = 132 s for 0.05 mm of air; 5 of 100 K are gone after 6.8 s (computed for the notes)."""
    ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=DULL)
    endless = replace(SEAT, density=SEAT.density * 1e9)

    def cooled_by(kelvin: float) -> float:
        closes = BRONZE * 100.0 * kelvin
        return time_to_close(ring, endless, closes=closes, apart=100.0, gap=0.05, expansions=(BRONZE, STEEL))

    assert 132 == pytest.approx(cooled_by(100.0 * (1.0 - 1.0 / math.e)), abs=0.5)
    assert 6.8 == pytest.approx(cooled_by(5.0), abs=0.05)


def test_a_thin_shaft_warms_and_closes_the_gap_sooner() -> None:
    thin = replace(SEAT, bore=50.0)
    thick, sooner = (
        time_to_close(HUB, s, closes=0.04, apart=130.0, gap=0.03, expansions=(BRONZE, STEEL)) for s in (SEAT, thin)
    )
    assert sooner < 0.6 * thick


def test_hub_and_shaft_that_meet_half_way_may_never_close() -> None:
    assert math.inf == time_to_close(HUB, SEAT, closes=0.5, apart=20.0, gap=0.03, expansions=(BRONZE, STEEL))
    assert 0.0 == time_to_close(HUB, SEAT, closes=0.0, apart=20.0, gap=0.03, expansions=(BRONZE, STEEL))
    with pytest.raises(ValueError, match="the gap must be above 0"):
        time_to_close(HUB, SEAT, closes=0.1, apart=20.0, gap=0.0, expansions=(BRONZE, STEEL))
