"""A division test read back, as text of 80 columns and as JSON: verdict words first, then the numbers with their intervals."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import TYPE_CHECKING

from setupcheck.division.faces import acceptance
from setupcheck.division.repeatability import EDITION, Repeatability
from setupcheck.division.results import Interval, Reduced, Wave
from setupcheck.division.template import template
from setupcheck.errors import printable
from setupcheck.flow import ReadBack
from setupcheck.notation import FACTOR, fixed
from setupcheck.report.against import against_the_plan, on_a_workpiece
from setupcheck.report.against import as_data as plan_as_data
from setupcheck.report.as_json import json_text
from setupcheck.report.wording import clean, wrap

if TYPE_CHECKING:
    from setupcheck.report.review_blocks import HouseHead

__all__ = ["as_data", "as_json", "as_text", "template"]

FORMAT = 1
FLAGS_SHOWN = 10
"""Readings far off that the text lists. Our choice."""
WORDS = {
    "eccentric": "both flanks differ as those of an eccentric ring do",
    "division": "both flanks show the same: it comes from dividing, not from teeth off their axis",
    "neither": "the flanks differ, but not as those of an eccentric ring alone: dividing has a part in it, or backlash "
    "changes for another reason",
    "undecided": "whether teeth off their axis or dividing made it, both flanks do not decide",
}


def as_text(found: ReadBack, *, diameter: float | None = None) -> str:
    """The whole report; diameter  of a workpiece the range is told on as well [mm]."""
    parts = (
        _head(found),
        _before(found.reduced),
        _answers(found),
        against_the_plan(found),
        wrap(on_a_workpiece(found, diameter), first="  ", rest="      ") if diameter is not None else [],
        _rest(found),
        _iso(found.reduced),
        _flagged(found),
    )
    blocks = ["\n".join(block) for block in map(list, parts) if block]
    return "\n\n".join(blocks) + "\n"


def _head(found: ReadBack) -> Iterator[str]:
    r, of = found.reduced, found.of
    yield from wrap(
        f"DIVISION TEST of {of.name}, {of.count} places, radius {_size(found, of.radius)}: {clean(found.file)}"
    )
    if found.house is not None:
        from setupcheck.report.house import house_line  # few tests have one

        yield from house_line(found.house)
    word = "TOLD" if r.verdict == "told" else "OPEN"
    yield f"{word}   {_many(r.rows, 'reading')}, {_many(r.stations, 'station')}, {_many(r.runs, 'run')}"
    for why in r.reasons:
        yield from wrap(why, first="  - open: ", rest="    ")


def _many(n: int, thing: str) -> str:
    return f"{n} {thing}{'' if n == 1 else 's'}"


def _before(r: Reduced) -> Iterator[str]:
    """What the stations cannot show, before any number."""
    if r.warnings:
        yield "WHAT THESE STATIONS CANNOT SHOW"
        for said in r.warnings:
            yield from wrap(said, first="  - ", rest="    ")


def _answers(found: ReadBack) -> Iterator[str]:
    r = found.reduced
    if not r.waves and r.eccentric is None:
        return
    open_ = r.verdict == "open"
    yield from wrap(
        "AS READ, not an answer while it is open; intervals of 95 % hold only if what is open does no harm"
        if open_ else "ANSWERS, with intervals of 95 %"
    )  # fmt: skip
    yield from wrap(
        "angles are places on the work, counter-clockwise from its mark, seen from its +z side", first="  ", rest="  "
    )
    if r.repaired:
        yield from wrap("with the whole pitches taken off", first="  - ", rest="    ")
    e = r.eccentric
    if e is not None:
        told, place = e.amount.low > 0.0, found.of.one
        by = _fine(found, e.amount) if told or math.isinf(e.amount.high) else f"less than {_one(found, e.amount.high)}"
        text = f"{'as if ' if e.looks in ('division', 'neither') else ''}eccentric by {by}"
        if told and e.within is not None:
            text += f", high at {place} {e.tooth} ({_deg(e.direction)} ±{fixed(math.degrees(e.within), 1)})"
        elif told:
            text += ", towards where is not told"
        yield from wrap(_open(text, "" if e.open in r.reasons else e.open), first="  ", rest="      ")
        if r.apart is not None:
            two, them = r.apart, found.of.many
            yield from wrap(
                f"taken apart by the flanks: {them} off their axis by {_one(found, two.amount)} ±{_one(found, two.within)} "
                f"towards {place} {two.tooth}, and dividing {_sec(two.divided)}, highest at {_deg(two.highest)}",
                first="      ", rest="      ",
            )  # fmt: skip
        if e.flanks == "unknown" and told:
            yield from wrap(
                "which flank was read is not said, so its pressure angle counts both ways",
                first="      ",
                rest="      ",
            )
        if e.looks:
            yield from wrap(WORDS[e.looks], first="      ", rest="      ")
    for wave in r.waves:
        yield from wrap(_wave(found, wave), first="  ", rest="      ")


def _wave(found: ReadBack, wave: Wave) -> str:
    length = wave.length
    if math.isinf(length.high):
        text = f"{wave.name}: {_sec(length.value)}, without an interval"
    elif length.low <= 0.0:
        text = f"{wave.name}: not told from nothing, less than {_sec(length.high)}"
    else:
        text = f"{wave.name}: {_sec(length.value)} ({_sec(length.low)} to {_sec(length.high)})"
        within = "" if wave.within is None else f" ±{fixed(math.degrees(wave.within), 1)}"
        if found.reduced.worm is not None and wave.harmonic == found.reduced.worm.harmonic:
            along = wave.length.value * found.of.radius
            turn = "" if length.within is None else f" ±{fixed(math.degrees(length.within), 0)}"
            most = f"{round(math.degrees(length.direction)) % 360} deg{turn} of its turn"
            text += f", {_one(found, along)} along the worm, most at {most}"
        elif within:
            text += f", most at {_deg(wave.highest)}{within}" + (" and so on" if wave.harmonic > 1.0 else "")
    return _open(text, wave.open if not found.reduced.reasons or wave.open not in found.reduced.reasons else "")


def _open(text: str, why: str) -> str:
    return f"{text}; OPEN: {why}" if why and why not in text and len(why) < 200 else text


def _rest(found: ReadBack) -> Iterator[str]:
    r = found.reduced
    yield "THE READINGS THEMSELVES"
    if r.reversal is not None:
        at = _one(found, abs(r.reversal.value) * found.of.radius)
        yield from wrap(
            f"reversal, forward less reverse: {_span(r.reversal)}; {at} at the pitch line", first="  ", rest="      "
        )
    else:
        yield from wrap(f"reversal: not told, {r.no_reversal}", first="  ", rest="      ")
    if r.drift is not None:
        yield from wrap(f"drift from first to last: {_span(r.drift)}", first="  ", rest="      ")
    if r.closure is not None:
        yield from wrap(
            f"closure, first station last time less first time: {_sec(r.closure)}", first="  ", rest="      "
        )
    else:
        yield "  closure: not told, the first station was not read again in its run"
    if math.isfinite(r.scatter) and r.nu > 0:
        yield from wrap(
            f"scatter of one reading: {_sec(r.scatter)} standard deviation ({r.nu} spare readings)",
            first="  ",
            rest="      ",
        )
    yield f"  range of the stations: {_sec(r.range)}, {_one(found, r.range * found.of.radius)} at the pitch line"
    if r.collimation is not None:
        c = r.collimation
        yield from wrap(
            f"collimation {_sec(c.mean)} over {_many(c.pairs, 'pair')}, straying by {_sec(c.spread)} in all",
            first="  ",
            rest="      ",
        )
    if r.sighting is not None:
        s, nu = r.sighting
        yield from wrap(
            f"a direction sighted in both faces repeats within {_sec(s)} ({nu} spare; in the manner of ISO 17123-3, from "
            f"memory): an instrument may show up to {fixed(acceptance(nu), 2)} times its stated figure",
            first="  ", rest="      ",
        )  # fmt: skip
    if r.against:
        yield "  the circle of the instrument counts against the stations"
    for said in (*r.limits, *(f"{path} is not stated in the job" for path in found.of.missing)):
        yield from wrap(said, first="  - ", rest="    ")


def _iso(r: Reduced) -> Iterator[str]:
    iso = r.repeatability
    if not isinstance(iso, Repeatability):
        yield from wrap(f"POSITIONING in the manner of ISO 230-2: not computed, {iso}", rest="  ")
        return
    yield from wrap(
        f"POSITIONING in the manner of {EDITION}; {iso.stations} stations, {iso.runs} runs each way", rest="  "
    )
    yield f"  {'':<22}{'both':>10}{'forward':>10}{'reverse':>10}"
    rows = (("accuracy A", iso.A, 0), ("repeatability R", iso.R, 1), ("systematic E", iso.E, 2))
    for name, both, i in rows:
        yield f"  {name:<22}{_sec(both):>10}{_sec(iso.up[i]):>10}{_sec(iso.down[i]):>10}"
    yield from wrap(
        f"reversal B {_sec(iso.B)}, mean {_sec(iso.mean_B)}; range of both directions' means M {_sec(iso.M)}",
        first="  ",
        rest="      ",
    )


def _flagged(found: ReadBack) -> Iterator[str]:
    r = found.reduced
    if not (r.flags or r.whole or r.steps):
        return
    yield "FLAGGED, nothing was left out"
    for w in r.whole:
        rows = f"line {w.first_line}" + (f" to {w.last_line}" if w.rows > 1 else "")
        where = f"at {_deg(w.theta)}" if w.rows == 1 else f"from {_deg(w.theta)} to {_deg(w.theta_last)}"
        size = f"{abs(w.pitches)} x {fixed(math.degrees(w.pitch), 4)} deg"
        sense = "further" if w.pitches > 0 else "short"
        half = found.reduced.collimation is not None and abs(abs(w.pitches) * w.pitch - math.pi) < 1e-9
        why = "half a turn: its face may be named wrong" if half else "a place was counted wrong"
        yield from wrap(f"{rows}, {where}: {size} {sense}, {why}", first="  ", rest="      ")
    for flag in r.flags[:FLAGS_SHOWN]:
        yield from wrap(
            f"line {flag.line}, station {_deg(flag.theta)}: {_sec(flag.off)} off the fit", first="  ", rest="      "
        )
    if len(r.flags) > FLAGS_SHOWN:
        yield f"  and {len(r.flags) - FLAGS_SHOWN} more"
    if r.without:
        first = r.without[0]
        yield from wrap(
            f"without these readings {first.name}: {_sec(first.length.value)} ({_sec(first.length.low)} to "
            f"{_sec(first.length.high)}), most at {_deg(first.highest)}", first="  ", rest="      ",
        )  # fmt: skip


def _sec(value: float) -> str:
    size = abs(value) * FACTOR["arcsec"]
    return fixed(value * FACTOR["arcsec"], 2 if size < 9.995 else 1) + '"'


def _span(x: Interval) -> str:
    return f"{_sec(x.value)} ({_sec(x.low)} to {_sec(x.high)})"


def _deg(value: float) -> str:
    return f"{fixed(round(math.degrees(value), 1) % 360.0, 1)} deg"


def _size(found: ReadBack, mm: float) -> str:
    return f"{fixed(mm / 25.4, 4)} in" if found.loaded.job.units == "in" else f"{fixed(mm, 3)} mm"


def _one(found: ReadBack, mm: float) -> str:
    return f"{fixed(mm * 1000.0 / 25.4, 2)} thou" if found.loaded.job.units == "in" else f"{fixed(mm * 1000.0, 1)} um"


def _fine(found: ReadBack, x: Interval) -> str:
    if math.isinf(x.high):
        return f"{_one(found, x.value)}, without an interval"
    return f"{_one(found, x.value)} ({_one(found, x.low)} to {_one(found, x.high)})"


def as_json(found: ReadBack) -> str:
    """The whole report as one JSON object, format 1."""
    return json_text(as_data(found))


def as_data(found: ReadBack) -> dict[str, object]:
    """Plain data: angles deg, small ones arcsec, lengths um; waves in the frame of the work."""
    r, of, arc = found.reduced, found.of, FACTOR["arcsec"]
    e, iso, c = r.eccentric, r.repeatability, r.collimation
    return {
        "format": FORMAT,
        "house": _house(found),
        "plan": plan_as_data(found),
        "file": printable(found.file),
        "of": of.name,
        "verdict": r.verdict,
        "reasons": list(r.reasons),
        "warnings": list(r.warnings),
        "limits": list(r.limits),
        "readings": r.rows,
        "stations": r.stations,
        "runs": r.runs,
        "eccentric": None if e is None else {
            "um": _interval(e.amount, 1000.0), "high_at_deg": _number(math.degrees(e.direction)), "tooth": e.tooth,
            "within_deg": _degrees(e.within), "flanks": e.flanks, "looks": e.looks, "open": e.open,
        },
        "apart": None if r.apart is None else {
            "um": _number(r.apart.amount * 1000.0), "within_um": _number(r.apart.within * 1000.0), "tooth": r.apart.tooth,
            "high_at_deg": _number(math.degrees(r.apart.direction)), "divided_arcsec": _number(r.apart.divided * arc),
            "divided_most_at_deg": _number(math.degrees(r.apart.highest)),
        },
        "waves": [_wave_data(w) for w in r.waves],
        "without_flagged": [_wave_data(w) for w in r.without],
        "unseen": [{"name": u.name, "harmonic": u.harmonic, "why": u.why, "taken_for": list(u.taken_for)} for u in r.unseen],
        "reversal_arcsec": None if r.reversal is None else _interval(r.reversal, arc),
        "drift_arcsec": None if r.drift is None else _interval(r.drift, arc),
        "closure_arcsec": None if r.closure is None else _number(r.closure * arc),
        "scatter_arcsec": _number(r.scatter * arc) if math.isfinite(r.scatter) else None,
        "scatter_nu": r.nu,
        "stations_scatter_arcsec": _number(r.stations_scatter * arc),
        "range_arcsec": _number(r.range * arc),
        "collimation_arcsec": None if c is None else {"mean": _number(c.mean * arc), "spread": _number(c.spread * arc),
                                                      "pairs": c.pairs, "single": c.single},
        "iso_230_2_arcsec": {"not_computed": iso} if isinstance(iso, str) else {
            "edition": EDITION, "A": _number(iso.A * arc), "R": _number(iso.R * arc), "E": _number(iso.E * arc),
            "B": _number(iso.B * arc), "mean_B": _number(iso.mean_B * arc), "M": _number(iso.M * arc),
            "up": [_number(x * arc) for x in iso.up], "down": [_number(x * arc) for x in iso.down],
            "stations": iso.stations, "runs": iso.runs,
        },
        "flagged": [{"line": f.line, "station_deg": _number(math.degrees(f.theta)), "off_arcsec": _number(f.off * arc)}
                    for f in r.flags],
        "whole_pitches": [{"pitches": w.pitches, "pitch_deg": _number(math.degrees(w.pitch)), "from_line": w.first_line,
                           "to_line": w.last_line} for w in r.whole],
        "steps": [{"along": s.along, "size_arcsec": _number(s.size * arc), "from_line": s.line,
                   "station_deg": _number(math.degrees(s.theta))} for s in r.steps],
    }  # fmt: skip


def _house(found: ReadBack) -> HouseHead | None:
    if found.house is None:
        return None
    from setupcheck.report.json import house_head  # few tests have one

    return house_head(found.house)


def _wave_data(w: Wave) -> dict[str, object]:
    arc = FACTOR["arcsec"]
    return {
        "name": w.name,
        "harmonic": w.harmonic,
        "arcsec": _interval(Interval(w.length.value, w.length.low, w.length.high), arc),
        "most_at_deg": _number(math.degrees(w.highest)),
        "within_deg": _degrees(w.within),
        "cos_arcsec": _number(w.a * arc),
        "sin_arcsec": _number(w.b * arc),
        "covariance_arcsec2": [_number(x * arc * arc) for x in w.covariance],
        "nu": _number(w.nu),
        "also_arcsec": _number(w.also * arc),
        "open": w.open,
    }


def _interval(x: Interval, factor: float) -> dict[str, float | None]:
    high = _number(x.high * factor) if math.isfinite(x.high) else None
    return {"value": _number(x.value * factor), "low": _number(x.low * factor), "high": high}


def _degrees(x: float | None) -> float | None:
    return None if x is None else _number(math.degrees(x))


def _number(x: float) -> float:
    """Nine significant digits, never a minus zero."""
    return float(f"{x:.9g}") + 0.0
