"""A size of the job file: how wide its tolerance is, and what it is at 20 degC when it was measured warm. mm, degC."""

from __future__ import annotations

from setupcheck.jobfile.models import Dimension
from setupcheck.quantities.book import Open
from setupcheck.quantities.shop import Floor


def limits_of(size: Dimension) -> tuple[float, float] | None:
    """Smallest and largest size of the drawing [mm]; None where it has no limits.

    Source: the job file; ISO 286 tables in rules/data.
    """
    if size.nominal is None:
        return None
    if size.lower is not None or size.upper is not None:
        return size.nominal + (size.lower or 0.0), size.nominal + (size.upper or 0.0)
    if size.fit is None:
        return None
    from setupcheck.quantities.fit_tables import limits

    found = limits(size.nominal, size.fit)
    return size.nominal + found.lower, size.nominal + found.upper


def tolerance(size: Dimension) -> float | None:
    """Width of a size's tolerance [mm]; None where it has none. Source: `limits_of`."""
    if size.lower is not None or size.upper is not None:
        return (size.upper or 0.0) - (size.lower or 0.0)
    found = limits_of(size)
    return found[1] - found[0] if found else None


def at_reference(size: Dimension, path: str, floor: Floor) -> tuple[float, float] | Open:
    """Smallest and largest the measured diameter can be at 20 degC, over the range of the material's expansion [mm].

    D_20 = D / (1 + alpha (T - 20)), the gauge at 20 degC; the size itself where `at_temperature` is not stated.
    path  `parts.wheel.surfaces.bore.diameter`.  Source: physics.measuring; expansions rules/data/materials.yaml.
    """
    from setupcheck.physics.heating import REFERENCE_TEMPERATURE
    from setupcheck.physics.measuring import size_at_reference
    from setupcheck.quantities.stuff import material_of  # looks at facts, which look at the route

    assert size.measured is not None
    if size.at_temperature is None:
        return size.measured, size.measured
    found = material_of(floor, path.split(".")[1])
    if isinstance(found, Open):
        return found
    bounds = found.heating if size.at_temperature >= REFERENCE_TEMPERATURE else found.cooling
    try:
        ends = [
            size_at_reference(size.measured, expansion=alpha, temperature=size.at_temperature)
            for alpha in (bounds.low, bounds.high)
        ]
    except ValueError as why:
        return Open((f"{path}.at_temperature",), str(why))
    return min(ends), max(ends)
