"""Heat for fitting, warm joints, cooling in the air: laws, limits, scipy beside our own integration."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import optimize
from scipy.integrate import solve_ivp  # type: ignore[import-untyped, unused-ignore]

from setupcheck.physics.heating import (
    AIR_CONDUCTIVITY,
    BRIGHT,
    DULL,
    LUMPED_BELOW,
    Ring,
    carry_time,
    cooled_temperature,
    film_coefficient,
    heat_loss,
    holding_temperature,
    interference_at,
    joining_play,
    joining_temperature,
    loosening_temperature,
    lowest_hub_temperature,
    planned_heat,
    shoulder_gap,
)
from setupcheck.physics.interference import Joint, axial_capacity, interference_for, joint_pressure

RING = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=DULL)
SMALL = replace(RING, bore=30, outside=42, length=10)
BRONZE, STEEL = 18.4e-6, 12.0e-6

expansions = st.floats(8e-6, 25e-6)
diameters = st.floats(5, 500)


@given(st.floats(0, 0.3), st.floats(0.01, 0.2), diameters, expansions, expansions, st.floats(-196, 60))
def test_at_the_joining_temperature_exactly_the_play_is_there(
    u: float, play: float, d: float, hub: float, shaft: float, cold: float
) -> None:
    parts = {"diameter": d, "hub_expansion": hub, "shaft_expansion": shaft, "shaft_temperature": cold}
    hot = joining_temperature(u, play=play, **parts)
    assert -play == pytest.approx(interference_at(u, hub_temperature=hot, **parts), abs=1e-12)


def test_the_worked_ring_needs_114_degrees_in_any_room() -> None:
    """U 0.073 and 0.1 play on 100 mm of bronze: 94 K above 20 degC. A warm shaft asks more, a chilled one less."""
    parts = {"play": 0.1, "diameter": 100.0, "hub_expansion": BRONZE, "shaft_expansion": STEEL}
    assert 114.0 == pytest.approx(joining_temperature(0.073, shaft_temperature=20, **parts), abs=0.05)
    assert 114.0 + 10 * 12 / 18.4 == pytest.approx(joining_temperature(0.073, shaft_temperature=30, **parts), abs=0.05)
    assert 114.0 - 98 * 12 / 18.4 == pytest.approx(joining_temperature(0.073, shaft_temperature=-78, **parts), abs=0.05)


def test_the_worked_ring_is_loose_twelve_degrees_up_at_its_loosest_and_a_hundred_at_its_tightest() -> None:
    parts = {"diameter": 100.0, "hub_expansion": BRONZE, "shaft_expansion": STEEL}
    assert 32.1 == pytest.approx(loosening_temperature(0.00776, **parts), abs=0.05)
    assert 121.2 == pytest.approx(loosening_temperature(0.06476, **parts), abs=0.05)


def test_one_kelvin_takes_the_difference_of_expansions() -> None:
    """Bronze on steel: 0.64 um a kelvin on 100 mm."""
    warm = interference_at(
        0.05, diameter=100, hub_expansion=BRONZE, hub_temperature=21, shaft_expansion=STEEL, shaft_temperature=21
    )
    assert 0.05 - 0.00064 == pytest.approx(warm, abs=1e-9)


def test_a_cold_hub_on_a_warm_shaft_is_tighter() -> None:
    apart = interference_at(
        0.05, diameter=100, hub_expansion=BRONZE, hub_temperature=0, shaft_expansion=STEEL, shaft_temperature=40
    )
    assert 0.05 + 0.0368 + 0.024 == pytest.approx(apart)


def test_a_brass_bore_grows_as_its_diameter_does() -> None:
    """Brass bore 5.5325 in heated 180 K: 0.0194 in (computed for the notes), not that divided by pi."""
    grown = -interference_at(
        0.0, diameter=5.5325, hub_expansion=19.5e-6, hub_temperature=200, shaft_expansion=STEEL, shaft_temperature=20
    )
    assert 0.0194 == pytest.approx(grown, abs=5e-5)


def test_a_hub_that_does_not_outgrow_its_shaft_never_loosens_warm_and_is_never_tight_without_interference() -> None:
    assert math.inf == loosening_temperature(0.01, diameter=50, hub_expansion=STEEL, shaft_expansion=STEEL)
    assert math.inf == loosening_temperature(0.01, diameter=50, hub_expansion=STEEL, shaft_expansion=BRONZE)
    assert -math.inf == loosening_temperature(0.0, diameter=50, hub_expansion=STEEL, shaft_expansion=STEEL)
    assert -math.inf == holding_temperature(0.01, needed=0.02, diameter=50, hub_expansion=STEEL, shaft_expansion=STEEL)


def test_at_the_holding_temperature_the_torque_is_just_met_with_its_slip_factor() -> None:
    joint = Joint(
        diameter=100,
        hub_outside=140,
        shaft_hole=40,
        hub_modulus=103_400,
        hub_poisson=0.34,
        shaft_modulus=206_000,
        shaft_poisson=0.29,
    )
    grip = {"friction": 0.17, "diameter": 100.0, "length": 30.0, "slip_factor": 1.3}
    needed = interference_for(joint, pressure=1.3 * 250e3 / 50.0 / (0.17 * math.pi * 100.0 * 30.0))
    parts = {"diameter": 100.0, "hub_expansion": BRONZE, "shaft_expansion": STEEL}
    hot = holding_temperature(0.03, needed=needed, **parts)
    left = interference_at(0.03, hub_temperature=hot, shaft_temperature=hot, **parts)
    assert 250e3 == pytest.approx(axial_capacity(joint_pressure(joint, interference=left), **grip) * 50.0)
    assert 20 < hot < loosening_temperature(0.03, **parts)


def test_play_is_a_thousandth_of_the_diameter_and_not_under_three_hundredths() -> None:
    assert (0.2, 0.03, 0.03) == (joining_play(200), joining_play(30), joining_play(8))


def test_planned_heat_leaves_room_for_the_oven_and_the_carry_on_both_sides() -> None:
    band = planned_heat(needed=114, cap=200, oven_error=10, carry_loss=5)
    assert 114 == lowest_hub_temperature(band.low, oven_error=10, carry_loss=5)
    assert 200 == band.high + 10
    narrow = planned_heat(needed=190, cap=200, oven_error=10, carry_loss=5)
    assert narrow.low > narrow.high


def test_the_shoulder_gap_is_the_strain_of_the_fit_over_the_distance_to_the_bite() -> None:
    assert 0.0219 == pytest.approx(shoulder_gap(0.073, diameter=100, grip_distance=30))
    assert (
        0.0 == shoulder_gap(0.073, diameter=100, grip_distance=0) == shoulder_gap(-0.01, diameter=100, grip_distance=30)
    )
    with pytest.raises(ValueError, match="the distance not below"):
        shoulder_gap(0.05, diameter=100, grip_distance=-1)


@pytest.mark.parametrize(
    ("ring", "emissivity", "expected"),
    [
        (RING, DULL, {10: 149.1, 30: 147.4, 60: 144.9, 120: 140.1}),
        (RING, BRIGHT, {10: 149.5, 30: 148.5, 60: 146.9, 120: 143.9}),
        (SMALL, DULL, {10: 147.0, 30: 141.3, 60: 133.3}),
    ],
)
def test_the_worked_rings_cool_as_computed_for_the_notes(
    ring: Ring, emissivity: float, expected: dict[int, float]
) -> None:
    ring = replace(ring, emissivity=emissivity)
    for seconds, temperature in expected.items():
        assert temperature == pytest.approx(cooled_temperature(ring, start=150, seconds=seconds, air=20), abs=0.06)


def test_our_integration_agrees_with_scipy_and_time_with_temperature() -> None:
    capacity = RING.heat_capacity
    answer = solve_ivp(
        lambda _t, y: [-heat_loss(RING, temperature=float(y[0]), air=20) / capacity],
        (0, 900),
        [180.0],
        rtol=1e-10,
        atol=1e-10,
    )
    end = cooled_temperature(RING, start=180, seconds=900, air=20)
    assert answer.y[0][-1] == pytest.approx(end, abs=1e-4)
    assert 900 == pytest.approx(carry_time(RING, start=180, until=end, air=20), abs=0.01)


def test_with_a_given_film_and_no_radiation_the_ring_cools_exponentially() -> None:
    plain = replace(RING, emissivity=0.0)
    constant = plain.heat_capacity / (12.0 * plain.surface)
    assert 20 + 130 / math.e == pytest.approx(cooled_temperature(plain, start=150, seconds=constant, air=20, film=12))
    assert constant == pytest.approx(carry_time(plain, start=150, until=20 + 130 / math.e, air=20, film=12))


def test_mass_and_surface_of_the_worked_ring() -> None:
    """1.98 kg; outside, bore and two faces by hand."""
    assert 1.98 == pytest.approx(RING.heat_capacity / 377, abs=0.005)
    by_hand = math.pi * (0.14 * 0.03 + 0.10 * 0.03) + 2 * math.pi / 4 * (0.14**2 - 0.10**2)
    assert by_hand == pytest.approx(RING.surface)


def test_a_ring_never_cools_below_the_air_and_loses_nothing_in_no_time() -> None:
    assert math.inf == carry_time(RING, start=150, until=20, air=20)
    assert 0.0 == carry_time(RING, start=150, until=150, air=20)
    assert 150.0 == cooled_temperature(RING, start=150, seconds=0, air=20)
    assert 20.0 == pytest.approx(cooled_temperature(RING, start=150, seconds=40_000, air=20), abs=0.1)
    with pytest.raises(ValueError, match="below 0"):
        cooled_temperature(RING, start=150, seconds=-1, air=20)


def test_still_air_without_a_difference_only_conducts() -> None:
    """Nu = 0.36 at Ra = 0, finite: 0.36 k / D."""
    assert 0.36 * 0.0257 / 0.1 == pytest.approx(film_coefficient(surface=20, air=20, diameter=100), rel=0.02)


@pytest.mark.parametrize(
    "changed", [{"bore": 140.0}, {"length": 0.0}, {"density": math.nan}, {"emissivity": 1.1}], ids=str
)
def test_a_ring_that_is_none_is_refused(changed: dict[str, float]) -> None:
    with pytest.raises(ValueError, match="not those of a ring"):
        replace(RING, **changed)


def test_heating_without_expansion_is_refused() -> None:
    with pytest.raises(ValueError, match="expansion of the hub must be above 0"):
        joining_temperature(0.05, play=0.1, diameter=100, hub_expansion=0, shaft_expansion=STEEL, shaft_temperature=20)


def test_a_foil_cools_down_to_the_air_and_not_below() -> None:
    foil = Ring(bore=32, outside=104, length=2.6e-8, density=8700, specific_heat=376, emissivity=0.6)
    assert 20.0 <= cooled_temperature(foil, start=165, seconds=12, air=20) <= 165.0
    assert 20.0 <= cooled_temperature(foil, start=20, seconds=12, air=165) <= 165.0


def test_below_the_least_biot_number_a_plate_is_of_one_temperature_to_some_five_percent() -> None:
    """Slowest mode of a plate that cools on both sides: cos(z x/L) with z tan z = Bi, so its face is cos z of its middle."""
    z = optimize.brentq(lambda z: z * math.tan(z) - LUMPED_BELOW, 1e-6, 1.5)
    assert 0.045 < 1.0 - math.cos(z) < 0.05


def test_warm_air_conducts_as_its_power_law_says() -> None:
    """0.0241 W/mK at 0 degC, growing with T^0.81 (tables of air and their usual fit, from memory): 0.0297 at 80 degC."""
    assert AIR_CONDUCTIVITY == pytest.approx(0.0241 * ((273.15 + 80.0) / 273.15) ** 0.81, rel=0.02)


@pytest.mark.parametrize("field", ["density", "specific_heat", "length", "bore", "outside"])
def test_a_ring_of_nothing_is_refused(field: str) -> None:
    kept = {
        "bore": 50.0,
        "outside": 100.0,
        "length": 30.0,
        "density": 8000.0,
        "specific_heat": 400.0,
        "emissivity": DULL,
    }
    Ring(**kept)  # type: ignore[arg-type]
    for value in (0.0, -1.0, math.nan):
        if field == "bore" and value == 0.0:
            continue
        with pytest.raises(ValueError):
            Ring(**{**kept, field: value})  # type: ignore[arg-type]
