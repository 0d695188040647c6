"""Gaps that lie beside the axis or run off it, bevels on their root cone, and what is good enough: through job files."""

from __future__ import annotations

import re

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.text import as_text
from setupcheck.report.uncomputed import in_lines, uncomputed
from setupcheck.shipped import shipped

SPLINES, BEVEL, SPROCKET, PLATE = (
    shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8")
    for name in ("splined-shaft", "bevel-pinion-blank", "sprocket", "index-plate")
)
ROOT_CONE = "tilt: 23deg 21' 55\""


def reviewed(text: str, *changes: tuple[str, str]) -> Review:
    for old, new in changes:
        assert text.count(old) == 1, (old, text.count(old))
        text = text.replace(old, new)
    return review(read_job_text(text, "job.yaml"))


def worst(found: Review, number: int) -> float:
    """Worst case of a requirement [um]."""
    return next(r for r in found.results.values() if r.stack.index + 1 == number).combined.worst.high * 1e3


def shares(found: Review, number: int) -> dict[str, float]:
    """What each cause gives a requirement [um], by what it is."""
    result = next(r for r in found.results.values() if r.stack.index + 1 == number)
    return {s.cause.key: s.worst * 1e3 for s in result.combined.shares}


def verdicts(found: Review) -> set[tuple[str, str, str]]:
    return {(f.rule, f.at, f.verdict) for f in found.evaluation.findings if f.verdict != "pass"}


def flat(found: Review) -> str:
    return " ".join(as_text(found).split())


# -- splines -------------------------------------------------------------------------------------------------------------


def test_a_cutter_beside_the_axis_is_twice_that_in_the_symmetry_and_nothing_in_the_index() -> None:
    found = reviewed(SPLINES)
    assert shares(found, 1)["op 50, splines: cutter beside the axis"] == pytest.approx(2 * 8.0)
    for pitch in (4, 5):
        assert not any("cutter beside" in key for key in shares(found, pitch))
    assert not any("dividing splines" in key for key in shares(found, 1))


def test_two_hundredths_at_the_tail_over_two_hundred_are_twenty_one_seconds() -> None:
    found = reviewed(SPLINES, ("beside: 10 um", "beside: 20 um"))
    off = shares(found, 2)["op 50, splines: work beside the cutter's travel"]
    assert off == pytest.approx(20.0 / 200.0 * 100.0)  # over the 100 of the splines
    assert off / 100.0e3 * 206265.0 == pytest.approx(20.6, abs=0.05)
    assert shares(found, 1)["op 50, splines: work beside the cutter's travel"] == pytest.approx(10.0)  # +- half, twice


def test_the_bottom_hears_of_the_other_way_of_the_travel_alone() -> None:
    found = reviewed(SPLINES)
    assert shares(found, 3)["op 50, splines: work nearer to the cutter at one end"] == pytest.approx(10.0)
    assert not any("nearer" in key for key in shares(found, 2))
    assert not any("beside" in key for key in shares(found, 3))


def test_one_minute_at_the_index_is_four_micrometres_of_a_key() -> None:
    found = reviewed(SPLINES, ('setting: 5"', "setting: 1'"))
    assert shares(found, 4)["op 50, dividing splines: setting"] == pytest.approx(2 * 4.07, abs=0.01)


def test_a_measured_travel_counts_with_its_uncertainty() -> None:
    found = reviewed(SPLINES, ("beside: 10 um", "beside: {at_most: 10 um, measured: -6 um, uncertainty: 2 um}"))
    result = next(r for r in found.results.values() if r.stack.index == 1)
    assert result.combined.base * 1e3 == pytest.approx(3.0)
    assert shares(found, 2)["op 50, splines: work beside the cutter's travel"] == pytest.approx(3.0 * 0.5)


@pytest.mark.parametrize(
    ("taken", "number", "key"),
    [
        ("off_centre: 8 um, ", 1, "setups.50.cut.splines.off_centre"),
        ("beside: 10 um, ", 1, "setups.50.travel.beside"),
        ("beside: 10 um, ", 2, "setups.50.travel.beside"),
        (", nearer: 20 um", 3, "setups.50.travel.nearer"),
        (", width: 100", 2, "parts.shaft.surfaces.splines.width"),
    ],
)
def test_what_is_missing_is_named_and_leaves_the_figure_open(taken: str, number: int, key: str) -> None:
    found = reviewed(SPLINES, (taken, ""))
    opened = [f for f in found.evaluation.findings if f.verdict == "open" and f.at == f"require[{number}]"]
    assert [key in f.message for f in opened] == [True]


