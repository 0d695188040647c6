"""The review as JSON, format 1: fixed keys, metric display units (lengths mm, deviations um, small angles arcsec)."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from setupcheck.notation import FACTOR
from setupcheck.quantities.book import INCH, Known, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.left_out import left_out
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.as_json import json_text
from setupcheck.report.backlash_read import backlash_read_as_data
from setupcheck.report.contact import contacts_as_data
from setupcheck.report.gates import gates_as_data, lengths_as_data
from setupcheck.report.heating_plan import heating_plans_as_data
from setupcheck.report.insert import inserts_as_data
from setupcheck.report.joint import joints_as_data
from setupcheck.report.remedies import remedy_in_words
from setupcheck.report.rests import first_as_data, record_as_data
from setupcheck.report.then_now import then_of
from setupcheck.report.uncomputed import uncomputed
from setupcheck.report.wording import clean
from setupcheck.report.worked_out import worked_out
from setupcheck.rulebook import Finding

if TYPE_CHECKING:
    from setupcheck.flow import Review
    from setupcheck.report.review_blocks import HouseData, HouseHead
    from setupcheck.report.review_types import (
        CombinedData,
        EndsData,
        FindingData,
        QuantityData,
        ReviewData,
        StackData,
        ThenData,
    )
    from setupcheck.rulebook.house import House

FORMAT = 1
METRIC = {shown: metric for metric, shown in INCH.items()}
DIGITS = 12
"""Significant digits of every number, so that the last bits of a sum cannot change the bytes. Source: our choice."""

DRAWN_DIGITS = 5
"""Significant digits of drawn values. Source: our choice."""

Value = float | str | None


def as_json(found: Review) -> str:
    """The whole report as one JSON object, keys in a fixed order, ending in a newline."""
    return json_text(as_data(found))


def as_data(found: Review) -> ReviewData:
    """The report as plain data, ready for json."""

    from setupcheck import __version__

    job = found.loaded.job
    lines = worked_out(found)  # these four before the quantities, which list what was looked at
    ground = inserts_as_data(found)
    joints, heating = joints_as_data(found), heating_plans_as_data(found)
    contact = contacts_as_data(found)
    return {
        "format": FORMAT,
        "setupcheck": __version__,
        "rule_book": {"version": found.rulebook.version, "sha256": found.rulebook.sha256},
        "house": _house(found),
        "record": record_as_data(found),
        "job": {"title": clean(job.title), "file": found.loaded.file, "sha256": found.loaded.sha256},
        "on": found.on,
        "verdict": found.verdict,
        "counts": {v: found.evaluation.counts[v] for v in ("pass", "warn", "fail", "open", "waived")},
        "quantities": _quantities(found),
        "stacks": [_stack(found, scope) for scope in found.book.instances("stack")],
        "measure_first": first_as_data(found),
        "gates": gates_as_data(found),
        "lengths": lengths_as_data(found),
        "joints": joints,
        "heating_plans": heating,
        "contacts": contact,
        "inserts": ground,
        "backlash_read": backlash_read_as_data(found),
        "worked_out": lines,
        "findings": [_finding(found, f) for f in found.evaluation.findings],
        "cautions": [
            {
                "id": c.id,
                "op": c.op,
                "severity": c.severity,
                "state": clean(c.state),
                "text": c.text,
                "source": c.source,
            }
            for c in found.evaluation.cautions
        ],
        "not_computed": [
            {"at": one.at, "line": one.line, "what": clean(f"{one.owner}: {one.what}")}
            for one in uncomputed(found.loaded)
        ],
        "taken": [{"at": clean(one.at), "what": one.what} for one in left_out(found.loaded)],
    }


def plain_number(value: float) -> float:
    """A finite number at 12 significant digits, never -0."""
    return float(f"{value:.{DIGITS}g}") + 0.0 if math.isfinite(value) else 0.0


def house_head(house: House | None) -> HouseHead | None:
    """Which house file acts; None where none does."""
    return {"name": clean(house.name), "file": clean(house.file), "sha256": house.sha256} if house is not None else None


def _house(found: Review) -> HouseData | None:
    if found.house is None:
        return None
    from setupcheck.report.house import house_as_data  # few jobs have one

    return house_as_data(found)


def _settled(value: float) -> float:
    """A drawn value at the digits that single-precision draws settle on every machine; its sampling error is far larger."""
    return float(f"{value:.{DRAWN_DIGITS}g}")


def _shown(value: float | None, unit: str) -> float | None:
    if value is None:
        return None
    return plain_number(value * FACTOR.get(METRIC.get(unit, unit), 1.0))


def _ends(low: float, high: float, unit: str, *, signed: bool) -> float | EndsData | None:
    """A figure's worst, rss or likely: both ends of a signed figure, one number for those that start at zero."""
    return {"low": _shown(low, unit), "high": _shown(high, unit)} if signed else _shown(high, unit)


