"""Interference fits: does the joint hold, does it stay elastic, and what does it do to hub and shaft? mm, MPa, N, N mm.

Interference is on diameter throughout. Two thick cylinders under plane stress (open ends), end to end in contact; the
pressure peak at the hub's edges, keyways and splits are not in these equations. Nothing here counts beyond the elastic
limit. Sources: Lamé's equations (textbook); choice of equations after DIN 7190 (from memory, not opened).
"""

from __future__ import annotations

import math
from collections.abc import Iterable

from setupcheck.record import record

SMOOTHING_FACTOR = 0.8
"""Share of the two Rz lost on diameter. Source: DIN 7190:1988/2001 (from memory); the 2017 edition is said, in a secondary
text not checked, to use 0.4. 0.8 is the safe end for holding; for strength take no loss at all."""
LOWER_SMOOTHING_FACTOR = 0.4
"""The factor that the 2017 edition of DIN 7190 is said to use, see above. Source: a secondary text, not checked."""
DUCTILE = "modified shear stress, limit at yield / sqrt(3)"
"""Name of the criterion for ductile parts. Source: DIN 7190 (from memory)."""
BRITTLE = "tangential stress at the bore against tensile strength"
"""Name of the criterion for brittle hubs. Source: common practice for grey iron (from memory)."""


@record(kw_only=True)
class Joint:
    """Sizes and elastic constants of one joint of constant section.

    diameter       joint diameter D [mm]
    hub_outside    what carries hoop stress: outside of the hub, root circle of a toothed rim, rim over a thin web [mm]
    shaft_hole     hole through the inner part [mm]; 0 for a solid one, which is a case of its own and no small hole
    hub_modulus, shaft_modulus      E [MPa]
    hub_poisson, shaft_poisson      nu
    Raises: ValueError for sizes that are no two cylinders, or constants outside E > 0, 0 <= nu < 0.5 (NaN too).

    >>> Joint(diameter=40, hub_outside=80, hub_modulus=207e3, hub_poisson=0.3,
    ...       shaft_modulus=207e3, shaft_poisson=0.3).hub_ratio
    0.5
    """

    diameter: float
    hub_outside: float
    shaft_hole: float = 0.0
    hub_modulus: float
    hub_poisson: float
    shaft_modulus: float
    shaft_poisson: float

    def __post_init__(self) -> None:
        if not 0.0 <= self.shaft_hole < self.diameter < self.hub_outside < math.inf:
            raise ValueError(
                f"hole {self.shaft_hole:g}, joint {self.diameter:g} and outside {self.hub_outside:g} mm do not grow in this order"
            )
        for modulus, poisson in ((self.hub_modulus, self.hub_poisson), (self.shaft_modulus, self.shaft_poisson)):
            if not (0.0 < modulus < math.inf and 0.0 <= poisson < 0.5):
                raise ValueError(f"modulus {modulus:g} MPa with Poisson's ratio {poisson:g} is no metal")

    @property
    def hub_ratio(self) -> float:
        """Q_A = D / D_o."""
        return self.diameter / self.hub_outside

    @property
    def shaft_ratio(self) -> float:
        """Q_I = D_i / D; 0 for a solid shaft."""
        return self.shaft_hole / self.diameter

    @property
    def hub_compliance(self) -> float:
        """Strain of the hub's bore per pressure, [(1 + Q_A^2)/(1 - Q_A^2) + nu_A] / E_A [1/MPa]. Source: Lamé."""
        q = self.hub_ratio**2
        return ((1.0 + q) / (1.0 - q) + self.hub_poisson) / self.hub_modulus

    @property
    def shaft_compliance(self) -> float:
        """Strain of the seat per pressure, [(1 + Q_I^2)/(1 - Q_I^2) - nu_I] / E_I [1/MPa]; solid: (1 - nu_I) / E_I."""
        q = self.shaft_ratio**2
        return ((1.0 + q) / (1.0 - q) - self.shaft_poisson) / self.shaft_modulus


@record
class Stresses:
    """Stresses of one pressure [MPa], pull positive. The radial ones are -p at bore and seat, 0 on free surfaces.

    shaft_hole_tangential is None for a solid shaft, where everything is -p.
    """

    radial: float
    hub_bore_tangential: float
    hub_outside_tangential: float
    shaft_seat_tangential: float
    shaft_hole_tangential: float | None


