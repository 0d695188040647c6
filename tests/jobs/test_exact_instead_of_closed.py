"""Where the exact gap gives a figure the closed form is silent, and speaks again where it gives none; the shares required."""

from __future__ import annotations

import re

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known, Open, Scope
from setupcheck.report.text import as_text
from setupcheck.report.working import as_working
from setupcheck.shipped import shipped

from .worm_jobs import NINETY, TWO_STARTS

SPINDLE = shipped("jobs/wheel-on-spindle.yaml").read_text(encoding="utf-8")
CLOSED = {"TILT-004", "TILT-005", "CUTTER-009"}
ASKED = "{what: contact-area, film: 6 um, at_least: 12 %}"
AREA, LENGTH = (f"contact-{x}.wheel-teeth.spindle-bearings" for x in ("area", "length"))


def judged(*pairs: tuple[str, str], text: str = SPINDLE) -> Review:
    for old, new in pairs:
        assert text.count(old) == 1, old
        text = text.replace(old, new)
    return review(read_job_text(text, "job.yaml"))


def verdicts(found: Review) -> dict[str, str]:
    return {f.rule: f.verdict for f in found.evaluation.findings}


def the_cut(found: Review) -> Scope:
    (cut,) = [s for s in found.book.instances("cut") if found.book.get("cutter.wheel_cut", s) is not None]
    return cut


def number(found: Review, name: str) -> float:
    answer = found.book.get(name, the_cut(found))
    assert isinstance(answer, Known), answer
    return float(str(answer.value))


def required(found: Review, key: str = AREA) -> float:
    (ends,) = [result.combined.worst for name, result in found.results.items() if name == key]
    assert ends.low == ends.high
    return float(ends.low)


RADIUS, INSERT = "tip_radius: 31.0", "insert: envelope"


@pytest.mark.parametrize("radius", ["28.0", "31.0", "40.0"])
def test_the_exact_gap_judges_alone_where_it_gives_numbers(radius: str) -> None:
    told = verdicts(judged((RADIUS, f"tip_radius: {radius}")))
    assert not CLOSED & set(told)
    assert {"TILT-009", "CUTTER-012", "CUTTER-003", "CUTTER-004"} <= set(told)


def test_without_the_exact_gap_the_closed_form_judges() -> None:
    told = verdicts(judged((", contact: exact, error_budget: 10 um", "")))
    assert CLOSED.issubset(told) and "TILT-009" not in told


def test_without_a_budget_the_closed_form_judges_beside_the_open_findings() -> None:
    told = verdicts(judged((", error_budget: 10 um", ""), (INSERT, "insert: mid-plane")))
    assert {r: told[r] for r in CLOSED} == {"TILT-004": "pass", "TILT-005": "pass", "CUTTER-009": "warn"}
    assert {told[r] for r in ("TILT-009", "CUTTER-012")} == {"open"}


def test_a_tilt_that_the_exact_gap_does_not_come_to_judge_is_judged_in_closed_form() -> None:
    """The insert fails as planned, so no tolerance of the tilt is worked out: a bad head is told all the same."""
    told = verdicts(judged((INSERT, "insert: mid-plane"), ("uncertainty: 1', leans", "uncertainty: 30', leans")))
    assert (told["CUTTER-012"], told["TILT-005"]) == ("fail", "warn")
    assert not {"TILT-009", "CUTTER-009"} & set(told)


OPENED = {
    "no profile of the worm": ("  profile: ZA\n", "", {"open"}, ("worm.profile",)),
    # what closed forms say of the ends of so wide a face is open too, the radius of the cutter is judged
    "a face as wide as the worm": ("width: 20}", "width: 40}", {"open", "pass"}, ()),
    "points without uncertainty": (INSERT, "insert: envelope, profile: {heights: [0, 0.6, 1.2, 1.8, 2.4, 3, 3.6, 4.2, 4.8, 5.4], "
        "widths: [1.55, 1.8, 2.2, 2.7, 3.2, 3.7, 4.2, 4.7, 5.2, 5.7]}", {"pass"}, ()),
}  # fmt: skip


@pytest.mark.parametrize("what", OPENED)
def test_an_open_exact_gap_makes_no_rule_disappear(what: str) -> None:
    old, new, verdicts_then, missing = OPENED[what]
    found = judged((old, new))
    told = verdicts(found)
    assert {told[r] for r in ("TILT-009", "CUTTER-012")} == {"open"}
    assert {told[r] for r in CLOSED} == verdicts_then
    for finding in found.evaluation.findings:
        if finding.rule in CLOSED and missing:
            assert finding.missing == missing


