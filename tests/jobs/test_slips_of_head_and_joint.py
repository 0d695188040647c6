"""Slips at the tilted head and at the joint of the worm wheel: caught by their rules, open where a key is left out."""

from __future__ import annotations

import pytest

from setupcheck.quantities.book import Known
from tests.jobs.test_slips import TEXTS, WHEEL, judged

TILTED = "head:   {tilt: 3deg 34' 35\", uncertainty: 2', leans: nose-down,"


@pytest.mark.parametrize(
    ("becomes", "rules"),
    [
        pytest.param(
            "head:   {tilt: 3deg 10' 48\", uncertainty: 2', leans: nose-down,",
            {"TILT-001", "TILT-002"},
            id="angle of the tip",
        ),
        pytest.param("head:   {tilt: 3deg 34' 35\", uncertainty: 2', leans: nose-up,", {"TILT-003"}, id="wrong side"),
        pytest.param("head:   {tilt: 3deg 50', uncertainty: 2', leans: nose-down,", {"TILT-001"}, id="angle misread"),
    ],
)
def test_a_head_leaned_wrongly_is_caught_and_the_drawn_one_is_not(becomes: str, rules: set[str]) -> None:
    text = TEXTS[WHEEL]
    assert text.count(TILTED) == 1
    failed = {f.rule for f in judged(text.replace(TILTED, becomes)).evaluation.findings if f.verdict == "fail"}
    assert failed == rules
    assert not [f for f in judged(text).evaluation.findings if f.rule.startswith("TILT") and f.verdict != "pass"]


@pytest.mark.parametrize(
    ("gone", "key"),
    [
        ("hand: right\n", "worm.hand"),
        ("reference_diameter: 24\n", "worm.reference_diameter"),
        ("nose_points: left, ", "machines.dividing-head-B.nose_points"),
        (" leans: nose-down,", "setups.40.head.leans"),
        (" uncertainty: 2',", "setups.40.head.uncertainty"),
    ],
)
def test_a_tilt_that_cannot_be_told_is_open_with_the_key_to_fill(gone: str, key: str) -> None:
    text = TEXTS[WHEEL]
    assert gone in text
    found = judged(text.replace(gone, "\n" if gone.endswith("\n") else "", 1))
    opened = {
        m for f in found.evaluation.findings if f.rule.startswith("TILT") and f.verdict == "open" for m in f.missing
    }
    assert key in opened


@pytest.mark.parametrize(
    ("good", "bad", "rules"),
    [
        pytest.param("hub: 175 degC", "hub: 130 degC", {"HEAT-001"}, id="heated for the nominal interference"),
        pytest.param("hub: 175 degC", "hub: 195 degC", {"HEAT-002"}, id="oven error forgotten at the cap"),
        pytest.param(
            "diameter: 32.030 ±0.003",
            "diameter: 32.010 ±0.003",
            {"FIT-001", "FIT-003", "STACK-002"},
            id="journal too small for the class",
        ),
        pytest.param(
            "diameter: 32.030 ±0.003",
            "diameter: 31.990 ±0.003",
            {"FIT-001", "FIT-003", "STACK-002"},
            id="a clearance, not an interference",
        ),
        pytest.param(
            "diameter: 32.030 ±0.003",
            "diameter: 32.045 ±0.003",
            {"FIT-004", "HEAT-001", "HEAT-007"},
            id="more interference than the hub stands",
        ),
        pytest.param("torque: 40 N m,", "torque: 90 N m,", {"FIT-003"}, id="more torque than the joint holds"),
        pytest.param(
            "[5 degC, 45 degC]", "[5 degC, 75 degC]", {"FIT-003", "MESH-006", "STACK-002"}, id="loose when it is warm"
        ),
    ],
)
def test_a_joint_that_will_not_go_on_or_not_hold_is_caught(good: str, bad: str, rules: set[str]) -> None:
    text = TEXTS[WHEEL]
    assert text.count(good) == 1
    failed = {f.rule for f in judged(text.replace(good, bad)).evaluation.findings if f.verdict == "fail"}
    assert failed == rules
    assert not [f for f in judged(text).evaluation.findings if f.rule[:4] in ("FIT-", "HEAT") and f.verdict != "pass"]


@pytest.mark.parametrize(
    ("gone", "instead", "key"),
    [
        ("hub: 175 degC, ", "", "setups.70.join.heat.hub"),
        (" by: oven, oven_error: 10 degC,", "", "setups.70.join.heat.by"),
        ("material: CuSn12-C\n", "\n", "parts.wheel.material"),
        ("material: CuSn12-C\n", "material: unobtainium\n", "parts.wheel.material"),
        ("diameter: 32 H5,", "diameter: 32,", "parts.wheel.surfaces.bore.diameter"),
        (", roughness: Rz 2.5 um}", "}", "parts.wheel.surfaces.bore.roughness"),
        ("      joint: degreased\n", "", "setups.70.join.joint"),
        ("      serves_at: [5 degC, 45 degC]\n", "", "setups.70.join.serves_at"),
        (", carry: 12 s", "", "setups.70.join.heat.carry"),
        ("on_circle: 108, at: 12, width: 15}", "on_circle: 108, at: 12}", "parts.wheel.surfaces.teeth.width"),
    ],
)
def test_a_joint_that_cannot_be_told_is_open_with_the_key_to_fill(gone: str, instead: str, key: str) -> None:
    text = TEXTS[WHEEL]
    assert gone in text
    found = judged(text.replace(gone, instead, 1))
    opened = {
        m
        for f in found.evaluation.findings
        if f.rule[:4] in ("FIT-", "HEAT") and f.verdict == "open"
        for m in f.missing
    }
    assert key in opened


def test_the_heat_of_the_wheel_is_the_sum_on_paper() -> None:
    # 32.033 over 32.000: 33 um; usual play 32 um; both sizes at 20 degC, room at 20: 65 um / (32 mm x 17.0e-6 /K) = 119.5 K
    # expansion of CuSn12 low end 17.0e-6 /K as listed in rules/data/materials.yaml
    found = judged(TEXTS[WHEEL])
    scope = found.book.instances("join")[0]
    needed = found.book.get("heat.needed", scope)
    assert isinstance(needed, Known)
    assert 139.5 == pytest.approx(float(str(needed.value)), abs=0.1)
