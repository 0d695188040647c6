"""Fly cutter plunged once into a worm wheel: radius floor, crowning, twist, contact, errors of setting. mm, rad.

A fly cutter makes a surface of revolution and cannot make the flank's twist. Along the face (z, from the mid-plane) and
across it (eta, on the worm's radius from the pitch point, positive towards the wheel's root) the metal missing is
    e = A z^2 - B z eta        A crowning [1/mm], B twist [1/mm], C_0 z left out: a tilt a little above g ends it
for the right flank of a right-hand pair; z changes sign for the other flank or hand. r1 the worm's radius at the pitch
point (d1/2 without profile shift) and g the lead angle there, r2 = d2/2 of the wheel, D how much the cutter is larger
than worm tip + clearance, th0 half the gap angle of the wheel at r2.
Validity of everything on A and B: second order, so near the mid-plane; at |z| > r1/2 it overstates the crowning (by 30 %
at the ends of a face of about r1). ZA worm.
"""

from __future__ import annotations

import math

from setupcheck.record import record
from setupcheck.worm.geometry import above_zero, not_below_zero, steep_enough

RIDGE_ALLOWANCE = 1.3
"""Extra crowning a wide face needs because the fourth order takes about 30 % of it away. Fitted to own simulation."""


def oversize(*, cutter_radius: float, worm_tip_diameter: float, clearance: float) -> float:
    """How much the cutter is larger than the worm's tip and its clearance [mm]: D = R - (ra1 + c); may be negative.

    Raises: ValueError for sizes not above zero.  Source: definition.

    >>> oversize(cutter_radius=29.75, worm_tip_diameter=35.0, clearance=0.5)
    11.75
    """
    above_zero(cutter_radius=cutter_radius, worm_tip_diameter=worm_tip_diameter)
    not_below_zero(clearance=clearance)
    return cutter_radius - worm_tip_diameter / 2.0 - clearance


def _wall(*, pressure_angle: float, gap_arc: float, wheel_diameter: float) -> float:
    """Lean of the gap's wall at the pitch point in the cutter's plane: tan(alpha + th0), th0 = s2/d2."""
    steep_enough(pressure_angle=pressure_angle)
    above_zero(gap_arc=gap_arc, wheel_diameter=wheel_diameter)
    return math.tan(pressure_angle + gap_arc / wheel_diameter)


@record(kw_only=True)
class Plunge:
    """A cutter plunged into a wheel: what crowning, twist and all that follows from them are made of [mm, rad].

    pitch_diameter  of the worm at the pitch point;  wheel_diameter, gap_arc  d2 and the gap there
    pressure_angle  axial;  lead_angle  at the pitch point;  oversize  D, what the cutter is larger than tip and clearance
    Raises: ValueError for sizes not above zero or angles outside 0 .. 45 deg.
    """

    pitch_diameter: float
    wheel_diameter: float
    pressure_angle: float
    lead_angle: float
    gap_arc: float
    oversize: float

    def __post_init__(self) -> None:
        steep_enough(lead_angle=self.lead_angle, pressure_angle=self.pressure_angle)
        above_zero(pitch_diameter=self.pitch_diameter, wheel_diameter=self.wheel_diameter, gap_arc=self.gap_arc)
        above_zero(cutter_radius_at_pitch_height=self.at_pitch)

    @property
    def at_pitch(self) -> float:
        """Radius of the cutter at pitch height, r1 + D [mm]."""
        return self.pitch_diameter / 2.0 + self.oversize

    @property
    def wall(self) -> float:
        """Lean of the gap's wall at the pitch point in the cutter's plane: tan(alpha + th0), th0 = s2/d2."""
        return _wall(pressure_angle=self.pressure_angle, gap_arc=self.gap_arc, wheel_diameter=self.wheel_diameter)


