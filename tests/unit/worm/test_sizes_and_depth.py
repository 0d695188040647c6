"""Laws of the sizes, of wires, depth and passes; what is refused and how."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.worm import cutter, depth, geometry, insert, wires

WORM = {"starts": 1, "axial_module": 2.5, "reference_diameter": 30.0, "pressure_angle": math.radians(20.0)}


@given(st.floats(3.0, 4.8), st.floats(4.0, 4.4), st.integers(1, 3))
def test_the_thickness_comes_back_from_the_size_over_wires(thickness: float, wire: float, starts: int) -> None:
    worm = {**WORM, "starts": starts}
    size = wires.over_wires(thread_thickness=thickness, wire=wire, **worm).size  # type: ignore[arg-type]
    back = wires.thickness_over_wires(size=size, wire=wire, **worm)  # type: ignore[arg-type]
    assert thickness == pytest.approx(back, abs=1e-9)


def test_the_slip_of_the_wrong_diameter_is_named() -> None:
    of = {"reference": 28.0, "tip": 32.0, "root": 23.0}
    near = math.radians(2.0 / 60.0)
    set_angle = math.radians(3.0 + 34.6 / 60.0)
    assert "tip" == geometry.whose_lead_angle(set_angle, of, starts=1, axial_module=2.0, within=near)
    assert geometry.whose_lead_angle(math.radians(3.8), of, starts=1, axial_module=2.0, within=near) is None
    assert geometry.whose_lead_angle(set_angle, {}, starts=1, axial_module=2.0, within=near) is None
    assert 32.0 == pytest.approx(2.0 / math.tan(set_angle), abs=0.01)  # d = z1 m / tan g


def test_the_tangents_of_the_pressure_angles_stand_as_the_cosine_of_the_lead_angle() -> None:
    g = math.radians(12.0)
    assert math.tan(0.35) * math.cos(g) == pytest.approx(math.tan(geometry.normal_pressure_angle(0.35, g)))


@pytest.mark.parametrize(
    ("change", "says"),
    [
        ({"wire": 3.0, "tip_diameter": 35.0}, "does not stand proud of the tip diameter 35 mm"),
        ({"wire": 4.16, "root_diameter": 28.0}, "rests on the root diameter 28 mm"),
        ({"wire": math.nan}, "wire must be above zero"),
        ({"wire": 4.16, "thread_thickness": 8.0}, "groove width must be above zero"),
        ({"wire": 4.16, "pressure_angle": 20.0}, "pressure angle must lie between 0 and 45 deg"),
        ({"wire": 60.0}, "does not touch the flanks|finds no seat"),
    ],
)
def test_wires_that_do_not_fit_are_refused(change: dict[str, float], says: str) -> None:
    given_sizes = {**WORM, "thread_thickness": math.pi * 1.25, **change}
    with pytest.raises(ValueError, match=says):
        wires.over_wires(**given_sizes)  # type: ignore[arg-type]


def test_a_size_over_wires_of_another_pitch_is_refused() -> None:
    with pytest.raises(ValueError, match="fits no thread of"):
        wires.thickness_over_wires(size=52.0, wire=4.16, **WORM)  # type: ignore[arg-type]


def test_edge_contact_has_no_contact_share() -> None:
    with pytest.raises(ValueError, match="edge contact: take a larger cutter"):
        cutter.contact_share(0.006, crowning=-1e-3, pressure_angle=0.35, lead_angle=0.08, face_width=16.0)
    with pytest.raises(ValueError, match="edge contact"):
        cutter.ridge_slope(crowning=0.0, twist=7e-3)


def test_an_undercut_wheel_has_no_insert() -> None:
    with pytest.raises(ValueError, match=r"29\.9 teeth are needed"):
        insert.insert_widths(
            [0.0],
            axial_module=2.5,
            wheel_teeth=28,
            centre_distance=50.0,
            worm_tip_diameter=35.0,
            clearance=0.5,
            pressure_angle=math.radians(15.0),
            gap_arc=math.pi * 1.25,
            tilt=0.08,
            cutter_radius=30.0,
        )


def test_errors_grow_as_the_cutter_comes_down_to_its_floor() -> None:
    pair = {
        "pitch_diameter": 30.0,
        "wheel_diameter": 100.0,
        "pressure_angle": math.radians(20.0),
        "lead_angle": math.atan(1.0 / 12.0),
        "gap_arc": math.pi * 1.25,
    }
    plunges = [cutter.Plunge(oversize=d, **pair) for d in (2.1, 3.0, 6.0, 12.0, 32.0, 100.0)]
    grown = [
        cutter.profile_error_of_tilt(1e-3, crowning=cutter.crowning(plunge), twist=cutter.twist(plunge))
        for plunge in plunges
    ]
    assert sorted(grown, reverse=True) == grown
    assert grown[0] > 20.0 * grown[3]


@pytest.mark.parametrize(("throat", "radius", "width"), [(12.5, 29.75, 10.0), (12.0, 16.5, 11.6), (10.5, 20.0, 15.0)])
def test_a_turning_cutter_touches_the_corners_of_a_throat_first(throat: float, radius: float, width: float) -> None:
    # brute force: lowest cutter centre that keeps its circle outside the hollow, against its height over the bottom
    zs = [width / 2.0 * k / 2000.0 for k in range(2001)]
    centre = max(throat - math.sqrt(throat**2 - z * z) + math.sqrt(radius**2 - z * z) for z in zs)
    early = depth.early_touch(throat_radius=throat, cutter_radius=radius, throat_width=width)
    assert centre - radius == pytest.approx(early, abs=1e-9)
    assert 0.0 == depth.early_touch(throat_radius=throat, cutter_radius=throat - 1.0, throat_width=width)


@pytest.mark.parametrize(
    ("passes", "left"), [([2.0, 1.0, 0.3], 0.0), ([2.0, 1.0, 0.2], 0.1), ([2.0, 1.0, 0.305], -0.005)]
)
def test_passes_add_up_to_the_depth(passes: list[float], left: float) -> None:
    assert left == pytest.approx(depth.left_by_passes(3.3, passes), abs=1e-12)


def test_a_list_of_passes_without_a_pass_or_with_a_lift_is_refused() -> None:
    with pytest.raises(ValueError, match="no pass"):
        depth.left_by_passes(3.3, [])
    with pytest.raises(ValueError, match="pass 2 must be above zero"):
        depth.left_by_passes(3.3, [3.5, -0.2])
