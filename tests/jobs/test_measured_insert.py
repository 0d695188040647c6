"""An insert measured after grinding: a true one changes nothing, a ridge or a missing value is told, wrong lists are refused."""

from __future__ import annotations

import math
from functools import cache
from pathlib import Path

import pytest

from setupcheck.cli.insert import command
from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known, Scope
from setupcheck.quantities.contact import Drill, Maps, Points, run
from setupcheck.report.text import as_text
from setupcheck.report.uncomputed import uncomputed
from setupcheck.worm.plunge_gap import Cut, Insert
from tests.bad_input.ring import refused

from .worm_jobs import NINETY, TWO_STARTS

JOBS = {"two starts": TWO_STARTS, "ninety": NINETY}
JUDGED_BY_CONTACT = {"INSERT-007", "CUTTER-011", "CUTTER-012", "CUTTER-014", "TILT-009", "MESH-009"}


@cache
def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def the_cut(found: Review) -> Scope:
    return next(s for s in found.book.instances("cut") if found.book.get("contact.made_for", s) is not None)


def value(text: str, name: str) -> object:
    found = judged(text)
    answer = found.book.get(name, the_cut(found))
    assert isinstance(answer, Known), answer
    return answer.value


def number(text: str, name: str) -> float:
    return float(str(value(text, name)))


def maps(text: str) -> Maps:
    found = value(text, "contact.maps")
    assert isinstance(found, Maps)
    return found


def verdicts(text: str) -> dict[str, str]:
    return {f.rule: f.verdict for f in judged(text).evaluation.findings}


@cache
def planned(job: str) -> tuple[tuple[float, ...], tuple[float, ...]]:
    """Heights in steps of 0.2 mm up to the top, and half widths of the planned profile to a tenth of a micrometre."""
    insert = value(JOBS[job], "insert.profile")
    assert isinstance(insert, Insert)
    top = math.floor(1e3 * float(insert.heights[-1])) / 1e3
    heights = (*(round(0.2 * i, 6) for i in range(int((top - 0.05) / 0.2) + 1)), top)
    return heights, tuple(round(0.5 * insert.width(h), 4) for h in heights)


def measured(job: str, lists: dict[str, tuple[float, ...]], rest: str = "uncertainty: 2 um") -> str:
    """The job with a measured profile, one list a line."""
    lines = [f"{key}: [{', '.join(f'{v:.4f}' for v in values)}]" for key, values in lists.items()]
    entry = (
        "profile: {\n      " + ",\n      ".join([*lines, *([rest] if rest else [])]) + "}, grinding: {form_error: 5 um}"
    )
    assert JOBS[job].count("insert: envelope") == 1
    return JOBS[job].replace("insert: envelope", f"insert: envelope, {entry}")


def true_to_plan(job: str, rest: str = "uncertainty: 2 um") -> str:
    heights, halves = planned(job)
    return measured(job, {"heights": heights, "widths": tuple(2.0 * w for w in halves)}, rest)


def off_by(job: str, size: float, *, flank: str) -> str:
    """One flank off by a bump of this size [mm] a little below mid height, 0.4 mm up and down; below zero: too narrow."""
    heights, halves = planned(job)
    middle = heights[int(0.45 * len(heights))]
    bent = tuple(w + size * math.exp(-(((h - middle) / 0.4) ** 2)) for h, w in zip(heights, halves, strict=True))
    sides = {"right": halves, "left": halves} | {flank: bent}
    return measured(job, {"heights": heights, **sides})


@pytest.mark.parametrize("job", JOBS)
def test_an_insert_measured_as_planned_has_the_contact_of_the_envelope(job: str) -> None:
    text = true_to_plan(job)
    for right_or_left, plan in zip(maps(text).both, maps(JOBS[job]).both, strict=True):
        assert plan.share == pytest.approx(right_or_left.share, abs=2e-3)
        assert plan.transmission_error == pytest.approx(right_or_left.transmission_error, abs=3e-4)
    assert number(text, "insert.off_profile") < 1e-4
    assert number(text, "insert.off_worst") == pytest.approx(0.002, abs=1e-4)
    assert {"CUTTER-012": "pass", "INSERT-006": "pass"}.items() <= verdicts(text).items()
    assert {"INSERT-006", "INSERT-007"} == {
        rule for rule in verdicts(text) if rule.startswith("INSERT")
    }  # no plan of grinding is asked for
    assert "exact gap, insert as measured (each point within 2.0 um), 6.0 um of blue" in " ".join(
        as_text(judged(text)).split()
    )
    assert "as measured" not in as_text(judged(JOBS[job]))
    assert "INSERT-006" not in verdicts(JOBS[job])


