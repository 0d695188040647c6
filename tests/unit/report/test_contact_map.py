"""Map of the contact: true to scale, every text free, the right places shaded and outlined; the command that writes it."""

from __future__ import annotations

import itertools
import math
import re
import subprocess
import sys
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import pytest

from setupcheck.flow import review
from setupcheck.report.bands import areas, edges
from setupcheck.report.contact_drawing import as_drawing
from setupcheck.report.contact_map import STEPS, ContactMap, FlankMap, draw_contact
from setupcheck.shipped import shipped
from tests.unit.report.sample import WHEEL
from tests.unit.report.test_drawings import every_text_is_free, parsed, texts

SVG = "{http://www.w3.org/2000/svg}"


def flank(face: float = 20.0, high: float = 5.0, columns: int = 41, rows: int = 21, **changes: Any) -> FlankMap:
    """A flank hollow at tip and root whose distance grows by 1 um for every 0.1 mm from its middle."""
    along = [face * (j / (columns - 1) - 0.5) for j in range(columns)]
    bow = [0.2 * high * (2.0 * z / face) ** 2 for z in along]
    heights = [[high * (i / (rows - 1) - 0.5) + b for b in bow] for i in range(rows)]
    told: dict[str, Any] = {
        "title": "right flank, 6.0 % marked",
        "along": along,
        "heights": heights,
        "missing": [[0.010 * abs(z) for z in along] for _ in heights],
    }
    return FlankMap(**{**told, **changes})


def sheet(one: FlankMap | None = None, **changes: Any) -> ContactMap:
    one = one or flank()
    told: dict[str, Any] = {
        "title": "AB-1, wheel of a small table: contact of wheel.teeth",
        "caption": ["a film of 6.0 um marks 6.0 % of each flank", 'transmission error 1.2 um, 4.1" at the wheel'],
        "flanks": (one, one),
        "ends": ("back", "side"),
        "film": 0.006,
    }
    return ContactMap(**{**told, **changes})


def rims(svg: ElementTree.Element) -> list[list[tuple[float, float]]]:
    """Outlines of both flanks."""
    found = []
    for node in svg.iter(f"{SVG}polyline"):
        pairs = [pair.split(",") for pair in node.attrib["points"].split()]
        found.append([(float(x), float(y)) for x, y in pairs])
    return found


def outlined(svg: ElementTree.Element) -> list[list[tuple[float, float]]]:
    """Ends of the pieces of the line round what is marked, one list for each flank."""
    paths = [n.attrib["d"] for n in svg.iter(f"{SVG}path") if n.attrib["fill"] == "none"]
    return [[(float(x), float(y)) for x, y in re.findall(r"(-?[0-9.]+) (-?[0-9.]+)", d)] for d in paths]


def scales(svg: ElementTree.Element) -> tuple[float, float]:
    """Enlargement along the face and up the flank, as the sheet states them."""
    (said,) = [text for text, _ in texts(svg) if text.startswith("across")]
    along, up = re.findall(r"([0-9.]+):1", said)
    return float(along), float(up)


def area(polygon: list[tuple[float, float]]) -> float:
    pairs = itertools.pairwise([*polygon, polygon[0]])
    return abs(sum(x1 * y2 - x2 * y1 for (x1, y1), (x2, y2) in pairs)) / 2.0


LONG = "a wheel with a name that says all there is to be said about where it is used and by whom, and then some more"
CASES = [
    {"one": flank(face, high), "inches": inches, **more}
    for face, high in ((20.0, 5.0), (6.0, 1.5), (11.0, 3.3), (40.0, 12.0), (300.0, 60.0))
    for inches in (False, True)
    for more in ({}, {"title": LONG, "caption": [LONG] * 9, "ends": (LONG, LONG)}, {"ends": ("W" * 200, "-z")})
]


@pytest.mark.parametrize("case", CASES)
def test_every_text_is_on_the_sheet_and_free(case: dict[str, Any]) -> None:
    svg = parsed(draw_contact(sheet(**case)))
    every_text_is_free(svg)
    for rim in rims(svg):
        left, right = min(x for x, _ in rim), max(x for x, _ in rim)
        top, bottom = min(y for _, y in rim), max(y for _, y in rim)
        for text, box in texts(svg):
            assert box[2] <= left or right <= box[0] or box[3] <= top or bottom <= box[1], f"{text} lies in the map"


