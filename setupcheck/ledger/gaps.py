"""Figures of single gaps: does each lie on the axis, and along it? For splines, slots and bevel teeth. mm, rad.

The work is indexed about one axis and the cutter stands still, so what the cutter stands beside that axis (`aside`), and what
the axis lies askew to the cutter's travel (`off_sideways`, `off_deep`), is alike in every gap, in the gap's own frame. With the
ring's axis off the reference by d(z) and leaning by t, and u_j = exp(i theta_j) towards gap j:
  middle plane of gap j beside the reference   s_j(z) = Im(conj(u_j) d(z)) + aside + off_sideways (z - z_mid)
  run-off sideways over the length L           L |Im(conj(u_j) t) cos(cone) + off_sideways|
  run-off of the bottom over the length L      L |Re(conj(u_j) t) + off_deep|
An error of dividing turns a gap about the axis and leaves its middle plane on it. The signs of aside and off_* do not matter over
a turn: gap j has one over against it, to half a pitch.
Source: small rigid displacements, derived here; the tests hold it against exact planes cut in an exactly indexed part.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account
from setupcheck.ledger.figures import Push, Reals, merged, real_pushes, vector_pushes
from setupcheck.ledger.route import Pattern, Scatter
from setupcheck.record import record

if TYPE_CHECKING:
    from setupcheck.ledger.draws import Draws


def _both_ways(account: Account, factor: float) -> tuple[float, list[Push]]:
    """(size of the known value, pushes) of a real account that counts whichever way it goes."""
    middle, found = real_pushes(account, factor)
    return abs(middle), [Push(p.cause, 0.0, p.size) for p in found]


def _open(*accounts: Account) -> tuple[str, ...]:
    return tuple(dict.fromkeys(m for a in accounts for m in a.undetermined()))


@record(eq=False)
class GapSymmetry:
    """Twice the farthest that a gap's middle plane stands beside the axis, at either end [mm]: the zone of ISO 1101.

    offsets       of the ring's axis from the reference at its low and its high end;  half  of its length along the gap [mm]
    aside         of every gap's middle from the axis it was indexed about;  off_sideways  run-off of every gap [rad]
    """

    offsets: tuple[Account, ...]
    half: float
    aside: Account
    off_sideways: Account
    pattern: Pattern
    signed: bool = False

    def places(self) -> tuple[GapSymmetry, ...]:
        """Its ends, each as a figure of its own."""
        return tuple(
            GapSymmetry((offset,), self.half, self.aside, self.off_sideways, self.pattern) for offset in self.offsets
        )

    def _own(self) -> list[Scatter]:
        """What each gap stands off its place round the axis as a shift, not as a turn."""
        return [s for s in self.pattern.scatter if s.along in ("tangential", "coordinate")]

    def _worse(self) -> Account:
        return max(self.offsets, key=Account.largest)

    def base(self) -> float:
        known = _both_ways(self.aside, 2.0)[0] + _both_ways(self.off_sideways, 2.0 * self.half)[0]
        return vector_pushes(self._worse(), 2.0)[0] + known

    def pushes(self) -> list[Push]:
        along = _both_ways(self.off_sideways, 2.0 * self.half)[1]
        own = [Push(s.cause, 0.0, 2.0 * s.bound * max(map(abs, s.around), default=1.0)) for s in self._own()]
        return merged(vector_pushes(self._worse(), 2.0)[1], _both_ways(self.aside, 2.0)[1], along, own)

    def undetermined(self) -> tuple[str, ...]:
        mine = tuple(s.cause.missing for s in self._own() if s.cause.law == "undetermined")
        return tuple(dict.fromkeys((*_open(*self.offsets, self.aside, self.off_sideways), *mine)))

    def sample(self, draws: Draws) -> Reals:
        around, turn = teeth.angles(self.pattern), float(self.pattern.turn)
        own = [draws.scatter(s, self.pattern) * turn for s in self._own()]
        ends = zip((-1.0, 1.0), self.offsets, strict=True) if len(self.offsets) == 2 else ((0.0, self.offsets[0]),)
        worst = np.zeros(draws.trials)
        for way, offset in ends:
            shift = draws.real(self.aside) + way * self.half * draws.real(self.off_sideways)
            beside = teeth.waves(draws.account(offset) * -1j, around) + turn * shift[:, None]
            for one in own:
                beside = beside + one
            worst = np.maximum(worst, np.abs(beside).max(axis=1))
        return np.asarray(2.0 * worst)


@record(eq=False)
class RunOff:
    """How far the worst gap runs off the axis over its length [mm], sideways or towards its bottom.

    lean    of the ring to the reference;  straight  real account: run-off of every gap to the ring's own axis [rad]
    length  along the gap [mm];  cone  angle of its bottom to the axis [rad];  deep  towards the bottom, else sideways
    """

    lean: Account
    straight: Account
    length: float
    cone: float
    deep: bool
    pattern: Pattern
    signed: bool = False

    def _arm(self) -> float:
        """What a lean of the ring gives over the whole gap [mm/rad]; the bottom of a cone turns with the axis."""
        return self.length if self.deep else self.length * math.cos(self.cone)

    def base(self) -> float:
        return vector_pushes(self.lean, self._arm())[0] + _both_ways(self.straight, self.length)[0]

    def pushes(self) -> list[Push]:
        return merged(vector_pushes(self.lean, self._arm())[1], _both_ways(self.straight, self.length)[1])

    def undetermined(self) -> tuple[str, ...]:
        return _open(self.lean, self.straight)

    def sample(self, draws: Draws) -> Reals:
        lean = draws.account(self.lean) * (1.0 if self.deep else -1j)
        low, high = teeth.wave_ends(lean, teeth.angles(self.pattern))
        own = self.length * draws.real(self.straight)
        if not self.deep:
            own = own * self.pattern.turn
        return np.asarray(np.maximum(np.abs(self._arm() * low + own), np.abs(self._arm() * high + own)))
