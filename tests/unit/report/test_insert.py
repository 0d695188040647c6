"""The insert in report, JSON and command: sizes as the profile has them, readings that grind it, a drawing true to scale."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path
from xml.etree import ElementTree

import pytest

from setupcheck.quantities.book import Known
from setupcheck.report.insert import inserts, readings
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text
from tests.jobs.test_slips_of_grinding import GOOD, judged, typed, with_keys
from tests.unit.report.sample import WHEEL, reviewed

SVG = "{http://www.w3.org/2000/svg}"


def run(*arguments: str) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "setupcheck", "insert", *arguments]
    return subprocess.run(command, capture_output=True, text=True, timeout=60, check=False)


@pytest.fixture
def job(tmp_path: Path) -> Path:
    path = tmp_path / "job.yaml"
    path.write_text(typed("rotator-worm-wheel"), encoding="utf-8")
    return path


def value(route: str, name: str, grinding: str = GOOD) -> object:
    book = judged(route, grinding).book
    answers = [book.get(f"insert.{name}", scope) for scope in book.instances("cut")]
    (answer,) = [a for a in answers if a is not None]
    assert isinstance(answer, Known), answer
    return answer.value


@pytest.mark.parametrize(
    ("route", "width", "height"), [("rotator-worm-wheel", 2.387, 1.8), ("wheel-on-spindle", 3.185, 2.4)]
)
def test_the_profile_has_the_stated_width_at_pitch_height(route: str, width: float, height: float) -> None:
    sizes = dict(value(route, "sizes"))  # type: ignore[call-overload]
    (at,) = [h for h in sizes if h == pytest.approx(height, abs=1e-9)]
    assert width == pytest.approx(sizes[at], abs=2e-5)
    assert list(sizes.values()) == sorted(sizes.values())


@pytest.mark.parametrize(
    ("route", "rolling", "module"), [("rotator-worm-wheel", 54.0, 1.5), ("wheel-on-spindle", 60.0, 2.0)]
)
def test_the_hollow_is_that_of_an_involute_where_contact_begins(route: str, rolling: float, module: float) -> None:
    # r2 sin alpha - m/sin alpha, the end of the path of contact (textbook), but for 1/cos of the tilt; the rotator's envelope
    # bends more just below the corner of its teeth
    involute = rolling * 0.3420201433 - module / 0.3420201433
    found = float(str(value(route, "hollow")))
    assert found == pytest.approx(involute, rel=5e-3) or route == "rotator-worm-wheel"
    assert 0.85 * involute < found < 1.005 * involute


def test_the_readings_put_the_wheel_against_the_profile() -> None:
    """Each point read back: the wheel's edge, set by both dials, reaches the flank to within the rounding."""
    sizes = value("wheel-on-spindle", "drawn")
    heights, halves = sizes.heights, sizes.half_widths  # type: ignore[attr-defined]
    radius, side, step = 5.0, 6.0, 0.001
    listed = value("wheel-on-spindle", "listed")
    assert len(listed) >= 10  # type: ignore[arg-type]
    for _, across, along in listed:  # type: ignore[attr-defined]
        x, h = across + side + radius, along - radius
        nearest = min(((x - w) ** 2 + (h - q) ** 2) ** 0.5 for q, w in zip(heights, halves, strict=True))
        assert radius == pytest.approx(nearest, abs=step)
        assert across == pytest.approx(round(across / step) * step, abs=1e-9)


def test_block_and_table_keep_to_eighty_columns_and_say_the_numbers() -> None:
    found = judged("rotator-worm-wheel", with_keys(stop_error="5'", way="turned-over"))
    lines = [*inserts(found), *readings(found)]
    assert max(map(len, lines)) <= 80
    text = " ".join(" ".join(lines).split())
    assert "INSERT, cutter fly: op 40, envelope of the gap, at its stated width" in text
    assert "2.3870 mm at pitch height" in text
    assert "turned-over: the width changes by up to" in text
    assert "keep it within 5.0 um" in text
    assert "from 50:1 on" in text
    assert "\n".join(inserts(found)) in as_text(found)
    assert max(map(len, as_text(found).splitlines())) <= 80


def test_json_holds_sizes_points_and_lines() -> None:
    found = judged("wheel-on-spindle")
    (told,) = json.loads(as_json(found))["inserts"]
    assert (50, "fly") == (told["op"], told["cutter"])
    assert {"height", "width"} == set(told["sizes"][0])
    assert len(told["points"]) == value("wheel-on-spindle", "points")
    assert told["says"]


