"""Beyond the stated validity of its formula a quantity is open and says why: no number, and never a pass."""

from __future__ import annotations

import re

import pytest

from setupcheck.physics.heating import DULL, LARGEST_CHILLED, LARGEST_HEATED, Ring, _air
from setupcheck.quantities.book import Known, Open, OutOfRange
from setupcheck.quantities.material_data import material
from setupcheck.quantities.through import one_temperature
from tests.unit.quantities.joint_text import answer, changed, finding, number, reviewed

# journal 0.5 mm over its nominal in a 60 mm bore: far beyond what bronze stands (all sizes invented)
TOO_TIGHT = changed(("diameter: 60 r6", "diameter: 60.5 ±0.005"))
# only the tightest pairs yield
SOME_YIELD = changed(("diameter: 60 r6", "diameter: 60.265 ±0.235"))
# as drawn it is elastic at 20 degC; the bronze hub yields in the cold of service
COLD_YIELDS = changed(("serves_at: [10 degC", "serves_at: [-190 degC"))
PRESSED = changed(
    ("by: shrink", "by: press"),
    ("      heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}\n", ""),
    text=TOO_TIGHT,
)
JOBS = pytest.mark.parametrize("job", [TOO_TIGHT, SOME_YIELD, COLD_YIELDS], ids=["all", "some", "cold"])
OF_THE_TIGHTEST = (
    "fit.pressure_most",
    "fit.hoop",
    "fit.hoop_outside",
    "fit.seat_stress",
    "fit.hole_stress",
    "fit.bench_pressure",
    "fit.bench_hoop",
    "fit.growth_most",
    "fit.growth_uncounted",
    "fit.growth_as_distance",
    "fit.growth_outside",
    "fit.growth_told",
    "fit.hole_closing",
    "fit.press_off",
)
OF_THE_LOOSEST = (
    "fit.pressure_least",
    "fit.bench_least_pressure",
    "fit.bench_torque",
    "fit.warm_torque",
    "fit.growth_least",
    "fit.force_held",
    "fit.torque_held",
    "fit.torque_1988",
    "fit.torque_2017",
    "fit.slip_safety",
    "fit.holds_to",
    "fit.loosens_at",
)


@pytest.mark.parametrize("name", OF_THE_TIGHTEST)
@JOBS
def test_the_tightest_pair_has_no_figures_beyond_its_elastic_limit(job: str, name: str) -> None:
    found = answer(job, name)
    assert isinstance(found, Open), found
    assert "of the tightest pair yields" in found.because
    assert "elastic parts alone" in found.because


@pytest.mark.parametrize("name", OF_THE_LOOSEST)
def test_the_loosest_pair_has_none_where_it_yields_itself(name: str) -> None:
    found = answer(TOO_TIGHT, name)
    assert isinstance(found, Open), found
    assert "of the loosest pair yields" in found.because


@pytest.mark.parametrize("name", OF_THE_LOOSEST)
def test_the_loosest_pair_keeps_its_figures_while_it_is_elastic_itself(name: str) -> None:
    assert isinstance(answer(SOME_YIELD, name), Known)


@JOBS
def test_the_growth_is_open_where_the_rule_on_yielding_fails(job: str) -> None:
    assert finding(job, "FIT-004").verdict == "fail"
    assert finding(job, "FIT-005").verdict == "open"
    assert reviewed(job).verdict == "fail"


def test_a_joint_that_yields_tells_no_torque_and_no_press_force() -> None:
    assert finding(TOO_TIGHT, "FIT-003").verdict == "open"
    for name in ("fit.press_force", "fit.press_off"):
        found = answer(PRESSED, name)
        assert isinstance(found, Open), (name, found)
        assert "yields" in found.because
    assert finding(PRESSED, "FIT-008").verdict == "open"


def test_up_to_the_limit_the_figures_stand() -> None:
    """What the rule compares itself, the interference, is no figure of an elastic part and is told in any case."""
    assert number(changed(), "fit.grip_most") < number(changed(), "fit.elastic")
    assert number(TOO_TIGHT, "fit.grip_most") > number(TOO_TIGHT, "fit.elastic")
    for name in (*OF_THE_TIGHTEST, *OF_THE_LOOSEST):
        assert isinstance(answer(changed(), name), Known), name


