"""First job files: every kind reviews at once over many sizes, and what the answers say is what stands in the file."""

from __future__ import annotations

import math
import re
from functools import cache

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.reading import read_job_text
from setupcheck.notation import Units
from setupcheck.quantities.left_out import left_out
from setupcheck.shipped import examples, shipped
from setupcheck.starting.answers import Answers, read_answer
from setupcheck.starting.copying import copied, known_example, title_and_job
from setupcheck.starting.dividing import division
from setupcheck.starting.kinds import KINDS, Started, command_of, kind_of, start
from setupcheck.starting.layout import LONGEST_TEXT, Measure, checked_text, nice, quoted_text

SLOW = settings(max_examples=3, deadline=None, suppress_health_check=list(HealthCheck), derandomize=True)


def answers(kind: str, units: Units = "mm", **given: str) -> Answers:
    """Answers as they are typed, the rest by default."""
    what = KINDS[kind]
    found = Answers(kind, what.title, what.job, units, {})
    for question in what.questions():
        text = given.pop(question.name.replace("-", "_"), None) or question.default(found)
        found = found.with_value(question.name, read_answer(question, text, found))
    assert not given
    return found


@cache
def begun(kind: str, units: Units = "mm", **given: str) -> Started:
    return start(answers(kind, units, **given), file="job.yaml", made_by="setupcheck new")


def assert_it_reviews_at_once(found: Started) -> None:
    """Nothing fails and nothing is open; what stands in for a figure nobody gave only warns."""
    evaluation = found.review.evaluation
    wrong = [(f.rule, f.at, f.message) for f in evaluation.findings if f.verdict in ("fail", "open")]
    assert [] == wrong
    assert found.review.verdict in ("pass", "warn", "open")
    if found.review.verdict == "open":
        assert any(c.severity == "stop-and-check" and not c.answered for c in evaluation.cautions)
    assert evaluation.counts["pass"] > 50


@pytest.mark.parametrize("units", ["mm", "in"])
@pytest.mark.parametrize("kind", list(KINDS))
def test_the_defaults_of_every_kind_review_at_once(kind: str, units: Units) -> None:
    assert_it_reviews_at_once(begun(kind, units))


TRIED: list[tuple[str, Units, dict[str, str]]] = [
    ("worm-wheel", "mm", {"teeth": "30", "module": "2", "hand": "left"}),
    ("worm-wheel", "mm", {"teeth": "127", "module": "1"}),  # no hole circle closes on it
    ("worm-wheel", "mm", {"teeth": "36", "module": "5", "starts": "3"}),
    ("worm-wheel", "mm", {"teeth": "60", "module": "2", "join": "none"}),
    ("worm-wheel", "mm", {"teeth": "60", "module": "4", "join": "slide"}),
    ("worm-wheel", "mm", {"torque": "0 N m"}),
    ("worm-wheel", "in", {"teeth": "40", "module": "10 DP"}),
    ("worm-wheel", "in", {"teeth": "60", "module": "8 DP", "bore": "2 H6"}),
    ("spur-gear", "mm", {"teeth": "97", "module": "3"}),
    ("spur-gear", "in", {"teeth": "24", "module": "8 DP", "bore": "0.75 +0.0008/0"}),
    ("coupling-hub", "mm", {"bore": "40 H7"}),
    ("coupling-hub", "mm", {"bore": "100 H7", "outside": "135"}),
    ("coupling-hub", "mm", {"bore": "20 H7"}),
    ("coupling-hub", "in", {"bore": "1.5 H7"}),
    ("bearing-ring", "mm", {"bore": "25"}),
    ("bearing-ring", "in", {"bore": "4"}),
    ("index-plate", "mm", {"circle": "400", "holes": "6"}),
    ("index-plate", "in", {"circle": "10", "holes": "127"}),
    ("bushing", "mm", {"bore": "12 H7"}),
    ("bushing", "mm", {"bore": "80 H7"}),
    ("bushing", "in", {"bore": "0.75 H7"}),
]


@pytest.mark.parametrize(("kind", "units", "given"), TRIED)
def test_other_sizes_review_at_once(kind: str, units: Units, given: dict[str, str]) -> None:
    assert_it_reviews_at_once(begun(kind, units, **given))


