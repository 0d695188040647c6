"""Does the joint hold what it must, cold and warm, does it stay elastic, and what does it do to teeth and hole? mm, N, MPa."""

from __future__ import annotations

import math

from setupcheck.jobfile.service import Warmth
from setupcheck.jobfile.setups import Join
from setupcheck.notation import show
from setupcheck.physics import interference as fits
from setupcheck.physics.criteria import Criterion, elastic_interference
from setupcheck.physics.materials import Question
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.friction import Friction
from setupcheck.quantities.pairing import (
    BENCH,
    Pair,
    pair,
    peaks,
    rubbing,
    service,
    smoothing,
    smoothing_1988,
    smoothing_2017,
)
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import strength_of

SLIP_FACTOR = 1.2
"""What a joint must hold over what it must carry. Source: 1.2 to 1.5 (from memory); the lower end, as friction is low already."""
ON_YIELD = 1.0
"""Safety on yield of ductile parts. Source: DIN 7190, 1.0 to 1.3 (from memory); yields are least values already."""
ON_BREAKING = 3.0
"""Safety of a brittle hub on its tensile strength. Source: 2 to 3 (from memory); the stricter, as the caution has it."""


def grip_least(pair: Pair, least: float, smoothing: float, service: tuple[Warmth, Warmth]) -> float:
    """Least interference in service [mm]: loosest pair, smoothed, in the state that takes most of it, 20 degC among them.

    U = U_min - smoothing + D [alpha_I (T_I - 20) - alpha_A (T_A - 20)], hub expansion high, shaft low.
    Raises: OutOfRange where one state is beyond what expansions are known for, but for a pair that is loose in another.
    Source: physics.heating.
    """
    known, unknown = _in_states(pair, least - smoothing, "holding", service)
    if unknown is not None and min(known) > 0.0:
        raise unknown
    return min(known)


def grip_most(pair: Pair, most: float, service: tuple[Warmth, Warmth], limit: tuple[float, str] | None = None) -> float:
    """Largest interference in service or on the bench [mm]: tightest pair, nothing smoothed, at its worst temperature.

    limit  as `limit_of`
    Raises: OutOfRange where one state is beyond what expansions are known for, but for a pair that yields in another.
    Source: physics.heating.
    """
    known, unknown = _in_states(pair, most, "strength", service)
    if unknown is not None and (limit is None or max(known) <= limit[0]):
        raise unknown
    return max(known)


def _in_states(
    pair: Pair, interference: float, question: Question, service: tuple[Warmth, Warmth]
) -> tuple[list[float], OutOfRange | None]:
    """An interference in all states whose expansions are known [mm], 20 degC among them; why it is not known in another."""
    known, unknown = [], None
    for state in (*service, BENCH):
        try:
            known.append(pair.at(interference, question, state))
        except OutOfRange as why:
            unknown = why
    return known, unknown


def limit_of(floor: Floor, pair: Pair) -> tuple[float, str] | Open:
    """(interference on diameter at which the weaker part leaves its elastic range [mm], which part and by what criterion).

    Ductile: p = R_e (1 - Q^2)/sqrt(3); brittle hub: tangential stress R_m/3; the least over all sections.
    Sections are taken as slices of their own: by finite elements a collar narrower than its wall may see 13 % more (von
    Mises), at its bore 33 % more round it, than its slice says.
    Source: DIN 7190 (from memory), physics.interference.
    """
    hub, shaft = strength_of(floor, pair.hub_part, pair.hub), strength_of(floor, pair.shaft_part, pair.shaft)
    missing = tuple(m for x in (hub, shaft) if isinstance(x, Open) for m in x.missing)
    if isinstance(hub, Open) or isinstance(shaft, Open):
        return Open(missing)
    found = [
        fits.elastic_limit(
            joint,
            hub_strength=hub,
            shaft_yield=shaft,
            hub_safety=ON_BREAKING if pair.hub.brittle else ON_YIELD,
            shaft_safety=ON_YIELD,
            hub_brittle=pair.hub.brittle,
        )
        for joint in pair.joints("strength")
    ]
    worst = min(found, key=lambda limit: limit.interference)
    return worst.interference, f"{worst.weaker}, by {worst.criterion}"


