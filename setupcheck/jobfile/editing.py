"""A job with entries set or taken out and operations exchanged, read again by the same reader: what is printed was tried."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from setupcheck.jobfile.changing import Change, changed
from setupcheck.jobfile.reading import LoadedJob, Loc, read_tree
from setupcheck.record import record
from setupcheck.yamlfile import Data, Tree


@record
class Exchange:
    """Two operations that change places: each keeps the number that its place has."""

    first: int
    second: int


@record
class Drop:
    """An entry that is taken out, by its path."""

    key: str


Edit = Change | Exchange | Drop


def edited(loaded: LoadedJob, edits: Sequence[Edit]) -> LoadedJob:
    """The job as if the file said so: exchanges first, then all entries out and in at once, checked as the file is.

    Raises: JobError for what cannot be.
    """
    for one in edits:
        if isinstance(one, Exchange):
            tree = _exchanged(loaded.tree, one)
            loaded = replace(read_tree(tree, loaded.sha256), file=loaded.file)
    tree = loaded.tree
    for one in edits:
        if isinstance(one, Drop):
            tree = replace(tree, data=_without(tree.data, loaded.loc(one.key)))
    changes = [one for one in edits if isinstance(one, Change)]
    if changes:
        return changed(replace(loaded, tree=tree), changes)
    return replace(read_tree(tree, loaded.sha256), file=loaded.file) if tree is not loaded.tree else loaded


def _without(data: Data, loc: Loc) -> Data:
    """The data with one entry of a map taken out, where it is there; nothing of the old data is written to."""
    step, rest = loc[0], loc[1:]
    if isinstance(data, list) and isinstance(step, int) and rest and step < len(data):
        return [*data[:step], _without(data[step], rest), *data[step + 1 :]]
    if not isinstance(data, dict) or step not in data:
        return data
    name = str(step)
    if rest:
        return {**data, name: _without(data[name], rest)}
    return {key: value for key, value in data.items() if key != name}


def _exchanged(tree: Tree, both: Exchange) -> Tree:
    """The tree with two setups in each other's place; answers to cautions follow their operation."""
    data = tree.data
    assert isinstance(data, dict)
    setups, other = data["setups"], {both.first: both.second, both.second: both.first}
    assert isinstance(setups, list)
    found = {int(str(one["op"])): one for one in setups if isinstance(one, dict) and "op" in one}
    moved: list[Data] = []
    for one in setups:
        op = int(str(one["op"])) if isinstance(one, dict) and "op" in one else 0
        moved.append({**found[other[op]], "op": one["op"]} if op in other and isinstance(one, dict) else one)
    checked = data.get("checked")
    answers = [_renumbered(one, other) for one in checked] if isinstance(checked, list) else checked
    return replace(tree, data={**data, "setups": moved, **({"checked": answers} if answers is not None else {})})


def _renumbered(answer: Data, other: dict[int, int]) -> Data:
    if isinstance(answer, dict) and str(answer.get("op", "")).isdecimal():
        op = int(str(answer["op"]))
        return {**answer, "op": other[op]} if op in other else answer
    return answer
