"""Every number a job file states: found generically, as a scalar that the typed job does not keep as words, and spoilt."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from pydantic import BaseModel

from setupcheck.jobfile.reading import LoadedJob, Loc
from setupcheck.notation import plain
from setupcheck.yamlfile import Data

LABELS = {"setupcheck", "op", "keeps", "number"}
"""Keys whose figures name something and measure nothing: the format, an operation, a hole."""
WAYS = ("doubled", "halved", "negated", "removed")
FACTORS = {"doubled": 2.0, "halved": 0.5, "negated": -1.0}

_ANGLE = re.compile(r"\s*([+-]?)(\d+)\s*deg\s*(?:(\d+(?:\.\d+)?)')?\s*(?:(\d+(?:\.\d+)?)\")?\s*")
_NUMBER = re.compile(r"(?<![A-Za-z0-9.])([+\-±]?)(\d+(?:\.\d+)?)")


@dataclass(frozen=True)
class Number:
    """One number: the path of its scalar, the text of the scalar, and which number of the text it is."""

    job: str
    path: str
    loc: Loc
    text: str
    nth: int

    def told(self) -> str:
        """Where it stands, and as what."""
        return f"{self.job} {self.path} = {self.text}" + (f" (number {self.nth + 1})" if self.nth else "")


def numbers(job: str, loaded: LoadedJob) -> Iterator[Number]:
    """All numbers of a job file, in its order. A tolerance behind a size is a number of its own."""
    for loc, value in _leaves(loaded.tree.data, loaded.job):
        path = loaded.tree.dotted(loc)
        text = value if isinstance(value, str) else plain(value)
        for nth in range(1 if _ANGLE.fullmatch(text) else len(_NUMBER.findall(text))):
            yield Number(job, path, loc, text, nth)


def _leaves(node: Data, typed: object, loc: Loc = ()) -> Iterator[tuple[Loc, str | int | float]]:
    """Scalars that the typed job does not keep as words."""
    if isinstance(node, dict):
        for key, value in node.items():
            if key not in LABELS:
                yield from _leaves(value, _inner(typed, key), (*loc, key))
    elif isinstance(node, list):
        for i, value in enumerate(node):
            yield from _leaves(value, _inner(typed, i), (*loc, i))
    elif isinstance(node, str | int | float) and not isinstance(node, bool) and not isinstance(typed, str | None):
        yield loc, node


def _inner(typed: object, step: str | int) -> object:
    """What the typed job has behind a key of the file."""
    if isinstance(typed, BaseModel):
        return next((getattr(typed, n) for n, f in type(typed).model_fields.items() if step in (n, f.alias)), typed)
    if isinstance(typed, dict):
        return typed.get(step, typed)
    if isinstance(typed, tuple | list) and isinstance(step, int):
        return typed[step] if step < len(typed) else typed
    return typed


def spoilt(number: Number, way: str) -> str | None:
    """The scalar with one number doubled, halved, negated or taken out; "" where nothing is left of it, None where
    nothing changes. A tolerance of `±3` negated is typed as `-3`, the slip of a hand."""
    angle = _ANGLE.fullmatch(number.text)
    if angle is not None and (angle[3] or angle[4]):
        if way == "removed":
            return ""
        degrees = int(angle[2]) + float(angle[3] or 0) / 60.0 + float(angle[4] or 0) / 3600.0
        return f"{FACTORS[way] * (-degrees if angle[1] == '-' else degrees):.8f} deg"
    found = list(_NUMBER.finditer(number.text))[number.nth]
    before, behind = number.text[: found.start()], number.text[found.end() :]
    if way == "removed":
        return "" if len(_NUMBER.findall(number.text)) == 1 else f"{before.rstrip(' /')}{behind}".strip()
    if float(found[2]) == 0.0:
        return None
    if way == "negated":
        return f"{before}{'' if found[1] == '-' else '-'}{found[2]}{behind}"
    return f"{before}{found[1]}{_like(found[2], FACTORS[way])}{behind}"


def _like(figure: str, factor: float) -> str:
    """A count stays one where it can."""
    scaled = float(figure) * factor
    return str(int(scaled)) if "." not in figure and scaled == int(scaled) else f"{scaled:.10g}"
