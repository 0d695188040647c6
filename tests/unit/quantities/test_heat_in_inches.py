"""Heat and cold of a joint in an inch file with degrees Fahrenheit: sizes rounded for its gauges, differences kept apart."""

from __future__ import annotations

import pytest

from setupcheck.report.text import as_text
from tests.unit.report.sample import flat

from .joint_text import WHOLE, changed, finding, number, reviewed

JOB = changed(
    ("units: mm", "units: in"),
    ("room: 20 degC", "room: 68 degF"),
    ("diameter: 60 H6, from: 0, to: 30", "diameter: {nominal: 2.0, lower: 0, upper: 0.0006}, from: 0, to: 1.2"),
    (
        "diameter: 60 r6, from: 0, to: 30, hole: 20",
        "diameter: {nominal: 2.0, lower: 0.0012, upper: 0.0017}, from: 0, to: 1.2",
    ),
    ("on_circle: 120, at: 20, width: 20, module: 2", "on_circle: 4.8, at: 0.8, width: 0.8, module: 2 mm"),
    ("diameter: 90, from: 0, to: 10", "diameter: 3.5, from: 0, to: 0.4"),
    ("at: 0, facing: +z, diameter: 80", "at: 0, facing: +z, diameter: 3.0"),
    (
        "heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}",
        "heat: {hub: 374 degF, by: oil-bath, oven_error: 9 degF, carry: 10 s, flash_point: 455 degF, gauge: 2.0037}",
    ),
    text=WHOLE,
)


@pytest.mark.parametrize(
    ("flash", "verdict"),
    [
        ("455 degF", "pass"),  # 374 + 9 degF at its hottest, and 72 degF above that
        ("454 degF", "fail"),
        ("486 degF", "pass"),  # 103 degF above; 40 degC taken for a temperature would be 104 degF
    ],
)
def test_the_margin_to_the_flash_point_is_seventy_two_fahrenheit(flash: str, verdict: str) -> None:
    assert verdict == finding(changed(("455 degF", flash), text=JOB), "HEAT-011").verdict


def test_an_error_of_the_cold_in_fahrenheit_is_a_difference() -> None:
    text = changed(("carry: 10 s", "carry: 0 s, shaft: -40 degF, cold_by: freezer, cold_error: 9 degF"), text=JOB)
    assert -35.0 == pytest.approx(number(text, "heat.shaft_at"))


def test_the_gauge_is_rounded_up_to_a_tenth_of_a_thou_and_printed_so() -> None:
    # 2.0017 + 0.0020 in
    assert 2.0037 == pytest.approx(number(JOB, "heat.go_gauge") / 25.4)
    assert "the gauge of 2.0037 in (at least 2.0037 in) in the hot bore" in flat(as_text(reviewed(JOB)))
    assert "pass" == finding(JOB, "HEAT-007").verdict
    small = finding(changed(("gauge: 2.0037", "gauge: 2.0036"), text=JOB), "HEAT-007")
    assert "fail" == small.verdict
    assert small.remedy.startswith("Make the gauge 2.0037 in, the largest journal")


def test_what_heat_opens_is_told_in_thou() -> None:
    cold = changed(("carry: 10 s", "carry: 10 s, shaft: -40 degF, cold_by: freezer, cold_error: 9 degF"), text=JOB)
    said = flat(as_text(reviewed(cold)))
    assert "Heat opens " in said and "thou, 3.70 thou are needed; the shaft gains" in said
