"""What the tests of pictures look at: a job with changes, a picture parsed, its texts with their room."""

from __future__ import annotations

import itertools
import re
from pathlib import Path
from xml.etree import ElementTree

from setupcheck.flow import Review, load_job, review
from setupcheck.jobfile.changing import Change, changed
from setupcheck.report.pictures import Picture, pictures
from setupcheck.report.svg import room

from ....golden.pages import HIGH_AT as HIGH_AT

JOBS = Path(__file__).resolve().parents[4] / "jobs"
SHIPPED = sorted(JOBS.glob("*.yaml"))
WHEEL = JOBS / "rotator-worm-wheel.yaml"
SVG = "{http://www.w3.org/2000/svg}"
WIDEST, TALLEST, HEAVIEST = 180.0, 110.0, 10_240
Box = tuple[float, float, float, float]


def judged(job: Path, *changes: tuple[str, str]) -> Review:
    return review(changed(load_job(job), [Change(*one) for one in changes]))


def named(found: Review, start: str) -> dict[str, Picture]:
    return {name: one for name, one in pictures(found).items() if name.startswith(start)}


def texts(svg: ElementTree.Element) -> list[tuple[str, Box]]:
    """Each text with the room it takes: left, top, right, bottom."""
    found = []
    for node in svg.iter(f"{SVG}text"):
        size, x, y = (float(node.attrib[key]) for key in ("font-size", "x", "y"))
        wide = room(node.text or "", size)
        start = x - wide * {"start": 0.0, "middle": 0.5, "end": 1.0}[node.attrib.get("text-anchor", "start")]
        found.append((node.text or "", (start, y - 0.76 * size, start + wide, y + 0.22 * size)))
    return found


def is_a_clear_picture(text: str) -> ElementTree.Element:
    """A file of its own, no larger than it may be, every text on it and on no other."""
    svg = ElementTree.fromstring(text)
    width, height = (float(v) for v in svg.attrib["viewBox"].split()[2:])
    assert width <= WIDEST and height <= TALLEST
    assert len(text.encode()) <= HEAVIEST
    assert svg.attrib["role"] == "img" and (svg.findtext(f"{SVG}title") or "").strip()
    assert "class=" not in text and "style" not in text and "nan" not in text.replace("finan", "")
    for node in svg.iter():
        assert not any(re.search(r"\d\.\d{4,}", value) for value in node.attrib.values()), "more than three decimals"
    boxes = texts(svg)
    for node in svg.iter(f"{SVG}text"):
        assert float(node.attrib["font-size"]) >= 3.0, node.text
    for said, box in boxes:
        assert box[0] >= 0.0 and box[1] >= 0.0 and box[2] <= width and box[3] <= height, (said, box)
    for (one, first), (other, second) in itertools.combinations(boxes, 2):
        free = first[2] <= second[0] or second[2] <= first[0] or first[3] <= second[1] or second[3] <= first[1]
        assert free, f"{one} lies on {other}"
    return svg


def said(svg: ElementTree.Element) -> str:
    return " ".join(text for text, _ in texts(svg))
