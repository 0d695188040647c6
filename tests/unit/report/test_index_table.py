"""The index table in text, CSV and command: what stands on paper is what the fractions say, and wrong use is told."""

from __future__ import annotations

import csv
import io
import math
import re
import subprocess
import sys
from fractions import Fraction
from itertools import pairwise
from pathlib import Path

import pytest

from setupcheck.errors import SetupcheckError
from setupcheck.flow import prepare, review
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.quantities.book import Book
from setupcheck.report.index_table import as_csv, as_index_table
from setupcheck.report.text import as_text
from setupcheck.shipped import shipped

TEXTS = {
    name: shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8")
    for name in ("rotator-worm-wheel", "spur-gear-on-mandrel", "index-plate", "coupling-hub")
}
WHEEL = TEXTS["rotator-worm-wheel"]
HEAD = (
    'divide: {by: hole-circle, circle: 18, wheel: {once_per_turn: ±10"}, '
    'worm: {once_per_crank: ±4"}, setting: 2", clamp: 0"}'
)
TABLE = (
    """divide: {by: rotary-table, wheel: {once_per_turn: ±8"}, worm: {once_per_crank: ±2"}, setting: 2", clamp: 1"}"""
)


SINGLE = TEXTS["spur-gear-on-mandrel"].replace("count: 40", "count: 1").partition("\nrequire:")[0]


def opened(text: str) -> tuple[LoadedJob, Book]:
    loaded = read_job_text(text, "job.yaml")
    return loaded, prepare(loaded)[1]


def wheel(becomes: str) -> str:
    assert HEAD in WHEEL
    return WHEEL.replace(HEAD, becomes)


def plate(becomes: str) -> str:
    assert TABLE in TEXTS["index-plate"]
    return TEXTS["index-plate"].replace(TABLE, becomes)


def paper(text: str, op: int | None = None) -> str:
    return as_index_table(*opened(text), op)


def flowing(text: str) -> str:
    return " ".join(paper(text).split())


def rows(text: str) -> list[list[str]]:
    """Cells of the printed lines, without the box."""
    return [line[:-3].split() for line in paper(text).splitlines() if line.endswith("[ ]")]


VARIANTS = {
    "fits": WHEEL,
    "spread": wheel(HEAD.replace("circle: 18", "circle: 18, order: spread")),
    "rounded": wheel(HEAD.replace("circle: 18", "circle: 49")),
    "rounded and spread": wheel(HEAD.replace("circle: 18", "circle: 49, order: spread")),
    "readout": wheel("""divide: {by: readout, step: 36", setting: 20"}"""),
    "vernier": wheel("""divide: {by: vernier, step: 5', setting: 30"}"""),
    "theodolite in gon": wheel("""divide: {by: theodolite, step: 0.0005 gon, setting: 3"}"""),
    "direct": wheel("""divide: {by: direct, positions: 144}"""),
    "face teeth": wheel("""divide: {by: face-teeth, positions: 360}"""),
    "polygon": wheel("""divide: {by: polygon, sides: 72}"""),
    "sine bar": wheel("""divide: {by: sine-bar, sine_bar: 200 mm}"""),
    "table": TEXTS["index-plate"],
    "x-y in inches": plate("divide: {by: x-y}"),
    "x-y in steps": plate("divide: {by: x-y, step: 0.5 thou}"),
    "x-y": plate("divide: {by: x-y}").replace("count: 24", "count: 7, angle: 20 deg"),
}


@pytest.mark.parametrize("name", VARIANTS)
def test_every_table_is_80_columns_and_has_the_start_again_as_its_last_line(name: str) -> None:
    told = paper(VARIANTS[name])
    assert max(map(len, told.splitlines())) <= 80
    found = rows(VARIANTS[name])
    assert found[0][0] == found[-1][0] == "1"
    places = [int(row[0]) for row in found[:-1]]
    assert sorted(places) == list(range(1, len(places) + 1))
    assert (places == sorted(places)) == ("spread" not in name)
    assert "so the table closes." in " ".join(told.split())


@pytest.mark.parametrize("name", VARIANTS)
def test_a_csv_holds_plain_numbers_only(name: str) -> None:
    """Nothing that a spreadsheet would take for a formula, and as many cells in each line as the head has."""
    head, *lines = list(csv.reader(io.StringIO(as_csv(*opened(VARIANTS[name])))))
    assert head[:2] == ["line", "place"]
    assert [str(i) for i in range(1, len(lines) + 1)] == [line[0] for line in lines]
    for line in lines:
        assert len(line) == len(head)
        assert all(re.fullmatch(r"-?\d+(\.\d+)?", cell) for cell in line)


