"""The models of a setup: hold, head, divide, cut, join; and the job that holds everything. Sizes mm, angles rad."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Annotated, Literal, Self

from pydantic import Field, ValidationInfo, model_validator

from setupcheck.jobfile.asked import Checked, Require, Waive
from setupcheck.jobfile.dividing import Divide
from setupcheck.jobfile.heating import Heat
from setupcheck.jobfile.holders import CHUCKED, JAWS, Device
from setupcheck.jobfile.models import (
    Cutter,
    Dim,
    Error,
    Facing,
    Machine,
    Part,
    Place,
    RunOut,
)
from setupcheck.jobfile.prove_out import ProveOut
from setupcheck.jobfile.service import JointService
from setupcheck.jobfile.touched import DepthFrom, Scatter
from setupcheck.jobfile.travel import Travel
from setupcheck.jobfile.truing import Trued, check_it_is_loose
from setupcheck.jobfile.turning import Turning
from setupcheck.jobfile.types import (
    Angle,
    AngleBound,
    Bound,
    Carried,
    Force,
    Fraction,
    Length,
    Play,
    Shop,
    Size,
    Temperature,
    Tilt,
    Version,
    Whole,
    in_file_units,
)
from setupcheck.jobfile.worm import Mesh, Worm


class Through(Shop):
    """One device that stands on another, with its own error: `through: [{by: centres, runout: 4 um}]`, or `[centres]`.

    by  the device;  runout  full indicator movement of its own [mm]
    """

    by: str
    runout: RunOut | None = None

    @model_validator(mode="before")
    @classmethod
    def a_plain_name_takes_its_typical_error(cls, given: object) -> object:
        return {"by": given, "runout": {"device": given}} if isinstance(given, str) else given


class Span(Shop):
    """A stretch along the part.

    from, to  its two ends [mm]
    """

    low: Length = Field(alias="from")
    high: Length = Field(alias="to")

    @model_validator(mode="after")
    def it_has_a_length(self, info: ValidationInfo) -> Self:
        if self.high <= self.low:
            low, high = in_file_units(self.low, info), in_file_units(self.high, info)
            raise ValueError(f"it runs from {low} to {high}. Write from: below to:")
        return self


class Centre(Shop):
    """The axis brought onto the machine axis, with its error.

    on         the surface that is held or trued;  by  the device;  at  height along the part [mm]
    runout     full indicator movement of the datum as trued, or of the mandrel, spigot or collet that carries it
    clearance  diametral play between datum and device;  rests  how the part lies in it
    x, y       readings of an edge finder or indicator along two machine axes, each ±
    grip       stretch of the surface that the jaws or the mandrel hold;  grip_force  of each jaw on the part [N]
    turned     where the part's mark stands from the device's mark;  through  devices that this one stands on
    jaws_stand_out  how far the jaws reach beyond the body of the chuck [mm]
    """

    on: str
    by: Device
    at: Length | None = None
    runout: RunOut | None = None
    clearance: Play | None = None
    rests: Literal["hanging", "pushed", "free", "centred"] | None = None
    x: Bound | None = None
    y: Bound | None = None
    grip: Span | None = None
    grip_force: Force | None = None
    through: tuple[Through, ...] = ()
    turned: Angle | None = None
    jaws_stand_out: Length | None = None

    @model_validator(mode="after")
    def what_is_said_of_a_chuck_belongs_to_one(self) -> Self:
        if self.grip_force is not None and self.by not in JAWS:
            raise ValueError(
                f"grip_force is the force of one jaw, and {self.by} is not held by jaws. Drop it, or write by: three-jaw"
            )
        if self.jaws_stand_out is not None and self.by not in JAWS:
            raise ValueError(f"jaws_stand_out is said of a chuck with jaws, and {self.by} has none. Drop it")
        if self.jaws_stand_out is not None and self.jaws_stand_out < 0.0:
            raise ValueError("jaws that end inside the chuck stand out by 0. Write jaws_stand_out: 0")
        if self.runout is not None and self.runout.known_at is not None and self.by not in CHUCKED:
            raise ValueError(f"known_at is the bar a chuck was tested on, and {self.by} is none. Drop it")
        if self.grip_force == 0.0:
            raise ValueError("a grip_force of nothing holds nothing. Write the force of one jaw, as in 2 kN")
        return self


class Square(Shop):
    """The face that rules the lean.

    on           the face;  by  what it lies against, or is read with;  across  the circle the indicator ran on [mm]
    face_runout  full indicator movement on that circle [mm];  chip  under one side, as thick as it may be [mm]
    """

    on: str
    by: str | None = None
    face_runout: RunOut | None = None
    across: Size | None = None
    chip: Bound | None = None

    @model_validator(mode="after")
    def a_reading_has_its_circle(self) -> Self:
        if (self.face_runout is not None or self.chip is not None) and self.across is None:
            raise ValueError(
                "face_runout needs the circle it is read on. Write across: and the diameter of that circle"
            )
        return self


class Spacer(Shop):
    """A shim or spacer between a stop and its face.

    name  of it;  length  its thickness [mm]
    """

    name: str
    length: Dim


class Stop(Shop):
    """What rules the length.

    on        the face that meets the stop;  against  in a join, the face of the other part
    error     of the stop; measured, it is positive where it stands nearer the tool [mm];  spacers  between both
    touches   `all-round` (a plate or shoulder) or `point`, a single stop
    radius    where that one stands [mm];  direction  of it [rad]
    """

    on: str
    against: str | None = None
    error: Error | None = None
    touches: Literal["all-round", "point"] | None = None
    radius: Size | None = None
    direction: Angle | None = None
    spacers: tuple[Spacer, ...] = ()


class Clock(Shop):
    """What rules the angle about the axis.

    on  a keyway, ring of teeth or holes;  number  of the gap or hole, from 1;  error  of touching it [mm]
    """

    on: str
    number: Whole = Field(default=1, ge=1)
    error: Error | None = None


class Hold(Shop):
    """How the part is held: its axis, its lean (exactly one of `square` and `and_centre`), its length and its angle.

    centre  what rules the axis;  and_centre  a second plane along it;  square  a face that rules the lean
    stop    what rules the length;  clock  what rules the angle about the axis
    """

    centre: Centre | None = None
    and_centre: Centre | None = None
    square: Square | None = None
    stop: Stop | None = None
    clock: Clock | None = None

    @model_validator(mode="before")
    @classmethod
    def the_second_plane_lies_in_the_same_device(cls, given: object) -> object:
        if (
            isinstance(given, dict)
            and isinstance(given.get("centre"), dict)
            and isinstance(given.get("and_centre"), dict)
        ):
            device = given["centre"].get("by")
            if device is not None and "by" not in given["and_centre"]:
                return {**given, "and_centre": {**given["and_centre"], "by": device}}
        return given


class MidPlane(Shop):
    """How the cutter is brought to the mid-plane of the teeth.

    found  when: with the head tilted, before it was, or where it is not tilted;  error  of finding it [mm]
    pivot  distance of the mid-plane from the pivot that the head tilts about [mm]
    """

    found: Literal["after-tilt", "before-tilt", "no-tilt"]
    error: Error | None = None
    pivot: Dim | None = None


class Head(Shop):
    """The tilt of a dividing head or table, set for the cut.

    tilt      without a sign [rad];  leans  where the nose goes;  uncertainty  of the setting, ± [rad]
    by        what it is set with;  sine_bar  length between its rolls [mm];  blocks  under it [mm]
    mid_plane  how the cutter is brought there
    """

    tilt: Tilt
    uncertainty: AngleBound | None = None
    leans: Literal["nose-up", "nose-down", "left", "right", "front", "back"] | None = None
    by: Literal["scale", "vernier", "sine-bar", "readout"] | None = None
    sine_bar: Size | None = None
    blocks: Dim | None = None
    mid_plane: MidPlane | None = None


class Cut(Shop):
    """One surface cut in a setup. An empty map finishes it to its drawing size.

    state              `rough` or `finish`, where no size says it
    to                 diameter, or position of a face, that this operation leaves
    leave_on_diameter, leave_on_radius, leave   stock left for a later operation
    error              error of the length or position of this cut (dial, stop, readout)
    spindle_to_axis    for a pattern on a rotary table: `x` is the pitch radius, `y` turns the pattern
    removes            surfaces that are gone afterwards
    from_surface       the surface it is cut out of, where it has no earlier state of its own
    prove_out          shallow gaps cut first, and what the dial over a ball read in them
    finishing_cut      thinnest cut that the tool still takes, on the radius [mm]
    form               error of the old surface's form, on the radius [mm]
    each               what each hole or tooth adds for itself
    off_centre         how far the middle of the cutter stands beside the axis that gaps are indexed about
    cutter             one of `cutters`;  tool_change_after  so many gaps of all passes
    depth              of a gap [mm];  depth_error  of it [mm];  depth_from  the surface it is counted from
    passes             depths that are cut one after the other, together the whole depth [mm]
    """

    to: Length | None = None
    state: Literal["rough", "finish"] | None = None
    leave_on_diameter: Length | None = None
    leave_on_radius: Length | None = None
    leave: Length | None = None
    error: Error | None = None
    removes: tuple[str, ...] = ()
    from_surface: str | None = None
    finishing_cut: Size | None = None
    form: Bound | None = None
    cutter: str | None = None
    depth: Size | None = None
    depth_error: Error | None = None
    depth_from: DepthFrom | None = None
    passes: tuple[Size, ...] = ()
    prove_out: ProveOut | None = None
    each: Scatter | None = None
    off_centre: Error | None = None
    spindle_to_axis: dict[Literal["x", "y"], Dim] | None = None
    tool_change_after: Whole | None = Field(default=None, ge=1)


class MeasuredPair(Shop):
    """A bore and a journal that lie on the bench, as measured.

    name  of the pair;  bore, journal  both diameters [mm];  uncertainty  what both readings may be out [mm]
    """

    name: str
    bore: Size
    journal: Size
    uncertainty: Bound | None = None


class Join(Shop):
    """Two parts put together: the machine axis of this step is the inner part's surface.

    outer, inner  the bore and the journal, as in wheel.bore;  by  how they are joined;  stop  the two faces that meet
    fit_error    full indicator movement of the outer part about the inner one; `trued`, what setting or clamping adds [mm]
    trued        what runs true before the joint is made fast
    clearance    diametral play of a sliding fit [mm];  rests  how the outer part lies in it
    heat         of a shrink fit, and its cold;  joint  how its surfaces are
    must_carry   torque and force along the axis
    grips_first  where a shrunk hub bites first: `shoulder-end` (cooled or clamped so that no gap opens) or `anywhere`
    friction     of the joint, where the shop knows better than the table;  smoothing  share of both Rz that is lost
    serves_at    coldest and warmest in service;  lead_in  chamfer that leads a pressed part in, along the axis
    growth_at    diameters of the hub whose growth is asked for;  pairs  measured parts to choose from
    square  `bore` (a long fit rules the lean) or `shoulder` (the faces named in `stop` do)
    mounted_at  where the outer part's mark stands on the inner part's, if it is kept
    """

    outer: str
    inner: str
    by: Literal["shrink", "press", "slide", "taper", "screw", "bond"]
    square: Literal["bore", "shoulder"] | None = None
    fit_error: RunOut | None = None
    trued: Trued | None = None
    clearance: Play | None = None
    rests: Literal["hanging", "pushed", "free", "centred"] | None = None
    stop: Stop | None = None
    mounted_at: Angle | None = None
    heat: Heat | None = None
    grips_first: Literal["shoulder-end", "anywhere"] | None = None
    joint: Literal["degreased", "oiled"] | None = None
    friction: Annotated[float, Field(gt=0.0, le=1.0)] | None = None
    smoothing: Annotated[float, Field(ge=0.0, le=1.0)] | None = None
    must_carry: Carried | None = None
    serves_at: JointService | None = None
    lead_in: Size | None = None
    growth_at: tuple[Size, ...] = ()
    pairs: tuple[MeasuredPair, ...] = ()

    @model_validator(mode="after")
    def only_a_loose_part_is_trued(self) -> Self:
        if self.trued is not None:
            check_it_is_loose(self.by, self.square)
        return self


class Setup(Shop):
    """One numbered step: a holding with its cuts, or a joining.

    op     its number;  note  for people;  machine  one of `machines`, or its kind;  part  that is held
    looks_at_tool  the end of the part that faces the tool
    hold   how the part is held;  keeps  instead, the operation whose holding was never opened
    head   its tilt;  travel  how the work's axis lies to it;  turning  what turns with the spindle, and how fast
    divide  how the circle is divided;  cut  each surface that is cut, by its name
    join   two parts put together
    """

    op: Whole = Field(ge=1, le=100_000)
    note: str | None = None
    machine: str | None = None
    part: str | None = None
    looks_at_tool: Facing | None = None
    keeps: Whole | None = None
    hold: Hold | None = None
    head: Head | None = None
    travel: Travel | None = None
    divide: Divide | None = None
    turning: Turning | None = None
    cut: dict[str, Cut] = Field(default_factory=dict)
    join: Join | None = None

    @model_validator(mode="after")
    def it_cuts_or_joins(self) -> Self:
        if self.join is not None and (self.cut or self.hold is not None or self.keeps is not None):
            raise ValueError("a setup either joins two parts or holds and cuts one. Make two setups of it")
        if self.join is None and not self.cut:
            raise ValueError("this setup cuts nothing and joins nothing. Write cut: {surface: {}} or join: {…}")
        if self.cut and self.keeps is None and self.hold is None:
            raise ValueError(
                "this setup does not say how the part is held. Write hold: {…}, or keeps: with the op never opened"
            )
        if self.keeps is not None and self.hold is not None:
            raise ValueError("`keeps` and `hold` say two different things. Keep one of them")
        if self.hold is not None and self.hold.and_centre is not None and self.hold.square is not None:
            raise ValueError("the lean is ruled twice, by square and by and_centre. Keep exactly one tilt datum")
        if self.cut and self.keeps is None and self.looks_at_tool is None:
            raise ValueError(
                "looks_at_tool is missing. Write looks_at_tool: +z or -z, the end of the part that faces the tool"
            )
        return self


class Job(Shop):
    """The whole job file.

    setupcheck  version of the job file, 1;  title  of the job;  job  its number;  revision  of it
    units       of bare numbers;  room  its temperature [degC];  confidence  of `likely`, as in 95 %
    parts       each by its name;  worm  of a drive;  mesh  worm and wheel where they work;  place  where the part works
    cutters, machines  each by its name;  setups  the route, step by step
    done        the last operation that is finished, as the job goes on
    require     the figures asked for;  waive  findings that are accepted;  checked  cautions that are answered
    """

    setupcheck: Version
    title: str = Field(min_length=1)
    job: str | None = None
    revision: str | None = None
    units: Literal["mm", "in"]
    room: Temperature = 20.0
    confidence: Fraction = Field(default=0.95, gt=0.5, lt=1.0)
    parts: dict[str, Part] = Field(min_length=1)
    worm: Worm | None = None
    mesh: Mesh | None = None
    cutters: dict[str, Cutter] = Field(default_factory=dict)
    machines: dict[str, Machine] = Field(default_factory=dict)
    setups: tuple[Setup, ...] = ()
    done: Whole | None = None
    place: Place | None = None
    require: tuple[Require, ...] = ()
    waive: tuple[Waive, ...] = ()
    checked: tuple[Checked, ...] = ()
