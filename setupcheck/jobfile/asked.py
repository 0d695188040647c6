"""The job models of what is asked of the route, and of findings and cautions that the planner has answered. Sizes mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Annotated, Literal, Self

from pydantic import BeforeValidator, Field, model_validator

from setupcheck.jobfile.types import AngleBound, Bound, Length, Limit, Limits, Shop, Size, Whole

What = Literal[
    "run-out",
    "face-run-out",
    "coaxial",
    "cumulative-pitch",
    "single-pitch",
    "gap-centre-pitch",
    "index-range",
    "index-within",
    "on-workpiece",
    "position",
    "chord",
    "pitch-circle",
    "mid-plane",
    "backlash",
    "backlash-swing",
    "contact-length",
    "contact-area",
    "length",
    "squareness",
    "torque",
    "allowance",
    "symmetry",
    "flank-run-off",
    "depth-run-off",
]


READ_BY_HEADS = ("index-range", "index-within", "on-workpiece")
"""Figures of an angle that several read heads may take the mean of."""

Of = Annotated[str, BeforeValidator(lambda given: str(given) if type(given) is int else given)]
"""The name of a surface, or the number of an operation."""


class Require(Shop):
    """One required figure, with one limit.

    what      the figure;  name  of this requirement, for the report
    of        the surface it is asked of, as in wheel.bore, or bore@20 as operation 20 left it
    about     the surface whose axis it is about, or that it is counted from
    at_most, at_least  its limit, in the unit of the figure;  between  two limits, low and high
    grade     takes the limit from ISO 1328-1:1995 for cylindrical gears
    along     way that a backlash is stated: circular, normal, or at and a radius
    across    diameter of the circle a face is read on [mm];  at  height along the part it is read at [mm]
    on_diameter  of the workpiece that the teeth are to divide [mm]
    clock     keyway, gap or hole that angles count from;  film  thickness of the blue [mm]
    heads     that read lines, evenly round the circle, their mean taken;  heads_off  each from its place, ± [rad]
    """

    what: What
    of: Of | None = None
    about: str | None = None
    at_most: Limit | None = None
    at_least: Limit | None = None
    between: Limits | None = None
    grade: Whole | None = Field(default=None, ge=0, le=12)
    along: str | None = None
    across: Size | None = None
    at: Length | None = None
    on_diameter: Size | None = None
    clock: str | None = None
    film: Bound | None = None
    heads: Whole | None = Field(default=None, ge=1, le=12)
    heads_off: AngleBound | None = None
    name: str | None = None

    @model_validator(mode="after")
    def it_has_one_limit(self) -> Self:
        stated: list[object] = [x for x in (self.between, self.grade) if x is not None]
        stated += [self.at_most] if self.at_most is not None or self.at_least is not None else []
        if len(stated) != 1:
            raise ValueError("a requirement has one limit. Write at_most, at_least, between: [low, high], or grade")
        return self

    @model_validator(mode="after")
    def heads_read_a_division(self) -> Self:
        if self.heads is not None and self.what not in READ_BY_HEADS:
            raise ValueError(f"heads read an angle, not {self.what}. Drop heads, or write what: index-within")
        if self.heads_off is not None and (self.heads or 1) == 1:
            raise ValueError("heads_off says how evenly several heads stand. Write heads: 2 beside it, or drop it")
        return self


class Waive(Shop):
    """A finding the planner accepts.

    rule    such as HOLD-001;  at  its place, as in setups.20
    reason  for accepting it;  until  the day it ends, as in 2027-03-31
    """

    rule: str
    at: str
    reason: str = Field(min_length=3)
    until: str | None = None


class Checked(Shop):
    """A stop-and-check caution that somebody has answered.

    caution  its name, as the report gives it;  op  operation it belongs to;  by  who answered it;  note  what was found
    """

    caution: str
    op: Whole
    by: str = Field(min_length=1)
    note: str | None = None
