"""Shrink fitting: how hot, how long in the air, what the warm joint still holds. mm, degC, s; expansion 1/K.

Sizes hold at 20 degC, so every temperature counts from there and not from the room. Which end of an expansion range is
safe depends on the question: `materials.expansion_for` picks it. Heat flow is computed in SI inside.
"""

from __future__ import annotations

import math

from setupcheck.record import record

REFERENCE_TEMPERATURE = 20.0
"""Temperature of sizes [degC]. Source: ISO 1."""
PLAY_SHARE = 0.001
"""Joining play as a share of the diameter. Source: DIN 7190 practice (from memory)."""
LEAST_PLAY = 0.03
"""Least joining play [mm], for small diameters. Our screening choice."""
BRIGHT, DULL = 0.1, 0.6
"""Emissivity of bright machined bronze and of rough or darkened metal. Source: tables in manuals of infrared cameras and
thermometers (excerpts opened). Dull loses more heat: the safe end for the carry."""
STEFAN_BOLTZMANN = 5.670e-8
"""[W/m2K4]. Source: CODATA, rounded."""
GRAVITY = 9.81
"""[m/s2]. Source: standard gravity (CGPM 1901), rounded."""
KELVIN = 273.15
"""0 degC [K]. Source: definition of the degree Celsius."""
AIR_CONDUCTIVITY = 0.03
"""Of warm air in the gap [W/mK], about 80 degC. Source: tables of air, from memory."""
LUMPED_BELOW = 0.1
"""Biot number below which a body has one temperature throughout, to some 5 %. Source: textbooks of heat transfer."""
LARGEST_HEATED, LARGEST_CHILLED = 5000.0, 1500.0
"""Largest outside of a part in warm or in cold still air [mm]: the film is known up to a Rayleigh number of 1e12, which is
reached at 5.1 m up to 400 degC and at 1.58 m down to -205 degC. A test computes it."""
_PARTS = 400  # of the integral over the temperature, which is steep near the air; our choice
_STEPS = 100  # of the time integration; our choice, the tests compare with scipy and published times


@record
class Temperatures:
    """A band of temperatures [degC]; low above high: there is none."""

    low: float
    high: float


@record(kw_only=True)
class Ring:
    """A hot ring (hub) in the air. bore, outside, length [mm], density [kg/m3], specific_heat [J/kgK], emissivity 0 .. 1.

    Raises: ValueError for sizes or values that are no ring.
    """

    bore: float
    outside: float
    length: float
    density: float
    specific_heat: float
    emissivity: float

    def __post_init__(self) -> None:
        sized = 0.0 <= self.bore < self.outside < math.inf and self.length > 0.0
        if not (sized and self.density > 0.0 and self.specific_heat > 0.0 and 0.0 <= self.emissivity <= 1.0):
            raise ValueError("sizes, density, specific heat or emissivity are not those of a ring")

    @property
    def heat_capacity(self) -> float:
        """m c [J/K]."""
        return math.pi / 4.0 * (self.outside**2 - self.bore**2) * self.length * 1e-9 * self.density * self.specific_heat

    @property
    def surface(self) -> float:
        """Outside, bore and both faces [m2]: the bore is open while the ring is carried."""
        faces = math.pi / 2.0 * (self.outside**2 - self.bore**2)
        return (math.pi * (self.outside + self.bore) * self.length + faces) * 1e-6

    @property
    def depth(self) -> float:
        """Volume over surface [mm]: how far from the surface its heat lies, on the whole."""
        return self.heat_capacity / (self.density * self.specific_heat * self.surface) * 1e3


def interference_at(
    interference: float,
    *,
    diameter: float,
    hub_expansion: float,
    hub_temperature: float,
    shaft_expansion: float,
    shaft_temperature: float,
) -> float:
    """Interference on diameter when hub and shaft have their temperatures [mm]; negative: play.

    U(T) = U + D [alpha_I (T_I - 20) - alpha_A (T_A - 20)];  U at 20 degC.
    Validity: first order; E and yield at temperature are not in it.  Source: derived here.

    >>> round(interference_at(0.016, diameter=100, hub_expansion=18.4e-6, hub_temperature=33,
    ...                       shaft_expansion=12e-6, shaft_temperature=33), 5)
    0.00768
    """
    grown = shaft_expansion * (shaft_temperature - REFERENCE_TEMPERATURE)
    return interference + diameter * (grown - hub_expansion * (hub_temperature - REFERENCE_TEMPERATURE))


def holding_temperature(
    interference: float, *, needed: float, diameter: float, hub_expansion: float, shaft_expansion: float
) -> float:
    """Temperature of the whole joint up to which it keeps the interference it needs [degC].

    T = 20 + (U - U_needed) / (D (alpha_A - alpha_I))
    interference  smallest, after smoothing; needed: for what it must carry, slip factor inside
    A hub that does not outgrow its shaft keeps it at any heat (inf), or has not enough of it at any (-inf).
    At or below 20: the joint does not hold at 20 degC. Take the hub's high end and the shaft's low end of expansion.
    Source: derived here.

    >>> round(holding_temperature(0.016, needed=0.010, diameter=100, hub_expansion=18.4e-6, shaft_expansion=12e-6), 1)
    29.4
    """
    spare = interference - needed
    difference = hub_expansion - shaft_expansion
    if difference <= 0.0:
        return math.inf if spare > 0.0 else -math.inf
    return REFERENCE_TEMPERATURE + spare / (diameter * difference)


