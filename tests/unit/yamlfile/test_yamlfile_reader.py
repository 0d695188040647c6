"""YAML text to data with places, and everything of YAML that a job does not need."""

import pytest
import yaml

from setupcheck.errors import JobError, Problem
from setupcheck.yamlfile import Place, limits, parse, reader, yaml11_surprise


@pytest.fixture(params=["CBaseLoader", "BaseLoader"])
def loader(request, monkeypatch):
    """Both parsers: libyaml, and the one in Python where libyaml is missing."""
    if not hasattr(yaml, request.param):
        pytest.skip("libyaml is not installed")
    monkeypatch.setattr(reader, "LOADER", getattr(yaml, request.param))


JOB = """\
title: Ring, 72 teeth   # a comment, with 2,5 in it
units: mm
setups:
  - op: 10
    hold: {centre: {on: bar, runout: 10 um}, stop: [1 um, 2 um]}
  - op: 30
    hold:
      centre:
        on: hub
        clearance: [2 um, 14 um]
    until: 2027-03-31
    empty:
"""


def test_a_job_comes_out_as_plain_data(loader):
    assert {
        "title": "Ring, 72 teeth",
        "units": "mm",
        "setups": [
            {"op": 10, "hold": {"centre": {"on": "bar", "runout": "10 um"}, "stop": ["1 um", "2 um"]}},
            {
                "op": 30,
                "hold": {"centre": {"on": "hub", "clearance": ["2 um", "14 um"]}},
                "until": "2027-03-31",
                "empty": None,
            },
        ],
    } == parse(JOB, "j.yaml").data


@pytest.mark.parametrize(
    ("path", "place", "key_place"),
    [
        (("title",), Place(1, 8, 14), Place(1, 1, 5)),
        (("setups",), Place(4, 3, 1), Place(3, 1, 6)),
        (("setups", 0), Place(4, 5, 2), Place(4, 5, 2)),
        (("setups", 0, "op"), Place(4, 9, 2), Place(4, 5, 2)),
        (("setups", 0, "hold"), Place(5, 11, 54), Place(5, 5, 4)),
        (("setups", 0, "hold", "centre", "runout"), Place(5, 38, 5), Place(5, 30, 6)),
        (("setups", 0, "hold", "stop", 1), Place(5, 59, 4), Place(5, 59, 4)),
        (("setups", 1, "hold", "centre"), Place(9, 9, 2), Place(8, 7, 6)),
        (("setups", 1, "hold", "centre", "clearance"), Place(10, 20, 13), Place(10, 9, 9)),
        (("setups", 1, "empty"), Place(12, 5, 5), Place(12, 5, 5)),
        ((), Place(1, 1, 5), Place(1, 1, 5)),
    ],
)
def test_every_value_and_key_has_its_place(loader, path, place, key_place):
    tree = parse(JOB, "j.yaml")
    assert place == tree.place(path)
    assert key_place == tree.key_place(path)


def test_steps_that_only_a_model_has_are_passed_over():
    tree = parse("surfaces:\n  bore: {kind: bore, diameter: 32 H6}\n  rim: {runout: 10 um}\n", "j.yaml")
    assert tree.place(("surfaces", "bore", "diameter")) == tree.place(("surfaces", "bore", "bore", "diameter"))
    assert tree.place(("surfaces", "rim", "runout")) == tree.place(("surfaces", "rim", "cylinder", "runout", "at_most"))
    assert "surfaces.bore.diameter" == tree.dotted(("surfaces", "bore", "bore", "diameter"))
    assert "surfaces.rim.runout" == tree.dotted(("surfaces", "rim", "cylinder", "runout", "at_most"))
    assert tree.key_place(("surfaces", "rim")) == tree.key_place(("surfaces", "rim", "diameter"))  # a missing key
    assert tree.place(("surfaces",)) == tree.place(("surfaces", 7, -1))


