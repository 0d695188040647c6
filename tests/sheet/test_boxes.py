"""Every box of the sheet is named by a key of the job file: what is typed in through it reaches what depends on it."""

from __future__ import annotations

import re
from html.parser import HTMLParser

import pytest

from setupcheck.flow import Review, review, vary
from setupcheck.jobfile.changing import Change
from setupcheck.report.json import as_data
from setupcheck.report.sheet import as_sheet
from setupcheck.shipped import shipped

JOBS = ("rotator-worm-wheel", "wheel-on-spindle", "coupling-hub", "bearing-ring-seat", "spur-gear-on-mandrel", "index-plate",
        "pressed-bush")  # fmt: skip


class Keys(HTMLParser):
    """The keys that stand at the boxes of a sheet, and their units."""

    def __init__(self, text: str) -> None:
        super().__init__()
        self.found: dict[str, str] = {}
        self._open = ""
        self.feed(text)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        key = dict(attrs).get("data-key")
        if key:
            self._open = key
            self.found[key] = ""

    def handle_data(self, data: str) -> None:
        if self._open:
            self.found[self._open] += data

    def handle_endtag(self, tag: str) -> None:
        if tag == "span":
            self._open = ""


@pytest.fixture(scope="module")
def reviewed() -> dict[str, Review]:
    return {name: review(shipped(f"jobs/{name}.yaml")) for name in JOBS}


def boxes(found: Review) -> dict[str, str]:
    return Keys(as_sheet(found)).found
