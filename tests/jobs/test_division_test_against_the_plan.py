"""Division tests of the rotator's wheel against its plan. The files are written by plain arithmetic that knows no setupcheck."""

from __future__ import annotations

import json
import math
import random
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest

from setupcheck.flow import ReadBack, read_back, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Pattern
from setupcheck.ledger.running import AsItRuns
from setupcheck.ledger.teeth import angles, folded
from setupcheck.quantities.against import Against, _as_slow, asked, owner, stack_of
from setupcheck.report.against import verdict
from setupcheck.report.readings import as_data, as_text
from setupcheck.shipped import shipped

JOB = shipped("jobs/rotator-worm-wheel.yaml")
RADIUS, ALPHA, RATIO = 54.0, math.radians(20.0), 72
ARCSEC = math.pi / 648_000.0
ONE = 1.0 * ARCSEC


def written(
    folder: Path, *, e: float = 0.0, phi: float = 0.0, divided: float = 0.0, at: float = 0.0, noise: float = 0.7,
    seed: int = 1, directions: tuple[str, ...] = ("forward", "reverse"), count: int = 24,
) -> Path:  # fmt: skip
    """A test of three runs: teeth off by e [mm] towards phi [deg], and a division wave [arcsec] highest at `at` [deg]."""
    rng = random.Random(seed)
    lines = ["angle_deg,run,direction,deviation_arcsec"]
    stations = [360.0 * k / count for k in range(count)] + [0.0]
    for run in range(1, 4):
        zero = rng.uniform(-20.0, 20.0)
        for direction in directions:
            side = -1 if direction == "forward" else 1
            for place in stations:
                theta = math.radians(place)
                off = e / (RADIUS * math.cos(ALPHA)) * math.sin(math.radians(phi) - theta - side * ALPHA) / ARCSEC
                off += divided * math.cos(theta - math.radians(at)) + 6.0 * side + zero + rng.gauss(0.0, noise)
                lines.append(f"{place},{run},{direction},{off:.3f}")
    file = folder / "test.csv"
    file.write_text("\n".join(lines) + "\n", encoding="utf-8")
    return file


def told(file: Path, *, instrument: float | None = ONE, text: str | None = None) -> tuple[ReadBack, Against]:
    job = read_job_text(text, "job.yaml") if text is not None else JOB
    found = read_back(job, file, instrument=instrument)
    assert isinstance(found.against, Against)
    return found, found.against


def said(found: ReadBack) -> str:
    """The report as one line."""
    return " ".join(as_text(found).split())


def test_a_small_error_passes_and_is_as_planned(tmp_path: Path) -> None:
    found, a = told(written(tmp_path, e=0.003, phi=200.0))
    assert "pass" == verdict(found)
    first = a.waves[0]
    assert first.explained is not None and first.explained.beyond > 0.05
    assert first.measured == pytest.approx(0.003, abs=0.0002)
    assert a.answers[0].value == pytest.approx(0.003 / (RADIUS * math.cos(ALPHA)), rel=0.15)
    assert (24, 72) == (a.read, a.of)
    assert "read at 24 of 72 places" in said(found)
    assert ["index-within", "on-workpiece", "cumulative-pitch"] == [one.plan.stack.require.what for one in a.answers]
    angle, arc, pitch = (one.value for one in a.answers)
    assert (arc, pitch) == (pytest.approx(angle * 2.0 * 50.0), pytest.approx(angle * 2.0 * RADIUS))


def test_a_large_error_fails_and_says_what_truing_would_bring(tmp_path: Path) -> None:
    found, a = told(written(tmp_path, e=0.040, phi=96.0, noise=0.5))
    assert "fail" == verdict(found)
    assert a.move is not None
    assert a.move.amount == pytest.approx(0.040, abs=0.0003)
    true, _ = told(written(tmp_path, e=0.0, noise=0.5))
    assert isinstance(true.against, Against)
    then = a.move.then * a.answers[0].value
    assert true.against.answers[0].value == pytest.approx(then, abs=1.0 * ARCSEC)  # the same wheel on its own axis
    assert a.move.then < a.move.most < 0.1
    assert f"Teeth stand 40.0 um towards tooth {a.move.tooth} off the axis of use" in said(found)
    assert "towards that tooth, or shifted as much the other way" in said(found)  # a ring that stands out there


def test_without_the_instruments_uncertainty_nothing_is_judged(tmp_path: Path) -> None:
    found, a = told(written(tmp_path, e=0.003), instrument=None)
    assert "open" == verdict(found) and a.answers[0].u is None
    assert "judged with --instrument" in said(found)


