"""Chase, K. W. and Greenwood, W. H. (1988), Design issues in mechanical tolerance analysis (also Chase, Basic tools for
tolerance analysis of mechanical assemblies): the shaft and housing with two bearings, seven parts.

gap = -0.0505 + 8.000 - 0.5093 + 0.400 - 7.711 + 0.400 - 0.5093 = 0.0199 in
tolerances 0.0015, 0.008, 0.0025, 0.002, 0.006, 0.002, 0.0025 in;  wanted 0.020 +- 0.015 in
Figures from memory, sums recomputed here: worst case 0.0245 in (fails), root sum of squares 0.01108 in (passes), yield
99.995 % when every part is normal with its tolerance at three standard deviations.

Through a job file in inches: shaft with its groove and ring are one bought part, sleeves, housing and the far bearing
another, the near bearing a spacer at the joint's stop. With +- the ledger takes lengths as rectangular; with a standard
uncertainty as normal, cut at three of them.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.special import erf

from .bench import INCH, MANY, findings, reviewed, sampled, share_error, stack
from .quadrature import Sum, cut_deviation, cut_normal, normal, rectangular

PARTS = {
    "ring": (0.0505, 0.0015),
    "shaft": (8.000, 0.008),
    "bearing": (0.5093, 0.0025),
    "sleeve": (0.400, 0.002),
    "housing": (7.711, 0.006),
    "sleeve 2": (0.400, 0.002),
    "bearing 2": (0.5093, 0.0025),
}
TOLERANCES = [t for _, t in PARTS.values()]
GAP = 0.0199
WORST = 0.0245
RSS = 0.01108
THOU = 0.001


def toleranced(part: str) -> str:
    return f"{PARTS[part][0]} ±{PARTS[part][1]}"


def normal_at_three_sigma(part: str) -> str:
    size, tolerance = PARTS[part]
    return f"{{nominal: {size}, uncertainty: {tolerance * 2.0 / 3.0:.12f} in}}"  # expanded, k = 2


def job(length, limit: str = "between: [0.005 in, 0.035 in]") -> str:
    """The seven parts as a job file; `length` writes one length with its error."""
    return f"""
setupcheck: 1
title: Shaft, two bearings and their housing
units: in
confidence: 95 %
parts:
  housing:
    surfaces:
      bore:   {{kind: bore, diameter: 1.25, from: 0, to: 6.5}}
      seat_1: {{kind: face, at: 0, facing: -z, diameter: 1.2}}
      lip_1:  {{kind: face, at: -0.400, facing: +z, diameter: 1.5}}
      lip_2:  {{kind: face, at: 7.311, facing: -z, diameter: 1.5}}
      seat_2: {{kind: face, at: 6.911, facing: +z, diameter: 1.2}}
      far:    {{kind: face, at: 7.4203, facing: +z, diameter: 1.0}}
    given:
      - {{of: lip_1, from: seat_1, length: {length("sleeve")}}}
      - {{of: lip_2, from: lip_1, length: {length("housing")}}}
      - {{of: seat_2, from: lip_2, length: {length("sleeve 2")}}}
      - {{of: far, from: seat_2, length: {length("bearing 2")}}}
  shaft:
    surfaces:
      journal:  {{kind: cylinder, diameter: 1.25, from: 0, to: 7.9}}
      shoulder: {{kind: face, at: 0, facing: +z, diameter: 1.4}}
      groove:   {{kind: face, at: 8.000, facing: -z, diameter: 1.2}}
      ring:     {{kind: face, at: 7.9495, facing: -z, diameter: 1.4}}
    given:
      - {{of: groove, from: shoulder, length: {length("shaft")}}}
      - {{of: ring, from: groove, length: {length("ring")}}}
setups:
  - op: 10
    join:
      outer: housing.bore
      inner: shaft.journal
      by: slide
      clearance: [0.1 thou, 0.5 thou]
      square: shoulder
      stop: {{on: housing.seat_1, against: shaft.shoulder, spacers: [{{name: bearing, length: {length("bearing")}}}]}}
require:
  - {{what: length, of: shaft.ring, about: housing.far, {limit}}}