def test_a_dotted_path_calls_setups_by_their_operation_number():
    tree = parse(JOB, "j.yaml")
    assert "setups.30.hold.centre.clearance[2]" == tree.dotted(("setups", 1, "hold", "centre", "clearance", 1))
    assert "setups.30.machine" == tree.dotted(("setups", 1, "machine"), missing=True)
    assert "setups.30" == tree.dotted(("setups", 1, "machine"))
    assert "" == tree.dotted(())
    assert "require[2]" == parse("require: [{op: [1]}, {op: [2]}]", "j.yaml").dotted(("require", 1))


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("12", 12), ("-3", -3), ("+3", 3), ("0", 0), ("-0.5", -0.5), (".5", 0.5), ("5.", 5.0), ("1e-3", 0.001),
        ("2.5e+2", 250.0), ("-0.0", 0.0), ("true", True), ("false", False), ("null", None), ("~", None), ("", None),
        ("'12'", "12"), ('"true"', "true"), ("''", ""), ("12 um", "12 um"), ("2,5 um", "2,5 um"), ("no", "no"),
        ("yes", "yes"), ("on", "on"), ("Off", "Off"), ("NO", "NO"), ("y", "y"), ("True", "True"), ("Null", "Null"),
        ("15:30", "15:30"), ("2027-03-31", "2027-03-31"), ("1.2.3", "1.2.3"), ("32e8", "32e8"), ("12.5E7", "12.5E7"),
        ("32 H6", "32 H6"), ("±20\"", "±20\""), ("3deg 34' 35\"", "3deg 34' 35\""), ("-z", "-z"), ("+z", "+z"),
        ("25 %", "25 %"), ("1 1/4 in", "1 1/4 in"), ("１２", "１２"), ("info", "info"), ("nano", "nano"),
        ("0x", "0x"), ("0b12", "0b12"), ("---1", "---1"),
    ],
)  # fmt: skip
def test_a_value_is_nothing_true_or_false_a_decimal_number_or_text(loader, text, value):
    read = parse(f"a: {text}\n", "j.yaml").data["a"]
    assert value == read
    assert type(value) is type(read)


def test_a_text_block_stays_text(loader):
    assert {"a": "12\n", "b": "no yes"} == parse("a: |\n  12\nb: >-\n  no\n  yes\n", "j.yaml").data


def shown(text, *, line, column, length=1, path="", says):
    """The whole message expected of one problem."""
    source = text.split("\n")[line - 1].replace("\t", " ")
    head = f"j.yaml:{line}:{column}  {path}".rstrip()
    return f"{head}\n{line:>6} | {source}\n       | {' ' * (column - 1)}{'^' * length}\n  {says}"


def refusal(text):
    with pytest.raises(JobError) as caught:
        parse(text, "j.yaml")
    return str(caught.value)


@pytest.mark.parametrize(
    ("value", "says"),
    [
        ("010", "'010' begins with a zero. Write 10, or '010' in quotes if it is text"),
        ("-007.5", "'-007.5' begins with a zero. Write -7.5, or '-007.5' in quotes if it is text"),
        ("0x10", "'0x10' is not a decimal number. Write 16, or '0x10' in quotes if it is text"),
        ("0o7", "'0o7' is not a decimal number. Write 7, or '0o7' in quotes if it is text"),
        ("-0b11", "'-0b11' is not a decimal number. Write -3, or '-0b11' in quotes if it is text"),
        ("1_000", "'1_000' has an underscore in its number. Write 1000, or use quotes if it is text"),
        (".nan", "'.nan' is not a number. Write a finite number, or leave the key away if it is not known"),
        ("NaN", "'NaN' is not a number. Write a finite number, or leave the key away if it is not known"),
        ("-.inf", "'-.inf' is not a number. Write a finite number, or leave the key away if it is not known"),
        ("1e+400", "'1e+400' is too large for a number. Check its exponent"),
        ("1" * 31, "the number has too many digits. Write it shorter, or in quotes if it is text"),
    ],
)
def test_a_number_that_readers_disagree_about_is_refused(loader, value, says):
    text = f"hold:\n  at: {value}\n"
    assert shown(text, line=2, column=7, length=len(value), path="hold.at", says=says) == refusal(text)


