"""Sound files spoilt: on the level of the YAML tree, of lines, and of bytes. All from one stream of random numbers."""

from __future__ import annotations

import contextlib
import copy
import random
import re
from collections.abc import Callable
from functools import cache

import yaml

from tests.fuzz.material import BYTES, WILD, sound

LOADER = getattr(yaml, "CBaseLoader", yaml.BaseLoader)
DUMPER = getattr(yaml, "CBaseDumper", yaml.BaseDumper)
TEXT, LIST, MAP = "tag:yaml.org,2002:str", "tag:yaml.org,2002:seq", "tag:yaml.org,2002:map"
NUMBER = re.compile(r"-?\d+(?:\.\d+)?")
FACTORS = (0.0, -1.0, 1e-6, 1e-3, 0.1, 0.5, 0.999, 1.001, 2.0, 10.0, 1e3, 1e6, 1e12)


@cache
def tree(text: str) -> yaml.Node:
    """The nodes of a sound text, which nobody changes."""
    return _composed(text)


def _composed(text: str) -> yaml.Node:
    found = yaml.compose(text, Loader=LOADER)
    assert found is not None
    return found


@cache
def values_by_key(kind: str) -> dict[str, list[yaml.Node]]:
    """Everything that stands behind a key in any sound file of a kind."""
    found: dict[str, list[yaml.Node]] = {}
    for text in sound(kind):
        for map_ in maps(tree(text)):
            for key, value in map_.value:
                found.setdefault(key.value, []).append(value)
    return found


def nodes(root: yaml.Node) -> list[yaml.Node]:
    """All nodes that hold others."""
    found, open_ = [], [root]
    while open_:
        here = open_.pop()
        if isinstance(here, yaml.MappingNode):
            found.append(here)
            open_ += [value for _, value in here.value]
        elif isinstance(here, yaml.SequenceNode):
            found.append(here)
            open_ += here.value
    return found


def maps(root: yaml.Node) -> list[yaml.MappingNode]:
    """The maps of a tree that hold something."""
    return [one for one in nodes(root) if isinstance(one, yaml.MappingNode) and one.value]


def in_tree(text: str, kind: str, rng: random.Random) -> str:
    """The text with one to four changes of its tree."""
    root = _composed(text)
    mild = (
        rng.random() < 0.5
    )  # one change that is likely to be read, so that what comes behind the reader is met as well
    for _ in range(1 if mild else rng.choice((1, 1, 2, 2, 3))):
        if found := maps(root):
            rng.choice(MILD if mild else CHANGES)(rng.choice(found), kind, rng)
    said: str = yaml.serialize(root, Dumper=DUMPER, allow_unicode=True, width=110)
    return said


def _scalar(said: str) -> yaml.ScalarNode:
    return yaml.ScalarNode(TEXT, said)