def _quantities(found: Review) -> dict[str, QuantityData]:
    """Every quantity that the review looked at and that is a number or a word."""
    out: dict[str, QuantityData] = {}
    for (name, scope), answer in sorted(found.book.made.items(), key=lambda item: (item[0][0], item[0][1].key)):
        if (
            not isinstance(answer, Known)
            or isinstance(answer.value, bool)
            or not isinstance(answer.value, float | int | str)
        ):
            continue
        unit = METRIC.get(found.book.unit(name, scope), found.book.unit(name, scope))
        number = float(answer.value) if isinstance(answer.value, float | int) else None
        if number is not None and name == "stack.likely":
            number = _settled(number)
        value: Value = _shown(number, unit) if number is not None else str(answer.value)
        out[f"{name}@{scope.key}" if scope.key else name] = {
            "value": value,
            "unit": unit,
            "rests_on": sorted(answer.rests_on),
            "lines": [scope.line] if scope.line else [],
        }
    return out


def _stack(found: Review, scope: Scope) -> StackData:
    stack = stack_of(scope)
    unit = METRIC.get(stack.unit, stack.unit)
    result, then = found.results.get(scope.key), then_of(found, scope)
    return {
        "name": scope.key,
        "what": stack.require.what,
        "of": stack.of or None,
        "about": stack.about or None,
        "limit": {"low": _shown(stack.low, unit), "high": _shown(stack.high, unit)},
        "unit": unit,
        **(_combined(result, unit) if result is not None else _nothing()),
        "then": _then(then, result, unit) if then is not None else None,
    }


def _nothing() -> CombinedData:
    """The figure of a stack that is open."""
    return {"worst": None, "rss": None, "likely": None, "chance": None, "chance_error": None, "causes": []}


def _then(then: Result, now: Result | None, unit: str) -> ThenData:
    """The requirement as planned, where a measured value reaches it, with both margins."""
    margin = _shown(now.margin, unit) if now is not None else None
    return {**_combined(then, unit), "margin": _shown(then.margin, unit), "margin_now": margin}


def _combined(result: Result, unit: str) -> CombinedData:
    c, signed = result.combined, result.figure.signed
    return {
        "worst": _ends(c.worst.low, c.worst.high, unit, signed=signed),
        "rss": _ends(c.rss.low, c.rss.high, unit, signed=signed),
        "likely": _ends(_settled(c.likely.low), _settled(c.likely.high), unit, signed=signed),
        "chance": plain_number(c.chance) if c.chance is not None else None,
        "chance_error": plain_number(c.chance_error) if c.chance_error is not None else None,
        "causes": [
            {
                "cause": clean(s.cause.key),
                "op": s.cause.op,
                "mode": s.cause.mode,
                "worst": _shown(s.worst, unit),
                "share": plain_number(s.share),
            }
            for s in c.shares
        ],
    }


def _finding(found: Review, f: Finding) -> FindingData:
    unit = METRIC.get(f.unit, f.unit)

    def shown(value: float | str | None) -> Value:
        return _shown(float(value), unit) if isinstance(value, float | int) else value

    return {
        "rule": f.rule,
        "at": f.at,
        "op": f.op,
        "line": f.line,
        "verdict": f.verdict,
        "quantity": f.quantity,
        "value": shown(f.value),
        "limit": [shown(v) for v in f.limit] if isinstance(f.limit, tuple) else shown(f.limit),
        "margin": _shown(f.margin, unit),
        "unit": unit,
        "missing": list(f.missing),
        "message": clean(f.message),
        "remedy": remedy_in_words(found, f),
        "sources": [{"ref": s.ref, "place": s.place, "kind": s.kind} for s in f.sources],
        "evidence": f.evidence,
        "rests_on": list(f.rests_on),
        "house": clean(f.house) if f.house else None,
        "waiver": clean(f.waiver) if f.waiver else None,
    }
