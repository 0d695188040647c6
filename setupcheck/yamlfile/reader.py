"""YAML text to plain data with places, in one walk over the parser's events; nothing of YAML that a job does not need.

Anchors, aliases, tags, merge keys, directives and several documents are refused, so that nothing can grow while it is
read, and nothing is nested by recursion, so that no depth of brackets can break the interpreter.
"""

from __future__ import annotations

import re
from dataclasses import replace
from functools import cache
from typing import Protocol

import yaml

from setupcheck.errors import JobError, Problem
from setupcheck.record import record
from setupcheck.yamlfile import limits
from setupcheck.yamlfile.plain import LOADER, plain_data
from setupcheck.yamlfile.scalars import LookAlike, Scalar, plain_scalar
from setupcheck.yamlfile.syntax import CommaRun, odd_characters, syntax_problem, without_odd_characters
from setupcheck.yamlfile.tree import BEGINS_AN_ENTRY, Data, Node, Path, Place, Tree


def parse(text: str, file: str, *, collect: bool = False, if_empty: str = "Write key: value on its lines") -> Tree:
    """The data of a YAML text, with places, under the scalar policy of `scalars`.

    file     name for messages
    collect  put wrong values (number look-alikes, keys written twice) into `Tree.problems` and go on, so that a reader
             of the data can show its own beside them (`Tree.together`); without it they are raised at once
    if_empty what to write into a text that holds nothing
    Raises JobError with every problem that was found before the text stopped making sense.

    >>> tree = parse("hold:\\n  runout: 10 um\\n", "job.yaml")
    >>> tree.data, tree.place(("hold", "runout"))
    ({'hold': {'runout': '10 um'}}, Place(line=2, column=11, length=5))
    """
    text = text.removeprefix("\ufeff").replace("\r\n", "\n").replace("\r", "\n")
    lines = text.split("\n")
    odd = odd_characters(lines)
    walk = _Walk(without_odd_characters(text), lines)
    walk.read(known={problem.line for problem in odd})
    if not odd and not walk.broken and walk.data is None:
        odd.append(Problem("", 0, 0, 0, "the file holds no values", if_empty))
    tree = Tree(walk.data, file, lines, (), walk.root)
    broken = odd + [replace(problem, path=tree.dotted(path, missing=True)) for problem, path in walk.broken]
    wrong = [replace(problem, path=tree.dotted(path, missing=True)) for problem, path in walk.wrong]
    if broken or (wrong and not collect):
        raise JobError(file, lines, broken + wrong)
    return Tree(walk.data, file, lines, tuple(wrong), walk.root)


def parse_plain(text: str, file: str) -> Tree:
    """The same as `parse` for a file that is hardly ever wrong: places are found only when one is asked for.

    Raises: JobError as `parse`.
    """
    data = plain_data(text)
    if data is None:
        return parse(text, file)
    return Tree(data, file, text.split("\n"), (), cache(lambda: parse(text, file).root))


@record(frozen=False)
class _Open:
    """A list or map that is being filled. key: of the value to come (a map), None while a key is awaited."""

    data: dict[str, Data] | list[Data]
    node: Node
    flow: bool
    key: str | None = None
    key_place: Place | None = None
    last_key: str = ""  # of the value before
    twice: bool = False  # the key stands there already: its value is read and dropped


class _Mark(Protocol):
    """A place of the parser, counted from 0."""

    index: int
    line: int
    column: int


class _TooMuch(Exception):
    """The walk cannot or need not go on; what was found is recorded."""


