"""A hold whose place on its surface nobody wrote: what that may do to the requirements. Lengths mm."""

from __future__ import annotations

from collections.abc import Sequence

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Round
from setupcheck.jobfile.setups import Centre
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.gates import worst_excess
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.trial import figure_on, floor_with

AT_THE_EXACT_GAP = ("contact-length", "contact-area")
"""Requirements that no place of a hold moves, and that take long to tell."""
SHORT = 10.0
"""A band on which a part that is squared on a face may be held anywhere [mm]: its lean is that of the face, and half of this is
no lever. Source: our screening choice; the walks it saves are a third of a review's time."""
SAME = 1e-9
"""Share of a limit by which a figure may seem moved from the noise of sums alone. Source: our choice."""


def beyond_at_an_end(
    floor: Floor, entry: HoldEntry, op: int, path: str, results: tuple[Result, ...]
) -> float | Open | None:
    """How far beyond its limit a requirement that is met comes with the part held at an end of its surface, over the limit.

    worst excess at an end / limit, half the span between two limits; 0 where every requirement stays inside at both ends.
    None where `at` is written, or the surface is a centre hole or a throat, which has no length to choose on; Open
    where nothing can be told at either end.
    Source: the route walked again with each end (quantities.trial), derived here.
    """
    centre = entry.entry
    if not isinstance(centre, Centre) or centre.at is not None:
        return None
    ref = floor.loaded.ref(centre.on, floor.part_of.get(op))
    surface = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    if not isinstance(surface, Round):
        return None
    stretch = (surface.low, surface.high) if centre.grip is None else (centre.grip.low, centre.grip.high)
    hold = next(setup.hold for setup in floor.loaded.job.setups if setup.op == op)
    if hold is not None and hold.square is not None and stretch[1] - stretch[0] <= SHORT:
        return 0.0
    judged = [r for r in results if r.scale and _met(r) and r.stack.require.what not in AT_THE_EXACT_GAP]
    found = _beyond(floor, path, stretch[0], judged) if judged else []
    if found and all(abs(there - taken) < SAME for there, taken in found):
        return 0.0  # a figure is straight in the height, so the other end moves nothing either
    found += _beyond(floor, path, stretch[1], judged) if judged else []
    if judged and not found:
        return Open((f"{path}.at",), "it can be held at neither end of its surface")
    return max((there for there, _ in found if there > 0.0), default=0.0)


def _beyond(floor: Floor, path: str, height: float, judged: Sequence[Result]) -> list[tuple[float, float]]:
    """(there, as taken): how far each requirement is beyond its limit with the part held at a height, over the limit.

    Left out what cannot be told there: that it cannot be held so is no answer to where it is held.
    """
    try:
        walked = floor_with(floor.loaded, (path,), at=height)
    except (JobError, OutOfRange, ValueError):
        return []
    found = []
    for one in judged:
        low, high, scale = one.stack.low, one.stack.high, one.scale or 1.0
        try:
            there = worst_excess(figure_on(walked, one.stack), low, high)
        except (JobError, OutOfRange, ValueError):
            continue
        found.append((there / scale, worst_excess(one.figure, low, high) / scale))
    return found


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
        {"floor": "route.floor", "entry": ":", "op": "@op", "path": "@path", "results": "known stack.combined"},
        "how far a requirement that is met goes beyond its limit where the part is held at an end of its surface",
    ),
)
