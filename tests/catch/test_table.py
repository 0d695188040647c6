"""The table of slips and its overlays belong together, whoever adds to them."""

from __future__ import annotations

from setupcheck.flow import rules
from tests.catch.making import WAITS, waits
from tests.catch.table import READER, TO_COME, changes_where, good_jobs, overlays, slips


def test_there_are_enough_slips_and_every_good_job_has_some() -> None:
    assert len(overlays()) >= 150
    assert len(slips()) >= 100
    assert {o.of for o in overlays()} == set(good_jobs())


def test_every_rule_of_the_table_is_in_the_book_or_told_as_one_to_come() -> None:
    known = {READER, *(rule.id for rule in rules().rules)}
    unknown = {r for slip in slips().values() for r in slip.rules if r not in known and not r.startswith(TO_COME)}
    assert unknown == set()


def test_every_overlay_is_a_slip_of_the_table_in_one_of_its_jobs_with_one_of_its_rules() -> None:
    odd = [
        o.told()
        for o in overlays()
        if o.slip not in slips() or o.of not in slips()[o.slip].jobs or o.rule not in slips()[o.slip].rules
    ]
    assert odd == []


def test_every_slip_is_made_in_every_job_of_its_row() -> None:
    made = {(o.slip, o.of) for o in overlays()}
    assert [(slip.id, job) for slip in slips().values() for job in slip.jobs if (slip.id, job) not in made] == []


def test_nearly_every_overlay_changes_one_entry_alone() -> None:
    more = [o for o in overlays() if len(o.sets) + len(o.takes) > 1]
    assert len(more) <= 0.06 * len(overlays())


def test_an_overlay_changes_an_entry_of_its_slip() -> None:
    odd = [
        o.told()
        for o in overlays()
        if not any(changes_where(slips()[o.slip].entry, key) for key in (*(c.key for c in o.sets), *o.takes))
    ]
    assert odd == []


def test_few_overlays_wait_for_their_rule() -> None:
    assert sum(map(waits, overlays())) <= 0.05 * len(overlays()), WAITS
