"""Datums, stacks and lengths drawn: legible on every shipped job, hostile text and odd jobs too; true to the review's numbers."""

from __future__ import annotations

import re
from itertools import pairwise
from xml.etree import ElementTree

import pytest

from setupcheck.flow import Review
from setupcheck.jobfile.names import Ref
from setupcheck.notation import show
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.pictures import TALLEST, WIDEST, routes, stack_bars, stacks
from tests.unit.report.pictures.shown import (
    MISTAKES,
    ROOT,
    SHIPPED,
    SVG,
    WHEEL,
    of_text,
    reviewed,
    sheet,
    shown,
    written,
)
from tests.unit.report.svg_read import every_text_is_free, parsed

DEEPEST = {"datums": TALLEST, "stack": 85.0, "axial": 100.0}
LARGEST = {"datums": 16_000, "stack": 6_000, "axial": 5_000}


@pytest.mark.parametrize("job", [*SHIPPED, *MISTAKES])
def test_every_text_stands_on_the_sheet_and_on_no_other(job: str) -> None:
    drawn = {name: one.draw() for name, one in shown(reviewed(job)).items()}
    assert "datums" in drawn
    for name, text in drawn.items():
        every_text_is_free(parsed(text))
        width, height = sheet(text)
        kind = name.partition("-")[0]
        assert width <= WIDEST and height <= DEEPEST[kind], name
        assert len(text.encode()) < LARGEST[kind], name


@pytest.mark.parametrize("job", SHIPPED)
def test_a_picture_is_a_file_of_its_own_without_styles(job: str) -> None:
    for name, one in shown(reviewed(job)).items():
        text = one.draw()
        root = ElementTree.fromstring(text)
        assert root.attrib["role"] == "img" and root[0].tag == f"{SVG}title" and root[0].text, name
        assert "class=" not in text and "style" not in text and "<script" not in text, name
        assert not re.search(r'="-?\d+\.\d{4,}"', text), name
        sizes = [float(n.attrib["font-size"]) for n in root.iter(f"{SVG}text")]
        assert min(sizes) >= 3.0, name
        assert text == one.draw() == shown(reviewed(job))[name].draw()


# -- stacks ----------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("job", [*SHIPPED, *MISTAKES])
def test_the_pieces_add_up_to_the_worst_case_the_review_prints(job: str) -> None:
    found = reviewed(job)
    for scope in found.book.instances("stack"):
        result = found.results.get(scope.key)
        if result is None:
            continue
        bar = stack_bars.bar_of(found, scope, result)
        worst = result.combined.worst
        if "up" in bar.ways:
            assert bar.base + sum(p.up for p in bar.pieces) == pytest.approx(worst.high, abs=1e-9), scope.key
        if "down" in bar.ways:
            assert bar.base - sum(p.down for p in bar.pieces) == pytest.approx(worst.low, abs=1e-9), scope.key
        judged = [way for way, end in (("down", result.stack.low), ("up", result.stack.high)) if end is not None]
        assert set(judged) <= set(bar.ways), scope.key


def bars(text: str) -> list[tuple[float, float]]:
    """Left edge and width of each piece of the bar, from the left."""
    found = [
        (float(n.attrib["x"]), float(n.attrib["width"]))
        for n in ElementTree.fromstring(text).iter(f"{SVG}rect")
        if "x" in n.attrib and float(n.attrib["height"]) == stacks.BAR
    ]
    return sorted(found)


def limit_at(text: str) -> float:
    """Where the heavy line of a limit stands."""
    return next(
        float(n.attrib["x1"])
        for n in ElementTree.fromstring(text).iter(f"{SVG}line")
        if float(n.attrib["stroke-width"]) == stacks.LIMIT_LINE
    )


