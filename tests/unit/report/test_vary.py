"""`setupcheck vary`: what its text, JSON and drawing say, and what the command refuses."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from itertools import pairwise
from pathlib import Path
from xml.etree import ElementTree

import pytest

from setupcheck.flow import vary
from setupcheck.jobfile.changing import Change
from setupcheck.report.svg import room
from setupcheck.report.vary import as_data, as_text, moved
from setupcheck.shipped import shipped
from tests.golden import pages
from tests.unit.report.sample import flat

JOB = str(shipped("jobs/rotator-worm-wheel.yaml"))
MEASURED = "setups.50.hold.centre.runout.measured"
SVG = "{http://www.w3.org/2000/svg}"


def run(*arguments: str, cwd: Path | None = None) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "setupcheck", "vary", *arguments]
    at = {**os.environ, "PYTHONPATH": str(pages.ROOT)}
    return subprocess.run(command, capture_output=True, text=True, timeout=60, check=False, cwd=cwd, env=at)


def test_the_text_says_what_changes_and_what_does_not() -> None:
    text = flat(as_text(vary(JOB, [Change("cutters.fly.tip_radius", "14")])))
    assert "verdict PASS FAIL" in text
    assert "pass -> fail CUTTER-003" in text
    assert "pass -> open STACK-002" in text
    assert "contact-area at teeth 16 %, at least 12 % asked -> cannot be told" in text
    assert "cutter.radius@40/teeth 20.00 -> 14.00 mm (-30 %)" in text
    assert "10 requirements do not move." in text


def test_the_same_value_again_moves_nothing() -> None:
    found = vary(JOB, [Change(MEASURED, "4 um")])
    text = flat(as_text(found))
    assert "No finding appears, vanishes or changes its level." in text
    assert "12 requirements do not move. No other number moves." in text
    assert moved(found) == []


def test_the_biggest_relative_move_comes_first_and_all_shows_the_rest() -> None:
    found = vary(JOB, [Change("parts.wheel.surfaces.bore.diameter", "32 H6"), Change(MEASURED, "9 um")])
    sizes = [one.relative for one in moved(found)]
    assert sizes == sorted(sizes, reverse=True)
    short, whole = as_text(found), as_text(found, everything=True)
    assert set(short.splitlines()) - {line for line in short.splitlines() if "--all" in line} <= set(whole.splitlines())
    assert "which --all shows" in short
    assert len(whole.splitlines()) > len(short.splitlines())


def test_json_has_both_sides_in_the_units_of_the_report() -> None:
    data = json.loads(run(JOB, "--set", f"{MEASURED}=9 um", "--json").stdout)
    assert data["format"] == 1
    assert data["set"] == [{"key": MEASURED, "value": "9 um"}]
    assert (data["before"]["verdict"], data["after"]["verdict"]) == ("pass", "fail")
    row = next(r for r in data["requirements"] if r["name"].startswith("run-out"))
    assert row["unit"] == "um"
    assert row["before"]["worst"]["high"] == pytest.approx(25.3, abs=0.05)
    assert row["after"]["worst"]["high"] == pytest.approx(30.3, abs=0.05)
    number = next(n for n in data["numbers"] if n["name"] == "hold.within_plan@50/centre")
    assert (number["before"], number["after"], number["unit"]) == (4.0, 9.0, "um")
    assert number["relative"] == pytest.approx(5.0 / 9.0)
    assert {"rule": "HOLD-007", "before": "pass", "after": "fail"}.items() <= data["findings"][0].items()


def test_text_of_a_hostile_value_reaches_no_terminal() -> None:
    told = as_text(vary(JOB, [Change("title", '"red \\e[31m"')]))
    assert "\x1b" not in told
    assert "\x1b" not in json.dumps(as_data(vary(JOB, [Change("title", '"red \\e[31m"')])))


@pytest.mark.parametrize(
    ("arguments", "code"),
    [
        (["--set", f"{MEASURED}=3 um"], 0),
        (["--set", f"{MEASURED}=6 um"], 1),
        (["--set", f"{MEASURED}=9 um"], 3),
        (["--set", f"{MEASURED}=3um..6um/2"], 1),
        (["--set", f"{MEASURED}=9 kg"], 2),
        (["--set", "setups.50.hold.middle=9 um"], 2),
        (["--set", f"{MEASURED}=9 kg..12 kg"], 2),
        (["--set", "setups.50.hold.centre.by=four-jaw..chuck"], 2),
        (["--set", f"{MEASURED}=3um..6um", "--set", "cutters.fly.tip_radius=12..20"], 2),
        (["--set", f"{MEASURED}=3 um", "-o", "x.svg"], 2),
        ([], 2),
    ],
)
def test_the_exit_is_that_of_the_changed_job(arguments: list[str], code: int, tmp_path: Path) -> None:
    done = run(JOB, *arguments, cwd=tmp_path)
    assert done.returncode == code, done.stderr
    assert "Traceback" not in done.stderr
    assert list(tmp_path.iterdir()) == []


def test_a_drawing_is_written_whole_and_never_over_another(tmp_path: Path) -> None:
    arguments = (JOB, "--set", f"{MEASURED}=2um..10um/5", "-o", "out.svg")
    done = run(*arguments, cwd=tmp_path)
    assert done.returncode == 3
    assert "written: out.svg" in done.stdout
    assert (tmp_path / "out.svg").read_text(encoding="utf-8") == pages.drawings()["vary-range.svg"]
    again = run(*arguments, cwd=tmp_path)
    assert again.returncode == 2
    assert "is already there and stays as it is" in again.stderr
    assert run(*arguments, "--force", cwd=tmp_path).returncode == 3
    assert [path.name for path in tmp_path.iterdir()] == ["out.svg"]


def test_the_drawing_keeps_to_its_sheet_and_each_curve_to_its_dashes() -> None:
    tree = ElementTree.fromstring(pages.drawings()["vary-range.svg"])
    wide, high = float(tree.attrib["viewBox"].split()[2]), float(tree.attrib["viewBox"].split()[3])
    for node in tree.iter(f"{SVG}text"):
        size = float(node.attrib["font-size"])
        part = {"start": 1.0, "middle": 0.5, "end": 0.0}[node.attrib.get("text-anchor", "start")]
        length = room(node.text or "", size)
        assert float(node.attrib["x"]) + part * length <= wide, node.text
        assert float(node.attrib["x"]) - (1.0 - part) * length >= 0.0, node.text
        assert 0.0 < float(node.attrib["y"]) < high
    lines = [node.attrib for node in tree.iter(f"{SVG}polyline")]
    curves, keys = lines[::2], lines[1::2]
    dashes = [one.get("stroke-dasharray", "") for one in curves]
    assert len(set(dashes)) == len(dashes) > 3
    assert [one.get("stroke-dasharray", "") for one in keys] == dashes


def test_a_curve_crosses_the_limit_line_where_the_requirement_turns() -> None:
    """Read off the drawing itself: the thick line is the limit, the first curve that of the backlash swing."""
    tree = ElementTree.fromstring(pages.drawings()["vary-range.svg"])
    thick = next(n.attrib for n in tree.iter(f"{SVG}line") if float(n.attrib["stroke-width"]) > 0.5)
    curve = next(n.attrib["points"] for n in tree.iter(f"{SVG}polyline"))
    points = [tuple(float(c) for c in point.split(",")) for point in curve.split()]
    limit, left, right = (float(thick[key]) for key in ("y1", "x1", "x2"))
    (x1, y1), (x2, y2) = next((a, b) for a, b in pairwise(points) if a[1] >= limit > b[1])
    crossed = x1 + (x2 - x1) * (y1 - limit) / (y1 - y2)
    value = 2.0 + 8.0 * (crossed - left) / (right - left)
    (turn,) = next(turns for name, turns in pages.swept().kept.items() if name.startswith("backlash-swing"))
    assert float(turn.low) <= value <= float(turn.high) + 1e-3