@SLOW
@given(
    teeth=st.integers(24, 200),
    module=st.sampled_from(["0.5", "0.8", "1", "1.5", "2.5", "4", "16 DP"]),
    starts=st.sampled_from(["1", "2"]),
    units=st.sampled_from(["mm", "in"]),
)
def test_any_usual_worm_wheel_reviews_at_once(teeth: int, module: str, starts: str, units: Units) -> None:
    assert_it_reviews_at_once(begun("worm-wheel", units, teeth=str(teeth), module=module, starts=starts))


@SLOW
@given(bore=st.integers(25, 160), fit=st.sampled_from(["H6", "H7"]))
def test_any_usual_hub_reviews_at_once(bore: int, fit: str) -> None:
    assert_it_reviews_at_once(begun("coupling-hub", bore=f"{bore} {fit}"))


@SLOW
@given(holes=st.integers(2, 100), circle=st.integers(60, 500))
def test_any_usual_plate_reviews_at_once(holes: int, circle: int) -> None:
    assert_it_reviews_at_once(begun("index-plate", holes=str(holes), circle=str(circle)))


@pytest.mark.parametrize(
    ("kind", "units", "given"),
    [
        *((kind, units, {}) for kind in KINDS for units in ("mm", "in")),
        *TRIED,
        ("worm-wheel", "mm", {"teeth": "15"}),  # undercut
        ("worm-wheel", "in", {"starts": "2", "join": "none"}),
        ("worm-wheel", "in", {"join": "slide"}),
        ("spur-gear", "mm", {"teeth": "127"}),  # no hole circle closes on it
        ("coupling-hub", "mm", {"join": "slide"}),
        ("coupling-hub", "mm", {"bore": "20 H7", "join": "shrink"}),
        ("coupling-hub", "mm", {"torque": "0 N m"}),
        ("bushing", "mm", {"torque": "0 N m"}),
    ],
)
def test_a_new_file_leaves_out_no_entry_that_a_figure_may_rest_on(
    kind: str, units: Units, given: dict[str, str]
) -> None:
    assert () == left_out(begun(kind, units, **given).review.loaded)


@pytest.mark.parametrize("name", examples())
def test_a_copy_leaves_out_no_more_than_its_example(name: str) -> None:
    copy = copied(name, title="A", job="1", file="job.yaml").review.loaded
    example = shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8")
    assert left_out(read_job_text(example, "job.yaml")) == left_out(copy)


def carried(kind: str, op: int, **given: str) -> dict[str, float]:
    """What the joint of a new file must carry [N mm, N]."""
    (join,) = (setup.join for setup in begun(kind, **given).review.loaded.job.setups if setup.op == op)
    assert join is not None
    assert join.must_carry is not None
    return {name: load.value for name, load in join.must_carry.items()}


def test_the_worm_drags_the_wheel_along_its_axis_by_lead_and_friction_under_the_torque_that_was_answered() -> None:
    sizes = {"teeth": "50", "module": "2", "starts": "1", "worm_diameter": "32", "torque": "50 N m"}
    leaned = math.tan(math.atan(2 / 32) + math.atan(0.1))  # 1000 N round the wheel
    assert {"torque": 50_000.0, "axial_force": nice(1000.0 * leaned, up=True)} == carried("worm-wheel", 70, **sizes)


@pytest.mark.parametrize(
    ("kind", "op", "given", "along"),
    [
        ("worm-wheel", 70, {"torque": "0 N m"}, 0.0),
        ("coupling-hub", 50, {"outside": "160", "torque": "400 N m"}, 800.0),  # 5000 N round the rim, friction 0.15
        ("coupling-hub", 50, {"torque": "0 N m"}, 0.0),
        ("bearing-ring", 30, {}, 0.0),  # its thrust goes onto the shoulder
        ("bushing", 20, {"bore": "30 H7", "torque": "6 N m"}, 400.0),  # as much as round its hole
        ("bushing", 20, {"torque": "0 N m"}, 0.0),
    ],
)
def test_the_force_along_the_axis_follows_from_the_torque(
    kind: str, op: int, given: dict[str, str], along: float
) -> None:
    assert along == carried(kind, op, **given)["axial_force"]


