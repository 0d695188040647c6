"""Figures of the ledger against sums made place by place, in plain complex numbers: nothing of the ledger's own arithmetic.

Every error here is known (a mean without spread), so that a single draw is exact; bounds are then held against the same sums
with each error at its end. All values are invented. mm, rad.
"""

from __future__ import annotations

import cmath
import math

import pytest

from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.figures import (
    FaceStock,
    MidPlane,
    OverATurn,
    Stock,
    Tooth,
    ToothRunOut,
)
from setupcheck.ledger.gaps import GapSymmetry, RunOff
from setupcheck.ledger.holes import HoleChord, HolePosition, PitchCircle
from setupcheck.ledger.route import Pattern, Scatter

from .seven_places import (
    ALPHA,
    COUNT,
    LEAN,
    NEAR,
    OFFSET,
    OUTWARDS,
    RADIUS,
    drawn,
    index_arcs,
    known,
    level,
    pattern,
    places,
    steps,
)


@pytest.mark.parametrize("turn", [1, -1])
@pytest.mark.parametrize("stepwise", [False, True])
def test_gap_centres_are_moved_across_their_own_direction(turn: int, stepwise: bool) -> None:
    ring = pattern(turn)
    arcs = []
    for theta, own in zip(places(turn), index_arcs(turn), strict=True):
        across = (OFFSET * (1j * cmath.exp(1j * theta)).conjugate()).real  # component of e along the tangent
        arcs.append(across + own)
    exact = steps(arcs) if stepwise else max(arcs) - min(arcs)
    found = drawn(Tooth(known("e", OFFSET), ring, flank=False, stepwise=stepwise, factor=2.5))
    assert found == [pytest.approx(2.5 * exact, **NEAR)]


@pytest.mark.parametrize("turn", [1, -1])
@pytest.mark.parametrize("stepwise", [False, True])
@pytest.mark.parametrize("driven", [False, True])
def test_flanks_are_moved_along_their_normals(turn: int, stepwise: bool, driven: bool) -> None:
    """A flank's normal stands at alpha to the tangent, at the middle of the gap or half a gap beside it; the arc is the
    movement along the normal over cos(alpha). A gap cut deeper by r gives each flank r tan(alpha), one on either side."""
    ring = pattern(turn)
    worst = 0.0
    for side in (1, -1):
        arcs = []
        for j, theta in enumerate(places(turn)):
            where = theta + (0.0 if driven else side * math.pi / (2.0 * COUNT))
            normal = 1j * cmath.exp(1j * where) * cmath.exp(1j * side * ALPHA)
            moved = (OFFSET * normal.conjugate()).real / math.cos(ALPHA)
            arcs.append(moved + index_arcs(turn)[j] + side * math.tan(ALPHA) * OUTWARDS[j])
        worst = max(worst, steps(arcs) if stepwise else max(arcs) - min(arcs))
    found = drawn(Tooth(known("e", OFFSET), ring, flank=True, stepwise=stepwise, driven=driven))
    assert found == [pytest.approx(worst, **NEAR)]


@pytest.mark.parametrize("turn", [1, -1])
def test_a_ball_in_the_gaps_reads_the_component_towards_each_and_what_it_is_cut_deeper(turn: int) -> None:
    reads = [(OFFSET * cmath.exp(-1j * theta)).real + out for theta, out in zip(places(turn), OUTWARDS, strict=True)]
    found = drawn(ToothRunOut(known("e", OFFSET), pattern(turn), 0.7))
    assert found == [pytest.approx(0.7 * (max(reads) - min(reads)), **NEAR)]


@pytest.mark.parametrize("turn", [1, -1])
@pytest.mark.parametrize("clocked", [True, False])
def test_holes_stand_off_where_they_belong_by_the_longest_vector(turn: int, clocked: bool) -> None:
    ring = pattern(turn, radial=level("radius", 0.0117))
    arcs = index_arcs(turn)
    angle = 0.00023
    middle = (max(arcs) + min(arcs)) / 2.0
    round_by = RADIUS * angle if clocked else -middle
    off = [
        abs(OFFSET + cmath.exp(1j * theta) * (0.0117 + out + 1j * (arc + round_by)))
        for theta, out, arc in zip(places(turn), OUTWARDS, arcs, strict=True)
    ]
    found = drawn(HolePosition(known("e", OFFSET), ring, level("clock", angle) if clocked else None))
    assert found == [pytest.approx(2.0 * max(off), **NEAR)]