def elastic(limit: tuple[float, str]) -> float:
    """Interference on diameter up to which the weaker part stays elastic [mm]. Source: `limit_of`."""
    return limit[0]


def weaker(limit: tuple[float, str]) -> str:
    """The part that gives first, and the criterion. Source: `limit_of`."""
    return limit[1]


def pressure_most(pair: Pair, grip: float) -> float:
    """Highest pressure in the joint [MPa], in its stiffest section at the largest interference, high ends of both moduli.

    p = (U/D) / (K_A/E_A + K_I/E_I);  K_A = (1 + Q_A^2)/(1 - Q_A^2) + nu_A, Q_A = D/D_o;  K_I = (1 + Q_I^2)/(1 - Q_I^2) - nu_I,
    Q_I = D_i/D, and 1 - nu_I for a solid shaft.  Source: Lamé, plane stress.
    """
    return max(fits.joint_pressure(j, interference=grip) for j in pair.joints("strength"))


def pressure_least(pair: Pair, grip: float) -> float:
    """Lowest pressure in the joint [MPa], in its softest section at the least interference, low ends of both moduli.

    p as in `pressure_most`.  Source: Lamé, plane stress.
    """
    return min(fits.joint_pressure(j, interference=grip) for j in pair.joints("holding"))


def hoop_most(pair: Pair, grip: float) -> float:
    """Largest tangential stress at the hub's bore [MPa], in the section where it is largest: p (1 + Q^2)/(1 - Q^2).

    p as in `pressure_most`.  Source: Lamé, plane stress.
    """
    return max(
        fits.stresses(j, pressure=fits.joint_pressure(j, interference=grip)).hub_bore_tangential
        for j in pair.joints("strength")
    )


def shape_in_words(pair: Pair) -> str:
    """Both materials, and the lengths of constant section with what stands outside and the hole inside. Source: the drawing."""
    told = [
        f"{show(s.length, 'mm', 2)} in {show(s.outside, 'mm', 2)}{' (root circle)' if s.toothed else ''}"
        + (f" on a hole of {show(s.hole, 'mm', 2)}" if s.hole else "")
        for s in pair.sections
    ]
    return f"{pair.hub.name} on {pair.shaft.name}, {show(pair.diameter, 'mm', 3)}: {'; '.join(told)}"


def friction_in_words(rubbing: Friction) -> str:
    """Lowest and highest friction, how good they are and where they come from. Source: `rubbing`."""
    note = f"; {rubbing.note}" if rubbing.note else ""
    return f"{rubbing.low:g} to {rubbing.high:g} ({rubbing.kind}{note})"


def friction_low(rubbing: Friction) -> float:
    """Lowest friction the joint may have when it slips. Source: `rubbing`."""
    return rubbing.low


def force_held(pair: Pair, grip: float, friction: float) -> float:
    """Force that the loosest joint holds at its seat in service [N]: sum of mu p pi D L over the sections, over 1.2.

    Source: Coulomb friction and Lamé, DIN 7190's steps (from memory).
    """
    slices = [fits.Slice(j, s.length) for j, s in zip(pair.joints("holding"), pair.sections, strict=True)]
    return fits.sliced_axial_capacity(slices, interference=max(grip, 0.0), friction=friction, slip_factor=SLIP_FACTOR)


def torque_held(pair: Pair, force: float) -> float:
    """Torque that the loosest joint holds in service, with nothing along the axis [N mm]: F D/2. Source: geometry."""
    return force * pair.diameter / 2.0


