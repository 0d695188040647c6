"""`hold-70` of a joining: both parts in section where they meet, the faces of the stop, shim and spacer between. Paper in mm."""

from __future__ import annotations

import itertools
from collections.abc import Sequence
from dataclasses import replace

from setupcheck.flow import Review
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Join, Setup
from setupcheck.notation import show
from setupcheck.record import record
from setupcheck.report.pictures import WIDEST
from setupcheck.report.pictures.fixing import ends_of, widest_of
from setupcheck.report.pictures.labels import ROW, SIZE, Label, Placed, drawn, placed, rows, spread
from setupcheck.report.pictures.marks import Mark, plain, short, stated_size, wrapped
from setupcheck.report.pictures.part import anchor, named, pattern_lines, z_arrow
from setupcheck.report.pictures.pieces import as_of, together, way
from setupcheck.report.pictures.shape import Piece, Point, Solid, solid
from setupcheck.report.pictures.sketch import View, axis_line, fitted, metal, runs, sheet, stroke, told
from setupcheck.report.svg import lines, rectangle, words

TALLEST, TOP, KEY = 120.0, 10.0, 4.6
"""Of the drawing; room of the heading and of a line of the key [mm of paper]. Our choice."""

MARKS = (Mark("", "#1f5fa8", ""), Mark("", "#b5460f", "5 1.2"))
"""Outer part and inner part."""

MORE = 0.9
"""How much of the inner part is shown on either side of the outer one, in its lengths or radii. Our choice."""

LEAN = {"bore": "the long fit rules the lean", "shoulder": "the faces of the stop rule the lean"}
"""What keeps the outer part square, in words."""

GRIPS_FIRST = {
    "shoulder-end": "the shoulder end grips first: cool or clamp it so that no gap opens",
    "anywhere": "it may grip anywhere first: a gap can open at the shoulder",
}
"""Where a shrinking hub takes hold first, and what comes of it. Source: common practice."""

THINNEST = 0.9
"""A spacer thinner than this on paper is drawn this thick [mm]: it must be seen. Our choice."""


def title(found: Review, setup: Setup) -> str:
    join = _join(setup)
    outer, inner = found.loaded.ref(join.outer), found.loaded.ref(join.inner)
    return f"op {setup.op}: {short(outer.part, 3.8, 40.0)} on {short(inner.part, 3.8, 40.0)}, {join.by}"


def _join(setup: Setup) -> Join:
    assert setup.join is not None
    return setup.join


@record
class Side:
    """One of the two: pieces in the inner part's heights, its metal, where it was cut off."""

    pieces: tuple[Piece, ...]
    body: Solid
    cut_off: tuple[float, ...] = ()


def draw(found: Review, setup: Setup) -> str:
    """The drawing of one joining as SVG."""
    join = _join(setup)
    outer, inner = found.loaded.ref(join.outer), found.loaded.ref(join.inner)
    sides = _sides(found, setup, outer.part, inner.part)
    key = _key(found, setup)
    if not any(side.body.outer for side in sides):
        return told(WIDEST, title(found, setup), ["not drawn: no outside diameter stated of either part", *key])
    below = KEY * len(key) + 6.0
    view, top, bottom = _laid(found, setup, sides, below)
    reach = _reach(sides) * view.across
    parts: list[str] = []
    for _i, side in enumerate(sides):
        parts += metal(
            view, side.body, lower="cut", slope=1 if side.pieces and side.pieces[0].part == outer.part else -1
        )
        parts += [_broken(view, side.body, z) for z in side.cut_off]
    parts += _fitting(found, setup, sides, view)
    parts += [part for side in sides for p in side.pieces for part in pattern_lines(view, p, side.body, "black")]
    parts += _spacers(found, setup, sides, view)
    low, high = _ends(sides)
    parts.append(axis_line(view, low, high, beyond=8.0))
    parts += z_arrow(view.x(high) + 9.0, view.axis, 1)
    parts += drawn(top, start=view.axis - reach - 3.0, way=-1)
    parts += drawn(bottom, start=view.axis + reach + 3.0, way=1)
    y = view.axis + reach + 3.0 + rows(bottom) * ROW + 4.0
    parts += [words((5.0, y + KEY * i + 1.5), text, size=SIZE) for i, text in enumerate([*key, view.scale()])]
    return sheet(WIDEST, y + below, title=title(found, setup), parts=parts)


def _sides(found: Review, setup: Setup, outer: str, inner: str) -> list[Side]:
    """Outer part and its fellows, inner part and its fellows, cut off where it goes on beyond the other."""
    of_outer = [n for n in together(found, outer, _before(found, setup)) if n != inner]
    of_inner = [n for n in together(found, inner, _before(found, setup)) if n not in of_outer]
    sides: list[Side] = []
    window: Point | None = None
    for names in (of_outer, of_inner):
        for name in names:
            pieces = tuple(way(found, of=name, to=inner).of(p) for p in as_of(found, name, setup.op))
            body = solid(pieces)
            if window is None and body.outer:
                more = MORE * max(body.high - body.low, max(r for _, r in body.outer))
                window = (body.low - more, body.high + more)
            sides.append(_clipped(Side(pieces, body), window))
    return [side for side in sides if side.pieces]