def loosening_temperature(
    interference: float, *, diameter: float, hub_expansion: float, shaft_expansion: float
) -> float:
    """Temperature of the whole joint at which nothing interferes any more [degC]: `holding_temperature` with needed 0.

    >>> round(loosening_temperature(0.00776, diameter=100, hub_expansion=18.4e-6, shaft_expansion=12e-6) - 20, 1)
    12.1
    """
    return holding_temperature(
        interference, needed=0.0, diameter=diameter, hub_expansion=hub_expansion, shaft_expansion=shaft_expansion
    )


def joining_play(diameter: float) -> float:
    """Usual least play at joining, on diameter [mm]: D / 1000, not under 0.03 mm.

    Source: DIN 7190 practice (from memory); the floor is our screening choice.

    >>> joining_play(100), joining_play(12)
    (0.1, 0.03)
    """
    return max(PLAY_SHARE * diameter, LEAST_PLAY)


def joining_temperature(
    interference: float,
    *,
    play: float,
    diameter: float,
    hub_expansion: float,
    shaft_expansion: float,
    shaft_temperature: float,
) -> float:
    """Temperature that the hub needs as it goes over the shaft [degC].

    T_hub = 20 + [U_max + play + alpha_I D (T_shaft - 20)] / (alpha_A D)
    interference  the largest, without smoothing loss
    Take the low end of the hub's expansion; of the shaft's the high end above 20 degC, the low one of a chilled shaft.
    Raises: ValueError for diameter or hub expansion not above 0.  Source: derived here; agrees with DIN 7190 (from memory).

    >>> round(joining_temperature(0.073, play=0.1, diameter=100, hub_expansion=18.4e-6,
    ...                           shaft_expansion=12e-6, shaft_temperature=20), 1)
    114.0
    """
    if not (diameter > 0.0 and hub_expansion > 0.0):
        raise ValueError("diameter and expansion of the hub must be above 0")
    shaft_growth = shaft_expansion * diameter * (shaft_temperature - REFERENCE_TEMPERATURE)
    return REFERENCE_TEMPERATURE + (interference + play + shaft_growth) / (hub_expansion * diameter)


def lowest_hub_temperature(planned: float, *, oven_error: float, carry_loss: float) -> float:
    """What the hub may still have at the shaft [degC]: planned - oven error - loss in the carry. Compare with the need.

    >>> lowest_hub_temperature(150, oven_error=10, carry_loss=5)
    135
    """
    return planned - oven_error - carry_loss


def planned_heat(*, needed: float, cap: float, oven_error: float, carry_loss: float) -> Temperatures:
    """Settings of the oven that meet the need and keep the cap [degC]; low above high: heat alone does not do it.

    needed + oven error + carry loss <= planned <= cap - oven error.  Source: derived here.

    >>> planned_heat(needed=114, cap=200, oven_error=10, carry_loss=5)
    Temperatures(low=129, high=190)
    """
    return Temperatures(needed + oven_error + carry_loss, cap - oven_error)


def shoulder_gap(interference: float, *, diameter: float, grip_distance: float) -> float:
    """Largest gap that opens at the shoulder as the hub cools, one-sided, 0 to this [mm].

    gap = U L_g / D: once the bore bites, at a point L_g from the shoulder, hub and shaft have still to shrink against each
    other by the strain U/D, along as well as across. Holding the hub by hand does not prevent it; the shoulder end
    gripping first, or facing after fitting, does.
    Raises: ValueError for a diameter not above 0 or a distance below 0.  Source: derived here.

    >>> round(shoulder_gap(0.073, diameter=100, grip_distance=30), 4)
    0.0219
    """
    if not diameter > 0.0 or grip_distance < 0.0:
        raise ValueError("the diameter must be above 0 and the distance not below")
    return max(interference, 0.0) * grip_distance / diameter


def biot_number(film: float, *, depth: float, conductivity: float) -> float:
    """How hard heat gets to the surface of a body against how hard it gets away from there [1].

    Bi = h (V/A) / k;  film: h [W/m2K], radiation counted in;  depth: V/A [mm];  conductivity: k [W/mK]
    Below LUMPED_BELOW the body is of one temperature, and `cooled_temperature` holds.
    Raises: ValueError for a film below 0, a depth or conductivity not above 0.
    Source: lumped capacity criterion, textbooks; a published example in tests/published.

    >>> round(biot_number(15.0, depth=8.6, conductivity=52.0), 4)
    0.0025
    """
    if film < 0.0 or not (depth > 0.0 and conductivity > 0.0):
        raise ValueError("the film must not be below 0, depth and conductivity must be above 0")
    return film * depth * 1e-3 / conductivity


