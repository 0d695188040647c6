"""The README knows every word the job file knows."""

from __future__ import annotations

import inspect
import re
from collections.abc import Iterator
from pathlib import Path
from typing import Literal, get_args, get_origin

import pytest
from pydantic import BaseModel

from setupcheck.jobfile import grinding, insert_profile, marks, models, properties, setups, touched, worm

README = (Path(__file__).resolve().parents[3] / "README.md").read_text(encoding="utf-8")
TABLE = README.partition("### Words the job file knows")[2].partition("\n## ")[0]


def literals(annotation: object) -> Iterator[str]:
    """Words of all Literal types inside an annotation."""
    if get_origin(annotation) is Literal:
        yield from (word for word in get_args(annotation) if isinstance(word, str))
    else:
        for inner in get_args(annotation):
            yield from literals(inner)


def records() -> dict[str, type[BaseModel]]:
    """All records of the job file by name."""
    found = {
        name: r
        for module in (grinding, insert_profile, models, properties, setups, touched, worm, marks)
        for name, r in vars(module).items()
        if inspect.isclass(r)
    }
    return {name: record for name, record in found.items() if issubclass(record, BaseModel)}


def words() -> dict[str, set[str]]:
    """Record.key -> the words it may hold, for every record of the job file."""
    found = {}
    for name, record in records().items():
        for key, field in record.model_fields.items():
            if known := set(literals(field.annotation)):
                found[f"{name}.{key}"] = known
    return found


def test_the_walk_through_the_models_finds_the_words_that_matter() -> None:
    found = words()
    assert {"shrink", "press", "slide"} <= found["Join.by"]
    assert {"torque", "axial_force"} == found["Join.must_carry"]
    assert "mid-plane" in found["Require.what"]
    assert "dividing-head" in found["Machine.kind"]


@pytest.mark.parametrize("entry", sorted(words()))
def test_every_word_of_the_job_file_stands_in_the_table_of_the_readme(entry: str) -> None:
    assert [] == sorted(word for word in words()[entry] if f"`{word}`" not in TABLE and f": {word}`" not in TABLE)


def test_the_ends_of_a_part_stand_in_the_table() -> None:
    assert "`+z` `-z`" in TABLE


def test_the_table_knows_no_word_that_the_job_file_does_not_know() -> None:
    known = set().union(*words().values()) | {"+z", "-z", "made: stock", "ends"}
    keys = {key for record in records().values() for key in record.model_fields}
    told = set(re.findall(r"`([^`]+)`", TABLE))
    assert set() == told - known - keys
