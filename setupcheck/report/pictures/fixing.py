"""Where the symbols of a holding stand: jaws on their grip, arbor in its bore, rests at their face. Paper in mm."""

from __future__ import annotations

from collections.abc import Sequence

from setupcheck.jobfile.setups import Centre, Clock, Square, Stop
from setupcheck.record import record
from setupcheck.report.pictures.devices import (
    ARBORS,
    DIALS,
    JAWS,
    Bench,
    Grip,
    arbor,
    centre_point,
    chuck,
    dial,
    jaws,
    pin,
    plate,
    rest,
    steady,
    under,
)
from setupcheck.report.pictures.pieces import extent
from setupcheck.report.pictures.shape import Piece, Point, Solid, radius_at
from setupcheck.report.pictures.sketch import View, runs
from setupcheck.report.svg import polygon

Entry = Centre | Square | Stop | Clock


@record
class Datum:
    """A datum of the hold: its letter, step, entry and the surface in the held part's heights, None where it is not there yet."""

    letter: str
    step: str
    entry: Entry
    name: str
    piece: Piece | None


@record
class Scene:
    """What is drawn: the bodies held, their surfaces in the held part's heights, the view and the datums."""

    pieces: tuple[tuple[Piece, ...], ...]
    solids: tuple[Solid, ...]
    view: View
    datums: tuple[Datum, ...]

    def of(self, piece: Piece) -> tuple[Solid, tuple[Piece, ...]]:
        """The body that a surface is on."""
        for body, pieces in zip(self.solids, self.pieces, strict=True):
            if pieces and pieces[0].part == piece.part:
                return body, pieces
        return self.solids[0], self.pieces[0]


def ends_of(shown: Sequence[tuple[Piece, ...]], solids: Sequence[Solid]) -> Point:
    """Lowest and highest place of anything drawn."""
    ends = [(body.low, body.high) for body in solids if body.outer] + [extent(pieces) for pieces in shown]
    return min(low for low, _ in ends), max(high for _, high in ends)


def widest_of(shown: Sequence[tuple[Piece, ...]], solids: Sequence[Solid]) -> float:
    """Largest radius of anything drawn."""
    found = [r for body in solids for _, r in body.outer]
    return max([*found, *(p.radius + (p.size or 0.0) / 2.0 for pieces in shown for p in pieces if p.radius)])


def reach_of(scene: Scene) -> float:
    return widest_of(scene.pieces, scene.solids)


def _bench(scene: Scene) -> Bench:
    view = scene.view
    low, high = ends_of(scene.pieces, scene.solids)
    left, right = sorted((view.x(low), view.x(high)))
    return Bench(view.axis, left, right, left - 7.0, reach_of(scene) * view.across)


def _grip(scene: Scene, datum: Datum) -> Grip | None:
    """Where a device takes hold of a surface."""
    piece, entry, view = datum.piece, datum.entry, scene.view
    if piece is None or not piece.radius or not isinstance(entry, Centre):
        return None
    left, right = sorted((view.x(piece.low), view.x(piece.high)))
    if entry.grip is not None and datum.step == "centre":
        ends = sorted((view.x(entry.grip.low), view.x(entry.grip.high)))
        left, right = max(left, ends[0]), min(right, ends[1])
    elif entry.at is not None:
        x = view.x(entry.at)
        left, right = max(left, x - 4.0), min(right, x + 4.0)
    else:
        right = min(right, left + max(0.5 * (right - left), 6.0))
    if right <= left:
        left, right = left, left + 3.0
    body, _ = scene.of(piece)
    before = max(
        (r * view.across for z, r in body.outer if view.x(z) <= left + 1e-6 and piece.kind != "bore"), default=0.0
    )
    return Grip(left, right, piece.radius * view.across, before, piece.kind == "bore")


