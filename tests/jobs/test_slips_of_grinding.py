"""Slips in grinding an insert, each in two routes: the rule speaks with its numbers, and falls silent in the good job."""

from __future__ import annotations

import re

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.insert import inserts, readings
from setupcheck.report.text import as_text
from setupcheck.report.uncomputed import uncomputed
from setupcheck.shipped import shipped

ROUTES = {"rotator-worm-wheel": "20.0", "wheel-on-spindle": "32.0"}
"""Shipped job -> radius of a cutter that leaves the ends of the face clear."""

GRINDING = {f"INSERT-00{n}" for n in range(1, 7)}

GOOD = (
    "{wheel_radius: 5 mm, step: 1 um, form_error: 5 um, stop_error: 1', way: swung, shank_side: 6 mm, touched_at: 8 mm}"
)


def typed(route: str, grinding: str = GOOD, *, exact: bool = True) -> str:
    """A shipped job that asks for the exact gap, with how its insert is ground."""
    text = shipped(f"jobs/{route}.yaml").read_text(encoding="utf-8")
    text, cutters = re.subn(r"tip_radius: [0-9.]+", f"tip_radius: {ROUTES[route]}, grinding: {grinding}", text)
    text = text.replace(", contact: exact", "")
    meshes = text.count("housing: grey-iron")
    assert cutters == meshes == 1
    return text.replace("housing: grey-iron", "housing: grey-iron, contact: exact") if exact else text


def judged(route: str, grinding: str = GOOD) -> Review:
    return review(read_job_text(typed(route, grinding), "slip.yaml"))


def spoken(found: Review) -> dict[str, tuple[str, str]]:
    """Verdict and message of the family's rules that do not pass, but for how the insert sits in its bar."""
    findings = (f for f in found.evaluation.findings if f.rule in GRINDING and f.verdict != "pass")
    return {f.rule: (f.verdict, f.message) for f in findings}


def with_keys(**changes: str) -> str:
    """The good way of grinding with entries exchanged."""
    text = GOOD
    for key, value in changes.items():
        text, n = re.subn(rf"{key}: [^,}}]+", f"{key}: {value}", text)
        assert n == 1
    return text


@pytest.mark.parametrize("route", ROUTES)
def test_the_good_way_of_grinding_passes_all_five_rules(route: str) -> None:
    found = judged(route)
    assert {} == spoken(found)
    rules = {f.rule for f in found.evaluation.findings if f.rule in GRINDING}
    assert {f"INSERT-00{n}" for n in range(1, 6)} == rules


@pytest.mark.parametrize(
    ("route", "edge", "limit"),
    [("rotator-worm-wheel", "8 mm", 5.66), ("wheel-on-spindle", "7 mm", 6.26)],
)
def test_a_wheels_edge_larger_than_the_hollow_fails(route: str, edge: str, limit: float) -> None:
    found = judged(route, with_keys(wheel_radius=edge))
    ((rule, (verdict, message)),) = spoken(found).items()
    assert ("INSERT-001", "fail") == (rule, verdict)
    takes = re.search(r"the hollow of the insert takes (\d+\.\d\d) mm", message)
    assert takes is not None
    assert limit == pytest.approx(float(takes[1]), abs=0.02)
    # what it says is typed in, a little less, and the rule is silent
    assert {} == spoken(judged(route, with_keys(wheel_radius=f"{float(takes[1]) - 0.01:.2f} mm")))


@pytest.mark.parametrize("route", ROUTES)
def test_turned_over_on_a_stop_out_of_square_fails_for_its_width(route: str) -> None:
    slip = spoken(judged(route, with_keys(stop_error="5'", way="turned-over")))
    assert {"INSERT-002": "fail", "INSERT-005": "warn"} == {rule: verdict for rule, (verdict, _) in slip.items()}
    assert "the limits of its width leave 4.0 um" in slip["INSERT-002"][1]
    assert {} == spoken(judged(route, with_keys(stop_error="1'", way="turned-over")))


@pytest.mark.parametrize("route", ROUTES)
def test_swung_on_the_same_stop_it_keeps_its_width_and_leans(route: str) -> None:
    ((rule, (verdict, message)),) = spoken(judged(route, with_keys(stop_error="5'"))).items()
    assert ("INSERT-003", "warn") == (rule, verdict)
    assert re.search(r"lean the insert for op \d+ by 6\.\d', 2\.0' is wanted", message)


