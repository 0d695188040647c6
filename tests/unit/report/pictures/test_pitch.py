"""Cumulative pitch: the band is the printed worst case, draws lie within it, measured points are those of the reading."""

from __future__ import annotations

import math
import re
from pathlib import Path

import pytest

from setupcheck.flow import ReadBack, Review, read_back, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.pictures import pictures, pitch
from setupcheck.report.text import as_text

from ....jobs.divided_jobs import disc
from ....published.division_files import Shop, as_deviations, rows, stations
from .sheets import HIGH_AT, JOBS, SHIPPED, WHEEL, is_a_clear_picture, judged, named, said

DIVIDED = {
    "encoder-disc-mount": ["pitch-1"],
    "index-plate": ["pitch-4"],
    "rotator-worm-wheel": ["pitch-1"],
    "spur-gear-on-mandrel": ["pitch-1"],
    "splined-shaft": ["pitch-5"],
    "bevel-pinion-blank": ["pitch-8"],
    "sprocket": ["pitch-4"],
    "wheel-on-spindle": ["pitch-1"],
}
BY_PLATE = '{by: hole-circle, circle: 18, wheel: {once_per_turn: ±10"}, setting: 2"}'


def plan(found: Review, what: str, name: str) -> pitch.Planned:
    scope = next(s for s in found.book.instances("stack") if stack_of(s).require.what == what)
    return pitch.planned(found, scope, name)


def reading(folder: Path, count: int = 72, **planted: float) -> ReadBack:
    shop = Shop(5, **planted)  # type: ignore[arg-type]
    file = folder / "test.csv"
    both = [(1, 1), (1, -1), (2, 1), (2, -1)]
    file.write_text(
        as_deviations(rows(shop, both, stations(count), turned=False), column="angle_deg"), encoding="utf-8"
    )
    return read_back(WHEEL, file)


@pytest.mark.parametrize("job", SHIPPED, ids=lambda p: p.stem)
def test_each_ring_that_a_requirement_speaks_of_has_one_clear_picture(job: Path) -> None:
    found = judged(job)
    shown = named(found, "pitch")
    assert DIVIDED.get(job.stem, []) == list(shown)
    for one in shown.values():
        is_a_clear_picture(one.draw())


def test_the_band_is_the_printed_worst_case_and_its_limit_the_one_asked_for() -> None:
    found = judged(WHEEL)
    made = plan(found, "cumulative-pitch", "wheel.teeth")
    result = next(r for r in found.results.values() if r.stack.require.what == "cumulative-pitch")
    assert (result.combined.worst.high, result.stack.high) == (made.worst, made.limit)
    text = said(is_a_clear_picture(named(found, "pitch")["pitch-1"].draw()))
    printed = " ".join(as_text(found).split())
    assert "cumulative-pitch at teeth about bearings 35.6 of 40.0 um" in printed
    assert "worst case 35.6 um in all" in text and "limit 40.0 um in all" in text
    assert "95 in 100 stay under 17.1 um" in printed and "one draw, 17.1 um in all" in text


@pytest.mark.parametrize("what", ["index-within", "on-workpiece"])
def test_a_figure_of_the_angle_is_brought_back_to_the_circle(what: str) -> None:
    found = judged(WHEEL)
    made = plan(found, what, "wheel.teeth")
    result = next(r for r in found.results.values() if r.stack.require.what == what)
    factor = 0.5 / made.radius if what == "index-within" else 50.0 / made.radius
    assert made.worst is not None and result.combined.worst.high == pytest.approx(made.worst * factor)


def test_what_gaps_add_within_a_pitch_is_in_the_band_and_said() -> None:
    asked = '[{what: index-within, of: wheel.teeth, at_most: 75"}]'
    found = judged(JOBS / "wheel-on-spindle.yaml", ("require", asked))
    made = plan(found, "index-within", "wheel.teeth")
    (result,) = found.results.values()
    assert made.worst is not None
    assert result.combined.worst.high == pytest.approx(made.worst / 2.0 / made.radius)
    assert 0.0 < made.gaps < made.worst
    assert "come within a pitch" in said(is_a_clear_picture(named(found, "pitch")["pitch-1"].draw()))


@pytest.mark.parametrize("job", [j for j in SHIPPED if j.stem in DIVIDED], ids=lambda p: p.stem)
def test_every_draw_lies_within_the_band(job: Path) -> None:
    found = judged(job)
    scope = min(
        (s for s in found.book.instances("stack") if stack_of(s).require.what in pitch.ASKED),
        key=lambda s: pitch.ASKED.index(stack_of(s).require.what),
    )
    made = pitch.planned(found, scope, stack_of(scope).of)
    assert made.worst is not None and made.count == len(made.one) == len(made.low)
    half = made.worst / 2.0 + 1e-9
    assert all(-half <= v <= half for v in (*made.low, *made.high, *made.one))
    assert max(made.one) + min(made.one) == pytest.approx(0.0, abs=1e-8)  # zero in the middle
    assert max(made.one) - min(made.one) == pytest.approx(made.likely, abs=1e-8)
    assert all(low < high for low, high in zip(made.low, made.high, strict=True))


def test_a_known_direction_shows_in_the_draws() -> None:
    """5 um of known eccentricity against nothing known: the middle of the draws becomes a wave."""
    bare, known = (plan(judged(WHEEL, *more), "cumulative-pitch", "wheel.teeth") for more in ((), HIGH_AT))

    def swing(made: pitch.Planned) -> float:
        middles = [(low + high) / 2.0 for low, high in zip(made.low, made.high, strict=True)]
        return max(middles) - min(middles)

    assert swing(bare) < 0.0005
    assert swing(known) == pytest.approx(2.0 * 0.005 / math.cos(math.radians(20.0)), rel=0.15)


