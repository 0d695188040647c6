"""A range drawn: how much of its limit each requirement takes over the values of one entry. A5 across, black and white."""

from __future__ import annotations

import math
from collections.abc import Callable
from decimal import Decimal

from setupcheck.quantities.judged import Result
from setupcheck.report.svg import THIN, Point, line, picture, polyline, room, words
from setupcheck.report.text import limits_in_words
from setupcheck.report.vary_range import Swept, moving
from setupcheck.report.wording import clean, in_unit, title_of, unit_of

WIDTH, HEIGHT = 210.0, 148.0
"""Sheet: A5 across [mm]. Source: ISO 216 (from memory)."""
LEFT, RIGHT, TOP, BOTTOM = 22.0, 112.0, 30.0, 16.0
"""Edges round the field of the curves [mm]; what each curve is stands to the right of it. Our choice."""
MOST_CURVES = 8
"""Curves of one drawing, those that take most of their limits. Our choice: more cannot be told apart."""
LINES = ("", "4 1.2", "1.2 1.2", "6 1.2 1.2 1.2", "2.5 2.5", "8 2", "4 1 1 1 1 1", "0.5 1.5")
"""Dashes of the curves [mm of paper], one kind for each. Our choice."""
SMALL = 2.6
"""Height of the small letters [mm of paper]. Our choice."""
KEY_HEIGHT = 12.5
"""Height that each curve's words take [mm]. Our choice."""
CURVE, LIMIT_LINE = 0.35, 0.9
"""Line widths [mm]: a curve, and the line of the limit, which no curve may be taken for. Our choice."""
LONGEST = 54
"""Characters of a line of text to the right of the curves. Our choice, for its room."""
CEILING = 3.0
"""Most of a limit that is drawn: what takes more leaves at the top. Our choice."""


def as_drawing(swept: Swept) -> str:
    """The SVG. Each curve stands on its own limit: 100 % is the limit itself, above it the requirement is not met."""
    shown = _curves(swept)
    most = min(CEILING, max((y for _, points in shown for _, y in points), default=1.0))
    least = min(0.0, min((y for _, points in shown for _, y in points), default=0.0))
    top = max(1.25, math.ceil(most * 4.0 + 0.2) / 4.0)
    floor = max(-CEILING, math.floor(least * 4.0) / 4.0)
    first, last = (float(swept.range.numbers[i]) for i in (0, -1))

    def put(point: Point) -> Point:
        x, y = point
        across = (x - first) / (last - first)
        up = (min(max(y, floor), top) - floor) / (top - floor)
        return LEFT + across * (WIDTH - LEFT - RIGHT), HEIGHT - BOTTOM - up * (HEIGHT - TOP - BOTTOM)

    job = swept.before.loaded.job
    title = _short(f"{clean(job.job)}: {clean(job.title)}" if job.job else clean(job.title), 78)
    parts = [words((8.0, 9.0), title, size=4.0, bold=True), words((8.0, 15.0), _short(_what(swept), 105))]
    parts.append(words((8.0, 20.5), _verdict(swept), size=SMALL))
    parts += _grid(swept, put, floor, top)
    for number, (name, points) in enumerate(shown):
        parts += _curve(swept, name, [put(p) for p in points], number)
    if not shown:
        parts.append(words((WIDTH - RIGHT + 6.0, TOP + 6.0), "No requirement with a limit moves.", size=SMALL))
    left = len(moving(swept)) - len(shown)
    if left and shown:
        text = f"{left} more {'moves' if left == 1 else 'move'} and {'is' if left == 1 else 'are'} not drawn."
        parts.append(words((WIDTH - RIGHT + 6.0, HEIGHT - BOTTOM), text, size=SMALL))
    return picture(WIDTH, HEIGHT, title=f"{title}, {_what(swept)}", parts=parts) + "\n"


def _what(swept: Swept) -> str:
    span = swept.range
    return f"what if {clean(span.key)} = {span.written(span.numbers[0])} to {span.written(span.numbers[-1])}"


def _verdict(swept: Swept) -> str:
    if not swept.turns:
        return f"verdict {swept.found[0].after.verdict.upper()} at each value"
    told = [
        f"{t.before} to {t.after} between {swept.range.written(t.low)} and {swept.range.written(t.high)}"
        for t in swept.turns
    ]
    return _short(f"verdict turns (dotted) from {', '.join(told)}", 118)


