"""Everything a job states that is neither a length nor an angle, and `amount` for a limit of unknown kind."""

from __future__ import annotations

import math
import re
from typing import Literal, NoReturn

from setupcheck.notation.angles import angle, angle_bound
from setupcheck.notation.figures import (
    NUMBER,
    figure,
    near_unit,
    number_as_written,
    refuse_absurd,
    refuse_bare,
    refuse_odd_characters,
    spoken,
    text_of,
)
from setupcheck.notation.lengths import FILE_UNITS, Units, bound, length, without_plus_minus
from setupcheck.notation.units import (
    CONDUCTIVITY,
    DURATION,
    EXPANSION,
    FORCE,
    FRACTION,
    KINDS,
    LENGTH,
    MASS,
    PRESSURE,
    SPEED,
    TEMPERATURE,
    TEMPERATURE_DIFFERENCE,
    TORQUE,
    VOLUME,
    Kind,
    kind_of,
    spelling,
)
from setupcheck.notation.wording import Given, NotationError, plain, quoted, tidy
from setupcheck.record import record

COLDEST = -273.15  # degC, absolute zero (definition of the kelvin)
HOTTEST = 2000.0  # degC; no part of this trade is hotter; our screening choice
ROUGHEST = 1.0  # mm; our screening choice
LARGEST_VALUE = 1e12  # in any base unit; our screening choice, far above every machine
LARGEST_SHARE = 1.0  # a share is a part of a whole

_FIGURES: dict[str, Literal["Ra", "Rz"]] = {"Ra": "Ra", "Rz": "Rz"}
_ROUGHNESS = re.compile(r"([A-Za-z]+)\s*(.*)")

NUMBER_ALONE = Kind("number", "a number", {}, "a number without unit", "72")

Dimension = Literal[
    "length", "angle", "torque", "force", "fraction", "temperature", "temperature_difference", "pressure", "duration",
    "mass", "speed", "expansion", "conductivity", "volume", "number",
]  # fmt: skip


@record
class Roughness:
    """A roughness figure of ISO 21920 (before: ISO 4287): which one, and its height [mm]."""

    kind: Literal["Ra", "Rz"]
    height: float


@record
class Amount:
    """A value in the base unit of its dimension (rad for angles, a share of 1 for fractions)."""

    value: float
    dimension: Dimension


def number(given: Given, *, at_least: float | None = None) -> float:
    """A plain number without unit: a count, a ratio, a factor.

    >>> number("0.8"), number(72)
    (0.8, 72.0)
    """
    read = figure(given, NUMBER_ALONE)
    return _from(float(at_least), read.number, given) if at_least is not None else read.number


def temperature(given: Given) -> float:
    """A temperature: `140 degC`, `140 °C`, `284 degF`, `413.15 K`. Returns degC.

    >>> temperature("284 degF"), temperature("293.15 K")
    (140.0, 20.0)
    """
    read = figure(given, TEMPERATURE)
    if not read.unit:
        refuse_bare(read, TEMPERATURE, f"Write {number_as_written(read)} degC")
    up, low = read.ratio
    if read.unit == "K":
        value = (up * 100 - 27315 * low) / (low * 100)
    elif read.unit in ("degF", "\u00b0F"):
        value = (up - 32 * low) * 5 / (low * 9)
    else:
        value = up / low
    if value < COLDEST:
        refuse_absurd(read, "below absolute zero")
    if not value <= HOTTEST:
        refuse_absurd(read, f"hotter than {plain(HOTTEST)} degC")
    return value


def temperature_difference(given: Given, *, at_least: float | None = None) -> float:
    """A difference of two temperatures, or an error of one: `10 degC`, `10 K`, `18 degF`, `±10 K`. Returns K.

    >>> temperature_difference("18 degF")
    10.0
    """
    text = without_plus_minus(text_of(given, TEMPERATURE_DIFFERENCE))
    read = figure(given, TEMPERATURE_DIFFERENCE, text=text)
    if not read.unit:
        refuse_bare(read, TEMPERATURE_DIFFERENCE, f"Write {number_as_written(read)} K")
    value = read.times(TEMPERATURE_DIFFERENCE.units[read.unit])
    if not abs(value) <= HOTTEST:
        refuse_absurd(read, f"more than {plain(HOTTEST)} K")
    return _from(at_least, value, given)


def torque(given: Given, *, at_least: float | None = 0.0) -> float:
    """A torque: `40 N m`, `40 N*m`, `40 Nm`, `30 lbf ft`. Returns N*mm.

    >>> torque("40 N m"), round(torque("30 lbf ft"), 3)
    (40000.0, 40674.538)
    """
    return _in_base(given, TORQUE, at_least)


