"""A wheel measured over balls: the gap measured takes the place of insert, depth and growth, and is held against them."""

from __future__ import annotations

import math

import pytest

from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.combine import Combined
from setupcheck.quantities.book import Known, Open
from setupcheck.quantities.judged import Result
from setupcheck.report.remedies import remedy_in_words
from setupcheck.report.text import as_text
from setupcheck.report.uncomputed import uncomputed
from setupcheck.report.working import as_working
from setupcheck.rulebook import Finding
from setupcheck.shipped import shipped
from tests.jobs.backlash_jobs import answer, judged

MESH = "mesh: {wheel: wheel.teeth,"
SPINDLE = shipped("jobs/wheel-on-spindle.yaml").read_text("utf-8")  # the teeth are cut after the joint
ROTATOR = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")  # and before it: the hub grows under them
BALLS = {SPINDLE: 3.5, ROTATOR: 2.5}
CAUSE = "wheel measured over balls"


def number(text: str, name: str) -> float:
    return float(str(answer(text, name)))


def with_ball(job: str) -> str:
    return job.replace(MESH, f"{MESH} ball: {BALLS[job]},")


def measured(job: str, off: float = 0.0, rest: str = ", uncertainty: 8 um") -> str:
    """The job with its wheel measured so far [mm] off the size over balls as planned."""
    size = number(with_ball(job), "mesh.over_balls") + off
    return job.replace(MESH, f"{MESH} ball: {BALLS[job]}, over_balls: {{measured: {size!r} mm{rest}}},")


def combined(text: str) -> Combined:
    book = judged(text).book
    results = [book.get("stack.combined", s) for s in book.instances("stack") if s.key.startswith("backlash.")]
    (found,) = [r.value for r in results if isinstance(r, Known) and isinstance(r.value, Result)]
    return found.combined


def backlash(text: str) -> tuple[float, float]:
    return combined(text).worst.low, combined(text).worst.high


def middle(text: str) -> float:
    return sum(backlash(text)) / 2.0


def causes(text: str) -> dict[str, float]:
    return {s.cause.key: s.worst for s in combined(text).shares}


def finding(text: str, rule: str) -> Finding | None:
    found = [f for f in judged(text).evaluation.findings if f.rule == rule]
    return found[0] if found else None


def test_a_wheel_measured_as_planned_has_the_same_backlash_in_the_middle_and_knows_it_better() -> None:
    plan, known = backlash(with_ball(SPINDLE)), backlash(measured(SPINDLE))
    assert sum(plan) / 2.0 == pytest.approx(middle(measured(SPINDLE)), abs=5e-4)
    assert known[1] - known[0] < 0.65 * (plan[1] - plan[0])
    assert judged(measured(SPINDLE)).verdict == "pass"


@pytest.mark.parametrize("off", [0.020, -0.020, 0.060])
def test_a_size_over_balls_moves_the_backlash_by_the_slope_of_the_flank_where_they_touch(off: float) -> None:
    moved = middle(measured(SPINDLE, off)) - middle(measured(SPINDLE))
    ball, circle = 3.5, 120.0
    size = number(with_ball(SPINDLE), "mesh.over_balls")
    # involute through the reference circle: cos(alpha) r2 = cos(alpha_c) r_c at the ball's centre, ds2/dr_c = 2 tan(alpha_c)
    # r2/r_c; the lead angle of 3.2 deg takes a little of it
    centre = (size - ball) / 2.0
    leans = math.acos(circle / 2.0 * math.cos(math.radians(20.0)) / centre)
    rate = -math.tan(leans) * circle / 2.0 / centre
    assert moved == pytest.approx(rate * off, rel=0.02)


