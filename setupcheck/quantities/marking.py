"""The mark of blue on the finished wheel: what it tells, what to move, what the next one should look like. mm, rad.

The worm lies towards +y of the wheel, z as in the wheel's drawing; flank +1 is the wall of an upright gap on the right for
one who looks at a face that looks towards +z.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from setupcheck.jobfile.marks import SIDES, Mark
from setupcheck.jobfile.marks import Spot as Written
from setupcheck.jobfile.models import Flat
from setupcheck.jobfile.worm import Mesh
from setupcheck.ledger.figures import alternatives
from setupcheck.notation import show, show_angle
from setupcheck.quantities import cutter_shape, exact_gap
from setupcheck.quantities.book import Open, Quantity, in_range
from setupcheck.quantities.drive import Drive, WheelCut, drive, wheel_cut
from setupcheck.quantities.judged import Result
from setupcheck.quantities.placing import shim_for
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

if TYPE_CHECKING:  # imported where they are used: no other review needs them
    from setupcheck.worm.marks import Chart, Height, Reading

THIN = 0.5
"""Share of the flank marked, over the one expected, below which a mark in its place still tells of something. Our choice."""


@record
class Cutting:
    """The cut of the wheel's teeth and the profile of its insert."""

    cut: WheelCut
    insert: str


@record
class Told:
    """A mark, held against the exact gap where it must be.

    side     +1 where `right` is flank +1;  chart  None where no place along the face had to be read
    """

    mark: Mark
    cutting: Cutting
    side: int
    cause: str
    reading: Reading | None = None
    chart: Chart | None = None
    why: str = ""


def cutting(floor: Floor, mesh: Mesh) -> Cutting | Open | None:
    """Cut and insert of the wheel; None where no mark is told or no single-point cutter made it. Source: the job file."""
    if mesh.mark is None:
        return None
    found = drive(floor)
    made = wheel_cut(floor, found) if isinstance(found, Drive) else found
    if not isinstance(made, WheelCut):
        return made
    insert = cutter_shape.insert(made)
    return insert if isinstance(insert, Open) else Cutting(made, insert)


@in_range
def read(floor: Floor, mesh: Mesh, cutting: Cutting) -> Told | Open:
    """What the marks of both flanks tell.

    Open where one flank is not told, unless only some teeth are marked.  Source: worm.marks.
    """
    from setupcheck.worm import marks

    mark = mesh.mark
    assert mark is not None
    side = _looks(floor, cutting.cut.drive.wheel.part, mark.seen_from)
    if mark.on_teeth == "some":
        return Told(mark, cutting, side, "ring")
    missing = tuple(f"mesh.mark.{side}" for side in SIDES if getattr(mark, side) is None)
    if missing:
        return Open(missing)
    assert mark.right is not None and mark.left is not None
    if "ends" in (mark.right.at, mark.left.at):
        return Told(mark, cutting, side, "cutter")
    chart = _chart(floor, cutting, mark)
    if isinstance(chart, Open):
        return chart
    right, left = (marks.Seen(_z(floor, cutting, spot), spot.height) for spot in (mark.right, mark.left))
    reading = marks.read(right, left, chart) if side == 1 else marks.read(left, right, chart)
    if reading.cause == "none" and _thin(mark, chart):
        return Told(mark, cutting, side, "insert", reading, chart)
    return Told(mark, cutting, side, reading.cause, reading, chart, reading.why)


def _chart(floor: Floor, cutting: Cutting, mark: Mark) -> Chart | Open:
    """Marks that errors of the setting give, about the setting the insert is made for."""
    from setupcheck.worm.best_cutter import COLUMNS, ROWS
    from setupcheck.worm.marks import chart
    from setupcheck.worm.wheel_flank import wheel_flank

    pair = exact_gap.pair("exact", cutting.cut, floor)
    blank = exact_gap.blank("exact", cutting.cut, floor)
    if isinstance(blank, Open):
        return blank
    made_for = exact_gap.made_for(pair, cutting.cut)
    insert = exact_gap.insert(exact_gap.gap(pair, blank), made_for, cutting.insert)
    flank = wheel_flank(pair, blank, side=1, rows=ROWS, columns=COLUMNS)
    return chart(flank, insert, made_for, film=film(mark))


def film(mark: Mark) -> float:
    """Thickness of the blue [mm]; 6 um where nothing is said. Source: the job file; common practice."""
    return mark.film if mark.film is not None else cutter_shape.USUAL_FILM


def _thin(mark: Mark, chart: Chart) -> bool:
    shares = [spot.share for spot in (mark.right, mark.left) if spot is not None and spot.share is not None]
    return bool(shares) and min(shares) < THIN * chart.right.share


def _flat(floor: Floor, part: str, text: str) -> Flat:
    ref = floor.loaded.ref(text, part)
    node = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    assert isinstance(node, Flat)
    return node


def _looks(floor: Floor, part: str, text: str) -> int:
    """+1 where a face of the drawing looks towards +z, else -1."""
    return _flat(floor, part, text).facing or 1