@pytest.mark.parametrize("name", ["fits", "spread", "rounded", "rounded and spread"])
def test_moves_typed_into_a_crank_bring_the_pin_to_the_printed_hole(name: str) -> None:
    circle = 49 if "rounded" in name else 18
    at = 0
    for place, turns, holes, hole, *angle, gon, degrees, off in rows(VARIANTS[name]):
        at += int(turns) * circle + int(holes)
        assert at % circle == int(hole)
        work = Fraction(at, 40 * circle) % 1
        exact = Fraction(int(place) - 1, 72)
        assert float(work) * 360 == pytest.approx(float(degrees) % 360, abs=1e-6)
        assert float(work) * 400 == pytest.approx(float(gon) % 400, abs=1e-5)
        assert float(angle[0]) + float(angle[1]) / 60 + float(angle[2]) / 3600 == pytest.approx(
            float(degrees), abs=2e-5
        )
        assert float(off) == pytest.approx(float(work - exact) * 1_296_000, abs=0.005)
    assert at % (40 * circle) == 0


def test_numbers_run_as_the_ledger_counts_them() -> None:
    """The wheel is cut with its -z end away from the spindle, the spur gear with its +z end."""
    for name, end, turn in (("rotator-worm-wheel", "-z", -1), ("spur-gear-on-mandrel", "+z", 1)):
        loaded, book = opened(TEXTS[name])
        floor = prepare(loaded)[0]
        (pattern,) = {
            s.pattern
            for b in floor.bodies.values()
            for states in b.states.values()
            for s in states
            if s.op == 40 and s.pattern
        }
        assert turn == pattern.turn
        # seen from +z the second place stands counter-clockwise of the first for turn +1, seen from -z for turn -1
        assert turn * math.tau / pattern.count == pytest.approx(pattern.angle(2) - pattern.angle(1))
        assert f"counter-clockwise seen from the {end} end" in " ".join(as_index_table(loaded, book).split())


def test_every_tenth_line_is_ruled_and_so_is_the_end() -> None:
    lines = [line for line in paper(WHEEL).splitlines() if line.endswith("[ ]") or set(line) == {"-"}]
    ruled = [i for i, line in enumerate(lines) if set(line) == {"-"}]
    between = [b - a - 1 for a, b in pairwise(ruled)]
    assert between == [10] * 7 + [2, 1]


def test_a_circle_that_does_not_fit_is_told_what_it_costs_and_what_fits() -> None:
    told = flowing(VARIANTS["rounded"])
    assert "5/9 turn is no whole number of holes on 49, so each place takes its nearest hole" in told
    assert "circles from 15 to 66 holes that fit, and the holes of a step: 18: 10, 27: 15, 36: 20" in told
    # 4/9 of a hole of 49 on 40:1: 4/9 x 1 296 000" / 1960 = 293.88", at r = 54 mm 76.9 um
    assert 'rounding leaves up to 293.88" at a place, 76.9 um along its circle' in told


def test_a_count_no_circle_fits_is_told_the_ways_out_with_their_error() -> None:
    told = flowing(WHEEL.replace("count: 72", "count: 127"))
    assert (
        "No circle of the usual plates fits. To the nearest hole, counted from the start, the worst place is off: 66 holes"
        in told
    )
    assert "Counts beside it that fit: 126 and 128." in told
    listed = WHEEL.replace("count: 72", "count: 57").replace(
        "worm_ratio: 40,", "worm_ratio: 40, hole_circles: [18, 20],", 1
    )
    told = flowing(listed)
    assert "No circle of this head fits." in told
    assert "A plate with a circle of 57 holes has no such error." in told


def test_a_head_of_another_ratio_is_named_where_it_fits() -> None:
    listed = WHEEL.replace("count: 72", "count: 57").replace(
        "worm_ratio: 40,", "worm_ratio: 40, hole_circles: [18, 19],", 1
    )
    assert "Nor has another ratio: 60:1 on 19; 72:1 on 19; 90:1 on 19; 120:1 on 19." in flowing(listed)


def test_coordinates_begin_where_the_drawing_says() -> None:
    found = rows(VARIANTS["x-y"])
    # 2.375 in at 20 deg, first hole: 2.375 cos 20 = 2.23177, 2.375 sin 20 = 0.81230
    assert ["2.2318", "0.8123"] == found[0][1:3]
    assert found[0][1:] == found[-1][1:]
    assert "20.0000 deg from the part's mark" in flowing(VARIANTS["x-y"])


