"""YAML drawn at random: what a writer writes is read back, and nothing ends in a traceback."""

import contextlib
import re

import yaml
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.errors import JobError
from setupcheck.yamlfile import parse, reader

words = st.text(alphabet="abcdefghijklmnopqrstuvwxyz éü€😀-_,:#'\"[]{}&*!|>%@` 0123456789.", min_size=1, max_size=12)
words = words.filter(lambda text: not re.fullmatch(r"[-+]\.\d+", text))  # a number to a shop, text to a YAML 1.1 writer
names = st.from_regex(r"[a-z][a-z_]{0,8}", fullmatch=True)
trees = st.recursive(
    words | st.integers(-(10**6), 10**6) | st.booleans() | st.none(),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(names, inner, max_size=4),
    max_leaves=12,
)


@given(st.dictionaries(names, trees, min_size=1, max_size=4), st.sampled_from([True, False, None]))
def test_what_a_yaml_writer_writes_is_read_back(data, flow):
    text = yaml.safe_dump(data, default_flow_style=flow, allow_unicode=True, width=10_000)
    numeric = "0123456789"
    if any(a in numeric and b in numeric for a, _, b in zip(text, text[1:], text[2:], strict=False) if _ == ","):
        return  # a comma between digits is ours to refuse
    try:
        tree = parse(text, "j.yaml")
    except JobError as why:
        # Only plain texts that other readers take for numbers, and keys such as `null`, are refused.
        for problem in why.problems:
            assert "no name for a key" in problem.problem or "'" in problem.problem or "digits" in problem.problem
        return
    assert data == tree.data
    for path, value in walk(tree.data, ()):
        if isinstance(value, str) and value in text:
            place = tree.place(path)
            line = tree.lines[place.line - 1]
            assert value in (line[place.column - 1 :][: place.length].strip("'\""), value)
            assert place.column - 1 + place.length <= len(line)


@given(st.text(max_size=60))
def test_any_text_is_read_or_refused_with_a_place(text):
    try:
        parse(text, "j.yaml")
    except JobError as why:
        lines = text.count("\n") + text.count("\r") + 1
        assert all(0 <= problem.line <= lines and problem.hint for problem in why.problems)
        assert str(why)


@given(st.text(alphabet="ab:[]{}-,'\"\n \t#&*!|>?1.5%", max_size=40))
def test_no_row_of_yaml_signs_is_read_as_two_different_things_by_the_two_parsers(text):
    outcomes = []
    kept = reader.LOADER
    try:
        for kind in (getattr(yaml, "CBaseLoader", yaml.BaseLoader), yaml.BaseLoader):
            reader.LOADER = kind
            with contextlib.suppress(JobError):  # libyaml is the stricter one: it refuses `[1?]`
                outcomes.append(parse(text, "j.yaml").data)
    finally:
        reader.LOADER = kept
    assert len(outcomes) < 2 or outcomes[0] == outcomes[1]


def walk(data, path):
    yield path, data
    if isinstance(data, dict):
        for key, value in data.items():
            yield from walk(value, (*path, key))
    elif isinstance(data, list):
        for at, value in enumerate(data):
            yield from walk(value, (*path, at))