def smallest_radius(
    *,
    pitch_diameter: float,
    worm_tip_diameter: float,
    wheel_diameter: float,
    pressure_angle: float,
    lead_angle: float,
    gap_arc: float,
    clearance: float,
) -> float:
    """Cutter tip radius without crowning [mm], R0; below it the worm rides on the ends of the face.

    R0 = ra1 + c + D0,  r1 + D0 = r1 tan(alpha + th0)/[tan alpha cos^2 g (1 - r1 tan^2 g/r2)]
    pitch_diameter  of the worm at the pitch point [mm]; wheel_diameter, gap_arc  d2 and the gap there [mm]
    Raises: ValueError for sizes not above zero, angles outside 0 .. 45 deg, or a thread too steep for any cutter.
    Source: derived (A = 0); 0.5 to 2 % above the zero of the exact gap, so on the careful side.

    >>> round(smallest_radius(pitch_diameter=30.0, worm_tip_diameter=35.0, wheel_diameter=100.0,
    ...       pressure_angle=math.radians(20.0), lead_angle=math.atan(1.0 / 12.0), gap_arc=math.pi * 1.25,
    ...       clearance=0.5), 2)
    20.01
    """
    above_zero(pitch_diameter=pitch_diameter, worm_tip_diameter=worm_tip_diameter)
    not_below_zero(clearance=clearance)
    steep_enough(lead_angle=lead_angle)
    wall = _wall(pressure_angle=pressure_angle, gap_arc=gap_arc, wheel_diameter=wheel_diameter)
    rise, r1, r2 = math.tan(lead_angle) ** 2, pitch_diameter / 2.0, wheel_diameter / 2.0
    left = 1.0 - r1 * rise / r2
    if not left > 0.0:
        raise ValueError("the thread is so steep that a plunged cutter of no radius crowns the flank")
    pitch_radius = r1 * wall * (1.0 + rise) / (math.tan(pressure_angle) * left)
    return worm_tip_diameter / 2.0 + clearance + pitch_radius - r1


def crowning(cut: Plunge) -> float:
    """Crowning A of the flank along the face [1/mm]; negative means edge contact at both ends.

    A = 1/2 [tan alpha/r1 - tan(alpha + th0)/((r1 + D) cos^2 g) - tan alpha tan^2 g/r2]
    A form cutter stands still while the flank is rolled, hence alpha + th0; cos^2 g is the helix's curvature.
    Source: derived; 1 to 3 % below the exact gap of tests/unit/worm.

    >>> round(1e3 * crowning(Plunge(pitch_diameter=30.0, wheel_diameter=100.0, pressure_angle=math.radians(20.0),
    ...       lead_angle=math.atan(1.0 / 12.0), gap_arc=math.pi * 1.25, oversize=12.0)), 2)
    4.48
    """
    slope, rise = math.tan(cut.pressure_angle), math.tan(cut.lead_angle) ** 2
    worm, wheel = 2.0 * slope / cut.pitch_diameter, 2.0 * slope * rise / cut.wheel_diameter
    return 0.5 * (worm - cut.wall * (1.0 + rise) / cut.at_pitch - wheel)


