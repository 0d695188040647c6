"""Sheets are laid out without trying values: `test_tried` and `test_command` do that, the others look at something else."""

from __future__ import annotations

from collections.abc import Iterator

import pytest

from setupcheck.report.sheet import tried

TRYING = ("test_tried", "test_command")


@pytest.fixture(autouse=True, scope="module")
def values_not_tried(request: pytest.FixtureRequest) -> Iterator[None]:
    if request.module.__name__.rpartition(".")[2] in TRYING:
        yield
        return
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(tried.Tried, "accept", lambda self, path: tried.COMPARED)
        yield
