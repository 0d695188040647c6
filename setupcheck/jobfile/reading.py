"""Reading a job file: text, tree, names and values checked in one run, every problem with its place."""

from __future__ import annotations

import hashlib
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from types import UnionType
from typing import Annotated, Literal, Union, get_args, get_origin

from pydantic import BaseModel, ValidationError
from pydantic_core import ErrorDetails

from setupcheck.errors import JobError, Problem
from setupcheck.jobfile import names
from setupcheck.jobfile.setups import Job
from setupcheck.notation import nearest
from setupcheck.yamlfile import Place, Tree, parse, read_text, yaml11_surprise

Loc = tuple[str | int, ...]


@dataclass(frozen=True, slots=True, eq=False)
class LoadedJob:
    """A job with the places of its entries.

    file  base name of the file;  sha256 of its text
    """

    job: Job
    tree: Tree
    file: str
    sha256: str

    def loc(self, path: str) -> Loc:
        """The way through the tree of a shop path: `setups.30.hold.centre` counts setups by their operation number.

        A key that holds points itself, as in `setups.30.cut.wheel.teeth.error`, is found as one step.
        """
        steps, found, node = path.split(".") if path else [], list[str | int](), self.tree.data
        while steps:
            step: str | int = steps[0]
            used = 1
            if isinstance(node, dict):
                joined = (n for n in range(len(steps), 1, -1) if ".".join(steps[:n]) in node)
                used = 1 if step in node else next(joined, 1)
                step = ".".join(steps[:used])
                node = node.get(step)
            elif isinstance(node, list) and steps[0].isdecimal():
                number = int(steps[0])
                if found == ["setups"]:
                    number = next((i for i, s in enumerate(self.job.setups) if s.op == number), len(node))
                step, node = number, node[number] if number < len(node) else None
            found.append(step)
            del steps[:used]
        return tuple(found)

    def line(self, path: str) -> int:
        """Line of an entry, or of the nearest entry around it that is in the file."""
        return self.tree.place(self.loc(path)).line

    def surfaces(self) -> dict[str, tuple[str, ...]]:
        """Surface names by part."""
        return {name: tuple(part.surfaces) for name, part in self.job.parts.items()}

    def ref(self, text: str, part: str | None = None) -> names.Ref:
        """The surface a text means; it has been checked when the file was read."""
        found = names.find_surface(text, self.surfaces(), part)
        assert isinstance(found, names.Ref), found
        return found


def read_job(path: str | Path) -> LoadedJob:
    """Read and check a job file.

    Raises: JobError with every problem of the file.
    """
    return read_job_text(read_text(path), str(path))


def read_job_text(text: str, file: str) -> LoadedJob:
    """Read and check the text of a job file; `file` is the name shown in messages."""
    tree = parse(text, file, collect=True)
    if not isinstance(tree.data, dict):
        raise JobError(
            file, tree.lines, (Problem("", 1, 1, 1, "a job file is a map of keys", "Start with setupcheck: 1"),)
        )
    problems: list[Problem] = []
    job: Job | None = None
    try:
        job = Job.model_validate(tree.data, context={"units": tree.data.get("units")})
    except ValidationError as wrong:
        problems += [_problem(error, tree) for error in wrong.errors(include_url=False)]
    for miss in (*names.misses(tree.data), *_contradictions(tree.data, job)):
        place = tree.key_place(miss.path) if miss.key else tree.place(miss.path)
        problems.append(_at(place, tree.dotted(miss.path), miss.message))
    if problems or tree.problems or job is None:
        raise JobError(file, tree.lines, tree.together(problems))
    return LoadedJob(job, tree, Path(file).name, hashlib.sha256(text.encode()).hexdigest())


def _contradictions(data: dict[str, Data], job: Job | None) -> Iterator[names.Miss]:
    """What valid entries say against each other. Where the file has errors, the surfaces and requirements that can be
    read are compared all the same, so that one run tells everything."""
    units = data.get("units")
    parts: dict[str, dict[str, Surface]]
    if job is not None:
        parts = {name: part.surfaces for name, part in job.parts.items()}
        asked = dict(enumerate(job.require))
    else:
        parts = {
            name: dict(_readable(SURFACE, _entries(_inside(part, "surfaces")), units))
            for name, part in _entries(data.get("parts"))
        }
        asked = dict(_readable(REQUIRE, _entries(data.get("require")), units))
    return sense.contradictions(parts, asked, names.uses(data), units="in" if units == "in" else "mm")


SURFACE: TypeAdapter[Surface] = TypeAdapter(Surface)
REQUIRE: TypeAdapter[Require] = TypeAdapter(Require)


def _at(place: Place, path: str, message: str) -> Problem:
    problem, _, hint = message.partition(". ")
    return Problem(path, place.line, place.column, place.length, problem, hint)


