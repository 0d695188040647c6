"""Parts, holdings and heads as drawings: every text on the sheet and free, true proportions, honest about what is missing."""

from __future__ import annotations

import math
import re
from functools import cache
from pathlib import Path

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import Review, review
from setupcheck.report.pictures import WIDEST, pictures
from setupcheck.report.pictures.pieces import Way, finished
from setupcheck.report.pictures.shape import radius_at, solid
from tests.unit.report.sample import GEAR, WHEEL, changed, reviewed
from tests.unit.report.svg_read import SVG, Stroke, every_text_is_free, parsed, strokes, texts

ROOT = Path(__file__).resolve().parents[4]
JOBS = sorted((ROOT / "jobs").glob("*.yaml"))
TALLEST = {"part": 150.0, "hold": 120.0, "head": 140.0}
LARGEST = 14_000


@cache
def job(name: str) -> Review:
    return review(ROOT / "jobs" / name)


@cache
def drawn(name: str, picture: str) -> str:
    return pictures(job(name))[picture].draw()


def ours(found: Review) -> list[str]:
    return [name for name in pictures(found) if name.split("-")[0] in TALLEST]


CASES = [(path.name, picture) for path in JOBS for picture in ours(job(path.name))]


def words_of(text: str) -> list[str]:
    return [said for said, _ in texts(parsed(text))]


def every_stroke_is_on_the_sheet(text: str) -> None:
    svg = parsed(text)
    width, height = (float(v) for v in svg.attrib["viewBox"].split()[2:])
    for ends in strokes(svg):
        for x, y in ends:
            assert 0.0 <= x <= width and 0.0 <= y <= height, ends


@pytest.mark.parametrize(("name", "picture"), CASES)
def test_a_drawing_of_a_shipped_job_reads_well(name: str, picture: str) -> None:
    text = drawn(name, picture)
    every_text_is_free(parsed(text))
    every_stroke_is_on_the_sheet(text)
    svg = parsed(text)
    width, height = (float(v) for v in svg.attrib["viewBox"].split()[2:])
    assert width <= WIDEST and height <= TALLEST[picture.split("-")[0]]
    assert len(text.encode()) <= LARGEST
    assert all(float(n.attrib["font-size"]) >= 3.0 for n in svg.iter(f"{SVG}text"))
    assert 'role="img"' in text and "class=" not in text and "style=" not in text
    assert not re.search(r"\d\.\d{4}", re.sub(r"<text.*?</text>|<title.*?</title>", "", text))


@pytest.mark.parametrize("picture", ["part-wheel", "hold-10", "hold-70", "head-40"])
def test_two_draws_give_the_same_bytes(picture: str) -> None:
    fresh = reviewed(WHEEL)
    assert (
        drawn("rotator-worm-wheel.yaml", picture) == pictures(fresh)[picture].draw() == pictures(fresh)[picture].draw()
    )


def test_every_part_every_setup_and_every_head_has_its_drawing() -> None:
    found = ours(job("rotator-worm-wheel.yaml"))
    holds = [f"hold-{op}" for op in (10, 20, 30, 40, 50, 60, 70)]
    assert ["part-wheel", "part-spindle", *holds, "head-40"] == found


def test_the_legend_says_who_finished_what() -> None:
    said = " ".join(words_of(drawn("rotator-worm-wheel.yaml", "part-wheel")))
    for line in ("op 10: front, rim", "op 30: hub, seat, throat", "op 40: teeth", "op 50: bore", "op 60: back"):
        assert line in said
    assert "stock: bar (removed in op 20)" in said
    assert any("bought: " in w for w in words_of(drawn("rotator-worm-wheel.yaml", "part-spindle")))


def test_sizes_are_written_as_the_file_writes_them() -> None:
    said = words_of(drawn("rotator-worm-wheel.yaml", "part-wheel"))
    for text in ("bore Ø32 H5", "hub Ø48 h6", "throat Ø111 R10.5", "teeth 72 on Ø108", "seat at 20"):
        assert text in said
    assert "journal Ø32.030 ±0.003" in words_of(drawn("rotator-worm-wheel.yaml", "part-spindle"))


