"""Profile of an insert as measured after grinding: widths over the height above its tip. Sizes mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from collections.abc import Iterator
from itertools import pairwise

from pydantic import ValidationError, ValidationInfo, model_validator
from pydantic_core import InitErrorDetails, PydanticCustomError

from setupcheck.jobfile.types import Bound, Length, Shop, Size, as_listed, in_file_units

EXAMPLE = "{heights: [0, 0.5, 1, …], widths: [1.205, 1.497, 1.802, …], uncertainty: 2 um}"
"""What an entry looks like, for messages. Invented figures."""

FEWEST = 5
"""Points that a profile needs at least, as in worm.plunge_gap."""

Wrong = tuple[tuple[str | int, ...], str]
"""Where under the entry something is wrong, and what."""


class InsertProfile(Shop):
    """Measured points of an insert [mm], from its tip upwards.

    heights      above the tip, rising from 0
    widths       full width at each, both flanks alike; or
    right, left  from the insert's middle line to either flank at each; right cuts the wall of the gap that is on the right
                 seen from the wheel's +z face with the gap up
    uncertainty  of one point, square to the flank; None: not stated, so nothing is told from the points
    """

    heights: tuple[Length, ...]
    widths: tuple[Size, ...] | None = None
    right: tuple[Size, ...] | None = None
    left: tuple[Size, ...] | None = None
    uncertainty: Bound | None = None

    @model_validator(mode="before")
    @classmethod
    def it_is_lists(cls, given: object) -> object:
        if not isinstance(given, dict):
            said = "nothing is written here" if given is None else f"{as_listed(given)} is no measured profile"
            raise ValueError(f"{said}. Write it as in {EXAMPLE}")
        wrong: list[Wrong] = [
            ((key,), f"{as_listed(given[key])} is no list of sizes. Write every point, as in {EXAMPLE}")
            for key in ("heights", "widths", "right", "left")
            if key in given and not isinstance(given[key], list)
        ]
        _refuse(wrong, given)
        return given

    @model_validator(mode="after")
    def it_is_a_profile(self, info: ValidationInfo) -> "InsertProfile":
        _refuse([*self._unfinished()] or [*self._no_profile(info)], None)
        return self

    @property
    def half_widths(self) -> tuple[tuple[float, ...], tuple[float, ...]]:
        """From the middle line to the right and to the left flank [mm]."""
        if self.widths is not None:
            half = tuple(0.5 * w for w in self.widths)
            return half, half
        assert self.right is not None and self.left is not None
        return self.right, self.left

    def _lists(self) -> dict[str, tuple[float, ...]]:
        told = {"widths": self.widths, "right": self.right, "left": self.left}
        return {key: values for key, values in told.items() if values is not None}

    def _unfinished(self) -> Iterator[Wrong]:
        """Lists that are missing, told twice, too short or of unlike length."""
        given = self._lists()
        if "widths" in given and len(given) > 1:
            yield ("widths",), "the widths are told twice. Write widths for flanks alike, or right and left, not both"
        elif not given:
            yield (), f"no width of the insert is written. Write widths beside heights, as in {EXAMPLE}"
        elif given.keys() in ({"right"}, {"left"}):
            (there,) = given
            other = "left" if there == "right" else "right"
            yield (), f"only the {there} flank is told. Write {other} too, or the full widths for flanks alike"
        count = len(self.heights)
        if count < FEWEST:
            yield ("heights",), f"{count} points are no profile. Measure {FEWEST} heights or more, close together"
        for key, values in given.items():
            if len(values) != count:
                said = f"{len(values)} entries of {key} stand beside {count} heights"
                yield (key,), f"{said}. Write one for each height, in the same order"

    def _no_profile(self, info: ValidationInfo) -> Iterator[Wrong]:
        """Heights that do not rise from the tip, widths that do not grow."""
        heights = self.heights
        if heights[0] != 0.0:
            first = in_file_units(heights[0], info)
            yield ("heights", 0), f"the points begin at {first}. Begin at the tip: height 0, and its width there"
        for i, (low, high) in enumerate(pairwise(heights), 1):
            if not low < high:
                said = f"after a height of {in_file_units(low, info)} comes {in_file_units(high, info)}"
                yield ("heights", i), f"{said}. Write the points from the tip upwards, each height once"
        for key, values in self._lists().items():
            for i, (low, high) in enumerate(pairwise(values), 1):
                if not low < high:
                    said = f"after {in_file_units(low, info)} comes {in_file_units(high, info)}, at a height of "
                    said += in_file_units(heights[i], info)
                    yield (
                        (key, i),
                        f"{said}, and an insert grows wider all the way up: a loop, or a slip of the pen. "
                        "Measure that point again, or leave it out",
                    )


def _refuse(wrong: list[Wrong], given: object) -> None:
    """Every mistake at its own place. Raises: ValidationError where there is one."""
    if wrong:
        told = [
            InitErrorDetails(
                type=PydanticCustomError("value_error", "{error}", {"error": message}), loc=where, input=given
            )
            for where, message in wrong
        ]
        raise ValidationError.from_exception_data("profile", told)