def test_the_instruments_uncertainty_is_a_guard_band(tmp_path: Path) -> None:
    file = written(tmp_path, e=0.0175, phi=30.0, noise=0.3)
    _, a = told(file)
    limit = a.answers[0].plan.stack.high
    assert limit is not None
    gap = (limit - a.answers[0].value) / ARCSEC
    assert 0.0 < gap < 10.0
    assert ["pass", "warn"] == [verdict(told(file, instrument=u * ARCSEC)[0]) for u in (0.2, 8.0 * gap)]


def test_a_drifting_file_that_is_open_gives_no_verdict_and_no_owner(tmp_path: Path) -> None:
    file = written(tmp_path, e=0.003)
    lines = file.read_text().splitlines()
    slipped = [lines[0]] + [
        ",".join([*line.split(",")[:3], f"{float(line.split(',')[3]) + (300.0 if i > 70 else 0.0):.3f}"])
        for i, line in enumerate(lines[1:])
    ]
    file.write_text("\n".join(slipped) + "\n")
    found, _ = told(file)
    assert "open" == found.reduced.verdict == verdict(found)
    assert "no owner is named while the test itself is open" in said(found)


OWNERS = {"eccentric": "op 40, holding", "divided": "op 40, dividing"}


@pytest.mark.parametrize("truth", OWNERS)
def test_both_flanks_tell_a_holding_from_a_division(tmp_path: Path, truth: str) -> None:
    """Twenty wheels, each with one setup out of hand and the other as planned, at random angles: all are named right."""
    right = 0
    for seed in range(20):
        rng = random.Random(100 + seed)
        small, large = rng.uniform(0.0, 0.002), rng.uniform(0.030, 0.040)
        e, arc = (large, small) if truth == "eccentric" else (small, large)
        file = written(
            tmp_path, e=e, phi=rng.uniform(0, 360), divided=arc / RADIUS / ARCSEC, at=rng.uniform(0, 360), seed=seed
        )
        _, a = told(file)
        explained = a.waves[0].explained
        assert explained is not None and explained.beyond < 0.05
        named = [o.name for o in explained.owners if o.odds > 0.05]
        right += explained.owners[0].name == OWNERS[truth] if truth == "divided" else all("holding" in n for n in named)
    assert 20 == right


def test_one_flank_does_not_tell_them_apart_and_says_so(tmp_path: Path) -> None:
    found, a = told(written(tmp_path, e=0.010, phi=10.0, directions=("forward",)))
    explained = a.waves[0].explained
    assert explained is not None and explained.beyond < 0.05 and not explained.told_apart
    assert "not told apart: write known directions (high_at) into the plan" in said(found)


def test_a_job_without_such_a_requirement_is_told_what_to_write(tmp_path: Path) -> None:
    text = "\n".join(
        line for line in JOB.read_text(encoding="utf-8").splitlines()
        if not any(f"what: {figure}" in line for figure in ("index-within", "cumulative-pitch", "on-workpiece"))
    )  # fmt: skip
    found = read_back(read_job_text(text, "job.yaml"), written(tmp_path, e=0.003))
    assert "open" == verdict(found)
    assert "no index or pitch figure of wheel.teeth is required as one head reads it" in said(found)


def test_the_command_ends_with_the_verdict_and_json_has_the_plan(tmp_path: Path) -> None:
    def run(file: Path, *more: str) -> subprocess.CompletedProcess[str]:
        command = [sys.executable, "-m", "setupcheck", "readings", str(JOB), str(file), *more]
        return subprocess.run(command, capture_output=True, text=True, check=False)

    small, large = written(tmp_path, e=0.003), tmp_path / "large.csv"
    large.write_text(written(tmp_path, e=0.060).read_text())
    small = written(tmp_path, e=0.003)
    assert [0, 1, 3] == [
        run(small, "--instrument", "1arcsec").returncode,
        run(small).returncode,
        run(large, "--instrument", "1arcsec").returncode,
    ]
    done = run(large, "--instrument", "1arcsec", "--diameter", "200", "--json")
    plan = json.loads(done.stdout)["plan"]
    assert ("fail", 24, 72) == (plan["verdict"], plan["places_read"], plan["places"])
    assert plan["waves"][0]["owners"][0]["odds"] > 0.5
    text = run(large, "--instrument", "1arcsec", "--diameter", "200")
    assert "on a workpiece of 200.0 mm diameter the range is" in text.stdout
    assert all(
        len(line.replace(str(tmp_path), "")) <= 80 for line in text.stdout.splitlines()
    )  # a path has no place to break
    for option, wrong, says in (
        ("--instrument", "1,5 arcsec", "Write a point"),
        ("--instrument", "2", "unit"),
        ("--diameter", "0", "no size of a workpiece"),
    ):
        refused = run(small, option, wrong)
        assert 2 == refused.returncode and says in refused.stderr and "Traceback" not in refused.stderr


