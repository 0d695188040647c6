"""The JSON Schema (draft 2020-12) of a job file, for an editor's completion. Made from the records; no review loads this.

pydantic cannot make it: to it a value in shop notation is a function. So the fields of the records are walked here.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Iterator
from types import NoneType, UnionType
from typing import Annotated, Any, Literal, Union, get_args, get_origin

from pydantic import BaseModel
from pydantic.fields import FieldInfo

from setupcheck.jobfile import setups
from setupcheck.jobfile.keys import about, descriptions
from setupcheck.jobfile.spelling import FILLED_IN, PLAIN, SPELLED, Schema
from setupcheck.jobfile.types import Read

DRAFT = "https://json-schema.org/draft/2020-12/schema"

_BASE: dict[object, Schema] = {
    str: {"type": ["string", "number"]},  # a name of digits alone is a number to YAML, and is read as the name
    int: {"type": "integer"},
    float: {"type": "number"},
    bool: {"type": "boolean"},
}
_BOUNDS = {"ge": "minimum", "gt": "exclusiveMinimum", "le": "maximum", "lt": "exclusiveMaximum"}
_LENGTHS = {dict: "minProperties", tuple: "minItems", str: "minLength"}


def as_json_schema() -> str:
    """The schema as text, the same for the same records. Keys stand in the order of the records, these by name."""
    found: dict[str, Schema] = {}
    root = _record(setups.Job, found)
    whole = {"$schema": DRAFT, "title": "Job file of setupcheck", **root, "$defs": dict(sorted(found.items()))}
    return json.dumps(whole, indent=1, ensure_ascii=False) + "\n"


def _record(record: type[BaseModel], found: dict[str, Schema]) -> Schema:
    """A map with the keys of one record and no others."""
    words = descriptions(record)
    properties: dict[str, Schema] = {}
    required: list[str] = []
    for name, field in record.model_fields.items():
        key = field.alias or name
        properties[key] = _field(field, found) | ({"description": words[key]} if key in words else {})
        if field.is_required() and key not in FILLED_IN.get(record, ()):
            required.append(key)
    if record is setups.Hold:  # the first plane has to name its device, which the second one takes over
        properties["centre"]["required"] = list(FILLED_IN[setups.Centre])
    return {
        "description": about(record),
        "type": "object",
        "properties": properties,
        **({"required": required} if required else {}),
        "additionalProperties": False,
    }


def _field(field: FieldInfo, found: dict[str, Schema]) -> Schema:
    made = _kind(field.annotation, field.metadata, found)
    plain = isinstance(field.default, str | bool | int | float) and "examples" not in made
    return made | ({"default": field.default} if plain else {})


def _kind(kind: Any, notes: Iterable[object], found: dict[str, Schema]) -> Schema:
    """What may stand for a type. `notes` are those that pydantic keeps beside it: readers, bounds, lengths."""
    notes = [*_flat(notes)]
    origin, inside = get_origin(kind), get_args(kind)
    if origin is Annotated:
        return _kind(inside[0], [*inside[1:], *notes], found)
    if origin is Union or origin is UnionType:
        kinds = [_kind(one, notes, found) for one in inside if one is not NoneType]
        return kinds[0] if len(kinds) == 1 else {"anyOf": kinds}
    for note in notes:
        if id(note) in SPELLED:
            return dict(SPELLED[id(note)])
        if isinstance(note, Read):
            if not note.words:
                raise LookupError(f"no spelling of a {kind}. Write its type into jobfile/spelling.py")
            return {"enum": list(note.words)}
    return _plain(kind, origin, inside, found) | dict(_limits(origin or kind, notes))


def _plain(kind: Any, origin: object, inside: tuple[Any, ...], found: dict[str, Schema]) -> Schema:
    """A type without a reader of its own."""
    if origin is Literal:
        return {"enum": list(inside)}
    if origin is tuple:
        return {"type": "array", "items": _kind(inside[0], (), found)}
    if origin is dict:
        entry = _kind(inside[1], (), found)
        if get_origin(inside[0]) is Literal:
            keys = dict.fromkeys(get_args(inside[0]), entry)
            return {"type": "object", "properties": keys, "additionalProperties": False}
        return {"type": "object", "additionalProperties": entry}
    if isinstance(kind, type) and issubclass(kind, BaseModel):
        return _reference(kind, found)
    return dict(_BASE[kind])


def _reference(record: type[BaseModel], found: dict[str, Schema]) -> Schema:
    """The name of a record among the definitions, and what may stand for it."""
    if record.__name__ not in found:
        found[record.__name__] = {}  # holds its place while what is inside it is made
        found[record.__name__] = _record(record, found)
    whole = {"$ref": f"#/$defs/{record.__name__}"}
    return {"anyOf": [dict(PLAIN[record]), whole]} if record in PLAIN else whole


def _flat(notes: Iterable[object]) -> Iterator[object]:
    for note in notes:
        if isinstance(note, FieldInfo):
            yield from note.metadata
        else:
            yield note


def _limits(kind: Any, notes: Iterable[object]) -> Iterator[tuple[str, object]]:
    """Bounds of numbers and least counts."""
    for note in notes:
        for name, word in _BOUNDS.items():
            if (bound := getattr(note, name, None)) is not None:
                yield word, bound
        if (least := getattr(note, "min_length", None)) is not None:
            yield _LENGTHS[kind], least
