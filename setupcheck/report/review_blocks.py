"""Blocks of the review's JSON that few jobs have: house file, record, joints, contact, insert, backlash. See `review_types`."""

from __future__ import annotations

from typing import Literal, TypedDict


class HouseHead(TypedDict):
    """Which house file acts.

    name    name of the shop, as it stands in the file
    file    its name, as it was given
    sha256  hash of its bytes
    """

    name: str
    file: str
    sha256: str


class HouseData(HouseHead):
    """The house file and what it did to this review.

    acts    rules whose findings it changed
    values  its typical values that were taken
    notes   what else it says
    """

    acts: list[HouseActData]
    values: list[HouseValueData]
    notes: list[str]


class HouseActData(TypedDict):
    """What a house file did by one rule.

    rule    id of the rule
    places  count of findings it acted on
    says    by whom, when and why
    """

    rule: str
    places: int
    says: str


class HouseValueData(TypedDict):
    """A typical value of the house that was taken.

    at      path of the job's entry it stands in for
    device  device
    what    which error of it
    value   the value [unit]
    unit    its unit
    """

    at: str
    device: str
    what: str
    value: float
    unit: str


class RecordData(TypedDict):
    """A shop's record of its own devices.

    sha256  hash of its bytes
    used    its series that this job names
    """

    sha256: str
    used: list[RecordUseData]


class RecordUseData(TypedDict):
    """One series of the record, where the job names its device.

    at          path of the job's entry
    device      device
    what        which error of it
    entries     count of entries in the series
    limit       limit for the next value [unit]; null where the record is too thin for one
    unit        unit of the limit
    taken       whether the limit counted: what the job states or measured always counts first
    last_above  count of last values above the limit of those before, 0 where there are none: the device wears
    """

    at: str
    device: str
    what: str
    entries: int
    limit: float | None
    unit: str
    taken: bool
    last_above: int


class JointData(TypedDict):
    """An interference joint; its numbers stand among the quantities, `fit.…`.

    op    operation that joins
    says  lines about it
    """

    op: int | None
    says: list[str]


class HeatingPlanData(TypedDict):
    """The plan of a shrink fit.

    op     operation that joins
    steps  steps in their order; a step with an unknown number is left out, and its finding says what to fill
    """

    op: int | None
    steps: list[str]


class ContactData(TypedDict):
    """The contact of a worm wheel; its numbers stand among the quantities, `contact.…`.

    op     operation that cuts it
    ends   names of the faces at the -z and the +z end of the teeth
    right  map of the right flank, seen from the +z face with the gap up: lines from tip to root, # marked, . not
    left   map of the left flank in the same way
    says   lines about it
    """

    op: int | None
    ends: list[str]
    right: list[str]
    left: list[str]
    says: list[str]


class InsertData(TypedDict):
    """An insert of a worm wheel's cutter; its numbers stand among the quantities, `insert.…`.

    op      operation that cuts with it
    cutter  name of the cutter
    sizes   full widths of the insert
    points  readings of the grinder
    says    lines about it
    """

    op: int | None
    cutter: str
    sizes: list[InsertSizeData]
    points: list[InsertPointData]
    says: list[str]


class InsertSizeData(TypedDict):
    """A width of an insert.

    height  height above its tip [mm]
    width   full width there [mm]
    """

    height: float | None
    width: float | None


class InsertPointData(TypedDict):
    """A point to grind to.

    height  height above the tip [mm]
    across  reading across the insert [mm]
    along   reading along it [mm]
    """

    height: float | None
    across: float | None
    along: float | None


class BacklashReadData(TypedDict):
    """Backlash as read on the finished wheel, along the reference circle.

    unit                 always um
    places               gaps it was read at
    uncertainty          uncertainty of one reading [um]
    end_float_taken_out  end float of the worm that was taken out of each reading [um]
    mean                 mean over the turn [um]
    swing                largest less least over the turn [um]
    swing_uncertainty    uncertainty of the swing [um]
    eccentricity         eccentricity of the teeth that swings so far [um]
    tightest_gap         number of the tightest gap
    high_spot_gap        number of the gap where the teeth stand out farthest; null where the readings do not prove it
    """

    unit: Literal["um"]
    places: list[BacklashPlaceData]
    uncertainty: float
    end_float_taken_out: float
    mean: float
    swing: float
    swing_uncertainty: float
    eccentricity: float
    tightest_gap: float
    high_spot_gap: float | None


class BacklashPlaceData(TypedDict):
    """Backlash read at one gap.

    gap       number of the gap
    backlash  backlash there [um]
    off_wave  so far off the wave through all of them [um]
    """

    gap: int
    backlash: float
    off_wave: float
