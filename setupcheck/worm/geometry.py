"""Worm and worm wheel: lead angle, sizes, centre distance, over-wires size, width of the gap. Lengths mm, angles rad.

Letters: z1 starts, z2 wheel teeth, m axial module, d1 = 2 r1 worm reference diameter, d2 = 2 r2 = z2 m, a centre
distance, x profile shift factor of the wheel, alpha axial pressure angle, g lead angle, p = z1 m/2 reduced lead,
c clearance at the worm's tip. Worms straight in the axial section (ZA) unless another profile is named.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping

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

    diameter  for the tilt: the pitch point, d1 without profile shift (see `pitch_point_diameter`), never the tip
    Raises: ValueError for sizes not above zero, or a thread at 45 deg or steeper.
    Source: ISO 1122-2 quantities (from memory); Mott, Machine Elements, ch. 8 (example checked).

    >>> round(math.degrees(lead_angle(starts=1, axial_module=2.0, diameter=28.0)), 4)
    4.0856
    """
    above_zero(starts=starts, axial_module=axial_module, diameter=diameter)
    angle = math.atan(starts * axial_module / diameter)
    steep_enough(lead_angle=angle)
    return angle


def pitch_point_diameter(*, reference_diameter: float, axial_module: float, shift: float) -> float:
    """Worm diameter that rolls on the wheel's reference circle [mm]: d1 + 2 x m = 2 a - d2; d1 without shift.

    Raises: ValueError for sizes not above zero.  Source: derived; the wheel's rolling circle is always d2 = z2 m.

    >>> pitch_point_diameter(reference_diameter=28.0, axial_module=2.0, shift=0.25)
    29.0
    """
    above_zero(reference_diameter=reference_diameter, axial_module=axial_module)
    diameter = reference_diameter + 2.0 * shift * axial_module
    above_zero(pitch_point_diameter=diameter)
    return diameter


def diameter_at_lead_angle(angle: float, *, starts: int, axial_module: float) -> float:
    """Diameter at which a thread has this lead angle [mm]: d = z1 m/tan g.

    Raises: ValueError for an angle outside 0 .. 45 deg.  Source: `lead_angle` turned round.

    >>> round(diameter_at_lead_angle(math.radians(3.5763), starts=1, axial_module=2.0), 2)
    32.0
    """
    above_zero(starts=starts, axial_module=axial_module)
    steep_enough(lead_angle=angle)
    return starts * axial_module / math.tan(angle)


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


def axial_pressure_angle(normal: float, lead_angle: float) -> float:
    """Pressure angle in the axial section [rad]: tan alpha = tan alpha_n/cos g.

    Raises: ValueError for angles outside 0 .. 45 deg.  Source: `normal_pressure_angle` turned round.

    >>> round(math.degrees(axial_pressure_angle(math.radians(19.9364), math.atan(1.0 / 12.0))), 3)
    20.0
    """
    steep_enough(normal_pressure_angle=normal, lead_angle=lead_angle)
    return math.atan(math.tan(normal) / math.cos(lead_angle))


def centre_distance(*, axial_module: float, reference_diameter: float, wheel_teeth: int, shift: float = 0.0) -> float:
    """Centre distance that closes the pair [mm]: a = m (q + z2)/2 + x m with q = d1/m.

    Raises: ValueError for sizes not above zero.  Source: ISO 1122-2 quantities (from memory); rolling on d2 = z2 m.

    >>> centre_distance(axial_module=2.5, reference_diameter=30.0, wheel_teeth=40)
    65.0
    """
    above_zero(axial_module=axial_module, reference_diameter=reference_diameter, wheel_teeth=wheel_teeth)
    return (reference_diameter + axial_module * wheel_teeth) / 2.0 + shift * axial_module


def profile_shift(*, distance: float, axial_module: float, reference_diameter: float, wheel_teeth: int) -> float:
    """Profile shift factor that a given centre distance asks of the wheel: x = [a - m (q + z2)/2]/m.

    Anything beyond -1 .. +1 is no shift but a wrong module, diameter or tooth count, and is refused.
    Raises: ValueError for sizes not above zero, or |x| > 1 (our screening choice).
    Source: `centre_distance` turned round.

    >>> round(profile_shift(distance=65.5, axial_module=2.5, reference_diameter=30.0, wheel_teeth=40), 6)
    0.2
    """
    above_zero(centre_distance=distance)
    plain = centre_distance(axial_module=axial_module, reference_diameter=reference_diameter, wheel_teeth=wheel_teeth)
    shift = (distance - plain) / axial_module
    if abs(shift) > 1.0:
        raise ValueError(
            f"a centre distance of {distance:g} mm does not close: module, worm diameter and tooth count give "
            f"{plain:g} mm, and a shift of {shift:+.2f} modules is beyond 1"
        )
    return shift


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


