"""Slips in the sizes of a worm, each in two routes: the rule speaks, says what it is, and falls silent when that is typed in."""

from __future__ import annotations

import re
from dataclasses import dataclass

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known
from setupcheck.shipped import shipped

TEXTS = {
    name: shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8")
    for name in ("rotator-worm-wheel", "wheel-on-spindle")
}
ROTATOR, SPINDLE = TEXTS


@dataclass(frozen=True)
class Slip:
    """One line of one job, what it becomes, what the finding and its remedy say, and the line that cures it."""

    route: str
    line: str
    becomes: str
    says: str
    remedy: str
    cure: str


SLIPS: dict[tuple[str, str], tuple[Slip, Slip]] = {
    ("MESH-001", "the module typed for the diametral pitch"): (
        Slip(
            ROTATOR,
            "  axial_module: 1.5\n",
            "  diametral_pitch: 1.5\n",
            "1111200.0 um off its tooth count",  # 72 x 25.4/1.5 - 108 mm
            "The diametral_pitch reads like the module in mm: write axial_module: 1.500 mm in its place.",
            "  axial_module: 1.500 mm\n",
        ),
        Slip(
            SPINDLE,
            "  axial_module: 2\n",
            "  diametral_pitch: 2\n",
            "642000.0 um off its tooth count",  # 60 x 25.4/2 - 120 mm
            "The diametral_pitch reads like the module in mm: write axial_module: 2.000 mm in its place.",
            "  axial_module: 2.000 mm\n",
        ),
    ),
    ("MESH-007", "a quotient that is another worm's"): (
        Slip(
            ROTATOR,
            "  reference_diameter: 24\n",
            "  reference_diameter: 24\n  quotient: 15\n",
            "quotient 15 is not 16 (axial_module 1.500 mm, reference_diameter 24.000 mm), 1 apart",
            "Measure again, or leave one of them out: by the others quotient 16.",
            "  reference_diameter: 24\n  quotient: 16\n",
        ),
        Slip(
            SPINDLE,
            "  reference_diameter: 36\n",
            "  reference_diameter: 36\n  quotient: 20\n",
            "quotient 20 is not 18 (axial_module 2.000 mm, reference_diameter 36.000 mm), 2 apart",
            "Measure again, or leave one of them out: by the others quotient 18.",
            "  reference_diameter: 36\n  quotient: 18\n",
        ),
    ),
    ("MESH-007", "a worm of two starts told as one of one, its lead measured"): (
        Slip(
            ROTATOR,
            "  starts: 1\n",
            "  starts: 1\n  lead: {measured: 9.43, uncertainty: 20 um}\n",
            "lead 9.430 mm is not 4.712 mm (axial_module 1.500 mm, starts 1), 4.718 mm apart",
            "Write starts: 2, for the lead is 2 pitches: lead is the travel in one turn, from one thread to its neighbour it is "
            "the axial_pitch. Count the threads at the worm's end.",
            "  starts: 2\n  lead: {measured: 9.43, uncertainty: 20 um}\n",
        ),
        Slip(
            SPINDLE,
            "  starts: 1\n",
            "  starts: 1\n  lead: 12.566\n",
            "lead 12.566 mm is not 6.283 mm (axial_module 2.000 mm, starts 1), 6.283 mm apart",
            "Write starts: 2, for the lead is 2 pitches: lead is the travel in one turn, from one thread to its neighbour it is "
            "the axial_pitch. Count the threads at the worm's end.",
            "  starts: 2\n  lead: 12.566\n",
        ),
    ),
    ("MESH-007", "a thread measured twice, and not the same"): (
        Slip(
            ROTATOR,
            "  thread_thickness: {measured: 2.310 mm, uncertainty: 4 um}\n",
            "  thread_thickness: {measured: 2.310 mm, uncertainty: 4 um}\n"
            "  over_wires: {measured: 27.380, wire: 2.55, uncertainty: 4 um}\n",
            "thread_thickness gives 2.3100 mm at the reference diameter, over_wires 2.2963 mm, 14 um apart",
            "Measure the worm again, or leave out what follows from the rest.",
            "  over_wires: {measured: 27.4176, wire: 2.55, uncertainty: 4 um}\n",
        ),
        Slip(
            SPINDLE,
            "  end_float: 8 um\n",
            "  end_float: 8 um\n  thread_thickness: {measured: 3.133 mm, uncertainty: 4 um}\n",
            "thread_thickness gives 3.1330 mm at the reference diameter, over_wires 3.0799 mm, 53 um apart",
            "Measure the worm again, or leave out what follows from the rest.",
            "  end_float: 8 um\n  thread_thickness: {measured: 3.0800 mm, uncertainty: 4 um}\n",
        ),
    ),
    ("MESH-011", "the wrong wires typed"): (
        Slip(
            ROTATOR,
            "  thread_thickness: {measured: 2.310 mm, uncertainty: 4 um}\n",
            "  over_wires: {measured: 27.4176, wire: 3.2, uncertainty: 4 um}\n",
            "the worm's thread is 0.29 of its axial pitch thick, 0.35 to 0.60 is accepted",
            "It comes out 1.3802 mm, half the pitch is 2.3562 mm. Measure the wires again (3.200 mm is written), and the size over "
            "them.",
            "  over_wires: {measured: 27.4176, wire: 2.55, uncertainty: 4 um}\n",
        ),
        Slip(
            SPINDLE,
            "wire: 3.40, uncertainty: 6 um}",
            "wire: 4.30, uncertainty: 6 um}",
            "the worm's thread is 0.29 of its axial pitch thick, 0.35 to 0.60 is accepted",
            "It comes out 1.7929 mm, half the pitch is 3.1416 mm. Measure the wires again (4.300 mm is written), and the size over "
            "them.",
            "wire: 3.40, uncertainty: 6 um}",
        ),
    ),
    ("MESH-008", "teeth far narrower than such a wheel has"): (
        Slip(
            ROTATOR,
            "at: 12, width: 15}",
            "at: 12, width: 9}",
            "0.65 times as wide as usual",
            "Usual is 13.9 mm for this worm, drawn is 9.0 mm: a narrower face wears faster. Check module and width.",
            "at: 12, width: 13.9}",
        ),
        Slip(
            SPINDLE,
            "at: 12, width: 20}",
            "at: 12, width: 12}",
            "0.62 times as wide as usual",
            "Usual is 19.4 mm for this worm, drawn is 12.0 mm: a narrower face wears faster. Check module and width.",
            "at: 12, width: 19.4}",
        ),
    ),
    ("MESH-004", "a pressure angle for which the wheel has too few teeth"): (
        Slip(
            ROTATOR,
            "  pressure_angle: 20 deg\n",
            "  pressure_angle: 9 deg\n",
            "a wheel of 72 teeth is undercut, this pressure angle and shift need 82",  # 2/sin^2(9 deg) = 81.7
            "Take a larger pressure angle, a positive profile shift, or a worm with less addendum.",
            "  pressure_angle: 14.5 deg\n",
        ),
        Slip(
            SPINDLE,
            "  pressure_angle: 20 deg\n",
            "  pressure_angle: 10 deg\n",
            "a wheel of 60 teeth is undercut, this pressure angle and shift need 67",
            "Take a larger pressure angle, a positive profile shift, or a worm with less addendum.",
            "  pressure_angle: 14.5 deg\n",
        ),
    ),
}
THICKNESS = "  thread_thickness: {measured: 2.310 mm, uncertainty: 4 um}\n"

