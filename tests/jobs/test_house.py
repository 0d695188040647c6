"""A shop's house file on jobs: limits, levels, own rules, typical values, record, waivers; found by option or beside the job."""

from __future__ import annotations

import copy
import json
import re
import shutil
from pathlib import Path

import pytest

from setupcheck.errors import HouseError
from setupcheck.flow import HOUSE_FILE, Review, house_beside, mend, read_house, review, rules, vary
from setupcheck.quantities.judgeable import judgeable
from setupcheck.report.json import as_data
from setupcheck.report.sheet.tried import COMPARED, Tried
from setupcheck.report.text import as_text
from setupcheck.rulebook.units import dimension_of
from setupcheck.shipped import example, shipped
from tests.unit.cli.calling import run
from tests.unit.report.sample import WHEEL, changed, flat, line_of

SHOP = """\
house: Toolroom
limits:
  - {rule: HOLD-006, limit: 20 %, who: foreman, why: lapped pairs, when: 2027-01-15}
levels:
  - {rule: HOLD-004, level: fail, who: foreman, why: every device here has a record, when: 2027-01-15}
rules:
  - id: SHOP-001
    title: Work stands near its jaws
    quantity: hold.overhang
    require: {at_most: 0.1}
    level: warn
    message: "op {op} cuts {value} diameters out of the jaws, {limit} is our custom"
    remedy: Support the far end.
    why: Our jaws are short and open at the front.
    sources: [{ref: house, place: scrapped bushes, kind: shop record}]
    cautions: [work-overhang]
typical:
  runout:
    soft-jaws: {value: 15 um, note: bored for each batch, who: K. Lind, when: 2026-11-02}
"""
LOOSE = ("by: soft-jaws, at: 12, runout: 20 um}", "by: soft-jaws, at: 12, runout: {device: soft-jaws-A}}")
AT = "setups.20.hold.centre"
SAID = "soft-jaws runout (house value of Toolroom, shop record)"


@pytest.fixture
def shop(tmp_path: Path) -> Path:
    """A folder with a job in it, one device of which states no value, and a house file of another name."""
    (tmp_path / "job.yaml").write_text(changed(WHEEL, LOOSE), encoding="utf-8")
    (tmp_path / "shop.yaml").write_text(SHOP, encoding="utf-8")
    return tmp_path


def judged(shop: Path, text: str = SHOP, **more: str) -> Review:
    (shop / "shop.yaml").write_text(text, encoding="utf-8")
    return review(shop / "job.yaml", house=shop / "shop.yaml", **more)


def verdicts(found: Review, rule: str, at: str = "") -> set[str]:
    return {f.verdict for f in found.evaluation.findings if f.rule == rule and at in f.at}


# -- what it does


def test_a_house_value_stands_where_the_typical_one_would_and_is_the_shops_own_figure(shop: Path) -> None:
    plain, own = review(shop / "job.yaml"), judged(shop)
    assert verdicts(plain, "HOLD-004", AT) == {"warn"} and verdicts(own, "HOLD-004", AT) == {"pass"}
    stated = shop / "stated.yaml"
    stated.write_text(changed(WHEEL, (LOOSE[0], LOOSE[0].replace("20 um", "15 um"))), encoding="utf-8")
    for key, result in review(stated).results.items():
        assert result.combined.worst.high == pytest.approx(own.results[key].combined.worst.high, rel=1e-12), key
    resting = {name for f in own.evaluation.findings for name in f.rests_on}
    assert SAID in resting and "soft-jaws runout" not in resting
    told = flat(as_text(own, everything=True))
    assert f"Rests on: {SAID}." in told
    assert f"- {AT}.runout: soft-jaws runout 15 um (K. Lind, 2026-11-02: bored for each batch)" in told


def test_a_value_of_the_devices_own_name_goes_before_one_of_its_kind(shop: Path) -> None:
    named = SHOP + "    soft-jaws-A: {value: 12 um, note: the good ones, who: K. Lind, when: 2026-11-02}\n"
    assert [(use.row.device, use.row.value) for use in judged(shop, named).of_house] == [
        ("soft-jaws-A", pytest.approx(0.012))
    ]


