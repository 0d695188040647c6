"""The job models: parts, machines, cutters, place. Sizes mm, angles rad, degC, N, s.

Models that describe a setup stand in `setups.py`, what is asked in `asked.py`, the heat of a joint in `heating.py`, worm and
mesh in `worm.py`, how an insert is ground in `grinding.py`, its measured profile in `insert_profile.py`. All are frozen and
refuse unknown keys. Their docstrings list every key: `setupcheck schema` takes its descriptions from there.
"""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Annotated, Literal, Self

from pydantic import (
    AfterValidator,
    Field,
    ValidationInfo,
    model_validator,
)

from setupcheck import notation
from setupcheck.jobfile.grinding import Grinding
from setupcheck.jobfile.insert_profile import InsertProfile
from setupcheck.jobfile.properties import Properties
from setupcheck.jobfile.types import (
    Angle,
    AngleBound,
    Bound,
    Division,
    Force,
    Hollow,
    Length,
    Read,
    Reading,
    Roughness,
    Shop,
    Size,
    Speed,
    Temperature,
    Whole,
    in_file_units,
    units_of,
)


class Dimension(Shop):
    """A size with its limits or its measured value: `32 H6`, `32.041 ±0.003`, `{measured: 2.31 mm, uncertainty: 4 um}`.

    nominal         as drawn [mm];  fit  of ISO 286, as in H6
    lower, upper    deviations from `nominal` [mm]
    measured        as found [mm];  uncertainty  of it, expanded, k = 2 [mm]
    at_temperature  of the part as it was measured, the gauge at 20 degC [degC]; the size is then brought back to 20 degC
    """

    nominal: Length | None = None
    lower: Length | None = None
    upper: Length | None = None
    fit: str | None = None
    measured: Length | None = None
    uncertainty: Bound | None = None
    at_temperature: Temperature | None = None

    @model_validator(mode="before")
    @classmethod
    def a_plain_value_is_a_size_with_limits(cls, given: object, info: ValidationInfo) -> object:
        if given is None or isinstance(given, bool | list):
            said = "nothing is written here" if given is None else f"{notation.quoted(given)} is not a size"
            raise ValueError(f"{said}. Write a size, as in 32 H6 or 32.041 ±0.003")
        if isinstance(given, str | int | float):
            read = notation.size(given, units=units_of(info))
            shown = {"nominal": read.nominal, "lower": read.lower, "upper": read.upper}
            return {
                **{k: f"{v!r} mm" for k, v in shown.items() if v is not None},
                **({"fit": read.fit} if read.fit else {}),
            }
        return given

    @model_validator(mode="after")
    def something_is_stated(self) -> Self:
        if self.nominal is None and self.measured is None:
            raise ValueError(
                "this size has neither a nominal nor a measured value. Write a size, or measured: 32.04 mm"
            )
        if self.lower is not None and self.upper is not None and self.lower > self.upper:
            raise ValueError("the lower deviation is above the upper one. Write lower: -0.1 mm and upper: 0.1 mm")
        return self

    @property
    def value(self) -> float:
        """The measured size, else the nominal one [mm]."""
        if self.measured is not None:
            return self.measured
        assert self.nominal is not None
        return self.nominal


class Deviation(Shop):
    """An error entry that holds plan and measurement together.

    at_most      planned bound [mm]; a plain value means this one
    measured     as found [mm];  uncertainty  of it, expanded, k = 2 [mm];  standard_uncertainty  instead, k = 1 [mm]
    high_at      where the metal comes nearest the probe: `tooth 14`, `90 deg`, `mark`, `jaw 2`, a surface's name
    device       what held or measured it; alone it takes its typical value
    mark         `kept`: the part goes back the same way round in the same device, so it is one cause in several setups
    indicator    one division of the indicator that reads it [mm], at a hold
    known_at     diameter on which a chuck or collet was tested so [mm], at the run-out of a hold
    """

    at_most: Bound | None = None
    measured: Reading | None = None
    uncertainty: Bound | None = None
    standard_uncertainty: Bound | None = None
    high_at: str | None = None
    device: str | None = None
    mark: Literal["kept", "lost"] | None = None
    indicator: Division | None = None
    known_at: Size | None = None

    @model_validator(mode="before")
    @classmethod
    def a_plain_value_is_a_bound(cls, given: object) -> object:
        if isinstance(given, bool | list):
            raise ValueError(f"{notation.quoted(given)} is not an error entry. Write a bound with its unit: 10 um")
        return {"at_most": given} if isinstance(given, str | int | float) else given

    @model_validator(mode="after")
    def one_uncertainty(self) -> Self:
        if self.uncertainty is not None and self.standard_uncertainty is not None:
            raise ValueError("uncertainty and standard_uncertainty say the same thing twice. Keep one of them")
        if self.measured is None and self.at_most is None and self.device is None:
            raise ValueError("this error states nothing. Write at_most: 10 um, or measured: 6 um, or a device")
        return self

    @property
    def u(self) -> float:
        """Standard uncertainty of the measured value [mm]; 0 where none is stated."""
        if self.standard_uncertainty is not None:
            return self.standard_uncertainty
        return 0.0 if self.uncertainty is None else self.uncertainty / 2.0


