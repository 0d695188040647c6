"""Laws that hold for any joint and any ring, drawn at random but always the same draws.

Each law follows from the equations the functions name (Lamé, Coulomb, Hooke, heat balance); where it needs more than one line
the reason stands beside it.
"""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from setupcheck.physics import carrying, heating
from setupcheck.physics import interference as fits
from setupcheck.physics.interference import Joint

from .test_interference import JOINTS

drawn = settings(derandomize=True, deadline=None, database=None, max_examples=100)
fewer = settings(drawn, max_examples=40)

interferences = st.floats(1e-4, 0.5)
pressures = st.floats(0.1, 500)
factors = st.floats(1.001, 50)
expansions = st.floats(8e-6, 25e-6)
diameters = st.floats(5, 500)
RINGS = st.builds(
    lambda bore, wall, length, density, heat, emissivity: heating.Ring(
        bore=bore,
        outside=bore + 2.0 * wall,
        length=length,
        density=density,
        specific_heat=heat,
        emissivity=emissivity,
    ),
    st.floats(5, 300),
    st.floats(1, 100),
    st.floats(2, 200),
    st.floats(2600, 9000),
    st.floats(350, 950),
    st.floats(0, 1),
)


# -- pressure, growth, stress ---------------------------------------------------------------------------------------


@drawn
@given(JOINTS, interferences, factors)
def test_pressure_rises_with_the_interference_and_in_proportion(joint: Joint, u: float, more: float) -> None:
    low, high = (fits.joint_pressure(joint, interference=value) for value in (u, u * more))
    assert 0.0 < low < high
    assert more == pytest.approx(high / low, rel=1e-9)


@drawn
@given(JOINTS, pressures, factors, st.floats(0, 1), st.floats(0, 1))
def test_growth_is_in_proportion_to_the_pressure_and_falls_from_bore_to_rim(
    joint: Joint, pressure: float, more: float, inner: float, outer: float
) -> None:
    inner, outer = sorted((inner, outer))
    assume(outer - inner > 1e-3)
    wall = joint.hub_outside - joint.diameter
    near, far = (
        fits.hub_growth(joint, pressure=pressure, at_diameter=joint.diameter + share * wall) for share in (inner, outer)
    )
    assert near > far > 0.0
    assert near * more == pytest.approx(
        fits.hub_growth(joint, pressure=pressure * more, at_diameter=joint.diameter + inner * wall), rel=1e-9
    )


@drawn
@given(JOINTS, interferences)
def test_the_ledger_of_growth_closes(joint: Joint, u: float) -> None:
    """Bore out and seat in make the interference, and each by what its own wall does, which Lamé's displacement says:
    u_hub(r) = p/E Q^2/(1-Q^2) [(1-nu) r + (1+nu) R_o^2/r],  u_shaft(r) = -p/(E (1-Q^2)) [(1-nu) r + (1+nu) R_i^2/r]."""
    pressure = fits.joint_pressure(joint, interference=u)

    def shaft(d: float) -> float:
        bracket = (1.0 - joint.shaft_poisson) * d + (1.0 + joint.shaft_poisson) * joint.shaft_hole**2 / d
        return -pressure / joint.shaft_modulus / (1.0 - joint.shaft_ratio**2) * bracket

    bore = fits.hub_growth(joint, pressure=pressure, at_diameter=joint.diameter)
    assert u == pytest.approx(bore - shaft(joint.diameter), rel=1e-9)
    assert bore == pytest.approx(pressure * joint.diameter * joint.hub_compliance, rel=1e-9)
    closed = fits.hole_closing(joint, pressure=pressure)
    if closed is None:
        assert 0.0 == joint.shaft_hole
    else:
        assert closed == pytest.approx(-shaft(joint.shaft_hole), rel=1e-9)


@drawn
@given(JOINTS, interferences, st.floats(0.01, 20))
def test_a_joint_of_another_scale_has_the_same_pressure_and_torque_by_the_cube(
    joint: Joint, u: float, scale: float
) -> None:
    large = replace(
        joint,
        diameter=joint.diameter * scale,
        hub_outside=joint.hub_outside * scale,
        shaft_hole=joint.shaft_hole * scale,
    )
    small, big = fits.joint_pressure(joint, interference=u), fits.joint_pressure(large, interference=u * scale)
    assert small == pytest.approx(big, rel=1e-9)
    force = fits.axial_capacity(small, friction=0.1, diameter=joint.diameter, length=20, slip_factor=1.2)
    assert force * scale**2 == pytest.approx(
        fits.axial_capacity(big, friction=0.1, diameter=large.diameter, length=20 * scale, slip_factor=1.2), rel=1e-9
    )


