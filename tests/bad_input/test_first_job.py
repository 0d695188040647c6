"""What a planner meets who writes the first job from the tool's messages alone, beginning with an empty file."""

from __future__ import annotations

import textwrap

import pytest

from setupcheck.flow import review
from setupcheck.jobfile.examples import SKELETON
from setupcheck.jobfile.reading import read_job_text
from setupcheck.jobfile.setups import Job, Join
from setupcheck.quantities.left_out import left_out
from tests.bad_input.ring import JOINED, RING, refused, spoilt, told


def says(text: str) -> list[str]:
    return [told(problem) for problem in refused(text).problems]


def test_the_job_shown_for_an_empty_file_passes_as_it_stands_and_indented_as_it_is_printed() -> None:
    found = review(read_job_text(SKELETON, "job.yaml"))
    assert "pass" == found.verdict
    assert () == left_out(found.loaded)
    assert read_job_text(textwrap.indent(SKELETON, "    "), "job.yaml").job.title == "Hub, bored"


def test_a_file_of_notes_is_shown_how_a_job_begins() -> None:
    said = str(refused("# a plan\n"))
    assert said.startswith("job.yaml: the file holds no values. Begin with one such as this:\n    setupcheck: 1\n")
    assert [f"    {line}" for line in SKELETON.splitlines()] == said.splitlines()[1:]


def test_all_keys_of_the_file_and_of_a_joining_are_listed() -> None:
    (problem,) = refused(spoilt("units: mm", "units: mm\nzzz: 1")).problems
    assert f"Known here: {', '.join(Job.model_fields)}" == problem.hint
    (problem,) = refused(spoilt("square: bore", "square: bore\n      zzz: 1", JOINED)).problems
    assert f"Known here: {', '.join(Join.model_fields)}" == problem.hint


def test_a_file_without_parts_is_told_their_shape() -> None:
    text = RING[: RING.index("parts:")] + RING[RING.index("machines:") :]
    missing = "1:1 parts | 'parts' is missing here. Write parts: {wheel: {material: C45, surfaces: {…}}}"
    assert missing == says(text)[0]


SETUPS = "setups: and under it `- op: 10`, with machine, looks_at_tool, hold and cut under op"


def test_a_file_without_setups_is_told_their_shape_and_a_stack_of_bought_parts_needs_none() -> None:
    begin, end = SKELETON[: SKELETON.index("setups:")], SKELETON[SKELETON.index("require:") :]
    assert [f"1:1 setups | 'setups' is missing here. Write {SETUPS}"] == says(begin + end)
    assert [f"15:1 setups | nothing is written here. Write {SETUPS}"] == says(f"{begin}setups:\n{end}")
    assert [f"15:1 setups | no setup is written here. Write {SETUPS}"] == says(f"{begin}setups: []\n{end}")
    given = "    given: [{of: bore, about: rim, runout: 3 um}]\n"
    assert read_job_text(begin.replace("machines:\n", f"{given}machines:\n") + end, "job.yaml")


def test_an_end_of_the_part_that_is_missing_or_wrong_is_written_with_its_sign() -> None:
    assert ["12:7 parts.ring.surfaces.front.facing | 'facing' is missing here. Write facing: +z or -z"] == says(
        spoilt("at: 30, facing: +z", "at: 30")
    )
    for wrong in ("1", "z", ""):
        (problem,) = refused(spoilt("at: 30, facing: +z", f"at: 30, facing: {wrong}")).problems
        assert "Write +z or -z" == problem.hint
        (problem,) = refused(spoilt("looks_at_tool: -z", f"looks_at_tool: {wrong}")).problems
        assert "+z or -z" in problem.hint


def test_a_part_without_surfaces_is_told_what_one_looks_like() -> None:
    text = RING[: RING.index("  ring:")] + "  ring: {surfaces: {}, given: [{of: a, about: b, runout: 3 um}]}\n"
    assert [
        "6:20 parts.ring.surfaces | no surface is written here. "
        "Write at least one, as in bore: {kind: bore, diameter: 32 H6, from: 0, to: 26}"
    ] == says(text)[:1]
    told_of_parts = refused("setupcheck: 1\ntitle: x\nunits: mm\nparts: {}\n").problems[-1]
    assert "no part is written here" == told_of_parts.problem


SETUPS_AS_A_MAP = (
    RING.replace("  - op: 10\n", "  10:\n")
    .replace("  - op: 20\n", "  20:\n")
    .replace("machine: head-B", "machine: head-C")
)


def test_setups_written_by_their_numbers_are_told_once_and_read_on() -> None:
    assert [
        "18:1 setups | setups is a list. Write each entry under it with a dash: `- op: 10`",
        "27:14 setups.20.machine | there is no machine 'head-C'. Did you mean head-B?",
    ] == says(SETUPS_AS_A_MAP)


def test_one_setup_without_its_dash_and_one_requirement_without_its_own_are_told_and_read_on() -> None:
    text = SKELETON.replace("  - op: 10", "    op: 10").replace("by: three-jaw", "by: four-jaws")
    assert [
        "15:1 setups | setups is a list. Write each entry under it with a dash: `- op: 10`",
        "20:29 setups.10.hold.centre.by | 'four-jaws' is not known here. Did you mean four-jaw?",
    ] == says(text)
    asked = "  run-out: {of: hub.bore, about: hub.rum, at_most: 10 um}\n"
    assert [
        "23:1 require | require is a list. "
        "Write each entry under it with a dash: `- {what: run-out, of: wheel.bore, at_most: 20 um}`",
        "24:34 require[1].about | part 'hub' has no surface 'rum'. Did you mean hub.rim?",
    ] == says(SKELETON[: SKELETON.index("  - {what")] + asked)


