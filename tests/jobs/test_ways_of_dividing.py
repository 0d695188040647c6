"""Every way of dividing through a job file, against a plain simulation that draws the errors of each place and shares no code.

The disc and the plate are invented, and true but for their division, so that nothing else is in the figures.
"""

from __future__ import annotations

import json
import math
from collections.abc import Callable

import numpy as np
import pytest
import yaml
from numpy.typing import NDArray

from setupcheck.division.order import cutting_order
from setupcheck.errors import JobError
from setupcheck.quantities.book import Open
from tests.jobs.divided_jobs import RADIUS, disc
from tests.published.bench import ARCSEC, findings, reviewed, stack

Reals = NDArray[np.float64]
MANY = 60_000
LIKELY = 0.02
"""The 95 % value of 20,000 draws against that of 60,000: relative, some four standard deviations of such a quantile."""


class Drawing:
    """Errors drawn place by place; at the `corners` every error has its bound, to one side or the other."""

    def __init__(self, trials: int, *, corners: bool) -> None:
        self.rng, self.trials, self.corners = np.random.default_rng(7), trials, corners

    def each(self, bound: float, count: int) -> Reals:
        values = self.rng.uniform(-1.0, 1.0, (self.trials, count))
        return bound * (np.sign(values) if self.corners else values)

    def one(self, bound: float) -> Reals:
        return self.each(bound, 1)

    def vector(self, bound: float) -> tuple[Reals, Reals]:
        """(length, direction) of an error anywhere in a disc; each (trials, 1)."""
        length = bound * (1.0 if self.corners else np.sqrt(self.rng.uniform(0.0, 1.0, (self.trials, 1))))
        return length * np.ones((self.trials, 1)), self.rng.uniform(0.0, math.tau, (self.trials, 1))


def around(count: int) -> Reals:
    return math.tau * np.arange(count) / count


def wave(d: Drawing, amplitude: float, times: int, count: int) -> Reals:
    length, phase = d.vector(amplitude)
    return length * np.cos(times * around(count) - phase)


def rounded(count: int, step: float) -> Reals:
    return np.round(around(count) / step) * step - around(count)


def walking_round(d: Drawing, off: float, target: float, count: int) -> Reals:
    """Exact: what an instrument that walks round the axis sees of a target at rest."""
    length, phase = d.vector(off)
    turned = around(count) + phase
    return np.arctan2(length * np.sin(turned), target - length * np.cos(turned))


def leaning(d: Drawing, lean: float, slope: float, count: int) -> Reals:
    """Exact: the circle reading of an instrument whose upright axis leans with the table, less that of one that does not."""
    length, phase = d.vector(lean)
    azimuth = around(count) + phase  # of the target from where the axis leans to, counted on the table
    sight = np.stack(
        [np.cos(azimuth) * math.cos(slope), np.sin(azimuth) * math.cos(slope), math.sin(slope) + 0 * azimuth]
    )
    c, s = np.cos(length), np.sin(length)
    across = c * sight[0] - s * sight[2]  # the sight from the leaning axis: turned back about y
    return np.angle(np.exp(1j * (np.arctan2(sight[1], across) - azimuth)))


def joint(d: Drawing, lean: float, count: int) -> Reals:
    """Exact: the angle of a standard that leans, seen along its own axis, less that of the table.

    Drawn so that its square lies anywhere in a disc, as any wave is drawn; a lean anywhere in a disc would do less.
    """
    length, phase = d.vector(lean**2)
    turned = around(count) + phase
    ahead = np.arctan2(np.sin(turned), np.cos(turned) / np.cos(np.sqrt(length))) - turned
    return np.angle(np.exp(1j * ahead))


def bar(d: Drawing, length: float, blocks: float, quarters: float, count: int) -> Reals:
    """Exact: the arcsine of the stack as it is, from the nearest quarter turn; the four of them each off."""
    start = np.floor(4.0 * np.arange(count) / count + 0.5)
    rest = around(count) - start * math.pi / 2.0
    stack_wanted = length * np.sin(np.abs(rest))
    error = d.each(blocks, count) * (np.abs(rest) > 1e-9)
    off = d.each(quarters, 4)
    return np.arcsin((stack_wanted + error) / length) - np.abs(rest) + off[:, start.astype(int) % 4]


def drifting(d: Drawing, drift: float, count: int, order: str) -> Reals:
    share = np.empty(count)
    for turn, number in enumerate(cutting_order(count, order)):  # type: ignore[arg-type]
        share[number - 1] = turn / (count - 1)
    return d.one(drift) * share


