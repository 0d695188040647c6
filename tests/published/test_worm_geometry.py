"""Worm geometry: a textbook pair, the Navy's rim sizes, a gear shop's root sizes, and a handbook's wires for worm threads.

Sources: Mott, Machine Elements in Mechanical Design, 4th ed., p. 343; NAVEDTRA 14345, p. 14-23; a gear shop's formula list;
Machinery's Handbook, 31st ed., p. 2136 (29-degree threads, 1 in axial pitch). Lengths in inches scale like mm.
The wires are also solved independently: distance from a straight line to the helicoid, minimised numerically.
"""

from __future__ import annotations

import math

import pytest
from scipy.optimize import brentq, minimize, minimize_scalar

from setupcheck.worm import geometry, wires

HANDBOOK = [
    # lead angle deg, starts, wire, M - E, as printed [in]
    (5, 1, 0.51450, 0.64311),
    (5, 2, 0.51443, 0.64290),
    (7, 1, 0.51270, 0.64085),
    (7, 2, 0.51254, 0.64032),
    (10, 2, 0.50864, 0.63518),
    (10, 3, 0.50847, 0.63463),
    (12, 2, 0.50535, 0.63095),
    (12, 3, 0.50507, 0.63006),
]
WORMS = [
    # starts, module, d1, alpha deg, wire, size computed before with another program [mm]
    (1, 2.5, 30.0, 20.0, 4.16, 35.5693),
    (1, 2.5, 30.0, 15.0, 4.05, 35.0912),
    (2, 3.0, 36.0, 20.0, 4.94, 42.6048),
    (1, 1.5, 22.0, 20.0, 2.50, 25.3504),
]
STEEP = (5, 2.0, 21.5, 20.0, 3.2)  # 24.9 deg


def over(starts: int, module: float, diameter: float, alpha_deg: float, wire: float) -> wires.OverWires:
    return wires.over_wires(
        starts=starts,
        axial_module=module,
        reference_diameter=diameter,
        pressure_angle=math.radians(alpha_deg),
        thread_thickness=math.pi * module / 2.0,
        wire=wire,
    )


def solved(starts: int, module: float, diameter: float, alpha_deg: float, wire: float) -> float:
    """Over-wires size by brute force: lowest axis of a swung line that keeps w/2 from every point of the flank."""
    slope, p, groove = math.tan(math.radians(alpha_deg)), starts * module / 2.0, math.pi * module / 2.0

    def distance(axis: float, swing: float) -> float:
        def squared(v: list[float]) -> float:
            rho, phi = v
            x = groove / 2.0 + (rho - diameter / 2.0) * slope + p * phi
            across = x * math.cos(swing) - rho * math.sin(phi) * math.sin(swing)
            return float(across**2 + (rho * math.cos(phi) - axis) ** 2)

        best = minimize(squared, [diameter / 2.0, 0.0], method="BFGS", options={"gtol": 1e-11})
        return math.sqrt(best.fun)

    def axis(swing: float) -> float:
        low, high = diameter / 2.0 - 0.4 * wire, diameter / 2.0 + 0.5 * wire
        return float(brentq(lambda r: distance(r, swing) - wire / 2.0, low, high, xtol=1e-9))

    lead_angle = math.atan(2.0 * p / diameter)
    lowest = minimize_scalar(
        axis, bounds=(0.6 * lead_angle, 1.3 * lead_angle), method="bounded", options={"xatol": 1e-6}
    )
    return 2.0 * float(lowest.fun) + wire


@pytest.mark.parametrize(("lead_deg", "starts", "wire", "printed"), HANDBOOK)
def test_the_handbooks_wires_for_worm_threads(lead_deg: int, starts: int, wire: float, printed: float) -> None:
    pitch_diameter = starts / (math.pi * math.tan(math.radians(lead_deg)))
    size = over(starts, 1.0 / math.pi, pitch_diameter, 14.5, wire).size
    assert printed == pytest.approx(size - pitch_diameter, abs=1e-4)


@pytest.mark.parametrize("row", HANDBOOK)
def test_the_handbooks_wires_touch_at_the_pitch_diameter(row: tuple[int, int, float, float]) -> None:
    lead_deg, starts, wire, _ = row
    diameter = starts / (math.pi * math.tan(math.radians(lead_deg)))
    ours = wires.best_wire(
        starts=starts,
        axial_module=1.0 / math.pi,
        reference_diameter=diameter,
        pressure_angle=math.radians(14.5),
        thread_thickness=0.5,
    )
    assert wire == pytest.approx(ours, abs=5e-5)


@pytest.mark.parametrize("row", WORMS)
def test_a_size_computed_before_comes_out_again(row: tuple[int, float, float, float, float, float]) -> None:
    *worm, size = row
    assert size == pytest.approx(over(*worm).size, abs=6e-5)


