"""Drawing of an insert: true to size, every text readable, nothing on top of anything else, measured points in their place."""

from __future__ import annotations

import math
import re
from typing import Any

import pytest

from setupcheck.report.drawings import ACROSS, SCALES, UP, InsertDrawing, draw_insert
from tests.unit.report.svg_read import SVG, every_text_is_free, parsed, texts

HEIGHTS = [0.25 * i for i in range(25)]


def profile(tip: float = 1.08, angle: float = 20.0, bend: float = 0.03) -> list[float]:
    return [tip + math.tan(math.radians(angle)) * (h - 3.0) * 0.6 + 0.66 + bend * h * h / 2.0 for h in HEIGHTS]


def drawing(**changes: Any) -> InsertDrawing:
    right = profile()
    told: dict[str, Any] = {
        "title": "Insert for worm wheel, 40 teeth",
        "scale": 20.0,
        "heights": HEIGHTS,
        "right": right,
        "left": right,
        "pitch_height": 3.0,
        "pitch_width": 3.75,
        "right_angle": math.radians(17.2),
        "left_angle": math.radians(17.2),
    }
    return InsertDrawing(**{**told, **changes})


CASES = [
    {"scale": scale, "right": widths, "left": widths, "measured": measured, "note": note}
    for scale in SCALES
    for widths in (profile(), profile(angle=35.0, bend=0.06), profile(tip=0.2, angle=14.0, bend=0.0))
    for measured, note in (((), ""), (((0.5, 1.3), (0.5, -1.31), (4.0, 2.4)), "farthest point 18 um outside the flank"))
]


@pytest.mark.parametrize("case", CASES)
def test_every_text_is_on_the_sheet_and_free(case: dict[str, Any]) -> None:
    svg = parsed(draw_insert(drawing(**case)))
    assert len(texts(svg)) == (10 if case["measured"] else 8)
    every_text_is_free(svg)


@pytest.mark.parametrize("scale", [1.0, 5.0, 20.0])
def test_a_length_on_paper_is_the_insert_times_the_scale(scale: float) -> None:
    svg = parsed(draw_insert(drawing(scale=scale)))
    view = svg.attrib["viewBox"].split()
    assert (f"{view[2]}mm", f"{view[3]}mm") == (svg.attrib["width"], svg.attrib["height"])
    outline = max(svg.iter(f"{SVG}polyline"), key=lambda n: len(n.attrib["points"]))
    points = [tuple(float(v) for v in pair.split(",")) for pair in outline.attrib["points"].split()]
    assert 50 == len(points)
    xs, ys = [p[0] for p in points], [p[1] for p in points]
    assert 2.0 * profile()[-1] * scale == pytest.approx(max(xs) - min(xs), abs=0.002)
    assert 6.0 * scale == pytest.approx(max(ys) - min(ys), abs=0.002)
    check = min(svg.iter(f"{SVG}polyline"), key=lambda n: len(n.attrib["points"]))
    (x1, y1), (x2, y2), (x3, y3) = (tuple(float(v) for v in pair.split(",")) for pair in check.attrib["points"].split())
    assert (0.0, UP, ACROSS, 0.0) == pytest.approx((x1 - x2, y2 - y1, x3 - x2, y3 - y2))


def test_the_sizes_are_written_once_each() -> None:
    shown = [text for text, _ in texts(parsed(draw_insert(drawing())))]
    tip = f"{2.0 * profile()[0]:.3f}"
    for size in (tip, "3.750", "3.000", "6.000", "34° 24' 0\""):
        assert 1 == shown.count(size), size
    assert "scale 20:1, sizes in mm; print at 100 %, not fitted to the page" in shown


def test_measured_points_stand_where_they_were_measured() -> None:
    measured = ((1.0, 1.5), (2.0, -1.6))
    svg = parsed(draw_insert(drawing(measured=measured, note="2 points")))
    outline = max(svg.iter(f"{SVG}polyline"), key=lambda n: len(n.attrib["points"]))
    pairs = [tuple(float(v) for v in pair.split(",")) for pair in outline.attrib["points"].split()]
    middle, tip = (pairs[0][0] + pairs[-1][0]) / 2.0, max(p[1] for p in pairs)
    paths = [n.attrib["d"] for n in svg.iter(f"{SVG}path") if n.attrib["stroke"] != "black"]
    assert 2 == len(paths)
    for (height, across), path in zip(measured, paths, strict=True):
        found = re.match(r"M (\S+) (\S+) h 2 M (\S+) (\S+) v 2", path)
        assert found
        x, y = float(found[1]) + 1.0, float(found[2])
        assert (across, height) == pytest.approx(((x - middle) / 20.0, (tip - y) / 20.0), abs=1e-3)
    assert "+ measured points (2)" in [text for text, _ in texts(svg)]


def test_a_title_cannot_break_the_file() -> None:
    text = draw_insert(drawing(title='<b>"gear" & worm</b>', note="a < b"))
    assert "<b>" not in text
    assert '<b>"gear" & worm</b>' in [shown for shown, _ in texts(parsed(text))]
    assert "class=" not in text and "style" not in text
    assert 'role="img"' in text


def test_flanks_unlike_each_other_are_drawn_unlike() -> None:
    wider = [w + 0.4 for w in profile()]
    svg = parsed(draw_insert(drawing(left=wider, left_angle=math.radians(10.0))))
    shown = [text for text, _ in texts(svg)]
    assert "27° 12' 0\"" in shown
    assert f"{profile()[0] + wider[0]:.3f}" in shown


def test_parallel_flanks_have_no_angle_to_draw() -> None:
    flat = [1.0 + 1e-9 * h for h in HEIGHTS]
    text = draw_insert(drawing(right=flat, left=flat, right_angle=0.0, left_angle=0.0))
    assert " A " not in text


def test_a_scale_too_large_for_the_paper_names_the_one_that_fits() -> None:
    with pytest.raises(
        ValueError, match=r"at 50:1 the drawing needs \d+ x \d+ mm, the paper has 210 x 297 mm: 20:1 would"
    ):
        draw_insert(drawing(scale=50.0), paper=(210.0, 297.0))
    with pytest.raises(ValueError, match="no scale fits"):
        draw_insert(drawing(scale=1.0), paper=(40.0, 40.0))
    assert draw_insert(drawing(scale=20.0), paper=(210.0, 297.0)) == draw_insert(drawing(scale=20.0))


@pytest.mark.parametrize(
    ("changes", "says"),
    [
        ({"heights": HEIGHTS[:4], "right": profile()[:4], "left": profile()[:4]}, "five points or more"),
        ({"right": profile()[:-1]}, "each with a height and both half widths"),
        ({"measured": ((1.0, math.nan),)}, "a number of the profile or of a measured point is missing"),
        ({"heights": [*HEIGHTS[:5], *HEIGHTS[4:-1]]}, "rise from point to point"),
        ({"scale": 0.0}, "such as 20 for 20:1, not 0"),
        ({"scale": math.nan}, "such as 20 for 20:1, not nan"),
        ({"pitch_height": 6.5}, "pitch height, 6.5 mm, must lie on the profile, which ends 6 mm above the tip"),
        ({"right_angle": 1.3}, "between 0 and 60 deg"),
    ],
)
def test_a_drawing_without_its_numbers_is_refused(changes: dict[str, Any], says: str) -> None:
    with pytest.raises(ValueError, match=says):
        drawing(**changes)
