"""The JSON Schema of a job file: true to what the reader takes, as a standard validator sees it; every key described."""

from __future__ import annotations

import json
import subprocess
import sys
from collections.abc import Iterator
from contextlib import suppress
from pathlib import Path
from typing import Any, get_args

import jsonschema
import pytest
from pydantic import BaseModel, ConfigDict, TypeAdapter, ValidationError

from setupcheck.jobfile import dividing, spelling, touched, types
from setupcheck.jobfile.keys import about, descriptions, keys_of
from setupcheck.jobfile.setups import Job
from setupcheck.jobfile.types import Read, Shop
from setupcheck.report.job_schema import as_json_schema
from setupcheck.yamlfile import parse, read_text
from tests.bad_input.ring import RING

ROOT = Path(__file__).resolve().parents[3]
JOBS = sorted((ROOT / "jobs").rglob("*.yaml"))
TEXT = as_json_schema()
SCHEMA = json.loads(TEXT)
VALIDATOR = jsonschema.Draft202012Validator(SCHEMA)
CONTEXT = {"units": "mm"}


def records(of: type[BaseModel] = Shop) -> Iterator[type[BaseModel]]:
    for one in of.__subclasses__():
        if one.__module__.startswith("setupcheck."):
            yield one
            yield from records(one)


RECORDS = sorted(set(records()), key=lambda r: r.__name__)
BY_NAME = {r.__name__: r for r in RECORDS}


def said(text: str) -> list[str]:
    return [e.message for e in VALIDATOR.iter_errors(parse(text, "job.yaml").data)]


def test_it_is_a_schema_of_the_draft_it_names() -> None:
    assert SCHEMA["$schema"] == jsonschema.Draft202012Validator.META_SCHEMA["$id"]
    jsonschema.Draft202012Validator.check_schema(SCHEMA)


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.name)
def test_every_shipped_job_is_valid(job: Path) -> None:
    assert said(read_text(job)) == []


@pytest.mark.parametrize(
    ("good", "slip"),
    [
        ("title: ", "titel: "),  # a key that is not there
        ("kind: bore", "kind: boring"),  # a word that is not known
        ("kind: lathe", "kind: 3"),
        ("at_most: 90 um", "at_mots: 90 um"),
        ("at_most: 90 um", "at_most: little"),  # a word where a value belongs
        ("runout: 100 um", "runout: 100"),  # an error without its unit
        ("units: mm", "units: cm"),
        ("op: 10", "op: ten"),
        ("op: 10", "op: 0"),
        ("setupcheck: 1", "setupcheck: 2"),
        ("looks_at_tool: +z", "looks_at_tool: z"),
    ],
)
def test_a_slip_is_not(good: str, slip: str) -> None:
    assert said(RING) == []
    assert good in RING
    assert said(RING.replace(good, slip, 1)) != []


@pytest.mark.parametrize("key", ["parts", "setups", "require", "machines"])
def test_a_number_where_more_belongs_is_not(key: str) -> None:
    data = parse(RING, "job.yaml").data
    assert isinstance(data, dict)
    assert not VALIDATOR.is_valid({**data, key: 3})


@pytest.mark.parametrize("key", ["setupcheck", "title", "units", "parts"])
def test_what_a_job_needs_is_asked_for(key: str) -> None:
    data = parse(RING, "job.yaml").data
    assert isinstance(data, dict)
    assert not VALIDATOR.is_valid({k: v for k, v in data.items() if k != key})


def test_the_second_plane_takes_the_device_of_the_first() -> None:
    route = "setupcheck: 1\ntitle: t\nunits: mm\nparts: {a: {surfaces: {}}}\n"
    data: Any = parse(route, "job.yaml").data
    data["parts"]["a"]["surfaces"] = {"b": {"kind": "bore", "diameter": 20, "from": 0, "to": 9}}
    first, second = {"on": "b", "by": "collet", "at": 0}, {"on": "b", "at": 9}
    for hold, valid in (
        ({"centre": first, "and_centre": second}, True),
        ({"centre": second, "and_centre": first}, False),
        ({"centre": second}, False),
    ):
        job = {**data, "setups": [{"op": 10, "looks_at_tool": "+z", "hold": hold, "cut": {"b": {}}}]}
        assert VALIDATOR.is_valid(job) is valid
        with suppress(ValidationError):
            Job.model_validate(job, context=CONTEXT)
            assert valid


def test_the_shipped_file_is_fresh() -> None:
    """Write it anew with `setupcheck schema -o rules/job.schema.json --force`."""
    assert (ROOT / "rules" / "job.schema.json").read_text(encoding="utf-8") == TEXT


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.name)
def test_the_first_line_of_every_shipped_job_names_the_shipped_file(job: Path) -> None:
    first = read_text(job).splitlines()[0]
    assert first.startswith("# yaml-language-server: $schema=")
    assert (job.parent / first.partition("=")[2]).resolve() == ROOT / "rules" / "job.schema.json"


