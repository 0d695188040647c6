"""Fly cutter plunged once into a worm wheel: radius floor, crowning and twist, contact, width, depth. mm, rad.

A fly cutter makes a surface of revolution and cannot make the flank's twist. Along the face (z, from the mid-plane) and
across it (eta, on the worm's radius from the pitch point, positive towards the wheel's root) the metal missing is
    e = A z^2 - B z eta        A crowning [1/mm], B twist [1/mm], C_0 z left out: see tilt.square_tilt
for the right flank of a right-hand pair; z changes sign for the other flank or hand. r1 the worm's radius at the pitch
point (d1/2 without profile shift) and g the lead angle there, r2 = d2/2 of the wheel, D how much the cutter is larger
than worm tip + clearance, th0 half the gap angle of the wheel at r2.
Validity of everything on A and B: second order, so near the mid-plane; at |z| > r1/2 it overstates the crowning (by 30 %
at the ends of a face of about r1). ZA worm.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

from setupcheck.worm.geometry import above_zero, fewest_teeth, not_below_zero, steep_enough

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


def gap_arc(
    *, thread_thickness: float, backlash: float, axial_module: float, pressure_angle: float, shift: float = 0.0
) -> float:
    """Gap of the wheel at its reference circle for the thread as measured [mm]: s2 = s_x - 2 x m tan alpha + j.

    thread_thickness  axial, at the worm's reference diameter [mm];  backlash  circular, at d2 [mm]
    A thread reground by n a flank is thinner by 2 n/(cos alpha_n cos g), and the gap must follow.
    Raises: ValueError for sizes not above zero, or no gap left.  Source: derived; the rack line that rolls on d2.

    >>> round(gap_arc(thread_thickness=3.90, backlash=0.03, axial_module=2.5, pressure_angle=math.radians(20.0)), 3)
    3.93
    """
    above_zero(thread_thickness=thread_thickness, axial_module=axial_module)
    not_below_zero(backlash=backlash)
    steep_enough(pressure_angle=pressure_angle)
    gap = thread_thickness - 2.0 * shift * axial_module * math.tan(pressure_angle) + backlash
    above_zero(gap_arc=gap)
    return gap


def _wall(*, pressure_angle: float, gap_arc: float, wheel_diameter: float) -> float:
    """Lean of the gap's wall at the pitch point in the cutter's plane: tan(alpha + th0), th0 = s2/d2."""
    steep_enough(pressure_angle=pressure_angle)
    above_zero(gap_arc=gap_arc, wheel_diameter=wheel_diameter)
    return math.tan(pressure_angle + gap_arc / wheel_diameter)


def _pitch_radius(pitch_diameter: float, oversize: float) -> float:
    """Radius of the cutter at pitch height, r1 + D. Raises: ValueError where it is not above zero."""
    above_zero(pitch_diameter=pitch_diameter)
    radius = pitch_diameter / 2.0 + oversize
    above_zero(cutter_radius_at_pitch_height=radius)
    return radius


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


def crowning(
    *,
    pitch_diameter: float,
    wheel_diameter: float,
    pressure_angle: float,
    lead_angle: float,
    gap_arc: float,
    oversize: float,
) -> float:
    """Crowning A of the flank along the face [1/mm]; negative means edge contact at both ends.

    A = 1/2 [tan alpha/r1 - tan(alpha + th0)/((r1 + D) cos^2 g) - tan alpha tan^2 g/r2]
    A form cutter stands still while the flank is rolled, hence alpha + th0; cos^2 g is the helix's curvature.
    Raises: ValueError for sizes not above zero or angles outside 0 .. 45 deg.
    Source: derived; 1 to 3 % below the exact gap of tests/unit/worm.

    >>> round(1e3 * crowning(pitch_diameter=30.0, wheel_diameter=100.0, pressure_angle=math.radians(20.0),
    ...       lead_angle=math.atan(1.0 / 12.0), gap_arc=math.pi * 1.25, oversize=12.0), 2)
    4.48
    """
    steep_enough(lead_angle=lead_angle)
    wall = _wall(pressure_angle=pressure_angle, gap_arc=gap_arc, wheel_diameter=wheel_diameter)
    at_pitch = _pitch_radius(pitch_diameter, oversize)
    slope, rise = math.tan(pressure_angle), math.tan(lead_angle) ** 2
    worm, wheel = 2.0 * slope / pitch_diameter, 2.0 * slope * rise / wheel_diameter
    return 0.5 * (worm - wall * (1.0 + rise) / at_pitch - wheel)


def twist(
    *,
    pitch_diameter: float,
    wheel_diameter: float,
    pressure_angle: float,
    lead_angle: float,
    gap_arc: float,
    oversize: float,
) -> float:
    """Twist B that the revolved surface lacks [1/mm]: tan g [1/r1 + 1/r2 - K'(r2)], tilt = g.

    K = (cos psi/cos alpha_r)(1 - tan psi cos^2 g x/rc): what an arc of the flank gains per unit of sideways travel of
    the cut, psi = alpha_r + th the wall's lean, x = r sin th, rc the cutter radius there; K' its slope over r.
    For a narrow gap K' = -tan^2 alpha [1/r2 + 1/(r1 + D)]; the gap's width adds 5 to 11 % to B.
    Raises: ValueError for sizes not above zero or angles outside 0 .. 45 deg.
    Source: derived here; the exact gap agrees within 1 % in tests/unit/worm.

    >>> round(1e3 * twist(pitch_diameter=30.0, wheel_diameter=100.0, pressure_angle=math.radians(20.0),
    ...       lead_angle=math.atan(1.0 / 12.0), gap_arc=math.pi * 1.25, oversize=12.0), 2)
    8.67
    """
    steep_enough(lead_angle=lead_angle)
    tan_psi = _wall(pressure_angle=pressure_angle, gap_arc=gap_arc, wheel_diameter=wheel_diameter)
    r2, slope, th = wheel_diameter / 2.0, math.tan(pressure_angle), gap_arc / wheel_diameter
    x, rc = r2 * math.sin(th), _pitch_radius(pitch_diameter, oversize) + r2 * (1.0 - math.cos(th))
    per_arc = math.cos(th) - math.sin(th) * slope  # cos psi/cos alpha
    per_arc_slope = -(slope * (math.sin(th) + math.cos(th) * slope) + math.sin(th) * (1.0 + slope**2) / slope) / r2
    lean_slope = (1.0 / slope + slope) / r2  # of psi over r
    part = math.cos(lead_angle) ** 2 / rc
    lost = tan_psi * x * part
    lost_slope = part * ((1.0 + tan_psi**2) * lean_slope * x + tan_psi * per_arc * (tan_psi + x / rc))
    gain_slope = per_arc_slope * (1.0 - lost) - per_arc * lost_slope
    return math.tan(lead_angle) * (2.0 / pitch_diameter + 1.0 / r2 - gain_slope)


def _crowned(crowning: float) -> None:
    if not 0.0 < crowning < math.inf:
        raise ValueError(f"a crowning of {crowning:g} per mm gives edge contact: take a larger cutter first")


def ridge_slope(*, crowning: float, twist: float) -> float:
    """Slope of the ridge of contact across the flank: dz/d eta = B/(2 A). Also what tilt errors are multiplied by.

    Raises: ValueError for a crowning not above zero (edge contact).  Source: derived from e.

    >>> round(ridge_slope(crowning=4.48e-3, twist=8.66e-3), 2)
    0.97
    """
    _crowned(crowning)
    not_below_zero(twist=twist)
    return twist / (2.0 * crowning)


def crowning_for_ridge(*, twist: float, axial_module: float, face_width: float) -> float:
    """Crowning below which the ridge runs off the ends of the face [1/mm]: 1.3 B m/b.

    z* = B m/(2 A) must stay inside b/2 one module from pitch height; 1.3 for the fourth order at wide faces.
    Necessary, not enough: for marking free of both ends the simulation asks for two to three times as much.
    Raises: ValueError for sizes not above zero.  Source: derived; the factor 1.3 fitted to own simulation.

    >>> round(1e3 * crowning_for_ridge(twist=8.66e-3, axial_module=2.5, face_width=16.0), 2)
    1.76
    """
    above_zero(axial_module=axial_module, face_width=face_width)
    not_below_zero(twist=twist)
    return RIDGE_ALLOWANCE * twist * axial_module / face_width


def ridge_runs_off(*, crowning: float, twist: float, axial_module: float, face_width: float) -> bool:
    """Whether the ridge of contact leaves the face within one module of pitch height: A < 1.3 B m/b.

    Raises: ValueError for sizes not above zero.  Source: `crowning_for_ridge`.

    >>> ridge_runs_off(crowning=1.27e-3, twist=8.9e-3, axial_module=2.5, face_width=16.0)
    True
    """
    return crowning < crowning_for_ridge(twist=twist, axial_module=axial_module, face_width=face_width)


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
    _crowned(crowning)
    above_zero(film=film, face_width=face_width)
    steep_enough(pressure_angle=pressure_angle, lead_angle=lead_angle)
    half = math.sqrt(film / (crowning * math.cos(pressure_angle) * math.cos(lead_angle)))
    return min(2.0 * half / face_width, 1.0)


def insert_widening(height: float, *, crowning: float, twist: float, lead_angle: float) -> float:
    """What a mid-plane insert is too narrow by, on each side, at a height from pitch [mm]: (B eta)^2/(4 A) cos g.

    Order of size only: the envelope is lopsided (0 near pitch height, several times more at the throat); it is not for
    grinding coordinates.
    Raises: ValueError for edge contact.  Source: derived from e, largest depth of the ridge.

    >>> round(1e3 * insert_widening(2.5, crowning=4.48e-3, twist=8.66e-3, lead_angle=math.atan(1.0 / 12.0)))
    26
    """
    _crowned(crowning)
    not_below_zero(twist=twist)
    steep_enough(lead_angle=lead_angle)
    return (twist * height) ** 2 / (4.0 * crowning) * math.cos(lead_angle)


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


def profile_error_of_offset(
    offset: float,
    *,
    crowning: float,
    twist: float,
    pitch_diameter: float,
    wheel_diameter: float,
    pressure_angle: float,
    lead_angle: float,
    gap_arc: float,
    oversize: float,
) -> float:
    """Error of the pressure angle on the contact ridge for a cutter off the wheel's mid-plane [rad].

    |d| [C_c B/(2 A) + tan g (1/r2 + tan^2 alpha/(r1 + D))],  C_c = tan(alpha + th0)/((r1 + D) cos^2 g)
    offset  d, cutter's plane from the mid-plane [mm]
    Raises: ValueError for edge contact, sizes not above zero, or angles outside 0 .. 45 deg.
    Source: derived from e; the simulated transmission error is up to twice this over two modules of height.

    >>> round(1e3 * 5.0 * profile_error_of_offset(0.05, crowning=4.41e-3, twist=8.68e-3, pitch_diameter=30.0,
    ...       wheel_diameter=100.0, pressure_angle=math.radians(20.0), lead_angle=math.atan(1.0 / 12.0),
    ...       gap_arc=math.pi * 1.25, oversize=11.75), 1)
    4.3
    """
    slope = ridge_slope(crowning=crowning, twist=twist)
    steep_enough(lead_angle=lead_angle)
    wall = _wall(pressure_angle=pressure_angle, gap_arc=gap_arc, wheel_diameter=wheel_diameter)
    at_pitch, rise = _pitch_radius(pitch_diameter, oversize), math.tan(lead_angle)
    bend = wall * (1.0 + rise * rise) / at_pitch
    return abs(offset) * (bend * slope + rise * (2.0 / wheel_diameter + math.tan(pressure_angle) ** 2 / at_pitch))


def insert_widths(
    heights: Sequence[float],
    *,
    axial_module: float,
    wheel_teeth: int,
    centre_distance: float,
    worm_tip_diameter: float,
    clearance: float,
    pressure_angle: float,
    gap_arc: float,
    tilt: float,
    cutter_radius: float,
) -> tuple[float, ...]:
    """Full width of a mid-plane insert at heights above its tip [mm]; at height 0 the tip width.

    The wheel's mid-plane gap is an exact involute of base radius r2 cos alpha, half gap angle s2/d2 - inv alpha +
    inv alpha_r, from the point where the worm's tip touches last; below, it goes on along its tangent. On the cutter:
    rc = hypot(ac - y, x sin tau), width 2 x cos tau, ac = a + R - ra1 - c.

    heights  along the cutter's radius from its tip [mm], 0 up to the throat
    gap_arc  from the thread as measured (`gap_arc`), so a worn or reground worm narrows the insert
    Validity: ZA worm; an insert for marking free of tip and root is wider (`insert_widening`).
    Raises: ValueError for an undercut wheel, a height outside the cutter, or a tip that closes.
    Source: derived; agrees with an exact gap to 1e-3 mm.

    >>> case = dict(axial_module=2.5, wheel_teeth=40, centre_distance=65.0, worm_tip_diameter=35.0, clearance=0.5,
    ...             pressure_angle=math.radians(20.0), gap_arc=math.pi * 1.25, tilt=math.atan(1.0 / 12.0))
    >>> [round(w, 3) for w in insert_widths([0.0, 0.5, 3.0], cutter_radius=29.75, **case)]
    [2.151, 2.387, 3.944]
    """
    above_zero(axial_module=axial_module, wheel_teeth=wheel_teeth, centre_distance=centre_distance)
    above_zero(worm_tip_diameter=worm_tip_diameter, gap_arc=gap_arc, cutter_radius=cutter_radius)
    not_below_zero(clearance=clearance)
    steep_enough(pressure_angle=pressure_angle)
    if not abs(tilt) < math.pi / 4.0:
        raise ValueError(f"the tilt must lie within 45 deg either way, not {math.degrees(tilt):g} deg")
    r2 = axial_module * wheel_teeth / 2.0
    base = r2 * math.cos(pressure_angle)
    worm_tip = centre_distance - worm_tip_diameter / 2.0
    reach = r2 - worm_tip  # the worm's tip inside the rolling circle
    if not 0.0 < reach <= r2 * math.sin(pressure_angle) ** 2:
        fewest = fewest_teeth(pressure_angle=pressure_angle)
        raise ValueError(
            f"the worm's tip reaches {reach:g} mm inside the reference circle: its involute ends at "
            f"{r2 * math.sin(pressure_angle) ** 2:g} mm (without shift {fewest:.1f} teeth are needed), the wheel is undercut"
        )

    def half_angle(radius: float) -> float:
        lean = math.acos(base / radius)
        return gap_arc / (2.0 * r2) - (math.tan(pressure_angle) - pressure_angle) + (math.tan(lean) - lean)

    first = math.hypot(worm_tip, reach / math.tan(pressure_angle))
    first_angle = half_angle(first)
    first_x, first_y = first * math.sin(first_angle), first * math.cos(first_angle)
    tangent = math.tan(math.acos(base / first) + first_angle)

    def half_width(y: float) -> float:
        if y <= first_y:
            return first_x - (first_y - y) * tangent
        radius = y
        for _ in range(60):
            before, radius = radius, y / math.cos(half_angle(max(radius, first)))
            if abs(radius - before) < 1e-13 * radius:
                break
        return radius * math.sin(half_angle(radius))

    axis = worm_tip - clearance + cutter_radius
    widths = []
    for height in heights:
        if not 0.0 <= height < cutter_radius:
            raise ValueError(f"a height of {height:g} mm lies outside a cutter of {cutter_radius:g} mm radius")
        x = 0.0
        for _ in range(60):
            aside = x * math.sin(tilt)
            before, x = x, half_width(axis - math.sqrt((cutter_radius - height) ** 2 - aside * aside))
            if abs(x - before) < 1e-13:
                break
        if not x > 0.0:
            raise ValueError(f"the insert closes to a point before {height:g} mm above its tip: less clearance, please")
        widths.append(2.0 * x * math.cos(tilt))
    return tuple(widths)


def depth_to_feed(*, touched_diameter: float, root_diameter: float) -> float:
    """Depth from the surface that the tip touched in the mid-plane [mm]: (touched - root diameter)/2.

    touched_diameter  as measured: the throat at its bottom, or the plain outside
    root_diameter     of the gap, 2 (a - ra1 - c)
    Validity: the tip touches in the mid-plane, pointing at the wheel's axis; a cutter turning at a throat touches the
    corners first (`early_touch`).
    Raises: ValueError for sizes not above zero or nothing left to cut.  Source: geometry.

    >>> depth_to_feed(touched_diameter=124.0, root_diameter=115.0), depth_to_feed(touched_diameter=127.0, root_diameter=115.0)
    (4.5, 6.0)
    """
    above_zero(touched_diameter=touched_diameter, root_diameter=root_diameter)
    depth = (touched_diameter - root_diameter) / 2.0
    if not depth > 0.0:
        raise ValueError(f"the touched diameter {touched_diameter:g} mm is not above the root {root_diameter:g} mm")
    return depth


def early_touch(*, throat_radius: float, cutter_radius: float, throat_width: float) -> float:
    """How much earlier a turning cutter touches the corners of a throat than its bottom [mm]; 0 where it fits in.

    [rg - sqrt(rg^2 - h^2)] - [R - sqrt(R^2 - h^2)], h half the width of the hollow; above 0 for every R > rg, and a fly
    cutter is always larger than the throat. Add it to the depth from the throat, or touch with the tool standing still,
    its tip in the mid-plane.

    throat_width  of the hollow between its two corners [mm], at most 2 rg
    Validity: sharp corners, equal on both sides; the tilt changes it by its square (1 % at 6 deg).
    Raises: ValueError for sizes not above zero or a hollow wider than its circle.  Source: geometry, derived here.

    >>> round(early_touch(throat_radius=12.5, cutter_radius=29.75, throat_width=10.9), 2)
    0.75
    """
    above_zero(throat_radius=throat_radius, cutter_radius=cutter_radius, throat_width=throat_width)
    half = throat_width / 2.0
    if not half <= throat_radius:
        raise ValueError(f"a throat of {throat_radius:g} mm radius cannot be {throat_width:g} mm wide")
    if cutter_radius <= throat_radius:
        return 0.0
    return (throat_radius - math.sqrt(throat_radius**2 - half**2)) - (
        cutter_radius - math.sqrt(cutter_radius**2 - half**2)
    )


def left_by_passes(depth: float, passes: Sequence[float]) -> float:
    """Depth that the listed passes leave [mm]: depth less their sum; below zero they go too deep.

    Raises: ValueError for a depth or a pass not above zero, or no pass.  Source: arithmetic.

    >>> round(left_by_passes(3.3, [2.0, 1.0, 0.3]), 9)
    0.0
    """
    above_zero(depth=depth)
    if not passes:
        raise ValueError("no pass is listed")
    for number, cut in enumerate(passes, start=1):
        above_zero(**{f"pass_{number}": cut})
    left = depth - math.fsum(passes)
    return 0.0 if abs(left) < 1e-9 else left


def passes_add_up(depth: float, passes: Sequence[float], *, readout_step: float) -> bool:
    """Whether the passes reach the depth to within half a step of the dial or readout.

    Raises: ValueError for a depth, pass or step not above zero.  Source: arithmetic.

    >>> passes_add_up(4.5, [2.0, 2.0, 0.3], readout_step=0.01)
    False
    """
    above_zero(readout_step=readout_step)
    return abs(left_by_passes(depth, passes)) <= readout_step / 2.0 + 1e-9
