"""Worm and wheel run slowly against each other: transmission error, where marking blue would be left. mm, rad.

The worm's rack travels by s and the wheel by s/r2; then the wheel drops back until one point of one tooth touches. What it
drops is the transmission error; what is nearer to the thread than the film of blue at any travel is marked. Rigid, no load.
"""

from __future__ import annotations

import math

import numpy as np

from setupcheck.record import record
from setupcheck.worm.geometry import above_zero
from setupcheck.worm.helicoid import Array
from setupcheck.worm.helicoid import flank as thread_flank
from setupcheck.worm.wheel_flank import Flank

PHASES = 24
"""Positions of the mesh in one pitch. Twice as many move a contact share by less than 1 % (tests/unit/worm)."""

BEYOND = 0.6
"""How far beyond the path of contact a tooth is still looked at, in pitches: contact on its edges. From 0.6 on nothing
changes, down to cutters no larger than the worm (own simulation)."""

FAR = 1e9
"""Gap [mm] of a point that no thread passes."""


@record(kw_only=True)
class Mounting:
    """How wheel and worm stand to each other in the housing, against the pair they were cut for [mm, rad].

    distance  centre distance more than the pair's;  axial  the wheel's mid-plane from the worm's axis, along +z
    crossing  angle between the axes more than a right angle: the worm turned about the line of centres, x towards z
    lean      of the wheel about the worm's direction: the +z end of its face away from the worm
    """

    distance: float = 0.0
    axial: float = 0.0
    crossing: float = 0.0
    lean: float = 0.0


AS_CUT = Mounting()


@record(eq=False)
class Contact:
    """What a flank shows after running.

    lag       how far the wheel drops back at each phase of one pitch, (phases,), along the rolling circle [mm]
    nearest   smallest distance of every point of the flank to the thread, square to the flank [mm], (rows, columns)
    marked    share of the cell of every point that is marked, 0 .. 1, (rows, columns)
    share     of the flank's area that is marked;  along_face  of the face's width that carries any marking
    ends      share of the two end columns that is marked: 0 means that the ends are clear
    centre    middle of the marking along the face, +z [mm];  height  its middle over the wheel's rolling circle [mm]
              NaN where nothing is marked
    """

    flank: Flank
    lag: Array
    nearest: Array
    marked: Array
    share: float
    along_face: float
    ends: float
    centre: float
    height: float

    @property
    def transmission_error(self) -> float:
        """From end to end over one pitch, along the rolling circle [mm]."""
        return float(np.ptp(self.lag))

    @property
    def transmission_angle(self) -> float:
        """The same as an angle of the wheel [rad]."""
        return self.transmission_error / self.flank.pair.rolling


def contact(
    flank: Flank, cut_angle: Array, *, film: float, mounting: Mounting = AS_CUT, phases: int = PHASES
) -> Contact:
    """Transmission error over one pitch and marking of one flank.

    cut_angle  angle of the flank as cut at the points of the grid [rad], (rows, columns)
    film       thickness of the marking film, square to the flank [mm], usually 0.005 to 0.007
    All teeth are taken alike: what one tooth does a pitch later, its neighbour does now.
    Raises: ValueError for a film not above zero, fewer than 6 phases, or a worm that misses the flank.
    Source: derived here: gap along x of the cut flank's points to the rack, least over the flank and over neighbouring teeth.

    >>> from setupcheck.worm.conjugate import Pair
    >>> from setupcheck.worm.helicoid import Thread
    >>> from setupcheck.worm.wheel_flank import Blank, wheel_flank
    >>> worm = Thread(profile="ZA", starts=1, axial_module=2.5, reference_diameter=30.0, tip_diameter=35.0,
    ...               pressure_angle=math.radians(20.0), thickness=math.pi * 1.25)
    >>> blank = Blank(face_width=16.0, throat_diameter=105.0, throat_radius=12.5, outside_diameter=107.5)
    >>> flank = wheel_flank(Pair(thread=worm, teeth=40, centre_distance=65.0), blank, rows=32, columns=33)
    >>> full = contact(flank, flank.angle + 1e-4, film=0.006)  # an exact flank, backlash besides
    >>> round(full.share, 2), full.transmission_error < 2e-4
    (1.0, True)
    """
    above_zero(film=film)
    if phases < 6:
        raise ValueError("fewer than 6 phases in a pitch miss what happens between: 24 are usual")
    play = float(np.min((flank.side * (cut_angle - flank.angle))[flank.inside]))  # taken up at once, the rest is small
    gaps, first = _gaps(flank, cut_angle - flank.side * play, mounting, phases)
    least = np.array([_least(g) for g in gaps])
    phase = (first + np.arange(len(gaps))) % phases
    lag = np.full(phases, FAR)
    np.minimum.at(lag, phase, least)
    if lag.max() > FAR / 2.0:
        raise ValueError("the worm misses this flank at some of its positions: its mounting is too far off")
    nearest = np.full(flank.r.shape, FAR)
    for g, k in zip(gaps, phase, strict=True):
        np.minimum(nearest, g - lag[k], out=nearest)
    nearest *= flank.square * flank.r / flank.pair.rolling
    return _contact(flank, lag + play * flank.pair.rolling, nearest, film)


