"""What a job states and this version does not look at: all of it is told, in text and JSON, and a pass says so."""

from __future__ import annotations

import inspect
import json

import pytest
from pydantic import BaseModel

from setupcheck.jobfile import (
    backlash_read,
    dividing,
    grinding,
    heating,
    insert_profile,
    marks,
    models,
    properties,
    prove_out,
    setups,
    touched,
    travel,
    truing,
    turning,
    worm,
)
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from setupcheck.report.uncomputed import NOT_LOOKED_AT, in_lines, uncomputed
from tests.unit.report.sample import GEAR, PLATE, WHEEL, changed, line_of, loaded, reviewed

READ = {
    "Dimension": "nominal lower upper fit measured uncertainty at_temperature",
    "Deviation": "at_most measured uncertainty standard_uncertainty high_at device mark indicator known_at",
    "Round": "kind diameter low high hole made to_diameter",
    "Flat": "kind at facing diameter hole made",
    "Throat": "kind diameter at made",
    "Toothing": "kind count on_circle at width pressure_angle module cone made",
    "Travel": "beside nearer over",
    "Pattern": "kind count on_circle at diameter width angle made",
    "Relation": "of about from_ runout face_runout across length division",
    "Part": "material surfaces given",
    "Properties": "modulus poisson expansion yield_strength tensile_strength brittle density specific_heat "
    "conductivity heat_cap last_temper porous",
    "Worm": "starts hand axial_module normal_module diametral_pitch axial_pitch lead quotient reference_diameter "
    "tip_diameter pressure_angle over_wires end_float",
    "Thickness": "nominal lower upper fit measured uncertainty at_temperature at",
    "OverWires": "nominal lower upper fit measured uncertainty at_temperature wire",
    "OverBalls": "nominal lower upper fit measured uncertainty at_temperature ball",
    "Mesh": "wheel centre_distance shift ball eccentric eccentric_at",
    "Mark": "seen_from right left on_teeth film",
    "Spot": "at towards height share",
    "Cutter": "kind bar_diameter overhang",
    "InsertProfile": "heights widths right left uncertainty",
    "Grinding": "wheel_radius step form_error magnification stop_error way shank_side touched_at",
    "Machine": "kind worm_ratio axis_runout hole_circles",
    "Distance": "from_ length",
    "Place": "axis worm_axis",
    "Require": "what of about at_most at_least between grade across at on_diameter clock heads heads_off name",
    "Waive": "rule at reason until",
    "Checked": "caution op by note",
    "Through": "by runout",
    "Span": "low high",
    "Centre": "on by at runout clearance rests x y grip grip_force through turned jaws_stand_out",
    "Square": "on by face_runout across chip",
    "Spacer": "name length",
    "MeasuredPair": "name bore journal uncertainty",
    "Stop": "on against error touches radius direction spacers",
    "Clock": "on number error",
    "Hold": "centre and_centre square stop clock",
    "MidPlane": "found error pivot",
    "Head": "mid_plane",
    "Waves": "once_per_turn twice_per_turn once_per_crank",
    "Divide": "by circle wheel worm setting clamp step drift order positions positions_error sides sides_error sighting "
    "polygon_tilt centring target plumb elevation collimation trunnion faces sine_bar blocks quarters x y",
    "Scatter": "radial tangential by",
    "Touched": "surface measured uncertainty at_most tool",
    "Cut": "passes to state leave_on_diameter leave_on_radius leave error removes from_surface finishing_cut form cutter each "
    "spindle_to_axis tool_change_after prove_out",
    "BacklashRead": "along readings uncertainty end_float",
    "ProveOut": "depth ball about readings uncertainty",
    "Heat": "hub shaft by oven_error read_by carry cold_by cold_error gauge flash_point room_volume coolant near",
    "Near": "what stands away",
    "Trued": "on about runout",
    "Join": "outer inner by square fit_error trued clearance rests stop mounted_at",
    "Setup": "op note machine part looks_at_tool keeps hold head divide cut join turning",
    "Turning": "speed chuck_speed off_centre off_by bar_behind",
    "Job": "setupcheck title job revision units room confidence parts worm mesh cutters machines setups place require "
    "waive checked done",
}
"""Entries that some figure, rule, caution or check reads, that only name things, or that are told by their own line
(size classes and limits, slot widths, the room, everything inside `heat`, `mark` and `depth_from`)."""

RECORDS = {
    record.__name__: record  # not the name it is found under: some have a second one
    for module in (
        backlash_read,
        dividing,
        grinding,
        insert_profile,
        models,
        properties,
        prove_out,
        setups,
        touched,
        truing,
        turning,
        heating,
        worm,
        marks,
        travel,
    )
    for record in vars(module).values()
    if inspect.isclass(record)
    and issubclass(record, BaseModel)
    and record.__module__ == module.__name__
    and record.model_fields
}


@pytest.mark.parametrize("name", sorted(RECORDS))
def test_every_entry_of_the_job_file_is_either_read_or_told(name: str) -> None:
    read, told = set(READ.get(name, "").split()), set(NOT_LOOKED_AT.get(name, {}))
    assert set(RECORDS[name].model_fields) == read | told
    assert not read & told


def told(text: str) -> list[str]:
    return in_lines(uncomputed(loaded(text)))