@drawn
@given(JOINTS, interferences, st.floats(1.01, 3))
def test_more_wall_or_a_stiffer_metal_on_either_side_never_lowers_the_pressure(
    joint: Joint, u: float, more: float
) -> None:
    pressure = fits.joint_pressure(joint, interference=u)
    for stiffer in (
        replace(joint, hub_outside=joint.hub_outside * more),
        replace(joint, hub_modulus=joint.hub_modulus * more),
        replace(joint, shaft_modulus=joint.shaft_modulus * more),
        replace(joint, shaft_hole=joint.shaft_hole / more),
    ):
        assert pressure <= fits.joint_pressure(stiffer, interference=u)


@drawn
@given(JOINTS, st.floats(80, 1200), st.floats(1, 3))
def test_at_the_limit_of_the_hub_its_bore_has_the_greatest_shear_that_the_criterion_names(
    joint: Joint, strength: float, safety: float
) -> None:
    """(hoop + p) / 2 = R_e / (sqrt(3) S): the modified shear stress hypothesis, DIN 7190 (from memory)."""
    pressure = fits.hub_pressure_limit(joint, strength=strength, safety=safety)
    found = fits.stresses(joint, pressure=pressure)
    shear = (found.hub_bore_tangential - found.radial) / 2.0
    assert strength / math.sqrt(3.0) / safety == pytest.approx(shear, rel=1e-9)


# -- force and torque -----------------------------------------------------------------------------------------------


@drawn
@given(pressures, st.floats(0.02, 0.3), diameters, st.floats(2, 300), factors)
def test_force_goes_with_the_diameter(pressure: float, friction: float, d: float, length: float, more: float) -> None:
    grip = {"friction": friction, "length": length, "slip_factor": 1.2}
    small, large = (fits.axial_capacity(pressure, diameter=at, **grip) for at in (d, d * more))
    assert more * small == pytest.approx(large, rel=1e-9)


@drawn
@given(JOINTS, interferences, st.lists(st.floats(0.5, 60), min_size=1, max_size=6))
def test_slices_that_are_all_equal_carry_what_one_length_does(joint: Joint, u: float, lengths: list[float]) -> None:
    grip = {"friction": 0.12, "slip_factor": 1.2}
    whole = fits.axial_capacity(
        fits.joint_pressure(joint, interference=u), diameter=joint.diameter, length=math.fsum(lengths), **grip
    )
    parts = [fits.Slice(joint, length) for length in lengths]
    assert whole == pytest.approx(fits.sliced_axial_capacity(parts, interference=u, **grip), rel=1e-9)
    assert whole == pytest.approx(fits.sliced_axial_capacity(reversed(parts), interference=u, **grip), rel=1e-9)


# -- heat and cold --------------------------------------------------------------------------------------------------


@drawn
@given(st.floats(-0.2, 0.4), diameters, expansions, expansions, st.floats(20, 350), st.floats(-196, 20))
def test_what_heat_and_cold_open_together_is_the_sum_of_what_each_opens(
    u: float, d: float, hub: float, shaft: float, hot: float, cold: float
) -> None:
    def opened(hub_at: float, shaft_at: float) -> float:
        return u - heating.interference_at(
            u,
            diameter=d,
            hub_expansion=hub,
            hub_temperature=hub_at,
            shaft_expansion=shaft,
            shaft_temperature=shaft_at,
        )

    assert opened(hot, cold) == pytest.approx(opened(hot, 20) + opened(20, cold), abs=1e-12)
    assert opened(hot, 20) == pytest.approx(hub * d * (hot - 20), abs=1e-12)
    assert opened(20, cold) == pytest.approx(shaft * d * (20 - cold), abs=1e-12)


