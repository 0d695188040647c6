"""Entries of a rule file or house file: plain YAML data that know their line and say what is wrong with them."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from pathlib import Path

from setupcheck.errors import JobError, RuleBookError
from setupcheck.notation import nearest, plain
from setupcheck.record import record
from setupcheck.rulebook.records import Place
from setupcheck.yamlfile import Data, Tree, parse_plain, read_text
from setupcheck.yamlfile import Path as Steps


@record
class Entry:
    """One value of a file and the way to it, by which its line is found; `key` is how it is called in messages."""

    tree: Tree
    key: str
    data: Data
    steps: Steps = ()

    def place(self) -> Place:
        """File and line. The line of the key where it has one."""
        return Place(self.tree.file, self.tree.key_place(self.steps).line)

    @property
    def is_map(self) -> bool:
        """True for a map of entries."""
        return isinstance(self.data, dict)

    @property
    def is_list(self) -> bool:
        """True for a list of entries."""
        return isinstance(self.data, list)

    def items(self) -> Iterator[tuple[str, Entry]]:
        """The entries of a map, in file order. Raises RuleBookError when it is no map."""
        for key in self._map():
            yield key, self._inside(key)

    def get(self, key: str) -> Entry | None:
        """The entry of that key, or None where it is absent or empty."""
        return self._inside(key) if self._map().get(key) is not None else None

    def need(self, key: str) -> Entry:
        """The entry of that key. Raises RuleBookError when it is absent or empty."""
        entry = self.get(key)
        if entry is None:
            raise self.wrong(f"'{key}' is missing", f"Write {key}: and its value")
        return entry

    def only(self, *keys: str) -> None:
        """Refuse keys that are not in the list, with the nearest one that is."""
        for key in self._map():
            if key not in keys:
                raise self._inside(key).unknown("key", keys, word=key)

    def text(self, key: str) -> str:
        """The text of a key that has to be there and not blank."""
        said = self._map().get(key)
        plain_text = " ".join(said.split()) if isinstance(said, str) else ""
        return plain_text or self.need(key).scalar_text()

    def text_or(self, key: str, otherwise: str) -> str:
        """The text of a key, or what stands in for it."""
        entry = self.get(key)
        return otherwise if entry is None else entry.scalar_text()

    def scalar(self) -> str | float | bool:
        """One value: text, number, true or false."""
        if isinstance(self.data, str | int | float | bool):
            return self.data
        raise self.wrong(f"'{self.key}' is not one value", "Write a text, a number, true or false")

    def scalar_text(self) -> str:
        """One text or number, as text without blanks at its ends."""
        value = self.scalar()
        if isinstance(value, bool):
            raise self.wrong(f"'{self.key}' is {str(value).lower()}", "Write a text or a number")
        text = value.strip() if isinstance(value, str) else plain(value)
        if not text:
            raise self.wrong(f"'{self.key}' is blank", f"Write the text of {self.key}")
        return " ".join(text.split())

    def wrong(self, problem: str, hint: str) -> RuleBookError:
        """The error that stands at this entry."""
        place = self.place()
        return RuleBookError(place.file, place.line, problem, hint)

    def unknown(self, what: str, choices: Iterable[str], *, word: str | None = None) -> RuleBookError:
        """The error for a name that is not in a closed list, with the nearest one offered."""
        known = list(choices)
        named = self.scalar_text() if word is None else word
        near = nearest(named, known)
        if near is not None:
            hint = f"Did you mean {near}?"
        elif len(known) <= 12:
            hint = f"Write one of {', '.join(known)}" if known else "None is known here"
        else:
            hint = f"There are {len(known)} to choose from; see rules/README.md"
        return self.wrong(f"there is no {what} '{named}'", hint)

    def _map(self) -> dict[str, Data]:
        if not isinstance(self.data, dict):
            raise self.wrong(f"'{self.key}' is no map", "Write keys with their values under it")
        return self.data

    def _inside(self, key: str) -> Entry:
        return Entry(self.tree, key, self._map()[key], (*self.steps, key))


def list_of(entry: Entry) -> list[Entry]:
    """The entries of a list. Raises RuleBookError when it is no list."""
    if not isinstance(entry.data, list):
        raise entry.wrong(f"'{entry.key}' is no list", "Write one entry a line, each after a dash")
    return [Entry(entry.tree, entry.key, data, (*entry.steps, i)) for i, data in enumerate(entry.data)]


def open_file(path: Path, *, shown_as: str | None = None) -> tuple[Entry, bytes]:
    """A rule file as one entry, and its text as UTF-8 bytes with plain line ends (the same on every system).

    shown_as  how messages name the file; the path itself otherwise.  Raises: RuleBookError.
    """
    name = shown_as if shown_as is not None else str(path)
    try:
        text = read_text(path)
        tree = parse_plain(text, name)
    except JobError as why:
        first = why.problems[0]
        raise RuleBookError(name, first.line, first.problem, first.hint) from None
    return Entry(tree, path.name, tree.data), text.encode()