@pytest.mark.parametrize(
    ("text", "line", "column", "length", "path", "says"),
    [
        (
            "c: [0,5 um]", 1, 5, 6, "c[1]",
            "'0,5 um' has a comma between two digits. "
            "Write a point for the decimal: 0.5 um; or, in a list, a space after the comma: 0, 5 um",
        ),
        (
            "hold: {a: 1 um, clearance: 2,5 um}", 1, 28, 6, "hold.clearance",
            "'2,5 um' has a comma between two digits. "
            "Write a point for the decimal: 2.5 um; or, in a list, a space after the comma: 2, 5 um",
        ),
        (
            "p: [2.0,1.0,0.3]", 1, 5, 11, "p[1]",
            "'2.0,1.0,0.3' has a comma between two digits. Put a space after each comma of a list: 2.0, 1.0, 0.3",
        ),
        (
            "p: [x, {y: [1,2]}]", 1, 13, 3, "p[2].y[1]",
            "'1,2' has a comma between two digits. "
            "Write a point for the decimal: 1.2; or, in a list, a space after the comma: 1, 2",
        ),
        (
            "p: {𝑧: x, z: 10 ±0,003}", 1, 14, 9, "p.z",
            "'10 ±0,003' has a comma between two digits. "
            "Write a point for the decimal: 10 ±0.003; or, in a list, a space after the comma: 10 ±0, 003",
        ),
    ],
)  # fmt: skip
def test_a_comma_between_two_digits_in_brackets_is_refused(loader, text, line, column, length, path, says):
    assert shown(text, line=line, column=column, length=length, path=path, says=says) == refusal(text)


def test_a_decimal_comma_in_brackets_is_one_problem_and_not_a_strange_key_too(loader):
    with pytest.raises(JobError) as caught:
        parse("hold: {a: 2,5, b: 2,5, c: 1,05}\n", "j.yaml")
    assert ["hold.a", "hold.b", "hold.c"] == [problem.path for problem in caught.value.problems]
    assert {"'2,5' has a comma between two digits", "'1,05' has a comma between two digits"} == {
        problem.problem for problem in caught.value.problems
    }


@pytest.mark.parametrize(
    ("text", "data"),
    [
        ("a: [1, 2]", {"a": [1, 2]}),
        ("a: [1 ,2]", {"a": [1, 2]}),
        ("a: [1,-2]", {"a": [1, -2]}),
        ("a: ['1,5', \"2,5\"]  # 3,5", {"a": ["1,5", "2,5"]}),
        ("a: {b: x,c: y}", {"a": {"b": "x", "c": "y"}}),
        ("a: [x1,\n  2]", {"a": ["x1", 2]}),
        ("a: [[1],2]", {"a": [[1], 2]}),
        ("# {a: 2,5}\nb: 2,5 um", {"b": "2,5 um"}),
    ],
)
def test_a_comma_that_can_only_be_a_comma_is_read(loader, text, data):
    assert data == parse(text, "j.yaml").data


NO_VALUE_BEGINS = "no value can begin with this character. Put the value in quotes"
COLON = (
    "a colon stands where no key can be. "
    "Check the indentation and the line before, or put a text with a colon in quotes"
)
BEHIND = "something stands behind the value. Put the whole value in quotes, or begin a new line"
DEPTH = "this line begins at a depth that fits no line above. Begin it straight under its neighbours"
BRACKET = "a bracket is not closed, or a comma is missing. Write [a, b] or {key: value, key: value}"
QUOTE = "a quote is opened and never closed. Close it, or leave it away"


