"""The things of a job that own numbers, in the order of the job."""

from __future__ import annotations

from setupcheck.jobfile.models import Deviation
from setupcheck.jobfile.setups import Centre, Clock, Cut, Setup, Square, Stop
from setupcheck.jobfile.truing import Trued
from setupcheck.quantities.book import Scope
from setupcheck.quantities.left_out import left_out
from setupcheck.quantities.readings import readings
from setupcheck.quantities.requirements import Stack, read_stack
from setupcheck.quantities.shop import Floor
from setupcheck.record import record


@record
class HoldEntry:
    """One entry of a hold: `30/centre`, or a joint that is trued, `30/trued`. `error` is its main error entry, or None."""

    step: str
    entry: Centre | Square | Stop | Clock | Trued

    @property
    def key(self) -> str:
        """Key of the main error entry."""
        return {"square": "face_runout", "stop": "error", "clock": "error"}.get(self.step, "runout")

    @property
    def error(self) -> Deviation | None:
        return getattr(self.entry, self.key, None)


@record
class CutEntry:
    """One surface cut in one setup: `30/teeth`."""

    name: str
    cut: Cut


def scopes(floor: Floor) -> list[Scope]:
    """All scopes: the job, its place, its parts, setups with their hold entries and cuts, joinings, measured values, stacks."""
    loaded, job = floor.loaded, floor.loaded.job
    whole = Scope("job", "", floor, "", line=1)
    found = [whole]
    if job.place is not None:
        found.append(Scope("place", "", job.place, "place", line=loaded.line("place"), within=(whole,)))
    if job.worm is not None:
        found.append(Scope("worm", "", job.worm, "worm", line=loaded.line("worm"), within=(whole,)))
    if job.mesh is not None:
        found.append(Scope("mesh", "", job.mesh, "mesh", line=loaded.line("mesh"), within=(whole,)))
    for name, part in job.parts.items():
        found.append(Scope("part", name, part, f"parts.{name}", line=loaded.line(f"parts.{name}"), within=(whole,)))
    for setup in job.setups:
        found += _setup_scopes(floor, setup, whole)
    for read in readings(job):
        found.append(Scope("reading", read.path, read, read.path, read.op, loaded.line(read.path), (whole,)))
    for entry in left_out(loaded):
        found.append(Scope("entry", entry.at, entry, entry.at, entry.op, loaded.line(entry.at), (whole,)))
    seen: dict[str, int] = {}
    for i in range(len(job.require)):
        stack = read_stack(floor, i)
        seen[stack.name] = seen.get(stack.name, 0) + 1
        key = stack.name if seen[stack.name] == 1 else f"{stack.name}-{seen[stack.name]}"
        found.append(
            Scope("stack", key, stack, f"require[{i + 1}]", line=loaded.line(f"require[{i + 1}]"), within=(whole,))
        )
    return found


def _setup_scopes(floor: Floor, setup: Setup, whole: Scope) -> list[Scope]:
    line, op, path = floor.loaded.line, setup.op, f"setups.{setup.op}"
    here = Scope("setup", str(op), setup, path, op, line(path), (whole,))
    found = [here]
    if setup.join is not None:
        found.append(Scope("join", str(op), setup.join, f"{path}.join", op, line(f"{path}.join"), (here,)))
        if setup.join.trued is not None:
            where = f"{path}.join.trued"
            found.append(
                Scope("hold", f"{op}/trued", HoldEntry("trued", setup.join.trued), where, op, line(where), (here,))
            )
    if setup.hold is not None:
        for step in ("centre", "and_centre", "square", "stop", "clock"):
            entry = getattr(setup.hold, step)
            if entry is not None:
                where = f"{path}.hold.{step}"
                found.append(Scope("hold", f"{op}/{step}", HoldEntry(step, entry), where, op, line(where), (here,)))
    for name, cut in setup.cut.items():
        where = f"{path}.cut.{name}"
        found.append(Scope("cut", f"{op}/{name}", CutEntry(name, cut), where, op, line(where), (here,)))
    return found


def stack_of(scope: Scope) -> Stack:
    """The stack a scope of that kind holds."""
    assert isinstance(scope.node, Stack)
    return scope.node
