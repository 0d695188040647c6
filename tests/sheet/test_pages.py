"""What stands on the pages, for jobs of every kind: words, boxes, points to check and sign."""

from __future__ import annotations

from functools import cache

import pytest

from setupcheck.flow import Review
from setupcheck.report.sheet import as_sheet
from setupcheck.report.sheet.boxes import Row
from setupcheck.report.sheet.pages import Operation, sheet_of
from setupcheck.report.text import as_text
from setupcheck.shipped import shipped
from tests.unit.report.sample import PLATE, WHEEL, changed, flat, reviewed

HUB = shipped("jobs/coupling-hub.yaml").read_text(encoding="utf-8")
FAILING = shipped("jobs/mistakes/hidden-chuck-run-out.yaml").read_text(encoding="utf-8")

SPREAD = changed(WHEEL, ('setting: 2", clamp: 0"}', 'setting: 2", clamp: 0", order: spread}'))
COLD = changed(
    HUB,
    ("hub: 260 degC, by: oven, oven_error: 10 degC, carry", "shaft: -70 degC, cold_by: dry-ice, cold_error: 5 degC, carry"),
)  # fmt: skip
READ = "readings: {gap 1: 0 um, gap 19: 6 um, gap 37: 11 um, gap 55: 4 um}, uncertainty: 2 um"
PROVED = changed(WHEEL, ("0.3]}", f"0.3], prove_out: {{depth: 0.8 mm, ball: 2.5 mm, about: hub, {READ}}}}}"))
PROVING = changed(WHEEL, ("0.3]}", "0.3], prove_out: {depth: 0.8 mm}}"))
BY_TABLE = PLATE[PLATE.index("divide:") : PLATE.index("}\n    cut:\n      holes")] + "}"
TRUED = "centre: {on: bore, by: indicator, at: 0.3125, runout: 0.2 thou}"
BY_XY = changed(
    PLATE,
    (BY_TABLE, "divide: {by: x-y, x: 0.2 thou, y: 0.2 thou, step: 0.1 thou}"),
    (TRUED, "centre: {on: bore, by: edge-finder, x: 0.3 thou, y: 0.4 thou}"),
)
OPEN = changed(PLATE, (TRUED, "centre: {on: bore, by: indicator}"))
NOTHING_ASKED = PLATE[: PLATE.index("require:")]
NO_NUMBER = changed(PLATE, ("job: IP-24\n", ""))


@cache
def told(text: str) -> Review:
    return reviewed(text)


def page(text: str, op: int) -> Operation:
    return next(one for one in sheet_of(told(text)).operations if one.op == op)


def said(lines: object) -> dict[str, str]:
    return {one.about: one.text for one in lines}  # type: ignore[attr-defined]


def box(text: str, op: int, key: str) -> Row:
    (row,) = [row for row in page(text, op).boxes if row.key == key]
    return row


# -- what is cut, to which size ----------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "op", "surface", "says"),
    [
        (WHEEL, 10, "rim", "Ø114, finished"),
        (WHEEL, 10, "hub", "Ø48.6, leaves 0.60 mm on the diameter"),
        (WHEEL, 10, "seat", "at z 20.4, leaves 0.40 mm on the face"),
        (WHEEL, 20, "bore", "Ø31.4, leaves 0.60 mm on the diameter, rough"),
        (WHEEL, 30, "hub", "Ø48 h6, finished; meets at least 0.28 mm of stock"),
        (WHEEL, 60, "back", "at z 0, finished; meets at least 0.17 mm of stock"),
        (PLATE, 10, "bore", "Ø1.250 +0.0005/0, finished"),
        (PLATE, 40, "slot", "0.25 wide, on Ø5.5, finished; cutter end-cutter: form-cutter, diameter 0.250 in; "
                            "spindle set over from the table's axis by X 2.750 in ± 1 thou, Y 0.000 in ± 0.3 thou"),
    ],
)  # fmt: skip
def test_a_cut_says_the_size_it_goes_to(text: str, op: int, surface: str, says: str) -> None:
    assert said(page(text, op).cuts)[surface].startswith(says)


