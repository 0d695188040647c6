"""What the jaws do to a part: how much they need to hold, and the lobes they leave on a thin ring. mm, N, MPa."""

from __future__ import annotations

import math

LEAST_GRIP = 10.0
"""Shortest grip of a disc [mm]. Source: from memory of the trade."""
THINNEST, THICKEST = 0.02, 0.2
"""Wall over mean radius for which the thin ring is taken. Source: our screening choice; see `lobing_left`."""


def grip_wanted(diameter: float, part_length: float, *, supported: bool = False) -> float:
    """Length that jaws should grip [mm].

    disc (diameter above the part's length): the larger of 10 mm and D / 3;  bar: one diameter D;  a bar that a centre or
    steady carries as well: as a disc.  Never more than half of the part's length, which leaves the other half to be cut.

    diameter     of the gripped surface [mm];  part_length  over all [mm];  supported  a centre or steady holds the far end
    Raises: ValueError for sizes that are not above zero.
    Source: 10 mm, D / 3 and one diameter from memory of the trade; half of the length is our screening choice.

    >>> grip_wanted(40.0, 120.0), grip_wanted(60.0, 50.0), round(grip_wanted(24.0, 22.0), 1)
    (40.0, 20.0, 10.0)
    """
    if not (diameter > 0.0 and part_length > 0.0):
        raise ValueError(f"a part of {diameter:g} by {part_length:g} mm cannot be gripped")
    disc = diameter > part_length or supported
    wanted = max(LEAST_GRIP, diameter / 3.0) if disc else diameter
    return min(wanted, part_length / 2.0)


def lobing_left(force: float, *, jaws: int, mean_radius: float, wall: float, width: float, modulus: float) -> float:
    """Lobes of a ring that was turned round between jaws and then let go, highest to lowest radius [mm].

    The jaws press n equal radial forces F at equal spacing on a thin ring. With a = pi/n the radius moves
        at a jaw   inward   F R^3/(2 E I) [(a + sin a cos a)/(2 sin^2 a) - 1/a]
        midway     outward  F R^3/(4 E I) [2/a - 1/sin a - a cos a/sin^2 a],     I = b t^3/12
    and what was turned round in that state springs back by the sum of both: n lobes, highest at the jaws of an outside
    surface.  Narrow jaws; jaws that wrap the ring give less (30 degrees each side of three jaws: 0.63 of it).

    force        of each jaw [N];  jaws  2 or more;  modulus  E [MPa]
    mean_radius  R [mm];  wall  t, radial [mm];  width  b, along the axis [mm]
    Validity: t/R from 0.02 to 0.2; bending only: at 0.2 shear adds 5 % with two jaws, 11 % with three, 20 % with four.
    Deflections small against the wall.
    Raises: ValueError outside.
    Source: thin ring under equal radial loads as in Roark's formulas and Timoshenko, from memory; checked in the tests
    against a ring of beam elements and a Fourier series.

    >>> round(lobing_left(1000.0, jaws=3, mean_radius=82.5, wall=15.0, width=20.0, modulus=105_000.0), 4)
    0.0287
    """
    if jaws < 2:
        raise ValueError(f"{jaws} jaws do not squeeze a ring out of round")
    if min(mean_radius, wall, width, modulus) <= 0.0 or force < 0.0:
        raise ValueError("sizes and modulus of the ring must be above zero, the force not below")
    slender = wall / mean_radius
    if not THINNEST <= slender <= THICKEST:
        raise ValueError(
            f"wall over mean radius is {slender:.3f}, the thin ring is taken from {THINNEST:g} to {THICKEST:g}"
        )
    a = math.pi / jaws
    sine, cosine = math.sin(a), math.cos(a)
    stiffness = modulus * width * wall**3 / 12.0
    at_jaw = (a + sine * cosine) / (2.0 * sine**2) - 1.0 / a
    midway = 2.0 / a - 1.0 / sine - a * cosine / sine**2
    return force * mean_radius**3 / stiffness * (at_jaw / 2.0 + midway / 4.0)
