"""Published worms and wheels through job files: a textbook pair in inches, the Navy's rim, a gear shop's roots, wires.

Sources: Mott, Machine Elements in Mechanical Design, 4th ed., p. 343 and eq. 8-39; NAVEDTRA 14345, p. 14-23; a gear shop's
formula list (whole depth 2.16 m or 2.25 m); Machinery's Handbook, 31st ed., p. 2136 (wires for 29-degree threads of 1 in axial
pitch). The same formulas are checked by themselves in test_worm_geometry.
"""

from __future__ import annotations

import math

import pytest

from setupcheck.quantities.book import Known

from .bench import findings, reviewed
from .test_worm_geometry import HANDBOOK, WORMS

INCH = 25.4


def job(
    worm: str, *, units: str = "mm", count: int, circle: str, mesh: str = "", width: str = "", wheel: bool = True
) -> str:
    """A bought wheel and its worm: nothing is cut, so only their sizes count."""
    of = f"mesh: {{wheel: wheel.teeth{mesh}}}" if wheel else ""
    teeth = f"{{kind: teeth, count: {count}, on_circle: {circle}, at: 0.4, made: stock{width}}}"
    return f"""
setupcheck: 1
title: Worm and wheel
units: {units}
parts:
  wheel:
    surfaces:
      teeth: {teeth}
      rim:   {{kind: cylinder, diameter: {circle}, from: 0, to: 0.8, made: stock}}
    given:
      - {{of: teeth, about: rim, runout: 5 um}}
worm: {worm}
{of}
"""


def get(text: str, name: str) -> float:
    """One number of the worm or the mesh [mm, rad]."""
    book = reviewed(text).book
    scope = next(s for s in book.scopes if s.kind == book.quantities[name].per)
    found = book.get(name, scope)
    assert isinstance(found, Known), (name, found)
    return float(str(found.value))


MOTT = job(
    "{starts: 3, diametral_pitch: 6, reference_diameter: 2.000, tip_diameter: 2.333, pressure_angle: 14.5 deg}",
    units="in",
    count=52,
    circle="8.666666666667",
    mesh=", centre_distance: 5.333 ±0.001",
)


@pytest.mark.parametrize(
    ("name", "unit", "printed", "within"),
    [
        ("worm.axial_pitch", INCH, 0.5236, 5e-5),
        ("worm.lead", INCH, 1.5708, 5e-5),
        ("worm.lead_angle", math.radians(1.0), 14.04, 0.005),
        ("mesh.reference_circle", INCH, 8.667, 5e-4),
        ("mesh.closing_distance", INCH, 5.333, 5e-4),
    ],
)
def test_the_textbook_pair_from_its_diametral_pitch(name: str, unit: float, printed: float, within: float) -> None:
    assert printed == pytest.approx(get(MOTT, name) / unit, abs=within)


@pytest.mark.parametrize("rule", ["MESH-001", "MESH-002", "MESH-007"])
def test_the_textbook_pair_contradicts_nothing(rule: str) -> None:
    assert ["pass"] == [f.verdict for f in findings(MOTT, rule)]


@pytest.mark.parametrize(
    ("instead", "key"),
    [("lead: 1.5708", "lead"), ("axial_pitch: 0.5236", "axial pitch"), ("quotient: 12", "quotient")],
)
def test_the_textbook_pair_from_its_other_printed_sizes(instead: str, key: str) -> None:
    other = MOTT.replace("diametral_pitch: 6", instead)
    assert 5.333 == pytest.approx(get(other, "mesh.closing_distance") / INCH, abs=5e-4), key
    assert ["pass"] == [f.verdict for f in findings(other, "MESH-007")]


def test_the_printed_sizes_together_agree_and_a_wrong_one_does_not() -> None:
    beside = MOTT.replace("diametral_pitch: 6,", "diametral_pitch: 6, lead: 1.5708, axial_pitch: 0.5236, quotient: 12,")
    assert ["pass"] == [f.verdict for f in findings(beside, "MESH-007")]
    wrong = beside.replace("lead: 1.5708", "lead: 0.5236")  # the pitch of a worm of three starts told as its lead
    (found,) = findings(wrong, "MESH-007")
    assert "lead 0.5236 in is not 1.5708 in" in found.message


def metric(extra: str = "", *, alpha: str = "20 deg", starts: int = 1, mesh: str = "") -> str:
    return job(
        f"{{starts: {starts}, axial_module: 2.5, reference_diameter: 30, tip_diameter: 35, pressure_angle: {alpha}{extra}}}",
        count=40,
        circle="100",
        mesh=mesh,
        width=", width: 0.6",
    )


