"""`setupcheck remedy`: its end, its width, its records, and what it refuses."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
from typer.testing import CliRunner

from setupcheck.cli.main import app
from setupcheck.errors import SetupcheckError
from setupcheck.flow import mend, review
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import edited
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.remedy import as_text
from setupcheck.report.remedy_data import as_data
from setupcheck.shipped import shipped
from tests.jobs.remedy_cases import FAILING, GOOD, HIDDEN, MISTAKES, job, mended, outside, texts
from tests.jobs.remedy_jobs import (
    edits_in,
    held_twice,
    proposals_in,
)

# -- the command


def run(*args: str) -> tuple[int, str]:
    result = CliRunner().invoke(app, ["remedy", *args])
    if isinstance(result.exception, SetupcheckError):
        return 2, str(result.exception)
    assert result.exception is None or isinstance(result.exception, SystemExit), result.exception
    return result.exit_code, result.output


def test_the_command_ends_as_the_review_does() -> None:
    assert run(str(MISTAKES[0]))[0] == 3
    code, text = run("jobs/coupling-hub.yaml")
    assert code == 0
    assert "FEWER HOLDINGS" not in text


@pytest.mark.parametrize("name", [*FAILING, *(path.stem for path in GOOD), "a covered bore", "the wrong order"])
def test_no_line_is_wider_than_eighty_columns_and_nothing_is_called_safe(name: str) -> None:
    text = as_text(*mended(name))
    assert [line for line in text.splitlines() if len(line) > 80] == []
    body = text.split("Planning aid only")[0].lower()
    assert not re.search(r"\bsafe\b|approved|compliant", body)


def test_one_requirement_may_be_asked_for_alone() -> None:
    code, text = run(str(shipped(f"jobs/mistakes/{HIDDEN}.yaml")), "--of", "require[2]")
    assert code == 3
    assert "OUTSIDE  single-pitch" in text
    assert text.count("OUTSIDE  ") == 1 and "TIGHT" not in text
    code, text = run("jobs/rotator-worm-wheel.yaml", "--of", "require[9]")
    assert code == 0 and "allowance" in text


@pytest.mark.parametrize(
    ("of", "says"),
    [
        ("require[13]", "it has require[1] to require[12]"),
        ("require[0]", "it has require[1] to require[12]"),
        ("run-out", "is no requirement of this job"),
        ("\x1b[31mrequire[1]", "is no requirement of this job"),
    ],
)
def test_a_requirement_that_is_not_there_is_refused(of: str, says: str) -> None:
    code, text = run("jobs/rotator-worm-wheel.yaml", "--of", of)
    assert code == 2
    assert says in text and "\x1b" not in text


def test_a_requirement_that_cannot_be_told_is_refused() -> None:
    text = texts()["rotator-worm-wheel"].replace("centre_distance: 66.000 ±0.010, ", "")
    with pytest.raises(SetupcheckError, match=r"require\[10\] cannot be told yet"):
        mend(read_job_text(text, "job.yaml"), of="require[10]")


def test_a_job_without_requirements_or_setups_is_told_so(tmp_path: Path) -> None:
    head = texts()["rotator-worm-wheel"].split("\nsetups:")[0]
    found, all_of_it = mend(read_job_text(head, "job.yaml"))
    assert all_of_it.worst is None
    assert "none of 0 requirements outside" in as_text(found, all_of_it)
    missing = tmp_path / "none.yaml"
    code, text = run(str(missing))
    assert code == 2 and "none.yaml" in text


@pytest.mark.parametrize("name", [HIDDEN, "held twice", "index-plate", "a covered bore", "the wrong order"])
def test_the_records_say_what_the_text_says(name: str) -> None:
    found, all_of_it = mended(name)
    data = json.loads(json.dumps(as_data(found, all_of_it), allow_nan=False))
    assert data["verdict"] == found.verdict
    assert len(data["proposals"]) == len(all_of_it.proposals)
    for said, one in zip(data["proposals"], all_of_it.proposals, strict=True):
        assert said["left_outside"] == one.left
        assert [e["set"] for e in said["edits"] if "set" in e] == [e.key for e in one.edits if isinstance(e, Change)]
    for said, table in zip(data["stacks"], all_of_it.tables, strict=True):
        assert said["name"] == table.key
        assert len(said["alone"]) == len(table.enough)


def test_json_is_printed_by_the_command(tmp_path: Path) -> None:
    twice = tmp_path / "twice.yaml"
    twice.write_text(held_twice(), encoding="utf-8")
    code, text = run(str(twice), "--json")
    assert code in (0, 1)
    assert json.loads(text)["proposals"][0]["kind"] == "merge"


def test_names_of_the_file_can_do_nothing_to_a_terminal_or_a_shell() -> None:
    text = (
        texts()[HIDDEN]
        .replace("title: Feed rotator", 'title: "Feed \\x1b[31m rotator')
        .replace("worm wheel, 72 teeth\n", 'worm wheel, 72 teeth"\n', 1)
        .replace("lathe-A", '"lathe\'; rm $(x)"')
        .replace("name: shim", 'name: "shim\\x1b[1m `x`"')
    )
    found, all_of_it = mend(read_job_text(text, "job.yaml"))
    printed = as_text(found, all_of_it)
    assert "\x1b" not in printed
    json.dumps(as_data(found, all_of_it))
    assert "\\u001b" not in json.dumps(as_data(found, all_of_it)["proposals"])
    assert edits_in(proposals_in(printed)[0])


def test_the_shops_own_record_counts_in_every_trial(tmp_path: Path) -> None:
    record = tmp_path / "devices.csv"
    rows = "".join(
        f"shimmed-jaws,runout,2026-0{i}-01,{size} um,\n" for i, size in enumerate((30, 40, 30, 50, 40, 30), 1)
    )
    record.write_text("device,what,date,value,note\n" + rows, encoding="utf-8")
    found, all_of_it = mend(job(HIDDEN), devices=record)
    assert found.devices is not None
    row = next(r for t in all_of_it.tables for r in t.rows if r.entry.path == "setups.50.hold.centre.runout")
    assert 0.04 < row.entry.says[0].now < 0.1
    assert "in jaws over shims, from the shop's record" in " ".join(as_text(found, all_of_it).split())
    after = review(edited(job(HIDDEN), all_of_it.proposals[0].edits), devices=record)
    assert not outside(after)
    key = all_of_it.worst
    assert key is not None
    assert after.results[key].margin_share == pytest.approx(all_of_it.proposals[0].after)
    typed = [(t, r) for t in all_of_it.tables for r in t.enough if r.typed and not t.tight]
    assert typed
    for table, one in typed[:4]:
        margin = review(edited(job(HIDDEN), one.typed), devices=record).results[table.key].margin
        assert margin is not None and margin >= -1e-9


def test_a_house_or_day_that_is_not_there_is_refused(tmp_path: Path) -> None:
    house = tmp_path / "house.yaml"
    code, text = run("jobs/coupling-hub.yaml", "--house", str(house))
    assert code == 2 and "house.yaml" in text
    assert run("jobs/coupling-hub.yaml", "--on", "2027-02-30")[0] == 2