def test_everything_a_shrunk_joint_states_is_looked_at_and_of_a_screwed_one_nothing() -> None:
    assert not any(line.startswith("op 70") for line in told(WHEEL))
    screwed = " ".join(told(changed(WHEEL, ("by: shrink", "by: screw"))))
    for said in (
        "heat (hub 175 degC",
        "grips first at the shoulder-end",
        "joint degreased",
        "must carry torque 40 N m",
    ):
        assert said in screwed
    assert "serves from 5 degC to 45 degC" in screwed
    assert "roughness Rz 2.5 um of bore" in screwed


def test_properties_that_nothing_computes_with_are_told_with_their_units() -> None:
    stated = "{density: 8700, poisson: 0.34, specific_heat: 373, conductivity: 52 W/mK, porous: true}"
    screwed = changed(
        WHEEL,
        ("by: shrink", "by: screw"),
        ("  spindle:\n", f"  spindle:\n    properties: {stated}\n"),
    )
    said = " ".join(told(screwed))
    assert "density 8700 kg/m3, poisson 0.34, specific heat 373 J/kgK, conductivity 52 W/mK, porous" in said


def test_of_a_pressed_joint_only_the_heat_is_told() -> None:
    pressed = " ".join(told(changed(WHEEL, ("by: shrink", "by: press"))))
    assert "grips first at the shoulder-end" in pressed
    assert "heat (hub 175 degC, by oven, oven error 10 degC, carry 12 s, gauge 32.07 mm)" in pressed
    assert "must carry" not in pressed


def test_a_tilt_that_is_compared_with_the_worm_is_not_told_and_any_other_is() -> None:
    assert not any(line.startswith("op 40") for line in told(WHEEL))
    hobbed = changed(WHEEL, ("fly: {kind: single-point", "fly: {kind: hob"))
    said = " ".join(told(hobbed))
    assert (
        "tilt 3deg 34' 35\" (compared with a worm whose wheel is cut gap by gap, or with the root cone of bevel teeth)"
        in said
    )
    assert "depth 3.3 mm of teeth (held against the passes only)" in said


def test_a_head_that_stands_straight_has_no_tilt_to_compare() -> None:
    straight = changed(WHEEL, ("tilt: 3deg 34' 35\"", "tilt: 0 deg"))
    assert "not compared" not in " ".join(told(straight))


def test_size_classes_and_size_limits_are_told_and_bare_sizes_are_not() -> None:
    lines = told(WHEEL)
    assert any("size class 48 h6 of hub" in line for line in lines)
    together = " ".join(lines)  # bore and journal are held against each other, so they are not told
    assert "32 H5 of bore" not in together
    assert "of journal" not in together
    assert "rim" not in " ".join(lines)


def test_worm_mesh_and_cutter_are_told_where_no_wheel_is_cut_by_a_single_point() -> None:
    lines = told(changed(WHEEL, ("fly: {kind: single-point", "fly: {kind: hob")))
    assert any(line.startswith("worm: profile ZA") and "thread thickness measured" in line for line in lines)
    assert any(
        line.startswith("mesh: error of the shaft angle 1'; housing of grey-iron") or "housing" in line
        for line in lines
    )
    assert any(line.startswith("cutter fly: tip radius 20 mm, insert envelope") for line in lines)
    assert not any(line.startswith(("worm", "mesh", "cutter")) for line in told(WHEEL))


def test_what_only_the_backlash_needs_is_told_where_none_is_required() -> None:
    lines = " ".join(told(changed(WHEEL, ("  - {what: backlash, between: [5 um, 125 um]}\n", ""))))
    for said in (
        "housing of grey-iron",
        "width of the insert 2.387",
        "error of the depth of teeth 5 um",
        "worm of 16MnCr5",
    ):
        assert said in lines


def test_sizes_of_an_inch_file_stay_in_inches() -> None:
    assert any("size limits 1.250 +0.0005/0 in of bore" in line for line in told(PLATE))


BARE = changed(
    GEAR,
    ("diameter: 20 H7,", "diameter: 20,"),
    ("{kind: form-cutter, diameter: 60}", "{kind: form-cutter}"),
    (", depth: 3.4, depth_from: outside, passes: [3.1, 0.3]", ""),
)


def test_a_pass_with_something_left_out_says_that_it_is_one_of_what_is_computed() -> None:
    text = as_text(reviewed(WHEEL))
    assert text.splitlines()[1].startswith("PASS of what this version computes   ")
    assert text.index("WHAT WAS ASKED") < text.index("NOT COMPUTED BY THIS VERSION") < text.index("DIAL READING")


def test_a_pass_with_nothing_uncomputed_says_no_more_than_that() -> None:
    text = as_text(reviewed(BARE))
    assert text.splitlines()[1].startswith("PASS   ")
    assert "NOT COMPUTED" not in text


def test_json_lists_the_same_with_path_and_line_before_what_was_taken() -> None:
    data = json.loads(as_json(reviewed(WHEEL)))
    assert ["not_computed", "taken"] == list(data)[-2:]
    hub = {
        "at": "parts.wheel.surfaces.hub.diameter",
        "line": line_of(WHEEL, "hub:      {kind: cylinder"),
        "what": "wheel: size class 48 h6 of hub",
    }
    assert hub in data["not_computed"]
    assert [] == json.loads(as_json(reviewed(BARE)))["not_computed"]
