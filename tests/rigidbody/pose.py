"""How a part comes to stand: Newton on the physical statements of a hold.  Lengths mm, angles rad.

A pose is `shift . tilt . turn . drawn pose`, six unknowns.  Each statement (a dial reading, a contact, an angle) says
what must be true of the standing geometry; together there are always six equations.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable

import numpy as np

from .dial import axial, radial, sweep
from .frames import Array, Line, Plane, frame_on, in_plane, inverse, plane_at, shift, turn, turn_z, way_round
from .made import World, axis_of, face_of, gaps_of
from .route import (
    BoreSquares,
    Centre,
    CentredAndSquared,
    Clock,
    Join,
    Lean,
    NoClock,
    NoStop,
    Offset,
    PointStop,
    Pushed,
    RadialDial,
    RingStop,
    Setup,
    Square,
)

Misfit = Callable[[Array], list[float]]  # pose of the setup's assembly frame -> what is not yet true
_STEPS = np.array([1e-4, 1e-4, 1e-4, 1e-6, 1e-6, 1e-6])  # mm, rad: large against rounding, small against curvature


def moved_from(drawn: Array, unknowns: Array) -> Array:
    """Actual pose: the drawn one turned about the machine axis, tilted, displaced."""
    x, y, z, tilt_x, tilt_y, turned = unknowns
    return shift(x, y, z) @ turn(tilt_x, tilt_y, 0.0) @ turn_z(turned) @ drawn


def solve(drawn: Array, misfits: list[Misfit], *, turned: float | None, carries: Array | None = None) -> Array:
    """Pose in which every statement holds.  `turned` fixes the sixth unknown when no statement sets the angle.

    The unknowns move the part from its `drawn` pose; `carries` is what hangs on it (assembly frame -> part frame).
    """
    carried = np.eye(4) if carries is None else carries
    free = 6 if turned is None else 5
    unknowns = np.zeros(6)
    unknowns[5] = 0.0 if turned is None else turned

    def off(values: Array) -> Array:
        pose = moved_from(drawn, values) @ carried
        return np.array([number for misfit in misfits for number in misfit(pose)])

    wrong = off(unknowns)
    if wrong.size != free:
        raise ValueError(f"a hold needs {free} statements, there are {wrong.size}")
    slopes = np.empty((free, free))
    for k in range(free):
        there, back = unknowns.copy(), unknowns.copy()
        there[k] += _STEPS[k]
        back[k] -= _STEPS[k]
        slopes[:, k] = (off(there) - off(back)) / (2.0 * _STEPS[k])
    # the slopes change by some thousandths over these small motions: one set of them serves every step
    for _ in range(60):
        correction = np.linalg.solve(slopes, -wrong)
        unknowns[:free] += correction
        wrong = off(unknowns)
        if np.all(np.abs(correction) < _STEPS[:free] * 1e-6):  # 1e-10 mm, 1e-12 rad
            return moved_from(drawn, unknowns) @ carried
    raise ArithmeticError(f"the hold does not settle, last misfit {np.max(np.abs(wrong)):.3g}")


def drawn_pose(way: int, insertion: float, z: float = 0.0) -> Array:
    """Part standing as drawn: its mark at the machine angle `insertion`, its origin at Z = z."""
    return shift(0.0, 0.0, z) @ turn_z(insertion) @ way_round(way)


def _part_direction(pose: Array, angle: float) -> complex:
    """Direction in the part's frame of what stands at a machine angle."""
    seen = pose[:3, :3].T @ np.array([math.cos(angle), math.sin(angle), 0.0])
    along = in_plane(seen)
    return along / abs(along)


def _pair(value: complex) -> list[float]:
    return [value.real, value.imag]