def test_what_was_answered_stands_in_the_file() -> None:
    found = begun("worm-wheel", teeth="60", module="2", bore="30 H6", tightest="120 um", torque="12 N m")
    job = found.review.loaded.job
    teeth = job.parts["wheel"].surfaces["teeth"]
    assert (60, 120.0) == (teeth.count, teeth.on_circle)  # type: ignore[union-attr]
    assert "bore:     {kind: bore, diameter: 30 H6," in found.text
    assert "{what: cumulative-pitch, of: wheel.teeth, at_most: 120 um}" in found.text
    assert "must_carry: {torque: 12 N m, axial_force: " in found.text
    assert "{what: torque, of: 70, at_least: 12 N m}" in found.text


def test_the_head_is_leaned_by_the_lead_angle_and_the_pair_closes() -> None:
    found = begun("worm-wheel", teeth="40", module="2", starts="2", worm_diameter="36")
    tilt = found.review.loaded.job.setups[3].head.tilt  # type: ignore[union-attr]
    assert math.atan(2 * 2 / 36) == pytest.approx(tilt, abs=math.radians(1 / 3600))
    assert "centre_distance: 58 ±0.01" in found.text


def test_a_left_hand_worm_leans_the_head_the_other_way() -> None:
    assert "leans: nose-down" in begun("worm-wheel").text
    assert "leans: nose-up" in begun("worm-wheel", hand="left").text


def test_the_hole_circle_fits_the_count_and_a_table_serves_where_none_does() -> None:
    for count in range(6, 200):
        _, divide = division(count, "head")
        circle = re.search(r"circle: (\d+)", divide)
        if circle is not None:
            ratio = int(re.search(r"worm_ratio: (\d+)", division(count, "head")[0])[1])  # type: ignore[index]
            assert 0 == ratio * int(circle[1]) % count
        else:
            assert "rotary-table" in divide
    assert "by: rotary-table" in division(127, "head")[1]


def test_a_shrunk_joint_takes_a_class_of_iso_286_that_interferes_or_limits_of_its_own() -> None:
    hub = begun("coupling-hub").text
    assert re.search(r"seat:     \{kind: cylinder, diameter: 80 [p-u][56],", hub)
    low, high = (
        begun("coupling-hub").review.book.get(f"fit.interference_{end}", scope).value  # type: ignore[union-attr]
        for end in ("least", "most")
        for scope in begun("coupling-hub").review.book.instances("join")
    )
    assert 0.0 < low < high


def test_a_requirement_that_the_plan_cannot_meet_is_written_and_fails() -> None:
    found = begun("spur-gear", tightest="1 um")
    assert "fail" == found.review.verdict
    assert "at_most: 1 um}" in found.text


def test_an_undercut_wheel_is_written_and_its_finding_told() -> None:
    found = begun("worm-wheel", teeth="15")
    assert "MESH-004" in [f.rule for f in found.review.evaluation.findings if f.verdict == "fail"]


def values(node: object, path: str = "") -> list[str]:
    """Paths of all keys of a job file."""
    if isinstance(node, dict):
        return [one for key, inner in node.items() for one in [f"{path}.{key}", *values(inner, f"{path}.{key}")]]
    if isinstance(node, list):
        return [one for inner in node for one in values(inner, path)]
    return []


@pytest.mark.parametrize("kind", list(KINDS))
def test_no_new_file_says_that_something_was_measured_or_checked(kind: str) -> None:
    found = begun(kind)
    assert "# Nothing here was measured." in found.text
    assert [] == [path for path in values(found.review.loaded.tree.data) if "measured" in path or ".checked" in path]
    assert "waive" not in found.text


@pytest.mark.parametrize("kind", list(KINDS))
def test_materials_and_errors_of_machines_are_marked_as_guesses(kind: str) -> None:
    lines = begun(kind).text.splitlines()
    for line in lines:
        if re.search(r"axis_runout: [0-9]|^    material: (?!100Cr6)", line):
            assert "GUESS" in line, line


def test_nobody_but_the_planner_answers_a_caution() -> None:
    for kind in KINDS:
        assert () == begun(kind).review.loaded.job.checked
    assert "# checked:\n#   - {caution: carbide-dust, op: 40, by: your initials" in begun("worm-wheel").text


def test_the_cautions_of_a_new_file_read_once_their_marks_are_taken_off() -> None:
    text = begun("worm-wheel").text
    head, _, cautions = text.partition("# checked:\n")
    taken_off = head + "checked:\n" + cautions.replace("#   - ", "  - ")
    assert 3 == len(read_job_text(taken_off, "job.yaml").job.checked)