CASES = [pytest.param(rule, s, id=f"{rule}-{what}-{s.route}") for (rule, what), slips in SLIPS.items() for s in slips]


def judged(text: str) -> Review:
    return review(read_job_text(text, "slip.yaml"))


def with_line(slip: Slip, instead: str) -> str:
    text = TEXTS[slip.route]
    assert text.count(slip.line) == 1, slip.line
    return text.replace(slip.line, instead)


def spoken(found: Review, rule: str) -> list[tuple[str, str]]:
    """Message and remedy of a rule that does not pass."""
    return [(f.message, f.remedy) for f in found.evaluation.findings if f.rule == rule and f.verdict != "pass"]


@pytest.mark.parametrize(("rule", "slip"), CASES)
def test_a_slip_is_told_with_its_numbers_and_what_it_is(rule: str, slip: Slip) -> None:
    ((message, remedy),) = spoken(judged(with_line(slip, slip.becomes)), rule)
    assert slip.says in message
    assert slip.remedy == remedy


@pytest.mark.parametrize(("rule", "slip"), CASES)
def test_the_rule_is_silent_in_the_good_job_and_after_the_remedy(rule: str, slip: Slip) -> None:
    assert spoken(judged(TEXTS[slip.route]), rule) == []
    assert spoken(judged(with_line(slip, slip.cure)), rule) == []


