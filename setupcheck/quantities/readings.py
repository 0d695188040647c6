"""Every measured value of a job, wherever it stands: error entries and sizes that have `measured`."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from pydantic import BaseModel

from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.setups import Job
from setupcheck.jobfile.worm import Mesh, Worm
from setupcheck.record import record

_WORDS = {"runout": "run-out", "face_runout": "face run-out", "axis_runout": "axis run-out"}
_OWNERS = ("on", "of", "name", "outer")
"""Keys by which a record says whose its entries are."""


@record
class Reading:
    """One measured value: its record, its path, how it is called, and the operation it belongs to."""

    record: Deviation | Dimension
    path: str
    name: str
    op: int | None


def readings(job: Job) -> Iterator[Reading]:
    """All measured values, in the order of the job."""
    for field in type(job).model_fields:
        if field != "setups":
            yield from _within(getattr(job, field), field, "", None)
    for setup in job.setups:
        yield from _within(setup, f"setups.{setup.op}", "", setup.op)


def _within(node: object, path: str, owner: str, op: int | None) -> Iterator[Reading]:
    if isinstance(node, Deviation | Dimension):
        if node.measured is not None:
            parent, _, key = path.rpartition(".")
            owner = owner or ("" if op is not None and parent == f"setups.{op}" else parent.rpartition(".")[2])
            of, where = f" of {owner.replace('_', ' ')}" if owner else "", f" in op {op}" if op is not None else ""
            yield Reading(node, path, f"{_WORDS.get(key, key.replace('_', ' '))}{of}{where}", op)
    elif isinstance(node, BaseModel):
        owner = next((x for key in _OWNERS if isinstance(x := getattr(node, key, None), str)), owner)
        owner = "the worm" if isinstance(node, Worm) else "the mesh" if isinstance(node, Mesh) else owner
        for name, field in type(node).model_fields.items():
            if name in node.model_fields_set:  # only what the file says
                yield from _within(getattr(node, name), f"{path}.{field.alias or name}", owner, op)
    elif isinstance(node, Mapping):
        for name, entry in node.items():
            own = owner if isinstance(entry, Deviation | Dimension) else str(name)
            yield from _within(entry, f"{path}.{name}", own, op)
    elif isinstance(node, tuple):
        for number, entry in enumerate(node, 1):
            yield from _within(entry, f"{path}[{number}]", owner, op)
