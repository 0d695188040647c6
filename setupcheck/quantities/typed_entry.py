"""How a value is typed into the entry it belongs to: the change of the job file that a report prints. mm, rad."""

from __future__ import annotations

import math
import re

from setupcheck.errors import JobError
from setupcheck.jobfile.changing import Change, changed
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.notation import show
from setupcheck.quantities.entries import deviation, stated
from setupcheck.yamlfile import Data

_LIMITED = re.compile(r"(?P<size>[^±]*[^±\s])\s*±\s*(?P<half>[0-9.]+)(?P<unit>.*)")
SAME = 1e-6
"""Share by which a value read back may differ from the one that was typed: its last decimal. Source: our choice."""


def step_of(unit: str, *, inches: bool) -> float:
    """What a printed value is rounded by: 0.1 um, 0.01 thou, 0.1 second of arc [mm or rad]."""
    if unit == "arcsec":
        return math.radians(0.1 / 3600.0)
    return 0.01 * 0.0254 if inches else 1e-4


def shown(value: float, unit: str, *, inches: bool) -> str:
    """A small length or angle as it is typed: `7.7 um`, `0.30 thou`, `12.3"`."""
    if unit == "arcsec":
        return show(value, "arcsec", 1)
    return show(value, "thou", 2) if inches else show(value, "um", 1)


def typed_change(loaded: LoadedJob, path: str, value: float, unit: str) -> Change | None:
    """What to type so that an entry says `value`; None where it cannot be said by one number there.

    The change is read back by the job's own reader, so that what is printed is what is meant.
    """
    for change in _spellings(loaded, path, value, unit):
        try:
            said = stated(changed(loaded, [change]), path)
        except JobError:
            continue
        if said is not None and abs(said.now - value) <= SAME * value:
            return change
    return None


def _spellings(loaded: LoadedJob, path: str, value: float, unit: str) -> list[Change]:
    node: Data = loaded.tree.data
    try:
        for step in loaded.loc(path):
            node = node[step]  # type: ignore[index]
    except (KeyError, IndexError, TypeError):
        node = None
    inches = loaded.job.units == "in"
    text = shown(value, unit, inches=inches)
    if isinstance(node, dict):
        if deviation(loaded, path) is None:
            return [Change(f"{path}.uncertainty", text)] if "uncertainty" in node else []
        own = next((key for key in ("measured", "at_most") if key in node), None)
        return [Change(f"{path}.{own or 'at_most'}", text)]
    if isinstance(node, list):
        return [Change(f"{path}[{len(node)}]", text), Change(path, f"[{shown(0.0, unit, inches=inches)}, {text}]")]
    if isinstance(node, str) and (found := _LIMITED.fullmatch(node)):
        plain = f"{value / 25.4:.6f}" if inches else f"{value:.4f}"
        return [Change(path, f"{found['size']} ±{text if found['unit'].strip() else plain}")]
    return [Change(path, text), Change(path, f"±{text}")]
