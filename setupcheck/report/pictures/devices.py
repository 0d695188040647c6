"""Symbols of what holds a part: jaws, arbor, centres, dial, rests, pins. Everything in mm of paper, spindle at the left."""

from __future__ import annotations

from setupcheck.record import record
from setupcheck.report.svg import Point, area, circle, line, polygon, rectangle

GREY, DARK = "#d9d9d9", "#b8b8b8"
"""Fill of devices: what the part touches, and what carries that. Our choice."""

JAWS = ("three-jaw", "four-jaw", "soft-jaws", "shimmed-jaws", "pot-chuck", "collet")
ARBORS = ("spigot", "plain-mandrel", "taper-mandrel", "expanding-mandrel", "spindle")
DIALS = ("indicator", "edge-finder")

TRIANGLE = 2.4
"""Height of a datum triangle. Source: ISO 5459 gives its shape, filled or open (from memory); our choice of size."""


@record
class Bench:
    """Where things stand around the part.

    axis           y of the machine axis;  left, right  ends of the part;  chuck  x of the chuck's face
    reach          largest half height of the part
    """

    axis: float
    left: float
    right: float
    chuck: float
    reach: float


@record
class Grip:
    """A surface that is held: its ends along the paper, half height, and what stands out between it and the chuck."""

    left: float
    right: float
    half: float
    before: float
    inner: bool


def chuck(bench: Bench, half: float) -> list[str]:
    """The face that the devices stand on, and the spindle's nose behind it."""
    return [
        rectangle((bench.chuck - 13.0, bench.axis - 5.0), 5.0, 10.0, fill=DARK),
        rectangle((bench.chuck - 8.0, bench.axis - half), 8.0, 2.0 * half, fill=DARK),
    ]


def jaws(bench: Bench, grip: Grip) -> list[str]:
    """Jaws on the outside, stepped over what is larger before them, or in the bore."""
    parts = []
    for sign in (1, -1):
        if grip.inner:
            low = max(grip.half - 5.0, 0.4)
            parts.append(_block(bench, sign, (bench.chuck, grip.right), (low, grip.half)))
            continue
        over = grip.before + 1.2 if grip.before > grip.half else grip.half
        top = max(over, grip.half) + 6.0
        x1, x2 = max(grip.left, bench.chuck), grip.right
        points = [(bench.chuck, over), (x1, over), (x1, grip.half), (x2, grip.half), (x2, top), (bench.chuck, top)]
        parts.append(area([(x, bench.axis - sign * y) for x, y in points], fill=GREY))
    return parts


def arbor(bench: Bench, grip: Grip, *, by: str, through: bool) -> list[str]:
    """A spigot or mandrel in a bore; round an outside it is a ring that the part sits in."""
    if not grip.inner:
        return jaws(bench, grip)
    end = bench.right + 7.0 if through else grip.right
    half = grip.half
    parts = [rectangle((bench.chuck, bench.axis - half), end - bench.chuck, 2.0 * half, fill=GREY)]
    if by == "expanding-mandrel":  # its slits
        parts += [line((bench.left, bench.axis + s * 0.4 * half), (end, bench.axis + s * 0.4 * half)) for s in (1, -1)]
    return parts


def centre_point(bench: Bench, x: float, outward: int, half: float) -> list[str]:
    """A centre in the end of the part or of its mandrel: tip inwards, 60 deg."""
    mouth = min(max(half, 1.2), 3.0)
    tip, back = x - outward * mouth * 1.7, x + outward * 6.0
    flare = mouth + 6.0 * 0.57
    points = [(tip, 0.0), (back, -flare), (back + outward * 3.0, -flare), (back + outward * 3.0, flare), (back, flare)]
    return [area([(px, bench.axis + py) for px, py in points], fill=GREY)]


def dial(at: Point, away: Point) -> list[str]:
    """An indicator whose tip touches at a point; its face stands the other way."""
    return [
        line(at, away, width=0.5),
        circle(away, 3.2, fill="white", width=0.35),
        line(away, (away[0] + 1.4, away[1] - 1.8), width=0.35),
        circle(at, 0.5, fill="black"),
    ]


def rest(bench: Bench, x: float, way: int, radii: Point, *, thin: bool) -> list[str]:
    """What a face lies against: a flange, table or parallels, from the chuck where it looks there.

    way  -1: the face looks to the spindle;  radii  half heights it stands between;  thin  two narrow strips
    """
    inner, outer = radii
    if thin:
        inner, outer = outer - min(3.0, outer - inner), outer
    end = min(bench.chuck, x - 1.5) if way < 0 else x + 4.0
    return [_block(bench, sign, (min(x, end), max(x, end)), (inner, outer)) for sign in (1, -1)]


def pin(bench: Bench, x: float, way: int, half: float) -> list[str]:
    """A stop: a pin whose end touches a face."""
    end = x + way * 7.0
    y = bench.axis + half
    head = [(x, y), (x + way * 1.8, y - 1.2), (x + way * 1.8, y + 1.2)]
    return [line((end, y), (x + way * 1.8, y), width=0.9, colour="#555555"), polygon(head)]


def under(bench: Bench, grip: Grip, *, vee: bool) -> list[str]:
    """A vee block or fixture under the part."""
    top = bench.axis + grip.half
    parts = [rectangle((grip.left, top), max(grip.right - grip.left, 3.0), 6.0, fill=GREY)]
    if vee:
        middle = (grip.left + grip.right) / 2.0
        parts.append(area([(middle - 2.0, top + 1.5), (middle + 2.0, top + 1.5), (middle, top + 4.5)]))
    return parts


def steady(bench: Bench, grip: Grip) -> list[str]:
    """Fingers of a steady on both sides."""
    x = (grip.left + grip.right) / 2.0
    return [
        rectangle((x - 1.2, bench.axis - grip.half - (6.0 if s > 0 else -2.0 * grip.half)), 2.4, 6.0, fill=GREY)
        for s in (1, -1)
    ]


def plate(bench: Bench, half: float) -> list[str]:
    """A faceplate, magnetic chuck or table that the part lies on."""
    return [rectangle((bench.chuck, bench.axis - half), bench.left - bench.chuck, 2.0 * half, fill=GREY)]


def triangle(base: Point, towards: Point) -> str:
    """A filled datum triangle that stands on a surface and points away from it."""
    dx, dy = towards
    tip = (base[0] + dx * TRIANGLE, base[1] + dy * TRIANGLE)
    half = 0.58 * TRIANGLE
    return polygon([(base[0] - dy * half, base[1] + dx * half), (base[0] + dy * half, base[1] - dx * half), tip])


def _block(bench: Bench, sign: int, xs: Point, halves: Point) -> str:
    y = bench.axis - halves[1] if sign > 0 else bench.axis + halves[0]
    return rectangle((xs[0], y), max(xs[1] - xs[0], 0.3), max(halves[1] - halves[0], 0.3), fill=GREY)
