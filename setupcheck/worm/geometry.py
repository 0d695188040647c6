"""Worm and worm wheel: lead angle, sizes, centre distance. Lengths mm, angles rad.

Letters: z1 starts, z2 wheel teeth, m axial module, d1 = 2 r1 worm reference diameter, d2 = 2 r2 = z2 m, a centre
distance, x profile shift factor of the wheel, alpha axial pressure angle, g lead angle, p = z1 m/2 reduced lead,
c clearance at the worm's tip. Worms straight in the axial section (ZA) unless another profile is named.
"""

from __future__ import annotations

import math
from collections.abc import Mapping

from setupcheck.record import record

STEEPEST = math.pi / 4.0
"""Limit taken for lead and pressure angles [rad], both below it. Our screening choice; worms lie far inside."""


def above_zero(**sizes: float) -> None:
    """Refuses a size that is not above zero or not finite (NaN too). Raises: ValueError naming the size."""
    for name, value in sizes.items():
        if not 0.0 < value < math.inf:
            raise ValueError(f"{name.replace('_', ' ')} must be above zero, not {value:g}")


def not_below_zero(**sizes: float) -> None:
    """Refuses a size that is negative or not finite (NaN too). Raises: ValueError naming the size."""
    for name, value in sizes.items():
        if not 0.0 <= value < math.inf:
            raise ValueError(f"{name.replace('_', ' ')} must not be below zero, not {value:g}")


def steep_enough(**angles: float) -> None:
    """Refuses an angle outside 0 .. 45 deg, ends out. Raises: ValueError naming the angle, in degrees."""
    for name, value in angles.items():
        if not 0.0 < value < STEEPEST:
            raise ValueError(f"{name.replace('_', ' ')} must lie between 0 and 45 deg, not {math.degrees(value):g} deg")


def lead(*, starts: int, axial_module: float) -> float:
    """Axial travel of the thread in one turn [mm]: p_z = z1 pi m; one start: lead = pitch.

    Raises: ValueError for sizes not above zero.  Source: ISO 1122-2 quantities (from memory).

    >>> round(lead(starts=2, axial_module=3.0), 4)
    18.8496
    """
    above_zero(starts=starts, axial_module=axial_module)
    return starts * math.pi * axial_module


def lead_angle(*, starts: int, axial_module: float, diameter: float) -> float:
    """Lead angle of the thread at a diameter [rad]: tan g = z1 m/d. Flatter at the tip, steeper at the root.

    diameter  for the tilt: the pitch point, d1 + 2 x m with the wheel's profile shift x, never the tip
    Raises: ValueError for sizes not above zero, or a thread at 45 deg or steeper.
    Source: ISO 1122-2 quantities (from memory); Mott, Machine Elements, ch. 8 (example checked).

    >>> round(math.degrees(lead_angle(starts=1, axial_module=2.0, diameter=28.0)), 4)
    4.0856
    """
    above_zero(starts=starts, axial_module=axial_module, diameter=diameter)
    angle = math.atan(starts * axial_module / diameter)
    steep_enough(lead_angle=angle)
    return angle


def whose_lead_angle(
    angle: float, diameters: Mapping[str, float], *, starts: int, axial_module: float, within: float
) -> str | None:
    """Name of the diameter whose lead angle is nearest to this one; None where none lies within the stated angle.

    diameters  name -> diameter [mm], such as reference, tip, root
    within     largest difference that still counts as a match [rad], >= 0
    Names the slip "angle of the tip diameter" instead of only saying "30' wrong".
    Raises: ValueError for an angle outside 0 .. 45 deg or a size not above zero.  Source: `lead_angle`.

    >>> of = {"reference": 28.0, "tip": 32.0}
    >>> whose_lead_angle(math.radians(3.58), of, starts=1, axial_module=2.0, within=math.radians(0.05))
    'tip'
    """
    steep_enough(lead_angle=angle)
    not_below_zero(within=within)
    off = {
        name: abs(lead_angle(starts=starts, axial_module=axial_module, diameter=d) - angle)
        for name, d in diameters.items()
    }
    nearest = min(off, key=lambda name: off[name], default=None)
    return nearest if nearest is not None and off[nearest] <= within else None


