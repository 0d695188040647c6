"""What the pictures of curves share: scales with round steps, texts cut to their room, labels pushed apart. mm of paper."""

from __future__ import annotations

import math
import textwrap
from collections.abc import Sequence

from setupcheck.record import record
from setupcheck.report.svg import CHARACTER, THIN, Point, line, number, tag, words
from setupcheck.report.wording import clean

SHEET = 180.0
"""Width of these pictures [mm]. Our choice: what goes between the edges of the sheet."""
SIZE, HEAD = 3.0, 3.8
"""Height of letters: words and numbers, and the title [mm]. Our choice."""
LINE = 4.2
"""From one line of text to the next [mm]. Our choice."""
EDGE = 3.0
"""Kept free at the edges [mm]. Our choice."""
MOST_POINTS = 120
"""Points of one curve; what has more is thinned out. Our choice, for the size of the file."""
DOT_DASH, DASHES, DOTS = "4 1 0.8 1", "2.2 1.2", "0.5 1"
"""Dashes of the lines [mm of paper]. Our choice."""


def shortened(text: str, width: float, size: float = SIZE) -> str:
    """Text of a job file, cleaned, and cut with an ellipsis where it is wider than its room [mm]."""
    text, most = clean(text), max(1, int(width / (CHARACTER * size)))
    return text if len(text) <= most else text[: most - 1] + "\u2026"


def told(at: Point, text: str, width: float, *, most: int = 3, size: float = SIZE) -> list[str]:
    """Text in lines of a width [mm], from a base line downwards; cut short where it needs more than `most` lines."""
    rows = textwrap.wrap(clean(text), max(1, int(width / (CHARACTER * size))), break_on_hyphens=False) or [""]
    if len(rows) > most:
        rows = [*rows[: most - 1], shortened(" ".join(rows[most - 1 :]), width, size)]
    return [words((at[0], at[1] + i * LINE), row, size=size) for i, row in enumerate(rows)]


@record
class Scale:
    """From numbers to mm of paper: `low` lies at `start`, `high` at `end`."""

    low: float
    high: float
    start: float
    end: float

    def put(self, value: float) -> float:
        return self.start + (value - self.low) / (self.high - self.low) * (self.end - self.start)

    def ticks(self, most: int) -> list[float]:
        """Round values within the scale, no more than so many."""
        step = round_step(self.high - self.low, most)
        first, last = math.ceil(self.low / step - 1e-9), math.floor(self.high / step + 1e-9)
        return [i * step for i in range(first, last + 1)]


def round_step(span: float, most: int) -> float:
    """A step of 1, 2 or 5 times a power of ten that cuts a span into at most so many.

    >>> round_step(145.0, 5), round_step(0.9, 5)
    (50.0, 0.2)
    """
    least = span / max(most, 1)
    power = 10.0 ** math.floor(math.log10(least))
    return next(power * k for k in (1.0, 2.0, 5.0, 10.0) if power * k >= least * (1.0 - 1e-9))


def plain(value: float) -> str:
    """A tick's number without needless decimals; the rounding of a sum is taken off.

    >>> plain(20.0), plain(-0.6000000001), plain(0.0)
    ('20', '-0.6', '0')
    """
    return number(round(value, 3))


def across(scale: Scale, y: float, most: int, top: float | None = None) -> list[str]:
    """A scale along the lower edge, its numbers beneath; with `top` thin lines up to there."""
    parts = [line((scale.start, y), (scale.end, y))]
    for value in scale.ticks(most):
        x = scale.put(value)
        parts.append(line((x, y), (x, y + 1.2)))
        parts.append(words((x, y + 4.6), plain(value), size=SIZE, anchor="middle"))
    if top is not None:
        parts.append(line((scale.start, y), (scale.start, top)))
    return parts


def upright(scale: Scale, x: float, most: int, *, right: bool = False) -> list[str]:
    """A scale along the left (or right) edge, its numbers outside."""
    parts = [line((x, scale.start), (x, scale.end))]
    way = 1.0 if right else -1.0
    for value in scale.ticks(most):
        y = scale.put(value)
        parts.append(line((x, y), (x + way * 1.2, y)))
        anchor = "start" if right else "end"
        parts.append(words((x + way * 2.0, y + 1.05), plain(value), size=SIZE, anchor=anchor))
    return parts


def apart(wanted: Sequence[float], low: float, high: float, step: float = LINE) -> list[float]:
    """Heights as near to the wanted ones as they can be with `step` between neighbours, in the same order; within low .. high.

    wanted  falling or rising by turns: places are found for the sorted ones, and given back in the order of `wanted`
    """
    order = sorted(range(len(wanted)), key=lambda i: wanted[i])
    placed: list[float] = []
    for i in order:
        placed.append(max(wanted[i], placed[-1] + step if placed else low))
    ceiling = high
    for k in range(len(placed) - 1, -1, -1):
        placed[k] = min(placed[k], ceiling)
        ceiling = placed[k] - step
    found = [0.0] * len(wanted)
    for place, i in zip(placed, order, strict=True):
        found[i] = place
    return found


def path(d: str, *, width: float = THIN, round_ends: bool = False, fill: str = "none") -> str:
    """Several strokes in one element."""
    more: dict[str, str | float] = {"stroke_linecap": "round"} if round_ends else {}
    return tag("path", d=d, fill=fill, stroke="black", stroke_width=width, **more)


def circle(at: Point, radius: float, *, width: float = THIN, dashes: str = "", fill: str = "none") -> str:
    """A circle's outline, or a disc of one tone."""
    more: dict[str, str | float] = {"stroke_dasharray": dashes} if dashes else {}
    return tag("circle", cx=at[0], cy=at[1], r=radius, fill=fill, stroke="black", stroke_width=width, **more)


def area(points: Sequence[Point], *, fill: str = "#e4e4e4") -> str:
    """A toned area without outline."""
    return tag("polygon", points=" ".join(f"{number(x)},{number(y)}" for x, y in points), fill=fill)
