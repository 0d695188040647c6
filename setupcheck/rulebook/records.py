"""The records of the rule book: rules, limits, sources, cautions, and what comes out of judging them.

Plain frozen data. Limits are in base units (mm, rad, degC, N, MPa, s); shares are fractions.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Literal

from setupcheck.record import record

FAMILIES = (
    "DATUM", "HOLD", "ALLOW", "STACK", "DIVIDE", "TILT", "CUTTER",
    "INSERT", "MESH", "FIT", "HEAT", "PLACE", "CLAMP", "MEASURE", "ENTRY",
)  # fmt: skip
"""Families of rules in the order of the job; the file of a family is its name in small letters."""

EVIDENCE = ("standard", "published", "shop record", "common practice", "screening choice", "from memory")
"""How good a limit is, best first."""

Verdict = Literal["pass", "warn", "fail", "open", "waived"]
VERDICTS: tuple[Verdict, ...] = ("fail", "open", "warn", "waived", "pass")
"""Findings are listed in this order."""

Level = Literal["warn", "fail", "open"]
"""What a broken requirement gives: `open` where the job has to state something before anything can be judged."""

Severity = Literal["caution", "stop-and-check"]
Shape = Literal["at_most", "at_least", "between", "one_of"]

GENERIC_FIELDS = ("value", "limit", "surface", "op", "name")
"""The only fields a message may hold."""


@record
class Place:
    """A line of a rule file."""

    file: str
    line: int


@record
class Reference:
    """One entry of sources.yaml: a document or a body of experience that rules may cite."""

    key: str
    title: str
    note: str = ""


@record
class Source:
    """Where a rule comes from: a reference, the place in it, and how good the evidence is."""

    ref: str
    place: str
    kind: str


@record
class Number:
    """A limit that stands in the rule book, in base units, and as it is written there."""

    value: float
    text: str


@record
class OfQuantity:
    """A limit that is another quantity of the same instance or of a thing around it, times a factor."""

    quantity: str
    times: float = 1.0


Limit = Number | OfQuantity


@record
class Requirement:
    """What is asked of the quantity. `low` and `high` for numbers, `allowed` for words."""

    shape: Shape
    low: Limit | None = None
    high: Limit | None = None
    allowed: tuple[str, ...] = ()


@record
class HouseSpan:
    """The span inside which a shop may set its own limit."""

    low: Number
    high: Number


@record
class Softening:
    """A broken limit only warns while `quantity` is at least `at_least`."""

    quantity: str
    at_least: Limit


@record
class Condition:
    """One field of `applies_when`: the fact has to be one of the values."""

    fact: str
    values: tuple[str | float | bool, ...]


@record
class Rule:
    """One rule. It has no scope of its own: it runs once for every instance of its quantity.

    remedy_from  a quantity of words that says what to do with this job's numbers; `remedy` where it has no value
    stands       finds its line in the rule file, which hardly any run asks for
    """

    id: str
    family: str
    title: str
    quantity: str
    require: Requirement
    level: Level
    message: str
    remedy: str
    why: str
    sources: tuple[Source, ...]
    stands: Callable[[], Place]
    applies_when: tuple[Condition, ...] = ()
    message_when_met: str = ""
    house_may_change: HouseSpan | None = None
    warn_within: float = 0.0
    only_warn_if: Softening | None = None
    uncertainty: str = ""
    asks_for: str = ""
    remedy_from: str = ""
    cautions: tuple[str, ...] = ()

    @property
    def place(self) -> Place:
        """The line it begins at."""
        return self.stands()

    @property
    def evidence(self) -> str:
        """The weakest evidence among the sources: a limit is no better than that."""
        return max((source.kind for source in self.sources), key=EVIDENCE.index)


@record
class Trigger:
    """What sets a caution off: facts of an instance of one kind and, where given, a number reaching a limit."""

    per: str
    when: tuple[Condition, ...] = ()
    quantity: str = ""
    at_least: Limit | None = None


@record
class Caution:
    """A safety line that an operation triggers whatever the findings say. It can never be waived or changed.

    >>> from setupcheck import Caution, example, review
    >>> book = review(example("index-plate")).rulebook
    >>> isinstance(book.cautions[0], Caution), book.cautions[0].severity in ("caution", "stop-and-check")
    (True, True)
    """

    id: str
    severity: Severity
    text: str
    trigger: Trigger
    sources: tuple[Source, ...]
    stands: Callable[[], Place]

    @property
    def place(self) -> Place:
        """The line it begins at."""
        return self.stands()


@record
class RuleBook:
    """Everything that was read from the rule files."""

    version: str
    sha256: str
    rules: tuple[Rule, ...]
    references: Mapping[str, Reference]
    cautions: tuple[Caution, ...]
    closing_line: str

    def rule(self, rule_id: str) -> Rule | None:
        """The rule of that id, or None."""
        return next((rule for rule in self.rules if rule.id == rule_id), None)


@record
class Waiver:
    """An entry of the job's `waive` list: this finding is accepted, for this reason, until this day.

    at     path or key of the instance, as the finding prints it
    until  ISO date text, empty when no end is given
    path   where the entry stands in the job, line its line
    """

    rule: str
    at: str
    reason: str
    until: str = ""
    path: str = "waive"
    line: int = 0


@record
class Answer:
    """An entry of the job's `checked` list: someone has checked this caution at this operation."""

    caution: str
    op: int | None
    by: str
    note: str = ""
    path: str = "checked"
    line: int = 0


