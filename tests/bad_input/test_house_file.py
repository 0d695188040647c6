"""House files that cannot be used: every mistake in one run, each with its line and what would be right; nothing of it acts."""

from __future__ import annotations

import pickle
import random
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from setupcheck.errors import HouseError, SetupcheckError
from setupcheck.flow import read_house, rules

GOOD = """\
house: Toolroom
limits:
  - {rule: HOLD-006, limit: 40 %, who: foreman, why: lapped pairs, when: 2027-01-15}
levels:
  - {rule: HOLD-004, level: fail, who: foreman, why: every device has a record, when: 2027-01-15}
rules:
  - id: SHOP-001
    title: Work stands near its jaws
    quantity: hold.overhang
    require: {at_most: 1.5}
    level: warn
    message: "op {op} cuts {value} diameters out, {limit} is our custom"
    remedy: Support the far end.
    why: Our jaws are short.
    sources: [{ref: house, place: scrapped bushes, kind: shop record}]
    cautions: [work-overhang]
typical:
  runout:
    four-jaw: {value: 6 um, note: 20 truings, who: K. Lind, when: 2026-11-02}
waive:
  - {rule: MESH-008, reason: thin teeth wanted, who: K. Lind, until: 2027-12-31}
"""

MISTAKES = {
    # top
    "no name": ("house: Toolroom\n", "", 1, "'house' is missing. Write house: and its value"),
    "long name": ("Toolroom", "T" * 61, 1, "more than 60 characters"),
    "unknown key": ("limits:", "limit:", 2, "there is no key 'limit'. Did you mean limits?"),
    "no list": ("waive:\n  - ", "waive:\n  ", 20, "'waive' is no list"),
    "key twice": ("levels:", "limits:", 4, "limits"),
    # limits
    "unknown rule": ("HOLD-006", "HOLD-06", 3, "there is no rule 'HOLD-06'. Did you mean HOLD-016?"),
    "outside": ("40 %", "51 %", 3, "HOLD-006 may be set from 20 % to 50 %, not to 51 %"),
    "unit": ("40 %", "40 um", 3, "'40 um' is no share. Write the limit in %"),
    "no number": ("40 %", "lots", 3, "'lots'"),
    "fixed": ("HOLD-006", "STACK-001", 3, "STACK-001 has no limit that a house may change"),
    "own rule's limit": ("HOLD-006", "SHOP-001", 3, "SHOP-001 is the house's own rule. Change it under rules"),
    "twice": ("levels:\n", "  - {rule: HOLD-006, limit: 30 %, who: a, why: b, when: 2027-01-15}\nlevels:\n", 4,
              "HOLD-006 has two house limits"),
    "no who": ("who: foreman, why: lapped", "why: lapped", 3, "'who' is missing"),
    "no day": ("lapped pairs, when: 2027-01-15", "lapped pairs, when: soon", 3, "'soon' is not a date"),
    # levels
    "softer": ("{rule: HOLD-004, level: fail", "{rule: STACK-001, level: warn", 5,
               "STACK-001 fails in the book, and a house makes a rule stricter, never softer"),
    "as it is": ("level: fail,", "level: warn,", 5, "HOLD-004 has level warn in the book already"),
    "to open": ("level: fail,", "level: open,", 5, "a house changes nothing about what is open"),
    "of open": ("HOLD-004", "HOLD-003", 5, "HOLD-003 has level open in the book, and a house changes nothing about"),
    "no level": ("level: fail,", "level: stop,", 5, "there is no level 'stop'. Write one of warn, fail, open"),
    "a caution's level": ("HOLD-004", "hot-part", 5, "hot-part is a caution, and no house changes or waives a caution"),
    # own rules
    "book's id": ("SHOP-001", "HOLD-001", 7, "HOLD-001 is a rule of the book, which stays as it is"),
    "outside ids": ("SHOP-001", "SHOP-000", 7, "'SHOP-000' is no id of an own rule. Write SHOP-001 to SHOP-999"),
    "other family": ("SHOP-001", "TOOL-001", 7, "'TOOL-001' is no id of an own rule"),
    "unknown quantity": ("hold.overhang", "hold.overhung", 9,
                         "there is no quantity 'hold.overhung'. Did you mean hold.overhang?"),
    "quantity of no number": ("hold.overhang", "route.floor", 9, "there is no quantity 'route.floor'"),
    "a word": ("hold.overhang", "hold.error_kind", 10, "hold.error_kind is a word. Write one_of"),
    "no word": ("{at_most: 1.5}", "{one_of: [near, far]}", 10, "hold.overhang is a number. Write at_most"),
    "limit in a unit": ("at_most: 1.5", "at_most: 1.5 mm", 10, "'1.5 mm' is no plain number"),
    "limit a word": ("at_most: 1.5", "at_most: {quantity: hold.error_kind}", 10, "hold.error_kind is a word"),
    "two shapes": ("{at_most: 1.5}", "{at_most: 1.5, at_least: 1}", 10, "exactly one shape"),
    "field": ("{limit} is our", "{custom} is our", 12, "a message has no field {custom}"),
    "cites": ("ref: house", "ref: iso-286", 15, "there is no source 'iso-286'. Write one of house"),
    "evidence": ("kind: shop record", "kind: standard", 15, "'standard' is no evidence of an own rule"),
    "no such caution": ("[work-overhang]", "[work-overhand]", 16, "Did you mean work-overhang?"),
    "house of a house": ("    level: warn\n", "    level: warn\n    house_may_change: {from: 1, to: 2}\n", 12,
                         "an own rule is the house's already"),
    "no title": ("    title: Work stands near its jaws\n", "", 7, "'title' is missing"),
    "no fact": ("    level: warn\n", "    level: warn\n    applies_when: {moon: full}\n", 12, "there is no fact 'moon'"),
    # typical values
    "unknown what": ("  runout:\n", "  run-out:\n", 18, "there is no typical value 'run-out'. Did you mean runout?"),
    "unknown device": ("four-jaw:", "for-jaw:", 19, "no typical runout is known of a device 'for-jaw'. Did you mean"),
    "angle for a length": ("6 um", "6'", 19, "6'"),
    "no unit": ("6 um", "6", 19, "6"),
    "no error": ("6 um", "0 um", 19, "'0 um' says that the device has no error"),
    "no note": ("note: 20 truings, ", "", 19, "'note' is missing"),
    # waivers
    "no reason": ("reason: thin teeth wanted, ", "", 21, "the waiver of MESH-008 gives no reason"),
    "blank reason": ("thin teeth wanted", "' '", 21, "the waiver of MESH-008 gives no reason"),
    "no end": (", until: 2027-12-31", "", 21, "'until' is missing"),
    "ended": ("2027-12-31", "2026-12-31", 21, "the waiver of MESH-008 ended on 2026-12-31"),
    "waived caution": ("MESH-008", "hot-part", 21, "hot-part is a caution"),
    "waived failure": ("MESH-008", "STACK-001", 21, "STACK-001 fails where it is broken, and a house waives warnings alone"),
    "waived and raised": ("MESH-008", "HOLD-004", 21, "HOLD-004 is made to fail under levels and waived here"),
    # record
    "no record": ("waive:", "record: gone.csv\nwaive:", 20, "there is no record of devices 'gone.csv' beside the house"),
}  # fmt: skip


