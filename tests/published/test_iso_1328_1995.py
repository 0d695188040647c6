"""ISO 1328-1:1995 and ISO 1328-2:1997: tolerances of cylindrical gears (from memory; the standard was not opened).

Cells for f_pt (single pitch), F_p (cumulative pitch) and F_r (run-out), in um. The rows of module 2 to 3.5, diameter 50 to
125 agree with the printed tables as remembered; the others were computed with the standard's formulas. Values in brackets
there, unrounded: f_pt 5.86, F_p 18.91, F_r 15.13 for grade 5, f_pt 8.29 for grade 6, F_p 53.48 for grade 8.
Profile and helix tolerances of the same tables are not ours: the ledger makes no such figure.
"""

from __future__ import annotations

import math

import pytest

from setupcheck.errors import JobError
from setupcheck.physics.gear_grades import DIAMETER_RANGES, MODULE_RANGES, grade_limit, range_mean

from .bench import UM, findings, reviewed, stack

CELLS = [
    # module, diameter, grade: f_pt, F_p, F_r
    (2.5, 100.0, 5, 6.0, 19.0, 15.0),
    (2.5, 100.0, 6, 8.5, 27.0, 21.0),
    (2.5, 100.0, 7, 12.0, 38.0, 30.0),
    (2.5, 100.0, 8, 17.0, 53.0, 43.0),
    (3.0, 180.0, 6, 9.0, 35.0, 28.0),
    (1.5, 180.0, 7, 12.0, 49.0, 39.0),
    (1.5, 180.0, 8, 17.0, 69.0, 55.0),
]
WHATS = ("single-pitch", "cumulative-pitch", "run-out")


def gear(module: float, diameter: float, grade: int, runout: float) -> str:
    """A bought spur gear whose teeth run out about its bore, asked for one grade in three figures (invented part)."""
    return f"""
setupcheck: 1
title: A spur gear of a stated grade
units: mm
parts:
  gear:
    surfaces:
      teeth:
        kind: teeth
        count: {round(diameter / module)}
        on_circle: {diameter}
        at: 0
        pressure_angle: 20 deg
        module: {module}
      bore:  {{kind: bore, diameter: 30, from: -15, to: 15}}
    given:
      - {{of: teeth, about: bore, runout: {{at_most: {runout} um}}, division: 0"}}
require:
  - {{what: single-pitch, of: gear.teeth, about: gear.bore, grade: {grade}}}
  - {{what: cumulative-pitch, of: gear.teeth, about: gear.bore, grade: {grade}}}
  - {{what: run-out, of: gear.teeth, about: gear.bore, grade: {grade}}}
"""


@pytest.mark.parametrize("cell", CELLS)
def test_the_cells_of_the_table(cell: tuple[float, float, int, float, float, float]) -> None:
    module, diameter, grade, *published = cell
    ours = [grade_limit(w, module=module, reference_diameter=diameter, grade=grade) / UM for w in WHATS]
    assert published == pytest.approx(ours)


@pytest.mark.parametrize("cell", CELLS)
def test_a_job_takes_its_limits_from_the_grade_it_names(cell: tuple[float, float, int, float, float, float]) -> None:
    module, diameter, grade, *published = cell
    job = gear(module, diameter, grade, runout=5.0)
    limits = [stack(job, i).stack.high for i in range(3)]
    assert [p * UM for p in published] == pytest.approx(limits)
    assert all(p * UM == pytest.approx(f.limit) for p, f in zip(published, findings(job, "STACK-001"), strict=True))


@pytest.mark.parametrize(("fim", "verdict"), [(25.3, "pass"), (25.4, "fail")])
def test_grade_6_of_the_cumulative_pitch_is_met_up_to_its_limit(fim: float, verdict: str) -> None:
    # F_p = FIM/cos 20 deg, so 27 um allow a run-out of 27 cos 20 = 25.37 um
    job = gear(2.5, 100.0, 6, runout=fim).replace("at_most:", "measured:")
    found = {f.at: f.verdict for f in findings(job, "STACK-001") if f.at == "require[2]"}
    assert [verdict] == list(found.values())
    assert 27.0 * UM == pytest.approx(stack(job, 1).stack.high)


def test_each_grade_is_the_square_root_of_two_wider_than_the_one_before() -> None:
    for what, five in zip(WHATS, (5.86, 18.91, 15.13), strict=True):
        for grade in range(13):
            exact = five * math.sqrt(2.0) ** (grade - 5)
            ours = grade_limit(what, module=2.5, reference_diameter=100.0, grade=grade) / UM
            step = 1.0 if exact > 10.0 else 0.5 if exact >= 5.0 else 0.1
            assert exact == pytest.approx(ours, abs=0.5 * step + 0.001 * exact)


def test_scaling_comes_before_rounding() -> None:
    # F_p of grade 8: 18.91 x 2.828 = 53.48 -> 53; the rounded grade 5 would give 19 x 2.828 = 53.7 -> 54
    assert 53.0 == pytest.approx(grade_limit("cumulative-pitch", module=2.5, reference_diameter=100.0, grade=8) / UM)


def test_the_table_counts_a_range_by_its_geometric_mean() -> None:
    # ISO 1328-1:1995 5.2 (as remembered): m = sqrt(2 x 3.5) = 2.646, d = sqrt(50 x 125) = 79.06
    assert 2.646 == pytest.approx(range_mean(2.5, MODULE_RANGES), abs=0.0005)
    assert 79.06 == pytest.approx(range_mean(100.0, DIAMETER_RANGES), abs=0.005)
    for what in WHATS:
        all_over = {
            grade_limit(what, module=m, reference_diameter=d, grade=6) for m in (2.1, 3.5) for d in (51.0, 125.0)
        }
        assert len(all_over) == 1


def test_a_grade_is_not_read_for_what_it_does_not_limit() -> None:
    with pytest.raises(JobError, match="grade"):
        reviewed(gear(2.5, 100.0, 6, 5.0).replace("what: run-out,", "what: index-within,"))
    with pytest.raises(JobError, match="table"):
        reviewed(gear(0.3, 100.0, 6, 5.0))
