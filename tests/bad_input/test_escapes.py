"""Text of a job, and names of files, that a terminal would obey or a spreadsheet would compute: it comes out as text alone."""

from __future__ import annotations

import csv
import io
import os
import re
import sys
import unicodedata
from pathlib import Path

import pytest

from setupcheck.cli.main import run
from setupcheck.division.template import template
from setupcheck.errors import JobError
from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped
from tests.fuzz.material import RECORD

EVIL = "=HYPERLINK(1)\\x1b[31m\\e]0;gone\\a\\x9b2J\\u202egnp\\u2066\\u200f\\u2028\\r\\n\\tend"
"""As it stands in double quotes of YAML: colour, title of the window, clearing, text direction, line ends, a formula."""
WHEEL = (shipped("jobs") / "rotator-worm-wheel.yaml").read_text("utf-8")
COMMANDS: tuple[tuple[str, ...], ...] = (
    ("review", "JOB", "--all"),
    ("review", "JOB", "--json"),
    ("review", "JOB", "--color", "always"),
    ("working", "JOB", "stack.worst"),
    ("contact", "JOB"),
    ("insert", "JOB"),
    ("index", "JOB"),
    ("index", "JOB", "--op", "99"),
    ("remedy", "JOB"),
    ("remedy", "JOB", "--json"),
    ("vary", "JOB", "--set", "title=x"),
    ("vary", "JOB", "--set", "no.such=1"),
    ("readings", "JOB", "CSV"),
    ("readings", "JOB", "JOB"),
    ("readings", "JOB", "CSV", "--json"),
    ("sheet", "JOB", "-o", "OUT"),
    ("sheet", "JOB", "-o", "OUT", "--drawing", "no"),
    ("review", "CSV"),
    ("review", "NONE"),
    ("record", "RECORD"),
    ("record", "JOB"),
    ("rules", "--check", "JOB"),
    ("rules", "--check", "NONE"),
    ("review", "JOB", "--house", "CSV"),
    ("review", "JOB", "--record", "RECORD"),
    ("new", "JOB"),
    ("new", "NONE", "--like", "index-plate"),
)


def hostile() -> str:
    """The worm wheel with such a text wherever a planner writes words of his own."""
    evil = EVIL.replace("\\", "\\\\")  # once more, for `re`
    text = WHEEL
    for old, new in (
        (r"title: .*", f'title: "{evil}"'),
        (r"job: .*", f'job: "{evil}"\nrevision: "{evil}"'),
        (r"  - op: (\d+) .*", rf'  - op: \1\n    note: "{evil}"'),
        (r"(.*)\bby: invented initials, note: .*", rf'\1by: "{evil}", note: "{evil}"}}'),
        (r"(.*name: )shim\b(.*)", rf'\1"{evil}"\2'),
        (r"(  - \{what: [a-z-]+, )(.*)", rf'\1name: "{evil}", \2'),
    ):
        text, times = re.subn(rf"(?m)^{old}$", new, text)
        assert times, old
    return text


def obeyed(text: str) -> list[str]:
    """Characters of a text that a terminal would obey."""
    bad = ("Cc", "Cf", "Cs", "Zl", "Zp")
    return [f"U+{ord(c):04X}" for c in text if c != "\n" and unicodedata.category(c) in bad]


def told(monkeypatch: pytest.MonkeyPatch, capfd: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str]:
    """What a command prints, on both streams, and its exit code."""
    monkeypatch.setattr(sys, "argv", ["setupcheck", *arguments])
    with pytest.raises(SystemExit) as end:
        run()
    out, err = capfd.readouterr()
    assert "Traceback" not in err
    return int(end.value.code or 0), out + err


def test_the_hostile_job_is_read_and_its_text_is_in_it() -> None:
    try:
        job = read_job_text(hostile(), "job.yaml").job
    except JobError as wrong:
        pytest.fail(str(wrong))
    assert "\x1b[31m" in job.title and "\u202e" in job.title


@pytest.mark.parametrize("name", ["job", "a\x1b[31m\u202e\x9b2J\x07\rb"])
@pytest.mark.parametrize("command", COMMANDS, ids=" ".join)
def test_nothing_a_terminal_would_obey_comes_out_of_any_command(
    command: tuple[str, ...],
    name: str,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capfd: pytest.CaptureFixture[str],
) -> None:
    if name != "job" and os.name != "posix":
        pytest.skip("no such name can be given there")
    files = {
        "JOB": (f"{name}.yaml", hostile()),
        "CSV": (f"{name}.csv", template() + f"90,5,{'=1+1' + chr(27)}[31m,forward,2,\x1b[31m\u202e\n"),
        "RECORD": (f"{name}-record.csv", RECORD + "=cmd\x1b[31m\u202e, runout, 2026-01-01, 5 um, \x1b[31m\n"),
    }
    for file, text in files.values():
        (tmp_path / file).write_text(text, encoding="utf-8")
    places = {key: str(tmp_path / file) for key, (file, _) in files.items()}
    places |= {"NONE": str(tmp_path / f"{name}-none"), "OUT": str(tmp_path / "out.html")}
    _, said = told(monkeypatch, capfd, *(places.get(word, word) for word in command))
    if "always" in command:
        said = said.replace("\x1b[", "")  # our own colours; every other escape is still one
    assert said.strip()
    assert [] == obeyed(said.replace(str(tmp_path), ""))
    if (tmp_path / "out.html").exists():
        assert [] == obeyed((tmp_path / "out.html").read_text("utf-8"))


def test_a_csv_for_a_spreadsheet_holds_numbers_and_no_formula(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capfd: pytest.CaptureFixture[str]
) -> None:
    """Text of the job has no way into the index table's CSV: a head of our own words, then numbers, which may be negative."""
    (tmp_path / "job.yaml").write_text(hostile(), encoding="utf-8")
    out = tmp_path / "out.csv"
    code, said = told(monkeypatch, capfd, "index", str(tmp_path / "job.yaml"), "--csv", str(out))
    assert 0 == code, said
    head, *rows = csv.reader(io.StringIO(out.read_text("utf-8")))
    assert all(cell.replace("_", "").isalpha() for cell in head)
    assert len(rows) > 10
    assert all(float(cell) == float(cell) for row in rows for cell in row)


def test_the_readings_template_holds_no_cell_that_a_spreadsheet_would_compute() -> None:
    rows = [row for row in csv.reader(io.StringIO(template())) if not row[0].startswith("#")]
    formulas = [cell for row in rows[1:] for cell in row if cell[:1] in "=+@\t" and cell]
    assert [] == formulas
    assert all(float(row[0]) == float(row[0]) and float(row[1]) == float(row[1]) for row in rows[1:])