@pytest.mark.parametrize(("job", "number"), [("rotator-worm-wheel", 1), ("mistakes/hidden-chuck-run-out", 1)])
def test_the_bar_adjoins_and_stands_to_its_limit_as_the_worst_case_does(job: str, number: int) -> None:
    found = reviewed(job)
    text = shown(found)[f"stack-{number}"].draw()
    scope = next(s for s in found.book.instances("stack") if stack_of(s).index == number - 1)
    result = found.results[scope.key]
    pieces = bars(text)
    for (x, width), (after, _) in pairwise(pieces):
        assert x + width == pytest.approx(after, abs=0.002)
    assert [w for _, w in pieces[:-1]] == sorted((w for _, w in pieces[:-1]), reverse=True)
    start, end = pieces[0][0], pieces[-1][0] + pieces[-1][1]
    assert start == pytest.approx(stacks.LEFT)
    assert result.stack.high is not None
    share = result.combined.worst.high / result.stack.high
    assert (end - start) / (limit_at(text) - start) == pytest.approx(share, abs=0.002)


def test_a_stack_over_its_limit_says_so_in_words_and_shape() -> None:
    found = reviewed("mistakes/hidden-chuck-run-out")
    over = {k: r for k, r in found.results.items() if r.margin is not None and r.margin < 0.0}
    assert over
    for result in over.values():
        assert result.margin is not None
        text = shown(found)[f"stack-{result.stack.index + 1}"].draw()
        by = show(-result.margin, result.stack.unit, result.stack.digits)
        assert {f"over by {by}", f"short by {by}"} & set(written(text))
        assert "<polygon" in text
    inside = next(r for r in found.results.values() if r.margin is not None and r.margin >= 0.0 and r.combined.shares)
    assert any(t.startswith("inside by") for t in written(shown(found)[f"stack-{inside.stack.index + 1}"].draw()))


def test_the_causes_are_said_as_the_review_says_them() -> None:
    told = written(shown(reviewed("rotator-worm-wheel"))["stack-1"].draw())
    assert "op 40, clearance of hub in spigot: 8.5 um, 21 % of the limit" in told
    assert "op 50, run-out of hub in four-jaw chuck: 5.9 um measured, 15 % of the limit" in told
    assert any(re.fullmatch(r"\d+ more: .* of the limit", t) for t in told)
    assert "worst case 35.6 um" in told and "limit 40.0 um" in told
    thou = written(shown(reviewed("index-plate"))["stack-1"].draw())
    assert any("0.40 thou, 20 % of the limit" in t for t in thou) and not any(" um" in t for t in thou)


def test_an_open_requirement_says_what_is_missing() -> None:
    found = of_text(WHEEL.replace(", runout: 3 um}", "}"))
    told = written(shown(found)["stack-1"].draw())
    assert "Cannot tell: a number is missing" in told
    assert "fill setups.40.hold.centre.runout" in told
    assert "stack-12" in shown(found)  # the torque has its value all the same


def test_torque_and_contact_without_a_value_are_not_offered() -> None:
    found = of_text(WHEEL.replace("film: 6 um, at_least: 12 %", "at_least: 12 %"))
    assert "stack-11" not in shown(found) and "stack-10" in shown(found)


# -- datums ----------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("job", [*SHIPPED, *MISTAKES])
def test_each_datum_of_each_holding_has_its_arrow(job: str) -> None:
    found = reviewed(job)
    held: set[tuple[int, str, str]] = set()
    for setup in found.loaded.job.setups:
        refs: list[Ref] = []
        if setup.hold is not None:
            part = found.floor.part_of[setup.op]
            entries = [getattr(setup.hold, step) for step in routes.STEPS]
            refs = [found.loaded.ref(entry.on, part) for entry in entries if entry is not None]
        elif setup.join is not None:
            texts = [setup.join.outer, setup.join.inner]
            texts += [setup.join.stop.on, setup.join.stop.against or ""] if setup.join.stop is not None else []
            texts += [setup.join.trued.on, setup.join.trued.about] if setup.join.trued is not None else []
            refs = [found.loaded.ref(text) for text in texts if text]
        held |= {(setup.op, ref.part, ref.surface) for ref in refs}
    root = ElementTree.fromstring(shown(found)["datums"].draw())
    assert len(list(root.iter(f"{SVG}polygon"))) == len(held)
    drawn = {(row.op, node[0], node[1]) for row in routes.route_of(found).rows for node in row.held}
    assert drawn == held


