"""Quantiles of t and chi-squared against scipy's, which the program itself does not need."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from setupcheck.physics.student_t import LARGEST_NU, OutOfRange, chi2_quantile, t_quantile

SHARES = (0.005, 0.025, 0.05, 0.1, 0.3, 0.6, 0.9, 0.95, 0.975, 0.99, 0.999)
NEAR = 1e-9  # relative; the promise is 1e-6


@pytest.mark.parametrize("nu", [1, 2, 3, *range(4, 201)])
def test_both_are_scipys(nu):
    for p in SHARES:
        assert t_quantile(p, nu) == pytest.approx(stats.t.ppf(p, nu), rel=NEAR)
        assert chi2_quantile(p, nu) == pytest.approx(stats.chi2.ppf(p, nu), rel=NEAR)


@pytest.mark.parametrize("nu", [1.5, 7.25, 1e3, 1e4, LARGEST_NU])
def test_broken_and_large_degrees_of_freedom(nu):
    for p in SHARES:
        assert t_quantile(p, nu) == pytest.approx(stats.t.ppf(p, nu), rel=1e-8)
        assert chi2_quantile(p, nu) == pytest.approx(stats.chi2.ppf(p, nu), rel=1e-8)


@pytest.mark.parametrize("p", [1e-12, 1e-6, 1.0 - 1e-6])
def test_far_tails(p):
    for nu in (1, 2, 4, 30):
        assert t_quantile(p, nu) == pytest.approx(stats.t.ppf(p, nu), rel=1e-6)
        assert chi2_quantile(p, nu) == pytest.approx(stats.chi2.ppf(p, nu), rel=1e-6)


def test_one_degree_is_the_cauchy_law_and_two_have_a_formula():
    assert t_quantile(0.95, 1) == pytest.approx(math.tan(math.pi * 0.45), rel=NEAR)
    assert t_quantile(0.95, 2) == pytest.approx(0.9 / math.sqrt(2.0 * 0.95 * 0.05), rel=NEAR)
    assert chi2_quantile(0.95, 2) == pytest.approx(-2.0 * math.log(0.05), rel=NEAR)


@given(p=st.floats(0.001, 0.999), nu=st.floats(1.0, 500.0))
def test_t_is_odd_and_rises(p, nu):
    assert t_quantile(p, nu) == pytest.approx(-t_quantile(1.0 - p, nu), rel=1e-9, abs=1e-12)
    assert t_quantile(p, nu) < t_quantile(p + 0.0005, nu)


def test_the_middle_is_nought():
    assert t_quantile(0.5, 7) == 0.0


@pytest.mark.parametrize("p", [0.0, 1.0, -0.1, 2.0, math.nan])
def test_a_probability_outside_is_refused(p):
    for quantile in (t_quantile, chi2_quantile):
        with pytest.raises(OutOfRange, match="a probability lies between 0 and 1"):
            quantile(p, 5)


@pytest.mark.parametrize("nu", [0, 0.5, -3, math.nan, math.inf])
def test_degrees_of_freedom_outside_are_refused(nu):
    for quantile in (t_quantile, chi2_quantile):
        with pytest.raises(OutOfRange, match="degrees of freedom run from 1"):
            quantile(0.95, nu)