"""


RECTANGULAR = job(toleranced)
NORMAL = job(normal_at_three_sigma)


@pytest.mark.parametrize("text", [RECTANGULAR, NORMAL])
def test_worst_case_and_root_sum_of_squares_are_the_published_ones(text: str) -> None:
    c = stack(text).combined
    assert GAP == pytest.approx(c.base / INCH, abs=1e-9)
    assert WORST == pytest.approx((c.worst.high - c.base) / INCH, abs=1e-9)
    assert WORST == pytest.approx((c.base - c.worst.low) / INCH, abs=1e-9)
    assert RSS == pytest.approx((c.rss.high - c.base) / INCH, abs=0.5e-5)


def test_seven_causes_are_found_without_writing_a_chain() -> None:
    shares = stack(RECTANGULAR).combined.shares
    assert sorted(TOLERANCES) == pytest.approx(sorted(s.worst / INCH for s in shares))
    assert 1.0 == pytest.approx(sum(s.share for s in shares))
    assert "housing" in shares[1].cause.key and "shaft" in shares[0].cause.key


def test_the_worst_case_fails_and_root_sum_of_squares_passes() -> None:
    c = stack(NORMAL).combined
    assert c.worst.high / INCH > 0.035 and c.worst.low / INCH < 0.005
    assert 0.005 < c.rss.low / INCH and c.rss.high / INCH < 0.035
    # the rules: beyond the limit at worst, but likelier than the job asks for, so a warning on both sides
    assert ["warn"] == [f.verdict for f in findings(NORMAL, "STACK-001")]
    assert ["warn"] == [f.verdict for f in findings(NORMAL, "STACK-002")]
    upper = findings(NORMAL, "STACK-001")[0]
    assert (GAP + WORST) * INCH == pytest.approx(upper.value)
    assert 0.035 * INCH == pytest.approx(upper.limit)


def test_a_job_that_asks_for_more_than_the_chance_fails() -> None:
    # rectangular parts keep 0.005 .. 0.035 in with 98.9 % by quadrature: enough for 98 %, too little for 99.5 %
    exact = Sum([rectangular(t / THOU) for t in TOLERANCES])
    assert 0.989 == pytest.approx(exact.below(15.1) - exact.below(-14.9), abs=0.0005)
    enough, more = (RECTANGULAR.replace("confidence: 95 %", f"confidence: {c} %") for c in (98, 99.5))
    assert ["warn"] == [f.verdict for f in findings(enough, "STACK-001")]
    assert ["fail"] == [f.verdict for f in findings(more, "STACK-001")]
    assert "fail" == reviewed(more).verdict


def test_normal_parts_yield_99_995_percent() -> None:
    # yield at sigma = 0.011079/3 with limits 0.0151 above and 0.0149 below: 99.9951 %, 1 in 20,000 outside
    sigma = math.hypot(*TOLERANCES) / 3.0
    yielded = 0.5 * (erf(0.0151 / sigma / math.sqrt(2.0)) + erf(0.0149 / sigma / math.sqrt(2.0)))
    assert 0.999951 == pytest.approx(yielded, abs=0.5e-6)
    values = sampled(NORMAL, trials=MANY) / INCH
    outside = int(np.sum((values < 0.005) | (values > 0.035)))
    cut = Sum([cut_normal(t / THOU) for t in [x / 3.0 for x in TOLERANCES]])
    expected = MANY * (1.0 - cut.below(15.1) + cut.below(-14.9))
    assert expected == pytest.approx(outside, abs=4.0 * math.sqrt(expected))
    assert expected < MANY * (1.0 - yielded)  # cutting the laws can only help
    chance = stack(NORMAL).combined.chance
    assert chance is not None
    assert yielded == pytest.approx(chance, abs=4.0 * math.sqrt((1.0 - yielded) / 20_000))


def test_the_rectangular_stack_agrees_with_the_quadrature() -> None:
    exact = Sum([rectangular(t / THOU) for t in TOLERANCES])
    inside = exact.below(15.1) - exact.below(-14.9)
    c = stack(RECTANGULAR).combined
    assert c.chance is not None
    assert inside == pytest.approx(c.chance, abs=share_error(inside))
    many = sampled(RECTANGULAR, trials=MANY) / INCH
    share = float(np.mean((many >= 0.005) & (many <= 0.035)))
    assert inside == pytest.approx(share, abs=share_error(inside, MANY))
    for end, p in ((c.likely.low, 0.025), (c.likely.high, 0.975)):
        assert p == pytest.approx(exact.below((end / INCH - GAP) / THOU), abs=share_error(0.025))


@pytest.mark.parametrize("terms", [rectangular, cut_normal])
def test_draws_and_quadrature_agree_over_the_whole_distribution(terms) -> None:
    # Kolmogorov distance: beyond 2.1/sqrt n once in 3,000 times (Kolmogorov's law, 2 exp(-2 x^2))
    text, scale = (RECTANGULAR, 1.0) if terms is rectangular else (NORMAL, 1.0 / 3.0)
    exact = Sum([terms(t / THOU * scale) for t in TOLERANCES])
    values = np.sort((sampled(text, trials=MANY) / INCH - GAP) / THOU)
    for x in np.linspace(-18.0, 18.0, 19):
        share = np.searchsorted(values, x) / MANY
        assert exact.below(float(x)) == pytest.approx(share, abs=2.1 / math.sqrt(MANY)), x


def test_the_cut_takes_what_the_quadrature_says_and_no_more() -> None:
    sigma = math.hypot(*TOLERANCES) / 3.0
    found = float(np.std(sampled(NORMAL, trials=MANY))) / INCH
    assert sigma * cut_deviation() == pytest.approx(found, rel=0.005)
    whole, cut = (Sum([law(t / THOU / 3.0) for t in TOLERANCES]) for law in (normal, cut_normal))
    assert cut_deviation() == pytest.approx(cut.quantile(0.975, 20.0) / whole.quantile(0.975, 20.0), abs=0.002)