def _gaps(flank: Flank, cut_angle: Array, mounting: Mounting, phases: int) -> tuple[list[Array], int]:
    """Gap along x of every point at every travel at which this tooth may touch, and the number of the first travel."""
    pair, step = flank.pair, flank.pair.thread.pitch / phases
    touched = flank.roll[flank.inside]
    beyond = BEYOND * flank.pair.thread.pitch
    first = math.floor((float(touched.min()) - beyond) / step)
    last = math.ceil((float(touched.max()) + beyond) / step)
    x, y = flank.r * np.sin(cut_angle), flank.r * np.cos(cut_angle)
    out = []
    for k in range(first, last + 1):
        turn = k * step / pair.rolling
        s, c = math.sin(turn), math.cos(turn)
        out.append(_gap(flank, x * c + y * s, y * c - x * s, k * step, mounting))
    return out, first


def _gap(flank: Flank, x: Array, y: Array, travel: float, mounting: Mounting) -> Array:
    """Gap along the worm's axis between points of the wheel and the rack at one travel [mm]."""
    thread = flank.pair.thread
    z = np.broadcast_to(flank.z + mounting.axial, x.shape)
    if mounting.lean:
        z, y = z + mounting.lean * (y - flank.pair.rolling), y - mounting.lean * flank.z
    if mounting.crossing:
        s, c = math.sin(mounting.crossing), math.cos(mounting.crossing)
        x, z = x * c + z * s, z * c - x * s
    h = flank.pair.centre_distance + mounting.distance - y
    beyond = h * h + z * z > thread.tip**2
    return np.where(beyond, FAR, flank.side * (x - travel - thread_flank(thread, h, z, side=flank.side)))


def _least(gap: Array) -> float:
    """Smallest value on the grid, refined by parabolas through its neighbours both ways."""
    i, j = divmod(int(np.argmin(gap)), gap.shape[1])
    least = float(gap[i, j])
    for line, n in ((gap[:, j], i), (gap[i], j)):
        if 0 < n < len(line) - 1 and max(line[n - 1], line[n + 1]) < FAR / 2.0:
            a, b, c = (float(v) for v in line[n - 1 : n + 2])
            if (bend := a - 2.0 * b + c) > 0.0:
                least -= (a - c) ** 2 / (8.0 * bend)
    return least


def _contact(flank: Flank, lag: Array, nearest: Array, film: float) -> Contact:
    marked = coverage(nearest, film)
    weight = marked * flank.area
    total = float(weight.sum())
    ends = np.minimum(nearest[:, [0, -1]], 50.0 * film)
    longest = np.where(flank.area > 0.0, marked, 0.0).max(axis=0)
    step = np.gradient(flank.z)
    step[[0, -1]] /= 2.0
    height = flank.r - flank.pair.rolling
    return Contact(
        flank=flank,
        lag=lag,
        nearest=nearest,
        marked=marked,
        share=total / float(flank.area.sum()),
        along_face=float(longest @ step) / flank.blank.face_width,
        ends=float(_flat(film - ends, np.abs(np.gradient(ends, axis=0))).mean()),
        centre=float((weight * flank.z).sum()) / total if total else math.nan,
        height=float((weight * height).sum()) / total if total else math.nan,
    )


def coverage(distance: Array, film: float) -> Array:
    """Share of every cell in which a distance lies below the film, as if it were flat inside the cell; (rows, columns).

    Source: first order, so that a share changes smoothly with what moves it and not point by point.

    >>> coverage(np.array([[0.0, 0.5, 1.0], [0.0, 0.5, 1.0]]), 0.5).round(2).tolist()
    [[1.0, 0.5, 0.0], [1.0, 0.5, 0.0]]
    """
    d = np.minimum(distance, 50.0 * film)
    up, along = np.gradient(d)
    return _flat(film - d, np.abs(up) + np.abs(along))


def _flat(above: Array, change: Array) -> Array:
    share: Array = np.clip(0.5 + above / np.maximum(change, 1e-12), 0.0, 1.0)
    return share