def test_a_cut_that_meets_no_metal_says_what_is_missing() -> None:
    """Of 0.30 mm on the radius 0.28 are met: 10 to 20 um go off the axis. Of 0.01 mm they leave none, and up to 10 um lack."""
    thin = changed(WHEEL, ("hub:    {leave_on_diameter: 0.6}", "hub:    {leave_on_diameter: 0.02}"))
    assert "0.28 mm of stock" in said(page(WHEEL, 30).cuts)["hub"]
    assert "meets no metal at its worst place: up to 0.01 mm are missing" in said(page(thin, 30).cuts)["hub"]


def test_the_drawing_and_the_words_give_one_size() -> None:
    """`hub Ø48.6` stands at the surface in the drawing; the words below must not say another."""
    drawn = as_sheet(told(WHEEL)).split("drawing hold-10")[0]
    for name in ("front", "hub", "seat", "rim", "throat"):
        size = said(page(WHEEL, 10).cuts)[name].partition(",")[0].replace("at z ", "at ")
        assert f">{name} {size}" in drawn


def test_the_route_has_sizes_and_no_more() -> None:
    (step,) = [one for one in sheet_of(told(WHEEL)).route if one.op == 40]
    assert ("teeth: 72 on Ø108, finished",) == step.cuts


# -- kinds of holding, dividing and joining ----------------------------------------------------------------------------


def test_a_hold_by_edge_finder_is_read_along_two_axes() -> None:
    assert "bore found by edge finder; X ± 0.3 thou, Y ± 0.4 thou" == said(page(BY_XY, 30).held)["Axis"]
    assert ("± 0.3 thou", "± 0.4 thou") == tuple(box(BY_XY, 30, f"setups.30.hold.centre.{a}").plan for a in "xy")
    assert all(row.key != "setups.30.hold.centre.runout" for row in page(BY_XY, 30).boxes)
    assert "bore found by edge finder, both sides touched along X and along Y" in page(BY_XY, 30).checks


def test_holes_by_coordinates_have_their_table_and_no_crank() -> None:
    (table,) = sheet_of(told(BY_XY)).tables
    assert ("X/in", "Y/in") == table.heads[1:3]
    assert ("2.3750", "0.0000") == table.rows[0][1:3]
    assert "in the table of coordinates" in said(page(BY_XY, 30).divide)["From place to place"]
    assert not any("closes on place 1" in check for check in page(BY_XY, 30).checks)
    assert any("closes on place 1" in check for check in page(PLATE, 30).checks)


def test_a_clocked_hold_is_read_and_signed() -> None:
    assert "number 1 of holes, up to 0.3 thou" == said(page(PLATE, 40).held)["Angle"]
    assert ("-0.8 to +0.8 thou", "slot to the holes") == (
        box(PLATE, 40, "setups.40.hold.clock.error").accept.what,
        box(PLATE, 40, "setups.40.hold.clock.error").accept.by,
    )
    assert "Number 1 of holes found and the part locked at that angle" in page(PLATE, 40).checks


def test_cutting_in_another_order_is_said() -> None:
    assert "spread: follow the index table place by place" == said(page(SPREAD, 40).divide)["Order"]
    assert "Order" not in said(page(WHEEL, 40).divide)


def test_a_cold_shaft_has_its_words_and_its_box() -> None:
    joined = said(page(COLD, 50).joined)
    assert "-70 degC ± 5 K by dry-ice" == joined["Shaft"]
    assert "Hub" not in joined
    assert "the shoulder end grips first: cool or clamp it so that no gap opens" == joined["Grips first"]
    assert "-70 degC" == box(COLD, 50, "setups.50.join.heat.shaft").plan
    assert any(check.startswith("The way from heat or cold to the joint rehearsed") for check in page(COLD, 50).checks)


