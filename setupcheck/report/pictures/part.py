"""`part-wheel`: a part in half section, every surface named, marked by the operation that finished it last."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from functools import partial

from setupcheck.flow import Review
from setupcheck.record import record
from setupcheck.report.pictures import WIDEST, Picture
from setupcheck.report.pictures.end_view import AWAY, end_view, has_places
from setupcheck.report.pictures.labels import ROW, SIZE, Label, Placed, drawn, placed, rows, spread
from setupcheck.report.pictures.marks import (
    AXIS_DASHES,
    GUESSED_DASHES,
    Mark,
    finished_by,
    plain,
    short,
    spelled,
    wrapped,
)
from setupcheck.report.pictures.pieces import extent, finished
from setupcheck.report.pictures.shape import Piece, Point, Solid, radius_at, solid
from setupcheck.report.pictures.sketch import (
    SURFACE,
    View,
    axis_line,
    fitted,
    metal,
    pitch_line,
    runs,
    sheet,
    stroke,
    told,
    unstated,
)
from setupcheck.report.svg import THIN, line, polygon, room, words
from setupcheck.report.wording import clean

TALLEST = 150.0
"""Of a part's drawing [mm of paper]. Our choice: with the heading and a list, half an A4 page."""

TOP, LEGEND, RULER = 10.0, 4.8, 13.0
"""Room of the heading, of a line of the legend and of the positions under the part [mm of paper]. Our choice."""

NAMED = 22
"""So many surfaces are named at the drawing, more stand in the legend alone. Our choice: what rows of names have room for."""

TRIES = (
    (140.0, 58.0),
    (140.0, 44.0),
    (120.0, 58.0),
    (120.0, 44.0),
    (100.0, 44.0),
    (80.0, 58.0),
    (80.0, 44.0),
    (60.0, 40.0),
)
"""Widths of the part itself and of the widest name that are tried, until all names go between the edges [mm of paper]."""

BESIDE = 62.0
"""Room of the legend where it stands left of a short part [mm of paper]. Our choice."""

FAR = 2.4
"""How far a leader stands off the face that it names [mm of paper]. Our choice."""


def offered(found: Review) -> Iterator[Picture]:
    """The drawing of every part."""
    for part in found.loaded.job.parts:
        yield Picture(f"part-{clean(part)}", _title(found, part), partial(draw, found, part))


def _title(found: Review, part: str) -> str:
    material = found.loaded.job.parts[part].material
    named = short(part, 3.8, 60.0) + (f", {short(material, 3.8, 50.0)}" if material else "")
    return f"{named}: half section, who finishes what"


@record
class _Sheet:
    """How the sheet is divided: legend under the part or left of it, its lines, the notes."""

    beside: bool
    legend: tuple[tuple[Mark | None, str], ...]
    notes: tuple[str, ...]

    @property
    def below(self) -> float:
        """What goes under the part."""
        return RULER + LEGEND * (len(self.notes) + (0 if self.beside else len(self.legend))) + 4.0


def draw(found: Review, part: str) -> str:
    """The drawing of one part as SVG."""
    pieces = finished(found, part)
    body = solid(pieces)
    if not any(p.radius for p in pieces):
        names = ", ".join(clean(p.name) for p in pieces) or "all of them removed"
        says = f"not drawn: no diameter stated of {short(names, 3.2, 110.0)}"
        return told(WIDEST, _title(found, part), [says])
    found_room = [
        (laid, sheet_)
        for beside in (True, False)
        if not (beside and _slim(pieces, body))
        and (laid := _laid(found, pieces, body, sheet_ := _sheet(found, part, pieces, body, beside=beside))) is not None
    ]
    if not found_room:  # no names then
        sheet_ = _sheet(found, part, pieces, body, beside=False)
        found_room = [((_view(pieces, body, sheet_, wide=60.0, above=TOP), []), sheet_)]
    (view, done), sheet_ = max(found_room, key=lambda one: one[0][0].across)
    over = TOP + rows(done) * ROW + 3.0
    view = replace(view, axis=over + view.across * _widest(pieces, body))
    done = [replace(p, label=replace(p.label, path=tuple((x, y + view.axis) for x, y in p.label.path))) for p in done]
    bottom = view.axis + view.across * _widest(pieces, body)
    parts = [
        *metal(view, body),
        *unstated(view, body),
        *_lines(found, part, view, body, pieces),
        *_axis(view, pieces, body),
        *drawn(done, start=over - 3.0, way=-1),
        *_from_the_end(found, view, pieces, body),
        *_positions(found, view, pieces, body, bottom),
    ]
    y = bottom + RULER + 3.0
    if sheet_.beside:
        parts += _drawn_legend(sheet_.legend, over + 2.0)
        y = max(y, over + 4.0 + LEGEND * len(sheet_.legend))
    else:
        parts += _drawn_legend(sheet_.legend, y)
        y += LEGEND * len(sheet_.legend)
    parts += [
        words((5.0, y + 3.0 + LEGEND * i), text, size=SIZE) for i, text in enumerate([view.scale(), *sheet_.notes])
    ]
    return sheet(WIDEST, y + 6.0 + LEGEND * len(sheet_.notes), title=_title(found, part), parts=parts)