def torque_smoothed(
    pair: Pair, least: float, smoothing: float, service: tuple[Warmth, Warmth], friction: float
) -> float:
    """Torque of the loosest joint in service, smoothed by one of the two published factors [N mm]. Source: as `torque_held`."""
    return torque_held(pair, force_held(pair, grip_least(pair, least, smoothing, service), friction))


def slip_safety(held: float, asked: float) -> float | None:
    """What the loosest joint holds in service, the slip factor put back, over what it must carry; None for no load.

    Source: DIN 7190 asks 1.2 to 1.5 (from memory).
    """
    return held * SLIP_FACTOR / asked if asked > 0.0 else None


def elastic_by(floor: Floor, pair: Pair, criterion: Criterion) -> float | Open | None:
    """Interference at which the weaker part yields by another criterion than the judged one [mm]; None for a brittle hub."""
    if pair.hub.brittle:
        return None
    hub, shaft = strength_of(floor, pair.hub_part, pair.hub), strength_of(floor, pair.shaft_part, pair.shaft)
    if isinstance(hub, Open) or isinstance(shaft, Open):
        return Open(tuple(m for x in (hub, shaft) if isinstance(x, Open) for m in x.missing))
    return min(
        elastic_interference(j, hub_yield=hub, shaft_yield=shaft, criterion=criterion) for j in pair.joints("strength")
    )


def elastic_mises(floor: Floor, pair: Pair) -> float | Open | None:
    """Interference up to which all is elastic by von Mises [mm]; shown beside the judged one. Source: physics.criteria."""
    return elastic_by(floor, pair, "von Mises")


def elastic_tresca(floor: Floor, pair: Pair) -> float | Open | None:
    """Interference up to which all is elastic by Tresca [mm]; shown beside the judged one. Source: physics.criteria."""
    return elastic_by(floor, pair, "Tresca")


def force_asked(join: Join, pair: Pair) -> float | None:
    """Force at the seat that the joint must carry [N]: sqrt(F^2 + (2 T/D)^2); None where nothing is stated.

    Source: both friction forces at right angles, derived here.
    """
    if not join.must_carry:
        return None
    asked = join.must_carry
    torque = asked["torque"].value if "torque" in asked else 0.0
    axial = asked["axial_force"].value if "axial_force" in asked else 0.0
    return math.hypot(axial, 2.0 * torque / pair.diameter)


def length_ratio(pair: Pair) -> float:
    """Length of the joint over its diameter. Source: the drawing."""
    return math.fsum(s.length for s in pair.sections) / pair.diameter


_HERE = {"floor": "route.floor", "join": ":"}
_PAIR = {"pair": "fit.pair"}
_PEAKS = {"peaks": "fit.peaks"}
_LOOSE = {"least": "fit.interference_least", "smoothing": "fit.smoothing"}