def test_what_insert_and_depth_do_to_the_gap_is_gone_and_what_depth_does_to_the_form_stays() -> None:
    planned, known = causes(with_ball(SPINDLE)), causes(measured(SPINDLE))
    gone = {"op 50, insert: width", "op 50, teeth: depth", "op 50, diameter of throat where touched"}
    assert gone <= set(planned)
    assert not gone & set(known)
    assert CAUSE in known
    for kept in ("housing, centre distance", "mesh, flanks that no longer fit: depth", "worm, size over wires"):
        assert planned[kept] == pytest.approx(known[kept]), kept
    # planned, the ring's run-out counts twice: it moves the depth where the throat is touched, and it swings the gaps
    runs_out = [name for name in known if name.startswith("op 50, ")]
    assert 3 == len(runs_out)
    assert all(planned[name] == pytest.approx(2.0 * known[name]) for name in runs_out)
    assert not any(name.startswith("op 40, ") for name in known)


def test_the_uncertainty_of_the_size_comes_in_as_a_gaussian_cut_at_three_standard_deviations() -> None:
    rate = 2.0 * number(measured(SPINDLE), "mesh.measured_gap_uncertainty") / 0.016
    assert 0.38 < rate < 0.41
    assert causes(measured(SPINDLE))[CAUSE] == pytest.approx(3.0 * rate * 0.004, rel=1e-6)
    twice = causes(measured(SPINDLE, rest=", uncertainty: 16 um"))[CAUSE]
    assert twice == pytest.approx(2.0 * causes(measured(SPINDLE))[CAUSE], rel=1e-6)


def test_growth_by_the_joint_is_in_the_wheel_that_was_measured() -> None:
    assert any("growth of the hub" in name for name in causes(with_ball(ROTATOR)))
    text = measured(ROTATOR)
    assert not any(name.endswith("growth of the hub") for name in causes(text))
    assert "mesh, flanks that no longer fit: pitch" in causes(text)
    # measured as cut, though the hub has grown by some micrometres since: the gap is that much wider than the plan makes it
    wider = number(text, "mesh.measured_gap") - number(text, "mesh.planned_gap")
    assert 0.001 < wider < 0.005
    assert middle(text) - middle(with_ball(ROTATOR)) == pytest.approx(wider, abs=1e-5)


def test_single_gaps_that_scatter_make_the_two_that_were_measured_uncertain_too() -> None:
    cut = "cut:    {teeth: {cutter: fly,"
    assert SPINDLE.count(cut) == 1
    scattered = measured(SPINDLE).replace(cut, f"{cut} each: {{radial: 3 um}},")
    own = causes(scattered)[f"{CAUSE}: these two gaps beside the others"]
    assert own == pytest.approx(2.0 * math.tan(math.radians(20.0)) * 0.003, rel=1e-9)
    plain, wide = backlash(measured(SPINDLE)), backlash(scattered)
    assert wide[1] - plain[1] == pytest.approx(2.0 * own, rel=1e-6)
    assert number(scattered, "mesh.measured_allowed") > number(measured(SPINDLE), "mesh.measured_allowed") + 0.003


def test_a_thread_wider_than_the_gap_measured_binds() -> None:
    found = finding(measured(SPINDLE, 0.5), "MESH-006")
    assert found is not None
    assert found.verdict == "fail"
    assert backlash(measured(SPINDLE, 0.5))[1] < 0.0


def test_a_wheel_off_what_insert_and_depth_make_is_told_with_the_depth_still_to_be_taken() -> None:
    for off, verdict in ((0.0, "pass"), (0.070, "pass"), (-0.070, "pass"), (0.100, "warn"), (-0.100, "warn")):
        found = finding(measured(SPINDLE, off), "MESH-012")
        assert found is not None
        assert verdict == found.verdict, off
    text = measured(SPINDLE, 0.100)
    found = finding(text, "MESH-012")
    assert found is not None
    lacks = number(text, "mesh.planned_gap") - number(text, "mesh.measured_gap")
    deep = lacks / 2.0 / math.tan(math.radians(20.0))
    assert f"gaps are {1e3 * lacks:.1f} um too narrow: cut {1e3 * deep:.0f} um deeper on the radius" in (found.remedy)
    assert "100 um off what insert and depth make, their errors and the measurement allow 74 um" in found.message
    loose = finding(measured(SPINDLE, -0.100), "MESH-012")
    assert loose is not None
    assert "um too wide, as if cut 54 um too deep" in loose.remedy


