"""What a joint sees in service: its coldest and its warmest state, hub and shaft apart where they differ. degC."""

# Annotations are evaluated as they stand: pydantic would have to compile each of them from its text.
from typing import Annotated

from pydantic import ValidationInfo

from setupcheck import notation
from setupcheck.jobfile.types import Read, as_listed
from setupcheck.record import record

_WRITE = "Write [5 degC, 45 degC], or {hub: 75 degC, shaft: 60 degC} in place of one of them"


@record
class Warmth:
    """Temperatures of hub and shaft at one time [degC]."""

    hub: float
    shaft: float

    def told(self) -> str:
        """`5 degC`, or hub and shaft apart."""
        same = self.hub == self.shaft
        return f"{self.hub:g} degC" if same else f"hub {self.hub:g}, shaft {self.shaft:g} degC"


def _state(given: object) -> Warmth:
    if isinstance(given, dict):
        if set(given) != {"hub", "shaft"}:
            raise ValueError(f"a state of service has the temperatures of hub and shaft, both. {_WRITE}")
        return Warmth(*(_temperature(given[key]) for key in ("hub", "shaft")))
    found = _temperature(given)
    return Warmth(found, found)


def _temperature(given: object) -> float:
    if isinstance(given, bool) or not isinstance(given, str | int | float):
        raise ValueError(f"{notation.quoted(given)} is no temperature. {_WRITE}")
    return notation.temperature(given)


def _states(given: object, info: ValidationInfo) -> tuple[Warmth, Warmth]:
    if not isinstance(given, list) or len(given) != 2:
        raise ValueError(f"{as_listed(given)} is not a span of temperatures. {_WRITE}")
    cold, warm = (_state(g) for g in given)
    if cold.hub + cold.shaft > warm.hub + warm.shaft:
        raise ValueError(f"{as_listed(given)} runs from warm to cold. Write the colder one first")
    return cold, warm


JointService = Annotated[tuple[Warmth, Warmth], Read(_states)]
"""Coldest and warmest state of a joint in use."""
