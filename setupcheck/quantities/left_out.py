"""Entries that the job leaves out, and what stands in for each: a default is never taken for what the planner wrote."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.jobfile.models import Deviation, Flat, Round, Toothing
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.dividing import HAS_WHEEL
from setupcheck.quantities.pairing import FITTED
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.worm_sizes import pitch_of_the_wheel
from setupcheck.record import record

FACED = ("face-run-out", "squareness")
"""Figures of a face that are judged across a circle."""
OF_FACES = (*FACED, "length", "allowance")
LOADS = {"torque": "torque", "axial_force": "force along the axis"}


ORDINARY_DIAL = 0.010
"""One division of the dial that stands for one nobody names [mm]. Source: common practice, rules/data/typical.yaml."""


@record
class LeftOut:
    """One entry that is left out: its path in the job file, what stands in for it, and its operation."""

    at: str
    what: str
    op: int | None = None


def left_out(loaded: LoadedJob) -> tuple[LeftOut, ...]:
    """Every entry that the job leaves out and a figure may rest on, alike ones side by side."""
    return tuple(sorted(_all(loaded), key=lambda one: one.what))


def stand_in(entry: LeftOut) -> str:
    """What the program goes on with. Source: the job file, and what this package takes where it says nothing."""
    return entry.what


def not_made(floor: Floor, part: str) -> str | None:
    """Surfaces of a part that no operation cuts and that its blank does not bring, or `none`; None for a part nobody machines.

    Source: the part as drawn and the route of the job file.
    """
    loaded = floor.loaded
    refs = [loaded.ref(name, setup.part) for setup in loaded.job.setups for name in setup.cut]
    cut = {ref.surface for ref in refs if ref.part == part}
    if not cut:
        return None
    surfaces = loaded.job.parts[part].surfaces.items()
    return ", ".join(name for name, surface in surfaces if name not in cut and surface.made != "stock") or "none"


def _all(loaded: LoadedJob) -> Iterator[LeftOut]:
    job = loaded.job
    if "confidence" not in job.model_fields_set and job.require:
        yield LeftOut("confidence", "likely means 95 in 100 draws")
    if "room" not in job.model_fields_set and any(s.join is not None and s.join.heat is not None for s in job.setups):
        yield LeftOut("room", "the shop at 20 degC")
    if pitch_of_the_wheel(loaded):
        yield LeftOut("worm.axial_module", "the pitch that the wheel was drawn for")
    for setup in job.setups:
        yield from (LeftOut(one.at, one.what, setup.op) for one in _of_setup(loaded, setup))
    for name, part in job.parts.items():
        if part.properties is not None and part.properties.heat_cap is None and _heated(loaded, name):
            yield LeftOut(f"parts.{name}.properties.heat_cap", "heated no further than others of its class")
        for of, teeth in part.surfaces.items():
            if isinstance(teeth, Toothing) and teeth.width is None:
                yield LeftOut(f"parts.{name}.surfaces.{of}.width", "teeth looked at in their middle")
    for i, required in enumerate(job.require, start=1):
        if required.what in FACED and required.across is None:
            yield LeftOut(f"require[{i}].across", "judged across the face's own diameter")
    for ref in _faces(loaded):
        surface = _surface(loaded, ref)
        if isinstance(surface, Flat) and surface.kind == "face" and surface.diameter is None:
            at = f"parts.{ref.part}.surfaces.{ref.surface}.diameter"
            yield LeftOut(at, "a face that ends where the metal beside it does")


def _heated(loaded: LoadedJob, part: str) -> bool:
    """Whether a part is made hot, or cold, for a joint."""
    joins = [setup.join for setup in loaded.job.setups if setup.join is not None and setup.join.heat is not None]
    return any(part in (loaded.ref(join.outer).part, loaded.ref(join.inner).part) for join in joins)


def _surface(loaded: LoadedJob, ref: Ref) -> object:
    return loaded.job.parts[ref.part].surfaces[ref.surface]


def _faces(loaded: LoadedJob) -> Iterator[Ref]:
    """What is cut, judged or met by another part: where the size of a face can count. Each once."""
    job = loaded.job
    named = [loaded.ref(name, setup.part) for setup in job.setups for name in setup.cut]
    named += [loaded.ref(text) for r in job.require if r.what in OF_FACES for text in (r.of, r.about) if text]
    named += [loaded.ref(s.join.stop.on) for s in job.setups if s.join is not None and s.join.stop is not None]
    yield from dict.fromkeys(Ref(ref.part, ref.surface) for ref in named)


def _of_readings(setup: Setup, path: str) -> Iterator[LeftOut]:
    """Dial readings that are half written: what was planned, what was read, what it was read by."""
    hold, join = setup.hold, setup.join
    entries = [(f"{path}.hold.{key}", getattr(hold, key, None), "runout") for key in ("centre", "and_centre")]
    entries.append((f"{path}.hold.square", getattr(hold, "square", None), "face_runout"))
    entries.append((f"{path}.join.trued", join.trued if join is not None else None, "runout"))
    for where, entry, name in entries:
        given = getattr(entry, name, None)
        if not isinstance(given, Deviation):
            continue
        at = f"{where}.{name}"
        known = given.uncertainty is not None or given.standard_uncertainty is not None or given.high_at is not None
        if given.measured is not None and given.at_most is None:
            yield LeftOut(f"{at}.at_most", "no plan that the reading is held against")
        if given.measured is None and known:
            yield LeftOut(f"{at}.measured", "not measured yet: the planned bound counts")
        # Of a hold the plan is held against its device (HOLD-011) and the reading against its uncertainty (MEASURE-001).
        readings = [r for r in (given.at_most, given.measured) if r is not None]
        fine = bool(readings) and min(readings) < ORDINARY_DIAL / 2.0
        if fine and given.indicator is None and where.endswith(".trued"):
            yield LeftOut(f"{at}.indicator", "a dial as fine as the reading needs")


def _of_setup(loaded: LoadedJob, setup: Setup) -> Iterator[LeftOut]:
    path = f"setups.{setup.op}"
    hold = setup.hold
    for key in ("centre", "and_centre"):
        plane = getattr(hold, key, None)
        if plane is None or plane.at is not None:
            continue
        if not isinstance(_surface(loaded, loaded.ref(plane.on, setup.part)), Round):
            continue  # a centre hole has no length
        if plane.grip is not None:
            yield LeftOut(f"{path}.hold.{key}.at", "held in the middle of the grip")
            continue
        far = hold is not None and hold.centre is not None and key == "and_centre" and hold.centre.on == plane.on
        yield LeftOut(f"{path}.hold.{key}.at", f"held {'at the far end' if far else 'in the middle'} of the surface")
    yield from _of_readings(setup, path)
    divide = setup.divide
    if divide is not None and divide.by in HAS_WHEEL and divide.by != "theodolite" and divide.clamp is None:
        yield LeftOut(f"{path}.divide.clamp", "clamping shifts nothing beyond the setting")
    for name, cut in setup.cut.items():
        ref = loaded.ref(name, setup.part)
        if getattr(_surface(loaded, ref), "kind", "") != "holes":
            continue
        for key in ("radial", "tangential"):
            if cut.each is None or getattr(cut.each, key) is None:
                yield LeftOut(f"{path}.cut.{name}.each.{key}", "single holes stand where the division has them")
    if setup.join is not None and setup.join.by in FITTED:
        inner = loaded.ref(setup.join.inner)
        if setup.join.must_carry:
            for load in LOADS.keys() - setup.join.must_carry.keys():
                yield LeftOut(f"{path}.join.must_carry.{load}", f"the joint carries no {LOADS[load]}")
        surface, bored = _surface(loaded, inner), loaded.job.parts[inner.part].surfaces.values()
        if isinstance(surface, Round) and surface.hole is None and all(s.kind != "bore" for s in bored):
            yield LeftOut(f"parts.{inner.part}.surfaces.{inner.surface}.hole", "a solid shaft")


LEFT_OUT = (
    Quantity(
        "entry.stand_in", "entry", "", 0, stand_in, {"entry": ":"}, "what stands in for an entry that is left out"
    ),
    Quantity(
        "entry.not_made",
        "part",
        "",
        0,
        not_made,
        {"floor": "route.floor", "part": "@key"},
        "surfaces of a machined part that nothing makes",
    ),
)
