"""Shipped jobs reviewed once, their pictures, and odd jobs made from one of them."""

from __future__ import annotations

from functools import cache
from pathlib import Path

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.pictures import Picture, pictures
from tests.unit.report.svg_read import SVG as SVG
from tests.unit.report.svg_read import paper, parsed

ROOT = Path(__file__).resolve().parents[4]
SHIPPED = sorted(path.stem for path in (ROOT / "jobs").glob("*.yaml"))
MISTAKES = sorted(f"mistakes/{path.stem}" for path in (ROOT / "jobs" / "mistakes").glob("*.yaml"))
WHEEL = (ROOT / "jobs" / "rotator-worm-wheel.yaml").read_text(encoding="utf-8")

STARTS = ("datums", "stack-", "axial")


@cache
def reviewed(name: str) -> Review:
    return review(ROOT / "jobs" / f"{name}.yaml")


@cache
def of_text(text: str) -> Review:
    return review(read_job_text(text, "odd.yaml"))


def shown(found: Review) -> dict[str, Picture]:
    """The pictures of datums, stacks and lengths."""
    return {name: one for name, one in pictures(found).items() if name.startswith(STARTS)}


def sheet(text: str) -> tuple[float, float]:
    """Width and height of a picture [mm of paper]."""
    return paper(parsed(text))


def written(text: str) -> list[str]:
    """Every text of a picture, in its order."""
    return [node.text or "" for node in parsed(text).iter(f"{SVG}text")]
