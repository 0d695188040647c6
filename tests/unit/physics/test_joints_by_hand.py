"""Interference joints against numbers worked out by hand, one place at a time; safety factors and refusals included."""

from __future__ import annotations

import math

import pytest

from setupcheck.physics import interference as fits

STEEL = {"hub_modulus": 200e3, "hub_poisson": 0.3, "shaft_modulus": 200e3, "shaft_poisson": 0.3}
SOLID = fits.Joint(diameter=50.0, hub_outside=100.0, **STEEL)
HOLLOW = fits.Joint(diameter=50.0, hub_outside=100.0, shaft_hole=25.0, **STEEL)


def test_every_limit_of_pressure_is_divided_by_its_safety() -> None:
    """Hub Q 0.5: 300 (1 - 1/4)/(sqrt 3 x 1.5); shaft solid 2 x 300/(sqrt 3 x 1.5), hollow Q 0.5 as the hub; brittle
    300 x 0.75/1.25/1.5."""
    root = math.sqrt(3.0)
    given = {"strength": 300.0, "safety": 1.5}
    assert fits.hub_pressure_limit(SOLID, **given) == pytest.approx(225.0 / root / 1.5)
    assert fits.hub_pressure_limit(SOLID, brittle=True, **given) == pytest.approx(120.0)
    assert fits.shaft_pressure_limit(SOLID, **given) == pytest.approx(400.0 / root)
    assert fits.shaft_pressure_limit(HOLLOW, **given) == pytest.approx(150.0 / root)


def test_the_weaker_part_limits_and_gives_its_name_and_criterion() -> None:
    soft = {"hub_safety": 1.0, "shaft_safety": 1.0}
    hub = fits.elastic_limit(SOLID, hub_strength=300.0, shaft_yield=300.0, hub_brittle=False, **soft)
    assert (hub.weaker, hub.criterion) == ("hub", fits.DUCTILE)
    assert hub.pressure == pytest.approx(225.0 / math.sqrt(3.0))
    # U = p D [(1.25/0.75 + 0.3) + (1 - 0.3)] / E
    assert hub.interference == pytest.approx(hub.pressure * 50.0 * (5.0 / 3.0 + 1.0) / 200e3)
    shaft = fits.elastic_limit(HOLLOW, hub_strength=300.0, shaft_yield=100.0, hub_brittle=True, **soft)
    assert (shaft.weaker, shaft.criterion) == ("shaft", fits.DUCTILE)
    brittle = fits.elastic_limit(HOLLOW, hub_strength=100.0, shaft_yield=300.0, hub_brittle=True, **soft)
    assert (brittle.weaker, brittle.criterion) == ("hub", fits.BRITTLE)


def test_stresses_hold_the_parts_in_balance() -> None:
    """A half ring is pulled by p D: the hoop stress over its wall adds up to that (Lamé, integrated by hand)."""
    found = fits.stresses(HOLLOW, pressure=60.0)
    assert found.radial == -60.0
    assert found.hub_bore_tangential == pytest.approx(60.0 * 1.25 / 0.75)
    assert found.hub_outside_tangential == pytest.approx(
        found.hub_bore_tangential - 60.0
    )  # hoop falls by p over the wall
    assert found.shaft_seat_tangential == pytest.approx(-100.0)
    assert found.shaft_hole_tangential == pytest.approx(-160.0)
    assert fits.stresses(SOLID, pressure=60.0).shaft_hole_tangential is None
    assert fits.stresses(SOLID, pressure=60.0).shaft_seat_tangential == pytest.approx(-60.0)


def test_forces_by_hand() -> None:
    area = math.pi * 50.0 * 40.0
    given = {"friction": 0.12, "diameter": 50.0, "length": 40.0}
    assert fits.axial_capacity(80.0, slip_factor=1.2, **given) == pytest.approx(0.12 * 80.0 * area / 1.2)
    assert fits.press_force(80.0, **given) == pytest.approx(0.12 * 80.0 * area)


def test_growth_and_closing_are_strains_times_diameters() -> None:
    """Outside: hoop stress alone over E. Bore: K of Lamé. Hole: -2 p/(1 - Q^2) over E."""
    found = fits.stresses(HOLLOW, pressure=60.0)
    assert fits.hub_growth(HOLLOW, pressure=60.0, at_diameter=100.0) == pytest.approx(
        100.0 * found.hub_outside_tangential / 200e3
    )
    assert fits.hub_growth(HOLLOW, pressure=60.0, at_diameter=130.0) == pytest.approx(
        fits.hub_growth(HOLLOW, pressure=60.0, at_diameter=100.0)
    )
    bore = 50.0 * (found.hub_bore_tangential + 0.3 * 60.0) / 200e3
    assert fits.hub_growth(HOLLOW, pressure=60.0, at_diameter=50.0) == pytest.approx(bore)
    assert fits.hole_closing(HOLLOW, pressure=60.0) == pytest.approx(25.0 * 160.0 / 200e3)
    assert fits.hole_closing(SOLID, pressure=60.0) is None


