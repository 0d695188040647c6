"""The rule book: what has to hold, how good the reasons are, and what a job makes of it. Knows no job file, no numpy.

`load_rulebook` reads the rule files, `house.load_house` a shop's own limits, `evaluate` judges the numbers of one job,
`verdict` sums up, `describe` prints the rules.
"""

from setupcheck.rulebook.cautions import TO_CHECK, TO_MIND
from setupcheck.rulebook.evaluate import evaluate, ordered, verdict
from setupcheck.rulebook.facts import FACTS
from setupcheck.rulebook.judging import GUARD_FACTOR, Judgement, judge, judge_word
from setupcheck.rulebook.loading import load_rulebook
from setupcheck.rulebook.needs import BY_INSTANCE, KINDS, NAME_FACT, SURFACE_FACT, Book, Fact, Facts, Scope, Unknown
from setupcheck.rulebook.records import (
    EVIDENCE,
    FAMILIES,
    VERDICTS,
    Answer,
    Caution,
    CautionLine,
    Evaluation,
    Finding,
    Rule,
    RuleBook,
    Source,
    Verdict,
    Waiver,
)

__all__ = [
    "BY_INSTANCE",
    "EVIDENCE",
    "FACTS",
    "FAMILIES",
    "GUARD_FACTOR",
    "KINDS",
    "NAME_FACT",
    "SURFACE_FACT",
    "TO_CHECK",
    "TO_MIND",
    "VERDICTS",
    "Answer",
    "Book",
    "Caution",
    "CautionLine",
    "Evaluation",
    "Fact",
    "Facts",
    "Finding",
    "Judgement",
    "Rule",
    "RuleBook",
    "Scope",
    "Source",
    "Unknown",
    "Verdict",
    "Waiver",
    "evaluate",
    "judge",
    "judge_word",
    "load_rulebook",
    "ordered",
    "verdict",
]