def test_an_inch_job_shows_inches() -> None:
    said = words_of(drawn("index-plate.yaml", "part-plate"))
    assert "z [in]" in said and "0.625" in said and "front at 0.625" in said
    assert any("0.2 thou" in w for w in words_of(drawn("index-plate.yaml", "hold-30")))


def surface_line(text: str, colour: str) -> list[tuple[float, float]]:
    """Points of all thick lines in a colour."""
    points = []
    for node in parsed(text).iter(f"{SVG}polyline"):
        if node.attrib["stroke"] == colour and float(node.attrib["stroke-width"]) > 0.6:
            points += [tuple(float(v) for v in pair.split(",")) for pair in node.attrib["points"].split()]
    return [(x, y) for x, y in points]


def test_lengths_and_diameters_are_drawn_to_one_scale() -> None:
    text = drawn("spur-gear-on-mandrel.yaml", "part-gear")
    scale = next(w for w in words_of(text) if w.startswith("scale"))
    over, under = scale.removeprefix("scale ").split(":")
    times = float(over) / float(under)
    outside = surface_line(text, "#2b7a2b")  # op 30 turns the outside alone
    xs, ys = [p[0] for p in outside], [p[1] for p in outside]
    assert 63.0 * times == pytest.approx(max(ys) - min(ys), abs=0.01)
    assert 16.0 * times == pytest.approx(max(xs) - min(xs), abs=0.01)


def test_holes_stand_round_the_end_view_where_they_are_drilled() -> None:
    found = [
        n
        for n in parsed(drawn("index-plate.yaml", "part-plate")).iter(f"{SVG}circle")
        if n.attrib["stroke"] == "#2b7a2b"
    ]
    circle = next(n for n in found if "stroke-dasharray" in n.attrib)
    x, y, radius = (float(circle.attrib[key]) for key in ("cx", "cy", "r"))
    holes = [n for n in found if n.attrib["stroke-width"] == "0.35"]
    assert 24 == len(holes)
    places = [(float(n.attrib["cx"]) - x, y - float(n.attrib["cy"])) for n in holes]
    assert [radius] * 24 == pytest.approx([math.hypot(*place) for place in places], abs=0.002)
    turns = [math.degrees(math.atan2(b, a)) % 360.0 for a, b in places]
    assert [15.0 * i for i in range(24)] == pytest.approx(turns, abs=0.02)
    assert ["black"] + ["white"] * 23 == [n.attrib["fill"] for n in holes]


def place_of(text: str, label: str) -> float:
    """Middle of a label across the sheet."""
    box = next(box for said, box in texts(parsed(text)) if said.startswith(label))
    return (box[0] + box[2]) / 2.0


def test_a_part_turned_round_shows_its_other_end_to_the_spindle() -> None:
    op_30 = drawn("rotator-worm-wheel.yaml", "hold-30")  # +z looks at the tool: the seat is right of the back
    op_50 = drawn("rotator-worm-wheel.yaml", "hold-50")  # -z looks at the tool: the back is right of the seat
    back, seat = (surface_line(text, colour) for text, colour in ((op_50, "#a8123e"), (op_30, "#2b7a2b")))
    assert place_of(op_30, "seat") > place_of(op_30, "back")
    assert place_of(op_50, "back") > place_of(op_50, "seat")
    assert max(x for x, _ in back) > 90.0 and max(x for x, _ in seat) > 90.0  # both are cut from the tool's side
    turned = pictures(reviewed(changed(WHEEL, ("looks_at_tool: +z", "looks_at_tool: -z"))))["hold-30"].draw()
    assert place_of(turned, "seat") < place_of(turned, "back")


def test_each_datum_has_its_letter_and_its_words() -> None:
    said = words_of(drawn("rotator-worm-wheel.yaml", "hold-50"))
    assert "A" in said and "B, C" in said
    assert "A hub rules the axis: four-jaw, run-out up to 6 um, measured 4 um, at z 23" in said
    assert "B seat rules the lean: parallels, face run-out up to 4 um, on Ø100" in said
    assert "C seat rules the length: up to 5 um" in said


