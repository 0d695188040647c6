"""Records behave as frozen dataclasses do."""

from __future__ import annotations

import copy
import pickle
from dataclasses import FrozenInstanceError, field, fields, replace

import pytest

from setupcheck.record import record


@record
class Span:
    low: float
    high: float = 0.0
    names: list[str] = field(default_factory=list)
    hidden: int = field(default=3, repr=False)
    width: float = field(init=False, default=-1.0)

    def __post_init__(self) -> None:
        object.__setattr__(self, "width", self.high - self.low)


@record(kw_only=True)
class Named:
    name: str
    size: int = 1


@record(eq=False)
class Alone:
    name: str


@record(eq=False)
class Own:
    name: str
    note: str = ""

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Own) and self.name == other.name

    def __hash__(self) -> int:
        return hash(self.name)


def test_the_first_and_the_second_are_made_alike() -> None:
    one, two = Span(1.0, high=4.0), Span(1.0, 4.0)
    assert one == two
    assert (one.low, one.high, one.names, one.hidden, one.width) == (1.0, 4.0, [], 3, 3.0)
    assert one.names is not two.names


def test_wrong_arguments_are_refused_at_the_first_call_too() -> None:
    @record
    class Fresh:
        name: str

    for _ in range(2):
        with pytest.raises(TypeError, match=r"Fresh\.__init__\(\) missing 1 required positional argument: 'name'"):
            Fresh()  # type: ignore[call-arg]
        with pytest.raises(TypeError, match="unexpected keyword argument 'nmae'"):
            Fresh(nmae="x")  # type: ignore[call-arg]
        with pytest.raises(TypeError):
            Named("x")  # type: ignore[call-arg]
    assert Named(name="x") == Named(name="x", size=1)


def test_nothing_changes_a_record() -> None:
    span = Span(1.0)
    with pytest.raises(FrozenInstanceError, match="a Span cannot change its low"):
        span.low = 2.0  # type: ignore[misc]
    with pytest.raises(FrozenInstanceError, match="a Span cannot change its other"):
        span.other = 2.0  # type: ignore[attr-defined]
    with pytest.raises(FrozenInstanceError, match="a Span cannot lose its low"):
        del span.low
    assert span.low == 1.0
    assert not hasattr(span, "__dict__")


def test_equality_and_hash_go_by_the_fields_unless_asked_otherwise() -> None:
    assert Named(name="a") != Named(name="b")
    assert Named(name="a") != ("a", 1)  # type: ignore[comparison-overlap]
    assert len({Named(name="a"), Named(name="a"), Named(name="b")}) == 2
    assert Alone("a") != Alone("a")
    assert len({Alone("a"), Alone("a")}) == 2
    assert Own("a", "x") == Own("a", "y")
    assert len({Own("a", "x"), Own("a", "y")}) == 1


def test_it_shows_its_fields() -> None:
    assert repr(Span(1.0)) == "Span(low=1.0, high=0.0, names=[], width=-1.0)"
    assert [f.name for f in fields(Named)] == ["name", "size"]


def test_it_can_be_replaced_copied_pickled_and_matched() -> None:
    span = replace(Span(1.0, 4.0), high=2.0)
    assert (span.high, span.width) == (2.0, 1.0)
    assert copy.copy(span) == copy.deepcopy(span) == span
    assert pickle.loads(pickle.dumps(Own("a", "x"))).note == "x"
    match span:
        case Span(low, high):
            assert (low, high) == (1.0, 2.0)
        case _:
            pytest.fail("no match")
