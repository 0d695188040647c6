"""Materials of parts: the certificate before the list, and a material that is not in the list only with all of it."""

from __future__ import annotations

import pytest

from setupcheck.physics.materials import Material
from setupcheck.quantities.book import Open
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.stuff import ALL_OF_IT, STATED

from .joint_text import answer, changed, finding, number, value

OWN = {
    "modulus": "105 GPa",
    "poisson": "0.33",
    "expansion": "18.2 um/m/K",
    "density": "8650",
    "specific_heat": "380",
    "heat_cap": "210 degC",
}


def ring_of(*, material: str = "CuSn12-C", **properties: str) -> str:
    """The job with these properties of the ring."""
    inside = ", ".join(f"{key}: {said}" for key, said in properties.items())
    named = f"    material: {material}\n" if material else ""
    return changed(("    material: CuSn12-C\n", f"{named}    properties: {{{inside}}}\n"))


def pair_of(text: str) -> Pair:
    found = value(text, "fit.pair")
    assert isinstance(found, Pair)
    return found


@pytest.mark.parametrize(
    ("key", "said", "fields", "stated"),
    [
        ("modulus", "105 GPa", ("modulus",), 105e3),
        ("poisson", "0.33", ("poisson",), 0.33),
        ("expansion", "18.2 um/m/K", ("heating", "cooling"), 18.2e-6),
        ("yield_strength", "170 MPa", ("yield_strength",), 170.0),
        ("tensile_strength", "300 MPa", ("tensile_strength",), 300.0),
        ("density", "8650", ("density",), 8650.0),
        ("specific_heat", "380", ("specific_heat",), 380.0),
        ("conductivity", "65 W/mK", ("conductivity",), 65.0),
        ("heat_cap", "180 degC", ("heat_cap",), 180.0),
    ],
)
def test_a_stated_property_takes_the_place_of_the_listed_one_and_of_no_other(
    key: str, said: str, fields: tuple[str, ...], stated: float
) -> None:
    listed, mine = pair_of(changed()).hub, pair_of(ring_of(**{key: said})).hub
    for name in Material.__dataclass_fields__:
        here, there = getattr(mine, name), getattr(listed, name)
        if name not in fields:
            assert here == there, name
        elif hasattr(here, "low"):
            assert (stated, stated, STATED) == (here.low, here.high, here.kind)
            assert there.low < there.high  # the list has a range there
        else:
            assert (stated, STATED) == (here.value, here.kind)
            assert stated != there.value


def test_the_shaft_of_the_same_job_keeps_its_own() -> None:
    assert pair_of(changed()).shaft == pair_of(ring_of(modulus="105 GPa")).shaft


def test_a_material_that_is_not_in_the_list_works_with_all_of_its_properties() -> None:
    text = ring_of(material="CuSn99", yield_strength="150 MPa", **OWN)
    found = pair_of(text).hub
    assert ("CuSn99", "copper-alloy", 105e3, 210.0) == (
        found.name,
        found.family,
        found.modulus.low,
        found.heat_cap.value,
    )
    assert ["pass"] * 3 == [finding(text, rule).verdict for rule in ("FIT-003", "FIT-004", "HEAT-001")]
    assert 210.0 == number(text, "heat.cap")


@pytest.mark.parametrize("key", ALL_OF_IT)
@pytest.mark.parametrize("material", ["CuSn99", ""], ids=["unlisted", "unnamed"])
def test_with_one_of_them_missing_exactly_that_one_is_named(key: str, material: str) -> None:
    found = answer(ring_of(material=material, **{k: v for k, v in OWN.items() if k != key}), "fit.pair")
    assert isinstance(found, Open)
    assert (f"parts.ring.properties.{key}",) == found.missing


def test_a_misspelt_material_offers_the_nearest_name() -> None:
    found = answer(changed(("CuSn12-C", "CuSn12-X")), "fit.pair")
    assert isinstance(found, Open)
    assert ("parts.ring.material",) == found.missing
    assert "CuSn12" in found.because


def test_without_a_strength_only_the_question_of_yielding_is_open() -> None:
    text = ring_of(material="CuSn99", **OWN)
    found = finding(text, "FIT-004")
    assert ("open", ("parts.ring.properties.yield_strength",)) == (found.verdict, found.missing)
    assert "pass" == finding(text, "FIT-003").verdict
    brittle = finding(ring_of(material="CuSn99", brittle="true", yield_strength="150 MPa", **OWN), "FIT-004")
    assert ("parts.ring.properties.tensile_strength",) == brittle.missing


def test_the_last_temper_lowers_the_cap_and_never_raises_it() -> None:
    listed = number(changed(), "heat.cap")
    assert 200.0 == listed
    assert 170.0 == number(ring_of(last_temper="220 degC"), "heat.cap")
    assert listed == number(ring_of(last_temper="560 degC"), "heat.cap")
    assert "fail" == finding(ring_of(last_temper="220 degC"), "HEAT-002").verdict
    assert "pass" == finding(ring_of(last_temper="560 degC"), "HEAT-002").verdict
    # exactly at it: 195 degC with the oven's error, temper at 245
    assert "pass" == finding(ring_of(last_temper="245 degC"), "HEAT-002").verdict
    assert "fail" == finding(ring_of(last_temper="244 degC"), "HEAT-002").verdict