def test_a_setup_that_keeps_a_holding_says_whose() -> None:
    said = words_of(drawn("rotator-worm-wheel.yaml", "hold-60"))
    assert any("as in op 50, never opened" in w for w in said)
    assert any(w.startswith("A hub rules the axis: four-jaw") for w in said)


def test_a_joining_shows_shim_fit_and_stop() -> None:
    said = words_of(drawn("rotator-worm-wheel.yaml", "hold-70"))
    assert "shim" in said
    assert "stop: wheel.back against spindle.shoulder, between them shim 1.5" in said
    assert "shrink: wheel.bore Ø32 H5 on spindle.journal Ø32.030 ±0.003" in said


def test_stock_that_is_held_is_drawn_until_it_is_gone() -> None:
    assert any(
        w.startswith("A bar rules") and "not there" not in w for w in words_of(drawn("pressed-bush.yaml", "hold-10"))
    )


# -- the head --------------------------------------------------------------------------------------------------------


def gaps(text: str) -> list[Stroke]:
    node = next(n for n in parsed(text).iter(f"{SVG}path") if n.attrib["stroke-width"] == "0.9")
    found = re.findall(r"M(\S+) (\S+?)L(\S+) (\S+?)(?=M|$)", node.attrib["d"])
    return [((float(a), float(b)), (float(c), float(d))) for a, b, c, d in found]


@pytest.mark.parametrize(
    ("name", "picture"), [("rotator-worm-wheel.yaml", "head-40"), ("wheel-on-spindle.yaml", "head-50")]
)
def test_gaps_of_a_head_that_leans_right_lie_square_to_the_cutter(name: str, picture: str) -> None:
    for (_, y1), (_, y2) in gaps(drawn(name, picture)):
        assert y1 == pytest.approx(y2, abs=0.02)


def test_a_head_that_leans_the_wrong_way_is_drawn_and_told_so() -> None:
    text = pictures(reviewed(changed(WHEEL, ("leans: nose-down", "leans: nose-up"))))["head-40"].draw()
    assert any(abs(y1 - y2) > 1.0 for (_, y1), (_, y2) in gaps(text))
    assert "WRONG WAY: it must lean nose-down" in words_of(text)
    every_text_is_free(parsed(text))


def test_gaps_of_a_right_hand_wheel_fall_to_the_right_before_the_head_leans() -> None:
    text = pictures(reviewed(changed(WHEEL, ("tilt: 3deg 34' 35\"", "tilt: 0deg"))))["head-40"].draw()
    for (x1, y1), (x2, y2) in gaps(text):
        assert (y2 - y1) / (x2 - x1) > 0.1  # y runs downwards on paper


def test_the_angle_stands_in_three_spellings_and_agrees_with_the_report() -> None:
    said = " ".join(words_of(drawn("rotator-worm-wheel.yaml", "head-40")))
    assert "set: 3deg 34' 35\" (3.5764 deg, 3.9738 gon), leans nose-down" in said
    assert "the gaps of a right-hand wheel fall to the right." in said
    assert "angles drawn 3.9 times as steep as they are" in said


def test_an_angle_that_is_off_says_how_much_to_correct() -> None:
    text = pictures(reviewed(changed(WHEEL, ("tilt: 3deg 34' 35\"", "tilt: 3deg 10' 47\""))))["head-40"].draw()
    assert any(re.match(r"CORRECT: lean it 0deg 23' 4\d\" more", w) for w in words_of(text))


@pytest.mark.parametrize("nose", ["left", "right", "up", "front", "back"])
@pytest.mark.parametrize("cutter", ["front", "back", "above", "left", "right"])
@pytest.mark.parametrize("leans", ["nose-up", "left", "front"])
def test_every_place_of_a_head_can_be_drawn(nose: str, cutter: str, leans: str) -> None:
    text = changed(
        WHEEL,
        ("nose_points: left, cutter_stands: front", f"nose_points: {nose}, cutter_stands: {cutter}"),
        ("leans: nose-down", f"leans: {leans}"),
    )
    found = pictures(reviewed(text))["head-40"].draw()
    every_text_is_free(parsed(found))
    every_stroke_is_on_the_sheet(found)


