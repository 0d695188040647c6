"""Keys of a worm that cannot be read or cannot be meant: each refused at its place, with what to write."""

from __future__ import annotations

import pytest

from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped
from tests.bad_input.ring import refused, spoilt

WHEEL = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")
MESH = "mesh: {wheel: wheel.teeth,"
MODULE = "  axial_module: 1.5\n"
THICKNESS = "  thread_thickness: {measured: 2.310 mm, uncertainty: 4 um}\n"


def says(old: str, new: str) -> list[str]:
    return [f"{p.path} | {p.problem}. {p.hint}" for p in refused(spoilt(old, new, WHEEL)).problems]


@pytest.mark.parametrize(
    ("old", "new", "expected"),
    [
        (
            THICKNESS,
            "  over_wires: 27.4176\n",
            "worm.over_wires | a size over wires needs the wires. "
            "Write it as in {measured: 25.35, wire: 2.50, uncertainty: 3 um}",
        ),
        (
            THICKNESS,
            "  over_wires: {measured: 27.4176, uncertainty: 3 um}\n",
            "worm.over_wires | a size over wires needs the wires. "
            "Write it as in {measured: 25.35, wire: 2.50, uncertainty: 3 um}",
        ),
        (
            THICKNESS,
            "  over_wires: {measured: 13.7088, wire: 2.55, uncertainty: 3 um}\n",
            "worm.over_wires.measured | 13.7088 mm over wires is not above the tip diameter, 27 mm. "
            "Write the size over the wires, or take thicker wires",
        ),
        (
            THICKNESS,
            "  over_wires: {measured: 27.4176, wire: 25.5, uncertainty: 3 um}\n",
            "worm.over_wires.wire | wires of 25.5 mm are larger than what they leave of 27.4176 mm. "
            "Write the diameter of one wire",
        ),
        (
            THICKNESS,
            "  thread_thickness: {measured: 1.946 mm, at: 12.5, uncertainty: 4 um}\n",
            "worm.thread_thickness.at | a thread between 21 mm and 27 mm is not measured at 12.5 mm. Is it the radius? "
            "Write the diameter",
        ),
        (
            MODULE,
            "  diametral_pitch: 0\n",
            "worm.diametral_pitch | 0 is no quotient and no diametral pitch. Write a number above zero, as in 12",
        ),
        (
            MODULE,
            "  diametral_pitch: {measured: 16.0, uncertainty: 0.1}\n",
            "worm.diametral_pitch | a diametral pitch is a plain number, without a unit. Write it as in diametral_pitch: 16; "
            "what was measured from thread to thread is the axial_pitch",
        ),
        (
            MODULE,
            "  quotient: {measured: 16.0}\n",
            "worm.quotient | a quotient is a plain number, without a unit. Write it as in quotient: 12; "
            "what was measured is the reference_diameter",
        ),
        (
            MODULE,
            "  quotient: -16\n",
            "worm.quotient | -16 is no quotient and no diametral pitch. Write a number above zero, as in 12",
        ),
        (
            MODULE,
            "  axial_pitch: -4.7\n",
            "worm.axial_pitch | -4.7 mm is no length of a thread. Write a length above zero",
        ),
        (
            MODULE,
            "  lead: {uncertainty: 10 um}\n",
            "worm.lead | this size has neither a nominal nor a measured value. Write a size, or measured: 32.04 mm",
        ),
        (
            MESH,
            f"{MESH} over_balls: 111.266,",
            "mesh.over_balls | a size over balls counts only as measured, for what is planned follows from insert and depth. "
            "Write it as in {measured: 124.964, ball: 3.50, uncertainty: 8 um}",
        ),
        (
            MESH,
            f"{MESH} over_balls: {{nominal: 111.266, ball: 2.5}},",
            "mesh.over_balls | a size over balls counts only as measured, for what is planned follows from insert and depth. "
            "Write it as in {measured: 124.964, ball: 3.50, uncertainty: 8 um}",
        ),
        (
            MESH,
            f"{MESH} over_balls: {{measured: 111.266, uncertainty: 8 um}},",
            "mesh.over_balls | a size over balls needs the diameter of a ball. "
            "Write it as in {measured: 124.964, ball: 3.50, uncertainty: 8 um}",
        ),
        (
            MESH,
            f"{MESH} ball: 2.4, over_balls: {{measured: 111.266, ball: 2.5, uncertainty: 8 um}},",
            "mesh.over_balls.ball | measured over balls of 2.5 mm, and mesh.ball is 2.4 mm. "
            "Write the ball once, the one that was measured with",
        ),
        (
            MESH,
            f"{MESH} over_balls: {{measured: 111.266, ball: 0, uncertainty: 8 um}},",
            "mesh.over_balls.ball | 0 is not a size. Write a length above zero",
        ),
        (
            MESH,
            f"{MESH} over_balls: {{measured: 111.266, ball: 2.5, uncertainty: 8}},",
            "mesh.over_balls.uncertainty | 8 has no unit, so it is not a length. "
            "An error entry needs its unit: write 8 um, or 8 mm if that is meant",
        ),
        (
            MESH,
            f"{MESH} over_balls: {{measured: 55.633, ball: 2.5, uncertainty: 8 um}},",
            "mesh.over_balls.measured | 55.633 mm over balls of 2.5 mm does not fit teeth on a circle of 108 mm. "
            "Write the size over both balls, and the diameter of one",
        ),
        (
            MESH,
            f"{MESH} over_balls: {{measured: 111.266, ball: 25, uncertainty: 8 um}},",
            "mesh.over_balls.measured | 111.266 mm over balls of 25 mm does not fit teeth on a circle of 108 mm. "
            "Write the size over both balls, and the diameter of one",
        ),
        (
            MESH,
            f"{MESH} over_balls: {{measured: 111.266, ball: 2.5, uncertainty: 8 um, at_temperature: 30 degC}},",
            "mesh.over_balls.at_temperature | only the diameter of a surface is brought back to 20 degC. "
            "Correct this size by hand, and drop it",
        ),
        (
            MODULE,
            "  axial_modul: 1.5\n",
            "worm.axial_modul | 'axial_modul' is not a key of this entry. Did you mean axial_module?",
        ),
    ],
)
def test_a_key_that_cannot_be_meant_is_refused_at_its_place(old: str, new: str, expected: str) -> None:
    assert [expected] == says(old, new)


