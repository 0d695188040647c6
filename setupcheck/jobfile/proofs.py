"""Readings gap by gap that cannot be: prove-out gaps and backlash read, at gaps that are not there or twice. Sizes mm."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping

from setupcheck.jobfile.drawing import Drawing, count_of, spoken
from setupcheck.jobfile.models import Round, Toothing
from setupcheck.jobfile.names import Miss
from setupcheck.jobfile.nodes import map_of
from setupcheck.jobfile.prove_out import gap_number
from setupcheck.notation import quoted


def unlikely(drawing: Drawing) -> Iterator[Miss]:
    """All prove-out gaps that contradict the cut they belong to, and backlash read at gaps that the wheel has not."""
    yield from _backlash(drawing)
    for i, setup in enumerate(drawing.setups):
        for name, ref, cut in drawing.cut_by(setup):
            if "prove_out" not in cut:
                continue
            path, proof, surface = (
                ("setups", i, "cut", name, "prove_out"),
                map_of(cut["prove_out"]),
                drawing.surface(ref),
            )
            if surface is not None and not isinstance(surface, Toothing):
                yield Miss(path, f"{name} is {spoken(surface)}, which has no gaps. Write prove_out at the cut of teeth")
                continue
            shallow, whole = drawing.length(proof.get("depth")), drawing.length(cut.get("depth"))
            if shallow is not None and whole is not None and shallow >= whole:
                says = f"prove-out gaps of {drawing.shown(shallow)} leave nothing of a depth of {drawing.shown(whole)}"
                yield Miss((*path, "depth"), f"{says}. Write a smaller depth")
            count = count_of(surface)
            for gap, message in _gaps(map_of(proof.get("readings")), name, count):
                yield Miss((*path, "readings", gap), message, key=True)
            about = drawing.surface(drawing.ref(proof.get("about"), ref.part))
            if about is not None and not isinstance(about, Round):
                says = f"a part does not turn about {spoken(about)}"
                yield Miss((*path, "about"), f"{says}. Write the cylinder or bore whose axis it turned about")


def _backlash(drawing: Drawing) -> Iterator[Miss]:
    """Backlash read at gaps that the wheel has not, or at one twice, or larger than a pitch: more than any gap is wide."""
    mesh, path = map_of(drawing.data.get("mesh")), ("mesh", "backlash_read", "readings")
    wheel, read = drawing.ref(mesh.get("wheel")), map_of(map_of(mesh.get("backlash_read")).get("readings"))
    teeth = drawing.surface(wheel)
    if wheel is None or not isinstance(teeth, Toothing):
        return
    for gap, message in _gaps(read, wheel.surface, teeth.count):
        yield Miss((*path, gap), message, key=True)
    pitch = math.pi * teeth.on_circle / teeth.count
    for gap, value in read.items():
        travel = drawing.length(value)
        if travel is not None and travel > pitch:
            says = f"backlash of {drawing.shown(travel)} is more than the pitch of the teeth"
            hint = f"{drawing.shown(round(pitch, 2))}. Write what a dial on the wheel travels between both flanks"
            yield Miss((*path, gap), f"{says}, {hint}")


def _gaps(readings: Mapping[str, object], name: str, count: int | None) -> Iterator[tuple[str, str]]:
    """(key, message) of readings that name no gap, one that is not there, or the same one twice."""
    seen: set[int] = set()
    for gap in readings:
        number = gap_number(gap)
        if number is None:
            yield gap, f"{quoted(gap)} names no gap. Write it as in gap 19, in the order of cutting"
        elif count is not None and number > count:
            yield gap, f"{name} has {count} gaps, and none is number {number}. Write a number from 1 to {count}"
        elif number in seen:
            yield gap, f"gap {number} is read twice. Write the mean of both readings"
        else:
            seen.add(number)
