"""Columns of a division test's CSV: their names with units, and how one cell is read. Angles come out in rad."""

from __future__ import annotations

import math
import re
from collections.abc import Callable

from setupcheck import notation
from setupcheck.errors import SetupcheckError
from setupcheck.notation import NotationError, nearest, quoted

ARCSEC = math.pi / 648_000.0  # rad
UNITS = {"deg": math.pi / 180.0, "gon": math.pi / 200.0, "dms": math.pi / 180.0, "arcsec": ARCSEC}
STATIONS = ("angle", "turned")
STATION_COLUMNS = (*(f"{kind}_{unit}" for kind in STATIONS for unit in ("deg", "gon", "dms")), "tooth")
VALUE_COLUMNS = ("deviation_arcsec", "reading_deg", "reading_gon", "reading_dms")
OTHER_COLUMNS = ("run", "direction", "face", "minutes", "note")
KNOWN = (*STATION_COLUMNS, *VALUE_COLUMNS, *OTHER_COLUMNS)
DIRECTIONS = {"forward": 1, "fwd": 1, "f": 1, "+": 1, "up": 1, "reverse": -1, "rev": -1, "r": -1, "-": -1, "down": -1}
FACES = {"left": 1, "l": 1, "1": 1, "i": 1, "right": 2, "r": 2, "2": 2, "ii": 2}
LARGEST_TURN = 100.0 * math.tau
"""Largest angle of a station or reading [rad]. Our screening choice: a hundred turns."""

_DMS = re.compile(r"""([+-]?)(\d{1,5})(?:\s*(?:deg|°)\s*|[ :])(\d{1,2})(?:\s*'\s*|[ :])(\d{1,2}(?:\.\d*)?)\s*"?""")
Cell = Callable[[str], float]


class BadCell(SetupcheckError):
    """A cell that cannot be read; the text says what is wrong and what to write, without its place."""


def column_name(text: str) -> str:
    """One spelling of a header: `Angle [deg]`, `angle (deg)`, `ANGLE_DEG` are one.

    >>> column_name(" Angle [deg] "), column_name("Deviation (arcsec)")
    ('angle_deg', 'deviation_arcsec')
    """
    return re.sub(r"[\s\[\]()_-]+", "_", text.strip().lower()).strip("_")


def unknown_column(name: str) -> str:
    """What to write in place of a column that nobody knows."""
    bare = {"angle": "angle_deg", "turned": "turned_deg", "reading": "reading_deg", "deviation": "deviation_arcsec"}
    if name in bare:
        offered = ", ".join(c for c in KNOWN if c.startswith(f"{name}_"))
        return f"the column {quoted(name)} does not say its unit. Write it in the name: {offered}"
    near = nearest(name, KNOWN)
    advice = f"Did you mean {near}?" if near else f"Columns are {', '.join(KNOWN)}"
    return f"there is no column {quoted(name)}. {advice}"


def reader(column: str) -> Cell:
    """The function that reads one cell of a column. Raises (the function): BadCell."""
    if column == "tooth":
        return _tooth
    if column == "minutes":
        return _minutes
    if column == "direction":
        return lambda text: _word(text, DIRECTIONS, "a direction", "forward or reverse")
    if column == "face":
        return lambda text: _word(text, FACES, "a face of the instrument", "left or right, or 1 or 2")
    unit = column.rpartition("_")[2]
    return _dms if unit == "dms" else _angle(unit)


def refuse_formula(text: str) -> None:
    """Refuses what a spreadsheet would work out; a sign before a number is none.  Raises: BadCell."""
    if text[:1] in ("=", "@") or (text[:1] in ("+", "-") and len(text) > 1 and not re.match(r"[+-]\s?[\d.]", text)):
        raise BadCell(f"{quoted(text)} is a formula. Write its value (in the spreadsheet: paste as values)")


