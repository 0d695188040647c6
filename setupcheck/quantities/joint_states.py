"""A joint in each of its states: coldest, at 20 degC, warmest; its tightest and its loosest pair. mm, MPa, N mm."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.jobfile.service import Warmth
from setupcheck.physics import interference as fits
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.pairing import BENCH, Pair
from setupcheck.quantities.strength import force_held, hoop_most, pressure_least, pressure_most

STATES = ("cold", "bench", "warm")
"""Coldest of service, 20 degC, warmest of service."""


def coldest(service: tuple[Warmth, Warmth]) -> Warmth:
    """Hub and shaft at their coldest in service [degC]. Source: the job file."""
    return service[0]


def bench(pair: Pair) -> Warmth:
    """Hub and shaft at 20 degC, where all sizes hold. Source: ISO 1."""
    return BENCH


def warmest(service: tuple[Warmth, Warmth]) -> Warmth:
    """Hub and shaft at their warmest in service [degC]. Source: the job file."""
    return service[1]


def most_in(pair: Pair, most: float, state: Warmth) -> float:
    """Interference of the tightest pair in one state, nothing smoothed [mm]; negative is play.

    U = U_max + D [alpha_I (T_I - 20) - alpha_A (T_A - 20)], hub expansion low, shaft high where that adds.
    Source: physics.heating.
    """
    return pair.at(most, "strength", state)


def least_in(pair: Pair, least: float, smoothing: float, state: Warmth) -> float:
    """Interference of the loosest pair in one state, smoothed [mm]; negative is play.

    U = U_min - smoothing + D [alpha_I (T_I - 20) - alpha_A (T_A - 20)], hub expansion high, shaft low where that takes.
    Source: physics.heating.
    """
    return pair.at(least - smoothing, "holding", state)


def torque_in(pair: Pair, grip: float, friction: float) -> float:
    """Torque that the loosest pair holds in one state, with nothing along the axis [N mm]: sum of mu p pi D^2 L/2, over 1.2.

    p of each section by Lamé at the low ends of both moduli, L its length, mu the lowest friction.

    Source: Coulomb friction and Lamé, DIN 7190's steps (from memory).
    """
    return force_held(pair, grip, friction) * pair.diameter / 2.0


def temperature_in_words(state: Warmth) -> str:
    """`5 degC`, or hub and shaft apart. Source: the job file."""
    return state.told()


def hoop_outside(pair: Pair, grip: float) -> float:
    """Largest tangential stress at the outside of the hub [MPa]: 2 p Q^2/(1 - Q^2). Source: Lamé."""
    return max(s.hub_outside_tangential for s in _stresses(pair, grip))


def seat_stress(pair: Pair, grip: float) -> float:
    """Largest tangential stress at the seat of the shaft, as pressing together is meant [MPa].

    p (1 + Q_I^2)/(1 - Q_I^2); p for a solid shaft.  Source: Lamé.
    """
    return max(-s.shaft_seat_tangential for s in _stresses(pair, grip))


def hole_stress(pair: Pair, grip: float) -> float | None:
    """Largest tangential stress at the hole of the shaft, as pressing together is meant [MPa]; None for a solid one.

    2 p/(1 - Q_I^2).  Source: Lamé.
    """
    found = [-s.shaft_hole_tangential for s in _stresses(pair, grip) if s.shaft_hole_tangential is not None]
    return max(found, default=None)


def _stresses(pair: Pair, grip: float) -> Iterator[fits.Stresses]:
    for joint in pair.joints("strength"):
        yield fits.stresses(joint, pressure=fits.joint_pressure(joint, interference=grip))


_PAIR = {"pair": "fit.pair"}
_NAMES = {"cold": "the coldest", "bench": "20 degC", "warm": "the warmest"}


def _of(state: str) -> Iterator[Quantity]:
    at = _NAMES[state]
    yield Quantity(
        f"fit.{state}_at",
        "join",
        "",
        0,
        temperature_in_words,
        {"state": f"fit.{state}"},
        f"temperature of the joint at {at}",
    )
    yield Quantity(
        f"fit.{state}_most",
        "join",
        "um",
        1,
        most_in,
        {**_PAIR, "most": "fit.interference_most", "state": f"fit.{state}"},
        f"interference of the tightest pair at {at}",
    )
    tight = {**_PAIR, "grip": f"fit.{state}_most_elastic"}
    yield Quantity(
        f"fit.{state}_pressure",
        "join",
        "MPa",
        1,
        pressure_most,
        tight,
        f"highest pressure of the tightest pair at {at}",
    )
    yield Quantity(
        f"fit.{state}_hoop", "join", "MPa", 1, hoop_most, tight, f"hoop stress at the hub's bore, tightest pair at {at}"
    )
    yield Quantity(
        f"fit.{state}_least",
        "join",
        "um",
        1,
        least_in,
        {**_PAIR, "least": "fit.interference_least", "smoothing": "fit.smoothing", "state": f"fit.{state}"},
        f"interference of the loosest pair at {at}, smoothed",
    )
    loose = {**_PAIR, "grip": f"fit.{state}_least_elastic"}
    yield Quantity(
        f"fit.{state}_least_pressure",
        "join",
        "MPa",
        1,
        pressure_least,
        loose,
        f"lowest pressure of the loosest pair at {at}",
    )
    yield Quantity(
        f"fit.{state}_torque",
        "join",
        "N*m",
        1,
        torque_in,
        {**loose, "friction": "fit.friction"},
        f"torque that the loosest pair holds at {at}",
    )


_MOST = {**_PAIR, "grip": "fit.grip_most_elastic"}

IN_STATES = (
    Quantity("fit.cold", "join", "", 0, coldest, {"service": "fit.service"}, "coldest state of service"),
    Quantity("fit.bench", "join", "", 0, bench, _PAIR, "state at 20 degC"),
    Quantity("fit.warm", "join", "", 0, warmest, {"service": "fit.service"}, "warmest state of service"),
    *(quantity for state in STATES for quantity in _of(state)),
    Quantity("fit.hoop_outside", "join", "MPa", 1, hoop_outside, _MOST, "hoop stress at the hub's outside"),
    Quantity("fit.seat_stress", "join", "MPa", 1, seat_stress, _MOST, "hoop compression at the shaft's seat"),
    Quantity("fit.hole_stress", "join", "MPa", 1, hole_stress, _MOST, "hoop compression at the shaft's hole"),
)
