"""A section on paper: the scale that fits, metal with its hatch, the line of each surface. Sizes and paper in mm."""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterable, Sequence

from setupcheck.record import record
from setupcheck.report.pictures.marks import AXIS_DASHES, GUESSED_DASHES, short
from setupcheck.report.pictures.shape import (
    Piece,
    Solid,
    hollow_heights,
    hollow_radius,
    radius_at,
    root_radius,
)
from setupcheck.report.svg import Point, line, lines, picture, polyline, words

OUTLINE, SURFACE = 0.35, 0.7
"""Widths of the outline and of a surface's own line [mm of paper]. Source: ISO 128 has 0.35 and 0.7 (from memory)."""

LEAST = 3.0
"""Smallest length or radius of a part on paper [mm]: below it the other scale is left alone and this one grows. Our choice."""

HATCH, BLIND = 1.9, 2000.0
"""Distance of hatch lines, and area on paper [mm, mm2] above which they stand wider apart. Our choice."""

STEPS = (1.0, 1.25, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0, 6.0, 8.0)
"""Scales within a power of ten: those of ISO 5455, 1, 2 and 5 (from memory), with steps between so that the sheet is used."""

CENTRE_ANGLE = math.radians(30.0)
"""Half the angle of a centre hole. Source: ISO 866 (from memory), 60 deg."""


@record
class View:
    """From a part to the paper: x = left + way along (z - first), y = axis -/+ across r.

    along, across  mm of paper per mm;  way  +1 where z runs to the right;  first  the height at the left edge
    """

    along: float
    across: float
    left: float
    axis: float
    first: float
    way: int = 1

    def x(self, z: float) -> float:
        return self.left + self.way * self.along * (z - self.first)

    def y(self, radius: float, sign: int = 1) -> float:
        return self.axis - sign * self.across * radius

    def at(self, z: float, radius: float, sign: int = 1) -> Point:
        return self.x(z), self.y(radius, sign)

    def scale(self) -> str:
        """The scale in words."""
        if self.along == self.across:
            return f"scale {_ratio(self.along)}"
        return f"not to one scale: lengths {_ratio(self.along)}, diameters {_ratio(self.across)}"


def fitted(low: float, high: float, radius: float, *, wide: float, tall: float) -> Point:
    """Scales along and across the axis [mm of paper per mm], one and the same unless the part is extremely slim or flat."""
    length, radius = high - low, radius or 1.0
    across = _step(tall / 2.0 / radius)
    along = _step(wide / length) if length > 0.0 else across
    both = min(along, across)
    if both * radius < LEAST:
        return both, min(across, _step(2.0 * LEAST / radius))
    if 0.0 < both * length < LEAST:
        return min(along, _step(2.0 * LEAST / length)), both
    return both, both


def _step(scale: float) -> float:
    """The next smaller scale of the list, 2:1 or 1:2.

    >>> _step(2.2), _step(0.45)
    (2.0, 0.4)
    """
    if not (math.isfinite(scale) and scale > 0.0):
        return 1.0
    if scale >= 1.0:
        power = 10.0 ** math.floor(math.log10(scale))
        return max(s * power for s in STEPS if s * power <= scale * (1.0 + 1e-9))
    power = 10.0 ** math.floor(math.log10(1.0 / scale))
    return 1.0 / min(s * power for s in (*STEPS, 10.0) if s * power >= (1.0 - 1e-9) / scale)


def _ratio(scale: float) -> str:
    if scale >= 1.0:
        return f"{scale:.4g}:1"
    return f"1:{1.0 / scale:.4g}"


def metal(view: View, solid: Solid, *, lower: str = "seen", slope: int = 1) -> list[str]:
    """One part: upper half cut and hatched; lower half `seen` from outside or `cut` too.

    slope  which way the hatch leans, so that two parts in one drawing are told apart
    """
    if not solid.outer:
        return []
    parts: list[str] = []
    for sign, cut in ((1, True), (-1, lower == "cut")):
        if cut:
            ring = [view.at(z, r, sign) for z, r in [*solid.hatched, *reversed(solid.inner)]]
            parts.append(hatch(ring, slope=slope))
        for run in _outlines(solid, cut=cut):
            parts.append(polyline([view.at(z, r, sign) for z, r in run], width=OUTLINE))
        seen = _steps(solid.inner) if cut else _edges_seen(solid.outer)
        parts.append(lines([(view.at(z, 0.0, sign), view.at(z, r, sign)) for z, r in seen], width=OUTLINE * 0.7))
    return [part for part in parts if part]


