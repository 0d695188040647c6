"""A division test reduced: all its parts fitted together, told with their intervals, or open with the reason. mm, rad."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from setupcheck.division import doubts
from setupcheck.division.amplitude import Length, length_of, t_at
from setupcheck.division.columns import ARCSEC
from setupcheck.division.design import Design, Term, comes_round, design
from setupcheck.division.eccentric import Wheel, apart, eccentric
from setupcheck.division.fit import SURE, Fit, Scatter, fitted, scatter_of
from setupcheck.division.points import Points, Prepared, gap_of, prepare, without
from setupcheck.division.readings import Readings
from setupcheck.division.repeatability import repeatability, sighting
from setupcheck.division.results import Flag, Flanks, Interval, Reduced, Unseen, Wave
from setupcheck.division.stations import closure, means_of, per_mean, places_read, range_of
from setupcheck.errors import SetupcheckError
from setupcheck.record import record

Reals = NDArray[np.floating]

BEND_SHARE = 0.05
"""A bend in the drift is looked for where the stations leave this share of it. Our screening choice."""
NO_SAG = (
    "a drift that bends between two readings of a station does not show in one pass, and looks like eccentricity: make a "
    "reverse pass, or go back to one station now and then"
)
DISCONNECTED = (
    "no station was read twice, so drift of the instrument cannot be told from division: repeat the first station"
)


NO_SCATTER = "the readings leave no scatter at all, as those of no instrument do: copied, or rounded too coarsely"
NOTHING = 1e-5 * ARCSEC
"""Scatter of a reading below which it is none but the rounding of a sum [rad]. Our choice."""
NO_SPARE = "there are no more readings than unknowns, so nothing says how well they hold: read more, or repeat"


@record(eq=False)
class _Found:
    """One fit with what widens its intervals.

    spread  variance of a reading, all doubts taken in;  sag  bound of a bend nobody can see [rad], with what it does to waves
    """

    points: Points
    plan: Design
    fit: Fit
    scatter: Scatter
    spread: float
    nu: float
    sag: float
    bends: tuple[Term, ...]
    follows: float


def reduce(
    readings: Readings,
    *,
    count: int,
    worm_ratio: float | None = None,
    radius: float | None = None,
    pressure_angle: float | None = None,
    head_ratio: float | None = None,
    start: float = 0.0,
    turn: int = 1,
    turns_with_work: bool = False,
) -> Reduced:
    """Everything a test says of a wheel.

    count           teeth of the work;  worm_ratio  turns of its own worm for one of the work
    radius          where the worm meets the teeth [mm];  pressure_angle  transverse [rad]
    head_ratio      turns of the crank of the head that cut it, for one of the work
    start, turn     direction of the first gap [rad] and the sense in which gaps follow
    turns_with_work  stations named `angle` are turns of the work, as for an instrument that rides on it
    Raises: SetupcheckError where there is nothing to reduce.
    """
    if turns_with_work and readings.kind == "tooth":
        raise SetupcheckError(
            f"{readings.file}: stations are teeth, which are places of the work and do not turn with it. Leave "
            "--turns-with-work away, or write turned_deg"
        )
    wheel = Wheel(count, radius, pressure_angle, start, turn)
    turned = readings.kind == "turned" or (turns_with_work and readings.kind == "angle")
    grows = turn if readings.kind == "tooth" else 1  # teeth may be numbered clockwise, angles never are
    ready = prepare(readings, count=count, worm_ratio=worm_ratio, start=start, turn=turn)
    names = _asked(worm_ratio, head_ratio)
    found = _found(ready.points, list(names))
    flagged = doubts.outliers(found.fit)
    steps = doubts.steps(found.points, found.fit)
    reasons = _reasons(ready, found, steps)
    spare = _without(found, flagged, list(names))
    waves = _waves(found, names, turned, reasons)
    other = _waves(spare, names, turned, ()) if spare is not None else ()
    waves = tuple(_against_flags(wave, other) for wave in waves)
    unseen = tuple(
        Unseen(names[a.harmonic], a.harmonic, a.why, tuple(names[h] for h in a.taken_for)) for a in found.plan.alike
    )
    own = next((w for w in waves if worm_ratio is not None and w.harmonic == worm_ratio), None)
    off = eccentric(found.fit, found.spread, found.nu, waves, wheel, turned=turned, grows=grows, points=found.points)
    flanks = _flanks(found, turned, grows)
    return Reduced(
        verdict="open" if reasons or not waves or waves[0].open else "told",
        reasons=tuple(dict.fromkeys([*reasons, *_first(waves), *_nothing(found, waves)])),
        warnings=tuple(warnings(unseen)),
        limits=(*ready.limits, *_limits(found)),
        rows=len(readings),
        stations=found.plan.stations,
        places=places_read(found.points, count),
        runs=len(readings.runs),
        waves=waves,
        unseen=unseen,
        eccentric=off,
        flanks=flanks,
        apart=apart(flanks, off, wheel, found.nu),
        worm=own,
        scatter=found.scatter.repeat if found.scatter.repeat_nu >= 3 and found.scatter.repeat is not None
        else _root(found.fit.square / found.fit.nu if found.fit.nu else math.nan),
        nu=found.scatter.repeat_nu if found.scatter.repeat_nu >= 3 else found.fit.nu,
        stations_scatter=found.scatter.stations,
        range=range_of(found.points, found.fit),
        per_mean=per_mean(found.points),
        range_without_first=range_of(found.points, found.fit, centred=True) if Term("wave", 1.0) in found.fit.terms else None,
        drift=_single(found, Term("drift")),
        closure=closure(found.points, whole=comes_round(names)),
        reversal=_single(found, Term("reversal")),
        no_reversal=_no_reversal(found.plan),
        repeatability=repeatability(ready.points, _zeros(found) if readings.how == "reading" else None),
        collimation=ready.collimation,
        sighting=sighting(ready.points) if ready.collimation is not None else None,
        flags=tuple(_flags(found, flagged)),
        without=other,
        whole=ready.whole,
        steps=steps,
        repaired=bool(ready.whole),
        against=ready.against,
        means=means_of(found.points, found.fit, turned=turned),
    )  # fmt: skip


def _many(stations: int) -> str:
    return f"{stations} station{'' if stations == 1 else 's'}"


def _root(x: float) -> float:
    return math.sqrt(x) if x > 0.0 else 0.0


def _asked(worm_ratio: float | None, head_ratio: float | None) -> dict[float, str]:
    """Waves looked for, the most important first, with their names."""
    named: dict[float, str] = {1.0: "once per turn"}
    both = worm_ratio is not None and worm_ratio == head_ratio

    def add(harmonic: float | None, name: str) -> None:
        if harmonic is not None and harmonic >= 1.0:
            named.setdefault(float(harmonic), name)

    add(2.0, "twice per turn")
    add(worm_ratio, "once per turn of the worm" + (" (own, or the head's)" if both else ""))
    add(head_ratio, "once per crank turn of the head that cut it")
    add(3.0, "3 waves per turn")
    add(4.0, "4 waves per turn")
    add(2.0 * worm_ratio if worm_ratio else None, "twice per turn of the worm")
    return named


def _found(points: Points, asked: Sequence[float]) -> _Found:
    """The fit, with a bend of the drift taken in where the stations can show one."""
    plan = design(points, asked)
    if len(points) < sum(t.width for t in plan.terms):
        raise SetupcheckError(f"{len(points)} readings are fewer than what is sought in them. Read at more stations")
    terms = list(plan.terms)
    fit = fitted(points, plan.sums, terms)
    scatter = scatter_of(points, fit)
    bends: list[Term] = []
    sag = 0.0
    if plan.has("drift") and fit.nu >= 4:
        for degree in (2.0, 3.0):
            bend = Term("bend", degree)
            share, sigmas = doubts.bend_shows(plan.sums, terms, bend, scatter)
            if share > BEND_SHARE and fit.nu >= 4 and (degree == 2.0 or sigmas > 2.0):
                bends.append(bend)
                terms.append(bend)
                fit = fitted(points, plan.sums, terms)
                scatter = scatter_of(points, fit)
            elif degree == 2.0:
                at = fit.at(Term("drift"))[0]
                sag = abs(fit.values[at]) + t_at(max(scatter.nu, 1)) * _root(scatter.used * fit.inverse[at, at])
                break
    order = np.argsort(points.t, kind="stable")
    follow = doubts.follows(fit.residuals[order], fit.nu)
    spread = scatter.used * (1.0 + follow) / (1.0 - follow)
    nu = max(scatter.nu * (1.0 - follow) / (1.0 + follow), 1.0)
    return _Found(points, plan, fit, scatter, spread, nu, sag, tuple(bends), follow)


def _reasons(ready: Prepared, found: _Found, steps: Sequence[doubts.Step]) -> tuple[str, ...]:
    """What makes every answer open."""
    said = []
    if ready.whole:
        said.append("some readings stand whole pitches off: a place was missed or counted twice (below)")
    for step in steps:
        size = f'{abs(step.size) / ARCSEC:.1f}"'
        if step.along == "time":
            said.append(
                f"from line {step.line} on all readings stand {size} off: something slipped or was counted wrong"
            )
        else:
            where = math.degrees(step.theta) % 360.0
            said.append(f"from the station at {where:.2f} deg on round the circle everything stands {size} off")
    least = NOTHING + 1e-9 * float(np.abs(found.points.y).max(initial=0.0))
    if not found.scatter.used > least * least or found.scatter.nu < 1:
        said.append(NO_SCATTER if found.fit.nu >= 1 else NO_SPARE)
    if not found.plan.repeated and not found.plan.arc:
        said.append(DISCONNECTED)
    elif found.sag > 0.0 and not found.plan.arc:
        said.append(NO_SAG)
    return tuple(said)


def _first(waves: Sequence[Wave]) -> list[str]:
    """Why the first wave, which is asked for most, is no answer."""
    return [w.open for w in waves[:1] if w.open]


def _nothing(found: _Found, waves: Sequence[Wave]) -> list[str]:
    if waves:
        return []
    return [
        f"{_many(found.plan.stations)} cannot tell eccentricity from drift and zero: read at 5 or more, better at 8 or 12"
    ]


def _waves(found: _Found, names: dict[float, str], turned: bool, reasons: Sequence[str]) -> tuple[Wave, ...]:
    """All fitted waves in the frame of the work."""
    rival = {h: names[a.harmonic] for a in found.plan.alike for h in a.taken_for}
    made = []
    for term in found.fit.terms:
        if term.kind != "wave":
            continue
        vector = found.fit.vector(term)
        sure = found.spread > 0.0
        covariance = found.fit.covariance(term) * (found.spread if sure else 0.0)
        if turned:  # delta(theta) = -d(-theta): what was turned too far shows a place that stands too far back
            vector = vector * (-1.0, 1.0)
            covariance = covariance * np.array([[1.0, -1.0], [-1.0, 1.0]])
        also = _sag_on(found, term)
        nu = found.nu if sure else 1.0
        because = reasons[0] if reasons else ""
        if term.harmonic in rival:
            it = "once per turn" if term.harmonic == 1.0 else "it"  # told above the waves, too
            because = because or f"these stations cannot tell {it} from {rival[term.harmonic]}"
        length = length_of(vector, covariance, nu, also=also)
        if not sure:
            length = Length(length.value, 0.0, math.inf, length.direction, None)
        made.append(
            Wave(
                names[term.harmonic], term.harmonic, float(vector[0]), float(vector[1]),
                (float(covariance[0, 0]), float(covariance[0, 1]), float(covariance[1, 1])), nu, also, length, because,
            )
        )  # fmt: skip
    return tuple(made)


def _flanks(found: _Found, turned: bool, grows: int) -> Flanks | None:
    """Mean and difference of both flanks in the first wave; turned and grows as in `eccentric.py`.

    Forward of the difference is the way places of the work grow counter-clockwise.
    """
    wave, swing = Term("wave", 1.0), Term("swing", 1.0)
    if wave not in found.fit.terms or swing not in found.fit.terms or not found.spread > 0.0:
        return None
    at = np.concatenate([np.arange(found.fit.values.size)[found.fit.at(term)] for term in (wave, swing)])
    sense = np.array([-1.0, 1.0, 1.0, -1.0]) if turned else np.array([1.0, 1.0, grows, grows])
    a, b, c, d = (float(x) for x in found.fit.values[at] * sense)
    covariance = found.fit.inverse[np.ix_(at, at)] * found.spread * np.outer(sense, sense)
    return Flanks((a, b, c, d), tuple(tuple(map(float, row)) for row in covariance))


def _sag_on(found: _Found, term: Term) -> float:
    """What a bend of the size of the drift would add to a wave [rad]."""
    if found.sag <= 0.0:
        return 0.0
    taken = found.plan.sums.taken(found.fit.terms, Term("bend", 2.0))[:, 0]
    return found.sag * float(np.hypot(*taken[found.fit.at(term)]))


def _against_flags(wave: Wave, other: Sequence[Wave]) -> Wave:
    """Open where the flagged readings alone move the wave by more than half of what it is known to without them."""
    mate = next((w for w in other if w.harmonic == wave.harmonic), None)
    if mate is None or wave.open:
        return wave
    moved = math.hypot(wave.a - mate.a, wave.b - mate.b)
    known = t_at(mate.nu) * math.sqrt(max(mate.covariance[0], mate.covariance[2]))
    if moved <= 0.5 * known + 1e-3 * ARCSEC:
        return wave
    return replace(wave, open="readings that stand far off the others move it: settle them first (flagged below)")


def _without(found: _Found, flagged: NDArray[np.int64], asked: Sequence[float]) -> _Found | None:
    if not len(flagged) or len(found.points) - len(flagged) < sum(t.width for t in found.fit.terms) + 2:
        return None
    points = without(found.points, flagged)
    points = replace(points, run=np.unique(points.run, return_inverse=True)[1].astype(np.int32))
    return _found(points, asked)


def _flags(found: _Found, flagged: NDArray[np.int64]) -> list[Flag]:
    p = found.points
    return [Flag(int(p.line[i]), float(p.theta[i]), float(found.fit.residuals[i])) for i in flagged.tolist()]


def _single(found: _Found, term: Term) -> Interval | None:
    if term not in found.fit.terms:
        return None
    at = found.fit.at(term)[0]
    half = t_at(found.nu) * _root(found.spread * float(found.fit.inverse[at, at]))
    value = float(found.fit.values[at])
    return Interval(value, value - half, value + half)


def _zeros(found: _Found) -> Reals:
    return np.array([found.fit.vector(t)[0] for t in found.fit.terms if t.kind == "zero"])


def _no_reversal(plan: Design) -> str:
    return {
        "none": "readings of one direction only, or none said (column direction)",
        "apart": "forward and reverse are in different runs, and each run has a zero of its own: give both passes one run "
        "where the instrument was not set anew between them",
        "fitted": "",
    }[plan.reversal]


def warnings(unseen: Sequence[Unseen]) -> list[str]:
    """What the stations cannot show, told before any number."""
    said = []
    for wave in unseen:
        name = wave.name if wave.harmonic < 5.0 else f"{wave.name} ({wave.harmonic:g} waves)"
        if wave.why == "invisible":
            said.append(f"{name}: every station sees it alike, so it cannot show here")
        elif wave.why == "folded" and wave.taken_for:
            said.append(
                f"{name}: at these stations it looks like {' and '.join(wave.taken_for)}, and neither is an answer"
            )
        elif wave.why == "folded":
            said.append(f"{name}: these stations cannot tell it from zero, drift and the other waves")
        elif wave.why == "few":
            also = f"; part of it would look like {' and '.join(wave.taken_for)}" if wave.taken_for else ""
            said.append(f"{name}: not looked for, too few stations for one more unknown{also}")
    return said


def _limits(found: _Found) -> list[str]:
    """What else bounds the answers."""
    said = []
    if found.plan.arc:
        said.append(
            "all stations lie within half a turn: waves of the wheel cannot be told, a straight slope stands for them"
        )
    gap = gap_of(found.points)
    if gap is not None and not found.plan.arc:
        low, high, step = (math.degrees(x) for x in gap)
        said.append(f"no station between {low:.4g} and {high:.4g} deg, elsewhere every {step:.4g} deg")
    if found.bends and doubts_of_bend(found) > 2.6:
        said.append("the drift was bent, not even: the bend is in the fit and in the intervals")
    if found.sag > 0.0:
        said.append("the intervals hold for a drift that bends by no more than it was in all")
    if found.scatter.uneven is not None and found.scatter.uneven < SURE:
        own = found.scatter.stations / ARCSEC
        said.append(
            f'stations stray by {own:.1f}" of their own, more than repeats explain: places off by themselves, or waves '
            "nobody asked for; the intervals take them in"
        )
    if found.follows > 0.0:
        said.append("residuals follow each other over time, as an uneven drift does: the intervals are widened for it")
    if found.scatter.repeat is None and found.fit.nu > 0:
        said.append(
            "no station was read twice in one direction: scatter of a reading and of the places cannot be told apart"
        )
    return said


def doubts_of_bend(found: _Found) -> float:
    """How many of its own standard deviations the bend stands at."""
    at = found.fit.at(found.bends[0])[0]
    return abs(float(found.fit.values[at])) / max(_root(found.spread * float(found.fit.inverse[at, at])), 1e-300)
