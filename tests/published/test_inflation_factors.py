"""Scholz, F. (1995), Tolerance stack analysis methods (Boeing): inflation factors c = 3 sigma / T.

T is the half-width of a symmetric law. Normal 1, semicircle 1.5, rectangular sqrt 3 = 1.7321, arcsine 3/sqrt 2 = 2.1213.
The factors were recomputed here; that report describes the method (opening pages read).

The ledger's laws are these laws: a length is rectangular; one coordinate of a point anywhere in a disc follows the
semicircle; one coordinate of a fixed eccentricity of unknown direction follows the arcsine.
"""

from __future__ import annotations

import math

import numpy as np
import pytest

from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws

from .bench import MANY, spread_error
from .quadrature import cut_deviation

LAWS = {
    # law: factor, kurtosis
    "length": (math.sqrt(3.0), 1.8),
    "disc": (1.5, 2.0),
    "clearance-disc": (1.5, 2.0),
    "ring": (3.0 / math.sqrt(2.0), 1.5),
    "clearance-ring": (3.0 / math.sqrt(2.0), 1.5),
    "rectangle": (math.sqrt(3.0), 1.8),
    "gauss": (cut_deviation(), 2.7),  # 0.987 where the uncut normal law has 1
}


@pytest.mark.parametrize("law", LAWS)
def test_one_coordinate_of_a_cause_has_the_inflation_factor_of_its_law(law: str) -> None:
    factor, kurtosis = LAWS[law]
    low, high = {"clearance-disc": (2.0, 2.0), "clearance-ring": (2.0, 2.0), "rectangle": (1.0, 1.0)}.get(
        law, (0.0, 1.0)
    )
    cause = Cause(f"inflation, {law}", law, low=low, high=high, spread=1.0 / 3.0 if law == "gauss" else 0.0)
    x = Draws(MANY).cause(cause).real
    assert factor / 3.0 == pytest.approx(float(np.std(x)), abs=spread_error(factor / 3.0, MANY, kurtosis))
    assert 1.0 == pytest.approx(float(np.abs(x).max()), abs=0.01)
    assert float(np.abs(x).max()) <= 1.0


@pytest.mark.parametrize("law", ["disc", "ring"])
def test_no_direction_is_preferred(law: str) -> None:
    # E[e^(i k psi)] = 0 for k = 1, 2, 3, with a scatter of 1/sqrt n
    x = Draws(MANY).cause(Cause(f"direction, {law}", law, high=1.0))
    for k in (1, 2, 3):
        assert abs(np.mean((x / np.abs(x)) ** k)) < 4.0 / math.sqrt(MANY)
