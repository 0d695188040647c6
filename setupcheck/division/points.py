"""From rows to points: stations as angles, deviations without whole pitches, one point for both faces. Angles rad."""

from __future__ import annotations

import itertools
import math
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from setupcheck.division.faces import Collimation, wrapped
from setupcheck.division.readings import Readings
from setupcheck.errors import SetupcheckError
from setupcheck.record import record

Reals = NDArray[np.floating]

CLEAR = 0.1
"""Share of a pitch within which the readings must lie after whole pitches are taken off. Our screening choice."""


@record(eq=False)
class Points:
    """One value a station and time, in the frame of the file.

    theta  station [rad], not wrapped;  y  deviation [rad];  t  time, 0 first to 1 last
    run, direction, line  as in `Readings`
    """

    theta: Reals
    y: Reals
    t: Reals
    run: NDArray[np.int32]
    direction: NDArray[np.int8]
    line: NDArray[np.int32]

    def __len__(self) -> int:
        return len(self.y)


@record
class Whole:
    """A stretch of rows that stand whole pitches off: how many, from line to line, stations [rad]; single  one station."""

    pitches: int
    pitch: float
    first_line: int
    last_line: int
    theta: float
    theta_last: float
    rows: int


@record(eq=False)
class Prepared:
    """Points and what was found on the way to them."""

    points: Points
    collimation: Collimation | None
    whole: tuple[Whole, ...]
    against: bool
    limits: tuple[str, ...]


def prepare(readings: Readings, *, count: int, worm_ratio: float | None, start: float, turn: int) -> Prepared:
    """Points of a file.

    count       teeth of the work;  worm_ratio  turns of the worm for one of the work
    start, turn direction of the first gap and the sense in which they follow, as in the ledger; for `tooth`
    Raises: SetupcheckError for teeth the wheel has not, and readings whose sense cannot be told.
    """
    theta = _stations(readings, count=count, start=start, turn=turn)
    limits: list[str] = []
    time = _times(readings)
    y: Reals = readings.value
    against = False
    if readings.how == "reading":
        y, against = _deviations(readings, theta)
    points = Points(theta, y, time, readings.run, readings.direction, readings.line)
    whole: tuple[Whole, ...] = ()
    for unit in (math.tau / count, *((math.tau / worm_ratio,) if worm_ratio else ())):
        if not whole:
            points, whole = _without_pitches(points, unit)
    points, collimation = _faces(points, readings.face, limits, -1.0 if against else 1.0)
    limits += _told(readings, points)
    return Prepared(_tidied(points), collimation, whole, against, tuple(limits))


def _stations(readings: Readings, *, count: int, start: float, turn: int) -> Reals:
    if readings.kind != "tooth":
        return readings.station
    wrong = np.flatnonzero(readings.station > count)
    if len(wrong):
        at = int(wrong[0])
        raise SetupcheckError(
            f"{readings.file}:{readings.line[at]}: there is no tooth {readings.station[at]:g} on a wheel of {count}. "
            f"Write 1 to {count}; the first again is 1"
        )
    return start + turn * math.tau * (readings.station - 0.5) / count  # tooth n stands half a pitch on from gap n


def _times(readings: Readings) -> Reals:
    """Minutes, or numbers of the rows where none are told: those follow each other evenly. `_tidied` makes 0 to 1 of them."""
    return readings.minutes if readings.minutes is not None else np.arange(len(readings), dtype=float)


def _deviations(readings: Readings, theta: Reals) -> tuple[Reals, bool]:
    """Deviations of an instrument's own readings, each run about its own zero; and whether its circle counts against.

    Face right reads half a turn more. Which way the circle counts is seen from the readings themselves.
    """
    shown = readings.value - np.where(readings.face == 2, math.pi, 0.0)
    held = [float(np.abs(_sums(np.exp(1j * (shown - s * theta)), readings.run)).sum()) for s in (1, -1)]
    if abs(held[0] - held[1]) < 0.05 * len(shown):
        raise SetupcheckError(
            f"{readings.file}: from these readings nobody can tell which way the circle of the instrument counts. "
            "Read at stations that are not half a turn apart, or write deviation_arcsec"
        )
    sense = 1 if held[0] > held[1] else -1
    off = sense * shown - theta
    return wrapped(off - np.angle(_sums(np.exp(1j * off), readings.run))[readings.run]), sense < 0