def test_the_way_from_teeth_to_bore_is_counted() -> None:
    def summary(job: str) -> str:
        return written(shown(reviewed(job))["datums"].draw())[1]

    assert summary("rotator-worm-wheel") == ("teeth to bore@50: 2 transfers, teeth - op 40 - hub@30 - op 50 - bore@50")
    assert summary("spur-gear-on-mandrel") == "teeth to bore: 1 transfer, teeth - op 40 - bore"
    assert summary("wheel-on-spindle") == (
        "teeth to bore: 2 transfers, teeth - op 50 - bearings - as bought - journal - op 30 - bore"
    )
    assert "op 30" in summary("mistakes/hidden-chuck-run-out")


def test_what_is_cut_in_one_holding_needs_no_transfer() -> None:
    found = reviewed("rotator-worm-wheel")
    route = routes.route_of(found)
    hub, seat = route.last(Ref("wheel", "hub")), route.last(Ref("wheel", "seat"))
    assert hub is not None and seat is not None
    chain = routes.way(route, hub, seat)
    assert chain is not None and routes.transfers(route, chain) == []


def test_a_kept_holding_is_the_same_holding() -> None:
    route = routes.route_of(reviewed("rotator-worm-wheel"))
    bore, back = route.last(Ref("wheel", "bore")), route.last(Ref("wheel", "back"))
    assert bore is not None and back is not None
    chain = routes.way(route, bore, back)
    assert chain is not None and len(chain) == 3 and routes.transfers(route, chain) == []
    assert "keeps op 50" in written(shown(reviewed("rotator-worm-wheel"))["datums"].draw())


# -- lengths ---------------------------------------------------------------------------------------------------------


def test_faces_and_axes_stand_true_to_scale() -> None:
    root = ElementTree.fromstring(shown(reviewed("rotator-worm-wheel"))["axial"].draw())
    faces = sorted(
        float(n.attrib["x1"])
        for n in root.iter(f"{SVG}line")
        if n.attrib["stroke-width"] == "0.5" and n.attrib["x1"] == n.attrib["x2"]
    )
    axes = {float(n.attrib["x1"]) for n in root.iter(f"{SVG}line") if n.attrib.get("stroke-dasharray") == "5 1 0.8 1"}
    shoulder, back = faces
    assert back - shoulder == pytest.approx(5 * 1.5, abs=0.002)
    assert len(axes) == 1 and axes.pop() - shoulder == pytest.approx(5 * 13.5, abs=0.002)


def test_the_lengths_and_the_miss_are_those_of_the_review() -> None:
    found = reviewed("rotator-worm-wheel")
    told = written(shown(found)["axial"].draw())
    for text in ("13.500 ±0.020 mm, given", "1.500 ±0.003 mm", "shim between shoulder and back"):
        assert text in told
    assert any("5:1" in t for t in told)
    worst = next(r for r in found.results.values() if r.stack.require.what == "mid-plane").combined.worst.high
    assert show(worst, "um", 1) in " ".join(told)


def test_a_missing_shim_is_said_with_its_side() -> None:
    told = " ".join(written(shown(reviewed("mistakes/shim-on-the-wrong-side"))["axial"].draw()))
    assert "Drawn sizes miss the worm's axis by 1500.0 um (teeth to the left)" in told
    assert "between wheel.back and spindle.shoulder" in told


def test_a_required_length_shows_its_faces_and_its_limits() -> None:
    told = " ".join(written(shown(reviewed("coupling-hub"))["axial-4"].draw()))
    assert "shoulder to front" in told and "within 69.9400 to 70.0600 mm" in told


