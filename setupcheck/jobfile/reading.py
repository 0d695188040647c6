"""Reading a job file: text, tree, names and values checked in one run, every problem with its place."""

from __future__ import annotations

import hashlib
import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from contextlib import suppress
from dataclasses import field as of_record
from pathlib import Path
from types import UnionType
from typing import Annotated, Literal, TypeVar, Union, get_args, get_origin

from pydantic import BaseModel, TypeAdapter, ValidationError
from pydantic_core import ErrorDetails

from setupcheck.errors import JobError, Problem, printable
from setupcheck.jobfile import (
    counts,
    cuts,
    directions,
    gauges,
    gearing,
    given,
    joints,
    marks,
    names,
    proofs,
    reach,
    sense,
    shapes,
    sides,
    warmth,
)
from setupcheck.jobfile.asked import Require
from setupcheck.jobfile.drawing import drawing_of
from setupcheck.jobfile.examples import ENTRIES, SHAPES, TO_BEGIN
from setupcheck.jobfile.models import Surface
from setupcheck.jobfile.setups import Job
from setupcheck.jobfile.types import Read
from setupcheck.notation import Units, nearest, plain, quoted
from setupcheck.record import record
from setupcheck.yamlfile import Data, Place, Tree, parse, read_text

Loc = tuple[str | int, ...]
K = TypeVar("K", str, int)
T = TypeVar("T")


@record(eq=False)
class LoadedJob:
    """A job with the places of its entries.

    file  base name of the file;  sha256 of its text
    own   path -> what a shop's record, or a typical value beside it, put there instead of the planner

    >>> from setupcheck import LoadedJob, example, load_job
    >>> job = load_job(example("index-plate"))
    >>> isinstance(job, LoadedJob), job.file, job.job.units
    (True, 'index-plate.yaml', 'in')
    >>> job.line("setups.30") > job.line("setups.20")
    True
    """

    job: Job
    tree: Tree
    file: str
    sha256: str
    own: Mapping[str, str] = of_record(default_factory=dict)

    def owned(self, *paths: str) -> frozenset[str]:
        """What the values at these paths rest on, those that the planner did not write himself."""
        return frozenset(self.own[path] for path in paths if path in self.own) if self.own else frozenset()

    def loc(self, path: str) -> Loc:
        """The way through the tree of a shop path. A setup is called by its operation number, an entry of any other
        list by its number in brackets, counted from 1: `setups.30.hold.centre.through[1].runout`, `require[2]`.

        A key that holds points itself, as in `setups.30.cut.wheel.teeth.error`, is found as one step.
        """
        steps, found, node = path.split(".") if path else [], list[str | int](), self.tree.data
        while steps:
            if isinstance(node, dict):
                used, key, entry = _key(steps, node)
                found.append(key)
                node = node.get(key)
                if entry is not None:
                    found.append(entry)
                    node = node[entry] if isinstance(node, list) and 0 <= entry < len(node) else None
                del steps[:used]
                continue
            step: str | int = steps.pop(0)
            if isinstance(node, list) and str(step).isdecimal():
                step = int(step)  # an entry counted from 0, the former spelling of `require[1]`
                if found == ["setups"]:
                    step = next((i for i, s in enumerate(self.job.setups) if s.op == step), len(node))
                node = node[step] if step < len(node) else None
            found.append(step)
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


_ENTRY = re.compile(r"(.+)\[([0-9]{1,6})\]")


def _key(steps: Sequence[str], node: Mapping[str, Data]) -> tuple[int, str, int | None]:
    """The key that the first steps name in a map: how many of them, the key, and the entry (from 0) of its list."""
    if steps[0] in node:
        return 1, steps[0], None
    for used in range(len(steps), 1, -1):
        if (joined := ".".join(steps[:used])) in node:
            return used, joined, None
    entry = _ENTRY.fullmatch(steps[0])
    return (1, entry[1], int(entry[2]) - 1) if entry else (1, steps[0], None)


