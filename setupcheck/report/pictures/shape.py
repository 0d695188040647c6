"""The section of a part from the surfaces its file names: what is metal, where, and which stretches nobody stated. mm.

A part is a body of revolution here: heights along its axis, radii from it. Steps are two points at one height.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterator, Sequence

from setupcheck.record import record

Point = tuple[float, float]

SAMPLES = 12
"""Straight pieces that a hollow is drawn with. Our choice: a fortieth of a millimetre off its arc on paper."""

TOUCH = 1e-9
"""Share of the whole length below which two places are one: rounding of a sum. Our choice."""


@record
class Piece:
    """One surface as it is drawn.

    part, name   whose it is;  kind  of surface;  low, high  along the axis [mm];  radius  [mm], None where none is stated
    facing       +1 or -1 of a face, else 0;  stock  the blank brings it;  hole  radius of a hole through it [mm]
    hollow       radius of a throat's hollow [mm];  root  radius at the root of teeth [mm];  size  of a hole or slot [mm]
    trims        a face turned towards the tool: of the stock, nothing is left before it
    ends         radii of a taper at `low` and at `high` [mm], `radius` being the larger;  cone  teeth stand round a cone
    """

    part: str
    name: str
    kind: str
    low: float
    high: float
    radius: float | None = None
    facing: int = 0
    stock: bool = False
    hole: float | None = None
    hollow: float | None = None
    root: float | None = None
    size: float | None = None
    trims: bool = False
    ends: tuple[float, float] | None = None
    cone: bool = False

    @property
    def middle(self) -> float:
        return (self.low + self.high) / 2.0

    def radius_at(self, z: float) -> float:
        """Radius at a height, straight from end to end of a taper [mm]; 0 where none is stated."""
        if self.ends is None or self.high <= self.low:
            return self.radius or 0.0
        return self.ends[0] + (self.ends[1] - self.ends[0]) * (z - self.low) / (self.high - self.low)


@record
class Solid:
    """Metal of one part.

    outer, inner, hatched  (height, radius) with heights rising; `hatched` is `outer` less the teeth
    unstated               ends of the stretches whose outside no surface states
    """

    outer: tuple[Point, ...] = ()
    inner: tuple[Point, ...] = ()
    hatched: tuple[Point, ...] = ()
    unstated: tuple[Point, ...] = ()

    @property
    def low(self) -> float:
        return self.outer[0][0]

    @property
    def high(self) -> float:
        return self.outer[-1][0]


_OUTSIDE = ("cylinder", "taper", "thread")
_ENDS = ("face", "centre")


def solid(pieces: Sequence[Piece]) -> Solid:
    """What is metal. Empty where no outside is stated.

    Finished outsides go before the stock around them; a stretch that no outside covers takes the radius of the face beside
    it, or the smaller of its neighbours.  Source: our choice; nothing in a job file draws a contour.
    """
    rounds = [p for p in pieces if p.kind in _OUTSIDE and p.radius and not p.stock]
    stock = [p for p in pieces if p.kind in _OUTSIDE and p.radius and p.stock]
    if not rounds and not stock:  # a ring of teeth alone is metal too
        rounds = [p for p in pieces if p.kind == "teeth" and p.radius and p.high > p.low]
    if not rounds and not stock:
        return Solid()
    low, high = _ends(pieces, rounds, stock)
    if not high > low:
        return Solid()
    cuts = {z for p in pieces for z in (p.low, p.high) if low < z < high}
    for throat in (p for p in pieces if p.kind == "throat"):
        cuts |= {z for z in hollow_heights(throat, pieces) if low < z < high}
    for teeth in (p for p in pieces if p.kind == "teeth" and p.root is not None):
        hollow = _throat_of(teeth, pieces)
        if hollow is not None:
            step = (teeth.high - teeth.low) / SAMPLES
            cuts |= {z for i in range(SAMPLES + 1) if low < (z := teeth.low + i * step) < high}
    heights = _apart(sorted({low, high, *cuts}), high - low)
    spans = list(itertools.pairwise(heights))
    outside, unstated = _outside(spans, rounds, stock, pieces)
    outside = [_less_hollows(span, ends, pieces) for span, ends in zip(spans, outside, strict=True)]
    hatched = [_less_teeth(span, ends, pieces) for span, ends in zip(spans, outside, strict=True)]
    inside = [_inside(span, min(ends), pieces) for span, ends in zip(spans, hatched, strict=True)]
    return Solid(
        _profile(spans, outside),
        _profile(spans, [(r, r) for r in inside]),
        _profile(spans, hatched),
        unstated,
    )


def radius_at(profile: Sequence[Point], z: float, *, side: int = 0) -> float:
    """Radius of a profile at a height: the larger one of a step, or that on one side of it (-1 below, +1 above)."""
    found = []
    for (z1, r1), (z2, r2) in itertools.pairwise(profile):
        if z2 <= z1 or not z1 <= z <= z2 or (side > 0 and z >= z2) or (side < 0 and z <= z1):
            continue
        found.append(r1 + (r2 - r1) * (z - z1) / (z2 - z1))
    return max(found, default=0.0)


def _ends(pieces: Sequence[Piece], rounds: Sequence[Piece], stock: Sequence[Piece]) -> tuple[float, float]:
    """Where the metal begins and ends: finished outsides and faces, and stock that no face has been turned off yet."""
    own = [z for p in rounds for z in (p.low, p.high)]
    own += [p.low for p in pieces if p.kind in _ENDS]
    low, high = (min(own), max(own)) if own else (math.inf, -math.inf)
    for p in stock:
        low, high = min(low, p.low), max(high, p.high)
    for way in (-1, 1):
        turned = [p.low for p in pieces if p.kind in _ENDS and p.facing == way and (p.trims or p.kind == "centre")]
        covered = [z for p in rounds for z in (p.low, p.high)]
        if turned and way > 0:
            high = max([*turned, *covered])
        elif turned:
            low = min([*turned, *covered])
    return low, high


def _apart(heights: Sequence[float], whole: float) -> list[float]:
    kept = [heights[0]]
    for z in heights[1:]:
        if z - kept[-1] > TOUCH * whole:
            kept.append(z)
    return kept


def _outside(
    spans: Sequence[Point], rounds: Sequence[Piece], stock: Sequence[Piece], pieces: Sequence[Piece]
) -> tuple[list[Point], tuple[Point, ...]]:
    """Radii at both ends of each stretch, and the stretches nobody stated."""
    found: list[Point | None] = []
    for low, high in spans:
        middle = (low + high) / 2.0
        over = [p for p in rounds if p.low <= middle <= p.high] or [p for p in stock if p.low <= middle <= p.high]
        found.append((max(p.radius_at(low) for p in over), max(p.radius_at(high) for p in over)) if over else None)
    for i, beside in (
        ((0, 1), (-1, -2)) if len(spans) > 1 else ()
    ):  # a strip before a turned end went with what was turned
        strip, middle = spans[i], sum(spans[beside]) / 2.0
        turned = any(p.trims and p.low == strip[0 if i == 0 else 1] for p in pieces)
        if turned and all(not p.low <= sum(strip) / 2.0 <= p.high for p in rounds):
            found[i] = None if any(p.low <= middle <= p.high for p in rounds) else found[i]
    known = [i for i, ends in enumerate(found) if ends is not None]
    done, unstated = [], []
    for i, (low, high) in enumerate(spans):
        ends = found[i]
        if ends is None:
            before, after = [k for k in known if k < i], [k for k in known if k > i]
            left, right = (before[-1] if before else None), (after[0] if after else None)
            stretch = (
                spans[left][1] if left is not None else spans[0][0],
                spans[right][0] if right is not None else spans[-1][1],
            )
            ends = _bridged(
                stretch,
                _radius(found, left, 1),
                _radius(found, right, 0),
                pieces,
                (low, high),
            )
            unstated.append((low, high))
        done.append(ends)
    return done, tuple(unstated)


def _radius(found: Sequence[Point | None], at: int | None, end: int) -> float | None:
    ends = found[at] if at is not None else None
    return ends[end] if ends is not None else None


def _bridged(stretch: Point, left: float | None, right: float | None, pieces: Sequence[Piece], span: Point) -> Point:
    """A stretch between two outsides: as wide as the faces that end it, straight, or a chamfer to a smaller face."""
    low, high = stretch
    near = [p.radius for p in pieces if p.kind == "face" and p.facing < 0 and p.low == low and p.radius]
    far = [p.radius for p in pieces if p.kind == "face" and p.facing > 0 and p.low == high and p.radius]
    begin, end = max(near, default=None), max(far, default=None)
    if begin is None and end is None:
        smaller = min(r for r in (left, right) if r is not None)
        return smaller, smaller
    if begin is None:
        begin = max(end or 0.0, left) if left is not None and left > (end or 0.0) else end
    if end is None:
        end = max(begin or 0.0, right) if right is not None and right > (begin or 0.0) else begin
    assert begin is not None and end is not None

    def at(z: float) -> float:
        return begin + (end - begin) * (z - low) / (high - low)

    return at(span[0]), at(span[1])


def _throat_of(teeth: Piece, pieces: Sequence[Piece]) -> Piece | None:
    return next((p for p in pieces if p.kind == "throat" and teeth.low <= p.low <= teeth.high and p.hollow), None)


def hollow_radius(throat: Piece, z: float, deeper: float = 0.0) -> float | None:
    """Radius of the part in the hollow at a height, or on an arc round the same middle; None where the arc has ended."""
    assert throat.hollow is not None and throat.radius is not None
    arc = throat.hollow + deeper
    off = z - throat.low
    return throat.radius + throat.hollow - math.sqrt(arc * arc - off * off) if abs(off) <= arc else None


def hollow_heights(throat: Piece, pieces: Sequence[Piece]) -> Iterator[float]:
    """Heights at which the hollow is drawn, from where it leaves the outside."""
    if not throat.hollow or not throat.radius:
        return
    over = [p for p in pieces if p.kind in _OUTSIDE and p.radius and p.low <= throat.low <= p.high]
    around = [p.radius or 0.0 for p in over if not p.stock] or [p.radius or 0.0 for p in over]
    height = throat.hollow - (max(around) - throat.radius) if around else 0.8 * throat.hollow
    half = math.sqrt(max(throat.hollow**2 - height**2, 0.0)) if 0.0 < height < throat.hollow else 0.0
    for i in range(SAMPLES + 1):
        yield throat.low + half * (2.0 * i / SAMPLES - 1.0)


def _less_hollows(span: Point, ends: Point, pieces: Sequence[Piece]) -> Point:
    for throat in (p for p in pieces if p.kind == "throat" and p.hollow and p.radius):
        lower = [hollow_radius(throat, z) for z in span]
        if all(r is not None for r in lower) and abs(sum(span) / 2.0 - throat.low) <= (throat.hollow or 0.0):
            ends = (min(ends[0], lower[0] or ends[0]), min(ends[1], lower[1] or ends[1]))
    return ends


def _less_teeth(span: Point, ends: Point, pieces: Sequence[Piece]) -> Point:
    middle = sum(span) / 2.0
    for teeth in (p for p in pieces if p.kind == "teeth" and p.root is not None and p.low < middle < p.high):
        ends = (min(ends[0], root_radius(teeth, span[0], pieces)), min(ends[1], root_radius(teeth, span[1], pieces)))
    return ends


def root_radius(teeth: Piece, z: float, pieces: Sequence[Piece]) -> float:
    """Radius at the root of the teeth: straight, or round the middle of the hollow they are cut into."""
    assert teeth.root is not None
    throat = _throat_of(teeth, pieces)
    if throat is None or throat.radius is None:
        return teeth.root
    found = hollow_radius(throat, z, throat.radius - teeth.root)
    return found if found is not None else math.inf


def _inside(span: Point, most: float, pieces: Sequence[Piece]) -> float:
    middle = sum(span) / 2.0
    found = [p.radius or 0.0 for p in pieces if p.kind == "bore" and p.low <= middle <= p.high]
    found += [p.hole for p in pieces if p.hole and p.kind != "face" and p.low <= middle <= p.high]
    return min(max(found, default=0.0), most)


def _profile(spans: Sequence[Point], ends: Sequence[Point]) -> tuple[Point, ...]:
    """One line through all stretches, points on a straight line left out."""
    points: list[Point] = []
    for (low, high), (begin, end) in zip(spans, ends, strict=True):
        for point in ((low, begin), (high, end)):
            if points and points[-1] == point:
                continue
            if len(points) > 1 and points[-1][1] == points[-2][1] == point[1]:
                points[-1] = point
            else:
                points.append(point)
    return tuple(points)
