"""The one tree of exceptions, and how a problem in a file is shown: place, line, what to write. Leaf module."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterable, Sequence

from setupcheck.record import record

MOST_SHOWN = 50  # problems printed of one file; our screening choice: nobody repairs more in one go
WIDTH = 80  # columns of a terminal, as of every report
WIDEST_LINE = 100  # characters of a source line that are shown; our screening choice
_BEFORE_CARET = 30  # characters kept before the caret when a long line is cut; our screening choice

_UNSHOWABLE = frozenset({"Cc", "Cf", "Cs", "Zl", "Zp"})  # controls, escapes, text-direction marks, line separators


class SetupcheckError(Exception):
    """Everything this package refuses on purpose. Any other exception is a bug and keeps its traceback.

    >>> from setupcheck import SetupcheckError, example
    >>> try:
    ...     example("no such job")
    ... except SetupcheckError as wrong:
    ...     print(str(wrong)[:35])
    there is no shipped job 'no such jo
    """

    def wrapped(self, width: int = WIDTH) -> str:
        """The same for a terminal: lines of at most `width` columns, what goes on indented by two."""
        return "\n".join(_folded(line, width) for line in str(self).split("\n"))


_GLUE = "\u00a0"
_UNIT = re.compile(r"(?<=\d) (?:N m|um|mm|in|thou|degC|deg|arcsec|K|s|min|MPa|GPa|kN|N|W|kg|l|m|%)(?![\w/])")
"""A unit that belongs to the number before it. `in` may be a word, and then stays with its number all the same."""


@record
class Problem:
    """One thing wrong in one place of a file.

    path           dotted place in the job, `setups.30.hold.centre.clearance`; "" when there is none
    line, column   counted from 1; line 0: the problem has no place in the text (a missing file)
    length         characters to underline on that line, at least one is
    problem, hint  what is wrong; what to write. No full stop at the end of the problem; an example may have lines

    >>> Problem("units", 3, 8, 2, "'cm' is not known here", "Write mm or in").line
    3
    """

    path: str
    line: int
    column: int
    length: int
    problem: str
    hint: str


class JobError(SetupcheckError):
    """A job file that cannot be read, with every problem found in it.

    `str()` gives the whole text for the planner, sorted by line and column, repeated problems once:

        jobs/rotator.yaml:23:18  setups.30.hold.centre.clearance
            23 |       clearance: 2,5 um
               |                  ^^^^^^
          '2,5 um' is not a length. Write a point for the decimal: 2.5 um

    >>> wrong = JobError("a.yaml", ["units: cm"], [Problem("units", 1, 8, 2, "'cm' is not known here", "Write mm or in")])
    >>> print(wrong)
    a.yaml:1:8  units
         1 | units: cm
           |        ^^
      'cm' is not known here. Write mm or in
    >>> [problem.path for problem in wrong.problems]
    ['units']
    """

    def __init__(self, file: str, lines: Sequence[str], problems: Iterable[Problem]) -> None:
        found = merged(problems)
        if not found:
            raise ValueError("a JobError needs at least one problem")
        super().__init__(file, lines, found)  # the arguments again: the error must survive pickling between processes
        self.file = file
        self.lines = lines
        self.problems = found

    def __str__(self) -> str:
        return self._told(None)

    def wrapped(self, width: int = WIDTH) -> str:
        """The same for a terminal: what is wrong and what to write in lines of at most `width` columns.

        A quoted line with its caret stays whole, as do an example of several lines and a name too long to break.
        """
        return self._told(width)

    def _told(self, width: int | None) -> str:
        shown = [_shown(problem, self.file, self.lines, width) for problem in self.problems[:MOST_SHOWN]]
        left = len(self.problems) - len(shown)
        if left:
            shown.append(f"and {left} more")
        return "\n".join(shown)


class RuleBookError(SetupcheckError):
    """A rule file, house file or waiver that cannot be used: `rules/heat.yaml:12  problem. hint`.

    >>> print(RuleBookError("house.yaml", 12, "there is no rule HOLD-999", "See setupcheck rules"))
    house.yaml:12  there is no rule HOLD-999. See setupcheck rules
    """

    def __init__(self, file: str, line: int, problem: str, hint: str = "") -> None:
        super().__init__(file, line, problem, hint)
        self.file = file
        self.line = line
        self.problem = problem
        self.hint = hint

    def __str__(self) -> str:
        place = f"{printable(self.file)}:{self.line}  " if self.line else f"{printable(self.file)}: "
        return place + _sentence(self.problem, self.hint)


class HouseError(RuleBookError):
    """A house file that cannot be used, with everything that is wrong in it, sorted by line."""

    HOLDS = "Nothing of the house file acts; the shipped rule book stays as it is (--no-house judges by it alone)."

    def __init__(self, wrong: Iterable[RuleBookError]) -> None:
        found = tuple(sorted({str(one): one for one in wrong}.values(), key=lambda one: (one.file, one.line)))
        first = found[0] if found else RuleBookError("", 0, "")
        super().__init__(first.file, first.line, first.problem, first.hint)
        self.args = (found,)  # the error must survive pickling between processes
        self.wrong = found

    def __str__(self) -> str:
        shown = [str(one) for one in self.wrong[:MOST_SHOWN]]
        if len(self.wrong) > MOST_SHOWN:
            shown.append(f"and {len(self.wrong) - MOST_SHOWN} more")
        shown.append(self.HOLDS)
        return "\n".join(shown)


def merged(problems: Iterable[Problem]) -> tuple[Problem, ...]:
    """Problems sorted by line and column; one that says the same about the same place is kept once."""
    first: dict[tuple[str, int, int, str], Problem] = {}
    for problem in problems:
        path = "" if problem.line else problem.path  # two paths of a model may lead to one place of the text
        first.setdefault((path, problem.line, problem.column, problem.problem), problem)
    return tuple(sorted(first.values(), key=lambda p: (p.line, p.column)))


def printable(text: str) -> str:
    """Text with everything a terminal would obey (escapes, controls, text direction) replaced; a tab becomes a space.

    >>> printable("a" + chr(9) + "b" + chr(27) + "[31m")
    'a b\ufffd[31m'
    """
    if text.isascii() and text.isprintable():
        return text
    return "".join(_printable_character(character) for character in text)


def _printable_character(character: str) -> str:
    if character == "\t":
        return " "
    return "\ufffd" if unicodedata.category(character) in _UNSHOWABLE else character


def _sentence(problem: str, hint: str) -> str:
    text = problem.rstrip(" .") + "."
    first, *more = (f"{text} {hint}" if hint else text).split("\n")
    return "\n".join([printable(first), *(f"    {printable(line)}" for line in more)])  # an example of several lines


def _folded(text: str, width: int | None) -> str:
    """The first line of a text in lines of at most `width` columns, the later ones indented by two; the rest as it is."""
    first, *more = text.split("\n")
    if width is None or len(first) <= width:
        return text
    return "\n".join([*in_lines(first, width, rest="  "), *more])


def in_lines(text: str, width: int, *, first: str = "", rest: str = "") -> list[str]:
    """A text in lines of at most `width` columns, broken at spaces alone and never between a number and its unit.

    >>> in_lines("A hole of 8.5 mm", 14)
    ['A hole of', '8.5 mm']
    """
    import textwrap  # few messages need it

    whole = _UNIT.sub(lambda found: found[0].replace(" ", _GLUE), text)
    lines = textwrap.wrap(
        whole, width, initial_indent=first, subsequent_indent=rest, break_long_words=False, break_on_hyphens=False
    )
    return [line.replace(_GLUE, " ") for line in lines]


def _shown(problem: Problem, file: str, lines: Sequence[str], width: int | None) -> str:
    says = _sentence(problem.problem, problem.hint)
    name, path = printable(file), printable(problem.path)
    if problem.line < 1:
        return _folded(f"{name}  {path}: {says}" if path else f"{name}: {says}", width)
    head = f"{name}:{problem.line}:{problem.column}  {path}".rstrip()
    says = _folded(f"  {says}", width)
    if problem.line > len(lines):
        return f"{head}\n{says}"
    text, start, length = _window(lines[problem.line - 1].rstrip("\r\n"), problem.column - 1, problem.length)
    number = f"{problem.line:>6}"
    blank = " " * len(number)
    under = " " * cells(text[:start]) + "^" * max(1, cells(text[start : start + length]))
    return f"{head}\n{number} | {text}\n{blank} | {under}\n{says}"


def _window(line: str, start: int, length: int) -> tuple[str, int, int]:
    """The part of a line that is shown, and where the marked text stands in it (characters)."""
    start = min(max(start, 0), len(line))
    length = min(length, len(line) - start)
    first = max(0, start - _BEFORE_CARET) if len(line) > WIDEST_LINE else 0
    text = printable(line[first : first + WIDEST_LINE])
    front = "\u2026" if first else ""
    back = "\u2026" if first + WIDEST_LINE < len(line) else ""
    return front + text + back, start - first + len(front), min(length, WIDEST_LINE - (start - first))


def cells(text: str) -> int:
    """Cells that a text takes in a terminal: wide letters two, combining marks none."""
    if text.isascii():
        return len(text)
    return sum(
        0 if unicodedata.combining(character) else 2 if unicodedata.east_asian_width(character) in "WF" else 1
        for character in text
    )
