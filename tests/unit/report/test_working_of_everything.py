"""Every quantity of a shipped job has a working that can be shown."""

from __future__ import annotations

from functools import cache
from pathlib import Path

import pytest

from setupcheck.flow import load_job, prepare
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.quantities.book import Book
from setupcheck.report.working import as_working
from setupcheck.shipped import shipped

JOBS = sorted(shipped("jobs").glob("*.yaml"))


@cache
def job_and_book(path: Path) -> tuple[LoadedJob, Book]:
    loaded = load_job(path)
    return loaded, prepare(loaded)[1]


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.stem)
def test_every_quantity_with_an_instance_shows_its_working(job: Path) -> None:
    loaded, book = job_and_book(job)
    shown = 0
    for quantity in book.quantities.values():
        if book.instances(quantity.per):
            said = as_working(loaded, book, quantity.name)
            assert said.startswith(quantity.name)
            assert max(map(len, said.splitlines())) <= 80
            assert "nan" not in said.split()
            assert not quantity.unit or "  holds " in said
            shown += 1
    assert shown > 50