def test_a_head_whose_place_is_not_stated_is_not_drawn() -> None:
    text = pictures(reviewed(changed(WHEEL, (", nose_points: left, cutter_stands: front", ""))))["head-40"].draw()
    assert "not drawn: nose_points and cutter_stands of dividing-head-B not stated" in words_of(text)
    assert not list(parsed(text).iter(f"{SVG}polyline"))


# -- odd jobs --------------------------------------------------------------------------------------------------------

BOUGHT = """
setupcheck: 1
title: bought
units: mm
parts:
  shaft:
    surfaces:
      a: {kind: cylinder, diameter: 20, from: 0, to: 50}
      b: {kind: cylinder, diameter: 30, from: 50, to: 90}
    given: [{of: a, about: b, runout: 5 um}]
require: [{what: run-out, of: shaft.a, about: shaft.b, at_most: 20 um}]
"""
ODD = [
    "      a: {kind: cylinder, diameter: 0.1, from: 0, to: 5000}",
    "      a: {kind: cylinder, diameter: 5000, from: 0, to: 0.1}",
    "      a: {kind: cylinder, diameter: 0.1, from: 0, to: 0.1}\n      b: {kind: cylinder, diameter: 5000, from: 0.1, to: 5000}",
    "      a: {kind: bore, diameter: 20, from: 0, to: 30}",
    "      a: {kind: face, at: 0, facing: +z}",
    "      a: {kind: face, at: 0, facing: +z, diameter: 30}",
    "      a: {kind: centre, at: 0, facing: -z}",
    "      a: {kind: teeth, count: 40, on_circle: 60, at: 8}",
    "      a: {kind: teeth, count: 40, on_circle: 60, at: 8, width: 16, module: 1.5}",
    "      a: {kind: throat, diameter: 60, radius: 10, at: 8}",
    "      a: {kind: slot, on_circle: 60, at: 8}",
    "      a: {kind: holes, count: 3, on_circle: 60, at: 8, diameter: 5}",
    "      a: {kind: thread, diameter: 20, from: 0, to: 30, pitch: 2}\n      b: {kind: taper, diameter: 30, from: 30, to: 60}",
    "      a: {kind: cylinder, diameter: 40, from: 0, to: 10}\n      b: {kind: cylinder, diameter: 40, from: 30, to: 60}",
]
"""Surfaces of one part: extreme proportions, one surface alone, sizes missing, gaps between."""


@pytest.mark.parametrize("surfaces", ODD)
def test_an_odd_part_is_drawn_or_said_not_to_be(surfaces: str) -> None:
    parts = BOUGHT[: BOUGHT.index("  shaft:")] + f"  thing:\n    surfaces:\n{surfaces}\n"
    parts += "    given: [{of: a, about: a, runout: 5 um}]\n" if "from" in surfaces and "bore" not in surfaces else ""
    text = parts + SETUP.format(on="extra")
    text = text.replace("    surfaces:\n", "    surfaces:\n      extra: {kind: face, at: 0, facing: -z}\n", 1)
    for name, one in pictures(reviewed(text)).items():
        if name.split("-")[0] in TALLEST:
            every_text_is_free(parsed(one.draw()))
            every_stroke_is_on_the_sheet(one.draw())


SETUP = """
setups:
  - op: 10
    machine: lathe
    looks_at_tool: -z
    hold: {{stop: {{on: {on}, error: 10 um}}}}
    cut: {{{on}: {{error: 5 um}}}}
"""


def test_a_part_without_any_diameter_says_so() -> None:
    text = changed(BOUGHT, ("{kind: cylinder, diameter: 20, from: 0, to: 50}", "{kind: face, at: 0, facing: -z}"))
    text = changed(text, ("{kind: cylinder, diameter: 30, from: 50, to: 90}", "{kind: face, at: 9, facing: +z}"))
    text = text[: text.index("    given")] + "    given: [{of: a, from: b, length: 9 ±0.1}]\n" + SETUP.format(on="a")
    found = pictures(reviewed(text))
    assert "not drawn: no diameter stated of a, b" in words_of(found["part-shaft"].draw())
    assert any(w.startswith("not drawn: no outside diameter") for w in words_of(found["hold-10"].draw()))


