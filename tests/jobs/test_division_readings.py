"""`setupcheck readings JOB CSV` on the shipped jobs: what it takes from the job, what it prints, and how it ends."""

from __future__ import annotations

import json
import math
import re
from pathlib import Path

import pytest
from typer.testing import CliRunner

from setupcheck.cli.main import app
from setupcheck.errors import SetupcheckError
from setupcheck.flow import read_back
from setupcheck.quantities.route import walk
from setupcheck.quantities.teeth_read import teeth_of

from ..published.division_files import Shop, as_circle, as_deviations, pitch_off, rows, stations

JOBS = Path(__file__).resolve().parents[2] / "jobs"
WHEEL = JOBS / "rotator-worm-wheel.yaml"
BOTH = [(1, 1), (1, -1), (2, 1), (2, -1)]


def run(*arguments: str) -> tuple[int, str]:
    result = CliRunner().invoke(app, ["readings", *arguments])
    if isinstance(result.exception, SetupcheckError):
        return 2, str(result.exception)
    assert result.exception is None or isinstance(result.exception, SystemExit), result.exception
    return result.exit_code, result.output


def rider(folder: Path, **planted: float) -> Path:
    shop = Shop(5, collimation=6.0, **planted)  # type: ignore[arg-type]
    file = folder / "test.csv"
    text = as_circle(shop, rows(shop, BOTH, stations(24, 8, (0.0, 120.0)), turned=True), orientation=33.0)
    file.write_text(text, encoding="utf-8", newline="")
    return file


def test_the_template_is_printed_and_read_back(tmp_path: Path) -> None:
    code, text = run("--template")
    assert 0 == code
    file = tmp_path / "mine.csv"
    file.write_text(text)
    code, told = run(str(WHEEL), str(file), "--instrument", "1arcsec")
    assert 0 == code
    assert "eccentric by 8.0 um (8.0 um to 8.1 um), high at tooth" in told
    assert "both flanks differ as those of an eccentric ring do" in " ".join(told.split())


def test_verdict_and_warnings_stand_before_the_numbers(tmp_path: Path) -> None:
    file = tmp_path / "twelve.csv"
    file.write_text(as_deviations(rows(Shop(1), BOTH[:2], stations(12), turned=False), column="angle_deg"))
    code, told = run(str(WHEEL), str(file))
    assert 1 == code  # told, but nothing says how well the standard is known
    places = [
        told.index(part)
        for part in ("TOLD", "WHAT THESE STATIONS CANNOT SHOW", "ANSWERS", "THE READINGS", "POSITIONING")
    ]
    assert sorted(places) == places
    assert "72 waves): every station sees it alike" in told
    assert all(len(line.replace(str(tmp_path), "")) <= 80 for line in told.splitlines())  # a path has no place to break


def test_a_full_test_tells_everything_in_trade_terms(tmp_path: Path) -> None:
    code, told = run(str(WHEEL), str(rider(tmp_path)), "--instrument", "1arcsec")
    assert 0 == code
    flat = " ".join(told.split())
    assert "CANNOT SHOW" not in told
    for part in ("high at tooth", "um along the worm", "at the pitch line", "collimation 6.", "in the manner of ISO 17123-3",
                 "ISO 230-2, edition 1997 onward (2 s), formulas from memory", "scatter of one reading"):  # fmt: skip
        assert part in flat


def test_json_has_the_same_numbers(tmp_path: Path) -> None:
    file = rider(tmp_path)
    code, text = run(str(WHEEL), str(file), "--json", "--instrument", "1arcsec")
    assert 0 == code
    data = json.loads(text)
    assert (1, "told", "wheel.teeth") == (data["format"], data["verdict"], data["of"])
    assert data["eccentric"]["um"]["low"] <= 8.0 <= data["eccentric"]["um"]["high"]
    worm = next(w for w in data["waves"] if w["harmonic"] == 72.0)
    assert worm["arcsec"]["low"] <= 3.0 <= worm["arcsec"]["high"]
    first = data["waves"][0]
    assert first["arcsec"]["value"] == pytest.approx(math.hypot(first["cos_arcsec"], first["sin_arcsec"]))
    assert data["collimation_arcsec"]["pairs"] == 4 * 39


