"""Lengths along the axis: from the worm's axis to the middle of the teeth, or the faces of a required length, true to scale.

Positions are those of the drawing, every spacer at the middle of its limits; what the route may make of them stands beside
each length as its worst case. Right is +z of the body the parts are by then.
"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

from setupcheck.flow import Review
from setupcheck.jobfile.models import Dimension
from setupcheck.ledger.figures import Length
from setupcheck.ledger.route import State
from setupcheck.quantities.book import Open
from setupcheck.quantities.drive import middle
from setupcheck.quantities.mid_plane import in_its_housing
from setupcheck.quantities.placing import nominal_offset
from setupcheck.quantities.scopes import stack_of
from setupcheck.quantities.shop import Floor
from setupcheck.record import record
from setupcheck.report.pictures import WIDEST, Picture
from setupcheck.report.pictures.fitting import SIZE, box, short, wrapped
from setupcheck.report.svg import THICK, THIN, line, picture, polygon, room, words
from setupcheck.report.text import limits_in_words
from setupcheck.report.wording import clean, title_of, unit_of
from setupcheck.report.worked_out import filled

LEFT, RIGHT, TEXT = 14.0, 104.0, 112.0
"""Edges of the field that is to scale, and where the words of the lengths begin [mm of paper]. Source: our choice."""
TOP = 8.6
"""Where the names of the faces begin [mm of paper]. Source: our choice."""
BODY = 20.0
"""Height of the parts [mm of paper]; they are true to scale along the axis alone. Source: our choice."""
GREYS = ("#dddddd", "#f0f0f0")
"""Fills of the parts in turn. Source: our choice."""
SCALES = (100.0, 50.0, 20.0, 10.0, 5.0, 2.0, 1.0, 0.5, 0.2, 0.1, 0.05, 0.02, 0.01)
"""Scales of the drawing, the largest first that fits. Source: ISO 5455 (from memory), and a last one for very long parts."""
CHAIN = "5 1 0.8 1"
"""Dash-dotted lines, of the two axes [mm of paper]. Source: common practice."""
MOST_ROWS = 5
"""Lengths that are drawn. Source: our choice, for the height of the drawing."""


@record
class Plane:
    """Something at one place along the axis [mm]: a face of a part (facing ±1), the middle of the teeth, the worm's axis.

    below  its name stands under the parts
    """

    z: float
    name: str
    facing: int = 0
    part: str = ""
    below: bool = False


@record
class Stretch:
    """One length: between two places [mm], what it is, and its value in words; `spacer` is drawn as a part of its own."""

    start: float
    end: float
    name: str
    value: str
    spacer: bool = False


@record
class Along:
    """Everything of one drawing; `notes` stand under it."""

    title: str
    planes: tuple[Plane, ...]
    stretches: tuple[Stretch, ...]
    notes: tuple[str, ...]


def offered(found: Review) -> Iterator[Picture]:
    """`axial` of a job with a worm's axis; else one for each required length."""
    place = found.loaded.job.place
    if place is not None and place.worm_axis is not None and found.loaded.job.mesh is not None:
        yield Picture(
            "axial", "the lengths that bring the teeth to the worm's axis", lambda: _draw(_to_the_worm(found))
        )
        return
    for scope in found.book.instances("stack"):
        stack = stack_of(scope)
        if stack.require.what == "length":
            number = stack.index + 1
            yield Picture(
                f"axial-{number}",
                f"{number}: the faces and lengths of {title_of(scope)}",
                lambda index=stack.index: _draw(_of_a_length(found, index)),  # type: ignore[misc]
            )


# -- what is to be drawn ---------------------------------------------------------------------------------------------


def _to_the_worm(found: Review) -> Along:
    """Face, worm's axis, teeth, and the joint between them with its spacers."""
    floor, job = found.floor, found.loaded.job
    assert job.place is not None and job.place.worm_axis is not None and job.mesh is not None
    title = "Along the axis: teeth and worm"
    teeth, face = floor.now(found.loaded.ref(job.mesh.wheel)), floor.now(found.loaded.ref(job.place.worm_axis.from_))
    if teeth is None or face is None or floor.body(teeth.part) is not floor.body(face.part):
        offset = nominal_offset(floor)
        why = offset.because if isinstance(offset, Open) else "teeth and face are not joined"
        return Along(title, (), (), (f"Cannot be drawn: {why}",))
    given = job.place.worm_axis.length
    worm = face.z + face.facing * middle(given)
    planes, stretches = _stops(floor, teeth, face)
    middle_of = f"middle of {clean(teeth.name)}"
    planes = [_face(floor, face), *planes, Plane(teeth.z, middle_of), Plane(worm, "worm's axis", below=True)]
    told = f"{_size(floor, given)}, given"
    stretches.insert(0, Stretch(face.z, worm, f"{clean(face.name)} to worm's axis", told))
    near = _own_stop(floor, teeth, face) or face
    stretches.append(_between(floor, near, teeth, f"{clean(near.name)} to {middle_of}"))
    return Along(title, _once(planes), tuple(stretches), tuple(_miss(found, teeth.z - worm)))


