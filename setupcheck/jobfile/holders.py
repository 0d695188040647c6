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
