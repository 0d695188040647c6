"""Figures on the finished part, taken on the real geometry without any linearisation.  Lengths mm, angles rad.

The reference is always the line of an axis R.  Its frame: z along R to the part's +z side, x as near the part's mark as
a right angle allows, origin on R at the asked height of the part.  `seen_from` names the part whose frame and mark are
meant; left out, it is the part that the measured surface belongs to.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from .dial import axial, radial, sweep
from .flanks import flank_at_radius, index_on_worm, perfect_flank_angle
from .frames import Array, ComplexArray, Line, frame_on, in_plane, inverse
from .made import Made, World, axis_of, face_of, gaps_of
from .route import Question, Route

MARK = np.array([1.0, 0.0, 0.0])


@dataclass(frozen=True, eq=False, slots=True)
class Seen:
    """A measured surface brought into the frame of the reference axis."""

    made: Made
    to_reference: Array  # owner's frame -> frame of the reference axis
    to_part: Array  # frame of the reference axis -> frame it is seen from
    drawn: Array  # owner's frame -> frame it is seen from, as drawn
    height: float  # of the origin, in the frame it is seen from


def look(world: World, of: str, about: str, *, at: float | None = None, seen_from: str = "") -> Seen:
    """Bring `of` into the frame of the axis `about`, its origin at height `at` (default: mid of `of`, as drawn)."""
    made, reference = world.made(of), world.made(about)
    frame = seen_from or made.part
    drawn = world.drawn_between(made.part, frame)
    if at is None:
        at = float((drawn @ np.array([0.0, 0.0, made.drawn.mid, 1.0]))[2])
    axis: Line = axis_of(reference).moved(world.between(reference.part, frame))
    along = axis.along if axis.along[2] > 0 else -axis.along
    to_part = frame_on(axis.at_height(at), along, MARK)
    return Seen(made, inverse(to_part) @ world.between(made.part, frame), to_part, drawn, at)


def offset(world: World, of: str, about: str, *, at: float | None = None, seen_from: str = "") -> complex:
    """Axis of `of` minus axis R, in the plane square to R at the height; mm, x + iy of the part it is seen from."""
    seen = look(world, of, about, at=at, seen_from=seen_from)
    met = axis_of(seen.made).moved(seen.to_reference).at_height(0.0)
    return in_plane(seen.to_part[:3, :3] @ met)


def lean(world: World, of: str, about: str, *, seen_from: str = "") -> complex:
    """Slope of an axis, or of a face's normal, against R."""
    seen = look(world, of, about, seen_from=seen_from)
    if seen.made.drawn.kind == "face":
        return face_of(seen.made).moved(seen.to_reference).slope()
    return axis_of(seen.made).moved(seen.to_reference).slope()


def height(world: World, of: str, about: str, *, seen_from: str = "") -> float:
    """Where a face (or a tooth mid-plane) cuts R, along R from R's point at the drawn height of `of`."""
    seen = look(world, of, about, seen_from=seen_from)
    if seen.made.drawn.kind == "face":
        return face_of(seen.made).moved(seen.to_reference).height_on_axis()
    gaps = gaps_of(seen.made).moved(seen.to_reference)
    # the mid-plane is square to the axis of cutting and holds every gap's origin (a ring of holes likewise)
    return float(gaps.axis.along @ gaps.frames[0][:3, 3]) / float(gaps.axis.along[2])


def length(world: World, of: str, against: str, about: str, *, seen_from: str = "") -> float:
    """Distance on R from `against` to `of`, + when `of` lies further to the part's +z."""
    frame = seen_from or world.made(of).part
    ends = []
    for name in (of, against):
        seen = look(world, name, about, seen_from=frame)
        # both ends on the one line R: its points are counted from R's point at height 0
        stretch = 1.0 / float(seen.to_part[2, 2])
        ends.append(height(world, name, about, seen_from=frame) + seen.height * stretch)
    return ends[0] - ends[1]


def drawn_length(world: World, of: str, against: str, *, seen_from: str = "") -> float:
    """The same distance as drawn."""
    frame = seen_from or world.made(of).part
    places = []
    for name in (of, against):
        made = world.made(name)
        places.append(float((world.drawn_between(made.part, frame) @ np.array([0.0, 0.0, made.drawn.mid, 1.0]))[2]))
    return places[0] - places[1]


