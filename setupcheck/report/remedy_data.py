"""The same as plain records for --json. Lengths mm, deviations um, small angles arcsec."""

from __future__ import annotations

import math
from collections.abc import Sequence

from setupcheck.flow import Review
from setupcheck.notation import FACTOR
from setupcheck.quantities.good_enough import FOUND_AT, KNOWN_TO, Enough, Pays
from setupcheck.quantities.mending import Mended
from setupcheck.quantities.proposals import Idea, Proposal
from setupcheck.quantities.single_causes import Entry, Row, Table
from setupcheck.report.as_json import json_text
from setupcheck.report.edits import as_data as edits_as_data
from setupcheck.report.json import FORMAT, METRIC, house_head, plain_number
from setupcheck.report.proposals import idea_in_words
from setupcheck.report.remedy import entry_in_words
from setupcheck.report.stacks_in_words import Words
from setupcheck.report.wording import clean


def as_json(found: Review, mended: Mended) -> str:
    """One JSON object, keys in a fixed order, ending in a newline."""
    return json_text(as_data(found, mended))


def as_data(found: Review, mended: Mended) -> dict[str, object]:
    """What was found, ready for json."""
    from setupcheck import __version__

    words, loaded = Words(found), found.loaded
    return {
        "format": FORMAT,
        "setupcheck": __version__,
        "rule_book": {"version": found.rulebook.version, "sha256": found.rulebook.sha256},
        "house": house_head(found.house),
        "job": {"title": clean(loaded.job.title), "file": loaded.file, "sha256": loaded.sha256},
        "verdict": found.verdict,
        "failing": mended.failing,
        "worst": mended.worst,
        "stacks": [_table(one, words) for one in mended.tables],
        "good_enough": [_enough(one) for one in mended.enough],
        "next_measured": {
            "found_at": FOUND_AT,
            "known_to": KNOWN_TO,
            "each": [_pays(one, words) for one in mended.pays],
        },
        "proposals": [_proposal(one, words, inches=found.book.inches) for one in mended.proposals],
        "routes_tried": mended.walks,
        "most_tried": mended.met,
    }


def _of_stack(value: float | None, key: str, words: Words) -> float | None:
    if value is None:
        return None
    unit = words.found.results[key].stack.unit
    return plain_number(value * FACTOR.get(METRIC.get(unit, unit), 1.0))


def _entry(entry: Entry) -> dict[str, object]:
    unit = entry.says[0].unit
    return {
        "cause": clean(entry_in_words(entry)),
        "entries": [clean(path) for path in entry.paths],
        "also": [clean(path) for path in entry.also],
        "now": [_said(one.now, unit) for one in entry.says],
        "unit": unit,
        "typical": clean(entry.typical) or None,
    }


def _said(value: float, unit: str) -> float | None:
    return plain_number(value * FACTOR[unit])


def _table(table: Table, words: Words) -> dict[str, object]:
    key = table.key

    def rows(found: Sequence[Row]) -> list[dict[str, object]]:
        return [
            {
                **_entry(row.entry),
                "needed": [_said(value, row.entry.says[0].unit) for value in row.needed] or None,
                "takes": _of_stack(row.takes, key, words),
                "still_over": _of_stack(max(row.still, 0.0), key, words),
                "edits": edits_as_data(row.typed),
            }
            for row in found
        ]

    unit = table.result.stack.unit
    return {
        "name": key,
        "unit": METRIC.get(unit, unit),
        "margin": _of_stack(table.result.margin, key, words),
        "tight": table.tight,
        "alone": rows(table.enough),
        "not_alone": rows(table.some),
        "no_help": rows(table.no_help),
        "done": rows(table.done),
        "spread": {
            "entries": [path for one in table.spread.entries for path in one.paths],
            "factor": plain_number(table.spread.factor) if table.spread.factor is not None else None,
            "edits": edits_as_data(table.spread.typed),
        },
    }


def _enough(one: Enough) -> dict[str, object]:
    return {
        **_entry(one.entry),
        "times": plain_number(one.room) if math.isfinite(one.room) else None,
        "could_double": one.could_double,
        "no_finer": one.no_finer,
        "by": one.by or None,
        "doubled": edits_as_data(one.typed),
    }


def _pays(one: Pays, words: Words) -> dict[str, object]:
    return {
        **_entry(one.entry),
        "stack": one.key,
        "margin_now": _of_stack(one.result.margin, one.key, words),
        "margin_then": _of_stack(one.margin, one.key, words),
    }


def _proposal(one: Proposal, words: Words, *, inches: bool) -> dict[str, object]:
    return {
        **_idea(one.idea),
        "says": clean(idea_in_words(one.idea, inches=inches)),
        "stack": one.key,
        "margin_share_before": plain_number(one.before),
        "margin_share_after": plain_number(one.after),
        "brings_inside": list(one.cures),
        "left_outside": one.left,
        "saves_openings": one.saves,
        "cautions": [{"op": op, "caution": name} for op, name in one.cautions],
        "edits": edits_as_data(one.edits),
    }


def _idea(idea: Idea) -> dict[str, object]:
    return {
        "kind": idea.kind,
        "op": idea.op,
        "other_op": idea.other,
        "on": clean(idea.on) or None,
        "was": clean(idea.was) or None,
        "reading": _said(idea.reading, "um") if idea.reading is not None else None,
    }
