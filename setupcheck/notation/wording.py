"""Words and characters: the error of this package, how a given text is quoted, tidied and compared."""

from __future__ import annotations

import re
from collections.abc import Iterable

Given = str | int | float

_LONGEST_QUOTE = 40  # characters of the planner's text that a message repeats; our screening choice
_LONGEST_WORD = 60  # longer words are not compared with the known ones; our screening choice
_NEAR_ENOUGH = 0.6  # similarity ratio of difflib from which a word is offered; our screening choice

_ALIKE = str.maketrans(
    {
        "\u2212": "-", "\u2010": "-", "\u2011": "-", "\u2013": "-",  # minus, hyphens, en dash
        "\u2032": "'", "\u2019": "'", "\u2033": '"', "\u201d": '"',  # primes, and what word processors make of them
        "\u00ba": "\u00b0", "\u2103": "\u00b0C", "\u2109": "\u00b0F",  # ordinal sign for degrees, one-character units
        "\u00b5": "u", "\u03bc": "u",  # micro sign, Greek mu
        "\u00b7": "*", "\u22c5": "*",  # multiplication dots
        "\u00a0": " ", "\u2009": " ", "\u202f": " ",  # fixed and thin spaces
    }
)  # fmt: skip


class NotationError(ValueError):
    """A text that is not shop notation. `str()` is the whole message: what is wrong, and what to write."""

    def __init__(self, problem: str, hint: str) -> None:
        super().__init__(problem, hint)
        self.problem = problem
        self.hint = hint

    def __str__(self) -> str:
        return f"{self.problem}. {self.hint}"


def tidy(text: str) -> str:
    """One spelling for characters that mean the same: minus, primes, micro, spaces, `+-` and `+/-` for the ± sign.

    >>> tidy("3\u00b0 34\u2032 35\u2033")
    '3\u00b0 34\\' 35"'
    """
    text = " ".join(text.translate(_ALIKE).split())
    return text.replace("''", '"').replace("+/-", "\u00b1").replace("+-", "\u00b1")


def quoted(given: object) -> str:
    """The planner's own text for a message: short, in quotes, without controls. Numbers stand plain.

    >>> quoted("2,5 um"), quoted(0.01), quoted(True), quoted(None)
    ("'2,5 um'", '0.01', 'true', 'an empty entry')
    """
    match given:
        case bool():
            return "true" if given else "false"
        case int() | float():
            return plain(given)
        case None:
            return "an empty entry"
        case str() if not given.strip():
            return "an empty text"
        case str():
            shown = given if len(given) <= _LONGEST_QUOTE else given[: _LONGEST_QUOTE - 1] + "\u2026"
            return "'" + "".join(c if c.isprintable() else "\ufffd" for c in shown) + "'"
        case list() | tuple():
            return "a list"
        case _:
            return "a group of entries"


def plain(number: int | float) -> str:
    """A number as a planner would type it.

    >>> plain(10.0), plain(0.00002), plain(2.5)
    ('10', '0.00002', '2.5')
    """
    if isinstance(number, int):
        return str(number) if abs(number) < 10**15 else f"{number:.3e}" if abs(number) < 10**300 else "a huge number"
    if number != number or number in (float("inf"), float("-inf")) or abs(number) >= 1e15:
        return repr(number)
    text = f"{number:.12f}".rstrip("0").rstrip(".")
    return text if float(text) == number else repr(number)


def nearest(word: str, choices: Iterable[str]) -> str | None:
    """The known word that a mistyped one most likely means, or None. Same letters in other case come first.

    >>> nearest("mim", ["um", "mm", "in"]), nearest("MM", ["um", "mm"]), nearest("xyz", ["um"])
    ('mm', 'mm', None)
    """
    known = list(choices)
    if not word or len(word) > _LONGEST_WORD:
        return None
    for choice in known:
        if choice.lower() == word.lower():
            return choice
    import difflib  # only a wrong word pays for it

    near = difflib.get_close_matches(word, known, 1, _NEAR_ENOUGH)
    if not near:  # `Runout` for `run-out`: case and hyphens count less than letters
        bare = {re.sub(r"[-_ ]", "", choice.lower()): choice for choice in reversed(known)}
        alike = difflib.get_close_matches(re.sub(r"[-_ ]", "", word.lower()), list(bare), 1, _NEAR_ENOUGH)
        return bare[alike[0]] if alike else None
    return near[0]
