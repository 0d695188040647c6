"""Cautions: when they are printed, that not knowing prints them too, and how they are answered."""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any

import pytest

from setupcheck.rulebook import FACTS, Answer, Evaluation, Fact, RuleBook, Unknown, evaluate, load_rulebook, verdict

from .bookshelf import QUANTITIES, load
from .fakebook import QUANTITIES as SHIPPED_QUANTITIES
from .fakebook import FakeBook, FakeScope, Has, Lacks, facts_from

JOIN = FakeScope("join", "50", "setups.50.join", 50, 70)
HOLDS = [FakeScope("hold", f"10/{step}", f"setups.10.hold.{step}", 10) for step in ("centre", "square")]
RULES = Path(__file__).parents[2] / "rules"


def run(folder: Path, values: dict[Any, Any], facts: dict[str, Any], *answers: Answer) -> Evaluation:
    fake = FakeBook(QUANTITIES, [*HOLDS, JOIN], values)
    return evaluate(load(folder), fake, facts_from(facts), answers=answers)


def ids(done: Evaluation) -> list[str]:
    return [line.id for line in done.cautions]


def test_a_caution_is_printed_once_an_operation_whatever_the_findings_say(tmp_path: Path) -> None:
    done = run(tmp_path, {"hold.runout": Has(0.0)}, {"setup.machine_kind": "lathe"})
    assert [("gloves", 10, "caution", "to mind", "No gloves.", "")] == [
        (c.id, c.op, c.severity, c.state, c.text, c.because) for c in done.cautions
    ]


def test_the_sources_of_a_caution_are_one_line(tmp_path: Path) -> None:
    done = run(tmp_path, {}, {"setup.machine_kind": "lathe"})
    assert "practice of the trade (from memory); our own choice, hands (screening choice)" == done.cautions[0].source


def test_a_number_sets_a_caution_off_at_its_limit_and_not_below(tmp_path: Path) -> None:
    assert ["hot-part"] == ids(run(tmp_path, {"join.heat": Has(60.0)}, {}))
    assert [] == ids(run(tmp_path, {"join.heat": Has(59.9)}, {}))
    assert [] == ids(run(tmp_path, {}, {}))


def test_a_number_that_is_not_there_is_no_reason_to_keep_quiet(tmp_path: Path) -> None:
    done = run(tmp_path, {"join.heat": Lacks(("setups.50.join.heat.hub",))}, {})
    assert [("hot-part", "not stated: setups.50.join.heat.hub")] == [(c.id, c.because) for c in done.cautions]


def test_a_fact_that_is_not_stated_is_no_reason_to_keep_quiet(tmp_path: Path) -> None:
    done = run(tmp_path, {}, {"join.by": Unknown("setups.50.join.by")})
    assert [("press-force", "to check", "not stated: setups.50.join.by")] == [
        (c.id, c.state, c.because) for c in done.cautions
    ]


def test_a_material_that_is_named_and_not_known_is_not_called_unstated(tmp_path: Path) -> None:
    done = run(tmp_path, {}, {"join.by": Unknown("parts.wheel.material", "sintered iron")})
    assert ["not known of sintered iron: parts.wheel.material"] == [c.because for c in done.cautions]


def test_a_certain_trigger_takes_the_place_of_a_doubtful_one_at_the_same_operation(tmp_path: Path) -> None:
    kinds: dict[str, Fact] = {"10/centre": Unknown("setups.10.machine"), "10/square": "lathe"}
    fake = FakeBook(QUANTITIES, HOLDS, {})
    done = evaluate(load(tmp_path), fake, lambda at, name: kinds[at.key] if name == "setup.machine_kind" else None)
    assert [("gloves", "")] == [(c.id, c.because) for c in done.cautions]


def test_stop_and_check_stands_first(tmp_path: Path) -> None:
    done = run(tmp_path, {"join.heat": Has(180.0)}, {"join.by": "press", "setup.machine_kind": "lathe"})
    assert ["press-force", "gloves", "hot-part"] == ids(done)


