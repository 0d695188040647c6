"""Help and exit codes: every command says what it does, an example that runs, and the exits that the README's table promises."""

from __future__ import annotations

import math
import os
import re
import shutil
import subprocess
import sys
from functools import cache
from pathlib import Path

import pytest

from setupcheck import flow
from setupcheck.cli import main
from setupcheck.shipped import shipped
from tests.unit.report.test_device_record import WORN

ROOT = Path(__file__).resolve().parents[3]
JOBS = shipped("jobs")
COMMANDS = [str(one.name) for one in main.app.registered_commands]
README = (ROOT / "README.md").read_text(encoding="utf-8")
ROTATOR, WHEEL = "jobs/rotator-worm-wheel.yaml", "jobs/wheel-on-spindle.yaml"
FAILS = "jobs/mistakes/hidden-chuck-run-out.yaml"
NEVER = "–"


def run(*words: str, cwd: Path) -> subprocess.CompletedProcess[str]:
    environment = {**os.environ, "PYTHONPATH": str(ROOT), "COLUMNS": "80"}
    return subprocess.run(
        [sys.executable, "-m", "setupcheck", *words],
        capture_output=True, text=True, encoding="utf-8", cwd=cwd, env=environment, check=False,
    )  # fmt: skip


def read_twice(amount: float) -> str:
    """Two passes over the rotator's wheel, whose deviation is one wave of this amount [arcsec], with a little scatter."""
    rows = [
        f"{run},{tooth},{amount * math.sin(math.tau * (tooth - 1) / 72) + 0.3 * math.sin(7.0 * run * tooth):.2f}"
        for run in (1, 2)
        for tooth in (*range(1, 73), 1)
    ]
    return "\n".join(["run,tooth,deviation_arcsec", *rows, ""])


