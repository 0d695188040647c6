"""What can still be moved when part of the job is done: shims, faces, depths, dials and angles still to come. mm, rad."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace

from setupcheck.errors import JobError
from setupcheck.jobfile.models import Dimension, Flat
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Cut, Job, Join, Setup, Spacer, Stop
from setupcheck.notation import show
from setupcheck.quantities import backlash_read, eccentric
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.finished import finished, to_come
from setupcheck.quantities.gates import origins, reaches
from setupcheck.quantities.judged import Result
from setupcheck.quantities.readings import readings
from setupcheck.quantities.route import walk
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import build
from setupcheck.record import record

TRIAL = 0.01
"""By how much an adjuster is moved on paper to see which figures hear of it [mm]. Source: our choice."""
HEARD = 1e-3
"""Share of its limit by which an end of a figure must follow that move to count. Source: our screening choice."""
NONE_LEFT = "nothing that is still to come moves it"


@record(eq=False)
class Adjuster:
    """One thing a setup still to come can move. `moved` is the route with it moved by TRIAL; None where it has no size.

    causes  begin of the paths of causes that it takes with it, for adjusters without a size
    """

    op: int  # 0: in the housing, after all of them
    words: str
    path: str
    moved: Floor | None = None
    causes: str = ""

    def told(self) -> str:
        """In words, as the working prints it."""
        return f"{self.words} ({self.path})"


def adjusters(floor: Floor) -> tuple[Adjuster, ...] | None:
    """Everything that setups still to come can move; None where the job does not say what is done.

    Each length is moved by a hundredth on a copy of the job, and the route walked again.  Source: the ledger.
    """
    loaded = floor.loaded
    if loaded.job.done is None:
        return None
    found: list[Adjuster] = []
    for setup in to_come(loaded.job):
        found += _of_join(loaded, setup) if setup.join is not None else _of_cuts(loaded, setup)
        found += _of_hold(loaded, setup)
    return (*found, *_of_the_housing(floor))


def _of_the_housing(floor: Floor) -> Iterator[Adjuster]:
    """An eccentric that sets the centre distance: it stays open to the last. By its throw where nobody says how it stands."""
    loaded, mesh = floor.loaded, floor.loaded.job.mesh
    if mesh is None or mesh.eccentric is None or not isinstance(mesh.centre_distance, Dimension):
        return
    wider = backlash_read.apart(floor, TRIAL)  # what was read moves with the axes as well
    apart = mesh.model_copy(update={"centre_distance": _longer(mesh.centre_distance), "backlash_read": wider})
    moved = _walked(loaded, loaded.job.model_copy(update={"mesh": apart}))
    how = "by {most} of centre distance at most"
    told = {"most": mesh.eccentric}
    if mesh.eccentric_at is not None:
        closes = eccentric.left(mesh.eccentric, mesh.eccentric_at)
        told = {"closes": closes, "opens": 2.0 * mesh.eccentric - closes}
        how = "which can still close {closes} of centre distance and open {opens}"
    said = {key: show(value, *(("in", 4) if loaded.job.units == "in" else ("mm", 3))) for key, value in told.items()}
    yield Adjuster(0, f"the eccentric of the housing, {how.format(**said)}", "mesh.eccentric", moved)


def _walked(loaded: LoadedJob, job: Job) -> Floor | None:
    try:
        return walk(replace(loaded, job=job))
    except JobError:
        return None


def _with(loaded: LoadedJob, setup: Setup, **changed: object) -> Floor | None:
    """The route with one setup changed."""
    other = setup.model_copy(update=changed)
    job = loaded.job
    return _walked(loaded, job.model_copy(update={"setups": tuple(other if s is setup else s for s in job.setups)}))


def _longer(size: Dimension) -> Dimension:
    keys = {key: getattr(size, key) for key in ("nominal", "measured")}
    return size.model_copy(update={key: value + TRIAL for key, value in keys.items() if value is not None})


def _shimmed(stop: Stop) -> Stop:
    """The stop with its first spacer TRIAL thicker, or with one of that thickness where it has none."""
    if stop.spacers:
        first = stop.spacers[0].model_copy(update={"length": _longer(stop.spacers[0].length)})
        return stop.model_copy(update={"spacers": (first, *stop.spacers[1:])})
    shim = Spacer(name="shim", length=Dimension.model_construct(nominal=TRIAL, lower=0.0, upper=0.0))
    return stop.model_copy(update={"spacers": (shim,)})


def _of_join(loaded: LoadedJob, setup: Setup) -> Iterator[Adjuster]:
    join = setup.join
    assert join is not None
    path = f"setups.{setup.op}.join"
    if join.stop is not None and join.stop.against is not None:
        name = f"the {join.stop.spacers[0].name}" if join.stop.spacers else "a shim"
        moved = _with(loaded, setup, join=join.model_copy(update={"stop": _shimmed(join.stop)}))
        words = f"{name} between {join.stop.on} and {join.stop.against} in op {setup.op}"
        yield Adjuster(setup.op, words, f"{path}.stop.spacers", moved)
    if join.mounted_at is None:
        yield Adjuster(setup.op, f"the angle of mounting in op {setup.op}", f"{path}.mounted_at", causes=_turning(join))


def _turning(join: Join) -> str:
    """How the cause begins that stands for an angle of mounting nobody recorded."""
    outer, inner = (text.partition(".")[0] for text in (join.outer, join.inner))
    return f"angle at which {outer} was put on {inner}"


def _of_cuts(loaded: LoadedJob, setup: Setup) -> Iterator[Adjuster]:
    job, path = loaded.job, f"setups.{setup.op}.cut"
    for name, cut in setup.cut.items():
        ref = loaded.ref(name, setup.part)
        node = job.parts[ref.part].surfaces[ref.surface]
        if isinstance(node, Flat) and node.kind == "face":
            stands = cut.to if cut.to is not None else node.at + node.facing * (cut.leave or 0.0)
            moved = _with(loaded, setup, cut=_changed(setup.cut, name, {"to": stands + TRIAL, "leave": None}))
            yield Adjuster(setup.op, f"the length at which op {setup.op} faces {name}", f"{path}.{name}", moved)
        if cut.depth is not None:
            moved = _with(loaded, setup, cut=_changed(setup.cut, name, {"depth": cut.depth + TRIAL}))
            yield Adjuster(setup.op, f"the depth of {name} in op {setup.op}", f"{path}.{name}.depth", moved)
        tool = job.cutters.get(cut.cutter) if cut.cutter is not None else None
        if tool is not None and tool.width is not None:
            wider = tool.model_copy(update={"width": _longer(tool.width)})
            moved = _walked(loaded, job.model_copy(update={"cutters": {**job.cutters, str(cut.cutter): wider}}))
            yield Adjuster(
                setup.op, f"the width of {cut.cutter} in op {setup.op}", f"cutters.{cut.cutter}.width", moved
            )


def _changed(cuts: Mapping[str, Cut], name: str, update: dict[str, object]) -> dict[str, Cut]:
    return {**cuts, name: cuts[name].model_copy(update=update)}


def _of_hold(loaded: LoadedJob, setup: Setup) -> Iterator[Adjuster]:
    """The truing of a hold still to come, and a shim at its stop."""
    hold, path = setup.hold, f"setups.{setup.op}.hold"
    if hold is None:
        return
    for step, words in (("centre", "truing"), ("and_centre", "truing in the second plane"), ("square", "squaring")):
        entry = getattr(hold, step)
        if entry is not None:
            yield Adjuster(
                setup.op, f"the {words} on {entry.on} in op {setup.op}", f"{path}.{step}", causes=f"{path}.{step}."
            )
    if hold.stop is not None and hold.stop.spacers:
        moved = _with(loaded, setup, hold=hold.model_copy(update={"stop": _shimmed(hold.stop)}))
        words = f"the {hold.stop.spacers[0].name} at the stop of op {setup.op}"
        yield Adjuster(setup.op, words, f"{path}.stop.spacers", moved)


def _moves(adjuster: Adjuster, now: Result) -> bool:
    """Whether a requirement hears of an adjuster: an end of its worst case follows, or one of its causes goes with it."""
    if adjuster.moved is None:
        causes = origins(reaches(now.figure))
        begin = adjuster.causes
        return bool(begin) and any(begin in c.key or any(p.startswith(begin) for p in c.paths) for c in causes)
    try:
        made = build(adjuster.moved, now.stack)
    except (JobError, OutOfRange):
        return False
    if isinstance(made, Open):
        return False
    far = [abs(b - a) for a, b in zip(_ends(now.figure), _ends(made.figure), strict=True)]
    return max(far) > HEARD * now.scale


def _ends(figure: object) -> tuple[float, float]:
    places = reaches(figure)  # type: ignore[arg-type]
    low = min(one.base - sum(p.down for p in one.pushes) for one in places)
    return low, max(one.base + sum(p.up for p in one.pushes) for one in places)


def still_open(adjusters: tuple[Adjuster, ...], now: Result, change: float | None) -> str | None:
    """What can still be moved for a requirement that fails or has lost margin, or that nothing can; None for the others.

    Source: the job file (`done`) and the route walked again.
    """
    failing = now.margin is not None and now.margin < 0.0
    if not failing and not (change is not None and change < -now.scale * 1e-9):
        return None
    return "; ".join(a.told() for a in adjusters if _moves(a, now)) or NONE_LEFT


def early(floor: Floor) -> str | None:
    """Measured values of setups that are not done, the next one apart, which is read as it is set up; None without any.

    Source: the job file.
    """
    job = floor.loaded.job
    waiting = {setup.op for setup in to_come(job)[1:]}
    found = [f"{r.name} ({r.path})" for r in readings(job) if r.op in waiting]
    return "; ".join(found) if found and job.done is not None else None


def last_done(floor: Floor) -> float | None:
    """Last operation that is done. Source: the job file."""
    return float(floor.loaded.job.done) if finished(floor.loaded.job) and floor.loaded.job.done is not None else None


PROGRESS = (
    Quantity("progress.done", "job", "1", 0, last_done, {"floor": "route.floor"}, "last operation that is finished"),
    Quantity(
        "progress.early", "job", "", 0, early, {"floor": "route.floor"}, "measured, though their turn has not come"
    ),
    Quantity(
        "progress.adjusters", "job", "", 0, adjusters, {"floor": "route.floor"}, "what setups still to come can move"
    ),
    Quantity(
        "progress.open",
        "stack",
        "",
        0,
        still_open,
        {"adjusters": "progress.adjusters", "now": "stack.combined", "change": "then.change"},
        "what can still be moved, where it fails or has lost margin",
        {"change": None},
    ),
)
