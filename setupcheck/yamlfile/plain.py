"""YAML text to plain data in half the time, where nothing in it asks for a second look. For the files shipped with the rules.

What `reader` would refuse, or read with more thought, is not judged here: the answer is then None, and the reader is asked.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from functools import lru_cache
from typing import Any

import yaml

from setupcheck.yamlfile import limits
from setupcheck.yamlfile.scalars import LookAlike, plain_scalar
from setupcheck.yamlfile.syntax import ODD
from setupcheck.yamlfile.tree import Data

LOADER = getattr(yaml, "CBaseLoader", yaml.BaseLoader)  # libyaml where it is installed: ten times faster
_COMMA_IN_A_NUMBER = re.compile(r"[0-9],[0-9]")


def plain_data(text: str) -> Data:
    """The data of a text as `parse` reads it, without places; None where the text is not as plain as that.

    >>> plain_data("limits: [10 um, 2]\\nnote: no"), plain_data("a: 1\\na: 2")
    ({'limits': ['10 um', 2], 'note': 'no'}, None)
    """
    if "\t" in text or ODD.search(text) or _COMMA_IN_A_NUMBER.search(text):
        return None
    try:
        return _read(iter(LOADER(text).get_event, None))
    except yaml.YAMLError:
        return None


def _read(events: Iterator[Any]) -> Data:
    """One pass over the events. `key` is that of the value to come, None while a map awaits one."""
    top: list[Data] = []
    here: list[Data] | dict[str, Data] = top
    around: list[tuple[list[Data] | dict[str, Data], str | None]] = []
    key: str | None = None
    documents = values = 0
    for event in events:
        kind = type(event)
        if kind is yaml.ScalarEvent:
            values += 1
            if event.tag is not None or event.anchor is not None or values > limits.MOST_VALUES:
                return None
            if key is None and isinstance(here, dict):
                key = event.value
                if key in here or not _is_plain_key(key, quoted=bool(event.style)):
                    return None
                continue
            known = event.value if event.style else plain_scalar(event.value)
            if isinstance(known, LookAlike):
                return None
            value: Data = known
        elif kind is yaml.MappingStartEvent or kind is yaml.SequenceStartEvent:
            values += 1
            unnamed = key is None and isinstance(here, dict)
            if event.tag is not None or event.anchor is not None or unnamed or len(around) >= limits.DEEPEST:
                return None
            around.append((here, key))
            here, key = ({} if kind is yaml.MappingStartEvent else []), None
            continue
        elif kind is yaml.MappingEndEvent or kind is yaml.SequenceEndEvent:
            value = here
            here, key = around.pop()
        elif kind is yaml.AliasEvent:
            return None
        else:
            documents += kind is yaml.DocumentStartEvent
            if documents > 1 or (kind is yaml.DocumentStartEvent and (event.version or event.tags)):
                return None
            continue
        if isinstance(here, list):
            here.append(value)
        elif key is not None:
            here[key] = value
            key = None
    return top[0] if top else None


@lru_cache  # few words are keys, and each of them again and again
def _is_plain_key(word: str, *, quoted: bool) -> bool:
    """Whether no reader could take the key for anything else."""
    if not word.strip() or len(word) > limits.LONGEST_KEY or "\n" in word:
        return False
    return quoted or (isinstance(plain_scalar(word), str) and word != "<<" and ":" not in word)
