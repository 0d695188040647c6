"""The package used from Python: the README's example runs as printed, and the facade says what it takes."""

from __future__ import annotations

import doctest
import inspect
import json
import os
import re
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest

import setupcheck
from setupcheck import Change, SetupcheckError, as_records, example, load_job, review, vary
from setupcheck.report.json import as_json

ROOT = Path(__file__).resolve().parents[3]
README = (ROOT / "README.md").read_text(encoding="utf-8")
RUNOUT = "setups.50.hold.centre.runout.measured"


def fenced(name: str) -> str:
    """The one block of the README below this comment."""
    (found,) = re.findall(rf"<!-- {name} -->\n```\w*\n(.*?)```\n", README, re.S)
    return str(found)


def test_the_example_of_the_readme_prints_what_the_readme_says() -> None:
    run = subprocess.run(
        [sys.executable, "-c", fenced("python")], capture_output=True, text=True, check=True, cwd=ROOT, encoding="utf-8"
    )
    assert fenced("python prints") == run.stdout.replace(f"{ROOT}/", "")


def test_the_example_of_many_jobs_prints_what_the_readme_says(tmp_path: Path) -> None:
    script = tmp_path / "many.py"
    script.write_text(fenced("python many"), encoding="utf-8")
    run = subprocess.run(
        [sys.executable, str(script)],
        capture_output=True,
        text=True,
        check=True,
        cwd=ROOT,
        env=os.environ | {"PYTHONPATH": str(ROOT)},
        encoding="utf-8",
    )
    assert fenced("python many prints") == run.stdout


def test_the_facade_offers_all_it_says() -> None:
    for name in setupcheck.__all__:
        assert getattr(setupcheck, name) is not None
    with pytest.raises(AttributeError, match="has no attribute 'reviev'"):
        setupcheck.reviev  # noqa: B018


@pytest.mark.parametrize("name", sorted(set(setupcheck.__all__) - {"__version__"}))
def test_every_public_name_is_described_with_an_example_that_runs(name: str) -> None:
    """The suite runs the doctests of the package; `as_records` and the version stand in the package's own text."""
    what = getattr(setupcheck, name)
    text = inspect.cleandoc((setupcheck.__doc__ if name == "as_records" else what.__doc__) or "")
    examples = doctest.DocTestParser().get_examples(text)
    assert any(name in one.source for one in examples)
    assert any(one.want for one in examples)
    assert what.__doc__


def test_the_version_is_that_of_the_package_and_types_are_marked() -> None:
    data = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))
    assert data["project"]["version"] == setupcheck.__version__
    assert re.fullmatch(r"\d+\.\d+\.\d+", setupcheck.__version__)
    assert (ROOT / "setupcheck" / "py.typed").is_file()
    assert data["tool"]["hatch"]["build"]["targets"]["wheel"]["packages"] == ["setupcheck"]
    assert "Typing :: Typed" in data["project"]["classifiers"]
    assert data["tool"]["mypy"]["strict"] is True


def test_plain_records_are_those_of_the_json_report() -> None:
    found = review(example("index-plate"))
    assert json.loads(as_json(found)) == json.loads(json.dumps(as_records(found)))


def test_a_mapping_of_changes_is_the_same_as_change_records() -> None:
    job = load_job(example("rotator-worm-wheel"))
    by_text = vary(job, {RUNOUT: "9 um"})
    by_record = vary(job, [Change(RUNOUT, "9 um")])
    assert by_record.changes == by_text.changes
    assert as_records(by_record.after) == as_records(by_text.after)


def test_a_bare_number_is_in_the_units_of_the_file() -> None:
    (change,) = vary(example("index-plate"), {"parts.plate.surfaces.holes.on_circle": 4.74}).changes
    assert Change("parts.plate.surfaces.holes.on_circle", "4.74") == change


@pytest.mark.parametrize(
    ("changes", "says"),
    [
        ({RUNOUT: None}, "is no text or number. Write path and value as text"),
        ({RUNOUT: True}, "is no text or number. Write path and value as text"),
        ({RUNOUT: ["9 um"]}, "is no text or number. Write path and value as text"),
        ({5: "9 um"}, "is no text or number. Write path and value as text"),
        ({"": "9 um"}, "is no path of the job file. Write it as in setups.30.hold.centre.clearance"),
        ({"a=b": "9 um"}, "is no path of the job file"),
        ({RUNOUT: ""}, "has nothing behind its ="),
        ({RUNOUT: "9 um\nx"}, "has more than one line"),
        ({RUNOUT: "9,5 um"}, "Write a point for the decimal: 9.5 um"),
        ({RUNOUT: float("nan")}, "nan"),
        ({"setups.55.hold": "{}"}, "There: setups.10, setups.20"),
    ],
)
def test_changes_that_cannot_be_are_told_with_what_would_be_right(changes: dict[str, str], says: str) -> None:
    with pytest.raises(SetupcheckError) as wrong:
        vary(example("rotator-worm-wheel"), changes)
    assert says in str(wrong.value)


def test_an_unknown_example_lists_those_there_are() -> None:
    with pytest.raises(SetupcheckError, match=r"no shipped job 'worm'\. There: bearing-ring-seat, bevel-pinion-blank"):
        example("worm")
    with pytest.raises(SetupcheckError):
        example("../pyproject")
