"""Sizes of warm parts, and what a gauge can prove."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.physics.measuring import COLDEST, WARMEST, share_of_bound, size_at_reference


def test_a_bronze_wheel_of_180_at_25_degrees_reads_16_um_big() -> None:
    # 180 x 18e-6 x 5 = 16.2 um
    assert 0.0162 == pytest.approx(180.0 - size_at_reference(180.0, expansion=18e-6, temperature=25.0), abs=5e-6)


def test_at_20_degrees_nothing_is_corrected() -> None:
    assert 47.125 == size_at_reference(47.125, expansion=23e-6, temperature=20.0)


@given(st.floats(1.0, 500.0), st.floats(5e-6, 30e-6), st.floats(COLDEST, WARMEST))
def test_heating_the_size_at_20_degrees_gives_the_one_measured(size: float, alpha: float, warm: float) -> None:
    cold = size_at_reference(size, expansion=alpha, temperature=warm)
    assert size == pytest.approx(cold + cold * alpha * (warm - 20.0), rel=1e-12)


@pytest.mark.parametrize("temperature", [-20.5, 120.5])
def test_a_part_too_hot_or_too_cold_to_measure_is_refused(temperature: float) -> None:
    with pytest.raises(ValueError, match="is outside -20 to 120 degC"):
        size_at_reference(50.0, expansion=12e-6, temperature=temperature)


def test_a_bound_of_nothing_is_proved_by_no_gauge() -> None:
    assert share_of_bound(0.001, bound=0.0) is None