def _outlines(solid: Solid, *, cut: bool) -> list[list[Point]]:
    """The lines round one half: outside with both ends, and the bore where it is cut open; none along the axis."""
    if not cut:
        return [[(solid.low, 0.0), *solid.outer, (solid.high, 0.0)]]
    runs: list[list[Point]] = [[solid.inner[0], *solid.outer, solid.inner[-1]]]
    run: list[Point] = []
    for a, b in zip(solid.inner, solid.inner[1:], strict=False):
        if a[1] <= 0.0 and b[1] <= 0.0:
            runs.append(run)
            run = []
            continue
        run = [*(run or [a]), b]
    return [found for found in [*runs, run] if found]


def _steps(profile: Sequence[Point]) -> list[Point]:
    """Heights where a bore begins, ends or changes, with the larger radius there: edges seen behind the section."""
    if not any(r > 0.0 for _, r in profile):
        return []
    found: dict[float, float] = {}
    inner = [(z1, max(r1, r2)) for (z1, r1), (z2, r2) in itertools.pairwise(profile) if z1 == z2]
    for z, r in [profile[0], *inner, profile[-1]]:
        if r > 0.0:
            found[z] = max(r, found.get(z, 0.0))
    return sorted(found.items())


def _edges_seen(profile: Sequence[Point]) -> list[Point]:
    """Steps of the outside and ends of a chamfer: circles seen edge-on."""
    found: dict[float, float] = {}
    for i, (z, r) in enumerate(profile[1:-1], 1):
        (z0, r0), (z2, r2) = profile[i - 1], profile[i + 1]
        if z0 == z:
            found[z] = max(r, r0)
        elif z2 == z:
            found[z] = max(r, r2)
        elif abs((r - r0) * (z2 - z) - (r2 - r) * (z - z0)) > 0.15 * math.hypot(z - z0, r - r0) * math.hypot(
            z2 - z, r2 - r
        ):
            found[z] = r
    return sorted(found.items())


def hatch(ring: Sequence[Point], *, slope: int = 1, apart: float = HATCH) -> str:
    """Lines at 45 deg inside a ring of points (even-odd)."""
    size = sum(a[0] * b[1] - b[0] * a[1] for a, b in zip(ring, [*ring[1:], ring[0]], strict=True)) / 2.0
    gap = math.sqrt(2.0) * apart * max(1.0, math.sqrt(abs(size) / BLIND))
    turned = [(x, y + slope * x) for x, y in ring]  # a line of the hatch is y + slope x = c
    bounds = [c for _, c in turned]
    pieces: list[tuple[Point, Point]] = []
    c = (math.floor(min(bounds) / gap) + 0.5) * gap
    while c < max(bounds):
        met = sorted(
            a[0] + (b[0] - a[0]) * (c - a[1]) / (b[1] - a[1])
            for a, b in zip(turned, [*turned[1:], turned[0]], strict=True)
            if (a[1] < c) != (b[1] < c)
        )
        for x1, x2 in zip(met[::2], met[1::2], strict=False):
            if x2 - x1 > 0.05:
                pieces.append(((round(x1, 2), round(c - slope * x1, 2)), (round(x2, 2), round(c - slope * x2, 2))))
        c += gap
    return lines(pieces, width=0.1, colour="#555555")


def unstated(view: View, solid: Solid, signs: Iterable[int] = (1, -1)) -> list[str]:
    """White dashes over the outline where no surface states it."""
    parts = []
    for low, high in solid.unstated:
        for sign in signs:
            ends = [
                view.at(low, radius_at(solid.outer, low, side=1), sign),
                view.at(high, radius_at(solid.outer, high, side=-1), sign),
            ]
            parts.append(line(ends[0], ends[1], width=OUTLINE * 1.6, dashes=GUESSED_DASHES, colour="white"))
    return parts


def axis_line(view: View, low: float, high: float, *, beyond: float = 5.0) -> str:
    ends = sorted((view.x(low), view.x(high)))
    return line((ends[0] - beyond, view.axis), (ends[1] + beyond, view.axis), width=0.18, dashes=AXIS_DASHES)