def normal_pressure_angle(axial: float, lead_angle: float) -> float:
    """Pressure angle in the normal section [rad]: tan alpha_n = tan alpha cos g.

    Raises: ValueError for angles outside 0 .. 45 deg.  Source: Mott, Machine Elements, eq. 8-39.

    >>> round(math.degrees(normal_pressure_angle(math.radians(20.0), math.atan(1.0 / 12.0))), 4)
    19.9364
    """
    steep_enough(axial_pressure_angle=axial, lead_angle=lead_angle)
    return math.atan(math.tan(axial) * math.cos(lead_angle))


def centre_distance(*, axial_module: float, reference_diameter: float, wheel_teeth: int, shift: float = 0.0) -> float:
    """Centre distance that closes the pair [mm]: a = m (q + z2)/2 + x m with q = d1/m.

    Raises: ValueError for sizes not above zero.  Source: ISO 1122-2 quantities (from memory); rolling on d2 = z2 m.

    >>> centre_distance(axial_module=2.5, reference_diameter=30.0, wheel_teeth=40)
    65.0
    """
    above_zero(axial_module=axial_module, reference_diameter=reference_diameter, wheel_teeth=wheel_teeth)
    return (reference_diameter + axial_module * wheel_teeth) / 2.0 + shift * axial_module


@record
class WormSizes:
    """Tip and root diameter of a worm [mm]."""

    tip_diameter: float
    root_diameter: float


@record
class WheelSizes:
    """Diameters of a worm wheel in its mid-plane and the radius of its throat [mm]."""

    reference_diameter: float
    throat_diameter: float
    root_diameter: float
    throat_radius: float


def worm_sizes(
    *, axial_module: float, reference_diameter: float, clearance_factor: float = 0.2, addendum_factor: float = 1.0
) -> WormSizes:
    """Tip and root of the worm: da1 = d1 + 2 h m, df1 = d1 - 2 m (h + c*); h = 1, c* = 0.16 .. 0.25 usual.

    Raises: ValueError for sizes not above zero, or a root that does not exist.
    Source: gear shop's formula list (whole depth 2.16 m or 2.25 m, checked); c* = 0.2 common practice.

    >>> worm_sizes(axial_module=2.5, reference_diameter=30.0, clearance_factor=0.25)
    WormSizes(tip_diameter=35.0, root_diameter=23.75)
    """
    above_zero(axial_module=axial_module, reference_diameter=reference_diameter, addendum_factor=addendum_factor)
    not_below_zero(clearance_factor=clearance_factor)
    root = reference_diameter - 2.0 * axial_module * (addendum_factor + clearance_factor)
    above_zero(worm_root_diameter=root)
    return WormSizes(reference_diameter + 2.0 * addendum_factor * axial_module, root)


def wheel_sizes(
    *,
    axial_module: float,
    reference_diameter: float,
    wheel_teeth: int,
    shift: float = 0.0,
    clearance_factor: float = 0.2,
    throat_clearance: float = 0.0,
    addendum_factor: float = 1.0,
) -> WheelSizes:
    """Throat, root and throat radius: da2 = d2 + 2 m (h + x); df2 = d2 - 2 m (h + c* - x); rg = a - da2/2 + clearance.

    reference_diameter  of the worm, d1; without `throat_clearance` rg = r1 - h m
    Axial module throughout: the US Navy text takes the normal addendum, smaller by cos g.
    Raises: ValueError for sizes not above zero.
    Source: ISO 1122-2 quantities (from memory); throat form radius NAVEDTRA 14345, p. 14-23.

    >>> wheel_sizes(axial_module=2.5, reference_diameter=30.0, wheel_teeth=40)
    WheelSizes(reference_diameter=100.0, throat_diameter=105.0, root_diameter=94.0, throat_radius=12.5)
    """
    above_zero(addendum_factor=addendum_factor)
    not_below_zero(clearance_factor=clearance_factor, throat_clearance=throat_clearance)
    a = centre_distance(
        axial_module=axial_module, reference_diameter=reference_diameter, wheel_teeth=wheel_teeth, shift=shift
    )
    d2 = axial_module * wheel_teeth
    throat = d2 + 2.0 * axial_module * (addendum_factor + shift)
    root = d2 - 2.0 * axial_module * (addendum_factor + clearance_factor - shift)
    above_zero(throat_radius=a - throat / 2.0, wheel_root_diameter=root)
    return WheelSizes(d2, throat, root, a - throat / 2.0 + throat_clearance)


