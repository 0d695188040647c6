"""Insert of a fly cutter for a worm as measured: gap of the wheel, widths in the mid-plane, what an envelope adds. mm, rad."""

from __future__ import annotations

import math
from collections.abc import Sequence

from setupcheck.worm.cutter import crowned
from setupcheck.worm.geometry import above_zero, fewest_teeth, not_below_zero, steep_enough


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


def insert_widening(height: float, *, crowning: float, twist: float, lead_angle: float) -> float:
    """What a mid-plane insert is too narrow by, on each side, at a height from pitch [mm]: (B eta)^2/(4 A) cos g.

    Order of size only: the envelope is lopsided (0 near pitch height, several times more at the throat); it is not for
    grinding coordinates.
    Raises: ValueError for edge contact.  Source: derived from e, largest depth of the ridge.

    >>> round(1e3 * insert_widening(2.5, crowning=4.48e-3, twist=8.66e-3, lead_angle=math.atan(1.0 / 12.0)))
    26
    """
    crowned(crowning)
    not_below_zero(twist=twist)
    steep_enough(lead_angle=lead_angle)
    return (twist * height) ** 2 / (4.0 * crowning) * math.cos(lead_angle)


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