STRENGTH = (
    Quantity("fit.pair", "join", "", 0, pair, {**_HERE, "sizes": "fit.sizes"}, "materials and sections of the joint"),
    Quantity("fit.shape", "join", "", 0, shape_in_words, _PAIR, "how the drawing was read for the joint"),
    Quantity(
        "fit.rubs", "join", "", 0, friction_in_words, {"rubbing": "fit.rubbing"}, "friction and where it comes from"
    ),
    Quantity("fit.peaks", "join", "um", 1, peaks, {**_HERE, **_PAIR}, "roughness of both surfaces, Rz together"),
    Quantity(
        "fit.smoothing", "join", "um", 1, smoothing, {"join": ":", **_PEAKS}, "interference lost to flattened peaks"
    ),
    Quantity(
        "fit.smoothing_1988", "join", "um", 1, smoothing_1988, _PEAKS, "interference lost by the older factor, 0.8"
    ),
    Quantity(
        "fit.smoothing_2017", "join", "um", 1, smoothing_2017, _PEAKS, "interference lost by the lower factor, 0.4"
    ),
    Quantity("fit.service", "join", "", 0, service, {"join": ":", "op": "@op"}, "coldest and warmest in service"),
    Quantity(
        "fit.grip_least",
        "join",
        "um",
        1,
        grip_least,
        {**_PAIR, **_LOOSE, "service": "fit.service"},
        "least interference in service",
    ),
    Quantity(
        "fit.grip_most",
        "join",
        "um",
        1,
        grip_most,
        {**_PAIR, "most": "fit.interference_most", "service": "fit.service", "limit": "settled fit.limit"},
        "largest interference in service",
        {"limit": None},
    ),
    Quantity(
        "fit.limit",
        "join",
        "",
        0,
        limit_of,
        {"floor": "route.floor", **_PAIR},
        "where the weaker part leaves its range",
    ),
    Quantity(
        "fit.elastic", "join", "um", 1, elastic, {"limit": "fit.limit"}, "interference up to which all is elastic"
    ),
    Quantity(
        "fit.elastic_mises",
        "join",
        "um",
        1,
        elastic_mises,
        {"floor": "route.floor", **_PAIR},
        "interference up to which all is elastic by von Mises, not judged",
    ),
    Quantity(
        "fit.elastic_tresca",
        "join",
        "um",
        1,
        elastic_tresca,
        {"floor": "route.floor", **_PAIR},
        "interference up to which all is elastic by Tresca, not judged",
    ),
    Quantity("fit.weaker", "join", "", 0, weaker, {"limit": "fit.limit"}, "the part that gives first"),
    Quantity(
        "fit.pressure_most",
        "join",
        "MPa",
        1,
        pressure_most,
        {**_PAIR, "grip": "fit.grip_most_elastic"},
        "highest pressure",
    ),
    Quantity(
        "fit.pressure_least",
        "join",
        "MPa",
        1,
        pressure_least,
        {**_PAIR, "grip": "fit.grip_least_elastic"},
        "lowest pressure",
    ),
    Quantity(
        "fit.hoop",
        "join",
        "MPa",
        1,
        hoop_most,
        {**_PAIR, "grip": "fit.grip_most_elastic"},
        "hoop stress at the hub's bore",
    ),
    Quantity(
        "fit.rubbing", "join", "", 0, rubbing, {**_HERE, **_PAIR, "op": "@op"}, "friction of the joint, low and high"
    ),
    Quantity("fit.friction", "join", "1", 2, friction_low, {"rubbing": "fit.rubbing"}, "lowest friction of the joint"),
    Quantity(
        "fit.force_held",
        "join",
        "kN",
        2,
        force_held,
        {**_PAIR, "grip": "fit.grip_least_elastic", "friction": "fit.friction"},
        "force the loosest joint holds at its seat",
    ),
    Quantity(
        "fit.torque_held",
        "join",
        "N*m",
        1,
        torque_held,
        {**_PAIR, "force": "fit.force_held"},
        "torque the loosest joint holds",
    ),
    *(
        Quantity(
            f"fit.torque_{edition}",
            "join",
            "N*m",
            1,
            torque_smoothed,
            {
                **_PAIR,
                "least": "fit.interference_least_elastic",
                "smoothing": f"fit.smoothing_{edition}",
                "service": "fit.service",
                "friction": "fit.friction",
            },
            f"torque of the loosest joint, {factor} of the peaks lost",
        )
        for edition, factor in (("1988", "0.8"), ("2017", "0.4"))
    ),
    Quantity(
        "fit.slip_safety",
        "join",
        "1",
        2,
        slip_safety,
        {"held": "fit.force_held", "asked": "fit.force_asked"},
        "what the loosest joint holds over what it must carry",
    ),
    Quantity(
        "fit.force_asked",
        "join",
        "kN",
        2,
        force_asked,
        {"join": ":", **_PAIR},
        "force at the seat the joint must carry",
    ),
    Quantity("fit.length_ratio", "join", "1", 2, length_ratio, _PAIR, "length of the joint over its diameter"),
)