def test_prove_out_gaps_are_told_read_and_signed() -> None:
    cut = said(page(PROVED, 40).cuts)["teeth"]
    assert "first prove-out gaps 0.80 mm deep, read over a ball of 2.50 mm, the part turned about hub" in cut
    assert "first prove-out gaps 0.80 mm deep, read over a ball" in said(page(PROVING, 40).cuts)["teeth"]
    ends = [f".readings.gap {n}" for n in (1, 19, 37, 55)] + [".uncertainty"]
    for text in (PROVED, PROVING):
        assert ends == [cell.end for cell in box(text, 40, "setups.40.cut.teeth.prove_out").cells]
    assert "Prove-out gaps of teeth read and reviewed before going to depth" in page(PROVED, 40).checks
    assert not any("Prove-out" in check for check in page(WHEEL, 40).checks)


def test_a_holding_that_is_kept_is_not_drawn_twice() -> None:
    assert {"Held": "as in op 50, never opened since"} == said(page(WHEEL, 60).held)
    assert () == page(WHEEL, 60).pictures
    assert ["hold-50"] == [picture.name for picture in page(WHEEL, 50).pictures]


def test_a_size_in_inches_has_its_limits_one_over_the_other() -> None:
    assert "1.250 in +0.5 thou / 0 thou" == box(PLATE, 10, "parts.plate.surfaces.bore.diameter").plan


# -- what may be accepted, and what an operation adds --------------------------------------------------------------------


def test_the_limit_of_a_box_stands_apart_from_what_limits_it() -> None:
    row = box(WHEEL, 40, "setups.40.hold.centre.runout")
    assert ("up to 5.2 um", "backlash-swing at teeth about bearings") == (row.accept.what, row.accept.by)
    assert ("not critical", "") == (
        box(WHEEL, 30, "setups.30.hold.centre.runout").accept.what,
        box(WHEEL, 30, "setups.30.hold.centre.runout").accept.by,
    )


def test_where_no_reading_brings_the_job_inside_the_box_says_so() -> None:
    lost = "nothing here alone brings cumulative-pitch at teeth about bearings inside"
    assert lost == box(FAILING, 40, "setups.40.hold.centre.runout").accept.what


def test_an_operation_names_the_largest_of_what_it_adds() -> None:
    (share,) = [one for one in page(WHEEL, 40).shares if one.title.startswith("cumulative-pitch")]
    assert ("24.3 um", "clearance of hub in spigot 8.5 um", "4.4 um") == (share.part, share.mostly, share.room)
    assert share.inside
    (over,) = [one for one in page(FAILING, 50).shares if one.title.startswith("cumulative-pitch")]
    assert not over.inside


# -- verdicts, sign-off, the edge of the pages ----------------------------------------------------------------------------


def test_what_is_missing_is_named_and_keeps_the_sheet_from_the_machine() -> None:
    sheet = sheet_of(told(OPEN))
    assert ("OPEN", "") == (sheet.verdict, sheet.limited)
    assert sheet.stopped.startswith("Not for the machine yet: something is missing")
    assert "Fill setups.30.hold.centre.runout" in [one.remedy for one in sheet.troubles]
    assert "position at holes about bore: cannot tell" in sheet.asked
    assert page(OPEN, 30).shares == () or all("position" not in s.title for s in page(OPEN, 30).shares)


def test_an_entry_left_out_is_to_be_written() -> None:
    """A dash in the column of what to do would read as if there were nothing to do."""
    (row,) = sheet_of(told(changed(WHEEL, ("confidence: 95 %\n", "")))).troubles
    assert ("open", "ENTRY-001", "Write it") == (row.verdict, row.rule, row.remedy)
    assert ("confidence",) == tuple(at for at, _ in row.places)


def test_a_job_that_asks_for_nothing_still_has_its_pages() -> None:
    sheet = sheet_of(told(NOTHING_ASKED))
    assert "OPEN" == sheet.verdict
    assert ("Fill require",) == tuple(one.remedy for one in sheet.troubles)
    assert ([10, 20, 30, 40], (), ()) == ([one.op for one in sheet.operations], sheet.asked, sheet.stacks)
    assert 'id="stacks"' not in as_sheet(told(NOTHING_ASKED))


