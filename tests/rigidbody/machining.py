"""Runs a route: each holding gets its exact pose, each cut is left in the part at its real place."""

from __future__ import annotations

import cmath
import math

import numpy as np

from .frames import Array, in_plane, inverse, line_through, plane_at
from .made import Gaps, Geometry, Made, World, drawing, new_world
from .pose import seat, stand
from .route import Cut, CutTeeth, Drill, Existing, Join, Part, Route, Setup, Surface, Turn


def run(route: Route) -> World:
    """The finished parts, each surface state kept."""
    world = new_world(route.parts)
    for part in route.parts:
        for given in part.existing:
            drawn = next(s for s in part.surfaces if s.name == given.surface)
            world.states[f"{part.name}.{given.surface}"] = [_given(part, drawn, given)]
    for step in route.steps:
        if isinstance(step, Join):
            _join(world, step)
        else:
            _machine(world, route, step)
    return world


def _given(part: Part, drawn: Surface, given: Existing) -> Made:
    geometry: Geometry
    if drawn.kind == "face":
        geometry = plane_at(drawn.mid + given.axial, given.lean)
    elif drawn.kind in ("cylinder", "bore"):
        geometry = line_through(given.offset, drawn.mid, given.lean)
    else:
        axis = line_through(given.offset, drawn.mid, given.lean)
        drawn_angle = np.arange(drawn.count) * (2.0 * math.pi / drawn.count)
        angles = drawn_angle + given.turned + np.array(given.division or (0.0,) * drawn.count)
        origin = np.array([given.offset.real, given.offset.imag, drawn.mid + given.axial])
        along = axis.along
        frames = np.stack([_gap_frame(origin, along, complex(drawn.radius), float(a)) for a in angles])
        geometry = Gaps(axis, frames, np.zeros(drawn.count), drawn_angle)
    return Made(part.name, drawn, 0, geometry)


def _gap_frame(centre: Array, along: Array, reach: complex, angle: float) -> Array:
    """Frame of a gap at centre + reach (outwards, counter-clockwise) in the direction `angle` about `along`."""
    x = np.array([1.0, 0.0, 0.0]) - along[0] * along
    x = x / np.linalg.norm(x)
    y = np.cross(along, x)
    out = math.cos(angle) * x + math.sin(angle) * y
    side = np.cross(along, out)
    placed = np.eye(4)
    placed[:3, 0], placed[:3, 1], placed[:3, 2] = out, side, along
    placed[:3, 3] = centre + reach.real * out + reach.imag * side
    return placed


def _machine(world: World, route: Route, setup: Setup) -> None:
    pose, drawn_pose = stand(world, setup)
    fresh: list[tuple[str, Made]] = []
    for cut in setup.cuts:
        owner, drawn = drawing(route, cut.surface)
        if world.together[owner] != world.together[setup.part]:
            raise LookupError(f"op {setup.op} cuts {cut.surface}, which is not in the machine")
        to_owner = inverse(pose @ world.place[owner])
        standing = drawn_pose @ world.nominal[owner]
        place = float((standing @ np.array([0.0, 0.0, drawn.mid, 1.0]))[2])
        fresh.append((cut.surface, Made(owner, drawn, setup.op, _cut(cut, drawn, standing, place).moved(to_owner))))
    for name, made in fresh:  # only now: a hold refers to the states before this setup
        world.states.setdefault(name, []).append(made)


def _cut(cut: Cut, drawn: Surface, standing: Array, place: float) -> Geometry:
    """Geometry in the machine frame.  standing: part as drawn -> machine; place: machine Z where the cut belongs."""
    if isinstance(cut, Turn):
        if drawn.kind == "face":
            return plane_at(place + cut.dial, cut.machine_lean)
        if drawn.kind in ("cylinder", "bore"):
            return line_through(cut.machine_error, place, cut.machine_lean)
        raise ValueError(f"{cut.surface} is not turned")
    if (drawn.kind == "teeth") != isinstance(cut, CutTeeth) or drawn.kind not in ("teeth", "holes"):
        raise ValueError(f"{cut.surface} cannot be made by '{cut.kind}'")
    way = 1 if standing[2, 2] > 0 else -1
    first = np.array([math.cos(cut.first_at), math.sin(cut.first_at), 0.0])
    steps = np.arange(drawn.count) * (2.0 * math.pi / drawn.count)
    division = np.array(cut.division) if cut.division else np.zeros(drawn.count)
    angles = cmath.phase(in_plane(standing[:3, :3] @ first)) + steps + division
    reach = np.full(drawn.count, complex(drawn.radius))
    width = np.zeros(drawn.count)
    if isinstance(cut, Drill):
        reach += cut.spindle_to_axis + (np.array(cut.scatter) if cut.scatter else 0.0)
    elif cut.width_change:
        width = np.array(cut.width_change)
    dial = cut.dial if isinstance(cut, CutTeeth) else 0.0
    axis = line_through(cut.machine_error, place, 0j)
    centre = np.array([cut.machine_error.real, cut.machine_error.imag, place + dial])
    frames = np.stack(
        [_gap_frame(centre, axis.along, complex(r), float(a)) for r, a in zip(reach, angles, strict=True)]
    )
    # z of a gap's frame looks to the part's +z: turned over about the outward direction when the part is reversed
    frames = frames @ np.diag([1.0, float(way), float(way), 1.0])
    return Gaps(axis, frames, width, cut.first_at + way * steps)


def _join(world: World, join: Join) -> None:
    pose, drawn = seat(world, join)
    outer, inner = join.outer.partition(".")[0], join.inner.partition(".")[0]
    if world.together[outer] == world.together[inner]:
        raise ValueError(f"{outer} and {inner} are one assembly already")
    into = world.place[inner] @ pose @ inverse(world.place[outer])
    drawn_into = world.nominal[inner] @ drawn @ inverse(world.nominal[outer])
    leaving = world.together[outer]
    for part in [name for name, group in world.together.items() if group == leaving]:
        world.place[part] = into @ world.place[part]
        world.nominal[part] = drawn_into @ world.nominal[part]
        world.together[part] = world.together[inner]