@pytest.mark.parametrize(
    ("text", "line", "column", "length", "path", "says"),
    [
        ("a: &x 1", 1, 4, 2, "a", "'&x' marks this place for others. Leave it away, or put a text in quotes"),
        ("a: *x", 1, 4, 2, "a",
         "'*x' points to another place of the file. Write the value out here, or put a text in quotes"),
        ("a: {*x : 1}", 1, 5, 2, "a",
         "'*x' points to another place of the file. Write the value out here, or put a text in quotes"),
        ("a: !!python/object:os.system x", 1, 4, 25, "a",
         "'!!python/object:os.system' is a tag. Leave it away, or put a text in quotes"),
        ("a: !mine {b: 1}", 1, 4, 5, "a", "'!mine' is a tag. Leave it away, or put a text in quotes"),
        ("a: {<<: {b: 1}}", 1, 5, 2, "a", "'<<' would merge another map into this one. Write its entries out here"),
        ("a: 1\n---\nb: 1", 2, 1, 3, "", "a second document begins. Keep one document in a file"),
        ("%YAML 1.1\n---\na: 1", 1, 1, 1, "", "a line that begins with % is not read. Leave it away"),
        ("s:\n  {a: 1}: 2", 2, 3, 1, "s", "a list or map stands where a key must be. Write a word as the key"),
        ("s:\n  1: 2", 2, 3, 1, "s",
         "'1' is no name for a key. Begin a name with a letter, or write it in quotes: '1'"),
        ("true: 2", 1, 1, 4, "",
         "'true' is no name for a key. Begin a name with a letter, or write it in quotes: 'true'"),
        ("'': 2", 1, 1, 1, "", "a key is missing before the colon. Write key: value"),
        ("a: {b:1}", 1, 5, 3, "a", "the colon in 'b:1' has no space behind it. Write b: 1"),
        ("x" * 101 + ": 1", 1, 1, 91, "", "the key has more than 100 characters. Write a short name and a colon"),
        ("a:\n\tb: 1", 2, 1, 1, "", "a tab stands in the indentation. Indent with spaces"),
        ("a: [1,\n  \t 2]", 2, 3, 2, "", "a tab stands in the indentation. Indent with spaces"),
        ("a: x\u202ey", 1, 5, 1, "", "the character U+202E does not belong in a job. Delete it"),
        ("a: x\u2028y", 1, 5, 1, "", "the character U+2028 does not belong in a job. Delete it"),
        ("a: x\x1b[31m", 1, 5, 1, "", "the character U+001B does not belong in a job. Delete it"),
        ("a: x\ud800", 1, 5, 1, "", "the character U+D800 does not belong in a job. Delete it"),
        ("a: b: c", 1, 5, 1, "", COLON),
        ("a: 1\n  b: 2", 2, 4, 1, "", COLON),
        ("a: 1\nb", 2, 1, 1, "", "this line has no colon after its key. Write key: value"),
        ("a:\n  b: 1\n c: 2", 3, 2, 1, "", DEPTH),
        ("a: 1\n- b", 2, 1, 1, "", DEPTH),
        ("a: '1' b", 1, 8, 1, "", BEHIND),
        ("a: [1, 2]]", 1, 10, 1, "", BEHIND),
        ("a: }", 1, 4, 1, "a", "a closing bracket has no opening one. Delete it, or put the text in quotes"),
        ("a: [1, 2\nb: 3", 1, 4, 1, "a[3]", BRACKET),
        ("a: {b: 1\nc: 2", 1, 4, 1, "a", BRACKET),
        ("a: 'x\nb: 1\n", 1, 4, 1, "a", QUOTE),
        ("a: @x", 1, 4, 1, "a", NO_VALUE_BEGINS),
        ("a: %x", 1, 4, 1, "a", NO_VALUE_BEGINS),
        ("a: `x`", 1, 4, 1, "a", NO_VALUE_BEGINS),
        ("a: - b", 1, 4, 1, "a", "a list entry stands where none can be. Begin it on its own line, as in - value"),
        ("a: 1\n...\nb: 2", 3, 1, 1, "", "the file goes on after its end. Keep one document in a file"),
    ],
)  # fmt: skip
def test_what_a_job_does_not_need_or_yaml_cannot_read_is_refused(loader, text, line, column, length, path, says):
    found = refusal(text)
    if len(text) > 100:  # a cut line is tested with the errors
        assert says in found
        return
    expected = shown(text, line=line, column=column, length=length, path=path, says=says)
    for odd in "\u202e\u2028\x1b\ud800":
        expected = expected.replace(odd, "\ufffd")
    assert expected == found


def test_a_key_that_stands_twice_names_both_lines(loader):
    text = "hold:\n  runout: 10 um\n  on: hub\n  runout: 12 um\n"
    says = "the key 'runout' stands twice, in line 2 and in line 4. Keep one of them"
    assert shown(text, line=4, column=3, length=6, path="hold.runout", says=says) == refusal(text)
    text = "a: {b: 1, b: 2}\n"
    says = "the key 'b' stands twice in this line. Keep one of them"
    assert shown(text, line=1, column=11, length=1, path="a.b", says=says) == refusal(text)


def test_all_problems_of_a_file_come_in_one_run(loader):
    text = "a: [0,5 um]\nb: 010\nb: &x 2\nc: .nan\nd: [1, 2\n"
    with pytest.raises(JobError) as caught:
        parse(text, "j.yaml")
    assert [1, 2, 3, 3, 4, 5] == [problem.line for problem in caught.value.problems]


def test_a_complaint_about_a_tab_does_not_hide_a_fault_elsewhere(loader):
    with pytest.raises(JobError) as caught:
        parse("a: @x\nb:\n\n\tc: 1\n", "j.yaml")
    assert [1, 4] == [problem.line for problem in caught.value.problems]