def read_job(path: str | Path) -> LoadedJob:
    """Read and check a job file.

    Raises: JobError with every problem of the file.
    """
    return read_job_text(read_text(path, if_empty=TO_BEGIN), str(path))


def read_job_text(text: str, file: str) -> LoadedJob:
    """Read and check the text of a job file; `file` is the name shown in messages."""
    tree = parse(text, file, collect=True, if_empty=TO_BEGIN)
    if not isinstance(tree.data, dict):
        raise JobError(
            file, tree.lines, (Problem("", 1, 1, 1, "a job file is a map of keys", "Start with setupcheck: 1"),)
        )
    return read_tree(tree, hashlib.sha256(text.encode()).hexdigest())


def read_tree(tree: Tree, sha256: str) -> LoadedJob:
    """Read and check the tree of a job file, a map; `sha256` is that of the text it came from.

    Raises: JobError with every problem of the file.
    """
    tree, problems = shapes.meant(tree)
    assert isinstance(tree.data, dict)
    job: Job | None = None
    try:
        job = Job.model_validate(tree.data, context={"units": tree.data.get("units")})
    except ValidationError as wrong:
        problems += _problems(wrong.errors(include_url=False), tree)
    for miss in (*names.misses(tree.data), *_contradictions(tree.data, job)):
        place = tree.key_place(miss.path) if miss.key else tree.place(miss.path)
        problems.append(_at(place, tree.dotted(miss.path), miss.message))
    if problems or tree.problems or job is None:
        raise JobError(tree.file, tree.lines, tree.together(p for p in problems if not _behind_comma(p, tree)))
    return LoadedJob(job, tree, printable(Path(tree.file).name), sha256)


def _behind_comma(problem: Problem, tree: Tree) -> bool:
    """A problem inside a piece of text that is told as a whole: the `5 um` of `2,5 um` is no key."""
    return any(p.line == problem.line and p.column < problem.column < p.column + p.length for p in tree.problems)


def _contradictions(data: Mapping[str, Data], job: Job | None) -> Iterator[names.Miss]:
    """What entries say against each other. Where the file has errors, the surfaces and requirements that can be read
    are compared all the same, so that one run tells everything."""
    units: Units = "in" if data.get("units") == "in" else "mm"
    if job is not None:
        surfaces = {name: part.surfaces for name, part in job.parts.items()}
        asked = dict(enumerate(job.require))
    else:
        parts, require = data.get("parts"), data.get("require")
        surfaces = {}
        for name, part in parts.items() if isinstance(parts, dict) else ():
            nodes = part.get("surfaces") if isinstance(part, dict) else None
            surfaces[name] = _readable(TypeAdapter(Surface), nodes.items() if isinstance(nodes, dict) else (), units)
        asked = _readable(TypeAdapter(Require), enumerate(require) if isinstance(require, list) else (), units)
    yield from sense.contradictions(surfaces, asked, names.uses(data), units=units)
    drawing = drawing_of(data, surfaces, units)
    for check in (
        counts.beyond,
        reach.beyond,
        sides.wrong,
        directions.nowhere,
        joints.misfits,
        cuts.misstated,
        given.repeated,
        gauges.misplaced,
        gearing.unlikely,
        marks.unlikely,
        proofs.unlikely,
        warmth.unlikely,
    ):
        yield from check(drawing)


def _readable(adapter: TypeAdapter[T], entries: Iterable[tuple[K, Data]], units: str) -> dict[K, T]:
    """The entries that are valid by themselves."""
    found: dict[K, T] = {}
    for key, node in entries:
        with suppress(ValidationError):
            found[key] = adapter.validate_python(node, context={"units": units})
    return found


def _at(place: Place, path: str, message: str) -> Problem:
    problem, _, hint = message.partition(". ")
    return Problem(path, place.line, place.column, place.length, problem, hint)