def test_what_may_stand_at_the_tail_and_the_cutter_is_told_and_turns_the_verdict() -> None:
    told = flat(reviewed(SPLINES))
    (most,) = re.findall(r"cutter's travel sideways over 200 mm: -(\d+) um to \+\1 um \(±10 um planned\)", told)
    inside, outside = (f"beside: {{measured: {v} um, uncertainty: 0 um}}" for v in (int(most), int(most) + 1))
    assert worst(reviewed(SPLINES, ("beside: 10 um", inside)), 2) <= 10.0 + 1e-9
    assert worst(reviewed(SPLINES, ("beside: 10 um", outside)), 2) > 10.0


def test_a_slot_stands_beside_the_axis_by_what_the_table_is_off_across() -> None:
    asked = "  - {what: chord, of: plate.holes"
    found = reviewed(
        PLATE, (asked, f"  - {{what: symmetry, of: plate.slot, about: plate.bore, at_most: 5 thou}}\n{asked}")
    )
    result = next(r for r in found.results.values() if r.stack.require.what == "symmetry")
    given = {s.cause.key: s.worst / 0.0254 for s in result.combined.shares}
    assert given["op 40, slot: spindle to table axis, y"] == pytest.approx(2 * 0.3)
    assert given["op 40, bore trued by indicator: run-out"] == pytest.approx(0.2)


@pytest.mark.parametrize(
    ("asked", "said"),
    [
        ("what: symmetry, of: plate.holes", "plate.holes has no gaps, which symmetry is asked of"),
        ("what: flank-run-off, of: plate.slot", "plate.slot is a slot, which has no length along the part"),
        ("what: depth-run-off, of: plate.outside", "plate.outside has no gaps"),
    ],
)
def test_a_surface_without_gaps_is_refused(asked: str, said: str) -> None:
    old = "  - {what: chord, of: plate.holes"
    with pytest.raises(JobError, match=re.escape(said)):
        reviewed(PLATE, (old, f"  - {{{asked}, about: plate.bore, at_most: 5 thou}}\n{old}"))


def test_a_travel_that_says_nothing_is_refused() -> None:
    with pytest.raises(JobError, match="this travel states nothing"):
        reviewed(SPLINES, ("{beside: 10 um, nearer: 20 um, over: 200}", "{over: 200}"))


def test_a_travel_of_turning_and_a_cutter_off_a_cylinder_are_told_as_not_computed() -> None:
    text = SPLINES.replace(
        "    cut: {outside: {from_surface: bar}}",
        "    travel: {beside: 10 um, over: 200}\n    cut: {outside: {from_surface: bar, off_centre: 5 um}}",
    )
    told = " ".join(in_lines(uncomputed(read_job_text(text, "job.yaml"))))
    assert "travel of the cutter (beside 10 um, over 200 mm)" in told
    assert "cutter off the centre of outside 5 um" in told
    assert "op 50: travel" not in told


# -- the bevel -----------------------------------------------------------------------------------------------------------


def test_five_minutes_off_the_root_cone_are_nineteen_micrometres_of_depth() -> None:
    found = reviewed(BEVEL, (ROOT_CONE, "tilt: 23deg 26' 55\""), ("blocks: 79.319", "blocks: 79.585"))
    assert ("TILT-010", "setups.30", "fail") in verdicts(found)
    assert worst(found, 5) - worst(reviewed(BEVEL), 5) == pytest.approx(18.9, abs=0.05)


@pytest.mark.parametrize("tilt", ["26deg 33' 54\"", "29deg 7' 33\""])
def test_the_pitch_and_the_face_cone_are_caught_and_the_root_cone_is_told(tilt: str) -> None:
    found = reviewed(BEVEL, (ROOT_CONE, f"tilt: {tilt}"))
    assert {("TILT-010", "setups.30", "fail"), ("TILT-007", "setups.30", "fail")} <= verdicts(found)
    assert "Do: Set 23deg 21' 55\" (23.3653 deg, 25.9614 gon), the angle of the root cone" in flat(found)


