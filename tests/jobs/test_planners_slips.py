"""Slips a planner made from an empty file: each is told by the right rule, and what it says to do does it."""

from __future__ import annotations

import re

import pytest

from setupcheck.quantities.contents import material_family
from tests.unit.report.sample import PLATE, WHEEL, changed, reviewed

HUB = "must_carry: {torque: 40 N m, axial_force: 0 N}"


def rules(text: str, verdict: str) -> set[str]:
    return {f.rule for f in reviewed(text).evaluation.findings if f.verdict == verdict}


def remedy(text: str, rule: str) -> str:
    return next(f.remedy for f in reviewed(text).evaluation.findings if f.rule == rule and f.verdict == "fail")


def test_an_insert_narrower_than_the_thread_fails_whatever_backlash_is_asked() -> None:
    narrow = changed(
        WHEEL, ("width: 2.387 ±0.004", "width: 2.000 ±0.004"), ("between: [5 um, 125 um]", "at_most: 1 mm")
    )
    assert {"CUTTER-010", "MESH-006"} <= rules(narrow, "fail")


def test_a_backlash_with_one_limit_only_is_asked_for_the_other() -> None:
    assert "MESH-005" in rules(changed(WHEEL, ("between: [5 um, 125 um]", "at_most: 0.2 mm")), "warn")
    assert "MESH-005" not in rules(WHEEL, "warn")


def test_a_backlash_that_may_fall_below_zero_binds_even_inside_its_limits() -> None:
    tight = changed(WHEEL, ("width: 2.387", "width: 2.370"), ("between: [5 um, 125 um]", "between: [-20 um, 125 um]"))
    assert "MESH-006" in rules(tight, "fail")


def test_the_grip_advised_for_a_joint_that_has_none_is_enough() -> None:
    loose = changed(WHEEL, ("diameter: 32.030 ±0.003", "diameter: 31.990 ±0.003"))
    said = remedy(loose, "FIT-003")
    least, wanted = (float(x) for x in re.findall(r"(-?\d+\.\d) um", said)[:2])
    assert least == pytest.approx(-24.0)  # 31.987 less 32.011
    size = 32.011 + wanted / 1000.0 + 0.003
    enough = changed(loose, ("diameter: 31.990 ±0.003", f"diameter: {size:.4f} ±0.003"))
    assert "FIT-003" not in rules(enough, "fail")


def test_a_plan_without_an_aim_is_open_whatever_it_makes() -> None:
    assert "STACK-004" in rules(PLATE[: PLATE.index("require:")], "open")


def test_a_joint_that_says_no_load_is_asked_for_it() -> None:
    text = WHEEL.replace(f"      {HUB}\n", "").replace("  - {what: torque, of: 70, at_least: 40 N m}\n", "")
    assert "FIT-007" in rules(text, "open")


def test_a_worm_that_says_no_starts_is_asked_for_them() -> None:
    assert "TILT-001" in rules(changed(WHEEL, ("  starts: 1\n", "")), "open")


def test_wrong_blocks_are_caught_where_the_bar_is_named_without_the_word() -> None:
    wrong = changed(WHEEL, ("uncertainty: 2', leans", "uncertainty: 2', sine_bar: 100, blocks: 5.5, leans"))
    assert "TILT-007" in rules(wrong, "fail")


@pytest.mark.parametrize(
    ("family", "names"),
    [
        ("steel", "4140 4340 8620 C45 Ck45 St37 silver_steel tool_steel alloy_steel O1 D2 H13 42CrMo4 EN8 HSS"),
        (
            "copper-alloy",
            "bronze phosphor_bronze aluminium_bronze leaded_brass beryllium_copper CuSn12 PB1 LG2 Ms58 C93200",
        ),
        ("cast-iron", "GG25 grey_iron cast_iron ductile_iron EN-GJS-400-15"),
        ("aluminium", "6082 6061-T6 AlMg3 aluminium EN_AW-2007"),
        ("other", "oak unobtainium"),
    ],
)
def test_usual_names_of_materials_find_their_family(family: str, names: str) -> None:
    for name in names.split():
        assert (name, family) == (name, material_family(name.replace("_", " ")))


def test_a_shaft_by_its_american_number_is_warned_of_cold_as_by_its_european_one() -> None:
    for name in ("42CrMo4", "4140"):
        cold = changed(
            WHEEL, ("material: 42CrMo4", f"material: {name}"), ("by: oven,", "by: oven, cold_by: liquid-nitrogen,")
        )
        assert "cold-brittle-steel" in {c.id for c in reviewed(cold).evaluation.cautions}


def test_a_hole_circle_that_the_head_does_not_have_fails_and_one_it_has_does_not() -> None:
    for circles, failed in (("27, 54", {"DIVIDE-007"}), ("18, 27", set())):
        listed = changed(
            WHEEL, ("worm_ratio: 40, nose_points", f"worm_ratio: 40, hole_circles: [{circles}], nose_points")
        )
        assert failed == rules(listed, "fail")