MINUTE = 60.0 * ARCSEC
DEG = math.pi / 180.0
CASES: dict[str, tuple[str, int, Callable[[Drawing], Reals]]] = {
    "direct": (
        '{by: direct, positions: 24, positions_error: 20", setting: 5", wheel: {once_per_turn: 8"}}',
        8,
        lambda d: d.each(20 * ARCSEC, 8) + d.each(5 * ARCSEC, 8) + wave(d, 8 * ARCSEC, 1, 8),
    ),
    "vernier": (
        "{by: vernier, step: 5', setting: 1', wheel: {once_per_turn: 40\"}}",
        7,
        lambda d: rounded(7, 5 * MINUTE) + d.each(MINUTE, 7) + wave(d, 40 * ARCSEC, 1, 7),
    ),
    "readout": (
        '{by: readout, setting: 3", clamp: 2", wheel: {once_per_turn: 4", twice_per_turn: 6"}, worm: {once_per_crank: 0"}}',
        9,
        lambda d: d.each(3 * ARCSEC, 9) + d.each(2 * ARCSEC, 9) + wave(d, 4 * ARCSEC, 1, 9) + wave(d, 6 * ARCSEC, 2, 9),
    ),
    "rotary-table": (
        '{by: rotary-table, setting: 3", wheel: {once_per_turn: 10"}, worm: {once_per_crank: 6"}}',
        36,
        lambda d: d.each(3 * ARCSEC, 36) + wave(d, 10 * ARCSEC, 1, 36) + wave(d, 6 * ARCSEC, 40, 36),
    ),
    "theodolite, one face": (
        '{by: theodolite, faces: one, setting: 2", sighting: 1", centring: 0.5 mm, target: 4 m, plumb: 1\', '
        'elevation: 20 deg, collimation: 30", trunnion: 20", wheel: {once_per_turn: 6"}}',
        12,
        lambda d: (
            d.each(2 * ARCSEC, 12)
            + d.each(ARCSEC, 12)
            + walking_round(d, 0.5, 4000.0, 12)
            + leaning(d, MINUTE, 20 * DEG, 12)
            + wave(d, 6 * ARCSEC, 1, 12)
        ),
    ),
    "theodolite, both faces": (
        '{by: theodolite, faces: two, setting: 4", sighting: 1", centring: 0.1 mm, target: 10 m, '
        'plumb: 0", elevation: 20 deg, collimation: 30", wheel: {once_per_turn: 60"}}',
        12,
        lambda d: d.each(4 * ARCSEC, 12) + d.each(ARCSEC, 12) + walking_round(d, 0.1, 10_000.0, 12),
    ),
    "theodolite, mixed faces": (
        '{by: theodolite, faces: mixed, setting: 4", sighting: 1", centring: 0 mm, target: 10 m, '
        'plumb: 0", elevation: 30 deg, collimation: 5", trunnion: 0", wheel: {once_per_turn: 0"}}',
        5,
        lambda d: (
            d.each(4 * ARCSEC, 5)
            + d.each(ARCSEC, 5)
            + np.sign(d.each(1.0, 5)) * 5 * ARCSEC / math.cos(30 * DEG)  # 5.77"
        ),
    ),
    "polygon": (
        '{by: polygon, sides: 24, sides_error: 0.5", sighting: 0.3", polygon_tilt: 15\'}',
        8,
        lambda d: d.each(0.5 * ARCSEC, 8) + d.each(0.3 * ARCSEC, 8) + joint(d, 15 * MINUTE, 8),
    ),
    "face-teeth": (
        '{by: face-teeth, positions: 360, positions_error: 0.25", setting: 0.05"}',
        6,
        lambda d: d.each(0.25 * ARCSEC, 6) + d.each(0.05 * ARCSEC, 6),
    ),
    "sine-bar": (
        '{by: sine-bar, sine_bar: 200, blocks: 2 um, quarters: 3"}',
        10,
        lambda d: bar(d, 200.0, 0.002, 3 * ARCSEC, 10),
    ),
    "drift in turn": (
        '{by: face-teeth, positions: 24, positions_error: 3", setting: 0", drift: 20"}',
        24,
        lambda d: d.each(3 * ARCSEC, 24) + drifting(d, 20 * ARCSEC, 24, "in-turn"),
    ),
    "drift spread": (
        '{by: face-teeth, positions: 24, positions_error: 3", setting: 0", drift: 20", order: spread}',
        24,
        lambda d: d.each(3 * ARCSEC, 24) + drifting(d, 20 * ARCSEC, 24, "spread"),
    ),
}


def figures(errors: Reals) -> tuple[Reals, Reals]:
    """(range, largest step between neighbours) of the arcs of all trials [mm]."""
    arcs = RADIUS * errors
    return arcs.max(axis=1) - arcs.min(axis=1), np.abs(arcs - np.roll(arcs, 1, axis=1)).max(axis=1)