def test_points_to_sign_are_those_the_job_has() -> None:
    assert ("After indicating", "After the first full circle", "Before the last cut", "Finished, all boxes filled") == (
        sheet_of(told(PLATE)).sign_off
    )
    assert "Before heat or cold" in sheet_of(told(HUB)).sign_off
    assert "After the first full circle" not in sheet_of(told(HUB)).sign_off


def test_a_limited_pass_is_told_beside_the_verdict() -> None:
    said = "of what this version computes"
    assert ("PASS", said) == (sheet_of(told(WHEEL)).verdict, sheet_of(told(WHEEL)).limited)


def test_the_mark_on_every_page_cannot_leave_its_place_in_the_style_sheet() -> None:
    hostile = changed(PLATE, ("job: IP-24\n", "job: 'A\"; } body{display:none} /* \\ </style>'\n"))
    mark = sheet_of(told(hostile)).mark
    assert f"file {told(hostile).loaded.sha256[:8]}" in mark
    assert not set(mark) & set("\"'\\;{}<>*&")
    assert f"file {told(NO_NUMBER).loaded.sha256[:8]}" == sheet_of(told(NO_NUMBER)).mark
    assert "no number stated in the job file" in as_sheet(told(NO_NUMBER))


def test_commands_are_set_as_code_and_stay_text() -> None:
    text = as_sheet(told(WHEEL))
    assert "<code>setupcheck vary JOB --set &#39;KEY=VALUE&#39;</code>" in text
    assert "`" not in text


TURNING = "{speed: 600 rpm, chuck_speed: 2500 rpm, off_centre: 0.5 kg, off_by: 10, bar_behind: 40}"


def test_what_turns_and_jaws_that_stand_out_are_told_at_the_machine() -> None:
    text = changed(
        WHEEL,
        ("centre: {on: rim, by: soft-jaws, at: 12,", "centre: {on: rim, by: soft-jaws, jaws_stand_out: 8 mm, at: 12,"),
        (
            "  - op: 20          #",
            f"  - op: 20\n    turning: {TURNING}\n    #",
        ),
    )
    held = said(page(text, 20).held)
    assert "jaws stand out by 8.00 mm" in held["Axis"]
    assert (
        "at 600 rev/min; the chuck is marked 2500 rev/min at the most; 0.5 kg stand 10.00 mm off the axis; the bar sticks out "
        "40.00 mm behind the spindle"
    ) == held["Turns"]


def test_open_findings_that_wait_for_the_same_thing_stand_in_one_row() -> None:
    """Six rules wait for the heat of one hub: one row names them all, as the report does."""
    text = shipped("jobs/coupling-hub.yaml").read_text(encoding="utf-8")
    found = reviewed(changed(text, ("hub: 260 degC, ", "")))
    waiting = {f.rule for f in found.evaluation.findings if f.missing == ("setups.50.join.heat.hub",)}
    assert len(waiting) > 3
    rows = [one for one in sheet_of(found).troubles if one.remedy == "Fill setups.50.join.heat.hub"]
    assert waiting == {rule for one in rows for rule in one.rule.split(", ")}
    assert len(rows) < len(waiting)


def test_a_head_without_its_ratio_is_asked_for_it_and_one_place_is_named_once() -> None:
    """Everything that divides waits for one figure: the worm and the wheel of the head cannot be laid round the work without."""
    found = told(changed(WHEEL, ("worm_ratio: 40, ", "")))
    waiting = [f for f in found.evaluation.findings if f.verdict == "open"]
    assert {("machines.dividing-head-B.worm_ratio",)} == {f.missing for f in waiting}
    assert {"STACK-001", "DIVIDE-001", "DIVIDE-002"} <= {f.rule for f in waiting}
    (row,) = [one for one in sheet_of(found).troubles if one.rule.startswith("DIVIDE-001, DIVIDE-002")]
    assert ["setups.40"] == [at for at, _ in row.places]
    report = flat(as_text(found))
    assert 1 == report.count("DIVIDE-016 setups.40, line") and "line 92; setups.40" not in report