def house(folder: Path, text: str, *, on: str | None = None) -> HouseError:
    path = folder / "house.yaml"
    path.write_text(text, encoding="utf-8")
    with pytest.raises(HouseError) as refused:
        read_house(path, on=on)
    return refused.value


def test_the_file_without_a_mistake_is_read(tmp_path: Path) -> None:
    path = tmp_path / "house.yaml"
    path.write_text(GOOD, encoding="utf-8")
    found = read_house(path, on="2027-02-01")
    assert [rule.id for rule in found.rules] == ["SHOP-001"] and found.notes == ()


@pytest.mark.parametrize("mistake", MISTAKES)
def test_a_mistake_is_told_with_its_line_and_what_would_be_right(tmp_path: Path, mistake: str) -> None:
    old, new, line, says = MISTAKES[mistake]
    assert old in GOOD
    wrong = house(tmp_path, GOOD.replace(old, new, 1), on="2027-02-01")
    told = str(wrong).splitlines()
    assert f"house.yaml:{line}  " in told[0] and says in told[0], told
    assert [*told[1:]] == [HouseError.HOLDS]  # one mistake, one message
    assert wrong.wrong[0].hint or mistake == "key twice"


def test_all_mistakes_are_told_in_one_run_in_the_order_of_the_file(tmp_path: Path) -> None:
    text = GOOD
    for name in ("outside", "no day", "as it is", "outside ids", "unknown quantity", "field", "evidence",
                 "no such caution", "unknown device", "no reason", "no record"):  # fmt: skip
        text = text.replace(MISTAKES[name][0], MISTAKES[name][1], 1)
    text += "  - {rule: MESH-008, reason: again, who: a, until: 2027-12-31}\n"
    told = str(house(tmp_path, text)).splitlines()
    lines = [int(one.split("house.yaml:")[1].split()[0]) for one in told[:-1]]
    assert lines == sorted(lines) and {3, 5, 7, 9, 12, 15, 16, 19, 20, 22, 23} == set(lines)
    assert len([one for one in told if "house.yaml:3 " in one]) == 2