def _lost(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    map_.value.pop(rng.randrange(len(map_.value)))


def _twice(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    map_.value.append(rng.choice(map_.value))


def _swapped(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    a, b = rng.randrange(len(map_.value)), rng.randrange(len(map_.value))
    (key_a, value_a), (key_b, value_b) = map_.value[a], map_.value[b]
    map_.value[a], map_.value[b] = (key_a, value_b), (key_b, value_a)


def _foreign(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    """Another value of the same key, from any sound file."""
    at = rng.randrange(len(map_.value))
    key = map_.value[at][0]
    map_.value[at] = (key, copy.deepcopy(rng.choice(values_by_key(kind).get(key.value) or [_scalar("1")])))


def _added(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    """A key from anywhere, with a value of its own."""
    key = rng.choice(sorted(values_by_key(kind)))
    map_.value.append((_scalar(key), copy.deepcopy(rng.choice(values_by_key(kind)[key]))))


def _wild(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    at = rng.randrange(len(map_.value))
    map_.value[at] = (map_.value[at][0], _scalar(rng.choice(WILD)))


def _renamed(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    at = rng.randrange(len(map_.value))
    map_.value[at] = (_scalar(rng.choice(WILD + tuple(values_by_key(kind)))), map_.value[at][1])


def _number(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    """A number made larger, smaller, negative or none at all; its unit stays."""
    found = [v for _, v in map_.value if isinstance(v, yaml.ScalarNode) and NUMBER.search(v.value)]
    if found:
        value = rng.choice(found)
        number = rng.choice(list(NUMBER.finditer(value.value)))
        new = f"{float(number[0]) * rng.choice(FACTORS):.12f}".rstrip("0").rstrip(".")
        value.value = value.value[: number.start()] + new + value.value[number.end() :]


def _deeper(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    at = rng.randrange(len(map_.value))
    key, value = map_.value[at]
    for _ in range(rng.choice((1, 2, 17, 40))):
        value = (
            yaml.SequenceNode(LIST, [value], flow_style=True)
            if rng.random() < 0.5
            else yaml.MappingNode(MAP, [(_scalar("a"), value)], flow_style=True)
        )
    map_.value[at] = (key, value)


def _entries(map_: yaml.MappingNode, kind: str, rng: random.Random) -> None:
    """Entries of a list: lost, twice, in another order."""
    found = [v for _, v in map_.value if isinstance(v, yaml.SequenceNode) and v.value]
    if found:
        entries = rng.choice(found).value
        rng.choice(
            (lambda: entries.pop(rng.randrange(len(entries))), lambda: entries.append(entries[0]), entries.reverse)
        )()


Change = Callable[[yaml.MappingNode, str, random.Random], None]
CHANGES: tuple[Change, ...] = (
    _lost, _lost, _twice, _swapped, _foreign, _foreign, _foreign, _added, _added, _wild, _wild, _renamed, _number, _number,
    _number, _deeper, _entries, _entries,
)  # fmt: skip
MILD: tuple[Change, ...] = (_foreign, _foreign, _lost, _number, _number, _entries)


def in_cells(text: str, kind: str, rng: random.Random) -> str:
    """A table with one to four cells or lines spoilt."""
    lines = text.split("\n")
    for _ in range(rng.choice((1, 1, 2, 4))):
        at = rng.choice([i for i, line in enumerate(lines) if line and not line.startswith("#")] or [0])
        cells = lines[at].split(",")
        what = rng.randrange(6)
        if what == 0:
            lines.pop(at) if len(lines) > 1 else None
        elif what == 1:
            lines.insert(at, rng.choice(lines))
        elif what == 2:
            cells.pop(rng.randrange(len(cells)))
            lines[at] = ",".join(cells)
        elif what == 3:
            number = NUMBER.search(lines[at])
            scale = rng.choice(FACTORS)
            lines[at] = lines[at].replace(number[0], f"{float(number[0]) * scale:.9g}", 1) if number else "x"
        else:
            cells[rng.randrange(len(cells))] = rng.choice(WILD)
            lines[at] = ",".join(cells)
    return "\n".join(lines)


def in_bytes(raw: bytes, rng: random.Random) -> bytes:
    """Bytes put in, taken out, cut short, in another encoding."""
    for _ in range(rng.choice((1, 1, 2, 5))):
        at = rng.randrange(len(raw) + 1)
        what = rng.randrange(8)
        if what == 0:
            raw = raw[:at]
        elif what == 1:
            raw = raw[:at] + raw[at + rng.choice((1, 2, 10, 200)) :]
        elif what == 2:
            again = raw[at : at + rng.choice((1, 20, 300))]
            raw = raw[:at] + again * rng.choice((2, 3, 50)) + raw[at:]
        elif what == 3 and rng.random() < 0.2:
            raw = raw.decode("utf-8", "replace").encode(
                rng.choice(("utf-16", "utf-16-le", "latin-1", "utf-32", "cp037")), "replace"
            )
        else:
            raw = raw[:at] + rng.choice(BYTES) * rng.choice((1, 1, 1, 30)) + raw[at:]
        raw = raw[:100_000]
    return raw


def spoilt(kind: str, rng: random.Random) -> bytes:
    """One file of a kind, spoilt."""
    text = rng.choice(sound(kind))
    how = rng.random()
    if how < 0.8:
        with contextlib.suppress(yaml.YAMLError):  # a tree that cannot be written as YAML, such as one with a NUL
            text = (in_cells if kind in ("record", "readings") else in_tree)(text, kind, rng)
    raw = text.encode("utf-8", "surrogatepass")
    return in_bytes(raw, rng) if how > 0.75 else raw
