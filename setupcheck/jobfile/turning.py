"""What turns in a setup, for what it throws and how fast its chuck may go. Base units mm, kg, rev/min."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Self

from pydantic import model_validator

from setupcheck.jobfile.types import Mass, Shop, Size, Speed


class Turning(Shop):
    """What turns with the spindle: `turning: {speed: 600 rpm, chuck_speed: 2500 rpm}`.

    speed        of the spindle that carries the work [rev/min];  chuck_speed  the most that is marked on its chuck [rev/min]
    off_centre   mass that stands off the axis [kg];  off_by  how far from the axis its middle is [mm]
    bar_behind   how far a bar sticks out behind the spindle [mm]
    """

    speed: Speed | None = None
    chuck_speed: Speed | None = None
    off_centre: Mass | None = None
    off_by: Size | None = None
    bar_behind: Size | None = None

    @model_validator(mode="after")
    def a_mass_has_its_distance(self) -> Self:
        if (self.off_centre is None) != (self.off_by is None):
            raise ValueError(
                "off_centre and off_by belong together. Write both, as in off_centre: 0.5 kg, off_by: 10 mm"
            )
        if self.off_centre == 0.0 or 0.0 in (self.speed, self.chuck_speed):
            raise ValueError("nothing turns and nothing weighs 0. Drop that key, or write its value")
        return self