def _problems(errors: Sequence[ErrorDetails], tree: Tree) -> Iterator[Problem]:
    """pydantic's errors in shop words. A key that is missing because its name is mistyped is told once, as mistyped."""
    meant = {
        (*loc[:-1], near)
        for error in errors
        if error["type"] == "extra_forbidden"
        for loc in (tuple(error["loc"]),)
        if (near := nearest(str(loc[-1]), _fields_at(loc[:-1])))
    }
    return (_problem(e, tree) for e in errors if e["type"] != "missing" or tuple(e["loc"]) not in meant)


def _problem(error: ErrorDetails, tree: Tree) -> Problem:
    """A pydantic error in shop words, at its place in the file."""
    loc: Loc = tuple(error["loc"])
    kind, ctx, given = error["type"], error.get("ctx", {}), error.get("input")
    path = tree.dotted(loc, missing=kind == "missing")
    place = tree.place(loc)
    match kind:
        case "extra_forbidden":
            allowed = _fields_at(loc[:-1])
            near = nearest(str(loc[-1]), allowed)
            offer = f"Did you mean {near}?" if near else f"Known here: {', '.join(allowed)}"
            return _at(tree.key_place(loc), path, f"{quoted(loc[-1])} is not a key of this entry. {offer}")
        case "missing":
            holder = tree.key_place(loc[:-1]) if len(loc) > 1 else tree.place(())
            shape = SHAPES.get(str(loc[-1]), f"{loc[-1]}: {_choices_at(loc)}")
            return _at(holder, path, f"'{loc[-1]}' is missing here. Write {shape}")
        case "union_tag_not_found":
            kinds = ", ".join(_tags_at(loc))
            return _at(place, f"{path}.kind", f"'kind' is missing here. Write kind: and one of {kinds}")
        case "union_tag_invalid":
            kind_of = given.get("kind") if isinstance(given, dict) else given
            offer = _offer(kind_of, _tags_at(loc))
            return _at(
                tree.place((*loc, "kind")), f"{path}.kind", f"{quoted(kind_of)} is not a kind of surface. {offer}"
            )
        case "literal_error":
            offer = _offer(
                given, [c.strip("' ") for c in str(ctx.get("expected", "")).replace(" or ", ", ").split(", ")]
            )
            says = "nothing is written here" if given is None else f"{quoted(given)} is not known here"
            return _at(place, path, f"{says}. {offer}")
        case "tuple_type" | "dict_type" if given is None and loc and loc[-1] in SHAPES:
            return _at(place, path, f"nothing is written here. Write {SHAPES[str(loc[-1])]}")
        case "too_short" if loc and loc[-1] in ENTRIES:
            entry, example = ENTRIES[str(loc[-1])]
            return _at(place, path, f"no {entry} is written here. Write at least one, as in {example}")
        case "value_error":
            return _at(place, path, str(ctx["error"]))
        case _:
            return _at(place, path, _plain_message(kind, ctx, _written(tree, loc, given), loc))


def _offer(given: object, choices: Sequence[str]) -> str:
    family = [c for c in choices if isinstance(given, str) and given.lower() in c.split("-")] if given else []
    if len(family) > 2:  # `mandrel`: one of them would be a guess
        return f"Write {', '.join(family[:-1])} or {family[-1]}"
    near = nearest(given, choices) if isinstance(given, str) else None
    if near is not None:
        return f"Did you mean {near}?"
    return f"Write {choices[0]}" if len(choices) == 1 else f"Write one of: {', '.join(choices)}"


def _written(tree: Tree, loc: Loc, given: object) -> object:
    """What stands in the file at a place, rather than what a reader made of it (`30 %`, not 0.3)."""
    node: object = tree.data
    for step in loc:
        if isinstance(node, dict) and step in node:
            node = node[str(step)]
        elif isinstance(node, list) and isinstance(step, int) and step < len(node):
            node = node[step]
        elif step not in ("at_most", "nominal", *_tags_at(loc)):
            return given
    return node


