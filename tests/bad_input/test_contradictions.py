"""Sizes that cannot be true together are refused; sound parts that look odd are not."""

from __future__ import annotations

import pytest

from setupcheck.jobfile.reading import read_job_text
from tests.bad_input.ring import RING, refused, spoilt, told

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


SLOT = "slot: {kind: slot, on_circle: 50, at: 25, width: 8}"
STOP = "stop: {on: front, error: 10 um}"


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("across: 44", "across: 50"),
        ("across: 44", "across: 1.95 in"),
        ("at: -20", "at: -30"),
        ("at: 10, runout: 90 um", "at: 32, runout: 90 um"),
        (STOP, f"{STOP}\n      clock: {{on: teeth, number: 60, error: 5 um}}"),
        ("hub: {}", "hub: {to: 51}"),
        ("{error: 20 um}", "{error: 20 um, leave: 0}"),
        ("back: {error: 15 um}", "back: {error: 15 um, leave: 0.3}"),
        ("runout: 3 um", "runout: {measured: 3 um, high_at: 3deg 20'}"),
        ("runout: 3 um", "runout: {measured: 3 um, high_at: teeth}"),
        ("runout: 3 um", "runout: {measured: 3 um, high_at: tooth 60}"),
        ("runout: 3 um", "runout: {measured: 3 um, high_at: jaw 3}"),
        ("axis_runout: 2 um", "axis_runout: {measured: 2 um, high_at: mark}"),
    ],
)
def test_what_stands_just_on_its_surface_is_accepted(old: str, new: str) -> None:
    assert read_job_text(spoilt(old, new), "job.yaml")


def test_a_circle_larger_than_the_finished_face_is_accepted_while_its_edge_is_still_to_be_turned() -> None:
    # the hub is left large in op 10 and finished in op 20: until then the front may be as wide as the bar
    rough = spoilt("back: {error: 15 um}", "back: {}, hub: {}", spoilt("hub: {}", "hub: {leave_on_diameter: 20}"))
    assert read_job_text(spoilt("across: 44", "across: 66", rough), "job.yaml")
    assert ["the indicator cannot run on 110 mm, bar is 100 mm"] == problems(spoilt("across: 44", "across: 110", rough))
    asked = "  - {what: face-run-out, of: ring.front, about: ring.bore, across: 66, at_most: 9 um}\n"
    assert ["the indicator cannot run on 66 mm, front is 50 mm"] == problems(rough + asked)
    assert read_job_text(rough + asked.replace("ring.front", "ring.front@10"), "job.yaml")


def test_a_single_slot_has_no_second_place() -> None:
    second = spoilt(STOP, "clock: {on: slot, number: 2, error: 5 um}", with_surfaces(SLOT))
    assert ["slot is a single one, and has no number 2"] == problems(second)
    assert read_job_text(spoilt("number: 2", "number: 1", second), "job.yaml")
    assert read_job_text(
        spoilt("runout: 3 um", "runout: {measured: 3 um, high_at: slot}", with_surfaces(SLOT)), "job.yaml"
    )


def test_a_quarter_without_unit_is_offered_in_the_units_of_the_file() -> None:
    for units in ("mm", "in"):
        text = spoilt(
            "units: mm", f"units: {units}", spoilt("width: 18", "width: 1/4", RING.replace('400"', "400 arcsec"))
        )
        hints = [p.hint for p in refused(text).problems if "1/4" in p.problem]
        assert [f"Write 1/4 in, or the decimal 0.25 {units}"] == hints


def test_sizes_of_a_hold_are_told_in_the_units_of_the_file() -> None:
    inches = spoilt("units: mm", "units: in", spoilt("across: 44", "across: 51", RING.replace('400"', "400 arcsec")))
    assert ["the indicator cannot run on 51 in, front is 50 in"] == problems(inches)