def test_a_house_value_of_a_kind_of_machine_is_its_axis_error(shop: Path) -> None:
    axis = "  axis:\n    lathe: {value: 3 um, note: test bar, who: K. Lind, when: 2026-11-02}\n"
    job = changed(WHEEL, ("{kind: lathe, axis_runout: 4 um}", "{kind: lathe}")) if "axis_runout: 4 um}" in WHEEL else ""
    if not job:
        lathe = next(line for line in WHEEL.splitlines() if "kind: lathe" in line)
        job = changed(WHEEL, (lathe, lathe.partition(", axis_runout")[0] + "}"))
    (shop / "job.yaml").write_text(job, encoding="utf-8")
    found = judged(shop, SHOP + axis)
    assert any(use.row.what == "axis" and use.path.endswith(".axis_runout") for use in found.of_house)
    assert "typical" not in {str(f.value) for f in found.evaluation.findings if f.rule == "HOLD-004"}


def test_a_stated_or_measured_value_stays(shop: Path) -> None:
    (shop / "job.yaml").write_text(WHEEL, encoding="utf-8")
    assert () == judged(shop).of_house


def test_a_record_of_the_house_goes_before_its_value_and_the_option_before_both(shop: Path) -> None:
    rows = "".join(f"soft-jaws-A, runout, 2026-01-0{i + 1}, {v} um\n" for i, v in enumerate((6, 7, 5, 8, 6)))
    (shop / "own.csv").write_text("device, what, date, value\n" + rows, encoding="utf-8")
    (shop / "thin.csv").write_text("device, what, date, value\nsoft-jaws-A, runout, 2026-01-01, 6 um\n")
    found = judged(shop, SHOP + "record: own.csv\n")
    assert found.devices is not None and [use.taken for use in found.devices.uses] == [True] and found.of_house == ()
    assert {"soft-jaws-A runout (shop record, 5 entries)"} == set(found.loaded.own.values())
    thin = review(shop / "job.yaml", house=shop / "shop.yaml", devices=shop / "thin.csv")
    assert {SAID} == set(thin.loaded.own.values())  # too thin for a limit: the house's value instead
    assert thin.devices is not None and thin.devices.record.file == "thin.csv"


def test_a_level_turns_a_warning_into_a_failure_and_says_who_did(shop: Path) -> None:
    without_value = SHOP[: SHOP.index("typical:")]
    found = judged(shop, without_value)
    finding = next(f for f in found.evaluation.findings if f.rule == "HOLD-004" and f.verdict == "fail")
    assert finding.house == "house level fail of Toolroom (foreman, 2027-01-15: every device here has a record)"
    assert found.verdict == "fail" and review(shop / "job.yaml").verdict == "warn"
    assert f"By {finding.house}" in flat(as_text(found))


def test_an_own_rule_judges_and_names_the_house_as_its_source(shop: Path) -> None:
    found = judged(shop)
    finding = next(f for f in found.evaluation.findings if f.rule == "SHOP-001" and f.verdict == "warn")
    assert (finding.house, finding.evidence) == ("house rule of Toolroom", "shop record")
    told = flat(as_text(found))
    assert "diameters out of the jaws, 0.1 is our custom" in told and "Do: Support the far end." in told
    assert "Source: house, scrapped bushes (shop record)" in told


def test_the_report_names_every_change_that_acted_also_where_nothing_is_wrong(shop: Path) -> None:
    found = judged(shop)
    assert found.house is not None
    head = f"house: Toolroom, shop.yaml, sha256 {found.house.sha256[:12]}"
    told = as_text(found)
    assert head in told.splitlines()[:4]
    block = flat(told[told.index("HOUSE, shop.yaml") :])
    for piece in ("HOLD-004, ", "HOLD-006, ", "SHOP-001, ", "house limit 20 % of Toolroom (foreman, 2027-01-15"):
        assert piece in block
    assert "HOUSE" not in as_text(review(shop / "job.yaml"))