def test_every_slip_is_made_in_two_different_routes() -> None:
    for slips in SLIPS.values():
        assert {s.route for s in slips} == {ROTATOR, SPINDLE}


def known(text: str, name: str) -> float:
    found = judged(text).book
    scope = next(s for s in found.scopes if s.kind == found.quantities[name].per)
    answer = found.get(name, scope)
    assert isinstance(answer, Known), (name, answer)
    return float(str(answer.value))


@pytest.mark.parametrize(
    ("instead", "remedy"),
    [
        ("axial_module: 4.7124", "The axial_module reads like the axial pitch: write axial_pitch: 4.712 mm in its place."),
        ("axial_module: 16.9333", "The axial_module reads like the diametral pitch: write diametral_pitch: 16.9333 in its place."),
        ("lead: 9.4248", "Write starts: 2, for the lead is 2 pitches: lead is the travel in one turn, from one thread to its "
         "neighbour it is the axial_pitch. Count the threads at the worm's end."),
        ("axial_module: 1.6", "By circle and count the module is 1.5000 mm, by the worm 1.6000 mm. Write on_circle as count times "
         "axial module; a shift moves the tip and the root, not this circle."),
    ],
)  # fmt: skip
def test_a_pitch_circle_that_misses_says_what_was_taken_for_what(instead: str, remedy: str) -> None:
    text = TEXTS[ROTATOR].replace("  axial_module: 1.5\n", f"  {instead}\n").replace(THICKNESS, "")
    ((_, said),) = spoken(judged(text), "MESH-001")
    assert remedy == said


OTHER_WAYS = [
    ("  axial_module: 1.5\n", "  axial_pitch: 4.71238898038469\n"),
    ("  axial_module: 1.5\n", "  diametral_pitch: 16.9333333333333333\n"),
    ("  axial_module: 1.5\n", "  lead: 4.71238898038469\n"),
    ("  axial_module: 1.5\n", "  normal_module: 1.4970788677243327\n"),
    ("  axial_module: 1.5\n", "  quotient: 16\n"),
    ("  reference_diameter: 24\n", "  quotient: 16\n"),
    ("  starts: 1\n", "  lead: {measured: 4.71, uncertainty: 10 um}\n"),
    ("  axial_module: 1.5\n", ""),  # the wheel's circle over its count
]


@pytest.mark.parametrize(("line", "instead"), OTHER_WAYS)
def test_whatever_says_the_same_worm_gives_the_same_figures(line: str, instead: str) -> None:
    good, other = judged(TEXTS[ROTATOR]), judged(TEXTS[ROTATOR].replace(line, instead))
    spoken = [f.at for f in other.evaluation.findings if f.verdict != "pass"]
    assert spoken == ([] if instead else ["worm.axial_module"])  # known from the wheel alone
    for key, result in good.results.items():
        assert result.combined.worst.high == pytest.approx(other.results[key].combined.worst.high, abs=1e-9), key


def test_a_module_that_comes_from_the_wheels_own_circle_is_not_held_against_it() -> None:
    found = judged(TEXTS[ROTATOR].replace("  axial_module: 1.5\n", ""))
    assert [] == [f for f in found.evaluation.findings if f.rule == "MESH-001"]


