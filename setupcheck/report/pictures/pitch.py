"""`pitch-<n>`: cumulative pitch deviation from place to place, as planned, and as read where a division test is at hand.

Zero lies in the middle between the highest and the lowest place: so every ring of a range W stays within +-W/2, whatever its
shape, and the worst case of the review is a band. Positive: further counter-clockwise than it should, seen from +z. mm, rad.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from dataclasses import replace
from functools import partial
from typing import TYPE_CHECKING

from setupcheck.notation import FACTOR, show
from setupcheck.quantities.book import INCH, Known, Open, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.relations import Built
from setupcheck.quantities.scopes import stack_of
from setupcheck.record import record
from setupcheck.report.pictures import Picture
from setupcheck.report.pictures.axes import (
    DASHES,
    EDGE,
    HEAD,
    LINE,
    MOST_POINTS,
    SHEET,
    SIZE,
    Scale,
    across,
    area,
    path,
    shortened,
    told,
    upright,
)
from setupcheck.report.svg import THICK, Point, line, number, picture, polyline, words
from setupcheck.report.wording import clean

if TYPE_CHECKING:
    from setupcheck.flow import ReadBack, Review
    from setupcheck.ledger.account import Account
    from setupcheck.ledger.figures import Tooth

ASKED = (
    "cumulative-pitch",
    "gap-centre-pitch",
    "index-range",
    "index-within",
    "on-workpiece",
    "single-pitch",
    "position",
    "chord",
)
"""Requirements that speak of a ring's division, the nearest to what is drawn first."""
LEFT, RIGHT, TOP, BOTTOM = 18.0, 160.0, 26.0, 72.0
"""Edges of the field [mm]. Our choice."""
MOST_DRAWN = 2_000_000
"""Places times draws that are looked at; of a larger ring fewer draws. Our choice, for the time it takes."""
SHARE = 0.95
"""Of the draws, place by place, within the dashed lines. Our choice, as the review's likely value."""
MOST_MEASURED, MARK = 160, 1.4
"""Measured points drawn, of more the highest and lowest of each stretch; the size of their mark [mm]. Our choice."""
LIMIT_WIDTH, DRAW = 0.7, 0.18
"""Line widths of the limit and of the one draw [mm]. Our choice."""


@record(eq=False)
class Planned:
    """A ring as planned; arcs on its circle [mm].

    kind    gap, hole or line;  worst  range of the worst case, None where open;  limit  of that range, None without
    low, high  of each place what SHARE of the draws stay within;  one  a draw whose range is the likely one, and that range
    missing what to fill;  gaps  what the gaps add within their pitch, which the worst case counts [mm]
    """

    name: str
    kind: str
    count: int
    radius: float
    worst: float | None
    limit: float | None
    low: tuple[float, ...]
    high: tuple[float, ...]
    one: tuple[float, ...]
    likely: float
    missing: tuple[str, ...]
    gaps: float
    title: str


@record
class Shown:
    """A measured mean: place as a number round the ring, deviation and its uncertainty (k = 2) as arcs [mm], direction."""

    place: float
    value: float
    uncertain: float
    direction: int


def offered(found: Review, read: ReadBack | None = None) -> Iterator[Picture]:
    """One picture for each ring of teeth or holes whose division is asked about, named after the requirement it shows."""
    rings: dict[str, list[Scope]] = {}
    for scope in found.book.instances("stack"):
        stack = stack_of(scope)
        if stack.require.what in ASKED and stack.of:
            rings.setdefault(_ring_of(found, stack.of), []).append(scope)
    for name, scopes in rings.items():
        best = min(scopes, key=lambda s: ASKED.index(stack_of(s).require.what))
        if _count(found, name) > 1:
            n = stack_of(best).index + 1
            yield Picture(f"pitch-{n}", f"Cumulative pitch of {clean(name)}", partial(drawn, found, best, name, read))


def _ring_of(found: Review, of: str) -> str:
    return str(replace(found.loaded.ref(of), op=None))


