"""A size measured warm, brought back to the reference temperature; and what a reading can prove. mm, degC, 1/K."""

from __future__ import annotations

from setupcheck.physics.heating import REFERENCE_TEMPERATURE

COLDEST, WARMEST = -20.0, 120.0
"""Temperatures of a part under the gauge that are taken [degC]. Source: our screening choice; nobody measures beyond."""


def size_at_reference(measured: float, *, expansion: float, temperature: float) -> float:
    """Size at 20 degC of a part that was warm when it was measured with a gauge at 20 degC [mm].

    D_20 = D / (1 + alpha (T - 20)).  A gauge as warm as the part reads less off: only the difference of both expansions.

    measured  [mm];  expansion  mean from 20 degC to the temperature of the part [1/K];  temperature  of the part [degC]
    Validity: -20 to 120 degC.
    Raises: ValueError outside.
    Source: ISO 1 reference temperature (from memory); linear expansion.

    >>> round(size_at_reference(120.0, expansion=18e-6, temperature=30.0), 4)
    119.9784
    """
    if not COLDEST <= temperature <= WARMEST:
        raise ValueError(
            f"a part at {temperature:g} degC is outside {COLDEST:g} to {WARMEST:g} degC, where sizes are brought back"
        )
    return measured / (1.0 + expansion * (temperature - REFERENCE_TEMPERATURE))


def share_of_bound(uncertainty: float, *, bound: float) -> float | None:
    """Expanded uncertainty over the bound it has to prove; None for a bound of zero, which nothing proves.

    uncertainty  expanded, k = 2, as ± [mm];  bound  a one-sided limit, or half of a tolerance: ± against ± [mm]
    Source: four to one, common practice.

    >>> share_of_bound(0.001, bound=0.004)
    0.25
    """
    return uncertainty / bound if bound > 0.0 else None