def test_holes_and_spur_gears_are_set_against_their_own_figures(tmp_path: Path) -> None:
    for name, of, figure in (
        ("index-plate", "plate.holes", "index-within"),
        ("spur-gear-on-mandrel", None, "cumulative-pitch"),
    ):
        job = shipped(f"jobs/{name}.yaml")
        found = read_back(job, written(tmp_path, divided=4.0, count=12), of=of, instrument=ONE)
        assert isinstance(found.against, Against), found.against
        assert found.against.answers[0].plan.stack.require.what == figure
        assert as_data(found)["plan"]["verdict"] in ("pass", "warn", "fail")  # type: ignore[index]


@pytest.mark.parametrize("directions", [("forward",), ("forward", "reverse")])
@pytest.mark.parametrize("faces", [False, True])
def test_the_range_is_as_uncertain_as_two_means_of_one_direction(
    directions: tuple[str, ...], faces: bool, tmp_path: Path
) -> None:
    """Three runs: each mean rests on three readings, whether the other direction or the other face was read as well or not."""
    file = written(tmp_path, e=0.003, directions=directions)
    if faces:
        head, *lines = file.read_text().splitlines()
        file.write_text("\n".join([f"{head},face", *(f"{line},{face}" for line in lines for face in "12")]) + "\n")
    found, a = told(file)
    assert a.scatter == pytest.approx(2.0 * found.reduced.scatter * math.sqrt(2.0 / 3.0))


def test_flanks_that_are_not_those_of_an_eccentric_ring_promise_nothing_of_truing(tmp_path: Path) -> None:
    found, a = told(written(tmp_path, e=0.020, phi=96.0, divided=60.0, at=200.0, noise=0.3))
    assert found.reduced.eccentric is not None
    assert "neither" == found.reduced.eccentric.looks
    assert a.move is None
    assert "truing the teeth's axis would not put both right" in said(found)
    found, a = told(written(tmp_path, divided=60.0, at=200.0, noise=0.3))
    assert found.reduced.eccentric is not None
    assert "division" == found.reduced.eccentric.looks
    assert a.move is None


@pytest.mark.parametrize("column", ["angle_deg", "tooth"])
def test_holes_are_told_by_their_own_numbers_and_have_no_flanks(column: str, tmp_path: Path) -> None:
    rng = random.Random(3)
    lines = [f"{column},run,direction,deviation_arcsec"]
    for direction in ("forward", "reverse"):
        numbers = [*range(1, 25), 1]
        for n in numbers if direction == "forward" else reversed(numbers):
            place = (n - 1) * 15.0  # hole 1 stands at the mark
            off = 30.0 * math.sin(math.radians(45.0 - place)) + rng.gauss(0.0, 0.3)
            lines.append(f"{n if column == 'tooth' else place},1,{direction},{off:.3f}")
    file = tmp_path / "holes.csv"
    file.write_text("\n".join(lines) + "\n", encoding="utf-8")
    found = read_back(shipped("jobs/index-plate.yaml"), file, instrument=ONE)
    off = found.reduced.eccentric
    assert off is not None
    assert (4, "") == (off.tooth, off.looks)
    assert "high at hole 4 (" in said(found)
    assert "towards hole 4 off the axis" in said(found)
    assert "tooth" not in said(found) and "flank" not in said(found)


@pytest.mark.parametrize(("every", "seen"), [(1, True), (0.5, False)])
def test_the_worm_of_the_head_is_set_against_its_slow_wave_on_the_teeth(
    every: float, seen: bool, tmp_path: Path
) -> None:
    """40 turns of the crank on 72 teeth are 32 waves of the ring; between the teeth no slow wave stands for them."""
    rng = random.Random(4)
    lines = ["angle_deg,run,direction,deviation_arcsec"]
    for run in (1, 2):
        for direction, side in (("forward", -1), ("reverse", 1)):
            for k in range(round(72 / every) + 1):
                off = 15.0 * math.cos(40.0 * math.radians(5.0 * every * k) - 0.7) + rng.gauss(0.0, 0.5) + 4.0 * side
                lines.append(f"{5.0 * every * k},{run},{direction},{off:.3f}")
    file = tmp_path / "test.csv"
    file.write_text("\n".join(lines) + "\n")
    found, a = told(file)
    crank = [one for one in a.waves if one.wave.harmonic == 40.0]
    assert bool(crank) == seen
    if seen:
        assert crank[0].usual == pytest.approx(4.0 * ARCSEC * RADIUS, rel=0.1)  # a disc of 4", and a little scatter
        assert crank[0].explained is not None
        assert crank[0].explained.owners[0].name == "op 40, dividing"
        assert "once per crank turn of the head that cut it: 3.9 um along the pitch circle" in said(found)