def _above_zero(given: Dimension, info: ValidationInfo) -> Dimension:
    if given.value <= 0.0:
        raise ValueError(f"{in_file_units(given.value, info)} is not a diameter. Write a size above zero")
    return given


def _without_sign(given: Deviation) -> Deviation:
    if given.measured is not None and given.measured < 0.0:
        raise ValueError("a run-out reading is never negative. Write the full indicator movement")
    return given


Error = Deviation
RunOut = Annotated[Deviation, AfterValidator(_without_sign)]
"""A dial reading has no sign; a length error has one."""
Dim = Dimension
Diameter = Annotated[Dimension, AfterValidator(_above_zero)]


# -- surfaces of a part ----------------------------------------------------------------------------------------------


def _end(given: object, info: ValidationInfo) -> int:
    way = {"+z": 1, "-z": -1}.get(given) if isinstance(given, str) else None
    if way is None:
        raise ValueError(f"{notation.quoted(given)} is no end of the part. Write +z or -z")
    return way


Facing = Annotated[Literal[1, -1], Read(_end, words=("+z", "-z"))]


class Round(Shop):
    """A surface of revolution with a length: cylinder, bore, taper, thread.

    kind       what it is;  made  `stock`: the blank brings it;  roughness  with its figure, as in Rz 6.3 um
    diameter   with its limits or as measured [mm];  hole  through its middle [mm], 0 where it is solid
    from, to   its two ends along the part [mm];  pitch  of a thread [mm]
    to_diameter  of a taper at `to` [mm], `diameter` then being that at `from`
    """

    kind: Literal["cylinder", "bore", "taper", "thread"]
    diameter: Diameter
    low: Length = Field(alias="from")
    high: Length = Field(alias="to")
    hole: Hollow | None = None
    roughness: Roughness | None = None
    made: Literal["stock"] | None = None
    pitch: Size | None = None
    to_diameter: Size | None = None

    @model_validator(mode="after")
    def only_a_taper_has_two_diameters(self) -> Self:
        if self.to_diameter is not None and self.kind != "taper":
            raise ValueError(f"a {self.kind} has one diameter. Drop to_diameter, or write kind: taper")
        return self

    @model_validator(mode="after")
    def it_has_a_length(self, info: ValidationInfo) -> Self:
        low, high = in_file_units(self.low, info), in_file_units(self.high, info)
        if self.high <= self.low:
            raise ValueError(f"it runs from {low} to {high}. Write from: below to:")
        if self.hole is not None and self.hole >= self.diameter.value:
            hole, size = in_file_units(self.hole, info), in_file_units(self.diameter.value, info)
            raise ValueError(f"a hole of {hole} leaves nothing of {size}. Write a smaller hole")
        return self


class Flat(Shop):
    """A face square to the axis, or a centre hole in an end.

    kind      what it is;  made  `stock`: the blank brings it;  roughness  with its figure, as in Rz 6.3 um
    at        where it stands along the part [mm];  facing  the end of the part that it looks to
    diameter  its outer circle [mm];  hole  its inner one [mm]
    """

    kind: Literal["face", "centre"]
    at: Length
    facing: Facing
    diameter: Size | None = None
    hole: Size | None = None
    roughness: Roughness | None = None
    made: Literal["stock"] | None = None


class Throat(Shop):
    """The hollow of a worm wheel's rim.

    kind      what it is;  made  `stock`: the blank brings it
    diameter  of the wheel at the mid-plane [mm];  radius  of the hollow [mm];  at  where the mid-plane stands [mm]
    """

    kind: Literal["throat"]
    diameter: Size
    radius: Size
    at: Length
    made: Literal["stock"] | None = None


class Toothing(Shop):
    """A ring of teeth or gaps.

    kind   what it is;  made  `stock`: the blank brings it;  count  of the teeth
    at     where the mid-plane stands along the part [mm];  width  of the face, half on either side [mm]
    on_circle  diameter of the pitch circle [mm];  module  [mm];  pressure_angle  of the flanks [rad]
    cone   of a bevel: angle of its root cone to the axis [rad], `width` then lies along the cone
    """

    kind: Literal["teeth"]
    count: Whole = Field(ge=1, le=1000)
    on_circle: Size
    at: Length
    width: Size | None = None
    pressure_angle: Angle | None = None
    module: Size | None = None
    cone: Angle | None = None
    made: Literal["stock"] | None = None