def _sheet(found: Review, part: str, pieces: Sequence[Piece], body: Solid, *, beside: bool) -> _Sheet:
    wide = BESIDE - 21.0 if beside else WIDEST - 30.0
    notes = wrapped("; ".join(_notes(pieces, body)), SIZE, WIDEST - 10.0, most=2)
    return _Sheet(beside, tuple(_legend(found, part, wide)), tuple(n for n in notes if n))


def _shown(pieces: Sequence[Piece], body: Solid) -> list[Piece]:
    """All but stock of which nothing is left."""
    return [p for p in pieces if not p.stock or not body.outer or p.kind == "centre" or _stands(p, body)]


def _widest(pieces: Sequence[Piece], body: Solid) -> float:
    """Largest radius drawn, were it only that of a surface the file puts outside the part."""
    return max((r for _, r in body.outer), default=0.0) + widest_beyond(_shown(pieces, body), body)


def widest_beyond(pieces: Sequence[Piece], body: Solid) -> float:
    """How far surfaces reach out of the part's outside [mm]."""
    most = max((r for _, r in body.outer), default=0.0)
    found = [
        p.radius + (p.size or 0.0) / 2.0 + (0.0 if body.outer else 0.2 * (p.hollow or 0.0)) for p in pieces if p.radius
    ]
    return max(max(found, default=0.0) - most, 0.0)


def _ends(pieces: Sequence[Piece], body: Solid) -> Point:
    shown = extent(_shown(pieces, body) or pieces)
    return (min(body.low, shown[0]), max(body.high, shown[1])) if body.outer else shown


def _ringed(pieces: Sequence[Piece], body: Solid) -> bool:
    """True where an end view stands beside the section: there is something to see, and both go side by side."""
    low, high = _ends(pieces, body)
    return has_places(pieces) and body.outer != () and 0.05 < (high - low) / (2.0 * _widest(pieces, body)) < 2.0


def _slim(pieces: Sequence[Piece], body: Solid) -> bool:
    """A part too long for a legend beside it."""
    low, high = _ends(pieces, body)
    return high - low > 2.0 * _widest(pieces, body) * 1.4


def _view(pieces: Sequence[Piece], body: Solid, sheet_: _Sheet, *, wide: float, above: float) -> View:
    low, high = _ends(pieces, body)
    tall = max(TALLEST - above - sheet_.below - 6.0, 20.0)
    left = BESIDE if sheet_.beside else 0.0
    radius, more = _widest(pieces, body), 0.0
    if _ringed(pieces, body):  # both views side by side
        tall = min(tall, 2.0 * radius * (WIDEST - left - AWAY - 20.0) / (high - low + 2.0 * radius))
    along, across = fitted(low, high, radius, wide=wide, tall=tall)
    if _ringed(pieces, body):
        more = AWAY + 2.0 * radius * across
    return View(along, across, left + max((WIDEST - left - along * (high - low) - more) / 2.0, 8.0), 0.0, low)