def test_a_stop_and_check_is_open_until_somebody_signs_for_that_operation(tmp_path: Path) -> None:
    passing: dict[Any, Any] = {"hold.runout": Has(0.0)}
    press = {"join.by": "press"}
    done = run(tmp_path, passing, press)
    assert "open" == verdict(done.findings, done.cautions)
    done = run(tmp_path, passing, press, Answer("press-force", 50, "KL"))
    assert ("checked by KL", "pass") == (done.cautions[0].state, verdict(done.findings, done.cautions))
    done = run(tmp_path, passing, press, Answer("press-force", 40, "KL"))
    assert ("to check", "open") == (done.cautions[0].state, verdict(done.findings, done.cautions))
    done = run(tmp_path, passing, press, Answer("press-force", 50, "  "))
    assert ("to check", "open") == (done.cautions[0].state, verdict(done.findings, done.cautions))


@pytest.mark.parametrize(
    ("answer", "message", "remedy"),
    [
        (
            Answer("press-forse", 50, "KL"),
            "there is no caution 'press-forse' to check off",
            "Did you mean press-force?",
        ),
        (Answer("pressing", 50, "KL"), "there is no caution 'pressing' to check off", "Did you mean press-force?"),
        (Answer("glove", 50, "KL"), "there is no caution 'glove' to check off", "Did you mean gloves?"),
        (Answer("coolant", 50, "KL"), "there is no caution 'coolant' to check off", "Take the entry out."),
        (Answer("press-force", 40, "KL"), "press-force is not asked at op 40", "It is asked at op 50."),
        (Answer("hot-part", 50, "KL"), "hot-part is not asked at op 50", "Take the entry out."),
        (Answer("press-force", 50, ""), "press-force at op 50 is checked by nobody", "Write initials under by."),
    ],
)
def test_a_signature_that_answers_nothing_is_told(tmp_path: Path, answer: Answer, message: str, remedy: str) -> None:
    done = run(tmp_path, {}, {"join.by": "press"}, answer)
    assert [("CHECK-001", "warn", message, remedy)] == [(f.rule, f.verdict, f.message, f.remedy) for f in done.findings]


# -- the shipped cautions


def shipped() -> RuleBook:
    return load_rulebook(RULES, quantities=SHIPPED_QUANTITIES)


