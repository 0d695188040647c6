"""Worms of odd sizes go through a whole review: findings may be anything, but nothing ends in an exception."""

from __future__ import annotations

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from setupcheck.errors import JobError
from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.report.worked_out import worked_out
from setupcheck.shipped import shipped

JOB = shipped("jobs/rotator-worm-wheel.yaml").read_text(encoding="utf-8")
MODULE = "  axial_module: 1.5\n"
THREAD = "{measured: 2.310 mm, uncertainty: 4 um}"
BACKLASH = "{what: backlash, between: [5 um, 125 um]}"


def told(text: str) -> Review:
    """The review, with everything the report and the JSON say worked out as well."""
    found = review(read_job_text(text, "odd.yaml"))
    as_text(found, everything=True)
    as_json(found)
    return found


def spoken(found: Review) -> set[str]:
    return {f.rule for f in found.evaluation.findings if f.verdict == "fail"}


@pytest.mark.parametrize(
    "line",
    [*(f"axial_module: {m}" for m in (1.75, 1.8, 1.9, 1.95, 2, 2.5, 3)), "axial_pitch: 6.0"],
)
def test_a_module_that_is_not_the_wheels_is_told_and_only_the_threaded_length_is_left_out(line: str) -> None:
    found = told(JOB.replace(MODULE, f"  {line}\n"))
    assert {"MESH-001", "MESH-002"} <= spoken(found)
    said = " ".join(worked_out(found))
    assert "reference circle" in said
    assert "of thread to touch the whole face" not in said
    assert "of thread to touch the whole face" in " ".join(worked_out(told(JOB)))


def test_a_thread_far_too_thick_for_its_wheel_is_told_and_not_computed() -> None:
    odd = JOB.replace("count: 72", "count: 4").replace("  starts: 1\n", "  starts: 2\n")
    found = told(odd.replace(THREAD, "{measured: 108 mm, uncertainty: 4 um, at: 27}"))
    assert any("the thread is too thick for this wheel" in f.message for f in found.evaluation.findings)


def test_a_pressure_angle_that_no_worm_has_is_told_and_not_computed() -> None:
    odd = JOB.replace("pressure_angle: 20 deg", "pressure_angle: 60 deg")
    found = told(odd.replace(BACKLASH, "{what: backlash, along: normal, between: [5 um, 125 um]}"))
    assert any("pressure angle must lie between 0 and 45 deg" in f.message for f in found.evaluation.findings)


SIZE = st.one_of(
    st.sampled_from([0.01, 0.5, 1.0, 1.5, 1.75, 2.0, 3.0, 4.712, 6.0, 10.0, 24.0, 27.0, 100.0, 1000.0]),
    st.floats(0.05, 60.0, allow_nan=False).map(lambda size: round(size, 4)),
)
ODD: dict[str, tuple[str, ...]] = {
    MODULE: (
        "  axial_module: S\n",
        "  diametral_pitch: S\n",
        "  normal_module: S\n",
        "  quotient: S\n",
        "  lead: S\n",
        "  axial_pitch: S\n",
        "  axial_pitch: {measured: S, uncertainty: 20 um}\n",
        "  axial_module: 1.5\n  lead: {measured: S, uncertainty: 20 um}\n",
        "",
    ),
    "  starts: 1\n": ("  starts: 2\n", "  starts: 12\n", ""),
    "  reference_diameter: 24\n": ("  reference_diameter: S\n", "  quotient: S\n", ""),
    "  tip_diameter: 27\n": ("  tip_diameter: S\n", ""),
    "pressure_angle: 20 deg": ("pressure_angle: 1 deg", "pressure_angle: 44 deg", "pressure_angle: 60 deg"),
    "profile: ZA": ("profile: ZN", "profile: ZI", "profile: ZK"),
    THREAD: ("{measured: S mm, uncertainty: 4 um}", "{measured: S mm, uncertainty: 4 um, at: S}", "S"),
    "  end_float: 10 um\n": ("  over_wires: {measured: S, wire: S, uncertainty: 4 um}\n",),
    "centre_distance: 66.000 ±0.010": (
        "centre_distance: S",
        "shift: 1",
        "shift: -1",
        "centre_distance: 66, ball: S",
        "centre_distance: 66 ±0.01, over_balls: {measured: S, ball: S, uncertainty: 8 um}",
        "centre_distance: 66 ±0.01, over_balls: {measured: 111.2, ball: S, uncertainty: 8 um}",
    ),
    "count: 72": ("count: 4", "count: 30", "count: 300"),
    "on_circle: 108": ("on_circle: S",),
    "at: 12, width: 15}": ("at: 12, width: S}",),
    "tip_radius: 20.0": ("tip_radius: S",),
    "width: 2.387 ±0.004": ("width: S", "width: S, width_at: S"),
    "depth: 3.3": ("depth: S",),
    "tilt: 3deg 34' 35\"": ("tilt: 30 deg",),
    BACKLASH: ("{what: backlash, along: normal, between: [5 um, 125 um]}",),
}