@pytest.mark.parametrize("job", JOBS)
@pytest.mark.parametrize("flank", ["right", "left"])
def test_a_flank_ten_micrometres_too_narrow_at_mid_height_is_told(job: str, flank: str) -> None:
    """It leaves a ridge on the wheel that every tooth runs over, so nearly all of it is transmission error."""
    text = off_by(job, -0.010, flank=flank)
    both = {"right": maps(text).right, "left": maps(text).left}
    other = both["left" if flank == "right" else "right"]
    assert 0.008 < both[flank].transmission_error < 0.0105
    assert other.transmission_error < 3e-4
    assert {"CUTTER-012": "fail", "INSERT-006": "warn"}.items() <= verdicts(text).items()
    assert (
        0.009 < number(text, "insert.off_profile") < 0.010
    )  # square to the flank: 10 um times the cosine of its angle
    assert value(text, "insert.off_where") == f"{flank} flank, too narrow there"
    heights = planned(job)[0]
    assert number(text, "insert.off_height") == heights[int(0.45 * len(heights))]
    (remedy,) = [f.remedy for f in judged(text).evaluation.findings if f.rule == "CUTTER-012"]
    assert "Grind the insert again, to the envelope, and measure it (cutters.fly.profile)" in remedy


@pytest.mark.parametrize("job", JOBS)
def test_a_flank_too_wide_in_its_middle_marks_less_and_hardly_runs_worse(job: str) -> None:
    """It leaves a hollow: another tooth carries over that stretch, so only the marking and the profile tell."""
    text = off_by(job, 0.010, flank="right")
    assert maps(text).right.transmission_error < 1e-3
    assert maps(text).right.share < 0.9 * maps(text).left.share
    assert {"CUTTER-012": "pass", "INSERT-006": "warn"}.items() <= verdicts(text).items()
    assert value(text, "insert.off_where") == "right flank, too wide there"


def test_a_left_flank_is_a_right_one_of_the_insert_with_its_flanks_exchanged() -> None:
    text = off_by("two starts", -0.010, flank="left")
    points, drill, setting = (value(text, f"contact.{name}") for name in ("made", "drill", "setting"))
    assert isinstance(points, Points) and isinstance(drill, Drill) and isinstance(setting, Cut)
    exchanged = run(drill, setting.radius, points.other_way, setting, 1)
    assert exchanged.transmission_error == pytest.approx(maps(text).left.transmission_error, abs=1e-9)
    assert exchanged.centre == pytest.approx(-maps(text).left.centre, abs=1e-6)


def test_one_flank_too_steep_leaves_the_same_tolerances_whichever_it_is() -> None:
    heights, halves = planned("ninety")
    steep = tuple(w - 0.006 * h / heights[-1] for h, w in zip(heights, halves, strict=True))
    right = measured("ninety", {"heights": heights, "right": steep, "left": halves})
    left = measured("ninety", {"heights": heights, "right": halves, "left": steep})
    for name in ("tilt_less", "tilt_more", "mid_plane", "depth", "wander_along", "wander_up"):
        assert number(right, f"contact.{name}") == pytest.approx(number(left, f"contact.{name}"), rel=1e-6)
    assert number(left, "contact.mid_plane") < 0.9 * number(NINETY, "contact.mid_plane")
    assert number(left, "contact.wander_up") > 1.2 * number(NINETY, "contact.wander_up")


def test_without_an_uncertainty_all_that_rests_on_the_points_is_open() -> None:
    text = true_to_plan("ninety", "")
    opened = {f.rule for f in judged(text).evaluation.findings if f.missing == ("cutters.fly.profile.uncertainty",)}
    assert opened == {*JUDGED_BY_CONTACT, "INSERT-006"}
    assert "CONTACT, op" not in as_text(judged(text))
    assert "no uncertainty of its points is stated" in " ".join(as_text(judged(text)).split())


def test_without_a_form_error_the_profile_is_open() -> None:
    text = true_to_plan("ninety").replace(", grinding: {form_error: 5 um}", "")
    (finding,) = [f for f in judged(text).evaluation.findings if f.rule == "INSERT-006"]
    assert ("open", ("cutters.fly.grinding.form_error",)) == (finding.verdict, finding.missing)


def test_points_with_a_gap_or_below_the_top_of_the_flank_are_open_with_what_to_measure() -> None:
    heights, halves = planned("ninety")
    kept = [i for i in range(len(heights)) if not 1.0 < heights[i] < 1.7]
    few = {"heights": tuple(heights[i] for i in kept), "widths": tuple(2.0 * halves[i] for i in kept)}
    short = {"heights": heights[:-4], "widths": tuple(2.0 * w for w in halves[:-4])}
    for lists, says in (
        (few, "between 1 mm and 1.8 mm above its tip the insert has no measured point: measure it there in steps of a third "
              "of the module at most, 0.50 mm"),
        (short, "the measured points end 3 mm above the insert's tip, and the flank goes up to 3.62 mm: measure on beyond that"),
    ):  # fmt: skip
        told = [f for f in judged(measured("ninety", lists)).evaluation.findings if f.rule == "CUTTER-012"]
        assert ["open"] == [f.verdict for f in told]
        assert says in told[0].message