def test_measured_points_are_those_of_the_reading(tmp_path: Path) -> None:
    read = reading(tmp_path, e=0.008, phi=60.0)
    points = pitch.measured(read, "wheel.teeth")
    assert {1, -1} == {p.direction for p in points}
    ranges = [
        max(p.value for p in mine) - min(p.value for p in mine)
        for way in (1, -1)
        for mine in [[p for p in points if p.direction == way]]
    ]
    assert read.reduced.range * read.of.radius == pytest.approx(max(ranges))
    assert 72 == len([p for p in points if p.direction == 1]) == len({round(p.place, 6) for p in points})
    assert all(0.5 <= p.place <= 72.5 for p in points)
    for point in points:  # twice the scatter of a mean of two runs; the first place was read again at the end of each
        times = 4.0 if point.place == pytest.approx(1.0) else 2.0
        assert 2.0 * read.reduced.scatter / math.sqrt(times) * read.of.radius == pytest.approx(point.uncertain)


def test_measured_and_planned_have_one_sense_and_one_numbering(tmp_path: Path) -> None:
    """Teeth that stand off their axis as the plan knows: the points lie on the draws, place by place."""
    change = (
        "setups.50.hold.centre.runout",
        "{at_most: 60 um, measured: 60 um, uncertainty: 1 um, high_at: 90 deg}",
    )
    found = judged(WHEEL, change)
    made = plan(found, "cumulative-pitch", "wheel.teeth")
    read = reading(tmp_path, e=0.030, phi=90.0)
    points = pitch.measured(read, "wheel.teeth")
    middles = [(low + high) / 2.0 for low, high in zip(made.low, made.high, strict=True)]
    mean = {way: {round(p.place): p.value for p in points if p.direction == way} for way in (1, -1)}
    for gap, middle in enumerate(middles, 1):
        both = (mean[1][gap] + mean[-1][gap]) / 2.0
        assert middle == pytest.approx(both, abs=0.006), gap
    assert max(middles) > 0.025


def test_points_are_drawn_where_the_reading_has_them(tmp_path: Path) -> None:
    read = reading(tmp_path, e=0.008)
    text = pictures(judged(WHEEL), read)["pitch-1"].draw()
    svg = is_a_clear_picture(text)
    told = said(svg)
    assert "PLANNED and MEASURED" in told and "measured forward" in told and "measured reverse" in told
    assert re.search(r"±\d+\.\d um scatter, k = 2", told)
    dots = next(n.attrib["d"] for n in svg.iter("{http://www.w3.org/2000/svg}path") if "h0" in n.attrib["d"])
    assert 72 == dots.count("M")


def test_a_reading_of_other_teeth_is_not_drawn(tmp_path: Path) -> None:
    read = reading(tmp_path)
    assert [] == pitch.measured(read, "gear.teeth")
    assert "MEASURED" not in said(
        is_a_clear_picture(pictures(judged(JOBS / "index-plate.yaml"), read)["pitch-4"].draw())
    )


@pytest.mark.parametrize("count", [2, 3, 7, 1000])
def test_small_and_large_rings_are_clear(count: int) -> None:
    found = review(read_job_text(disc(BY_PLATE, count), "disc.yaml"))
    shown = named(found, "pitch")
    for one in shown.values():
        is_a_clear_picture(one.draw())
    assert shown


def without_hand() -> Review:
    """The wheel of an unknown lead: nothing of its division can be told."""
    text = WHEEL.read_text(encoding="utf-8").replace("  hand: right\n", "")
    return review(read_job_text(text, "no-hand.yaml"))


def test_a_ring_of_which_nothing_can_be_told_has_no_picture() -> None:
    from setupcheck.report.sheet import as_sheet

    found = without_hand()
    assert {} == named(found, "pitch")
    titles = [one.title for one in named(judged(WHEEL), "pitch").values()]
    assert titles and all(title.startswith("Cumulative pitch of") for title in titles)
    assert "Cumulative pitch of" not in as_sheet(found)


def test_what_is_missing_of_the_plan_is_said_beside_what_was_read(tmp_path: Path) -> None:
    text = said(is_a_clear_picture(pictures(without_hand(), reading(tmp_path))["pitch-1"].draw()))
    assert "open: fill worm.hand" in text and "worst case" not in text and "MEASURED" in text


def test_a_ring_asked_for_its_steps_alone_has_no_limit() -> None:
    asked = "[{what: single-pitch, of: wheel.teeth, at_most: 8 um}]"
    found = judged(WHEEL, ("require", asked))
    text = said(is_a_clear_picture(named(found, "pitch")["pitch-1"].draw()))
    assert "worst case 35.6 um in all" in text and "no limit of it is asked for" in text


def test_two_draws_give_the_same_bytes() -> None:
    first, second = (named(judged(WHEEL), "pitch")["pitch-1"].draw() for _ in range(2))
    assert first == second


def test_what_a_file_is_called_or_lacks_cannot_break_the_picture(tmp_path: Path) -> None:
    text = WHEEL.read_text(encoding="utf-8").replace("Feed rotator worm wheel", "<b>&\\u202e</b>")
    found = review(read_job_text(text, "<i>.yaml"))
    for one in (*named(found, "pitch").values(), *named(found, "heating").values()):
        assert "<b>" not in one.draw()
        is_a_clear_picture(one.draw())
