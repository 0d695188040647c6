"""A hold whose place on its surface nobody wrote: what that may do to the requirements. Lengths mm."""

from __future__ import annotations

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Round
from setupcheck.jobfile.setups import Centre
from setupcheck.quantities.book import OutOfRange, Quantity
from setupcheck.quantities.gates import worst_excess
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.trial import figure_on, floor_with

AT_THE_EXACT_GAP = ("contact-length", "contact-area")
"""Requirements that no place of a hold moves, and that take long to tell."""


def beyond_at_an_end(floor: Floor, entry: HoldEntry, path: str, results: tuple[Result, ...]) -> float | None:
    """How far beyond its limit a requirement that is met comes where the part is held at an end of its surface, over the limit.

    worst excess at an end / limit, half the span between two limits; 0 where every requirement stays inside at both ends.
    None where `at` is written, or the surface is a centre hole or a throat, which has no length to choose on.
    Source: the route walked again with each end (quantities.trial), derived here.
    """
    centre = entry.entry
    if not isinstance(centre, Centre) or centre.at is not None:
        return None
    ref = floor.loaded.ref(centre.on, floor.part_of.get(int(path.split(".")[1])))
    surface = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    if not isinstance(surface, Round):
        return None
    stretch = (surface.low, surface.high) if centre.grip is None else (centre.grip.low, centre.grip.high)
    judged = [r for r in results if r.scale and _met(r) and r.stack.require.what not in AT_THE_EXACT_GAP]
    most = 0.0
    for height in stretch if judged else ():
        try:
            walked = floor_with(floor.loaded, (path,), at=height)
            for one in judged:
                excess = worst_excess(figure_on(walked, one.stack), one.stack.low, one.stack.high)
                most = max(most, excess / (one.scale or 1.0))
        except (JobError, OutOfRange, ValueError):
            continue  # it cannot be held there, which is no answer to where it is held
    return most


def _met(result: Result) -> bool:
    """A requirement that is missed as it stands says so itself."""
    return result.margin is not None and result.margin >= 0.0


HELD_WHERE = (
    Quantity(
        "hold.beyond_at_an_end",
        "hold",
        "%",
        1,
        beyond_at_an_end,
        {"floor": "route.floor", "entry": ":", "path": "@path", "results": "known stack.combined"},
        "how far a requirement that is met goes beyond its limit where the part is held at an end of its surface",
    ),
)
