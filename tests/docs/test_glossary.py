"""The glossary has the words that the findings speak in, in alphabetical order, in a line or two each."""

from __future__ import annotations

import re
from typing import get_args

from setupcheck.jobfile.asked import What
from setupcheck.jobfile.setups import Centre
from setupcheck.rulebook.records import EVIDENCE, VERDICTS
from tests.docs.pages import read

HEADS = re.findall(r"^(\*\*.+?\*\*): (.+(?:\n.+)*)", read("glossary.md"), re.M)
NAMED = [name for head, _ in HEADS for name in re.findall(r"\*\*(.+?)\*\*", head)]
CODE = {name.strip("`") for name in NAMED if name.startswith("`")}


def ways_of_holding() -> set[str]:
    """Every word that `by` of a hold's centre takes."""
    found: set[str] = set()
    kinds = [Centre.model_fields["by"].annotation]
    while kinds:
        for one in get_args(kinds.pop()):
            if isinstance(one, str):
                found.add(one)
            else:
                kinds.append(one)
    return found


def test_levels_stand_in_the_glossary() -> None:
    assert set() == set(VERDICTS) - CODE


def test_every_figure_that_can_be_required_stands_in_it() -> None:
    figures = {name.strip("`") for name in NAMED} | set(re.findall(r"`([\w-]+)`", read("glossary.md")))
    assert len(get_args(What)) > 20
    assert set() == set(get_args(What)) - figures


def test_every_way_of_holding_stands_in_it() -> None:
    assert {"three-jaw", "spigot", "vee-block"} < ways_of_holding()
    assert set() == ways_of_holding() - CODE


def test_every_kind_of_evidence_is_told() -> None:
    assert set() == {kind for kind in EVIDENCE if f"`{kind}`" not in read("glossary.md")}


def test_words_are_in_order_once_each_and_short() -> None:
    names = [name.strip("`").lower().replace("-", " ") for name in NAMED]
    assert sorted(set(names)) == sorted(names)
    firsts = [re.findall(r"\*\*(.+?)\*\*", head)[0].strip("`").lower().replace("-", " ") for head, _ in HEADS]
    assert sorted(firsts) == firsts
    assert [] == [head for head, told in HEADS if told.count("\n") > 1]
    assert len(HEADS) == read("glossary.md").count("\n**")
