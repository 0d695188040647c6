"""Edits of a job file as they are typed: options of `vary`, what is taken out or exchanged, and lines of YAML."""

from __future__ import annotations

import shlex
from collections.abc import Iterator, Sequence

from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Drop, Edit
from setupcheck.report.wording import clean, wrap

TYPED = "--set "
TAKE_OUT = "take out "
EXCHANGE = "exchange "


def as_typed(edits: Sequence[Edit], indent: str) -> Iterator[str]:
    """Each edit on a line of its own, further lines indented deeper: together they are one text with a space at each break."""
    for edit in edits:
        if isinstance(edit, Change):
            text = TYPED + shlex.quote(clean(f"{edit.key}={edit.value}"))
        elif isinstance(edit, Drop):
            text = f"{TAKE_OUT}{clean(edit.key)}"
        else:
            text = (
                f"{EXCHANGE}setups.{edit.first} and setups.{edit.second} (the blocks change places, the numbers stay)"
            )
        yield from wrap(text, first=indent, rest=f"{indent}    ")


def as_yaml(edits: Sequence[Edit], indent: str) -> Iterator[str]:
    """What the file says then, each entry under the key it belongs to; nothing of what is only taken out or exchanged."""
    around = ""
    for edit in edits:
        if not isinstance(edit, Change):
            continue
        where, _, key = clean(edit.key).rpartition(".")
        if where != around:
            yield from wrap(f"{_words(where)}:", first=indent, rest=f"{indent}    ")
            around = where
        yield from wrap(f"{key}: {clean(edit.value)}", first=f"{indent}    ", rest=f"{indent}      ")


def _words(path: str) -> str:
    """A path as one looks for it in the file: `setups.50.hold` is `op 50, hold`."""
    steps = path.split(".")
    if steps[0] == "setups" and len(steps) > 1:
        return ", ".join([f"op {steps[1]}", *steps[2:]])
    return ", ".join(steps)


def as_data(edits: Sequence[Edit]) -> list[dict[str, object]]:
    """The same as plain records."""
    found: list[dict[str, object]] = []
    for edit in edits:
        if isinstance(edit, Change):
            found.append({"set": clean(edit.key), "value": clean(edit.value)})
        elif isinstance(edit, Drop):
            found.append({"take_out": clean(edit.key)})
        else:
            found.append({"exchange": [edit.first, edit.second]})
    return found