def _of_a_length(found: Review, index: int) -> Along:
    """The two faces of a required length, and the joints between them with their spacers."""
    floor = found.floor
    scope = next(s for s in found.book.instances("stack") if stack_of(s).index == index)
    stack, result = stack_of(scope), found.results.get(scope.key)
    title = f"Along the axis: {index + 1}  {title_of(scope)}"
    one = floor.now(found.loaded.ref(stack.of)) if stack.of else None
    other = floor.now(found.loaded.ref(stack.about)) if stack.about else None
    if one is None or other is None or floor.body(one.part) is not floor.body(other.part):
        return Along(title, (), (), ("Cannot be drawn: one of both faces is never made, or they are never joined.",))
    planes, stretches = _stops(floor, one, other)
    near = _own_stop(floor, one, other)
    if near is not None and near.ref != one.ref:
        stretches.append(_between(floor, near, one, f"{clean(near.name)} to {clean(one.name)}"))
    stretches.insert(0, _between(floor, other, one, f"{clean(other.name)} to {clean(one.name)}"))
    notes = []
    if result is not None:
        unit, digits = unit_of(found.book, scope)
        notes.append(f"Asked, at its worst: {limits_in_words(result, unit, digits)}")
    return Along(title, _once([_face(floor, other), *planes, _face(floor, one)]), tuple(stretches), tuple(notes))


def _stops(floor: Floor, one: State, other: State) -> tuple[list[Plane], list[Stretch]]:
    """The faces at which joints between the two surfaces' parts stop, and what lies between these faces."""
    planes: list[Plane] = []
    stretches: list[Stretch] = []
    for on, against, names, values in _joints(floor):
        if one.part == other.part or not {on.part, against.part} & {one.part, other.part}:
            continue
        planes += [_face(floor, against), _face(floor, on)]
        if names:
            side = f"between {clean(against.name)} and {clean(on.name)}"
            stretches.append(
                Stretch(against.z, on.z, f"{clean(' and '.join(names))} {side}", ", ".join(values), spacer=True)
            )
    return planes, stretches


def _joints(floor: Floor) -> Iterator[tuple[State, State, list[str], list[str]]]:
    """(outer part's face, inner part's face, names and sizes of the spacers) of each joint that stops somewhere."""
    for setup in floor.loaded.job.setups:
        stop = setup.join.stop if setup.join is not None else None
        if stop is None or stop.against is None:
            continue
        on, against = floor.now(floor.loaded.ref(stop.on)), floor.now(floor.loaded.ref(stop.against))
        if on is not None and against is not None and floor.body(on.part) is floor.body(against.part):
            yield on, against, [s.name for s in stop.spacers], [_size(floor, s.length) for s in stop.spacers]


def _own_stop(floor: Floor, one: State, other: State) -> State | None:
    """The face of its own part at which a surface's part stops against the other's; None within one part."""
    if one.part == other.part:
        return None
    faces = [face for on, against, _, _ in _joints(floor) for face in (on, against)]
    return next((face for face in reversed(faces) if face.part == one.part), None)


def _between(floor: Floor, start: State, end: State, name: str) -> Stretch:
    """The drawn length between two surfaces and what the route makes of it at its worst."""
    way = 1.0 if end.z >= start.z else -1.0
    figure = Length(((end.axial - start.axial) * way).plus_constant(abs(end.z - start.z)))
    drawn = floor.size(abs(end.z - start.z))
    if missing := figure.undetermined():
        return Stretch(start.z, end.z, name, f"{drawn}; fill {missing[0]}")
    pushes = figure.pushes()
    low, high = figure.base() - sum(p.down for p in pushes), figure.base() + sum(p.up for p in pushes)
    return Stretch(start.z, end.z, name, f"{drawn}, made {_bare(floor, low)} to {_bare(floor, high)}")