def force(given: Given, *, at_least: float | None = 0.0) -> float:
    """A force: `800 N`, `12 kN`, `200 lbf`. Returns N.

    >>> force("12 kN")
    12000.0
    """
    return _in_base(given, FORCE, at_least)


def pressure(given: Given, *, at_least: float | None = 0.0) -> float:
    """A pressure, stress or modulus: `110 MPa`, `110 N/mm2`, `210 GPa`, `6 bar`, `30 ksi`. Returns MPa.

    >>> pressure("210 GPa"), pressure("6 bar")
    (210000.0, 0.6)
    """
    return _in_base(given, PRESSURE, at_least)


def expansion(given: Given, *, at_least: float | None = 0.0) -> float:
    """A thermal expansion: `11.5 um/m/K`. Returns 1/K.

    >>> expansion("12 um/m/K")
    1.2e-05
    """
    return _in_base(given, EXPANSION, at_least)


def conductivity(given: Given) -> float:
    """A heat conductivity, above 0: `52 W/mK`, `30 Btu/h/ft/degF`. Returns W/mK.

    >>> conductivity("52 W/mK"), round(conductivity("30 Btu/h/ft/degF"), 1)
    (52.0, 51.9)
    """
    value = _in_base(given, CONDUCTIVITY, 0.0)
    if value == 0.0:
        raise NotationError(f"{quoted(given)} lets no heat through", "Write what the data sheet says, as in 52 W/mK")
    return value


def duration(given: Given, *, at_least: float | None = 0.0) -> float:
    """A time that passes: `12 s`, `5 min`, `2 h`. Returns s.

    >>> duration("5 min")
    300.0
    """
    return _in_base(given, DURATION, at_least)


def mass(given: Given, *, at_least: float | None = 0.0) -> float:
    """A mass: `2.5 kg`, `300 g`, `4 lb`. Returns kg.

    >>> mass("300 g")
    0.3
    """
    return _in_base(given, MASS, at_least)


def volume(given: Given, *, at_least: float | None = 0.0) -> float:
    """A volume: `40 m3`, `5 l`, `1400 ft3`. Returns m3.

    >>> volume("5 l"), round(volume("1000 ft3"), 4)
    (0.005, 28.3168)
    """
    return _in_base(given, VOLUME, at_least)


def speed(given: Given, *, at_least: float | None = 0.0) -> float:
    """A speed of rotation: `1400 rpm`, `1400 1/min`. Returns rev/min.

    >>> speed("1400 1/min"), speed("2 rev/s")
    (1400.0, 120.0)
    """
    return _in_base(given, SPEED, at_least)


def fraction(given: Given) -> float:
    """A share of a whole: `95 %`, or bare `0.95`. A bare number above one is refused: `95` may be 95 %. Returns 0 .. 1.

    >>> fraction("95 %"), fraction(0.95)
    (0.95, 0.95)
    """
    read = figure(given, FRACTION)
    value = read.times(FRACTION.units[read.unit]) if read.unit else read.number
    if value > LARGEST_SHARE and not read.unit and value <= 100:
        written = number_as_written(read)
        raise NotationError(
            f"{quoted(given)} is more than the whole",
            f"Write {written} %, or {plain(round(value / 100, 12))} as a share of one",
        )
    if value > LARGEST_SHARE:
        raise NotationError(f"{quoted(given)} is more than the whole", "Write 100 % or less")
    return _from(0.0, value, given)


def roughness(given: Given) -> Roughness:
    """A roughness with its figure and unit: `Rz 4 um`, `Ra 0.8 um`, `Ra 32 uin`.

    >>> roughness("Rz 4 um")
    Roughness(kind='Rz', height=0.004)
    """
    called, example = "a roughness", "Rz 4 um or Ra 0.8 um"
    text = tidy(text_of(given, Kind("roughness", called, LENGTH.units, "um", example)))
    found = _ROUGHNESS.fullmatch(text)
    if not found:
        raise NotationError(f"{quoted(given)} does not say which roughness", f"Write {example}")
    word, rest = found[1], found[2]
    kind = _FIGURES.get(word)
    if kind is None:
        meant = word.capitalize() if word.capitalize() in _FIGURES else None
        advice = f"Write {meant} {rest}" if meant else f"Only Ra and Rz are read: write {example}"
        raise NotationError(f"{quoted(given)} is not {called}", advice)
    read = figure(given, Kind("roughness", called, LENGTH.units, "um", example, LENGTH.traps), text=rest or "?")
    if not read.unit:
        refuse_bare(read, Kind("roughness", called, {}, "um", example), f"Write {kind} {rest} um")
    height = read.times(LENGTH.units[read.unit])
    if not height <= ROUGHEST:
        refuse_absurd(read, f"rougher than {plain(ROUGHEST)} mm")
    return Roughness(kind, _from(0.0, height, given))


