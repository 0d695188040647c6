"""Entries of the file as they were written, before a model has read them: maps, lists and names out of the raw tree."""

from __future__ import annotations

from collections.abc import Mapping, Sequence


def map_of(node: object) -> Mapping[str, object]:
    """The map itself; an empty one where something else stands."""
    return node if isinstance(node, dict) else {}


def list_of(node: object) -> Sequence[object]:
    """The list itself; an empty one where something else stands."""
    return node if isinstance(node, list) else ()


def name_of(node: object) -> str | None:
    """The name that an entry stands for; the models take a bare number for a name too."""
    if isinstance(node, str) or (isinstance(node, int | float) and not isinstance(node, bool)):
        return str(node)
    return None


def number_of(node: object) -> int | None:
    """A whole number; None for anything else."""
    return node if isinstance(node, int) and not isinstance(node, bool) else None