def runs(piece: Piece, solid: Solid, pieces: Sequence[Piece]) -> list[list[Point]]:
    """The lines of a surface in heights and radii, above the axis; empty where its size is not stated."""
    match piece.kind:
        case "cylinder" | "taper" | "thread" | "bore":
            return _along(piece, solid.inner if piece.kind == "bore" else solid.outer)
        case "face":
            return _across(piece, solid)
        case "throat":
            return _in_hollow(piece, pieces)
        case "teeth":
            return [_at_root(piece, pieces)] if piece.root is not None else []
        case "centre":
            return _cone(piece, solid)
    return []


def _along(piece: Piece, profile: Sequence[Point]) -> list[list[Point]]:
    if not piece.radius:
        return []
    if piece.ends is not None:
        return [[(piece.low, piece.ends[0]), (piece.high, piece.ends[1])]]
    found = []
    for (z1, r1), (z2, r2) in itertools.pairwise(profile):
        low, high = max(z1, piece.low), min(z2, piece.high)
        if high > low and abs(r1 - piece.radius) + abs(r2 - piece.radius) < 1e-6 * piece.radius:
            found.append([(low, piece.radius), (high, piece.radius)])
    return found or [[(piece.low, piece.radius), (piece.high, piece.radius)]]


def _across(piece: Piece, solid: Solid) -> list[list[Point]]:
    own = radius_at(solid.outer, piece.low, side=-piece.facing)
    outer = piece.radius or own
    before = radius_at(solid.outer, piece.low, side=piece.facing)
    inner = max(
        piece.hole or 0.0, radius_at(solid.inner, piece.low, side=-piece.facing), before if before < outer else 0.0
    )
    if not outer:
        return []
    return [[(piece.low, inner if inner < outer else 0.0), (piece.low, outer)]]


def _in_hollow(piece: Piece, pieces: Sequence[Piece]) -> list[list[Point]]:
    if not piece.radius or not piece.hollow:
        return []
    points = [(z, hollow_radius(piece, z)) for z in hollow_heights(piece, pieces)]
    return [[(z, r) for z, r in points if r is not None]]


def _at_root(piece: Piece, pieces: Sequence[Piece]) -> list[Point]:
    steps = 12 if any(p.kind == "throat" and p.hollow for p in pieces) else 1
    heights = [piece.low + (piece.high - piece.low) * i / steps for i in range(steps + 1)]
    points = [(z, root_radius(piece, z, pieces)) for z in heights]
    return [(z, r) for z, r in points if math.isfinite(r)]


def _cone(piece: Piece, solid: Solid) -> list[list[Point]]:
    end = radius_at(solid.outer, piece.low)
    mouth = piece.radius or 0.2 * end
    if not mouth:
        return []
    return [[(piece.low, mouth), (piece.low - piece.facing * mouth / math.tan(CENTRE_ANGLE), 0.0)]]


def pitch_line(piece: Piece, view: View) -> list[list[Point]]:
    """Centre lines of teeth, holes and slots, as heights and radii; at least so long that the dashes show."""
    if not piece.radius or piece.kind not in ("teeth", "holes", "slot", "lines"):
        return []
    low, high = (
        (piece.middle, piece.middle) if piece.cone else (piece.low, piece.high)
    )  # a circle of a cone has one height
    more = max(2.0, 6.0 - view.along * (high - low) / 2.0) / view.along
    return [[(low - more, piece.radius), (high + more, piece.radius)]]


def sheet(width: float, height: float, *, title: str, parts: Sequence[str]) -> str:
    """The file, its heading on top, cut to the width."""
    heading = words((5.0, 6.5), short(title, 3.8, width - 10.0), size=3.8)
    return picture(width, height, title=short(title, 1.0, 120.0), parts=[heading, *parts])


def told(width: float, title: str, sentences: Sequence[str]) -> str:
    """A drawing that could not be made, saying why."""
    body = [words((5.0, 14.0 + 5.0 * i), short(text, 3.2, width - 10.0), size=3.2) for i, text in enumerate(sentences)]
    return sheet(width, 14.0 + 5.0 * len(sentences), title=title, parts=body)


def stroke(view: View, points: Sequence[Point], *, sign: int, width: float, dashes: str, colour: str) -> str:
    return polyline([view.at(z, r, sign) for z, r in points], width=width, dashes=dashes, colour=colour)