def test_json_has_the_house_and_what_it_did_to_each_finding(shop: Path) -> None:
    found = judged(shop)
    data = as_data(found)
    house = data["house"]
    assert isinstance(house, dict) and found.house is not None
    assert (house["name"], house["file"], house["sha256"]) == ("Toolroom", "shop.yaml", found.house.sha256)
    assert {"rule": "SHOP-001", "says": "house rule of Toolroom"}.items() <= house["acts"][-1].items()
    assert house["values"] == [
        {"at": f"{AT}.runout", "device": "soft-jaws", "what": "runout", "value": 15.0, "unit": "um"}
    ]
    said = {f["rule"]: f["house"] for f in data["findings"]}  # type: ignore[attr-defined]
    assert said["SHOP-001"] == "house rule of Toolroom" and said["STACK-001"] is None


def test_the_shipped_rule_book_is_not_changed(shop: Path) -> None:
    before, held = copy.copy(rules()), rules()
    levels = {rule.id: (rule.level, rule.require) for rule in held.rules}
    found = judged(shop)
    assert rules() is held and held == before
    assert levels == {rule.id: (rule.level, rule.require) for rule in rules().rules}
    assert "house" not in held.references and found.rulebook is not held
    assert found.rulebook.sha256 == held.sha256 and found.rulebook.cautions == held.cautions
    with pytest.raises(HouseError):
        judged(shop, SHOP.replace("HOLD-004", "HOLD-404"))
    assert rules() is held and held == before


def test_a_mend_tries_its_edits_under_the_same_house(shop: Path) -> None:
    found, _ = mend(shop / "job.yaml", house=shop / "shop.yaml")
    assert found.house is not None and len(found.of_house) == 1


def test_two_reviews_under_one_house_read_it_once(shop: Path) -> None:
    own = read_house(shop / "shop.yaml")
    (shop / "shop.yaml").unlink()
    tried = vary(review(shop / "job.yaml", house=own), {f"{AT}.runout": "40 um"}, house=own)
    assert tried.after.house is own and tried.after.of_house == ()


# -- waivers

WAIVED = "house: Toolroom\nwaive:\n  - {rule: HOLD-004, reason: new chuck, who: K. Lind, until: 2027-03-31}\n"


def test_a_house_waiver_in_force_waives_the_warning_and_says_why(shop: Path) -> None:
    found = judged(shop, WAIVED, on="2027-03-31")
    waived = [f for f in found.evaluation.findings if f.rule == "HOLD-004" and f.verdict == "waived"]
    assert ["new chuck (house waiver of Toolroom, K. Lind, until 2027-03-31)"] == [f.waiver for f in waived]


def test_a_house_waiver_that_has_ended_waives_nothing_and_is_told_with_its_line(shop: Path) -> None:
    found = judged(shop, WAIVED, on="2027-04-01")
    assert "warn" in verdicts(found, "HOLD-004")
    told = next(f for f in found.evaluation.findings if f.rule == "WAIVE-003")
    assert (told.verdict, told.message) == (
        "warn",
        "the waiver of HOLD-004 in shop.yaml, line 3, ended on 2027-03-31",
    )


def test_without_a_day_a_house_waiver_is_open_where_it_would_act_and_silent_elsewhere(shop: Path) -> None:
    assert {"open"} == verdicts(judged(shop, WAIVED), "WAIVE-003")
    (shop / "job.yaml").write_text(WHEEL, encoding="utf-8")
    assert set() == verdicts(judged(shop, WAIVED), "WAIVE-003")


def test_a_house_waiver_never_touches_what_is_open(shop: Path) -> None:
    text = changed(WHEEL, ("by: soft-jaws, at: 12, runout: 20 um}", "by: soft-jaws, at: 12}"))
    (shop / "job.yaml").write_text(text, encoding="utf-8")
    before = review(shop / "job.yaml").evaluation.counts["open"]
    assert judged(shop, WAIVED, on="2027-03-31").evaluation.counts["open"] == before > 0


# -- found