def test_a_job_of_bought_parts_alone_has_its_parts_drawn() -> None:
    found = pictures(reviewed(BOUGHT))
    assert ["part-shaft"] == [name for name in found if name.split("-")[0] in TALLEST]
    assert "bought: a, b" in words_of(found["part-shaft"].draw())


def test_hostile_words_are_cleaned_cut_short_and_escaped() -> None:
    text = changed(GEAR, ("outside", "o" + "u" * 80 + "t"), ("lathe-C", "l<script>" + "y" * 90))
    text = changed(text, ("material: 16MnCr5", r'material: "<script>\u202e16MnCr5\u200f\u0007"'))
    for name, one in pictures(reviewed(text)).items():
        if name.split("-")[0] in TALLEST:
            drawing = one.draw()
            assert "<script" not in drawing and "\u202e" not in drawing and "\u200f" not in drawing
            assert not re.search(r"[u]{60}", drawing)
            every_text_is_free(parsed(drawing))


def test_many_surfaces_are_named_as_far_as_there_is_room() -> None:
    rows = "\n".join(
        f"      s{i}: {{kind: cylinder, diameter: {20 + i % 7}, from: {5 * i}, to: {5 * i + 5}}}" for i in range(40)
    )
    given = ", ".join(f"{{of: s{i}, about: s0, runout: 5 um}}" for i in range(1, 40))
    text = BOUGHT[: BOUGHT.index("  shaft:")] + f"  thing:\n    surfaces:\n{rows}\n    given: [{given}]\n"
    text += "require: [{what: run-out, of: thing.s1, about: thing.s2, at_most: 90 um}]\n"
    drawing = pictures(reviewed(text))["part-thing"].draw()
    every_text_is_free(parsed(drawing))
    assert "s39" in " ".join(words_of(drawing))


def test_a_holding_without_an_error_says_that_none_is_stated() -> None:
    text = changed(
        WHEEL, ("centre: {on: rim, by: soft-jaws, at: 10, runout: 15 um}", "centre: {on: rim, by: soft-jaws, at: 10}")
    )
    said = words_of(pictures(reviewed(text))["hold-30"].draw())
    assert "A rim rules the axis: soft-jaws, no error stated, at z 10" in said


def test_a_surface_cut_here_is_thicker_than_every_other_line() -> None:
    text = drawn("rotator-worm-wheel.yaml", "hold-30")
    widths = {
        colour: {
            float(n.attrib["stroke-width"]) for n in parsed(text).iter(f"{SVG}polyline") if n.attrib["stroke"] == colour
        }
        for colour in ("#2b7a2b", "black")
    }
    assert min(widths["#2b7a2b"]) > 2.0 * max(widths["black"])


def test_a_taper_is_drawn_from_one_diameter_to_the_other_also_turned_round() -> None:
    found = job("bevel-pinion-blank.yaml")
    pieces = finished(found, "pinion")
    cone = next(p for p in pieces if p.name == "face-cone")
    body = solid(pieces)
    assert [radius_at(body.outer, z) for z in (12.0, 20.0)] == pytest.approx([cone.radius_at(z) for z in (12.0, 20.0)])
    assert cone.ends == pytest.approx((21.789, 15.455))
    turned = Way(-1, 24.0).of(cone)
    assert turned.ends == pytest.approx((15.455, 21.789))
    assert turned.radius_at(24.0 - 12.0) == pytest.approx(cone.radius_at(12.0))
    assert "Ø43.578 to 30.91" in drawn("bevel-pinion-blank.yaml", "part-pinion")


def test_only_a_taper_takes_two_diameters() -> None:
    text = (ROOT / "jobs" / "bevel-pinion-blank.yaml").read_text(encoding="utf-8")
    with pytest.raises(JobError, match="a cylinder has one diameter"):
        reviewed(changed(text, ("kind: taper", "kind: cylinder")))
