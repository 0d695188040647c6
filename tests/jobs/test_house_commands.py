"""A shop's own figures in the commands that show one thing alone: contact, a division test read back, proposals of a remedy."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest

from setupcheck.flow import HOUSE_FILE, mend, review
from setupcheck.jobfile.changing import Change
from setupcheck.report.index_table import as_index_table
from setupcheck.report.insert import inserts, readings
from setupcheck.report.insert_drawing import as_drawing
from setupcheck.shipped import example, shipped
from tests.jobs.remedy_cases import HIDDEN
from tests.unit.cli.calling import run
from tests.unit.report.sample import changed, flat

# -- a wheel that the shop's own figures reach

WHEEL_SHOP = """\
house: Toolroom
typical:
  tilt:
    sine-bar: {value: 60", note: worn rollers, who: K. Lind, when: 2026-11-02}
  position:
    readout-5um: {value: 16 um, note: long way, who: K. Lind, when: 2026-11-02}
  runout:
    four-jaw: {value: 19 um, note: worn jaws, who: K. Lind, when: 2026-11-02}
  once_per_turn:
    hole-circle: {value: 88", note: old head, who: K. Lind, when: 2026-11-02}
"""
ASKED_OF_DEVICES = (
    ("tilt: 3deg 10' 47\", uncertainty: 1', ", "tilt: 3deg 10' 47\", "),
    ("depth: 4.4, depth_error: 10 um", "depth: 4.4, depth_error: {device: readout-5um}"),
    ("runout: {at_most: 4 um, indicator: 1 um}", "runout: {device: four-jaw}"),
    (', wheel: {once_per_turn: ±12"}, worm: {once_per_crank: ±4"}, setting: 2", clamp: 0"}', "}"),
)
"""What the shipped job states, and the same left to devices."""


@pytest.fixture
def wheel_shop(tmp_path: Path) -> Path:
    """A folder with the job of a worm wheel that leaves its errors to devices, and a house file that states them."""
    text = example("wheel-on-spindle").read_text(encoding="utf-8")
    (tmp_path / "job.yaml").write_text(changed(text, *ASKED_OF_DEVICES), encoding="utf-8")
    (tmp_path / HOUSE_FILE).write_text(WHEEL_SHOP, encoding="utf-8")
    places = [f"{6 * k},{run},{way},0.{k % 7}" for run in (1, 2) for way in ("forward", "reverse") for k in range(61)]
    (tmp_path / "test.csv").write_text("angle_deg,run,direction,deviation_arcsec\n" + "\n".join(places) + "\n")
    return tmp_path


@pytest.mark.parametrize(("command", "line"), [("contact", 0), ("readings", 1)])
def test_contact_and_a_division_test_go_by_the_shops_own_figures(wheel_shop: Path, command: str, line: int) -> None:
    more = [wheel_shop / "test.csv"] if command == "readings" else []
    job = wheel_shop / "job.yaml"
    (_, own), (_, plain) = run(command, job, *more), run(command, job, *more, "--no-house")
    at = next(n for n, said in enumerate(own.splitlines()) if said.startswith("house: Toolroom, setupcheck-house.yaml"))
    assert (at == 0) == (line == 0) and "house:" not in plain
    told = {"contact": "planned at the worst: tilt ", "readings": "the plan has "}[command]
    numbers = [float(re.split("['\"]", flat(text).partition(told)[2])[0]) for text in (own, plain)]
    assert numbers[0] > numbers[1] > 0.0
    assert max(len(said.replace(str(wheel_shop), "")) for said in own.splitlines()) <= 80
    named = run(command, job, *more, "--house", wheel_shop / HOUSE_FILE)[1]
    assert named == own
    (wheel_shop / "own.csv").write_text(
        "device, what, date, value\n" + "".join(f'sine-bar, tilt, 2026-01-0{n}, {n}0"\n' for n in range(3, 9)),
        encoding="utf-8",
    )
    assert run(command, job, *more, "--record", wheel_shop / "own.csv")[1] != own
    (wheel_shop / HOUSE_FILE).write_text("house: [", encoding="utf-8")
    code, wrong = run(command, job, *more)
    assert code == 2 and HOUSE_FILE in wrong and "--no-house" in wrong


def test_json_of_a_division_test_names_the_house(wheel_shop: Path) -> None:
    asked = ("readings", wheel_shop / "job.yaml", wheel_shop / "test.csv", "--json")
    own, plain = json.loads(run(*asked)[1]), json.loads(run(*asked, "--no-house")[1])
    assert (own["house"]["name"], own["house"]["file"]) == ("Toolroom", HOUSE_FILE) and plain["house"] is None
    assert own["plan"]["answers"][0]["planned"]["worst"] > plain["plan"]["answers"][0]["planned"]["worst"]


def test_insert_and_index_table_rest_on_nothing_a_house_may_change(wheel_shop: Path) -> None:
    """So the commands do not take one; what the shop says is heard everywhere else."""
    job = wheel_shop / "job.yaml"
    plain, own = review(job), review(job, house=wheel_shop / HOUSE_FILE)
    assert {use.row.what for use in own.of_house} == {"tilt", "position", "runout", "once_per_turn"}
    assert [*inserts(plain), *readings(plain)] == [*inserts(own), *readings(own)] != []
    assert as_drawing(plain, scale=20.0, paper="A4") == as_drawing(own, scale=20.0, paper="A4")
    assert as_index_table(plain.loaded, plain.book) == as_index_table(own.loaded, own.book)


# -- remedies

OWN_CHUCK = """\
house: Toolroom
typical:
  runout:
    four-jaw: {{value: {value} um, note: test bar, who: K. Lind, when: 2026-11-02}}
"""


def readings_proposed(house: Path | None, record: Path | None = None) -> set[float]:
    """Dial readings of a four-jaw chuck that the mistake's proposals ask for [um]."""
    _, found = mend(shipped(f"jobs/mistakes/{HIDDEN}.yaml"), house=house, devices=record)
    return {
        round(1000.0 * one.idea.reading, 1)
        for one in found.proposals
        if one.idea.reading is not None and one.idea.by == "four-jaw"
    }


@pytest.mark.parametrize(("value", "asked"), [("7", 7.0), ("3.5", 3.5), ("18", 7.7)])
def test_a_proposal_starts_from_what_the_shop_says_its_chuck_gives(tmp_path: Path, value: str, asked: float) -> None:
    """The chuck nobody named yet: 10 um is typical and 7.7 um needed, so one that gives 7 um is not asked for more."""
    assert {7.7} == readings_proposed(None)
    (tmp_path / "shop.yaml").write_text(OWN_CHUCK.format(value=value), encoding="utf-8")
    assert {asked} == readings_proposed(tmp_path / "shop.yaml")
    code, told = run("remedy", shipped(f"jobs/mistakes/{HIDDEN}.yaml"), "--house", tmp_path / "shop.yaml")
    assert code == 3 and f"four-jaw chuck to {asked:.1f} um." in flat(told)


def test_a_proposal_goes_by_the_record_of_a_device_before_the_house_value(tmp_path: Path) -> None:
    (tmp_path / "shop.yaml").write_text(OWN_CHUCK.format(value="3.5"), encoding="utf-8")
    rows = "".join(f"four-jaw, runout, 2026-01-0{n}, {v} um\n" for n, v in enumerate((4, 4.2, 3.8, 4.1, 3.9, 4), 1))
    (tmp_path / "own.csv").write_text("device, what, date, value\n" + rows, encoding="utf-8")
    (asked,) = readings_proposed(tmp_path / "shop.yaml", tmp_path / "own.csv")
    assert 4.0 < asked < 7.7
    _, found = mend(shipped(f"jobs/mistakes/{HIDDEN}.yaml"), devices=tmp_path / "own.csv")
    typed = [edit.value for one in found.proposals for edit in one.edits if isinstance(edit, Change)]
    assert "{on: hub, by: four-jaw, at: 23, runout: {device: four-jaw}}" in typed