# -- examples --------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", examples())
def test_an_example_is_copied_with_its_comments_and_reviews_at_once(name: str) -> None:
    found = copied(name, title='A: "b" # c', job="77", file="job.yaml")
    job = found.review.loaded.job
    assert ('A: "b" # c', "77") == (job.title, job.job)
    assert f"# Made from the example {name}: every figure in it is made up" in found.text
    assert "Invented scenario" not in found.text
    assert job == read_job_text(found.text, "job.yaml").job
    assert "invented initials" not in found.text
    assert () == job.checked
    assert found.text.count("#") > 10
    assert_it_reviews_at_once(found)
    assert max(map(len, found.text.splitlines())) <= 160


def test_an_unknown_example_is_told_with_the_nearest_and_all_of_them() -> None:
    assert "index-plate" == known_example("jobs/index-plate.yaml")
    with pytest.raises(SetupcheckError) as wrong:
        known_example("indexplate")
    assert "'indexplate' is no example here. Did you mean index-plate? There are:" == str(wrong.value).splitlines()[0]
    assert len(examples()) + 1 == len(str(wrong.value).splitlines())
    assert ("Index plate, 24 holes", "IP-24") == title_and_job("index-plate")


# -- answers ---------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("kind", "given", "says"),
    [
        ("worm-wheel", {"teeth": "72.5"}, "'72.5' is no count from 10 to 400. Write a whole number, as in 72"),
        ("worm-wheel", {"teeth": "0"}, "is no count from 10 to 400"),
        ("worm-wheel", {"module": "1,5"}, "'1,5' is not a length. Write a point for the decimal: 1.5"),
        ("worm-wheel", {"module": "0"}, "is no module from 0.3 mm to 12 mm"),
        ("worm-wheel", {"module": "0 DP"}, "is no module from 0.3 mm to 12 mm"),
        ("worm-wheel", {"bore": "32,5 H6"}, "'32,5 H6' is not a size. Write a point for the decimal: 32.5 H6"),
        ("worm-wheel", {"bore": "32"}, "'32' says no fit. Write the class or the limits of the bore, as in 32 H6"),
        ("worm-wheel", {"bore": "32 h6"}, "has the class of a shaft. A bore takes a capital letter, as in 32 H6"),
        ("worm-wheel", {"bore": "32 ZC6"}, "letter ZC of ZC6 is not in our tables"),
        ("worm-wheel", {"bore": "90 H6"}, "a bore of 90 mm leaves no hub inside 72 teeth of module 1.5 mm. Write"),
        ("worm-wheel", {"hand": "rigt"}, "'rigt' is not known here. Did you mean right?"),
        ("worm-wheel", {"join": "glue"}, "'glue' is not known here. Write shrink, slide or none"),
        ("worm-wheel", {"torque": "40"}, "'40' has no unit, so it is not a torque. Write its unit too: N m"),
        ("worm-wheel", {"torque": "-4 N m"}, "is below zero"),
        ("worm-wheel", {"tightest": "40"}, "has no unit"),
        ("worm-wheel", {"tightest": "0 um"}, "cannot be kept by any plan. Write a limit above zero, as in 40 um"),
        ("spur-gear", {"bore": "58 H7"}, "a bore of 58 mm leaves no wall under 40 teeth of module 1.5 mm. Write"),
        ("coupling-hub", {"outside": "82"}, "an outside of 82 mm leaves no hub round the bore. Write 104 mm or more"),
        ("bearing-ring", {"bore": "12"}, "'12' is outside what this part can have, 25 mm to 250 mm"),
        ("bearing-ring", {"outside": "52"}, "is outside what this part can have, 54 mm to 90 mm"),
        ("index-plate", {"hole": "20"}, "the holes would run into each other. Write 1 mm to 14.137 mm"),
        ("index-plate", {"outside": "121"}, "the holes would break out of the rim. Write 127.2 mm to 1000 mm"),
        ("index-plate", {"bore": "119 H7"}, "a bore of 119 mm runs into the holes. Write"),
        ("bushing", {"outside": "31"}, "is no outside of a bush with this bore. Write 34.5 mm to 75 mm"),
        ("bushing", {"width": "x" * 10_000}, "that is 10000 characters. Write one line, as in 47.5"),
    ],
)
def test_an_answer_that_cannot_be_is_told_with_what_would_be_right(kind: str, given: dict[str, str], says: str) -> None:
    with pytest.raises(SetupcheckError) as wrong:
        answers(kind, **given)
    assert says in str(wrong.value)


