"""`hold-30`: how a part is held, spindle left and tool right, datums lettered, what is cut drawn thick. Paper in mm."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from functools import partial

from setupcheck.flow import Review
from setupcheck.jobfile.models import Deviation
from setupcheck.jobfile.setups import Centre, Clock, Setup, Square
from setupcheck.quantities.route import machine_of
from setupcheck.report.pictures import WIDEST, Picture
from setupcheck.report.pictures.devices import TRIANGLE, triangle
from setupcheck.report.pictures.fixing import Datum, Scene, before, behind, ends_of, reach_of, widest_of
from setupcheck.report.pictures.labels import ROW, SIZE, Label, Placed, drawn, placed, rows, spread
from setupcheck.report.pictures.marks import mark_of, plain, short, wrapped
from setupcheck.report.pictures.part import anchor, named, pattern_lines, z_arrow
from setupcheck.report.pictures.pieces import as_of, held_part, holding, ref_held, refs_cut, size_left, together, way
from setupcheck.report.pictures.shape import Piece, Point, Solid, solid
from setupcheck.report.pictures.sketch import View, fitted, metal, pitch_line, runs, sheet, stroke, told
from setupcheck.report.svg import line, words
from setupcheck.report.wording import as_stated

TALLEST = 120.0
"""Of a holding's drawing [mm of paper]. Our choice: two of them go on a page."""

LEFT, RIGHT = 46.0, 38.0
"""Room for the spindle, and for the tool's side [mm of paper]. Our choice."""

TOP, KEY = 10.0, 4.6
"""Room of the heading and of a line of the key [mm of paper]. Our choice."""

CUT = 1.1
"""Width of the line of a surface that is cut here [mm of paper]: seen apart from every other. Our choice."""

RULES = {
    "centre": "the axis",
    "and_centre": "the lean, second plane",
    "square": "the lean",
    "stop": "the length",
    "clock": "the angle",
}
"""What each datum of a hold rules, in words."""


def offered(found: Review) -> Iterator[Picture]:
    """The holding of every setup; joinings stand in `joins`."""
    from setupcheck.report.pictures import joins

    for setup in found.loaded.job.setups:
        if setup.join is not None:
            yield Picture(f"hold-{setup.op}", joins.title(found, setup), partial(joins.draw, found, setup))
        else:
            yield Picture(f"hold-{setup.op}", _title(found, setup), partial(draw, found, setup))


def _title(found: Review, setup: Setup) -> str:
    machine = f" on {short(setup.machine, 3.8, 50.0)}" if setup.machine else ""
    kept = f", as in op {setup.keeps}, never opened" if setup.keeps is not None else ""
    return f"op {setup.op}: how {short(held_part(found, setup), 3.8, 40.0)} is held{machine}{kept}"


def draw(found: Review, setup: Setup) -> str:
    """The drawing of one holding as SVG."""
    part = held_part(found, setup)
    held_on = _held_on(found, setup)
    shown = [
        tuple(way(found, of=name, to=part).of(p) for p in as_of(found, name, setup.op, held_on))
        for name in together(found, part, setup.op)
    ]
    shown = [pieces for pieces in shown if pieces]
    solids = tuple(solid(pieces) for pieces in shown)
    if not any(body.outer for body in solids):
        return told(
            WIDEST,
            _title(found, setup),
            ["not drawn: no outside diameter stated of what is held", *_key(found, setup, ())],
        )
    held = holding(found, setup)
    datums = tuple(_datums(found, held, shown))
    key = _key(found, setup, datums)
    below = KEY * len(key) + 5.0
    scene, top, bottom = _laid(found, setup, shown, solids, datums, below)
    view = scene.view
    reach = reach_of(scene) * view.across
    parts = [*behind(scene)]
    for i, body in enumerate(solids):
        parts += metal(view, body, lower="cut", slope=1 if i % 2 == 0 else -1)
    parts += _patterns(scene)
    parts += before(scene)
    parts += _cut_lines(found, setup, scene)
    parts += _surroundings(found, setup, view)
    parts += [triangle(*_stand(scene, d)) for d in datums if d.piece is not None and _path(scene, d) is not None]
    parts += drawn(top, start=view.axis - reach - 9.0, way=-1)
    low = view.axis + reach + 9.0
    parts += drawn(bottom, start=low, way=1)
    y = low + rows(bottom) * ROW + 3.0
    parts += [words((5.0, y + KEY * i + 1.5), text, size=SIZE) for i, text in enumerate(key)]
    return sheet(WIDEST, y + below - 3.0, title=_title(found, setup), parts=parts)


