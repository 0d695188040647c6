"""A number and its unit, read out of a text exactly, with every trap that a keyboard or a spreadsheet sets."""

from __future__ import annotations

import math
import re
from collections.abc import Iterable
from typing import NoReturn

from setupcheck.notation.units import Kind, Ratio, kind_of, spelling
from setupcheck.notation.wording import Given, NotationError, nearest, plain, quoted, tidy
from setupcheck.record import record

LONGEST_TEXT = 200  # characters of one entry; our screening choice
MOST_DIGITS = 30  # digits of one number; our screening choice
LARGEST_EXPONENT = 30  # of ten; our screening choice
SMALLEST_EXPONENT = -400  # below every float

NUMBER = r"(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"
_NUMBER = re.compile(rf"([+-]?)\s?({NUMBER})")
_INCH_FRACTION = r"([+-]?)\s?(?:([0-9]{1,4})( |-))?([0-9]{1,4})/([0-9]{1,4})(?![0-9./])\s*(.*)"
_FRACTION_PARTS = (2, 4, 8, 16, 32, 64, 128)  # divisions of the inch on rules and drills
_INCHES = frozenset({"in", "in.", "inch", "inches", '"'})


@record
class Figure:
    """A number with the unit as written ("" when there was none), and the text it came from for messages."""

    ratio: Ratio
    unit: str
    given: object

    def times(self, factor: Ratio) -> float:
        """The value in the base unit: one correctly rounded division."""
        return self.ratio[0] * factor[0] / (self.ratio[1] * factor[1])

    @property
    def number(self) -> float:
        return self.ratio[0] / self.ratio[1]


def figure(given: Given, kind: Kind, *, text: str | None = None, units: str = "mm") -> Figure:
    """Number and unit of one entry.

    text: what to read instead of `given` itself (a part of it, or it without its ± sign); messages quote `given`.
    units: of the file, for what a message offers to write; they give no unit to a number without one.
    The unit, when there is one, belongs to `kind`. Raises NotationError.
    """
    text = tidy(text if text is not None else text_of(given, kind))
    refuse_odd_characters(text, given, kind)
    if "\u00b1" in text:
        raise NotationError(
            f"{quoted(given)} has a \u00b1 sign where {kind.called} without sign stands",
            f"Write {text.replace(chr(0xB1), '').strip()}",
        )
    in_parts = re.fullmatch(_INCH_FRACTION, text) if "/" in text else None
    if in_parts and kind.name in ("length", "number"):
        return _inch_fraction(in_parts, given, kind, units)
    if re.search(r"\.[0-9]*\.", text):
        raise NotationError(f"{quoted(given)} has two points", f"Write one point for the decimal, as in {kind.example}")
    found = _NUMBER.match(text)
    if not found:
        _refuse_no_number(text, given, kind)
    number, rest = found[2], text[found.end() :]
    if re.match(r"[ '_*]?[0-9]", rest) and spelling(rest) not in kind.units:  # `1400 1/min` is well written
        thousands = re.match(r"(?:[ '_][0-9]{3})+(?![0-9])", rest)
        joined = number + re.sub(r"[ '_](?=[0-9]{3})", "", rest)
        advice = f"Write it without: {found[1]}{joined}" if thousands else f"Write one number, as in {kind.example}"
        raise NotationError(f"{quoted(given)} has a gap in its number", advice)
    if rest.startswith(":"):
        raise NotationError(f"{quoted(given)} has a colon in its number", f"Write it as in {kind.example}")
    refuse_leading_zero(number, given, text)
    ratio = ratio_of(number, given, kind)
    if found[1] == "-":
        ratio = (-ratio[0], ratio[1])
    unit = rest.strip()
    if not unit:
        return Figure(ratio, "", given)
    return Figure(ratio, known_unit(unit, kind, given, f"{found[1]}{number}"), given)


