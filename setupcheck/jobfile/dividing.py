"""How the circle is divided: the way, and what each way costs. Keys stand flat, each belongs to some ways. Angles rad, mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from collections.abc import Mapping
from typing import Annotated, Literal, Self, get_args

from pydantic import Field, ValidationInfo, model_validator

from setupcheck import notation
from setupcheck.jobfile.types import Angle, AngleBound, Bound, Read, Shop, Size, Whole, scalar, units_of

Way = Literal[
    "hole-circle",
    "direct",
    "vernier",
    "readout",
    "theodolite",
    "polygon",
    "face-teeth",
    "sine-bar",
    "x-y",
    "rotary-table",
]

_ANGULAR = tuple(way for way in get_args(Way) if way != "x-y")
_PLACED = ("direct", "face-teeth")

WAYS_OF: Mapping[str, tuple[str, ...]] = {
    "circle": ("hole-circle",),
    "worm": ("hole-circle", "rotary-table", "vernier", "readout"),
    "wheel": ("hole-circle", "rotary-table", "direct", "vernier", "readout", "theodolite"),
    "setting": _ANGULAR,
    "step": ("vernier", "readout", "rotary-table", "theodolite", "x-y"),
    "positions": _PLACED,
    "positions_error": _PLACED,
    "sides": ("polygon",),
    "sides_error": ("polygon",),
    "polygon_tilt": ("polygon",),
    "sighting": ("polygon", "theodolite"),
    "centring": ("theodolite",),
    "target": ("theodolite",),
    "plumb": ("theodolite",),
    "elevation": ("theodolite",),
    "collimation": ("theodolite",),
    "trunnion": ("theodolite",),
    "faces": ("theodolite",),
    "sine_bar": ("sine-bar",),
    "blocks": ("sine-bar",),
    "quarters": ("sine-bar",),
    "x": ("x-y",),
    "y": ("x-y",),
}
"""Ways of dividing that a key belongs to; `clamp`, `drift` and `order` go with every one."""

NEEDS: Mapping[str, tuple[str, str]] = {
    "centring": (
        "target",
        "the parallax of an instrument off the axis goes down with the distance. Write it, as in target: 12 m",
    ),
    "plumb": (
        "elevation",
        "a tilted axis counts with the slope of the sight. Write it, elevation: 0 deg for a level one",
    ),
    "trunnion": (
        "elevation",
        "a tilted trunnion counts with the slope of the sight. Write it, elevation: 0 deg for a level one",
    ),
    "collimation": (
        "elevation",
        "collimation counts with the slope of the sight. Write it, elevation: 0 deg for a level one",
    ),
    "blocks": ("sine_bar", "an error of the blocks counts over the bar's length. Write it, as in sine_bar: 200 mm"),
}
"""What a key cannot be used without, and why."""


FARTHEST = 1_000_000.0
"""Distance of a target [mm]. Source: our screening choice."""
COARSEST = 1.0
"""Step of a readout of lengths [mm] beyond which it is a slip. Source: our screening choice."""


def _step(given: object, info: ValidationInfo) -> float:
    """Step of a readout: an angle [rad], for coordinates a length [mm]."""
    said = scalar(given)
    if info.data.get("by") == "x-y":
        step = notation.bound(said, units=units_of(info), unit_needed=True)
    else:
        step = notation.angle(said)
    if step <= 0.0:
        raise ValueError("a step is above zero. Leave it out where nothing is rounded")
    if info.data.get("by") == "x-y" and step > COARSEST:
        raise ValueError("no readout of coordinates steps by more than a millimetre. Write its step, as in 5 um")
    return step


def _target(given: object, info: ValidationInfo) -> float:
    """Distance of a target [mm], its unit written: a bare 12 would be millimetres."""
    value = notation.length(scalar(given), units=units_of(info), unit_needed=True, longest=FARTHEST)
    if value <= 0.0:
        raise ValueError("a target is not on the axis. Write its distance, as in target: 12 m")
    return value


Step = Annotated[float, Read(_step)]
"""Step of a readout: an angle [rad], for coordinates a length [mm]."""
Target = Annotated[float, Read(_target)]
"""Distance of a target [mm]; the unit must be written."""


class Waves(Shop):
    """Systematic division errors, each an amplitude ±.

    once_per_turn, twice_per_turn  of the wheel or circle [rad];  once_per_crank  of the worm, every turn of it [rad]
    """

    once_per_turn: AngleBound | None = None
    twice_per_turn: AngleBound | None = None
    once_per_crank: AngleBound | None = None


class Divide(Shop):
    """How the circle is divided, and what each way costs. Amplitudes and bounds are ±.

    by            the way;  circle  holes of the hole circle that is used
    wheel, worm   of a head or table; `wheel` also of a divided circle, plate or scale. A circle read on two opposite sides
                  (`faces: two`) has no once per turn
    setting       of one setting or reading;  clamp  shift when clamping;  drift  grows from the first cut to the last
    order         of cutting: `in-turn` or `spread`, halves of halves;  step  of a readout: an angle, with x-y a length
    positions     notches, holes or face-teeth;  sides  of a polygon
    positions_error, sides_error  of each of them, ± (half of any-to-any)
    sighting      of the autocollimator or telescope, each time;  polygon_tilt  of the polygon's axis to the table's
    centring      of a theodolite over the table's axis [mm];  target  its distance [mm]
    plumb         tilt of its upright axis to the table's axis;  elevation  of the sight above level
    collimation   of its telescope, out of square;  trunnion  tilt of the axis the telescope tips about
    faces         `one` throughout, `two` averaged, or `mixed`: now one, now the other
    sine_bar      length between its rolls;  blocks  error of one stack;  quarters  of each quarter turn it starts from
    x, y          of a coordinate, each ±, along the axes that the drawing counts its angles from
    """

    by: Way
    circle: Whole | None = Field(default=None, ge=1, le=400)
    wheel: Waves | None = None
    worm: Waves | None = None
    setting: AngleBound | None = None
    clamp: AngleBound | None = None
    step: Step | None = None
    drift: AngleBound | None = None
    order: Literal["in-turn", "spread"] | None = None
    positions: Whole | None = Field(default=None, ge=2, le=100_000)
    positions_error: AngleBound | None = None
    sides: Whole | None = Field(default=None, ge=2, le=1000)
    sides_error: AngleBound | None = None
    sighting: AngleBound | None = None
    polygon_tilt: AngleBound | None = None
    centring: Bound | None = None
    target: Target | None = None
    plumb: AngleBound | None = None
    elevation: Angle | None = None
    collimation: AngleBound | None = None
    trunnion: AngleBound | None = None
    faces: Literal["one", "two", "mixed"] | None = None
    sine_bar: Size | None = None
    blocks: Bound | None = None
    quarters: AngleBound | None = None
    x: Bound | None = None
    y: Bound | None = None

    @model_validator(mode="after")
    def each_key_belongs_to_this_way(self) -> Self:
        for key, ways in WAYS_OF.items():
            if getattr(self, key) is not None and self.by not in ways:
                names = f"{', '.join(ways[:-1])} or {ways[-1]}" if len(ways) > 1 else ways[0]
                raise ValueError(f"{key} says nothing about dividing by {self.by}. Drop it, or write by: {names}")
        return self

    @model_validator(mode="after")
    def each_key_has_what_it_needs(self) -> Self:
        for key, (needed, why) in NEEDS.items():
            if getattr(self, key) is not None and getattr(self, needed) is None:
                raise ValueError(f"{key} needs {needed}: {why}")
        if self.centring is not None and self.target is not None and self.centring >= self.target / 2.0:
            raise ValueError(
                "the target is as near as the instrument is off the axis. Write target: in metres, as in 12 m"
            )
        if self.elevation is not None and abs(self.elevation) >= STEEPEST:
            raise ValueError("a sight this steep says nothing about direction. Write an elevation below 80 deg")
        for key in LEANS:
            if (getattr(self, key) or 0.0) > LARGEST_LEAN:
                raise ValueError(f'{key} is what is left after setting true. Write an angle up to 5 deg, as in 10"')
        return self


LEANS = ("polygon_tilt", "plumb", "collimation", "trunnion")
"""What an axis or a line of sight may be out of true by, which counts to the first order."""
LARGEST_LEAN = notation.angle("5 deg")
"""Up to which it does [rad]. Source: series; our screening choice."""
STEEPEST = notation.angle("80 deg")
"""Elevation of a sight [rad] from which its tangent runs away. Source: our screening choice."""
