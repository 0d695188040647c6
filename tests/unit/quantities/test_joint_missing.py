"""A number that strength or heat of a joint needs, taken away: the finding is open and names the key, never a pass."""

from __future__ import annotations

import pytest

from setupcheck.errors import JobError
from setupcheck.quantities.book import Open

from .joint_text import answer, changed, finding, reviewed

RULES = ("FIT-003", "FIT-004", "HEAT-001")
BORE, SEAT = "parts.ring.surfaces.bore", "parts.shaft.surfaces.seat"
JOIN = "setups.10.join"

CASES = [
    # what is taken away, key that is named, rules that need it
    ("limits of the bore", ("60 H6", "60"), f"{BORE}.diameter", RULES),
    ("limits of the journal", ("60 r6", "60.05"), f"{SEAT}.diameter", RULES),
    (
        "uncertainty of a measured bore",
        ("diameter: 60 H6", "diameter: {measured: 60.004}"),
        f"{BORE}.diameter.uncertainty",
        RULES,
    ),
    ("material of the hub", ("    material: CuSn12-C\n", ""), "parts.ring.material", RULES),
    ("material of the shaft", ("    material: 42CrMo4\n", ""), "parts.shaft.material", RULES),
    ("a hub material nobody knows", ("CuSn12-C", "Zamak 99"), "parts.ring.material", RULES),
    ("a shaft material nobody knows", ("42CrMo4", "Zamak 99"), "parts.shaft.material", RULES),
    ("roughness of the bore", (", roughness: Rz 4 um", ""), f"{BORE}.roughness", ("FIT-003",)),
    ("roughness of the journal", (", roughness: Rz 2.5 um", ""), f"{SEAT}.roughness", ("FIT-003",)),
    ("state of the joint", ("      joint: degreased\n", ""), f"{JOIN}.joint", ("FIT-003",)),
    ("temperatures in service", ("      serves_at: [10 degC, 25 degC]\n", ""), f"{JOIN}.serves_at", RULES[:2]),
    ("width of the teeth", (", width: 20", ""), "parts.ring.surfaces.teeth.width", RULES),
    ("module of the teeth", (", module: 2", ""), "parts.ring.surfaces.teeth.module", RULES),
    ("yield of a brass", ("CuSn12-C", "C36000"), "parts.ring.properties.yield_strength", ("FIT-004",)),
    ("heat", ("      heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}\n", ""), f"{JOIN}.heat.hub", ("HEAT-001",)),
    ("heat of the hub", ("hub: 190 degC, ", ""), f"{JOIN}.heat.hub", ("HEAT-001",)),
    ("source of the heat", ("oven_error: 5 degC, ", ""), f"{JOIN}.heat.by", ("HEAT-001",)),
    ("time of the carry", (", carry: 10 s", ""), f"{JOIN}.heat.carry", ("HEAT-001",)),
]


@pytest.mark.parametrize("rule", RULES)
def test_the_whole_joint_is_judged(rule: str) -> None:
    assert "pass" == finding(changed(), rule).verdict


@pytest.mark.parametrize(("pair", "key", "rules"), [c[1:] for c in CASES], ids=[c[0] for c in CASES])
def test_what_is_missing_is_named_and_nothing_passes(pair: tuple[str, str], key: str, rules: tuple[str, ...]) -> None:
    text = changed(pair)
    for rule in rules:
        found = finding(text, rule)
        assert "open" == found.verdict, rule
        assert key in found.missing, (rule, found.missing)
        assert "cannot tell" in found.message
    for rule in set(RULES) - set(rules):
        assert "pass" == finding(text, rule).verdict, rule


def test_a_hub_without_any_outside_is_open() -> None:
    text = changed(
        ("      teeth: {kind: teeth, count: 60, on_circle: 120, at: 20, width: 20, module: 2}\n", ""),
        ("      hub: {kind: cylinder, diameter: 90, from: 0, to: 10}\n", ""),
    )
    for rule in RULES:
        found = finding(text, rule)
        assert ("open", ("parts.ring.surfaces",)) == (found.verdict, found.missing)


def test_parts_whose_surfaces_do_not_meet_are_refused() -> None:
    text = changed(
        ("diameter: 60 r6, from: 0, to: 30", "diameter: 60 r6, from: 40, to: 70"),
        ("      hub: {", "      back: {kind: face, at: 0, facing: -z, diameter: 85}\n      hub: {"),
        (
            "      square: bore\n",
            "      square: bore\n      stop: {on: ring.back, against: shaft.shoulder, error: 0 um}\n",
        ),
    )
    with pytest.raises(JobError, match="do not meet"):
        reviewed(text)


def test_friction_without_a_row_asks_for_the_shop_s_own() -> None:
    found = finding(changed(("joint: degreased", "joint: oiled")), "FIT-003")  # no row for oiled bronze
    assert ("open", (f"{JOIN}.friction",)) == (found.verdict, found.missing)
    own = changed(("joint: degreased", "friction: 0.17"))
    assert "pass" == finding(own, "FIT-003").verdict


def test_nothing_asked_is_nothing_judged() -> None:
    text = changed(("      must_carry: {torque: 50 N m, axial_force: 0 N}\n", ""))
    assert [] == [f for f in reviewed(text).evaluation.findings if f.rule == "FIT-003"]


@pytest.mark.parametrize("name", ["fit.elastic", "fit.elastic_mises", "fit.elastic_tresca"])
@pytest.mark.parametrize(("material", "part"), [("CuSn12-C", "ring"), ("42CrMo4", "shaft")])
def test_every_elastic_limit_asks_for_the_strength_of_the_part_that_has_none(
    name: str, material: str, part: str
) -> None:
    found = answer(changed((material, "C36000")), name)
    assert isinstance(found, Open)
    assert found.missing == (f"parts.{part}.properties.yield_strength",)
