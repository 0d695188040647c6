"""A job with some of its entries replaced or added by path, read again by the same reader: what if."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import replace

from pydantic import BaseModel

from setupcheck.errors import JobError, Problem, SetupcheckError, printable
from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob, Loc, read_tree
from setupcheck.jobfile.setups import Through
from setupcheck.jobfile.touched import Touched
from setupcheck.notation import nearest, plain, quoted
from setupcheck.record import record
from setupcheck.yamlfile import Data, Node, Place, Tree, parse

LONGEST_SHOWN = 60
"""Characters of a change that a message repeats. Source: our screening choice."""
MOST_OFFERED = 8
"""Keys or names offered where none is near. Source: our screening choice."""
LONGEST_CHANGE = 2_000
"""Characters of one change. Source: our screening choice; an entry of a job file is one line."""


@record
class Change:
    """One entry to replace or add.

    key    path as the reports print it, `setups.30.hold.centre.clearance`
    value  in the job file's own notation, `20 um` or `{at_most: 10 um}`

    >>> Change("setups.30.hold.centre.clearance", "20 um").told()
    'setups.30.hold.centre.clearance=20 um'
    """

    key: str
    value: str

    def told(self) -> str:
        """As it is typed, cut short where it is long."""
        text = printable(f"{self.key}={self.value}")
        return text if len(text) <= LONGEST_SHOWN else text[: LONGEST_SHOWN - 1] + "\u2026"


def read_change(text: str) -> Change:
    """`KEY=VALUE` taken apart.

    Raises: SetupcheckError where one of them is missing.

    >>> read_change("setups.30.hold.centre.clearance=20 um")
    Change(key='setups.30.hold.centre.clearance', value='20 um')
    """
    key, sign, value = text.partition("=")
    key, value = key.strip(), value.strip()
    shown = quoted(text)
    if not sign or not key:
        raise SetupcheckError(
            f"--set {shown} is not KEY=VALUE. Write a path of the job file and its new value, as in "
            "--set 'setups.30.hold.centre.clearance=20 um'"
        )
    if not value:
        raise SetupcheckError(f"--set {shown} has nothing behind its =. Write the new value, as in '{key[:60]}=20 um'")
    if len(text) > LONGEST_CHANGE or "\n" in text or "\r" in text:
        raise SetupcheckError(
            f"--set {shown} has more than one line, or more than {LONGEST_CHANGE} characters. "
            "Write one line, as in {at_most: 10 um, device: four-jaw}"
        )
    return Change(key, value)


def changes_of(entries: Mapping[str, str | int | float]) -> tuple[Change, ...]:
    """Changes written as a mapping of path to value; a bare number is one of the file's own units, as it is there.

    Raises: SetupcheckError for a key or value that is no text or number, or as `read_change`.

    >>> changes_of({"setups.30.hold.centre.clearance": "20 um", "parts.hub.surfaces.bore.to": 26})[1]
    Change(key='parts.hub.surfaces.bore.to', value='26')
    """
    found = []
    for key, value in entries.items():
        if not isinstance(key, str) or not isinstance(value, str | int | float) or isinstance(value, bool):
            raise SetupcheckError(
                f"{quoted(str(key))}: {quoted(str(value))} is no text or number. "
                "Write path and value as text, as in {'setups.30.hold.centre.clearance': '20 um'}"
            )
        if not key.strip() or "=" in key:
            raise SetupcheckError(
                f"{quoted(key)} is no path of the job file. Write it as in setups.30.hold.centre.clearance"
            )
        found.append(read_change(f"{key}={value if isinstance(value, str) else plain(value)}"))
    return tuple(found)


def changed(loaded: LoadedJob, changes: Sequence[Change]) -> LoadedJob:
    """The job with its entries replaced or added, all at once, and checked as if the file said so.

    A key may go into a plain value that is short for a map: `runout.measured` keeps the `10 um` that stood there as `at_most`.
    Places of what is new are those of what stood there, so that messages point at the file.
    Raises: JobError for a path or a value that cannot be, each problem saying that it comes from --set.
    """
    tree = loaded.tree
    ways: list[tuple[Loc, Change]] = []
    for change in changes:
        loc = _way(loaded, change)
        for other, first in ways:
            if loc[: len(other)] == other or other[: len(loc)] == loc:
                how = (
                    "is set twice"
                    if loc == other
                    else f"stands together with {quoted(first.key)}, one inside the other"
                )
                raise _refused(loaded, change, tree.place(loc), how, "Set it once")
        ways.append((loc, change))
    for loc, change in ways:
        tree = _put(_opened(loaded, tree, loc), loc, _value(change))
    with from_set(changes):
        return replace(read_tree(tree, loaded.sha256), file=loaded.file)


@contextmanager
def from_set(changes: Sequence[Change]) -> Iterator[None]:
    """Problems of a changed job say which --set they come from: the file itself has none."""
    try:
        yield
    except JobError as wrong:
        raise JobError(wrong.file, wrong.lines, [_said(problem, changes) for problem in wrong.problems]) from None


def _said(problem: Problem, changes: Sequence[Change]) -> Problem:
    if "--set " in problem.problem:
        return problem
    mine = [c for c in changes if problem.path == c.key or problem.path.startswith((f"{c.key}.", f"{c.key}["))]
    mine = mine or [c for c in changes if c.key.rpartition(".")[0] == problem.path] or list(changes)
    return replace(problem, problem=f"with --set {' and '.join(c.told() for c in mine)}: {problem.problem}")


def _value(change: Change) -> Data:
    """The value as the file's own reader takes it.

    Raises: JobError that shows the value.
    """
    return parse(change.value, f"--set {change.key[:LONGEST_SHOWN]}").data


def _way(loaded: LoadedJob, change: Change) -> Loc:
    """The way to an entry. Its last step may be new, and steps before it where the entries around them know such a key.

    Raises: JobError with the names that are known where the path leaves the file.
    """
    loc = loaded.loc(change.key)
    node: Data = loaded.tree.data
    around_it: object = loaded.job
    for at, step in enumerate(loc):
        stands, around_it = around_it, _inner(around_it, step)
        last = at == len(loc) - 1
        place = loaded.tree.place(loc[:at])
        around = loaded.tree.dotted(loc[:at]) or "the job file"
        if isinstance(node, dict) and isinstance(step, str):
            if step in node:
                node = node[step]
            elif last or step in _keys(stands):
                node = None
                if not last:
                    break  # what follows is new altogether, and the reader knows its keys
            else:
                raise _refused(loaded, change, place, f"{quoted(step)} is not in {around}", _offer(step, node, stands))
        elif isinstance(node, list):
            if isinstance(step, int) and 0 <= step < len(node):
                node = node[step]
            elif not (last and step == len(node) and loc[:at] != ("setups",)):
                raise _refused(loaded, change, place, f"{around} has no such entry", _entries(node, around))
        elif node is None and last and isinstance(step, str):
            pass  # `bore:` with nothing behind it takes its first key
        elif isinstance(step, str) and (short := _as_map(stands)):
            node = short.get(step)
        else:
            said = f"{around} has no keys inside: it says {quoted(node) if node is not None else 'nothing'}"
            raise _refused(loaded, change, place, said, f"Set it as a whole: --set '{around}={{{step}: …}}'")
    if not loc:
        raise _refused(loaded, change, loaded.tree.place(()), "no entry is named", "Write its path before the =")
    return loc


def _opened(loaded: LoadedJob, tree: Tree, loc: Loc) -> Tree:
    """The tree with the plain value that a way leads into, if there is one, written as the map it is short for."""
    record: object = loaded.job
    node: Data = tree.data
    for at, step in enumerate(loc):
        if isinstance(node, dict) and isinstance(step, str):
            node = node.get(step)
        elif isinstance(node, list) and isinstance(step, int) and step < len(node):
            node = node[step]
        else:
            scalar = isinstance(node, str | int | float)
            return _put(tree, loc[:at], _as_map(record)) if scalar else tree
        record = _inner(record, step)
    return tree


def _inner(record: object, step: str | int) -> object:
    """What a step of a way leads to among the records of the job; None where nothing is."""
    if isinstance(record, BaseModel):
        return next((getattr(record, n) for n, f in type(record).model_fields.items() if step in (n, f.alias)), None)
    if isinstance(record, dict):
        return record.get(step)
    return record[step] if isinstance(record, tuple) and isinstance(step, int) and step < len(record) else None


def _keys(record: object) -> set[str]:
    """Every key that an entry may have; none of what is not one of the job's own maps."""
    return {f.alias or n for n, f in type(record).model_fields.items()} if isinstance(record, BaseModel) else set()