def film_coefficient(*, surface: float, air: float, diameter: float) -> float:
    """Heat transfer of a horizontal cylinder in still air [W/m2K], temperatures in degC, diameter in mm.

    Nu = {0.60 + 0.387 Ra^(1/6) / [1 + (0.559/Pr)^(9/16)]^(8/27)}^2,  Ra = g (T_s - T_a) D^3 / (T_f nu a), kelvin
    Validity: Ra <= 1e12, which LARGEST_HEATED and LARGEST_CHILLED keep; still air, a cylinder colder than it as well; faces and
    bore of a ring by the same value, 30 % either way. Draught: more.
    Source: Churchill and Chu (1975), through textbooks; power fits of air from memory. With the
    tables of two textbooks in their place h changes by 0.1 and 0.9 % (tests/published).

    >>> round(film_coefficient(surface=165, air=23, diameter=100), 2)
    7.22
    """
    conductivity, prandtl, rayleigh = _air(surface, air, diameter)
    nusselt = (0.60 + 0.387 * rayleigh ** (1 / 6) / (1.0 + (0.559 / prandtl) ** (9 / 16)) ** (8 / 27)) ** 2
    return float(nusselt * conductivity / (diameter / 1000.0))


def _air(surface: float, air: float, diameter: float) -> tuple[float, float, float]:
    """Conductivity [W/mK], Prandtl number and Rayleigh number of the air about a cylinder."""
    mean = (surface + air) / 2.0 + KELVIN
    conductivity = 0.0241 * (mean / KELVIN) ** 0.81
    viscosity = 1.716e-5 * (mean / KELVIN) ** 0.7
    density = 1.2922 * KELVIN / mean
    prandtl = viscosity * 1007.0 / conductivity
    nu, spread = viscosity / density, conductivity / (density * 1007.0)
    rayleigh = GRAVITY * abs(surface - air) * (diameter / 1000.0) ** 3 / (mean * nu * spread)
    return conductivity, prandtl, rayleigh


def heat_loss(ring: Ring, *, temperature: float, air: float, film: float | None = None) -> float:
    """Heat that a ring gives to air and walls of one temperature [W].

    q = A [h (T - T_a) + eps sigma (T^4 - T_a^4)], kelvin;  film: a given h [W/m2K], else still air by `film_coefficient`
    Source: Newton's law of cooling and the Stefan-Boltzmann law.

    >>> ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=0.6)
    >>> round(heat_loss(ring, temperature=150, air=20))
    65
    """
    h = film_coefficient(surface=temperature, air=air, diameter=ring.outside) if film is None else film
    radiated = ring.emissivity * STEFAN_BOLTZMANN * ((temperature + KELVIN) ** 4 - (air + KELVIN) ** 4)
    return ring.surface * (h * (temperature - air) + radiated)


def cooled_temperature(
    ring: Ring, *, start: float, seconds: float, air: float, film: float | None = None, steps: int = _STEPS
) -> float:
    """Temperature of a ring after some time in the air [degC]; start - this is the loss in the carry.

    A ring colder than the air is warmed by the same law; frost on it is not counted.

    m c dT/dt = -q(T), Runge-Kutta of fourth order.
    Validity: one temperature in the whole ring (`biot_number` below LUMPED_BELOW, as metal rings in air have it), still air, no
    contact: tongs, bench and the cold shaft take far more than the air.
    Raises: ValueError for a time below 0.  Source: lumped capacity (textbook); published times in tests/published.

    >>> ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=DULL)
    >>> round(cooled_temperature(ring, start=150, seconds=60, air=20), 1)
    144.9
    """
    if seconds < 0.0:
        raise ValueError("a time cannot be below 0")
    step = seconds / steps
    capacity = ring.heat_capacity
    low, high = sorted((start, air))  # a foil of no mass would overshoot the air within one step

    def rate(temperature: float) -> float:
        return -heat_loss(ring, temperature=min(max(temperature, low), high), air=air, film=film) / capacity

    now = start
    for _ in range(steps):
        a = rate(now)
        b = rate(now + step / 2.0 * a)
        c = rate(now + step / 2.0 * b)
        now = min(max(now + step / 6.0 * (a + 2.0 * b + 2.0 * c + rate(now + step * c)), low), high)
    return now


def carry_time(ring: Ring, *, start: float, until: float, air: float, film: float | None = None) -> float:
    """Time in the air until a ring has come down to a temperature [s]; inf if it never does, 0 if it is there already.

    t = integral of m c / q(T) dT from until to start, by Simpson's rule.  Validity, source: as `cooled_temperature`.

    >>> ring = Ring(bore=100, outside=140, length=30, density=8770, specific_heat=377, emissivity=DULL)
    >>> round(carry_time(ring, start=150, until=140, air=20))
    121
    """
    if until >= start:
        return 0.0
    if until <= air:
        return math.inf
    width = (start - until) / _PARTS
    terms = [
        (1.0 if i in (0, _PARTS) else 4.0 if i % 2 else 2.0)
        / heat_loss(ring, temperature=until + i * width, air=air, film=film)
        for i in range(_PARTS + 1)
    ]
    return ring.heat_capacity * width / 3.0 * math.fsum(terms)