def test_a_rotary_table_tells_turns_of_its_handle_and_the_dial() -> None:
    # 90:1 is 4 deg a turn: 15 deg are 3 turns and 3 deg
    assert ["2", "3", "3", "00", "00.0", "15", "00", "00.0"] == rows(TEXTS["index-plate"])[1][:8]
    assert ["1", "90", "0", "00", "00.0", "360", "00", "00.0"] == rows(TEXTS["index-plate"])[-1][:8]
    assert "no step of the device is stated" in flowing(TEXTS["index-plate"])


def test_a_plate_moves_by_whole_notches_and_rounds_what_it_has_not() -> None:
    assert {"2"} == {row[1] for row in rows(VARIANTS["direct"])[1:]}
    # 50 notches for 72 teeth: 0.694 of a notch each, 22 teeth share one with a neighbour
    text = wheel("divide: {by: direct, positions: 50}")
    (finding,) = [f for f in review(read_job_text(text, "job.yaml")).evaluation.findings if f.rule == "DIVIDE-016"]
    assert (finding.verdict, finding.value) == ("fail", 22)


def test_gauge_blocks_of_a_sine_bar_give_the_angle_back() -> None:
    for row in rows(VARIANTS["sine bar"]):
        quarter, blocks, off = float(row[1]), float(row[5]), float(row[6])
        sign = -1 if row[2].startswith("-") else 1
        angle = quarter + sign * math.degrees(math.asin(blocks / 200.0))
        assert (angle - off / 3600 - 5 * (int(row[0]) - 1)) % 360 == pytest.approx(0.0, abs=2e-6) or (
            360 - (angle - off / 3600 - 5 * (int(row[0]) - 1)) % 360
        ) == pytest.approx(0.0, abs=2e-6)
        assert abs(angle - quarter) <= 45.01


def test_coordinates_are_told_in_the_steps_of_the_readout() -> None:
    for row in rows(VARIANTS["x-y in steps"]):
        assert all(float(cell) / 0.0005 == pytest.approx(round(float(cell) / 0.0005), abs=1e-6) for cell in row[1:3])


def test_a_readout_shows_what_its_steps_leave_over_and_nothing_adds_up() -> None:
    found = rows(VARIANTS["vernier"].replace("count: 72", "count: 7"))
    # 360/7 deg = 51 deg 25' 42.86", to 5': 51 deg 25' is 42.86" short, the next one 34.29" beyond 102 deg 50' + ...
    offs = [float(row[-1]) for row in found]
    exact = [Fraction(j * 1_296_000, 7) for j in range(8)]
    assert offs == [pytest.approx(float(round(e / 300) * 300 - e), abs=0.005) for e in exact]
    assert max(map(abs, offs)) <= 150.0


def test_the_review_points_to_the_table() -> None:
    told = " ".join(as_text(review(read_job_text(WHEEL, "job.yaml"))).split())
    assert "index: 5/9 turn = 10 holes of 18 (11 in the sector arms); index table: setupcheck index JOB" in told


def test_the_remedy_of_a_folded_wave_tells_its_size_and_another_ratio() -> None:
    text = WHEEL.replace("count: 72", "count: 41")
    (finding,) = [f for f in review(read_job_text(text, "job.yaml")).evaluation.findings if f.rule == "DIVIDE-002"]
    # ±4" at r = 54 mm is 1.05 um; 60:1 on 41 teeth folds to 19, 72 to 10, 90 to 8, 120 to 3
    assert finding.verdict == "warn"
    assert 'Of ±4.0" once a crank turn the teeth keep ±1.0 um, 1 wave round the work.' in finding.remedy
    assert "60:1 (19 waves), 72:1 (10 waves), 90:1 (8 waves); that head brings an error of its own." in finding.remedy


def test_rounding_is_judged_against_the_tightest_limit_of_the_division() -> None:
    found = {f.rule: f for f in review(read_job_text(VARIANTS["rounded"], "job.yaml")).evaluation.findings}
    assert found["DIVIDE-014"].verdict == "fail"
    assert found["DIVIDE-014"].remedy.startswith("Exact on a circle of 18 or 27 or 36")
    assert found["DIVIDE-015"].verdict == found["DIVIDE-016"].verdict == "pass"
    for step, verdict in ((7, "warn"), (10, "pass")):
        text = wheel(f"""divide: {{by: readout, step: {step}", setting: 20"}}""")
        found = {f.rule: f for f in review(read_job_text(text, "job.yaml")).evaluation.findings}
        assert found["DIVIDE-015"].verdict == verdict
    coarse = wheel("""divide: {by: readout, step: 10 deg, setting: 20"}""")
    found = {f.rule: f for f in review(read_job_text(coarse, "job.yaml")).evaluation.findings}
    assert found["DIVIDE-016"].verdict == "fail"


