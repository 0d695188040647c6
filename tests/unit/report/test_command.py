"""The command: exit codes, pipes, working, rules, house limits, waivers and sign-off, as a planner meets them."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest

from setupcheck.shipped import shipped

WHEEL = shipped("jobs/rotator-worm-wheel.yaml")


def run(*arguments: str, cwd: Path | None = None) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "setupcheck", *arguments],
        capture_output=True,
        text=True,
        cwd=cwd,
        timeout=60,
        check=False,
    )


@pytest.fixture
def job(tmp_path: Path) -> Path:
    path = tmp_path / "job.yaml"
    path.write_text(WHEEL.read_text())
    return path


def change(path: Path, old: str, new: str) -> Path:
    text = path.read_text()
    assert old in text
    path.write_text(text.replace(old, new))
    return path


def test_a_good_job_exits_0(job: Path) -> None:
    assert run("review", str(job)).returncode == 0


def test_a_failing_job_exits_3(job: Path) -> None:
    assert run("review", str(change(job, "circle: 18", "circle: 20"))).returncode == 3


def test_a_warning_exits_1(job: Path) -> None:
    assert (
        run(
            "review", str(change(job, "error: 50 um, removes: [bar]", "state: rough, error: 50 um, removes: [bar]"))
        ).returncode
        == 1
    )


def test_a_job_with_something_missing_exits_1_and_names_the_key(job: Path) -> None:
    found = run("review", str(change(job, "rests: pushed, runout: 3 um}", "rests: pushed}")))
    assert found.returncode == 1
    assert "Fill: setups.40.hold.centre.runout" in found.stdout


def test_an_unreadable_job_exits_2_and_says_so_on_the_error_stream(job: Path) -> None:
    found = run("review", str(change(job, "by: spigot", "by: spiggot")))
    assert (2, "") == (found.returncode, found.stdout)
    assert "Did you mean spigot?" in " ".join(found.stderr.split())


def test_of_several_jobs_the_worst_counts_and_a_bad_one_does_not_stop_the_rest(job: Path) -> None:
    found = run("review", "nowhere.yaml", str(job))
    assert found.returncode == 2
    assert ["unreadable", "pass"] == [line.split()[0] for line in found.stdout.splitlines()[:2]]


def test_a_missing_argument_exits_2() -> None:
    assert run("review").returncode == 2


def test_json_has_format_1_and_the_keys_that_were_promised(job: Path) -> None:
    data = json.loads(run("review", "--json", str(job)).stdout)
    assert [
        "format",
        "setupcheck",
        "rule_book",
        "house",
        "record",
        "job",
        "on",
        "verdict",
        "counts",
        "quantities",
        "stacks",
        "measure_first",
        "gates",
        "lengths",
        "joints",
        "heating_plans",
        "contacts",
        "inserts",
        "backlash_read",
        "worked_out",
        "findings",
        "cautions",
        "not_computed",
        "taken",
    ] == list(data)
    assert data["format"] == 1
    assert {"title", "file", "sha256"} == set(data["job"])
    assert data["job"]["file"] == "job.yaml"
    assert {
        "name",
        "what",
        "of",
        "about",
        "limit",
        "unit",
        "worst",
        "rss",
        "likely",
        "chance",
        "chance_error",
        "causes",
        "then",
    } == set(data["stacks"][0])
    assert {"cause", "op", "mode", "worst", "share"} == set(data["stacks"][0]["causes"][0])
    assert {
        "rule",
        "at",
        "op",
        "line",
        "verdict",
        "quantity",
        "value",
        "limit",
        "margin",
        "house",
        "unit",
        "missing",
        "message",
        "remedy",
        "sources",
        "evidence",
        "rests_on",
        "waiver",
    } == set(data["findings"][0])
    assert {"id", "op", "severity", "state", "text", "source"} == set(data["cautions"][0])


def test_the_output_names_no_folder(job: Path) -> None:
    assert str(job.parent) not in run("review", "--json", str(job)).stdout


def test_colour_never_reaches_a_pipe_and_can_be_asked_for(job: Path) -> None:
    assert "\x1b" not in run("review", str(job)).stdout
    assert "\x1b[" in run("review", "--color", "always", str(job)).stdout


def test_the_coloured_text_has_the_same_words(job: Path) -> None:
    import re

    plain, tinted = run("review", str(job)).stdout, run("review", "--color", "always", str(job)).stdout
    assert plain == re.sub(r"\x1b\[[0-9;]*m", "", tinted)


def test_escapes_in_a_title_are_stripped(job: Path) -> None:
    found = run("review", str(change(job, "title: Feed rotator worm wheel, 72 teeth", 'title: "wheel \\e[31mred\\a"')))
    assert "\x1b" not in found.stdout
    assert "\x07" not in found.stdout


def test_working_shows_formula_inputs_with_lines_and_source(job: Path) -> None:
    found = run("working", str(job), "divide.left_over@40").stdout
    assert "divide.left_over@40 = 0.000" in found
    assert "circle: divide.circle = 18" in found
    assert "Source: exact fractions." in found


def test_working_of_a_stack_lists_every_cause_with_its_line(job: Path) -> None:
    lines = job.read_text().splitlines()
    spigot = next(i for i, line in enumerate(lines, 1) if "by: spigot" in line)
    found = " ".join(run("working", str(job), "stack.worst@run-out.wheel-teeth.spindle-bearings").stdout.split())
    told = found.partition("op 40, clearance of hub in spigot: ")[2]
    assert told.startswith(
        f"gives 8.0 um, 32 % of all; against the wall of the play, planned; 2 um, 8 um (line {spigot})"
    )


def test_working_offers_the_nearest_name(job: Path) -> None:
    found = run("working", str(job), "stack.wurst@run-out")
    assert found.returncode == 2
    assert "Did you mean stack.worst?" in " ".join(found.stderr.split())


def test_rules_lists_and_explains() -> None:
    assert "STACK-001" in run("rules").stdout
    assert "Every error of the route at its bound" in " ".join(run("rules", "STACK-001").stdout.split())


def test_an_unknown_rule_is_refused_with_the_nearest() -> None:
    found = run("rules", "STACK-01")
    assert found.returncode == 2
    assert "STACK-001" in " ".join(found.stderr.split())


def test_a_house_limit_is_used_and_printed_with_who_and_why(job: Path, tmp_path: Path) -> None:
    house = tmp_path / "house.yaml"
    house.write_text(
        "house: Toolroom\nlimits:\n  - {rule: HOLD-006, limit: 25 %, who: foreman, why: lapped pairs, when: 2027-01-15}\n"
    )
    found = run("review", "--house", str(house), str(job))
    assert found.returncode == 1
    assert "(foreman, 2027-01-15: lapped pairs)" in " ".join(found.stdout.split())
    assert "HOLD-006" in found.stdout


WAIVE = "waive: [{rule: HOLD-004, at: setups.20.hold.centre, reason: trial cut watched, until: 2027-03-31}]\n"


def loose(job: Path) -> Path:
    change(job, "by: soft-jaws, at: 12, runout: 20 um}", "by: soft-jaws, at: 12, runout: {device: soft-jaws}}")
    job.write_text(job.read_text() + WAIVE)
    return job


def test_a_waiver_in_force_turns_its_finding_and_is_listed(job: Path) -> None:
    found = run("review", "--on", "2027-03-31", str(loose(job)))
    assert found.returncode == 0
    assert "trial cut watched" in found.stdout


def test_a_waiver_that_ended_does_not_help_and_says_so(job: Path) -> None:
    found = run("review", "--on", "2027-04-01", str(loose(job)))
    assert found.returncode == 1
    assert "WAIVE-003" in found.stdout


def test_a_day_that_is_none_is_refused(job: Path) -> None:
    assert run("review", "--on", "tomorrow", str(job)).returncode == 2


def test_a_stop_and_check_caution_nobody_answered_keeps_the_job_open(job: Path) -> None:
    text = job.read_text()
    job.write_text(text[: text.index("checked:")])
    found = run("review", str(job))
    assert found.returncode == 1
    assert found.stdout.splitlines()[1].startswith("OPEN")
    assert "glove-heat-rating [to check]" in " ".join(found.stdout.split())


def test_the_command_works_from_another_folder(tmp_path: Path) -> None:
    assert run("rules", "DATUM-001", cwd=tmp_path).returncode == 0
