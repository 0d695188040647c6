"""Ease-off: what a plunged cut leaves free of metal against the flank that would run exactly. Lengths mm, angles rad."""

from __future__ import annotations

import math

import numpy as np

from setupcheck.record import record
from setupcheck.worm.helicoid import Array
from setupcheck.worm.plunge_gap import Cut, Insert, cut_gap
from setupcheck.worm.wheel_flank import Flank


@record(eq=False)
class EaseOff:
    """Ease-off map of one flank; arrays (rows, columns) on the flank's grid.

    angle    of the flank as cut, from the gap's middle [rad]
    missing  along the arc, r (TH_cut - TH), side taken in: positive where metal is missing, negative where it stands in
             the worm's way [mm]; a gap wider than the thread raises the whole map
    """

    flank: Flank
    angle: Array
    missing: Array

    @property
    def square(self) -> Array:
        """The same square to the flank [mm]."""
        return self.missing * self.flank.square

    @property
    def play(self) -> float:
        """Smallest value where the thread touches [mm of arc]: the room before this flank touches; negative: jammed."""
        return float(self.missing[self.flank.inside].min())

    @property
    def ends(self) -> tuple[float, float]:
        """What the ends of the face stand back behind the nearest point, square to the flank [mm], at -z and at +z.

        0 where an end itself is the nearest: it takes the load.
        """
        back = np.where(self.flank.inside, self.square, math.inf)
        return float(back[:, 0].min() - back.min()), float(back[:, -1].min() - back.min())


def ease_off(flank: Flank, insert: Insert, cut: Cut) -> EaseOff:
    """Ease-off map of one flank for an insert in a setting.

    Raises: ValueError for a cutter smaller than the worm, an insert too short, or a setting far from what the worm needs.
    Source: `cut_gap` less `conjugate_gap` on the flank's grid.
    """
    z = np.broadcast_to(flank.z, flank.r.shape)
    angle = cut_gap(flank.pair, cut, insert, flank.r, z, side=flank.side, start=flank.angle)
    return EaseOff(flank, angle, flank.side * flank.r * (angle - flank.angle))


def second_order(map_: EaseOff) -> tuple[float, float, float]:
    """Crowning A [1/mm], twist B [1/mm] and C0 of e = A z^2 - B z eta - C0 z about the pitch point, from the map.

    eta = r2 - r. For the right flank of a right-hand pair; the signs of B and C0 turn for the other flank or hand.
    Least squares over a quarter of the face and 0.3 modules up and down, with terms up to the fourth order so that those do
    not leak into the second.
    Source: the second-order form of worm.cutter; derived here.
    """
    f = map_.flank
    z, eta = np.broadcast_to(f.z, f.r.shape), f.pair.rolling - f.r
    half, high = f.blank.face_width / 8.0, 0.3 * f.pair.thread.axial_module
    near = (np.abs(z) <= half) & (np.abs(eta) <= high) & f.inside
    u, w = z[near] / half, eta[near] / high
    powers = [(i, j) for i in range(5) for j in range(5 - i)]
    terms = np.stack([u**i * w**j for i, j in powers], axis=1)
    found = np.linalg.lstsq(terms, map_.missing[near], rcond=None)[0]
    at = dict(zip(powers, found, strict=True))
    return float(at[2, 0]) / half**2, -float(at[1, 1]) / (half * high), -float(at[1, 0]) / half