def test_a_house_file_beside_the_job_acts_unless_it_is_left(shop: Path) -> None:
    assert house_beside(shop / "job.yaml") is None
    shutil.copy(shop / "shop.yaml", shop / HOUSE_FILE)
    code, told = run("review", shop / "job.yaml")
    assert "house: Toolroom, setupcheck-house.yaml" in told and code == 1
    assert "house:" not in run("review", "--no-house", shop / "job.yaml")[1]
    other = shop / "other.yaml"
    other.write_text(SHOP.replace("Toolroom", "Bay 2"), encoding="utf-8")
    assert "house: Bay 2, other.yaml" in run("review", "--house", other, shop / "job.yaml")[1]
    code, told = run("review", "--no-house", "--house", other, shop / "job.yaml")
    assert code == 2 and "Write one of them" in told


@pytest.mark.parametrize("command", ["review", "vary", "remedy", "sheet", "working"])
def test_every_command_that_judges_takes_the_house_file(
    shop: Path, command: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(Tried, "accept", lambda self, path: COMPARED)  # that tests/sheet looks at, and it takes seconds
    shutil.copy(shop / "shop.yaml", shop / HOUSE_FILE)
    job = shop / "job.yaml"
    more: dict[str, list[str]] = {
        "vary": ["--set", f"{AT}.runout=40 um"],
        "working": ["require[1]"],
        "sheet": ["-o", str(shop / "out.html"), "--force"],
    }
    options = more.get(command, [])
    with_it, without = run(command, job, *options), run(command, job, *options, "--no-house")
    if command == "sheet":
        paper = (shop / "out.html").read_text(encoding="utf-8")
        assert "House file" not in paper
        assert run(command, job, *options)[0] == 0
        paper = (shop / "out.html").read_text(encoding="utf-8")
        assert "House file" in paper and "Toolroom: setupcheck-house.yaml, sha256" in paper
        return
    assert "house: Toolroom, setupcheck-house.yaml" in with_it[1] and "house:" not in without[1]
    (shop / HOUSE_FILE).write_text("house: [", encoding="utf-8")
    code, told = run(command, job, *options)
    assert code == 2 and HOUSE_FILE in told and "--no-house" in told


@pytest.mark.parametrize(("command", "more"), [("vary", ["--set", f"{AT}.runout=9 um"]), ("remedy", [])])
def test_json_of_the_other_commands_names_the_house(shop: Path, command: str, more: list[str]) -> None:
    shutil.copy(shop / "shop.yaml", shop / HOUSE_FILE)
    data = json.loads(run(command, shop / "job.yaml", "--json", *more)[1])
    assert (data["house"]["name"], data["house"]["file"]) == ("Toolroom", HOUSE_FILE)


def test_a_link_that_leads_nowhere_is_not_passed_over(shop: Path) -> None:
    (shop / HOUSE_FILE).symlink_to(shop / "gone.yaml")
    code, told = run("review", shop / "job.yaml")
    assert code == 2 and HOUSE_FILE in told


def test_no_shipped_folder_of_jobs_holds_a_house_file() -> None:
    assert [] == list(shipped("jobs").rglob(HOUSE_FILE))


# -- rules --check, rules ID --house


def test_a_check_tells_what_the_file_changes_old_and_new(shop: Path) -> None:
    (shop / "own.csv").write_text("device, what, date, value\nfour-jaw-A, runout, 2026-01-01, 6 um\n")
    with (shop / "shop.yaml").open("a") as file:
        file.write("record: own.csv\n" + WAIVED.partition("\n")[2].replace("HOLD-004", "MESH-008"))
    code, told = run("rules", "--check", shop / "shop.yaml")
    said = flat(told)
    assert code == 0
    for piece in (
        "HOLD-006 No single clearance eats the tolerance: at most 33 % -> 20 % (may be set from 20 % to 50 %)",
        "HOLD-004 The error of a hold is the shop's own figure: warn -> fail; foreman, 2027-01-15",
        "SHOP-001 warn Work stands near its jaws: hold.overhang at most 0.1 (shop record)",
        "soft-jaws runout: 25 um -> 15 um; K. Lind, 2026-11-02",
        "MESH-008 until 2027-03-31; K. Lind: new chuck",
        "own.csv: 1 entries of 1 devices",
    ):
        assert piece in said, piece
    assert max(map(len, told.splitlines())) <= 80
    code, told = run("rules", "--check", shop / "shop.yaml", "--on", "2027-04-01")
    line = line_of((shop / "shop.yaml").read_text(), "MESH-008")
    assert code == 2 and f"shop.yaml:{line}  the waiver of MESH-008 ended on 2027-03-31." in told


def test_a_value_far_from_the_shipped_one_is_told_and_used(shop: Path) -> None:
    far = SHOP.replace("value: 15 um", "value: 1.5 mm")
    (shop / "shop.yaml").write_text(far, encoding="utf-8")
    code, told = run("rules", "--check", shop / "shop.yaml")
    assert code == 0
    assert (
        f"soft-jaws runout, line {line_of(far, '1.5 mm')}: 1.5 mm lies more than 10 times above what is usual"
        in flat(told)
    )
    assert "Look at soft-jaws runout" in flat(as_text(judged(shop, far)))


def test_the_example_of_the_readme_can_be_used_and_acts(shop: Path) -> None:
    readme = (Path(__file__).resolve().parents[2] / "README.md").read_text(encoding="utf-8")
    (example_there,) = re.findall(r"<!-- house -->\n```yaml\n(.*?)```\n", readme, re.S)
    found = judged(shop, example_there, on="2027-02-01")
    assert found.house is not None and found.house.notes == ()
    assert [use.row.device for use in found.of_house] == ["soft-jaws"]
    acted = {f.rule for f in found.evaluation.findings if f.house}
    assert {"HOLD-006", "HOLD-004", "SHOP-001"} == acted and SAID in readme
    assert all(word in readme for word in (HOUSE_FILE, "`--no-house`", "`record: "))


def test_an_own_rule_is_described_like_any_other(shop: Path) -> None:
    code, told = run("rules", "SHOP-001", "--house", shop / "shop.yaml")
    assert code == 0 and told.startswith("SHOP-001  Work stands near its jaws\n")
    assert f"line {line_of(SHOP, 'SHOP-001')}" in flat(told) and "house rules of Toolroom" in flat(told)
    assert "SHOP-001 warn" in flat(run("rules", "--house", shop / "shop.yaml")[1])
    code, told = run("rules", "SHOP-001")
    assert code == 2 and "--house FILE" in told


def test_a_check_stands_alone(shop: Path) -> None:
    assert run("rules", "HOLD-004", "--check", shop / "shop.yaml")[0] == 2
    assert run("rules", "--on", "2027-01-01")[0] == 2


# -- any quantity


def test_every_quantity_of_the_shipped_rules_can_be_judged() -> None:
    quantities, words = judgeable()
    for rule in rules().rules:
        assert rule.quantity in quantities, rule.id
        assert (rule.quantity in words) == (rule.require.shape == "one_of"), rule.id


@pytest.mark.parametrize("name", ["rotator-worm-wheel", "pressed-bush", "coupling-hub"])
def test_an_own_rule_may_judge_any_quantity_that_is_a_number_or_a_word(tmp_path: Path, name: str) -> None:
    written = ["house: Every", "rules:"]
    quantities, words = judgeable()
    for number, one in enumerate(quantities.values(), 1):
        unit = {"number": "", "stack": None, "fraction": " %", "temperature_difference": " K"}.get(
            dimension_of(one.unit), f" {one.unit}"
        )
        require = "{at_most: {quantity: stack.limit}}" if unit is None else f"{{at_most: 1{unit}}}"
        require = "{one_of: [no such word]}" if one.name in words else require
        written += [
            f"  - {{id: SHOP-{number:03d}, title: t, quantity: {one.name}, require: {require}, level: warn,",
            '     message: "{value} of {limit}", remedy: r, why: w, sources: [{ref: house, kind: common practice}]}',
        ]
    (tmp_path / "every.yaml").write_text("\n".join(written) + "\n", encoding="utf-8")
    found = review(example(name), house=tmp_path / "every.yaml")
    judged = {f.rule for f in found.evaluation.findings if f.rule.startswith("SHOP-")}
    assert len(judged) > 60
    assert as_text(found, everything=True)
