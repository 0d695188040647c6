"""Index figures of a wheel that runs with its worm: what the ring's teeth are off, and what each gap adds within its pitch.

A worm that stops anywhere sees both: the ring's errors change from tooth to tooth, the error of a gap that is no conjugate one
repeats with every tooth. Lengths mm, angles rad.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure, Push, Tooth, merged
from setupcheck.record import record

if TYPE_CHECKING:
    from setupcheck.ledger.draws import Draws

Reals = NDArray[np.floating]


@record(eq=False)
class AsItRuns:
    """An index figure with the transmission error of its gaps.

    ring     figure of the teeth alone, its factor from arc to the figure's unit
    planned  the error of a gap cut as planned, its known mean as an arc [mm]
    off      what each setting may be off its plan, figures that start at zero [mm or rad]
    rises    how much error each of them adds [arc for each mm or rad]
    The range of a sum is at most the sum of the ranges. Between plan and worst, each setting's error is taken as straight,
    which it stays below as it grows faster and faster; two settings off together may pass their sum by a little, all four stay
    below it (held at corners in the tests).  Source: geometry, derived here.
    """

    ring: Tooth
    planned: Cause
    off: tuple[Figure, ...]
    rises: tuple[float, ...]
    signed: bool = False

    def _added(self) -> list[tuple[Figure, float]]:
        return [(one, rise * self.ring.factor) for one, rise in zip(self.off, self.rises, strict=True)]

    def base(self) -> float:
        return self.ring.base() + sum(rise * one.base() for one, rise in self._added())

    def within_a_pitch(self) -> float:
        """Most that the gaps add within their pitch, in the figure's unit."""
        return sum(rise * one.base() for one, rise in self._added()) + sum(push.up for push in self._of_the_gaps())

    def _of_the_gaps(self) -> list[Push]:
        """What the gaps add within their pitch, in the figure's unit: the planned error, and what settings may add."""
        known = self.planned.mean.real * self.ring.factor
        settings = [
            [Push(p.cause, rise * p.down, rise * p.up, rise * p.known) for p in one.pushes()]
            for one, rise in self._added()
            if rise > 0.0
        ]
        return merged([Push(self.planned, 0.0, known, known)], *settings)

    def pushes(self) -> list[Push]:
        return merged(self.ring.pushes(), self._of_the_gaps())

    def undetermined(self) -> tuple[str, ...]:
        return tuple(dict.fromkeys(m for one in (self.ring, *self.off) for m in one.undetermined()))

    def sample(self, draws: Draws) -> Reals:
        total = self.ring.sample(draws) + self.planned.mean.real * self.ring.factor
        for one, rise in self._added():
            if rise > 0.0:
                total = total + rise * one.sample(draws)
        return np.asarray(total)
