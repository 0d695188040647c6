"""ISO 14253-1:2017, decision rules for verifying conformity (from memory; the standard was not opened).

The measurement uncertainty works against whoever claims: conformity is proven inside the limit less a guard band, non-
conformity outside the limit plus it. With one limit and 95 % the band is 1.65 standard uncertainties: Phi(1.65) = 0.9505.
Limit 50, u = 2: accepted up to 46.7, neither 46.08 (1.96 u) nor 46.0 (2 u); a reading of 47 conforms with 93.3 %.
"""

from __future__ import annotations

import pytest
from scipy.stats import norm

from setupcheck.rulebook.judging import GUARD_FACTOR, judge

from .bench import UM, findings, stack


def trued(measured: float, uncertainty: str = "standard_uncertainty: 2 um") -> str:
    """A collar indicated before it is cut: 50 um were planned, `measured` was read (invented part and job)."""
    return f"""
setupcheck: 1
title: A collar trued under the indicator
units: mm
machines: {{lathe-A: {{kind: lathe, axis_runout: 0 um}}}}
parts:
  collar:
    surfaces:
      rim:  {{kind: cylinder, diameter: 80, from: 0, to: 20, made: stock}}
      face: {{kind: face, at: 20, facing: +z, diameter: 80, made: stock}}
      bore: {{kind: bore, diameter: 40, from: 0, to: 20}}
    given:
      - {{of: face, about: rim, face_runout: 0 um, across: 70}}
setups:
  - op: 10
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre: {{on: rim, by: four-jaw, runout: {{at_most: 50 um, measured: {measured} um, {uncertainty}}}}}
      square: {{on: face, by: parallels, face_runout: 0 um, across: 70}}
      stop:   {{on: face, error: 0 um}}
    cut: {{bore: {{}}}}
require:
  - {{what: run-out, of: collar.bore, about: collar.rim, at_most: 200 um}}
"""


def verdict(job: str) -> str:
    """What HOLD-007 says about the reading on the rim."""
    (found,) = [f for f in findings(job, "HOLD-007") if f.at == "setups.10.hold.centre"]
    return found.verdict


def test_the_guard_factor_is_the_one_sided_95_percent_of_the_normal_law() -> None:
    assert 0.9505 == pytest.approx(norm.cdf(GUARD_FACTOR), abs=0.00005)
    assert norm.ppf(0.95) == pytest.approx(GUARD_FACTOR, abs=0.006)


@pytest.mark.parametrize(
    ("measured", "expected"),
    [(46.0, "pass"), (46.7, "pass"), (46.71, "warn"), (47.0, "warn"), (50.0, "warn"), (53.3, "warn"), (53.31, "fail")],
)
def test_a_reading_is_judged_by_the_limit_and_its_guard_band(measured: float, expected: str) -> None:
    # limit 50, u = 2: 46.7 is the last that proves conformity, 53.3 the last that does not prove the opposite
    assert expected == verdict(trued(measured))
    assert expected == judge(measured, high=50.0, level="fail", standard_uncertainty=2.0).verdict


def test_an_expanded_uncertainty_is_halved_before_it_guards() -> None:
    # k = 2: 4 um expanded are 2 um standard, so 46.7 passes and 46.71 does not
    assert "pass" == verdict(trued(46.7, "uncertainty: 4 um"))
    assert "warn" == verdict(trued(46.71, "uncertainty: 4 um"))


def test_without_an_uncertainty_the_limit_itself_decides() -> None:
    assert ["pass", "fail"] == [
        judge(v, high=50.0, level="fail", standard_uncertainty=0.0).verdict for v in (50.0, 50.1)
    ]


def test_a_reading_of_47_conforms_with_93_percent_and_so_proves_nothing() -> None:
    # Phi((50 - 47)/2) = Phi(1.5) = 0.933 < 0.95
    assert 0.933 == pytest.approx(norm.cdf((50.0 - 47.0) / 2.0), abs=0.0005)
    assert "warn" == verdict(trued(47.0))


def test_a_lower_limit_is_guarded_in_the_other_direction() -> None:
    words = [judge(v, low=50.0, level="fail", standard_uncertainty=2.0).verdict for v in (53.3, 53.29, 46.7, 46.69)]
    assert ["pass", "warn", "warn", "fail"] == words


def test_the_uncertainty_of_a_reading_stays_in_the_stack_as_well() -> None:
    # the ring of 23.35 um carries its blur of three standard uncertainties of the eccentricity: 2 (23.35 + 3 x 1) um
    assert 2.0 * (46.7 / 2.0 + 3.0 * 1.0) * UM == pytest.approx(stack(trued(46.7)).combined.worst.high)