def test_names_written_as_a_list_are_told_once_for_each_list_and_read_on() -> None:
    text = SKELETON
    for name in ("bar: ", "sawn:", "rim: ", "bore:", "lathe-A:"):
        text = text.replace(f"  {name} {{", f"  - {name} {{")
    text = (
        text.replace("  hub:\n", "  - name: hub\n")
        .replace("32 H7", "83")
        .replace("cut: {rim: {}, bore: {}}", "cut: [rim, bore]")
    )
    assert [
        "5:1 parts | parts is a map, not a list. Write each name, then a colon and its entry, as in hub: {…}",
        "8:5 parts.hub.surfaces | surfaces is a map, not a list. "
        "Write each name, then a colon and its entry, as in bar: {…}",
        "12:38 parts.hub.surfaces.bore.diameter | a bore of 83 mm leaves nothing of rim, "
        "which is 80 mm from 0 mm to 20 mm. Write a smaller bore, or removes: [rim] at the cut that takes it away",
        "13:1 machines | machines is a map, not a list. "
        "Write each name, then a colon and its entry, as in lathe-A: {…}",
        "22:5 setups.10.cut | cut is a map, not a list. Write the surface, then a colon and its entry, as in rim: {}",
    ] == says(text)


def test_keys_of_an_empty_section_at_the_left_margin_are_read_as_its_own() -> None:
    assert [
        "36:1 worm | starts belongs to worm. Indent it under worm:",
    ] == says(spoilt("require:\n", "worm:\nstarts: 1\nrequire:\n"))
    assert [
        "36:1 worm | starts and hand belong to worm. Indent them under worm:",
        "37:7 worm.hand | 'rigt' is not known here. Did you mean right?",
    ] == says(spoilt("require:\n", "worm:\nstarts: 1\nhand: rigt\nrequire:\n"))
    assert [
        "6:1 parts | hub belongs to parts. Indent it under parts:",
    ] == says(SKELETON.replace("  hub:\n", "hub:\n"))


def test_a_key_below_a_section_that_is_filled_is_an_unknown_key() -> None:
    (problem,) = refused(spoilt("require:\n", "worm: {hand: right}\nstarts: 1\nrequire:\n")).problems
    assert "'starts' is not a key of this entry" == problem.problem


def test_a_forgotten_dash_is_told_in_one_line_and_what_follows_is_read_as_its_own_entry() -> None:
    text = spoilt("  - op: 20\n", "    op: 20   # the teeth\n").replace("machine: head-B", "machine: head-C")
    assert [
        "26:5 setups.20.op | a '- ' is missing before op: 20. Write - op: 20",
        "27:14 setups.20.machine | there is no machine 'head-C'. Did you mean head-B?",
    ] == says(text)


def test_a_number_written_twice_in_one_entry_is_a_key_written_twice() -> None:
    text = spoilt("  - op: 20\n", "  - op: 20\n    op: 20\n")
    assert ["27:5 setups.20.op | the key 'op' stands twice, in line 26 and in line 27. Keep one of them"] == says(text)


@pytest.mark.parametrize(
    ("carried", "expected"),
    [
        (
            "{torque: 40, axial_force: 2.5}",
            [
                "48:28 setups.30.join.must_carry.torque | 40 has no unit, so it is not a torque. Write 40 N m",
                "48:45 setups.30.join.must_carry.axial_force | 2.5 has no unit, so it is not a force. Write 2.5 N",
            ],
        ),
        (
            "{torque: 40 mm}",
            ["48:28 setups.30.join.must_carry.torque | '40 mm' is a length, not a torque. Write 40 N m"],
        ),
        (
            "{axial_force: -800 N}",
            [
                "48:33 setups.30.join.must_carry.axial_force | '-800 N' is below zero. "
                "Write 0 or more, without a minus sign"
            ],
        ),
        ("{torque: much}", ["48:28 setups.30.join.must_carry.torque | 'much' is not a torque. Write it as in 40 N m"]),
    ],
)
def test_a_load_in_the_wrong_unit_is_told_at_its_key_with_the_figure_that_was_written(
    carried: str, expected: list[str]
) -> None:
    assert expected == says(spoilt("      square: bore", f"      must_carry: {carried}\n      square: bore", JOINED))


@pytest.mark.parametrize("material", ["grey-iron", "EN-GJL-250", "0.6025"])
def test_a_housing_is_the_name_or_the_number_of_a_material(material: str) -> None:
    mesh = f"mesh: {{wheel: ring.teeth, housing: {material}}}\n"
    assert material == read_job_text(spoilt("require:\n", f"{mesh}require:\n"), "job.yaml").job.mesh.housing


@pytest.mark.parametrize(
    ("setups", "expected"),
    [
        ("{}", []),
        (
            "{10: }",
            ["setups.10 | this setup cuts nothing and joins nothing. Write cut: {surface: {}} or join: {…}"],
        ),
    ],
)
def test_setups_as_a_map_that_holds_nothing(setups: str, expected: list[str]) -> None:
    first, *others = says(f"{SKELETON[: SKELETON.index('setups:')]}setups: {setups}\n")
    assert "15:1 setups | setups is a list. Write each entry under it with a dash: `- op: 10`" == first
    assert expected == [line.partition(" ")[2] for line in others]
