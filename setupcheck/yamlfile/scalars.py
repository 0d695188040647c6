"""What a plain YAML value is: nothing, true or false, a decimal number, or text. No guessing as in YAML 1.1.

The pattern of a number follows the core schema of YAML 1.2, narrower where a shop would be surprised: no octal and
hexadecimal, no leading zeros, no NaN and infinity, and an exponent needs its sign, because `32e8` is a shaft.
"""

from __future__ import annotations

import math
import re

from setupcheck.record import record
from setupcheck.yamlfile.limits import MOST_DIGITS

Scalar = str | int | float | bool | None

_NUMBER = re.compile(r"[+-]?(?:(?P<whole>[0-9]+)|(?:[0-9]+\.[0-9]*|\.[0-9]+|[0-9]+(?=[eE]))(?:[eE][+-][0-9]{1,4})?)")
# What hardly any file holds is compiled where it is first needed.
_LEADING_ZERO = r"([+-]?)0+([0-9][0-9.]*)"
_GROUPED = r"[+-]?[0-9]+(?:_[0-9]*)+(?:\.[0-9_]*)?"
_OTHER_BASE = r"(?i)[+-]?0([xob])([0-9a-fA-F_]+)"
_NOT_FINITE = r"(?i)[+-]?\.?(?:nan|inf|infinity)"
_CLOCK = r"([+-]?)([0-9]+):([0-9]{1,2})(?::([0-9]{1,2}))?(?:\.[0-9]*)?"
_TRUE = frozenset({"yes", "on", "y", "true"})
_FALSE = frozenset({"no", "off", "n", "false"})


@record
class LookAlike:
    """A plain value that looks like a number and is not read as one: what is wrong, what to write."""

    problem: str
    hint: str


def plain_scalar(text: str) -> Scalar | LookAlike:
    """The value of an unquoted scalar.

    >>> plain_scalar("12"), plain_scalar("1e-3"), plain_scalar("no"), plain_scalar("~"), plain_scalar("true")
    (12, 0.001, 'no', None, True)
    """
    if not text or text == "~" or text == "null":
        return None
    if text == "true":
        return True
    if text == "false":
        return False
    first = text[0]
    if not (first.isascii() and (first.isdigit() or first in "+-.nNiI")):
        return text
    if not first.isdigit() and re.fullmatch(_NOT_FINITE, text):
        return LookAlike(f"'{text}' is not a number", "Write a finite number, or leave the key away if it is not known")
    found = _NUMBER.fullmatch(text)
    if not found:
        return _other_spelling(text)
    if len(text) > MOST_DIGITS and sum(character.isdigit() for character in text) > MOST_DIGITS:
        return LookAlike("the number has too many digits", "Write it shorter, or in quotes if it is text")
    if "0" in text[:2] and (zeros := re.fullmatch(_LEADING_ZERO, text)):
        sign, rest = zeros.groups()
        return LookAlike(f"'{text}' begins with a zero", f"Write {sign}{rest}, or '{text}' in quotes if it is text")
    if found["whole"]:
        return int(text)
    value = float(text)
    if not math.isfinite(value):
        return LookAlike(f"'{text}' is too large for a number", "Check its exponent")
    return value or 0.0  # no minus zero


def yaml11_surprise(text: str) -> str | None:
    """What to say beside a refused text that older YAML readers took for something else. None for any other text.

    >>> yaml11_surprise("no"), yaml11_surprise("15:30")
    ('no is text here; write false', "15:30 is read as text; write 15deg 30'")
    """
    word = text.strip()
    if word.lower() in _TRUE and word != "true":
        return f"{word} is text here; write true"
    if word.lower() in _FALSE and word != "false":
        return f"{word} is text here; write false"
    if word in ("Null", "NULL"):
        return f"{word} is text here; leave the value away"
    if found := re.fullmatch(_CLOCK, word):
        sign, degrees, minutes, seconds = found.groups()
        angle = f"{sign}{int(degrees[:9])}deg {int(minutes)}'" + (f' {int(seconds)}"' if seconds else "")
        return f"{word} is read as text; write {angle}"
    return None


def _other_spelling(text: str) -> str | LookAlike:
    if len(text) > 2 * MOST_DIGITS:
        return text
    if "_" in text and re.fullmatch(_GROUPED, text):
        return LookAlike(
            f"'{text}' has an underscore in its number", f"Write {text.replace('_', '')}, or use quotes if it is text"
        )
    if text.lstrip("+-").startswith("0") and (found := re.fullmatch(_OTHER_BASE, text)):
        base = {"x": 16, "o": 8, "b": 2}[found[1].lower()]
        try:
            value = int(found[2], base)
        except ValueError:
            return text
        sign = "-" if text[0] == "-" else ""
        return LookAlike(
            f"'{text}' is not a decimal number", f"Write {sign}{value}, or '{text}' in quotes if it is text"
        )
    return text
