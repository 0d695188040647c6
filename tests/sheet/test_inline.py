"""A drawing inside the page says what the file of its own says, in fewer bytes."""

from __future__ import annotations

import re
from collections import Counter

import pytest

from setupcheck.flow import Review, review
from setupcheck.report.pictures import pictures
from setupcheck.report.sheet.inline import ROOT, STYLES, inline, style_sheet
from setupcheck.shipped import shipped

_TAG = re.compile(r"<(text|rect|circle)( [^>]*?)/?>")
_SAID = re.compile(r' ([a-z-]+)="([^"]*)"')
PLACES = {"x", "y", "cx", "cy", "r", "rx", "width", "height"}


@pytest.fixture(scope="module")
def found() -> Review:
    return review(shipped("jobs/rotator-worm-wheel.yaml"))


def looks(drawing: str) -> Counter[tuple[str, frozenset[tuple[str, str]]]]:
    """How each text, rectangle and circle looks, classes spelled out and what the root says left out."""
    seen: Counter[tuple[str, frozenset[tuple[str, str]]]] = Counter()
    for kind, said in _TAG.findall(drawing):
        style = dict(_SAID.findall(said))
        style |= STYLES.get(style.pop("class", ""), {})
        left = {(k, v) for k, v in style.items() if k not in PLACES and ROOT.get(k) != v}
        seen[kind, frozenset(left)] += 1
    return seen


def test_texts_and_shapes_look_as_in_the_file_of_their_own(found: Review) -> None:
    for name, picture in pictures(found).items():
        drawing = picture.draw()
        ground = re.sub(r'<rect width="[^"]+" height="[^"]+" fill="white"/>\n', "", drawing, count=1)
        assert looks(ground) == looks(inline(drawing)), name
        assert len(inline(drawing)) < len(drawing)


def test_every_class_is_spelled_out_in_the_page_and_nothing_says_two() -> None:
    for name, style in STYLES.items():
        assert f"svg .{name}{{{';'.join(f'{k}:{v}' for k, v in style.items())}}}" in style_sheet()
    shape = '<rect x="1" y="2" fill="none" stroke="black" stroke-width="0.35"/>'
    drawing = f'<svg xmlns="http://www.w3.org/2000/svg">\n{shape}\n</svg>'
    assert '<rect x="1" y="2" class="o"/>' in inline(drawing)


def test_what_a_text_says_is_never_taken_for_its_style() -> None:
    drawing = '<svg xmlns="http://www.w3.org/2000/svg">\n<text x="1" y="2"> text-anchor="end"</text>\n</svg>'
    assert '> text-anchor="end"</text>' in inline(drawing)
