"""Index tables as the trade knows them. Common practice, from memory: rows of the tables that come with 40 : 1 heads.

One turn of the crank of a 40 : 1 head is 9 degrees, so one hole of the circle of 18 is half a degree and one of 27 is 20
minutes. Rotary tables of 60, 72, 90 and 120 : 1 turn 6, 5, 4 and 3 degrees for one turn of the handle. 40 places step
10 gon, as the circle has 400. The sector arms stand one hole more apart than the holes that are counted, because the pin's
own hole is not counted.
"""

from __future__ import annotations

from fractions import Fraction

import pytest

from setupcheck.division import tables
from setupcheck.flow import load_job, prepare
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known
from setupcheck.quantities.index_table import IndexTable
from setupcheck.report.index_table import as_index_table

from .test_folded_harmonics import indexed

ROWS_OF_40_TO_1 = [
    # places, circle, whole turns, holes
    (60, 18, 0, 12),
    (60, 39, 0, 26),
    (72, 18, 0, 10),
    (72, 27, 0, 15),
    (36, 27, 1, 3),
    (65, 39, 0, 24),
    (45, 18, 0, 16),
    (48, 18, 0, 15),
    (50, 20, 0, 16),
    (100, 20, 0, 8),
    (25, 20, 1, 12),
    (33, 33, 1, 7),
    (7, 49, 5, 35),
    (360, 18, 0, 2),
    (40, 20, 1, 0),
    (20, 15, 2, 0),
]


def table_of(text: str) -> IndexTable:
    _, book = prepare(read_job_text(text, "job.yaml"))
    answer = book.get("divide.table", book.instances("setup")[0])
    assert isinstance(answer, Known)
    assert isinstance(answer.value, IndexTable)
    return answer.value


@pytest.mark.parametrize(("places", "circle", "turns", "holes"), ROWS_OF_40_TO_1)
def test_a_job_gets_the_row_of_the_trade(places: int, circle: int, turns: int, holes: int) -> None:
    table = table_of(indexed(40, places, circle=circle))
    assert {turns * circle + holes} == {line.moved for line in table.lines[1:]}
    assert [0] * (places + 1) == [line.off for line in table.lines]
    assert [Fraction(j, places) for j in range(places + 1)] == [line.angle for line in table.lines]
    # the same by hand: degrees of one hole times the holes turned
    assert Fraction(9, circle) * (turns * circle + holes) == Fraction(360, places)


def test_one_hole_of_18_is_half_a_degree_and_one_of_27_is_20_minutes() -> None:
    assert Fraction(1, 2) == 360 * tables.settings(720, 40 * 18)[1].angle
    assert Fraction(20, 60) == 360 * tables.settings(1080, 40 * 27)[1].angle


@pytest.mark.parametrize(("ratio", "degrees"), [(40, 9), (60, 6), (72, 5), (90, 4), (120, 3)])
def test_degrees_of_one_turn_of_the_crank(ratio: int, degrees: int) -> None:
    assert degrees == 360 * tables.settings(ratio, ratio)[1].angle


def test_forty_places_step_ten_gon_on_paper() -> None:
    lines = _printed(indexed(40, 40, circle=20))
    assert [f"{10 * j}.00000" for j in range(41)] == [line.split()[7] for line in lines]


def test_the_sector_arms_take_in_one_hole_more_than_spaces() -> None:
    loaded = read_job_text(indexed(40, 72, circle=18), "job.yaml")
    said = " ".join(as_index_table(loaded, prepare(loaded)[1]).split())
    assert "5/9 turn = 10 holes of 18; between the sector arms 10 spaces, 11 holes" in said


@pytest.mark.parametrize("count", [51, 53, 57, 61, 63, 67, 69, 71, 73, 127])
def test_counts_that_need_differential_indexing_are_rounded_and_told(count: int) -> None:
    """Common practice: these fit no circle of the usual three plates of a 40 : 1 head."""
    plates = (15, 16, 17, 18, 19, 20, 21, 23, 27, 29, 31, 33, 37, 39, 41, 43, 47, 49)
    text = indexed(40, count, circle=49).replace(
        "axis_runout: 0 um}}", f"axis_runout: 0 um, hole_circles: {list(plates)}}}}}"
    )
    loaded = read_job_text(text, "job.yaml")
    _, book = prepare(loaded)
    said = " ".join(as_index_table(loaded, book).split())
    assert "No circle of this head fits. To the nearest hole" in said
    best = tables.nearest_circles(40, count, plates)[0]
    assert f"{best[0]} holes" in said
    # by trying every hole of every circle, in floats
    tried = min(
        max(
            min(abs(j / count - hole / (40 * c)) for hole in (int(j / count * 40 * c), int(j / count * 40 * c) + 1))
            for j in range(count)
        )
        for c in plates
    )
    assert tried == pytest.approx(float(best[1]), abs=1e-12)


def _printed(text: str) -> list[str]:
    """The lines of the printed table."""
    loaded = read_job_text(text, "job.yaml")
    return [line for line in as_index_table(loaded, prepare(loaded)[1]).splitlines() if line.endswith("[ ]")]


def test_the_shipped_jobs_print_tables_that_close() -> None:
    from setupcheck.shipped import shipped

    for name, lines in (("spur-gear-on-mandrel", 41), ("index-plate", 25), ("rotator-worm-wheel", 73)):
        loaded = load_job(shipped(f"jobs/{name}.yaml"))
        told = as_index_table(loaded, prepare(loaded)[1])
        assert told.rstrip().endswith("closes.")
        assert lines == told.count("[ ]")
        assert max(map(len, told.splitlines())) <= 80