def text_of(given: Given, kind: Kind) -> str:
    """The entry as text. Refuses what is neither text nor a finite number."""
    if isinstance(given, str):
        if not given.strip():
            raise NotationError(f"{quoted(given)} is not {kind.called}", f"Write {kind.example}, or leave the key away")
        if len(given) > LONGEST_TEXT:
            raise NotationError(f"{quoted(given)} is too long for {kind.called}", f"Write it as in {kind.example}")
        return given
    if isinstance(given, bool) or not isinstance(given, int | float):
        raise NotationError(f"{quoted(given)} is not {kind.called}", f"Write it as in {kind.example}")
    if isinstance(given, float) and not math.isfinite(given):
        raise NotationError(f"{quoted(given)} is not {kind.called}", f"Write a number, as in {kind.example}")
    if isinstance(given, int) and abs(given) >= 10**MOST_DIGITS:
        raise NotationError(f"{quoted(given)} has too many digits", f"Write it as in {kind.example}")
    return repr(given)


def refuse_odd_characters(text: str, given: Given, kind: Kind) -> None:
    """Decimal commas and digits of other alphabets never reach a number."""
    if not text.isascii() and any(c.isdigit() and not c.isascii() and c not in "\u00b2\u00b3" for c in text):
        import unicodedata

        typed = unicodedata.normalize("NFKC", text).replace("\u2044", "/")
        again = f"Type it again: {typed}" if typed.isascii() else f"Type it with plain digits, as in {kind.example}"
        raise NotationError(f"{quoted(given)} has digits other than 0 to 9", again)
    if "," in text:
        raise NotationError(f"{quoted(given)} is not {kind.called}", without_comma(text))


def without_comma(text: str) -> str:
    """What to write instead of a text with commas.

    >>> without_comma("2,5 um")
    'Write a point for the decimal: 2.5 um'
    >>> without_comma("1,250 mm")
    'Write 1.250 mm with a point for the decimal, or 1250 mm without the comma for thousands'
    """
    if re.search(r",\s", text) or not re.search(r",[0-9]", text):
        return f"Write one value without a comma, or a list in brackets: [{text.strip(' ,[]')}]"
    grouped = re.compile(r"[0-9][0-9,.]*[0-9]|,[0-9]+")
    tokens = [token for token in grouped.findall(text) if "," in token]

    def decimal(match: re.Match[str]) -> str:
        token = match[0]
        if token.startswith(","):
            return "0." + token[1:]
        last = max(token.rfind(","), token.rfind("."))
        if "," in token and "." not in token and token.count(",") > 1:
            return token.replace(",", "")
        if "," not in token:
            return token
        return token[:last].replace(",", "").replace(".", "") + "." + token[last + 1 :]

    with_points = grouped.sub(decimal, text)
    if all(re.fullmatch(r"[1-9][0-9]{0,2},[0-9]{3}", token) for token in tokens):
        whole = text.replace(",", "")
        return f"Write {with_points} with a point for the decimal, or {whole} without the comma for thousands"
    if all(token.count(",") > 1 and "." not in token for token in tokens):
        return f"Write thousands without commas: {with_points}"
    return f"Write a point for the decimal: {with_points}"


def refuse_leading_zero(number: str, given: object, text: str) -> None:
    """`010 um` may be 10, or 0.10 with the point forgotten, or eight to an old YAML reader."""
    if re.match(r"0[0-9]", number):
        short = re.sub(r"^0+(?=[0-9])", "", number)
        pointed = "" if "." in number else f", or {text.replace(number, '0.' + number[1:], 1)} if a point is missing"
        raise NotationError(f"{quoted(given)} begins with a zero", f"Write {text.replace(number, short, 1)}{pointed}")


def ratio_of(number: str, given: object, kind: Kind) -> Ratio:
    """A decimal number without sign as an exact fraction.

    >>> from setupcheck.notation.units import LENGTH
    >>> ratio_of("0.25", "0.25", LENGTH)
    (25, 100)
    """
    mantissa, _, exponent = number.lower().partition("e")
    whole, _, part = mantissa.partition(".")
    power = int(exponent or 0) if len(exponent) <= 4 else LARGEST_EXPONENT + 1
    if len(whole) + len(part) > MOST_DIGITS or not SMALLEST_EXPONENT <= power <= LARGEST_EXPONENT:
        raise NotationError(f"{quoted(given)} has too many digits", f"Write it as in {kind.example}")
    power -= len(part)
    digits = int(whole + part)
    return (digits * 10**power, 1) if power >= 0 else (digits, 10**-power)