def test_the_depth_still_to_be_taken_brings_the_backlash_back_to_its_middle() -> None:
    text = measured(SPINDLE, 0.100)
    deep = (number(text, "mesh.planned_gap") - number(text, "mesh.measured_gap")) / 2.0 / math.tan(math.radians(20.0))
    rate = 2.0 * math.tan(math.radians(20.0))
    assert middle(text) + deep * rate == pytest.approx(middle(with_ball(SPINDLE)), abs=5e-4)


def test_what_the_measurement_may_be_off_is_the_worst_case_of_its_causes() -> None:
    planned = causes(with_ball(SPINDLE))
    makes = sum(planned[name] for name in planned if name.startswith("op 50, ") and "run-out" not in name)
    rate = number(measured(SPINDLE), "mesh.measured_gap_uncertainty") / 0.008
    ring = number(measured(SPINDLE), "mesh.measured_allowed") - 0.008 - makes / rate
    # the throat runs out to the axis the wheel turns about, and was touched at one place of it
    assert 0.0 < ring < 0.03
    assert number(measured(SPINDLE, rest=", uncertainty: 18 um"), "mesh.measured_allowed") == pytest.approx(
        number(measured(SPINDLE), "mesh.measured_allowed") + 0.010, abs=1e-9
    )


def test_without_an_uncertainty_backlash_and_comparison_are_open() -> None:
    text = measured(SPINDLE, rest="")
    assert answer(text, "mesh.measured_gap") == Open(("mesh.over_balls.uncertainty",))
    opened = {f.rule for f in judged(text).evaluation.findings if f.missing == ("mesh.over_balls.uncertainty",)}
    assert {"MESH-012", "MEASURE-001", "STACK-001"} <= opened
    assert "open" == judged(text).verdict


def test_without_the_error_of_the_depth_what_the_form_takes_is_open() -> None:
    text = measured(SPINDLE).replace("depth_error: 10 um, ", "")
    assert {
        f.missing
        for f in judged(text).evaluation.findings
        if f.rule in ("STACK-001", "MESH-012") and f.verdict == "open"
    } == {("setups.50.cut.teeth.depth_error",)}


def test_without_a_width_of_the_insert_the_backlash_is_that_of_the_gap_measured() -> None:
    text = measured(SPINDLE).replace(", width: 3.185 ±0.004", "")
    assert backlash(text) == pytest.approx(backlash(measured(SPINDLE)), abs=1e-12)
    found = finding(text, "MESH-012")
    assert found is not None
    assert ("open", ("cutters.fly.width",)) == (found.verdict, found.missing)


@pytest.mark.parametrize(
    ("ball", "size", "says"),
    [
        (3.5, 122.0, "122.000 mm over balls of 3.500 mm would rest on the bottom of the gap, at 115.200 mm: take larger balls"),
        (3.5, 129.0, "129.000 mm over balls of 3.500 mm would sit on the tips of the teeth, at 124.000 mm: take smaller balls"),
        (2.0, 127.0, "127.000 mm over balls of 2.000 mm would sit on the tips of the teeth, at 124.000 mm: take smaller balls"),
        (7.0, 128.0, "128.000 mm over balls of 7.000 mm fits no gap of this wheel: measure it again, and the ball"),
    ],
)  # fmt: skip
def test_a_size_that_no_gap_of_the_wheel_gives_is_open_and_says_both_sizes(ball: float, size: float, says: str) -> None:
    text = SPINDLE.replace(MESH, f"{MESH} over_balls: {{measured: {size!r}, ball: {ball}, uncertainty: 8 um}},")
    opened = {f.rule: f.message for f in judged(text).evaluation.findings if f.verdict == "open"}
    assert {"MESH-012": f"cannot tell: {says}", "STACK-001": f"cannot tell: {says}"} == opened