def _sums(values: NDArray[np.complexfloating], run: NDArray[np.int32]) -> NDArray[np.complexfloating]:
    """Sum of the values of each run."""
    return np.asarray(np.bincount(run, values.real) + 1j * np.bincount(run, values.imag))


def _without_pitches(points: Points, pitch: float) -> tuple[Points, tuple[Whole, ...]]:
    """The points with whole pitches taken off, and where they were; untouched where the readings scatter too much to tell.

    A run counts from where most of its readings stand.
    """
    steps = np.zeros(len(points), dtype=int)
    rest = np.array(points.y)
    for run in np.unique(points.run):
        mine = points.run == run
        own = points.y[mine]
        base = _level(own, pitch)
        steps[mine] = np.rint((own - base) / pitch)
        rest[mine] = own - steps[mine] * pitch - base
    if not steps.any() or np.abs(rest - np.median(rest)).max() > CLEAR * pitch:
        return points, ()
    found = []
    order = np.arange(len(points))
    edges = [0, *(np.flatnonzero(np.diff(steps) | np.diff(points.run)) + 1).tolist(), len(points)]
    for low, high in itertools.pairwise(edges):
        if steps[low]:
            rows = order[low:high]
            found.append(
                Whole(int(steps[low]), pitch, int(points.line[rows[0]]), int(points.line[rows[-1]]),
                      float(points.theta[rows[0]]), float(points.theta[rows[-1]]), high - low)
            )  # fmt: skip
    return replace(points, y=points.y - steps * pitch), tuple(found)


def _level(own: Reals, pitch: float) -> float:
    """Where most readings of a run stand: the middle of the fullest cluster when they are folded by the pitch."""
    middle = float(np.angle(np.exp(2j * math.pi * own / pitch).sum())) / math.tau * pitch
    steps = np.rint((own - middle) / pitch)
    values, times = np.unique(steps, return_counts=True)
    return middle + float(values[np.argmax(times)]) * pitch


def _faces(
    points: Points, face: NDArray[np.int8], limits: list[str], sense: float
) -> tuple[Points, Collimation | None]:
    """One point a pair of faces. A reading that has only one is put right by the mean collimation of the others."""
    told = face > 0
    if not told.any():
        return points, None
    if not ((face == 1).any() and (face == 2).any()):
        limits.append(
            "all readings are in one face: collimation and trunnion of the instrument are not seen, and an eccentric circle "
            "of the instrument reads like an eccentric wheel: read both faces"
        )
        return points, None
    if not told.all():
        limits.append(f"{int((~told).sum())} readings name no face and count as they stand")
    key = np.stack([points.run, points.direction, np.rint(points.theta * 1e9).astype(np.int64)], axis=1)
    _, group = np.unique(key, axis=0, return_inverse=True)
    left, right = _paired(group.ravel(), face)
    if not len(left):
        limits.append("no station has both faces in one run and direction: collimation stays in the readings")
        return points, None
    half = wrapped(points.y[right] - points.y[left]) / 2.0
    y, t, keep = np.array(points.y), np.array(points.t), np.ones(len(points), bool)
    y[left] += half
    t[left] = (points.t[left] + points.t[right]) / 2.0
    keep[right] = False
    alone = np.setdiff1d(np.flatnonzero(told), np.concatenate([left, right]))
    y[alone] += np.where(face[alone] == 1, 1.0, -1.0) * half.mean()
    if len(alone):
        limits.append(
            f"{len(alone)} readings have only one face and were put right by the mean collimation: line "
            + ", ".join(str(n) for n in points.line[alone[:5]])
        )
    made = Points(points.theta, y, t, points.run, points.direction, points.line)
    return _only(made, keep), Collimation(
        sense * float(half.mean()), float(half.max() - half.min()), len(half), len(alone)
    )