def outside_diameter(*, throat_diameter: float, axial_module: float, starts: int) -> float:
    """Diameter over the corners of a throated wheel [mm]: throat + 0.4775 px (1-2 starts), + 0.3183 px (3 and more).

    0.4775 = 1.5/pi, 0.3183 = 1/pi, so 1.5 m and 1.0 m.
    Raises: ValueError for sizes not above zero.  Source: NAVEDTRA 14345, p. 14-23 (read).

    >>> outside_diameter(throat_diameter=105.0, axial_module=2.5, starts=1)
    108.75
    """
    above_zero(throat_diameter=throat_diameter, axial_module=axial_module, starts=starts)
    return throat_diameter + (1.5 if starts <= 2 else 1.0) * axial_module


def fewest_teeth(*, pressure_angle: float, shift: float = 0.0, addendum_factor: float = 1.0) -> float:
    """Tooth count below which the wheel is undercut in its mid-plane: 2 (h - x)/sin^2 alpha; axial pressure angle.

    addendum_factor  of the worm, h = (da1 - d1)/(2 m); 1 usual
    Raises: ValueError for an angle outside 0 .. 45 deg.  Source: rack and involute, derived.

    >>> round(fewest_teeth(pressure_angle=math.radians(20.0)), 1), round(fewest_teeth(pressure_angle=math.radians(15.0)), 1)
    (17.1, 29.9)
    """
    steep_enough(pressure_angle=pressure_angle)
    return 2.0 * (addendum_factor - shift) / math.sin(pressure_angle) ** 2


def usual_face_width(*, axial_module: float, quotient: float) -> float:
    """Usual width of the wheel's teeth [mm]: b = 2 m (0.5 + sqrt(q + 1)).

    Raises: ValueError for sizes not above zero.  Source: rule of DIN 3975 and ISO/TR 10828 kind (from memory).

    >>> usual_face_width(axial_module=2.0, quotient=15.0)
    18.0
    """
    above_zero(axial_module=axial_module, quotient=quotient)
    return 2.0 * axial_module * (0.5 + math.sqrt(quotient + 1.0))


def us_face_width(*, axial_pitch: float, starts: int) -> float:
    """Width of the wheel's teeth by the US Navy's rule [mm]: 2.38 p_x + 1/4 in (1-2 starts), 2.15 p_x + 1/5 in (3, more).

    Raises: ValueError for sizes not above zero.  Source: NAVEDTRA 14345, p. 14-23 (read).

    >>> round(us_face_width(axial_pitch=25.4, starts=1) / 25.4, 2)
    2.63
    """
    above_zero(axial_pitch=axial_pitch, starts=starts)
    return 2.38 * axial_pitch + 6.35 if starts <= 2 else 2.15 * axial_pitch + 5.08


