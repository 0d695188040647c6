"""The quick reading of shipped files gives what the careful one gives, or leaves the file to it."""

from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.errors import JobError
from setupcheck.shipped import shipped
from setupcheck.yamlfile import parse, parse_plain, read_text
from setupcheck.yamlfile.plain import plain_data

SHIPPED = sorted((*shipped("rules").glob("*.yaml"), *shipped("rules/data").glob("*.yaml")))

LEFT_TO_THE_READER = {
    "key twice": "a: 1\na: 2\n",
    "number look-alike": "a: 007\n",
    "comma in a number": "a: [0,5 um, 1 um]\n",
    "tab": "a:\tb\n",
    "odd character": "a: b\u200bc\n",
    "anchor": "a: &x 1\n",
    "alias": "a: *x\n",
    "tag": "a: !!str 1\n",
    "merge": "<<: {a: 1}\n",
    "directive": "%YAML 1.1\n---\na: 1\n",
    "two documents": "a: 1\n---\nb: 2\n",
    "number as a key": "1: a\n",
    "true as a key": "true: a\n",
    "true as a key, after it stood in quotes": "- 'true': a\n- true: a\n",
    "map as a key": "{a: 1}: b\n",
    "empty key": ": a\n",
    "colon without a blank": "a:b: c\n",
    "long key": f"{'k' * 101}: 1\n",
    "deep": "[" * 21 + "]" * 21 + "\n",
    "no YAML": "a: [1\n",
    "nothing": "# nothing\n",
    "many values": f"a: [{'1, ' * 50_001}1]\n",
}


@pytest.mark.parametrize("file", SHIPPED, ids=lambda file: file.name)
def test_every_shipped_file_is_plain_and_reads_alike_both_ways(file: Path) -> None:
    text = read_text(file)
    assert parse(text, file.name).data == plain_data(text)


@pytest.mark.parametrize("text", LEFT_TO_THE_READER.values(), ids=LEFT_TO_THE_READER.keys())
def test_what_needs_a_second_look_is_left_to_the_careful_reader(text: str) -> None:
    assert plain_data(text) is None


@given(st.text(alphabet="ab1.,:-[]{}'\"# \n~&*!<", max_size=40))
def test_whatever_is_read_quickly_is_what_the_careful_reader_reads(text: str) -> None:
    if (data := plain_data(text)) is not None:
        assert parse(text, "any.yaml").data == data


def test_a_place_is_found_when_it_is_asked_for() -> None:
    text = "rules:\n  - id: X\n    limit: 10 um\n"
    quick, careful = parse_plain(text, "r.yaml"), parse(text, "r.yaml")
    path = ("rules", 0, "limit")
    assert (careful.data, careful.place(path), careful.key_place(path)) == (
        quick.data,
        quick.place(path),
        quick.key_place(path),
    )


def test_a_wrong_file_has_the_error_of_the_careful_reader() -> None:
    with pytest.raises(JobError, match=r"r\.yaml:2:1"):
        parse_plain("a: 1\na: 2\n", "r.yaml")
