"""What was read from a YAML file: the values, and where each of them stands in the text."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import field
from typing import TypeAlias

from setupcheck.errors import Problem
from setupcheck.record import record
from setupcheck.yamlfile.scalars import Scalar

Data: TypeAlias = "Scalar | list[Data] | dict[str, Data]"
Path = tuple[str | int, ...]

BEGINS_AN_ENTRY = ("op", "what")  # the key that an entry of a list of a job file is known by, and stands once in it
NAMED_BY = ("op",)  # an entry of a list is called by its operation number where it has one


@record
class Place:
    """A piece of text: line and column counted from 1, length in characters on that line."""

    line: int
    column: int
    length: int


@record(frozen=False)
class Node:
    """One value with its place, the place of its key (of itself, in a list), and what is inside it."""

    place: Place
    key_place: Place
    inside: dict[str, Node] | list[Node] | None = None


@record
class Tree:
    """A file as plain data with places.

    data      dict, list, text, int, float, bool or None
    file      name as given, for messages
    lines     the text, line by line
    problems  what is wrong in values that could be read all the same (only with `collect=True`)
    places    of everything, by the structure of the data; or what finds them when the first is asked for
    """

    data: Data
    file: str
    lines: Sequence[str]
    problems: tuple[Problem, ...]
    places: Node | Callable[[], Node] = field(repr=False)

    @property
    def root(self) -> Node:
        """Places, by the structure of the data."""
        return self.places if isinstance(self.places, Node) else self.places()

    def place(self, path: Path) -> Place:
        """Where a value stands. Steps that only a model has (a union tag, a field that a plain value stands for) and
        steps that the file does not have are passed over: the answer is the deepest place that exists."""
        return self._find(path).place

    def key_place(self, path: Path) -> Place:
        """Where the key of a value stands; in a list, the entry itself. Passes over steps as `place` does."""
        return self._find(path).key_place

    def dotted(self, path: Path, *, missing: bool = False) -> str:
        """The path as messages print it, without the steps that only a model has, list entries by operation number:
        `setups.30.hold.centre`, `require[2].at_most`. missing: the last step is a key that the file should have."""
        node, data, shown = self.root, self.data, ""
        for at, step in enumerate(path):
            if isinstance(node.inside, dict) and isinstance(data, dict) and step in node.inside:
                node, data = node.inside[str(step)], data[str(step)]
                shown += f".{step}"
            elif isinstance(node.inside, list) and isinstance(data, list) and _is_index(step, node.inside):
                node, data = node.inside[int(step)], data[int(step)]
                name = next((data[key] for key in NAMED_BY if isinstance(data, dict) and key in data), None)
                known = isinstance(name, str | int) and not isinstance(name, bool)
                shown += f".{name}" if known else f"[{int(step) + 1}]"
            elif missing and at == len(path) - 1:
                shown += f"[{step + 1}]" if isinstance(step, int) else f".{step}"
        return shown.removeprefix(".")

    def together(self, found: Iterable[Problem]) -> tuple[Problem, ...]:
        """The problems of the file and those that a reader of the data found; where the file itself is wrong at a
        place (or at one value of a list), what was found there later is left out."""
        wrong = {(problem.line, problem.column) for problem in self.problems}
        lists = {problem.path.rpartition("[")[0] for problem in self.problems if problem.path.endswith("]")}
        return self.problems + tuple(p for p in found if (p.line, p.column) not in wrong and p.path not in lists)

    def _find(self, path: Path) -> Node:
        node = self.root
        for step in path:
            if isinstance(node.inside, dict) and step in node.inside:
                node = node.inside[str(step)]
            elif isinstance(node.inside, list) and _is_index(step, node.inside):
                node = node.inside[int(step)]
        return node


def _is_index(step: str | int, entries: list[Node]) -> bool:
    return isinstance(step, int) and 0 <= step < len(entries)