_BOUNDS = {
    "greater_than_equal": ("ge", "at least"),
    "less_than_equal": ("le", "at most"),
    "greater_than": ("gt", "more than"),
    "less_than": ("lt", "less than"),
}
_WANTS = {
    "int_parsing": "a whole number",
    "int_parsing_size": "a smaller whole number",
    "int_type": "a whole number",
    "int_from_float": "a whole number",
    "string_type": "a text",
    "dict_type": "names with their entries, as in name: {…}",
    "tuple_type": "a list, as in [first, second]",
    "string_too_short": "a longer text",
    "too_short": "at least one entry",
}


def _plain_message(kind: str, ctx: Mapping[str, object], given: object, loc: Loc) -> str:
    """Messages for plain type and range errors."""
    if kind in _BOUNDS:
        key, words = _BOUNDS[kind]
        limit = ctx.get(key)
        return f"{quoted(given)} is out of range. Write {words} {plain(limit) if isinstance(limit, int | float) else limit}"
    wants = _WANTS.get(kind, "another value")
    if kind in ("model_type", "model_attributes_type"):
        wants = f"keys and values, as in {{{', '.join(f'{key}: …' for key in _first_fields(loc))}}}"
    if given is None:
        return f"nothing is written here. Write {wants}"
    noted = isinstance(given, str) and re.match(r"[^\s#]+#\s", given)
    return f"{quoted(given)} does not belong here. {'A note needs a space before its #' if noted else f'Write {wants}'}"


def _first_fields(loc: Loc) -> list[str]:
    """Keys an entry cannot do without, or the first of those it knows."""
    fields = [(f.alias or name, f.is_required()) for m in _models_at(loc)[:1] for name, f in m.model_fields.items()]
    return ([name for name, needed in fields if needed] or [name for name, _ in fields])[:4]


def _models(annotation: object) -> Iterator[type[BaseModel]]:
    """All models an annotation may hold, through optional, list and map."""
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        yield annotation
    elif get_origin(annotation) in (Union, UnionType, tuple, dict, Annotated, list):
        for inner in get_args(annotation):
            yield from _models(inner)


def _models_at(loc: Loc) -> list[type[BaseModel]]:
    """Models that may stand at a place; the steps of pydantic are keys, names and numbers of entries, and union tags."""
    here: list[type[BaseModel]] = [Job]
    named = False  # the next step is the name or number of an entry, not a key
    for step in loc:
        if named:
            named = False
            continue
        fields = [field for model in here for name, field in model.model_fields.items() if step in (field.alias, name)]
        if fields:
            here = [m for field in fields for m in _models(field.annotation)]
            named = any(_holds_many(field.annotation) for field in fields)
        else:
            here = [m for m in here if step in _tags(m)] or here
    return here


def _holds_many(annotation: object) -> bool:
    """A map of names to entries, or a list of them; perhaps optional."""
    origin = get_origin(annotation)
    return origin in (dict, tuple) or (origin in (Union, UnionType) and any(map(_holds_many, get_args(annotation))))


def _tags(model: type[BaseModel]) -> tuple[str, ...]:
    kind = model.model_fields.get("kind")
    return get_args(kind.annotation) if kind is not None and get_origin(kind.annotation) is Literal else ()


def _tags_at(loc: Loc) -> tuple[str, ...]:
    return tuple(dict.fromkeys(t for m in _models_at(loc) for t in _tags(m)))


def _fields_at(loc: Loc) -> list[str]:
    return list(dict.fromkeys(field.alias or name for m in _models_at(loc) for name, field in m.model_fields.items()))


def _choices_at(loc: Loc) -> str:
    """What a missing key may hold, where that is a short list; else a gap to fill."""
    fields = [f for m in _models_at(loc[:-1]) for n, f in m.model_fields.items() if loc[-1] in (f.alias, n)][:1]
    choices: Sequence[object] = ()
    for field in fields:
        written = [s.words for s in field.metadata if isinstance(s, Read) and s.words]
        if written:  # the file's words for it, where the model holds something else
            choices = written[0]
        elif get_origin(field.annotation) is Literal:
            choices = get_args(field.annotation)
    return " or ".join(str(c) for c in choices) if 0 < len(choices) <= 4 else "…"
