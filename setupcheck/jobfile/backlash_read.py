"""Backlash read on the finished wheel, place by place. Sizes mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Annotated, Literal

from pydantic import Field, ValidationInfo, model_validator

from setupcheck import notation
from setupcheck.jobfile.prove_out import gap_number
from setupcheck.jobfile.types import Bound, Read, Shop, scalar, units_of

WRITE_IT = "Write it as in {readings: {gap 1: 62 um, gap 10: 58 um, …}, uncertainty: 5 um, end_float: taken-out}"


def _played(given: object, info: ValidationInfo) -> float:
    """What a dial travelled between both flanks [mm], never below zero."""
    said = scalar(given)
    try:
        value = notation.length(said, units=units_of(info), unit_needed=True)
    except notation.NotationError:
        if _is_angle(said):
            raise ValueError(
                f"{notation.quoted(said)} is an angle, and backlash is read as a length. Write what a dial on the wheel "
                "travels, and along: at 54 mm for the radius it stands at"
            ) from None
        raise
    if value < 0.0:
        raise ValueError(
            f"{notation.quoted(said)} is below zero, and a dial travels one way. Write its whole travel, 0 um where it stands"
        )
    return value


def _is_angle(said: int | float | str) -> bool:
    try:
        notation.angle(said)
    except notation.NotationError:
        return False
    return True


Played = Annotated[float, Read(_played)]
"""Travel of a dial between both flanks [mm]; the unit must be written."""


class BacklashRead(Shop):
    """Backlash as read: `{readings: {gap 1: 62 um, gap 10: 58 um, …}, uncertainty: 5 um, end_float: taken-out}`.

    along        what the dial read: circular, along the reference circle; normal, square to the flank; or at and its radius
    readings     whole travel by number of the gap that stands at the worm, numbered as they were cut [mm]
    uncertainty  of one reading, expanded, k = 2, on the same scale as the readings [mm]
    end_float    of the worm: included in the readings, or taken-out (the worm pushed to one stop, or subtracted already)
    """

    along: str = "circular"
    readings: dict[str, Played] = Field(default_factory=dict)
    uncertainty: Bound | None = None
    end_float: Literal["included", "taken-out"] | None = None

    @model_validator(mode="before")
    @classmethod
    def places_are_named(cls, given: object) -> object:
        if not isinstance(given, dict):
            raise ValueError(f"backlash is read at places round the wheel. {WRITE_IT}")
        return given

    @property
    def by_gap(self) -> dict[int, float]:
        """Readings by number of the gap [mm]; the reader has seen to it that each names one."""
        return {number: value for name, value in self.readings.items() if (number := gap_number(name)) is not None}
