"""`setupcheck sheet` and its file: whole or not at all, never over another, one message for what cannot be."""

from __future__ import annotations

import re
import shutil
from pathlib import Path

import pytest

from setupcheck.shipped import shipped
from tests.bad_input.test_command import command

LARGEST = 150_000
"""Bytes of the sheet of a shipped job, as is asked of it."""


@pytest.fixture
def job(tmp_path: Path) -> Path:
    return Path(shutil.copy(shipped("jobs/index-plate.yaml"), tmp_path / "job.yaml"))


def test_the_sheet_is_written_whole_and_says_what_the_review_says(job: Path) -> None:
    run = command("sheet", "job.yaml", "-o", "sheet.html", at=job.parent)
    assert (0, "written: sheet.html\nthe review says PASS\n", "") == (run.returncode, run.stdout, run.stderr)
    text = (job.parent / "sheet.html").read_text(encoding="utf-8")
    assert text.startswith("<!DOCTYPE html>")
    assert text.endswith("</html>\n")
    assert {"job.yaml", "sheet.html"} == {path.name for path in job.parent.iterdir()}


def test_a_file_that_is_there_stays_unless_it_is_forced(job: Path) -> None:
    (job.parent / "sheet.html").write_text("mine")
    run = command("sheet", "job.yaml", "-o", "sheet.html", at=job.parent)
    assert 2 == run.returncode
    told = " ".join(run.stderr.split())
    assert "sheet.html is already there and stays as it is. Write another name, or --force to replace it" in told
    assert "mine" == (job.parent / "sheet.html").read_text()
    assert 0 == command("sheet", "job.yaml", "-o", "sheet.html", "--force", at=job.parent).returncode
    assert (job.parent / "sheet.html").read_text().startswith("<!DOCTYPE html>")


@pytest.mark.parametrize(
    ("arguments", "says"),
    [
        (("-o", "no/sheet.html"), "no/sheet.html: there is no folder no. Make it first"),
        (("-o", "."), ". is a folder. Write the name of a file"),
        (("-o", "a.svg", "--drawing", "hold-31"), "this job has no drawing 'hold-31'. It has "),
        (("-o", "a.html", "--on", "soon"), "soon"),
        (("-o", "a.html", "--readings", "gone.csv"), "gone.csv"),
        ((), "a sheet goes into a file. Name it: -o sheet.html"),
        (("--drawing", "hold-31"), "this job has no drawing 'hold-31'. It has part-plate"),
        (("--drawing", "hold-30"), "a drawing goes into a file. Name it: -o hold-30.svg"),
    ],
)
def test_what_cannot_be_written_is_said_and_nothing_is_left(job: Path, arguments: tuple[str, ...], says: str) -> None:
    run = command("sheet", "job.yaml", *arguments, at=job.parent)
    assert 2 == run.returncode
    assert says in run.stderr
    assert "Traceback" not in run.stderr
    assert ["job.yaml"] == [path.name for path in job.parent.iterdir()]


def test_a_job_that_cannot_be_read_gives_no_sheet(job: Path) -> None:
    job.write_text(job.read_text().replace("units: in", "units: inch"))
    run = command("sheet", "job.yaml", "-o", "sheet.html", at=job.parent)
    assert 2 == run.returncode
    assert "job.yaml:" in run.stderr
    assert ["job.yaml"] == [path.name for path in job.parent.iterdir()]


JOBS = sorted(str(path.relative_to(shipped("jobs"))) for path in Path(shipped("jobs")).rglob("*.yaml"))


@pytest.mark.parametrize("name", JOBS)
def test_one_file_that_fetches_nothing_runs_nothing_and_is_small(name: str, monkeypatch: pytest.MonkeyPatch) -> None:
    from setupcheck.flow import review
    from setupcheck.report.sheet import as_sheet, tried

    if name != "index-plate.yaml":  # one job is enough to try values on: `test_tried` looks at the others
        monkeypatch.setattr(tried.Tried, "accept", lambda self, path: tried.COMPARED)
    found = review(shipped(f"jobs/{name}"))
    text = as_sheet(found)
    assert len(text.encode()) < LARGEST
    for outside in ("<script", "<link", "<img", "<iframe", "<object", "@import", "url(", "src=", "xlink"):
        assert outside not in text
    assert {"http://www.w3.org/2000/svg"} >= set(re.findall(r"\w+://[^\s\"'<]+", text))
    assert text == as_sheet(review(shipped(f"jobs/{name}"))), "two runs give the same bytes"
