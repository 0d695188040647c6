"""Teeth and holes: what eccentricity, lean and division errors do to each place round the part. mm, rad.

Gap j is the j-th cut, at theta_j = start + turn 2 pi (j - 1)/N. With the axis of the ring off by e towards phi:
  gap centre   delta_j = e sin(phi - theta_j) + r Delta_j
  one flank    delta_j = (e / cos alpha) sin(phi - theta_j -+ (alpha + pi/2N)) + r Delta_j   (at fixed radius, as pitch is
               defined; the flank stands half a gap from the middle)
  wheel angle  the same with alpha alone: a worm touches the flank along its line of action (r Delta_j as an angle)
  mid-plane    a - Re(conj(t) r exp(i theta_j))
A gap that runs at the lead angle gamma turns the wobble into pitch: i h tan(gamma) r t (h = +1 right-hand) joins e at the
gap centre; on a flank it comes without the 1/cos alpha and the phase, for it moves the gap along (`oblique_turn`).
Sources: geometry, derived here; definitions of single and cumulative pitch deviation as in ISO 1328-1:1995; an exact
involute in the tests agrees within 0.03 um at e = 20 um.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable, Iterator, Sequence

import numpy as np
from numpy.typing import NDArray

from setupcheck.ledger.account import Account
from setupcheck.ledger.route import Pattern, Scatter
from setupcheck.record import record

Reals = NDArray[np.floating]
Complexes = NDArray[np.complexfloating]


BLOCK = 100_000
"""Places worked on at a time, so that a block stays in the processor's cache. Source: measured here."""


def angles(pattern: Pattern) -> Reals:
    """Directions theta_j of all places in the part frame [rad], shape (count,)."""
    return np.asarray(pattern.start + pattern.turn * 2.0 * np.pi * np.arange(pattern.count) / pattern.count)


def folded(harmonic: int, count: int) -> int:
    """Waves round the work that an error of `harmonic` waves per turn leaves on `count` teeth: min(h mod N, N - h mod N).

    Source: sampling at N equal steps (aliasing), derived here.

    >>> folded(40, 39), folded(40, 40), folded(40, 72)
    (1, 0, 32)
    """
    rest = harmonic % count
    return min(rest, count - rest)


def backlash_swing(eccentricity: float, pressure_angle: float) -> float:
    """Change of backlash over one turn, peak to peak [mm]: 4 e tan(alpha). Source: geometry (both flanks close by e tan).

    >>> round(backlash_swing(0.020, math.radians(20.0)), 4)
    0.0291
    """
    return 4.0 * eccentricity * math.tan(pressure_angle)


def division_arcs(
    pattern: Pattern,
    index_waves: Sequence[Reals | Complexes],
    shaped: list[Reals],
    each: list[Reals],
    trials: int,
) -> Reals:
    """Arc errors r Delta_j of all places for all trials [mm], shape (trials, count), places lying apart in memory.

    index_waves  one array (trials,) per `pattern.periodic`; shaped one array (trials,) per `pattern.shaped` [rad]
    each         per-place scatters, arrays (trials, count), already as arcs [mm]; the first is used up as the sum
    """
    theta = 2.0 * np.pi * np.arange(pattern.count) / pattern.count
    shapes: list[Reals] = [np.zeros(pattern.count)]
    values: list[Reals] = [np.zeros(trials)]
    for periodic, wave in zip(pattern.periodic, index_waves, strict=True):
        shapes += [np.cos(periodic.harmonic * theta), np.sin(periodic.harmonic * theta)]
        values += [wave.real, wave.imag]
    for one, value in zip(pattern.shaped, shaped, strict=True):
        shapes.append(np.asarray(one.shape))
        values.append(value)
    if pattern.rounding:
        shapes.append(np.asarray(pattern.rounding))
        values.append(np.ones(trials))
    basis = (np.stack(shapes, axis=1) * (pattern.radius * pattern.turn)).astype(np.float32)
    parts = np.stack(values).astype(np.float32)
    arcs = each[0].T if each else np.zeros((pattern.count, trials), dtype=np.float32)
    for scatter in each[1:]:
        arcs += scatter.T
    if pattern.turn < 0:
        np.negative(arcs, out=arcs)
    for here, product in _products(basis, parts):
        arcs[:, here] += product
    return arcs.T


