"""The drawings of a job, each by its name: what the sheet shows and `setupcheck sheet --drawing NAME` writes."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from typing import TYPE_CHECKING

from setupcheck.record import record

if TYPE_CHECKING:
    from setupcheck.flow import ReadBack, Review

WIDEST, TALLEST = 180.0, 240.0
"""What goes between the edges of A4 and of letter paper alike [mm of paper]. From memory: 210 x 297 and 216 x 279."""


@record(eq=False)
class Picture:
    """One drawing: its name (`hold-30`), one line that says what it shows, and the drawing itself, made when it is asked for."""

    name: str
    title: str
    draw: Callable[[], str]


def pictures(found: Review, read: ReadBack | None = None) -> dict[str, Picture]:
    """Every drawing this job has, in the order of the sheet.

    read  a division test read back, drawn beside the prediction
    """
    return {picture.name: picture for picture in _all(found, read)}


def _all(found: Review, read: ReadBack | None) -> Iterator[Picture]:
    from setupcheck.report.pictures import axial, datums, head, heating, high_spots, holdings, part, pitch, stacks

    yield from part.offered(found)
    yield from datums.offered(found)
    yield from axial.offered(found)
    yield from holdings.offered(found)
    yield from head.offered(found)
    yield from heating.offered(found)
    yield from high_spots.offered(found)
    yield from stacks.offered(found)
    yield from pitch.offered(found, read)