def test_what_stands_beside_its_surface_is_told_in_one_run_with_the_values_that_are_wrong() -> None:
    text = RING
    for old, new in (
        ("across: 44", "across: 480"),
        ("runout: 3 um", "runout: {measured: 3, high_at: upwards}"),
        ("at: -20", "at: -40"),
        ("hub: {}", "hub: {to: 51, leave: 0.3, form: 3}"),
        (STOP, "clock: {on: teeth, number: 99, error: 5}"),
    ):
        text = spoilt(old, new, text)
    assert [
        "setups.10.hold.centre.at",
        "setups.10.cut.hub.leave",
        "setups.10.cut.hub.form",
        "setups.20.hold.centre.runout.measured",
        "setups.20.hold.centre.runout.high_at",
        "setups.20.hold.square.across",
        "setups.20.hold.clock.number",
        "setups.20.hold.clock.error",
    ] == [p.path for p in refused(text).problems]


def test_a_steady_is_a_device() -> None:
    assert read_job_text(spoilt("by: three-jaw, at: 10", "by: steady, at: 10"), "job.yaml")


TRUED, OTHER_PLANE = "by: three-jaw, at: -20", "by: three-jaw, at: 10"
BORED = "by: spigot, clearance: [1 um, 3 um]"


@pytest.mark.parametrize("mandrel", ["plain-mandrel", "taper-mandrel", "expanding-mandrel"])
def test_a_mandrel_on_an_outside_is_refused(mandrel: str) -> None:
    assert [
        "23:29 setups.10.hold.centre.by | a mandrel goes into a bore, and bar is a cylinder. "
        "Write four-jaw, three-jaw or collet for this outside, or name a bore"
    ] == [told(p) for p in refused(spoilt(TRUED, f"by: {mandrel}, at: -20")).problems]
    assert read_job_text(spoilt(BORED, f"by: {mandrel}"), "job.yaml")


@pytest.mark.parametrize("device", ["collet", "pot-chuck", "vee-block", "steady"])
def test_what_lies_round_an_outside_is_refused_in_a_bore(device: str) -> None:
    assert [
        f"30:30 setups.20.hold.centre.by | a {device} lies round an outside, and bore is a bore. "
        "Write expanding-mandrel, four-jaw or three-jaw for this bore, or name an outside"
    ] == [told(p) for p in refused(spoilt(BORED, f"by: {device}")).problems]
    assert read_job_text(spoilt(TRUED, f"by: {device}, at: -20"), "job.yaml")


def test_a_mandrel_on_teeth_is_refused_without_a_collet_to_take_instead() -> None:
    assert [
        "30:31 setups.20.hold.centre.by | a mandrel goes into a bore, and teeth is a toothing. "
        "Write four-jaw or three-jaw for this outside, or name a bore"
    ] == [told(p) for p in refused(spoilt(f"on: bore, {BORED}", "on: teeth, by: taper-mandrel")).problems]


@pytest.mark.parametrize("device", ["three-jaw", "four-jaw", "soft-jaws", "shimmed-jaws", "spigot", "indicator"])
def test_jaws_a_spigot_and_a_dial_hold_outside_and_in_a_bore(device: str) -> None:
    assert read_job_text(spoilt(TRUED, f"by: {device}, at: -20"), "job.yaml")
    assert read_job_text(spoilt(BORED, f"by: {device}"), "job.yaml")


def test_a_taper_may_be_inside_or_outside_for_all_the_file_says() -> None:
    cone = "cone: {kind: taper, diameter: 30, to_diameter: 31, from: 0, to: 30}"
    for device in ("taper-mandrel", "collet"):
        text = spoilt("on: bore, by: spigot, clearance: [1 um, 3 um]", f"on: cone, by: {device}", with_surfaces(cone))
        assert read_job_text(text, "job.yaml")


def test_a_second_plane_that_names_no_device_lies_in_that_of_the_first_and_is_told_at_its_surface() -> None:
    text = spoilt(OTHER_PLANE, "at: 10", spoilt(TRUED, "by: expanding-mandrel, at: -20"))
    assert ["setups.10.hold.centre.by", "setups.10.hold.and_centre.on"] == [p.path for p in refused(text).problems]


def test_a_mandrel_on_an_outside_is_told_beside_the_values_that_are_wrong() -> None:
    text = spoilt("runout: 3 um", "runout: 3", spoilt(TRUED, "by: expanding-mandrel, at: -20"))
    assert ["setups.10.hold.centre.by", "setups.20.hold.centre.runout"] == [p.path for p in refused(text).problems]
