"""Worm pairs of the tests of the exact gap: the two of an earlier prototype, and others that stretch the formulas."""

from __future__ import annotations

import math
from typing import Literal

import numpy as np

from setupcheck.worm.conjugate import Pair
from setupcheck.worm.ease_off import EaseOff, ease_off
from setupcheck.worm.gap_insert import envelope_insert, mid_plane_insert, sections
from setupcheck.worm.helicoid import Thread
from setupcheck.worm.meshing import AS_CUT, Contact, Mounting, contact
from setupcheck.worm.plunge_gap import Cut, Insert
from setupcheck.worm.wheel_flank import Blank, Flank, wheel_flank

SIZES = {1: (1, 2.5, 30.0, 40, 16.0), 3: (1, 1.5, 22.0, 90, 11.0), 4: (4, 3.0, 36.0, 60, 20.0)}
"""Case -> starts, module, worm diameter, wheel teeth, face width [mm]."""
FILM = 0.006


def pair_of(
    case: int = 1,
    *,
    alpha: float = 20.0,
    profile: str = "ZA",
    hand: Literal["right", "left"] = "right",
    shift: float = 0.0,
    thinner: float = 0.0,
) -> Pair:
    starts, m, d1, teeth, _ = SIZES[case]
    worm = Thread(
        profile=profile,
        starts=starts,
        axial_module=m,
        reference_diameter=d1,
        tip_diameter=d1 + 2.0 * m,
        pressure_angle=math.radians(alpha),
        thickness=math.pi * m / 2.0 - thinner,
        hand=hand,
    )
    return Pair(thread=worm, teeth=teeth, centre_distance=(d1 + m * teeth) / 2.0 + shift * m)


def blank_of(case: int = 1, *, face: float | None = None, shift: float = 0.0) -> Blank:
    _, m, d1, teeth, b = SIZES[case]
    return Blank(
        face_width=face or b,
        throat_diameter=m * teeth + 2.0 * m * (1.0 + shift),
        throat_radius=d1 / 2.0 - m,
        outside_diameter=m * teeth + m * (3.0 + 2.0 * shift),
    )


def cut_of(case: int = 1, radius: float = 29.75, **errors: float) -> Cut:
    """Nominal cut with the errors added: tilt and clearance to their nominal value, the rest from 0."""
    starts, m, d1, _, _ = SIZES[case]
    tilt, clearance = math.atan(starts * m / d1) + errors.pop("tilt", 0.0), 0.2 * m + errors.pop("clearance", 0.0)
    return Cut(radius=radius, tilt=tilt, clearance=clearance, **errors)


class Wheel:
    """A pair with its grid and sections, run with one cutter after another."""

    def __init__(
        self, pair: Pair, blank: Blank, *, side: Literal[1, -1] = 1, rows: int = 48, columns: int = 97
    ) -> None:
        self.pair, self.blank = pair, blank
        self.flank: Flank = wheel_flank(pair, blank, side=side, rows=rows, columns=columns)
        self.gap = sections(pair, blank)

    def insert(self, cut: Cut, kind: str = "envelope") -> Insert:
        return envelope_insert(self.gap, cut) if kind == "envelope" else mid_plane_insert(self.gap, cut)

    def map(self, cut: Cut, insert: Insert) -> EaseOff:
        return ease_off(self.flank, insert, cut)

    def run(self, cut: Cut, insert: Insert, *, film: float = FILM, mounting: Mounting = AS_CUT) -> Contact:
        return contact(self.flank, self.map(cut, insert).angle, film=film, mounting=mounting)


ARCMIN = math.radians(1.0 / 60.0)
MICRON = 1e-3


def planes(flank: Flank) -> np.ndarray:
    return np.broadcast_to(flank.z, flank.r.shape)


def hollow_where_contact_begins(rolling_radius: float, *, reach: float, pressure_angle: float) -> float:
    """Radius of a ZA pair's mid-plane profile where contact begins, its smallest [mm]: r2 sin alpha - reach/sin alpha.

    reach  how far the worm's tip comes inside the rolling circle [mm]; without shift the worm's addendum, m
    Source: radius of an involute at the end of the path of contact (textbook of gears).
    """
    return rolling_radius * math.sin(pressure_angle) - reach / math.sin(pressure_angle)