def test_a_reader_of_the_data_can_collect_wrong_values_and_add_its_own(loader):
    tree = parse("a: 010\nb: 2,5 um\nb: 3 um\n", "j.yaml", collect=True)
    assert {"a": "010", "b": "2,5 um"} == tree.data
    same_place = Problem("a", 1, 4, 3, "'010' begins with a zero", "Write 10 um")
    other = Problem("b", 2, 4, 6, "'2,5 um' is not a length", "Write 2.5 um")
    assert [("a", 1), ("b", 3), ("b", 2)] == [(p.path, p.line) for p in tree.together([same_place, other])]
    with pytest.raises(JobError):
        parse("a: &x 1\n", "j.yaml", collect=True)


@pytest.mark.parametrize("text", ["# nothing here\n", "---\n", "~\n", "", "\ufeff# x"])
def test_a_file_without_values_is_refused(loader, text):
    assert "j.yaml: the file holds no values. Write key: value on its lines" == refusal(text)


def test_twenty_levels_are_read_and_one_more_is_not(loader):
    deep = limits.DEEPEST
    assert parse("[" * deep + "]" * deep, "j.yaml").data
    path = "[1]" * deep
    text = "[" * (deep + 1) + "]" * (deep + 1)
    says = "lists and maps are nested deeper than 20. Take some of them apart"
    assert shown(text, line=1, column=21, path=path, says=says) == refusal(text)


def test_line_ends_of_other_systems_keep_their_places(loader):
    tree = parse("a: 1\r\nb:\r\n  c: 2 um\r\n", "j.yaml")
    assert ({"a": 1, "b": {"c": "2 um"}}, Place(3, 6, 4)) == (tree.data, tree.place(("b", "c")))


HOSTILE = {
    "brackets": "[" * 100_000,
    "maps": "{a: " * 100_000,
    "staircase": "".join(" " * depth + "a:\n" for depth in range(1800)),
    "dashes": "- " * 900_000,
    "question marks": "? " * 900_000,
    "many keys": "\n".join(f"k{i}: 1" for i in range(180_000)),
    "a long list": "[" + "a, " * 600_000 + "]",
    "commas": "[" + "1," * 900_000 + "1]",
    "tabs": "\tx: 1\n" * 300_000,
    "the same key": "a: 1\n" * 300_000,
    "aliases": "a: &a [x, x]\n" + "\n".join(f"b{i}: &b{i} [*a, *a, *a]" for i in range(60_000)),
    "digits": "a: " + "1" * 1_900_000,
    "zeros": "a: " + "0" * 1_900_000,
    "control characters": "\x01" * 1_900_000,
    "colons": "a:" * 900_000,
    "a long key": "x" * 1_900_000 + ": 1",
    "anchors": "&a " * 600_000,
}


@pytest.mark.parametrize("name", HOSTILE)
def test_a_hostile_file_is_refused_in_few_words(name):
    text = refusal(HOSTILE[name])
    assert len(text) < 20_000


def test_a_bomb_of_aliases_is_refused_at_its_first_anchor():
    bomb = "a: &a [x]\n" + "".join(f"b{i}: &b{i} [*b{i - 1}, *b{i - 1}]\n" for i in range(1, 60))
    assert refusal(bomb).startswith(
        "j.yaml:1:4  a\n     1 | a: &a [x]\n       |    ^^\n  '&a' marks this place for others."
    )


@pytest.mark.parametrize(
    ("text", "hint"),
    [
        ("no", "no is text here; write false"),
        ("Off", "Off is text here; write false"),
        ("n", "n is text here; write false"),
        ("YES", "YES is text here; write true"),
        ("on", "on is text here; write true"),
        ("True", "True is text here; write true"),
        ("FALSE", "FALSE is text here; write false"),
        ("NULL", "NULL is text here; leave the value away"),
        ("15:30", "15:30 is read as text; write 15deg 30'"),
        ("-15:05:20", "-15:05:20 is read as text; write -15deg 5' 20\""),
        ("true", None),
        ("none", None),
        ("10 um", None),
        ("2027-03-31", None),
        ("wheel:bore", None),
    ],
)
def test_what_older_readers_took_for_something_else_gets_a_hint(text, hint):
    assert hint == yaml11_surprise(text)
