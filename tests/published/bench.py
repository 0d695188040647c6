"""Tools of these tests: a job file in, its stacks and findings out, and how far random draws may stray.

Tolerances. `review` draws 20,000 times, so the share of draws below a fixed value scatters by sqrt(p (1 - p) / n), and
an end of an interval by that over the density there. Four such standard deviations are allowed: a right figure then
misses once in 16,000 times, and since every cause has its own fixed stream, a test that passes once passes always.
"""

from __future__ import annotations

import math
from functools import cache

import numpy as np
from numpy.typing import NDArray

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.draws import TRIALS, Draws
from setupcheck.quantities.judged import Result
from setupcheck.rulebook import Finding

UM = 0.001
"""One micrometre in the ledger's unit."""
INCH = 25.4
ARCSEC = math.pi / 648_000.0
MANY = 400_000
"""Draws of the checks on the ledger itself."""
SIGMAS = 4.0


@cache
def reviewed(text: str) -> Review:
    """The review of a job file given as text."""
    return review(read_job_text(text, "case.yaml"))


def stack(text: str, index: int = 0) -> Result:
    """Stack number `index` of a job file, combined; a stack that is open fails the test with what is missing."""
    found = reviewed(text)
    scope = found.book.instances("stack")[index]
    assert scope.key in found.results, found.book.get("stack.combined", scope)
    return found.results[scope.key]


def findings(text: str, rule: str) -> list[Finding]:
    """All findings of one rule."""
    return [f for f in reviewed(text).evaluation.findings if f.rule == rule]


@cache
def sampled(text: str, index: int = 0, trials: int = TRIALS) -> NDArray[np.float64]:
    """The figure's values for a given number of draws, as the review makes them."""
    return stack(text, index).figure.sample(Draws(trials))


def share_error(p: float, trials: int = TRIALS) -> float:
    """How far the share of draws on one side of a fixed value may stray from its probability p."""
    return SIGMAS * math.sqrt(p * (1.0 - p) / trials)


def end_error(p: float, density: float, trials: int = TRIALS) -> float:
    """How far the quantile p of the draws may stray from the true one, in the unit of 1/density."""
    return share_error(p, trials) / density


def spread_error(spread: float, trials: int = TRIALS, kurtosis: float = 3.0) -> float:
    """How far the standard deviation of the draws may stray from the true one.

    sd(s) = s sqrt((kurtosis - 1) / (4 n)); kurtosis 3 for a normal law, less for all sums of rectangles.
    """
    return SIGMAS * spread * math.sqrt((kurtosis - 1.0) / (4.0 * trials))
