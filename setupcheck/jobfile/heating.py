"""The heat and cold of a shrink fit, as the job states them. Temperatures degC, their errors K, s, m3, sizes mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Literal, Self

from pydantic import Field, model_validator

from setupcheck.jobfile.types import Coolant, Duration, Length, Shop, Size, Temperature, TemperatureDifference, Volume

COLDEST = {"dry-ice": -78.5, "liquid-nitrogen": -196.0}
"""degC that a means of cooling reaches. Source: sublimation and boiling point, published (pages opened)."""
_ROUNDED = 1.5
"""Kelvin by which people round those two, as in -80 degC. Source: our screening choice."""
_COUNTED_IN = {"liquid-nitrogen": ("volume", "litres", "5 l"), "dry-ice": ("mass", "kilograms", "2 kg")}
"""What boils off, how it is counted, and an example."""


class Near(Shop):
    """What stays in place on the shaft while the hot hub goes on: `{what: seals, stands: 80 degC, away: 30}`.

    what  it is called;  stands  highest temperature of it [degC];  away  how far from the seat it begins [mm]
    """

    what: str = Field(min_length=1)
    stands: Temperature | None = None
    away: Length | None = Field(default=None, ge=0.0)


class Heat(Shop):
    """How hot the hub is made and how cold the shaft, and what is known of both.

    hub, shaft    temperatures as planned;  oven_error, cold_error  how far off each may be, ±
    by, cold_by   what heats the hub, what chills the shaft;  read_by  what reads the hub's own heat
    carry         from the source of heat, or of cold, to the joint
    gauge         size of the gauge that is tried in the hot bore
    flash_point   of the oil in the bath
    room_volume   of the room where something boils off;  coolant  how much of it, all told
    near          what stays in place beside the hub and has to stand its heat
    """

    hub: Temperature | None = None
    shaft: Temperature | None = None
    by: Literal["oven", "hot-plate", "induction", "oil-bath", "flame"] | None = None
    oven_error: TemperatureDifference | None = None
    read_by: Literal["contact-probe", "crayon", "infrared"] | None = None
    carry: Duration | None = None
    cold_by: Literal["freezer", "dry-ice", "liquid-nitrogen"] | None = None
    cold_error: TemperatureDifference | None = None
    gauge: Size | None = None
    flash_point: Temperature | None = None
    room_volume: Volume | None = None
    coolant: Coolant | None = None
    near: Near | None = None

    @model_validator(mode="after")
    def nothing_is_colder_than_what_chills_it(self) -> Self:
        reaches = COLDEST.get(self.cold_by or "")
        if reaches is not None and self.shaft is not None and self.shaft < reaches - _ROUNDED:
            raise ValueError(
                f"{self.cold_by} makes nothing colder than {reaches:g} degC. Write shaft: {reaches:g} degC"
            )
        return self

    @model_validator(mode="after")
    def what_boils_off_is_counted_as_it_is_bought(self) -> Self:
        if self.coolant is None:
            return self
        if self.cold_by not in _COUNTED_IN:
            raise ValueError(
                "coolant is what boils off, and nothing here does. Drop it, or write cold_by: liquid-nitrogen or dry-ice"
            )
        kind, units, example = _COUNTED_IN[self.cold_by]
        if self.coolant.dimension != kind:
            raise ValueError(f"{self.cold_by} is counted in {units}. Write coolant: {example}")
        if self.coolant.value == 0.0:
            raise ValueError(f"a coolant of nothing chills nothing. Write all that may boil off, as in {example}")
        return self

    @model_validator(mode="after")
    def a_flash_point_is_that_of_an_oil(self) -> Self:
        if self.flash_point is not None and self.by is not None and self.by != "oil-bath":
            raise ValueError(f"an oil has a flash_point, and {self.by} has none. Drop it, or write by: oil-bath")
        return self

    @model_validator(mode="after")
    def a_room_has_a_volume(self) -> Self:
        if self.room_volume == 0.0:
            raise ValueError("a room of nothing holds nobody. Write its volume, as in room_volume: 40 m3")
        return self

    def chills(self, room: float) -> bool:
        """Whether the shaft is made colder than the room [degC]."""
        return self.cold_by is not None or (self.shaft is not None and self.shaft < room)

    def by_cold_alone(self, room: float) -> bool:
        """Whether the shaft is chilled and nothing heats the hub, which then has the room's temperature [degC]."""
        unheated = self.by is None and self.read_by is None and self.oven_error is None
        return unheated and self.chills(room) and (self.hub is None or self.hub <= room)
