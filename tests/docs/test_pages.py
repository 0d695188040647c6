"""The pages of docs/ say what the tool says, step by step, and their sums come to what they say."""

from __future__ import annotations

import re

import pytest

from tests.docs.pages import SHOWN, STEPS, PageError, Quote, as_printed_now, changed_by, cut_out, quotes, read, steps
from tests.docs.sums import sums

ALL = [quote for page in SHOWN for quote in quotes(page)]


@pytest.mark.parametrize("quote", ALL, ids=lambda one: f"{one.page}:{read(one.page)[: one.place[0]].count(chr(10))}")
def test_a_page_quotes_what_the_tool_prints_now(quote: Quote) -> None:
    assert as_printed_now(quote) == quote.quoted, "write it anew: python -m tests.docs.pages"


def test_the_steps_of_the_tutorial_lie_beside_it_as_files() -> None:
    assert steps("tutorial.md") == {file.name: file.read_text(encoding="utf-8") for file in STEPS.glob("*.yaml")}


def test_the_tutorial_goes_from_five_lines_by_a_failure_to_a_pass() -> None:
    files = steps("tutorial.md")
    assert 5 == files["01-gear.yaml"].count("\n")
    verdicts = [quote.quoted.splitlines()[1].split()[0] for quote in quotes("tutorial.md") if quote.picks[0] == "head"]
    assert ["OPEN", "PASS", "WARN", "PASS", "FAIL", "PASS", "PASS"] == verdicts


def test_every_fence_of_a_page_is_one_that_is_tested() -> None:
    for page in SHOWN:
        text = read(page)
        told = re.findall(r"^(<!-- \w+: [^\n]*-->\n)?```(\w*)\n.*?^```$", text, re.M | re.S)
        for comment, tongue in told:
            assert tongue in ("diff", "calc") or comment, f"{page}: an untested block ```{tongue}"


def sections() -> list[str]:
    """The parts of the worked numbers that hold a sum."""
    return [part for part in re.split(r"^## ", read("worked-numbers.md"), flags=re.M) if "```calc\n" in part]


@pytest.mark.parametrize("section", sections(), ids=lambda part: part.splitlines()[0])
def test_sums_come_to_what_the_page_says(section: str) -> None:
    names: dict[str, float] = {}
    for block in re.findall(r"```calc\n(.*?)```", section, re.S):
        for one in sums(block, names):
            assert one.comes_to == pytest.approx(float(one.said), abs=one.room * 1.0001), one.line


@pytest.mark.parametrize("section", sections(), ids=lambda part: part.splitlines()[0])
def test_what_a_sum_comes_to_is_what_the_tool_prints_below_it(section: str) -> None:
    names: dict[str, float] = {}
    asked, checked = "", 0
    for tongue, body in re.findall(r"^```(\w*)\n(.*?)^```$", section, re.M | re.S):
        if tongue == "calc":
            asked = list(sums(body, names))[-1].said
        elif not tongue and asked:
            assert re.search(rf"(?<![\d.]){re.escape(asked)}(?!\d)", body), f"{asked} is not in\n{body}"
            asked, checked = "", checked + 1
    assert checked and not asked, "the last sum of a section has the tool's own figure below it"


def test_a_change_that_fits_nowhere_is_told() -> None:
    assert "a: 1\nb: 3\n" == changed_by("a: 1\nb: 2\n", " a: 1\n-b: 2\n+b: 3\n")
    with pytest.raises(PageError, match="stand 0 times"):
        changed_by("a: 1\n", "-b: 2\n+b: 3\n")


def test_a_quote_takes_what_stands_under_its_line_and_marks_what_is_left_out() -> None:
    output = "\nONE\n  a\n    b\n  c\n\nTWO\n  d\n"
    assert "  …\n  a\n    b\n  …\n" == cut_out(output, ("a",))
    assert "ONE\n  a\n    b\n  c\n\nTWO\n  d\n" == cut_out(output, ("ONE", "TWO"))
    with pytest.raises(PageError, match="holds 'ONE'"):
        cut_out(output, ("TWO", "ONE"))


@pytest.mark.parametrize(
    ("line", "comes_to"), [("2 × 20 / cos(20°) = 42.57 um", 42.567), ('a = √(3² + 4²) + 3600" / 1° = 6.0', 6.0)]
)
def test_sums_are_read_as_they_are_written(line: str, comes_to: float) -> None:
    (one,) = sums(line, {})
    assert comes_to == pytest.approx(one.comes_to, abs=0.001)