@pytest.mark.parametrize(("harmonic", "turn"), [(40, 1), (40, -1), (100, 1), (76, -1), (5, 1)])
def test_a_quick_wave_is_the_slow_one_at_every_gap(harmonic: int, turn: int) -> None:
    ring = Pattern(72, RADIUS, turn=turn, start=0.3)
    slow = folded(harmonic, 72)
    wave = np.array([3.0, -1.0])
    a, b = _as_slow(harmonic, ring) @ wave
    theta = angles(ring)
    seen = 3.0 * np.cos(harmonic * theta) - np.sin(harmonic * theta)
    assert a * np.cos(slow * theta) + b * np.sin(slow * theta) == pytest.approx(seen)


@pytest.mark.parametrize("flank", ["forward", "reverse"])
def test_a_flank_nobody_names_accuses_no_setup_of_what_the_plan_knows(flank: str, tmp_path: Path) -> None:
    """The hub was bored 20 um off towards gap 19, as the dial said: read on one flank the wave stands 20 deg beside it."""
    text = JOB.read_text(encoding="utf-8")
    was = "runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}"
    assert was in text
    text = text.replace(was, "runout: {at_most: 60 um, measured: 40 um, uncertainty: 1 um, high_at: gap 19}")
    file = written(tmp_path, e=0.020, phi=-90.0, noise=0.1, directions=(flank,))  # gaps follow clockwise
    named, _ = told(file, text=text)
    file.write_text(
        "\n".join(",".join(row.split(",")[:2] + row.split(",")[3:]) for row in file.read_text().splitlines())
    )
    unnamed, _ = told(file, text=text)
    for found in (named, unnamed):
        assert isinstance(found.against, Against)
        explained = found.against.waves[0].explained
        assert explained is not None and explained.beyond > 0.9


def test_readings_at_whole_pitches_say_what_they_leave_out_where_the_plan_has_it(tmp_path: Path) -> None:
    """The spindle's wheel is planned by its exact gaps: within a pitch they add to the index what no station reads."""
    job = shipped("jobs/wheel-on-spindle.yaml")
    count = 60
    for places, said_so in ((20, True), (2 * count, False)):
        found = read_back(job, written(tmp_path, e=0.003, count=places), instrument=ONE)
        assert isinstance(found.against, Against)
        assert found.against.of == count
        assert ("within its pitch, planned at most" in said(found)) == said_so
    figure = found.against.answers[0].plan.figure
    assert isinstance(figure, AsItRuns)
    whole = found.against.answers[0].plan.combined.worst.high
    ring = figure.ring.base() + sum(one.up for one in figure.ring.pushes())
    assert 0.0 < figure.within_a_pitch() == pytest.approx(whole - ring, rel=1e-6)


@pytest.mark.parametrize(
    ("path", "whose"),
    [
        ("setups.30.cut.holes.each.tangential", "op 30, cutting"),
        ("setups.30.cut.holes.spindle_to_axis.x", "op 30, cutting"),
        ("setups.30.divide.wheel.once_per_turn", "op 30, dividing"),
        ("setups.30.hold.centre.runout", "op 30, holding"),
    ],
)
def test_a_reamer_that_wanders_is_no_fault_of_the_holding(path: str, whose: str) -> None:
    assert owner(Cause("any", "length", 30, high=0.001, paths=(path,))) == whose


def test_an_eccentric_ring_and_a_division_error_together_are_taken_apart(tmp_path: Path) -> None:
    """20 draws: what each of the two planted comes back, the eccentricity inside its interval in 17 of them or more."""
    inside = 0
    for seed in range(20):
        rng = random.Random(seed)
        phi, at = rng.uniform(0.0, 360.0), rng.uniform(0.0, 360.0)
        found, _ = told(written(tmp_path, e=0.010, phi=phi, divided=30.0, at=at, noise=0.5, seed=seed))
        two = found.reduced.apart
        assert two is not None
        assert two.amount == pytest.approx(0.010, abs=0.0008)
        assert abs((math.degrees(two.direction) - phi + 180.0) % 360.0 - 180.0) < 5.0
        assert two.divided / ARCSEC == pytest.approx(30.0, abs=2.0)
        assert abs((math.degrees(two.highest) - at + 180.0) % 360.0 - 180.0) < 5.0
        inside += abs(two.amount - 0.010) <= two.within
    assert inside >= 17
    assert "taken apart by the flanks: teeth off their axis by" in said(found)


def test_a_requirement_on_the_mean_of_heads_is_not_judged_by_a_test_through_one() -> None:
    found = review(read_job_text(shipped("jobs/encoder-disc-mount.yaml").read_text("utf-8"), "job.yaml"))
    heads = [r.heads or 1 for r in found.loaded.job.require if r.what == "index-within"]
    assert 2 in heads and 1 in heads
    assert [1] == [stack_of(scope).require.heads or 1 for scope in asked(found.book, found.floor, "disc.lines")]
