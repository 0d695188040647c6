"""The one function that holds a number against its limit."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.rulebook import judge, judge_word
from setupcheck.rulebook.judging import GUARD_FACTOR, outside, reaches

UM = 0.001


def test_exactly_at_the_upper_limit_passes() -> None:
    assert judge(0.030, high=0.030, level="fail").verdict == "pass"


def test_a_sum_that_misses_its_limit_by_float_noise_passes() -> None:
    assert 0.1 + 0.2 > 0.3
    assert judge(0.1 + 0.2, high=0.3, level="fail").verdict == "pass"


def test_a_hundredth_of_a_micrometre_beyond_fails() -> None:
    assert judge(0.030 + 0.01 * UM, high=0.030, level="fail").verdict == "fail"


def test_a_limit_of_zero_is_kept_by_zero_only() -> None:
    assert [judge(v, high=0.0, level="fail").verdict for v in (0.0, 1e-13, 1e-9)] == ["pass", "pass", "fail"]


def test_the_level_of_the_rule_is_what_a_broken_limit_gives() -> None:
    assert [judge(2.0, high=1.0, level=level).verdict for level in ("warn", "fail", "open")] == ["warn", "fail", "open"]


def test_the_margin_is_the_distance_to_the_nearer_limit() -> None:
    judgement = judge(70.0, low=20.0, high=80.0, level="fail")
    assert (10.0, (20.0, 80.0)) == (judgement.margin, judgement.limit)
    assert -5.0 == judge(15.0, low=20.0, high=80.0, level="fail").margin


def test_close_to_the_limit_warns_and_exactly_the_share_away_does_not() -> None:
    assert ["pass", "pass", "warn", "warn", "fail"] == [
        judge(value, high=100.0, level="fail", warn_within=0.1).verdict for value in (80.0, 90.0, 91.0, 100.0, 101.0)
    ]


def test_the_share_of_two_limits_is_taken_of_the_span_between_them() -> None:
    assert ["warn", "pass", "pass", "warn"] == [
        judge(value, low=20.0, high=80.0, level="fail", warn_within=0.1).verdict for value in (25.0, 27.0, 73.0, 75.0)
    ]


def test_a_stack_beyond_its_limit_only_warns_when_its_chance_is_high_enough() -> None:
    assert judge(41.0, high=30.0, level="fail", softened=True).verdict == "warn"
    assert judge(41.0, high=30.0, level="fail", softened=False).verdict == "fail"


def test_a_good_chance_changes_nothing_inside_the_limit() -> None:
    assert judge(29.0, high=30.0, level="fail", softened=True).verdict == "pass"


def test_a_measured_value_passes_and_fails_only_outside_its_guard_band() -> None:
    """ISO 14253-1 as remembered: pass up to L - 1.65 u, fail above L + 1.65 u."""
    assert GUARD_FACTOR == 1.65
    verdicts = [
        judge(y * UM, high=10 * UM, level="fail", standard_uncertainty=1 * UM).verdict
        for y in (8.35, 8.36, 10.0, 11.65, 11.66)
    ]
    assert ["pass", "warn", "warn", "warn", "fail"] == verdicts


def test_a_measured_value_is_guarded_at_a_lower_limit_too() -> None:
    verdicts = [judge(y, low=25.0, level="fail", standard_uncertainty=1.0).verdict for y in (23.3, 25.0, 26.7)]
    assert ["fail", "warn", "pass"] == verdicts


def test_a_measured_value_without_any_uncertainty_is_judged_as_it_stands() -> None:
    assert judge(10.0, high=10.0, level="fail", standard_uncertainty=0.0).verdict == "pass"


def test_a_word_that_nobody_listed_is_not_allowed() -> None:
    assert ["pass", "fail"] == [judge_word(word, ("made", "stock"), level="fail") for word in ("made", "worn")]


@pytest.mark.parametrize(
    ("limits", "says"),
    [({}, "needs a limit"), ({"low": 2.0, "high": 1.0}, "lies above")],
)
def test_a_judgement_without_sense_is_refused(limits: dict[str, float], says: str) -> None:
    with pytest.raises(ValueError, match=says):
        judge(1.0, level="fail", low=limits.get("low"), high=limits.get("high"))


def test_a_negative_uncertainty_is_refused() -> None:
    with pytest.raises(ValueError, match="negative"):
        judge(1.0, high=2.0, level="fail", standard_uncertainty=-0.1)


def test_a_chance_as_high_as_asked_reaches_it() -> None:
    assert reaches(0.95, 0.95)
    assert not reaches(0.9499, 0.95)


number = st.floats(-1e4, 1e4, allow_subnormal=False)


@given(value=number, limit=number, share=st.sampled_from([0.0, 0.1, 0.5]))
def test_turning_all_signs_round_turns_at_most_into_at_least(value: float, limit: float, share: float) -> None:
    above = judge(value, high=limit, level="fail", warn_within=share)
    below = judge(-value, low=-limit, level="fail", warn_within=share)
    assert (above.verdict, above.margin) == (below.verdict, below.margin)


@given(value=number, limit=number, u=st.floats(0.0, 100.0))
def test_an_uncertainty_never_turns_a_broken_limit_into_a_pass(value: float, limit: float, u: float) -> None:
    verdict = judge(value, high=limit, level="fail", standard_uncertainty=u).verdict
    assert verdict != "pass" or not outside(value, high=limit)
    assert verdict != "fail" or outside(value, high=limit)