def contact_reach(
    *,
    starts: int,
    axial_module: float,
    pitch_diameter: float,
    tip_diameter: float,
    wheel_diameter: float,
    throat_radius: float,
    outside_diameter: float,
    pressure_angle: float,
    face_width: float,
) -> float:
    """How far along the worm from the wheel's middle its thread still touches the teeth [mm], over the whole face.

    Each plane z holds a rack that rolls on the wheel, so a flank touches at x = (r2 - y)/X', X' = tan(alpha) h/rho - p z/rho^2,
    h = a - y, rho = hypot(h, z): the largest |x| inside the worm's tip, outside the wheel's hollow and inside its outside
    diameter is taken. In the mid-plane alone it would be about m/tan(alpha).
    pitch_diameter of the worm, 2 a - d2;  throat_radius of the hollow round the worm, a - da2/2
    Raises: ValueError for sizes not above zero.
    Source: derived (rack planes); 10.4 mm for this example computed before with another program.

    >>> reach = contact_reach(starts=1, axial_module=2.5, pitch_diameter=30.0, tip_diameter=35.0, wheel_diameter=100.0,
    ...                       throat_radius=12.5, outside_diameter=107.5, pressure_angle=math.radians(20.0), face_width=16.0)
    >>> round(reach, 1)
    10.5
    """
    above_zero(starts=starts, axial_module=axial_module, pitch_diameter=pitch_diameter, throat_radius=throat_radius)
    above_zero(wheel_diameter=wheel_diameter, worm_tip_over_throat=tip_diameter / 2.0 - throat_radius)
    above_zero(face_width=face_width, outside_diameter=outside_diameter)
    steep_enough(pressure_angle=pressure_angle)
    slope, p, r1 = math.tan(pressure_angle), starts * axial_module / 2.0, pitch_diameter / 2.0
    centre, tip = (pitch_diameter + wheel_diameter) / 2.0, tip_diameter / 2.0

    def touch(rho: float, z: float) -> float | None:
        """Where the worm's radius rho touches in the plane z; None where it touches nothing of the wheel."""
        if rho <= abs(z):
            return None
        h = math.sqrt(rho * rho - z * z)
        leans = slope * h / rho - p * z / rho**2
        x = abs(h - r1) / leans if leans > 0.0 else math.inf
        return x if math.hypot(x, centre - h) <= outside_diameter / 2.0 else None

    def farthest(z: float) -> float:
        """Largest reach in one plane: at the worm's tip, or at the smallest radius that is still inside the wheel."""
        inner, outer = throat_radius, min(math.hypot(r1, z), tip)  # the pitch line of this plane is inside the wheel
        if touch(inner, z) is None:
            for _ in range(REACH_HALVINGS):
                middle = (inner + outer) / 2.0
                inner, outer = (middle, outer) if touch(middle, z) is None else (inner, middle)
            inner = outer
        return max(touch(tip, z) or 0.0, touch(inner, z) or 0.0)

    low, high, best = -face_width / 2.0, face_width / 2.0, 0.0
    for _ in range(REACH_ROUNDS):
        step = (high - low) / REACH_PLANES
        best, at = max((farthest(low + i * step), low + i * step) for i in range(REACH_PLANES + 1))
        low, high = max(at - step, -face_width / 2.0), min(at + step, face_width / 2.0)
    return best


REACH_ROUNDS, REACH_PLANES, REACH_HALVINGS = 3, 16, 20
"""Rounds of planes over the face, each about the best of the last, and halvings in each plane. Source: our choice, 0.01 mm."""


def usual_thread_length(*, reach: float, axial_pitch: float) -> float:
    """Threaded length of the worm that lets every tooth touch [mm]: 2 |x| + p_x.

    Raises: ValueError for sizes not above zero.  Source: derived; one pitch over what is touched.

    >>> usual_thread_length(reach=10.0, axial_pitch=7.5)
    27.5
    """
    above_zero(reach=reach, axial_pitch=axial_pitch)
    return 2.0 * reach + axial_pitch


def older_thread_length(*, throat_diameter: float, wheel_diameter: float) -> float:
    """Threaded length by the older rule [mm]: sqrt(da2^2 - d2^2).

    Raises: ValueError for a throat that is not larger than the reference circle.  Source: rule of the trade (from memory).

    >>> round(older_thread_length(throat_diameter=105.0, wheel_diameter=100.0), 1)
    32.0
    """
    above_zero(wheel_diameter=wheel_diameter, throat_over_reference_circle=throat_diameter - wheel_diameter)
    return math.sqrt(throat_diameter**2 - wheel_diameter**2)
