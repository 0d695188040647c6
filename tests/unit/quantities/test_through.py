"""Whether a carried hub has one temperature throughout, and what happens to its figures where it has not."""

from __future__ import annotations

import pytest

from setupcheck.physics.heating import LUMPED_BELOW, biot_number, heat_loss
from setupcheck.quantities.book import Open
from setupcheck.quantities.material_classes import ANY_METAL, classes

from .joint_text import answer, changed, finding, number
from .test_joint_heat import RING
from .test_stuff import OWN, ring_of

LISTED = 52.0  # W/mK of CuSn12-C, as rules/data/materials.yaml has it


def expected(conductivity: float, *, planned: float = 185.0, room: float = 20.0) -> float:
    film = heat_loss(RING, temperature=planned, air=room) / RING.surface / (planned - room)
    volume, surface = RING.heat_capacity / (RING.density * RING.specific_heat), RING.surface
    return film * volume / surface / conductivity


def test_the_number_of_a_bronze_hub_is_far_below_the_bound() -> None:
    found = number(changed(), "heat.biot")
    assert expected(LISTED) == pytest.approx(found)
    assert 0.001 < found < 0.005


def test_a_stated_conductivity_takes_the_place_of_the_listed_one() -> None:
    assert expected(20.0) == pytest.approx(number(ring_of(conductivity="20 W/mK"), "heat.biot"))


def test_an_unlisted_material_takes_its_own_or_the_least_of_its_class_or_of_any_metal() -> None:
    for material, least in (
        ("CuSn10-C", classes()["tin-bronze"].conductivity.low),
        ("bronze", min(classes()[c].conductivity.low for c in ("tin-bronze", "copper-nickel"))),
        ("unobtainium", classes()[ANY_METAL].conductivity.low),
    ):
        assert expected(least) == pytest.approx(number(ring_of(material=material, **OWN), "heat.biot"))
        own = ring_of(material=material, conductivity="33 W/mK", **OWN)
        assert expected(33.0) == pytest.approx(number(own, "heat.biot"))


def test_from_a_tenth_on_the_loss_is_not_known_and_the_heat_is_not_judged() -> None:
    limit = expected(1.0) / LUMPED_BELOW  # W/mK that give a tenth
    inside, outside = ring_of(conductivity=f"{limit * 1.001!r} W/mK"), ring_of(conductivity=f"{limit * 0.999!r} W/mK")
    assert number(inside, "heat.biot") < LUMPED_BELOW
    assert number(inside, "heat.carry_loss") == pytest.approx(number(changed(), "heat.carry_loss"))
    assert "pass" == finding(inside, "HEAT-001").verdict
    for name in ("heat.biot", "heat.carry_loss", "heat.carry_loss_bright", "heat.at_shaft", "heat.carry_allowed"):
        found = answer(outside, name)
        assert isinstance(found, Open)
        assert found.because == (
            "the hub cools from the outside in (Biot number 0.1001): one temperature for all of it holds below 0.1 only, so "
            "what it loses or gains on the way is not known"
        )
    judged = finding(outside, "HEAT-001")
    assert "open" == judged.verdict
    assert "Biot number 0.1001" in judged.message


@pytest.mark.parametrize("hub", ["25 degC", "25.5 degC", "24.5 degC"])
def test_a_hub_as_warm_as_the_room_has_a_number_too(hub: str) -> None:
    found = number(changed(("hub: 190 degC", f"hub: {hub}")), "heat.biot")  # 5 degC is the error of the oven
    assert expected(LISTED, planned=21.0) == pytest.approx(found)
    assert 0.0 == number(changed(("hub: 190 degC", "hub: 24 degC")), "heat.carry_loss")


def test_a_pressed_hub_and_one_without_a_planned_heat_have_none() -> None:
    assert answer(changed(("by: shrink", "by: press")), "heat.biot") is None
    found = answer(changed(("hub: 190 degC, ", "")), "heat.biot")
    assert isinstance(found, Open)
    assert ("setups.10.join.heat.hub",) == found.missing


@pytest.mark.parametrize(("film", "depth", "conductivity"), [(-1.0, 5.0, 50.0), (10.0, 0.0, 50.0), (10.0, 5.0, 0.0)])
def test_what_is_no_body_has_no_number(film: float, depth: float, conductivity: float) -> None:
    with pytest.raises(ValueError, match="must"):
        biot_number(film, depth=depth, conductivity=conductivity)