@pytest.mark.parametrize(("alpha", "normal"), [("20 deg", 19.9364), ("15 deg", 14.9505)])
def test_the_normal_pressure_angle(alpha: str, normal: float) -> None:
    # Mott, eq. 8-39
    assert normal == pytest.approx(math.degrees(get(metric(alpha=alpha), "worm.normal_angle")), abs=5e-5)


@pytest.mark.parametrize(("starts", "of_pitch"), [(1, 0.4775), (2, 0.4775), (3, 0.3183)])
def test_the_rim_over_the_throat(starts: int, of_pitch: float) -> None:
    # NAVEDTRA 14345, p. 14-23; m = 2.5, px = 7.854: 3.75 mm for one start
    text = metric(starts=starts)
    rim = get(text, "mesh.outside") - get(text, "mesh.throat")
    assert of_pitch * math.pi * 2.5 == pytest.approx(rim, abs=1e-3)


@pytest.mark.parametrize(("starts", "pitches", "inches"), [(1, 2.38, 0.25), (2, 2.38, 0.25), (3, 2.15, 0.20)])
def test_the_navys_width_of_the_teeth(starts: int, pitches: float, inches: float) -> None:
    # NAVEDTRA 14345, p. 14-23
    wanted = pitches * math.pi * 2.5 + inches * INCH
    assert wanted == pytest.approx(get(metric(starts=starts), "mesh.us_width"))


def test_the_hollow_is_the_worms_pitch_radius_less_one_addendum() -> None:
    # NAVEDTRA 14345, p. 14-23; a shift moves the wheel's tip and the centre alike
    for shift in ("", ", shift: 0.3"):
        assert 15.0 - 2.5 == pytest.approx(get(metric(mesh=shift), "mesh.throat_radius"))


def test_the_root_of_the_worm_lies_between_those_of_a_gear_shop() -> None:
    # whole depth 2.16 m and 2.25 m: 24.2 and 23.75 mm; ours takes 2.2 m
    assert 23.75 < get(metric(), "worm.usual_root") < 24.2
    assert 24.0 == pytest.approx(get(metric(), "worm.usual_root"))


@pytest.mark.parametrize(("alpha", "fewest"), [("20 deg", 18), ("15 deg", 30)])
def test_the_least_teeth(alpha: str, fewest: int) -> None:
    # 17.1 and 29.9 of the textbook formula, the next whole tooth
    assert fewest == get(metric(alpha=alpha), "mesh.fewest_teeth")


@pytest.mark.parametrize(("lead_deg", "starts", "wire", "printed"), HANDBOOK)
def test_the_handbooks_wires_give_half_the_pitch(lead_deg: int, starts: int, wire: float, printed: float) -> None:
    # 1 in axial pitch, groove and thread half an inch each; 1e-4 in of size is 2.6e-5 in of thickness at 14.5 degrees
    diameter = starts / (math.pi * math.tan(math.radians(lead_deg)))
    text = job(
        f"{{starts: {starts}, axial_pitch: 1, reference_diameter: {diameter!r}, tip_diameter: {diameter + 0.6!r}, profile: ZA, "
        f"pressure_angle: 14.5 deg, over_wires: {{measured: {diameter + printed!r}, wire: {wire}, uncertainty: 0.1 thou}}}}",
        units="in",
        count=40,
        circle="12.732",
        wheel=False,
    )
    assert 0.5 == pytest.approx(get(text, "worm.thickness") / INCH, abs=3e-5)
    assert wire == pytest.approx(get(text, "worm.best_wire") / INCH, abs=5e-5)


@pytest.mark.parametrize(("starts", "module", "diameter", "alpha", "wire", "size"), WORMS)
def test_sizes_computed_before_with_another_program_give_half_the_pitch(
    starts: int, module: float, diameter: float, alpha: float, wire: float, size: float
) -> None:
    text = job(
        f"{{starts: {starts}, axial_module: {module}, reference_diameter: {diameter}, tip_diameter: {diameter + 2 * module}, "
        f"profile: ZA, pressure_angle: {alpha} deg, over_wires: {{measured: {size}, wire: {wire}, uncertainty: 3 um}}}}",
        count=40,
        circle=str(40 * module),
        wheel=False,
    )
    assert math.pi * module / 2.0 == pytest.approx(get(text, "worm.thickness"), abs=3e-5)
    assert size == pytest.approx(get(text, "worm.over_wires"), abs=1e-9)
