"""Whole reports against golden files, and the excerpts of the README and of docs/ against the real thing."""

from __future__ import annotations

import pytest

from tests.golden import pages


@pytest.mark.parametrize("name", sorted(pages.reports()))
def test_a_report_is_the_same_to_the_letter(name: str) -> None:
    assert (pages.HERE / name).read_text(encoding="utf-8") == pages.reports()[name]


@pytest.mark.parametrize("name", sorted(pages.drawings()))
def test_a_drawing_is_the_same_to_the_letter(name: str) -> None:
    assert (pages.HERE / name).read_text(encoding="utf-8") == pages.drawings()[name]


@pytest.mark.parametrize("page", pages.EXCERPTS_IN)
def test_the_excerpts_of_a_page_are_real(page: str) -> None:
    assert (pages.ROOT / page).read_text(encoding="utf-8") == pages.pages_with_excerpts()[page]


def test_no_line_of_a_report_is_wider_than_eighty_columns() -> None:
    for name, text in pages.reports().items():
        assert [line for line in text.splitlines() if len(line) > 80] == [], name