def test_the_flag_makes_places_of_the_work_turns_of_it(tmp_path: Path) -> None:
    shop = Shop(2)
    found = rows(shop, BOTH, stations(24), turned=True)
    turned, placed = tmp_path / "turned.csv", tmp_path / "placed.csv"
    turned.write_text(as_deviations(found, column="turned_deg"))
    placed.write_text(as_deviations(found, column="angle_deg"))
    assert run(str(WHEEL), str(turned))[1] == run(str(WHEEL), str(placed), "--turns-with-work")[1].replace(
        "placed", "turned"
    )
    right, wrong = read_back(WHEEL, turned).reduced.eccentric, read_back(WHEEL, placed).reduced.eccentric
    assert right is not None and wrong is not None
    assert abs(right.direction - math.radians(shop.phi)) < math.radians(3.0)
    assert abs(wrong.direction - math.radians(shop.phi)) > math.radians(30.0)


def test_a_missed_tooth_is_open_and_named(tmp_path: Path) -> None:
    found = rows(Shop(1), BOTH[:2], stations(24), turned=False)
    pitch_off(found, pitch=5.0, at=120.0, later=False, runs=(1,))
    file = tmp_path / "missed.csv"
    file.write_text(as_deviations(found, column="angle_deg"))
    code, told = run(str(WHEEL), str(file))
    assert 1 == code
    assert "OPEN" in told
    assert "line 10, at 120.0 deg: 1 x 5.0000 deg further, a place was counted wrong" in told


@pytest.mark.parametrize(
    ("name", "of", "count", "own", "head"),
    [
        ("rotator-worm-wheel", None, 72, 72.0, 40.0),
        ("spur-gear-on-mandrel", None, None, None, None),
        ("index-plate", None, None, None, None),
    ],
)
def test_what_a_job_says_of_its_teeth(
    name: str, of: str | None, count: int | None, own: float | None, head: float | None
) -> None:
    from setupcheck.flow import load_job

    teeth = teeth_of(walk(load_job(JOBS / f"{name}.yaml")), of)
    assert teeth.count == (count or teeth.count)
    assert own == teeth.worm_ratio
    assert head is None or head == teeth.head_ratio
    assert teeth.radius > 1.0


def test_wrong_use_is_told(tmp_path: Path) -> None:
    file = rider(tmp_path)
    assert 2 == run()[0]
    code, told = run(str(WHEEL), str(file), "--of", "wheel.tooth")
    assert (2, True) == (code, "Did you mean wheel.teeth?" in told)
    code, told = run(str(JOBS / "coupling-hub.yaml"), str(file))
    assert (2, True) == (code, "divides nothing" in told)
    code, told = run(str(WHEEL), str(tmp_path / "none.csv"))
    assert (2, True) == (code, "there is no such file" in told)


@pytest.mark.parametrize(
    ("name", "of", "count", "one", "many"),
    [
        ("rotator-worm-wheel", "wheel.teeth", 72, "tooth", "teeth"),
        ("index-plate", "plate.holes", 24, "hole", "holes"),
        ("encoder-disc-mount", "disc.lines", 512, "line", "lines"),
    ],
)
def test_places_are_called_what_they_are(name: str, of: str, count: int, one: str, many: str, tmp_path: Path) -> None:
    """Read on one side alone, off the axis by a plain sine of 30": its first wave has an owner, and the places a name."""
    lines = ["tooth,run,direction,deviation_arcsec"]
    for run_ in (1, 2):
        for n in (*range(1, count + 1, max(1, count // 24)), 1):
            off = 30.0 * math.sin(math.radians(45.0 - (n - 1) * 360.0 / count)) + 0.2 * ((7 * n + 3 * run_) % 5 - 2)
            lines.append(f"{n},{run_},forward,{off:.3f}")
    file = tmp_path / "test.csv"
    file.write_text("\n".join(lines) + "\n", encoding="utf-8")
    _, told = run(str(JOBS / f"{name}.yaml"), str(file), "--of", of, "--instrument", "1arcsec")
    said = " ".join(told.split())
    assert re.search(rf"high at {one} \d+ \(", said)
    assert re.search(rf"{many.capitalize()} stand \S+ (um|thou) towards {one} \d+ off the axis of use", said)
    assert f"as much towards that {one}" in said
    others = {"tooth", "teeth", "hole", "holes", "lines"} - {one, many}
    assert set() == others & set(re.findall(r"[a-z]+", said.replace(of, "").lower()))


def test_a_ring_that_is_not_there_names_all_three(tmp_path: Path) -> None:
    code, told = run(str(JOBS / "encoder-disc-mount.yaml"), str(tmp_path / "no.csv"), "--of", "disc.nothing")
    assert code == 2 and "has no teeth, holes or lines 'disc.nothing'" in told and "disc.lines" in told
