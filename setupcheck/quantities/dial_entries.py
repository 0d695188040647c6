"""Every entry of a job that is a dial reading of a run-out: holds, devices under them, joints, bought parts, machines. mm."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from setupcheck.jobfile.models import Deviation, Part
from setupcheck.jobfile.setups import Centre, Join
from setupcheck.quantities.book import Scope
from setupcheck.quantities.scopes import HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import typical
from setupcheck.record import record


@record
class DialEntry:
    """One of them.

    name   of a hold `40/centre`, else the path;  path  in the job file;  key  its last step
    step   centre, and_centre, square, trued, through, fit, sets, bought, bought-face or machine;  on  what the dial runs on
    planned  what the entry says now: measured, planned, or the typical reading of its device [mm]
    device   what holds it, as the job file has it, or empty
    """

    name: str
    path: str
    key: str
    op: int | None
    step: str
    on: str
    given: Deviation
    planned: float
    device: str = ""


def dial_entries(scopes: Sequence[Scope]) -> Iterator[DialEntry]:
    """All of them, those of the setups first, in the order of the job."""
    for scope in scopes:
        if scope.op is None:
            continue
        if isinstance(scope.node, HoldEntry):
            yield from _of_hold(scope, scope.node)
        elif isinstance(scope.node, Join):
            step, on = ("fit", _own(scope.node.outer)) if scope.node.trued is None else ("sets", scope.node.trued.on)
            yield from _made(f"{scope.path}.fit_error", scope.op, step, on, scope.node.fit_error)
    for scope in scopes:
        if isinstance(scope.node, Part):
            yield from _as_bought(scope, scope.node)
    floor = scopes[0].node
    assert isinstance(floor, Floor)
    for name, machine in floor.loaded.job.machines.items():
        yield from _made(f"machines.{name}.axis_runout", None, "machine", name, machine.axis_runout)


def _of_hold(scope: Scope, entry: HoldEntry) -> Iterator[DialEntry]:
    if entry.key == "error":
        return
    path, device = f"{scope.path}.{entry.key}", str(getattr(entry.entry, "by", "") or "")
    for one in _made(path, scope.op, entry.step, entry.entry.on, entry.error, device):
        yield DialEntry(scope.key, path, entry.key, one.op, one.step, one.on, one.given, one.planned, device)
    if isinstance(entry.entry, Centre):
        for number, below in enumerate(entry.entry.through, 1):
            where = f"{scope.path}.through[{number}].runout"
            yield from _made(where, scope.op, "through", f"{below.by} under {entry.entry.on}", below.runout, below.by)


def _as_bought(scope: Scope, part: Part) -> Iterator[DialEntry]:
    for number, relation in enumerate(part.given, 1):
        path = f"{scope.path}.given[{number}]"
        words = f"{scope.key}.{_own(relation.of)}"
        yield from _made(f"{path}.runout", None, "bought", words, relation.runout)
        yield from _made(f"{path}.face_runout", None, "bought-face", words, relation.face_runout)


def _made(
    path: str, op: int | None, step: str, on: str, given: Deviation | None, device: str = ""
) -> Iterator[DialEntry]:
    """The entry, where it is stated at all and says a number, or names a device with a typical one."""
    if given is None:
        return
    key = path.rpartition(".")[2]
    planned = given.measured if given.measured is not None else given.at_most
    if planned is None:
        row = typical(given.device or device, key)
        planned = row.value if row is not None else None
    if planned is not None:
        yield DialEntry(path, path, key, op, step, on, given, planned, device)


def _own(text: str) -> str:
    """A surface without its part."""
    return text.rpartition(".")[2]
