"""A wheel cut or placed wrong in the exact model, its mark typed into the job: cause and move undo the error.

Errors of the mid-plane are planted as a wheel that stands wrong in its housing, errors of the tilt as cut. The move is read
from the review's words and made in the model; the mark that is left must be one the review is content with.
"""

from __future__ import annotations

import math
import re
from functools import cache

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known, Open
from setupcheck.report.uncomputed import in_lines, uncomputed
from setupcheck.report.worked_out import worked_out
from setupcheck.shipped import shipped
from setupcheck.worm.ease_off import ease_off
from setupcheck.worm.marks import with_error
from setupcheck.worm.meshing import Mounting, contact
from setupcheck.worm.plunge_gap import Cut, Insert
from setupcheck.worm.wheel_flank import Flank, wheel_flank

TEXTS = {
    name: shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8")
    for name in ("rotator-worm-wheel", "wheel-on-spindle")
}
ROTATOR, SPINDLE = TEXTS
MINUTE = math.radians(1.0 / 60.0)
FILM = 0.006
FROM = "housing: grey-iron"


def with_mark(route: str, mark: str) -> str:
    assert TEXTS[route].count(FROM) == 1
    return TEXTS[route].replace(FROM, f"housing: grey-iron, mark: {{{mark}}}")


def judged(route: str, mark: str) -> Review:
    return review(read_job_text(with_mark(route, mark), "job.yaml"))


def finding(found: Review) -> tuple[str, str, str]:
    """Verdict, message and remedy of MESH-010."""
    ((verdict, message, remedy),) = [
        (f.verdict, f.message, f.remedy) for f in found.evaluation.findings if f.rule == "MESH-010"
    ]
    return verdict, message, remedy


def answer(found: Review, name: str, kind: str = "mesh") -> object:
    got = found.book.get(name, found.book.instances(kind)[0])
    return got.value if isinstance(got, Known) else got


@cache
def model(route: str) -> tuple[Flank, Flank, Insert, Cut]:
    """Both flanks, insert and setting of a job, from its own numbers."""
    text = TEXTS[route]
    if "contact: exact" not in text:
        text = text.replace(FROM, "housing: grey-iron, contact: exact")
    book = review(read_job_text(text, "job.yaml")).book
    scope = next(s for s in book.instances("cut") if isinstance(book.get("contact.insert", s), Known))
    got = {}
    for name in ("pair", "blank", "insert", "made_for"):
        known = book.get(f"contact.{name}", scope)
        assert isinstance(known, Known)
        got[name] = known.value
    right, left = (wheel_flank(got["pair"], got["blank"], side=side) for side in (1, -1))  # type: ignore[arg-type]
    return right, left, got["insert"], got["made_for"]  # type: ignore[return-value]


def marked(route: str, *, tilt: float = 0.0, axial: float = 0.0, seen_from: str = "front") -> str:
    """The mark of a wheel with these errors, as a planner would type it: to a tenth of a millimetre."""
    right, left, insert, cut = model(route)
    shown = []
    for flank in (right, left):
        cut_angle = ease_off(flank, insert, with_error(cut, tilt=tilt)).angle
        got = contact(flank, cut_angle, film=FILM, mounting=Mounting(axial=axial))
        towards = "front" if got.centre > 0.0 else "back"  # both wheels' fronts look towards +z
        shown.append(f"{{at: {abs(got.centre):.1f} mm, towards: wheel.{towards}, share: {100.0 * got.share:.1f} %}}")
    if seen_from == "back":
        shown.reverse()
    return f"seen_from: wheel.{seen_from}, right: {shown[0]}, left: {shown[1]}, film: 6 um"


PLANTED = [(route, kind, sign) for route in TEXTS for kind in ("tilt", "axial") for sign in (1.0, -1.0)]
SIZE = {"tilt": 22.0 * MINUTE, "axial": 0.12}


def left_over(kind: str, error: float, remedy: str) -> float:
    """What is left of the error once the words have been followed."""
    if kind == "tilt":
        minutes, way = re.findall(r"Lean the head nose-\w+ ([0-9.]+)' (more|less) than it was", remedy)[0]
        return error + float(minutes) * MINUTE * (1.0 if way == "more" else -1.0)
    amount, face = re.findall(r"Move the wheel ([0-9.]+) mm towards wheel\.(front|back)", remedy)[0]
    return error + float(amount) * (1.0 if face == "front" else -1.0)