def fewest_teeth(*, pressure_angle: float, shift: float = 0.0) -> float:
    """Tooth count below which the wheel is undercut in its mid-plane: 2 (1 - x)/sin^2 alpha; axial pressure angle.

    Raises: ValueError for an angle outside 0 .. 45 deg.  Source: rack and involute, derived; addendum one module.

    >>> round(fewest_teeth(pressure_angle=math.radians(20.0)), 1), round(fewest_teeth(pressure_angle=math.radians(15.0)), 1)
    (17.1, 29.9)
    """
    steep_enough(pressure_angle=pressure_angle)
    return 2.0 * (1.0 - shift) / math.sin(pressure_angle) ** 2


@record
class OverWires:
    """A worm thread measured over three wires: size M, where a wire touches the flanks, and how it swings.

    size              over the wires [mm]
    contact_diameter  of the worm, where a wire touches [mm]
    swing             angle of a wire to the plane square to the worm's axis [rad]
    wire_diameter     [mm]
    """

    size: float
    contact_diameter: float
    swing: float
    wire_diameter: float


@record
class _Seated:
    """A wire seated in the groove that touches at a chosen radius: the groove it needs, and its axis."""

    groove: float
    axis_radius: float
    swing: float


def _seated(
    radius: float, *, wire: float, reduced_lead: float, reference_radius: float, pressure_angle: float
) -> _Seated:
    """Groove width at r1 and wire position for a wire touching both flanks at this radius.

    Groove flank x = G(rho) + p phi, G = g/2 + (rho - r1) tan alpha. The wire's axis crosses the worm's radial line at
    height r_w, swung by beta. It sinks deepest where the touching points lie square to it at that crossing (the
    stationary point of r_w over beta), so with n = (1, n_h, n_z) the flank's normal and |n| its length:
        tan beta = tan alpha sin phi + (p/rho) cos phi;  x |n| = w/2;  rho sin phi = -x tan beta
        r_w = rho cos phi + x [tan alpha cos phi - (p/rho) sin phi]
    """
    slope, turn = math.tan(pressure_angle), reduced_lead / radius
    phi = 0.0
    for _ in range(100):
        tan_swing = slope * math.sin(phi) + turn * math.cos(phi)
        x = wire / 2.0 / math.sqrt(1.0 + slope * slope + turn * turn)  # |n| does not depend on phi
        sine = -x * tan_swing / radius
        if not -1.0 < sine < 1.0:
            raise ValueError(f"a wire of {wire:g} mm finds no seat in the groove")
        before, phi = phi, math.asin(sine)
        if abs(phi - before) < 1e-15:
            break
    tan_swing = slope * math.sin(phi) + turn * math.cos(phi)
    return _Seated(
        groove=2.0 * (x - reduced_lead * phi - (radius - reference_radius) * slope),
        axis_radius=radius * math.cos(phi) + x * (slope * math.cos(phi) - turn * math.sin(phi)),
        swing=math.atan(tan_swing),
    )


def _falling_root(of: Callable[[float], float], low: float, high: float) -> float:
    """Zero of a steady function between two ends of opposite sign, by halving with a chord step inside."""
    at_low, at_high = of(low), of(high)
    if at_low * at_high > 0.0:
        raise ValueError("the wire does not touch the flanks between half and twice the reference diameter")
    for step in range(200):
        chord = high - at_high * (high - low) / (at_high - at_low) if at_high != at_low else low
        middle = chord if step % 3 and low < chord < high else (low + high) / 2.0
        value = of(middle)
        if value == 0.0 or high - low < 1e-13 * high:
            return middle
        if value * at_low > 0.0:
            low, at_low = middle, value
        else:
            high, at_high = middle, value
    return (low + high) / 2.0


