"""A gap widened for backlash against one computed for a thicker thread, and where the corner of a tooth takes over."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from setupcheck.worm.conjugate import Pair
from setupcheck.worm.gap_insert import end_takes_over, envelope_insert, mid_plane_insert, sections, widened
from setupcheck.worm.insert_profile import contact_begins, smallest_hollow
from tests.unit.worm.wheels import blank_of, cut_of, hollow_where_contact_begins, pair_of


@pytest.mark.parametrize("of", [envelope_insert, mid_plane_insert])
@pytest.mark.parametrize("by", [0.02, 0.1, -0.05])
def test_a_widened_gap_is_that_of_a_thicker_thread(of, by: float) -> None:  # type: ignore[no-untyped-def]
    pair = pair_of(1)
    thicker = Pair(
        thread=replace(pair.thread, thickness=pair.thread.thickness + by),
        teeth=pair.teeth,
        centre_distance=pair.centre_distance,
    )
    wide = of(widened(sections(pair, blank_of(1)), by), cut_of(1))
    direct = of(sections(thicker, blank_of(1)), cut_of(1))
    assert np.interp(wide.heights, direct.heights, direct.right) == pytest.approx(wide.right, abs=2e-5)
    plain = of(sections(pair, blank_of(1)), cut_of(1))
    # a turned flank moves more at the top than at the tip: no parallel shift
    moved = wide.right - np.interp(wide.heights, plain.heights, plain.right)
    assert abs(moved[-1]) > abs(moved[0])


def test_a_width_that_is_no_number_is_refused() -> None:
    with pytest.raises(ValueError, match="0 where it fits the thread"):
        widened(sections(pair_of(1), blank_of(1)), math.nan)


@pytest.mark.parametrize(("radius", "bend"), [(29.75, 0.7), (35.0, 1.0)])
def test_below_the_corner_the_flank_is_smooth_and_above_it_bends(radius: float, bend: float) -> None:
    gap, cut = sections(pair_of(1), blank_of(1)), cut_of(1, radius)
    insert = envelope_insert(gap, cut)
    over, start = end_takes_over(gap, cut), contact_begins(gap.pair, cut)
    assert start < over < insert.heights[-1]
    smooth = smallest_hollow(insert, side=1, live_from=start, live_to=over).radius
    whole = smallest_hollow(insert, side=1, live_from=start)
    assert smooth > 7.0
    assert whole.radius <= bend * smooth
    if bend < 1.0:  # the small cutter's envelope bends where an end of the face takes over, and nowhere else
        assert whole.height == pytest.approx(over, abs=0.1)
    else:
        in_the_middle = hollow_where_contact_begins(50.0, reach=2.5, pressure_angle=math.radians(20.0))
        assert in_the_middle == pytest.approx(smooth, rel=0.01)