@pytest.mark.parametrize(
    "change", [(RADIUS, "tip_radius: 28.0"), (INSERT, "insert: mid-plane"), ("tilt: 3deg 10' 47\"", "tilt: 3.1 deg")]
)
def test_a_required_area_is_the_share_of_the_map(change: tuple[str, str]) -> None:
    found = judged(change)
    assert required(found) == number(found, "contact.share")
    assert abs(required(found) - required(judged())) > 0.01


def test_a_required_length_is_the_share_of_the_face_that_the_map_marks() -> None:
    length = "{what: contact-length, film: 6 um, at_least: 12 %}"
    found = judged((ASKED, length))
    assert required(found, LENGTH) == number(found, "contact.along_face")
    assert number(found, "contact.share") < required(found, LENGTH) <= 1.0
    copied = judged((ASKED, length), (INSERT, "insert: mid-plane"))
    assert required(copied, LENGTH) == number(copied, "contact.along_face") < required(found, LENGTH)


def test_each_requirement_has_its_own_film() -> None:
    thin, thick = (
        "{what: contact-area, film: 4 um, at_least: 5 %}",
        "{what: contact-area, film: 8 um, at_least: 5 %, name: thick}",
    )
    found = judged((f"  - {ASKED}", f"  - {thin}\n  - {thick}"))
    assert number(found, "contact.film") == pytest.approx(0.004)
    assert required(found) == number(found, "contact.share") < required(judged()) < required(found, "thick")
    assert required(found, "thick") == number(judged((ASKED, thick)), "contact.share")


def test_the_flank_that_marks_less_counts() -> None:
    """A measured insert whose left flank is too narrow at mid height leaves a ridge there, and the right one is as planned."""
    from .test_measured_insert import off_by

    asked = "require:\n  - {what: contact-area, film: 6 um, at_least: 1 %, name: area}"
    ridge = judged(("require:", asked), text=off_by("ninety", -0.010, flank="left"))
    plan = judged(("require:", asked), text=NINETY)
    assert required(plan, "area") == number(plan, "contact.share")
    assert required(ridge, "area") == number(ridge, "contact.share") < 0.8 * required(plan, "area")


def test_an_open_map_leaves_the_share_open_and_not_in_closed_form() -> None:
    old, new, *_ = OPENED["points without uncertainty"]
    found = judged((old, new))
    (stack,) = [s for s in found.book.instances("stack") if s.key == AREA]
    built = found.book.get("stack.built", stack)
    assert isinstance(built, Open) and built.missing == ("cutters.fly.profile.uncertainty",)


def test_a_required_share_says_whether_it_is_of_the_exact_gap_or_in_closed_form() -> None:
    for pairs, says, not_said in (
        ((), "Source: exact gap", "closed form"),
        (((", contact: exact, error_budget: 10 um", ""),), "Source: closed form", "exact gap"),
    ):
        found = judged(*pairs)
        told = " ".join(as_working(found.loaded, found.book, "contact-area").split())
        assert says in told
        assert not_said not in told


def test_the_report_tells_one_share_of_blue_and_not_two() -> None:
    told = " ".join(as_text(judged((RADIUS, "tip_radius: 22.0"))).split())
    assert "of blue marks" not in told
    assert "clearance under the worm's tip 0.400 mm" in told
    assert "6 um of blue marks 14.1 % of a flank" in " ".join(
        as_text(judged((", contact: exact, error_budget: 10 um", ""))).split()
    )


@pytest.mark.parametrize(
    ("job", "radius", "smaller"), [(SPINDLE, 31.0, 28.0), (TWO_STARTS, 40.0, 33.0), (NINETY, 18.5, 15.0)]
)
def test_the_closed_share_is_that_of_the_map_only_where_the_ends_stay_clear(
    job: str, radius: float, smaller: float
) -> None:
    def both(at: float) -> tuple[float, float]:
        text = job.replace(f"tip_radius: {radius}", f"tip_radius: {at}")
        closed = re.sub(r", contact: exact, error_budget: \d+ um", "", text)
        return number(judged(text=closed), "cutter.contact"), number(judged(text=text), "contact.share")

    for at in (radius, 1.3 * radius):
        closed, exact = both(at)
        assert closed == pytest.approx(exact, rel=0.15)
    closed, exact = both(smaller)
    assert closed > 1.15 * exact