def test_a_job_that_does_not_ask_has_no_block() -> None:
    assert [] == json.loads(as_json(reviewed(WHEEL)))["inserts"]


def test_an_inch_job_reads_in_inches() -> None:
    found = judged("rotator-worm-wheel")
    in_mm = " ".join([*inserts(found), *readings(found)])
    found.book.inches = True
    told = " ".join(" ".join([*inserts(found), *readings(found)]).split())
    assert "1.800 mm" in in_mm
    assert "0.0709 in 0.09398 in" in told  # 1.8 mm up, 2.387 mm wide
    assert " mm" not in told


def test_the_command_writes_a_drawing_true_to_scale(job: Path, tmp_path: Path) -> None:
    svg = tmp_path / "insert.svg"
    done = run(str(job), "--svg", str(svg), "--scale", "10")
    assert 0 == done.returncode, done.stderr
    assert f"written: {svg}, 10:1" in done.stdout
    assert "READINGS, cutter fly" in done.stdout
    root = ElementTree.parse(svg).getroot()
    _, _, wide, high = map(float, root.attrib["viewBox"].split())
    assert (f"{wide:g}mm", f"{high:g}mm") == (root.attrib["width"], root.attrib["height"])
    paths = [node.attrib["points"].split() for node in root.iter(f"{SVG}polyline")]
    outline = max(paths, key=len)
    x, y = zip(*(map(float, point.split(",")) for point in outline), strict=True)
    drawn = value("rotator-worm-wheel", "drawn")
    assert 10.0 * drawn.heights[-1] == pytest.approx(max(y) - min(y), abs=2e-3)  # type: ignore[attr-defined]
    assert 20.0 * drawn.half_widths[-1] == pytest.approx(max(x) - min(x), abs=2e-3)  # type: ignore[attr-defined]
    tip = sorted(px for px, py in zip(x, y, strict=True) if py == pytest.approx(max(y), abs=1e-3))
    assert 20.0 * drawn.half_widths[0] == pytest.approx(tip[-1] - tip[0], abs=2e-3)  # type: ignore[attr-defined]
    assert {job, svg} == set(tmp_path.iterdir())  # nothing half written is left beside it


def test_a_file_that_is_there_stays_unless_force_says_otherwise(job: Path, tmp_path: Path) -> None:
    svg = tmp_path / "insert.svg"
    svg.write_text("mine", encoding="utf-8")
    refused = run(str(job), "--svg", str(svg))
    assert (2, "mine") == (refused.returncode, svg.read_text(encoding="utf-8"))
    assert "already there and stays as it is" in refused.stderr
    assert 0 == run(str(job), "--svg", str(svg), "--force").returncode
    assert svg.read_text(encoding="utf-8").startswith("<")
    assert {job, svg} == set(tmp_path.iterdir())


@pytest.mark.parametrize(
    ("more", "says"),
    [
        (("--scale", "100"), "the paper has 210 x 297 mm: 20:1 would fit"),
        (("--scale", "nan"), "write 20 for 20:1; from 1 to 1000"),
        (("--paper", "A9"), "write A4 or A3"),
    ],
)
def test_what_cannot_be_drawn_is_refused_and_leaves_nothing_behind(
    job: Path, tmp_path: Path, more: tuple[str, ...], says: str
) -> None:
    done = run(str(job), "--svg", str(tmp_path / "insert.svg"), *more)
    assert 2 == done.returncode
    assert says in " ".join(done.stderr.replace("│", " ").split())
    assert {job} == set(tmp_path.iterdir())


@pytest.mark.parametrize(
    ("place", "says"), [("", "is a folder. Write the name of a file"), ("no/insert.svg", "there is no folder")]
)
def test_a_place_where_nothing_can_be_written_is_told_first(job: Path, tmp_path: Path, place: str, says: str) -> None:
    done = run(str(job), "--svg", str(tmp_path / place))
    assert 2 == done.returncode
    assert says in " ".join(done.stderr.split())


def test_a_job_that_gives_no_insert_says_what_it_takes(tmp_path: Path) -> None:
    job = tmp_path / "job.yaml"
    job.write_text(WHEEL, encoding="utf-8")
    assert "Write contact: exact under mesh" in run(str(job)).stderr
    plate = run("jobs/index-plate.yaml")
    assert 2 == plate.returncode
    assert "worm wheel cut gap by gap" in plate.stderr
    job.write_text(typed("rotator-worm-wheel").replace("insert: envelope, ", ""), encoding="utf-8")
    assert "fill cutters.fly.insert" in run(str(job)).stderr
