"""Prove-out gaps in whole jobs: what the report says of them, what fails, what is refused. Invented part and figures."""

from __future__ import annotations

import cmath
import math
import re

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.account import Account
from setupcheck.quantities.book import Known, Open
from setupcheck.quantities.prove_out import Proof
from setupcheck.report.text import as_text
from tests.jobs.test_measuring import changed

CUT = "cut:    {teeth: {cutter: fly,"
READ = "{gap 1: 0 um, gap 19: 3 um, gap 37: 6 um, gap 55: 3 um}"


def proved(
    readings: str = READ, *, depth: str = "0.8 mm", more: str = ", about: hub, uncertainty: 2 um", teeth: int = 72
) -> str:
    said = f"depth: {depth}, ball: 2.5 mm, readings: {readings}{more}"
    count = () if teeth == 72 else (("count: 72, on_circle: 108", f"count: {teeth}, on_circle: 108"),)
    return changed((CUT, f"cut:    {{teeth: {{prove_out: {{{said}}}, cutter: fly,"), *count)


def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def value(text: str, name: str) -> object:
    found = judged(text)
    scope = next(s for s in found.book.instances("cut") if s.key == "40/teeth")
    answer = found.book.get(name, scope)
    return answer.value if isinstance(answer, Known) else answer


def verdict(text: str, rule: str) -> str:
    (one,) = (f for f in judged(text).evaluation.findings if f.rule == rule)
    return one.verdict


def block(text: str) -> str:
    report = as_text(judged(text))
    assert max(map(len, report.splitlines())) <= 80
    found = re.search(r"^PROVE-OUT.*?(?=\n\n)", report, re.S | re.M)
    return re.sub(r"\s+", " ", found[0]) if found else ""


def test_a_wheel_that_reads_high_opposite_gap_1_is_moved_that_way_by_half_its_run_out() -> None:
    text = proved("{gap 1: 0 um, gap 19: 10 um, gap 37: 20 um, gap 55: 10 um}")
    assert value(text, "prove.eccentricity") == pytest.approx(0.010)
    assert value(text, "prove.gap_out") == pytest.approx(37.0)
    assert value(text, "prove.uncertainty") == pytest.approx(0.002 * (2.0 / 4.0) ** 0.5)
    assert verdict(text, "DIVIDE-019") == "fail"
    said = block(text)
    assert (
        "Move the blank 10.0 um on head-B in the direction of gap 37: a dial on hub shows 20.0 um there, high at gap 1"
        in said
    )
    report = re.sub(r"\s+", " ", as_text(judged(text)))
    assert "Do: Move the blank 10.0 um on head-B" in report


def test_a_small_eccentricity_is_within_the_plan_and_one_below_its_uncertainty_is_not_proved() -> None:
    assert "Within the plan; to better it, move the blank 3.0 um" in block(proved())
    assert verdict(proved(), "DIVIDE-019") == "pass"
    nothing = proved("{gap 1: 0 um, gap 19: 1 um, gap 37: 2 um, gap 55: 1 um}")
    assert "Not proved: 1.0 um is within the uncertainty of 1.4 um" in block(nothing)
    assert "that direction is known" not in block(nothing)


def test_the_plan_of_the_gaps_is_there_before_any_reading_and_the_job_stays_open() -> None:
    text = proved("{}")
    assert "cut 0.800 mm deep: gaps 1, 19, 37 and 55 of 72, at quarter turns" in block(text)
    assert verdict(text, "DIVIDE-018") == "open"
    assert "eccentric" not in block(text)
    assert value(changed(), "prove.gaps") == "gaps 1, 19, 37 and 55 of 72, at quarter turns"
    assert block(changed()) == ""


def test_a_count_without_quarters_takes_the_nearest_gaps_and_says_how_far_off() -> None:
    assert "gaps 1, 19, 38 and 56 of 73, up to 2.47 deg off the quarter turns" in block(proved("{}", teeth=73))


@pytest.mark.parametrize(
    ("readings", "more", "missing"),
    [
        ("{gap 1: 0 um, gap 37: 8 um}", ", about: hub, uncertainty: 2 um", ".readings"),
        (READ, ", uncertainty: 2 um", ".about"),
    ],
)
def test_two_gaps_or_no_axis_leave_it_open(readings: str, more: str, missing: str) -> None:
    found = value(proved(readings, more=more), "prove.enough")
    assert isinstance(found, Open)
    assert found.missing == (f"setups.40.cut.teeth.prove_out{missing}",)


def test_readings_without_their_uncertainty_never_pass() -> None:
    text = proved(more=", about: hub")
    assert [verdict(text, rule) for rule in ("DIVIDE-019", "DIVIDE-020", "MEASURE-008")] == ["open"] * 3


def test_gaps_read_about_a_surface_that_is_not_there_yet_leave_the_allowance_open() -> None:
    text = proved(more=", about: bore, uncertainty: 2 um")
    assert isinstance(value(text, "prove.allowed"), Open)
    assert verdict(text, "DIVIDE-019") == "open"


