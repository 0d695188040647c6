"""How an insert is ground, written wrongly: each entry refused at its place, with what to write."""

from __future__ import annotations

import pytest

from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped
from tests.bad_input.ring import refused, spoilt

WHEEL = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")
INSERT = "insert: envelope, "
AT = "cutters.fly.grinding"


@pytest.mark.parametrize(
    ("grinding", "expected"),
    [
        (
            "5 mm",
            f"{AT} | '5 mm' does not say how it is ground. Write it as in "
            "{wheel_radius: 5 mm, step: 1 um, form_error: 5 um}",
        ),
        (
            "[5 mm, 1 um]",
            f"{AT} | [5 mm, 1 um] does not say how it is ground. Write it as in "
            "{wheel_radius: 5 mm, step: 1 um, form_error: 5 um}",
        ),
        ("{step: 0 um}", f"{AT}.step | '0 um' cannot be ground. Write what the grinder can do, as in 1 um"),
        ("{wheel_radius: -5 mm}", f"{AT}.wheel_radius | '-5 mm' is not a size. Write a length above zero"),
        ("{way: turned}", f"{AT}.way | 'turned' is not known here. Did you mean turned-over?"),
        (
            "{magnification: 2000}",
            f"{AT}.magnification | 2000 is no magnification. Write how many times larger the insert is shown, as in 20",
        ),
        ("{magnification: 20 mm}", f"{AT}.magnification | '20 mm' is a length, not a number. Write a number, as in 72"),
        ("{wheel: 5 mm}", f"{AT}.wheel | 'wheel' is not a key of this entry. Did you mean wheel_radius?"),
    ],
)
def test_an_entry_that_cannot_be_meant_is_refused_at_its_place(grinding: str, expected: str) -> None:
    told = refused(spoilt(INSERT, f"{INSERT}grinding: {grinding}, ", WHEEL)).problems
    assert [expected] == [f"{p.path} | {p.problem}. {p.hint}" for p in told]


@pytest.mark.parametrize(
    ("key", "bare"), [("step", "1"), ("form_error", "0.005"), ("stop_error", "5"), ("stop_error", "5 um")]
)
def test_an_error_needs_its_unit(key: str, bare: str) -> None:
    (told,) = refused(spoilt(INSERT, f"{INSERT}grinding: {{{key}: {bare}}}, ", WHEEL)).problems
    assert told.path == f"{AT}.{key}"
    assert "write" in told.hint.lower()


def test_all_entries_are_read() -> None:
    grinding = "{wheel_radius: 5, step: 1 um, form_error: 5 um, stop_error: ±5', way: turned-over, shank_side: 6, touched_at: 8}"
    read = (
        read_job_text(spoilt(INSERT, f"{INSERT}grinding: {grinding}, ", WHEEL), "job.yaml").job.cutters["fly"].grinding
    )
    assert read is not None
    assert (5.0, 0.001, 0.005, "turned-over", 6.0, 8.0) == (
        read.wheel_radius,
        read.step,
        read.form_error,
        read.way,
        read.shank_side,
        read.touched_at,
    )