def test_a_worm_diameter_comes_from_the_housing_only_where_the_shift_is_said() -> None:
    without = TEXTS[ROTATOR].replace("  reference_diameter: 24\n", "")
    opened = {m for f in judged(without).evaluation.findings if f.verdict == "open" for m in f.missing}
    assert "worm.reference_diameter" in opened
    said = without.replace("mesh: {wheel: wheel.teeth,", "mesh: {wheel: wheel.teeth, shift: 0,")
    assert judged(said).verdict == "pass"
    assert known(said, "worm.reference_diameter") == pytest.approx(24.0)


def test_a_missing_centre_distance_is_told_and_stays_open() -> None:
    found = judged(TEXTS[ROTATOR].replace(" centre_distance: 66.000 ±0.010,", ""))
    assert found.verdict == "open"
    assert "mesh.centre_distance" in {m for f in found.evaluation.findings for m in f.missing}
    scope = found.book.instances("mesh")[0]
    assert found.book.get("mesh.closing_distance", scope) == Known(66.0)


def backlash(text: str) -> tuple[float, float]:
    result = next(r for r in judged(text).results.values() if r.stack.require.what == "backlash")
    return result.combined.worst.low, result.combined.worst.high


def thread_gives(text: str) -> float:
    """What the error of the thread gives in the backlash [mm]."""
    result = next(r for r in judged(text).results.values() if r.stack.require.what == "backlash")
    return next(s.worst for s in result.combined.shares if s.cause.key.startswith("worm, "))


def test_a_size_over_wires_enters_the_backlash_with_its_uncertainty() -> None:
    size = known(TEXTS[ROTATOR], "worm.over_wires")
    wired = TEXTS[ROTATOR].replace(THICKNESS, f"  over_wires: {{measured: {size!r}, wire: 2.55, uncertainty: 4 um}}\n")
    assert known(wired, "worm.thickness") == pytest.approx(2.310, abs=1e-9)
    rate = 0.36397  # ds/dM is about tan(20 deg); 1/2.741 computed before for another worm
    assert thread_gives(wired) / thread_gives(TEXTS[ROTATOR]) == pytest.approx(rate, rel=0.01)
    low, high = backlash(wired)
    good_low, good_high = backlash(TEXTS[ROTATOR])
    assert (low + high) / 2.0 == pytest.approx((good_low + good_high) / 2.0, abs=1e-9)
    assert high < good_high  # wires are finer than the same figure straight on the thread
    assert judged(wired).verdict == "pass"


def test_a_reground_worm_opens_the_backlash_by_what_its_thread_lost() -> None:
    good = TEXTS[ROTATOR]
    size = known(good, "worm.over_wires")
    thin = good.replace(THICKNESS, f"  over_wires: {{measured: {size - 0.274!r}, wire: 2.55, uncertainty: 4 um}}\n")
    lost = 2.310 - known(thin, "worm.thickness")
    assert lost == pytest.approx(0.100, abs=0.002)  # 0.274 mm over wires at 2.741 per mm
    assert backlash(thin)[0] - backlash(good)[0] == pytest.approx(lost, abs=0.004)


def test_a_thickness_measured_off_the_reference_diameter_is_brought_there() -> None:
    at = THICKNESS.replace("measured: 2.310 mm", "measured: 1.946 mm, at: 25")  # 2.310 - 1 mm x tan(20 deg)
    assert known(TEXTS[ROTATOR].replace(THICKNESS, at), "worm.thickness") == pytest.approx(2.310, abs=1e-4)


def test_the_closer_of_two_measured_thicknesses_is_taken() -> None:
    both = THICKNESS + "  over_wires: {measured: 27.4150, wire: 2.55, uncertainty: 2 um}\n"
    found = known(TEXTS[ROTATOR].replace(THICKNESS, both), "worm.thickness")
    assert found == pytest.approx(2.30905, abs=5e-5)
    rough = both.replace("uncertainty: 2 um", "uncertainty: 60 um")
    assert known(TEXTS[ROTATOR].replace(THICKNESS, rough), "worm.thickness") == 2.310