def test_readings_off_a_circle_are_told_and_three_gaps_cannot_be() -> None:
    bad = proved("{gap 1: 0 um, gap 19: 9 um, gap 37: 6 um, gap 55: 3 um}")
    assert value(bad, "prove.misfit") == pytest.approx(0.003)
    assert verdict(bad, "DIVIDE-020") == "warn"
    assert verdict(proved(), "DIVIDE-020") == "pass"
    assert value(proved("{gap 1: 0 um, gap 25: 3 um, gap 49: 6 um}"), "prove.misfit") is None


def test_gaps_nearly_as_deep_as_the_cut_do_not_vanish_behind_a_move() -> None:
    far = "{gap 1: 0 um, gap 19: 20 um, gap 37: 40 um, gap 55: 20 um}"
    assert verdict(proved(far, depth="3.28 mm"), "MEASURE-008") == "fail"
    assert verdict(proved(far, depth="0.8 mm"), "MEASURE-008") == "pass"
    assert value(proved(far, depth="2.3 mm"), "prove.stock") == pytest.approx(1.0 * 0.36397, rel=1e-4)


def test_what_a_ball_cannot_see_is_said_beside_the_result() -> None:
    assert "it does not see errors of the division, a lean of the blank" in block(proved())


def test_an_eccentricity_at_the_allowance_puts_the_tightest_requirement_at_its_limit() -> None:
    """Allowed eccentricity against the ledger: a hold whose own error makes up that eccentricity just meets the limit."""
    allowed, planned = value(proved(), "prove.allowed"), value(proved(), "prove.planned")
    assert isinstance(allowed, float) and isinstance(planned, float)
    grown = 3.0 + 2e3 * (allowed - planned)  # um on the dial of op 40, all else as planned
    at = judged(changed(("rests: pushed, runout: 3 um}", f"rests: pushed, runout: {grown:.6f} um}}")))
    assert at.results["run-out.wheel-teeth.spindle-bearings"].margin == pytest.approx(0.0, abs=1e-6)


@pytest.mark.parametrize(
    ("text", "says"),
    [
        (proved("{gap 80: 1 um}"), "teeth has 72 gaps, and none is number 80"),
        (proved("{third: 1 um}"), "'third' names no gap. *\n? *Write it as in gap 19"),
        (proved("{gap 1: 1 um, '1': 2 um}"), "gap 1 is read twice"),
        (proved("{gap 1: 1}"), "gap 1"),
        (proved(depth="3.3 mm"), "leave nothing of a depth of 3.3 mm"),
        (proved(more=", about: seat"), "does not turn about a face"),
        (proved(more=", about: hubb"), "hubb"),
        (changed(("cut: {bore: {}, back", "cut: {bore: {prove_out: {depth: 0.1 mm}}, back")), "bore is a bore, which has no gaps"),
    ],
)  # fmt: skip
def test_prove_out_gaps_that_cannot_be_are_refused(text: str, says: str) -> None:
    with pytest.raises(JobError) as wrong:
        read_job_text(text, "job.yaml")
    assert re.search(says, str(wrong.value))


@pytest.mark.parametrize("turned", [0, 90, 200])
def test_the_move_undoes_the_run_out_that_the_ledger_cut_the_gaps_with(turned: int) -> None:
    """A hold that is out by a known vector; the ring as the ledger has it is read exactly, and the dial found again."""
    true = ("clearance: [2 um, 8 um], rests: pushed, runout: 3 um}", "clearance: [0 um, 0 um], rests: pushed, runout: "
            f"{{measured: 12 um, uncertainty: 0 um, high_at: {turned} deg}}}}")  # fmt: skip
    said = "depth: 0.8 mm, about: hub, uncertainty: 0.1 um, readings: "
    found = judged(changed(true, (CUT, f"cut:    {{teeth: {{prove_out: {{{said}{{}}}}, cutter: fly,")))
    scope = next(s for s in found.book.instances("cut") if s.key == "40/teeth")
    proof, off = found.book.get("prove.out", scope), found.book.get("prove.off_axis", scope)
    assert isinstance(proof, Known) and isinstance(proof.value, Proof) and proof.value.teeth is not None
    assert isinstance(off, Known) and isinstance(off.value, Account)
    pattern, centre = proof.value.teeth.pattern, off.value.known()
    assert pattern is not None and abs(centre) == pytest.approx(0.006)
    read = []
    for gap in (1, 19, 37, 55):
        stands = centre + pattern.radius * cmath.exp(1j * pattern.angle(gap))
        read.append(f"gap {gap}: {1e3 * (abs(stands) - pattern.radius):.6f} um")
    text = changed(true, (CUT, f"cut:    {{teeth: {{prove_out: {{{said}{{{', '.join(read)}}}}}, cutter: fly,"))
    told = re.search(r"shows ([\d.]+) um there, high at gap (\d+)", block(text))
    assert told is not None
    assert float(told[1]) == pytest.approx(12.0, abs=0.05)
    high = min(range(1, 73), key=lambda g: abs(cmath.phase(cmath.exp(1j * (pattern.angle(g) - math.radians(turned))))))
    assert int(told[2]) == high