def test_a_length_on_paper_is_the_flank_times_the_scales_it_states() -> None:
    svg = parsed(draw_contact(sheet()))
    assert ("297mm", "210mm", "0 0 297 210") == tuple(svg.attrib[k] for k in ("width", "height", "viewBox"))
    along, up = scales(svg)
    both = rims(svg)
    assert 2 == len(both)
    for rim in both:
        xs, ys = [x for x, _ in rim], [y for _, y in rim]
        assert 20.0 * along == pytest.approx(max(xs) - min(xs), abs=0.002)
        assert 6.0 * up == pytest.approx(max(ys) - min(ys), abs=0.002)
    assert max(x for x, _ in both[0]) < min(x for x, _ in both[1])


@pytest.mark.parametrize("film", [0.003, 0.006, 0.0254])
def test_the_outline_stands_where_the_distance_is_the_film(film: float) -> None:
    svg = parsed(draw_contact(sheet(film=film)))
    for rim, line in zip(rims(svg), outlined(svg), strict=True):
        middle = (min(x for x, _ in rim) + max(x for x, _ in rim)) / 2.0
        k = (max(x for x, _ in rim) - min(x for x, _ in rim)) / 20.0
        assert film / 0.010 * k == pytest.approx(max(x for x, _ in line) - middle, abs=0.02)
        assert film / 0.010 * k == pytest.approx(middle - min(x for x, _ in line), abs=0.02)


def test_each_shade_covers_what_its_step_says() -> None:
    svg = parsed(draw_contact(sheet()))
    filled = [n.attrib for n in svg.iter(f"{SVG}path") if n.attrib["fill"] != "none"]
    assert 2 * len(STEPS) == len(filled)
    along, up = scales(svg)
    for step, attributes in zip(reversed(STEPS), filled, strict=False):
        pieces = [
            [(float(x), float(y)) for x, y in re.findall(r"(-?[0-9.]+) (-?[0-9.]+)", d)]
            for d in attributes["d"].split("Z")
        ]
        covered = sum(area(piece) for piece in pieces if piece)
        assert 2.0 * step / 0.010 * along * 5.0 * up == pytest.approx(covered, rel=0.02)  # every column is 5 mm high


def test_the_shades_fall_in_grey_as_well() -> None:
    svg = parsed(draw_contact(sheet()))
    fields = [n.attrib["fill"] for n in svg.iter(f"{SVG}rect") if n.attrib.get("fill", "").startswith("#")]
    assert len(STEPS) + 1 == len(fields)
    grey = [sum(w * int(f[i : i + 2], 16) for w, i in ((0.30, 1), (0.59, 3), (0.11, 5))) for f in fields]
    assert all(b - a > 15.0 for a, b in itertools.pairwise(grey))
    assert "#ffffff" == fields[-1]


def test_areas_and_edges_agree_on_a_disc() -> None:
    n = 81
    points = [[(-1.0 + 2.0 * j / (n - 1), -1.0 + 2.0 * i / (n - 1)) for j in range(n)] for i in range(n)]
    values = [[math.hypot(*at) for at in row] for row in points]
    assert math.pi * 0.25 == pytest.approx(sum(area(p) for p in areas(points, values, 0.5)), rel=2e-3)
    assert math.pi == pytest.approx(sum(math.dist(a, b) for a, b in edges(points, values, 0.5)), rel=2e-3)
    whole = sum(area(p) for p in areas(points, values, 2.0))
    assert (4.0, 8.0) == pytest.approx((whole, sum(math.dist(a, b) for a, b in edges(points, values, 2.0))))
    assert [] == [*areas(points, values, -1.0)] == [*edges(points, values, -1.0)]


def test_points_that_no_thread_passes_stay_white() -> None:
    one = flank()
    nowhere = FlankMap(title="x", along=one.along, heights=one.heights, missing=[[math.inf] * 41] * 21)
    svg = parsed(draw_contact(sheet(nowhere)))
    assert [] == [n for n in svg.iter(f"{SVG}path") if n.attrib["fill"] != "none"]


def test_a_title_cannot_break_the_file() -> None:
    text = draw_contact(sheet(title='<b>"gear" & worm</b>', ends=("<i>", "&")))
    assert "<b>" not in text
    assert '<b>"gear" & worm</b>' in [shown for shown, _ in texts(parsed(text))]


@pytest.mark.parametrize(
    ("changes", "says"),
    [
        ({"missing": [[0.0] * 41] * 20}, "two rows and columns or more, each point with a height and a distance"),
        ({"missing": [[0.0] * 40] * 21}, "each point with a height and a distance"),
        ({"missing": [[math.nan] * 41] * 21}, "a number of the map is missing"),
        ({"along": [0.0] * 41}, "must rise from the -z end"),
    ],
)
def test_a_map_without_its_numbers_is_refused(changes: dict[str, Any], says: str) -> None:
    with pytest.raises(ValueError, match=says):
        flank(**changes)


