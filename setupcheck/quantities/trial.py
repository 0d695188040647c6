"""A figure with one entry of the job file changed, found by walking the route again: what a reading typed in would make. mm."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from pydantic import BaseModel

from setupcheck.jobfile.reading import LoadedJob, Loc
from setupcheck.jobfile.setups import Job
from setupcheck.ledger.figures import Figure
from setupcheck.quantities.book import Open
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import build


def with_entry(loaded: LoadedJob, paths: Sequence[str], **keys: object) -> LoadedJob:
    """The job with keys of some records changed, not checked again: for values a check would take anyway."""
    job: object = loaded.job
    for path in paths:
        job = _put(job, loaded.loc(path), keys)
    assert isinstance(job, Job)
    return replace(loaded, job=job)


def floor_with(loaded: LoadedJob, paths: Sequence[str], **keys: object) -> Floor:
    """The route of that job.

    Raises: JobError for a direction that names what is not there yet.
    """
    return walk(with_entry(loaded, paths, **keys))


def figure_with(loaded: LoadedJob, stack: Stack, paths: Sequence[str], **keys: object) -> Figure:
    """The figure of a requirement on that route.

    Raises: JobError as `floor_with`; ValueError where the change leaves it without a figure.
    """
    return figure_on(floor_with(loaded, paths, **keys), stack)


def figure_on(floor: Floor, stack: Stack) -> Figure:
    """The figure of a requirement on a route that was walked before.

    Raises: ValueError where it has none.
    """
    made = build(floor, stack)
    if isinstance(made, Open):
        raise ValueError(f"{stack.name} cannot be told: {made.because or ', '.join(made.missing)}")
    return made.figure


def _put(node: object, way: Loc, keys: dict[str, object]) -> object:
    if not way:
        assert isinstance(node, BaseModel)
        return node.model_copy(update=keys)
    step, rest = way[0], way[1:]
    if isinstance(node, dict):
        return {**node, step: _put(node[step], rest, keys)}
    if isinstance(node, tuple):
        assert isinstance(step, int)
        return (*node[:step], _put(node[step], rest, keys), *node[step + 1 :])
    assert isinstance(node, BaseModel)
    name = next(n for n, f in type(node).model_fields.items() if step in (n, f.alias))
    return node.model_copy(update={name: _put(getattr(node, name), rest, keys)})