class _Walk:
    """One pass over the events: `data`, `root` (places), `broken` (the data cannot be used), `wrong` (it can)."""

    def __init__(self, text: str, lines: list[str]) -> None:
        self.text = text
        self.lines = lines
        self.data: Data = None
        self.root = Node(Place(1, 1, 1), Place(1, 1, 1))
        self.broken: list[tuple[Problem, Path]] = []
        self.wrong: list[tuple[Problem, Path]] = []
        self.stack: list[_Open] = []
        self.values = 0
        self.documents = 0
        self.plain_start = self.plain_end = -1  # of the last plain value inside brackets
        self.commas: CommaRun | None = None

    def read(self, *, known: set[int]) -> None:
        """Walk to the end of the text. known: lines with reported tabs, where a complaint adds nothing."""
        events = iter(yaml.parse(self.text, Loader=LOADER))
        try:
            for event in events:
                self._take(event)
        except _TooMuch:
            pass
        except yaml.YAMLError as why:
            problem = syntax_problem(why, self.lines)
            if not known & {problem.line, problem.line - 1}:
                self.broken.append((problem, self._path()))
        self._end_commas()

    def _take(self, event: yaml.Event) -> None:
        if isinstance(event, yaml.ScalarEvent):
            self._count(event)
            self._refuse_extras(event)
            self._scalar(event)
        elif isinstance(event, yaml.CollectionStartEvent):
            self._count(event)
            self._refuse_extras(event)
            self._open(event)
        elif isinstance(event, yaml.CollectionEndEvent):
            self._close(event)
        elif isinstance(event, yaml.AliasEvent):
            self._count(event)
            word = self._word(event)
            self._broken(
                event,
                len(word),
                f"'{word}' points to another place of the file",
                "Write the value out here, or put a text in quotes",
            )
            if self.stack and self._awaits_key():
                raise _TooMuch
            self._attach(None, Node(self._place(event), self._place(event)))
        elif isinstance(event, yaml.DocumentStartEvent):
            self.documents += 1
            if event.version or event.tags:
                self._broken(event, 1, "a line that begins with % is not read", "Leave it away")
            if self.documents > 1:
                self._broken(event, 3, "a second document begins", "Keep one document in a file")
                raise _TooMuch

    def _open(self, event: yaml.CollectionStartEvent) -> None:
        if self.stack and self._awaits_key():
            self._broken(event, 1, "a list or map stands where a key must be", "Write a word as the key")
            raise _TooMuch
        if len(self.stack) >= limits.DEEPEST:
            self._broken(event, 1, f"lists and maps are nested deeper than {limits.DEEPEST}", "Take some of them apart")
            raise _TooMuch
        place = self._place(event, 1)
        mapping = isinstance(event, yaml.MappingStartEvent)
        data: dict[str, Data] | list[Data] = {} if mapping else []
        node = Node(place, place, {} if mapping else [])
        self._attach(data, node)
        self.stack.append(_Open(data, node, bool(event.flow_style)))
        self.plain_end = -1

    def _close(self, event: yaml.CollectionEndEvent) -> None:
        closed = self.stack.pop()
        if closed.flow:
            start = closed.node.place
            same = _end(event).line + 1 == start.line
            end = _end(event).column if same else len(self.lines[start.line - 1])
            own = Place(start.line, start.column, max(1, end - start.column + 1))
            if closed.node.key_place == start:
                closed.node.key_place = own
            closed.node.place = own
        self.plain_end = -1

    def _scalar(self, event: yaml.ScalarEvent) -> None:
        plain = not event.style
        behind_comma = plain and self._watch_commas(event)  # `5 um` of `2,5 um`: neither a value nor a key of its own
        place = self._place(event)
        if self.stack and self._awaits_key():
            self._key(event, place, plain=plain, behind_comma=behind_comma)
            return
        value: Scalar = event.value
        if plain:
            known = plain_scalar(event.value)
            if isinstance(known, LookAlike) and not behind_comma:
                self._note(self.wrong, event, place.length, known.problem, known.hint)
            elif not isinstance(known, LookAlike):
                value = known
            if value is None and event.value == "" and self.stack and self.stack[-1].key_place:
                place = self.stack[-1].key_place  # nothing is written: show the key
        self._attach(value, Node(place, place))

    def _key(self, event: yaml.ScalarEvent, place: Place, *, plain: bool, behind_comma: bool) -> None:
        holder, word = self.stack[-1], event.value
        assert isinstance(holder.data, dict) and isinstance(holder.node.inside, dict)
        if not holder.data and not holder.flow:
            if holder.node.key_place == holder.node.place:
                holder.node.key_place = place
            holder.node.place = place
        if behind_comma:
            pass
        elif plain and word == "<<":
            self._broken(event, 2, "'<<' would merge another map into this one", "Write its entries out here")
        elif not word.strip():
            self._broken(event, 1, "a key is missing before the colon", "Write key: value")
        elif plain and not isinstance(plain_scalar(word), str):
            self._note(
                self.wrong,
                event,
                len(word),
                f"'{_short(word)}' is no name for a key",
                f"Begin a name with a letter, or write it in quotes: '{_short(word)}'",
            )
        elif len(word) > limits.LONGEST_KEY or "\n" in word:
            self._broken(
                event,
                place.length,
                f"the key has more than {limits.LONGEST_KEY} characters",
                "Write a short name and a colon",
            )
        elif plain and ":" in word and re.match(r"[A-Za-z_][\w.-]*:[^\s:]", word):
            self._broken(
                event,
                place.length,
                f"the colon in '{_short(word)}' has no space behind it",
                f"Write {_short(word.replace(':', ': ', 1))}",
            )
        if word in BEGINS_AN_ENTRY and self._dash_is_missing(holder, word):
            written = self.lines[place.line - 1][place.column - 1 :].split(" #")[0].strip()
            self._next_entry(holder, place)
            problem = f"a '- ' is missing before {_short(written)}"
            self._note(self.wrong, event, place.length, problem, f"Write - {_short(written)}", key=word)
        holder.twice = behind_comma or word in holder.data  # either way its value is not taken
        if holder.twice and not behind_comma:
            first = holder.node.inside[word].key_place.line
            where = "twice in this line" if first == place.line else f"twice, in line {first} and in line {place.line}"
            self._note(
                self.wrong,
                event,
                place.length,
                f"the key '{_short(word)}' stands {where}",
                "Keep one of them",
                key=word,
            )
        holder.key, holder.key_place = word, place

    def _dash_is_missing(self, holder: _Open, word: str) -> bool:
        """The key that names an entry of a list comes again, behind others: the next entry has lost its dash."""
        listed = len(self.stack) > 1 and isinstance(self.stack[-2].data, list)
        return listed and not holder.flow and word in holder.data and len(holder.data) > 1

    def _next_entry(self, holder: _Open, place: Place) -> None:
        """Goes on as if the dash stood there, so that what follows is read as its own entry."""
        around = self.stack[-2]
        holder.data, holder.node = {}, Node(place, place, {})
        assert isinstance(around.data, list) and isinstance(around.node.inside, list)
        around.data.append(holder.data)
        around.node.inside.append(holder.node)

    def _attach(self, data: Data, node: Node) -> None:
        if not self.stack:
            self.data, self.root = data, node
            return
        holder = self.stack[-1]
        if isinstance(holder.data, list):
            assert isinstance(holder.node.inside, list)
            holder.data.append(data)
            holder.node.inside.append(node)
            return
        assert isinstance(holder.node.inside, dict) and holder.key is not None
        if holder.key_place:
            node.key_place = holder.key_place
        if not holder.twice:
            holder.data[holder.key] = data
            holder.node.inside[holder.key] = node
        holder.last_key, holder.key, holder.key_place = holder.key, None, None

    def _awaits_key(self) -> bool:
        return isinstance(self.stack[-1].data, dict) and self.stack[-1].key is None

    def _watch_commas(self, event: yaml.ScalarEvent) -> bool:
        """YAML takes the comma of `[0,5 um]` for a separator; a comma straight between two digits is never read.

        Returns whether this value stands behind such a comma.
        """
        if not (self.stack and self.stack[-1].flow and event.value):
            self.plain_end = -1
            return False
        start, end = _start(event).index, _end(event).index
        comma = start - 1
        text = self.text
        found = self.plain_end == comma and text[comma] == "," and text[comma - 1].isdigit() and text[start].isdigit()
        if found:
            if self.commas is None or self.commas.end != comma:
                self._end_commas()
                place = self._place(event)
                before = comma - self.plain_start
                shown = Place(place.line, max(1, place.column - before - 1), place.length)
                self.commas = CommaRun(shown, self._path_before(), self.plain_start, end)
            self.commas.end = end
        self.plain_start, self.plain_end = start, end
        return found

    def _end_commas(self) -> None:
        if self.commas is not None:
            run, self.commas = self.commas, None
            self.wrong.append((run.problem(self.text), run.path))
            self._stop_at_many()

    def _refuse_extras(self, event: yaml.ScalarEvent | yaml.CollectionStartEvent) -> None:
        if event.tag is None and event.anchor is None:
            return
        word = self._word(event)
        what = "marks this place for others" if word.startswith("&") else "is a tag"
        self._broken(event, len(word), f"'{word}' {what}", "Leave it away, or put a text in quotes")

    def _count(self, event: yaml.Event) -> None:
        self.values += 1
        if self.values > limits.MOST_VALUES:
            self._broken(event, 1, f"the file holds more than {limits.MOST_VALUES} values", "Split it")
            raise _TooMuch

    def _word(self, event: yaml.Event) -> str:
        found = re.compile(r"[^\s,\[\]{}]{1,40}").match(self.text, _start(event).index)
        return found[0] if found else self.text[_start(event).index : _start(event).index + 1]

    def _place(self, event: yaml.Event, length: int | None = None) -> Place:
        start = _start(event)
        line, column = start.line, start.column
        if length is None:
            end = _end(event)
            length = (end.column if end.line == line else len(self.lines[line])) - column
        return Place(line + 1, column + 1, length if length > 1 else 1)

    def _path(self) -> Path:
        steps: list[str | int] = []
        for holder in self.stack:
            if isinstance(holder.data, list):
                steps.append(len(holder.data) if holder is self.stack[-1] else len(holder.data) - 1)
            elif holder is not self.stack[-1]:
                steps.append(holder.last_key)
            elif holder.key is not None:
                steps.append(holder.key)
        return tuple(steps)

    def _path_before(self) -> Path:
        """Of the value before the one that is read now, in the same list or map."""
        holder = self.stack[-1]
        inner = holder.last_key if isinstance(holder.data, dict) else len(holder.data) - 1
        outer = self._path() if self._awaits_key() else self._path()[:-1]
        return (*outer, inner)

    def _broken(self, event: yaml.Event, length: int, problem: str, hint: str) -> None:
        self._note(self.broken, event, length, problem, hint)

    def _note(
        self,
        where: list[tuple[Problem, Path]],
        event: yaml.Event,
        length: int,
        problem: str,
        hint: str,
        *,
        key: str = "",
    ) -> None:
        start = _start(event)
        path = self._path() + ((key,) if key else ())
        where.append((Problem("", start.line + 1, start.column + 1, max(1, length), problem, hint), path))
        self._stop_at_many()

    def _stop_at_many(self) -> None:
        if len(self.broken) + len(self.wrong) >= limits.MOST_PROBLEMS:
            raise _TooMuch


def _start(event: yaml.Event) -> _Mark:
    mark = event.start_mark
    assert mark is not None  # the parser always sets it; only hand-made events have none
    return mark


def _end(event: yaml.Event) -> _Mark:
    mark = event.end_mark
    assert mark is not None
    return mark


def _short(word: str) -> str:
    return word if len(word) <= 40 else word[:39] + "\u2026"
