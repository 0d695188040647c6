"""The models of a worm and of its mesh with the wheel. Sizes mm, angles rad.

Whatever of the worm's sizes is stated settles the rest; what is stated twice is compared (quantities/worm_sizes.py).
"""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
import math
from typing import Annotated, Literal

from pydantic import AfterValidator, Field, ValidationInfo, model_validator

from setupcheck import notation
from setupcheck.jobfile.backlash_read import BacklashRead
from setupcheck.jobfile.marks import Mark
from setupcheck.jobfile.models import Dim, Dimension, RunOut
from setupcheck.jobfile.types import (
    Angle,
    AngleBound,
    Bound,
    Housing,
    Read,
    Service,
    Shop,
    Size,
    Speed,
    Whole,
    in_file_units,
    scalar,
    units_of,
)


def _diametral_pitch(given: object, info: ValidationInfo) -> float:
    if isinstance(given, dict):
        raise ValueError(
            "a diametral pitch is a plain number, without a unit. Write it as in diametral_pitch: 16; "
            "what was measured from thread to thread is the axial_pitch"
        )
    return _ratio(given, info)


def _quotient(given: object, info: ValidationInfo) -> float:
    if isinstance(given, dict):
        raise ValueError(
            "a quotient is a plain number, without a unit. Write it as in quotient: 12; "
            "what was measured is the reference_diameter"
        )
    return _ratio(given, info)


def _ratio(given: object, info: ValidationInfo) -> float:
    value = notation.number(scalar(given))
    if not 0.0 < value <= LARGEST_RATIO:
        raise ValueError(
            f"{notation.quoted(given)} is no quotient and no diametral pitch. Write a number above zero, as in 12"
        )
    return value


LARGEST_RATIO = 1000.0  # quotients lie near 10, diametral pitches below 200; our screening choice
DiametralPitch = Annotated[float, Read(_diametral_pitch)]
Quotient = Annotated[float, Read(_quotient)]
"""Plain numbers above zero, without a unit."""


class Thickness(Dimension):
    """Thickness of the worm's thread along its axis [mm].

    at  diameter where it is, where that is not the reference diameter [mm]
    """

    at: Size | None = None


class OverWires(Dimension):
    """Size of the worm over three wires: `{measured: 25.35, wire: 2.50, uncertainty: 3 um}` [mm].

    wire  diameter of one of them [mm]
    """

    wire: Size

    @model_validator(mode="before")
    @classmethod
    def wires_have_a_diameter(cls, given: object) -> object:
        if not isinstance(given, dict) or "wire" not in given:
            raise ValueError(
                "a size over wires needs the wires. Write it as in {measured: 25.35, wire: 2.50, uncertainty: 3 um}"
            )
        return given


class OverBalls(Dimension):
    """Size of the finished wheel over two balls: `{measured: 124.964, ball: 3.50, uncertainty: 8 um}` [mm].

    ball  diameter of one of them; left out, that of `mesh.ball`
    """

    ball: Size | None = None

    @model_validator(mode="before")
    @classmethod
    def it_is_measured(cls, given: object) -> object:
        planned = {"nominal", "lower", "upper", "fit"}
        if not isinstance(given, dict) or "measured" not in given or planned & given.keys():
            raise ValueError(
                "a size over balls counts only as measured, for what is planned follows from insert and depth. "
                "Write it as in {measured: 124.964, ball: 3.50, uncertainty: 8 um}"
            )
        return given


def _above_zero(given: Dimension, info: ValidationInfo) -> Dimension:
    if given.value <= 0.0:
        raise ValueError(f"{in_file_units(given.value, info)} is no length of a thread. Write a length above zero")
    return given


Travel = Annotated[Dimension, AfterValidator(_above_zero)]
"""An axial pitch or a lead [mm], drawn or measured."""


def _budget(given: object, info: ValidationInfo) -> float:
    value = notation.bound(scalar(given), units=units_of(info), unit_needed=True)
    if value == 0.0:
        raise ValueError("no cut wheel runs without error. Write a budget above zero, as in error_budget: 10 um")
    return value


