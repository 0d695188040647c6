"""How warm a joint may get until it lets go, how cold until it yields; all of it equally warm. mm, N, degC."""

from __future__ import annotations

from setupcheck.jobfile.service import Warmth
from setupcheck.physics.heating import REFERENCE_TEMPERATURE as REFERENCE
from setupcheck.physics.heating import holding_temperature, loosening_temperature
from setupcheck.physics.materials import COLD, MEANS_END, expansion_for
from setupcheck.quantities.book import OutOfRange, Quantity
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.strength import force_held


def holds_to(pair: Pair, least: float, smoothing: float, friction: float, asked: float) -> float | None:
    """Temperature of the whole joint up to which the loosest pair still holds what it must [degC].

    None where it does up to MEANS_END, beyond which expansions are not known.  Source: physics.heating.
    """
    if asked <= 0.0:
        return None  # without a load it holds until it is loose
    unit = force_held(pair, 1.0, friction)  # for each mm of interference, as pressure is straight in it
    return _as_far_as_known(
        holding_temperature(least - smoothing, needed=asked / unit, diameter=pair.diameter, **_expansions(pair))
    )


def loosens_at(pair: Pair, least: float, smoothing: float) -> float | None:
    """Temperature of the whole joint at which the loosest pair has no interference left [degC].

    None where none up to MEANS_END does that: see `tight_to`.  Source: physics.heating.
    """
    return _as_far_as_known(loosening_temperature(least - smoothing, diameter=pair.diameter, **_expansions(pair)))


def tight_to(pair: Pair, least: float, smoothing: float) -> float | None:
    """MEANS_END where the loosest pair interferes up to there [degC], which is as far as expansions are known; else None.

    Source: physics.heating.
    """
    loose = loosening_temperature(least - smoothing, diameter=pair.diameter, **_expansions(pair))
    return MEANS_END if loose > MEANS_END else None


def yields_below(pair: Pair, most: float, limit: tuple[float, str]) -> float | None:
    """Temperature of the whole joint below which the tightest pair leaves its elastic range [degC].

    T = 20 - (U_elastic - U_max)/(D (alpha_A - alpha_I)), expansions as for strength in mild cold; None where it does so at
    20 degC already, or in no cold down to COLD.  Source: physics.heating.
    """
    per_kelvin = pair.at(0.0, "strength", Warmth(REFERENCE - 1.0, REFERENCE - 1.0))  # what a kelvin of cold adds
    if limit[0] <= most or per_kelvin <= 0.0:
        return None
    at = REFERENCE - (limit[0] - most) / per_kelvin
    return at if at >= COLD else None


def _expansions(pair: Pair) -> dict[str, float]:
    warm = 100.0
    return {
        "hub_expansion": expansion_for("holding", "hub", pair.hub, temperature=warm).value,
        "shaft_expansion": expansion_for("holding", "shaft", pair.shaft, temperature=warm).value,
    }


def _as_far_as_known(temperature: float) -> float | None:
    """None where no warmth up to MEANS_END loosens the joint, as far as expansions are known."""
    if temperature > MEANS_END:
        return None
    if temperature >= REFERENCE:
        return temperature
    raise OutOfRange("the loosest pair does not hold even at 20 degC")


_PAIR = {"pair": "fit.pair"}
_LOOSE = {**_PAIR, "least": "fit.interference_least_elastic", "smoothing": "fit.smoothing"}

LOOSENING = (
    Quantity(
        "fit.holds_to",
        "join",
        "degC",
        0,
        holds_to,
        {**_LOOSE, "friction": "fit.friction", "asked": "fit.force_asked"},
        "temperature up to which the joint holds what it must",
    ),
    Quantity(
        "fit.loosens_at",
        "join",
        "degC",
        0,
        loosens_at,
        _LOOSE,
        "temperature at which nothing interferes",
    ),
    Quantity(
        "fit.yields_below",
        "join",
        "degC",
        0,
        yields_below,
        {**_PAIR, "most": "fit.interference_most", "limit": "fit.limit"},
        "temperature below which the tightest pair yields",
    ),
    Quantity(
        "fit.tight_to",
        "join",
        "degC",
        0,
        tight_to,
        _LOOSE,
        "temperature up to which it surely interferes, as far as expansions are known",
    ),
)
