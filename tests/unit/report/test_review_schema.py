"""The published schema of the review's JSON: whatever a review prints is valid, nothing it prints is left undescribed."""

from __future__ import annotations

import copy
import json
import subprocess
import sys
from pathlib import Path
from typing import Any

import jsonschema
import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.json import FORMAT, as_json
from setupcheck.report.review_schema import as_json_schema
from tests.bad_input.ring import RING, spoilt
from tests.jobs import backlash_jobs, test_house
from tests.jobs.worm_jobs import TWO_STARTS
from tests.unit.report import test_device_record
from tests.unit.report.sample import WHEEL, changed

ROOT = Path(__file__).resolve().parents[3]
JOBS = sorted((ROOT / "jobs").rglob("*.yaml"))
TEXT = as_json_schema()
SCHEMA = json.loads(TEXT)


def closed(schema: Any) -> Any:
    """The same schema, that lets no key through which it does not describe."""
    if isinstance(schema, list):
        return [closed(one) for one in schema]
    if not isinstance(schema, dict):
        return schema
    inside = {key: closed(value) for key, value in schema.items()}
    return inside | ({"additionalProperties": False} if isinstance(schema.get("properties"), dict) else {})


PUBLISHED = jsonschema.Draft202012Validator(SCHEMA)
CLOSED = jsonschema.Draft202012Validator(closed(SCHEMA))


def printed(found: Review) -> dict[str, Any]:
    """What the review prints as JSON, held against the schema."""
    data: dict[str, Any] = json.loads(as_json(found))
    assert [f"{list(e.path)}: {e.message[:200]}" for e in CLOSED.iter_errors(data)] == []
    assert PUBLISHED.is_valid(data)
    return data


def of(text: str) -> dict[str, Any]:
    return printed(review(read_job_text(text, "job.yaml")))


def test_it_is_a_schema_of_the_draft_it_names() -> None:
    assert SCHEMA["$schema"] == jsonschema.Draft202012Validator.META_SCHEMA["$id"]
    jsonschema.Draft202012Validator.check_schema(SCHEMA)
    assert SCHEMA["properties"]["format"]["const"] == FORMAT


def test_the_shipped_file_is_fresh() -> None:
    """Write it anew with `setupcheck schema --of review -o rules/review.schema.json --force`."""
    assert (ROOT / "rules" / "review.schema.json").read_text(encoding="utf-8") == TEXT


def test_every_key_is_described() -> None:
    for record in (SCHEMA, *SCHEMA["$defs"].values()):
        assert record["description"].endswith(".")
        assert record["required"] == [*record["properties"]]
        assert all(len(key["description"]) > 5 for key in record["properties"].values())


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.name)
def test_every_shipped_job_and_every_planted_mistake_is_valid(job: Path) -> None:
    printed(review(job))


def test_an_open_job_is_valid() -> None:
    data = of(
        spoilt("clearance: [1 um, 3 um], runout: 3 um}", "clearance: [1 um, 3 um]}", spoilt(", runout: 100 um", ""))
    )
    assert data["verdict"] == "open"
    assert any(finding["missing"] for finding in data["findings"])
    assert any(stack["worst"] is None for stack in data["stacks"])


def test_a_failing_job_is_valid() -> None:
    data = of(spoilt("circle: 18", "circle: 20"))
    assert data["verdict"] == "fail"


def test_a_worm_wheel_with_its_contact_and_insert_is_valid() -> None:
    data = of(TWO_STARTS)
    assert data["contacts"][0]["right"] and data["inserts"][0]["sizes"]


def test_backlash_read_is_valid() -> None:
    data = of(backlash_jobs.job(backlash_jobs.TYPED))
    assert len(data["backlash_read"]["places"]) == len(backlash_jobs.TYPED)


def test_a_record_and_a_house_file_are_valid(tmp_path: Path) -> None:
    record, house, job = tmp_path / "shop.csv", tmp_path / "house.yaml", tmp_path / "job.yaml"
    record.write_text(test_device_record.KEPT, encoding="utf-8")
    house.write_text(test_house.SHOP, encoding="utf-8")
    job.write_text(
        changed(
            WHEEL,
            ("{at_most: 6 um, measured: 4 um, uncertainty: 1 um}", "{device: four-jaw-A}"),
        )
    )
    data = printed(review(job, house=house, devices=record))
    assert data["record"]["used"][0]["limit"] == pytest.approx(9.1, abs=0.05)
    assert data["house"]["acts"]
    assert "measure_first" in data


# -- a validator that finds what is wrong ------------------------------------------------------------------------------


@pytest.fixture(scope="module")
def good() -> dict[str, Any]:
    return of(RING)


@pytest.mark.parametrize(
    ("path", "value"),
    [
        (("format",), 2),
        (("verdict",), "passed"),
        (("verdict",), None),
        (("counts", "fail"), "0"),
        (("stacks", 0, "worst"), "90 um"),
        (("stacks", 0, "limit"), 90),
        (("findings", 0, "line"), 1.5),
        (("findings", 0, "missing"), None),
        (("cautions",), None),
    ],
)
def test_what_no_review_prints_is_refused(good: dict[str, Any], path: tuple[Any, ...], value: object) -> None:
    assert PUBLISHED.is_valid(good)
    spoilt_data: Any = copy.deepcopy(good)
    inside = spoilt_data
    for step in path[:-1]:
        inside = inside[step]
    inside[path[-1]] = value
    assert not PUBLISHED.is_valid(spoilt_data)


def test_a_key_that_is_missing_is_told_and_one_of_a_later_version_is_let_through(good: dict[str, Any]) -> None:
    for key in good:
        assert not PUBLISHED.is_valid({k: v for k, v in good.items() if k != key})
    assert PUBLISHED.is_valid({**good, "later": 1})
    assert not CLOSED.is_valid({**good, "later": 1})


# -- the command -----------------------------------------------------------------------------------------------------


def run(*words: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "setupcheck", "schema", *words], capture_output=True, text=True, encoding="utf-8"
    )


def test_the_command_prints_it_and_writes_it_never_over_another_file(tmp_path: Path) -> None:
    file = tmp_path / "review.schema.json"
    assert run("--of", "review", "-o", str(file)).stdout == f"written: {file}\n"
    assert file.read_text(encoding="utf-8") == TEXT == run("--of", "review").stdout
    assert run("--of", "review", "-o", str(file)).returncode == 2
    assert run("--of", "job").stdout == run().stdout != TEXT


def test_another_word_is_refused_with_those_there_are() -> None:
    refused = run("--of", "rules")
    assert refused.returncode == 2
    assert "write job or review" in refused.stderr
