"""One entry of a shipped table of materials while it is read: every wrong value is refused with its line. Knows no units."""

from __future__ import annotations

from collections.abc import Collection

from setupcheck.errors import SetupcheckError
from setupcheck.notation import nearest
from setupcheck.physics.materials import EVIDENCE, Range, Value
from setupcheck.record import record
from setupcheck.yamlfile import Data, Tree, parse_plain


def rows(text: str, file: str, *, section: str, format: int) -> dict[str, Row]:
    """The entries of a table by name, in the order of the file.

    Raises: JobError for broken YAML, SetupcheckError for another format or a section that is no map.
    """
    tree = parse_plain(text, file)
    data = tree.data
    listed = data.get(section) if isinstance(data, dict) and data.get("format") == format else None
    if not isinstance(listed, dict):
        raise SetupcheckError(f"{file}: 'format: {format}' and a map '{section}' are needed")
    return {name: Row(tree, section, name, row) for name, row in listed.items()}


@record
class Row:
    """The entry `name` in a map `section`: texts, values `[number, kind, note]`, ranges `[low, high, kind, note]`.

    Raises: SetupcheckError from every reader, with line and key.
    """

    tree: Tree
    section: str
    name: str
    row: Data

    def wrong(self, key: str, problem: str) -> SetupcheckError:
        """The error at a key, or at the entry: `materials.yaml:9  materials.C45.density is missing`."""
        path = (self.section, self.name, key) if key else (self.section, self.name)
        place = f"{self.tree.file}:{self.tree.key_place(path).line}"
        return SetupcheckError(f"{place}  {self.tree.dotted(path, missing=True)} {problem}")

    def has_only(self, keys: Collection[str], of: str) -> None:
        """Refuses an entry that is no map, and every key that is none of an entry's; `of` names what it is one of."""
        if not isinstance(self.row, dict):
            raise self.wrong("", "is no map of values")
        for key in self.row:
            if key not in keys:
                raise self.wrong(key, f"is no value of a {of}. Nearest: {nearest(key, sorted(keys)) or 'none'}")

    def at(self, key: str, without: Data = None) -> Data:
        """What stands under a key; `without` where the key is not there."""
        return self.row.get(key, without) if isinstance(self.row, dict) else without

    def text(self, key: str) -> str:
        found = self.at(key)
        if not isinstance(found, str):
            raise self.wrong(key, "is missing")
        return found

    def one_of(self, key: str, words: Collection[str]) -> str:
        """A text that is one of these words."""
        found = self.text(key)
        if found not in words:
            raise self.wrong(key, f"is none of {', '.join(words)}")
        return found

    def known(self, key: str) -> Value | None:
        """A value that may be left out."""
        return self.value(key) if isinstance(self.row, dict) and key in self.row else None

    def value(self, key: str) -> Value:
        (number,), kind, note = self._entry(key, numbers=1)
        return Value(number, kind, note)

    def range(self, key: str, *, unit: float = 1.0) -> Range:
        """Both ends times `unit`, so that they come out in base units."""
        (low, high), kind, note = self._entry(key, numbers=2)
        if low > high:
            raise self.wrong(key, "has its low end above the high one")
        return Range(low * unit, high * unit, kind, note)

    def _entry(self, key: str, *, numbers: int) -> tuple[list[float], str, str]:
        """Numbers, kind, note of `[number …, kind]` or `[number …, kind, note]`."""
        given = self.at(key)
        if not isinstance(given, list) or not numbers + 1 <= len(given) <= numbers + 2:
            raise self.wrong(key, "must be [value, kind, note]" if numbers == 1 else "must be [low, high, kind, note]")
        found = [float(n) for n in given[:numbers] if isinstance(n, int | float) and not isinstance(n, bool) and n > 0]
        if len(found) != numbers:
            raise self.wrong(key, "needs numbers above 0")
        kind, note = given[numbers], given[numbers + 1] if len(given) > numbers + 1 else ""
        if kind not in EVIDENCE or not isinstance(kind, str) or not isinstance(note, str):
            raise self.wrong(key, f"needs one of {', '.join(EVIDENCE)} behind its numbers")
        return found, kind, note
