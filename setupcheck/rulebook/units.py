"""Limits written in the rule book: a number whose unit fits the quantity it is held against."""

from __future__ import annotations

from setupcheck.notation import NotationError, amount
from setupcheck.notation.units import kind_of
from setupcheck.rulebook.entries import Entry
from setupcheck.rulebook.needs import BY_INSTANCE
from setupcheck.rulebook.records import Number

PLAIN = "number"


def dimension_of(unit: str) -> str:
    """The dimension of a display unit, as `amount` names it; BY_INSTANCE stays itself.

    >>> dimension_of("um"), dimension_of("K"), dimension_of(""), dimension_of("%")
    ('length', 'temperature_difference', 'number', 'fraction')
    """
    if unit in ("", "1"):
        return PLAIN
    if unit == BY_INSTANCE:
        return BY_INSTANCE
    if unit == "K":
        return "temperature_difference"
    kind = kind_of(unit)
    if kind is None:
        raise ValueError(f"no dimension is known for the unit {unit!r}")
    return kind.name


def read_number(entry: Entry, unit: str) -> Number:
    """A limit as written, in base units. Raises RuleBookError when it is no amount or its unit does not fit `unit`."""
    text = entry.scalar_text()
    wanted = dimension_of(unit)
    try:
        read = amount(text)
    except NotationError as why:
        raise entry.wrong(why.problem, why.hint) from None
    if wanted == BY_INSTANCE:
        raise entry.wrong(
            f"'{text}' cannot be a limit here: the unit belongs to the instance", "Write {quantity: name of the limit}"
        )
    if read.dimension != wanted:
        example = "a number without unit" if wanted == PLAIN else f"the limit in {unit}"
        raise entry.wrong(f"'{text}' is no {_words(wanted)}", f"Write {example}")
    return Number(read.value, text)


def read_share(entry: Entry) -> float:
    """A share as in `10 %`, as a fraction between 0 and 1."""
    share = read_number(entry, "%").value
    if not 0.0 < share < 1.0:
        raise entry.wrong(f"'{entry.scalar_text()}' leaves nothing to warn within", "Write a share such as 10 %")
    return share


def _words(dimension: str) -> str:
    return {"fraction": "share", PLAIN: "plain number"}.get(dimension, dimension.replace("_", " "))