@record
class ElasticLimit:
    """Where the weaker part begins to yield (or a brittle hub reaches its allowed stress).

    pressure [MPa], interference on diameter without smoothing loss [mm], weaker `hub` or `shaft`, criterion in words.
    """

    pressure: float
    interference: float
    weaker: str
    criterion: str


@record
class Slice:
    """A length [mm] of a stepped hub or shaft with constant section."""

    joint: Joint
    length: float


def smoothing_loss(*, hub_roughness: float, shaft_roughness: float, factor: float = SMOOTHING_FACTOR) -> float:
    """Interference that flattened roughness takes away, on diameter [mm].

    loss = factor (Rz_A + Rz_I);  roughness as Rz [mm], factor 0 .. 1.
    Raises: ValueError outside that.  Source: DIN 7190 (from memory); the factor is not settled, see SMOOTHING_FACTOR.

    >>> round(smoothing_loss(hub_roughness=0.0063, shaft_roughness=0.004), 5)
    0.00824
    """
    if hub_roughness < 0.0 or shaft_roughness < 0.0 or not 0.0 <= factor <= 1.0:
        raise ValueError("roughness cannot be negative, and the smoothing factor lies between 0 and 1")
    return factor * (hub_roughness + shaft_roughness)


def joint_pressure(joint: Joint, *, interference: float) -> float:
    """Pressure in the joint [MPa] for an interference that is really there (after smoothing, at its temperature).

    p = (U / D) / (K_A/E_A + K_I/E_I);  0 where nothing interferes.
    Validity: elastic, see `elastic_limit`; plane stress: hub and shaft of one length, ends free, no friction along the
    joint. A shaft longer than the hub adds 2 to 4 % to the mean and a peak at the edge; plane strain would give 8 to 10 %.
    Source: Lamé's equations; checked against published examples in tests/published.

    >>> steel = dict(hub_modulus=207e3, hub_poisson=0.3, shaft_modulus=207e3, shaft_poisson=0.3)
    >>> round(joint_pressure(Joint(diameter=40, hub_outside=80, **steel), interference=0.059), 1)
    114.5
    """
    if interference <= 0.0:
        return 0.0
    return interference / joint.diameter / (joint.hub_compliance + joint.shaft_compliance)


def interference_for(joint: Joint, *, pressure: float) -> float:
    """Interference on diameter that makes a pressure [mm]: U = p D (K_A/E_A + K_I/E_I).  Source: Lamé.

    >>> steel = dict(hub_modulus=207e3, hub_poisson=0.3, shaft_modulus=207e3, shaft_poisson=0.3)
    >>> round(interference_for(Joint(diameter=40, hub_outside=80, **steel), pressure=114.5), 3)
    0.059
    """
    return pressure * joint.diameter * (joint.hub_compliance + joint.shaft_compliance)


def stresses(joint: Joint, *, pressure: float) -> Stresses:
    """Stresses at bore, seat, hole and outside.

    hub bore +p (1 + Q_A^2)/(1 - Q_A^2), outside +2 p Q_A^2/(1 - Q_A^2); seat -p (1 + Q_I^2)/(1 - Q_I^2),
    hole -2 p/(1 - Q_I^2); a solid shaft has -p everywhere (not -2 p, which is the stress beside a pinhole).
    Source: Lamé's equations.

    >>> steel = dict(hub_modulus=207e3, hub_poisson=0.3, shaft_modulus=207e3, shaft_poisson=0.3)
    >>> round(stresses(Joint(diameter=40, hub_outside=80, **steel), pressure=60).hub_bore_tangential, 1)
    100.0
    """
    a, i = joint.hub_ratio**2, joint.shaft_ratio**2
    return Stresses(
        radial=-pressure,
        hub_bore_tangential=pressure * (1.0 + a) / (1.0 - a),
        hub_outside_tangential=2.0 * pressure * a / (1.0 - a),
        shaft_seat_tangential=-pressure * (1.0 + i) / (1.0 - i),
        shaft_hole_tangential=-2.0 * pressure / (1.0 - i) if joint.shaft_hole else None,
    )


