"""Sizes that cannot be true together are refused; sound parts that look odd are not."""

from __future__ import annotations

import pytest

from setupcheck.jobfile.reading import read_job_text
from tests.bad_input.ring import RING, refused, spoilt

SURFACE = "      back: {kind: face, at: 0, facing: -z, diameter: 96}\n"


def with_surfaces(*lines: str) -> str:
    """The sound job with more surfaces on its ring."""
    return spoilt(SURFACE, SURFACE + "".join(f"      {line}\n" for line in lines))


def problems(text: str) -> list[str]:
    return [p.problem for p in refused(text).problems]


@pytest.mark.parametrize(
    "surfaces",
    [
        ["recess: {kind: bore, diameter: 80, from: 0, to: 5}", "spigot: {kind: cylinder, diameter: 40, from: 0, to: 5}"],
        ["thread: {kind: thread, diameter: 30, from: 25, to: 30, pitch: 1.5}"],
        ["seat: {kind: taper, diameter: 31, from: 20, to: 30}"],
        ["groove: {kind: cylinder, diameter: 80, from: 9, to: 11}"],
        ["neck: {kind: cylinder, diameter: 60, from: 17, to: 20}"],
        ["hollow: {kind: throat, diameter: 94, radius: 20, at: 10}"],
        ["bolts: {kind: holes, count: 24, on_circle: 70, at: 20, diameter: 9}"],
    ],
    ids=["recess-round-a-spigot", "thread-in-a-bore", "taper-in-a-bore", "groove-in-the-rim", "neck-beside-the-teeth",
         "throat-in-the-rim", "holes-with-webs"],
)  # fmt: skip
def test_a_sound_part_that_looks_odd_is_accepted(surfaces: list[str]) -> None:
    assert read_job_text(with_surfaces(*surfaces), "job.yaml")


def test_a_pilot_smaller_than_the_bore_is_accepted_where_a_cut_takes_it_away() -> None:
    pilot = "pilot: {kind: cylinder, diameter: 20, from: 25, to: 30}"
    assert ["a bore of 32 mm leaves nothing of pilot, which is 20 mm from 25 mm to 30 mm"] == problems(
        with_surfaces(pilot)
    )
    assert read_job_text(spoilt("removes: [bar]", "removes: [bar, pilot]", with_surfaces(pilot)), "job.yaml")


def test_a_bore_a_hundredth_under_its_cylinder_is_accepted_and_one_of_its_size_is_not() -> None:
    assert read_job_text(spoilt("diameter: 32 H7", "diameter: 49.99"), "job.yaml")
    assert ["a bore of 50 mm leaves nothing of hub, which is 50 mm from 20 mm to 30 mm"] == problems(
        spoilt("diameter: 32 H7", "diameter: 50")
    )


def test_a_cylinder_of_the_size_of_its_bar_is_accepted_and_a_larger_one_is_not() -> None:
    assert read_job_text(spoilt("diameter: 96, from: 0", "diameter: 100, from: 0"), "job.yaml")
    assert ["100.1 mm cannot be cut from bar, which is 100 mm"] == problems(
        spoilt("diameter: 96, from: 0", "diameter: 100.1, from: 0")
    )


def test_a_throat_outside_the_metal_is_refused() -> None:
    assert ["a throat of 97 mm takes nothing off rim, which is 96 mm there"] == problems(
        with_surfaces("hollow: {kind: throat, diameter: 97, radius: 20, at: 10}")
    )


def test_holes_that_run_into_each_other_are_refused() -> None:
    # chord of neighbours 70 sin(180/24 deg) = 9.137 mm
    assert ["24 holes of 9.2 mm run into each other on a circle of 70 mm"] == problems(
        with_surfaces("bolts: {kind: holes, count: 24, on_circle: 70, at: 20, diameter: 9.2}")
    )


def test_teeth_may_reach_the_end_of_the_rim_but_not_over_the_hub() -> None:
    assert read_job_text(spoilt("width: 18", "width: 20"), "job.yaml")
    assert [
        "teeth of 20.1 mm run to 20.05 mm, where the part is hub with 50 mm, inside their circle of 90 mm"
    ] == problems(spoilt("width: 18", "width: 20.1"))


def test_a_pitch_figure_of_a_single_slot_is_refused() -> None:
    slot = "slot: {kind: slot, on_circle: 50, at: 25, width: 8}"
    asked = "  - {what: gap-centre-pitch, of: ring.slot, about: ring.bore, at_most: 9 um}\n"
    assert ["ring.slot is a single slot, which has no gap-centre-pitch"] == problems(with_surfaces(slot) + asked)


def test_a_grade_of_no_teeth_is_refused() -> None:
    assert ["a grade needs the teeth it speaks of"] == problems(RING + "  - {what: single-pitch, grade: 6}\n")


def test_limits_from_above_to_below_are_refused() -> None:
    assert ["at_least is above at_most"] == problems(spoilt("at_most: 90 um", "at_most: 90 um, at_least: 95 um"))


def test_a_share_above_the_whole_is_refused() -> None:
    asked = "  - {what: contact-length, at_least: 25}\n"
    assert ["contact-length is a share of the whole"] == problems(RING + asked)


@pytest.mark.parametrize("what", ["length", "allowance", "backlash", "pitch-circle"])
def test_a_figure_with_a_sign_may_have_a_limit_below_zero(what: str) -> None:
    asked = f"  - {{what: {what}, of: ring.front, about: ring.back, between: [-10 um, 10 um]}}\n"
    assert read_job_text(RING + asked, "job.yaml")
