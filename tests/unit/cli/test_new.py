"""`setupcheck new`: what it asks, what it writes, what it tells; and that nothing is ever replaced."""

from __future__ import annotations

import io
import os
import sys
from pathlib import Path

import pytest

from setupcheck.cli.main import app
from setupcheck.errors import SetupcheckError
from setupcheck.flow import review


class Terminal(io.StringIO):
    """Somebody who types these lines."""

    def isatty(self) -> bool:
        return True


@pytest.fixture(autouse=True)
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    monkeypatch.setattr(sys, "stdin", io.StringIO())
    return tmp_path


def new(*arguments: str) -> int:
    """Exit code of the command; a refusal is raised, as the command's caller prints it and leaves with 2."""
    with pytest.raises(SystemExit) as end:
        app(["new", *arguments])
    return int(end.value.code or 0)


def typed(monkeypatch: pytest.MonkeyPatch, *lines: str) -> None:
    monkeypatch.setattr(sys, "stdin", Terminal("".join(f"{line}\n" for line in lines)))


def test_without_a_terminal_options_and_defaults_are_taken(capsys: pytest.CaptureFixture[str]) -> None:
    assert 0 == new("gear.yaml", "--kind", "spur-gear", "--teeth", "24", "--module", "2", "--title", "Gear: 24")
    told = capsys.readouterr().out
    found = review("gear.yaml")
    assert "Gear: 24" == found.loaded.job.title
    assert (24, 48.0) == (
        found.loaded.job.parts["gear"].surfaces["teeth"].count,
        found.loaded.job.parts["gear"].surfaces["teeth"].on_circle,
    )
    assert "warn" == found.verdict
    assert told.splitlines()[0] == "written: gear.yaml"
    assert told.splitlines()[1].startswith("WARN   ")
    assert "Next: setupcheck review gear.yaml" == told.splitlines()[-1]
    assert 4 <= len(told.splitlines()) <= 6
    assert all(len(line) <= 80 for line in told.splitlines())