@drawn
@given(
    st.floats(0, 0.4),
    diameters,
    expansions,
    expansions,
    st.tuples(st.floats(-196, 60), st.floats(-196, 60)).filter(lambda pair: abs(pair[0] - pair[1]) > 0.01),
)
def test_the_heat_needed_falls_as_the_shaft_is_chilled_by_the_ratio_of_the_expansions(
    u: float, d: float, hub: float, shaft: float, ends: tuple[float, float]
) -> None:
    cold, warm = sorted(ends)
    parts = {"play": heating.joining_play(d), "diameter": d, "hub_expansion": hub, "shaft_expansion": shaft}
    chilled, plain = (heating.joining_temperature(u, shaft_temperature=t, **parts) for t in (cold, warm))
    assert chilled < plain
    assert (warm - cold) * shaft / hub == pytest.approx(plain - chilled, abs=1e-6)


@drawn
@given(st.floats(0.001, 0.4), st.floats(0, 0.4), diameters, expansions, expansions)
def test_at_its_holding_temperature_a_joint_has_what_it_needs_and_one_kelvin_on_less(
    u: float, needed: float, d: float, hub: float, shaft: float
) -> None:
    assume(hub - shaft > 1e-7)
    limit = heating.holding_temperature(u, needed=needed, diameter=d, hub_expansion=hub, shaft_expansion=shaft)

    def left(t: float) -> float:
        return heating.interference_at(
            u, diameter=d, hub_expansion=hub, hub_temperature=t, shaft_expansion=shaft, shaft_temperature=t
        )

    assert needed == pytest.approx(left(limit), abs=1e-9)
    assert left(limit + 1.0) < needed


@drawn
@given(st.floats(-1, 1), diameters, st.floats(0, 300), st.floats(0, 300))
def test_the_gap_at_the_shoulder_is_never_negative_and_grows_with_the_distance_to_the_bite(
    u: float, d: float, one: float, other: float
) -> None:
    near, far = (heating.shoulder_gap(u, diameter=d, grip_distance=x) for x in sorted((one, other)))
    assert 0.0 <= near <= far
    assert far <= abs(u) * max(one, other) / d


# -- in the air -----------------------------------------------------------------------------------------------------


@fewer
@given(RINGS, st.floats(80, 400), st.floats(0.05, 0.98), st.floats(5, 40))
def test_time_and_temperature_in_the_air_are_inverse_to_each_other(
    ring: heating.Ring, start: float, share: float, air: float
) -> None:
    until = air + share * (start - air)
    seconds = heating.carry_time(ring, start=start, until=until, air=air)
    assert until == pytest.approx(heating.cooled_temperature(ring, start=start, seconds=seconds, air=air), abs=1e-3)
    halfway = heating.cooled_temperature(ring, start=start, seconds=seconds / 2.0, air=air)
    assert seconds / 2.0 == pytest.approx(heating.carry_time(ring, start=start, until=halfway, air=air), rel=1e-4)


@fewer
@given(RINGS, st.floats(80, 400), st.floats(1, 600), st.floats(1, 600), st.floats(5, 40))
def test_a_carry_in_two_stages_is_the_carry_in_one(
    ring: heating.Ring, start: float, first: float, then: float, air: float
) -> None:
    stop = heating.cooled_temperature(ring, start=start, seconds=first, air=air)
    once = heating.cooled_temperature(ring, start=start, seconds=first + then, air=air)
    assert air - 1e-9 <= once <= stop <= start
    assert once == pytest.approx(heating.cooled_temperature(ring, start=stop, seconds=then, air=air), abs=1e-3)


@drawn
@given(RINGS, RINGS, st.floats(20, 400), st.floats(0.02, 0.9), st.floats(0.02, 0.9))
def test_time_over_the_shaft_adds_up_and_goes_with_the_gap(
    ring: heating.Ring, other: heating.Ring, apart: float, one: float, share: float
) -> None:
    shaft = replace(other, bore=0.0, outside=ring.bore, length=ring.length)
    lumps = 1.0 / ring.heat_capacity + 1.0 / shaft.heat_capacity
    for_a_kelvin = ring.bore * (18e-6 / ring.heat_capacity + 12e-6 / shaft.heat_capacity) / lumps
    whole = one * apart * for_a_kelvin
    first = share * whole

    def time(closes: float, kelvin: float, gap: float = 0.05) -> float:
        return carrying.time_to_close(ring, shaft, closes=closes, apart=kelvin, gap=gap, expansions=(18e-6, 12e-6))

    after = apart - first / for_a_kelvin
    assert time(whole, apart) == pytest.approx(time(first, apart) + time(whole - first, after), rel=1e-9)
    assert 2.0 * time(whole, apart) == pytest.approx(time(whole, apart, gap=0.1), rel=1e-9)