def _laid(found: Review, pieces: Sequence[Piece], body: Solid, sheet_: _Sheet) -> tuple[View, list[Placed]] | None:
    """The largest view whose names have room, with their places; None where they have not."""
    for wide, label in TRIES:
        if sheet_.beside and wide > WIDEST - BESIDE - 30.0:
            continue
        laid = _named_view(found, pieces, body, sheet_, wide=wide, label=label)
        if laid is not None:
            return laid
    return None


def _named_view(
    found: Review, pieces: Sequence[Piece], body: Solid, sheet_: _Sheet, *, wide: float, label: float
) -> tuple[View, list[Placed]] | None:
    count = 1
    for _ in range(6):  # more rows leave less height, a smaller drawing may need more rows
        view = _view(pieces, body, sheet_, wide=wide, above=TOP + count * ROW + 3.0)
        done = placed(_labels(found, view, pieces, body, label), width=WIDEST)
        if done is None:
            return None
        if rows(done) <= count:
            return view, done
        count = rows(done)
    return None


def _labels(found: Review, view: View, pieces: Sequence[Piece], body: Solid, most: float) -> list[Label]:
    shown = [p for p in _shown(pieces, body) if anchor(p, view, body, pieces) is not None][:NAMED]
    return named(
        view,
        body,
        pieces,
        [(p, spelled(found, p.part, p.name, most, SIZE), finished_by(found, p.part, p.name)) for p in shown],
    )


def named(
    view: View,
    body: Solid,
    pieces: Sequence[Piece],
    told_of: Sequence[tuple[Piece, str, Mark]],
    *,
    sign: int = 1,
) -> list[Label]:
    """A label for each surface, their leaders standing apart."""
    starts = [anchor(p, view, body, pieces, sign) or ((0.0, 0.0),) for p, _, _ in told_of]
    xs = spread([s[-1][0] for s in starts], apart=2.0, low=6.0, high=WIDEST - 6.0)
    found = []
    for (_, text, mark), path, x in zip(told_of, starts, xs, strict=True):
        moved = _moved(path, x, sign)
        found.append(Label(text, moved, mark.flag, mark.colour))
    return found


def _moved(path: tuple[Point, ...], x: float, sign: int) -> tuple[Point, ...]:
    """The leader with its upright part at another place."""
    if abs(path[-1][0] - x) < 1e-6:
        return path
    if len(path) > 1:  # off a face: farther away from it
        return (*path[:-1], (x, path[-1][1]))
    return (path[0], (x, path[0][1] - sign * 2.0))