def _z(floor: Floor, cutting: Cutting, spot: Written) -> float:
    """Middle of a mark along +z of the wheel's drawing, from the middle of the teeth [mm]."""
    if isinstance(spot.at, str) or spot.towards is None:
        return 0.0
    return _end(floor, cutting, spot.towards) * spot.at


def _end(floor: Floor, cutting: Cutting, text: str) -> float:
    """+1 for a face at the +z end of the teeth, -1 for one at the other."""
    wheel = cutting.cut.drive.wheel
    teeth = floor.loaded.job.parts[wheel.part].surfaces[wheel.surface]
    return 1.0 if _flat(floor, wheel.part, text).at > teeth.at else -1.0  # type: ignore[union-attr]


def cause(told: Told) -> str:
    """none, tilt, offset, tilt and offset, insert, ring, cutter, or unexplained. Source: worm.marks."""
    return told.cause


def tilt(told: Told) -> float | None:
    """How much farther than the lead angle the head leaned, by the mark [rad]; None where the tilt is not it.

    Source: worm.marks.
    """
    return told.reading.tilt if told.reading is not None and "tilt" in told.cause else None


def offset(told: Told) -> float | None:
    """How far the gaps stand from the worm's mid-plane, by the mark, along +z of the wheel's drawing [mm].

    None where the mid-plane is not it.  Source: worm.marks.
    """
    return told.reading.offset if told.reading is not None and "offset" in told.cause else None


def says(told: Told, floor: Floor) -> str:
    """What the mark tells, as a sentence without its end. Source: worm.marks."""
    if told.cause == "unexplained":
        return f"no error of the setting explains it: {told.why}"
    if told.cause in _SAYS:
        return _SAYS[told.cause]
    parts = []
    reading = told.reading
    assert reading is not None
    least = "at least " if reading.least else "about "
    if "tilt" in told.cause:
        parts.append(
            f"the head leaned {least}{_minutes(abs(reading.tilt))} too {'far' if reading.tilt > 0.0 else 'little'}"
        )
    if "offset" in told.cause:
        where = _towards(told, floor, reading.offset)
        parts.append(
            f"the gaps stand {least}{floor.size(abs(reading.offset))} beyond the worm's middle towards {where}"
        )
    return " and ".join(parts)


_SAYS = {
    "none": "it is where it should be",
    "insert": "it is where it should be, but smaller than half of what this cutter marks",
    "ring": "it comes and goes round the wheel, so the ring of teeth runs out or wobbles",
    "cutter": "both ends of the face carry, so the cutter is too small or the insert too narrow at tip and throat",
}


def move(told: Told, floor: Floor, results: list[Result]) -> str | None:
    """What to move, by how much and which way; None where nothing is to be moved. Source: worm.marks, the ledger's joint."""
    if told.cause == "none":
        return None
    if told.cause == "ring":
        return _ring(told, floor, results)
    if told.cause == "cutter":
        return _cutter(told, floor)
    if told.cause == "insert":
        return "Blue it again with a thin film under light load; then measure the insert's profile and its width."
    if told.cause == "unexplained":
        return (
            "Move nothing yet. Check which wall is right and left, seen from that face, and the hand of the worm; blue it again "
            "with a thin film, turning one way only; then measure the insert."
        )
    reading = told.reading
    assert reading is not None
    parts = [_lean(told, floor, reading.tilt)] if "tilt" in told.cause else []
    parts += [_shift(told, floor, reading.offset)] if "offset" in told.cause else []
    if reading.least:
        parts.append("Mark again after that much: so near the ends of the teeth the mark hardly tells how much.")
    return " ".join(parts)


def _lean(told: Told, floor: Floor, error: float) -> str:
    cut = told.cutting.cut
    setup = next(s for s in floor.loaded.job.setups if s.op == cut.op)
    head = setup.head
    way = f" {head.leans}" if head is not None and head.leans is not None else ""
    first = f"Lean the head{way} {_minutes(abs(error))} {'less' if error > 0.0 else 'more'} than it was"
    if head is not None:
        first += f" (op {cut.op}: {show_angle(head.tilt - error, 'dms', 0)} on the same scale)"
    alike = "deep" if error > 0.0 else "shallow"
    return (
        f"{first} for the next wheel, or for one more round on this one. First measure backlash and depth: gaps cut too "
        f"{alike} mark alike, and so does a worm's axis out of square in its housing."
    )


def _shift(told: Told, floor: Floor, error: float) -> str:
    """Where the wheel has to go; the shim, if a joint made after the teeth has one."""
    amount, to = floor.size(abs(error)), _towards(told, floor, -error)
    text = f"Move the wheel {amount} towards {to} against the worm, or cut the next one with the cutter that much nearer to {to}."
    wheel = told.cutting.cut.drive.wheel
    teeth = floor.now(wheel)
    found = shim_for(floor, error * _turned(floor, told)) if teeth is not None else None
    if found is not None and found.op > told.cutting.cut.op:
        text += f" {found.words(inches=floor.loaded.job.units == 'in')} ({found.path})."
    return f"{text} An insert turned in its face marks alike: if the wheel stands right, read the insert's stop."


