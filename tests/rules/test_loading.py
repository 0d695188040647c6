"""Reading rule files: what is taken, and what is refused with file, line and what to write."""

from __future__ import annotations

from pathlib import Path

import pytest

from setupcheck.errors import RuleBookError
from setupcheck.rulebook import FAMILIES, load_rulebook
from setupcheck.rulebook.records import Number, OfQuantity

from .bookshelf import CAUTIONS, QUANTITIES, RULE, load, write


def test_a_rule_is_read_into_base_units_with_its_place(tmp_path: Path) -> None:
    rule = load(tmp_path).rules[0]
    assert ("HOLD-001", "HOLD", "rules/hold.yaml", 1) == (rule.id, rule.family, rule.place.file, rule.place.line)
    assert Number(0.020, "20 um") == rule.require.high


def test_the_evidence_of_a_rule_is_its_weakest_source(tmp_path: Path) -> None:
    assert load(tmp_path).rules[0].evidence == "from memory"


def test_a_limit_may_be_a_quantity_of_the_same_dimension_times_a_factor(tmp_path: Path) -> None:
    rule = load(tmp_path, hold=RULE.replace("at_most: 20 um", "at_most: {quantity: hold.plan, times: 0.5}")).rules[0]
    assert OfQuantity("hold.plan", 0.5) == rule.require.high


def test_a_family_without_a_file_has_no_rules_and_other_files_are_not_looked_at(tmp_path: Path) -> None:
    rules = write(tmp_path, stray="nonsense: [")
    assert ["HOLD-001"] == [rule.id for rule in load_rulebook(rules, quantities=QUANTITIES).rules]


def test_the_sum_changes_with_any_byte_of_any_file_and_with_nothing_else(tmp_path: Path) -> None:
    first = load(tmp_path).sha256
    assert first == load(tmp_path).sha256
    assert first == load(tmp_path, stray="- not a rule file\n").sha256
    changed = {
        load(tmp_path, hold=RULE.replace("20 um", "21 um")).sha256,
        load(tmp_path, cautions=CAUTIONS.replace("It burns.", "It burns!")).sha256,
        load(tmp_path, stack="[]\n").sha256,
    }
    assert len(changed | {first}) == 4


def test_the_sum_does_not_depend_on_the_line_ends_of_a_system(tmp_path: Path) -> None:
    first = load(tmp_path).sha256
    path = tmp_path / "rules" / "hold.yaml"
    path.write_bytes(path.read_bytes().replace(b"\n", b"\r\n"))
    assert first == load_rulebook(tmp_path / "rules", quantities=QUANTITIES).sha256


def test_rules_come_in_the_order_of_families_and_numbers(tmp_path: Path) -> None:
    second = RULE.replace("HOLD-001", "HOLD-002")
    stack = RULE.replace("HOLD-001", "STACK-001")
    book = load(tmp_path, hold=second + RULE, stack=stack)
    assert ["HOLD-001", "HOLD-002", "STACK-001"] == [rule.id for rule in book.rules]
    assert FAMILIES.index("HOLD") < FAMILIES.index("STACK")