Budget = Annotated[float, Read(_budget)]
"""An error that is allowed [mm], above zero; the unit must be written."""


def _half_turn(given: object, info: ValidationInfo) -> float:
    value = notation.angle(scalar(given))
    if not 0.0 <= value <= math.pi * (1.0 + 1e-12):
        raise ValueError(
            f"{notation.quoted(given)} is beyond half a turn. Count from the dead centre at which the worm is farthest from "
            "the wheel, the shorter way round, as in 75 deg"
        )
    return value


HalfTurn = Annotated[float, Read(_half_turn)]
"""An angle from 0 to 180 deg [rad]; the unit must be written."""


class Worm(Shop):
    """The worm, by whatever is known of it.

    starts           threads;  hand  of the thread;  lead  its travel in one turn [mm]
    axial_module, normal_module  along its axis, or square to the thread [mm];  axial_pitch  from thread to thread [mm]
    diametral_pitch  threads in pi inches along the axis, 25.4 mm over the axial module [1/in]
    quotient         reference diameter over axial module
    reference_diameter, tip_diameter  where the thread's thickness is counted, and over all [mm]
    pressure_angle   that of its axial section [rad];  profile  of its flanks
    thread_thickness  along its axis [mm];  over_wires  its size over three wires [mm]
    material         by its name;  speed  [rev/min]
    end_float        that its bearings leave along its axis [mm];  runout  where it runs, full indicator movement [mm]
    """

    starts: Whole | None = Field(default=None, ge=1, le=12)
    hand: Literal["right", "left"] | None = None
    axial_module: Size | None = None
    normal_module: Size | None = None
    diametral_pitch: DiametralPitch | None = None
    axial_pitch: Travel | None = None
    lead: Travel | None = None
    quotient: Quotient | None = None
    reference_diameter: Size | None = None
    tip_diameter: Size | None = None
    pressure_angle: Angle | None = None
    profile: Literal["ZA", "ZN", "ZI", "ZK", "ZC"] | None = None
    thread_thickness: Thickness | None = None
    over_wires: OverWires | None = None
    material: str | None = None
    end_float: Bound | None = None
    runout: RunOut | None = None
    speed: Speed | None = None


class Mesh(Shop):
    """Worm and wheel where they work.

    wheel    the teeth, as in wheel.teeth;  shift  the wheel's profile shift factor
    centre_distance  of both axes [mm];  shaft_angle_error  of the housing, ± [rad]
    housing  its material;  serves_at  coldest and warmest temperature of the drive [degC]
    ball     diameter of the balls that the size of the finished wheel is planned for [mm]
    over_balls  that size as measured
    contact  `exact`: contact, transmission error and insert from the exact gap, which takes a second more
    error_budget  transmission error that the cut may leave, along the reference circle, end to end over one pitch [mm]
    mark     what blue showed on the finished wheel
    eccentric  throw of an eccentric that sets the centre distance, distance of its two axes [mm]
    eccentric_at  where it stands, 0 to 180 deg from its dead centre with the worm farthest from the wheel [rad]
    backlash_read  backlash of the finished wheel in its housing, as read place by place
    """

    wheel: str
    centre_distance: Dim | None = None
    shift: float = Field(default=0.0, ge=-1.0, le=1.0)
    shaft_angle_error: AngleBound | None = None
    housing: Housing | None = None
    serves_at: Service | None = None
    ball: Size | None = None
    over_balls: OverBalls | None = None
    contact: Literal["exact"] | None = None
    error_budget: Budget | None = None
    mark: Mark | None = None
    eccentric: Size | None = None
    eccentric_at: HalfTurn | None = None
    backlash_read: BacklashRead | None = None

    @property
    def ball_used(self) -> float | None:
        """Diameter of the balls, wherever it is stated [mm]; the reader refuses two that differ."""
        measured = self.over_balls.ball if self.over_balls is not None else None
        return self.ball if self.ball is not None else measured