def _curves(swept: Swept) -> list[tuple[str, list[Point]]]:
    """The requirements that move, those that take most of their limit first, with value and share of the limit."""
    found: list[tuple[str, list[Point]]] = []
    for name in moving(swept):
        points = [
            (float(number), used)
            for number, one in zip(swept.range.numbers, swept.found, strict=True)
            if (used := _used(one.after.results.get(name))) is not None
        ]
        if len(points) > 1:
            found.append((name, points))
    return sorted(found, key=lambda one: -max(y for _, y in one[1]))[:MOST_CURVES]


def _used(result: Result | None) -> float | None:
    """How much of its limit a requirement takes: 1 at the limit, more beyond. 1 - margin over limit (or half the span)."""
    return 1.0 - result.margin_share if result is not None and result.margin_share is not None else None


def _grid(swept: Swept, put: Callable[[Point], Point], floor: float, top: float) -> list[str]:
    first, last = (float(swept.range.numbers[i]) for i in (0, -1))
    parts = []
    step = 0.25 if top - floor <= 2.0 else 0.5
    for i in range(math.ceil(floor / step), math.floor(top / step + 1e-9) + 1):
        y = i * step
        start, end = put((first, y)), put((last, y))
        parts.append(line((start[0] - 1.5, start[1]), start))
        parts.append(words((start[0] - 2.5, start[1] + 0.9), f"{y * 100:.0f} %", size=SMALL, anchor="end"))
        if abs(y - 1.0) < 1e-9:
            parts.append(line(start, end, width=LIMIT_LINE))
    parts.append(line(put((first, floor)), put((first, top))))
    parts.append(line(put((first, floor)), put((last, floor))))
    parts.append(words((8.0, TOP - 2.5), "share of its own limit taken; thick line: the limit", size=SMALL))
    wide = max(room(swept.range.written(n), SMALL) for n in swept.range.numbers)
    fits = max(1, math.ceil((wide + 2.0) * (len(swept.range.numbers) - 1) / (WIDTH - LEFT - RIGHT)))
    for i, number in enumerate(swept.range.numbers):
        x, y = put((float(number), floor))
        parts.append(line((x, y), (x, y + 1.5)))
        if i % fits == 0:
            parts.append(words((x, y + 5.0), swept.range.written(number), size=SMALL, anchor="middle"))
    for turn in swept.turns:
        x, y = put((_middle(turn.low, turn.high), floor))
        parts.append(line((x, y), (x, put((first, top))[1]), width=THIN, dashes="0.6 0.9"))
    return parts


def _middle(low: Decimal, high: Decimal) -> float:
    return float((low + high) / 2)


def _curve(swept: Swept, name: str, points: list[Point], number: int) -> list[str]:
    """The curve with its values, and to the right of the field its dashes, its name and its ends."""
    dashes = LINES[number]
    parts = [polyline(points, width=CURVE, dashes=dashes)]
    book = swept.found[0].after.book
    scope = next(s for s in book.instances("stack") if s.key == name)
    unit, digits = unit_of(book, scope)
    told = [one.after.results.get(name) for one in swept.found]
    known = [one for one in told if one is not None]
    x, y = WIDTH - RIGHT + 6.0, TOP + 2.0 + number * KEY_HEIGHT
    parts.append(polyline([(x, y - 1.0), (x + 14.0, y - 1.0)], width=CURVE, dashes=dashes))
    says = [title_of(scope), _from_to(known, unit, digits)]
    for turn in swept.kept[name][:1]:
        low, high = swept.range.written(turn.low), swept.range.written(turn.high)
        says.append(f"{turn.before} to {turn.after} between {low} and {high}")
    for i, text in enumerate(says):
        parts.append(words((x + 16.0, y + i * 3.7), _short(text, LONGEST), size=SMALL))
    return parts


def _from_to(known: list[Result], unit: str, digits: int) -> str:
    """The worst case at both ends of the range: `23.3 -> 41.3 of 30.0 um`; limits from below in full at the last."""
    first, last = known[0], known[-1]
    if last.stack.low is not None:
        return f"last {limits_in_words(last, unit, digits)}"
    return f"{in_unit(first.combined.worst.high, unit, digits)} to {limits_in_words(last, unit, digits)}"


def _short(text: str, most: int) -> str:
    return text if len(text) <= most else text[: most - 1] + "\u2026"