@pytest.mark.parametrize("seen_from", ["front", "back"])
@pytest.mark.parametrize(("route", "kind", "sign"), PLANTED)
def test_cause_and_move_undo_a_planted_error(route: str, kind: str, sign: float, seen_from: str) -> None:
    error = sign * SIZE[kind]
    found = judged(route, marked(route, **{kind: error}, seen_from=seen_from))
    verdict, message, remedy = finding(found)
    assert (verdict, message) == ("warn", f"the mark of blue tells of: {'tilt' if kind == 'tilt' else 'offset'}")
    value = answer(found, "mark.tilt" if kind == "tilt" else "mark.offset")
    assert isinstance(value, float)
    assert 0.5 < value / error < 2.0
    rest = left_over(kind, error, remedy)
    if "Mark again after that much" in remedy:  # so near the ends it tells the least only: half way, then once more
        assert 0.0 < rest / error < 0.5
        verdict, _, remedy = finding(judged(route, marked(route, **{kind: rest}, seen_from=seen_from)))
        rest = left_over(kind, rest, remedy) if verdict == "warn" else rest
    assert abs(rest) < 0.5 * abs(error)
    good = judged(route, marked(route, **{kind: rest}, seen_from=seen_from))
    assert finding(good)[0] == "pass"
    assert answer(good, "mark.move") is None


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_the_shim_of_the_move_takes_the_drawn_sizes_the_way_the_wheel_has_to_go(sign: float) -> None:
    """The wheel stands off the worm by 0.12 mm, towards its front where positive: the shim brings it back by as much."""
    found = judged(ROTATOR, marked(ROTATOR, axial=sign * 0.12))
    needed = re.findall(
        r"Make the shim between wheel.back and spindle.shoulder ([0-9.]+) mm instead of 1\.5000 mm", finding(found)[2]
    )[0]
    text = TEXTS[ROTATOR].replace("length: 1.500 ±0.003", f"length: {needed} ±0.003")
    moved = float(str(answer(review(read_job_text(text, "job.yaml")), "place.offset", "place")))
    before = float(str(answer(found, "place.offset", "place")))
    assert (moved - before) * sign == pytest.approx(-0.12, rel=0.2)


def test_a_wheel_whose_teeth_were_cut_after_the_joint_is_told_no_shim() -> None:
    remedy = finding(judged(SPINDLE, marked(SPINDLE, axial=0.12)))[2]
    assert "Move the wheel" in remedy
    assert "shim" not in remedy


@pytest.mark.parametrize("route", TEXTS)
def test_the_mark_of_a_good_wheel_passes_and_is_the_one_announced(route: str) -> None:
    found = judged(route, marked(route))
    assert finding(found)[:2] == ("pass", "the mark of blue is where it should be on both flanks")
    ((line),) = [line for line in worked_out(found) if line.startswith("mark: ")]
    places = re.findall(r"at: ([0-9.]+) mm, towards: (wheel\.\w+)", marked(route))
    assert line.startswith("mark: it is where it should be; a wheel without errors marks right flank ")
    for (at, face), flank in zip(places, ("right", "left"), strict=True):
        assert f"{flank} flank {at} mm from the middle towards {face}" in line


def test_half_a_mark_is_open_and_so_is_one_whose_cutter_is_not_known() -> None:
    half = judged(ROTATOR, "seen_from: front, right: {at: middle}")
    assert finding(half)[:2] == ("open", "cannot tell: fill mesh.mark.left")
    text = with_mark(ROTATOR, marked(ROTATOR)).replace(" insert: envelope,", "")
    found = review(read_job_text(text, "job.yaml"))
    assert finding(found)[:2] == ("open", "cannot tell: fill cutters.fly.insert")


def test_a_mark_on_some_teeth_points_to_the_biggest_share_of_the_run_out() -> None:
    remedy = finding(judged(ROTATOR, "seen_from: front, on_teeth: some, right: {at: middle}"))[2]
    assert remedy.endswith("In the plan the most of it comes from: op 40, hub in spigot: clearance.")