def _as_map(record: object) -> dict[str, Data]:
    """What a plain value is short for: a bound is an `at_most`, `32 H6` a nominal size with a fit, a name a surface."""
    if isinstance(record, Deviation) and record.at_most is not None:
        return {"at_most": _mm(record.at_most)}
    if isinstance(record, Dimension) and record.nominal is not None:
        sizes = {"nominal": record.nominal, "lower": record.lower, "upper": record.upper}
        shown: dict[str, Data] = {key: _mm(size) for key, size in sizes.items() if size is not None}
        return {**shown, "fit": record.fit} if record.fit else shown
    if isinstance(record, Through):
        return {"by": record.by, "runout": {"device": record.by}}
    return {"surface": record.surface} if isinstance(record, Touched) else {}


def _mm(size: float) -> str:
    return f"{size!r} mm"


def _offer(step: str, node: dict[str, Data], record: object) -> str:
    near = nearest(step, [*node, *sorted(_keys(record) - node.keys())])
    if near is not None:
        return f"Did you mean {near}?"
    known = list(node)
    return f"There: {', '.join(known[:MOST_OFFERED])}{' …' if len(known) > MOST_OFFERED else ''}"


def _entries(node: list[Data], around: str) -> str:
    ops = [str(one["op"]) for one in node if isinstance(one, dict) and "op" in one]
    if ops:
        return f"There: {', '.join(f'{around}.{op}' for op in ops[:MOST_OFFERED])}"
    return f"There: {around}[1] to {around}[{len(node)}]" if node else "Its list is empty"