def _products(basis: Reals, parts: Reals) -> Iterator[tuple[slice, Reals]]:
    """basis @ parts, block by block of the columns of `parts`, each time in the same memory: read it before the next."""
    width, trials = max(1, BLOCK // len(basis)), parts.shape[1]
    room = np.zeros((len(basis), width), dtype=np.float32)
    for start in range(0, trials, width):
        here = slice(start, min(start + width, trials))
        with np.errstate(invalid="ignore"):  # a kernel may run over what lies beside its operands, and warn of that
            product = np.matmul(basis, parts[:, here], out=room[:, : here.stop - start])
        yield here, product


def waves(vectors: Complexes, at: Reals) -> Reals:
    """Re(X exp(-i theta)) for every vector and angle, shape (len(vectors), len(at)), places lying apart in memory."""
    return np.concatenate([part.T.copy(order="K") for _, part in _waves(vectors, at)])


def _waves(vectors: Complexes, at: Reals) -> Iterator[tuple[slice, Reals]]:
    """The same, block by block of the vectors, shape (len(at), so many), each time in the same memory."""
    basis = np.stack([np.cos(at), np.sin(at)], axis=1).astype(np.float32)
    return _products(basis, np.stack([vectors.real, vectors.imag]).astype(np.float32))


def figure_of(
    figure: Callable[[Reals], Reals], vectors: Sequence[Complexes], at: Reals, added: Sequence[Reals]
) -> Reals:
    """Largest over the flanks of figure(waves(vectors, at) + added), one value a trial.

    figure   of every trial's places: `ranges` or `largest_steps`
    vectors  one array (trials,) a flank;  added  one array (trials, len(at)) a flank
    """
    found: Reals | None = None
    for vector, more in zip(vectors, added, strict=True):
        own = np.empty(len(vector), dtype=np.float32)
        for here, flank in _waves(vector, at):
            flank += more.T[:, here]
            own[here] = figure(flank.T)
        found = own if found is None else np.maximum(found, own)
    assert found is not None, "teeth have at least one flank"
    return found


def wave_ends(vectors: Complexes, at: Reals) -> tuple[Reals, Reals]:
    """Lowest and highest of Re(X exp(-i theta)) over the angles, each of shape (len(vectors),)."""
    low, high = np.empty((2, len(vectors)), dtype=np.float32)
    for here, part in _waves(vectors, at):
        part.min(axis=0, out=low[here])
        part.max(axis=0, out=high[here])
    return low, high


def flank_turn(pattern: Pattern, *, side: int, driven: bool) -> complex:
    """Factor f that makes of an eccentricity X the wave of one flank, Im(f X exp(-i theta_j)).

    side  +1 (counter-clockwise flank) or -1: (e / cos alpha) sin(phi - theta - side (alpha + pi/2N)) at fixed radius,
          (e / cos alpha) sin(phi - theta - side alpha) `driven` by a worm on that flank; 0, the gap centre: e sin(phi - theta)

    >>> ring = Pattern(90, 90.0, pressure_angle=math.radians(20.0))
    >>> round(2.0 * 0.020 * abs(flank_turn(ring, side=1, driven=False)), 5)      # F_p = 2 e / cos alpha
    0.04257
    """
    if side == 0:
        return 1 + 0j
    alpha = pattern.pressure_angle or 0.0
    away = alpha if driven else alpha + math.pi / (2.0 * pattern.count)
    return cmath.exp(-1j * side * away) / math.cos(alpha)


def oblique(lean: Account, pattern: Pattern, *, lead_angle: float, right_hand: bool) -> Account:
    """Eccentricity that a lean seems to be where the gaps are oblique: i h tan(gamma) r t [mm], h = +1 right-hand.

    A gap that wobbles along the axis by w and runs at the lead angle gamma shifts by -+ w tan(gamma) in the mid-plane.
    lead_angle  of the worm at its pitch point [rad], 0 for spur teeth.  Source: geometry, derived here.
    """
    return lean * (1j * (1.0 if right_hand else -1.0) * math.tan(lead_angle) * pattern.radius)


def oblique_turn(pattern: Pattern, *, side: int, driven: bool) -> complex:
    """Factor that makes of an `oblique` account the wave of one flank, as `flank_turn` does of an eccentricity.

    The wobble counts where the flank is probed, half a gap b = pi/2N from the middle, and moves the whole straight gap
    across:  exp(-i side b) (cos b - tan(alpha) sin b);  a worm touches the flank at 1 + i side b cos(alpha) e^(i side alpha)
    of the radius on its line of action: the conjugate of that.  Source: geometry, derived here.
    """
    if side == 0:
        return 1 + 0j
    alpha, half = pattern.pressure_angle or 0.0, math.pi / (2.0 * pattern.count)
    if driven:
        return (1.0 + 1j * side * half * math.cos(alpha) * cmath.exp(1j * side * alpha)).conjugate()
    return cmath.exp(-1j * side * half) * (math.cos(half) - math.tan(alpha) * math.sin(half))


def ranges(arcs: Reals) -> Reals:
    """max - min over all places, shape (trials,)."""
    return np.asarray(arcs.max(axis=1) - arcs.min(axis=1))


def largest_steps(arcs: Reals) -> Reals:
    """Largest |step| between neighbours, the closing one included, shape (trials,)."""
    steps = np.diff(arcs, axis=1)
    between = np.abs(steps, out=steps).max(axis=1, initial=0.0)
    return np.asarray(np.maximum(between, np.abs(arcs[:, 0] - arcs[:, -1])))


@record
class Gain:
    """Worst-case factor of each kind of error on one tooth figure (figure per unit of error)."""

    offset: float
    wave: dict[int, float]


def gains(pattern: Pattern, *, stepwise: bool, flank: bool) -> Gain:
    """Factors of offset [per mm] and waves [per rad].

    Range over the turn: an amplitude A gives at most 2 A. Largest step: 2 A sin(pi k / N), k the folded harmonic
    (pure e: 2 e / cos alpha sin(pi / N)). A wave that folds to zero moves all places alike and costs nothing.
    Source: difference of two sines, derived here.
    """
    tilt = 1.0 / math.cos(pattern.pressure_angle or 0.0) if flank else 1.0

    def of(k: int) -> float:
        return 2.0 * math.sin(math.pi * k / pattern.count) if stepwise else 2.0 * (k != 0)

    wave = {p.harmonic: pattern.radius * of(folded(p.harmonic, pattern.count)) for p in pattern.periodic}
    return Gain(0.0 if pattern.count == 1 else of(1) * tilt, wave)


def shape_gain(shape: Sequence[float], *, stepwise: bool) -> float:
    """Range of a shape over the turn, or its largest step between neighbours, the closing one included. Source: arithmetic."""
    if not stepwise:
        return max(shape) - min(shape)
    return max((abs(a - b) for a, b in zip(shape, [*shape[1:], shape[0]], strict=True)), default=0.0)


def scatter_gain(scatter: Scatter, pattern: Pattern, *, stepwise: bool, deeper: float) -> float:
    """Most that errors which each place draws for itself do to a range of arcs, or to their largest step [mm].

    deeper  what an error outwards does to the arc: tan(alpha) on a flank, else 0; the worse flank counts
    Range: the two places that reach farthest, one each way; step: the two neighbours that do.  Source: arithmetic.
    """
    if pattern.count == 1:
        return 0.0
    if scatter.groups and len(set(scatter.groups)) == 1:
        return 0.0
    if not scatter.around:
        return 2.0 * scatter.bound * {"angle": pattern.radius, "tangential": 1.0, "radial": deeper}[scatter.along]
    length = scatter.bound * (pattern.radius if scatter.along == "angle" else 1.0)
    out = scatter.outward or (0.0,) * pattern.count
    reach = [length * (abs(a) + deeper * abs(o)) for a, o in zip(scatter.around, out, strict=True)]
    if stepwise:
        return max(a + b for a, b in zip(reach, [*reach[1:], reach[0]], strict=True))
    return sum(sorted(reach)[-2:])


def rounding_figure(pattern: Pattern, *, stepwise: bool, deeper: float = 0.0) -> float:
    """What the rounded settings alone do to the figure [mm]: range, or largest step; of the worse flank.

    deeper  as `scatter_gain` has it
    """
    if not pattern.rounding:
        return 0.0
    figure, found = largest_steps if stepwise else ranges, []
    for side in (1, -1) if deeper and pattern.outwards else (0,):
        arcs = pattern.radius * np.asarray(pattern.rounding)
        if side:
            arcs = arcs + side * deeper * np.asarray(pattern.outwards)
        found.append(float(figure(arcs[None, :])[0]))
    return max(found)