def test_an_inch_job_shows_inches() -> None:
    plate = (ROOT / "jobs" / "index-plate.yaml").read_text(encoding="utf-8")
    asked = "  - {what: length, of: plate.front, about: plate.back, between: [0.4 in, 0.9 in]}\n"
    found = of_text(plate.replace("require:\n", f"require:\n{asked}"))
    along, stack = (written(shown(found)[name].draw()) for name in ("axial-1", "stack-1"))
    assert "0.6250 in, made 0.6230 to 0.6270" in along
    assert "worst case 0.62300 to 0.62700 within 0.40000 to 0.90000 in" in stack
    assert not any(" mm" in text or " um" in text for text in (*along, *stack))


# -- hostile and odd jobs --------------------------------------------------------------------------------------------

NASTY = "<script>alert(1)</script>" + "w" * 400


def survives(found: Review) -> dict[str, str]:
    drawn = {name: one.draw() for name, one in shown(found).items()}
    for text in drawn.values():
        every_text_is_free(parsed(text))
        assert sheet(text)[1] <= TALLEST and "<script" not in text
        assert not re.search("[\u202e\u200f\x00-\x09]", text)
    return drawn


def test_hostile_names_are_cleaned_and_cut_short() -> None:
    long = "h" * 90
    text = re.sub(r"\bhub\b(?=[:,@} ])(?!: 175)", long, WHEEL)
    text = text.replace("{what: run-out, of", f'{{name: "{NASTY}", what: run-out, of').replace("lathe-A", "l" * 90)
    drawn = survives(of_text(text))
    assert "&lt;script" in drawn["stack-5"] and "…" in drawn["datums"]


def test_odd_jobs_are_drawn_too() -> None:
    head = WHEEL.partition("# What the finished wheel")[0]
    assert {"datums", "axial"} == set(survives(of_text(head)))  # no requirement
    bought = (
        "setupcheck: 1\ntitle: bought\nunits: mm\nparts:\n  shaft:\n    surfaces:\n"
        "      a: {kind: cylinder, diameter: 20, from: 0, to: 10}\n      b: {kind: cylinder, diameter: 30, from: 10, to: 40}\n"
        "    given: [{of: a, about: b, runout: 2 um}]\n"
    )
    require = "require: [{what: run-out, of: shaft.a, about: shaft.b, at_most: 5 um}]\n"
    assert {"stack-1"} == set(survives(of_text(bought + require)))
    assert {} == survives(of_text(bought))


def test_sixty_requirements_and_forty_operations_are_drawn() -> None:
    lines = ["setupcheck: 1", "title: many", "units: mm", "machines: {l: {kind: lathe, axis_runout: 2 um}}", "parts:"]
    lines += ["  p:", "    surfaces:", "      bar: {kind: cylinder, diameter: 90, from: 0, to: 100, made: stock}"]
    lines += [f"      s{i}: {{kind: cylinder, diameter: {20 + i}, from: {i}, to: {i + 1}}}" for i in range(40)]
    lines.append("setups:")
    for i in range(40):
        on = f"s{i - 1}" if i else "bar"
        hold = f"centre: {{on: {on}, by: collet, runout: 3 um}}, and_centre: {{on: bar, at: 90, runout: 5 um}}"
        lines += [f"  - {{op: {i + 1}, machine: l, looks_at_tool: +z, hold: {{{hold}}}, cut: {{s{i}: {{}}}}}}"]
    lines.append("require:")
    lines += [f"  - {{what: run-out, of: p.s{i % 39 + 1}, about: p.s0, at_most: {100 + i} um}}" for i in range(60)]
    drawn = survives(of_text("\n".join(lines) + "\n"))
    assert len(drawn) == 61
    assert any("more operations find no room" in t for t in written(drawn["datums"]))