def _before(found: Review, setup: Setup) -> int:
    ops = [one.op for one in found.loaded.job.setups]
    at = ops.index(setup.op)
    return ops[at - 1] if at else -1


def _clipped(side: Side, window: Point | None) -> Side:
    if window is None or not side.body.outer or (side.body.low >= window[0] and side.body.high <= window[1]):
        return side
    low, high = window
    kept = tuple(
        replace(p, low=max(p.low, low), high=min(p.high, high)) for p in side.pieces if p.low <= high and p.high >= low
    )
    body = solid(kept)
    if not body.outer:
        return side
    cut_off = [z for z, old in ((body.low, side.body.low), (body.high, side.body.high)) if abs(z - old) > 1e-9]
    return Side(kept, body, tuple(cut_off))


def _broken(view: View, body: Solid, z: float) -> str:
    """A zigzag over the end of a part that goes on."""
    radius = max(r for height, r in body.outer if height == z) * view.across
    x, top = view.x(z), view.axis - radius
    points = [(x + (0.9 if i % 2 else -0.9), top + 2.0 * radius * i / 12.0) for i in range(13)]
    return lines([((x, top), (x, top + 2.0 * radius))], width=0.8, colour="white") + lines(
        list(itertools.pairwise(points)), width=0.25
    )


def _ends(sides: Sequence[Side]) -> Point:
    return ends_of([side.pieces for side in sides], [side.body for side in sides])


def _reach(sides: Sequence[Side]) -> float:
    return widest_of([side.pieces for side in sides], [side.body for side in sides])


def _laid(found: Review, setup: Setup, sides: Sequence[Side], below: float) -> tuple[View, list[Placed], list[Placed]]:
    low, high = _ends(sides)
    count = 2
    for _ in range(8):
        tall = max(TALLEST - TOP - below - count * ROW - 10.0, 16.0)
        along, across = fitted(low, high, _reach(sides), wide=110.0, tall=tall)
        left = (WIDEST - along * (high - low)) / 2.0
        view = View(along, across, left, 0.0, low)
        for _ in range(2):
            top = placed(_labels(found, setup, sides, view, faces=False), width=WIDEST) or []
            view = replace(view, axis=TOP + 4.0 + rows(top) * ROW + _reach(sides) * across)
        bottom = placed(_labels(found, setup, sides, view, faces=True), width=WIDEST) or []
        if rows(top) + rows(bottom) <= count:
            return view, top, bottom
        count = rows(top) + rows(bottom)
    return view, [], []


def _meeting(found: Review, setup: Setup, *, faces: bool) -> list[Ref]:
    """The fit's two surfaces, or the faces of the stop: outer part first."""
    join = _join(setup)
    if not faces:
        return [found.loaded.ref(join.outer), found.loaded.ref(join.inner)]
    if join.stop is None or join.stop.against is None:
        return []
    outer, inner = found.loaded.ref(join.outer).part, found.loaded.ref(join.inner).part
    own = join.stop.on in found.loaded.job.parts[outer].surfaces
    other = join.stop.against in found.loaded.job.parts[inner].surfaces
    return [
        found.loaded.ref(join.stop.on, outer if own else None),
        found.loaded.ref(join.stop.against, inner if other else None),
    ]


def _shown(sides: Sequence[Side], ref: Ref) -> tuple[Side, Piece] | None:
    for side in sides:
        for piece in side.pieces:
            if (piece.part, piece.name) == (ref.part, ref.surface):
                return side, piece
    return None


def _labels(found: Review, setup: Setup, sides: Sequence[Side], view: View, *, faces: bool) -> list[Label]:
    labels: list[Label] = []
    sign = -1 if faces else 1
    for ref, mark in zip(_meeting(found, setup, faces=faces), MARKS, strict=False):
        met = _shown(sides, ref)
        if met is None or anchor(met[1], view, met[0].body, met[0].pieces, sign) is None:
            continue
        side, piece = met
        size = "" if faces else f" Ø{stated_size(found, ref.part, ref.surface)}"
        text = f"{short(f'{ref.part}.{ref.surface}', SIZE, 40.0)}{short(size, SIZE, 40.0) and ' '}{short(size, SIZE, 40.0)}"
        labels += named(view, side.body, side.pieces, [(piece, text, mark)], sign=sign)
    gap = _gap(found, setup, sides)
    if faces and gap is not None and _join(setup).stop is not None:
        stop = _join(setup).stop
        names = ", ".join(short(s.name, SIZE, 30.0) for s in stop.spacers) if stop is not None else ""
        if names:
            z = (gap[0] + gap[1]) / 2.0
            at = view.at(z, gap[2] + 0.8 * (gap[3] - gap[2]), -1)
            labels.append(Label(names, (at,), "", "black"))
    return _apart(labels)


