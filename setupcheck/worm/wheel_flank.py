"""The flank of a wheel as a grid of points: what of the conjugate gap lies inside the wheel's blank. mm, rad."""

from __future__ import annotations

import math

import numpy as np

from setupcheck.record import record
from setupcheck.worm.conjugate import Pair, Side, conjugate_gap, first_contact, lowest_reach, roll_of
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.helicoid import Array, flank_across, flank_slope

ROWS, COLUMNS = 48, 97
"""Points up the flank and along the face. Halving both steps moves a contact share by less than 1 % (tests/unit/worm)."""


@record(kw_only=True)
class Blank:
    """Outside of the wheel's teeth [mm]: a throat or a plain rim.

    face_width        of the teeth
    throat_diameter   outside in the mid-plane, da2
    throat_radius     of the hollow, its centre in the mid-plane; None for a plain rim of the throat diameter
    outside_diameter  over the corners of the hollow; None: the hollow runs to the ends of the face
    Raises: ValueError for sizes not above zero or a hollow that does not go with them.
    """

    face_width: float
    throat_diameter: float
    throat_radius: float | None = None
    outside_diameter: float | None = None

    def __post_init__(self) -> None:
        above_zero(face_width=self.face_width, throat_diameter=self.throat_diameter)
        if self.throat_radius is None:
            if self.outside_diameter is not None and self.outside_diameter != self.throat_diameter:
                raise ValueError("a plain rim has one diameter; a hollow one needs its throat radius")
            return
        above_zero(throat_radius=self.throat_radius)
        if self.outside_diameter is not None and self.outside_diameter < self.throat_diameter:
            raise ValueError(
                f"the outside diameter {self.outside_diameter:g} mm must not be below the throat's {self.throat_diameter:g} mm"
            )
        if self.outside_diameter is None and not self.throat_radius > self.face_width / 2.0:
            raise ValueError(
                f"a hollow of {self.throat_radius:g} mm radius cannot be {self.face_width:g} mm wide: state the outside "
                f"diameter, where it ends, or a narrower face"
            )

    def top(self, z: Array) -> Array:
        """Radius of the tooth's tip in the planes z [mm], any shape.

        >>> blank = Blank(face_width=16.0, throat_diameter=105.0, throat_radius=12.5, outside_diameter=107.5)
        >>> [round(float(r), 3) for r in blank.top(np.array([0.0, 4.0, 8.0]))]
        [52.5, 53.157, 53.75]
        """
        throat = self.throat_diameter / 2.0
        if self.throat_radius is None:
            return np.full(np.shape(z), throat)
        highest = math.inf if self.outside_diameter is None else self.outside_diameter / 2.0
        under = self.throat_radius**2 - np.square(z)
        hollow = throat + self.throat_radius - np.sqrt(np.maximum(under, 0.0))
        return np.where(under > 0.0, np.minimum(hollow, highest), highest)


@record(eq=False)
class Flank:
    """One flank of the conjugate gap on a grid; arrays of shape (rows, columns) unless stated.

    z       planes, (columns,), from one end of the face to the other [mm]
    r       radii, every column from where the worm's tip comes to up to the tooth's tip [mm]
    angle   TH, conjugate flank from the gap's middle [rad]
    roll    travel of the rack at which each point is touched [mm]
    inside  whether the thread's flank touches the point, and not only its tip edge
    square  cosine between the arc at r and the surface's normal: an arc times this is the distance square to the flank
    area    area of the flank that belongs to each point [mm^2]; none where only the thread's tip edge passes
    """

    pair: Pair
    blank: Blank
    side: Side
    z: Array
    r: Array
    angle: Array
    roll: Array
    inside: np.ndarray
    square: Array
    area: Array


def wheel_flank(pair: Pair, blank: Blank, *, side: Side = 1, rows: int = ROWS, columns: int = COLUMNS) -> Flank:
    """The conjugate flank inside the blank as a grid.

    rows, columns  points up the flank and along the face, both at least 8
    Raises: ValueError for a face or throat that the worm does not reach, or a tooth that runs into the worm's axis.
    Source: `conjugate_gap`; its slopes are those of the function under the maximum, with the place of the maximum held.
    """
    if min(rows, columns) < 8:
        raise ValueError("a grid of fewer than 8 rows or columns shows nothing: 30 and more are usual")
    z = np.linspace(-blank.face_width / 2.0, blank.face_width / 2.0, columns)
    bottom, top = ends_of_flank(pair, blank, z)
    up = np.linspace(1e-6, 1.0, rows)  # the tooth's tip is a row of its own: its edge carries where a flank is wrong
    r = bottom + (top - bottom) * up[:, np.newaxis]
    planes = np.broadcast_to(z, r.shape)
    gap = conjugate_gap(pair, r, planes, side=side)
    if np.isnan(gap.angle).any():
        raise ValueError("the worm does not reach the whole flank: a narrower face is needed")
    h = pair.centre_distance - r * np.cos(gap.turned)
    s, c = np.sin(gap.turned), np.cos(gap.turned)
    up_profile = r / pair.rolling * (flank_slope(pair.thread, h, planes, side=side) * c - s)  # r dTH/dr
    along = r / pair.rolling * flank_across(pair.thread, h, planes, side=side)  # r dTH/dz
    square = 1.0 / np.sqrt(1.0 + up_profile**2 + along**2)
    step = np.full(columns, z[1] - z[0])
    step[[0, -1]] /= 2.0
    high = (top - bottom) / (rows - 1) * np.ones_like(r)
    touched = np.clip((r - first_contact(pair, z, side=side)) / high + 0.5, 0.0, 1.0)
    touched[-1] /= 2.0
    return Flank(
        pair=pair,
        blank=blank,
        side=side,
        z=z,
        r=r,
        angle=gap.angle,
        roll=roll_of(pair, gap, r, planes, side=side),
        inside=gap.inside,
        square=square,
        area=touched * high * step / square,
    )


def ends_of_flank(pair: Pair, blank: Blank, z: Array) -> tuple[Array, Array]:
    """Lowest and highest radius of the flank in the planes z [mm]: where the worm's tip comes to, and the tooth's tip.

    Raises: ValueError for a face or throat that the worm does not reach, or teeth that run into the worm's core.
    """
    half = blank.face_width / 2.0
    if not half < pair.thread.tip:
        raise ValueError(
            f"a face of {blank.face_width:g} mm is as wide as the worm's tip diameter {pair.thread.tip_diameter:g} mm: "
            f"its ends are never reached; at most the tip diameter less the depth of the teeth is right"
        )
    bottom, top = lowest_reach(pair, z), blank.top(z)
    if not float(top[len(z) // 2]) > pair.lowest:
        raise ValueError(
            f"the throat of {blank.throat_diameter:g} mm does not reach the worm: its tip comes to {2.0 * pair.lowest:g} mm"
        )
    if not np.all(top > bottom):
        reach = 2.0 * float(np.abs(z[top > bottom]).max(initial=0.0))
        raise ValueError(
            f"a face of {blank.face_width:g} mm is wider than throat and worm allow: the worm reaches {reach:.3g} mm of it"
        )
    nearest = float(np.min(np.hypot(pair.centre_distance - top, z)))
    if not nearest > 0.3 * pair.thread.radius:
        raise ValueError("the teeth run into the worm's core: a smaller throat or outside diameter is needed")
    return bottom, top