def hub_pressure_limit(joint: Joint, *, strength: float, safety: float, brittle: bool = False) -> float:
    """Pressure that the hub stands without yielding at the bore [MPa].

    ductile (strength = yield):         p = R_e (1 - Q_A^2) / (sqrt(3) S)
    brittle (strength = tensile, R_m):  p = R_m (1 - Q_A^2) / ((1 + Q_A^2) S)
    safety  S >= 1; from memory 1.0 to 1.3 on yield, 2 to 3 on the tensile strength of grey iron
    Raises: ValueError for strength <= 0 or S < 1.
    Source: DIN 7190 (from memory) and Lamé. Beside it, for Q_A = 0.714 von Mises allows 4 %, Tresca 13 % less.

    >>> steel = dict(shaft_modulus=206e3, shaft_poisson=0.29)
    >>> ring = Joint(diameter=100, hub_outside=140, hub_modulus=103.4e3, hub_poisson=0.34, **steel)
    >>> round(hub_pressure_limit(ring, strength=172, safety=1), 1)
    48.6
    """
    _check_strength(strength, safety)
    q = joint.hub_ratio**2
    if brittle:
        return strength * (1.0 - q) / (1.0 + q) / safety
    return strength * (1.0 - q) / math.sqrt(3.0) / safety


def shaft_pressure_limit(joint: Joint, *, strength: float, safety: float) -> float:
    """Pressure that a ductile shaft stands without yielding [MPa]. strength = yield.

    hollow: p = R_e (1 - Q_I^2) / (sqrt(3) S);  solid: p = 2 R_e / (sqrt(3) S)
    Raises: ValueError for strength <= 0 or S < 1.
    Source: DIN 7190 (from memory). Under von Mises or Tresca a solid shaft stands R_e, 13 % less.

    >>> steel = dict(hub_modulus=206e3, hub_poisson=0.3, shaft_modulus=206e3, shaft_poisson=0.3)
    >>> round(shaft_pressure_limit(Joint(diameter=40, hub_outside=80, **steel), strength=300, safety=1), 1)
    346.4
    """
    _check_strength(strength, safety)
    if not joint.shaft_hole:
        return 2.0 * strength / math.sqrt(3.0) / safety
    return strength * (1.0 - joint.shaft_ratio**2) / math.sqrt(3.0) / safety


def elastic_limit(
    joint: Joint, *, hub_strength: float, shaft_yield: float, hub_safety: float, shaft_safety: float, hub_brittle: bool
) -> ElasticLimit:
    """The pressure, and the interference, at which the weaker part reaches its limit.

    hub_strength  yield, or tensile strength of a brittle hub [MPa]
    Compare the *largest* interference with it, without smoothing loss, at the coldest temperature.
    Raises and sources: `hub_pressure_limit`, `shaft_pressure_limit`, `interference_for`.

    >>> ring = Joint(diameter=100, hub_outside=140, shaft_hole=40, hub_modulus=103.4e3, hub_poisson=0.34,
    ...              shaft_modulus=206e3, shaft_poisson=0.29)
    >>> limit = elastic_limit(ring, hub_strength=172, shaft_yield=500, hub_safety=1, shaft_safety=1, hub_brittle=False)
    >>> limit.weaker, round(limit.interference, 3)
    ('hub', 0.187)
    """
    hub = hub_pressure_limit(joint, strength=hub_strength, safety=hub_safety, brittle=hub_brittle)
    shaft = shaft_pressure_limit(joint, strength=shaft_yield, safety=shaft_safety)
    pressure = min(hub, shaft)
    return ElasticLimit(
        pressure,
        interference_for(joint, pressure=pressure),
        "hub" if hub <= shaft else "shaft",
        BRITTLE if hub_brittle and hub <= shaft else DUCTILE,
    )


def axial_capacity(pressure: float, *, friction: float, diameter: float, length: float, slip_factor: float) -> float:
    """Axial force that the joint carries [N]: F = mu p pi D L / S.

    friction     lowest friction that the joint may have when it slips
    slip_factor  S >= 1; from memory 1.2 to 1.5
    Raises: ValueError for friction or length below 0, or S < 1.  Source: Coulomb friction on a cylinder.

    >>> round(axial_capacity(201.6, friction=0.3, diameter=60, length=10, slip_factor=1))
    114002
    """
    if friction < 0.0 or length < 0.0 or slip_factor < 1.0:
        raise ValueError("friction and length cannot be negative, nor the slip factor below 1")
    return friction * pressure * math.pi * diameter * length / slip_factor