def behind(scene: Scene) -> list[str]:
    """What stands behind the part in the drawing."""
    bench = _bench(scene)
    first = next((d for d in scene.datums if d.step == "centre"), None)
    second = next((d for d in scene.datums if d.step == "and_centre"), None)
    parts: list[str] = []
    carried = False
    for datum in (first, second):
        if datum is None or not isinstance(datum.entry, Centre):
            continue
        grip = _grip(scene, datum)
        by = datum.entry.by
        if (
            datum is second
            and first is not None
            and isinstance(first.entry, Centre)
            and first.entry.by == by
            and by != "centres"
        ):
            continue  # one device, two planes
        if by in JAWS and grip is not None:
            parts += jaws(bench, grip)
            carried = True
        elif by in ARBORS and grip is not None:
            planes = second is not None
            parts += arbor(bench, grip, by=by, through=planes or by.endswith("mandrel"))
            carried = True
            if any(t.by == "centres" for t in datum.entry.through) and grip.inner:
                parts += centre_point(bench, bench.right + 7.0, 1, grip.half * 0.4)
        elif by == "vee-block" and grip is not None:
            parts += under(bench, grip, vee=True)
        elif by in ("fixture",) and grip is not None:
            parts += under(bench, grip, vee=False)
        elif by == "steady" and grip is not None:
            parts += steady(bench, grip)
        elif by in ("faceplate", "magnetic-chuck"):
            parts += plate(bench, bench.reach)
            carried = True
    for datum in scene.datums:
        if isinstance(datum.entry, Square) and datum.piece is not None:
            parts += _rested(scene, bench, datum)
            carried = True
    grips = [grip for d in scene.datums if (grip := _grip(scene, d)) is not None and not grip.inner]
    half = max([0.75 * bench.reach, 9.0, *(max(g.half, g.before) + 6.0 for g in grips)])
    return [*(chuck(bench, min(half, bench.reach + 7.5)) if carried else []), *parts]


def before(scene: Scene) -> list[str]:
    """What stands before the part: centres in its ends, dials, stops, the pin that rules the angle."""
    bench, view = _bench(scene), scene.view
    parts: list[str] = []
    for datum in scene.datums:
        piece, entry = datum.piece, datum.entry
        if piece is None:
            continue
        body, _ = scene.of(piece)
        if isinstance(entry, Centre) and entry.by == "centres":
            outward = (
                view.way * piece.facing
                if piece.facing
                else (-1 if view.x(piece.middle) < (bench.left + bench.right) / 2.0 else 1)
            )
            x = view.x(piece.low) if piece.facing else (bench.left if outward < 0 else bench.right)
            parts += centre_point(bench, x, outward, 0.2 * radius_at(body.outer, piece.low) * view.across)
        elif isinstance(entry, Centre) and entry.by in DIALS and piece.radius:
            parts += _dialled(scene, bench, datum)
        elif isinstance(entry, Stop):
            found = runs(piece, body, scene.of(piece)[1])
            if found and not any(d.piece == piece and d is not datum for d in scene.datums):
                half = entry.radius or 0.6 * found[0][0][1] + 0.4 * found[0][-1][1]
                parts += pin(bench, view.x(piece.low), view.way * (piece.facing or 1), half * view.across)
        elif isinstance(entry, Clock) and piece.radius:
            x, y = view.at(piece.low, piece.radius)
            parts.append(polygon([(x - 1.6, y), (x, y - 1.6), (x + 1.6, y), (x, y + 1.6)], fill="#555555"))
    return parts


def _dialled(scene: Scene, bench: Bench, datum: Datum) -> list[str]:
    piece, view = datum.piece, scene.view
    assert piece is not None and piece.radius is not None and isinstance(datum.entry, Centre)
    at = datum.entry.at if datum.entry.at is not None else piece.middle
    touched = view.at(at, piece.radius)
    if piece.kind == "bore":
        return dial(touched, (bench.right + 9.0, touched[1] + min(4.5, 0.7 * piece.radius * view.across)))
    return dial(touched, (touched[0] + 2.0, touched[1] - 6.0))


def _rested(scene: Scene, bench: Bench, datum: Datum) -> list[str]:
    piece, view, entry = datum.piece, scene.view, datum.entry
    assert piece is not None and isinstance(entry, Square)
    body, pieces = scene.of(piece)
    found = runs(piece, body, pieces)
    if not found:
        return []
    inner, outer = found[0][0][1] * view.across, found[0][-1][1] * view.across
    if entry.by in ("indicator", "edge-finder"):
        x, y = view.x(piece.low), view.axis - (inner + 0.7 * (outer - inner))
        return dial((x, y), (x + view.way * piece.facing * 7.0, y - 2.0))
    return rest(
        bench,
        view.x(piece.low),
        view.way * piece.facing,
        (inner + 0.35 * (outer - inner), outer),
        thin=entry.by == "parallels",
    )