def _centred(world: World, setup: Setup, hold: Centre) -> Misfit:
    made = world.made(hold.on)
    to_assembly, frame = world.place[made.part], world.place[setup.part]
    plane = np.array([0.0, 0.0, hold.z, 1.0])

    def where(pose: Array) -> tuple[Line, float]:
        return axis_of(made).moved(pose @ to_assembly), float((pose @ frame @ plane)[2])

    by = hold.by
    if isinstance(by, RadialDial) and by.fim != 0.0:
        if made.drawn.kind not in ("cylinder", "bore"):
            raise ValueError(f"no sweep on {hold.on}: give the offset of its axis")
        wanted = 0.5 * by.fim * cmath.exp(1j * by.high_at)

        def dialled(pose: Array) -> list[float]:
            line, height = where(pose)
            got = sweep(radial(line, made.drawn.radius, inside=made.drawn.kind == "bore", z=height))
            return _pair(0.5 * got.fim * _part_direction(pose @ frame, got.high_at) - wanted)

        return dialled
    if isinstance(by, Offset):
        target = by.vector
    elif isinstance(by, Pushed):
        # two circles in the centring plane touch when their centres are half the diametral clearance apart
        target = 0.5 * by.clearance * cmath.exp(1j * by.towards)
    else:
        target = 0j

    def placed(pose: Array) -> list[float]:
        line, height = where(pose)
        return _pair(in_plane(line.at_height(height)) - target)

    return placed


def _squared(world: World, setup: Setup, hold: Square) -> Misfit:
    made = world.made(hold.on)
    to_assembly, frame = world.place[made.part], world.place[setup.part]
    by = hold.by
    if isinstance(by, Lean) or by.fim == 0.0:
        slope = by.slope if isinstance(by, Lean) else 0j
        return lambda pose: _pair(face_of(made).moved(pose @ to_assembly).slope() - slope)
    wanted = by.fim / by.across * cmath.exp(1j * by.high_at)
    across = by.across

    def dialled(pose: Array) -> list[float]:
        looks = made.drawn.facing * (1 if (pose @ to_assembly)[2, 2] > 0 else -1)
        got = sweep(axial(face_of(made).moved(pose @ to_assembly), 0.5 * across, looks=looks))
        return _pair(got.fim / across * _part_direction(pose @ frame, got.high_at) - wanted)

    return dialled


def _touching(face: Plane, stop: Plane, hold: PointStop | RingStop, looks: int) -> float:
    """Distance along the axis still to go until the face rests on the stop (0 when it does)."""
    gap = face.height_on_axis() - stop.height_on_axis()
    wedge = face.slope() - stop.slope()  # the gap over p is gap - Re(conj(wedge) p)
    if isinstance(hold, PointStop):
        return gap - (wedge.conjugate() * cmath.rect(hold.radius, hold.angle)).real
    # the face's highest point, on the side to which it looks, comes first: extremum of the gap over the ring
    return gap + looks * hold.radius * abs(wedge)


def _stopped(world: World, setup: Setup, drawn: Array) -> Misfit:
    hold = setup.stop
    if isinstance(hold, NoStop):
        frame, axial_place = world.place[setup.part], hold.axial
        return lambda pose: [float((pose @ frame)[2, 3]) - axial_place]
    made = world.made(hold.on)
    to_assembly = world.place[made.part]
    standing = drawn @ world.nominal[made.part]  # as drawn: where the stop belongs
    place = float((standing @ np.array([0.0, 0.0, made.drawn.mid, 1.0]))[2])
    looks = made.drawn.facing * (1 if standing[2, 2] > 0 else -1)
    stop = plane_at(place + hold.stands_off, 0j)
    return lambda pose: [_touching(face_of(made).moved(pose @ to_assembly), stop, hold, looks)]


def _clocked(world: World, hold: Clock, drawn: Array) -> Misfit:
    made = world.made(hold.on)
    to_assembly = world.place[made.part]
    gaps = gaps_of(made)
    belongs = np.array([*_unit(float(gaps.drawn_angle[hold.number - 1])), 0.0])
    direction = in_plane((drawn @ world.nominal[made.part])[:3, :3] @ belongs) * cmath.exp(1j * hold.error)
    middle = gaps.frames[hold.number - 1][:, 3]
    return lambda pose: [cmath.phase(in_plane(pose @ to_assembly @ middle) / direction)]