@pytest.fixture(scope="module")
def shop(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder with the shipped jobs, a job that is open, one that warns, readings and records."""
    folder = tmp_path_factory.mktemp("shop")
    shutil.copytree(JOBS, folder / "jobs")
    good = (folder / ROTATOR).read_text(encoding="utf-8")
    (folder / "open.yaml").write_text(good.replace("rests: pushed, runout: 3 um}", "rests: pushed}"), encoding="utf-8")
    bar = "error: 50 um, removes: [bar]"
    (folder / "warns.yaml").write_text(good.replace(bar, f"state: rough, {bar}"), encoding="utf-8")
    assert len({(folder / name).read_bytes() for name in (ROTATOR, "open.yaml", "warns.yaml")}) == 3
    (folder / "kept.csv").write_text(run("record", "--template", cwd=folder).stdout, encoding="utf-8")
    (folder / "worn.csv").write_text(WORN, encoding="utf-8")
    (folder / "good.csv").write_text(read_twice(5.0), encoding="utf-8")
    (folder / "bad.csv").write_text(read_twice(200.0), encoding="utf-8")
    (folder / "read.csv").write_text(run("readings", "--template", cwd=folder).stdout, encoding="utf-8")
    return folder


@cache
def told(command: str) -> str:
    """The words of a help, without its lists, each paragraph on one line."""
    text = run(command, "--help", cwd=ROOT).stdout
    about = text.partition("\n\n")[2].partition("\nArguments:")[0].partition("\nOptions:")[0]
    return "\n".join(" ".join(part.split()) for part in about.split("\n\n"))


def examples(command: str) -> list[str]:
    return re.findall(r"^Example: (.*)$", told(command), re.M)


def codes(command: str) -> set[str]:
    """Exit codes that a help names."""
    (sentence,) = re.findall(r"Exit (?:[^.]*: )?(0 [^.]*)\.", told(command))
    return set(re.findall(r"(?:^|, )([0-9]+) ", sentence))


# -- help ------------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("command", COMMANDS)
def test_every_help_says_what_the_command_does_with_an_example(command: str) -> None:
    first = told(command).splitlines()[0]
    assert first[0].isupper() and len(first.split()) > 5 and "." in first
    assert examples(command)
    assert all(f" {command} " in f"{one} " and one.startswith("setupcheck ") for one in examples(command))


@pytest.mark.parametrize("command", COMMANDS)
def test_every_example_of_a_help_runs(command: str, tmp_path: Path) -> None:
    if shutil.which("bash") is None:
        pytest.skip("the examples are typed into bash, which is not here")
    shutil.copytree(JOBS, tmp_path / "jobs")
    tool = tmp_path / "bin" / "setupcheck"
    tool.parent.mkdir()
    tool.write_text(f'#!/bin/sh\nexec "{sys.executable}" -m setupcheck "$@"\n', encoding="utf-8")
    tool.chmod(0o755)
    path = f"{tool.parent}{os.pathsep}{os.environ['PATH']}"
    for example in examples(command):
        done = subprocess.run(
            ["bash", "-c", example], capture_output=True, text=True, encoding="utf-8", cwd=tmp_path, check=False,
            env={**os.environ, "PATH": path, "PYTHONPATH": str(ROOT)},
        )  # fmt: skip
        assert done.stderr == ""
        assert str(done.returncode) in codes(command) - {"2"}
        for word in re.findall(r"(?:-o|--svg|--csv|>) (\S+)", example):
            assert (tmp_path / word).stat().st_size > 100
        assert done.stdout or ">" in example


# -- exit codes ------------------------------------------------------------------------------------------------------


def table() -> dict[str, dict[str, str]]:
    """The README's table of exits: command -> code -> what it says."""
    (found,) = re.findall(r"<!-- exits -->\n(.*?)\n\n", README, re.S)
    rows = [[cell.strip() for cell in line.strip("|").split("|")] for line in found.splitlines()]
    head, _, *body = rows
    return {name: dict(zip(head[1:], row[1:], strict=True)) for row in body for name in re.findall(r"`(\w+)`", row[0])}


TABLE = table()
REACHED: dict[str, dict[str, list[list[str]]]] = {
    "review": {
        "0": [[ROTATOR]],
        "1": [["open.yaml"], ["warns.yaml", ROTATOR]],
        "2": [["nowhere.yaml"], [], [ROTATOR, "--on", "today"], ["nowhere.yaml", "warns.yaml"]],
        "3": [[FAILS], ["nowhere.yaml", FAILS]],
    },
    "remedy": {
        "0": [[ROTATOR]],
        "1": [["open.yaml"]],
        "2": [["nowhere.yaml"], [ROTATOR, "--of", "require[99]"]],
        "3": [[FAILS]],
    },
    "vary": {
        "0": [[ROTATOR, "--set", "setups.50.hold.centre.runout.measured=4 um"]],
        "1": [["open.yaml", "--set", "setups.50.hold.centre.runout.measured=4 um"]],
        "2": [["nowhere.yaml", "--set", "a=1"], [ROTATOR], [ROTATOR, "--set", "setups.99=1"]],
        "3": [
            [ROTATOR, "--set", "setups.50.hold.centre.runout.measured=9 um"],
            [ROTATOR, "--set", "setups.50.hold.centre.runout.measured=2um..9um/2"],
        ],
    },
    "readings": {
        "0": [["--template"], [ROTATOR, "good.csv", "--instrument", "1arcsec"]],
        "1": [[ROTATOR, "read.csv"]],
        "2": [[ROTATOR], [ROTATOR, "nowhere.csv"]],
        "3": [[ROTATOR, "bad.csv", "--instrument", "1arcsec"]],
    },
    "record": {"0": [["kept.csv"], ["--template"]], "1": [["worn.csv"]], "2": [["nowhere.csv"], []]},
    "contact": {"0": [[WHEEL]], "2": [["jobs/sprocket.yaml"]]},
    "insert": {"0": [[WHEEL]], "2": [["jobs/sprocket.yaml"], [WHEEL, "--paper", "A9"]]},
    "index": {"0": [[ROTATOR]], "2": [["jobs/coupling-hub.yaml"], [ROTATOR, "--op", "99"]]},
    "working": {"0": [[ROTATOR, "require[1]"], [FAILS, "require[1]"]], "2": [[ROTATOR, "nothing.at_all"]]},
    "rules": {"0": [[], ["DATUM-001"]], "2": [["DATUM-999"], ["--check", "nowhere.yaml"]]},
    "new": {"0": [["made.yaml", "--yes"]], "2": [[ROTATOR, "--yes"], ["made2.yaml", "--teeth", "many", "--yes"]]},
    "sheet": {"0": [[FAILS, "-o", "sheet.html"]], "2": [["nowhere.yaml", "-o", "none.html"], [ROTATOR]]},
    "schema": {"0": [[], ["--of", "review"]], "2": [["--of", "rules"]]},
}
"""Command -> code -> command lines that end with it, in the folder `shop`."""


def test_the_table_of_the_readme_has_every_command_and_no_other() -> None:
    assert set(TABLE) == set(COMMANDS) == set(REACHED)


@pytest.mark.parametrize("command", COMMANDS)
def test_help_and_table_name_the_same_codes_and_each_is_reached(command: str) -> None:
    named = {code for code, says in TABLE[command].items() if says != NEVER}
    assert named == codes(command) == set(REACHED[command])


@pytest.mark.parametrize(
    ("command", "code", "words"),
    [(c, code, words) for c, by_code in REACHED.items() for code, each in by_code.items() for words in each],
    ids=lambda one: " ".join(one) if isinstance(one, list) else one,
)
def test_a_command_ends_as_the_table_says(
    command: str,
    code: str,
    words: list[str],
    shop: Path,
    monkeypatch: pytest.MonkeyPatch,
    capfd: pytest.CaptureFixture[str],
) -> None:
    monkeypatch.chdir(shop)
    monkeypatch.setenv("COLUMNS", "80")
    monkeypatch.setattr(sys, "argv", ["setupcheck", command, *words])
    with pytest.raises(SystemExit) as end:  # in this process: that a process ends so is tried by the examples
        main.run()
    out, err = capfd.readouterr()
    assert str(end.value.code or 0) == code, out[-500:] + err[-500:]
    assert "Traceback" not in err
    assert bool(err) == (code == "2" or "nowhere.yaml" in words)


def test_a_command_that_is_broken_off_ends_with_130(monkeypatch: pytest.MonkeyPatch) -> None:
    def broken_off(*_: object, **__: object) -> object:
        raise KeyboardInterrupt

    monkeypatch.setattr(flow, "review", broken_off)
    monkeypatch.setattr(sys, "argv", ["setupcheck", "review", str(JOBS / "sprocket.yaml")])
    with pytest.raises(SystemExit) as end:
        main.run()
    assert end.value.code == 130


def test_a_pipe_that_nobody_reads_ends_with_1_and_no_traceback(tmp_path: Path) -> None:
    reads, writes = os.pipe()
    os.close(reads)
    done = subprocess.run(
        [sys.executable, "-m", "setupcheck", "schema"], stdout=writes, stderr=subprocess.PIPE, text=True, check=False
    )
    os.close(writes)
    assert (1, "") == (done.returncode, done.stderr)
