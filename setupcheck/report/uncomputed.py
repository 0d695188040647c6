"""What a job states and this version does not look at, so that a pass is not read as more than it is."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from itertools import groupby

from pydantic import BaseModel

from setupcheck.jobfile.models import Flat, Part, Pattern, Round, Throat
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Head, Join, Setup
from setupcheck.quantities.tilting import cuts_the_wheel
from setupcheck.record import record
from setupcheck.report.written import written

NOT_LOOKED_AT: Mapping[str, Mapping[str, str]] = {
    "Round": {"roughness": "roughness {said} of {of}", "pitch": "pitch {said} of {of}"},
    "Flat": {"roughness": "roughness {said} of {of}"},
    "Throat": {"radius": "radius {said} of {of}"},
    "Worm": {
        "profile": "profile {said}",
        "thread_thickness": "thread thickness {said}",
        "end_float": "end float {said}",
        "runout": "run-out {said}",
        "speed": "speed {said}",
    },
    "Mesh": {
        "centre_distance": "centre distance {said}",
        "shaft_angle_error": "error of the shaft angle {said}",
        "housing": "housing of {said}",
    },
    "Cutter": {
        "tip_radius": "tip radius {said}",
        "bar_diameter": "bar diameter {said}",
        "overhang": "overhang {said}",
        "insert": "insert {said}",
        "diameter": "diameter {said}",
        "speed": "speed {said}",
    },
    "Machine": {"nose_points": "nose points {said}", "cutter_stands": "cutter stands {said}", "axis": "axis {said}"},
    "Head": {
        "tilt": "tilt {said} (compared with the worm only where its wheel is cut gap by gap)",
        "uncertainty": "uncertainty of the tilt {said}",
        "leans": "leans {said}",
        "by": "tilt set by {said}",
        "sine_bar": "sine bar {said}",
        "blocks": "blocks {said}",
    },
    "MidPlane": {"pivot": "height of the pivot {said}"},
    "Divide": {"faces": "readings on {said} faces", "order": "teeth cut {said}"},
    "Cut": {
        "depth": "depth {said} of {of} (held against the passes only)",
        "depth_from": "depth of {of} counted from {said}",
        "tool_change_after": "tool change after {said} of {of}",
    },
    "Join": {
        "heat": "heat ({said})",
        "joint": "joint {said}",
        "must_carry": "must carry {said}",
        "serves_at": "serves from {said}",
    },
    "Require": {"along": "along {said}", "film": "film of oil {said}"},
}
"""Record -> key -> shop words ({said}: as written, {of}: whose), for every entry that no figure or rule reads.

