"""High spots: arrows add up to the ledger's own sum, and what is drawn round it ends at the worst case that is printed."""

from __future__ import annotations

import cmath
import math
import re

import pytest

from setupcheck.flow import Review
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.pictures import known_vectors
from setupcheck.report.text import as_text

from .sheets import HIGH_AT, JOBS, SHIPPED, WHEEL, is_a_clear_picture, judged, named, said

PLATE = JOBS / "index-plate.yaml"
PLATE_HIGH = ("setups.30.hold.centre.runout", "{measured: 0.4 thou, uncertainty: 0.05 thou, high_at: 60 deg}")


def spots_of(found: Review, what: str) -> known_vectors.Spots:
    scope = next(s for s in found.book.instances("stack") if stack_of(s).require.what == what)
    return known_vectors.spots(found, scope)


@pytest.mark.parametrize("job", SHIPPED, ids=lambda p: p.stem)
def test_no_shipped_job_knows_a_direction_and_none_has_such_a_picture(job) -> None:  # type: ignore[no-untyped-def]
    assert {} == named(judged(job), "high-spots")


def test_each_requirement_that_hears_of_a_direction_has_a_clear_picture_by_its_number() -> None:
    shown = named(judged(WHEEL, *HIGH_AT), "high-spots")
    assert [f"high-spots-{n}" for n in (1, 2, 3, 4, 5, 6, 7, 9, 10)] == list(shown)
    for one in shown.values():
        is_a_clear_picture(one.draw())
    inches = named(judged(PLATE, PLATE_HIGH), "high-spots")
    assert inches
    for one in inches.values():
        text = said(is_a_clear_picture(one.draw()))
        assert "0.20 thou at 60 deg, hole 5" in text and " um" not in text


def test_the_arrows_add_up_to_the_sum_of_the_ledger() -> None:
    found = judged(WHEEL, *HIGH_AT)
    made = spots_of(found, "run-out")
    figure = found.results["run-out.wheel-teeth.spindle-bearings"].figure
    (account,) = figure.accounts  # type: ignore[attr-defined]
    assert 3 == len(made.arrows)
    assert account.known() == pytest.approx(made.sum, abs=1e-12)
    # the plain rule of the dial: half of 8 um towards 30 deg is how far the teeth stand off the bore trued so
    assert cmath.rect(0.004, math.radians(30.0)) == pytest.approx(made.arrows[0].vector, abs=1e-9)


@pytest.mark.parametrize("what", ["cumulative-pitch", "index-within", "run-out", "backlash-swing", "mid-plane"])
def test_sum_and_rest_reach_the_worst_case_that_is_printed(what: str) -> None:
    found = judged(WHEEL, *HIGH_AT)
    made = spots_of(found, what)
    worst = next(r for r in found.results.values() if r.stack.require.what == what)
    assert worst.combined.worst.high == pytest.approx((abs(made.sum) + made.rest) * made.counts)
    assert made.limit is not None and worst.stack.high == pytest.approx(made.limit * made.counts)


def test_on_paper_the_chain_ends_where_the_arrow_of_the_sum_does() -> None:
    svg = is_a_clear_picture(named(judged(WHEEL, *HIGH_AT), "high-spots")["high-spots-5"].draw())
    tips = [
        tuple(float(v) for v in node.attrib["points"].split()[0].split(","))
        for node in svg.iter("{http://www.w3.org/2000/svg}polygon")
    ]
    tips = tips[1:]  # the first is the mark
    for chain in (tips[:4], tips[4:]):  # true to the circles, and larger
        assert 4 == len(chain)
        assert chain[2] == pytest.approx(chain[3], abs=0.011)


def test_the_high_spot_of_the_sum_is_said_with_its_tooth() -> None:
    found = judged(WHEEL, *HIGH_AT)
    made = spots_of(found, "run-out")
    text = said(is_a_clear_picture(named(found, "high-spots")["high-spots-5"].draw()))
    where = re.search(r"the teeth are high at (\d+) deg, tooth (\d+)\.", text)
    assert where and made.pattern is not None
    direction = math.radians(float(where[1]))
    assert cmath.phase(made.sum / cmath.rect(1.0, direction)) == pytest.approx(0.0, abs=math.radians(0.51))
    tooth = made.pattern.angle(int(where[2]) + 0.5)
    assert abs(cmath.phase(cmath.rect(1.0, tooth) / cmath.rect(1.0, direction))) <= math.pi / made.pattern.count + 0.01
    assert "mark (0 deg) at the right" in text


def test_the_high_spot_of_a_bore_lies_where_its_wall_is_high_and_of_a_face_where_the_face_is() -> None:
    given = "{measured: 20 um, uncertainty: 1 um, high_at: 90 deg}"
    for text, what, high in (
        (f"[{{of: eye, about: boss, runout: {given}}}]", "coaxial", "wall of the bore is high at 90 deg"),
        (f"[{{of: front, about: boss, face_runout: {given}, across: 40}}]", "face-run-out", "face is high at 90 deg"),
    ):
        of = "eye" if what == "coaxial" else "front"
        asked = f"[{{what: {what}, of: part.{of}, about: part.boss, at_most: 60 um{', across: 40' * (of == 'front')}}}]"
        found = bought(text, asked)
        (one,) = named(found, "high-spots").values()
        assert high in said(is_a_clear_picture(one.draw()))


def bought(given: str, asked: str) -> Review:
    from setupcheck.flow import review
    from setupcheck.jobfile.reading import read_job_text

    return review(
        read_job_text(
            f"""
setupcheck: 1
title: A bought part. Invented
units: mm
parts:
  part:
    surfaces:
      boss:  {{kind: cylinder, diameter: 60, from: 0, to: 20}}
      eye:   {{kind: bore, diameter: 30, from: 0, to: 20}}
      front: {{kind: face, at: 20, facing: +z, diameter: 60}}
    given: {given}
require: {asked}
""",
            "bought.yaml",
        )
    )


def test_many_directions_are_drawn_as_the_largest_and_the_rest_together() -> None:
    arrows = known_vectors.arrows_of(account_of(9))
    assert known_vectors.MOST_ARROWS == len(arrows)
    assert "5 smaller ones together" == arrows[-1].name
    assert sum(a.vector for a in arrows) == pytest.approx(account_of(9).known())


def account_of(count: int):  # type: ignore[no-untyped-def]
    from setupcheck.ledger.account import Account
    from setupcheck.ledger.causes import Cause

    total = Account()
    for k in range(count):
        total = total + Account.of(
            Cause(f"op {k}: run-out", "disc", k, high=0.001, mean=cmath.rect(0.001 * (k + 1), k))
        )
    return total


def test_names_from_the_job_cannot_break_the_picture() -> None:
    found = judged(
        WHEEL,
        *HIGH_AT,
        ("require[5].name", "'<b>\"run & out\"</b> \\u202e of a name far too long to be shown on one line of it'"),
    )
    text = named(found, "high-spots")["high-spots-5"].draw()
    is_a_clear_picture(text)
    assert "<b>" not in text and "\u202e" not in text


def test_two_draws_give_the_same_bytes_and_the_report_is_not_touched() -> None:
    first, second = (named(judged(WHEEL, *HIGH_AT), "high-spots")["high-spots-1"].draw() for _ in range(2))
    assert first == second
    found = judged(WHEEL, *HIGH_AT)
    before = as_text(found)
    named(found, "high-spots")["high-spots-1"].draw()
    assert before == as_text(found)
