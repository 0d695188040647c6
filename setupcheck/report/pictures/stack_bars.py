"""A requirement as a bar: its pieces, the value they start from and the ways they go, in its base unit. No paper here."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.flow import Review
from setupcheck.quantities.book import Scope
from setupcheck.quantities.judged import Result
from setupcheck.record import record
from setupcheck.report.causes import cause_in_words
from setupcheck.report.rests import how_known
from setupcheck.report.wording import unit_of

MOST_CAUSES = 6
"""Causes that get a sentence of their own. Source: our choice, for the height of the drawing."""


@record
class Piece:
    """One cause in the bar: how far it moves the figure down and up [base unit of the figure]; negative where it takes away.

    number  links piece and sentence;  known  how its size is known, in words: measured, typical, by record, or nothing
    """

    number: int
    said: str
    down: float
    up: float
    known: str = ""

    @property
    def measured(self) -> bool:
        """Somebody has read it at the machine."""
        return self.known.strip() == "measured"

    @property
    def size(self) -> float:
        return max(self.down, self.up, key=abs)


@record
class Bar:
    """A requirement ready to draw, all values in its base unit.

    base   value that the causes move;  ways  "up", "down" or both: where they are drawn
    unit, digits  of its value, for people
    """

    scope: Scope
    result: Result
    base: float
    pieces: tuple[Piece, ...]
    ways: tuple[str, ...]
    unit: str
    digits: int

    @property
    def limits(self) -> tuple[float, ...]:
        s = self.result.stack
        return tuple(x for x in (s.low, s.high) if x is not None)


def bar_of(found: Review, scope: Scope, result: Result) -> Bar:
    """The pieces of a requirement, biggest first, the smallest gathered; their sum with the base is the worst case."""
    c, stack = result.combined, result.stack
    unit, digits = unit_of(found.book, scope)
    both = result.figure.signed and not (stack.high is None and stack.low is not None)
    ways = ("down", "up") if both else ("up",) if c.end == "high" else ("down",)
    pushes = [p for p in result.figure.pushes() if any(p.up if way == "up" else p.down for way in ways)]
    ordered = sorted(pushes, key=lambda p: (-max(abs(p.up), abs(p.down)), p.cause.key))
    base = c.base if result.figure.signed else 0.0
    pieces: list[Piece] = []
    if c.base and not result.figure.signed:
        pieces.append(Piece(1, _base_in_words(stack.require.what), 0.0, c.base))
    most = MOST_CAUSES - 1 if both else MOST_CAUSES  # both ways takes each piece twice
    shown = ordered if len(ordered) <= most else ordered[: most - 1]
    for push in shown:
        said, known = cause_in_words(push.cause.key), how_known(push.cause, found.loaded)
        pieces.append(Piece(len(pieces) + 1, said, push.down, push.up, known))
    if rest := ordered[len(shown) :]:
        down, up = sum(p.down for p in rest), sum(p.up for p in rest)
        pieces.append(Piece(len(pieces) + 1, f"{len(rest)} more", down, up))
    return Bar(scope, result, base, tuple(pieces), ways, unit, digits)


def _base_in_words(what: str) -> str:
    """What a figure is made of before any cause moves it."""
    if what == "mid-plane":
        return "what the drawn sizes themselves miss by"
    if "pitch" in what or what.startswith("index") or what == "on-workpiece":
        return "what is known of the division, as of rounded settings"
    return "what is known beforehand"


def laid(bar: Bar) -> Iterator[tuple[Piece, float, float, int]]:
    """(piece, from, to, lane): outwards from the base, biggest first; what takes away goes back in a lane of its own."""
    for way in bar.ways:
        sign = 1.0 if way == "up" else -1.0
        sizes = [(p, p.up if way == "up" else p.down) for p in bar.pieces]
        at = bar.base
        for lane, wanted in ((0, True), (1, False)):
            for piece, size in sizes:
                if size and (size > 0.0) == wanted:
                    yield piece, at, at + sign * size, lane
                    at += sign * size


def lane_ends(bar: Bar) -> list[float]:
    """The farthest the bar goes on each way, before what takes away."""
    ends = []
    if "up" in bar.ways:
        ends.append(bar.base + sum(max(p.up, 0.0) for p in bar.pieces))
    if "down" in bar.ways:
        ends.append(bar.base - sum(max(p.down, 0.0) for p in bar.pieces))
    return ends


def share_of(bar: Bar) -> tuple[str, float]:
    """What a cause's share is counted in, in words and in the base unit; 0 where there is nothing to count in."""
    s = bar.result.stack
    if s.low is not None and s.high is not None:
        return "half the span", bar.result.scale
    if s.low is not None:
        return "the reserve", bar.base - s.low
    return "the limit", s.high or 0.0
