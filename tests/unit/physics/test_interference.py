"""Laws of the interference equations, their limits, and Lamé's equation solved another way."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray
from scipy.integrate import solve_bvp  # type: ignore[import-untyped, unused-ignore]

from setupcheck.physics.interference import (
    BRITTLE,
    DUCTILE,
    Joint,
    Slice,
    axial_capacity,
    elastic_limit,
    hole_closing,
    hub_growth,
    hub_pressure_limit,
    interference_for,
    joint_pressure,
    press_force,
    shaft_pressure_limit,
    sliced_axial_capacity,
    smoothing_loss,
    stresses,
)

RING = Joint(
    diameter=100,
    hub_outside=140,
    shaft_hole=40,
    hub_modulus=103_400,
    hub_poisson=0.34,
    shaft_modulus=206_000,
    shaft_poisson=0.29,
)
"""Bronze ring on a steel centre, bore 100 H7, seat r6: worked by hand in the notes of this project."""
SOLID = replace(RING, shaft_hole=0)

JOINTS = st.builds(
    lambda d, hub, hole, ea, ei, na, ni: Joint(
        diameter=d,
        hub_outside=d * hub,
        shaft_hole=d * hole,
        hub_modulus=ea,
        hub_poisson=na,
        shaft_modulus=ei,
        shaft_poisson=ni,
    ),
    st.floats(5, 500),
    st.floats(1.05, 8),
    st.floats(0.05, 0.95) | st.just(0.0),
    st.floats(6e4, 2.2e5),
    st.floats(6e4, 2.2e5),
    st.floats(0.2, 0.36),
    st.floats(0.2, 0.36),
)


@pytest.mark.parametrize(
    ("interference", "pressure", "hoop", "growth", "closing"),
    [
        (0.00776, 2.021, 6.23, 5.70, 0.93),
        (0.06476, 16.863, 51.99, 47.57, 7.80),
        (0.073, 19.009, 58.61, 53.62, 8.79),
    ],
)
def test_the_worked_bronze_ring_comes_out_as_by_hand(
    interference: float, pressure: float, hoop: float, growth: float, closing: float
) -> None:
    found = joint_pressure(RING, interference=interference)
    assert pressure == pytest.approx(found, abs=5e-4)
    assert hoop == pytest.approx(stresses(RING, pressure=found).hub_bore_tangential, abs=0.005)
    assert growth == pytest.approx(hub_growth(RING, pressure=found, at_diameter=140) * 1000, abs=0.005)
    assert closing == pytest.approx((hole_closing(RING, pressure=found) or math.nan) * 1000, abs=0.005)


def test_the_worked_ring_with_its_root_circle_and_with_a_solid_centre() -> None:
    assert 17.716 == pytest.approx(joint_pressure(SOLID, interference=0.06476), abs=5e-4)
    toothed = replace(RING, hub_outside=130)
    pressure = joint_pressure(toothed, interference=0.06476)
    assert 13.991 == pytest.approx(pressure, abs=5e-4)
    assert 50.99 == pytest.approx(hub_growth(toothed, pressure=pressure, at_diameter=130) * 1000, abs=0.005)


def solved(joint: Joint, interference: float) -> tuple[float, float, float, float]:
    """Pressure, hoop at the hub's bore, growth of the outside, closing of the hole, from the radial equilibrium and Hooke's
    law of both parts as one boundary-value problem: unknown u and radial stress, radius scaled to 0 .. 1."""
    b, c = joint.diameter / 2, joint.hub_outside / 2
    a = joint.shaft_hole / 2 or b * 1e-3  # a solid shaft keeps a small core: u proportional to r there
    parts = ((b, c, joint.hub_modulus, joint.hub_poisson), (a, b, joint.shaft_modulus, joint.shaft_poisson))

    def slopes(x: NDArray[np.float64], y: NDArray[np.float64]) -> NDArray[np.float64]:
        rows = []
        for (inner, outer, modulus, poisson), u, radial in zip(parts, y[0::2] / 1e5, y[1::2], strict=True):
            r = inner + x * (outer - inner)
            hoop = modulus * u / r + poisson * radial
            rows += [(outer - inner) * (radial - poisson * hoop) / modulus * 1e5, (outer - inner) * (hoop - radial) / r]
        return np.array(rows)

    def ends(left: NDArray[np.float64], right: NDArray[np.float64]) -> NDArray[np.float64]:
        modulus, poisson = joint.shaft_modulus, joint.shaft_poisson
        core = left[3] if joint.shaft_hole else left[2] / 1e5 / a - (1 - poisson) / modulus * left[3]
        return np.array([right[1], left[1] - right[3], (left[0] - right[2]) / 1e5 - interference / 2, core])

    x = np.linspace(0, 1, 60)
    answer = solve_bvp(slopes, ends, x, np.ones((4, x.size)), tol=1e-7, max_nodes=40_000)
    assert answer.success, answer.message
    left, right = answer.sol(0.0), answer.sol(1.0)
    hoop = joint.hub_modulus * left[0] / 1e5 / b + joint.hub_poisson * left[1]
    return -left[1], hoop, 2 * right[0] / 1e5, -2 * left[2] / 1e5


@pytest.mark.parametrize(
    "joint",
    [
        RING,
        SOLID,
        replace(RING, hub_outside=104, shaft_hole=95),
        replace(RING, hub_modulus=206_000, shaft_modulus=70_000),
    ],
    ids=["hollow", "solid", "thin", "stiff hub"],
)
def test_lame_agrees_with_equilibrium_solved_numerically(joint: Joint) -> None:
    pressure, hoop, growth, closing = solved(joint, 0.08)
    ours = joint_pressure(joint, interference=0.08)
    assert pressure == pytest.approx(ours, rel=1e-4)
    assert hoop == pytest.approx(stresses(joint, pressure=ours).hub_bore_tangential, rel=1e-4)
    assert growth == pytest.approx(hub_growth(joint, pressure=ours, at_diameter=joint.hub_outside), rel=1e-4)
    if joint.shaft_hole:
        assert closing == pytest.approx(hole_closing(joint, pressure=ours), rel=1e-4)


@given(JOINTS, st.floats(1e-4, 0.5))
def test_hub_bore_opens_and_seat_closes_by_the_interference_together(joint: Joint, interference: float) -> None:
    pressure = joint_pressure(joint, interference=interference)
    opened = hub_growth(joint, pressure=pressure, at_diameter=joint.diameter)
    s = stresses(joint, pressure=pressure)
    closed = -joint.diameter * (s.shaft_seat_tangential - joint.shaft_poisson * s.radial) / joint.shaft_modulus
    assert interference == pytest.approx(opened + closed, rel=1e-9)
    assert interference == pytest.approx(interference_for(joint, pressure=pressure), rel=1e-12)


@given(JOINTS)
def test_hoop_stress_of_the_hub_carries_the_pressure_on_its_cut(joint: Joint) -> None:
    """Half the hub in balance: the hoop stress over the wall adds up to p times the bore radius (Lamé's own profile)."""
    s = stresses(joint, pressure=10.0)
    b, c = joint.diameter / 2, joint.hub_outside / 2
    mean, swing = (s.hub_bore_tangential + s.radial) / 2, (s.hub_bore_tangential - s.radial) / 2
    assert s.hub_outside_tangential == pytest.approx(mean + swing * (b / c) ** 2, rel=1e-9)
    assert 10.0 * b == pytest.approx(mean * (c - b) + swing * b * b * (1 / b - 1 / c), rel=1e-9)


def test_one_metal_on_a_solid_shaft_has_the_short_formula() -> None:
    joint = replace(SOLID, hub_modulus=206_000, hub_poisson=0.29)
    assert 206_000 * 0.05 * (1 - (100 / 140) ** 2) / 200 == pytest.approx(joint_pressure(joint, interference=0.05))


def test_a_thin_hub_is_a_membrane() -> None:
    joint = replace(SOLID, hub_outside=100.2, shaft_modulus=1e13)
    assert 103_400 * 0.0005 * 0.1 / 50 == pytest.approx(joint_pressure(joint, interference=0.05), rel=3e-3)


def test_a_pinhole_doubles_the_stress_beside_it_and_leaves_the_pressure() -> None:
    pinhole = replace(SOLID, shaft_hole=0.01)
    assert joint_pressure(SOLID, interference=0.05) == pytest.approx(
        joint_pressure(pinhole, interference=0.05), rel=1e-6
    )
    assert stresses(SOLID, pressure=20).shaft_hole_tangential is None
    assert -20 == stresses(SOLID, pressure=20).shaft_seat_tangential
    assert -40 == pytest.approx(stresses(pinhole, pressure=20).shaft_hole_tangential)
    assert hole_closing(SOLID, pressure=20) is None


def test_play_has_no_pressure_and_a_missing_number_stays_missing() -> None:
    assert 0.0 == joint_pressure(RING, interference=0.0) == joint_pressure(RING, interference=-0.01)
    assert math.isnan(joint_pressure(RING, interference=math.nan))


def test_teeth_ride_out_with_the_root_circle_and_the_growth_falls_outward() -> None:
    grown = [hub_growth(RING, pressure=15, at_diameter=d) for d in (100, 110, 125, 140)]
    assert grown == sorted(grown, reverse=True) and grown[0] > grown[-1]
    assert grown[-1] == hub_growth(RING, pressure=15, at_diameter=152)
    with pytest.raises(ValueError, match="99 mm lies inside the bore of 100 mm"):
        hub_growth(RING, pressure=15, at_diameter=99)


def test_the_ductile_limit_lies_above_von_mises_and_tresca_and_brittle_is_its_own() -> None:
    q = 100 / 140
    assert 48.6 == pytest.approx(hub_pressure_limit(RING, strength=172, safety=1), abs=0.05)
    assert 46.7 == pytest.approx(172 * (1 - q**2) / math.sqrt(3 + q**4), abs=0.05)  # von Mises, by hand
    assert 42.1 == pytest.approx(172 * (1 - q**2) / 2, abs=0.05)  # Tresca, by hand
    brittle = hub_pressure_limit(RING, strength=250, safety=2.5, brittle=True)
    assert 100.0 == pytest.approx(stresses(RING, pressure=brittle).hub_bore_tangential)


def test_the_elastic_limit_of_a_steel_hub_meets_the_plastic_branch() -> None:
    """Q 0.5, yield 300, E 206000, solid: p 129.90 at U/D 0.0016816, where the elastic-plastic formula begins (notes)."""
    joint = Joint(
        diameter=40, hub_outside=80, hub_modulus=206e3, hub_poisson=0.3, shaft_modulus=206e3, shaft_poisson=0.3
    )
    found = elastic_limit(joint, hub_strength=300, shaft_yield=300, hub_safety=1, shaft_safety=1, hub_brittle=False)
    assert ("hub", DUCTILE) == (found.weaker, found.criterion)
    assert 129.90 == pytest.approx(found.pressure, abs=0.01)
    assert 0.0016816 == pytest.approx(found.interference / 40, abs=1e-7)


def test_the_weaker_part_and_its_criterion_are_named() -> None:
    tube = replace(RING, hub_outside=300, shaft_hole=90)
    args = {"shaft_yield": 300.0, "hub_safety": 1.0, "shaft_safety": 1.0}
    assert "shaft" == elastic_limit(tube, hub_strength=300, hub_brittle=False, **args).weaker
    assert BRITTLE == elastic_limit(RING, hub_strength=100, hub_brittle=True, **args).criterion
    assert DUCTILE == elastic_limit(tube, hub_strength=250, hub_brittle=True, **args).criterion
    assert 300 * (1 - 0.81) / math.sqrt(3) / 1.2 == pytest.approx(shaft_pressure_limit(tube, strength=300, safety=1.2))
    assert 600 / math.sqrt(3) == pytest.approx(shaft_pressure_limit(SOLID, strength=300, safety=1))


def test_the_worked_torques_and_the_press_force() -> None:
    grip = {"friction": 0.17, "diameter": 100.0, "length": 30.0}
    loose, tight = (joint_pressure(RING, interference=u) for u in (0.00776, 0.06476))
    for pressure, worked, within in ((loose, 2.021, 3e-4), (tight, 16.863, 1e-4)):
        assert 0.17 * worked * math.pi * 100**2 * 30 / 2 == pytest.approx(
            axial_capacity(pressure, slip_factor=1, **grip) * 50.0, rel=within
        )
    assert 1350.7e3 / 1.5 == pytest.approx(
        axial_capacity(tight, slip_factor=1.5, **grip) * 50.0, rel=2e-4
    )  # worked 1350.7
    assert 0.17 * tight * math.pi * 3000 == pytest.approx(press_force(tight, **grip))


def test_smoothing_takes_four_fifths_of_both_roughnesses_unless_told_otherwise() -> None:
    assert 0.00824 == pytest.approx(smoothing_loss(hub_roughness=0.0063, shaft_roughness=0.004))
    assert 0.00412 == pytest.approx(smoothing_loss(hub_roughness=0.0063, shaft_roughness=0.004, factor=0.4))


def test_a_stepped_joint_of_equal_steps_is_the_plain_one() -> None:
    whole = axial_capacity(
        joint_pressure(RING, interference=0.05), friction=0.12, diameter=100, length=30, slip_factor=1.2
    )
    parts = [Slice(RING, 12), Slice(RING, 18)]
    assert whole == pytest.approx(sliced_axial_capacity(parts, interference=0.05, friction=0.12, slip_factor=1.2))
    weaker = [Slice(RING, 12), Slice(replace(RING, hub_outside=110), 18)]
    assert whole > sliced_axial_capacity(weaker, interference=0.05, friction=0.12, slip_factor=1.2)


@pytest.mark.parametrize(
    "changed",
    [
        {"shaft_hole": 100.0},
        {"shaft_hole": -1.0},
        {"hub_outside": 100.0},
        {"diameter": math.nan},
        {"hub_outside": math.inf},
        {"hub_modulus": 0.0},
        {"shaft_modulus": math.nan},
        {"hub_poisson": 0.5},
    ],
    ids=str,
)
def test_sizes_and_constants_that_are_no_joint_are_refused(changed: dict[str, float]) -> None:
    with pytest.raises(ValueError, match=r"do not grow in this order|is no metal"):
        replace(RING, **changed)


def test_factors_below_their_sense_are_refused() -> None:
    grip = {"friction": 0.1, "diameter": 50.0, "length": 20.0}
    with pytest.raises(ValueError, match="slip factor below 1"):
        axial_capacity(10, slip_factor=0.9, **grip)
    with pytest.raises(ValueError, match="safety factor at least 1"):
        hub_pressure_limit(RING, strength=200, safety=0.8)
    with pytest.raises(ValueError, match="strength must be above 0"):
        shaft_pressure_limit(RING, strength=0, safety=1)
    with pytest.raises(ValueError, match="between 0 and 1"):
        smoothing_loss(hub_roughness=0.004, shaft_roughness=0.004, factor=3)
