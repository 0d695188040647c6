"""What stands in the job file at a path, as the planner wrote it, in one line."""

from __future__ import annotations

import re

from setupcheck.jobfile.reading import LoadedJob
from setupcheck.notation import plain
from setupcheck.report.wording import clean

LONGEST = 100
"""Characters of a planner's text that are repeated. Source: our screening choice."""

_OWN_UNIT = {"poisson": "", "density": "kg/m3", "specific_heat": "J/kgK"}
"""Keys whose bare number is no length, and its unit."""
_BARE = re.compile(r"[0-9][0-9.]*\s*(±|\+/?-|[+-])[0-9./+\s±-]*")
"""A size with limits and no unit: `13.500 ±0.020`, `32 +0.021/0`."""


def written(loaded: LoadedJob, path: str) -> str:
    """The value at a path: `10 um`, `2 um, 8 um`, `measured 2.31 mm, uncertainty 4 um`; empty where nothing stands there.

    A bare number stands for a length and gets the unit of the file.
    """
    node: object = loaded.tree.data
    for step in loaded.loc(path):
        if isinstance(node, dict):
            node = node.get(str(step))
        elif isinstance(node, list) and isinstance(step, int) and step < len(node):
            node = node[step]
        else:
            return ""
    text = clean(_said(node, loaded.job.units))
    return text if len(text) <= LONGEST else text[: LONGEST - 1] + "…"


def _said(node: object, units: str) -> str:
    match node:
        case bool() | None:
            return ""
        case int() | float():
            return f"{plain(node)} {units}".strip()
        case str():
            return f"{node} {units}" if _BARE.fullmatch(node) else node
        case list():
            return ", ".join(_said(entry, units) for entry in node)
        case dict():
            return ", ".join(
                f"{str(key).replace('_', ' ')} {_said(entry, _OWN_UNIT.get(str(key), units))}".strip()
                for key, entry in node.items()
            )
        case _:
            return ""
