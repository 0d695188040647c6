"""Rows of a division test as a spreadsheet leaves them: words for faces and directions, cells too many, stations read again."""

from __future__ import annotations

import math
from pathlib import Path

import pytest

from setupcheck.division.columns import BadCell, reader
from setupcheck.division.points import prepare
from setupcheck.errors import SetupcheckError
from tests.unit.division.few_points import written

BACK_AND_FORTH, OTHER_WAY = "back and forth", "the other way than its direction"


@pytest.mark.parametrize(
    ("column", "words", "number"),
    [
        ("direction", ("forward", "fwd", "f", "+", "up"), 1),
        ("direction", ("reverse", "rev", "r", "-", "down"), -1),
        ("face", ("left", "l", "1", "i"), 1),
        ("face", ("right", "r", "2", "ii"), 2),
    ],
)
def test_every_word_for_a_face_or_a_direction_means_its_own(column: str, words: tuple[str, ...], number: int) -> None:
    assert [reader(column)(word) for word in words] == [number] * len(words)
    with pytest.raises(BadCell):
        reader(column)("sideways")


def test_empty_cells_too_many_and_notes_too_few_do_no_harm(tmp_path: Path) -> None:
    found = written(tmp_path, "angle_deg,deviation_arcsec,note", "0,1,,", "90,2", "180,3,seen twice")
    assert [math.degrees(x) for x in found.station] == pytest.approx([0.0, 90.0, 180.0])
    assert list(found.line) == [2, 3, 4]


@pytest.mark.parametrize("row", ["90", "90,2,,7"])
def test_a_row_of_another_length_is_refused_with_its_line(tmp_path: Path, row: str) -> None:
    with pytest.raises(SetupcheckError, match=r"test\.csv:3: [14] cell"):
        written(tmp_path, "angle_deg,deviation_arcsec,note", "0,1,", row)


@pytest.mark.parametrize(
    ("angles", "said"),
    [
        ((0, 0, 90, 180, 270), ()),  # one station read again before going on: the pass goes one way
        ((0, 90, 180, 90, 270), (BACK_AND_FORTH,)),
        ((270, 180, 90, 0), (OTHER_WAY,)),
        ((90, 90, 90, 90), ()),  # nothing turned at all, so nothing went the other way
    ],
)
def test_a_station_read_again_is_no_way_back(tmp_path: Path, angles: tuple[int, ...], said: tuple[str, ...]) -> None:
    found = written(tmp_path, "angle_deg,deviation_arcsec,direction", *(f"{a},0.5,forward" for a in angles))
    limits = prepare(found, count=72, worm_ratio=None, start=0.0, turn=1).limits
    for words in (BACK_AND_FORTH, OTHER_WAY):
        assert any(words in one for one in limits) == (words in said), limits