def test_a_bevel_without_a_head_is_open_and_one_without_its_uncertainty_too() -> None:
    gone = reviewed(BEVEL, (re.search(r"    head:   \{.*\}\n", BEVEL)[0], ""))  # type: ignore[index]
    assert ("TILT-010", "setups.30", "open") in verdicts(gone)
    unsure = reviewed(BEVEL, (", uncertainty: 1'", ""), ("by: sine-bar, ", ""))
    assert ("TILT-010", "setups.30", "open") in verdicts(unsure)
    assert any("setups.30.head.uncertainty" in f.message for f in unsure.evaluation.findings if f.verdict == "open")


def test_a_tilt_by_a_scale_takes_its_typical_error_into_the_depth() -> None:
    found = reviewed(
        BEVEL, (", uncertainty: 1', leans: nose-up, by: sine-bar, sine_bar: 200, blocks: 79.319", ", by: scale")
    )
    assert ("TILT-008", "setups.30", "warn") in verdicts(found)
    assert shares(found, 5)["op 30, teeth: head set to the root cone"] > 5 * 3.8


def test_no_rule_of_a_worm_speaks_of_a_bevel() -> None:
    rules = {f.rule for f in reviewed(BEVEL).evaluation.findings if f.rule.startswith("TILT-")}
    assert rules == {"TILT-007", "TILT-008", "TILT-010", "TILT-011"}


@pytest.mark.parametrize(
    ("leans", "stands", "looks", "verdict"),
    [
        ("nose-up", "above", "+z", "pass"),
        ("nose-down", "above", "+z", "fail"),
        ("nose-down", "above", "-z", "pass"),  # the small end at the nose: the apex is on the head's side
        ("front", "front", "+z", "pass"),
        ("back", "front", "+z", "fail"),
        ("front", "above", "+z", "fail"),
    ],
)
def test_the_head_of_a_bevel_leans_towards_the_cutter_with_the_small_end_outside(
    leans: str, stands: str, looks: str, verdict: str
) -> None:
    of_gaps = "    machine: dividing-head-N\n    looks_at_tool: "
    found = reviewed(
        BEVEL,
        ("leans: nose-up", f"leans: {leans}"),
        ("cutter_stands: above", f"cutter_stands: {stands}"),
        (f"{of_gaps}+z", f"{of_gaps}{looks}"),
    )
    assert [f.verdict for f in found.evaluation.findings if f.rule == "TILT-011"] == [verdict]


@pytest.mark.parametrize(
    ("gone", "asked"),
    [
        (", cutter_stands: above", "machines.dividing-head-N.cutter_stands"),
        (", leans: nose-up", "setups.30.head.leans"),
        (", to_diameter: 30.910", "to_diameter"),
    ],
)
def test_a_lean_that_cannot_be_told_is_open(gone: str, asked: str) -> None:
    found = [f for f in reviewed(BEVEL, (gone, "")).evaluation.findings if f.rule == "TILT-011"]
    assert [f.verdict for f in found] == ["open"] and asked in f"{found[0].message} {found[0].missing}"


# -- the sprocket --------------------------------------------------------------------------------------------------------


def test_the_review_says_where_not_to_indicate() -> None:
    told = flat(reviewed(SPROCKET))
    assert (
        "good enough already, do not indicate finer: op 20, run-out on outside (10 um planned, 228 um would do: a three-jaw"
        in told
    )
    assert "op 20, face run-out on back (10 um planned, 200 um would do)" in told


def test_taking_it_at_its_word_keeps_every_limit() -> None:
    found = reviewed(
        SPROCKET,
        ("by: four-jaw, at: 3.5, runout: 10 um", "by: three-jaw, at: 3.5, runout: 220 um"),
    )
    assert not any(rule == "STACK-001" for rule, _, _ in verdicts(found))
    worse = reviewed(
        SPROCKET,
        ("by: four-jaw, at: 3.5, runout: 10 um", "by: three-jaw, at: 3.5, runout: 240 um"),
    )
    assert any(rule == "STACK-001" for rule, _, _ in verdicts(worse))


def test_a_chuck_that_nobody_trues_is_not_called_good_enough() -> None:
    found = reviewed(
        SPROCKET,
        ("by: four-jaw, at: 3.5, runout: 10 um", "by: collet, at: 3.5, runout: 20 um"),
    )
    assert "run-out on outside (20 um planned" not in flat(found)