SCOPES = {
    "job": FakeScope("job"),
    "setup": FakeScope("setup", "30", "setups.30", 30),
    "hold": FakeScope("hold", "30/centre", "setups.30.hold.centre", 30),
    "cut": FakeScope("cut", "30/teeth", "setups.30.cut.teeth", 30),
}
OPERATIONS = {
    "turning in a four-jaw chuck": (
        {"setup.kind": "cut", "setup.machine_kind": "lathe", "hold.by": "four-jaw", "part.material_family": "steel"},
        ["chuck-key-and-jaws", "indicating-out-of-gear", "gloves-near-spindle"]),
    "turning bronze in soft jaws over shims": (
        {"setup.kind": "cut", "setup.machine_kind": "lathe", "hold.by": "shimmed-jaws",
         "part.material_family": "copper-alloy"},
        ["chuck-key-and-jaws", "indicating-out-of-gear", "shims-held-captive", "gloves-near-spindle", "bronze-chips"]),
    "flying teeth on a tilted head": (
        {"setup.kind": "cut", "setup.machine_kind": "dividing-head", "hold.by": "spigot", "head.tilted": True,
         "cutter.kind": "single-point", "cutter.insert": True, "part.material_family": "copper-alloy", "part.lead": True,
         "cut.kind": "teeth", "job.has_mesh": True},
        ["carbide-dust", "fly-cutter-indexing", "fly-cutter-one-screw", "gloves-near-spindle", "bronze-chips",
         "tilted-head-drops", "insert-at-the-bench-wheel", "diamond-on-steel", "sharp-fresh-teeth", "head-lifting",
         "leaded-alloy-dust", "nip-of-worm-and-wheel"]),
    "turning between centres": (
        {"setup.kind": "cut", "setup.machine_kind": "lathe", "hold.by": "centres", "part.material_family": "steel"},
        ["between-centres", "gloves-near-spindle"]),
    "reaming holes on a rotary table": (
        {"setup.kind": "cut", "setup.machine_kind": "rotary-table", "hold.by": "indicator", "cutter.kind": "reamer",
         "part.material_family": "cast-iron"},
        ["hands-while-indexing", "drill-and-reamer-chips", "gloves-near-spindle", "head-lifting"]),
    "boring on a rotary table": (
        {"setup.kind": "cut", "setup.machine_kind": "rotary-table", "cutter.kind": "boring-head",
         "part.material_family": "steel"},
        ["hands-while-indexing", "gloves-near-spindle", "head-lifting"]),
    "drilling": (
        {"setup.kind": "cut", "setup.machine_kind": "drill-press", "cutter.kind": "drill",
         "part.material_family": "steel"},
        ["drill-and-reamer-chips", "gloves-near-spindle"]),
    "grinding between centres": (
        {"setup.kind": "cut", "setup.machine_kind": "grinder", "hold.by": "taper-mandrel",
         "cutter.kind": "grinding-wheel", "cut.grinds": True, "cut.kind": "cylinder", "part.material_family": "steel"},
        ["wheel-overspeed", "between-centres", "grinding-wheel", "grinding-dust-and-coolant", "gloves-near-spindle",
         "coolant-mist"]),
    "grinding a face of beryllium copper": (
        {"setup.kind": "cut", "setup.machine_kind": "grinder", "cut.grinds": True, "cut.kind": "face",
         "part.material_family": "copper-alloy", "part.beryllium": True, "part.lead": False},
        ["wheel-overspeed", "side-grinding", "beryllium-copper", "grinding-wheel", "grinding-dust-and-coolant",
         "gloves-near-spindle", "bronze-chips", "coolant-mist", "beryllium-copper-cut"]),
    "turning beryllium copper": (
        {"setup.kind": "cut", "setup.machine_kind": "lathe", "cut.grinds": False, "part.material_family": "copper-alloy",
         "part.beryllium": True},
        ["gloves-near-spindle", "bronze-chips", "beryllium-copper-cut"]),
    "broaching": (
        {"setup.kind": "cut", "setup.machine_kind": "press", "cutter.kind": "broach", "part.material_family": "steel"},
        ["broach-force"]),
    "grinding in a lathe": (
        {"setup.kind": "cut", "setup.machine_kind": "lathe", "hold.by": "spigot", "cutter.kind": "grinding-wheel",
         "cut.grinds": True, "cut.kind": "bore", "part.material_family": "steel"},
        ["wheel-overspeed", "grinding-wheel", "grinding-dust-and-coolant", "grinding-wheel-in-a-lathe",
         "gloves-near-spindle", "coolant-mist"]),
    "grinding on a mill": (
        {"setup.kind": "cut", "setup.machine_kind": "mill", "cutter.kind": "grinding-wheel", "cut.grinds": True,
         "cut.kind": "slot", "part.material_family": "steel"},
        ["wheel-overspeed", "grinding-wheel", "grinding-dust-and-coolant", "grinding-wheel-in-a-lathe",
         "gloves-near-spindle", "coolant-mist"]),
    "hobbing": (
        {"setup.kind": "cut", "setup.machine_kind": "mill", "cutter.kind": "hob", "part.material_family": "steel"},
        ["gloves-near-spindle"]),
    "shrinking on": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": "oven", "heat.hot": True, "join.joint": "oiled"},
        ["glove-heat-rating", "hot-part", "shrink-seized-halfway"]),
    "shrinking a degreased blind bronze hub on by flame": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": "flame", "heat.hot": True, "join.joint": "degreased",
         "hub.may_trap": True, "part.fume": True, "part.zinc": True, "heat.above_cap": True},
        ["glove-heat-rating", "open-flame-alloy", "heat-above-cap", "solvent-before-heat", "sealed-cavity-heat",
         "hot-part", "open-flame-fire", "zinc-fume", "heat-uneven", "shrink-seized-halfway"]),
    "shrinking a hub of beryllium copper on": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": "oven", "part.beryllium": True},
        ["beryllium-copper-heat", "glove-heat-rating", "hot-part", "shrink-seized-halfway"]),
    "shrinking a cast-iron hub on": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": "oven", "part.material_family": "cast-iron"},
        ["glove-heat-rating", "hot-part", "cast-iron-heat", "shrink-seized-halfway"]),
    "shrinking a sintered hub on": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": "oven", "hub.porous": True},
        ["glove-heat-rating", "sintered-oil-heat", "hot-part", "shrink-seized-halfway"]),
    "shrinking an iron hub on from an oil bath": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": "oil-bath", "hub.brittle": True},
        ["glove-heat-rating", "oil-bath-flash-point", "oil-bath-water", "hub-burst", "hot-part",
         "shrink-seized-halfway"]),
    "shrinking on by induction and dry ice": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": "induction", "heat.cold_by": "dry-ice",
         "heat.deep_cold": True, "shaft.material_family": "copper-alloy"},
        ["glove-heat-rating", "dry-ice-room", "hot-part", "heat-uneven", "induction-implant", "cold-part-and-frost",
         "shrink-seized-halfway"]),
    "shrinking on from liquid nitrogen": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": "oven", "heat.cold_by": "liquid-nitrogen",
         "heat.deep_cold": True, "shaft.material_family": "steel"},
        ["glove-heat-rating", "liquid-nitrogen-room", "cold-brittle-steel", "hot-part", "nitrogen-bath-spits",
         "cold-part-and-frost", "liquid-air-and-oil", "shrink-seized-halfway"]),
    "shrinking a blind hub onto a shaft from dry ice, by cold alone": (
        {"setup.kind": "join", "join.by": "shrink", "heat.by": None, "heat.hot": False, "heat.cold_by": "dry-ice",
         "hub.may_trap": True, "join.may_trap": True, "heat.deep_cold": True, "shaft.material_family": "steel"},
        ["sealed-cavity-cold", "dry-ice-room", "cold-brittle-steel", "cold-part-and-frost", "shrink-seized-halfway"]),
    "cutting what was shrunk on just before": (
        {"setup.kind": "cut", "setup.machine_kind": "lathe", "setup.follows_heat": True,
         "part.material_family": "steel"},
        ["gloves-near-spindle", "machined-while-hot"]),
    "shrinking up to a stop, onto a hollow shaft from the freezer": (
        {"setup.kind": "join", "join.by": "shrink", "join.has_stop": True, "heat.by": "oven", "heat.cold_by": "freezer",
         "shaft.hollow": True},
        ["glove-heat-rating", "hot-part", "hub-held-while-cooling", "chilled-hollow-shaft", "cold-part-and-frost",
         "shrink-seized-halfway"]),
    "pressing on": ({"setup.kind": "join", "join.by": "press"}, ["press-force", "press-stand-clear"]),
    "pressing a hardened hub on": (
        {"setup.kind": "join", "join.by": "press", "hub.brittle": True, "join.brittle": True},
        ["press-force", "hub-burst", "brittle-in-press", "press-stand-clear"]),
    "pressing into a blind bore": (
        {"setup.kind": "join", "join.by": "press", "hub.may_trap": True},
        ["sealed-cavity-press", "press-force", "press-stand-clear"]),
    "gluing on": ({"setup.kind": "join", "join.by": "bond"}, ["uncured-adhesive", "adhesive-parted-by-heat"]),
    "screwing on": ({"setup.kind": "join", "join.by": "screw"}, []),
    "sliding on": ({"setup.kind": "join", "join.by": "slide"}, []),
}  # fmt: skip