def twist(cut: Plunge) -> float:
    """Twist B that the revolved surface lacks [1/mm]: tan g [1/r1 + 1/r2 - K'(r2)], tilt = g.

    K = (cos psi/cos alpha_r)(1 - tan psi cos^2 g x/rc): what an arc of the flank gains per unit of sideways travel of
    the cut, psi = alpha_r + th the wall's lean, x = r sin th, rc the cutter radius there; K' its slope over r.
    For a narrow gap K' = -tan^2 alpha [1/r2 + 1/(r1 + D)]; the gap's width adds 5 to 11 % to B.
    Source: derived here; the exact gap agrees within 1 % in tests/unit/worm.

    >>> round(1e3 * twist(Plunge(pitch_diameter=30.0, wheel_diameter=100.0, pressure_angle=math.radians(20.0),
    ...       lead_angle=math.atan(1.0 / 12.0), gap_arc=math.pi * 1.25, oversize=12.0)), 2)
    8.67
    """
    tan_psi = cut.wall
    r2, slope, th = cut.wheel_diameter / 2.0, math.tan(cut.pressure_angle), cut.gap_arc / cut.wheel_diameter
    x, rc = r2 * math.sin(th), cut.at_pitch + r2 * (1.0 - math.cos(th))
    per_arc = math.cos(th) - math.sin(th) * slope  # cos psi/cos alpha
    per_arc_slope = -(slope * (math.sin(th) + math.cos(th) * slope) + math.sin(th) * (1.0 + slope**2) / slope) / r2
    lean_slope = (1.0 / slope + slope) / r2  # of psi over r
    part = math.cos(cut.lead_angle) ** 2 / rc
    lost = tan_psi * x * part
    lost_slope = part * ((1.0 + tan_psi**2) * lean_slope * x + tan_psi * per_arc * (tan_psi + x / rc))
    gain_slope = per_arc_slope * (1.0 - lost) - per_arc * lost_slope
    return math.tan(cut.lead_angle) * (2.0 / cut.pitch_diameter + 1.0 / r2 - gain_slope)


def crowned(crowning: float) -> None:
    if not 0.0 < crowning < math.inf:
        raise ValueError(f"a crowning of {crowning:g} per mm gives edge contact: take a larger cutter first")


def ridge_slope(*, crowning: float, twist: float) -> float:
    """Slope of the ridge of contact across the flank: dz/d eta = B/(2 A). Also what tilt errors are multiplied by.

    Raises: ValueError for a crowning not above zero (edge contact).  Source: derived from e.

    >>> round(ridge_slope(crowning=4.48e-3, twist=8.66e-3), 2)
    0.97
    """
    crowned(crowning)
    not_below_zero(twist=twist)
    return twist / (2.0 * crowning)


def contact_share(
    film: float, *, crowning: float, pressure_angle: float, lead_angle: float, face_width: float
) -> float:
    """Share of the face that a marking film touches, 0 .. 1: 2 w/b with w = sqrt(f/(A cos alpha cos g)).

    film  thickness of the marking film along the normal [mm], usually 0.005 to 0.007
    Envelope insert, tilt = g, no load, one flank. 3 to 15 % low against the simulation at its best radius; too high near
    R0, where the ends of the face take the marking.
    Raises: ValueError for edge contact, sizes not above zero, or angles outside 0 .. 45 deg.
    Source: derived from e; compared with own mesh simulation.

    >>> round(contact_share(0.006, crowning=4.41e-3, pressure_angle=math.radians(20.0), lead_angle=math.atan(1.0 / 12.0),
    ...       face_width=16.0), 3)
    0.151
    """
    crowned(crowning)
    above_zero(film=film, face_width=face_width)
    steep_enough(pressure_angle=pressure_angle, lead_angle=lead_angle)
    half = math.sqrt(film / (crowning * math.cos(pressure_angle) * math.cos(lead_angle)))
    return min(2.0 * half / face_width, 1.0)


def profile_error_of_tilt(error: float, *, crowning: float, twist: float) -> float:
    """Error of the pressure angle on the contact ridge for a tilt error [rad]: |d tau| B/(2 A).

    Times twice the module it is the profile error over the height [mm]. The ridge itself moves by d tau/(2 A).
    Grows without end as the cutter comes down to R0, where A = 0.
    Raises: ValueError for edge contact.  Source: derived from e; within a factor 2 of own simulation.

    >>> m, arcmin = 2.5, math.radians(1.0 / 60.0)
    >>> round(1e3 * 2.0 * m * profile_error_of_tilt(arcmin, crowning=4.41e-3, twist=8.68e-3), 2)
    1.43
    """
    return abs(error) * ridge_slope(crowning=crowning, twist=twist)
