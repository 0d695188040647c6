"""Holding devices: one row each, in shop words. A new device is a new row here and a value in rules/data/typical.yaml."""

from __future__ import annotations

from setupcheck.record import record


@record
class Device:
    """How a device takes a part.

    words      after the surface's name: "rim in four-jaw chuck"
    clearance  the datum lies in it with play, which must be stated
    rests      how a part lies in the play if the planner does not say: hanging (on a horizontal axis), free
    jaws       number of jaws for directions given as "jaw 2"; 0 where it has none
    grips      it grips over a length and so can rule the lean by two planes
    xy         its error is stated along two machine axes
    covers     it lies on the surface it holds, so that surface cannot be cut in the same holding
    """

    words: str
    clearance: bool = False
    rests: str = "hanging"
    jaws: int = 0
    grips: bool = False
    xy: bool = False
    covers: bool = False


DEVICES: dict[str, Device] = {
    "three-jaw": Device("in three-jaw chuck", jaws=3, grips=True, covers=True),
    "four-jaw": Device("in four-jaw chuck", jaws=4, grips=True),
    "soft-jaws": Device("in soft jaws", jaws=3, grips=True, covers=True),
    "shimmed-jaws": Device("in jaws over shims", jaws=3, grips=True, covers=True),
    "collet": Device("in collet", grips=True, covers=True),
    "pot-chuck": Device("in pot chuck", grips=True, covers=True),
    "spigot": Device("in spigot", clearance=True, covers=True),
    "plain-mandrel": Device("on plain mandrel", clearance=True, grips=True, covers=True),
    "taper-mandrel": Device("on taper mandrel", grips=True, covers=True),
    "expanding-mandrel": Device("on expanding mandrel", grips=True, covers=True),
    "centres": Device("between centres"),
    "faceplate": Device("on faceplate"),
    "fixture": Device("in fixture"),
    "vee-block": Device("in vee-block"),
    "magnetic-chuck": Device("on magnetic chuck"),
    "steady": Device("in steady", covers=True),
    "indicator": Device("trued by indicator"),
    "edge-finder": Device("found by edge finder", xy=True),
    "spindle": Device("in its own bearings"),
}
"""Source of the rows: common practice."""

DIALLED = ("four-jaw", "indicator", "faceplate")
"""In these a part is trued by its dial: another datum keeps the reading, a finer dial makes it truer. Common practice."""