def _held_on(found: Review, setup: Setup) -> set[tuple[str, str]]:
    """Surfaces that the holding names."""
    held = holding(found, setup)
    entries = [getattr(held.hold, step) for step in RULES] if held.hold is not None else []
    return {(ref.part, ref.surface) for e in entries if e is not None for ref in [ref_held(found, held, e.on)]}


def _laid(
    found: Review,
    setup: Setup,
    shown: Sequence[tuple[Piece, ...]],
    solids: tuple[Solid, ...],
    datums: tuple[Datum, ...],
    below: float,
) -> tuple[Scene, list[Placed], list[Placed]]:
    """The scene at the largest scale at which all names have room; names are left out where none is."""
    count = 2
    for _ in range(8):
        tall = max(TALLEST - TOP - below - count * ROW - 24.0, 16.0)
        scene = _scene(found, setup, shown, solids, datums, tall)
        over = TOP + 2.0
        for _ in range(3):
            top = placed(_cut_labels(found, setup, scene), width=WIDEST) or []
            axis = over + rows(top) * ROW + 8.0 + reach_of(scene) * scene.view.across
            scene = _at_axis(scene, axis)
        bottom = placed(_datum_labels(scene), width=WIDEST) or []
        if rows(top) + rows(bottom) <= count:
            return scene, top, bottom
        count = rows(top) + rows(bottom)
    return scene, [], []


def _at_axis(scene: Scene, axis: float) -> Scene:
    v = scene.view
    return Scene(scene.pieces, scene.solids, View(v.along, v.across, v.left, axis, v.first, v.way), scene.datums)


def _scene(
    found: Review,
    setup: Setup,
    shown: Sequence[tuple[Piece, ...]],
    solids: tuple[Solid, ...],
    datums: tuple[Datum, ...],
    tall: float,
) -> Scene:
    low, high = ends_of(shown, solids)
    radius = widest_of(shown, solids)
    wide = WIDEST - LEFT - RIGHT
    along, across = fitted(low, high, radius, wide=wide, tall=tall)
    looks = holding(found, setup).looks_at_tool or 1
    left = LEFT + (wide - along * (high - low)) / 2.0
    view = View(along, across, left, 0.0, low if looks > 0 else high, looks)
    return Scene(tuple(shown), solids, view, datums)


def _datums(found: Review, held: Setup, shown: Sequence[tuple[Piece, ...]]) -> Iterator[Datum]:
    letters = iter("ABCDE")
    for step in RULES:
        entry = getattr(held.hold, step, None) if held.hold is not None else None
        if entry is None:
            continue
        ref = ref_held(found, held, entry.on)
        piece = next((p for pieces in shown for p in pieces if (p.part, p.name) == (ref.part, ref.surface)), None)
        yield Datum(next(letters), step, entry, entry.on, piece)


# -- what is cut, datums, words --------------------------------------------------------------------------------------


def _cut_pieces(found: Review, setup: Setup, scene: Scene) -> list[Piece]:
    refs = {(ref.part, ref.surface) for ref in refs_cut(found, setup)}
    return [p for pieces in scene.pieces for p in pieces if (p.part, p.name) in refs]


