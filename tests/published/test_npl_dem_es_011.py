"""NPL report DEM-ES-011 (best practice guide 6 of the Software Support for Metrology programme), section 9.2.

y = ln x, x rectangular in 0.1 .. 1.1
Published: first order -0.511 with u = 0.481; Monte Carlo -0.665 with u = 0.606, shortest 95 % interval [-1.895, 0.095].
As quoted in the example tests of a public uncertainty library.

A logarithm is no stack, so no job file says it; what is tested is the ledger's draws of a rectangular cause.
The exact mean is 1.1 ln 1.1 - 0.1 ln 0.1 - 1 = -0.6649. The density e^y rises to the end, so the shortest 95 % interval is
the upper 95 %: from ln 0.15 = -1.897 to ln 1.1 = 0.095. The print's -1.895 is itself a Monte Carlo value.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.integrate import quad

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws

from .bench import MANY, SIGMAS, end_error

X = Cause("x of the logarithm", "length", high=0.5, mean=0.6 + 0j)


def drawn() -> np.ndarray:
    return np.log(Draws(MANY).account(Account.of(X)).real)


def test_the_mean_and_spread_of_the_logarithm_are_the_published_ones() -> None:
    y = drawn()
    assert -0.665 == pytest.approx(float(y.mean()), abs=SIGMAS * 0.606 / math.sqrt(MANY) + 0.0005)
    mean = 1.1 * math.log(1.1) - 0.1 * math.log(0.1) - 1.0
    fourth, _ = quad(lambda x: (math.log(x) - mean) ** 4, 0.1, 1.1)
    kurtosis = fourth / 0.606**4
    error = SIGMAS * 0.606 * math.sqrt((kurtosis - 1.0) / (4.0 * MANY))
    assert 0.606 == pytest.approx(float(y.std()), abs=error + 0.0005)


def test_the_shortest_95_percent_interval_is_the_published_one() -> None:
    y = np.sort(drawn())
    inside = round(0.95 * MANY)
    widths = y[inside:] - y[:-inside]
    start = int(np.argmin(widths))
    assert 0.095 == pytest.approx(float(y[start + inside]), abs=0.0015)
    assert -1.895 == pytest.approx(float(y[start]), abs=end_error(0.05, 0.15, MANY) + 0.0025)


def test_first_order_at_the_middle_misses_the_mean_by_0_15() -> None:
    # DEM-ES-011 9.2: ln 0.6 = -0.511, u = (1/sqrt 12)/0.6 = 0.481
    assert -0.511 == pytest.approx(math.log(X.mean.real), abs=0.0005)
    assert 0.481 == pytest.approx(X.bound / math.sqrt(3.0) / X.mean.real, abs=0.0005)
    assert 0.154 == pytest.approx(math.log(X.mean.real) - float(drawn().mean()), abs=0.005)