def test_the_ball_may_stand_on_either_side_and_the_plan_is_told_for_it() -> None:
    text = measured(SPINDLE)
    moved = text.replace(" ball: 3.5, over_balls: {", " over_balls: {ball: 3.5, ")
    assert moved != text
    assert backlash(moved) == backlash(text)
    for name in ("mesh.over_balls", "mesh.over_balls_tight", "mesh.measured_miss"):
        assert number(moved, name) == number(text, name)


def test_review_and_working_tell_the_gap_measured() -> None:
    text = measured(SPINDLE, 0.020)
    said = " ".join(as_text(judged(text)).split())
    assert "measured over balls it has gaps of 3.1657 mm at the reference circle, 3.1736 mm by insert and depth" in said
    loaded, book = judged(text).loaded, judged(text).book
    working = " ".join(as_working(loaded, book, "mesh.measured_gap").split())
    assert "mesh.measured_gap = 3.1657 mm" in working
    assert "124.9838 mm over balls of 3.500 mm, uncertainty 8.0 um" in working
    stack = " ".join(as_working(loaded, book, "stack.worst").split())
    assert f"{CAUSE}: gives 4.7 um" in stack


def test_a_size_over_balls_that_nothing_looks_at_is_told() -> None:
    text = measured(SPINDLE)
    assert "mesh.over_balls" not in {one.at for one in uncomputed(read_job_text(text, "job.yaml"))}
    hobbed = text.replace("fly: {kind: single-point", "fly: {kind: hob")
    assert "mesh.over_balls" in {one.at for one in uncomputed(read_job_text(hobbed, "job.yaml"))}


def test_a_job_without_a_size_over_balls_has_nothing_to_compare() -> None:
    assert finding(with_ball(SPINDLE), "MESH-012") is None
    assert answer(with_ball(SPINDLE), "mesh.measured_gap") is None


def remedies(text: str) -> str:
    found = judged(text)
    told = [remedy_in_words(found, f) for f in found.evaluation.findings if f.rule.startswith("STACK-") and f.remedy]
    return " ".join(told)


@pytest.mark.parametrize(
    ("off", "limits", "says"),
    [
        # 15.7 to 79.2 um, the middle of 25 to 150 is 87.5: 40.0 um over 2 tan(20 deg)
        (0.100, "[25 um, 150 um]", "Cut the gaps 55 um deeper on the radius with the same insert, and measure again (mesh.over_balls)."),
        (-0.100, "[25 um, 150 um]", "Gaps are not cut narrower: bring the axes 54 um closer together (mesh.centre_distance), or cut another wheel."),
        (0.100, "[70 um, 100 um]", ""),
    ],
)  # fmt: skip
def test_a_backlash_beside_its_limits_is_told_the_depth_or_the_centre_distance(
    off: float, limits: str, says: str
) -> None:
    text = measured(SPINDLE, off).replace("between: [25 um, 150 um]", f"between: {limits}")
    if says:
        assert says in remedies(text)
    else:  # its span is wider than that
        assert "deeper" not in remedies(text)
        assert "closer together" not in remedies(text)


def test_the_depth_told_typed_back_as_a_new_measurement_puts_the_backlash_in_the_middle() -> None:
    deep = 0.055 * 2.0 * math.tan(math.radians(20.0))
    rate = number(measured(SPINDLE, 0.100), "mesh.measured_gap_uncertainty") / 0.008
    text = measured(SPINDLE, 0.100 - deep / rate)
    assert middle(text) == pytest.approx(0.0875, abs=0.0005)
    assert "pass" == judged(text).verdict


def test_with_one_limit_the_depth_told_is_just_enough() -> None:
    text = measured(SPINDLE, 0.100).replace("between: [25 um, 150 um]", "at_least: 25 um")
    lacks = (0.025 - backlash(text)[0]) / 2.0 / math.tan(math.radians(20.0))
    assert f"Cut the gaps {math.ceil(1e3 * lacks)} um deeper" in remedies(text)
