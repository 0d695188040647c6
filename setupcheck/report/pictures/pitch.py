"""`pitch-<n>`: cumulative pitch deviation from place to place, as planned, and as read where a division test is at hand.

Zero lies in the middle between the highest and the lowest place: so every ring of a range W stays within +-W/2, whatever its
shape, and the worst case of the review is a band. Positive: further counter-clockwise than it should, seen from +z. mm, rad.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import replace
from functools import partial
from typing import TYPE_CHECKING

from setupcheck.notation import FACTOR, show
from setupcheck.quantities.book import INCH, Scope
from setupcheck.quantities.scopes import stack_of
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
from setupcheck.report.pictures.rings import SHARE, Figure, Planned, Shown, count_of, figure_of, measured, planned
from setupcheck.report.svg import THICK, Point, line, number, picture, polyline, words
from setupcheck.report.wording import clean

if TYPE_CHECKING:
    from setupcheck.flow import ReadBack, Review

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
MOST_MEASURED, MARK = 160, 1.4
"""Measured points drawn, of more the highest and lowest of each stretch; the size of their mark [mm]. Our choice."""
LIMIT_WIDTH, DRAW = 0.7, 0.18
"""Line widths of the limit and of the one draw [mm]. Our choice."""


def offered(found: Review, read: ReadBack | None = None) -> Iterator[Picture]:
    """One picture for each ring of teeth or holes whose division is asked about, named after the requirement it shows.

    None of a ring that is neither known as planned nor read: it would be axes with a scale that means nothing.
    """
    rings: dict[str, list[Scope]] = {}
    for scope in found.book.instances("stack"):
        stack = stack_of(scope)
        if stack.require.what in ASKED and stack.of:
            rings.setdefault(_ring_of(found, stack.of), []).append(scope)
    for name, scopes in rings.items():
        known = [s for s in scopes if isinstance(figure_of(found, s), Figure)]
        if count_of(found, name) > 1 and (known or measured(read, name)):
            best = min(known or scopes, key=lambda s: ASKED.index(stack_of(s).require.what))
            n = stack_of(best).index + 1
            yield Picture(f"pitch-{n}", f"Cumulative pitch of {clean(name)}", partial(drawn, found, best, name, read))


def _ring_of(found: Review, of: str) -> str:
    return str(replace(found.loaded.ref(of), op=None))


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
