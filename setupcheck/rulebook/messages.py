"""Messages of findings: the five fields a rule may use, filled by our own code with values shown in shop units."""

from __future__ import annotations

import re
from collections.abc import Mapping

from setupcheck.notation import show
from setupcheck.rulebook.records import GENERIC_FIELDS

_FIELD = re.compile(r"\{([^{}]*)\}")
MOST_EXTRA_DIGITS = 4
"""How many digits more than usual are shown to tell a value from its limit; below that they count as equal."""


def wrong_fields(template: str) -> tuple[str, ...]:
    """What stands in braces and is no field, in order; a brace without its partner counts as one.

    >>> wrong_fields("worst {value} of {limits}"), wrong_fields("worst {value")
    (('limits',), ('{',))
    """
    wrong = [field for field in _FIELD.findall(template) if field not in GENERIC_FIELDS]
    rest = _FIELD.sub("", template)
    return (*wrong, *(brace for brace in "{}" if brace in rest))


def fill(template: str, fields: Mapping[str, str]) -> str:
    """Put the fields in. Each is put in once: braces inside a name of the job stay as they are.

    >>> fill("op {op} is set on {surface}", {"op": "30", "surface": "{op}"})
    'op 30 is set on {op}'
    """
    return _FIELD.sub(lambda match: fields[match[1]], template)


def shown_pair(value: float, limit: float | tuple[float, float], *, unit: str, digits: int) -> tuple[str, str]:
    """Value and limit as text, with as many more digits as it takes to tell a value just beyond from its limit.

    value, limit   base units; `unit` and `digits` say how to show them
    """
    unit = unit or "1"  # counts have no unit
    ends = limit if isinstance(limit, tuple) else (limit,)
    for more in range(MOST_EXTRA_DIGITS + 1):
        value_text = show(value, unit, digits + more)
        limit_texts = [show(end, unit, digits + more) for end in ends]
        if value_text not in limit_texts or value in ends:
            break
    else:
        value_text, limit_texts = show(value, unit, digits), [show(end, unit, digits) for end in ends]
    return value_text, " to ".join(limit_texts)


def cannot_tell(missing: tuple[str, ...], because: str) -> str:
    """The message of an open finding: the one key to fill, and the reason beside it, which may come of another entry.

    >>> cannot_tell(("setups.30.hold.centre.runout",), "")
    'cannot tell: fill setups.30.hold.centre.runout'
    >>> cannot_tell(("wheel.bore", "wheel.face"), "the ring is read off its axis")
    'cannot tell: fill wheel.bore (and 1 more); the ring is read off its axis'
    """
    if not missing:
        return f"cannot tell: {because or 'the number is not there'}"
    others = f" (and {len(missing) - 1} more)" if len(missing) > 1 else ""
    reason = f"; {because}" if because else ""
    return f"cannot tell: fill {missing[0]}{others}{reason}"