@pytest.mark.parametrize(
    "bad", [{"factor": 1.05}, {"factor": -0.05}, {"hub_roughness": -1e-6}, {"shaft_roughness": -1e-6}]
)
def test_smoothing_refuses_what_is_none(bad: dict[str, float]) -> None:
    given = {"hub_roughness": 0.006, "shaft_roughness": 0.004, "factor": 1.0}
    assert fits.smoothing_loss(**given) == pytest.approx(0.010)
    assert fits.smoothing_loss(**given | {"factor": 0.0}) == 0.0
    with pytest.raises(ValueError, match="roughness"):
        fits.smoothing_loss(**given | bad)


@pytest.mark.parametrize(
    "bad",
    [{"friction": -0.01}, {"length": -0.01}, {"slip_factor": 0.99}],
)
def test_joints_refuse_what_cannot_hold(bad: dict[str, float]) -> None:
    given = {"friction": 0.12, "diameter": 50.0, "length": 40.0, "slip_factor": 1.0} | bad
    with pytest.raises(ValueError, match="friction and length"):
        fits.axial_capacity(10.0, **given)


@pytest.mark.parametrize(
    "bad",
    [
        {"shaft_hole": 50.0},
        {"shaft_hole": -1.0},
        {"hub_outside": 50.0},
        {"hub_outside": math.inf},
        {"hub_poisson": 0.5},
        {"shaft_poisson": -0.01},
        {"hub_modulus": 0.0},
        {"shaft_modulus": math.inf},
        {"shaft_modulus": math.nan},
    ],
)
def test_what_is_no_joint_is_refused(bad: dict[str, float]) -> None:
    with pytest.raises(ValueError, match=r"grow in this order|no metal"):
        fits.Joint(**{"diameter": 50.0, "hub_outside": 100.0, **STEEL} | bad)


@pytest.mark.parametrize(("strength", "safety"), [(0.0, 1.0), (100.0, 0.99), (math.nan, 1.0), (100.0, math.nan)])
def test_no_strength_and_no_safety_below_one(strength: float, safety: float) -> None:
    for limit in (fits.hub_pressure_limit, fits.shaft_pressure_limit):
        with pytest.raises(ValueError, match="strength must be above 0"):
            limit(SOLID, strength=strength, safety=safety)


def test_what_does_not_swell_sideways_is_a_joint_too() -> None:
    """Solid shaft in a thick hub of twice its diameter, Poisson's ratio 0: K = 5/3 + 1 on one modulus."""
    plain = fits.Joint(diameter=50.0, hub_outside=100.0, **STEEL | {"hub_poisson": 0.0, "shaft_poisson": 0.0})
    assert fits.joint_pressure(plain, interference=0.05) == pytest.approx(0.05 / 50.0 * 200e3 / (5.0 / 3.0 + 1.0))


def test_nothing_presses_where_nothing_interferes() -> None:
    assert fits.joint_pressure(SOLID, interference=-0.01) == 0.0
    assert fits.joint_pressure(SOLID, interference=0.05) == pytest.approx(0.05 / 50.0 * 200e3 / (5.0 / 3.0 + 1.0))


def test_small_joints_and_bright_surfaces_are_joints_too() -> None:
    tiny = {"friction": 0.12, "diameter": 0.5, "length": 0.5, "slip_factor": 1.0}
    area = math.pi * 0.25
    assert fits.axial_capacity(10.0, **tiny) == pytest.approx(1.2 * area)
    assert (
        fits.axial_capacity(10.0, **tiny | {"length": 0.0})
        == fits.axial_capacity(10.0, **tiny | {"friction": 0.0})
        == 0.0
    )
    assert fits.smoothing_loss(hub_roughness=0.0, shaft_roughness=0.0) == 0.0
    assert fits.hub_pressure_limit(SOLID, strength=0.5, safety=1.0) == pytest.approx(0.375 / math.sqrt(3.0))


def test_where_both_parts_are_alike_weak_the_hub_is_named() -> None:
    """Hub and hollow shaft of the same strength and the same ratio of 1/2: both end at 300 x 0.75 / sqrt 3."""
    soft = {"hub_safety": 1.0, "shaft_safety": 1.0}
    given = {"strength": 300.0, "safety": 1.0}
    assert fits.hub_pressure_limit(HOLLOW, **given) == fits.shaft_pressure_limit(HOLLOW, **given)
    alike = fits.elastic_limit(HOLLOW, hub_strength=300.0, shaft_yield=300.0, hub_brittle=False, **soft)
    assert alike.weaker == "hub"
    brittle = fits.hub_pressure_limit(HOLLOW, brittle=True, **given)  # 300 x 0.75 / 1.25 = 180
    even = fits.elastic_limit(
        HOLLOW, hub_strength=300.0, shaft_yield=brittle * math.sqrt(3.0) / 0.75, hub_brittle=True, **soft
    )
    assert even.pressure == pytest.approx(180.0)
