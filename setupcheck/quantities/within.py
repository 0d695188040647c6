"""Does a joint stay elastic, so that what Lamé's equations say of it counts? Grips that stop where a part yields. mm."""

from __future__ import annotations

from setupcheck.jobfile.service import Warmth
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.pairing import BENCH, Pair
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.strength import limit_of

Limit = tuple[float, str] | None
"""Interference up to which all is elastic [mm] and the weaker part in words; None where a strength is missing: FIT-004 asks
for it and is open, and what is said of the joint holds on that condition."""


def elastic_only(grip: float, reached: float | None, limit: Limit, which: str) -> float:
    """A grip of a pair that stays elastic in everything that happens to it [mm].

    reached  the largest interference of the same pair in service, None where that is not known; a part that has yielded in
             the cold is not the same part at 20 degC again
    Validity: up to `limit`.  Raises: OutOfRange beyond it.  Source: Lamé's equations are those of elastic parts.
    """
    most = max(grip, reached if reached is not None else grip)
    if limit is not None and most > limit[0]:
        weak = limit[1].partition(",")[0]
        raise OutOfRange(
            f"the {weak} of the {which} pair yields: it may reach {most * 1e3:.1f} um of interference and stays elastic up to "
            f"{limit[0] * 1e3:.1f} um, and the figures of a joint are worked out for elastic parts alone"
        )
    return grip


def tight(grip: float, reached: float | None, limit: Limit) -> float:
    """An interference of the tightest pair while it stays elastic [mm].  Source: `elastic_only`, with its validity."""
    return elastic_only(grip, reached, limit, "tightest")


def loose(grip: float, reached: float | None, limit: Limit) -> float:
    """An interference of the loosest pair while that one stays elastic [mm].  Source: `elastic_only`, with its validity.

    A tighter pair that yields keeps at least the pressure it yielded at and so no less than this one, cold or warm.
    """
    return elastic_only(grip, reached, limit, "loosest")


def limit(floor: Floor, pair: Pair) -> Limit:
    """Where a joint leaves its elastic range, None where that is not known. Source: quantities.strength."""
    found = limit_of(floor, pair)
    return None if isinstance(found, Open) else found


def loosest_reaches(pair: Pair, least: float, service: tuple[Warmth, Warmth] | None) -> float:
    """Largest interference that the loosest pair comes to, nothing smoothed [mm]; at 20 degC where no service is stated.

    Source: physics.heating.
    """
    return max(pair.at(least, "strength", state) for state in (*(service or ()), BENCH))


_TIGHT = {"reached": "settled fit.grip_most", "limit": "settled fit.limit"}
_LOOSE = {"reached": "settled fit.loosest_reaches", "limit": "settled fit.limit"}
_UNKNOWN = {"reached": None, "limit": None}
_GRIPS = {
    "fit.interference_most": "interference of the tightest pair",
    "fit.grip_most": "largest interference in service",
    **{f"fit.{state}_most": f"interference of the tightest pair, {state}" for state in ("cold", "bench", "warm")},
}
_LOOSEST = {
    "fit.interference_least": "interference of the loosest pair",
    "fit.grip_least": "least interference in service",
    **{f"fit.{state}_least": f"interference of the loosest pair, {state}" for state in ("cold", "bench", "warm")},
}
ELASTIC = "_elastic"
"""What the name of a grip ends in that is open where the pair yields."""

WITHIN = (
    Quantity(
        "fit.loosest_reaches",
        "join",
        "um",
        1,
        loosest_reaches,
        {"pair": "fit.pair", "least": "fit.interference_least", "service": "settled fit.service"},
        "largest interference that the loosest pair comes to",
        {"service": None},
    ),
    *(
        Quantity(
            name + ELASTIC, "join", "um", 1, of, {"grip": name, **inputs}, f"{says}, where it stays elastic", _UNKNOWN
        )
        for of, inputs, grips in ((tight, _TIGHT, _GRIPS), (loose, _LOOSE, _LOOSEST))
        for name, says in grips.items()
    ),
)