@pytest.mark.parametrize(
    "worm", [WORMS[0][:5], WORMS[2][:5], (4, 2.0, 24.0, 20.0, 3.2), (1, 1.5, 22.0, 15.0, 2.7), STEEP]
)
def test_the_exact_wires_agree_with_a_numerical_search(worm: tuple[int, float, float, float, float]) -> None:
    assert solved(*worm) == pytest.approx(over(*worm).size, abs=1e-7)


def test_without_the_lead_angle_the_wires_read_wrong() -> None:
    # Handbook, p. 2129: the lead makes the wire sit higher; simple formula, 12 deg and 2 starts: 0.59033 for 0.63095
    *_, wire, printed = HANDBOOK[6]
    simple = -0.5 / math.tan(math.radians(14.5)) + wire * (1.0 + 1.0 / math.sin(math.radians(14.5)))
    assert 0.59033 == pytest.approx(simple, abs=2e-5)
    assert printed - simple > 0.04


def test_a_thinner_thread_lowers_the_size_over_wires() -> None:
    # 2.741 per mm of axial thickness (computed before), simple cot alpha = 2.7475
    thick, wire, alpha = math.pi * 1.25, 4.16, math.radians(20.0)
    sizes = [
        wires.over_wires(
            starts=1,
            axial_module=2.5,
            reference_diameter=30.0,
            pressure_angle=alpha,
            thread_thickness=t,
            wire=wire,
        ).size
        for t in (thick, thick - 0.1)
    ]
    assert 2.741 == pytest.approx((sizes[0] - sizes[1]) / 0.1, abs=0.003)


def test_a_textbook_pair_closes() -> None:
    # Mott, p. 343: z1 = 3, z2 = 52, Pd = 6 per in, d1 = 2.000 in: L = 1.5708, lead angle 14.04 deg, C = 5.333 in
    module = 1.0 / 6.0
    assert 1.5708 == pytest.approx(geometry.lead(starts=3, axial_module=module), abs=5e-5)
    lead_angle = geometry.lead_angle(starts=3, axial_module=module, diameter=2.0)
    assert 14.04 == pytest.approx(math.degrees(lead_angle), abs=0.005)
    distance = geometry.centre_distance(axial_module=module, reference_diameter=2.0, wheel_teeth=52)
    assert 5.333 == pytest.approx(distance, abs=5e-4)


@pytest.mark.parametrize(("axial", "normal"), [(20.0, 19.9364), (15.0, 14.9505)])
def test_the_normal_pressure_angle(axial: float, normal: float) -> None:
    # Mott, eq. 8-39: tan phi_n = tan phi_t cos(lead); m = 2.5, d1 = 30, one start
    ours = geometry.normal_pressure_angle(math.radians(axial), math.atan(1.0 / 12.0))
    assert normal == pytest.approx(math.degrees(ours), abs=5e-5)


@pytest.mark.parametrize(("dedendum", "root"), [(0.16, 24.2), (0.25, 23.75)])
def test_the_root_of_the_worm(dedendum: float, root: float) -> None:
    # a gear shop's list: whole depth 2.16 m or 2.25 m; d1 = 30, m = 2.5
    sizes = geometry.worm_sizes(axial_module=2.5, reference_diameter=30.0, clearance_factor=dedendum)
    assert root == pytest.approx(sizes.root_diameter)


@pytest.mark.parametrize(("starts", "of_pitch"), [(1, 0.4775), (2, 0.4775), (3, 0.3183)])
def test_the_rim_over_the_throat(starts: int, of_pitch: float) -> None:
    # NAVEDTRA 14345, p. 14-23; m = 2.5, px = 7.854: 3.75 mm for one start
    rim = geometry.outside_diameter(throat_diameter=105.0, axial_module=2.5, starts=starts)
    assert 105.0 + of_pitch * math.pi * 2.5 == pytest.approx(rim, abs=1e-3)


def test_the_throat_radius_is_the_worms_pitch_radius_less_one_addendum() -> None:
    # NAVEDTRA 14345, p. 14-23
    sizes = geometry.wheel_sizes(axial_module=2.5, reference_diameter=30.0, wheel_teeth=40, shift=0.3)
    assert 15.0 - 2.5 == pytest.approx(sizes.throat_radius)
    assert 105.0 + 2.0 * 0.75 == pytest.approx(sizes.throat_diameter)


def test_steeper_threads_than_were_compared_are_refused() -> None:
    with pytest.raises(ValueError, match=r"lead angle of 25\.5 deg is more than the 25 deg"):
        over(5, 2.0, 21.0, 20.0, 3.2)
