"""What a rule advises in the numbers of the job, typed in where it says, clears its finding."""

from __future__ import annotations

import re

import pytest

from setupcheck.flow import review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.remedies import remedy_in_words
from setupcheck.rulebook import Finding
from setupcheck.shipped import shipped

JOURNAL = "diameter: 32.030 ±0.003"
SHIM = "spacers: [{name: shim, length: 1.500 ±0.003}]"


def job(*changes: tuple[str, str]) -> str:
    text = shipped("jobs/rotator-worm-wheel.yaml").read_text(encoding="utf-8")
    for old, new in changes:
        assert old in text, old
        text = text.replace(old, new)
    return text


def findings(text: str) -> dict[str, Finding]:
    """Rule -> its worst finding, with the remedy as it is printed."""
    found = review(read_job_text(text, "job.yaml"))
    worst: dict[str, Finding] = {}
    for finding in found.evaluation.findings:  # worst first
        if finding.rule not in worst:
            worst[finding.rule] = finding
            if finding.verdict in ("fail", "warn"):
                assert remedy_in_words(found, finding) == finding.remedy or finding.rule.startswith("STACK")
    return worst


def broken(text: str, rule: str) -> str:
    """The remedy of a rule that is broken."""
    finding = findings(text)[rule]
    assert finding.verdict in ("fail", "warn"), finding
    return finding.remedy


def clears(text: str, rule: str) -> bool:
    return findings(text)[rule].verdict == "pass"


def said(pattern: str, remedy: str) -> tuple[str, ...]:
    found = re.search(pattern, remedy)
    assert found is not None, remedy
    return found.groups()


def test_a_shim_is_told_as_the_entry_that_is_typed() -> None:
    text = job((f", {SHIM}", ""))
    (entry,) = said(r"\(setups\.70\.join\.stop, (spacers: .*\]), with its own limits\)", broken(text, "PLACE-001"))
    assert entry == "spacers: [{name: shim, length: 1.5000 ±0.003}]"
    stop = "against: spindle.shoulder, "
    assert clears(text.replace(stop, f"{stop}{entry}, "), "PLACE-001")


def test_a_shim_that_is_there_is_told_where_it_stands() -> None:
    assert broken(job(("length: 1.500 ±0.003", "length: 1.400 ±0.003")), "PLACE-001").endswith("(setups.70.join.stop).")


def test_heat_at_its_most_takes_less_interference() -> None:
    text = job((JOURNAL, "diameter: 32.050 ±0.003"), ("hub: 175 degC", "hub: 190 degC"))
    start = "The heat stands at its most: chill the shaft, or take "
    remedy = broken(text, "HEAT-003")
    assert remedy.startswith(start)
    (less,) = said(r"take ([\d.]+) um less interference\.$", remedy)
    for share, enough in ((1.0, True), (0.9, False)):
        smaller = 32.050 - float(less) / 1000.0 * share
        assert clears(text.replace("diameter: 32.050", f"diameter: {smaller:.5f}"), "HEAT-003") is enough


@pytest.mark.parametrize(("hub", "rule"), [("140 degC", "HEAT-001"), ("160 degC", "HEAT-003")])
def test_heat_below_its_most_is_set_higher(hub: str, rule: str) -> None:
    text = job(("hub: 175 degC", f"hub: {hub}"))
    (better,) = said(r"Set the heat to (\d+) degC", broken(text, rule))
    after = re.sub(r"hub: \d+ degC, by", f"hub: {better} degC, by", text)
    assert all(clears(after, one) for one in ("HEAT-001", "HEAT-002", "HEAT-003"))


def test_heat_that_reaches_its_most_too_early_names_both() -> None:
    text = job((JOURNAL, "diameter: 32.050 ±0.003"), ("hub: 175 degC", "hub: 180 degC"))
    better, less = said(r"Set the heat to (\d+) degC, .* take ([\d.]+) um less", broken(text, "HEAT-001"))
    smaller = 32.050 - float(less) / 1000.0
    after = text.replace("hub: 180 degC", f"hub: {better} degC").replace("diameter: 32.050", f"diameter: {smaller:.5f}")
    assert clears(after, "HEAT-003")


def test_no_more_interference_is_taken_than_there_is() -> None:
    remedy = broken(job((JOURNAL, "diameter: 32.060 ±0.003"), ("carry: 12 s", "carry: 3000 s")), "HEAT-001")
    assert remedy.startswith("Heat alone does not do it")
    assert remedy.endswith("Chill the shaft, or carry the hub faster.")


def test_a_way_that_takes_the_heat_is_named_in_its_place() -> None:
    """697 degC would be the heat for such a way."""
    text = job(("hub: 175 degC", "hub: 140 degC"), ("carry: 12 s", "carry: 12 min"))
    setting, seconds = said(r"of a hub set to (\d+) degC.* within (\d+) s \(carry\)\.$", broken(text, "HEAT-001"))
    better = text.replace("hub: 140 degC", f"hub: {setting} degC").replace("carry: 12 min", f"carry: {seconds} s")
    assert all(clears(better, rule) for rule in ("HEAT-001", "HEAT-002", "HEAT-003", "HEAT-006"))