# -- wrong use -------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "op", "says"),
    [
        (
            TEXTS["coupling-hub"],
            None,
            "job.yaml: no setup divides a circle. Write at the setup that cuts the teeth or holes",
        ),
        (WHEEL, 45, "job.yaml: op 45 is not in this job. Write --op 40"),
        (WHEEL, 10, "job.yaml: op 10 does not divide a circle of two places or more by a divide entry. Write --op 40"),
        (SINGLE, None, "job.yaml: no setup divides a circle."),
        (
            wheel("divide: {by: hole-circle}"),
            None,
            "job.yaml: no index table of op 40: fill setups.40.divide.circle; circles that close: 18, 27",
        ),
        (wheel("divide: {by: direct}"), None, "job.yaml: no index table of op 40: fill setups.40.divide.positions"),
        (wheel("divide: {by: polygon}"), None, "job.yaml: no index table of op 40: fill setups.40.divide.sides"),
        (wheel("divide: {by: sine-bar}"), None, "job.yaml: no index table of op 40: fill setups.40.divide.sine_bar"),
        (
            WHEEL.replace("worm_ratio: 40, ", ""),
            None,
            "job.yaml: no index table of op 40: fill machines.dividing-head-B.worm_ratio",
        ),
    ],
)
def test_what_gives_no_table_says_why(text: str, op: int | None, says: str) -> None:
    with pytest.raises(SetupcheckError) as wrong:
        as_index_table(*opened(text), op)
    assert str(wrong.value).startswith(says)


def run(*arguments: str, at: Path) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "setupcheck", "index", *arguments]
    return subprocess.run(command, capture_output=True, text=True, timeout=60, check=False, cwd=at)


@pytest.fixture
def job(tmp_path: Path) -> Path:
    path = tmp_path / "job.yaml"
    path.write_text(WHEEL, encoding="utf-8")
    return path


def test_the_command_prints_the_table_and_writes_the_file(job: Path) -> None:
    done = run("job.yaml", "--op", "40", "--csv", "teeth.csv", at=job.parent)
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout == paper(WHEEL) + "\nwritten: teeth.csv\n"
    assert (job.parent / "teeth.csv").read_text(encoding="utf-8") == as_csv(*opened(WHEEL))
    assert [] == [p.name for p in job.parent.iterdir() if p.suffix == ".part"]


def test_a_file_that_is_there_stays_unless_forced(job: Path) -> None:
    target = job.parent / "teeth.csv"
    target.write_text("mine", encoding="utf-8")
    done = run("job.yaml", "--csv", "teeth.csv", at=job.parent)
    assert done.returncode == 2
    assert "already there" in done.stderr
    assert target.read_text(encoding="utf-8") == "mine"
    assert run("job.yaml", "--csv", "teeth.csv", "--force", at=job.parent).returncode == 0
    assert target.read_text(encoding="utf-8") == as_csv(*opened(WHEEL))


@pytest.mark.parametrize(
    ("arguments", "says"),
    [
        (("job.yaml", "--op", "45"), "op 45 is not in this job"),
        (("job.yaml", "--csv", "nowhere/teeth.csv"), "there is no folder nowhere"),
        (("job.yaml", "--csv", "."), "is a folder"),
        (("missing.yaml",), "there is no such file"),
        (("job.yaml", "--op", "forty"), "valid integer"),
        (("zero.yaml",), "0 is out of range. Write at least 1"),
    ],
)
def test_wrong_use_is_one_message_and_exit_2(job: Path, arguments: tuple[str, ...], says: str) -> None:
    (job.parent / "zero.yaml").write_text(WHEEL.replace("circle: 18", "circle: 0"), encoding="utf-8")
    done = run(*arguments, at=job.parent)
    assert (done.returncode, done.stdout) == (2, "")
    assert says in done.stderr
    assert "Traceback" not in done.stderr


def test_a_csv_of_a_job_that_divides_twice_needs_its_operation() -> None:
    again = WHEEL.replace(
        "  - op: 50 ",
        WHEEL[WHEEL.index("  - op: 40 ") : WHEEL.index("  - op: 50 ")].replace("op: 40", "op: 45") + "  - op: 50 ",
    )
    with pytest.raises(SetupcheckError, match=r"op 40 and 45 divide, and a CSV holds one table\. Write --op 40"):
        as_csv(*opened(again))
    assert as_csv(*opened(again), 45) == as_csv(*opened(WHEEL))
    assert paper(again).count("INDEX TABLE") == 2
