"""What the tests of pictures look at: a job with changes, a picture parsed, its texts with their room."""

from __future__ import annotations

import re
from pathlib import Path
from xml.etree import ElementTree

from setupcheck.flow import Review, load_job, review
from setupcheck.jobfile.changing import Change, changed
from setupcheck.report.pictures import Picture, pictures
from tests.golden.pages import HIGH_AT as HIGH_AT
from tests.unit.report.svg_read import SVG, every_text_is_apart, paper, texts

JOBS = Path(__file__).resolve().parents[4] / "jobs"
SHIPPED = sorted(JOBS.glob("*.yaml"))
WHEEL = JOBS / "rotator-worm-wheel.yaml"
WIDEST, TALLEST, HEAVIEST = 180.0, 110.0, 10_240


def judged(job: Path, *changes: tuple[str, str]) -> Review:
    return review(changed(load_job(job), [Change(*one) for one in changes]))


def named(found: Review, start: str) -> dict[str, Picture]:
    return {name: one for name, one in pictures(found).items() if name.startswith(start)}


def is_a_clear_picture(text: str) -> ElementTree.Element:
    """A file of its own, no larger than it may be, every text on it and on no other."""
    svg = ElementTree.fromstring(text)
    width, height = paper(svg)
    assert width <= WIDEST and height <= TALLEST
    assert len(text.encode()) <= HEAVIEST
    assert svg.attrib["role"] == "img" and (svg.findtext(f"{SVG}title") or "").strip()
    assert "class=" not in text and "style" not in text and "nan" not in text.replace("finan", "")
    for node in svg.iter():
        assert not any(re.search(r"\d\.\d{4,}", value) for value in node.attrib.values()), "more than three decimals"
    every_text_is_apart(svg)
    for node in svg.iter(f"{SVG}text"):
        assert float(node.attrib["font-size"]) >= 3.0, node.text
    return svg


def said(svg: ElementTree.Element) -> str:
    return " ".join(text for text, _ in texts(svg))
