"""Laws of the figures: no draw passes the worst case, shares make a whole, units and processes do not matter."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.flow import review
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import TRUNCATION, TRUNCATION_2D, Cause
from setupcheck.ledger.combine import combine
from setupcheck.ledger.draws import Draws
from setupcheck.quantities.book import Open
from setupcheck.quantities.stacks import build
from setupcheck.report.json import as_data, as_json

from .drawn_jobs import REQUIRE, Node, built, few, fewer, in_inches, jobs, loaded, stacks, walked

SINGLE_PRECISION = 2e-6
"""Draws are made in single precision: rounding of a sum of some dozen of them, relative to the figure."""
JOBS = sorted((Path(__file__).parents[3] / "jobs").glob("*.yaml"))


@few
@given(jobs())
def test_no_draw_passes_the_worst_case_of_any_figure(job: Node) -> None:
    draws = Draws(2000)
    for name, one in built(walked(job)).items():
        found = combine(one.figure, draws, low=None, high=None, confidence=0.95)
        values = one.figure.sample(draws)
        room = SINGLE_PRECISION * max(abs(found.worst.low), abs(found.worst.high))
        assert found.worst.high + room >= values.max(), name
        assert found.worst.low - room <= values.min(), name


@few
@given(jobs(), st.sampled_from([0.6, 0.9, 0.95, 0.999]))
def test_the_likely_value_never_passes_the_worst_case_and_grows_with_confidence(job: Node, confidence: float) -> None:
    draws = Draws(2000)
    for name, one in built(walked(job)).items():
        low, high = (-1.0, 1.0) if one.figure.signed else (None, 1.0)
        found = combine(one.figure, draws, low=low, high=high, confidence=confidence)
        surer = combine(one.figure, draws, low=low, high=high, confidence=(1.0 + confidence) / 2.0)
        assert found.worst.low <= found.likely.low <= found.likely.high <= found.worst.high, name
        assert found.likely.high <= surer.likely.high, name
        assert surer.likely.low <= found.likely.low, name


@few
@given(jobs())
def test_shares_make_a_whole_and_stand_biggest_first(job: Node) -> None:
    draws = Draws(10)
    for name, one in built(walked(job)).items():
        found = combine(one.figure, draws, low=None, high=1.0, confidence=0.95)
        pushed = [s for s in found.shares if s.worst]
        if pushed:
            assert 1.0 == pytest.approx(sum(s.share for s in found.shares)), name
        worst = [s.worst for s in found.shares]
        assert worst == sorted(worst, reverse=True), name


@few
@given(jobs())
def test_the_pushes_of_the_causes_add_up_to_the_worst_case(job: Node) -> None:
    for name, one in built(walked(job)).items():
        found = combine(one.figure, Draws(10), low=None, high=1.0, confidence=0.95)
        assert found.worst.high == pytest.approx(found.base + sum(p.up for p in one.figure.pushes())), name


@few
@given(jobs())
def test_a_limit_at_the_worst_case_is_met_for_certain_and_one_below_the_least_draw_never(job: Node) -> None:
    draws = Draws(500)
    for stack in stacks(floor := walked(job)):
        made = build(floor, stack)
        assert not isinstance(made, Open)
        worst = combine(made.figure, draws, low=None, high=None, confidence=0.95).worst
        assert 1.0 == combine(made.figure, draws, low=None, high=worst.high, confidence=0.95).chance
        least = float(made.figure.sample(draws).min())
        under = least - 1e-4 * max(abs(least), 1e-6)
        assert 0.0 == combine(made.figure, draws, low=None, high=under, confidence=0.95).chance


@pytest.mark.parametrize("spread", [0.001, 0.02])
def test_gaussian_causes_end_where_their_bound_says(spread: float) -> None:
    draws = Draws(200_000)
    length = np.abs(draws.cause(Cause("length", "gauss", spread=spread)))
    vector = np.abs(draws.cause(Cause("vector", "blur", spread=spread)))
    radius = np.abs(draws.cause(Cause("ring", "ring", high=10 * spread, spread=spread))) - 10 * spread
    rounding = 1.0 + SINGLE_PRECISION
    assert length.max() <= TRUNCATION * spread * rounding
    assert vector.max() <= TRUNCATION_2D * spread * rounding
    assert np.abs(radius).max() <= TRUNCATION * spread * rounding * 1.001  # beside a radius ten times as large
    # and they come near it: 200,000 draws leave none of the last tenth of a standard deviation empty
    assert length.max() > (TRUNCATION - 0.1) * spread
    assert vector.max() > (TRUNCATION_2D - 0.1) * spread


LAWS = [
    Cause("disc", "disc", high=0.02),
    Cause("ring", "ring", high=0.02, spread=0.001),
    Cause("vector", "blur", spread=0.002, mean=0.01 + 0.004j),
    Cause("free", "clearance-disc", low=0.002, high=0.02),
    Cause("hung", "clearance-ring", low=0.002, high=0.02),
    Cause("zero", "rectangle", low=0.004, high=0.007),
    Cause("bound", "length", high=0.01),
    Cause("reading", "gauss", spread=0.002, mean=0.003 + 0j),
    Cause("chip", "one-sided", high=0.01),
]


@pytest.mark.parametrize("cause", LAWS, ids=lambda c: c.law)
def test_no_draw_of_any_law_passes_its_bound_or_falls_on_the_wrong_side(cause: Cause) -> None:
    values = Draws(50_000).cause(cause)
    assert np.abs(values - cause.mean).max() <= cause.bound * (1.0 + SINGLE_PRECISION)
    assert np.abs(values - cause.mean).max() > 0.9 * cause.bound
    if cause.is_real:
        assert not values.imag.any()
    if cause.is_one_sided:
        assert values.real.min() >= 0.0


def test_a_high_point_is_as_high_as_the_vector_under_it_is_long() -> None:
    draws, under = Draws(1000), Account.of(LAWS[0]) * 2.0 + Account.of(LAWS[2])
    high = Cause("high", "high-point", of=under)
    assert np.abs(draws.account(under)) == pytest.approx(draws.cause(high).real)
    assert under.largest() == pytest.approx(high.bound)


# -- units and bytes -----------------------------------------------------------------------------------------------------


def numbers(tree: object, at: str = "") -> dict[str, float]:
    """Every number of a report by its way; counts, lines, checksums and the steps of a dial left out."""
    if isinstance(tree, dict):
        keep = {k: v for k, v in tree.items() if k not in ("line", "lines", "sha256", "counts", "step")}
        return {way: v for k, node in keep.items() for way, v in numbers(node, f"{at}.{k}").items()}
    if isinstance(tree, list):
        return {way: v for i, node in enumerate(tree) for way, v in numbers(node, f"{at}.{i}").items()}
    return {at: float(tree)} if isinstance(tree, int | float) and not isinstance(tree, bool) else {}


@few
@given(jobs())
def test_an_inch_file_of_the_same_job_gives_the_same_numbers(job: Node) -> None:
    metric, inch = (numbers(as_data(review(loaded(one)))) for one in (job, in_inches(job)))
    assert metric.keys() == inch.keys()
    for way, value in metric.items():
        assert value == pytest.approx(inch[way], rel=1e-9, abs=1e-9), way


def test_every_kind_of_figure_is_asked_of_the_drawn_jobs() -> None:
    assert {
        "run-out",
        "coaxial",
        "face-run-out",
        "squareness",
        "length",
        "cumulative-pitch",
        "single-pitch",
        "gap-centre-pitch",
        "index-within",
        "on-workpiece",
        "backlash-swing",
        "mid-plane",
        "position",
        "chord",
        "pitch-circle",
        "symmetry",
        "flank-run-off",
        "depth-run-off",
        "allowance",
    } == {str(r["what"]) for r in REQUIRE}


@fewer
@given(jobs())
def test_a_job_read_twice_gives_the_same_bytes(job: Node) -> None:
    assert as_json(review(loaded(job))) == as_json(review(loaded(job)))


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.stem)
def test_two_processes_with_other_hash_seeds_give_the_same_bytes(job: Path) -> None:
    printed = []
    for salt in ("1", "2"):
        found = subprocess.run(
            [sys.executable, "-m", "setupcheck", "review", "--json", str(job)],
            env={**os.environ, "PYTHONHASHSEED": salt},
            cwd=Path(__file__).parents[3],
            capture_output=True,
            check=False,
        )
        assert found.returncode in (0, 1, 3), found.stderr.decode()
        printed.append(found.stdout)
    assert printed[0] == printed[1]
    assert json.loads(printed[0])["stacks"]