@st.composite
def odd_jobs(draw: st.DrawFn) -> str:
    """The good job with one to three of its lines made odd."""
    text = JOB
    for line in draw(st.lists(st.sampled_from(sorted(ODD)), min_size=1, max_size=3, unique=True)):
        assert text.count(line) == 1, line
        instead = draw(st.sampled_from(ODD[line]))
        while "S" in instead:
            instead = instead.replace("S", f"{draw(SIZE):.15g}", 1)
        text = text.replace(line, instead)
    return text


@settings(max_examples=60, deadline=None, suppress_health_check=list(HealthCheck))
@given(odd_jobs())
def test_worms_of_odd_sizes_end_in_findings_or_in_a_told_mistake_of_the_file(text: str) -> None:
    try:
        told(text)
    except JobError as refused:
        assert refused.problems


def test_a_missing_pressure_angle_is_asked_of_the_worm() -> None:
    found = told(JOB.replace("  pressure_angle: 20 deg\n", ""))
    asked = {m for f in found.evaluation.findings for m in f.missing}
    assert asked == {"worm.pressure_angle"}


def test_a_thickness_measured_further_out_is_told_at_the_reference_diameter_even_where_no_wire_fits() -> None:
    found = told(JOB.replace(THREAD, "{measured: 2.310 mm, uncertainty: 4 um, at: 25}"))
    (said,) = (line for line in worked_out(found) if line.startswith("thread:"))
    # 2.310 + 1 mm x tan(20 deg); no wire that touches such a thread at the reference diameter stands proud of the tip
    assert said == "thread: 2.6740 mm thick at the reference diameter; best wire 2.165 mm"


@pytest.mark.parametrize(
    ("thread", "says"),
    [
        (
            "{measured: 2.350 mm, uncertainty: 4 um}",
            'backlash: 29.1 um of interference to 76.5 um of backlash along the reference circle (292" at the wheel, 5.85 deg of '
            "the worm): at its least the worm binds",  # 76.5 um over 54 mm, and over 0.75 mm
        ),
        (
            "{measured: 2.310 mm, uncertainty: 4 um, at: 25}",
            "backlash: 247.5 um to 353.2 um of interference along the reference circle: no backlash anywhere, the worm does not go in",
        ),
    ],
)
def test_a_backlash_below_zero_is_told_as_interference_and_not_as_a_turn_of_the_worm(thread: str, says: str) -> None:
    (said,) = (line for line in worked_out(told(JOB.replace(THREAD, thread))) if line.startswith("backlash:"))
    assert said == says


@pytest.mark.parametrize(
    ("thread", "says"),
    [
        ("{measured: 1.60 mm, uncertainty: 4 um}", "0.34 of its axial pitch"),
        ("{measured: 2.310 mm, uncertainty: 4 um, at: 26}", "the diameter it was measured at (26.000 mm is written)"),
        ("{measured: 2.90 mm, uncertainty: 4 um}", "along the axis at the reference diameter"),
    ],
)
def test_a_thread_far_from_half_the_pitch_is_doubted_with_its_numbers(thread: str, says: str) -> None:
    doubted = [f for f in told(JOB.replace(THREAD, thread)).evaluation.findings if f.rule == "MESH-011"]
    assert [f.verdict for f in doubted] == ["warn"]
    assert says in f"{doubted[0].message} {doubted[0].remedy}"


def test_a_thread_that_is_not_known_is_not_doubted() -> None:
    without = told(JOB.replace(f"  thread_thickness: {THREAD}\n", ""))
    assert [f for f in without.evaluation.findings if f.rule == "MESH-011"] == []
