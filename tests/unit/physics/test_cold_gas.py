"""What boils off against the room: figures of the guides, and both directions of each formula."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.physics.cold_gas import carbon_dioxide, dry_ice_at_most, litres_at_most, oxygen_left

rooms, amounts = st.floats(1.0, 5000.0), st.floats(0.0, 100.0)


@pytest.mark.parametrize(("litres", "room", "percent"), [(5, 40, 19.1), (10, 40, 17.2), (2, 20, 19.4), (0, 20, 20.9)])
def test_oxygen_after_the_loss_of_the_whole_vessel(litres: float, room: float, percent: float) -> None:
    assert percent == pytest.approx(100 * oxygen_left(room, litres=litres), abs=0.06)


def test_a_litre_needs_ten_and_a_half_cubic_metres() -> None:
    """0.70 x 20.9/(20.9 - 19.5); the caution's 11.5 m3 have the tenth for filling in them."""
    assert oxygen_left(10.45, litres=1.0) == pytest.approx(0.195, abs=1e-5)
    assert 10.45 == pytest.approx(1.0 / litres_at_most(1.0, oxygen=0.195), rel=1e-3)


@pytest.mark.parametrize(("room", "share"), [(109.4, 0.005), (18.2, 0.03), (13.7, 0.04)])
def test_rooms_that_a_kilogram_of_dry_ice_brings_to_the_limits(room: float, share: float) -> None:
    assert share == pytest.approx(carbon_dioxide(room, mass=1.0), rel=0.01)


def test_ten_kilograms_make_some_five_cubic_metres_as_the_university_page_says() -> None:
    assert 5.4 == pytest.approx(100.0 * carbon_dioxide(100.0, mass=10.0), abs=0.1)


def test_the_oxygen_formula_would_pass_what_the_limit_of_the_gas_itself_fails() -> None:
    """5 kg in 40 m3: 6.8 % of carbon dioxide while the oxygen is still at 19.47 %."""
    gas = carbon_dioxide(40.0, mass=5.0)
    assert 0.068 == pytest.approx(gas, abs=5e-4)
    assert 0.1947 == pytest.approx(0.209 * (1.0 - gas), abs=5e-5)


@given(rooms, amounts)
def test_shares_stay_shares(room: float, amount: float) -> None:
    assert 0.0 <= oxygen_left(room, litres=amount) <= 0.209 + 1e-12
    assert 0.0 <= carbon_dioxide(room, mass=amount) <= 1.0


@given(rooms)
def test_what_may_be_brought_reaches_the_limit_and_a_tenth_more_passes_it(room: float) -> None:
    litres, mass = litres_at_most(room, oxygen=0.195), dry_ice_at_most(room, share=0.005)
    assert oxygen_left(room, litres=litres) == pytest.approx(0.195)
    assert oxygen_left(room, litres=1.1 * litres) < 0.195
    assert carbon_dioxide(room, mass=mass) == pytest.approx(0.005)
    assert carbon_dioxide(room, mass=1.1 * mass) > 0.005


@pytest.mark.parametrize("room", [0.0, -1.0, math.nan, math.inf])
def test_a_room_without_a_volume_is_refused(room: float) -> None:
    for of in (lambda: oxygen_left(room, litres=1.0), lambda: carbon_dioxide(room, mass=1.0)):
        with pytest.raises(ValueError, match="the room must have a volume"):
            of()
    with pytest.raises(ValueError, match="cannot be below 0"):
        oxygen_left(10.0, litres=-1.0)
