"""Does the ledger, walked from a job file, agree with the exact simulation on random routes?

Every figure is compared twice: as it is, and with all errors twenty times smaller, where the terms of second order that
the ledger leaves out are twenty times less beside the figure. Lengths mm, angles as arcs on 100 mm (leans) or 50 mm.
"""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
import pytest

from setupcheck.ledger.account import Account
from setupcheck.quantities import causes

from ..rigidbody.random_routes import SHARP, any_route
from ..rigidbody.route import Join, Setup
from .comparing import Compared, Comparison, largest
from .sayable import Sayable, sayable
from .three_parts import three_part_route

UM = 1e-3
TWO_PARTS_OR_ONE, THREE_PARTS = 200, 40
STEEP = 2e-4  # mm: routes with larger terms of second order are left out
SETTLED = 1e-8  # mm: to which holds settle in the simulation, and draws are rounded in single precision


@dataclass(frozen=True, eq=False, slots=True)
class Tried:
    """A route that was compared; `second_order` is the largest part of a figure that does not grow with the errors."""

    name: str
    given: Sayable
    job: str
    results: list[Compared]
    second_order: float


def tried(number: int, *, three: bool = False) -> Tried | None:
    """One random route, None where a hold does not settle or the route is too steep."""
    rng = np.random.default_rng([number, three])
    given = three_part_route(rng) if three else sayable(any_route(rng), rng)
    try:
        comparison = Comparison(given)
        results = comparison.results(rng)
    except ArithmeticError:
        return None
    found = max(largest(r.measured - r.sharp) for r in results if not r.undetermined) / (1.0 - SHARP)
    name = f"{'three parts, ' if three else ''}number {number}"
    return Tried(name, given, comparison.job.text, results, found) if found <= STEEP else None


def several(count: int, *, three: bool) -> Iterator[Tried]:
    number = 0
    while count:
        found = tried(number, three=three)
        number += 1
        if found is not None:
            count -= 1
            yield found


@pytest.fixture(scope="module")
def routes() -> list[Tried]:
    return [*several(TWO_PARTS_OR_ONE, three=False), *several(THREE_PARTS, three=True)]


def test_every_figure_agrees_within_the_terms_of_second_order(routes: list[Tried]) -> None:
    for route in routes:
        allowed = 1.2 * route.second_order + SETTLED
        for one in route.results:
            if one.asked.predicted is not None:
                wrong = largest(one.asked.predicted - one.measured)
                assert wrong <= allowed, f"{route.name}, {one.asked.name}: {wrong / UM:.4f} of {allowed / UM:.4f} um"


def test_what_is_left_shrinks_as_terms_of_second_order_do(routes: list[Tried]) -> None:
    for route in routes:
        allowed = 1.2 * SHARP * route.second_order + 2.0 * SETTLED
        for one in route.results:
            if one.asked.predicted is not None:
                wrong = largest(one.asked.predicted - one.sharp)
                assert wrong <= allowed, f"{route.name}, {one.asked.name}: {wrong / UM:.4f} of {allowed / UM:.4f} um"


def test_a_figure_is_open_exactly_when_it_depends_on_what_nobody_stated(routes: list[Tried]) -> None:
    for route in routes:
        for one in route.results:
            open_ = one.asked.predicted is None
            assert open_ == one.undetermined, f"{route.name}, {one.asked.name}: {'open' if open_ else 'known'}"


def test_the_routes_are_flat_enough_to_tell_a_micrometre(routes: list[Tried]) -> None:
    # figures of 5 .. 100 um against terms of second order of some hundredths of one
    assert np.median([r.second_order for r in routes]) < 0.05 * UM
    sizes = [largest(one.measured) for r in routes for one in r.results if not one.undetermined]
    assert np.median(sizes) > 10.0 * UM