@settings(max_examples=200, deadline=None)
@given(text=st.text(max_size=30), at=st.sampled_from(range(9)))
def test_no_answer_ends_in_anything_but_a_refusal(text: str, at: int) -> None:
    question = KINDS["worm-wheel"].questions()[at]
    before = answers("worm-wheel")
    try:
        read_answer(question, text, before)
    except SetupcheckError as wrong:
        assert str(wrong)


def test_an_unknown_kind_is_told_with_the_nearest_and_all_of_them() -> None:
    with pytest.raises(SetupcheckError) as wrong:
        kind_of("wormwheel")
    assert "'wormwheel' is no kind of part here. Did you mean worm-wheel? There are:" in str(wrong.value)
    assert all(len(line) <= 80 for line in str(wrong.value).splitlines())


def test_an_answer_with_line_ends_stays_inside_its_comment() -> None:
    made_by = command_of(KINDS["bushing"], "mm", {"bore": "30\nH7\r# x\u2028y"})
    assert "setupcheck new FILE --kind bushing --units mm --bore '30 H7 # x y' --yes" == made_by


# -- how it is written -----------------------------------------------------------------------------------------------


@settings(max_examples=200, deadline=None)
@given(text=st.text(min_size=1, max_size=LONGEST_TEXT))
def test_a_title_never_leaves_its_quotes(text: str) -> None:
    try:
        kept = checked_text(text, "title")
    except SetupcheckError as wrong:
        assert "the title" in str(wrong)
        return
    head = f"setupcheck: 1\ntitle: {quoted_text(kept)}\n"
    from setupcheck.yamlfile import parse

    assert {"setupcheck": 1, "title": kept} == parse(head, "job.yaml").data


@pytest.mark.parametrize(
    "title",
    [
        '3" wheel',
        "it's: # one",
        "null",
        "12",
        "- a",
        "{a: b}",
        "\\n",
        "&a *b !c",
        "%TAG",
        "größer ±0.02 µm",
        "`x` $(y)",
        "轮",
    ],
)
def test_titles_that_mean_something_to_yaml_stay_titles(title: str) -> None:
    text = begun("spur-gear").text.replace('title: "Spur gear"', f"title: {quoted_text(checked_text(title, 'title'))}")
    assert title == read_job_text(text, "job.yaml").job.title


@pytest.mark.parametrize(
    ("title", "says"),
    [
        ("", "the title is empty"),
        ("   ", "the title is empty"),
        ("a\nparts: {}", "has the character U+000A, which cannot be seen"),
        ("a\x1b[31m", "has the character U+001B"),
        ("a\u202eb", "has the character U+202E"),
        ("a\u0085b", "has the character U+0085"),
        ("a\u2028b", "has the character U+2028"),
        ("a\udc80b", "has the character U+DC80"),
        ("a\x00b", "has the character U+0000"),
        ("a" * 10_000, "has 10000 characters. Write at most 200"),
    ],
)
def test_titles_that_cannot_be_seen_or_end_are_refused(title: str, says: str) -> None:
    with pytest.raises(SetupcheckError) as wrong:
        checked_text(title, "title")
    assert says in str(wrong.value)


@given(value=st.floats(1e-6, 1e6))
def test_a_round_figure_lies_on_the_side_that_was_asked_for(value: float) -> None:
    assert nice(value, up=False) <= value * (1 + 1e-6)
    assert nice(value, up=True) >= value * (1 - 1e-6)
    assert nice(value, up=True) <= 1.4 * value


def test_sizes_are_written_in_the_units_of_the_file() -> None:
    mm, inches = Measure("mm"), Measure("in")
    assert ("32.5", "1.2795") == (mm.size(32.5), inches.size(32.5))
    assert ("10 um", "0.4 thou") == (mm.error(0.010), inches.error(0.010))
    assert ("32 +0.016/0", "1.25 +0.0006/0") == (mm.with_limits(32, 0, 0.016), inches.with_limits(31.75, 0, 0.01524))
