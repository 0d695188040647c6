"""Sections of the wrong shape: a map for a list, a list for a map, keys that are not indented under their section.

Each is told once and read as it was meant, so that the other mistakes of the file are told in the same run.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from typing import get_origin

from pydantic import BaseModel

from setupcheck.errors import Problem
from setupcheck.jobfile.examples import SHAPES
from setupcheck.jobfile.nodes import map_of
from setupcheck.jobfile.setups import Job
from setupcheck.notation import quoted
from setupcheck.record import record
from setupcheck.yamlfile import Data, Node, Path, Tree

_LISTS = {
    "setups": "op: 10",
    "require": "{what: run-out, of: wheel.bore, at_most: 20 um}",
    "checked": "{caution: glove-heat-rating, op: 70, by: initials}",
    "waive": "{rule: HOLD-001, at: setups.20, reason: …}",
}
"""Sections that are lists, and how an entry of each begins."""

_MAPS = ("parts", "machines", "cutters")
"""Sections that hold names with their entries."""


@record
class _Value:
    """A piece of the file: data and places."""

    data: Data
    node: Node


def meant(tree: Tree) -> tuple[Tree, list[Problem]]:
    """The file as it was meant, and what to say about its shape."""
    if not isinstance(tree.data, dict) or not isinstance(tree.root.inside, dict):
        return tree, []
    data, inside = dict(tree.data), dict(tree.root.inside)
    root = Node(tree.root.place, tree.root.key_place, inside)
    problems = list(_indented(data, inside))
    swapped: list[str] = []
    for key, begins in _LISTS.items():
        if isinstance(data.get(key), dict):
            says = f"{key} is a list", f"Write each entry under it with a dash: `- {_begin(key, data[key], begins)}`"
            problems.append(_problem(inside[key], key, *says))
            read = _as_list(_Value(data[key], inside[key]), key)
            data[key], inside[key] = read.data, read.node
            swapped.append(key)
    for path in _maps_of(data):
        problems += _swap(data, root, path)
    if ("setups" not in data or (data["setups"] == [] and not swapped)) and not _some_given(data):
        first = tree.place(())
        place = inside["setups"].key_place if "setups" in inside else first
        missing = "'setups' is missing here" if "setups" not in inside else "no setup is written here"
        write = f"Write {SHAPES['setups']}"
        problems.append(Problem("setups", place.line, place.column, place.length, missing, write))
    kept = tuple(p for p in tree.problems if p.path not in swapped)  # the numbers that stood as keys
    return replace(tree, data=data, places=root, problems=kept), problems


def _some_given(data: dict[str, Data]) -> bool:
    """A stack of bought parts needs no setup."""
    return any(map_of(part).get("given") for part in map_of(data.get("parts")).values())


def _problem(node: Node, path: str, problem: str, hint: str) -> Problem:
    place = node.key_place
    return Problem(path, place.line, place.column, place.length, problem, hint)


def _begin(key: str, data: Data, otherwise: str) -> str:
    """How the first entry of a list begins that was written as a map."""
    if key == "setups" and isinstance(data, dict) and data:
        first = data.get("op", next(iter(data)))
        if str(first).isdecimal():
            return f"op: {first}"
    return otherwise


def _as_list(value: _Value, key: str) -> _Value:
    """A map read as the list of its entries: named by operation or figure, or one entry without its dash."""
    names = {"setups": "op", "require": "what"}
    assert isinstance(value.data, dict) and isinstance(value.node.inside, dict)
    entries: list[Data] = []
    nodes: list[Node] = []
    if any(
        not (isinstance(e, dict) or (e is None and name.isdecimal())) for name, e in value.data.items()
    ):  # its keys are those of an entry
        entries, nodes = [value.data], [value.node]
    else:
        for name, entry in value.data.items():
            node = value.node.inside[name]
            own, inner = (entry, node.inside) if isinstance(entry, dict) and isinstance(node.inside, dict) else ({}, {})
            called = names.get(key)
            if called is None or called in own or (key == "setups" and not name.isdecimal()):
                added: dict[str, Data] = {}
            else:
                added = {called: int(name) if key == "setups" and len(name) < 9 else name}
            places = {k: Node(node.key_place, node.key_place) for k in added}
            entries.append({**added, **own})
            nodes.append(Node(node.place, node.key_place, {**places, **inner}))
    return _Value(entries, Node(value.node.place, value.node.key_place, nodes))


def _maps_of(data: dict[str, Data]) -> Iterator[Path]:
    """Places where names with their entries belong, outer ones first."""
    yield from ((key,) for key in _MAPS)
    parts, setups = data.get("parts"), data.get("setups")
    yield from (("parts", part, "surfaces") for part in (parts if isinstance(parts, dict) else ()))
    yield from (("setups", i, "cut") for i in range(len(setups) if isinstance(setups, list) else 0))


def _swap(data: dict[str, Data], root: Node, path: Path) -> Iterator[Problem]:
    """A list where names belong, read by the names its entries have: `- bore: {…}`, `- name: bore`, `- bore`."""
    holder: Data = data
    node = root
    shown = ""
    for step in path[:-1]:
        if isinstance(holder, dict) and isinstance(node.inside, dict) and step in holder:
            holder, node = holder[str(step)], node.inside[str(step)]
            shown += f"{step}."
        elif isinstance(holder, list) and isinstance(node.inside, list):
            holder, node = holder[int(step)], node.inside[int(step)]
            op = holder.get("op") if isinstance(holder, dict) else None
            shown = shown[:-1] + (f".{op}." if op is not None else f"[{int(step) + 1}].")
        else:
            return
    key = str(path[-1])
    if not isinstance(holder, dict) or not isinstance(node.inside, dict) or not isinstance(holder.get(key), list):
        return
    written = node.inside[key]
    read = _as_map(_Value(holder[key], written))
    first = next(iter(read.data), "wheel") if isinstance(read.data, dict) else "wheel"
    named, entry = ("the surface", "{}") if key == "cut" else ("each name", "{…}")
    hint = f"Write {named}, then a colon and its entry, as in {first}: {entry}"
    yield _problem(written, f"{shown}{key}", f"{key} is a map, not a list", hint)
    holder[key], node.inside[key] = read.data, read.node


def _as_map(value: _Value) -> _Value:
    found: dict[str, Data] = {}
    nodes: dict[str, Node] = {}
    assert isinstance(value.data, list) and isinstance(value.node.inside, list)
    for entry, node in zip(value.data, value.node.inside, strict=True):
        if isinstance(entry, str):
            found[entry], nodes[entry] = {}, Node(node.place, node.key_place, {})
        elif isinstance(entry, dict) and isinstance(node.inside, dict):
            if len(entry) == 1 and isinstance(next(iter(entry.values())), dict | None):
                for name, inner in entry.items():
                    found[name], nodes[name] = inner, node.inside[name]
            elif isinstance(called := entry.get("name"), str):
                found[called] = {k: v for k, v in entry.items() if k != "name"}
                nodes[called] = Node(node.place, node.key_place, {k: v for k, v in node.inside.items() if k != "name"})
    return _Value(found, Node(value.node.place, value.node.key_place, nodes))


def _indented(data: dict[str, Data], inside: dict[str, Node]) -> Iterator[Problem]:
    """Keys at the left margin that belong to the empty section just above them; they are put into it."""
    above: str | None = None  # the last section of which nothing is written yet
    taken: dict[str, list[str]] = {}
    for key in list(data):
        if key in Job.model_fields:
            above = key if data[key] is None else None
        elif above is not None and _belongs(key, data[key], above):
            taken.setdefault(above, []).append(key)
        else:
            above = None
    for section, keys in taken.items():
        node = inside[section]
        says = f"{_listed(keys)} {'belongs' if len(keys) == 1 else 'belong'} to {section}"
        yield _problem(inside[keys[0]], section, says, f"Indent {'it' if len(keys) == 1 else 'them'} under {section}:")
        inside[section] = Node(node.place, node.key_place, {key: inside.pop(key) for key in keys})
        data[section] = {key: data.pop(key) for key in keys}


def _belongs(key: str, value: Data, section: str) -> bool:
    """Whether a key that no job has is one of a section: a key of its model, or a name with its entry."""
    annotation = Job.model_fields[section].annotation
    if section in _MAPS and get_origin(annotation) is dict:
        return isinstance(value, dict)
    models = [m for m in getattr(annotation, "__args__", (annotation,)) if isinstance(m, type)]
    return any(key in m.model_fields for m in models if issubclass(m, BaseModel))


def _listed(keys: list[str]) -> str:
    words = [quoted(key).strip("'") for key in keys]
    return words[0] if len(words) == 1 else f"{', '.join(words[:-1])} and {words[-1]}"