@pytest.mark.parametrize("turn", [1, -1])
def test_chords_and_circle_of_holes_as_exact_points_have_them(turn: int) -> None:
    ring = pattern(turn, radial=level("radius", 0.0117))
    points = [
        cmath.exp(1j * theta) * (RADIUS + 0.0117 + out) * cmath.exp(1j * arc / RADIUS)
        for theta, out, arc in zip(places(turn), OUTWARDS, index_arcs(turn), strict=True)
    ]
    chords = [abs(a - b) for a, b in zip(points, [*points[1:], points[0]], strict=True)]
    nominal = 2.0 * RADIUS * math.sin(math.pi / COUNT)
    second_order = 4.0 * 0.02**2 / RADIUS
    assert drawn(HoleChord(ring)) == [pytest.approx(max(abs(c - nominal) for c in chords), abs=second_order)]
    mean = sum(OUTWARDS) / COUNT + 0.0117
    assert drawn(PitchCircle(ring)) == [pytest.approx(2.0 * mean, **NEAR)]
    assert PitchCircle(ring).base() == pytest.approx(2.0 * mean)


@pytest.mark.parametrize("turn", [1, -1])
def test_the_mid_plane_of_a_leaning_ring(turn: int) -> None:
    heights = [0.02 - RADIUS * (LEAN.conjugate() * cmath.exp(1j * theta)).real for theta in places(turn)]
    found = drawn(MidPlane(level("a", 0.02), known("t", LEAN), pattern(turn)))
    assert found == [pytest.approx(max(map(abs, heights)), **NEAR)]


@pytest.mark.parametrize("turn", [1, -1])
def test_gaps_beside_and_askew_to_the_axis(turn: int) -> None:
    """The cutter stands 0.005 beside and 0.0003 rad askew in the frame of every gap; both ends of 2 x 8 mm are looked at."""
    low, high = OFFSET - 8.0 * LEAN, OFFSET + 8.0 * LEAN
    beside = [
        abs((d * (1j * cmath.exp(1j * theta)).conjugate()).real + turn * (0.005 + way * 8.0 * 0.0003))
        for way, d in ((-1.0, low), (1.0, high))
        for theta in places(turn)
    ]
    ends = (known("low", low), known("high", high))
    found = GapSymmetry(ends, 8.0, level("aside", 0.005), level("askew", 0.0003), pattern(turn))
    assert drawn(found) == [pytest.approx(2.0 * max(beside), **NEAR)]
    assert [f.offsets for f in found.places()] == [(ends[0],), (ends[1],)]
    for deep, arm in ((True, 16.0), (False, 16.0 * math.cos(0.5))):
        u = [cmath.exp(1j * theta) for theta in places(turn)]
        lean = [(LEAN * (x if deep else 1j * x).conjugate()).real for x in u]
        own = 16.0 * 0.0003 * (1 if deep else turn)
        run = drawn(RunOff(known("t", LEAN), level("askew", 0.0003), 16.0, 0.5, deep, pattern(turn)))
        assert run == [pytest.approx(max(abs(arm * x + own) for x in lean), **NEAR)]


def test_a_length_that_swings_over_a_turn_has_two_ends() -> None:
    figure = OverATurn(level("a", 0.02), known("e", OFFSET), 0.8)
    assert drawn(figure) == [pytest.approx(0.02 + s * 0.8 * abs(OFFSET), **NEAR) for s in (-1.0, 1.0)]
    ring = Pattern(
        3, 10.0, outwards=(0.0, 0.0, 0.0), scatter=(Scatter(Cause("own", "length", high=0.003), "radial", 0.003),)
    )
    low, high = figure.sample(Draws(2000)), OverATurn(level("a", 0.02), Account(), 0.8, ring).sample(Draws(2000))
    assert low.shape == high.shape == (2, 2000)
    assert 0.02 - 0.8 * 0.003 <= high[0].min() < 0.02 - 0.7 * 0.003
    assert 0.02 + 0.7 * 0.003 < high[1].max() <= 0.02 + 0.8 * 0.003 * (1 + 1e-6)
    (push,) = OverATurn(real(0.02), Account(), 0.8, ring).pushes()
    assert (push.down, push.up) == pytest.approx((0.0024, 0.0024))


def test_stock_is_what_the_offset_leaves() -> None:
    assert drawn(Stock(0.25, (known("e", OFFSET), known("f", 2.0 * OFFSET)))) == [
        pytest.approx(0.25 - 2.0 * abs(OFFSET), **NEAR)
    ]
    figure = Stock(0.25, (Account.of(Cause("e", "disc", high=0.03)),))
    assert (figure.base(), [(p.down, p.up) for p in figure.pushes()]) == (0.25, [(0.03, 0.0)])
    face = FaceStock(real(0.3) + level("a", 0.01), known("t", LEAN), 20.0)
    assert drawn(face) == [pytest.approx(0.31 - 20.0 * abs(LEAN), **NEAR)]
