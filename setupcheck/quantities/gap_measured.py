"""The gap of a finished wheel from its size measured over balls: what then counts in place of insert, depth and growth. mm."""

from __future__ import annotations

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Pattern
from setupcheck.notation import show
from setupcheck.quantities.book import Open
from setupcheck.quantities.causes import Entry, size_error
from setupcheck.quantities.drive import Drive, WheelCut
from setupcheck.quantities.shop import Floor
from setupcheck.record import record
from setupcheck.worm import over_balls

PATH = "mesh.over_balls"
NAME = "wheel measured over balls"


@record
class MeasuredGap:
    """The gap at the reference circle as measured.

    size, ball    as measured, and of one ball;  uncertainty  of the size, expanded
    gap           arc at the reference circle;  per_size  its change per mm of size, below zero
    error         of the gap, from the uncertainty of the size
    """

    size: float
    ball: float
    uncertainty: float
    gap: float
    per_size: float
    error: Account

    def told(self) -> str:
        """What the gap follows from, in words."""
        return (
            f"{show(self.size, 'mm', 4)} over balls of {show(self.ball, 'mm', 3)}, uncertainty "
            f"{show(self.uncertainty, 'um', 1)}; of each um of it the gap takes {show(self.per_size, '1', 3)} um"
        )

    def account(self, pattern: Pattern | None, slope: float) -> Account:
        """The mean gap round the wheel: the two that were measured may each be off it by what single gaps scatter.

        slope  of the gap over its depth, 2 tan(alpha).  Source: worst case; the mean of two gaps is off by no more than one.
        """
        total = self.error.plus_constant(self.gap)
        for scatter in pattern.scatter if pattern is not None else ():
            if scatter.along == "radial":
                name = f"{NAME}: these two gaps beside the others"
                total += Account.of(Cause(name, "length", high=scatter.bound, mode="derived", paths=(PATH,))) * slope
        return total


def measured_gap(floor: Floor, found: Drive, cut: WheelCut | None) -> MeasuredGap | Open | None:
    """The gap measured; None where no size over balls is. A size that the wheel cannot have is open, with its sizes.

    What the size sees: insert, depth, growth by joints made before, at 20 degC. What it does not see: an eccentric ring (two
    balls and a micrometer know no axis, with an odd count no more than with an even one), and form: both stay causes of
    their own.  The ball has to touch between the gap's bottom and its mouth, and to clear the bottom.
    Source: worm.over_balls turned round; the uncertainty times ds2/dM.
    """
    mesh = floor.loaded.job.mesh
    given, ball = (mesh.over_balls, mesh.ball_used) if mesh is not None else (None, None)
    if given is None or given.measured is None:
        return None
    if ball is None:
        return Open((f"{PATH}.ball",))
    if given.uncertainty is None:
        return Open((f"{PATH}.uncertainty",))
    size, error = size_error(given, Entry(NAME, None, PATH, ""))
    both = f"{floor.size(size)} over balls of {floor.size(ball)}"
    try:
        at = over_balls.gap_over_balls(
            size=size,
            starts=found.starts,
            axial_module=found.module,
            teeth=found.teeth,
            pitch_diameter=found.pitch_diameter,
            pressure_angle=found.pressure_angle,
            ball=ball,
        )
    except ValueError:
        return Open(because=f"{both} fits no gap of this wheel: measure it again, and the ball")
    if cut is not None:
        root, tip = 2.0 * cut.root, 2.0 * (cut.root + (cut.cut.depth or 0.0))
        if size - 2.0 * ball <= root or at.contact_diameter <= root:
            return Open(because=f"{both} would rest on the bottom of the gap, at {floor.size(root)}: take larger balls")
        if at.contact_diameter >= tip:
            return Open(because=f"{both} would sit on the tips of the teeth, at {floor.size(tip)}: take smaller balls")
    return MeasuredGap(size, ball, given.uncertainty, at.gap, at.per_size, error * at.per_size)
