"""How an insert is ground, and what the grinder and its stop are good for. Sizes mm, angles rad."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Annotated, Literal

from pydantic import ValidationInfo, model_validator

from setupcheck import notation
from setupcheck.jobfile.types import AngleBound, Read, Shop, Size, as_listed, scalar, units_of

EXAMPLE = "{wheel_radius: 5 mm, step: 1 um, form_error: 5 um}"
"""What an entry looks like, for messages. Invented figures."""


def _small(given: object, info: ValidationInfo) -> float:
    value = notation.bound(scalar(given), units=units_of(info), unit_needed=True)
    if value == 0.0:
        raise ValueError(f"{as_listed(given)} cannot be ground. Write what the grinder can do, as in 1 um")
    return value


Small = Annotated[float, Read(_small)]
"""A small length above zero [mm]; the unit must be written."""


LARGEST_MAGNIFICATION = 500.0  # projectors end at 100, microscopes of the workshop below 500; our screening choice


def _magnification(given: object, info: ValidationInfo) -> float:
    text = str(scalar(given)).strip().removesuffix(":1").removesuffix("x")
    value = notation.number(text)
    if not 0.0 < value <= LARGEST_MAGNIFICATION:
        raise ValueError(
            f"{notation.quoted(given)} is no magnification. Write how many times larger the insert is shown, as in 20"
        )
    return value


Magnification = Annotated[float, Read(_magnification)]
"""How many times larger something is shown, above zero; below 1 it is shown smaller."""


class Grinding(Shop):
    """How an insert is ground point by point with the rounded edge of a wheel.

    wheel_radius  of the wheel's edge [mm];  step  of the grinder's readings [mm]
    form_error    that the flank may have, square to it [mm]
    magnification  at which the insert is laid over its drawing, by projector or as a drawing
    stop_error    of the stop that the shank lies against, out of square either way [rad]
    way           how the second flank is come by
    shank_side    of the shank where the wheel is touched off, from its middle line [mm]
    touched_at    height above the tip where it is touched off there [mm]
    """

    wheel_radius: Size | None = None
    step: Small | None = None
    form_error: Small | None = None
    magnification: Magnification | None = None
    stop_error: AngleBound | None = None
    way: Literal["swung", "turned-over"] | None = None
    shank_side: Size | None = None
    touched_at: Size | None = None

    @model_validator(mode="before")
    @classmethod
    def it_says_more_than_one_thing(cls, given: object) -> object:
        if not isinstance(given, dict):
            said = "nothing is written here" if given is None else f"{as_listed(given)} does not say how it is ground"
            raise ValueError(f"{said}. Write it as in {EXAMPLE}")
        return given