def _unit(angle: float) -> tuple[float, float]:
    return math.cos(angle), math.sin(angle)


def stand(world: World, setup: Setup) -> tuple[Array, Array]:
    """Actual and drawn pose of a setup: frame of the part's assembly -> machine frame."""
    of_part = drawn_pose(setup.looks_at_tool, setup.insertion)
    carries = inverse(world.place[setup.part])
    drawn = of_part @ inverse(world.nominal[setup.part])
    hold = setup.hold
    if isinstance(hold, CentredAndSquared):
        misfits = [_centred(world, setup, hold.centre), _squared(world, setup, hold.square)]
    else:
        misfits = [_centred(world, setup, hold.first), _centred(world, setup, hold.second)]
    misfits.append(_stopped(world, setup, drawn))
    if isinstance(setup.clock, NoClock):
        return solve(of_part, misfits, turned=setup.clock.turned, carries=carries), drawn
    misfits.append(_clocked(world, setup.clock, drawn))
    return solve(of_part, misfits, turned=None, carries=carries), drawn


def seat(world: World, join: Join) -> tuple[Array, Array]:
    """Actual and drawn pose of a joint: outer part's frame -> inner part's frame.

    Solved in a frame on the journal's axis, which takes the place of the machine axis.
    """
    outer, journal = world.made(join.outer), world.made(join.inner)
    face, shoulder = world.made(join.seat.on), world.made(join.seat.against)
    if {outer.part, journal.part} != {face.part, shoulder.part} or outer.part != face.part:
        raise ValueError("the seat's face belongs to the outer part, the shoulder to the inner")
    axis = axis_of(journal)
    along = axis.along if axis.along[2] > 0 else -axis.along
    x, y, _ = axis.at_height(0.0)
    on_journal = frame_on(np.array([x, y, 0.0]), along, np.array([1.0, 0.0, 0.0]))
    from_inner = inverse(on_journal)
    looks = shoulder.drawn.facing
    if face.drawn.facing * join.way != -looks:
        raise ValueError("the seat's face and the shoulder do not look at each other")
    real_shoulder = face_of(shoulder).moved(from_inner)
    rests = plane_at(
        real_shoulder.height_on_axis() + looks * (join.seat.spacer + join.seat.spacer_error), real_shoulder.slope()
    )
    z = shoulder.drawn.mid + looks * join.seat.spacer - join.way * face.drawn.mid
    drawn = drawn_pose(join.way, join.insertion, z)
    middle = np.array([0.0, 0.0, outer.drawn.mid, 1.0])

    def centred(pose: Array) -> list[float]:
        line = axis_of(outer).moved(pose)
        return _pair(in_plane(line.at_height(float((pose @ middle)[2]))) - join.offset)

    square = join.square
    if isinstance(square, BoreSquares):
        lean = square.lean

        def squared(pose: Array) -> list[float]:
            return _pair(axis_of(outer).moved(pose).slope() - lean)
    else:
        squaring = world.made(square.on)
        wanted = face_of(world.made(square.against)).moved(from_inner).slope() + square.wedge

        def squared(pose: Array) -> list[float]:
            return _pair(face_of(squaring).moved(pose).slope() - wanted)

    touch: PointStop | RingStop
    if join.seat.touch == "ring":
        touch = RingStop(join.seat.on, join.seat.radius)
    else:
        touch = PointStop(join.seat.on, join.seat.radius, join.seat.angle)

    def seated(pose: Array) -> list[float]:
        return [_touching(face_of(face).moved(pose), rests, touch, -looks)]

    pose = solve(drawn, [centred, squared, seated], turned=join.turned)
    return on_journal @ pose, drawn