class Pattern(Shop):
    """Holes on a circle, the lines of a graduated disc, or a single slot or keyway.

    kind       what it is;  made  `stock`: the blank brings it;  count  of the places, evenly divided
    on_circle  diameter of their circle, 2 x the distance from the axis [mm];  angle  of the first place [rad]
    at         where it stands along the part [mm];  diameter  of a hole [mm];  width  of a slot [mm]
    """

    kind: Literal["holes", "slot", "lines"]
    count: Whole = Field(default=1, ge=1, le=1000)
    on_circle: Size
    at: Length
    diameter: Size | None = None
    width: Size | None = None
    angle: Angle = 0.0
    made: Literal["stock"] | None = None


Surface = Annotated[Round | Flat | Throat | Toothing | Pattern, Field(discriminator="kind")]


class Relation(Shop):
    """What is known of a bought or inspected part: one surface about or from another.

    of       the surface that is spoken of
    about    the surface whose axis it turns about;  from  instead, the face it is counted from
    runout   full indicator movement about that axis [mm];  face_runout  of a face, read on the circle `across` [mm]
    across   diameter of the circle that was read on [mm];  length  distance from the face [mm]
    division  beside runout, of lines, holes or teeth: how far each place may be out for itself, ± [rad]
    """

    of: str
    about: str | None = None
    from_: str | None = Field(default=None, alias="from")
    runout: RunOut | None = None
    face_runout: RunOut | None = None
    across: Size | None = None
    length: Dim | None = None
    division: AngleBound | None = None

    @model_validator(mode="after")
    def it_states_one_relation(self) -> Self:
        if (self.about is None) == (self.from_ is None):
            raise ValueError("a relation is either `about` an axis or `from` a face. Write one of them")
        if self.from_ is not None and self.length is None:
            raise ValueError("a relation `from` a face needs its length. Write length: 8.000 ±0.008")
        if self.about is not None and self.runout is None and self.face_runout is None:
            raise ValueError("a relation `about` an axis needs runout or face_runout. Write runout: 3 um")
        if self.division is not None and self.runout is None:
            raise ValueError("division stands beside the run-out of the places. Write runout: 2 um beside it")
        if self.face_runout is not None and self.across is None:
            raise ValueError(
                "face_runout needs the circle it was read on. Write across: and the diameter of that circle"
            )
        return self


class Part(Shop):
    """One part.

    material  by its name, as in C45;  properties  of the certificate, in place of the list's
    surfaces  all of them, each by its name;  given  relations that no setup here makes, as of a bought part
    """

    material: str | None = None
    properties: Properties | None = None
    surfaces: dict[str, Surface] = Field(min_length=1)
    given: tuple[Relation, ...] = ()


# -- cutters, machines, place ----------------------------------------------------------------------------------------


class Cutter(Shop):
    """A cutter.

    kind        what it is;  diameter  of it [mm];  speed  it turns at [rev/min];  overhang  of its bar [mm]
    tip_radius  from its axis to its tip [mm];  bar_diameter  of the bar that carries it [mm]
    insert      what its flanks are: the `envelope`, or the section in the `mid-plane`
    width       of the insert [mm];  width_at  height above the tip of that, else pitch height [mm]
    grinding    how the insert is ground;  profile  of it as measured after grinding
    turned      what it may be turned in its face as it sits in the bar, ± [rad]
    """

    kind: Literal["single-point", "hob", "form-cutter", "drill", "reamer", "boring-head", "grinding-wheel", "broach"]
    tip_radius: Size | None = None
    bar_diameter: Size | None = None
    overhang: Size | None = None
    insert: Literal["envelope", "mid-plane"] | None = None
    width: Dim | None = None
    width_at: Size | None = None
    grinding: Grinding | None = None
    profile: InsertProfile | None = None
    turned: AngleBound | None = None
    diameter: Size | None = None
    speed: Speed | None = None


class Machine(Shop):
    """A machine.

    kind         what it is;  axis  how it lies;  rating  force of a press [N]
    axis_runout  full indicator movement of its own axis, an error of each cut [mm]
    worm_ratio   turns of the worm for one of the work;  hole_circles  there are, by their count of holes
    nose_points  where the nose of its spindle looks;  cutter_stands  where the cutter is
    """

    kind: Literal["lathe", "dividing-head", "rotary-table", "mill", "grinder", "drill-press", "jig-borer", "press"]
    worm_ratio: Whole | None = Field(default=None, ge=1, le=1000)
    nose_points: Literal["left", "right", "up", "front", "back"] | None = None
    cutter_stands: Literal["front", "back", "above", "left", "right"] | None = None
    axis_runout: RunOut | None = None
    axis: Literal["horizontal", "vertical"] | None = None
    hole_circles: tuple[Annotated[Whole, Field(ge=1, le=400)], ...] = ()
    rating: Force | None = None


class Distance(Shop):
    """A length from a face: `{from: spindle.shoulder, length: 13.500 ±0.020}`.

    from  the face;  length  from it outward, the way it looks [mm]
    """

    from_: str = Field(alias="from")
    length: Dim


class Place(Shop):
    """Where the finished part works.

    axis  the surface it turns about;  worm_axis  how far the worm's axis stands from a face
    """

    axis: str | None = None
    worm_axis: Distance | None = None