def test_marks_at_both_ends_point_to_the_cutter_or_the_copied_insert() -> None:
    ends = "seen_from: front, right: {at: ends}, left: {at: ends}"
    small = with_mark(ROTATOR, ends).replace("tip_radius: 20.0", "tip_radius: 14.0")
    assert re.search(
        r"Set the tip radius above [0-9.]+ mm: 14\.0 mm is too small", finding(review(read_job_text(small, "x")))[2]
    )
    copied = with_mark(ROTATOR, ends).replace("insert: envelope", "insert: mid-plane")
    assert "Grind the insert to the envelope" in finding(review(read_job_text(copied, "x")))[2]
    assert "measure it at the bar" in finding(judged(ROTATOR, ends))[2]


def test_a_small_mark_in_its_place_points_to_the_insert_and_wrong_heights_to_nothing() -> None:
    good = marked(ROTATOR)
    small = re.sub(r"share: [0-9.]+ %", "share: 6 %", good)
    assert finding(judged(ROTATOR, small))[1] == "the mark of blue tells of: insert"
    tilted = marked(ROTATOR, tilt=-20.0 * MINUTE)
    assert finding(judged(ROTATOR, tilted.replace("share", "height: tip, share")))[1].endswith("tilt")
    verdict, message, remedy = finding(judged(ROTATOR, tilted.replace("share", "height: root, share")))
    assert (verdict, message) == ("warn", "the mark of blue tells of: unexplained")
    assert remedy.startswith("Move nothing yet.")


def test_nothing_is_said_of_a_mark_nobody_saw_and_one_of_a_hobbed_wheel_is_listed() -> None:
    plain = review(read_job_text(TEXTS[ROTATOR], "job.yaml"))
    assert [f for f in plain.evaluation.findings if f.rule == "MESH-010"] == []
    assert answer(plain, "mark.read") is None
    hobbed = with_mark(ROTATOR, "seen_from: front, right: {at: middle}").replace("kind: single-point", "kind: hob")
    loaded = read_job_text(hobbed, "job.yaml")
    assert any("mark of blue (" in line for line in in_lines(uncomputed(loaded)))
    assert not isinstance(answer(review(loaded), "mark.cause"), Open)


@pytest.mark.parametrize(
    ("mark", "says"),
    [
        (
            "seen_from: hub, right: {at: middle}",
            "mesh.mark.seen_from | hub is a cylinder of wheel, and the mark is told by a face of the wheel. "
            "Write one of wheel.front, wheel.seat, wheel.back",
        ),
        (
            "seen_from: front, right: {at: 2 mm, towards: spindle.shoulder}",
            "mesh.mark.right.towards | shoulder is a face of spindle, and the mark is told by a face of the wheel. "
            "Write one of wheel.front, wheel.seat, wheel.back",
        ),
        (
            "seen_from: front, left: {at: 8 mm, towards: back}",
            "mesh.mark.left.at | 8 mm from the middle is beyond teeth 15 mm wide. "
            "Write the middle of the mark, at most 7.5 mm",
        ),
        (
            "seen_from: front, left: {at: 2 mm}",
            "mesh.mark.left.at | a mark off the middle lies towards one end. Write towards: and that face of the wheel",
        ),
        (
            "seen_from: front, left: {at: middle, towards: back}",
            "mesh.mark.left.towards | a mark at the middle lies towards no face. "
            "Leave towards away, or write how far from the middle: at: 2.5 mm",
        ),
        (
            "seen_from: front, left: {at: -2 mm, towards: back}",
            "mesh.mark.left.at | '-2 mm' is below zero. "
            "Write how far from the middle of the face, and under towards which way",
        ),
        ("seen_from: frunt", "mesh.mark.seen_from | no surface is called 'frunt'. Did you mean front?"),
        (
            "seen_from: front, right: {at: 2 mm, towards: backk}",
            "mesh.mark.right.towards | no surface is called 'backk'. Did you mean back?",
        ),
    ],
)
def test_a_mark_that_cannot_be_is_told_at_its_key(mark: str, says: str) -> None:
    with pytest.raises(JobError) as told:
        read_job_text(with_mark(ROTATOR, mark), "job.yaml")
    assert says in [f"{p.path} | {p.problem}. {p.hint}" for p in told.value.problems]
