"""How far a finding is from its limit, in words that say which side and never read as nothing."""

from __future__ import annotations

import pytest

from setupcheck.report.text import _margin, as_text
from tests.unit.report.sample import WHEEL, changed, flat, reviewed


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        ("what: backlash, between: [5 um, 125 um]", "what: backlash, between: [60 um, 125 um]", "Short by"),
        ("what: backlash, between: [5 um, 125 um]", "what: backlash, between: [5 um, 60 um]", "Over by"),
        ("tip_radius: 20.0", "tip_radius: 14.0", "Short by 0.67 mm."),
        ("hub: 175 degC, by: oven", "hub: 135 degC, by: oven", "Short by 15 K."),
    ],
)
def test_a_broken_limit_says_on_which_side(old: str, new: str, said: str) -> None:
    text = flat(as_text(reviewed(changed(WHEEL, (old, new)))))
    assert said in text, text


def test_a_limit_broken_by_next_to_nothing_never_reads_as_kept() -> None:
    results = reviewed(WHEEL).results
    whole = next(r for r in results.values() if r.stack.require.what == "mid-plane")
    limit = whole.combined.worst.high * 1000.0 - 0.004
    text = flat(
        as_text(
            reviewed(changed(WHEEL, ("what: mid-plane, at_most: 80 um", f"what: mid-plane, at_most: {limit:.6f} um")))
        )
    )
    assert "Over by 0.004 um." in text, text


def test_a_count_says_no_more_than_its_message() -> None:
    few = (("count: 72, on_circle: 108", "count: 10, on_circle: 15"), ("66.000 ±0.010", "19.500 ±0.010"))
    findings = reviewed(changed(WHEEL, *few)).evaluation.findings
    undercut = next(f for f in findings if f.rule == "MESH-004")
    assert (undercut.verdict, _margin(undercut)) == ("fail", "")
    left = next(f for f in findings if f.rule == "CUTTER-008")
    assert _margin(left).startswith(" Margin")