def amount(given: Given, units: Units = "mm") -> Amount:
    """A limit of any kind, its dimension told by its unit; without unit it is a number. A leading ± is dropped.

    `"` is seconds of arc. In a file whose sizes are in inches it may be either, and is refused.
    `±2 degC` is a temperature difference, `2 degC` a temperature.

    >>> amount("40 N m"), amount(3)
    (Amount(value=40000.0, dimension='torque'), Amount(value=3.0, dimension='number'))
    """
    if units not in FILE_UNITS:
        raise ValueError(f"units must be one of {FILE_UNITS}, not {units!r}")
    anything = Kind("number", "an amount", {}, "a number and its unit", '40 um, 75" or 25 %')
    whole = tidy(text_of(given, anything))
    text = without_plus_minus(whole)
    symmetrical = text != whole
    refuse_odd_characters(text, given, anything)
    found = re.match(rf"[+-]?\s?(?:[0-9]+ )?(?:[0-9]+/[0-9]+|{NUMBER})\s*(.*)", text)
    unit = found[1].strip() if found else ""
    if not unit:
        value = figure(given, NUMBER_ALONE, text=text).number
        return Amount(_from(0.0, value, given) if symmetrical else value, "number")
    kind = kind_of(unit)
    if kind is None:
        if re.match(r"[ '_*]?[0-9.]", text[len(text) - len(unit) :]):
            figure(given, anything, text=text)
        _refuse_unknown_unit(given, text, unit)
    if kind.name == "angle" and spelling(unit) == '"' and units == "in":
        alone = text[: -len(unit)].strip()
        raise NotationError(f"{quoted(given)} may be inches or seconds of arc", f"Write {alone} in, or {alone} arcsec")
    return _amount_of(given, kind, symmetrical)


def _amount_of(given: Given, kind: Kind, symmetrical: bool) -> Amount:
    text: Given = without_plus_minus(given) if isinstance(given, str) else given
    match kind.name:
        case "angle":
            return Amount(angle_bound(given) if symmetrical else angle(given), "angle")
        case "length":
            return Amount(bound(given) if symmetrical else length(given, units="mm"), "length")
        case "temperature" if symmetrical or str(text).endswith("K"):
            return Amount(temperature_difference(given), "temperature_difference")
        case "temperature":
            return Amount(temperature(given), "temperature")
        case "torque":
            return Amount(torque(text), "torque")
        case "force":
            return Amount(force(text), "force")
        case "pressure":
            return Amount(pressure(text), "pressure")
        case "duration":
            return Amount(duration(text), "duration")
        case "mass":
            return Amount(mass(text), "mass")
        case "speed":
            return Amount(speed(text), "speed")
        case "volume":
            return Amount(volume(text), "volume")
        case _:
            return Amount(fraction(text), "fraction")


def _refuse_unknown_unit(given: Given, text: str, unit: str) -> NoReturn:
    for kind in KINDS:
        if spelling(unit) in kind.traps:
            raise NotationError(f"{quoted(given)} has an unknown unit", kind.traps[spelling(unit)])
    near = near_unit(spelling(unit), [spelled for kind in KINDS for spelled in kind.units])
    alone = text[: -len(unit)].strip()
    advice = f"Write {alone} {spoken(near)}" if near else "Write a unit such as um, mm, arcsec, deg, N m, %"
    raise NotationError(f"{quoted(given)} has an unknown unit", advice)


def _in_base(given: Given, kind: Kind, at_least: float | None) -> float:
    read = figure(given, kind)
    if not read.unit:
        refuse_bare(read, kind)
    value = read.times(kind.units[read.unit])
    if not math.isfinite(value) or abs(value) > LARGEST_VALUE:
        refuse_absurd(read, "larger than anything in a shop")
    return _from(at_least, value, given)


def _from(at_least: float | None, value: float, given: object) -> float:
    if at_least is None or value >= at_least:
        return value
    if at_least == 0.0:
        raise NotationError(f"{quoted(given)} is below zero", "Write 0 or more, without a minus sign")
    raise NotationError(f"{quoted(given)} is too small", f"Write {plain(at_least)} or more")