def _count(found: Review, name: str) -> int:
    ref = found.loaded.ref(name)
    node = found.loaded.job.parts[ref.part].surfaces[ref.surface]
    return int(getattr(node, "count", 1) or 1)


def planned(found: Review, scope: Scope, name: str) -> Planned:
    """The ring as planned: worst case of the review, and draws of it place by place."""
    from setupcheck.ledger.running import AsItRuns

    stack, ref = stack_of(scope), found.loaded.ref(name)
    node = found.loaded.job.parts[ref.part].surfaces[ref.surface]
    kind = {"teeth": "gap", "lines": "line"}.get(node.kind, "hole")
    circle = getattr(node, "on_circle", None) or 0.0
    title = f"Cumulative pitch of {name}, {_count(found, name)} {'teeth' if kind == 'gap' else f'{kind}s'}"
    empty = Planned(name, kind, _count(found, name), circle / 2.0, None, None, (), (), (), 0.0, (), 0.0, title)
    built = found.book.get("stack.built", scope)
    if not isinstance(built, Known) or not isinstance(built.value, Built):
        missing = (built.missing or (built.because,)) if isinstance(built, Open) else ()
        return replace(empty, missing=missing)
    figure = built.value.figure
    ring = _as_ring(figure.ring if isinstance(figure, AsItRuns) else figure)
    if ring is None:
        return replace(empty, missing=("a pitch figure of this ring, as in what: gap-centre-pitch",))
    result = found.results.get(scope.key)
    asked = result is not None and stack.require.what not in ("single-pitch", "position", "chord")
    if asked and isinstance(result, Result):
        worst = result.combined.worst.high / ring.factor
        limit = stack.high / ring.factor if stack.high is not None else None
        gaps = figure.within_a_pitch() / ring.factor if isinstance(figure, AsItRuns) else 0.0
    else:
        whole = replace(ring, factor=1.0, stepwise=False)
        worst, limit, gaps = whole.base() + sum(p.up for p in whole.pushes()), None, 0.0
    low, high, one, likely = _drawn(found, ring)
    return replace(
        empty,
        count=ring.pattern.count,
        radius=ring.pattern.radius,
        worst=worst,
        limit=limit,
        low=low,
        high=high,
        one=one,
        likely=likely,
        gaps=gaps,
    )


def _as_ring(figure: object) -> Tooth | None:
    """The figure of the ring's places; of a position that of its holes round the circle."""
    from setupcheck.ledger.figures import Tooth
    from setupcheck.ledger.holes import HolePosition

    if isinstance(figure, Tooth):
        return figure
    if isinstance(figure, HolePosition):
        return Tooth(figure.offset, figure.pattern, flank=False, stepwise=False)
    return None


