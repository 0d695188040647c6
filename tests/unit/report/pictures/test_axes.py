"""Scales, labels and texts that the pictures of curves share."""

from __future__ import annotations

import itertools
import math

import pytest

from setupcheck.report.pictures.axes import Scale, apart, round_step, shortened, told
from setupcheck.report.pictures.pitch import thinned
from setupcheck.report.svg import room


def test_ticks_are_round_and_lie_within_the_scale() -> None:
    assert [50.0, 100.0, 150.0, 200.0] == Scale(11.0, 209.0, 60.0, 20.0).ticks(6)
    assert [-20.0, -10.0, 0.0, 10.0, 20.0] == Scale(-21.6, 21.6, 72.0, 26.0).ticks(8)
    for span in (1e-4, 0.3, 7.0, 1e5):
        assert len(Scale(0.0, span, 0.0, 1.0).ticks(5)) <= 6
        assert 1.0 <= round_step(span, 5) / 10.0 ** math.floor(math.log10(round_step(span, 5)) + 1e-9) <= 5.0 + 1e-9


def test_labels_keep_their_distance_their_order_and_the_field() -> None:
    found = apart([30.0, 10.0, 10.5, 60.0, 59.0], 8.0, 60.0, 4.0)
    assert found[0] == 30.0
    ordered = sorted(found)
    assert all(b - a >= 4.0 - 1e-9 for a, b in itertools.pairwise(ordered))
    assert 8.0 <= ordered[0] and ordered[-1] <= 60.0
    assert found[1] < found[2] < found[0] < found[4] < found[3]


def test_a_text_too_wide_for_its_room_ends_in_an_ellipsis_and_fits() -> None:
    text = shortened("\x1b[31mrun-out of the hub in a four-jaw chuck", 40.0)
    assert text.endswith("\u2026") and "\x1b" not in text and room(text, 3.0) <= 40.0
    assert shortened("hub", 40.0) == "hub"
    assert len(told((0.0, 0.0), "word " * 200, 60.0, most=3)) == 3


@pytest.mark.parametrize("count", [1, 119, 120, 121, 5000])
def test_a_thinned_curve_keeps_its_highest_and_lowest_point(count: int) -> None:
    rows = [(float(i), math.sin(i * 0.7) + i / 1000.0) for i in range(count)]
    kept = thinned(rows, (min, max), 120)
    assert len(kept) <= 120 and kept == sorted(kept)
    assert max(v for _, v in kept) == max(v for _, v in rows)
    assert min(v for _, v in kept) == min(v for _, v in rows)