def _problem(error: ErrorDetails, tree: Tree) -> Problem:
    """A pydantic error in shop words, at its place in the file."""
    loc: Loc = tuple(error["loc"])
    kind, ctx, given = error["type"], error.get("ctx", {}), error.get("input")
    path = tree.dotted(loc, missing=kind == "missing")
    if kind == "extra_forbidden":
        allowed = _fields_at(loc[:-1])
        near = nearest(str(loc[-1]), allowed)
        offer = f"Did you mean {near}?" if near else f"Known here: {', '.join(allowed[:14])}"
        return _at(tree.key_place(loc), path, f"'{loc[-1]}' is not a key of this entry. {offer}")
    if kind == "missing":
        return _at(
            tree.key_place(loc[:-1]) if len(loc) > 1 else tree.place(()),
            path,
            f"'{loc[-1]}' is missing here. Write {loc[-1]}: …",
        )
    if kind in ("union_tag_not_found", "union_tag_invalid"):
        tags = [t.strip().strip("'") for t in str(ctx.get("expected_tags", "")).split(",")] or list(_tags_at(loc))
        tags = [t for t in tags if t] or list(_tags_at(loc))
        if kind == "union_tag_not_found":
            return _at(tree.place(loc), f"{path}.kind", f"'kind' is missing here. Write kind: one of {', '.join(tags)}")
        near = nearest(str(ctx.get("tag")), tags)
        return _at(
            tree.place((*loc, "kind")),
            f"{path}.kind",
            f"'{ctx.get('tag')}' is not a kind of surface. {f'Did you mean {near}?' if near else 'Write one of: ' + ', '.join(tags)}",
        )
    place = tree.place(loc)
    surprise = yaml11_surprise(given) if isinstance(given, str) else None
    if kind == "literal_error":
        choices = [c.strip("' ") for c in str(ctx.get("expected", "")).replace(" or ", ", ").split(", ")]
        near = nearest(str(given), choices)
        offer = f"Did you mean {near}?" if near else f"Write one of: {', '.join(choices)}"
        return _at(place, path, f"'{given}' is not known here. {surprise or offer}")
    if kind == "value_error":
        message = str(ctx["error"])
        return _at(place, path, message if surprise is None else f"{message.partition('. ')[0]}. {surprise}")
    return _at(place, path, _plain_message(kind, ctx, given, surprise))


def _plain_message(kind: str, ctx: dict[str, object], given: object, surprise: str | None) -> str:
    """Messages for plain type and range errors."""
    shown = (
        "nothing"
        if given is None
        else f"'{given}'"
        if isinstance(given, str | int | float)
        else {dict: "a map", list: "a list"}.get(type(given), "this")
    )
    bounds = {
        "greater_than_equal": ("ge", "at least"),
        "less_than_equal": ("le", "at most"),
        "greater_than": ("gt", "more than"),
        "less_than": ("lt", "less than"),
    }
    if kind in bounds:
        key, words = bounds[kind]
        return f"{shown} is out of range. Write {words} {ctx.get(key)}"
    wants = {
        "int_parsing": "a whole number",
        "int_type": "a whole number",
        "int_from_float": "a whole number",
        "string_type": "a text",
        "model_type": "a map of keys",
        "model_attributes_type": "a map of keys",
        "dict_type": "a map of keys",
        "tuple_type": "a list",
        "list_type": "a list",
        "bool_parsing": "true or false",
        "bool_type": "true or false",
        "float_parsing": "a number",
        "float_type": "a number",
        "string_too_short": "a longer text",
        "too_short": "at least one entry",
    }
    return f"{shown} does not belong here. {surprise or 'Write ' + wants.get(kind, 'another value')}"


def _models(annotation: object) -> Iterator[type[BaseModel]]:
    """All models an annotation may hold, through optional, list and map."""
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        yield annotation
    elif get_origin(annotation) in (Union, UnionType, tuple, dict, Annotated, list):
        for inner in get_args(annotation):
            yield from _models(inner)


def _models_at(loc: Loc) -> list[type[BaseModel]]:
    here: list[type[BaseModel]] = [Job]
    for step in loc:
        below = [
            m
            for model in here
            for name, field in model.model_fields.items()
            if step in (field.alias, name)
            for m in _models(field.annotation)
        ]
        tagged = [m for m in here if step in _tags(m)]
        here = below or tagged or here
    return here


def _tags(model: type[BaseModel]) -> tuple[str, ...]:
    kind = model.model_fields.get("kind")
    return get_args(kind.annotation) if kind is not None and get_origin(kind.annotation) is Literal else ()


def _tags_at(loc: Loc) -> tuple[str, ...]:
    return tuple(dict.fromkeys(t for m in _models_at(loc) for t in _tags(m)))


def _fields_at(loc: Loc) -> list[str]:
    return list(dict.fromkeys(field.alias or name for m in _models_at(loc) for name, field in m.model_fields.items()))