def _drawn(found: Review, ring: Tooth) -> tuple[tuple[float, ...], tuple[float, ...], tuple[float, ...], float]:
    """(lower, upper) ends that SHARE of the draws stay within, one draw of the likely range, that range; arcs [mm].

    The draws are those of the review, each cause from its own stream; of both flanks each draw counts with the one that
    ranges farther, as the figure has it.
    """
    import numpy as np

    from setupcheck.ledger import teeth
    from setupcheck.ledger.combine import Draws

    answer = found.book.get("route.draws", found.book.instances("job")[0])
    draws = answer.value if isinstance(answer, Known) and isinstance(answer.value, Draws) else Draws()
    some = max(200, min(draws.trials, MOST_DRAWN // ring.pattern.count))
    places = teeth.angles(ring.pattern)
    arcs = draws.arcs(ring.pattern)[:some]
    best, widest = None, None
    for side, account in sides_of(ring):
        own = teeth.waves(draws.account(account)[:some] * -1j, places) + arcs
        if side and (ring.pattern.outwards or any(s.goes_outward for s in ring.pattern.scatter)):
            own = own + side * math.tan(ring.pattern.pressure_angle or 0.0) * draws.radials(ring.pattern)[:some]
        top, bottom = own.max(axis=1), own.min(axis=1)
        own = own - ((top + bottom) / 2.0)[:, None]
        if best is None or widest is None:
            best, widest = own, top - bottom
        else:
            best = np.where((top - bottom > widest)[:, None], own, best)
            widest = np.maximum(widest, top - bottom)
    assert best is not None and widest is not None, "a ring has at least one flank"
    beyond = (1.0 - SHARE) / 2.0
    low, high = np.quantile(best, [beyond, 1.0 - beyond], axis=0)
    likely = float(np.quantile(widest, SHARE))
    chosen = int(np.argmin(np.abs(widest - likely)))
    return tuple(low.tolist()), tuple(high.tolist()), tuple(best[chosen].tolist()), float(widest[chosen])


def sides_of(ring: Tooth) -> list[tuple[int, Account]]:
    """The waves of the flanks that count: both of teeth with flanks, else the middle of the gap."""
    sides = (1, -1) if ring.flank and ring.pattern.pressure_angle else (0,)
    return [(side, ring.wave(side)) for side in sides]


def measured(read: ReadBack | None, name: str) -> list[Shown]:
    """The means of the test, if it is of this ring: each direction about the middle of its own highest and lowest.

    Uncertain by twice the scatter of a reading over the root of their number: the readings alone, without the instrument.
    Source: k = 2, JCGM 100:2008.
    """
    if read is None or read.of.name != name:
        return []
    of, found = read.of, []
    for direction in sorted({m.direction for m in read.reduced.means}, reverse=True):
        mine = [m for m in read.reduced.means if m.direction == direction]
        values = [m.value for m in mine]
        middle = (max(values) + min(values)) / 2.0
        for m in mine:
            pitches = of.turn * (m.theta - of.start) * of.count / math.tau
            place = (
                (pitches + (0.0 if of.holes else 0.5) + 1e-9) % of.count - 1e-9 + 0.5
            )  # a ring's edge lies before its first
            doubt = 2.0 * read.reduced.scatter / math.sqrt(m.readings)
            found.append(
                Shown(
                    place, of.radius * (m.value - middle), of.radius * doubt if math.isfinite(doubt) else 0.0, direction
                )
            )
    return sorted(found, key=lambda p: (-p.direction, p.place))


def drawn(found: Review, scope: Scope, name: str, read: ReadBack | None) -> str:
    """The SVG."""
    plan, points = planned(found, scope, name), measured(read, name)
    unit, digits = (INCH["um"], 2) if found.book.inches else ("um", 1)
    reach = _reach(plan, points) * FACTOR[unit]
    up = Scale(-reach, reach, BOTTOM, TOP)
    over = Scale(0.5, plan.count + 0.5, LEFT, RIGHT)

    def put(place: float, arc: float) -> Point:
        return round(over.put(place), 1), round(up.put(min(max(arc * FACTOR[unit], -reach), reach)), 2)

    def size(value: float) -> str:
        return show(value, unit, digits)

    parts = [words((EDGE, 6.5), shortened(plan.title, SHEET - 2.0 * EDGE, HEAD), size=HEAD, bold=True)]
    parts += told((EDGE, 11.5), _says(plan, points), SHEET - 2.0 * EDGE, most=3)
    parts += _field(plan, over, up, unit)
    parts += _band(plan, put)
    parts += _measured(points, put)
    last = _key(parts, plan, points, size)
    worst = f"worst case {size(plan.worst)}" if plan.worst is not None else "worst case open"
    says = f"{plan.title}: planned{' and measured' if points else ''}, {worst}"
    return picture(SHEET, last + 2.5, title=clean(says), parts=parts) + "\n"


def _reach(plan: Planned, points: list[Shown]) -> float:
    """Half of what the scale holds, as an arc [mm]."""
    seen = [(plan.worst or 0.0) / 2.0, (plan.limit or 0.0) / 2.0, *map(abs, plan.low), *map(abs, plan.high)]
    seen += [abs(p.value) + p.uncertain for p in points]
    return 1.08 * max(*seen, 1e-4)


def _says(plan: Planned, points: list[Shown]) -> str:
    """What it shows, its zero and its sign; or what is missing."""
    if plan.missing:
        rest = " \u2026" if len(plan.missing) > 3 else ""
        open_ = f"open: fill {', '.join(plan.missing[:3])}{rest}. "
    else:
        open_ = ""
    numbers = " Tooth n stands between gap n and n + 1." if plan.kind == "gap" else ""
    what = "PLANNED" if not points else "PLANNED and MEASURED"
    return (
        f"{open_}{what}. Zero: the middle between the highest and the lowest{_each(points)}. Up: the place stands further "
        f"counter-clockwise than it should, seen from +z.{numbers}"
    )


def _each(points: list[Shown]) -> str:
    return ", of each direction by itself" if len({p.direction for p in points}) > 1 else ""


def _field(plan: Planned, over: Scale, up: Scale, unit: str) -> list[str]:
    """Axes: number of the place, arc, and the same as an angle."""
    parts = across(over, BOTTOM, 12 if plan.count >= 12 else plan.count)
    parts += upright(up, LEFT, 8)
    parts.append(words((EDGE, TOP - 2.5), f"{unit} on the circle", size=SIZE))
    if plan.radius > 0.0:
        angle = FACTOR["arcsec"] / (plan.radius * FACTOR[unit])
        parts += upright(Scale(up.low * angle, up.high * angle, BOTTOM, TOP), RIGHT, 8, right=True)
        parts.append(words((SHEET - EDGE, TOP - 2.5), "arcsec", size=SIZE, anchor="end"))
    middle = (LEFT + RIGHT) / 2.0
    told_as = "number of the line" if plan.kind == "line" else f"number of the {plan.kind}, as cut"
    parts.append(words((middle, BOTTOM + 9.0), told_as, size=SIZE, anchor="middle"))
    return parts


def _band(plan: Planned, put: Callable[[float, float], Point]) -> list[str]:
    """The worst case as a toned band, its limit, the draws within."""
    first, last = 0.5, plan.count + 0.5
    parts = []
    if plan.worst is not None:
        half = plan.worst / 2.0
        parts.append(area([put(first, half), put(last, half), put(last, -half), put(first, -half)]))
        parts += [line(put(first, way * half), put(last, way * half)) for way in (1.0, -1.0)]
    parts.append(line(put(first, 0.0), put(last, 0.0), dashes="0.5 1"))
    if plan.limit is not None:
        half = plan.limit / 2.0
        parts += [line(put(first, way * half), put(last, way * half), width=LIMIT_WIDTH) for way in (1.0, -1.0)]
    for values, ends in ((plan.low, (min,)), (plan.high, (max,))):
        if values:
            rows = thinned([(i + 1.0, v) for i, v in enumerate(values)], ends, MOST_POINTS // 3)
            parts.append(polyline([put(*row) for row in rows], width=THICK, dashes=DASHES))
    if plan.one:
        rows = thinned([(i + 1.0, v) for i, v in enumerate(plan.one)], (min, max), MOST_POINTS)
        parts.append(polyline([put(*row) for row in rows], width=DRAW))
    return parts


def thinned(
    rows: list[tuple[float, float]], ends: tuple[Callable[..., tuple[float, float]], ...], most: int
) -> list[tuple[float, float]]:
    """At most so many of the points: of each stretch its lowest, its highest, or both; all of them where they are few."""
    if len(rows) <= most:
        return rows
    stretches, kept = most // len(ends), []
    for i in range(stretches):
        mine = rows[i * len(rows) // stretches : (i + 1) * len(rows) // stretches]
        kept += sorted({end(mine, key=lambda row: row[1]) for end in ends})
    return kept


def _measured(points: list[Shown], put: Callable[[float, float], Point]) -> list[str]:
    """Dots with their uncertainty, where it reaches out of them; upright crosses for the other direction."""
    parts = []
    ways = sorted({p.direction for p in points}, reverse=True)
    for number_, direction in enumerate(ways):
        mine = {(p.place, p.value): p.uncertain for p in points if p.direction == direction}
        rows = thinned(list(mine), (min, max), MOST_MEASURED // len(ways))
        bars, marks = [], []
        for place, value in rows:
            (x, low), (_, high) = put(place, value - mine[place, value]), put(place, value + mine[place, value])
            if low - high > MARK:
                bars.append(f"M{number(x)} {number(round(low, 1))}V{number(round(high, 1))}")
            marks.append(_mark(x, round(put(place, value)[1], 1), cross=number_ > 0))
        if bars:
            parts.append(path("".join(bars)))
        parts.append(path("".join(marks), width=0.3 if number_ else 1.2, round_ends=True))
    return parts


def _mark(x: float, y: float, *, cross: bool) -> str:
    if cross:
        return f"M{number(x - 0.7)} {number(y)}h1.4m-.7-.7v1.4"
    return f"M{number(x)} {number(y)}h0"


def _key(parts: list[str], plan: Planned, points: list[Shown], size: Callable[[float], str]) -> float:
    """Under the field: what everything is, with its numbers; the last base line."""
    left: list[tuple[str, str]] = []
    if plan.worst is not None:
        left.append(("band", f"worst case {size(plan.worst)} in all"))
        left.append(("dashes", f"{SHARE * 100:.0f} of 100 draws, place by place"))
        left.append(("thin", f"one draw, {size(plan.likely)} in all"))
    right: list[tuple[str, str]] = []
    if plan.limit is not None:
        right.append(("limit", f"limit {size(plan.limit)} in all"))
    elif plan.worst is not None:
        right.append(("", "no limit of it is asked for"))
    for i, direction in enumerate(sorted({p.direction for p in points}, reverse=True)):
        values = [p.value for p in points if p.direction == direction]
        way = {1: " forward", -1: " reverse"}.get(direction, "")
        right.append(("cross" if i else "dot", f"measured{way}, {size(max(values) - min(values))} in all"))
    if any(p.uncertain > 0.0 for p in points):
        doubt = max(p.uncertain for p in points)
        seen = 2.0 * doubt / (2.0 * _reach(plan, points)) * (BOTTOM - TOP) > MARK
        more = "" if seen else ", in the marks"
        right.append(("bar" if seen else "", f"\u00b1{size(doubt)} scatter, k = 2{more}"))
    y = BOTTOM + 14.5
    for x, rows in ((EDGE, left), (94.0, right)):
        for i, (kind, text) in enumerate(rows):
            at = y + i * LINE
            parts += _sample(kind, x, at - 1.0)
            parts.append(words((x + 13.0, at), shortened(text, 72.0), size=SIZE))
    y += max(len(left), len(right)) * LINE
    for text in _beneath(plan, points, size):
        parts.append(words((EDGE, y), shortened(text, SHEET - 2.0 * EDGE), size=SIZE))
        y += LINE
    return y - LINE


def _beneath(plan: Planned, points: list[Shown], size: Callable[[float], str]) -> list[str]:
    rows = []
    if plan.gaps > 0.0:
        rows.append(f"Of the worst case {size(plan.gaps)} come within a pitch, where no place is read.")
    if points:
        rows.append("Measured points carry the readings' scatter alone; what the instrument is off comes on top.")
    return rows


def _sample(kind: str, x: float, y: float) -> list[str]:
    """A piece of the line or a mark, for the key."""
    ends, middle = ((x, y), (x + 11.0, y)), x + 5.5
    match kind:
        case "band":
            box = [(x, y - 1.2), (x + 11.0, y - 1.2), (x + 11.0, y + 1.2), (x, y + 1.2)]
            return [area(box), line(box[0], box[1]), line(box[3], box[2])]
        case "dashes":
            return [polyline(ends, width=THICK, dashes=DASHES)]
        case "limit":
            return [line(*ends, width=LIMIT_WIDTH)]
        case "dot" | "cross":
            return [
                path(_mark(middle, y, cross=kind == "cross"), width=0.3 if kind == "cross" else 1.2, round_ends=True)
            ]
        case "bar":
            return [path(f"M{number(middle)} {number(y - 1.3)}V{number(y + 1.3)}")]
        case "":
            return []
        case _:
            return [polyline(ends, width=DRAW)]