@pytest.mark.parametrize(
    ("old", "new"),
    [
        (THICKNESS, "  thread_thickness: {measured: 1.946 mm, at: 25, uncertainty: 4 um}\n"),
        (THICKNESS, "  over_wires: {nominal: 27.42, lower: -0.02 mm, upper: 0 mm, wire: 2.55}\n"),
        (MODULE, "  axial_pitch: 4.712 ±0.002\n"),
        (MESH, f"{MESH} over_balls: {{measured: 111.266, ball: 2.5, uncertainty: 8 um}},"),
        (MESH, f"{MESH} ball: 2.5, over_balls: {{measured: 111.266}},"),
        (MESH, f"{MESH} ball: 2.5, over_balls: {{measured: 111.266, ball: 2.50 mm}},"),
        (MODULE, "  lead: 3/16 in\n"),
    ],
)
def test_a_key_that_can_be_meant_is_read(old: str, new: str) -> None:
    assert read_job_text(spoilt(old, new, WHEEL), "job.yaml")


@pytest.mark.parametrize(
    ("at", "expected"),
    [
        (
            "200 deg",
            "mesh.eccentric_at | '200 deg' is beyond half a turn. Count from the dead centre at which the worm is farthest from "
            "the wheel, the shorter way round, as in 75 deg",
        ),
        (
            "-5 deg",
            "mesh.eccentric_at | '-5 deg' is beyond half a turn. Count from the dead centre at which the worm is farthest from "
            "the wheel, the shorter way round, as in 75 deg",
        ),
        ("60", "mesh.eccentric_at"),
        ("60 mm", "mesh.eccentric_at"),
    ],
)
def test_an_angle_of_the_eccentric_that_cannot_be_meant_is_refused(at: str, expected: str) -> None:
    (told,) = says(MESH, f"{MESH} eccentric: 0.5 mm, eccentric_at: {at},")
    assert told.startswith(expected) and ". " in told