@pytest.mark.parametrize(
    ("job", "says"),
    [
        (
            changed(("serves_at: [10 degC, 25 degC]", "serves_at: [10 degC, 210 degC]")),
            "at 210 degC: .* -205 to 200 degC",
        ),
        (changed(("serves_at: [10 degC", "serves_at: [-206 degC")), "at -206 degC: .* -205 to 200 degC"),
    ],
    ids=["too hot", "too cold"],
)
def test_a_service_beyond_what_expansions_are_known_for_is_open(job: str, says: str) -> None:
    for name in ("fit.grip_most", "fit.grip_least"):
        found = answer(job, name)
        assert isinstance(found, Open), (name, found)
        assert re.search(says, found.because), found.because
    assert finding(job, "FIT-003").verdict == "open"
    assert finding(job, "FIT-004").verdict == "open"


def test_a_hub_hotter_than_its_expansion_is_known_for_is_open_and_still_too_hot() -> None:
    job = changed(("hub: 190 degC", "hub: 420 degC"))
    for name in ("heat.planned_low", "heat.at_shaft", "heat.opens_by_heat", "heat.carry_loss", "heat.carry_allowed"):
        found = answer(job, name)
        assert isinstance(found, Open), (name, found)
    assert "a hub of 415 degC: how far it has grown is known up to 400 degC" in str(answer(job, "heat.planned_low"))
    assert finding(job, "HEAT-001").verdict == "open"
    assert finding(job, "HEAT-002").verdict == "fail"


def test_a_joint_that_would_hold_beyond_what_is_known_of_it_says_how_far_it_is_known() -> None:
    # steel on steel, 53 um less what is smoothed: the scatter of both expansions on 60 mm takes that past 200 degC alone
    like = changed(("material: CuSn12-C", "material: 42CrMo4+QT"), ("190 degC", "290 degC"), ("60 r6", "60 s6"))
    assert answer(like, "fit.loosens_at") is None
    assert number(like, "fit.tight_to") == 200.0
    assert answer(changed(), "fit.tight_to") is None
    assert 25.0 < number(changed(), "fit.loosens_at") < 200.0


@pytest.mark.parametrize(
    ("outside", "span"), [(LARGEST_HEATED, range(20, 401, 10)), (LARGEST_CHILLED, range(-205, 21, 5))]
)
def test_the_largest_parts_keep_the_films_range(outside: float, span: range) -> None:
    """Churchill and Chu: up to Ra = 1e12 (the equation as heat transfer textbooks give it)."""
    most = max(_air(t, air, outside)[2] for t in span for air in (0.0, 20.0, 40.0))
    assert 0.5e12 < most <= 1e12


def test_a_shaft_that_is_cold_outside_only_has_no_gain() -> None:
    """Bi = h (V/A)/k with the poorest conductor: solid 1.5 m stainless, V/A about 0.3 m, h 5 to 10 W/m2K, k 15 W/mK."""
    ring = Ring(bore=0.0, outside=1500.0, length=1000.0, density=7900.0, specific_heat=460.0, emissivity=DULL)
    stainless = material("X5CrNi18-10")
    with pytest.raises(OutOfRange, match=r"the shaft warms from the outside in \(Biot number 0\.[12]"):
        one_temperature("shaft", "warms", ring, stainless, at=-190.0, room=20.0)


def test_a_pair_that_yields_as_drawn_fails_whatever_is_not_known_of_its_service() -> None:
    """A limit that is passed at 20 degC is passed, though nobody knows what 210 degC does to the joint."""
    hot = ("serves_at: [10 degC, 25 degC]", "serves_at: [10 degC, 210 degC]")
    assert finding(changed(hot, text=TOO_TIGHT), "FIT-004").verdict == "fail"
    assert number(changed(hot, text=TOO_TIGHT), "fit.grip_most") == number(TOO_TIGHT, "fit.grip_most")


def test_a_pair_that_is_loose_as_drawn_holds_nothing_whatever_is_not_known_of_its_service() -> None:
    # 60 n6 in 60 H6: 1 um at least, of which the peaks of both surfaces take 0.8 (4 + 2.5) um
    hot = ("serves_at: [10 degC, 25 degC]", "serves_at: [10 degC, 210 degC]")
    loose = changed(("diameter: 60 r6", "diameter: 60 n6"), hot)
    assert number(loose, "fit.grip_least") < 0.0
    assert finding(loose, "FIT-003").verdict == "fail"
