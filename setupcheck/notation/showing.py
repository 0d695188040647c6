"""Values in base units written for people: the display unit, the digits, never a minus zero."""

from __future__ import annotations

import math
from typing import Literal

# What a value in the base unit is multiplied with to stand in the display unit. Bases: mm, rad, degC, MPa, N, N*mm, s,
# kg, rev/min, m3, share of 1. Inch, pound: see `units`.
FACTOR: dict[str, float] = {
    "mm": 1.0, "um": 1000.0, "in": 1 / 25.4, "thou": 1000 / 25.4,
    "rad": 1.0, "mrad": 1000.0, "urad": 1e6, "deg": 180 / math.pi, "gon": 200 / math.pi,
    "arcmin": 180 * 60 / math.pi, "arcsec": 180 * 3600 / math.pi,
    "degC": 1.0, "K": 1.0,
    "MPa": 1.0, "GPa": 0.001, "N": 1.0, "kN": 0.001, "N*m": 0.001, "N*mm": 1.0,
    "s": 1.0, "min": 1 / 60, "h": 1 / 3600,
    "kg": 1.0, "rpm": 1.0, "m3": 1.0, "l": 1000.0,
    "%": 100.0, "1": 1.0,
}  # fmt: skip
_WRITTEN = {"arcsec": '"', "arcmin": "'", "N*m": " N m", "N*mm": " N mm", "1": ""}

SIGNIFICANT = 12  # digits kept before rounding: two routes to the same number differ further back; our screening choice


def show(value: float, unit: str, digits: int) -> str:
    """A value in its base unit, written in a display unit that the reading functions take back.

    >>> show(0.028, "um", 0), show(40000.0, "N*m", 1), show(0.25, "%", 0), show(-1e-9, "mm", 3)
    ('28 um', '40.0 N m', '25 %', '0.000 mm')
    """
    return fixed(value * FACTOR[unit], digits) + _WRITTEN.get(unit, f" {unit}")


def show_length(value: float, unit: Literal["um", "mm", "in", "thou"], digits: int) -> str:
    """A length [mm] in um, mm, in or thou.

    >>> show_length(0.0127, "thou", 1)
    '0.5 thou'
    """
    return show(value, unit, digits)


def show_angle(value: float, form: Literal["dms", "deg", "gon", "arcsec"], digits: int) -> str:
    """An angle [rad]; `digits` belong to the last part written, the seconds in the form `dms`.

    >>> show_angle(math.radians(3.5763888888), "dms", 0), show_angle(math.radians(0.005), "arcsec", 1)
    ('3deg 34\\' 35"', '18.0"')
    """
    if form != "dms":
        return show(value, form, digits)
    seconds = _rounded(abs(value) * FACTOR["arcsec"], digits)  # in steps of the last digit: 60" never appear
    scale = 10**digits
    degrees, rest = divmod(seconds, 3600 * scale)
    minutes, rest = divmod(rest, 60 * scale)
    sign = "-" if value < 0 and seconds else ""
    return f"{sign}{degrees}deg {minutes}' {_with_point(rest, digits)}\""


def fixed(value: float, digits: int) -> str:
    """A number with so many decimals, half rounded away from zero, after noise in its last bits is dropped.

    Raises ValueError for NaN and infinity: what is absent must have become `open` before.

    >>> fixed(12.5, 0), fixed(12.499999999999998, 0), fixed(2.675, 2), fixed(-0.0004, 3)
    ('13', '13', '2.68', '0.000')
    """
    steps = _rounded(abs(value), digits)
    return ("-" if value < 0 and steps else "") + _with_point(steps, digits)


def _rounded(value: float, digits: int) -> int:
    """A number >= 0 in whole steps of its last decimal."""
    if not math.isfinite(value):
        raise ValueError(f"{value} cannot be shown")
    if digits < 0:
        raise ValueError(f"digits must be 0 or more, not {digits}")
    mantissa, exponent = f"{value:.{SIGNIFICANT - 1}e}".split("e")
    figures = int(mantissa.replace(".", ""))
    power: int = int(exponent) - (SIGNIFICANT - 1) + digits
    if power >= 0:
        return figures * int(10**power)
    step = int(10**-power)
    return (2 * figures + step) // (2 * step)


def _with_point(steps: int, digits: int) -> str:
    if not digits:
        return str(steps)
    whole, part = divmod(steps, 10**digits)
    return f"{whole}.{part:0{digits}d}"
