"""Faults of the text itself: odd characters, tabs, decimal commas in brackets, complaints of the YAML parser."""

from __future__ import annotations

import re
from collections.abc import Sequence

import yaml

from setupcheck.errors import Problem
from setupcheck.record import record
from setupcheck.yamlfile.limits import MOST_PROBLEMS
from setupcheck.yamlfile.tree import Path, Place

# Not printable, or taken for a line end by YAML 1.1 (next line, line and paragraph separator), or turning the text
# around on the screen, which can hide what a line says.
ODD = re.compile(
    "[\x00-\x08\x0b-\x1f\x7f-\x9f\xad\u2028\u2029\u200b-\u200f\u202a-\u202e\u2060-\u2069\ufeff\ufffe\uffff"
    "\ud800-\udfff]"
)
_TAB_BEFORE_TEXT = re.compile(r" *\t[ \t]*(?=[^ \t#])")

# What the parser says (libyaml and the Python parser word it differently) -> what is wrong, what to write.
_COMPLAINTS = (
    ("maximum nesting depth", "lists and maps are nested too deep", "Take some of them apart"),
    ("unexpected ':'", "a value is missing behind the colon", "Write key: value"),
    (
        "mapping values are not allowed",
        "a colon stands where no key can be",
        "Check the indentation and the line before, or put a text with a colon in quotes",
    ),
    ("mapping keys are not allowed", "a question mark stands where no value can begin", "Put the text in quotes"),
    (
        "sequence entries are not allowed",
        "a list entry stands where none can be",
        "Begin it on its own line, as in - value",
    ),
    ("while scanning a simple key", "this line has no colon after its key", "Write key: value"),
    ("end of stream", "a quote is opened and never closed", "Close it, or leave it away"),
    ("unexpected document", "a quote is opened and never closed", "Close it, or leave it away"),
    ("escape", "a backslash in double quotes is not read", "Use single quotes"),
    (
        "while parsing a flow",
        "a bracket is not closed, or a comma is missing",
        "Write [a, b] or {key: value, key: value}",
    ),
    ("while parsing a block node", "a closing bracket has no opening one", "Delete it, or put the text in quotes"),
    (
        "while parsing a block",
        "this line begins at a depth that fits no line above",
        "Begin it straight under its neighbours",
    ),
    (
        "while scanning a block scalar",
        "a text block does not begin or end as it should",
        "Write | alone and indent the text below it",
    ),
    ("cannot start any token", "no value can begin with this character", "Put the value in quotes"),
    ("directive", "a line that begins with % is not read", "Leave it away"),
    ("anchor", "no value can begin with &", "Put the value in quotes"),
    ("alias", "no value can begin with *", "Put the value in quotes"),
    ("tag", "no value can begin with !", "Put the value in quotes"),
    ("document start", "the file goes on after its end", "Keep one document in a file"),
)


def odd_characters(lines: Sequence[str]) -> list[Problem]:
    """Characters that no job file has, and tabs before the first word of a line; at most `MOST_PROBLEMS`."""
    found: list[Problem] = []
    for number, line in enumerate(lines, start=1):
        if tab := _TAB_BEFORE_TEXT.match(line):
            column = line.index("\t") + 1
            found.append(
                Problem(
                    "", number, column, tab.end() - column + 1, "a tab stands in the indentation", "Indent with spaces"
                )
            )
        if not line.isprintable() and (odd := ODD.search(line)):
            code = f"U+{ord(odd[0]):04X}"
            found.append(
                Problem("", number, odd.start() + 1, 1, f"the character {code} does not belong in a job", "Delete it")
            )
        if len(found) >= MOST_PROBLEMS:
            break
    return found


def without_odd_characters(text: str) -> str:
    """The text with those characters replaced one for one, so that the parser goes on and every place stays.

    Tabs become spaces: those before a line are reported, all others are harmless, and the parsers differ about them.
    """
    return ODD.sub("?", text).replace("\t", " ")


@record(frozen=False)
class CommaRun:
    """Values in brackets that are parted by commas straight between digits: `0,5 um` or `2.0,1.0,0.3`.

    place, path  of the first value;  start, end  indices in the text
    """

    place: Place
    path: Path
    start: int
    end: int

    def problem(self, text: str) -> Problem:
        """What to say about it: a decimal comma, or a list without spaces?"""
        written = text[self.start : self.end].split("\n")[0]
        shown = written if len(written) <= 40 else written[:39] + "\u2026"
        spaced = re.sub(",", ", ", shown)
        first, _, rest = shown.partition(",")
        if "," in rest or "." in first:
            hint = f"Put a space after each comma of a list: {spaced}"
        else:
            hint = f"Write a point for the decimal: {first}.{rest}; or, in a list, a space after the comma: {spaced}"
        problem = f"'{shown}' has a comma between two digits"
        return Problem("", self.place.line, self.place.column, len(written), problem, hint)


def syntax_problem(why: yaml.YAMLError, lines: Sequence[str]) -> Problem:
    """The parser's complaint in words of the shop, with its place."""
    mark, opened = getattr(why, "problem_mark", None), getattr(why, "context_mark", None)
    said = " ".join(str(part) for part in (getattr(why, "context", None), getattr(why, "problem", None)) if part)
    mark = mark or opened
    if mark is None:
        return Problem("", 0, 0, 0, f"this is not YAML ({said or why})", "Check the file")
    problem, hint = next(
        ((problem, hint) for words, problem, hint in _COMPLAINTS if words in said),
        (f"this is not YAML ({said})", "Check this line and the one before"),
    )
    unclosed = opened is not None and opened.line != mark.line and ("flow" in said or "quoted" in said)
    if opened is not None and (unclosed or "simple key" in said):
        mark = opened  # show where it was opened, not where the parser gave up
    elif "while parsing a block" in said and "block node" not in said and lines[mark.line][: mark.column].strip():
        problem, hint = "something stands behind the value", "Put the whole value in quotes, or begin a new line"
    line = min(mark.line, len(lines) - 1)
    return Problem("", line + 1, mark.column + 1, 1, problem, hint)