SPOILED = {
    "unknown key, nearest offered": (
        RULE.replace("remedy:", "remidy:"), 7, "there is no key 'remidy'. Did you mean remedy?"),
    "missing key": (RULE.replace("  why: It shows.\n", ""), 1, "'why' is missing. Write why: and its value"),
    "blank text": (RULE.replace("It shows.", "'  '"), 8, "'why' is blank. Write the text of why"),
    "unknown quantity": (
        RULE.replace("hold.runout", "hold.run-out"), 3, "there is no quantity 'hold.run-out'. Did you mean hold.runout?"),
    "unknown source": (RULE.replace("ref: ours", "ref: our"), 9, "there is no source 'our'. Did you mean ours?"),
    "unknown evidence": (
        RULE.replace("kind: from memory", "kind: hearsay"), 9,
        "there is no kind of evidence 'hearsay'. Write one of standard, published, shop record, common practice, "
        "screening choice, from memory"),
    "no source": (
        RULE[: RULE.index("sources")] + "sources: []\n", 9,
        "every rule and caution has a source. Write at least one, and how good it is"),
    "unknown fact": (
        RULE + "  applies_when: {hold.bye: spigot}\n", 10, "there is no fact 'hold.bye'. Did you mean hold.by?"),
    "unknown caution": (
        RULE + "  cautions: [hot-parts]\n", 10, "there is no caution 'hot-parts'. Did you mean hot-part?"),
    "unknown level": (RULE.replace("level: fail", "level: error"), 5,
        "there is no level 'error'. Write one of warn, fail, open"),
    "id of another family": (
        RULE.replace("HOLD-001", "STACK-001"), 1,
        "'STACK-001' is no id of this file. Write HOLD-NNN with three digits"),
    "id without three digits": (
        RULE.replace("HOLD-001", "HOLD-1"), 1, "'HOLD-1' is no id of this file. Write HOLD-NNN with three digits"),
    "id twice": (RULE + RULE, 10, "the id HOLD-001 is there twice. An id is never used again: take the next"),
    "unknown field": (
        RULE.replace("{name}", "{part}"), 6,
        "a message has no field {part}. Write {value}, {limit}, {surface}, {op}, {name}"),
    "format trick": (
        RULE.replace("{value}", "{value.real}"), 6,
        "a message has no field {value.real}. Write {value}, {limit}, {surface}, {op}, {name}"),
    "open brace": (
        RULE.replace("{limit}", "{limit"), 6,
        "a message has no field {. Write {value}, {limit}, {surface}, {op}, {name}"),
    "limit in another unit": (RULE.replace("20 um", "20 arcsec"), 4,
        "'20 arcsec' is no length. Write the limit in um"),
    "limit without unit": (RULE.replace("20 um", "20"), 4, "'20' is no length. Write the limit in um"),
    "limit with a decimal comma": (
        RULE.replace("{at_most: 20 um}", "\n    at_most: 2,5 um"), 5,
        "'2,5 um' is not an amount. Write a point for the decimal: 2.5 um"),
    "limit quantity in another unit": (
        RULE.replace("at_most: 20 um", "at_most: {quantity: hold.lean}"), 4,
        "hold.lean counts in arcsec, hold.runout in um. A limit needs the unit of what it limits"),
    "unknown limit quantity": (
        RULE.replace("at_most: 20 um", "at_most: {quantity: hold.plane}"), 4,
        "there is no quantity 'hold.plane'. Did you mean hold.plan?"),
    "factor below zero": (
        RULE.replace("at_most: 20 um", "at_most: {quantity: hold.plan, times: -1}"), 4,
        "times -1 turns the limit round. Write a factor above zero"),
    "two shapes": (
        RULE.replace("at_most: 20 um", "at_most: 20 um, at_least: 1 um"), 4,
        "a requirement has exactly one shape. Write one of at_most, at_least, between, one_of"),
    "between the wrong way round": (
        RULE.replace("at_most: 20 um", "between: [20 um, 10 um]"), 4,
        "20 um lies above 10 um. Write the smaller end first"),
    "between with one end": (
        RULE.replace("at_most: 20 um", "between: [20 um]"), 4, "between needs two limits. Write both: [20 um, 80 um]"),
    "house span beside the limit": (
        RULE + "  house_may_change: {from: 30 um, to: 40 um}\n", 10,
        "the book's own limit 20 um lies outside 30 um to 40 um. Widen the span, smaller end first"),
    "house span of a quantity": (
        RULE.replace("at_most: 20 um", "at_most: {quantity: hold.plan}")
        + "  house_may_change: {from: 30 um, to: 40 um}\n", 10,
        "only a limit that is one number can be changed by a house. Take house_may_change out"),
    "uncertainty beside warn_within": (
        RULE + "  uncertainty: hold.u\n  warn_within: 10 %\n", 10,
        "a measured value has its guard band and nothing else. Take warn_within and only_warn_if out"),
    "uncertainty in another unit": (
        RULE + "  uncertainty: hold.lean\n", 10,
        "hold.lean is no uncertainty of hold.runout: other unit. Name one in its unit"),
    "all of the limit is near": (
        RULE + "  warn_within: 100 %\n", 10, "'100 %' leaves nothing to warn within. Write a share such as 10 %"),
    "words with a distance": (
        RULE.replace("hold.runout", "hold.state").replace("at_most: 20 um", "one_of: [made]") + "  warn_within: 10 %\n",
        10, "words have no distance to a limit. Take this key out"),
    "no word allowed": (
        RULE.replace("hold.runout", "hold.state").replace("at_most: 20 um", "one_of: []"), 4,
        "no word is allowed. List the words that are allowed"),
    "asking at the wrong level": (
        RULE + "  asks_for: .runout\n", 10,
        "a rule of level fail asks for nothing. Take asks_for out, or use level: open"),
    "a map instead of a list": ("HOLD-001: {title: x}\n", 1,
        "'hold.yaml' is no list. Write one entry a line, each after a dash"),
    "not YAML": (RULE + "  quantity: hold.plan\n", 10, None),
}  # fmt: skip