def press_force(pressure: float, *, friction: float, diameter: float, length: float) -> float:
    """Force at the end of pressing in [N]: F = mu_in p pi D L, with p from the largest interference.

    friction  the *highest* friction of pressing: design values for holding are lower bounds and make this force too small
    Raises: ValueError for friction or length below 0.  Source: Coulomb friction on a cylinder.

    >>> round(press_force(19.009, friction=0.11, diameter=100, length=30))
    19707
    """
    return axial_capacity(pressure, friction=friction, diameter=diameter, length=length, slip_factor=1.0)


def sliced_axial_capacity(
    slices: Iterable[Slice], *, interference: float, friction: float, slip_factor: float
) -> float:
    """Axial force that a stepped joint carries [N]: the sum over lengths of constant section, each with its own pressure.

    interference  the same in every slice, after smoothing. The slices are taken as free of each other: low for the sum,
                  by 0.4 to 4 % in finite elements (tests/published). Stress at the bore may pass that of its slice: there
                  most in a narrow collar, von Mises by 13 %, hoop by 33 %. So check each slice for yield, with room.
    Raises: as `axial_capacity`.  Source: DIN 7190's treatment of steps (from memory).

    >>> steel = dict(hub_modulus=207e3, hub_poisson=0.3, shaft_modulus=207e3, shaft_poisson=0.3)
    >>> steps = [Slice(Joint(diameter=40, hub_outside=80, **steel), 10), Slice(Joint(diameter=40, hub_outside=50, **steel), 20)]
    >>> round(sliced_axial_capacity(steps, interference=0.02, friction=0.12, slip_factor=1.2))
    9560
    """
    return math.fsum(
        axial_capacity(
            joint_pressure(part.joint, interference=interference),
            friction=friction,
            diameter=part.joint.diameter,
            length=part.length,
            slip_factor=slip_factor,
        )
        for part in slices
    )


def hub_growth(joint: Joint, *, pressure: float, at_diameter: float) -> float:
    """Growth of the hub on diameter, at a diameter of it or of teeth upon it [mm].

    dd = (p/E_A) Q_A^2/(1 - Q_A^2) [(1 - nu_A) d + (1 + nu_A) D_o^2/d]   for D <= d <= D_o
    Teeth stand on the root circle D_o, carry no hoop stress and ride out with it: beyond D_o the growth is that at D_o.
    All pitches grow alike; a split or scalloped hub does not, and is not covered.
    Raises: ValueError for a diameter inside the bore.  Source: Lamé's displacement; the teeth: derived here.

    >>> ring = Joint(diameter=100, hub_outside=140, hub_modulus=103.4e3, hub_poisson=0.34,
    ...              shaft_hole=40, shaft_modulus=206e3, shaft_poisson=0.29)
    >>> round(hub_growth(ring, pressure=16.863, at_diameter=140), 5)
    0.04757
    """
    if at_diameter < joint.diameter:
        raise ValueError(f"diameter {at_diameter:g} mm lies inside the bore of {joint.diameter:g} mm")
    d, q = min(at_diameter, joint.hub_outside), joint.hub_ratio**2
    bracket = (1.0 - joint.hub_poisson) * d + (1.0 + joint.hub_poisson) * joint.hub_outside**2 / d
    return pressure / joint.hub_modulus * q / (1.0 - q) * bracket


def hole_closing(joint: Joint, *, pressure: float) -> float | None:
    """How much the hole of the inner part (bush, hollow shaft) closes on diameter [mm, positive]; None if it is solid.

    dD_i = 2 p D_i / ((1 - Q_I^2) E_I)
    Validity: elastic; porous (sintered) bushes are crushed and do not follow it.  Source: Lamé.

    >>> ring = Joint(diameter=100, hub_outside=140, hub_modulus=103.4e3, hub_poisson=0.34,
    ...              shaft_hole=40, shaft_modulus=206e3, shaft_poisson=0.29)
    >>> round(hole_closing(ring, pressure=16.863), 4)
    0.0078
    """
    if not joint.shaft_hole:
        return None
    return 2.0 * pressure * joint.shaft_hole / (1.0 - joint.shaft_ratio**2) / joint.shaft_modulus


def _check_strength(strength: float, safety: float) -> None:
    if not strength > 0.0 or not safety >= 1.0:
        raise ValueError("strength must be above 0 and the safety factor at least 1")
