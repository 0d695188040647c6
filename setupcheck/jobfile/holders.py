"""Names of what a part is held by, and which of them are jaws or chucks."""

from __future__ import annotations

from typing import Literal

Device = Literal[
    "three-jaw",
    "four-jaw",
    "soft-jaws",
    "shimmed-jaws",
    "collet",
    "spigot",
    "plain-mandrel",
    "taper-mandrel",
    "expanding-mandrel",
    "centres",
    "faceplate",
    "edge-finder",
    "indicator",
    "fixture",
    "vee-block",
    "magnetic-chuck",
    "pot-chuck",
    "spindle",
    "steady",
]

JAWS = ("three-jaw", "four-jaw", "soft-jaws", "shimmed-jaws")
"""Devices whose jaws press on the part one by one. Source: common practice."""
CHUCKED = ("three-jaw", "soft-jaws", "shimmed-jaws", "collet", "pot-chuck")
"""Devices that bring an error of their own, which nobody trues away. Source: common practice."""
IN_A_BORE = ("plain-mandrel", "taper-mandrel", "expanding-mandrel")
"""Devices that go into the part. Source: common practice."""
ROUND_AN_OUTSIDE = ("collet", "pot-chuck", "vee-block", "steady")
"""Devices that lie round the part. Jaws do both, and so does a spigot, a short cylinder or bore. Source: common practice."""