`heat` is read by the cautions alone. A test holds this table and the entries that are read against the models.
"""

_COUNTS = ("tool_change_after",)
"""Keys whose bare number is no length."""


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


def _all(loaded: LoadedJob) -> Iterator[Uncomputed]:
    job = loaded.job
    shrunk = any(s.join is not None and s.join.by == "shrink" for s in job.setups)
    if "room" in job.model_fields_set and not shrunk:  # a shaft that is not chilled has the room's temperature
        yield _one(loaded, "room", "job", "room temperature {said}")
    for name, part in job.parts.items():
        yield from _part(loaded, name, part)
    for entry, path in ((job.worm, "worm"), (job.mesh, "mesh")):
        if entry is not None:
            yield from _entries(loaded, entry, path, path)
    for name, cutter in job.cutters.items():
        yield from _entries(loaded, cutter, f"cutters.{name}", f"cutter {name}")
    leaning = {s.machine for s in job.setups if cuts_the_wheel(loaded, s)}
    for name, machine in job.machines.items():
        for item in _entries(loaded, machine, f"machines.{name}", name):
            if name not in leaning or not item.at.endswith((".nose_points", ".cutter_stands")):
                yield item
    for setup in job.setups:
        yield from _setup(loaded, setup)
    for number, asked in enumerate(job.require, 1):
        yield from _entries(loaded, asked, f"require[{number}]", f"require[{number}]")


def _one(loaded: LoadedJob, path: str, owner: str, words: str, of: str = "") -> Uncomputed:
    said, key = written(loaded, path), path.rpartition(".")[2]
    if key in _COUNTS:
        said = said.removesuffix(f" {loaded.job.units}")
    if key == "serves_at":
        said = said.replace(", ", " to ")
    return Uncomputed(path, loaded.line(path), owner, words.format(said=said, of=of))


def _entries(loaded: LoadedJob, record: BaseModel, path: str, owner: str, of: str = "") -> Iterator[Uncomputed]:
    """The entries of one record that are stated; `of` names the surface they belong to."""
    for key, words in NOT_LOOKED_AT[type(record).__name__].items():
        if getattr(record, key) not in (None, ()):
            yield _one(loaded, f"{path}.{key}", owner, words, of)


def _part(loaded: LoadedJob, name: str, part: Part) -> Iterator[Uncomputed]:
    for surface, node in part.surfaces.items():
        path = f"parts.{name}.surfaces.{surface}"
        if isinstance(node, Round):
            size = node.diameter
            limited = size.lower is not None or size.upper is not None or size.uncertainty is not None
            if (size.fit is not None or limited) and (name, surface) not in _fitted(loaded):
                words = "size class {said} of {of}" if size.fit is not None else "size limits {said} of {of}"
                yield _one(loaded, f"{path}.diameter", name, words, surface)
        if isinstance(node, Round | Flat | Throat):
            yield from _entries(loaded, node, path, name, surface)
        if isinstance(node, Pattern) and node.width is not None:
            yield _one(loaded, f"{path}.width", name, "width {said} of {of}", surface)


def _setup(loaded: LoadedJob, setup: Setup) -> Iterator[Uncomputed]:
    owner, path = f"op {setup.op}", f"setups.{setup.op}"
    if setup.head is not None:
        yield from _head(loaded, setup.head, f"{path}.head", owner)
    if setup.divide is not None:
        yield from _entries(loaded, setup.divide, f"{path}.divide", owner)
    for surface, cut in setup.cut.items():
        yield from _entries(loaded, cut, f"{path}.cut.{surface}", owner, surface)
    if setup.join is not None:
        yield from _join(loaded, setup.join, f"{path}.join", owner)


def _join(loaded: LoadedJob, join: Join, path: str, owner: str) -> Iterator[Uncomputed]:
    """Of the heat of a shrink fit only what the sum of heat and need leaves out; of any other joint all of it."""
    for item in _entries(loaded, join, path, owner):
        if join.by != "shrink" or not item.at.endswith(".heat"):
            yield item
        elif join.heat is not None and join.heat.carry is not None:
            yield _one(
                loaded, f"{path}.heat.carry", owner, "carry time {said} (what it costs in heat is not taken off)"
            )


def _fitted(loaded: LoadedJob) -> set[tuple[str, str]]:
    """Surfaces whose size limits are held against each other, because they are put together."""
    refs = [loaded.ref(text) for s in loaded.job.setups if s.join is not None for text in (s.join.outer, s.join.inner)]
    return {(ref.part, ref.surface) for ref in refs}


def _head(loaded: LoadedJob, head: Head, path: str, owner: str) -> Iterator[Uncomputed]:
    """What stands of a head beside the tilt that is compared with the worm's lead angle, where a worm wheel is cut.

    A head that stands straight has nothing to compare; what the tilt does to a mid-plane found before it is not told.
    """
    setup = next(s for s in loaded.job.setups if s.head is head)
    compared = (".tilt", ".uncertainty", ".leans") if cuts_the_wheel(loaded, setup) else ()
    for item in _entries(loaded, head, path, owner):
        if not item.at.endswith(compared) and (head.tilt != 0.0 or not item.at.endswith(".tilt")):
            yield item
    if head.mid_plane is None:
        return
    if head.mid_plane.found == "before-tilt" and head.tilt != 0.0:
        yield _one(loaded, f"{path}.mid_plane.found", owner, "what the tilt does to a mid-plane found {said}")
    yield from _entries(loaded, head.mid_plane, f"{path}.mid_plane", owner)
