"""Pressed joints that gall or are badly led in, classes of the wrong kind, sizes that a joint moves, windows as printed."""

from __future__ import annotations

import re

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.working import as_working
from setupcheck.rulebook import Finding
from setupcheck.shipped import shipped

from .joint_text import answer, changed, finding, number, reviewed, value

HEAT = ("      heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}\n", "")
BUSH = shipped("jobs/pressed-bush.yaml").read_text(encoding="utf-8")


def pressed(*pairs: tuple[str, str]) -> str:
    return changed(("by: shrink", "by: press"), HEAT, *pairs)


@pytest.mark.parametrize(
    ("hub", "joint", "said"), [("304", "degreased", "fail"), ("304", "oiled", "pass"), ("C45", "degreased", "pass")]
)
def test_two_stainless_parts_pressed_dry_gall(hub: str, joint: str, said: str) -> None:
    text = pressed(
        ("material: CuSn12-C", f"material: {hub}"),
        ("material: 42CrMo4", "material: '1.4301'"),
        ("joint: degreased", f"joint: {joint}"),
    )
    assert said == finding(text, "FIT-015").verdict


def test_a_lead_in_that_leaves_less_than_half_of_the_seat_is_none() -> None:
    assert "pass" == finding(pressed(("joint: degreased", "joint: degreased\n      lead_in: 3 mm")), "FIT-012").verdict
    short = finding(pressed(("joint: degreased", "joint: degreased\n      lead_in: 16 mm")), "FIT-012")
    assert "open" == short.verdict
    assert "leaves less than half of a seat of 30 mm" in short.message


@pytest.mark.parametrize(("good", "bad", "said"), [("60 H6", "60 h6", "Write H6"), ("60 r6", "60 R6", "Write r6")])
def test_a_class_of_the_wrong_kind_is_refused_with_the_right_letter(good: str, bad: str, said: str) -> None:
    with pytest.raises(JobError, match=said):
        read_job_text(changed((good, bad)), "ring.yaml")


def bored_before_pressing() -> dict[str, Finding]:
    text = re.sub(r"  - op: 40 .*?bush\.hole: \{\}\n", "", BUSH, flags=re.DOTALL)
    text = text.replace("hole:  {leave_on_diameter: 0.5, state: rough}", "hole:  {}")
    text = "\n".join(line for line in text.splitlines() if "what: allowance" not in line)
    return {f.rule: f for f in review(read_job_text(text, "bush.yaml")).evaluation.findings if f.verdict != "pass"}


def test_a_bush_bored_to_size_before_it_is_pressed_fails_and_says_how_much_larger() -> None:
    found = bored_before_pressing()
    assert ("warn", "fail") == (found["FIT-011"].verdict, found["FIT-014"].verdict)
    least, most = map(float, re.findall(r"closes by ([\d.]+) um to ([\d.]+) um", found["FIT-014"].remedy)[0])
    assert 8.0 < least < most < 30.0  # at 20 degC: 25 to 35 um of interference, less 10 of smoothing for the loosest
    larger = re.search(r"make it (\d+) um larger before", found["FIT-014"].remedy)
    assert larger is not None
    assert least < float(larger[1]) < most


def test_the_window_as_printed_passes_at_both_its_ends() -> None:
    low, high = map(float, re.findall(r"([\d.]+) um", str(value(changed(), "fit.suits"))))
    assert 0.0 <= low - 1e3 * number(changed(), "fit.window_low") < 0.1
    assert 0.0 <= 1e3 * number(changed(), "fit.window_high") - high < 0.1


def test_a_joint_without_a_load_holds_until_it_is_loose() -> None:
    idle = changed(("{torque: 50 N m, axial_force: 0 N}", "{torque: 0 N m}"))
    assert answer(idle, "fit.holds_to") is None
    assert number(idle, "fit.loosens_at") > 25.0


def test_the_working_of_a_pressure_shows_what_it_is_worked_out_from() -> None:
    found = reviewed(changed())
    text = " ".join(as_working(found.loaded, found.book, "fit.bench_pressure").split())
    for piece in (
        "D 60 mm",
        "hub CuSn12-C: E 90 to 110 GPa, nu 0.34",
        "of outside 115 (roots), hole 20",
        "fit.bench_most_elastic =",
    ):
        assert piece in text
    assert "p = (U/D) / (K_A/E_A + K_I/E_I)" in text
    limits = " ".join(as_working(found.loaded, found.book, "fit.interference_most").split())
    assert "bore 60.0000 to 60.0190 mm, journal 60.0410 to 60.0600 mm" in limits  # 60 H6, 60 r6 (ISO 286)
