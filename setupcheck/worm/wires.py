"""A worm thread measured over three wires, exact. Lengths mm, angles rad; ZA worms, letters as in `geometry`."""

from __future__ import annotations

import math
from collections.abc import Callable

from setupcheck.record import record
from setupcheck.worm.geometry import above_zero, steep_enough

STEEPEST = math.radians(25.0)
"""Lead angle up to which wires are computed [rad]: so far they were compared with another way of solving (tests/published)."""


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


def _not_too_steep(starts: int, axial_module: float, reference_diameter: float) -> None:
    lead_angle = math.atan(starts * axial_module / reference_diameter)
    if lead_angle > STEEPEST:
        raise ValueError(
            f"a lead angle of {math.degrees(lead_angle):.1f} deg is more than the {math.degrees(STEEPEST):g} deg up to which "
            f"wires are computed: measure the thread with a gear tooth caliper, and enter thread_thickness"
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
    Validity: lead angle up to STEEPEST, compared with an independent solve; straight axial flanks; wires and anvils rigid.
    Raises: ValueError beyond it, for sizes not above zero, no groove left, or a wire that does not fit.
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
    _not_too_steep(starts, axial_module, reference_diameter)
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

    Raises: ValueError for sizes not above zero, a lead angle above STEEPEST, or a size no thread of this pitch gives.
    Source: `over_wires` turned round, exact.

    >>> round(thickness_over_wires(size=35.5693, starts=1, axial_module=2.5, reference_diameter=30.0,
    ...                            pressure_angle=math.radians(20.0), wire=4.16), 4)
    3.927
    """
    above_zero(size=size, starts=starts, axial_module=axial_module, reference_diameter=reference_diameter, wire=wire)
    steep_enough(pressure_angle=pressure_angle)
    _not_too_steep(starts, axial_module, reference_diameter)
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
    _not_too_steep(starts, axial_module, reference_diameter)
    radius, p = reference_diameter / 2.0, starts * axial_module / 2.0
    return _falling_root(
        lambda w: (
            _seated(radius, wire=w, reduced_lead=p, reference_radius=radius, pressure_angle=pressure_angle).groove
            - groove
        ),
        0.2 * groove,
        2.0 * groove,
    )
