"""What a job states and this version does not look at, so that a pass is not read as more than it is."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from itertools import groupby

from pydantic import BaseModel

from setupcheck.jobfile.models import Flat, Part, Pattern, Round, Throat
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.quantities.cones import bevel_of
from setupcheck.quantities.pairing import FITTED
from setupcheck.quantities.tilting import cuts_the_wheel
from setupcheck.record import record
from setupcheck.report.written import written

NOT_LOOKED_AT: Mapping[str, Mapping[str, str]] = {
    "Part": {"properties": "properties of its material ({said})"},
    "Round": {"roughness": "roughness {said} of {of}", "pitch": "pitch {said} of {of}"},
    "Flat": {"roughness": "roughness {said} of {of}"},
    "Throat": {"radius": "radius {said} of {of}"},
    "Worm": {
        "profile": "profile {said}",
        "thread_thickness": "thread thickness {said}",
        "runout": "run-out {said}",
        "speed": "speed {said}",
        "material": "worm of {said}",
    },
    "Mesh": {
        "shaft_angle_error": "error of the shaft angle {said}",
        "housing": "housing of {said}",
        "serves_at": "serves from {said}",
        "over_balls": "size over balls {said} (of a wheel cut by a single point only)",
        "contact": "contact {said} (of a wheel cut by a single point only)",
        "error_budget": "error budget {said} (held against `contact: exact` only)",
        "mark": "mark of blue ({said})",
        "backlash_read": "backlash as read (of a worm and its wheel only)",
    },
    "Cutter": {
        "tip_radius": "tip radius {said}",
        "insert": "insert {said}",
        "width": "width of the insert {said}",
        "width_at": "height {said} of that width",
        "grinding": "grinding of the insert, {said} (looked at only with `contact: exact` under mesh)",
        "turned": "turn of the insert {said} (looked at only with `contact: exact` under mesh)",
        "profile": "measured profile of the insert (looked at only with `contact: exact` under mesh)",
        "diameter": "diameter {said}",
        "speed": "speed {said}",
    },
    "Machine": {
        "nose_points": "nose points {said}",
        "cutter_stands": "cutter stands {said}",
        "axis": "axis {said}",
        "rating": "rating {said}",
    },
    "Head": {
        "tilt": "tilt {said} (compared with a worm whose wheel is cut gap by gap, or with the root cone of bevel teeth)",
        "uncertainty": "uncertainty of the tilt {said}",
        "leans": "leans {said}",
        "by": "tilt set by {said}",
        "sine_bar": "sine bar {said}",
        "blocks": "blocks {said}",
    },
    "Cut": {
        "depth": "depth {said} of {of} (held against the passes only)",
        "depth_from": "depth of {of} counted from {said}",
        "depth_error": "error of the depth of {of} {said}",
        "off_centre": "cutter off the centre of {of} {said}",
    },
    "Setup": {"travel": "travel of the cutter ({said})"},
    "Join": {
        "heat": "heat ({said})",
        "grips_first": "grips first at the {said}",
        "joint": "joint {said}",
        "friction": "friction {said}",
        "smoothing": "smoothing {said}",
        "must_carry": "must carry {said}",
        "serves_at": "serves from {said}",
        "lead_in": "lead-in {said}",
        "growth_at": "growth asked at {said}",
        "pairs": "measured pairs ({said})",
    },
    "Require": {"along": "along {said}", "film": "film of {said}"},
}
"""Record -> key -> shop words ({said}: as written, {of}: whose), for every entry that some jobs have no use for.

