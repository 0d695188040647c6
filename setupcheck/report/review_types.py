"""What the review's JSON holds, format 1, key by key. `report.json` and what it calls write just this; mypy holds them to it.

A review loads none of this: the names stand in annotations alone. `report.review_schema` makes the published schema of them.
Lengths are in mm, deviations in um, small angles in arcsec unless a `unit` beside them says otherwise, in inch jobs as well.
"""

from __future__ import annotations

from typing import Literal, TypedDict

from setupcheck.report.review_blocks import (
    BacklashReadData,
    ContactData,
    HeatingPlanData,
    HouseData,
    InsertData,
    JointData,
    RecordData,
)

Verdict = Literal["pass", "warn", "fail", "open", "waived"]


class ReviewData(TypedDict):
    """The review of one job, as `setupcheck review --json` prints it.

    format         number of this format; it goes up when a key goes or means something else, not when one is added
    setupcheck     version of setupcheck that wrote it
    rule_book      which rule book judged
    house          the shop's house file that acted; null where none did
    record         the shop's record of its own devices that was read; null where none was
    job            which job file was read
    on             day of the review, as in 2027-03-31, for waivers that end; null where none was given
    verdict        the worst of all findings: fail, open, warn, pass. A missing value is `open`, never a pass
    counts         count of findings by their verdict
    quantities     every number or word that was looked at; the key is name, `@` and instance, as in `hold.reach@30/teeth`
    stacks         one entry for each requirement of the job, in the order of the job
    measure_first  typical values that move the tightest requirements most, so that measuring them pays first
    gates          dial readings to accept, each with everything else as planned
    lengths        lengths and diameters to accept, each with everything else as planned
    joints         interference joints, in words
    heating_plans  steps of each shrink fit
    contacts       where blue would mark a worm wheel, from the exact gap
    inserts        inserts of worm wheel cutters
    backlash_read  backlash as read on the finished wheel; null where none was read or it does not say enough yet
    worked_out     what else was worked out, one line for each thing
    findings       one entry for each rule at each place it looks at, passed ones as well: fail, open, warn, waived, pass
    cautions       what to mind or to check at an operation; none of them is ever settled by a number
    not_computed   entries of the job that this version does not look at
    taken          defaults that stand in for what the job leaves out, each an open ENTRY-001 too
    """

    format: int
    setupcheck: str
    rule_book: RuleBookData
    house: HouseData | None
    record: RecordData | None
    job: JobData
    on: str | None
    verdict: Verdict
    counts: dict[Verdict, int]
    quantities: dict[str, QuantityData]
    stacks: list[StackData]
    measure_first: list[FirstData]
    gates: list[GateData]
    lengths: list[LengthData]
    joints: list[JointData]
    heating_plans: list[HeatingPlanData]
    contacts: list[ContactData]
    inserts: list[InsertData]
    backlash_read: BacklashReadData | None
    worked_out: list[str]
    findings: list[FindingData]
    cautions: list[CautionData]
    not_computed: list[NotComputedData]
    taken: list[TakenData]


class RuleBookData(TypedDict):
    """The shipped rule book.

    version  its version
    sha256   hash of its files
    """

    version: str
    sha256: str


class JobData(TypedDict):
    """The job file.

    title   its title
    file    its name, without folders
    sha256  hash of its text, the same whatever its line ends
    """

    title: str
    file: str
    sha256: str


class QuantityData(TypedDict):
    """One quantity.

    value     number [unit] or word
    unit      its unit; empty for words and pure numbers
    rests_on  typical values it rests on
    lines     lines of the job file it belongs to
    """

    value: float | str | None
    unit: str
    rests_on: list[str]
    lines: list[int]


class EndsData(TypedDict):
    """Both ends of a signed figure.

    low, high  lower and upper end, in the unit beside it
    """

    low: float | None
    high: float | None


class CombinedData(TypedDict):
    """A figure from all its causes, in three ways; both ends where it is signed, one number where it starts at zero.

    worst         worst case: known vectors added as vectors, bounds added straight [unit]; null while it is open
    rss           root of the summed squares, shown and never judged [unit]; null while it is open
    likely        the value kept in so many of 100 draws as the job's confidence says [unit]; null while it is open
    chance        share of draws inside the limit, 0 to 1; null without a limit or while it is open
    chance_error  sampling error of that share, 0 to 1; null where there is no share
    causes        what it comes from, largest first
    """

    worst: float | EndsData | None
    rss: float | EndsData | None
    likely: float | EndsData | None
    chance: float | None
    chance_error: float | None
    causes: list[CauseData]


class CauseData(TypedDict):
    """One cause of a figure.

    cause  its name, the path of its entry in most cases
    op     operation; null for a bought part or a machine
    mode   how its bound is known, such as planned or measured
    worst  what it does at its bound [unit of the stack]
    share  its share of all causes, 0 to 1
    """

    cause: str
    op: int | None
    mode: str
    worst: float | None
    share: float


class ThenData(CombinedData):
    """A requirement as it was planned, where a measured value reaches it.

    margin      distance to the nearest limit as planned, positive inside [unit]
    margin_now  the same with what is measured [unit]; null while that is open
    """

    margin: float | None
    margin_now: float | None