@pytest.mark.parametrize(("text", "line", "says"), SPOILED.values(), ids=SPOILED.keys())
def test_a_spoiled_rule_is_refused_with_its_line(tmp_path: Path, text: str, line: int, says: str | None) -> None:
    with pytest.raises(RuleBookError) as refused:
        load(tmp_path, hold=text)
    assert ("rules/hold.yaml", line) == (refused.value.file, refused.value.line)
    if says is not None:
        assert f"rules/hold.yaml:{line}  {says}" == str(refused.value)


def test_a_limit_of_a_stack_cannot_be_a_number_because_its_unit_belongs_to_the_instance(tmp_path: Path) -> None:
    text = RULE.replace("HOLD", "STACK").replace("hold.runout", "stack.worst")
    with pytest.raises(RuleBookError, match="'20 um' cannot be a limit here: the unit belongs to the instance"):
        load(tmp_path, stack=text)
    book = load(tmp_path, stack=text.replace("20 um", "{quantity: stack.limit}"))
    assert OfQuantity("stack.limit") == book.rules[-1].require.high


SPOILED_CAUTIONS = {
    "unknown severity": (("severity: caution", "severity: mild"), "there is no severity 'mild'"),
    "unknown kind of instance": (("per: join", "per: joint"), "there is no kind of instance 'joint'. Did you mean"),
    "quantity alone": ((", at_least: 60 degC", ""), "a caution's quantity and at_least go together"),
    "unknown fact": (("join.by", "join.buy"), "there is no fact 'join.buy'. Did you mean join.by?"),
    "id that is no word": (("id: hot-part", "id: Hot"), "'Hot' is no caution id"),
    "id twice": (("id: gloves", "id: hot-part"), "the id hot-part is there twice"),
    "waivable": (("text: It burns.", "text: It burns., waive: true"), "there is no key 'waive'"),
    "temperature without unit": (("60 degC", "60"), "'60' is no temperature. Write the limit in degC"),
    "no closing line": (("closing_line: Planning aid only.\n", ""), "'closing_line' is missing"),
}


@pytest.mark.parametrize(("change", "says"), SPOILED_CAUTIONS.values(), ids=SPOILED_CAUTIONS.keys())
def test_a_spoiled_caution_is_refused(tmp_path: Path, change: tuple[str, str], says: str) -> None:
    with pytest.raises(RuleBookError) as refused:
        load(tmp_path, cautions=CAUTIONS.replace(*change))
    assert "rules/cautions.yaml" == refused.value.file
    assert says in str(refused.value)


def test_a_rule_folder_without_its_sources_is_refused_by_name(tmp_path: Path) -> None:
    rules = write(tmp_path)
    (rules / "sources.yaml").unlink()
    with pytest.raises(RuleBookError, match=r"rules/sources\.yaml: there is no such file"):
        load_rulebook(rules, quantities=QUANTITIES)