def _number(text: str, called: str, example: str) -> float:
    try:
        value = float(text)
    except ValueError:
        pass
    else:
        if value - value == 0.0 and "_" not in text:  # neither NaN nor infinite
            return value
    refuse_formula(text)
    if re.fullmatch(r"[+-]?\d+,\d+", text):
        raise BadCell(f"{quoted(text)} has a decimal comma. Write a point: {text.replace(',', '.')}")
    raise BadCell(f"{quoted(text)} is not {called}. Write it as in {example}")


def is_number(text: str) -> bool:
    """Whether a cell holds a plain number."""
    try:
        float(text)
    except ValueError:
        return False
    return True


def _angle(unit: str) -> Cell:
    factor = UNITS[unit]
    example = {"deg": "130.25", "gon": "144.7222", "arcsec": "-4.5"}[unit]
    called = {"deg": "an angle in degrees", "gon": "an angle in gon", "arcsec": "a number of seconds of arc"}[unit]

    def read(text: str) -> float:
        try:
            value = float(text) * factor
        except ValueError:
            value = math.nan
        if -LARGEST_TURN <= value <= LARGEST_TURN and "_" not in text:
            return value
        return _spelt(text, unit, called, example)

    return read


def _spelt(text: str, unit: str, called: str, example: str) -> float:
    """A cell that carries a unit of its own, which must be the column's; anything else is told."""
    if re.fullmatch(r"[^A-Za-z°'\"]*", text) or text[:1] in ("=", "@") or is_number(text):
        value = _number(text, called, example)
        raise BadCell(f"{quoted(text)} is {abs(value):.6g}, more than a hundred turns. Check the number and its unit")
    try:
        value = notation.angle(text)
    except NotationError as wrong:
        refuse_formula(text)
        raise BadCell(
            str(wrong) if re.search(r"\d", text) else f"{quoted(text)} is not {called}. Write {example}"
        ) from None
    own = {"deg": ("deg", "°"), "gon": ("gon",), "arcsec": ("arcsec", '"')}[unit]
    if not any(text.rstrip().endswith(word) for word in own) or (unit == "deg" and "'" in text):
        written = f"{value / UNITS[unit]:.7g}"
        raise BadCell(f"{quoted(text)} is not in {unit} as its column is. Write {written}")
    return value


def _dms(text: str) -> float:
    found = _DMS.fullmatch(text)
    if found is None:
        if re.fullmatch(r"[+-]?\d+(\.\d+)?", text) and float(text) == 0.0:
            return 0.0
        try:
            return notation.angle(text)
        except NotationError as wrong:
            refuse_formula(text)
            raise BadCell(str(wrong)) from None
    sign, degrees, minutes, seconds = found.groups()
    if int(minutes) >= 60 or float(seconds) >= 60.0:
        raise BadCell(f"{quoted(text)} has 60 or more minutes or seconds. Carry the rest over")
    value = (int(degrees) * 3600 + int(minutes) * 60 + float(seconds)) * ARCSEC
    if value > LARGEST_TURN:
        raise BadCell(f"{quoted(text)} is more than a hundred turns. Check the number and its unit")
    return -value if sign == "-" else value


def _tooth(text: str) -> float:
    value = _number(text, "the number of a tooth", "14")
    if value != int(value) or not 1 <= value <= 1_000_000:
        raise BadCell(f"{quoted(text)} is not the number of a tooth. Write a whole number from 1 on")
    return value


def _minutes(text: str) -> float:
    value = _number(text, "a time in minutes", "12.5")
    if abs(value) > 1e6:
        raise BadCell(f"{quoted(text)} minutes is more than a year. Write minutes from the first reading on")
    return value


def _word(text: str, words: dict[str, int], called: str, offered: str) -> float:
    found = words.get(text.lower())
    if found is None:
        refuse_formula(text) if text not in ("+", "-") else None
        raise BadCell(f"{quoted(text)} is not {called}. Write {offered}")
    return float(found)
