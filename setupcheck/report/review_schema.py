"""The JSON Schema (draft 2020-12) of what `setupcheck review --json` prints. Made from its types; no review loads this.

Keys that are not described are let through: a later version may add some without a new number of the format.
"""

from __future__ import annotations

import inspect
import json
from types import NoneType, UnionType
from typing import Any, Literal, Union, get_args, get_origin, get_type_hints, is_typeddict

from setupcheck.jobfile.keys import entries
from setupcheck.jobfile.spelling import Schema
from setupcheck.report import review_blocks, review_types
from setupcheck.report.job_schema import DRAFT
from setupcheck.report.json import FORMAT

_BASE: dict[object, str] = {str: "string", int: "integer", float: "number", bool: "boolean", NoneType: "null"}

DERIVED: dict[object, Any] = {
    review_blocks.HouseData: review_blocks.HouseHead,
    review_types.StackData: review_types.CombinedData,
    review_types.ThenData: review_types.CombinedData,
}
"""What a type is derived from, which it does not know itself."""


def as_json_schema() -> str:
    """The schema as text, the same for the same types. Keys stand in the order they are written, types by name."""
    found: dict[str, Schema] = {}
    root = _object(review_types.ReviewData, found)
    root["properties"]["format"] |= {"const": FORMAT}
    whole = {"$schema": DRAFT, "title": "Review of setupcheck", **root, "$defs": dict(sorted(found.items()))}
    return json.dumps(whole, indent=1, ensure_ascii=False) + "\n"


def _object(kind: Any, found: dict[str, Schema]) -> Schema:
    """An object with all the keys of one type.

    Raises: KeyError for a key that its docstring does not describe.
    """
    words = _words(kind)
    hints = get_type_hints(kind)
    return {
        "description": _text(kind).partition("\n\n")[0],
        "type": "object",
        "properties": {key: _kind(hint, found) | {"description": words[key]} for key, hint in hints.items()},
        "required": [*hints],
    }


def _words(kind: Any) -> dict[str, str]:
    """What is written of each key, also in the docstring of what the type is derived from."""
    inherited = _words(DERIVED[kind]) if kind in DERIVED else {}
    return inherited | {name: words for names, words in entries(_text(kind)) for name in names}


def _text(kind: Any) -> str:
    return inspect.cleandoc(kind.__doc__ or "")


def _kind(kind: Any, found: dict[str, Schema]) -> Schema:
    """What may stand for a type."""
    origin, inside = get_origin(kind), get_args(kind)
    if is_typeddict(kind):
        name = kind.__name__.removesuffix("Data")
        if name not in found:
            found[name] = {}  # holds its place while what is inside it is made
            found[name] = _object(kind, found)
        return {"$ref": f"#/$defs/{name}"}
    if origin is Literal:
        return {"enum": list(inside)}
    if origin is Union or origin is UnionType:
        return _one_of(inside, found)
    if origin is list:
        return {"type": "array", "items": _kind(inside[0], found)}
    if origin is dict and get_origin(inside[0]) is Literal:
        names = get_args(inside[0])
        each = {name: _kind(inside[1], found) for name in names}
        return {"type": "object", "properties": each, "required": list(names)}
    if origin is dict:
        return {"type": "object", "additionalProperties": _kind(inside[1], found)}
    return {"type": _BASE[kind]}


def _one_of(kinds: tuple[Any, ...], found: dict[str, Schema]) -> Schema:
    """Any of some types: plain ones in one list, the others beside it."""
    plain = [_BASE[kind] for kind in kinds if kind in _BASE]
    others = [_kind(kind, found) for kind in kinds if kind not in _BASE]
    if not others:
        return {"type": plain}
    return {"anyOf": [*others, *([{"type": plain if len(plain) > 1 else plain[0]}] if plain else [])]}
