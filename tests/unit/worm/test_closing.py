"""Any sufficient set of sizes settles all the others, and a size that contradicts the rest is found, whichever it is."""

from __future__ import annotations

import math

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from setupcheck.worm.closing import STEPS, closed


def whole_pair(starts: int, module: float, quotient: float, teeth: int, shift: float) -> dict[str, float]:
    """All sizes of a pair, from the textbook's equations and not from the steps under test."""
    d1, g = quotient * module, math.atan2(starts, quotient)
    return {
        "starts": float(starts),
        "teeth": float(teeth),
        "shift": shift,
        "axial_module": module,
        "diametral_pitch": 25.4 / module,
        "axial_pitch": math.pi * module,
        "lead": math.pi * module * starts,
        "normal_module": module * math.cos(g),
        "quotient": quotient,
        "reference_diameter": d1,
        "lead_angle": g,
        "wheel_diameter": teeth * module,
        "centre_distance": (d1 + teeth * module) / 2.0 + shift * module,
    }


pairs = st.builds(
    whole_pair,
    st.integers(1, 4),
    st.floats(0.5, 10.0),
    st.floats(7.0, 25.0),
    st.integers(20, 120),
    st.floats(-0.5, 0.5),
)

SUFFICIENT = [
    ("starts", "axial_module", "quotient", "teeth", "shift"),
    ("starts", "diametral_pitch", "reference_diameter", "teeth", "shift"),
    ("lead", "axial_pitch", "reference_diameter", "teeth", "shift"),
    ("starts", "lead", "quotient", "wheel_diameter", "shift"),
    ("starts", "normal_module", "reference_diameter", "teeth", "shift"),
    ("starts", "normal_module", "quotient", "teeth", "centre_distance"),
    ("starts", "reference_diameter", "quotient", "teeth", "centre_distance"),
    ("starts", "centre_distance", "quotient", "teeth", "shift"),
    ("starts", "centre_distance", "reference_diameter", "teeth", "shift"),
    ("lead", "wheel_diameter", "teeth", "centre_distance", "shift"),
    ("axial_module", "lead", "lead_angle", "wheel_diameter", "shift"),
]


@pytest.mark.parametrize("known", SUFFICIENT)
@settings(max_examples=40, deadline=None, derandomize=True, database=None)
@given(pair=pairs)
def test_a_sufficient_set_settles_every_other_size(known: tuple[str, ...], pair: dict[str, float]) -> None:
    found = closed({name: pair[name] for name in known}, within=1e-6)
    assert not found.disagreements
    for name, value in pair.items():
        assert value == pytest.approx(found.values[name], rel=1e-7, abs=1e-7), name


@settings(max_examples=60, deadline=None, derandomize=True, database=None)
@given(
    pair=pairs,
    off=st.sampled_from((0.9, 1.1, 1.5)),
    name=st.sampled_from(["quotient", "axial_pitch", "lead", "normal_module"]),
)
def test_a_size_that_is_off_is_among_those_told_and_the_numbers_are_true(
    pair: dict[str, float], off: float, name: str
) -> None:
    known = {k: pair[k] for k in ("starts", "axial_module", "reference_diameter")}
    found = closed({**known, name: pair[name] * off}, within=1e-3).disagreements
    assert found
    assert all(name in one.about for one in found)
    assert any(one.name == name and one.value == pytest.approx(pair[name], rel=1e-6) for one in found)


@settings(max_examples=60, deadline=None, derandomize=True, database=None)
@given(pair=pairs, names=st.sets(st.sampled_from(sorted(whole_pair(1, 1.0, 10.0, 40, 0.0))), min_size=1, max_size=7))
def test_true_sizes_never_disagree_and_what_is_settled_is_true(pair: dict[str, float], names: set[str]) -> None:
    found = closed({name: pair[name] for name in sorted(names)}, within=1e-3)
    assert not found.disagreements
    for name, value in found.values.items():
        assert value == pytest.approx(pair[name], rel=1e-6, abs=1e-6)


@settings(max_examples=60, deadline=None, derandomize=True, database=None)
@given(pair=pairs, apart=st.floats(1.0005, 1.0009))
def test_figures_rounded_apart_do_not_disagree(pair: dict[str, float], apart: float) -> None:
    known = {k: pair[k] for k in ("starts", "axial_module", "reference_diameter")}
    assert not closed({**known, "axial_pitch": pair["axial_pitch"] * apart}, within=1e-3).disagreements


def test_a_measured_pitch_disagrees_only_beyond_its_uncertainty() -> None:
    known, measured = (
        {"axial_module": 2.5},
        {"axial_pitch": 7.98},
    )  # a diametral pitch of 10 has 7.980, module 2.5 7.854
    (one,) = closed(known, measured, within=1e-3, bands={"axial_pitch": 0.02 / 7.98}).disagreements
    assert (one.name, one.stated) == ("axial_pitch", 7.98)
    assert 7.854 == pytest.approx(one.value, abs=5e-4)
    assert not closed(known, measured, within=1e-3, bands={"axial_pitch": 0.15 / 7.98}).disagreements


def test_a_lead_that_is_no_whole_number_of_pitches_settles_no_starts() -> None:
    found = closed({"lead": 12.0, "axial_pitch": 7.854}, within=1e-3)
    assert "starts" not in found.values


def test_a_later_group_fills_only_what_is_open() -> None:
    found = closed({"axial_module": 2.0, "teeth": 50.0}, {"wheel_diameter": 105.0}, within=1e-3)
    assert 100.0 == found.values["wheel_diameter"]
    assert {"axial_module", "teeth", "wheel_diameter"} == set(found.disagreements[0].about)


@settings(max_examples=40, deadline=None, derandomize=True, database=None)
@given(pair=pairs)
def test_every_step_is_an_equation_of_the_pair(pair: dict[str, float]) -> None:
    for step in STEPS:
        assume(all(name in pair for name in step.needs))
        assert pair[step.gives] == pytest.approx(step.of(*(pair[n] for n in step.needs)), rel=1e-9, abs=1e-9), (
            step.words
        )
