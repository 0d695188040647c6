"""Values of the job file in shop notation, as pydantic types, and what all records share. Inside: mm, rad, degC, N, N mm, s."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Annotated, Any, Literal

from pydantic import BaseModel, BeforeValidator, ConfigDict, GetCoreSchemaHandler, ValidationError, ValidationInfo
from pydantic_core import InitErrorDetails, PydanticCustomError, core_schema

from setupcheck import notation
from setupcheck.notation import Amount, NotationError

Given = str | int | float
INCH = 25.4  # mm, exactly (international yard and pound agreement, 1959)


class Shop(BaseModel):
    """A record of the job file: frozen, and no unknown keys."""

    model_config = ConfigDict(extra="forbid", frozen=True, coerce_numbers_to_str=True, defer_build=True)


def units_of(info: ValidationInfo) -> Literal["mm", "in"]:
    """Units of the file; mm where it states none that is known, which is an error of its own."""
    return "in" if (info.context or {}).get("units") == "in" else "mm"


def size_shown(mm: float, units: str) -> str:
    """A size for a message, in the units of the file: `96 mm`, `3.75 in`."""
    value, unit = (mm / INCH, "in") if units == "in" else (mm, "mm")
    return f"{notation.plain(round(value, 6))} {unit}"


def in_file_units(mm: float, info: ValidationInfo) -> str:
    """A size for a message of a model, in the units of the file."""
    return size_shown(mm, units_of(info))


def as_listed(given: object) -> str:
    """A list of plain values as it stands in the file, anything else quoted."""
    if isinstance(given, list) and all(isinstance(g, str | int | float) for g in given):
        return f"[{', '.join(notation.quoted(g).strip(chr(39)) for g in given[:4])}{', …' if len(given) > 4 else ''}]"
    return notation.quoted(given)


def scalar(given: object) -> Given:
    """The text or number itself; a list, a map or true/false is refused in words."""
    if isinstance(given, bool) or not isinstance(given, str | int | float):
        kind = {bool: "true or false", list: "a list", dict: "a map", type(None): "empty"}.get(type(given), "no value")
        raise ValueError(f"one value belongs here, not {kind}. Write it like 12.5 mm, 10 um or 20 deg")
    return given


class Read:
    """A value that a function of ours reads from the file and hands over finished.

    pydantic gets the whole schema ready: working it out anew for each of 150 fields took a fiftieth of the command.
    read   of what stands in the file, with the file's units in its `ValidationInfo`
    words  all that may stand there, where that is a short list
    """

    def __init__(self, read: Callable[[Any, ValidationInfo], object], words: tuple[str, ...] = ()) -> None:
        self.schema = core_schema.with_info_plain_validator_function(read)
        self.words = words

    def __get_pydantic_core_schema__(self, source: object, handler: GetCoreSchemaHandler) -> core_schema.CoreSchema:
        return self.schema


def _plain(read: Callable[[Given], object]) -> Read:
    """Of one value, whatever the units of the file."""
    return Read(lambda given, info: read(scalar(given)))


def _size(given: object, info: ValidationInfo) -> float:
    return notation.length(scalar(given), units=units_of(info))


def _positive_size(given: object, info: ValidationInfo) -> float:
    value = notation.length(scalar(given), units=units_of(info))
    if value <= 0.0:
        raise ValueError(f"{as_listed(given)} is not a size. Write a length above zero")
    return value


def _hollow_size(given: object, info: ValidationInfo) -> float:
    value = notation.length(scalar(given), units=units_of(info))
    if value < 0.0:
        raise ValueError(f"{as_listed(given)} is not a hole. Write its size, or 0 for a solid shaft")
    return value


def _bound(given: object, info: ValidationInfo) -> float:
    return notation.bound(scalar(given), units=units_of(info), unit_needed=True)


def _division(given: object, info: ValidationInfo) -> float:
    value = _bound(given, info)
    if value == 0.0:
        raise ValueError("an indicator has divisions. Write one of them, as in indicator: 10 um")
    return value


def _signed_error(given: object, info: ValidationInfo) -> float:
    return notation.length(scalar(given), units=units_of(info), unit_needed=True)


def _range(given: object, info: ValidationInfo) -> tuple[float, float]:
    if not isinstance(given, list | str):
        raise ValueError(f"{as_listed(given)} is not a range. Write the smallest and the largest: [2 um, 14 um]")
    low, high = notation.length_range(given, units=units_of(info), unit_needed=True)
    if low < 0.0:
        raise ValueError(
            f"{as_listed(given)} begins below zero, and a negative clearance is an interference. "
            "Write 0 um or more, or join the parts by press or shrink"
        )
    return low, high


def _amount(given: object, info: ValidationInfo) -> Amount:
    return notation.amount(scalar(given), units=units_of(info))


def _amounts(given: object, info: ValidationInfo) -> tuple[Amount, Amount]:
    if not isinstance(given, list) or len(given) != 2:
        raise ValueError(f"{as_listed(given)} is not a pair of limits. Write [20 um, 80 um]")
    low, high = (_amount(g, info) for g in given)
    if low.dimension != high.dimension:
        raise ValueError(f"{as_listed(given)} has limits in two kinds of unit. Write both in one, as in [20 um, 80 um]")
    if low.value > high.value:
        raise ValueError(f"{as_listed(given)} runs from high to low. Write {as_listed(given[::-1])}")
    return low, high


def _service(given: object, info: ValidationInfo) -> tuple[float, float]:
    if not isinstance(given, list) or len(given) != 2:
        raise ValueError(f"{as_listed(given)} is not a span of temperatures. Write [5 degC, 45 degC]")
    low, high = (notation.temperature(scalar(g)) for g in given)
    if low > high:
        raise ValueError(f"{as_listed(given)} runs from warm to cold. Write the colder one first")
    return low, high


def _whole(given: object) -> object:
    if isinstance(given, bool):  # pydantic would take true for 1
        raise PydanticCustomError("int_type", "a whole number")
    return given


def _angle_bound(given: Given) -> float:
    try:
        return notation.angle_bound(given)
    except NotationError as why:
        if why.hint.startswith("Write it as in"):  # errors of angles are small: an example in degrees would mislead
            raise NotationError(why.problem, 'Write it as in ±5"') from None
        if why.hint.startswith("Write the unit: "):
            number = str(given).strip().lstrip("+\u00b1 ")
            raise NotationError(why.problem, f"Write {number}\" for seconds of arc, {number}' for minutes") from None
        raise


def _tilt(given: Given) -> float:
    tilt = notation.angle(given)
    if tilt < 0.0:
        size = str(given).strip().lstrip("-\u2212\u2013 ")
        raise ValueError(f"a tilt has no sign. Write {size}, and under leans where the nose goes")
    return tilt


_CARRIED = {"torque": (notation.torque, "N m"), "axial_force": (notation.force, "N")}
_LEADING = re.compile(r"[0-9]+(?:\.[0-9]+)?")


def _carried(given: object) -> object:
    """Each load of a joint in its own kind of unit, every wrong one told at its key, with the figure that was written."""
    wrong: list[InitErrorDetails] = []
    for key, (read, unit) in _CARRIED.items():
        load = given.get(key) if isinstance(given, dict) else None
        if isinstance(load, bool) or not isinstance(load, str | int | float):
            continue  # missing, or refused as no amount at all
        try:
            read(load)
        except NotationError as why:
            figure = _LEADING.match(str(load).strip())
            hint = f"Write {figure[0]} {unit}" if figure else why.hint
            told = PydanticCustomError("value_error", "{error}", {"error": f"{why.problem}. {hint}"})
            wrong.append(InitErrorDetails(type=told, loc=(key,), input=load))
    if wrong:
        raise ValidationError.from_exception_data("must_carry", wrong)
    return given


def _coolant(given: object) -> Amount:
    told = scalar(given)
    try:
        found = notation.amount(told)
    except NotationError as why:
        raise NotationError(
            why.problem, "Write litres of nitrogen or kilograms of dry ice, as in 5 l or 2 kg"
        ) from None
    if found.dimension not in ("volume", "mass"):
        raise NotationError(
            f"{notation.quoted(given)} is no amount of a coolant",
            "Write litres of nitrogen or kilograms of dry ice, as in 5 l or 2 kg",
        )
    return found


_MATERIAL_NUMBER = re.compile(r"[0-9]\.[0-9]{4}")
"""`0.6025`, `1.0503`: materials by number (EN 10027-2 and the older German numbers), which read as lengths too."""


def _housing(given: object, info: ValidationInfo) -> object:
    advice = "Write the housing's material, as in EN-GJL-250"
    if isinstance(given, dict | list | bool):
        raise ValueError(f"{notation.quoted(given)} is no material. {advice}")
    if given is None or _MATERIAL_NUMBER.fullmatch(str(given)):
        return given
    try:
        notation.length(scalar(given), units=units_of(info))
    except NotationError:
        return given
    raise ValueError(f"{notation.quoted(given)} is a length, not a material. {advice}")


Length = Annotated[float, Read(_size)]
"""A size or position [mm]; a bare number takes the file's units."""
Size = Annotated[float, Read(_positive_size)]
"""A length above zero [mm]."""
Hollow = Annotated[float, Read(_hollow_size)]
"""A hole through the middle [mm]; 0 says that there is none."""
Bound = Annotated[float, Read(_bound)]
"""A non-negative error bound [mm]; the unit must be written."""
Division = Annotated[float, Read(_division)]
"""One division of an indicator [mm], above zero; the unit must be written."""
Reading = Annotated[float, Read(_signed_error)]
"""A signed measured error [mm]; the unit must be written."""
Play = Annotated[tuple[float, float], Read(_range)]
"""Smallest and largest diametral clearance [mm]."""
Angle = Annotated[float, _plain(notation.angle)]
"""An angle [rad]; the unit must be written."""
AngleBound = Annotated[float, _plain(_angle_bound)]
"""A non-negative angle bound [rad]."""
Tilt = Annotated[float, _plain(_tilt)]
"""A tilt of a head [rad], without sign: `leans` says which way."""
Version = Annotated[Literal[1], BeforeValidator(_whole)]
"""Of the job file."""
Whole = Annotated[int, BeforeValidator(_whole)]
"""A whole number; true and false are none."""
Housing = Annotated[str, BeforeValidator(_housing)]
"""The name of a material."""
Temperature = Annotated[float, _plain(notation.temperature)]
TemperatureDifference = Annotated[float, _plain(lambda given: notation.temperature_difference(given, at_least=0.0))]
"""An error of a temperature or a distance between two [K], never below zero."""
Pressure = Annotated[float, _plain(notation.pressure)]
"""A stress or modulus [MPa]; the unit must be written."""
Expansion = Annotated[float, _plain(notation.expansion)]
"""A thermal expansion [1/K]; the unit must be written."""
Conductivity = Annotated[float, _plain(notation.conductivity)]
"""A heat conductivity [W/mK]; the unit must be written."""
Roughness = Annotated[notation.Roughness, _plain(notation.roughness)]
"""A roughness with its figure, Ra or Rz."""
Duration = Annotated[float, _plain(notation.duration)]
Volume = Annotated[float, _plain(notation.volume)]
"""A volume [m3]; the unit must be written."""
Coolant = Annotated[Amount, _plain(_coolant)]
"""What boils off: litres of liquid nitrogen [m3] or a mass of dry ice [kg]."""
Force = Annotated[float, _plain(notation.force)]
"""A force [N]; the unit must be written."""
Mass = Annotated[float, _plain(notation.mass)]
"""A mass [kg]; the unit must be written."""
Speed = Annotated[float, _plain(notation.speed)]
"""[rev/min]"""
Fraction = Annotated[float, BeforeValidator(lambda given: notation.fraction(scalar(given)))]
"""A share; its fields have bounds of their own, so pydantic looks at the number again."""
Limit = Annotated[Amount, Read(_amount)]
Carried = Annotated[dict[Literal["torque", "axial_force"], Limit], BeforeValidator(_carried)]
"""What a joint has to carry: torque [N mm] and force along its axis [N]."""
Limits = Annotated[tuple[Amount, Amount], Read(_amounts)]
Service = Annotated[tuple[float, float], Read(_service)]
"""Coldest and warmest temperature in use [degC]."""