class StackData(CombinedData):
    """One requirement.

    name   its name, `what`, `of` and `about` joined with points
    what   word of the requirement
    of     what is judged; null where the word says it
    about  against what; null where the word says it
    limit  both ends of its limit [unit]; null at the end that has none
    unit   unit of limit, figures and causes
    then   the requirement as planned, before anything was measured; null where nothing measured reaches it
    """

    name: str
    what: str
    of: str | None
    about: str | None
    limit: EndsData
    unit: str
    then: ThenData | None


class FirstData(TypedDict):
    """A typical value whose range moves a requirement.

    typical         its name
    ops             operations that rest on it
    best, worst     ends of its usual range [unit]
    unit            unit of the range
    requirement     name of the requirement it moves most
    share_of_limit  so much of that requirement's limit, 1 for all of it
    """

    typical: str
    ops: list[int]
    best: float
    worst: float
    unit: str
    requirement: str
    share_of_limit: float


class GateData(TypedDict):
    """A dial reading to accept, with everything else as planned.

    at            name of the reading
    key           path of its entry in the job file; null where it has none
    keys          paths of all entries that it settles
    op            operation; null for a bought part or a machine
    on            surface the dial runs on
    reading       largest reading to accept [um]; null where none brings the requirement inside or none matters
    step          step it is rounded to for the shop [um]; null without a reading
    planned       reading that is planned [um]
    unit          always um
    by            name of the requirement that sets it
    requirements  reading that each requirement would allow [um], by its name; null where it sets none
    band          larger readings that would do where the high spot lies in a known direction
    measured      whether it has been read already
    also          other operations of the same reading
    least         least reading that is needed [um]; null where there is none
    high_at       where the high spot lies; null where that is not known
    good_enough   whether the plan is finer than anything asks for
    """

    at: str
    key: str | None
    keys: list[str]
    op: int | None
    on: str
    reading: float | None
    step: float | None
    planned: float | None
    unit: Literal["um"]
    by: str
    requirements: dict[str, float | None]
    band: list[BandData]
    measured: bool
    also: list[int]
    least: float | None
    high_at: str | None
    good_enough: bool


class BandData(TypedDict):
    """A reading that would do in one direction.

    reading     largest reading to accept there [um]
    within_deg  so far to both sides of that direction [deg]
    high_at     the direction, such as a tooth
    """

    reading: float | None
    within_deg: float
    high_at: str


class LengthData(TypedDict):
    """A length or diameter to accept, with everything else as planned.

    key           path of its entry in the job file
    op            operation; null for a bought part
    what          what it is, in words
    low, high     ends to accept [unit]: sizes in mm, errors about the plan in um; null where that end has none
    unit          mm for sizes, um for errors about the plan
    step          step they are rounded to for the shop [unit]; null where no length alone brings the requirement inside
    by_low        name of the requirement that sets the lower end; empty where none does
    by_high       name of the requirement that sets the upper end; empty where none does
    requirements  both ends [unit] that each requirement would allow, by its name
    planned       size that is planned [unit]; null for an error about the plan
    measured      value as measured [unit]; null where it is still to come
    """

    key: str
    op: int | None
    what: str
    low: float | None
    high: float | None
    unit: Literal["mm", "um"]
    step: float | None
    by_low: str
    by_high: str
    requirements: dict[str, list[float | None]]
    planned: float | None
    measured: float | None


class FindingData(TypedDict):
    """A rule's answer at one place; rule and at together identify it.

    rule      id of the rule
    at        path of the place in the job
    op        operation; null where it belongs to none
    line      line of the job file
    verdict   answer of the rule; `open` where a number is missing, and `waived` where the job or the house says why
    quantity  quantity that was judged
    value     its value [unit] or word; null while it is open
    limit     limit [unit], both limits, or the words that are allowed; null where no limit could be had
    margin    distance to the nearest limit, positive inside [unit]; null for words and where nothing could be judged
    unit      unit of value, limit and margin
    missing   paths of the job file to fill
    message   the finding in words
    remedy    what to do, in words; empty where nothing is to be done
    sources   where the rule comes from
    evidence  how good the limit is, such as published or from memory
    rests_on  typical values used on the way
    house     who set the house limit, when and why; null where the rule book's own was used
    waiver    the reason given; null where it is not waived
    """

    rule: str
    at: str
    op: int | None
    line: int
    verdict: Verdict
    quantity: str
    value: float | str | None
    limit: float | str | list[float | str | None] | None
    margin: float | None
    unit: str
    missing: list[str]
    message: str
    remedy: str
    sources: list[SourceData]
    evidence: str
    rests_on: list[str]
    house: str | None
    waiver: str | None


class SourceData(TypedDict):
    """Where a rule comes from.

    ref    key of the reference in rules/sources.yaml
    place  place in it
    kind   how good the evidence is
    """

    ref: str
    place: str
    kind: str


class CautionData(TypedDict):
    """A caution of an operation.

    id        id of the caution
    op        operation; null where it belongs to none
    severity  stop-and-check asks for a signature before work goes on
    state     to check, to mind, or checked by whom
    text      the caution
    source    where it comes from
    """

    id: str
    op: int | None
    severity: Literal["caution", "stop-and-check"]
    state: str
    text: str
    source: str


class NotComputedData(TypedDict):
    """An entry that this version does not look at.

    at    its path in the job file
    line  its line
    what  what it says
    """

    at: str
    line: int
    what: str


class TakenData(TypedDict):
    """A default.

    at    path of the entry that is left out
    what  what stands in for it
    """

    at: str
    what: str