@pytest.mark.parametrize("case", CASES)
def test_the_likely_value_is_that_of_the_plain_simulation(case: str) -> None:
    divide, count, errors = CASES[case]
    drawn = figures(errors(Drawing(MANY, corners=False)))
    for i, values in enumerate(drawn):
        expected = float(np.quantile(values, 0.95))
        assert expected == pytest.approx(stack(disc(divide, count), i).combined.likely.high, rel=LIKELY), i


@pytest.mark.parametrize("case", CASES)
def test_no_corner_passes_the_worst_case_and_none_but_waves_stay_far_below(case: str) -> None:
    """Waves and scatters reach their worst at one angle only; random corners come within a fifth of it."""
    divide, count, errors = CASES[case]
    at_corners = figures(errors(Drawing(MANY, corners=True)))
    for i, values in enumerate(at_corners):
        worst = stack(disc(divide, count), i).combined.worst.high
        assert 0.8 * worst < float(values.max()) <= worst * 1.0005, i


@pytest.mark.parametrize("case", CASES)
def test_no_way_that_states_everything_is_open(case: str) -> None:
    divide, count, _ = CASES[case]
    opened = [f for f in reviewed(disc(divide, count)).evaluation.findings if f.verdict == "open"]
    assert {f.at for f in opened} <= {"setups.10.divide.clamp"}  # which half of the cases leave out


DEFAULTS = {
    "clamp": "clamping shifts nothing",
    "drift": "nothing drifts",
    "order": "places are cut one after the other",
    "sighting": "the setting holds the sighting too",
    "step": "nothing is rounded",
    "faces": "one face only matters to what is stated of the circle, and DIVIDE-009 asks",
}
"""Keys of a division that may be left out, and what is taken then."""


@pytest.mark.parametrize("case", CASES)
def test_no_figure_moves_in_silence_when_a_key_is_left_out(case: str) -> None:
    divide, count, _ = CASES[case]
    whole = yaml.safe_load(divide)
    for key in set(whole) - {"by"} - set(DEFAULTS):
        text = disc(json.dumps({k: v for k, v in whole.items() if k != key}), count)
        try:
            found = reviewed(text)
        except JobError:
            continue
        moved = [
            i for i in (0, 1) if stack(text, i).combined.worst.high != stack(disc(divide, count), i).combined.worst.high
        ]
        said = [
            f for f in found.evaluation.findings if f.verdict == "open" or (f.rule, f.verdict) == ("DIVIDE-004", "warn")
        ]
        assert said or not moved, key


def test_both_ways_of_drifting_have_one_range_and_only_one_a_slow_wave() -> None:
    in_turn, spread = (CASES[case][0] for case in ("drift in turn", "drift spread"))
    ranges = [stack(disc(divide, 24)).combined.worst.high for divide in (in_turn, spread)]
    assert ranges[0] == pytest.approx(ranges[1])
    (warned,) = findings(disc(in_turn, 24), "DIVIDE-013")
    assert warned.verdict == "warn"
    assert "order: spread" in (warned.remedy or "")
    assert ["pass"] == [f.verdict for f in findings(disc(spread, 24), "DIVIDE-013")]


# -- holes by coordinates

HOLES = 6
CIRCLE = 37.3


def plate(divide: str, *, facing: str = "+z") -> str:
    """A plate with holes drilled by coordinates, found and held without error."""
    side, at, seat = ("-z", 0, "back") if facing == "+z" else ("+z", 10, "front")
    return f"""
setupcheck: 1
title: A plate drilled by coordinates
units: mm
machines: {{mill-A: {{kind: mill, axis_runout: 0 um}}}}
cutters: {{drill: {{kind: drill, diameter: 5}}}}
parts:
  plate:
    surfaces:
      bore:  {{kind: bore, diameter: 20, from: 0, to: 10, made: stock}}
      {seat}: {{kind: face, at: {at}, facing: {side}, diameter: 100, made: stock}}
      holes: {{kind: holes, count: {HOLES}, on_circle: {2.0 * CIRCLE:g}, at: 5, diameter: 5, angle: 10 deg}}
setups:
  - op: 10
    machine: mill-A
    looks_at_tool: {facing}
    hold:
      centre: {{on: bore, by: indicator, at: 5, runout: 0 um}}
      square: {{on: {seat}, by: table, face_runout: 0 um, across: 80}}
      stop:   {{on: {seat}, error: 0 um}}
    divide: {divide}
    cut: {{holes: {{cutter: drill, error: 0 um}}}}
require:
  - {{what: position, of: plate.holes, about: plate.bore, at_most: 0.5 mm}}
  - {{what: chord, of: plate.holes, at_most: 0.5 mm}}
  - {{what: pitch-circle, of: plate.holes, at_most: 0.5 mm}}
  - {{what: run-out, of: plate.holes, about: plate.bore, at_most: 0.5 mm}}
  - {{what: gap-centre-pitch, of: plate.holes, about: plate.bore, at_most: 0.5 mm}}
"""