def test_two_own_rules_of_one_id_are_refused(tmp_path: Path) -> None:
    start, end = GOOD.index("  - id: SHOP-001"), GOOD.index("typical:")
    wrong = house(tmp_path, GOOD[:end] + GOOD[start:end] + GOOD[end:])
    assert ["the id SHOP-001 is there twice"] == [one.problem for one in wrong.wrong] and wrong.wrong[0].line == 17


def test_what_is_wrong_with_the_record_is_told_with_its_own_file_and_line(tmp_path: Path) -> None:
    (tmp_path / "own.csv").write_text("device, what, date, value\nfour-jaw-A, runout, soon, 6 um\n", encoding="utf-8")
    told = str(house(tmp_path, GOOD.replace("waive:", "record: own.csv\nwaive:") + "x: 1\n")).splitlines()
    assert "house.yaml:23  there is no key 'x'" in told[0]
    assert "own.csv:2  'soon' is not a date" in told[1]


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("", "empty"),
        ("house: Toolroom\n", "the file changes nothing"),
        ("- a\n- b\n", "is no map"),
        ("house: [", "house.yaml:"),
        ("house: Tool\nlimits: 3\n", "'limits' is no list"),
        ("house: Tool\nlimits: [3, {}]\n", "is no map"),
        ("house: Tool\nrules: {a: 1}\n", "'rules' is no list"),
        ("house: Tool\nrules: [3, [], {}]\n", "is no map"),
        ("house: Tool\ntypical: [1]\n", "is no map"),
        ("house: Tool\ntypical: {runout: 3}\n", "is no map"),
        ("house: Tool\nrecord: [a]\n", "is not one value"),
        ('house: "T\\e[31m"\nrecord: a\n', "cannot be printed"),
    ],
)
def test_a_file_of_another_shape_is_refused(tmp_path: Path, text: str, says: str) -> None:
    assert says in str(house(tmp_path, text))


def test_the_error_survives_pickling(tmp_path: Path) -> None:
    wrong = house(tmp_path, GOOD.replace("40 %", "99 %").replace("6 um", "6 K"))
    assert str(pickle.loads(pickle.dumps(wrong))) == str(wrong)


WORDS = (
    "house", "limits", "levels", "rules", "typical", "record", "waive", "rule", "HOLD-004", "fail", "6 um", "null", "[]",
    "{}", "true", "2027-01-15", "id", "SHOP-001", "stack.worst", "one_of", "between", "[1, 2]", "{quantity: hold.reach}",
    "~", "1e999", "'", '"', "&a", "*a", "- ", ": ", "\n", "\t", "\u202e",
)  # fmt: skip


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(seed=st.integers(0, 10**6), cuts=st.integers(1, 5))
def test_junk_in_a_house_file_is_refused_or_read_and_never_a_traceback(tmp_path: Path, seed: int, cuts: int) -> None:
    draw, text, before = random.Random(seed), GOOD, rules()
    for _ in range(cuts):
        start = draw.randrange(len(text))
        text = text[:start] + draw.choice(WORDS) + text[start + draw.randrange(25) :]
    path = tmp_path / "house.yaml"
    path.write_text(text, encoding="utf-8")
    try:
        read_house(path)
    except SetupcheckError as refused:
        assert isinstance(refused, HouseError) and refused.wrong and HouseError.HOLDS in str(refused)
    assert rules() is before
