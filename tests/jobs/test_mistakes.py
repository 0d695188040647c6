"""Planted mistakes: the right rule catches each at the right operation, no other rule joins in, the printed remedy clears it."""

from __future__ import annotations

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.remedies import remedy_in_words
from setupcheck.rulebook import Finding
from tests.jobs.mistakes import Mistake, Place, copies, copy_of, mistakes

PLANTED = [pytest.param(m, p, id=f"{m.name}-{p.job}") for m in mistakes() for p in m.places]
TYPED = [pytest.param(m, p, id=f"{m.name}-{p.job}") for m in mistakes() for p in m.places if p.typed]


def judged(text: str) -> Review:
    return review(read_job_text(text, "mistake.yaml"))


def spoken(found: Review) -> list[Finding]:
    return [f for f in found.evaluation.findings if f.verdict != "pass"]


def caught(found: Review, mistake: Mistake) -> list[Finding]:
    """Findings of the rule that has to catch the mistake, at the level it has to have."""
    return [f for f in spoken(found) if f.rule == mistake.rule and f.verdict == mistake.level]


def operations(found: Review, finding: Finding) -> set[int | None]:
    """Operations that a finding names: its own, that of its biggest cause, those its remedy changes."""
    named = {finding.op}
    if finding.key in found.results:
        named.add(found.results[finding.key].combined.shares[0].cause.op)
    if finding.key in found.remedies:
        remedy = found.remedies[finding.key]
        named |= {remedy.swap.op} if remedy.swap is not None else set()
        named |= {s.op for s in found.loaded.job.setups if f"(setups.{s.op}." in remedy_in_words(found, finding)}
    return named


def test_there_are_eight_mistakes_in_three_jobs_and_most_are_planted_twice() -> None:
    found = mistakes()
    assert len(found) == 8
    assert len({m.places[0].job for m in found}) == 3
    assert sum(len(m.places) == 2 for m in found) >= 7
    for mistake in found:
        for place in mistake.places:
            assert "\n" not in place.line + place.becomes + place.remedy
            assert len({place.line, place.becomes}) == 2


@pytest.mark.parametrize("mistake", mistakes(), ids=lambda m: m.name)
def test_the_copy_is_in_step_with_its_overlay_and_the_good_job(mistake: Mistake) -> None:
    path = next(p for p in copies() if p.stem == mistake.name)
    assert path.read_text("utf-8") == copy_of(mistake)
    good, copy = mistake.places[0].good().splitlines(), copy_of(mistake).splitlines()
    good = good[1:]  # the line that names the schema stands above the head of the copy
    copy = copy[len(copy) - len(good) :]
    assert sum(a != b for a, b in zip(good, copy, strict=True)) == 1


def test_no_other_file_stands_among_the_copies() -> None:
    folder = next(iter(copies())).parent
    assert {p.name for p in folder.iterdir()} == {p.name for p in copies()}


@pytest.mark.parametrize("mistake", mistakes(), ids=lambda m: m.name)
def test_the_head_of_a_copy_does_not_say_where_the_mistake_is(mistake: Mistake) -> None:
    head = copy_of(mistake).split("\n#\n")[0]
    place = mistake.places[0]
    assert f"op {place.op}" not in head and str(place.op) not in head
    assert mistake.thought not in copy_of(mistake)


@pytest.mark.parametrize(("mistake", "place"), PLANTED)
def test_a_planted_mistake_is_caught_by_its_rule_at_its_operation(mistake: Mistake, place: Place) -> None:
    found = judged(place.planted())
    assert found.verdict == "fail"
    findings = caught(found, mistake)
    assert findings
    for finding in findings:
        assert place.op in operations(found, finding), finding


@pytest.mark.parametrize(("mistake", "place"), PLANTED)
def test_no_rule_speaks_that_the_mistake_does_not_touch(mistake: Mistake, place: Place) -> None:
    found = judged(place.planted())
    assert {f.rule for f in spoken(found)} <= {mistake.rule, *mistake.with_it}
    assert [f for f in spoken(found) if f.op is not None and f.op != place.op] == []
    assert [f for f in spoken(found) if f.verdict == "open"] == []


@pytest.mark.parametrize("mistake", mistakes(), ids=lambda m: m.name)
def test_every_rule_said_to_speak_with_it_does_in_one_of_its_places(mistake: Mistake) -> None:
    rules = {f.rule for place in mistake.places for f in spoken(judged(place.planted()))}
    assert rules == {mistake.rule, *mistake.with_it}


@pytest.mark.parametrize(("mistake", "place"), TYPED)
def test_the_printed_remedy_has_the_figure_that_the_remedied_line_repeats(mistake: Mistake, place: Place) -> None:
    found = judged(place.planted())
    assert place.typed in place.remedy
    assert any(place.typed in remedy_in_words(found, f) for f in caught(found, mistake))


@pytest.mark.parametrize(("mistake", "place"), PLANTED)
def test_the_remedy_typed_in_clears_everything(mistake: Mistake, place: Place) -> None:
    good, better = judged(place.good()), judged(place.remedied())
    assert spoken(better) == []
    assert better.verdict == good.verdict == "pass"