def test_without_the_exact_gap_the_points_are_not_looked_at_and_told() -> None:
    text = true_to_plan("ninety").replace(", contact: exact, error_budget: 5 um", "")
    assert "cutters.fly.profile" in {one.at for one in uncomputed(read_job_text(text, "job.yaml"))}
    assert "cutters.fly.profile" not in {
        one.at for one in uncomputed(read_job_text(true_to_plan("ninety"), "job.yaml"))
    }
    assert "INSERT-006" not in verdicts(text)


def test_the_drawing_lays_the_points_over_the_profile(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    job, svg = tmp_path / "job.yaml", tmp_path / "insert.svg"
    job.write_text(off_by("ninety", -0.010, flank="left"), encoding="utf-8")
    command(job, svg=svg, scale=20.0, paper="A4", force=False)
    told = capsys.readouterr().out
    drawn = svg.read_text(encoding="utf-8")
    count = 2 * len(planned("ninety")[0])
    assert count == drawn.count("#b3001b")
    assert f"+ measured points ({count})" in drawn
    assert "left flank, too narrow there" in drawn
    assert "left flank, too narrow there" in " ".join(told.split())


AT = "cutters.fly.profile"
LISTS = {
    "heights": "0, 0.4, 0.8, 1.2, 1.6",
    "widths": "1.2, 1.5, 1.8, 2.1, 2.4",
}
WRONG = {
    "counts differ": ({"widths": "1.2, 1.5, 1.8, 2.1"}, f"{AT}.widths", 2, "4 entries of widths stand beside 5 heights. Write one for each height"),
    "not from the tip": ({"heights": "0.1, 0.4, 0.8, 1.2, 1.6"}, f"{AT}.heights[1]", 1, "the points begin at 0.1 mm. Begin at the tip: height 0"),
    "not rising": ({"heights": "0, 0.8, 0.4, 1.2, 1.6"}, f"{AT}.heights[3]", 1, "after a height of 0.8 mm comes 0.4 mm. Write the points from the tip upwards"),
    "a loop": ({"widths": "1.2, 1.5, 1.4, 2.1, 2.4"}, f"{AT}.widths[3]", 2, "after 1.5 mm comes 1.4 mm, at a height of 0.8 mm, and an insert grows wider"),
    "too few": ({"heights": "0, 0.4, 0.8", "widths": "1.2, 1.5, 1.8"}, f"{AT}.heights", 1, "3 points are no profile. Measure 5 heights or more"),
    "both ways": ({"right": "1, 2, 3, 4, 5", "left": "1, 2, 3, 4, 5"}, f"{AT}.widths", 2, "the widths are told twice. Write widths for flanks alike"),
    "no unit": ({"uncertainty": "2"}, f"{AT}.uncertainty", 3, "2 has no unit"),
}  # fmt: skip


@pytest.mark.parametrize("what", WRONG)
def test_a_wrong_list_is_refused_at_its_line_with_what_to_write(what: str) -> None:
    change, path, below, says = WRONG[what]
    lists = {**LISTS, **change}
    lines = [f"{k}: {v}" if k == "uncertainty" else f"{k}: [{v}]" for k, v in lists.items()]
    text = NINETY.replace("insert: envelope", "insert: envelope, profile: {\n      " + ",\n      ".join(lines) + "}")
    (told,) = refused(text).problems
    first = next(i for i, line in enumerate(text.splitlines(), 1) if "profile: {" in line)
    assert (path, first + below) == (told.path, told.line)
    assert says in f"{told.problem}. {told.hint}"


@pytest.mark.parametrize(
    ("given", "says"),
    [
        ("3 mm", "'3 mm' is no measured profile. Write it as in {heights"),
        ("{heights: 3 mm, widths: [1, 2]}", "'3 mm' is no list of sizes. Write every point"),
        ("{heights: [0, 1, 2, 3, 4], right: [1, 2, 3, 4, 5]}", "only the right flank is told. Write left too"),
        ("{heights: [0, 1, 2, 3, 4]}", "no width of the insert is written. Write widths beside heights"),
    ],
)
def test_what_is_no_profile_is_refused_in_words(given: str, says: str) -> None:
    (told,) = refused(NINETY.replace("insert: envelope", f"insert: envelope, profile: {given}")).problems
    assert says in f"{told.problem}. {told.hint}"
