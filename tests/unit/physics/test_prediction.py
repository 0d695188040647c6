"""The limit of the next value: against scipy, and against what really comes next in drawn series."""

import math

import numpy as np
import pytest
from scipy import stats

from setupcheck.physics.prediction import mean_of, prediction_limit, spread_of

SERIES = [[5.0, 7.0, 6.0, 8.0, 6.0], [51.4, 49.5, 48.7, 49.3, 51.6], [12.0, 3.0, 7.5, 9.25, 4.0, 5.5, 11.0, 8.0]]
TRIALS = 2000
OFF = 3.0 * math.sqrt(0.95 * 0.05 / TRIALS)
"""Three times what chance moves a share of 95 in 100 over so many trials."""


@pytest.mark.parametrize("values", SERIES)
def test_the_textbook_limit_recomputed_with_scipy(values):
    n = len(values)
    one_side = np.mean(values) + stats.t.ppf(0.95, n - 1) * np.std(values, ddof=1) * math.sqrt(1.0 + 1.0 / n)
    assert prediction_limit(values) == pytest.approx(one_side, rel=1e-9)
    # scipy's own interval of the t law with that place and size, both ends of it
    low, high = stats.t.interval(0.95, n - 1, np.mean(values), np.std(values, ddof=1) * math.sqrt(1.0 + 1.0 / n))
    assert prediction_limit(values, both_ways=True) == pytest.approx(max(abs(low), abs(high)), rel=1e-9)


def test_mean_and_spread():
    assert mean_of(SERIES[0]) == 6.4
    assert spread_of(SERIES[0]) == pytest.approx(np.std(SERIES[0], ddof=1))
    assert spread_of([0.1] * 7) == 0.0  # though a seventh of the sum is not 0.1
    with pytest.raises(ValueError, match="one value has no spread"):
        spread_of([1.0])


def share_below(draw, entries, *, both_ways=False):
    """How often the value after `entries` others keeps to the limit that they give."""
    rows = draw(np.random.default_rng(20), (TRIALS, entries + 1))
    return np.mean([abs(r[-1]) <= prediction_limit(r[:-1], both_ways=both_ways) for r in rows.tolist()])


@pytest.mark.parametrize("entries", [5, 8, 20])
def test_the_next_of_2000_records_keeps_to_its_limit_in_95_of_100(entries):
    share = share_below(lambda rng, size: rng.normal(60.0, 3.0, size), entries)
    assert share == pytest.approx(0.95, abs=OFF)


@pytest.mark.parametrize("entries", [5, 8, 20])
def test_values_of_either_sign_keep_to_theirs_at_least(entries):
    about_nought = share_below(lambda rng, size: rng.normal(0.0, 1.0, size), entries, both_ways=True)
    all_one_way = share_below(lambda rng, size: rng.normal(40.0, 1.0, size), entries, both_ways=True)
    assert about_nought >= 0.95 - OFF
    assert all_one_way == pytest.approx(0.975, abs=OFF)  # only one of both ends can be passed there


@pytest.mark.parametrize("entries", [5, 8, 20])
def test_a_run_out_of_chance_direction_keeps_to_it_a_little_less_often(entries):
    share = share_below(lambda rng, size: rng.rayleigh(3.0, size), entries)
    assert share == pytest.approx(0.93, abs=OFF)
