"""Causes as a machinist would say them: the operation first, then the error as a thing that can be made smaller."""

from __future__ import annotations

import re

_OP = re.compile(r"(op \d+)(?:, |: )(.*)")

_ELSEWHERE: tuple[tuple[re.Pattern[str], str, str], ...] = (
    (
        re.compile(r"(.+), (.+) as bought: run-out at its (low|high) end"),
        r"\1 as bought",
        r"run-out of \2 at its \3 end",
    ),
    (re.compile(r"(.+), (.+) as bought: (.+)"), r"\1 as bought", r"\3 of \2"),
    (re.compile(r"(.+), mark kept: (run-out|face run-out)[^,]*(.*)"), r"\1 with its mark kept", r"\2\3"),
    (re.compile(r"housing, face to worm axis"), "housing", "distance of the worm axis"),
    (re.compile(r"mesh, flanks that no longer fit: (.+)"), "mesh", r"flanks that no longer fit, \1 off"),
)
"""Names of causes that belong to no operation: pattern, where it sits, what it is."""

_IN_AN_OPERATION: tuple[tuple[re.Pattern[str], str], ...] = (
    (
        re.compile(r"dividing (.+): (once|twice) per turn of (?:the|its) (wheel|worm)"),
        r"dividing error of \1, \2 per turn of the dividing \3",
    ),
    (re.compile(r"dividing (.+): once per crank turn"), r"dividing error of \1, once per crank turn"),
    (re.compile(r"dividing (.+): (.+)"), r"\2 in dividing \1"),
    (re.compile(r"(.+): spindle to table axis, (x|y)"), r"spindle over table axis for \1, along \2"),
    (re.compile(r"(.+): axis of (.+)"), r"own run-out of \2 in cutting \1"),
    (re.compile(r"(.+): length by dial"), r"dial error in the length of \1"),
    (re.compile(r"(.+): mid-plane found (.+)"), r"mid-plane error of \1, found \2"),
    (re.compile(r"(.+): touches at the high point"), r"high point under the \1"),
    (re.compile(r"(.+): faces meet at the high point"), r"high point where \1 meets the shoulder"),
    (re.compile(r"clocked on (.+)"), r"clocking on \1"),
    (re.compile(r"(.+): (.+), second plane"), r"\2 of \1, second plane"),
    (re.compile(r"(.+): (.+)"), r"\2 of \1"),
)
"""The same inside one operation, the text behind `op 40, `. The last one is the general case."""

_SCATTER = " (scatter)"
_PUT_ON = re.compile(r"(.*), as put on \(op (\d+)\)")


def cause_in_parts(key: str) -> tuple[str, str]:
    """(where it sits, what it is): ("op 40", "clearance of hub in spigot"); no place where there is none to name.

    >>> cause_in_parts("op 40, hub in spigot: clearance")
    ('op 40', 'clearance of hub in spigot')
    >>> cause_in_parts("spindle, journal as bought: run-out at its high end")
    ('spindle as bought', 'run-out of journal at its high end')
    """
    if key.endswith(_SCATTER):
        where, what = cause_in_parts(key.removesuffix(_SCATTER))
        return where, f"{what}, its scatter"
    if found := _PUT_ON.fullmatch(key):
        where, what = cause_in_parts(found[1])
        return where, f"{what} as put on in op {found[2]}"
    if found := _OP.fullmatch(key):
        return found[1], _first(found[2])
    for pattern, where, what in _ELSEWHERE:
        if found := pattern.fullmatch(key):
            return found.expand(where), found.expand(what)
    return "", _first(key)


def cause_in_words(key: str) -> str:
    """A cause as one phrase.

    >>> cause_in_words("op 40, dividing teeth: once per crank turn"), cause_in_words("op 40, stop on seat")
    ('op 40, dividing error of teeth, once per crank turn', 'op 40, stop on seat')
    """
    where, what = cause_in_parts(key)
    return f"{where}, {what}" if where else what


def _first(text: str) -> str:
    for pattern, words in _IN_AN_OPERATION:
        if found := pattern.fullmatch(text):
            return found.expand(words)
    return text