def known_unit(word: str, kind: Kind, given: object, number: str) -> str:
    """The table spelling of a unit of this kind; any other word is refused with what to write."""
    unit = spelling(word)
    if unit in kind.units:
        return unit
    number = number.lstrip("+")
    if unit in kind.traps:
        raise NotationError(f"{quoted(given)} is not {kind.called}", kind.traps[unit])
    same = [known for known in kind.units if known.lower() == unit.lower()]
    if same:
        raise NotationError(
            f"{quoted(given)} is not {kind.called}: capital and small letters matter",
            f"Write {number} {spoken(same[0])}",
        )
    other = kind_of(word)
    if other is not None and other.name == kind.name:
        raise NotationError(
            f"{quoted(given)} has a part without a unit, or out of place", f"Write it as in {kind.example}"
        )
    if other is not None:
        raise NotationError(
            f"{quoted(given)} is {other.called}, not {kind.called}", f"Write {kind.called}, as in {kind.example}"
        )
    near = near_unit(unit, kind.units)
    advice = f"Write {number} {spoken(near)}" if near else f"Write {kind.write}, as in {kind.example}"
    raise NotationError(f"{quoted(given)} is not {kind.called}: {quoted(word)} is no unit of it", advice)


def near_unit(unit: str, units: Iterable[str]) -> str | None:
    """The unit that a mistyped one most likely means. A word with digits in it is more than a mistyped unit."""
    return None if any(c.isdigit() for c in unit) else nearest(unit, [known for known in units if len(known) > 1])


def spoken(unit: str) -> str:
    """A unit as a message prints it: `N m` for the table's `N*m`."""
    return unit.replace("*", " ")


def refuse_bare(read: Figure, kind: Kind, advice: str = "") -> NoReturn:
    """The number has no unit and needs one."""
    advice = advice or f"Write its unit too: {kind.write}"
    raise NotationError(f"{quoted(read.given)} has no unit, so it is not {kind.called}", advice)


def refuse_absurd(read: Figure, what: str) -> NoReturn:
    """The value is outside of what any shop can mean."""
    raise NotationError(f"{quoted(read.given)} is {what}", "Check the number and its unit")


def number_as_written(read: Figure) -> str:
    """The number of a figure as its text has it, for advice that only adds a unit."""
    return plain(read.number)


def _inch_fraction(found: re.Match[str], given: object, kind: Kind, units: str) -> Figure:
    sign, whole, joint, upper, lower, unit = found.groups()
    up, low = int(upper), int(lower)
    written = f"{sign}{whole + ' ' if whole else ''}{upper}/{lower}"
    if joint == "-":
        raise NotationError(
            f"{quoted(given)} has a dash before its fraction", f"Write a space: {written} {unit or 'in'}"
        )
    if low not in _FRACTION_PARTS or (whole and up >= low):
        raise NotationError(
            f"{quoted(given)} is no fraction of an inch", "Write halves to 128ths, as in 1 1/4 in, or a decimal"
        )
    decimal = sign + plain((int(whole or 0) * low + up) / low)
    if kind.name == "number":
        raise NotationError(f"{quoted(given)} is a fraction", f"Write the decimal: {decimal}")
    if unit not in _INCHES:
        wrong = "is a fraction, and not of an inch" if unit else "is a fraction without unit"
        raise NotationError(f"{quoted(given)} {wrong}", f"Write {written} in, or the decimal {decimal} {unit or units}")
    top = int(whole or 0) * low + up
    return Figure((-top if sign == "-" else top, low), "in", given)


def _refuse_no_number(text: str, given: object, kind: Kind) -> NoReturn:
    if re.match(r"[<>=~\u2264\u2265]", text):
        raise NotationError(
            f"{quoted(given)} begins with a sign that is not read", f"Write the value alone, as in {kind.example}"
        )
    if re.match(r"[+-]\s*[+-]", text):
        raise NotationError(f"{quoted(given)} has two signs", f"Write one sign or none, as in {kind.example}")
    if re.match(r"(\u00f8|\u00d8|\u2300|R)\s?[0-9]", text):
        raise NotationError(f"{quoted(given)} carries the sign for a diameter or radius", "Write the size without it")
    raise NotationError(f"{quoted(given)} is not {kind.called}", f"Write it as in {kind.example}")
