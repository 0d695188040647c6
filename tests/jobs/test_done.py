"""As the job goes on: what is done is not proposed to be changed, what is still to come is named. Invented part and figures."""

from __future__ import annotations

import re

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.shipped import shipped
from tests.jobs.test_measuring import changed

PUSHED = "rests: pushed, runout: 3 um}"
WORSE = "rests: pushed, runout: {at_most: 3 um, measured: 14 um, uncertainty: 1 um}}"
TRUED = "runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}"
ASKED = "  - {what: run-out, of: wheel.teeth, at_most: 30 um}\n"
MID_PLANE = ASKED + "  - {what: mid-plane, at_most: 120 um}\n"


def done(op: int, *pairs: tuple[str, str]) -> str:
    return changed(*pairs, ("setups:\n", f"done: {op}\nsetups:\n"))


def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def printed(text: str) -> str:
    report = as_text(judged(text))
    assert max(map(len, report.splitlines())) <= 80
    return re.sub(r"\s+", " ", report)


def still(text: str, what: str) -> str | None:
    found = judged(text)
    scope = next(s for s in found.book.instances("stack") if s.key.startswith(what))
    answer = found.book.get("progress.open", scope)
    return str(answer.value) if isinstance(answer, Known) else None


def remedy(text: str, what: str) -> str:
    found = judged(text)
    key = next(s.key for s in found.book.instances("stack") if s.key.startswith(what))
    one = next(f for f in found.evaluation.findings if f.key == key and f.rule.startswith("STACK-001"))
    assert one.verdict != "pass"
    report = re.sub(r"\s+", " ", as_text(found))
    return report.partition(f"{one.message}")[2].partition("Source:")[0]


@pytest.mark.parametrize("op", [41, 999])
def test_an_operation_that_is_not_there_is_refused_with_those_that_are(op: int) -> None:
    with pytest.raises(JobError, match=f"there is no operation {op}. *\n? *Write one of 20, 40, 50, 70"):
        read_job_text(done(op), "job.yaml")


@pytest.mark.parametrize("bad", ["0.5", "forty", "[40]"])
def test_what_is_no_operation_number_is_refused(bad: str) -> None:
    with pytest.raises(JobError) as wrong:
        read_job_text(changed(("setups:\n", f"done: {bad}\nsetups:\n")), "job.yaml")
    assert "done" in str(wrong.value)


def test_a_job_that_does_not_say_what_is_done_has_no_such_block() -> None:
    assert "STILL TO MOVE" not in printed(changed((PUSHED, WORSE)))
    assert still(changed((PUSHED, WORSE)), "run-out") is None


def test_what_failed_names_the_truing_that_is_still_to_come_and_not_the_one_that_is_done() -> None:
    told = still(done(40, (PUSHED, WORSE)), "run-out")
    assert told is not None
    assert "the truing on hub in op 50 (setups.50.hold.centre)" in told
    assert "op 40" not in told
    assert "shim" not in told  # a shim along the axis moves no run-out


def test_a_mid_plane_names_the_shim_and_the_face_and_after_the_face_only_the_shim() -> None:
    off = ("length: 1.500 ±0.003", "length: 1.700 ±0.003")
    early, late = (still(done(op, (ASKED, MID_PLANE), off), "mid-plane") for op in (40, 50))
    assert early is not None and late is not None
    assert "the length at which op 50 faces back (setups.50.cut.back)" in early
    assert "op 50" not in late
    assert "the shim between wheel.back and spindle.shoulder in op 70" in late


def test_when_all_is_done_nothing_is_left_and_it_says_so() -> None:
    text = done(70, (PUSHED, WORSE))
    assert still(text, "run-out") == "nothing that is still to come moves it"
    assert "nothing that is still to come moves it; measure closer what is done, or ask for less" in printed(text)


def test_an_eccentric_of_the_housing_stays_open_to_the_last_and_moves_the_backlash_alone() -> None:
    text = shipped("jobs/rotator-worm-wheel.yaml").read_text(encoding="utf-8")
    for old, new in (("between: [5 um, 125 um]", "between: [30 um, 100 um]"), ("setups:\n", "done: 70\nsetups:\n")):
        assert text.count(old) == 1
        text = text.replace(old, new)
    distance = "centre_distance: 66.000 ±0.010"
    with_one = text.replace(distance, f"{distance}, eccentric: 0.4 mm")
    assert still(text, "backlash.") == "nothing that is still to come moves it"
    assert still(with_one, "backlash.") == (
        "the eccentric of the housing, by 0.400 mm of centre distance at most (mesh.eccentric)"
    )
    standing = with_one.replace("eccentric: 0.4 mm", "eccentric: 0.4 mm, eccentric_at: 60 deg")
    assert still(standing, "backlash.") == (
        "the eccentric of the housing, which can still close 0.600 mm of centre distance and open 0.200 mm (mesh.eccentric)"
    )


def test_a_requirement_that_passes_and_lost_nothing_is_not_listed() -> None:
    assert still(done(40), "run-out") is None
    assert "STILL TO MOVE, done up to op 40 no requirement fails or has lost margin" in printed(done(40))


def test_lost_margin_alone_is_listed_too() -> None:
    a_little = WORSE.replace("measured: 14 um", "measured: 4 um")
    assert "has lost margin: the truing on hub in op 50" in printed(done(40, (PUSHED, a_little)))


def test_remedies_leave_alone_what_is_done() -> None:
    bad = (PUSHED, PUSHED.replace("3 um", "40 um"))
    assert "setups.40.hold.centre" in remedy(changed(bad), "run-out")
    told = remedy(done(40, bad), "run-out")
    assert "setups.40" not in told
    assert "No entry of a setup still to come closes it" in told


def test_the_shim_of_a_joint_that_is_done_is_no_remedy_any_more() -> None:
    off = ("length: 1.500 ±0.003", "length: 1.700 ±0.003")
    assert "Make the shim" in remedy(changed((ASKED, MID_PLANE), off), "mid-plane")
    assert "Make the shim" in remedy(done(50, (ASKED, MID_PLANE), off), "mid-plane")
    assert "Make the shim" not in remedy(done(70, (ASKED, MID_PLANE), off), "mid-plane")


def test_dials_of_what_is_done_are_no_longer_gated_in_the_report_and_stay_in_the_data() -> None:
    gates = as_text(judged(done(40))).partition("DIAL READING TO ACCEPT")[2]
    assert "op 50, run-out on hub" in gates
    assert "op 40, run-out on hub" not in gates
    assert '"at": "40/centre"' in as_json(judged(done(40)))


def test_a_finding_at_a_setup_that_is_done_says_so() -> None:
    assert "Op 40 is done; for the next part: True it again" in printed(done(40, (PUSHED, WORSE)))


def test_a_measured_value_of_the_setup_at_hand_is_usual_and_a_later_one_is_told() -> None:
    assert "measured before its turn" not in printed(done(40))
    told = printed(done(20))
    assert "measured before its turn, is `done` right? run-out of hub in op 50 (setups.50.hold.centre.runout)" in told