def test_routes_of_every_kind_were_met(routes: list[Tried]) -> None:
    census: Counter[str] = Counter()
    for route in routes:
        census.update(_kinds(route))
        census.update({one.asked.kind for one in route.results})
        census.update({f"{one.asked.kind} open" for one in route.results if one.asked.predicted is None})
    few = {kind: census[kind] for kind, least in LEAST.items() if census[kind] < least}
    assert not few


LEAST = {
    "reversed": 150,
    "same way": 150,
    "two planes": 100,
    "centred and squared": 150,
    "point stop": 60,
    "ring stop": 60,
    "no stop": 50,
    "flush stop": 25,
    "clock": 60,
    "no clock": 150,
    "jaw": 60,
    "radial dial": 100,
    "face dial": 100,
    "clearance": 100,
    "device": 100,
    "device that comes back": 8,
    "joined same way": 45,
    "joined reversed": 50,
    "squared by bore": 50,
    "squared by shoulder": 50,
    "mounting not said": 10,
    "cut after joining": 50,
    "cut after joining, inner part": 30,
    "three parts": 40,
    "oblique right": 25,
    "oblique left": 25,
    "readout step": 20,
    "cut again": 40,
    "offset": 180,
    "lean": 180,
    "length": 150,
    "length open": 40,
    "wobble": 80,
    "flank ccw": 80,
    "flank cw": 80,
    "index ccw": 80,
    "gaps": 100,
    "angle": 80,
    "angle open": 20,
    "cumulative-pitch": 80,
    "single-pitch": 80,
    "index-range": 80,
    "mid-plane": 60,
    "position": 80,
    "chord": 60,
    "pitch-circle": 60,
    "coaxial": 150,
    "allowance": 40,
}
"""So many routes of each kind at least."""


def _kinds(route: Tried) -> set[str]:
    found: set[str] = set()
    joined, cut_before = False, set()
    for step in route.given.route.steps:
        if isinstance(step, Join):
            joined = True
            found |= {"joined same way" if step.way > 0 else "joined reversed"}
            found |= {"squared by bore" if step.square.kind == "bore squares" else "squared by shoulder"}
            continue
        assert isinstance(step, Setup)
        found |= {step.hold.kind, step.clock.kind, "same way" if step.looks_at_tool > 0 else "reversed"}
        flush = step.stop.kind == "point stop" and step.stop.radius == 0.0
        found.add("flush stop" if flush else step.stop.kind)
        if joined:
            found |= {"cut after joining", *(["cut after joining, inner part"] if step.part == "spindle" else [])}
        now = {cut.surface for cut in step.cuts}
        found |= {"cut again"} if now & cut_before else set()
        cut_before |= now
    lead = route.given.lead_angle
    found |= {"oblique right" if lead > 0 else "oblique left"} if lead and "wheel.teeth" in cut_before else set()
    found |= {"three parts"} if len(route.given.route.parts) == 3 else set()
    found |= {"mounting not said"} if joined and not route.given.mounting_said else set()
    words = {"jaw": "high_at: jaw", "radial dial": "by: indicator", "face dial": "face_runout: {measured"}
    words |= {"clearance": "clearance:", "device": "device: fixture", "readout step": "step: "}
    found |= {kind for kind, text in words.items() if text in route.job}
    devices = Counter(re.findall(r"device: (fixture [^,]+),", route.job))
    return found | ({"device that comes back"} if any(n > 1 for n in devices.values()) else set())


def test_a_ledger_that_forgot_to_mirror_a_reversed_part_would_be_seen(monkeypatch: pytest.MonkeyPatch) -> None:
    def not_mirrored(vector: Account, *, sg: int, inserted_at: float) -> Account:
        return vector * complex(np.exp(-1j * inserted_at))

    monkeypatch.setattr(causes, "part_vector", not_mirrored)
    with pytest.raises(AssertionError, match=r"number \d+, .* um"):
        test_every_figure_agrees_within_the_terms_of_second_order(list(several(10, three=False)))