def anchor(piece: Piece, view: View, body: Solid, pieces: Sequence[Piece], sign: int = 1) -> tuple[Point, ...] | None:
    """Where a leader meets a surface, and where it goes up from; None for a surface that is not drawn."""
    found = runs(piece, body, pieces) or pitch_line(piece, view)
    if piece.kind == "teeth" and piece.radius:
        z = piece.middle if piece.cone else piece.low + 0.3 * (piece.high - piece.low)
        return (view.at(z, piece.radius, sign),)
    if not found:
        return None
    longest = max(found, key=lambda run: abs(run[-1][0] - run[0][0]) + abs(run[-1][1] - run[0][1]))
    (z1, r1), (z2, r2) = longest[0], longest[-1]
    if piece.kind == "face":
        at = view.at(z1, r1 + 0.6 * (r2 - r1), sign)
        return (at, (at[0] + view.way * piece.facing * FAR, at[1]))
    if piece.kind == "throat":
        z, r = longest[len(longest) // 2]
        return (view.at(z, r, sign),)
    if piece.kind == "centre":
        return (view.at(z1, r1, sign), (view.x(z1) + view.way * piece.facing * FAR, view.y(r1, sign)))
    if piece.kind in ("holes", "slot"):
        inward = _inward(piece, body)
        depth = min(_thickness(body, piece.low, piece.radius or 0.0, inward), 8.0 / view.along)
        return (view.at(piece.low + inward * depth * (0.3 if piece.kind == "holes" else 0.6), r1, sign),)
    share = 0.42 if piece.kind == "bore" else 0.5
    return (view.at(z1 + share * (z2 - z1), r1 + share * (r2 - r1), sign),)


def _lines(found: Review, part: str, view: View, body: Solid, pieces: Sequence[Piece]) -> list[str]:
    """The line of every surface in colour and pattern of its operation."""
    parts = []
    for piece in pieces:
        mark = finished_by(found, part, piece.name)
        if piece.stock and body.outer and not _stands(piece, body):
            continue
        for run in runs(piece, body, pieces):
            for sign in (1, -1) if piece.kind in ("cylinder", "taper", "thread", "face", "throat") else (1,):
                parts.append(stroke(view, run, sign=sign, width=SURFACE, dashes=mark.dashes, colour=mark.colour))
        parts += pattern_lines(view, piece, body, mark.colour)
        if piece.kind == "thread" and piece.radius:
            core = 0.9 * piece.radius  # a thread's root as a thin line; ISO 6410 (from memory)
            ends = [(piece.low, core), (piece.high, core)]
            parts += [stroke(view, ends, sign=s, width=THIN, dashes="", colour=mark.colour) for s in (1, -1)]
    return parts


def _stands(piece: Piece, body: Solid) -> bool:
    """True where stock is still the outside of the part."""
    return piece.radius is not None and any(abs(r - piece.radius) < 1e-6 * piece.radius for _, r in body.outer)


def pattern_lines(view: View, piece: Piece, body: Solid, colour: str) -> list[str]:
    """Centre lines of teeth, holes and slots in both halves; a hole's walls dashed, as its depth is not stated."""
    parts = []
    for run in pitch_line(piece, view):
        for sign in (1, -1):
            parts.append(stroke(view, run, sign=sign, width=0.25, dashes=AXIS_DASHES, colour=colour))
    if piece.kind in ("holes", "slot") and piece.radius and piece.size:
        inward = _inward(piece, body)
        for radius in (piece.radius - piece.size / 2.0, piece.radius + piece.size / 2.0):
            if radius > 0.0:
                depth = _thickness(body, piece.low, radius, inward)
                run = [(piece.low, radius), (piece.low + inward * depth, radius)]
                parts.append(stroke(view, run, sign=1, width=0.5, dashes=GUESSED_DASHES, colour=colour))
    return parts


def _inward(piece: Piece, body: Solid) -> int:
    """Which way metal lies from the end that a hole or slot is in."""
    return -1 if body.outer and piece.low > (body.low + body.high) / 2.0 else 1


def _thickness(body: Solid, z: float, radius: float, inward: int) -> float:
    """Metal behind a place at a radius; where there is none, as far as the hole is from the axis."""
    there = [a for a, r in body.outer if r >= radius]
    end = (min(there) if inward < 0 else max(there)) if there else z
    return abs(end - z) or radius / 4.0


def _axis(view: View, pieces: Sequence[Piece], body: Solid) -> list[str]:
    low, high = _ends(pieces, body)
    return [axis_line(view, low, high, beyond=6.0), *z_arrow(view.x(high) + 7.0, view.axis, 1)]


def z_arrow(x: float, y: float, way: int) -> list[str]:
    """Which way the part's heights run."""
    tip = x + way * 7.0
    return [
        line((x, y), (tip, y), width=0.25),
        polygon([(tip, y), (tip - way * 2.2, y - 0.7), (tip - way * 2.2, y + 0.7)]),
        words((tip + way * 1.0, y + 1.0), "+z", size=SIZE, anchor="start" if way > 0 else "end"),
    ]


def _from_the_end(found: Review, view: View, pieces: Sequence[Piece], body: Solid) -> list[str]:
    """The end view, where a pattern asks for one and there is room beside the section."""
    if not _ringed(pieces, body):
        return []
    radius = view.across * _widest(pieces, body)
    middle = view.x(_ends(pieces, body)[1]) + AWAY + radius
    return end_view(found, _shown(pieces, body), body, middle=(middle, view.axis), scale=view.across)


def _positions(found: Review, view: View, pieces: Sequence[Piece], body: Solid, bottom: float) -> list[str]:
    """Positions along the part, each under its place, in two rows."""
    placed_ = [p for p in pieces if not p.stock] or pieces
    heights = sorted({z for p in placed_ for z in ((p.middle,) if p.kind == "teeth" else (p.low, p.high))})
    texts = [plain(found, z) for z in heights]
    apart = max(room(text, SIZE) for text in texts) / 2.0 + 1.2
    most = int((WIDEST - 34.0) / apart)
    if len(heights) > most:
        every = -(-len(heights) // most)
        heights, texts = heights[::every], texts[::every]
    unit = "z [in]" if found.loaded.job.units == "in" else "z [mm]"
    low = view.x(heights[0]) - 30.0  # beside a legend too
    xs = spread([view.x(z) for z in heights], apart=apart, low=max(low, 10.0), high=WIDEST - 24.0)
    parts = [words((xs[-1] + room(texts[-1], SIZE) / 2.0 + 3.0, bottom + 7.6), unit, size=SIZE)]
    for i, (z, text, x) in enumerate(zip(heights, texts, xs, strict=True)):
        place = view.x(z)
        start = view.y(radius_at(body.outer, z), -1) + 0.8 if body.outer else view.axis + 1.0
        base = bottom + 7.6 + (i % 2) * 4.2
        parts.append(line((place, min(start, bottom + 1.0)), (place, bottom + 2.0)))
        parts.append(line((place, bottom + 2.0), (x, bottom + 4.0)))
        if i % 2:
            parts.append(line((x, bottom + 4.0), (x, base - 3.0)))
        parts.append(words((x, base), text, size=SIZE, anchor="middle"))
    return parts


def _legend(found: Review, part: str, wide: float) -> list[tuple[Mark | None, str]]:
    """A line for each operation: what it finished. The mark is None on a line that goes on."""
    groups: dict[Mark, list[str]] = {}
    for name in found.loaded.job.parts[part].surfaces:
        gone = found.floor.removed.get((part, name))
        mark = finished_by(found, part, name)
        states = found.floor.bodies[part].states.get((part, name), [])
        rough = " (rough)" if states and states[-1].rough else ""
        told = (
            f"{short(name, SIZE, 40.0)}{rough}" if gone is None else f"{short(name, SIZE, 40.0)} (removed in op {gone})"
        )
        groups.setdefault(mark, []).append(told)
    legend: list[tuple[Mark | None, str]] = []
    ordered = sorted(groups, key=lambda m: (m.flag.isdigit(), int(m.flag) if m.flag.isdigit() else 0, m.flag))
    for mark in ordered:
        called = f"op {mark.flag}" if mark.flag.isdigit() else mark.flag
        text = wrapped(f"{called}: {', '.join(groups[mark])}", SIZE, wide, most=4)
        legend += [(mark if i == 0 else None, each) for i, each in enumerate(text)]
    if len(legend) > 12:
        legend = [*legend[:11], (None, f"and {len(legend) - 11} lines more, see the job file")]
    return legend


def _drawn_legend(legend: Sequence[tuple[Mark | None, str]], top: float) -> list[str]:
    parts = []
    for i, (mark, text) in enumerate(legend):
        y = top + LEGEND * i + 3.0
        if mark is not None:
            parts.append(line((5.0, y - 1.1), (21.0, y - 1.1), width=SURFACE, dashes=mark.dashes, colour=mark.colour))
        parts.append(words((23.0, y), text, size=SIZE))
    return parts


def _notes(pieces: Sequence[Piece], body: Solid) -> list[str]:
    notes = []
    if not body.outer:
        notes.append("no outside diameter stated: surfaces alone")
    if any(p.kind in ("holes", "slot") for p in pieces):
        notes.append("walls of holes and slots dashed, as no depth is stated")
        if _ringed(pieces, body):
            notes.append("right: from the +z end, the mark to the right, first place black")
    if body.unstated:
        notes.append("outline dashed where no surface states it")
    if any(p.kind == "teeth" for p in pieces):
        notes.append("pitch circle dash-dotted")
    within = [p.name for p in pieces if p.kind == "cylinder" and not p.stock and p.radius and _buried(p, body)]
    if within:
        notes.append(f"inside other metal as stated: {short(', '.join(within), SIZE, 60.0)}")
    return notes


def _buried(piece: Piece, body: Solid) -> bool:
    return all(
        radius_at(body.outer, z) > (piece.radius or 0.0) * (1.0 + 1e-6) for z in (piece.low, piece.middle, piece.high)
    )