@record
class Finding:
    """A rule's answer at one instance. Numbers are in base units; `unit` and `digits` say how to show them.

    at        path of the instance in the job; rule and at together identify the finding
    limit     number, (low, high), or the allowed words; None where no limit could be had
    margin    distance to the nearest limit, positive inside; None for words and where nothing could be judged
    missing   job paths that would settle an open finding
    rests_on  typical values used on the way
    house     who set the house limit, when and why; empty when the book's own limit was used
    waiver    the reason given; None when the finding is not waived

    >>> from setupcheck import Finding, example, review
    >>> found = review(example("index-plate")).evaluation.findings
    >>> one = next(finding for finding in found if finding.rule == "STACK-001")
    >>> isinstance(one, Finding), one.op, one.verdict, one.value <= one.limit
    (True, None, 'pass', True)
    """

    rule: str
    title: str
    at: str
    key: str
    op: int | None
    line: int
    verdict: Verdict
    quantity: str
    value: float | str | None
    limit: float | tuple[float, float] | tuple[str, ...] | None
    margin: float | None
    unit: str
    digits: int
    missing: tuple[str, ...]
    message: str
    remedy: str
    why: str
    sources: tuple[Source, ...]
    evidence: str
    rests_on: tuple[str, ...] = ()
    house: str = ""
    waiver: str | None = None
    cautions: tuple[str, ...] = ()


@record
class CautionLine:
    """A caution that an operation has triggered.

    state      "to check" or "checked by X" for stop-and-check; "to mind" (or "checked by X") for plain cautions
    because    why it is shown although the job does not settle it, empty when the trigger is certain
    """

    id: str
    op: int | None
    severity: Severity
    state: str
    text: str
    source: str
    because: str = ""

    @property
    def answered(self) -> bool:
        """True when someone has signed for it."""
        return self.state.startswith("checked by ")


@record
class Evaluation:
    """What came out of judging one job.

    not_applicable  how many instances each rule passed over (only rules that passed over any)
    idle            rules that found no instance at all
    """

    findings: tuple[Finding, ...]
    not_applicable: Mapping[str, int]
    idle: tuple[str, ...]
    cautions: tuple[CautionLine, ...]

    @property
    def counts(self) -> dict[Verdict, int]:
        """Number of findings of every verdict, zero included."""
        return {verdict: sum(f.verdict == verdict for f in self.findings) for verdict in VERDICTS}