def test_on_a_terminal_it_asks_and_asks_again_where_an_answer_cannot_be(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    typed(monkeypatch, "spur", "spur-gear", "", "Gear", "", "forty", "40", "2,5", "2.5", "30 h7", "30 H7", "", "90 um")
    assert 0 == new("gear.yaml")
    told = capsys.readouterr().out.replace("]: ", "]: \n")  # what is typed ends the line
    assert all(len(line) <= 80 for line in told.splitlines())
    assert "  'spur' is no kind of part here. Did you mean spur-gear? There are:\n" in told
    assert "How many teeth?  (the count z)\n  teeth [40]: " in told
    assert "'forty' is not a number. Write it as in 72" in told
    assert "'2,5' is not a length. Write a point for the decimal: 2.5" in told
    assert "has the class of a shaft. A bore takes a capital letter, as in 30 H7" in told
    text = Path("gear.yaml").read_text(encoding="utf-8")
    assert "bore:    {kind: bore, diameter: 30 H7," in text
    assert "module: 2.5}" in text
    assert "at_most: 90 um}" in text


def test_what_an_option_says_is_not_asked(monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> None:
    typed(monkeypatch, "", "", "", "", "", "", "")
    assert 0 == new("gear.yaml", "--kind", "spur-gear", "--teeth", "30", "--job", "7")
    told = capsys.readouterr().out
    assert "How many teeth?" not in told
    assert "Job number?" not in told
    assert "What module?" in told


def test_yes_asks_nothing_on_a_terminal(monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> None:
    typed(monkeypatch)
    assert 0 == new("gear.yaml", "--kind", "spur-gear", "--yes")
    assert "?" not in capsys.readouterr().out


def test_an_end_before_the_last_question_writes_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    typed(monkeypatch, "spur-gear", "mm", "Gear")
    with pytest.raises(SetupcheckError, match="nothing was written"):
        app(["new", "gear.yaml"])
    assert [] == list(Path().iterdir())


def test_the_command_in_the_file_begins_the_same_file_again(capsys: pytest.CaptureFixture[str]) -> None:
    assert 0 == new("one.yaml", "--kind", "bushing", "--bore", "20 H7", "--title", "Bush", "--job", "1")
    text = Path("one.yaml").read_text(encoding="utf-8")
    begun = text.split("# Begun with:\n")[1].split("# Nothing here")[0].replace("#", "")
    import shlex

    assert 0 == new("two.yaml", *shlex.split(begun)[3:], "--title", "Bush", "--job", "1")
    assert text == Path("two.yaml").read_text(encoding="utf-8")


def test_findings_of_a_plan_that_cannot_be_are_told(capsys: pytest.CaptureFixture[str]) -> None:
    assert 0 == new("wheel.yaml", "--kind", "worm-wheel", "--teeth", "15")
    told = capsys.readouterr().out
    assert "FAIL   " in told
    assert "  fail MESH-004: a wheel of 15 teeth is undercut" in told
    assert all(len(line) <= 80 for line in told.splitlines())


def test_like_copies_an_example_and_alone_it_lists_them(capsys: pytest.CaptureFixture[str]) -> None:
    for arguments in (("--like",), ("--like", "list"), ("job.yaml", "--like"), ("--like", "--yes")):
        assert 0 == new(*arguments)
        told = capsys.readouterr().out
        assert "index-plate           Index plate, 24 holes\n" in told
        assert all(len(line) <= 80 for line in told.splitlines())
    assert [] == list(Path().iterdir())
    assert 0 == new("job.yaml", "--like", "index-plate", "--title", "Plate", "--job", "9")
    assert "# Made from the example index-plate" in Path("job.yaml").read_text(encoding="utf-8")
    assert "Plate" == review("job.yaml").loaded.job.title


def test_like_asks_for_title_and_number_on_a_terminal(monkeypatch: pytest.MonkeyPatch) -> None:
    typed(monkeypatch, "Our plate", "")
    assert 0 == new("job.yaml", "--like", "index-plate")
    job = review("job.yaml").loaded.job
    assert ("Our plate", "IP-24") == (job.title, job.job)


def test_kind_alone_lists_the_kinds(capsys: pytest.CaptureFixture[str]) -> None:
    assert 0 == new("--kind")
    told = capsys.readouterr().out
    assert 6 == len(told.splitlines())
    assert all(len(line) <= 80 for line in told.splitlines())


def test_a_schema_beside_the_file_is_named_on_top_else_how_to_make_it(folder: Path) -> None:
    assert 0 == new("one.yaml", "--kind", "spur-gear")
    assert "setupcheck schema -o job.schema.json" in Path("one.yaml").read_text(encoding="utf-8").splitlines()[0]
    (folder / "job.schema.json").write_text("{}")
    assert 0 == new("two.yaml", "--kind", "spur-gear")
    first = Path("two.yaml").read_text(encoding="utf-8").splitlines()[0]
    assert "# yaml-language-server: $schema=job.schema.json" == first


REFUSED = [
    ([], "the name of the file is missing. Write it as in setupcheck new wheel.yaml"),
    (["x.yaml", "--kind", "gear"], "--kind: 'gear' is no kind of part here. Did you mean spur-gear?"),
    (["x.yaml", "--units", "cm"], "--units: 'cm' is no unit of a job file. Write mm or in"),
    (["x.yaml", "--title", ""], "--title: the title is empty"),
    (["x.yaml", "--title", "a\nparts: {}"], "--title: the title 'a"),
    (["x.yaml", "--title", "a\u202eb"], "has the character U+202E, which cannot be seen. Leave it out"),
    (["x.yaml", "--title", "a" * 10_000], "has 10000 characters. Write at most 200"),
    (["x.yaml", "--job", "\x1b[31m"], "--job: the job number"),
    (["x.yaml", "--bore", "32,5 H6"], "--bore: '32,5 H6' is not a size. Write a point for the decimal: 32.5 H6"),
    (
        ["x.yaml", "--kind", "spur-gear", "--torque", "3 N m"],
        "--torque does not belong to a spur-gear. It takes --teeth",
    ),
    (["x.yaml", "--like", "indexplate"], "'indexplate' is no example here. Did you mean index-plate? There are:"),
    (["x.yaml", "--like", "../README"], "'README' is no example here."),
    (
        ["x.yaml", "--like", "index-plate", "--teeth", "9"],
        "--teeth does not go with --like: an example keeps its sizes",
    ),
    (["x.yaml", "--like", "index-plate", "--units", "mm"], "--units does not go with --like"),
    (["x.yaml", "--like", "index-plate", "--title", "\n"], "--title: the title is empty"),
    (["no/x.yaml"], "no/x.yaml: there is no folder no. Make it first"),
    (["."], ". is a folder. Write the name of a file in it"),
    (["x" * 300 + ".yaml"], "cannot be written: File name too long"),
]


@pytest.mark.parametrize(("arguments", "says"), REFUSED, ids=range(len(REFUSED)))
def test_what_cannot_be_is_told_and_nothing_is_written(arguments: list[str], says: str) -> None:
    with pytest.raises(SetupcheckError) as wrong:
        app(["new", *arguments])
    assert says in str(wrong.value)
    assert [] == list(Path().iterdir())


def kinds_of_things(folder: Path) -> None:
    (folder / "file.yaml").write_text("mine")
    (folder / "dangling.yaml").symlink_to("nowhere")
    (folder / "link.yaml").symlink_to("file.yaml")
    os.mkfifo(folder / "pipe.yaml")


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="no named pipes here")
@pytest.mark.parametrize("name", ["file.yaml", "dangling.yaml", "link.yaml", "pipe.yaml"])
def test_nothing_is_ever_replaced(folder: Path, name: str) -> None:
    kinds_of_things(folder)
    before = sorted(folder.iterdir())
    with pytest.raises(SetupcheckError, match=r"is already there and stays as it is\. Write another name$"):
        app(["new", name, "--kind", "spur-gear"])
    assert before == sorted(folder.iterdir())
    assert "mine" == (folder / "file.yaml").read_text()


def test_a_file_that_comes_meanwhile_is_not_replaced(folder: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    from setupcheck.cli import new as module

    put = module.write_new

    def late(path: Path, text: str) -> None:
        path.write_text("mine")
        put(path, text)

    monkeypatch.setattr(module, "write_new", late)
    with pytest.raises(SetupcheckError, match="is already there and stays as it is"):
        app(["new", "x.yaml", "--kind", "spur-gear"])
    assert ["x.yaml"] == [path.name for path in folder.iterdir()]
    assert "mine" == (folder / "x.yaml").read_text()


def test_where_the_disk_knows_no_links_the_file_is_written_all_the_same(
    folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def no_links(*_: object, **__: object) -> None:
        raise PermissionError(1, "Operation not permitted")

    monkeypatch.setattr(os, "link", no_links)
    assert 0 == new("x.yaml", "--kind", "spur-gear")
    assert ["x.yaml"] == [path.name for path in folder.iterdir()]
    with pytest.raises(SetupcheckError, match="is already there"):
        app(["new", "x.yaml", "--kind", "spur-gear"])
