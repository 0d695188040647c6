"""What a shell completes beside names of commands and options: job files, rule ids, drawings, kinds. Loaded at the TAB key alone.

A folder is left to the shell, which goes on inside it: nothing is offered where no job file fits, and then the shell looks.
"""

from __future__ import annotations

import inspect
import os
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import Any

import typer
from typer.models import ParameterInfo

from setupcheck.errors import SetupcheckError, printable

ENDINGS = (".yaml", ".yml")
_PLAIN = "_-./\\:~"
"""What a name may hold beside letters and digits to be offered: the shells quote the rest better themselves."""

Offer = str | tuple[str, str]


def job_files(incomplete: str) -> list[str]:
    """YAML files whose name begins so; none where one of them would have to be quoted."""
    folder, begun = os.path.split(incomplete)
    try:
        names = sorted(entry.name for entry in os.scandir(folder or ".") if entry.is_file())
    except (OSError, ValueError):
        return []
    fitting = [name for name in names if name.startswith(begun) and name.endswith(ENDINGS)]
    if not all(character.isalnum() or character in _PLAIN for name in fitting for character in name):
        return []
    return [f"{incomplete[: len(incomplete) - len(begun)]}{name}" for name in fitting if begun or name[0] != "."]


def rule_ids(incomplete: str) -> list[Offer]:
    """Ids of the shipped rules, each with its title."""
    from setupcheck.flow import rules

    return [(rule.id, printable(rule.title)) for rule in rules().rules if rule.id.startswith(incomplete)]


def drawings(ctx: typer.Context, incomplete: str) -> list[str]:
    """Drawings of the job that was named before, which is reviewed for it; none where it cannot be."""
    words = [ctx.params.get("job"), *ctx.args]  # an option without its value leaves the words before it unread
    job = next((word for word in words if isinstance(word, str | Path) and str(word).endswith(ENDINGS)), None)
    if job is None:
        return []
    from setupcheck.flow import review
    from setupcheck.report.pictures import pictures

    try:
        return [name for name in pictures(review(Path(job)), None) if name.startswith(incomplete)]
    except SetupcheckError:
        return []


def kinds(incomplete: str) -> list[Offer]:
    """Kinds of part that a first job file can be of."""
    from setupcheck.starting.kinds import KINDS

    return [(kind.name, kind.says) for kind in KINDS.values() if kind.name.startswith(incomplete)]


def examples(incomplete: str) -> list[Offer]:
    """Names of the shipped jobs, each with its title."""
    from setupcheck.starting.copying import listed

    return [(name, title) for name, title in listed() if name.startswith(incomplete)]


def _of(*words: str) -> Callable[[str], list[str]]:
    def offered(incomplete: str) -> list[str]:
        return [word for word in words if word.startswith(incomplete)]

    return offered


OFFERED: dict[tuple[str, str], Callable[..., Sequence[Offer]]] = {
    ("rules", "rule"): rule_ids,
    ("sheet", "drawing"): drawings,
    ("new", "kind"): kinds,
    ("new", "like"): examples,
    ("schema", "of"): _of("job", "review"),
    ("review", "color"): _of("auto", "always", "never"),
    ("insert", "paper"): _of("A4", "A3"),
}
"""(command, parameter) -> what is offered; parameters `job` and `jobs` are offered job files in every command."""


def attach(app: typer.Typer) -> None:
    """Tell every command what to offer."""
    for command in app.registered_commands:
        for name, parameter in inspect.signature(command.callback or (lambda: None)).parameters.items():
            offered = job_files if name in ("job", "jobs") else OFFERED.get((str(command.name), name))
            notes: tuple[Any, ...] = getattr(parameter.annotation, "__metadata__", ())
            for note in notes:
                if offered is not None and isinstance(note, ParameterInfo):
                    note.autocompletion = offered