def _miss(found: Review, offset: float) -> Iterator[str]:
    """By how much the middle of the teeth misses the worm's axis, and what the shim should be."""
    floor = found.floor
    figure = in_its_housing(floor)
    side = "" if abs(offset) < 5e-7 else f" (teeth to the {'right' if offset > 0.0 else 'left'})"
    text = f"Drawn sizes miss the worm's axis by {floor.fine(abs(offset))}{side}"
    if isinstance(figure, Open):
        yield f"{text}; worst miss cannot be told: fill {', '.join(figure.missing[:2])}."
    else:
        yield f"{text}; worst miss, wobble included, {floor.fine(figure.base() + sum(p.up for p in figure.pushes()))}."
    for scope in found.book.instances("place"):
        if said := filled(found, scope, "{place.shim}"):
            yield said
    for scope in found.book.instances("stack"):
        result = found.results.get(scope.key)
        if result is not None and result.stack.require.what == "mid-plane":
            unit, digits = unit_of(found.book, scope)
            yield f"Requirement {result.stack.index + 1}: {limits_in_words(result, unit, digits)}."


def _face(floor: Floor, state: State) -> Plane:
    twice = sum(state.name in part.surfaces for part in floor.loaded.job.parts.values()) > 1
    return Plane(state.z, clean(state.ref if twice else state.name), state.facing, clean(state.part))


def _once(planes: list[Plane]) -> tuple[Plane, ...]:
    return tuple(dict.fromkeys(planes))


def _size(floor: Floor, given: Dimension) -> str:
    """A stated length with its limits: `1.500 ±0.003 mm`; a measured one says so."""
    if given.measured is not None:
        tail = f" ±{_bare(floor, given.uncertainty)}" if given.uncertainty is not None else ""
        return f"{floor.size(given.measured)}{tail} measured"
    assert given.nominal is not None
    if given.lower is None and given.upper is None:
        return (
            f"{floor.size(given.nominal)} {given.fit}" if given.fit else f"{floor.size(given.nominal)} without limits"
        )
    low, high = given.lower or 0.0, given.upper or 0.0
    if abs(low + high) < 1e-9:
        return f"{_bare(floor, given.nominal)} ±{floor.size(high)}"
    return f"{_bare(floor, given.nominal + low)} to {floor.size(given.nominal + high)}"


def _bare(floor: Floor, mm: float) -> str:
    """A size in the units of the file, without the unit."""
    return floor.size(mm).removesuffix(" mm").removesuffix(" in").removesuffix('"')


# -- drawing ---------------------------------------------------------------------------------------------------------


def _draw(along: Along) -> str:
    parts = [words((6.0, 7.0), short(along.title, WIDEST - 12.0, 4.0), size=4.0, bold=True)]
    y = TOP
    if along.planes:
        more, y = _body(along, y)
        parts += more
    for note in along.notes:
        for text in wrapped(note, WIDEST - 10.0, 2):
            y += 4.4
            parts.append(words((6.0, y), text))
    return picture(WIDEST, y + 3.0, title=along.title, parts=parts) + "\n"


@record
class _Scale:
    """Where a place along the axis stands on the paper: the first at `left`, `factor` mm of paper for each mm."""

    first: float
    left: float
    factor: float

    def x(self, z: float) -> float:
        return self.left + (z - self.first) * self.factor


def _scale_of(along: Along) -> _Scale:
    places = [p.z for p in along.planes]
    low, high = min(places), max(places)
    span = RIGHT - LEFT
    factor = next((k for k in SCALES if (high - low) * k <= span), span / max(high - low, 1e-9))
    return _Scale(low, LEFT + (span - (high - low) * factor) / 2.0, factor)


def _body(along: Along, y: float) -> tuple[list[str], float]:
    """Names, parts, spacers and axes, and under them the lengths."""
    scale = _scale_of(along)
    upper, lower = ([p for p in along.planes if p.below == below] for below in (False, True))
    names, y = _names(scale, upper, y)
    top, foot = y + 1.0, y + 1.0 + BODY
    parts = [*_blocks(along, scale, top), *names]
    for plane in along.planes:
        x = scale.x(plane.z)
        if plane.facing:
            parts.append(line((x, top - 1.0), (x, foot), width=0.5))
        else:
            parts.append(line((x, top - 1.0), (x, foot + 2.0), width=THICK, dashes=CHAIN))
    y = foot + 2.0
    for plane in lower:
        y += 4.0
        x = scale.x(plane.z)
        wide = room(plane.name, SIZE)
        parts.append(words((min(max(x - wide / 2.0, 2.0), TEXT - 4.0 - wide), y), plane.name))
    for stretch in along.stretches[:MOST_ROWS]:
        more, y = _length(scale, stretch, y + 1.4)
        parts += more
    y += 4.6
    parts.append(words((6.0, y), f"{_ratio(scale.factor)} along the axis; right is +z"))
    return parts, y + 0.6


