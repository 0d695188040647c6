"""Names at the ends of leader lines: rows over or under a drawing, no name on another, no line through a name. mm of paper."""

from __future__ import annotations

import itertools
from collections.abc import Sequence

from setupcheck.record import record
from setupcheck.report.svg import THIN, Point, circle, polyline, rectangle, room, words

SIZE = 3.0
"""Height of a name's text. Source: ISO 3098 has 2.5, 3.5 and 5 (from memory); our choice between the first two."""

ROW = 5.4
"""From one row of names to the next. Our choice."""

CLEAR = 1.6
"""Free room on both sides of a name. Our choice."""

_FLAG = 1.4
"""White on the two sides of a flag's text, together. Our choice."""


@record
class Label:
    """A name to be placed.

    text   what is written;  flag  boxed before it, may be empty;  path  from the surface outwards: the last point's x is where
    the leader goes up;  colour  of flag and dot;  dot  at the surface
    """

    text: str
    path: tuple[Point, ...]
    flag: str = ""
    colour: str = "black"
    dot: bool = True

    @property
    def x(self) -> float:
        return self.path[-1][0]

    @property
    def wide(self) -> float:
        flag = room(self.flag, SIZE) + _FLAG + 1.0 if self.flag else 0.0
        return flag + room(self.text, SIZE) + 0.4


@record
class Placed:
    """A name with its row, counted from the drawing outwards, and its left edge."""

    label: Label
    row: int
    left: float

    @property
    def right(self) -> float:
        return self.left + self.label.wide


def spread(places: Sequence[float], *, apart: float, low: float, high: float) -> list[float]:
    """Places moved so little that neighbours stand `apart`, in their order, within both ends where they go.

    >>> spread([1.0, 1.0, 5.0], apart=1.0, low=0.0, high=9.0)
    [1.0, 2.0, 5.0]
    """
    if not places:
        return []
    order = sorted(range(len(places)), key=lambda i: (places[i], i))
    step = min(apart, (high - low) / max(len(places) - 1, 1))
    moved = [0.0] * len(places)
    last = low - step
    for i in order:
        last = max(places[i], last + step)
        moved[i] = last
    ceiling = high
    for i in reversed(order):
        moved[i] = min(moved[i], ceiling)
        ceiling = moved[i] - step
    return moved


def placed(labels: Sequence[Label], *, width: float, margin: float = 4.0) -> list[Placed] | None:
    """A row for every name in as few rows as any tried way needs; None where they do not go between the edges.

    Outer names are placed first, so that rows climb from both sides towards a middle; every gap between leaders is tried
    as the middle.
    """
    xs = sorted({label.x for label in labels})
    middles = [0.0, *((a + b) / 2.0 for a, b in itertools.pairwise(xs)), width]
    tried = [done for middle in middles if (done := _climbing(labels, width, middle, margin)) is not None]
    return min(tried, key=lambda done: (rows(done), sum(p.row for p in done)), default=None)


def _climbing(labels: Sequence[Label], width: float, middle: float, margin: float) -> list[Placed] | None:
    done: list[Placed] = []
    for label in sorted(labels, key=lambda one: (-abs(one.x - middle), one.x, one.text)):
        found = _place(label, labels, done, width, middle, margin)
        if found is None:
            return None
        done.append(found)
    return done


def _place(
    label: Label, labels: Sequence[Label], done: Sequence[Placed], width: float, middle: float, margin: float
) -> Placed | None:
    outward = (label.x - label.wide, label.x) if label.x < middle else (label.x, label.x - label.wide)
    waiting = [other for other in labels if other is not label and all(p.label is not other for p in done)]
    for strict in (True, False):  # first as if every name still to come went over this one
        for row in range(len(labels)):
            for left in outward:
                mine = Placed(label, row, left)
                if left < margin or mine.right > width - margin or not _free(mine, done):
                    continue
                if strict and any(mine.left - CLEAR < other.x < mine.right + CLEAR for other in waiting):
                    continue
                return mine
    return None


def _free(mine: Placed, done: Sequence[Placed]) -> bool:
    for other in done:
        if other.row == mine.row and mine.left - CLEAR < other.right and other.left < mine.right + CLEAR:
            return False
        if other.row < mine.row and other.left - CLEAR < mine.label.x < other.right + CLEAR:
            return False
        if other.row > mine.row and mine.left - CLEAR < other.label.x < mine.right + CLEAR:
            return False
    return True


def rows(done: Sequence[Placed]) -> int:
    return max((p.row + 1 for p in done), default=0)


def drawn(done: Sequence[Placed], *, start: float, way: int) -> list[str]:
    """Leaders, names on their lines, flags.

    start  y of the first row's line;  way  -1: rows climb over the drawing, +1: they go down under it
    """
    parts: list[str] = []
    for one in sorted(done, key=lambda p: (p.row, p.left)):
        label = one.label
        y = start + way * one.row * ROW
        base = y if way < 0 else y + SIZE + 0.6
        ends = (one.left, one.right) if label.x > one.left + 0.5 * label.wide else (one.right, one.left)
        under = y + 0.9 if way < 0 else base + 0.9
        parts.append(polyline([*label.path, (label.x, under), (ends[0], under)], width=THIN))
        if label.dot:
            parts.append(circle(label.path[0], 0.55, fill=label.colour, colour=label.colour))
        left = one.left
        if label.flag:
            wide = room(label.flag, SIZE) + _FLAG
            parts.append(rectangle((left, base - SIZE - 0.1), wide, SIZE + 0.8, width=0.35, colour=label.colour))
            parts.append(words((left + _FLAG / 2.0, base), label.flag, size=SIZE))
            left += wide + 1.0
        parts.append(words((left, base), label.text, size=SIZE))
    return parts
