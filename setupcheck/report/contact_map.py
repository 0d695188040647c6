"""Map of the contact of both flanks on one sheet: metal missing in steps, what is marked outlined, both to a stated scale. mm.

It knows no worm: whoever asks for it hands over points, distances and the lines to be written.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

from setupcheck.notation import show
from setupcheck.record import record
from setupcheck.report.bands import Piece, areas, edges, rim
from setupcheck.report.svg import THICK, THIN, Point, line, number, picture, polygon, polyline, room, tag, words

WIDE, HIGH = 297.0, 210.0
"""A4 across [mm]. Source: ISO 216."""

MARGIN, SIZE, LINE, TITLE = 12.0, 3.0, 5.0, 4.5
"""White edge, size of a text, from one line of it to the next, size of the title [mm of paper]. Our choice."""

AXIS, NUMBERS, BETWEEN = 6.0, 11.0, 10.0
"""Axis from the map, room for its numbers beside it, white between both flanks [mm of paper]. Our choice."""

BENEATH = 60.0
"""From the map to the lower edge of the sheet: numbers, legend, white edge [mm of paper]. Our choice."""

TALLEST, LOWEST = 75.0, 25.0
"""Height a map may have, and has room for in any case [mm of paper]. Our choice."""

OUTLINE = 0.5
"""Width of the line round what is marked [mm]. Source: ISO 128 has 0.5 beside 0.25 (from memory)."""

SCALES = (
    50.0,
    40.0,
    30.0,
    25.0,
    20.0,
    15.0,
    12.0,
    10.0,
    8.0,
    6.0,
    5.0,
    4.0,
    3.0,
    2.5,
    2.0,
    1.5,
    1.0,
    0.8,
    0.6,
    0.5,
    0.4,
)
"""Enlargements that are looked through for the largest that fits. Our choice."""

STEPS = (0.002, 0.004, 0.006, 0.010, 0.020, 0.050, 0.100)
STEPS_IN = tuple(0.0254 * step for step in (0.1, 0.2, 0.3, 0.5, 1.0, 2.0, 5.0))
"""Where the shade changes [mm]: fine about the usual films of blue, coarse beyond; in thou for an inch file. Our choice."""

DARK = (58, 96, 140)
"""Shade of what is nearest, red, green, blue; the others go in equal steps to white, so that it prints in grey as well.
Our choice."""

BOX = 20.0
"""Width of a field of the legend [mm of paper]. Our choice."""


@record(kw_only=True)
class FlankMap:
    """One flank as a grid, root first, from the -z end of the face to the +z end [mm].

    title     one line over the map
    along     planes, +z from the mid-plane, rising, (columns,)
    heights   over the reference circle, rising from row to row, (rows, columns)
    missing   distance to the thread at its nearest, square to the flank, (rows, columns); inf where none passes
    """

    title: str
    along: Sequence[float]
    heights: Sequence[Sequence[float]]
    missing: Sequence[Sequence[float]]

    def __post_init__(self) -> None:
        shape = {len(row) for row in (self.along, *self.heights, *self.missing)}
        if len(shape) != 1 or min(len(self.along), len(self.heights)) < 2 or len(self.heights) != len(self.missing):
            raise ValueError(
                "a map is drawn from two rows and columns or more, each point with a height and a distance"
            )
        if any(math.isnan(v) for row in (self.along, *self.heights, *self.missing) for v in row):
            raise ValueError("a number of the map is missing")
        if any(b <= a for a, b in zip(self.along, self.along[1:], strict=False)):
            raise ValueError("the planes of a map must rise from the -z end of the face to the +z end")


@record(kw_only=True)
class ContactMap:
    """The sheet: title, caption in lines, both flanks, names of the faces at -z and +z, film [mm], whether it speaks in inches.

    Raises: ValueError for a film not above zero.
    """

    title: str
    caption: Sequence[str]
    flanks: tuple[FlankMap, FlankMap]
    ends: tuple[str, str]
    film: float
    inches: bool = False

    def __post_init__(self) -> None:
        if not 0.0 < self.film < math.inf:
            raise ValueError(f"a film of blue is a thickness above zero, such as 0.006 mm, not {self.film:g}")


def draw_contact(told: ContactMap) -> str:
    """The sheet as SVG text, A4 across; higher only where a caption is too long for it."""
    sheet = _Sheet(told)
    parts = [*_heading(sheet)]
    for n, flank in enumerate(told.flanks):
        parts += _flank(sheet, flank, sheet.left[n])
    parts += _legend(sheet)
    return picture(WIDE, sheet.high, title=told.title, parts=parts)


class _Sheet:
    """Places on the paper and both scales [mm of paper]."""

    def __init__(self, told: ContactMap) -> None:
        self.told = told
        self.unit = 25.4 if told.inches else 1.0
        heights = [h for flank in told.flanks for row in flank.heights for h in row]
        self.lowest, self.highest = min(heights), max(heights)
        self.half = max(abs(z) for flank in told.flanks for z in (flank.along[0], flank.along[-1]))
        panel = (WIDE - 2.0 * MARGIN - BETWEEN) / 2.0
        across = panel - AXIS - NUMBERS
        self.title = folded(told.title, TITLE)
        self.caption = [part for text in told.caption for part in folded(text, SIZE)]
        self.top = MARGIN + 6.0 * len(self.title) + LINE * len(self.caption) + 16.0
        self.k = _scale(2.0 * self.half, across)
        self.up = _scale(self.highest - self.lowest, max(LOWEST, min(TALLEST, HIGH - self.top - BENEATH)))
        self.bottom = self.top + (self.highest - self.lowest) * self.up
        self.axis = self.bottom + 3.0
        self.high = max(HIGH, self.bottom + BENEATH)
        spare = (across - 2.0 * self.half * self.k) / 2.0
        self.left = [MARGIN + n * (panel + BETWEEN) + AXIS + NUMBERS + spare for n in (0, 1)]
        self.wide = 2.0 * self.half * self.k

    def at(self, left: float, along: float, height: float) -> Point:
        """Place on the paper of a point of a flank whose map begins there."""
        return left + (along + self.half) * self.k, self.bottom - (height - self.lowest) * self.up


def _scale(size: float, space: float) -> float:
    """The largest enlargement that fits; without a name of its own where even the least is too large."""
    return next((s for s in SCALES if s * size <= space), space / size)


def folded(text: str, size: float) -> list[str]:
    """A text in as many lines as it needs across the sheet, broken between words.

    >>> folded("one two", 3.0), len(folded("word " * 60, 3.0))
    (['one two'], 3)
    """
    lines: list[str] = []
    for word in text.split():
        longer = f"{lines[-1]} {word}" if lines else word
        if lines and room(longer, size) <= WIDE - 2.0 * MARGIN:
            lines[-1] = longer
        else:
            lines.append(shortened(word, size, WIDE - 2.0 * MARGIN))
    return lines


def shortened(text: str, size: float, space: float) -> str:
    """A text cut off where its room ends.

    >>> shortened("front", 3.0, 20.0), shortened("front of the wheel", 3.0, 20.0)
    ('front', 'front of …')
    """
    most = int(space / room("x", size) + 1e-9)
    return text if len(text) <= most else text[: max(most - 1, 0)] + "…"


def steps_between(low: float, high: float, apart: float) -> list[float]:
    """Round numbers 1, 2, 5 times a power of ten that lie no closer than asked.

    >>> steps_between(-9.0, 9.0, 3.0), steps_between(-0.2, 0.41, 0.15)
    ([-5.0, 0.0, 5.0], [-0.2, 0.0, 0.2, 0.4])
    """
    power = 10.0 ** math.floor(math.log10(apart))
    step = next(power * n for n in (1.0, 2.0, 5.0, 10.0, 20.0) if power * n >= apart * (1.0 - 1e-9))
    first, last = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    return [round(n * step, 9) for n in range(first, last + 1)]


def _heading(sheet: _Sheet) -> list[str]:
    y = MARGIN + TITLE
    parts = [words((MARGIN, y + 6.0 * i), text, size=TITLE, bold=True) for i, text in enumerate(sheet.title)]
    y += 6.0 * len(sheet.title) + 0.5
    return [*parts, *(words((MARGIN, y + LINE * i), text, size=SIZE) for i, text in enumerate(sheet.caption))]


def _flank(sheet: _Sheet, flank: FlankMap, left: float) -> Iterator[str]:
    """Title, names of the faces, shades, outline of what is marked, axes."""
    points = [[sheet.at(left, z, h) for z, h in zip(flank.along, row, strict=True)] for row in flank.heights]
    middle, half = left + sheet.wide / 2.0, sheet.wide / 2.0 - 2.0
    low, high = (shortened(name, SIZE, half) for name in sheet.told.ends)
    yield words((middle, sheet.top - 9.0), flank.title, size=SIZE + 0.5, anchor="middle", bold=True)
    yield words((left, sheet.top - 3.0), low)
    yield words((left + sheet.wide, sheet.top - 3.0), high, anchor="end")
    yield from _shades(sheet, flank, points)
    yield polyline(rim(points), width=THICK)
    yield _path(edges(points, flank.missing, sheet.told.film))
    yield from _axes(sheet, left)


def _shades(sheet: _Sheet, flank: FlankMap, points: Sequence[Sequence[Point]]) -> Iterator[str]:
    """The whole flank in the lightest shade, then what is nearer, over each other and ever darker."""
    steps = STEPS_IN if sheet.told.inches else STEPS
    shades = _ramp(len(steps) + 1)
    yield polygon(rim(points), fill=shades[-1])
    for step, shade in reversed([*zip(steps, shades, strict=False)]):
        d = "".join("M" + "L".join(_place(at) for at in area) + "Z" for area in areas(points, flank.missing, step))
        if d:
            yield tag("path", d=d, fill=shade)


def _ramp(many: int) -> list[str]:
    """Shades from dark to white in equal steps."""
    shares = [i / (many - 1) for i in range(many)]
    return ["#" + "".join(f"{round(c + (255 - c) * s):02x}" for c in DARK) for s in shares]


def _place(at: Point) -> str:
    """A place in a path, to 1/100 mm of paper: there are thousands of them."""
    return f"{number(round(at[0], 2))} {number(round(at[1], 2))}"


def _path(pieces: Iterator[Piece]) -> str:
    d = "".join(f"M{_place(a)}L{_place(b)}" for a, b in pieces)
    return tag("path", d=d or "M0 0", fill="none", stroke="black", stroke_width=OUTLINE, stroke_linecap="round")


def _axes(sheet: _Sheet, left: float) -> Iterator[str]:
    """Along the face beneath the map, up the flank at its left; the reference circle dashed across it."""
    y, x, unit = sheet.axis, left - AXIS, sheet.unit
    yield line((left, y), (left + sheet.wide, y))
    half = sheet.half / unit
    for z in steps_between(-half, half, 12.0 / (sheet.k * unit)):
        at = sheet.at(left, z * unit, 0.0)[0]
        yield line((at, y), (at, y + 1.5))
        yield words((at, y + 1.5 + SIZE + 0.5), f"{z:+g}" if z else "0", anchor="middle")
    yield line((x, sheet.top), (x, sheet.bottom))
    yield words((x + 1.0, sheet.top - 3.0), "tip", anchor="end")
    yield words((x + 1.0, sheet.bottom + SIZE + 2.0), "root", anchor="end")
    for h in steps_between(sheet.lowest / unit, sheet.highest / unit, 7.0 / (sheet.up * unit)):
        at = sheet.at(left, 0.0, h * unit)[1]
        yield line((x - 1.5, at), (x, at))
        yield words((x - 2.5, at + 0.35 * SIZE), f"{h:+g}" if h else "0", anchor="end")
    circle = sheet.at(left, 0.0, 0.0)[1]
    if sheet.top < circle < sheet.bottom:
        yield line((x, circle), (left + sheet.wide, circle), dashes="3 1.5")


def _legend(sheet: _Sheet) -> Iterator[str]:
    """What the axes are, the shades with their steps, the line round what is marked."""
    inches = sheet.told.inches
    unit, fine = ("in", "thou") if inches else ("mm", "um")
    y = sheet.axis + 14.0
    yield words(
        (MARGIN, y),
        f"across: {unit} along the face from the mid-plane, + is +z, {sheet.k:g}:1; up: {unit} over the reference circle "
        f"(dashed), {sheet.up:g}:1",
    )
    y += 9.0
    yield words(
        (MARGIN, y),
        f"metal missing: {fine} to the thread where it comes nearest, square to the flank; white also where no thread passes",
    )
    steps = STEPS_IN if inches else STEPS
    said = [show(step, fine, 1 if inches else 0).split()[0] for step in steps]
    labels = [f"{a} to {b}" for a, b in zip(["0", *said], said, strict=False)] + [f"over {said[-1]}"]
    y += 3.0
    for i, (shade, label) in enumerate(zip(_ramp(len(labels)), labels, strict=True)):
        x = MARGIN + i * BOX
        yield tag("rect", x=x, y=y, width=BOX, height=6.0, fill=shade, stroke="black", stroke_width=THIN)
        yield words((x + BOX / 2.0, y + 6.0 + SIZE + 1.0), label, anchor="middle")
    x = MARGIN + len(labels) * BOX + 8.0
    yield tag("rect", x=x, y=y, width=10.0, height=6.0, fill="none", stroke="black", stroke_width=OUTLINE, rx=2.0)
    film = show(sheet.told.film, fine, 2 if inches else 1)
    yield words((x + 13.0, y + 3.0 + 0.35 * SIZE), f"marked by a film of {film}")
    yield words(
        (MARGIN, y + 6.0 + SIZE + 8.0),
        "near the root the edge of the thread's tip may mark as well: the outline shows it, the share leaves it out",
    )
