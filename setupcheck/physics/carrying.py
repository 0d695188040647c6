"""Hub and shaft on their way: how far they stand open, until when, and how soon they close over each other. mm, degC, s."""

from __future__ import annotations

import math

from setupcheck.physics.heating import AIR_CONDUCTIVITY, REFERENCE_TEMPERATURE, Ring, cooled_temperature
from setupcheck.record import record

_COARSE = 10
"""Steps of the time integration where it is repeated to find a time. Our choice; a test compares it with the fine one."""
_LONGEST = 1e6
"""Seconds; a part that is not there after eleven days never is. Our choice."""
_CLOSE = 1e-9
"""Of the diameter, a nanometre in a metre: where the search for a time stops. Our choice."""
_ROUNDS = 60
"""Of that search at most; it takes some eight. Our choice."""


@record(kw_only=True)
class Body:
    """Hub or shaft on its way: its ring, the temperature it starts with [degC], its mean expansion [1/K].

    ring  None for a part that keeps its temperature
    """

    ring: Ring | None
    start: float
    expansion: float

    def after(self, seconds: float, air: float) -> float:
        """Temperature after some time in the air [degC]. Source: `cooled_temperature`."""
        if self.ring is None:
            return self.start
        return cooled_temperature(self.ring, start=self.start, seconds=seconds, air=air, steps=_COARSE)


def opened(hub: Body, shaft: Body, *, diameter: float, seconds: float, air: float) -> float:
    """How far hub and shaft stand open against their sizes at 20 degC [mm on diameter], after some time in the air.

    D [alpha_A (T_hub - 20) + alpha_I (20 - T_shaft)]: to be compared with the largest interference and the play.
    Source: derived here, as `interference_at`.

    >>> still = Body(ring=None, start=20.0, expansion=12e-6)
    >>> round(opened(Body(ring=None, start=120.0, expansion=18e-6), still, diameter=100, seconds=0, air=20), 3)
    0.18
    """
    hot, cold = hub.after(seconds, air), shaft.after(seconds, air)
    grown = hub.expansion * (hot - REFERENCE_TEMPERATURE) + shaft.expansion * (REFERENCE_TEMPERATURE - cold)
    return diameter * grown


def time_open(hub: Body, shaft: Body, *, needed: float, diameter: float, air: float) -> float:
    """Time in still air until hub and shaft open no more than what is needed [s]; 0 if they never did, inf if always.

    The root of `opened` - needed: bracketed by fourfold steps, then regula falsi (Illinois).
    needed  largest interference, with or without the play [mm on diameter]
    Validity: as `cooled_temperature`; hub and shaft are out of oven and cold for the same time.  Source: derived here.

    >>> ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=0.6)
    >>> still = Body(ring=None, start=20.0, expansion=12e-6)
    >>> round(time_open(Body(ring=ring, start=150.0, expansion=18e-6), still, needed=0.216, diameter=100, air=20))
    121
    """

    def spare(seconds: float) -> float:
        return opened(hub, shaft, diameter=diameter, seconds=seconds, air=air) - needed

    low, at_low = 0.0, spare(0.0)
    if at_low <= 0.0:
        return 0.0
    high, at_high = 8.0, spare(8.0)
    while at_high > 0.0:
        low, at_low, high = high, at_high, 4.0 * high
        if high > _LONGEST:
            return math.inf
        at_high = spare(high)
    for _ in range(_ROUNDS):
        middle = (low * at_high - high * at_low) / (at_high - at_low)
        found = spare(middle)
        if abs(found) < _CLOSE * diameter:
            return middle
        if found > 0.0:
            low, at_low, at_high = middle, found, at_high / 2.0
        else:
            high, at_high, at_low = middle, found, at_low / 2.0
    return low


def time_to_close(
    hub: Ring, shaft: Ring, *, closes: float, apart: float, gap: float, expansions: tuple[float, float]
) -> float:
    """Time over the shaft, before anything touches, until hub and shaft have come nearer by so much [s]; inf if never.

    The air gap carries q = G (T_hub - T_shaft), G = k_air pi D L / s. The hub cools by q/C_A and the shaft under it warms by
    q/C_I, so both close it: t = tau ln[dT / (dT - x k)], k = 1/C_A + 1/C_I, tau = 1/(G k), x = closes / {D (alpha_A/C_A +
    alpha_I/C_I)}.
    closes  on diameter [mm];  apart  hub over shaft at the start [K];  gap  on the radius [mm];  expansions  hub, shaft [1/K]
    Validity: order of magnitude. Nothing has touched, and the heat stays in the stretch of shaft under the hub: what
    flows on along the shaft gives a little more time, a first contact far less.
    Raises: ValueError for a gap not above 0.  Source: conduction through the gap, two lumped bodies, derived here.

    >>> ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=0.6)
    >>> solid = Ring(bore=0, outside=100, length=30, density=7850, specific_heat=470, emissivity=0.6)
    >>> round(time_to_close(ring, solid, closes=0.07, apart=100, gap=0.05, expansions=(18.4e-6, 12e-6)), 1)
    42.9
    """
    if not gap > 0.0:
        raise ValueError("the gap must be above 0")
    if closes <= 0.0:
        return 0.0
    diameter = hub.bore
    conductance, share = _exchange(hub, shaft, gap)
    per_joule = diameter * (expansions[0] / hub.heat_capacity + expansions[1] / shaft.heat_capacity)
    cools = closes / per_joule * share
    if cools >= apart:
        return math.inf
    return math.log(apart / (apart - cools)) / (conductance * share)


def over_the_shaft(hub: Ring, shaft: Ring, *, apart: float, gap: float, seconds: float) -> tuple[float, float]:
    """What the hub has lost and the shaft has gained after some time over each other, nothing touching [K].

    dT [1 - exp(-G k t)], of it the share 1/C_A to the hub and 1/C_I to the shaft, each over k: `time_to_close` turned round.
    apart  hub over shaft at the start [K];  gap  on the radius [mm]
    Raises: ValueError for a gap not above 0.  Validity, source: as `time_to_close`.

    >>> ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=0.6)
    >>> solid = Ring(bore=0, outside=100, length=30, density=7850, specific_heat=470, emissivity=0.6)
    >>> lost, gained = over_the_shaft(ring, solid, apart=100, gap=0.05, seconds=42.9)
    >>> round(100.0 * (18.4e-6 * lost + 12e-6 * gained), 4)
    0.07
    """
    if not gap > 0.0:
        raise ValueError("the gap must be above 0")
    conductance, share = _exchange(hub, shaft, gap)
    gone = apart * -math.expm1(-conductance * share * seconds)
    return gone / (hub.heat_capacity * share), gone / (shaft.heat_capacity * share)


def _exchange(hub: Ring, shaft: Ring, gap: float) -> tuple[float, float]:
    """Conductance of the gap [W/K], and 1/C_A + 1/C_I [K/J]. Source: conduction through a thin layer."""
    conductance = AIR_CONDUCTIVITY * math.pi * hub.bore * hub.length / gap * 1e-3
    return conductance, 1.0 / hub.heat_capacity + 1.0 / shaft.heat_capacity
