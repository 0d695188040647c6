"""What a planner meets who writes the first job from the tool's messages alone, beginning with an empty file."""

from __future__ import annotations

import textwrap

from setupcheck.flow import review
from setupcheck.jobfile.examples import SKELETON
from setupcheck.jobfile.reading import read_job_text
from setupcheck.jobfile.setups import Job, Join
from tests.bad_input.ring import JOINED, RING, refused, spoilt, told


def says(text: str) -> list[str]:
    return [told(problem) for problem in refused(text).problems]


def test_the_job_shown_for_an_empty_file_passes_as_it_stands_and_indented_as_it_is_printed() -> None:
    assert "pass" == review(read_job_text(SKELETON, "job.yaml")).verdict
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
    assert ["1:1 parts | 'parts' is missing here. Write parts: {wheel: {material: C45, surfaces: {…}}}"] == says(
        RING[: RING.index("parts:")]
    )


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
    text = RING[: RING.index("  ring:")] + "  ring: {surfaces: {}}\n"
    assert [
        "6:20 parts.ring.surfaces | no surface is written here. "
        "Write at least one, as in bore: {kind: bore, diameter: 32 H6, from: 0, to: 26}"
    ] == says(text)
    assert "no part is written here" == refused("setupcheck: 1\ntitle: x\nunits: mm\nparts: {}\n").problems[0].problem
