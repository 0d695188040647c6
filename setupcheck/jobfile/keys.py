"""What each key of the job file is, as the docstring of its record tells it. No review loads this."""

from __future__ import annotations

import inspect
import re

from pydantic import BaseModel

_ENTRY = re.compile(r"([a-z0-9_]+(?:, [a-z0-9_]+)*)  +(\S.*)")
_NEXT = re.compile(r";  +(?=[a-z0-9_]+(?:, [a-z0-9_]+)*  )")


def keys_of(record: type[BaseModel]) -> dict[str, str]:
    """Each key as a planner writes it (`from`, not the name it has inside) -> name of its field."""
    return {field.alias or name: name for name, field in record.model_fields.items()}


def about(record: type[BaseModel]) -> str:
    """What the record is: the first paragraph of its docstring."""
    return " ".join(_own_text(record).split("\n\n")[0].split())


def descriptions(record: type[BaseModel]) -> dict[str, str]:
    """What is written of each key, in the record's docstring or in that of what it is derived from.

    A line of such a list is `name  what it is [unit]`, with two spaces or more between; `low, high  …` tells of both, and
    `;  ` goes on with the next key. Lines that are indented deeper go on with the entry above them.
    """
    found: dict[str, str] = {}
    keys = keys_of(record)
    for one in record.__mro__:
        if issubclass(one, BaseModel):
            for names, words in entries(_own_text(one)):
                found |= {name: words for name in names if name in keys and name not in found}
    return {key: found[key] for key in keys if key in found}


def _own_text(record: type[BaseModel]) -> str:
    return inspect.cleandoc(record.__dict__.get("__doc__") or "")


def entries(text: str) -> list[tuple[list[str], str]]:
    """(keys, words) of every entry in the paragraphs behind the first."""
    lines: list[str] = []
    for line in text.partition("\n\n")[2].splitlines():
        if line.startswith(" ") and lines:
            lines[-1] += f" {line.strip()}"
        else:
            lines.append(line)
    found = (_ENTRY.fullmatch(entry) for line in lines for entry in _NEXT.split(line))
    return [(entry[1].split(", "), entry[2]) for entry in found if entry is not None]