def _cut_lines(found: Review, setup: Setup, scene: Scene) -> list[str]:
    mark = mark_of(found, setup.op)
    parts = []
    for piece in _cut_pieces(found, setup, scene):
        body, pieces = scene.of(piece)
        for run in runs(piece, body, pieces):
            parts += [stroke(scene.view, run, sign=s, width=CUT, dashes="", colour=mark.colour) for s in (1, -1)]
        parts += pattern_lines(scene.view, piece, body, mark.colour)
    return parts


def _patterns(scene: Scene) -> list[str]:
    """Pitch circles of teeth and holes that are there already."""
    return [
        part
        for pieces, body in zip(scene.pieces, scene.solids, strict=True)
        for p in pieces
        if pitch_line(p, scene.view)
        for part in pattern_lines(scene.view, p, body, "black")
    ]


def _cut_labels(found: Review, setup: Setup, scene: Scene) -> list[Label]:
    mark = mark_of(found, setup.op)
    labels: list[Label] = []
    for body, pieces in zip(scene.solids, scene.pieces, strict=True):
        mine = [p for p in _cut_pieces(found, setup, scene) if p in pieces and anchor(p, scene.view, body, pieces)]
        labels += named(scene.view, body, pieces, [(p, _as_left(found, setup, p), mark) for p in mine[:14]])
    return labels


def _as_left(found: Review, setup: Setup, piece: Piece) -> str:
    """Name and size of a surface as this operation leaves it."""
    name = short(piece.name, SIZE, 26.0)
    states = found.floor.bodies[piece.part].states.get((piece.part, piece.name), [])
    rough = " rough" if any(s.op == setup.op and s.rough for s in states) else ""
    if piece.kind in ("teeth", "holes", "slot", "lines"):
        return f"{name}{rough}"
    return f"{name} {short(size_left(found, piece), SIZE, 30.0)}{rough}"


def _path(scene: Scene, datum: Datum) -> tuple[Point, ...] | None:
    """The leader of a datum in the lower half, from the surface outwards."""
    piece, view = datum.piece, scene.view
    if piece is None:
        return None
    body, pieces = scene.of(piece)
    path = anchor(piece, view, body, pieces, -1)
    if path is None or piece.kind in ("face", "centre"):
        return path
    at = getattr(datum.entry, "at", None)
    grip = getattr(datum.entry, "grip", None)
    if at is None and grip is not None:
        at = (grip.low + grip.high) / 2.0
    if at is None or piece.radius is None or not piece.low <= at <= piece.high:
        return path
    return (view.at(at, piece.radius, -1),)


def _stand(scene: Scene, datum: Datum) -> tuple[Point, Point]:
    """Where a datum triangle stands and which way it points."""
    path = _path(scene, datum)
    assert path is not None and datum.piece is not None
    if len(path) > 1:
        return path[0], ((1.0 if path[1][0] > path[0][0] else -1.0), 0.0)
    return path[0], (0.0, 1.0)


def _datum_labels(scene: Scene) -> list[Label]:
    found = [(d, path) for d in scene.datums if (path := _path(scene, d)) is not None]
    same: dict[str, list[Datum]] = {}
    for datum, _ in found:
        same.setdefault(f"{datum.piece}/{getattr(datum.entry, 'at', None)}", []).append(datum)
    first = [(d, path) for d, path in found if same[f"{d.piece}/{getattr(d.entry, 'at', None)}"][0] is d]
    xs = spread([path[-1][0] for _, path in first], apart=2.4, low=8.0, high=WIDEST - 8.0)
    labels = []
    for (datum, _), x in zip(first, xs, strict=True):
        letters = ", ".join(d.letter for d in same[f"{datum.piece}/{getattr(datum.entry, 'at', None)}"])
        base, towards = _stand(scene, datum)
        tip = (base[0] + towards[0] * TRIANGLE, base[1] + towards[1] * TRIANGLE)
        moved = (tip, (x, tip[1] + (0.0 if towards[0] else 2.0)))
        labels.append(Label(short(datum.name, SIZE, 34.0), moved, letters, "black", False))
    return labels


