"""A wheel measured over balls, or with its worm, whose backlash only stands beside its limits: depth, or the axes. mm."""

from __future__ import annotations

import math

from setupcheck.ledger.figures import OverATurn
from setupcheck.quantities import backlash_read
from setupcheck.quantities.gap_measured import PATH
from setupcheck.quantities.judged import Result
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

FINEST = 0.001
"""What is still cut deeper, or moved [mm]; 0.1 thou in an inch file. Source: our choice, the step of a fine dial."""


@record
class CutAgain:
    """What the finished wheel still lacks on the radius [mm]: above zero deeper gaps, below zero axes closer together.

    in_place  read in its housing, where the axes may move either way and deeper gaps are the second choice
    """

    deeper: float
    path: str = PATH
    in_place: bool = False


def cut_again(floor: Floor, result: Result) -> CutAgain | None:
    """The depth that puts the backlash of a measured wheel in the middle of its limits, or just inside its only one.

    Depth still to be taken: what the backlash lacks over 2 tan(alpha), its change per mm of depth or of centre distance.  None
    for every other figure, where no wheel was measured, and where the span is wider than the limits are apart.
    Source: rack rolling on the wheel's reference circle.
    """
    mesh, figure, stack = floor.loaded.job.mesh, result.figure, result.stack
    if mesh is None or not isinstance(figure, OverATurn) or stack.require.what != "backlash":
        return None
    in_place = backlash_read.ruling(floor, stack) is not None
    if mesh.over_balls is None and not in_place:
        return None
    worst = result.combined.worst
    up = (stack.low - worst.low) / figure.factor if stack.low is not None else -math.inf
    down = (stack.high - worst.high) / figure.factor if stack.high is not None else math.inf
    step = 2.54 * FINEST if floor.loaded.job.units == "in" else FINEST
    if math.isfinite(up + down):
        deeper = round((up + down) / 2.0 / step) * step
    else:
        deeper = math.ceil(up / step) * step if math.isfinite(up) else math.floor(down / step) * step
    if not up <= deeper <= down or deeper == 0.0:
        return None
    return CutAgain(deeper, backlash_read.PATH, True) if in_place else CutAgain(deeper)
