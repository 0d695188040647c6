"""What the pages link to is there, and the pictures are small enough to be fetched with the README."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from tests.docs.pages import DOCS, ROOT
from tests.docs.pictures import LARGEST, PLACE

PAGES = [ROOT / "README.md", ROOT / "DEVELOPERS.md", *sorted(DOCS.glob("*.md"))]


@pytest.mark.parametrize("page", PAGES, ids=lambda page: page.name)
def test_every_link_of_a_page_leads_to_a_file(page: Path) -> None:
    links = re.findall(r"\]\(([^)#:]+)(?:#[^)]*)?\)", page.read_text(encoding="utf-8"))
    assert [] == [link for link in links if not (page.parent / link).is_file()]


def test_the_readme_leads_to_every_page() -> None:
    readme = (ROOT / "README.md").read_text(encoding="utf-8")
    assert [] == [page.name for page in DOCS.glob("*.md") if f"](docs/{page.name})" not in readme]


def test_pictures_are_small_and_all_are_shown() -> None:
    readme = (ROOT / "README.md").read_text(encoding="utf-8")
    shown = sorted(PLACE.glob("*.png"))
    assert 2 == len(shown)
    for picture in shown:
        assert picture.read_bytes().startswith(b"\x89PNG")
        assert picture.stat().st_size <= LARGEST
        assert f"(docs/pictures/{picture.name})" in readme