def over_wires(
    *,
    starts: int,
    axial_module: float,
    reference_diameter: float,
    pressure_angle: float,
    thread_thickness: float,
    wire: float,
    tip_diameter: float | None = None,
    root_diameter: float | None = None,
) -> OverWires:
    """Size over three wires of a ZA worm, exact: M = 2 r_w + w, r_w the lowest seat of a straight wire free to swing.

    thread_thickness  axial, at the reference diameter [mm]; the groove is the axial pitch less this
    tip_diameter, root_diameter  where given, the wire must touch between them, stand proud and clear the root
    The third wire of a worm with several starts must lie in the groove of the same thread.
    Validity: lead angle up to 20 deg compared with an independent solve; straight axial flanks; wires and anvils rigid.
    Raises: ValueError for sizes not above zero, no groove left, or a wire that does not fit.
    Source: derived (`_seated`); reproduces the table of Machinery's Handbook, 31st ed., p. 2136, to 1e-4 of the pitch.

    >>> m = over_wires(starts=1, axial_module=2.5, reference_diameter=30.0, pressure_angle=math.radians(20.0),
    ...                thread_thickness=math.pi * 1.25, wire=4.16)
    >>> round(m.size, 4)
    35.5693
    """
    above_zero(axial_module=axial_module, reference_diameter=reference_diameter, wire=wire, starts=starts)
    above_zero(thread_thickness=thread_thickness)
    steep_enough(pressure_angle=pressure_angle)
    groove = math.pi * axial_module - thread_thickness
    above_zero(groove_width=groove)
    radius, p = reference_diameter / 2.0, starts * axial_module / 2.0

    def seat(rho: float) -> _Seated:
        return _seated(rho, wire=wire, reduced_lead=p, reference_radius=radius, pressure_angle=pressure_angle)

    rho = _falling_root(lambda r: seat(r).groove - groove, 0.5 * radius, 2.0 * radius)
    at = seat(rho)
    size = 2.0 * at.axis_radius + wire
    if tip_diameter is not None and not (2.0 * rho < tip_diameter < size):
        raise ValueError(f"a wire of {wire:g} mm does not stand proud of the tip diameter {tip_diameter:g} mm")
    if root_diameter is not None and not (2.0 * rho > root_diameter and size - 2.0 * wire > root_diameter):
        raise ValueError(f"a wire of {wire:g} mm rests on the root diameter {root_diameter:g} mm")
    return OverWires(size, 2.0 * rho, at.swing, wire)


def thickness_over_wires(
    *, size: float, starts: int, axial_module: float, reference_diameter: float, pressure_angle: float, wire: float
) -> float:
    """Axial thread thickness at the reference diameter from the size measured over three wires [mm].

    Raises: ValueError for sizes not above zero, or a size no thread of this pitch gives.
    Source: `over_wires` turned round, exact.

    >>> round(thickness_over_wires(size=35.5693, starts=1, axial_module=2.5, reference_diameter=30.0,
    ...                            pressure_angle=math.radians(20.0), wire=4.16), 4)
    3.927
    """
    above_zero(size=size, starts=starts, axial_module=axial_module, reference_diameter=reference_diameter, wire=wire)
    steep_enough(pressure_angle=pressure_angle)
    radius, p, axis = reference_diameter / 2.0, starts * axial_module / 2.0, (size - wire) / 2.0

    def seat(rho: float) -> _Seated:
        return _seated(rho, wire=wire, reduced_lead=p, reference_radius=radius, pressure_angle=pressure_angle)

    groove = seat(_falling_root(lambda r: seat(r).axis_radius - axis, 0.5 * radius, 2.0 * radius)).groove
    thickness = math.pi * axial_module - groove
    if not 0.0 < thickness < math.pi * axial_module:
        raise ValueError(f"{size:g} mm over wires of {wire:g} mm fits no thread of {math.pi * axial_module:g} mm pitch")
    return thickness


def best_wire(
    *, starts: int, axial_module: float, reference_diameter: float, pressure_angle: float, thread_thickness: float
) -> float:
    """Wire that touches the flanks at the reference diameter [mm], about g_x cos g/cos alpha_n; exact.

    Raises: ValueError for sizes not above zero or no groove left.  Source: derived, as `over_wires`.

    >>> round(best_wire(starts=1, axial_module=2.5, reference_diameter=30.0, pressure_angle=math.radians(20.0),
    ...                 thread_thickness=math.pi * 1.25), 3)
    4.164
    """
    above_zero(starts=starts, axial_module=axial_module, reference_diameter=reference_diameter)
    above_zero(thread_thickness=thread_thickness)
    steep_enough(pressure_angle=pressure_angle)
    groove = math.pi * axial_module - thread_thickness
    above_zero(groove_width=groove)
    radius, p = reference_diameter / 2.0, starts * axial_module / 2.0
    return _falling_root(
        lambda w: (
            _seated(radius, wire=w, reduced_lead=p, reference_radius=radius, pressure_angle=pressure_angle).groove
            - groove
        ),
        0.2 * groove,
        2.0 * groove,
    )