def _names(scale: _Scale, planes: list[Plane], y: float) -> tuple[list[str], float]:
    """Names over their places, each on the first line where it is free, led down to its place."""
    parts: list[str] = []
    rows: list[list[tuple[float, float]]] = []
    placed: list[tuple[float, str, int]] = []
    for plane in sorted(planes, key=lambda p: (p.z, p.name)):
        name = short(plane.name, 44.0)
        wide = room(name, SIZE)
        start = min(max(scale.x(plane.z) - wide / 2.0, 2.0), WIDEST - 2.0 - wide)
        row = next(
            (i for i, r in enumerate(rows) if all(start > b + 1.5 or start + wide < a - 1.5 for a, b in r)), len(rows)
        )
        if row == len(rows):
            rows.append([])
        rows[row].append((start, start + wide))
        placed.append((start, name, row))
    for start, name, row in placed:
        parts.append(words((start, y + 4.0 * (row + 1)), name))
    return parts, y + 4.0 * len(rows) + 1.4


def _blocks(along: Along, scale: _Scale, top: float) -> list[str]:
    """The parts with their names, each from its face into its metal, and the spacers: shapes along the axis only."""
    parts: list[str] = []
    marks = sorted({scale.x(p.z) for p in along.planes})
    for i, part in enumerate(dict.fromkeys(p.part for p in along.planes if p.facing)):
        lows = [scale.x(p.z) for p in along.planes if p.part == part and p.facing < 0]
        highs = [scale.x(p.z) for p in along.planes if p.part == part and p.facing > 0]
        low, high = min(lows, default=LEFT - 8.0), max(highs, default=RIGHT + 4.0)
        if high - low < 0.05:
            continue
        inset = 3.0 * (i % 2)
        parts.append(box(low, top + inset, high - low, BODY - 2.0 * inset, fill=GREYS[i % 2], stroke=THIN))
        edges = [low, *(x for x in marks if low < x < high), high]
        gap, start = max((b - a, -a) for a, b in pairwise(edges))
        name = short(part, 40.0)
        if gap > room(name, SIZE) + 1.0:
            parts.append(words((gap / 2.0 - start, top + BODY / 2.0 + 1.0), name, anchor="middle"))
    for stretch in along.stretches:
        if stretch.spacer:
            a, b = sorted((scale.x(stretch.start), scale.x(stretch.end)))
            parts.append(box(a, top + 4.0, b - a, BODY - 8.0, fill="#888888", stroke=THICK))
    return parts


def _length(scale: _Scale, stretch: Stretch, y: float) -> tuple[list[str], float]:
    """One length with arrows at its ends, and beside the field what it is and how long."""
    a, b = sorted((scale.x(stretch.start), scale.x(stretch.end)))
    name, value = (short(text, WIDEST - 2.0 - TEXT) for text in (stretch.name, stretch.value))
    level = y + 3.6
    parts = [line((a, level - 1.6), (a, level + 1.6)), line((b, level - 1.6), (b, level + 1.6))]
    inside = b - a >= 6.0
    ends = ((a, 1.0), (b, -1.0)) if inside else ((a, -1.0), (b, 1.0))
    parts.append(line((a, level), (b, level)) if inside else line((a - 5.0, level), (b + 5.0, level)))
    for x, way in ends:
        parts.append(polygon([(x, level), (x + way * 2.2, level - 0.5), (x + way * 2.2, level + 0.5)]))
    parts.append(line(((b if inside else b + 5.0) + 1.0, level), (TEXT - 1.0, level), width=THIN, dashes="0.3 1.2"))
    parts.append(words((TEXT, y + 3.0), name))
    parts.append(words((TEXT, y + 7.0), value, bold=True))
    return parts, y + 7.4


def _ratio(factor: float) -> str:
    """`5:1`, `1:2`, or that it is no usual scale."""
    if factor not in SCALES:
        return "no usual scale"
    return f"{factor:g}:1" if factor >= 1.0 else f"1:{1.0 / factor:g}"
