"""Causes: one independent error source each, with its bound, its law and where it was stated. Lengths mm, angles rad.

A cause stands for one random value X: a complex number for an error with a direction (an eccentricity, a lean, a
once-per-turn error), a real number for a length or an angle about the axis. Accounts carry X linearly.
"""

from __future__ import annotations

import hashlib
import math
from dataclasses import field, replace
from typing import TYPE_CHECKING, Literal

from setupcheck.record import record

if TYPE_CHECKING:
    from setupcheck.ledger.account import Account

Law = Literal[
    "disc",
    "ring",
    "blur",
    "clearance-disc",
    "clearance-ring",
    "rectangle",
    "length",
    "gauss",
    "one-sided",
    "high-point",
    "undetermined",
]
Mode = Literal["planned", "measured", "typical", "derived"]

TRUNCATION = 3.0
"""Gaussian causes end at this many standard deviations, so that `worst` exists. Source: our screening choice."""

TRUNCATION_2D = 3.4393
"""The same for a vector: 99.73 % of a two-dimensional Gaussian lie within sqrt(-2 ln 0.0027). Source: Rayleigh law."""


@record(eq=False)
class Cause:
    """One independent error source. Two are the same if name and place in the job file are; `identity` names its stream.

    key      its name in shop words
    op       the operation it belongs to, None for a bought part
    law      how X is spread:
             disc             uniform over the disc of radius `high` (an eccentricity of which only a bound is known)
             ring             |X| = `high`, every direction alike, the radius blurred by `spread`
             blur             two independent Gaussians of standard deviation `spread`, |X| cut at 3.44 `spread`
             clearance-disc   diametral play drawn in `low` .. `high`, X anywhere in the disc of half of it
             clearance-ring   the same play, the part pushed or hung against the wall: |X| = half of it
             rectangle        |Re X| <= `low`, |Im X| <= `high` (two readout axes)
             length           real, uniform in -`high` .. `high`
             gauss            real, Gaussian of standard deviation `spread`, cut at 3 `spread`
             one-sided        real, uniform in 0 .. `high`
             high-point       real, |`of`|: the highest point of a ring on a leaning face
             undetermined     nothing is known; it must cancel, or the answer is open
    mean     the known part of X (a run-out with a direction); the law describes what is left around it
    missing  for `undetermined`: the job path to fill
    paths    the job paths the numbers stand at
    rests_on name of the typical value used, if any
    pair     name under which clearances draw one common play (two planes of one fit)
    shared   one cause in several setups (a device whose mark is kept): known by its name alone
    bound    largest |X - mean| [mm or rad]; infinite for an undetermined cause;  is_real  X has no direction
    Source of the laws: uniform over the disc is our choice by analogy to JCGM 100:2008 4.3.7; the ring of random phase
    is the fixed eccentricity of unknown direction; rectangular lengths JCGM 100:2008 4.3.7.
    """

    key: str
    law: Law
    op: int | None = None
    high: float = 0.0
    low: float = 0.0
    spread: float = 0.0
    mean: complex = 0j
    mode: Mode = "planned"
    missing: str = ""
    paths: tuple[str, ...] = ()
    rests_on: str = ""
    pair: str = ""
    shared: bool = False
    of: Account | None = None
    identity: str = field(init=False, default="")
    bound: float = field(init=False, default=0.0)
    is_real: bool = field(init=False, default=False)

    def __post_init__(self) -> None:
        place = "" if self.shared or not self.paths else self.paths[0]
        object.__setattr__(self, "identity", f"{self.key} [{place}]" if place else self.key)
        object.__setattr__(self, "bound", self._bound())
        object.__setattr__(self, "is_real", self.law in ("length", "gauss", "one-sided", "high-point"))

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Cause) and self.identity == other.identity

    def __hash__(self) -> int:
        return hash(self.identity)

    def _bound(self) -> float:
        match self.law:
            case "disc" | "length" | "one-sided":
                return self.high
            case "ring":
                return self.high + TRUNCATION * self.spread
            case "blur":
                return TRUNCATION_2D * self.spread
            case "gauss":
                return TRUNCATION * self.spread
            case "clearance-disc" | "clearance-ring":
                return self.high / 2.0
            case "rectangle":
                return math.hypot(self.low, self.high)
            case "high-point":
                assert self.of is not None
                return self.of.largest()
            case _:
                return float("inf")

    @property
    def is_one_sided(self) -> bool:
        """True where X is never negative: it moves a figure one way only."""
        return self.law in ("one-sided", "high-point")

    def scaled(self, factor: float) -> Cause:
        """The same cause with its stated size `factor` times as large; the uncertainty of a reading stays as it is."""
        return replace(self, high=self.high * factor, low=self.low * factor, mean=self.mean * factor)

    def turned_with(self, angle: Cause) -> Cause:
        """This cause on a part that was turned by an unknown `angle`: no known direction, nothing shared with the other part."""
        if self.shared:
            return replace(self, key=f"{self.key}, as put on (op {angle.op})", mean=0j)
        return replace(self, key=f"{self.key} (scatter)", mean=0j) if self.mean else self


def stream_key(name: str) -> int:
    """Number that seeds the stream of one cause: the first 16 bytes of the SHA-256 of its name.

    Keyed by the name and not by the order, so a setup that a figure does not use changes nothing in it.
    """
    return int.from_bytes(hashlib.sha256(name.encode()).digest()[:16], "big")