def run_out(world: World, of: str, about: str, *, at: float | None = None) -> float:
    """FIM of a dial on a cylinder or in a bore while the part turns about R."""
    seen = look(world, of, about, at=at)
    line = axis_of(seen.made).moved(seen.to_reference)
    inside = seen.made.drawn.kind == "bore"
    return sweep(radial(line, seen.made.drawn.radius, inside=inside, z=0.0)).fim


def face_run_out(world: World, of: str, about: str, *, across: float | None = None) -> float:
    """FIM of a dial on a face, on a circle (default: the face's diameter) about R."""
    seen = look(world, of, about)
    plane = face_of(seen.made).moved(seen.to_reference)
    radius = 0.5 * (seen.made.drawn.diameter if across is None else across)
    looks = seen.made.drawn.facing * (1 if seen.to_reference[2, 2] > 0 else -1)
    return sweep(axial(plane, radius, looks=looks)).fim


# ---------------------------------------------------------------- teeth and holes


@dataclass(frozen=True, eq=False, slots=True)
class ToothFigures:
    """Arrays of one value a gap, in order of cutting; `count` last to first closes the ring.

    gap_centre       arc of the gap's middle from where it belongs, at the pitch radius about R, counter-clockwise
    flank_ccw, _cw   the same of each flank, in the plane square to R at the drawn mid height
    outward          radial place of the gap minus pitch radius (ball reading)
    axial            place of the gap's middle along R from the drawn height
    drawn_angle      where each gap belongs, in the frame it is seen from
    """

    gap_centre: Array
    flank_ccw: Array
    flank_cw: Array
    outward: Array
    axial: Array
    drawn_angle: Array


def cumulative(deviation: Array) -> float:
    """Largest minus smallest over all gaps."""
    return float(np.max(deviation) - np.min(deviation))


def single(deviation: Array) -> float:
    """Largest step between neighbours, the closing one included."""
    return float(np.max(np.abs(np.roll(deviation, -1) - deviation)))


def _gap_frames(seen: Seen) -> tuple[Array, Array]:
    """Frames of the gaps about R (z to R's +z side) and the drawn angles, both in the frame they are seen from."""
    gaps = gaps_of(seen.made).moved(seen.to_reference)
    way = 1 if seen.drawn[2, 2] > 0 else -1
    frames = gaps.frames @ np.diag([1.0, float(way), float(way), 1.0])
    rays = np.stack([np.cos(gaps.drawn_angle), np.sin(gaps.drawn_angle), np.zeros_like(gaps.drawn_angle)])
    placed = seen.drawn[:3, :3] @ rays
    return frames, np.arctan2(placed[1], placed[0])


def _arc(points: Array, angle: Array) -> Array:
    """Angle of points (N, 3) about z beyond `angle`, in -pi .. pi."""
    return np.asarray(np.angle((points[:, 0] + 1j * points[:, 1]) * np.exp(-1j * angle)))


def teeth(world: World, of: str, about: str, *, seen_from: str = "") -> ToothFigures:
    """All tooth figures about R."""
    seen = look(world, of, about, seen_from=seen_from)
    drawn = seen.made.drawn
    frames, angle = _gap_frames(seen)
    middle = frames[:, :3, 3]
    radius = drawn.radius
    # middle line of the gap where it crosses the plane square to R: the gap runs along its z, obliquely by the lead
    run = frames[:, :3, 2] + np.tan(drawn.lead_angle) * frames[:, :3, 1]
    crossing = middle - run * (middle[:, 2] / run[:, 2])[:, None]
    width = gaps_of(seen.made).width_change
    flank = {}
    for side in (1, -1):
        points = flank_at_radius(frames, (drawn, width, side), radius)
        flank[side] = radius * _arc(points, angle + perfect_flank_angle(drawn, side))
    return ToothFigures(
        gap_centre=radius * _arc(crossing, angle),
        flank_ccw=flank[1],
        flank_cw=flank[-1],
        outward=np.hypot(crossing[:, 0], crossing[:, 1]) - radius,
        axial=middle[:, 2],
        drawn_angle=angle,
    )


