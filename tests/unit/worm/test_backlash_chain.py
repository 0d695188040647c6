"""The chain of the backlash against a straight rack in gaps cut by an insert, turned until a flank touches."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from setupcheck.flow import prepare
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import OverATurn
from setupcheck.quantities.backlash import thermal_backlash
from setupcheck.quantities.book import Known
from setupcheck.quantities.drive import Drive, drive
from setupcheck.quantities.requirements import read_stack
from setupcheck.quantities.stacks import Built, build
from setupcheck.shipped import shipped

from .exact_backlash import Section, gap_of, slope

WHEEL = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")
JOBS = {
    "as shipped": WHEEL,
    "a flat flank": WHEEL.replace("pressure_angle: 20 deg", "pressure_angle: 15 deg"),
    "a steep flank": WHEEL.replace("pressure_angle: 20 deg", "pressure_angle: 25 deg"),
    "a thin thread": WHEEL.replace("measured: 2.310 mm", "measured: 2.110 mm").replace("2.387 ±", "2.180 ±"),
    "shifted": WHEEL.replace("centre_distance: 66.000 ±0.010", "centre_distance: 66.300 ±0.010, shift: 0.2"),
}
TEMPERATURE = "drive, its temperature in service"


def built(text: str) -> tuple[Drive, OverATurn]:
    floor, _ = prepare(read_job_text(text, "job.yaml"))
    index = next(i for i, r in enumerate(floor.loaded.job.require) if r.what == "backlash")
    made, found = build(floor, read_stack(floor, index)), drive(floor)
    assert isinstance(made, Built) and isinstance(made.figure, OverATurn) and isinstance(found, Drive)
    return found, made.figure


def section(found: Drive, text: str) -> Section:
    """The same drive for the brute force, its gap found from the insert's width by an involute of its own."""
    shift = 0.2 if "shift: 0.2" in text else 0.0
    bare = Section(
        module=found.module,
        teeth=found.teeth,
        worm_diameter=found.reference_diameter,
        pressure_angle=found.pressure_angle,
        thread=found.thread,
        distance=found.centre_distance,
        shift=shift,
        gap=2.3,
    )
    root = 111.0 / 2.0 - 3.3
    gap = gap_of(
        bare,
        width=2.180 if "2.180" in text else 2.387,
        height=found.wheel_diameter / 2.0 - root,
        radius=20.0,
        tilt=math.radians(3.0 + 34.0 / 60.0 + 35.0 / 3600.0),
        clearance=found.centre_distance - found.tip_diameter / 2.0 - root,
    )
    return replace(bare, gap=gap)


def coefficient(account: Account, part: str) -> float:
    found = [(a + b).real for c, (a, b) in account.terms.items() if part in c.key]
    assert 1 == len(found), part
    return found[0]


def misfit(figure: OverATurn, part: str) -> tuple[float, Cause]:
    """What one part of the mesh's misfit takes from the backlash, per unit of what lies under it, and its cause."""
    cause = next(c for c in figure.account.terms if c.key == f"mesh, flanks that no longer fit: {part}")
    return (sum(figure.account.terms[cause])).real, cause


@pytest.mark.parametrize("job", JOBS)
def test_each_size_moves_the_backlash_as_the_rack_in_its_gap_says(job: str) -> None:
    found, figure = built(JOBS[job])
    exact = section(found, JOBS[job])
    own = figure.account
    assert slope(exact, "distance", 0.05) == pytest.approx(coefficient(own, "centre distance"), rel=1e-6)
    assert slope(exact, "thread", 0.01) == pytest.approx(coefficient(own, "thickness of its thread"), rel=1e-6)
    # the flank of a wider insert leans by half the gap's angle, which is square in it: 0.05 % here
    assert slope(exact, "wider", 0.004) == pytest.approx(coefficient(own, "op 40, insert: width"), rel=2e-3)
    # a gap cut deeper is no true involute any more: up to 1 % between pitch height and where the thread now touches
    assert slope(exact, "deeper", 0.02) == pytest.approx(coefficient(own, "op 40, teeth: depth"), rel=1e-2)
    touched = coefficient(own, "diameter of throat where touched")
    assert touched == pytest.approx(-coefficient(own, "op 40, teeth: depth") / 2.0)


@pytest.mark.parametrize("job", JOBS)
@pytest.mark.parametrize("degrees", [0, 60, 90, 180, 215])
def test_an_eccentric_wheel_swings_the_backlash_by_the_factor_of_the_figure(job: str, degrees: int) -> None:
    found, figure = built(JOBS[job])
    exact = replace(section(found, JOBS[job]), at=math.radians(degrees))
    moved = slope(exact, "off", 0.02)
    assert moved == pytest.approx(-figure.factor * math.cos(math.radians(degrees)), abs=1e-6)


@pytest.mark.parametrize("job", JOBS)
def test_the_nominal_backlash_is_that_of_the_rack_in_its_gap_grown_and_warm(job: str) -> None:
    found, figure = built(JOBS[job])
    _, book = prepare(read_job_text(JOBS[job], "job.yaml"))
    scope = book.instances("join")[0]
    grown = [book.get(f"fit.growth_{end}", scope) for end in ("least", "most")]
    assert all(isinstance(g, Known) for g in grown)
    growth = sum(g.value for g in grown if isinstance(g, Known)) / 2.0  # type: ignore[misc]
    exact = replace(section(found, JOBS[job]), growth=growth)
    # the middle of all temperatures: 20 degC does nothing, so the worst of 5 and 45 degC each way, halved
    ends = [
        thermal_backlash(found, rise=t, housing=h, wheel=w, worm=s)
        for t in (-15.0, 25.0)
        for h in EXPANSIONS["housing"]
        for w in EXPANSIONS["wheel"]
        for s in EXPANSIONS["worm"]
    ]
    warm = (min(*ends, 0.0) + max(*ends, 0.0)) / 2.0
    assert figure.base() == pytest.approx(exact.backlash() + warm, abs=2e-5)