def test_a_film_that_is_none_is_refused() -> None:
    with pytest.raises(ValueError, match=r"thickness above zero, such as .* mm, not 0"):
        sheet(film=0.0)


def test_the_drawing_of_a_job_says_its_numbers_and_mirrors_its_flanks() -> None:
    found = review(shipped("jobs/wheel-on-spindle.yaml"))
    svg = parsed(as_drawing(found))
    every_text_is_free(svg)
    said = [text for text, _ in texts(svg)]
    assert "EF-0208, Table feed wheel cut on its spindle, 60 teeth: contact of wheel.teeth" == said[0]
    for piece in (
        "a film of 6.0 um marks 15.8 % of each flank",
        "tip radius of the cutter 31.00 mm",
        '0.1" at the wheel',
    ):
        assert any(piece in text for text in said), piece
    assert 2 == said.count("back") == said.count("side") == said.count("tip") == said.count("root")
    right, left = outlined(svg)
    (one, other) = rims(svg)
    middles = [(min(x for x, _ in rim) + max(x for x, _ in rim)) / 2.0 for rim in (one, other)]
    assert max(x for x, _ in right) - middles[0] == pytest.approx(middles[1] - min(x for x, _ in left), abs=0.05)


def test_an_inch_job_is_drawn_in_inches() -> None:
    found = review(shipped("jobs/wheel-on-spindle.yaml"))
    found.book.inches = True
    said = " ".join(text for text, _ in texts(parsed(as_drawing(found))))
    assert "across: in along the face" in said
    assert "marked by a film of 0.24 thou" in said
    assert " mm" not in said and " um" not in said


def run(*arguments: str) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "setupcheck", "contact", *arguments]
    return subprocess.run(command, capture_output=True, text=True, timeout=60, check=False)


def test_the_command_tells_the_block_and_writes_the_map_whole(tmp_path: Path) -> None:
    job, svg = str(shipped("jobs/wheel-on-spindle.yaml")), tmp_path / "contact.svg"
    done = run(job, "--svg", str(svg))
    assert 0 == done.returncode, done.stderr
    assert done.stdout.startswith("CONTACT, op 50: exact gap, 6.0 um of blue")
    assert f"written: {svg}" in done.stdout
    assert "297mm" == ElementTree.parse(svg).getroot().attrib["width"]
    assert [svg] == [*tmp_path.iterdir()]  # nothing half written is left beside it
    svg.write_text("mine", encoding="utf-8")
    refused = run(job, "--svg", str(svg))
    assert (2, "mine") == (refused.returncode, svg.read_text(encoding="utf-8"))
    assert "already there and stays as it is" in refused.stderr
    assert 0 == run(job, "--svg", str(svg), "--force").returncode
    assert svg.read_text(encoding="utf-8").startswith("<svg")
    assert [svg] == [*tmp_path.iterdir()]


def test_without_a_file_the_block_alone_is_told() -> None:
    done = run(str(shipped("jobs/wheel-on-spindle.yaml")))
    assert 0 == done.returncode
    assert "CONTACT, op 50" in done.stdout and "written" not in done.stdout


def test_a_job_that_gives_no_contact_says_what_it_takes_and_leaves_nothing(tmp_path: Path) -> None:
    job, svg = tmp_path / "job.yaml", str(tmp_path / "contact.svg")
    job.write_text(WHEEL, encoding="utf-8")
    unasked = run(str(job), "--svg", svg)
    assert 2 == unasked.returncode
    assert "the job does not ask for it. Write contact: exact under mesh" in " ".join(unasked.stderr.split())
    plate = run(str(shipped("jobs/index-plate.yaml")), "--svg", svg)
    assert 2 == plate.returncode
    assert "no contact to tell. It takes a worm wheel cut gap by gap" in " ".join(plate.stderr.split())
    text = shipped("jobs/wheel-on-spindle.yaml").read_text(encoding="utf-8")
    job.write_text(text.replace(", insert: envelope", ""), encoding="utf-8")
    missing = run(str(job), "--svg", svg)
    assert 2 == missing.returncode
    assert "cannot tell the contact of op 50: fill cutters.fly.insert" in " ".join(missing.stderr.split())
    assert {job} == set(tmp_path.iterdir())


@pytest.mark.parametrize(
    ("place", "says"), [("", "is a folder. Write the name of a file"), ("no/contact.svg", "there is no folder")]
)
def test_a_place_where_nothing_can_be_written_is_told_first(tmp_path: Path, place: str, says: str) -> None:
    done = run(str(shipped("jobs/wheel-on-spindle.yaml")), "--svg", str(tmp_path / place))
    assert 2 == done.returncode
    assert says in " ".join(done.stderr.split())
