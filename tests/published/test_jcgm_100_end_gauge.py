"""JCGM 100:2008 (GUM), example H.1: end-gauge calibration.

l = ls + d - ls (da th + as dth)
ls 50.000 623 mm, u = 25 nm;  d 215 nm, u = 9.7 nm (from 5.8, 3.9 and 6.7 nm);  as 11.5e-6/K, u = 1.2e-6;
th -0.1 K, u = 0.41;  da 0, u = 0.58e-6/K;  dth 0, u = 0.029 K
Published: l = 50.000 838 mm, u_c = 32 nm (contributions 25, 9.7, 2.9 and 16.6 nm); 34 nm with the second-order terms
11.9 and 1.7 nm. Inputs and results as quoted in the test file of a public property library and in the worked example of
a public uncertainty library; the second-order figures by the latter.

The gauge runs through a job file as a row of spacers (a thermal term is a spacer of length zero), and through the ledger
with its sensitivities. Degrees of freedom and the 99 % interval are not ours: the ledger knows no Student law.
"""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import Length

from .bench import MANY, sampled, spread_error, stack
from .quadrature import cut_deviation
from .test_jcgm_101 import CUT, spacers

NM = 1e-6
LS = 50.000_623
ALPHA, U_ALPHA, THETA, U_THETA, U_DELTA_ALPHA, U_DELTA_THETA = 11.5e-6, 1.2e-6, -0.1, 0.41, 0.58e-6, 0.029
U_DIFFERENCE = math.sqrt(5.8**2 + 3.9**2 + 6.7**2)
"""9.7 nm: repeated readings, random and systematic part of the comparator. Source: GUM H.1.3.2."""
THERMAL = (LS * abs(THETA) * U_DELTA_ALPHA / NM, LS * ALPHA * U_DELTA_THETA / NM)
"""2.9 and 16.7 nm. Source: GUM H.1.3.4 and H.1.3.5."""

GAUGE = spacers(
    "{measured: 50.000623 mm, uncertainty: 0.050 um}",  # the certificate: 25 nm standard, so 50 nm with k = 2
    f"{{nominal: 0.000215 mm, uncertainty: {2.0 * U_DIFFERENCE / 1000.0:.9f} um}}",
    f"{{nominal: 0 mm, uncertainty: {2.0 * THERMAL[0] / 1000.0:.9f} um}}",
    f"{{nominal: 0 mm, uncertainty: {2.0 * THERMAL[1] / 1000.0:.9f} um}}",
    between="[50.000 mm, 50.001 mm]",
)


def test_the_components_have_the_published_sizes() -> None:
    # GUM H.1.3: u(d) = 9.7 nm, thermal terms 2.9 nm and 16.6 nm
    assert 9.7 == pytest.approx(U_DIFFERENCE, abs=0.05)
    assert 2.9 == pytest.approx(THERMAL[0], abs=0.05)
    assert 16.6 == pytest.approx(THERMAL[1], abs=0.1)


def test_the_review_gives_the_published_length_and_combined_uncertainty() -> None:
    # GUM H.1.7 and H.1.4: l = 50.000 838 mm, u_c = 32 nm. The ledger's rss is made of bounds of three standard deviations.
    c = stack(GAUGE).combined
    assert 50.000_838 == pytest.approx(c.base, abs=0.5 * NM)
    assert 32.0 == pytest.approx((c.rss.high - c.base) / 3.0 / NM, abs=0.5)
    assert 3.0 * (25.0 + U_DIFFERENCE + sum(THERMAL)) == pytest.approx((c.worst.high - c.base) / NM, abs=0.01)


def test_the_draws_scatter_by_the_published_combined_uncertainty() -> None:
    u = float(np.std(sampled(GAUGE, trials=MANY))) / NM
    exact = math.sqrt(25.0**2 + U_DIFFERENCE**2 + THERMAL[0] ** 2 + THERMAL[1] ** 2)  # 31.7 nm before rounding
    assert exact * cut_deviation() == pytest.approx(u, abs=spread_error(exact, MANY))
    assert 32.0 == pytest.approx(u, abs=0.5 + CUT * 32.0 + spread_error(32.0, MANY))


def test_an_account_carries_the_sensitivities_of_the_budget() -> None:
    # GUM H.1.4 with c = 1, 1, -ls th, -ls as; zero for as and th, whose partners are zero at their estimates
    inputs = {"ls": (25.0 * NM, 1.0), "d": (U_DIFFERENCE * NM, 1.0)}
    inputs |= {"da": (U_DELTA_ALPHA, -LS * THETA), "dth": (U_DELTA_THETA, -LS * ALPHA)}
    inputs |= {"as": (U_ALPHA, 0.0), "th": (U_THETA, 0.0)}
    account = real(LS + 215.0 * NM)
    for name, (u, c) in inputs.items():
        account += Account.of(Cause(f"end gauge, {name}", "gauss", spread=u)) * c
    figure = Length(account)
    assert 32.0 == pytest.approx(math.hypot(*(p.up / 3.0 for p in figure.pushes())) / NM, abs=0.5)
    assert {"end gauge, as", "end gauge, th"}.isdisjoint(p.cause.key for p in figure.pushes())
    low, high = account.span()
    assert 50.000_838 == pytest.approx((low + high) / 2.0, abs=0.5 * NM)


def test_the_products_that_first_order_leaves_out_bring_34_nm() -> None:
    # GUM H.1.7, second-order terms: u_c = 34 nm instead of 32 nm
    draws = Draws(MANY)

    def drawn(name: str, u: float, at: float = 0.0) -> np.ndarray:
        return draws.cause(Cause(f"end gauge whole, {name}", "gauss", spread=u, mean=complex(at))).real

    length = (
        drawn("ls", 25.0 * NM, LS)
        + drawn("d", U_DIFFERENCE * NM, 215.0 * NM)
        - LS * drawn("da", U_DELTA_ALPHA) * drawn("th", U_THETA, THETA)
        - LS * drawn("as", U_ALPHA, ALPHA) * drawn("dth", U_DELTA_THETA)
    )
    u = float(np.std(length)) / NM
    assert 34.0 == pytest.approx(u, abs=0.5 + CUT * 34.0 + spread_error(34.0, MANY))
    assert u > 32.5