@pytest.mark.parametrize("journal", ["32.018", "31.990"])
def test_the_least_interference_that_is_told_carries_the_load(journal: str) -> None:
    """Also of a joint that has no interference at all to begin with."""
    text = job((JOURNAL, f"diameter: {journal} ±0.003"))
    now, needed = said(r"from (-?[\d.]+) um to ([\d.]+) um", broken(text, "FIT-003"))
    better = float(journal) + (float(needed) - float(now)) / 1000.0
    for more, enough in ((0.0001, True), (-0.0003, False)):
        assert clears(text.replace(f"diameter: {journal}", f"diameter: {better + more:.5f}"), "FIT-003") is enough


def test_the_largest_interference_that_is_told_stays_elastic() -> None:
    text = job((JOURNAL, "diameter: 32.060 ±0.003"))
    now, allowed = said(r"from ([\d.]+) um down to ([\d.]+) um", broken(text, "FIT-004"))
    smaller = 32.060 - (float(now) - float(allowed)) / 1000.0
    for more, enough in ((-0.0001, True), (0.0003, False)):
        assert clears(text.replace("diameter: 32.060", f"diameter: {smaller + more:.5f}"), "FIT-004") is enough


def test_two_rules_that_exclude_each_other_say_so() -> None:
    text = job(
        (JOURNAL, "diameter: 32.040 ±0.003"),
        ("must_carry: {torque: 40 N m, axial_force: 0 N}", "must_carry: {torque: 250 N m, axial_force: 0 N}"),
    )
    grip = broken(text, "FIT-003")
    (allowed,) = said(
        r", but FIT-004 allows at most ([\d.]+) um: lengthen the seat, thicken the wall, or add a key", grip
    )
    (needed,) = said(r"to ([\d.]+) um, but", grip)
    slack = broken(text, "FIT-004")
    assert f"down to {allowed} um, but FIT-003 asks for at least {needed} um: lengthen the seat" in slack
    assert float(needed) > float(allowed)


def test_two_rules_that_closer_limits_bring_together_name_each_other() -> None:
    text = job(
        (JOURNAL, "diameter: 32.030 ±0.014"),
        ("must_carry: {torque: 40 N m, axial_force: 0 N}", "must_carry: {torque: 60 N m, axial_force: 0 N}"),
    )
    grip, slack = broken(text, "FIT-003"), broken(text, "FIT-004")
    (needed,) = said(r"to ([\d.]+) um \(", grip)
    (allowed,) = said(r"down to ([\d.]+) um \(", slack)
    assert f"; FIT-004 allows at most {allowed} um." in grip
    assert f"; FIT-003 asks for at least {needed} um." in slack
    assert float(needed) < float(allowed)


@pytest.mark.parametrize("now", ["3.9", "2.9"])
def test_the_depth_that_is_told_leaves_the_clearance(now: str) -> None:
    text = job(("depth: 3.3,", f"depth: {now},"))
    (fed, path) = said(r"Feed (\d\.\d{3}) mm from that surface \((.*?)\)", broken(text, "CUTTER-005"))
    assert path == "setups.40.cut.teeth.depth"
    after = findings(text.replace(f"depth: {now},", f"depth: {fed},"))["CUTTER-005"]
    assert after.verdict == "pass"
    assert after.value == pytest.approx(0.3, abs=1e-3)


@pytest.mark.parametrize("distance", ["66.300", "65.800"])
def test_the_shift_that_is_told_closes_the_distance(distance: str) -> None:
    text = job(("centre_distance: 66.000", f"centre_distance: {distance}"))
    shift, plain = said(
        r"Write shift: (-?\d\.\d{3}) under mesh \(in modules\), or measure again: \(d1 \+ d2\)/2 is (\d+\.\d{3}) mm",
        broken(text, "MESH-002"),
    )
    assert plain == "66.000"
    assert clears(text.replace("mesh: {", f"mesh: {{shift: {shift}, "), "MESH-002")


def test_a_distance_of_another_drive_is_measured_again() -> None:
    remedy = broken(job(("centre_distance: 66.000", "centre_distance: 70.000")), "MESH-002")
    assert remedy.startswith("Measure again: (d1 + d2)/2 is 66.000 mm")


def test_a_circle_that_does_not_divide_is_told_those_that_do() -> None:
    text = job(("circle: 18", "circle: 20"))
    (circles,) = said(r"Take a circle of (.*) holes \(setups\.40\.divide\.circle\)", broken(text, "DIVIDE-001"))
    for circle in circles.split(" or "):
        assert clears(text.replace("circle: 20", f"circle: {circle}"), "DIVIDE-001")


@pytest.mark.parametrize("last", ["", ", hole_circles: [20, 23]"])
def test_a_head_without_such_a_circle_needs_another_plate(last: str) -> None:
    text = job(("circle: 18", "circle: 20"), ("worm_ratio: 40,", f"worm_ratio: 40{last},"))
    remedy = broken(text, "DIVIDE-001")
    assert ("get a plate with a circle of 18, " in remedy) is bool(last)
