"""Where a ductile hub or shaft would yield by other criteria than the one that is judged; for the working only. MPa, mm."""

from __future__ import annotations

import math
from typing import Literal

from setupcheck.physics.interference import Joint, interference_for

Criterion = Literal["von Mises", "Tresca"]


def hub_pressure(joint: Joint, *, strength: float, criterion: Criterion) -> float:
    """Pressure at which the hub's bore yields [MPa]; bore: -p and p (1 + Q^2)/(1 - Q^2), nothing along the axis.

    von Mises: R_e (1 - Q_A^2)/sqrt(3 + Q_A^4);  Tresca: R_e (1 - Q_A^2)/2
    Source: Lamé's stresses in both criteria (textbook); for Q = 0.714 and 172 MPa 46.7 and 42.1 MPa.

    >>> steel = dict(shaft_modulus=206e3, shaft_poisson=0.29)
    >>> ring = Joint(diameter=100, hub_outside=140, hub_modulus=103.4e3, hub_poisson=0.34, **steel)
    >>> [round(hub_pressure(ring, strength=172, criterion=c), 1) for c in ("von Mises", "Tresca")]
    [46.7, 42.1]
    """
    q = joint.hub_ratio**2
    return strength * (1.0 - q) / (2.0 if criterion == "Tresca" else math.sqrt(3.0 + q * q))


def shaft_pressure(joint: Joint, *, strength: float) -> float:
    """Pressure at which the shaft yields [MPa], by von Mises and by Tresca alike.

    hollow: R_e (1 - Q_I^2)/2, at the hole, where one stress stands alone;  solid: R_e, the same pressure all round
    Source: Lamé's stresses in both criteria (textbook).

    >>> steel = dict(hub_modulus=206e3, hub_poisson=0.3, shaft_modulus=206e3, shaft_poisson=0.3)
    >>> shaft_pressure(Joint(diameter=40, hub_outside=80, shaft_hole=20, **steel), strength=300)
    112.5
    """
    return strength * (1.0 - joint.shaft_ratio**2) / 2.0 if joint.shaft_hole else strength


def elastic_interference(joint: Joint, *, hub_yield: float, shaft_yield: float, criterion: Criterion) -> float:
    """Interference on diameter at which the weaker part yields by a criterion [mm]. Source: as above, and Lamé.

    >>> ring = Joint(diameter=100, hub_outside=140, shaft_hole=40, hub_modulus=103.4e3, hub_poisson=0.34,
    ...              shaft_modulus=206e3, shaft_poisson=0.29)
    >>> round(elastic_interference(ring, hub_yield=172, shaft_yield=500, criterion="von Mises"), 3)
    0.179
    """
    weaker = min(
        hub_pressure(joint, strength=hub_yield, criterion=criterion), shaft_pressure(joint, strength=shaft_yield)
    )
    return interference_for(joint, pressure=weaker)