def test_a_size_over_wires_without_its_uncertainty_is_asked_for_it() -> None:
    bare = TEXTS[ROTATOR].replace(THICKNESS, "  over_wires: {measured: 27.4176, wire: 2.55}\n")
    ((message, _),) = spoken(judged(bare), "MEASURE-001")
    assert message == "cannot tell: fill worm.over_wires.uncertainty"


def test_the_backlash_is_told_as_arc_and_as_two_angles() -> None:
    text = TEXTS[ROTATOR]
    low, high = backlash(text)
    scope = next(
        s for s in judged(text).book.instances("stack") if s.key.startswith("backlash.") or "backlash.w" in s.key
    )
    book = judged(text).book
    for name, wanted in {
        "mesh.arc_low": low,
        "mesh.arc_high": high,
        "mesh.wheel_high": high / 54.0,
        "mesh.worm_high": high / 0.75,
    }.items():
        answer = book.get(name, scope)
        assert isinstance(answer, Known)
        assert wanted == pytest.approx(float(str(answer.value)), rel=1e-12), name
    normal = text.replace(
        "{what: backlash, between: [5 um, 125 um]}", "{what: backlash, along: normal, between: [5 um, 125 um]}"
    )
    other = judged(normal).book
    answer = other.get("mesh.arc_high", next(s for s in other.instances("stack") if s.key == scope.key))
    assert isinstance(answer, Known)
    assert high == pytest.approx(float(str(answer.value)), rel=1e-9)


def words(text: str, name: str) -> str:
    found = judged(text).book
    answer = found.get(name, found.instances("worm")[0])
    assert isinstance(answer, Known), answer
    return str(answer.value)


def test_a_measured_pitch_says_which_usual_worms_it_may_be() -> None:
    measured = TEXTS[ROTATOR].replace("  axial_module: 1.5\n", "  axial_pitch: {measured: 4.73, uncertainty: 60 um}\n")
    said = words(measured, "worm.candidates")
    assert re.findall(
        r"(module [0-9.]+ mm|diametral pitch [0-9.]+|pitch [0-9/]+ in|[0-9]+ threads per inch)", said
    ) == [
        "module 1.5 mm",  # pi x 1.5 = 4.712
        "pitch 3/16 in",  # 4.7625
    ]
    none = measured.replace("measured: 4.73, uncertainty: 60 um", "measured: 4.66, uncertainty: 10 um")
    assert "nearest is module 1.5 mm with 4.7124 mm" in words(none, "worm.candidates")


def test_a_worm_whose_flanks_are_too_bent_is_not_computed_and_says_by_how_much() -> None:
    # ZI, 9.46 deg: 23 um off straight; ZA the same worm is computed
    two = TEXTS[ROTATOR].replace("  starts: 1\n", "  starts: 4\n").replace("profile: ZA", "profile: ZI")
    said = {f.message for f in judged(two).evaluation.findings if f.verdict == "open"}
    assert any("ZI worm stands up to" in message and "off a straight line" in message for message in said)
    slow = TEXTS[ROTATOR].replace("profile: ZA", "profile: ZI")
    assert judged(slow).verdict == "pass"
    ground = TEXTS[ROTATOR].replace("profile: ZA", "profile: ZK")
    said = {f.message for f in judged(ground).evaluation.findings if f.verdict == "open"}
    assert any("the flank of a ZK worm is not computed, only ZA, ZN and ZI" in message for message in said)


def test_a_wheel_is_told_its_size_over_balls() -> None:
    balls = TEXTS[ROTATOR].replace("mesh: {wheel: wheel.teeth,", "mesh: {wheel: wheel.teeth, ball: 2.5,")
    tight, planned = known(balls, "mesh.over_balls_tight"), known(balls, "mesh.over_balls")
    assert 110.0 < planned < tight < 112.0
    # insert 2.387 against 2.315 for no backlash: 72 um wider, and a flank that falls by some 21 deg where a ball touches
    assert (tight - planned) == pytest.approx(0.072 / 0.385, rel=0.05)