def _surroundings(found: Review, setup: Setup, view: View) -> list[str]:
    """Machine axis, words at both ends, which way the part's heights run."""
    y = view.axis
    parts = [
        line((18.0, y), (WIDEST - 23.0, y), width=0.25, dashes="6 1.2 0.8 1.2"),
        words((3.0, y + 1.0), "spindle", size=SIZE),
        words((WIDEST - 3.0, y + 1.0), "tool side", size=SIZE, anchor="end"),
        words((WIDEST - 3.0, y + 5.4), "machine axis", size=SIZE, anchor="end"),
    ]
    x = WIDEST - 16.0
    return [*parts, *z_arrow(x - view.way * 3.5, y + 9.5, view.way)]


def _key(found: Review, setup: Setup, datums: Sequence[Datum]) -> list[str]:
    """The datums in words, and what else must be known at the machine."""
    held = holding(found, setup)
    lines: list[str] = []
    for datum in datums:
        text = f"{datum.letter}  {short(datum.name, SIZE, 40.0)} rules {RULES[datum.step]}: {_how(found, datum)}"
        if datum.piece is None:
            text += "; not there yet, so not drawn"
        lines += wrapped(text, SIZE, WIDEST - 10.0, most=2)
    looks = "+z" if (held.looks_at_tool or 1) > 0 else "-z"
    more = [f"{looks} looks at the tool"]
    gone = [name for cut in setup.cut.values() for name in cut.removes]
    if gone:
        more.append(f"{short(', '.join(gone), SIZE, 50.0)} goes in this operation")
    _, machine = machine_of(found.loaded, setup)
    if machine is not None and machine.axis == "vertical":
        more.append("the machine axis stands upright: left here is down there")
    more.append("holding devices are symbols, not to size")
    return [*lines, *wrapped("; ".join(more), SIZE, WIDEST - 10.0, most=2)]


def _how(found: Review, datum: Datum) -> str:
    """Device and errors of a datum in words."""
    entry, inches = datum.entry, found.loaded.job.units == "in"
    words_: list[str] = []
    by = getattr(entry, "by", None)
    if by:
        words_.append(short(str(by), SIZE, 40.0))
    kinds = (("runout", "run-out"), ("face_runout", "face run-out"), ("error", ""))
    told_any = False
    for key, called in kinds:
        given = getattr(entry, key, None)
        if isinstance(given, Deviation):
            words_.append(f"{called} {_error(given, inches=inches)}".strip())
            told_any = True
    if not told_any and getattr(entry, "x", None) is None:
        words_.append("no error stated")
    if isinstance(entry, Square) and entry.across is not None:
        words_.append(f"on Ø{plain(found, entry.across)}")
    if isinstance(entry, Centre) and entry.clearance is not None:
        low, high = (as_stated(c, inches=inches) for c in entry.clearance)
        words_.append(f"clearance {low} to {high}" + (f", rests {entry.rests}" if entry.rests else ""))
    if isinstance(entry, Centre) and entry.at is not None:
        words_.append(f"at z {plain(found, entry.at)}")
    through = getattr(entry, "through", ())
    if through:
        words_.append("on " + ", ".join(short(t.by, SIZE, 24.0) for t in through))
    if isinstance(entry, Clock):
        words_.append(f"number {entry.number}")
    return ", ".join(words_)


def _error(given: Deviation, *, inches: bool) -> str:
    told_of = []
    if given.at_most is not None:
        told_of.append(f"up to {as_stated(given.at_most, inches=inches)}")
    if given.measured is not None:
        told_of.append(f"measured {as_stated(given.measured, inches=inches)}")
    if not told_of:
        told_of.append(f"as typical of {short(given.device or 'its device', SIZE, 30.0)}")
    return ", ".join(told_of)