def _refused(loaded: LoadedJob, change: Change, place: Place, problem: str, hint: str) -> JobError:
    says = f"--set {change.told()}: {problem}"
    return JobError(
        loaded.tree.file,
        loaded.tree.lines,
        [Problem(change.key[:LONGEST_SHOWN], place.line, place.column, place.length, says, hint)],
    )


def _put(tree: Tree, loc: Loc, value: Data) -> Tree:
    """The tree with one value in another place's stead; nothing of the old tree is written to."""
    data, node = _within(tree.data, tree.root, loc, value)
    return replace(tree, data=data, places=node)


def _within(data: Data, node: Node, loc: Loc, value: Data) -> tuple[Data, Node]:
    if not loc:
        return value, _places(value, node.place, node.key_place)
    step, rest = loc[0], loc[1:]
    new_there = Node(node.key_place, node.key_place)
    if isinstance(step, int):
        entries = list(data) if isinstance(data, list) else []
        nodes = list(node.inside) if isinstance(node.inside, list) else []
        old, there = (entries[step], nodes[step]) if step < len(entries) else (None, new_there)
        put, stands = _within(old, there, rest, value)
        entries[step : step + 1], nodes[step : step + 1] = [put], [stands]
        return entries, Node(node.place, node.key_place, nodes)
    keys = dict(data) if isinstance(data, dict) else {}
    inside = dict(node.inside) if isinstance(node.inside, dict) else {}
    keys[step], inside[step] = _within(keys.get(step), inside.get(step, new_there), rest, value)
    return keys, Node(node.place, node.key_place, inside)


def _places(value: Data, place: Place, key_place: Place) -> Node:
    """Everything inside a new value stands where the old one stood."""
    inner: Iterator[tuple[str, Node]]
    if isinstance(value, dict):
        inner = ((key, _places(one, place, place)) for key, one in value.items())
        return Node(place, key_place, dict(inner))
    if isinstance(value, list):
        return Node(place, key_place, [_places(one, place, place) for one in value])
    return Node(place, key_place)