# -- descriptions ----------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("record", RECORDS, ids=lambda r: r.__name__)
def test_every_key_is_described_in_the_docstring_of_its_record(record: type[BaseModel]) -> None:
    assert about(record).endswith((".", "].", "`]."))
    assert [*descriptions(record)] == [*keys_of(record)]


@pytest.mark.parametrize("name", sorted(SCHEMA["$defs"]))
def test_every_record_is_there_with_every_key(name: str) -> None:
    shown, record = SCHEMA["$defs"][name], BY_NAME[name]
    assert shown["additionalProperties"] is False
    assert {k: p["description"] for k, p in shown["properties"].items()} == descriptions(record)


def test_no_record_is_left_out() -> None:
    assert {*SCHEMA["$defs"], "Job"} == {*BY_NAME}


def test_a_key_whose_name_inside_differs_stands_as_it_is_written() -> None:
    assert "from" in SCHEMA["$defs"]["Round"]["properties"]
    assert not {"from_", "low", "high"} & SCHEMA["$defs"]["Round"]["properties"].keys()


# -- values in shop notation -----------------------------------------------------------------------------------------


def taken(kind: Any, value: object) -> bool:
    if kind is dividing.Step:  # an angle or a length, as the way of dividing beside it says
        return any(taken(dividing.Divide, {"by": way, "step": value}) for way in ("readout", "x-y"))
    config = ConfigDict(coerce_numbers_to_str=True) if get_args(kind)[:1] == (str,) else None  # as all records have it
    try:
        TypeAdapter(kind, config=config).validate_python(value, context=CONTEXT)
    except ValidationError:
        return False
    return True


def test_every_type_with_a_reader_of_its_own_has_a_spelling() -> None:
    spelled = {get_args(kind)[1] for kind, _ in spelling._TYPES}
    known = {
        value
        for name, module in sys.modules.items()
        if name.startswith("setupcheck.jobfile.")
        for alias in vars(module).values()
        for value in getattr(alias, "__metadata__", ())
        if isinstance(value, Read)
    }
    assert {r for r in known if r not in spelled and not r.words} == set()


@pytest.mark.parametrize(("kind", "schema"), spelling._TYPES, ids=[s["title"] for _, s in spelling._TYPES])
def test_the_reader_takes_what_a_spelling_takes(kind: Any, schema: dict[str, Any]) -> None:
    """Every example; a plain number and a word just where the schema takes them, as far as a schema can tell."""
    schema = spelling.SPELLED[id(get_args(kind)[1])]
    validator = jsonschema.Draft202012Validator(schema)
    for example in schema.get("examples", [{"torque": "40 N m"}]):
        assert validator.is_valid(example)
        assert taken(kind, example), example
    for other in (True, {"some": "map"}, ["one"]):
        assert not validator.is_valid(other)
        assert not taken(kind, other)
    if kind is types.Housing:  # 0.5 is no material, and a schema cannot tell it from one
        assert taken(kind, 0.6025)
        assert validator.is_valid(0.6025)
    else:
        assert validator.is_valid(0.5) is taken(kind, 0.5)
        assert validator.is_valid("word") or not taken(kind, "word")


@pytest.mark.parametrize("record", RECORDS, ids=lambda r: r.__name__)
def test_a_single_value_stands_for_a_record_just_where_the_reader_takes_it(record: type[BaseModel]) -> None:
    if record is touched.Touched:
        kind: Any = touched.DepthFrom
    else:
        kind = record
    values = ["10 um", "name", 12.5, "32 H6"]
    took = [value for value in values if taken(kind, value)]
    assert bool(took) is (record in spelling.PLAIN)
    if took:
        validator = jsonschema.Draft202012Validator(spelling.PLAIN[record])
        assert all(validator.is_valid(value) for value in took)
        assert all(taken(kind, example) for example in spelling.PLAIN[record]["examples"])


# -- the command -----------------------------------------------------------------------------------------------------


def run(*words: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "setupcheck", "schema", *words], capture_output=True, text=True, encoding="utf-8"
    )


def test_the_command_prints_it_and_writes_it_never_over_another_file(tmp_path: Path) -> None:
    file = tmp_path / "job.schema.json"
    assert run("-o", str(file)).stdout == f"written: {file}\n"
    assert file.read_text(encoding="utf-8") == TEXT == run().stdout
    file.write_text("mine", encoding="utf-8")
    refused = run("-o", str(file))
    assert refused.returncode == 2
    assert "already there" in refused.stderr
    assert file.read_text(encoding="utf-8") == "mine"
    assert run("-o", str(file), "--force").returncode == 0
    assert file.read_text(encoding="utf-8") == TEXT
    assert [*tmp_path.iterdir()] == [file]  # nothing half written is left beside it