@pytest.mark.parametrize(("facts", "expected"), OPERATIONS.values(), ids=OPERATIONS.keys())
def test_an_operation_prints_the_cautions_that_belong_to_it(facts: dict[str, Any], expected: list[str]) -> None:
    fake = FakeBook(SHIPPED_QUANTITIES, list(SCOPES.values()), {})
    assert expected == ids(evaluate(shipped(), fake, facts_from(facts)))


TURNED: dict[str, tuple[dict[str, float], str]] = {
    "at its marked speed": ({"turn.speed": 2500.0, "turn.chuck_speed": 2500.0}, "chuck-speed"),
    "with what stands off the axis": ({"turn.throw": 200.0, "turn.throw_allowed": 200.0}, "off-centre-mass"),
    "with a bar behind": ({"turn.bar_behind": 300.0}, "spindle-rear-bar"),
}


@pytest.mark.parametrize(("numbers", "name"), TURNED.values(), ids=TURNED.keys())
def test_what_turns_prints_its_caution_at_its_limit(numbers: dict[str, float], name: str) -> None:
    first = next(iter(numbers))

    def printed(value: Has | Lacks | None) -> bool:
        rest: dict[str | tuple[str, str], Has | Lacks] = {
            key: Has(number) for key, number in numbers.items() if key != first
        }
        fake = FakeBook(SHIPPED_QUANTITIES, list(SCOPES.values()), {**rest, **({first: value} if value else {})})
        return name in ids(evaluate(shipped(), fake, facts_from({})))

    assert printed(Has(numbers[first])) and printed(Lacks(("here",)))
    assert not printed(Has(numbers[first] - 0.1)) and not printed(None)