def _paired(group: NDArray[np.int64], face: NDArray[np.int8]) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
    """Rows of face left and of face right of one group, the first with the first and so on."""

    def ranked(which: int) -> dict[tuple[int, int], int]:
        seen: dict[int, int] = {}
        found = {}
        for row in np.flatnonzero(face == which).tolist():
            g = int(group[row])
            seen[g] = seen.get(g, -1) + 1
            found[g, seen[g]] = row
        return found

    one, two = ranked(1), ranked(2)
    both = [k for k in one if k in two]
    return np.array([one[k] for k in both], dtype=int), np.array([two[k] for k in both], dtype=int)


def _only(points: Points, keep: NDArray[np.bool_]) -> Points:
    return Points(*(getattr(points, name)[keep] for name in ("theta", "y", "t", "run", "direction", "line")))


def without(points: Points, rows: NDArray[np.int64]) -> Points:
    """The points without some rows."""
    keep = np.ones(len(points), bool)
    keep[rows] = False
    return _only(points, keep)


def _tidied(points: Points) -> Points:
    """Time from 0 to 1 again, and runs counted without gaps."""
    span = float(np.ptp(points.t)) or 1.0
    runs = np.unique(points.run, return_inverse=True)[1].astype(np.int32)
    return replace(points, t=(points.t - points.t.min()) / span, run=runs)


def _told(readings: Readings, points: Points) -> list[str]:
    """What is not there, or not in the order it says."""
    found = []
    if readings.empty:
        lines = ", ".join(str(n) for n in readings.empty[:5]) + (" …" if len(readings.empty) > 5 else "")
        count = len(readings.empty)
        those = "1 line has no reading and is" if count == 1 else f"{count} lines have no reading and are"
        found.append(f"{those} left out: line {lines}")
    if (points.direction == 0).any() and points.direction.any():
        found.append(f"{int((points.direction == 0).sum())} readings name no direction, others do")
    turns = 0
    for run in np.unique(points.run):
        for direction in np.unique(points.direction[points.run == run]):
            steps = np.diff(points.theta[(points.run == run) & (points.direction == direction)])
            turns += bool((steps > 1e-9).any() and (steps < -1e-9).any())
    if turns:
        passes = "1 pass" if turns == 1 else f"{turns} passes"
        found.append(f"in {passes} the stations go back and forth: drift is followed by time, not by angle")
    if _backwards(readings):
        found.append(
            "the stations of a pass go the other way than its direction says: forward is the way stations grow, of teeth their "
            "numbers. Which flank was read follows from it: if each station was not come to from that side, exchange the names"
        )
    return found


def _backwards(readings: Readings) -> bool:
    """Whether the stations of some pass, as they are written, all go against the direction it names."""
    for run in np.unique(readings.run):
        for direction in (1, -1):
            steps = direction * np.diff(readings.station[(readings.run == run) & (readings.direction == direction)])
            if (steps < -1e-9).any() and not (steps > 1e-9).any():
                return True
    return False


def gap_of(points: Points) -> tuple[float, float, float] | None:
    """(where it begins, where it ends, usual step) of a stretch of the circle without stations, [rad]; None where even.

    A stretch of more than 1.6 usual steps; our screening choice.
    """
    at = np.unique(np.round(np.remainder(points.theta, math.tau), 9))
    if len(at) < 4:
        return None
    steps = np.diff(at, append=at[0] + math.tau)
    usual = float(np.median(steps))
    widest = int(np.argmax(steps))
    if steps[widest] < 1.6 * usual or (steps > 1.6 * usual).sum() > len(at) // 4:
        return None
    return float(at[widest]), float(np.remainder(at[widest] + steps[widest], math.tau)), usual