def index(world: World, of: str, about: str, *, side: int, seen_from: str = "") -> Array:
    """Angle to turn the part counter-clockwise about R until each flank (+1 ccw, -1 cw) lies on one fixed worm flank.

    Involute gaps meet the straight flank of a rack at its fixed distance from R; straight gaps are met by a probe at
    the pitch radius (two straight flanks have no proper point of contact).
    """
    seen = look(world, of, about, seen_from=seen_from)
    drawn = seen.made.drawn
    frames, angle = _gap_frames(seen)
    flank = (drawn, gaps_of(seen.made).width_change, side)
    if drawn.form == "involute":
        return index_on_worm(frames, flank, angle)
    return -_arc(flank_at_radius(frames, flank, drawn.radius), angle + perfect_flank_angle(drawn, side))


@dataclass(frozen=True, eq=False, slots=True)
class HoleFigures:
    """places: complex (N,), hole axes about R in the plane square to R at the drawn height.

    deviation: places minus drawn places.  outward, sideways: its parts along and across the drawn direction.
    chords: distances of neighbours, the closing one last.  fit_centre, fit_radius: least-squares circle.
    """

    places: ComplexArray
    deviation: ComplexArray
    outward: Array
    sideways: Array
    chords: Array
    fit_centre: complex
    fit_radius: float


def holes(world: World, of: str, about: str, *, seen_from: str = "") -> HoleFigures:
    """All figures of a ring of holes about R."""
    seen = look(world, of, about, seen_from=seen_from)
    frames, angle = _gap_frames(seen)
    middle, run = frames[:, :3, 3], frames[:, :3, 2]
    met = middle - run * (middle[:, 2] / run[:, 2])[:, None]
    places = met[:, 0] + 1j * met[:, 1]
    belongs = seen.made.drawn.radius * np.exp(1j * angle)
    local = (places - belongs) * np.exp(-1j * angle)
    centre, radius = best_circle(places)
    return HoleFigures(
        places, places - belongs, local.real, local.imag, np.abs(np.roll(places, -1) - places), centre, radius
    )


def best_circle(places: ComplexArray) -> tuple[complex, float]:
    """Circle with the least sum of squared radial distances (Gauss-Newton from the mean point)."""
    centre = complex(np.mean(places))
    radius = float(np.mean(np.abs(places - centre)))
    for _ in range(50):
        away = places - centre
        distance = np.abs(away)
        slopes = np.stack([-away.real / distance, -away.imag / distance, -np.ones_like(distance)], axis=1)
        change, *_ = np.linalg.lstsq(slopes, radius - distance, rcond=None)
        centre += complex(change[0], change[1])
        radius += float(change[2])
        if float(np.max(np.abs(change))) < 1e-13:
            break
    return centre, radius


# ---------------------------------------------------------------- questions


def answer(world: World, question: Question) -> ComplexArray | Array:
    """The figure a question asks for, as an array (one value unless it is one a gap)."""
    kind, of, about = question.kind, question.of, question.about
    if kind == "offset":
        return np.array([offset(world, of, about)])
    if kind == "lean":
        return np.array([lean(world, of, about)])
    if kind == "length":
        against = question.against
        return np.array([length(world, of, against, about) - drawn_length(world, of, against)])
    if kind == "run-out":
        return np.array([run_out(world, of, about)])
    if kind == "face run-out":
        return np.array([face_run_out(world, of, about)])
    if world.made(of).drawn.kind == "holes":
        ring = holes(world, of, about)
        if kind == "gaps":
            return ring.sideways
        raise ValueError(f"'{kind}' is not asked of holes")
    if kind in ("index ccw", "index cw"):
        return index(world, of, about, side=1 if kind == "index ccw" else -1)
    figures = teeth(world, of, about)
    return {
        "gaps": figures.gap_centre,
        "flank ccw": figures.flank_ccw,
        "flank cw": figures.flank_cw,
        "wobble": figures.axial,
    }[kind]


def answers(world: World, route: Route) -> dict[Question, ComplexArray | Array]:
    """Every question of a route, in its order."""
    return {question: answer(world, question) for question in route.questions}