def test_jaws_that_stand_out_print_their_caution() -> None:
    fake = FakeBook(SHIPPED_QUANTITIES, list(SCOPES.values()), {})
    assert ["jaws-protrude"] == ids(evaluate(shipped(), fake, facts_from({"hold.jaws_stand_out": True})))
    assert [] == ids(evaluate(shipped(), fake, facts_from({"hold.jaws_stand_out": False})))


OVERHANGS = {"cutter.overhang": (4.0, "boring-bar-overhang"), "hold.overhang": (3.0, "work-overhang")}


@pytest.mark.parametrize(("quantity", "limit", "name"), [(q, *rest) for q, rest in OVERHANGS.items()])
def test_a_bar_or_part_that_stands_out_far_prints_its_caution_at_its_limit(
    quantity: str, limit: float, name: str
) -> None:
    def printed(value: Has | Lacks | None, machine: str = "lathe") -> bool:
        fake = FakeBook(SHIPPED_QUANTITIES, list(SCOPES.values()), {quantity: value} if value is not None else {})
        return name in ids(evaluate(shipped(), fake, facts_from({"setup.machine_kind": machine})))

    assert printed(Has(limit)) and printed(Lacks(("here",)))
    assert not printed(Has(limit - 0.01)) and not printed(None)


@pytest.mark.parametrize(
    ("material", "heat", "printed"),
    [
        ("100Cr6", Has(100.0), True),
        ("52100", Has(100.0), True),
        ("100Cr6", Has(99.9), False),
        ("100Cr6", Lacks(("here",)), True),
        (Unknown("parts.ring.material"), Has(100.0), True),
        ("42CrMo4", Has(200.0), False),
    ],
)
def test_the_ring_of_a_bearing_is_asked_about_from_100_degrees_on(
    material: Any, heat: Has | Lacks, printed: bool
) -> None:
    fake = FakeBook(SHIPPED_QUANTITIES, [JOIN], {"heat.planned_high": heat})
    done = evaluate(shipped(), fake, facts_from({"heat.by": "oven", "part.material": material}))
    assert printed == ("bearing-ring-heat" in ids(done))


def test_every_shipped_caution_is_set_off_by_one_of_these_operations() -> None:
    assert {caution.id for caution in shipped().cautions} == {
        *(name for _, names in OPERATIONS.values() for name in names),
        *(name for _, name in OVERHANGS.values()),
        *(name for _, name in TURNED.values()),
        "bearing-ring-heat",
        "jaws-protrude",
    }


def test_a_seized_hub_is_never_hammered_or_torched() -> None:
    text = next(c.text for c in shipped().cautions if c.id == "shrink-seized-halfway")
    for words in ("let go", "only in the first", "let it cool", "shield", "no hammer, no torch", "find the cause"):
        assert words in text


PROMISES = re.compile(
    r"\b(safe|safer|safely|approv(e|es|ed|al)|certif(y|ies|ied)|complian(t|ce)|guarantee[sd]?)\b", re.I
)
"""Words that nothing here may say of a plan. Safety is no promise, nor is the certificate that comes with a bar."""


@pytest.mark.parametrize("text", ["It is safe.", "Approved!", "a compliant route", "guaranteed", "certified"])
def test_a_promise_is_found(text: str) -> None:
    assert PROMISES.search(text)


def test_the_closing_line_names_what_the_program_cannot_know() -> None:
    line = shipped().closing_line
    for words in (
        "Planning aid only",
        "figures given",
        "cannot see your shop",
        "manuals",
        "local law",
        "qualified person",
    ):
        assert words in line


def test_no_caution_promises_anything() -> None:
    texts = [shipped().closing_line, *(caution.text for caution in shipped().cautions)]
    assert [] == [text for text in texts if PROMISES.search(text)]


def test_no_rule_promises_anything() -> None:
    rules = shipped().rules
    texts = [t for r in rules for t in (r.title, r.message, r.message_when_met, r.remedy, r.why) if t]
    assert len(texts) >= 4 * len(rules)
    assert [] == [text for text in texts if PROMISES.search(text)]


def test_the_readme_promises_nothing() -> None:
    lines = (RULES.parent / "README.md").read_text(encoding="utf-8").splitlines()
    assert [] == [line for line in lines if PROMISES.search(line)]


def test_shipped_conditions_ask_only_for_listed_facts() -> None:
    asked = {condition.fact for caution in shipped().cautions for condition in caution.trigger.when}
    assert asked <= set(FACTS)