def _apart(labels: list[Label]) -> list[Label]:
    """Leaders moved apart where they would run on one line."""
    xs = spread([label.x for label in labels], apart=2.6, low=8.0, high=WIDEST - 8.0)
    found = []
    for label, x in zip(labels, xs, strict=True):
        path = label.path if abs(label.x - x) < 1e-6 else (*label.path[:1], (x, label.path[-1][1]))
        found.append(replace(label, path=path))
    return found


def _gap(found: Review, setup: Setup, sides: Sequence[Side]) -> tuple[float, float, float, float] | None:
    """Room between the faces of the stop: heights and radii it lies between."""
    met = [_shown(sides, ref) for ref in _meeting(found, setup, faces=True)]
    if len(met) < 2 or met[0] is None or met[1] is None:
        return None
    spans = []
    for side, piece in (met[0], met[1]):
        found_runs = runs(piece, side.body, side.pieces)
        if not found_runs:
            return None
        spans.append((piece.low, found_runs[0][0][1], found_runs[0][-1][1]))
    inner, outer = max(s[1] for s in spans), min(s[2] for s in spans)
    low, high = sorted((spans[0][0], spans[1][0]))
    return (low, high, inner, outer) if outer > inner else None


def _spacers(found: Review, setup: Setup, sides: Sequence[Side], view: View) -> list[str]:
    stop = _join(setup).stop
    gap = _gap(found, setup, sides)
    if stop is None or not stop.spacers or gap is None:
        return []
    x1, x2 = view.x(gap[0]), view.x(gap[1])
    if x2 - x1 < THINNEST:
        x1, x2 = (x1 + x2 - THINNEST) / 2.0, (x1 + x2 + THINNEST) / 2.0
    high = (gap[3] - gap[2]) * view.across
    return [
        rectangle((x1, view.y(gap[3]) if sign > 0 else view.y(gap[2], -1)), x2 - x1, high, fill="#222222")
        for sign in (1, -1)
    ]


def _fitting(found: Review, setup: Setup, sides: Sequence[Side], view: View) -> list[str]:
    """Both surfaces of the fit and both faces of the stop, thick."""
    parts = []
    for faces in (False, True):
        for ref, mark in zip(_meeting(found, setup, faces=faces), MARKS, strict=False):
            met = _shown(sides, ref)
            for run in runs(met[1], met[0].body, met[0].pieces) if met is not None else []:
                parts += [stroke(view, run, sign=s, width=0.9, dashes=mark.dashes, colour=mark.colour) for s in (1, -1)]
    return parts


def _key(found: Review, setup: Setup) -> list[str]:
    """Fit, heat, stop and bite in words."""
    join = _join(setup)
    outer, inner = found.loaded.ref(join.outer), found.loaded.ref(join.inner)
    sizes = [stated_size(found, ref.part, ref.surface) for ref in (outer, inner)]
    lines_ = [f"{join.by}: {_called(outer)} Ø{sizes[0]} on {_called(inner)} Ø{sizes[1]}"]
    if join.heat is not None:
        lines_.append(_heat(join))
    if join.square is not None:
        lines_.append(LEAN[join.square])
    stop = join.stop
    if stop is not None:
        against = f" against {short(stop.against, SIZE, 40.0)}" if stop.against else ""
        spacers = ", ".join(f"{short(s.name, SIZE, 24.0)} {plain(found, s.length.value)}" for s in stop.spacers)
        between = f", between them {spacers}" if spacers else ", nothing between"
        lines_.append(f"stop: {short(stop.on, SIZE, 40.0)}{against}{between}")
    else:
        lines_.append("stop: not stated")
    if join.trued is not None:
        on, about = (short(name, SIZE, 40.0) for name in (join.trued.on, join.trued.about))
        lines_.append(f"moved until {on} runs true about {about}, then made fast")
    if join.heat is not None and join.heat.near is not None:
        lines_.append(f"stays in place beside the hub: {short(join.heat.near.what, SIZE, 40.0)}")
    if join.grips_first is not None:
        lines_.append(GRIPS_FIRST[join.grips_first])
    return [text for one in lines_ for text in wrapped(one, SIZE, WIDEST - 10.0, most=2)]


def _called(ref: Ref) -> str:
    return short(f"{ref.part}.{ref.surface}", SIZE, 50.0)


def _heat(join: Join) -> str:
    heat = join.heat
    assert heat is not None
    told_of = []
    if heat.hub is not None:
        told_of.append(f"hub {show(heat.hub, 'degC', 0)}" + (f" by {heat.by}" if heat.by else ""))
    if heat.shaft is not None:
        told_of.append(f"shaft {show(heat.shaft, 'degC', 0)}" + (f" by {heat.cold_by}" if heat.cold_by else ""))
    return ", ".join(told_of) if told_of else "heat stated without a temperature"