def drilled(d: Drawing, x: float, y: float, step: float) -> list[Reals]:
    """The figures of the plate from where its holes really are: position, chord, circle, run-out, division."""
    drawn = CIRCLE * np.exp(1j * (10.0 * DEG + around(HOLES)))
    aim = np.round(drawn.real / step) * step + 1j * np.round(drawn.imag / step) * step if step else drawn
    there = aim + d.each(x, HOLES) + 1j * d.each(y, HOLES)
    off = there * np.exp(-1j * np.angle(drawn))  # outward and round the circle
    turn = np.angle(off)
    middle = (
        turn.max(axis=1, keepdims=True) + turn.min(axis=1, keepdims=True)
    ) / 2.0  # the pattern may turn as a whole
    fitted = there * np.exp(-1j * middle)
    apart = np.abs(there - np.roll(there, 1, axis=1)) - 2.0 * CIRCLE * math.sin(math.pi / HOLES)
    radius = np.abs(there)
    return [
        2.0 * np.abs(fitted - drawn).max(axis=1),
        np.abs(apart).max(axis=1),
        2.0 * (radius.mean(axis=1) - CIRCLE),
        radius.max(axis=1) - radius.min(axis=1),
        CIRCLE * (turn.max(axis=1) - turn.min(axis=1)),
    ]


COORDINATES = {
    "both alike": ("{by: x-y, x: 5 um, y: 5 um}", 0.005, 0.005, 0.0),
    "one axis worse": ("{by: x-y, x: 12 um, y: 3 um}", 0.012, 0.003, 0.0),
    "rounded": ("{by: x-y, x: 2 um, y: 2 um, step: 50 um}", 0.002, 0.002, 0.05),
    "nothing but rounded": ("{by: x-y, x: 0 um, y: 0 um, step: 20 um}", 0.0, 0.0, 0.02),
}
SECOND_ORDER = 2e-5
"""Holes 25 um beside their place on a radius of 37 mm stand t^2/r farther out, counted on the diameter [mm]."""


@pytest.mark.parametrize("case", COORDINATES)
@pytest.mark.parametrize("facing", ["+z", "-z"])
def test_holes_by_coordinates_are_where_a_plain_simulation_puts_them(case: str, facing: str) -> None:
    divide, x, y, step = COORDINATES[case]
    text = plate(divide, facing=facing)
    for i, values in enumerate(drilled(Drawing(MANY, corners=False), x, y, step)):
        found = stack(text, i).combined
        expected = float(np.quantile(values, 0.95))
        assert expected == pytest.approx(found.likely.high, rel=LIKELY, abs=SECOND_ORDER), i


@pytest.mark.parametrize("case", COORDINATES)
def test_no_corner_of_the_coordinates_passes_the_worst_case(case: str) -> None:
    divide, x, y, step = COORDINATES[case]
    for i, values in enumerate(drilled(Drawing(MANY, corners=True), x, y, step)):
        worst = stack(plate(divide), i).combined.worst.high
        assert float(values.max()) <= worst + SECOND_ORDER, i
        assert float(values.max()) >= 0.7 * worst - SECOND_ORDER, i


def test_holes_without_the_errors_of_their_coordinates_are_open() -> None:
    found = reviewed(plate("{by: x-y, x: 5 um}"))
    assert "setups.10.divide.y" in {p for f in found.evaluation.findings if f.verdict == "open" for p in f.missing}
    assert [Open(("setups.10.divide.y",))] * 5 == [
        found.book.get("stack.combined", scope) for scope in found.book.instances("stack")
    ]
    found = reviewed(plate("{by: x-y}"))
    assert [Open(("setups.10.divide.x", "setups.10.divide.y"))] * 5 == [
        found.book.get("stack.combined", scope) for scope in found.book.instances("stack")
    ]


def test_a_single_place_by_coordinates_is_open_without_them() -> None:
    text = plate("{by: x-y}").replace(f"count: {HOLES}", "count: 1")
    lines = [line for line in text.splitlines() if "chord" not in line and "gap-centre" not in line]
    found = reviewed("\n".join(lines))
    missing = {p for f in found.evaluation.findings if f.verdict == "open" for p in f.missing}
    assert {"setups.10.divide.x", "setups.10.divide.y"} <= missing


def test_teeth_are_not_set_by_coordinates() -> None:
    found = reviewed(disc("{by: x-y, x: 5 um, y: 5 um}", 12))
    scope = found.book.instances("stack")[0]
    assert Open(("setups.10.divide.by",)) == found.book.get("stack.combined", scope)
