"""Units that a shop writes, and their exact factors to the base units of this package.

A factor is a fraction of whole numbers, so that `12 um`, `0.012 mm` and `0.012` give the same float.
Bases: mm, N, N*mm, MPa, s, kg, rev/min, m3. Angles are kept in degrees or in radians and made to rad in `angle`.
Sources: SI brochure for the metric units; inch 25.4 mm and pound 0.45359237 kg exactly (international yard and pound
agreement, 1959); pound-force from the standard gravity 9.80665 m/s2 exactly (3rd CGPM, 1901).
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import field

from setupcheck.record import record

Ratio = tuple[int, int]  # numerator, denominator > 0

_LBF: Ratio = (45359237 * 980665, 10**8 * 10**5)  # N
_FOOT: Ratio = (3048, 10)  # mm
_INCH: Ratio = (254, 10)  # mm
_LBF_FT: Ratio = (_LBF[0] * _FOOT[0], _LBF[1] * _FOOT[1])
_LBF_IN: Ratio = (_LBF[0] * _INCH[0], _LBF[1] * _INCH[1])
_PSI: Ratio = (_LBF[0] * _INCH[1] ** 2, _LBF[1] * _INCH[0] ** 2)  # N/mm2
_CUBIC_FOOT: Ratio = (_FOOT[0] ** 3, (_FOOT[1] * 1000) ** 3)  # m3


@record
class Kind:
    """What sort of thing a text stands for.

    name      dimension, as `Amount.dimension` gives it
    called    with its article, for messages
    units     spelling -> factor to the base unit
    write     units that a message recommends
    example   a well-written one
    traps     spelling that is refused with its own advice -> the advice
    """

    name: str
    called: str
    units: Mapping[str, Ratio]
    write: str
    example: str
    traps: Mapping[str, str] = field(default_factory=dict)


_TENTH = "A tenth is 0.1 mm in one shop and 0.0001 in in the next: write mm, um or in"

LENGTH = Kind(
    "length",
    "a length",
    {
        "um": (1, 1000), "micron": (1, 1000), "microns": (1, 1000),
        "mm": (1, 1), "cm": (10, 1), "m": (1000, 1),
        "in": _INCH, "in.": _INCH, "inch": _INCH, "inches": _INCH, '"': _INCH,
        "thou": (254, 10_000), "mil": (254, 10_000), "mils": (254, 10_000),
        "uin": (254, 10_000_000), "microinch": (254, 10_000_000),
    },
    "um, mm, in or thou",
    "2.5 um",
    {
        "M": "Write mm, or m in a small letter for metres",
        "u": "Write um for micrometres",
        "tenth": _TENTH, "tenths": _TENTH,
        "hundredth": "Write mm, um or in", "hundredths": "Write mm, um or in",
        "'": "Feet are not read: write mm or in",
        "ft": "Feet are not read: write mm or in",
        "nm": "Nanometres are not read: write um (1000 nm are 1 um)",
    },
)  # fmt: skip

ANGLE = Kind(
    "angle",
    "an angle",
    {
        "deg": (1, 1), "\u00b0": (1, 1), "degree": (1, 1), "degrees": (1, 1),
        "gon": (9, 10),
        "'": (1, 60), "arcmin": (1, 60),
        '"': (1, 3600), "arcsec": (1, 3600),
        "rad": (1, 1), "mrad": (1, 1000), "urad": (1, 1_000_000),
    },
    "deg, ', \", gon or mrad",
    "3deg 34' 35\"",
    {
        "grad": "Some read grad as degrees, others as gon: write deg or gon",
        "sec": "Write arcsec, or \" for seconds of arc",
        "s": "Write arcsec, or \" for seconds of arc",
        "min": "Write arcmin, or ' for minutes of arc",
        "d": "Write deg",
    },
)  # fmt: skip
RADIANS = frozenset({"rad", "mrad", "urad"})  # their factors lead to rad, all other factors of ANGLE to degrees

_C = "The unit C is the coulomb: write degC"
_F = "The unit F is the farad: write degF"
TEMPERATURE = Kind(
    "temperature",
    "a temperature",
    {"degC": (1, 1), "\u00b0C": (1, 1), "K": (1, 1), "degF": (5, 9), "\u00b0F": (5, 9)},
    "degC, degF or K",
    "140 degC",
    {
        "C": _C,
        "F": _F,
        "deg": "The unit deg is an angle: write degC",
        "\u00b0": "The degree sign alone is an angle: write degC",
    },
)
TEMPERATURE_DIFFERENCE = Kind(
    "temperature_difference",
    "a temperature difference",
    TEMPERATURE.units,
    "K, degC or degF",
    "10 K",
    TEMPERATURE.traps,
)
TORQUE = Kind(
    "torque",
    "a torque",
    {
        "N*m": (1000, 1), "Nm": (1000, 1), "N-m": (1000, 1), "kN*m": (1_000_000, 1), "kNm": (1_000_000, 1),
        "N*mm": (1, 1), "Nmm": (1, 1),
        "lbf*ft": _LBF_FT, "ft*lbf": _LBF_FT, "ft-lbf": _LBF_FT, "lb*ft": _LBF_FT, "ft*lb": _LBF_FT, "ft-lb": _LBF_FT,
        "lbf*in": _LBF_IN, "in*lbf": _LBF_IN, "in-lbf": _LBF_IN, "lb*in": _LBF_IN, "in*lb": _LBF_IN, "in-lb": _LBF_IN,
    },
    "N m, N mm or lbf ft",
    "40 N m",
    {"nm": "Small nm are nanometres: write N m"},
)  # fmt: skip
FORCE = Kind(
    "force",
    "a force",
    {"N": (1, 1), "daN": (10, 1), "kN": (1000, 1), "lbf": _LBF, "kgf": (980665, 100_000)},
    "N, kN or lbf",
    "12 kN",
    {"kg": "The unit kg is a mass: write N (1 kg weighs 9.81 N) or kgf", "lb": "The unit lb is a mass: write lbf"},
)
PRESSURE = Kind(
    "pressure",
    "a pressure",
    {
        "Pa": (1, 1_000_000), "kPa": (1, 1000), "MPa": (1, 1), "GPa": (1000, 1), "bar": (1, 10),
        "N/mm2": (1, 1), "N/mm\u00b2": (1, 1), "psi": _PSI, "ksi": (_PSI[0] * 1000, _PSI[1]),
    },
    "MPa, N/mm2, bar or psi",
    "110 MPa",
    {"mPa": "Small mPa are thousandths of a pascal: write MPa", "mpa": "Write MPa"},
)  # fmt: skip
DURATION = Kind(
    "duration",
    "a time",
    {"s": (1, 1), "sec": (1, 1), "min": (60, 1), "h": (3600, 1)},
    "s, min or h",
    "12 s",
    {
        "m": "The unit m is the metre: write min for minutes",
        "'": "Minutes of arc stand in the place of a time: write min",
        '"': "Seconds of arc stand in the place of a time: write s",
    },
)
EXPANSION = Kind(
    "expansion",
    "an expansion",
    {"um/m/K": (1, 1_000_000), "um/m/degC": (1, 1_000_000), "um/(m*K)": (1, 1_000_000), "ppm/K": (1, 1_000_000)},
    "um/m/K",
    "11.5 um/m/K",
)
_PER_FOOT: Ratio = (105505585262 * 9 * 10_000, 10**8 * 5 * 3600 * 3048)  # Btu (international table) per h, ft and degF
CONDUCTIVITY = Kind(
    "conductivity",
    "a heat conductivity",
    {
        "W/mK": (1, 1), "W/m*K": (1, 1), "W/(m*K)": (1, 1), "W/(mK)": (1, 1), "W/m/K": (1, 1), "W/m/degC": (1, 1),
        "Btu/h/ft/degF": _PER_FOOT, "Btu/(h*ft*degF)": _PER_FOOT,
    },
    "W/mK",
    "52 W/mK",
    {
        "W/m": "The kelvin is missing: write W/mK",
        "%IACS": "Electrical conductivity stands in the place of that of heat: write W/mK",
        "MS/m": "Electrical conductivity stands in the place of that of heat: write W/mK",
    },
)  # fmt: skip
FRACTION = Kind("fraction", "a share", {"%": (1, 100), "percent": (1, 100)}, "%", "95 %")
MASS = Kind(
    "mass",
    "a mass",
    {"kg": (1, 1), "g": (1, 1000), "lb": (45359237, 10**8)},
    "kg, g or lb",
    "2.5 kg",
    {"lbf": "The unit lbf is a force: write lb", "N": "The unit N is a force: write kg"},
)
SPEED = Kind(
    "speed",
    "a speed of rotation",
    {
        "rpm": (1, 1), "1/min": (1, 1), "/min": (1, 1), "rev/min": (1, 1), "r/min": (1, 1), "min-1": (1, 1),
        "min^-1": (1, 1), "1/s": (60, 1), "rev/s": (60, 1),
    },
    "rpm or 1/min",
    "1400 rpm",
    {
        "m/min": "A cutting speed in m/min does not fit here: write the spindle speed in rpm",
        "ft/min": "A cutting speed in ft/min does not fit here: write the spindle speed in rpm",
        "U/min": "Write rpm or 1/min",
    },
)  # fmt: skip

_GALLON = "A gallon is 3.8 l in one country and 4.5 l in another: write l"
VOLUME = Kind(
    "volume",
    "a volume",
    {
        "m3": (1, 1), "m\u00b3": (1, 1), "m^3": (1, 1), "cbm": (1, 1),
        "l": (1, 1000), "L": (1, 1000), "litre": (1, 1000), "litres": (1, 1000), "liter": (1, 1000), "liters": (1, 1000),
        "ml": (1, 1_000_000), "ft3": _CUBIC_FOOT, "ft\u00b3": _CUBIC_FOOT, "cu*ft": _CUBIC_FOOT,
    },
    "m3, l or ft3",
    "40 m3",
    {
        "m2": "The unit m2 is an area: write the volume in m3",
        "m\u00b2": "The unit m2 is an area: write the volume in m3",
        "gal": _GALLON, "gallon": _GALLON, "gallons": _GALLON,
    },
)  # fmt: skip

# In the order in which a unit of unknown kind is looked up: the " is seconds of arc before it is inches.
KINDS = (
    ANGLE, LENGTH, TEMPERATURE, TORQUE, FORCE, PRESSURE, DURATION, FRACTION, MASS, SPEED, EXPANSION, CONDUCTIVITY, VOLUME,
)  # fmt: skip

_JOIN = re.compile(r"\s*\*\s*|\s+")


def spelling(word: str) -> str:
    """The one spelling under which a unit stands in the tables: `N m`, `N * m` and `N*m` are `N*m`.

    >>> spelling("N m"), spelling("lbf * ft"), spelling("mm")
    ('N*m', 'lbf*ft', 'mm')
    """
    return _JOIN.sub("*", word.strip())


def kind_of(word: str) -> Kind | None:
    """The kind that a unit belongs to, or None. Compound angles count by their degrees."""
    unit = spelling(word)
    for kind in KINDS:
        if unit in kind.units:
            return kind
    compound = re.match(r"(deg|\u00b0|'|arcmin)\s*[0-9]", word.strip())
    return ANGLE if compound else None