`_looked` says where an entry counts after all. A test holds this table and the entries that are read against the models.
"""


@record
class Uncomputed:
    """One thing stated and not looked at: its path and line in the job file, whose it is, and what it says."""

    at: str
    line: int
    owner: str
    what: str


def uncomputed(loaded: LoadedJob) -> tuple[Uncomputed, ...]:
    """Everything the job states that this version does not look at: parts, worm, mesh, tools, then by operation."""
    return tuple(_all(loaded))


def in_lines(found: Sequence[Uncomputed]) -> list[str]:
    """One text for each owner, what stands on one line of the file together: `op 70: joint degreased (line 122), …`."""
    lines = []
    for owner, items in groupby(found, key=lambda item: item.owner):
        told = [
            f"{', '.join(item.what for item in same)} (line {line})"
            for line, same in groupby(items, key=lambda item: item.line)
        ]
        lines.append(f"{owner}: {'; '.join(told)}")
    return lines


@record
class _Looked:
    """What of a job the figures and rules do look at, by path: an entry under one of these is not told.

    A path stands for itself and everything below it.
    """

    paths: frozenset[str]

    def at(self, path: str) -> bool:
        return any(path == p or path.startswith(p + ".") for p in self.paths)


def _looked(loaded: LoadedJob) -> _Looked:
    """Entries that count in this job, though not in every job."""
    found = (_of_joints, _of_the_wheel, _of_heads, _of_gaps, _of_limits)
    return _Looked(frozenset(one for of in found for one in of(loaded)))


_OF_A_FIT = ("joint", "friction", "smoothing", "must_carry", "serves_at", "growth_at", "pairs")


def _of_joints(loaded: LoadedJob) -> Iterator[str]:
    """What an interference joint is computed from; of any other joint nothing but where it sits."""
    for setup in loaded.job.setups:
        join = setup.join
        if join is None or join.by not in FITTED:
            continue
        path = f"setups.{setup.op}.join"
        yield from (f"{path}.{key}" for key in _OF_A_FIT)
        if join.by == "shrink":
            yield from (f"{path}.heat", f"{path}.grips_first")
        else:
            yield from (f"machines.{setup.machine}.rating", f"{path}.lead_in")
        for ref in (loaded.ref(join.outer), loaded.ref(join.inner)):
            yield f"parts.{ref.part}.surfaces.{ref.surface}.roughness"
            yield f"parts.{ref.part}.properties"


def _of_the_wheel(loaded: LoadedJob) -> Iterator[str]:
    """What the wheel of a worm and its single-point cutter are computed from, and the backlash if one is required."""
    job = loaded.job
    if job.mesh is None or job.worm is None:
        return
    wheel = loaded.ref(job.mesh.wheel)
    asked = any(r.what == "backlash" for r in job.require)
    yield "mesh.backlash_read"
    if asked and job.mesh.backlash_read is not None:
        yield from ("worm.material", "mesh.housing", "mesh.serves_at", f"parts.{wheel.part}.properties")
    for setup in job.setups:
        for name, cut in setup.cut.items():
            ref = loaded.ref(name, setup.part)
            kind = job.cutters[cut.cutter].kind if cut.cutter is not None else ""
            if (ref.part, ref.surface) != (wheel.part, wheel.surface):
                continue
            if kind == "hob":
                yield f"cutters.{cut.cutter}.diameter"
            if kind != "single-point":
                continue
            path = f"setups.{setup.op}.cut.{name}"
            yield from (f"{path}.depth", f"{path}.depth_from", "worm.profile", "worm.thread_thickness", "mesh.mark")
            yield "mesh.over_balls"
            yield from (f"cutters.{cut.cutter}.tip_radius", f"cutters.{cut.cutter}.insert")
            if job.mesh.contact is not None:
                yield from (
                    f"cutters.{cut.cutter}.{key}" for key in ("grinding", "profile", "turned", "width", "width_at")
                )
            if cut.depth_from is not None:
                touched = loaded.ref(cut.depth_from.surface, wheel.part)
                yield f"parts.{touched.part}.surfaces.{touched.surface}.radius"
            if job.mesh.contact is not None:
                yield from ("mesh.contact", "mesh.error_budget", f"{path}.depth_error")
            if asked or job.mesh.over_balls is not None:
                yield from (f"{path}.depth_error", f"cutters.{cut.cutter}.width", f"cutters.{cut.cutter}.width_at")
            if asked:
                yield from ("worm.material", "mesh.housing", "mesh.serves_at", f"parts.{wheel.part}.properties")


_OF_A_CONE = ("tilt", "leans", "uncertainty", "by", "sine_bar", "blocks")


def _of_heads(loaded: LoadedJob) -> Iterator[str]:
    """A head that is tilted for a worm wheel: compared with the worm, with the side it leans to and how it is set."""
    for setup in loaded.job.setups:
        if cuts_the_wheel(loaded, setup):
            yield from (f"setups.{setup.op}.head", "mesh.shaft_angle_error")
            yield from (f"machines.{setup.machine}.{key}" for key in ("nose_points", "cutter_stands"))
        elif bevel_of(loaded, setup) is not None:
            yield from (f"setups.{setup.op}.head.{key}" for key in _OF_A_CONE)
            yield f"machines.{setup.machine}.cutter_stands"
        elif setup.head is not None and setup.head.tilt == 0.0:
            yield f"setups.{setup.op}.head.tilt"


def _of_gaps(loaded: LoadedJob) -> Iterator[str]:
    """What the cutter stands beside gaps, and how the work lies to its travel: gaps alone hear of it, a slot has no length."""
    for setup in loaded.job.setups:
        for name in setup.cut:
            ref = loaded.ref(name, setup.part)
            kind = loaded.job.parts[ref.part].surfaces[ref.surface].kind
            if kind in ("teeth", "slot"):
                yield f"setups.{setup.op}.cut.{name}.off_centre"
            if kind == "teeth":
                yield f"setups.{setup.op}.travel"


def _of_limits(loaded: LoadedJob) -> Iterator[str]:
    for number, asked in enumerate(loaded.job.require, 1):
        if asked.what == "backlash":
            yield f"require[{number}].along"
        if asked.what in ("contact-length", "contact-area"):
            yield f"require[{number}].film"


def _all(loaded: LoadedJob) -> Iterator[Uncomputed]:
    job, looked = loaded.job, _looked(loaded)
    shrunk = any(s.join is not None and s.join.by == "shrink" for s in job.setups)
    if "room" in job.model_fields_set and not shrunk:  # a shaft that is not chilled has the room's temperature
        yield _one(loaded, "room", "job", "room temperature {said}")
    for name, part in job.parts.items():
        yield from _part(loaded, looked, name, part)
    for part_of_drive, path in ((job.worm, "worm"), (job.mesh, "mesh")):
        if part_of_drive is not None:
            yield from _entries(loaded, looked, part_of_drive, path, path)
    for name, cutter in job.cutters.items():
        yield from _entries(loaded, looked, cutter, f"cutters.{name}", f"cutter {name}")
    for name, machine in job.machines.items():
        yield from _entries(loaded, looked, machine, f"machines.{name}", name)
    for setup in job.setups:
        yield from _setup(loaded, looked, setup)
    for number, asked in enumerate(job.require, 1):
        yield from _entries(loaded, looked, asked, f"require[{number}]", f"require[{number}]")


def _one(loaded: LoadedJob, path: str, owner: str, words: str, of: str = "") -> Uncomputed:
    said, key = written(loaded, path), path.rpartition(".")[2]
    if key == "serves_at":
        said = said.replace(", ", " to ")
    return Uncomputed(path, loaded.line(path), owner, words.format(said=said, of=of))


def _entries(
    loaded: LoadedJob, looked: _Looked, record: BaseModel, path: str, owner: str, of: str = ""
) -> Iterator[Uncomputed]:
    """The entries of one record that are stated and count for nothing; `of` names the surface they belong to."""
    for key, words in NOT_LOOKED_AT[type(record).__name__].items():
        if getattr(record, key) not in (None, ()) and not looked.at(f"{path}.{key}"):
            yield _one(loaded, f"{path}.{key}", owner, words, of)


def _part(loaded: LoadedJob, looked: _Looked, name: str, part: Part) -> Iterator[Uncomputed]:
    yield from _entries(loaded, looked, part, f"parts.{name}", name)
    for surface, node in part.surfaces.items():
        path = f"parts.{name}.surfaces.{surface}"
        if isinstance(node, Round):
            size = node.diameter
            limited = size.lower is not None or size.upper is not None or size.uncertainty is not None
            if (size.fit is not None or limited) and (name, surface) not in _fitted(loaded):
                words = "size class {said} of {of}" if size.fit is not None else "size limits {said} of {of}"
                yield _one(loaded, f"{path}.diameter", name, words, surface)
        if isinstance(node, Round | Flat | Throat):
            yield from _entries(loaded, looked, node, path, name, surface)
        if isinstance(node, Pattern) and node.width is not None:
            yield _one(loaded, f"{path}.width", name, "width {said} of {of}", surface)


def _setup(loaded: LoadedJob, looked: _Looked, setup: Setup) -> Iterator[Uncomputed]:
    owner, path = f"op {setup.op}", f"setups.{setup.op}"
    yield from _entries(loaded, looked, setup, path, owner)
    if setup.head is not None:
        yield from _entries(loaded, looked, setup.head, f"{path}.head", owner)
    for surface, cut in setup.cut.items():
        yield from _entries(loaded, looked, cut, f"{path}.cut.{surface}", owner, surface)
    if setup.join is not None:
        yield from _entries(loaded, looked, setup.join, f"{path}.join", owner)


def _fitted(loaded: LoadedJob) -> set[tuple[str, str]]:
    """Surfaces whose size limits are looked at: put together, or the hole of a part that a joint presses together."""
    joins = [s.join for s in loaded.job.setups if s.join is not None]
    refs = [loaded.ref(text) for join in joins for text in (join.outer, join.inner)]
    pressed = {loaded.ref(join.inner).part for join in joins if join.by in FITTED}
    holes = {
        (name, surface)
        for name in pressed
        for surface, node in loaded.job.parts[name].surfaces.items()
        if isinstance(node, Round) and node.kind == "bore"
    }
    return {(ref.part, ref.surface) for ref in refs} | holes