@pytest.mark.parametrize("route", ROUTES)
def test_a_grinder_read_to_hundredths_is_too_coarse_for_five_micrometres(route: str) -> None:
    found = judged(route, with_keys(step="10 um"))
    assert {"INSERT-004": "warn"} == {rule: verdict for rule, (verdict, _) in spoken(found).items()}
    assert "move a flank by up to 6." in spoken(found)["INSERT-004"][1]


@pytest.mark.parametrize("key", ["wheel_radius", "step", "form_error", "stop_error", "way", "shank_side", "touched_at"])
def test_an_entry_left_out_is_open_and_named(key: str) -> None:
    left = re.sub(rf"{key}: [^,}}]+(, )?", "", GOOD).replace(", }", "}")
    found = judged("rotator-worm-wheel", left)
    path = f"cutters.fly.grinding.{key}"
    rules = {f.rule for f in found.evaluation.findings if path in f.missing}
    wanted = {
        "wheel_radius": {"INSERT-001"},
        "step": {"INSERT-004"},
        "form_error": {"INSERT-004", "INSERT-005"},
    }.get(key, {"INSERT-002", "INSERT-003", "INSERT-005"})
    assert wanted == rules


@pytest.mark.parametrize("route", ROUTES)
def test_a_form_error_alone_is_no_plan_of_grinding(route: str) -> None:
    found = judged(route, "{form_error: 5 um}")
    assert not [f.rule for f in found.evaluation.findings if f.rule in GRINDING]
    assert [*readings(found)] == []
    assert "laid over a drawing the form error shows from" in " ".join(inserts(found))


@pytest.mark.parametrize(
    "more", ["wheel_radius: 5 mm", "step: 1 um", "stop_error: 1'", "way: swung", "shank_side: 6 mm"]
)
def test_anything_beside_a_form_error_asks_for_the_rest(more: str) -> None:
    found = judged("rotator-worm-wheel", f"{{form_error: 5 um, {more}}}")
    told = {f.rule: f.verdict for f in found.evaluation.findings if f.rule in GRINDING}
    known = {"wheel_radius": "INSERT-001", "step": "INSERT-004"}.get(more.partition(":")[0], "")
    assert told == {f"INSERT-00{n}": "pass" if known.endswith(str(n)) else "open" for n in range(1, 6)}
    assert "cannot tell, fill cutters.fly.grinding." in " ".join(readings(found))


def test_an_empty_way_of_grinding_is_open() -> None:
    assert {f"INSERT-00{n}": "open" for n in range(1, 6)} == {
        rule: verdict for rule, (verdict, _) in spoken(judged("rotator-worm-wheel", "{}")).items()
    }


def test_a_width_without_limits_is_open_and_a_measured_one_is_not_judged_again() -> None:
    text = typed("rotator-worm-wheel", with_keys(stop_error="5'", way="turned-over"))
    assert "width: 2.387 ±0.004" in text
    bare = review(read_job_text(text.replace("width: 2.387 ±0.004", "width: 2.387"), "slip.yaml"))
    assert "open" == spoken(bare)["INSERT-002"][0]
    measured = text.replace("width: 2.387 ±0.004", "width: {measured: 2.387, uncertainty: 3 um}")
    assert {"INSERT-005"} == set(spoken(review(read_job_text(measured, "slip.yaml"))))


def test_without_the_exact_gap_nothing_of_it_is_judged_and_the_report_says_so() -> None:
    found = review(read_job_text(typed("wheel-on-spindle", exact=False), "slip.yaml"))
    assert not [f for f in found.evaluation.findings if f.rule in GRINDING]
    assert not any(name.startswith("insert.") and answer is not None for (name, _), answer in found.book.made.items())
    assert "INSERT, cutter" not in as_text(found)
    assert "cutters.fly.grinding" in {one.at for one in uncomputed(found.loaded)}
    asked = read_job_text(typed("wheel-on-spindle"), "slip.yaml")
    assert "cutters.fly.grinding" not in {one.at for one in uncomputed(asked)}
