"""How values in shop notation are spelled, as parts of a JSON Schema with examples. Invented figures. No review loads this.

A schema cannot read shop notation: it asks for a text with a digit in it, or for a plain number where one has a meaning, and
leaves the rest to the review.
"""

from __future__ import annotations

from typing import Annotated, Any, get_args, get_origin

from pydantic import BaseModel

from setupcheck.jobfile import (
    asked,
    backlash_read,
    dividing,
    grinding,
    marks,
    models,
    service,
    setups,
    touched,
    types,
    worm,
)

Schema = dict[str, Any]


def _text(title: str, *examples: str) -> Schema:
    """A value that needs its unit, so that no plain number will do."""
    return {"title": title, "type": "string", "pattern": "[0-9]", "examples": [*examples]}


def _number(title: str, *examples: str | float) -> Schema:
    """A value that may also be a plain number."""
    return {"title": title, "type": ["string", "number"], "pattern": "[0-9]", "examples": [*examples]}


def _pair(title: str, end: Schema, *examples: list[str]) -> Schema:
    bare = {key: value for key, value in end.items() if key not in ("title", "examples")}
    return {"title": title, "type": "array", "items": bare, "minItems": 2, "maxItems": 2, "examples": [*examples]}


_TEMPERATURE = _text("a temperature", "20 degC", "68 degF")
_SIZE = _number("a size above zero; a plain number has the file's units", "12 mm", 12.5, "0.5 in")
_BOUND = _text("how far off it may be, with its unit", "10 um", "0.01 mm", "0.4 thou")
_LIMIT = _number("a limit in the unit of its figure", "20 um", '15"', "40 N m", "95 %")
_SMALL = _text("a small length above zero, with its unit", "1 um", "0.005 mm")
_DIMENSION = _number("a size with its limits", "32 H6", "32.041 ±0.003", 32, "40 mm")
_BOTH: Schema = {
    "type": "object",
    "properties": {key: _TEMPERATURE | {"description": f"of the {key} [degC]"} for key in ("hub", "shaft")},
    "required": ["hub", "shaft"],
    "additionalProperties": False,
}

_TYPES: tuple[tuple[object, Schema], ...] = (
    (types.Length, _number("a size or position; a plain number has the file's units", "12 mm", -25, "0.5 in")),
    (types.Size, _SIZE),
    (types.Hollow, _number("a hole, 0 where it is solid; a plain number has the file's units", "12 mm", 12.5, 0)),
    (types.Bound, _BOUND),
    (types.Division, _text("one division of an indicator", "10 um", "1 um")),
    (types.Reading, _text("a reading with its sign and unit", "6 um", "-0.004 mm")),
    (
        types.Play,
        {
            "title": "smallest and largest play",
            "anyOf": [_pair("from and to", _BOUND), {"type": "string", "pattern": "[0-9]"}],
            "examples": [["2 um", "14 um"]],
        },
    ),
    (types.Angle, _text("an angle with its unit", "20 deg", "3deg 34' 35\"", "3.9737 gon")),
    (types.AngleBound, _text("how far off it may be, either way", '±20"', "1'")),
    (types.Tilt, _text("an angle without a sign", "3deg 34' 35\"", "4 deg")),
    (types.Housing, _number("the name of a material", "EN-GJL-250", "EN AC-42000") | {"pattern": None}),
    (types.Temperature, _TEMPERATURE),
    (types.TemperatureDifference, _text("an error of a temperature", "3 K", "2 degC")),
    (types.Pressure, _text("a stress or modulus", "210 GPa", "355 MPa")),
    (types.Expansion, _text("a thermal expansion", "11.5 um/m/K")),
    (types.Conductivity, _text("a heat conductivity", "45 W/m/K")),
    (types.Roughness, _text("a roughness with its figure", "Rz 6.3 um", "Ra 0.8 um")),
    (types.Duration, _text("a time", "5 s", "2 min")),
    (types.Volume, _text("a volume", "40 m3")),
    (types.Coolant, _text("litres of nitrogen or kilograms of dry ice", "5 l", "2 kg")),
    (types.Force, _text("a force", "2 kN", "500 N")),
    (types.Mass, _text("a mass", "0.5 kg", "300 g")),
    (types.Speed, _text("a speed", "300 rpm")),
    (types.Fraction, _number("a share, as a percentage or below 1", "95 %", 0.95)),
    (types.Limit, _LIMIT),
    (types.Limits, _pair("low and high limit", _LIMIT, ["20 um", "80 um"])),
    (types.Service, _pair("coldest and warmest", _TEMPERATURE, ["5 degC", "45 degC"])),
    (
        types.Carried,
        {
            "title": "what a joint has to carry",
            "type": "object",
            "properties": {
                "torque": _text("a torque", "40 N m", "0 N m") | {"description": "about the axis"},
                "axial_force": _text("a force", "2 kN") | {"description": "along the axis"},
            },
            "additionalProperties": False,
        },
    ),
    (
        service.JointService,
        {
            "title": "coldest and warmest; hub and shaft apart where they differ",
            "type": "array",
            "items": {"anyOf": [_TEMPERATURE, _BOTH]},
            "minItems": 2,
            "maxItems": 2,
            "examples": [["5 degC", "45 degC"], ["5 degC", {"hub": "75 degC", "shaft": "60 degC"}]],
        },
    ),
    (dividing.Step, _text("an angle, with x-y a length", '1"', "5 um")),
    (dividing.Target, _text("a distance with its unit", "12 m")),
    (grinding.Small, _SMALL),
    (grinding.Magnification, _number("how many times larger it is shown", 20, "50:1")),
    (backlash_read.Played, _text("travel of a dial between both flanks, with its unit", "62 um", "0.058 mm")),
    (worm.DiametralPitch, _number("a plain number", 16)),
    (worm.Quotient, _number("a plain number", 12)),
    (worm.HalfTurn, _text("an angle from 0 to 180 deg", "75 deg")),
    (worm.Budget, _text("an error above zero, with its unit", "10 um")),
    (marks.Spotted, _number("from the middle of the face, or a word", "3.3 mm", *marks.WORDS) | {"pattern": None}),
    (
        asked.Of,
        {"title": "a surface, or a joint's operation", "type": ["string", "number"], "examples": ["wheel.bore", 70]},
    ),
)

PLAIN: dict[type[BaseModel], Schema] = {
    models.Dimension: _DIMENSION,
    worm.Thickness: _DIMENSION,
    models.Deviation: _BOUND,
    setups.Through: {"title": "a device", "type": "string", "examples": ["centres"]},
    touched.Touched: {"title": "a surface", "type": "string", "examples": ["throat"]},
}
"""Records that a single value may stand for, wherever they stand."""

FILLED_IN: dict[type[BaseModel], tuple[str, ...]] = {setups.Centre: ("by",)}
"""Keys that a record needs and that may be left out, because the hold fills them in: the second plane's device."""


def _marker(kind: object) -> object:
    """What pydantic keeps of an `Annotated` type in the fields that have it."""
    assert get_origin(kind) is Annotated
    return get_args(kind)[1]


SPELLED: dict[int, Schema] = {
    id(_marker(kind)): {key: value for key, value in schema.items() if value is not None} for kind, schema in _TYPES
}
"""By the identity of that marker: a part of the schema."""
