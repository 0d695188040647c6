"""CSV files of division tests with planted errors, written as a shop would take them. Shares no code with the program.

The wheel: places theta counter-clockwise from its mark seen from +z; its teeth are off their axis by `e` towards `phi`, its
worm errs `worm` times cos(N theta - worm_at), and each tooth may stray on its own. A worm at a fixed distance touches the
flank that the direction of driving brings to it, so forward and reverse see sin(phi - theta -+ alpha) / cos(alpha).
"""

from __future__ import annotations

import math
import random
from dataclasses import dataclass, field

ARCSEC = math.pi / 648_000.0


@dataclass
class Shop:
    """What is planted. Angles deg, small ones arcsec, lengths mm; drift over the whole test."""

    seed: int
    ratio: int = 72
    radius: float = 54.0
    alpha: float = 20.0
    e: float = 0.008
    phi: float = 96.0
    second: float = 2.0
    second_at: float = 30.0
    worm: float = 3.0
    worm_at: float = 40.0
    drift: float = 5.0
    bend: float = 0.0
    reversal: float = -12.0
    noise: float = 1.0
    teeth: float = 0.0
    collimation: float = 0.0
    zeros: float = 20.0
    rng: random.Random = field(init=False)
    own: dict[int, float] = field(init=False)

    def __post_init__(self) -> None:
        self.rng = random.Random(self.seed)
        self.own = {}

    def place(self, theta: float, side: int) -> float:
        """How far the place at theta [rad] stands too far counter-clockwise [arcsec], read on one flank or on none (0)."""
        a, phi = math.radians(self.alpha) * side, math.radians(self.phi)
        off = self.e / self.radius / math.cos(a) * math.sin(phi - theta - a) / ARCSEC
        off += self.second * math.cos(2.0 * theta - math.radians(self.second_at))
        off += self.worm * math.cos(self.ratio * theta - math.radians(self.worm_at))
        if self.teeth:
            key = round(theta / math.tau * 36000) % 36000
            off += self.own.setdefault(key, self.rng.gauss(0.0, self.teeth))
        return off

    def drifted(self, at: float) -> float:
        """Drift of the instrument [arcsec]: even, and bent with `bend` as its sag or as warming up."""
        return self.drift * at + self.bend * 4.0 * at * (1.0 - at)


def stations(count: int, inside: int = 0, places: tuple[float, ...] = (), crank: float = 5.0) -> list[float]:
    """Stations [deg] of one pass: equal steps round the circle and closing, with some inside a crank turn at a few places."""
    found = [360.0 * k / count for k in range(count + 1)]
    for place in places:
        found += [place + crank * k / inside for k in range(1, inside)]
    return sorted(found)


def rows(shop: Shop, passes: list[tuple[int, int]], at: list[float], *, turned: bool) -> list[dict[str, float]]:
    """All readings of some passes (run, direction) over the stations, in time: run, direction, station, deviation [arcsec]."""
    total = len(passes) * len(at)
    zeros = {run: shop.rng.uniform(-shop.zeros, shop.zeros) for run, _ in passes}
    found: list[dict[str, float]] = []
    for run, direction in passes:
        for station in at if direction > 0 else at[::-1]:
            theta = math.radians(-station if turned else station)
            ccw = direction if turned else -direction
            off = shop.place(theta, ccw)
            off = -off if turned else off
            off += zeros[run] + shop.drifted(len(found) / (total - 1)) + shop.reversal * direction / 2.0
            off += shop.rng.gauss(0.0, shop.noise)
            found.append({"run": run, "direction": direction, "station": station, "off": off})
    return found


def one_flank(shop: Shop, at: list[float]) -> list[dict[str, float]]:
    """One pass over places of the work, all driven clockwise."""
    return rows(shop, [(1, 1)], at, turned=False)


def as_deviations(found: list[dict[str, float]], *, column: str, direction: bool = True) -> str:
    """A file of deviations, one line a reading."""
    lines = [f"{column},deviation_arcsec,run" + (",direction" if direction else "")]
    for row in found:
        cells = [f"{row['station']:.6f}", f"{row['off']:.3f}", str(row["run"])]
        lines.append(",".join([*cells, *(["forward" if row["direction"] > 0 else "reverse"] if direction else [])]))
    return "\n".join(lines) + "\n"


def as_circle(shop: Shop, found: list[dict[str, float]], *, orientation: float) -> str:
    """A theodolite that rides on the work, both faces, circle in degrees, minutes and seconds; semicolons and a BOM."""
    lines = ["turned_dms;reading_dms;run;direction;face"]
    for row in found:
        for face, half, sign in (("left", 0.0, -1.0), ("right", 180.0, 1.0)):
            seen = orientation + row["station"] + half
            seconds = seen * 3600.0 + row["off"] + sign * shop.collimation + shop.rng.gauss(0.0, 0.3 * shop.noise)
            way = "forward" if row["direction"] > 0 else "reverse"
            lines.append(f"{dms(row['station'] * 3600.0)};{dms(seconds % 1_296_000.0)};{row['run']};{way};{face}")
    return "\ufeff" + "\r\n".join(lines) + "\r\n"


def dms(seconds: float) -> str:
    tenths = round(seconds * 10.0)
    degrees, rest = divmod(tenths, 36000)
    minutes, rest = divmod(rest, 600)
    return f"{degrees}deg {minutes}' {rest / 10:.1f}\""


def pitch_off(found: list[dict[str, float]], *, pitch: float, at: float, later: bool, runs: tuple[int, ...]) -> None:
    """A slip of counting, in place: one station of some runs (or that and every later one of the pass) is a pitch off."""
    for row in found:
        if row["run"] in runs and (row["station"] == at or (later and row["station"] > at)):
            row["off"] += pitch * 3600.0