EXPANSIONS = {"housing": (10.0e-6, 11.7e-6), "wheel": (17.0e-6, 18.5e-6), "worm": (11.0e-6, 12.5e-6)}
"""Lowest and highest of grey iron, tin bronze and case steel, as materials.yaml has them [1/K]."""


@pytest.mark.parametrize("job", JOBS)
@pytest.mark.parametrize("rise", [25.0, -15.0])
def test_temperature_moves_the_backlash_as_parts_that_each_grow_by_themselves(job: str, rise: float) -> None:
    found, _ = built(JOBS[job])
    cold = section(found, JOBS[job])
    for worm, wheel, housing in ((11.5e-6, 18.0e-6, 11.0e-6), (12.0e-6, 17.0e-6, 23.0e-6), (17.0e-6, 11.0e-6, 11.0e-6)):
        warm = replace(cold, grown=(1.0 + worm * rise, 1.0 + wheel * rise, 1.0 + housing * rise))
        told = thermal_backlash(found, rise=rise, housing=housing, wheel=wheel, worm=worm)
        # left out: the backlash itself grows too, 0.1 mm by 3e-4
        assert warm.backlash() - cold.backlash() == pytest.approx(told, abs=5e-5)


@pytest.mark.parametrize("job", JOBS)
@pytest.mark.parametrize("stretched", [True, False])
def test_growth_takes_what_a_wheel_stretched_as_one_body_loses_and_a_stiff_tooth_less(
    job: str, stretched: bool
) -> None:
    found, figure = built(JOBS[job])
    exact = replace(section(found, JOBS[job]), stretched=stretched)
    told, lost = coefficient(figure.account, "growth of the hub"), slope(exact, "growth", 0.02)
    if stretched:
        assert lost == pytest.approx(told, abs=3e-3)  # of 0.34: the gap is a little wider than the thread
    else:  # the tooth does not widen with its rim: half a pitch on the circle, which is left on the careful side
        assert told < lost < told + 1.1 * (math.pi * found.module - found.thread) / found.wheel_diameter


@pytest.mark.parametrize("job", JOBS)
@pytest.mark.parametrize("deeper", [0.02, -0.02, 0.005, -0.005])
def test_a_gap_off_its_depth_loses_no_more_over_the_mesh_than_its_misfit(job: str, deeper: float) -> None:
    found, figure = built(JOBS[job])
    exact = replace(section(found, JOBS[job]), deeper=deeper)
    share, _ = misfit(figure, "depth")
    lost = exact.backlash_in_mesh(8)[0] - replace(exact, deeper=0.0).backlash()
    slope_of_depth = coefficient(figure.account, "op 40, teeth: depth")
    told = slope_of_depth * deeper + share * abs(deeper)
    assert told - 1e-4 <= lost  # never more than told; 0.1 um for curvature
    assert lost <= slope_of_depth * deeper + 0.25 * share * abs(deeper)  # and much of it is really lost
    assert exact.backlash_in_mesh(8)[1] <= exact.backlash() + 2e-4  # the upper end is that of one gap


@pytest.mark.parametrize("job", JOBS)
@pytest.mark.parametrize("rise", [25.0, -15.0])
def test_a_wheel_of_another_pitch_loses_no_more_over_the_mesh_than_its_misfit(job: str, rise: float) -> None:
    found, figure = built(JOBS[job])
    cold = section(found, JOBS[job])
    warm = replace(cold, grown=(1.0 + 11.5e-6 * rise, 1.0 + 18.4e-6 * rise, 1.0 + 10.5e-6 * rise))
    share, _ = misfit(figure, "pitch")
    told, lost = share * 6.9e-6 * abs(rise), warm.backlash_in_mesh(8)[0] - warm.backlash()
    assert told - 5e-5 <= lost <= 0.25 * told


def test_the_misfit_of_the_depth_covers_the_place_where_the_throat_was_touched() -> None:
    _, figure = built(WHEEL)
    _, cause = misfit(figure, "depth")
    assert cause.of is not None
    names = {c.key for c in cause.of.origins()}
    assert {"op 40, teeth: depth", "op 40, hub in spigot: clearance", "op 30, throat: axis of lathe-A"} <= names
    # 5 um of feed, half of 10 um on diameter, half of 8 um of play, half of 3 um of run-out, two spindles, lean of the seat
    assert 0.005 + 0.005 + 0.004 + 0.0015 < cause.bound < 0.005 + 0.005 + 0.004 + 0.0015 + 0.0015 + 0.0025


def test_a_throat_turned_in_the_holding_of_the_teeth_is_touched_true() -> None:
    line = "    cut:    {teeth: {cutter: fly"
    _, figure = built(WHEEL.replace(line, "    cut:    {throat: {error: 10 um}, teeth: {cutter: fly"))
    _, cause = misfit(figure, "depth")
    assert cause.of is not None
    own = {c.key for c in cause.of.origins()}
    assert not any("clearance" in key or "run-out" in key for key in own), own
