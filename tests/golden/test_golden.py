"""Whole reports against golden files, and the excerpts of the README and of docs/ against the real thing."""

from __future__ import annotations

import pytest

from tests.golden import pages

REPORTS = sorted(path.name for path in pages.HERE.glob("*.txt"))
DRAWINGS = sorted(path.name for path in pages.HERE.glob("*.svg"))


def test_every_report_and_drawing_has_its_file_and_every_file_its_report() -> None:
    assert (REPORTS, DRAWINGS) == (sorted(pages.reports()), sorted(pages.drawings()))


@pytest.mark.parametrize("name", REPORTS)
def test_a_report_is_the_same_to_the_letter(name: str) -> None:
    assert (pages.HERE / name).read_text(encoding="utf-8") == pages.reports()[name]


@pytest.mark.parametrize("name", DRAWINGS)
def test_a_drawing_is_the_same_to_the_letter(name: str) -> None:
    assert (pages.HERE / name).read_text(encoding="utf-8") == pages.drawings()[name]


@pytest.mark.parametrize("page", pages.EXCERPTS_IN)
def test_the_excerpts_of_a_page_are_real(page: str) -> None:
    assert (pages.ROOT / page).read_text(encoding="utf-8") == pages.pages_with_excerpts()[page]


def test_no_line_of_a_report_is_wider_than_eighty_columns() -> None:
    for name, text in pages.reports().items():
        assert [line for line in text.splitlines() if len(line) > 80] == [], name