def _turned(floor: Floor, told: Told) -> int:
    """-1 where the wheel stands the other way round in its body than in its drawing, +1 elsewhere."""
    part = told.cutting.cut.drive.wheel.part
    for name, node in floor.loaded.job.parts[part].surfaces.items():
        state = (
            floor.now(floor.loaded.ref(f"{part}.{name}")) if isinstance(node, Flat) and node.kind == "face" else None
        )
        if state is not None and isinstance(node, Flat) and node.facing:
            return state.facing * node.facing
    return 1


def _towards(told: Told, floor: Floor, z: float) -> str:
    """The face of the wheel at that end, of those that the mark names, else the outermost."""
    wheel, mark = told.cutting.cut.drive.wheel, told.mark
    named = [mark.seen_from, *(s.towards for s in (mark.right, mark.left) if s is not None and s.towards is not None)]
    surfaces = floor.loaded.job.parts[wheel.part].surfaces
    drawn = [
        f"{wheel.part}.{n}"
        for n, s in surfaces.items()
        if isinstance(s, Flat) and s.kind == "face" and s.made != "stock"
    ]
    drawn.sort(key=lambda name: -abs(_flat(floor, wheel.part, name).at - surfaces[wheel.surface].at))  # type: ignore[union-attr]
    for text in (*named, *drawn):
        if _end(floor, told.cutting, text) == (1.0 if z > 0.0 else -1.0):
            return str(floor.loaded.ref(text, wheel.part))
    return "the other end"


def _ring(told: Told, floor: Floor, results: list[Result]) -> str:
    wheel = told.cutting.cut.drive.wheel
    first = (
        f"Read run-out and face run-out of {wheel.part} where it works before anything is moved, and mark both high "
        "points on it"
    )
    mine = [
        r
        for r in results
        if r.stack.require.what in ("run-out", "backlash-swing") and str(floor.loaded.ref(r.stack.of)) == str(wheel)
    ]
    if not mine:
        return f"{first}. Require run-out of {wheel}, and the review tells which holding it comes from."
    pushes = [push for one in alternatives(mine[0].figure) for push in one.pushes()]
    most = max(pushes, key=lambda push: push.size)
    return f"{first}. In the plan the most of it comes from: {most.cause.key}."


def _cutter(told: Told, floor: Floor) -> str:
    cut = told.cutting.cut
    smallest = cutter_shape.smallest_radius(cut)
    if cut.radius < smallest:
        return f"Set the tip radius above {floor.size(smallest + 0.05, 1)}: {floor.size(cut.radius, 1)} is too small."
    if told.cutting.insert == "mid-plane":
        return "Grind the insert to the envelope: a copy of the mid-plane section is too narrow at its tip and at the throat."
    return (
        f"The plan's tip radius of {floor.size(cut.radius, 1)} keeps the ends clear: measure it at the bar, then the "
        "insert's profile."
    )


def next_mark(told: Told, floor: Floor) -> str | None:
    """What the next mark should look like once that is moved; None where the mark was not held against the exact gap.

    Source: worm.marks, no errors.
    """
    chart = told.chart
    if chart is None:
        return None
    spot = chart.right
    words = []
    for name, sign in zip(SIDES, (told.side, -told.side), strict=True):
        words.append(f"{name} flank {_where(told, floor, sign * spot.centre, chart)}")
    return (
        f"a wheel without errors marks {' and '.join(words)}, {_height(chart.word(spot.height))}, "
        f"{show(spot.share, '%', 0)} of each flank under {show(film(told.mark), 'um', 0)} of blue"
    )


def _where(told: Told, floor: Floor, z: float, chart: Chart) -> str:
    return (
        f"{floor.size(abs(z), 1)} from the middle towards {_towards(told, floor, z)}"
        if abs(z) >= 0.1
        else "in the middle"
    )


def _height(word: Height) -> str:
    return {"tip": "near the tip", "middle": "at middle height", "root": "near the root"}[word]


def _minutes(angle: float) -> str:
    return show(angle, "arcmin", 0 if angle > 0.0015 else 1)  # 5'


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"mark.{name}", "mesh", unit, digits, of, inputs, says)  # type: ignore[arg-type]


_TOLD = {"told": "mark.read"}
_HERE = {**_TOLD, "floor": "route.floor"}

MARK = (
    _row(
        "cutting", "", 0, cutting, {"floor": "route.floor", "mesh": ":"}, "cut and insert of the wheel that was blued"
    ),
    _row(
        "read",
        "",
        0,
        read,
        {"floor": "route.floor", "mesh": ":", "cutting": "mark.cutting"},
        "the mark held against the exact gap",
    ),
    _row("cause", "", 0, cause, _TOLD, "what the mark tells of"),
    _row("tilt", "arcmin", 1, tilt, _TOLD, "how much too far the head leaned, by the mark"),
    _row("offset", "um", 0, offset, _TOLD, "gaps from the worm's mid-plane along +z, by the mark"),
    _row("says", "", 0, says, _HERE, "what the mark tells, in words"),
    _row("move", "", 0, move, {**_HERE, "results": "known stack.combined"}, "what to move, and how far"),
    _row("next", "", 0, next_mark, _HERE, "what the next mark should look like"),
)
