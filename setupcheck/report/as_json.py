"""Data as the text of one JSON object, the same for every command that prints one."""

from __future__ import annotations

import json
import re

from setupcheck.errors import printable

_ODD = re.compile(r"[^\n -~]")


def json_text(data: object) -> str:
    """One JSON object ending in a newline. Letters stand as they are; what a terminal would obey is escaped, also beyond ASCII.

    >>> print(json_text({"title": "\\u03c0\\u202e\\x9b"}), end="")
    {
     "title": "π\\u202e\\u009b"
    }
    """
    return _ODD.sub(_escaped, json.dumps(data, ensure_ascii=False, indent=1, allow_nan=False)) + "\n"


def _escaped(found: re.Match[str]) -> str:
    character = found[0]
    return character if printable(character) == character else json.dumps(character)[1:-1]
