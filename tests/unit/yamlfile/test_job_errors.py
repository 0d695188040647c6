"""How problems of a file are shown."""

import pickle

import pytest

from setupcheck.errors import MOST_SHOWN, JobError, Problem, RuleBookError, SetupcheckError, printable

LINES = ("setups:", "  - op: 30", "    hold:", "      clearance: 2,5 um")
COMMA = Problem(
    "setups.30.hold.clearance", 4, 18, 6, "'2,5 um' is not a length", "Write a point for the decimal: 2.5 um"
)


def test_an_error_names_the_place_shows_the_line_and_says_what_to_write():
    expected = """\
jobs/rotator.yaml:4:18  setups.30.hold.clearance
     4 |       clearance: 2,5 um
       |                  ^^^^^^
  '2,5 um' is not a length. Write a point for the decimal: 2.5 um"""
    assert expected == str(JobError("jobs/rotator.yaml", LINES, [COMMA]))


def test_problems_are_sorted_by_line_and_column_and_said_once():
    first = Problem("a", 1, 1, 6, "one", "Write two")
    later = Problem("b", 4, 7, 9, "three", "Write four")
    again = Problem("another.path.to.the.same.place", 4, 18, 6, COMMA.problem, COMMA.hint)
    error = JobError("j.yaml", LINES, [COMMA, later, first, again])
    assert (first, later, COMMA) == error.problems


def test_two_different_problems_of_one_place_are_both_shown():
    other = Problem("", 4, 18, 6, "'error' is missing here", "Write error: 10 um")
    assert 2 == len(JobError("j.yaml", LINES, [COMMA, other]).problems)


def test_a_problem_without_place_is_one_line():
    missing = Problem("", 0, 0, 0, "there is no such file", "Check the name")
    assert "j.yaml: there is no such file. Check the name" == str(JobError("j.yaml", (), [missing]))
    nowhere = Problem("units", 0, 0, 0, "'units' is missing", "Write units: mm")
    assert "j.yaml  units: 'units' is missing. Write units: mm" == str(JobError("j.yaml", (), [nowhere]))


def test_problems_beyond_the_fiftieth_are_counted():
    many = [Problem("", 1, column, 1, "wrong", "Write it right") for column in range(1, MOST_SHOWN + 8)]
    text = str(JobError("j.yaml", ["x" * 90], many))
    assert text.endswith("\nand 7 more")
    assert MOST_SHOWN == text.count("wrong. Write it right")


def test_terminal_escapes_never_reach_the_terminal():
    bad = "\x1b[31mred\x07\u202e\u200b\x9b"
    error = JobError(f"{bad}.yaml", [f"a: {bad}"], [Problem(bad, 1, 4, 3, f"'{bad}' is wrong", f"Not {bad}")])
    assert not [c for c in str(error) if c != "\n" and not c.isprintable()]
    assert "a: \ufffd[31mred\ufffd\ufffd\ufffd\ufffd" in str(error)


def test_carets_stand_under_the_text_also_behind_tabs_and_wide_letters():
    shown = str(JobError("j.yaml", ["名:\tx2,5"], [Problem("", 1, 5, 3, "wrong", "Right")])).split("\n")
    assert ["     1 | 名: x2,5", "       |      ^^^"] == shown[1:3]
    combined = str(JobError("j.yaml", ["e\u0301: 2,5"], [Problem("", 1, 5, 3, "wrong", "Right")])).split("\n")
    assert "       |    ^^^" == combined[2]


def test_a_long_line_is_cut_around_the_marked_text():
    line = "x" * 500 + "2,5 um" + "y" * 500
    head, shown, under, says = str(JobError("j.yaml", [line], [Problem("", 1, 501, 6, "wrong", "Right")])).split("\n")
    assert "j.yaml:1:501" == head
    assert len(shown) <= 115
    assert "2,5 um" == shown[under.index("^") : under.rindex("^") + 1]
    assert shown.startswith("     1 | …x") and shown.endswith("y…")
    assert "  wrong. Right" == says


def test_a_place_beyond_the_end_of_a_line_still_gets_a_caret():
    shown = str(JobError("j.yaml", ["ab"], [Problem("", 1, 99, 5, "wrong", "Right")])).split("\n")
    assert "       |   ^" == shown[2]


def test_a_line_that_the_text_does_not_have_is_left_out():
    assert "j.yaml:9:1\n  wrong. Right" == str(JobError("j.yaml", ["ab"], [Problem("", 9, 1, 1, "wrong", "Right")]))


def test_an_error_survives_the_way_between_processes():
    error = JobError("j.yaml", LINES, [COMMA])
    back = pickle.loads(pickle.dumps(error))
    assert (str(error), error.problems, error.file) == (str(back), back.problems, back.file)
    rules = pickle.loads(pickle.dumps(RuleBookError("heat.yaml", 12, "no quantity", "Name one")))
    assert "heat.yaml:12  no quantity. Name one" == str(rules)


def test_a_rule_book_error_names_file_and_line():
    assert "heat.yaml: there is no such file. Check the name" == str(
        RuleBookError("heat.yaml", 0, "there is no such file", "Check the name")
    )


def test_there_is_one_tree_of_exceptions_and_no_empty_error():
    assert issubclass(JobError, SetupcheckError) and issubclass(RuleBookError, SetupcheckError)
    with pytest.raises(ValueError, match="at least one problem"):
        JobError("j.yaml", (), [])


def test_plain_text_is_left_as_it_is():
    assert "32.041 ±0.003 µm °" == printable("32.041 ±0.003 µm °")
