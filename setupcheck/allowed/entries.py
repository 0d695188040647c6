"""Values of a job file that can be tried: where each is planned, how far its plan lets it go. Base units: mm, rad, degC, s."""

from __future__ import annotations

import math
from collections.abc import Callable

from setupcheck.flow import Review
from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Cut
from setupcheck.jobfile.touched import Touched
from setupcheck.jobfile.worm import OverBalls
from setupcheck.quantities.drive import Drive, drive
from setupcheck.quantities.entries import node_at
from setupcheck.quantities.joint_shape import drawn_diameter
from setupcheck.quantities.sized import limits_of
from setupcheck.quantities.trial import with_entry
from setupcheck.quantities.wheel_over_balls import over_planned
from setupcheck.record import record

USUAL_BOUND, USUAL_ANGLE, USUAL_HEAT = 0.010, math.radians(0.05), 5.0
"""The first stride where the plan names no bound [mm, rad, K]. Source: our screening choice."""
USUAL_SHARE, SHORTEST_TIME = 0.1, 0.5
"""The first stride of a time as a share of it, and the least [s]. Source: our screening choice."""


@record
class Entry:
    """A value that somebody types in: its path, of what kind it is, where it is planned, and the first stride from there.

    kind   size, error (about its plan), most (a bound, never below 0), angle, heat or time
    with_  the job with another value there;  least  it is never below
    """

    path: str
    kind: str
    planned: float
    stride: float
    with_: Callable[[float], LoadedJob]
    least: float = -math.inf


def entry_of(found: Review, path: str) -> Entry | None:
    """The value at a path of the job file; None where it is none that can be tried."""
    loaded, node = found.loaded, node_at(found.loaded, path)
    parent, _, name = path.rpartition(".")
    if path == "mesh.over_balls":
        return _over_balls(found, path)
    if isinstance(node, Dimension):
        return _size(loaded, path, node)
    if isinstance(node, Deviation):
        return _error(loaded, path, node)
    if isinstance(node, Touched):
        return _touched(found, path, node)
    if isinstance(node, tuple) and len(node) == 2 and name == "clearance":
        least, most = float(node[0]), float(node[1])
        stride = most - least or USUAL_BOUND
        return Entry(
            path, "most", most, stride, lambda value: with_entry(loaded, (parent,), clearance=(least, value)), least
        )
    if isinstance(node, float | int) and not isinstance(node, bool):
        return _plain(loaded, parent, name, float(node))
    return None


def _plain(loaded: LoadedJob, parent: str, name: str, value: float) -> Entry:
    """An entry that is one value: a tilt, a heat, a time, else a bound."""
    path = f"{parent}.{name}"

    def with_(other: float) -> LoadedJob:
        return with_entry(loaded, (parent,), **{name: other})

    if name == "tilt":
        return Entry(path, "angle", value, USUAL_ANGLE, with_)
    if name in ("hub", "shaft"):
        return Entry(path, "heat", value, USUAL_HEAT, with_)
    if name == "carry":
        return Entry(path, "time", value, max(USUAL_SHARE * value, SHORTEST_TIME), with_, 0.0)
    return Entry(path, "most", value, value or USUAL_BOUND, with_, 0.0)


def _touched(found: Review, path: str, node: Touched) -> Entry | None:
    """The diameter that a depth is counted from, about the drawing; None where nobody draws it."""
    cut, op = node_at(found.loaded, path.rpartition(".")[0]), int(path.split(".")[1])
    drawn = drawn_diameter(found.floor, found.floor.part_of[op], cut) if isinstance(cut, Cut) else None
    if not isinstance(drawn, float):
        return None
    return Entry(path, "size", drawn, node.at_most or USUAL_BOUND, _measured(found.loaded, path, node.uncertainty))


def _over_balls(found: Review, path: str) -> Entry | None:
    """The size over balls of the finished wheel, about what insert and depth make; None where no ball or insert is known."""
    mesh, pair = found.loaded.job.mesh, drive(found.floor)
    if mesh is None or mesh.ball_used is None or not isinstance(pair, Drive):
        return None
    planned = over_planned(found.floor, mesh, pair)
    if not isinstance(planned, float):
        return None
    known = mesh.over_balls.uncertainty if mesh.over_balls is not None else None

    def with_(value: float) -> LoadedJob:
        read = OverBalls.model_construct(measured=value, uncertainty=known or 0.0, ball=mesh.ball_used)
        return with_entry(found.loaded, ("mesh",), over_balls=read)

    return Entry(path, "size", planned, USUAL_BOUND, with_)


def _size(loaded: LoadedJob, path: str, node: Dimension) -> Entry:
    """A size, tried as measured with the uncertainty it states, about the middle of its limits."""
    limits = limits_of(node)
    planned, half = ((limits[0] + limits[1]) / 2.0, (limits[1] - limits[0]) / 2.0) if limits else (node.value, 0.0)
    stride = half or node.uncertainty or USUAL_BOUND
    return Entry(path, "size", planned, stride, _measured(loaded, path, node.uncertainty))


def _measured(loaded: LoadedJob, path: str, known: float | None) -> Callable[[float], LoadedJob]:
    """Puts a size in as measured, with the uncertainty that is stated; without one it counts as exact."""
    return lambda value: with_entry(loaded, (path,), measured=value, uncertainty=known or 0.0)


def _error(loaded: LoadedJob, path: str, node: Deviation) -> Entry:
    """An error about its plan; a run-out is never below 0."""
    signed = not path.endswith(("runout", "fit_error"))
    unknown = node.uncertainty is None and node.standard_uncertainty is None
    keys: dict[str, object] = {"uncertainty": 0.0} if unknown else {}
    return Entry(
        path,
        "error" if signed else "most",
        0.0,
        node.at_most or USUAL_BOUND,
        lambda value: with_entry(loaded, (path,), measured=value, **keys),
        -math.inf if signed else 0.0,
    )
