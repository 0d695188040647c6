"""YAML text to plain data in half the time, where nothing in it asks for a second look. For the files shipped with the rules.

What `reader` would refuse, or read with more thought, is not judged here: the answer is then None, and the reader is asked.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from typing import Any

import yaml

from setupcheck.yamlfile import limits
from setupcheck.yamlfile.scalars import LookAlike, plain_scalar
from setupcheck.yamlfile.syntax import ODD
from setupcheck.yamlfile.tree import Data

LOADER = getattr(yaml, "CBaseLoader", yaml.BaseLoader)  # libyaml where it is installed: ten times faster
_SCALAR, _MAP, _LIST = yaml.ScalarEvent, yaml.MappingStartEvent, yaml.SequenceStartEvent
_END_OF_MAP, _END_OF_LIST = yaml.MappingEndEvent, yaml.SequenceEndEvent
_COMMA_IN_A_NUMBER = re.compile(r"[0-9],[0-9]")


def plain_data(text: str) -> Data:
    """The data of a text as `parse` reads it, without places; None where the text is not as plain as that.

    >>> plain_data("limits: [10 um, 2]\\nnote: no"), plain_data("a: 1\\na: 2")
    ({'limits': ['10 um', 2], 'note': 'no'}, None)
    """
    if len(text) > limits.MOST_VALUES or "\t" in text or ODD.search(text) or _COMMA_IN_A_NUMBER.search(text):
        return None  # a text that has fewer characters than values are allowed needs no count of them
    try:
        return _read(iter(LOADER(text).get_event, None))
    except yaml.YAMLError:
        return None


def _read(events: Iterator[Any]) -> Data:
    """One pass over the events. `key` is that of the value to come, None while a map awaits one."""
    top: list[Data] = []
    here: Any = top
    in_map = False
    key: str | None = None
    around: list[tuple[Any, bool, str | None]] = []
    known: set[str] = set()
    documents = 0
    for event in events:
        kind = type(event)
        if kind is _SCALAR:
            if event.tag is not None or event.anchor is not None:
                return None
            value = event.value
            if in_map and key is None:
                if value in here:
                    return None
                if event.style:
                    if not _is_key(value, quoted=True):
                        return None
                elif value not in known:  # few words are keys, and each of them again and again
                    if not _is_key(value, quoted=False):
                        return None
                    known.add(value)
                key = value
                continue
            if not event.style:
                value = plain_scalar(value)
                if type(value) is LookAlike:
                    return None
        elif kind is _MAP or kind is _LIST:
            unnamed = in_map and key is None
            if event.tag is not None or event.anchor is not None or unnamed or len(around) >= limits.DEEPEST:
                return None
            around.append((here, in_map, key))
            in_map = kind is _MAP
            here, key = ({} if in_map else []), None
            continue
        elif kind is _END_OF_MAP or kind is _END_OF_LIST:
            value = here
            here, in_map, key = around.pop()
        elif kind is yaml.AliasEvent:
            return None
        else:
            documents += kind is yaml.DocumentStartEvent
            if documents > 1 or (kind is yaml.DocumentStartEvent and (event.version or event.tags)):
                return None
            continue
        if in_map:
            here[key] = value
            key = None
        else:
            here.append(value)
    return top[0] if top else None


def _is_key(word: str, *, quoted: bool) -> bool:
    """Whether no reader could take the key for anything else."""
    if not word.strip() or len(word) > limits.LONGEST_KEY or "\n" in word:
        return False
    return quoted or (isinstance(plain_scalar(word), str) and word != "<<" and ":" not in word)
