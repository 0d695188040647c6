"""Records: `@record` gives what `@dataclass(frozen=True, slots=True)` gives, and writes a constructor when it is first called.

A frozen dataclass writes and compiles seven methods for every class while its module is imported, which for all records
here took a tenth of the whole command. These share six of the methods, and a run needs the constructors of half the classes.
`dataclasses.fields` and `dataclasses.replace` work as on any dataclass; a record has no records among its base classes.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import MISSING, FrozenInstanceError, dataclass, field, fields
from functools import cache
from operator import attrgetter
from types import CodeType, FunctionType
from typing import Any, NoReturn, TypeVar, dataclass_transform, overload

T = TypeVar("T")


@overload
def record(cls: type[T], /) -> type[T]: ...
@overload
def record(*, eq: bool = True, kw_only: bool = False, frozen: bool = True) -> Callable[[type[T]], type[T]]: ...
@dataclass_transform(frozen_default=True, field_specifiers=(field,))
def record(
    cls: type[T] | None = None, /, *, eq: bool = True, kw_only: bool = False, frozen: bool = True
) -> type[T] | Callable[[type[T]], type[T]]:
    """The class as a frozen record: fields as in a dataclass, kept in slots, set once.

    eq      compare and hash by the fields; without it a record is equal to itself alone, or as its own `__eq__` says
    frozen  False for what is filled on the way: its fields may be set again, and it is equal to itself alone

    >>> @record
    ... class Span:
    ...     low: float
    ...     high: float = 0.0
    >>> Span(1.0, high=2.0), Span(1.0) == Span(1.0, 0.0)
    (Span(low=1.0, high=2.0), True)
    >>> Span(1.0).low = 3.0
    Traceback (most recent call last):
    dataclasses.FrozenInstanceError: a Span cannot change its low
    """
    if cls is None:
        return lambda cls: _made(cls, eq=eq and frozen, kw_only=kw_only, frozen=frozen)
    return _made(cls, eq=eq and frozen, kw_only=kw_only, frozen=frozen)


def _made(cls: type[T], *, eq: bool, kw_only: bool, frozen: bool) -> type[T]:
    shared: dict[str, object] = {"__init__": _first_init, "__repr__": _repr, "__reduce__": _reduce}
    if frozen:
        shared |= {"__setattr__": _refuse_to_set, "__delattr__": _refuse_to_delete}
    if eq:
        shared |= {"__eq__": _eq, "__hash__": _hash}
    for name, method in shared.items():
        if name not in cls.__dict__:
            setattr(cls, name, method)
    made: Any = dataclass(init=False, repr=False, eq=False, slots=True, kw_only=kw_only)(cls)
    made._all_of = attrgetter(*(f.name for f in fields(made)))
    return made  # type: ignore[no-any-return]


def _first_init(self: Any, *args: object, **given: object) -> None:
    """Stands for `__init__` until it is written."""
    cls = type(self)
    cls.__init__ = _written_init(cls)
    cls.__init__(self, *args, **given)


def _written_init(cls: Any) -> Callable[..., None]:
    """`__init__` with the fields as its arguments. A slot is set by its own descriptor, as nothing else can set it."""
    plain = all(f.init and f.default_factory is MISSING for f in fields(cls)) and not hasattr(cls, "__post_init__")
    return _named_init(cls) if plain else _compiled_init(cls)


def _named_init(cls: Any) -> Callable[..., None]:
    """A constructor that only sets fields: compiled once for each number of fields, here given the names of these."""
    ordered = sorted(fields(cls), key=lambda f: bool(f.kw_only))  # those by keyword only come last
    by_name = [f for f in ordered if f.kw_only]
    code = _setting(len(ordered)).replace(
        co_name="__init__",
        co_varnames=("self", *(f.name for f in ordered)),
        co_argcount=1 + len(ordered) - len(by_name),
        co_kwonlyargcount=len(by_name),
    )
    setters = {f"_set_{number}": getattr(cls, f.name).__set__ for number, f in enumerate(ordered)}
    defaults = tuple(f.default for f in ordered if f.default is not MISSING and not f.kw_only)
    init = FunctionType(code, setters, "__init__", defaults)
    init.__kwdefaults__ = {f.name: f.default for f in by_name if f.default is not MISSING}
    init.__qualname__ = f"{cls.__qualname__}.__init__"
    return init


@cache
def _setting(count: int) -> CodeType:
    """Code of a function that sets so many fields of its first argument to the others."""
    names = [f"_{number}" for number in range(count)]
    lines = "\n".join(f" _set{name}(self, {name})" for name in names) or " pass"
    found: dict[str, FunctionType] = {}
    exec(f"def init({', '.join(['self', *names])}):\n{lines}", found)  # no text from anywhere else
    return found["init"].__code__


def _compiled_init(cls: Any) -> Callable[..., None]:
    """A constructor of a record with made-up defaults, fields that are no arguments, or work to do at the end."""
    known: dict[str, object] = {}
    arguments: dict[bool, list[str]] = {False: [], True: []}  # those by keyword only come last
    lines: list[str] = []
    for f in fields(cls):
        known[f"_set_{f.name}"] = getattr(cls, f.name).__set__
        value = f.name
        if f.default is not MISSING:
            known[f"_default_{f.name}"] = f.default
            default = f" = _default_{f.name}"
        elif f.default_factory is not MISSING:
            known[f"_make_{f.name}"] = f.default_factory
            known["_MISSING"] = MISSING
            value = f"_make_{f.name}() if {f.name} is _MISSING else {f.name}"
            default = " = _MISSING"
        else:
            default = ""
        if f.init:
            arguments[bool(f.kw_only)].append(f.name + default)
        elif default:
            value = default.removeprefix(" = ")
        lines.append(f" _set_{f.name}(self, {value})")
    if hasattr(cls, "__post_init__"):
        lines.append(" self.__post_init__()")
    named = ["*", *arguments[True]] if arguments[True] else []
    source = f"def __init__({', '.join(['self', *arguments[False], *named])}):\n" + "\n".join(lines or [" pass"])
    exec(source, known)  # names and values of our own fields only, as in a dataclass
    init: Any = known["__init__"]
    init.__qualname__ = f"{cls.__qualname__}.__init__"
    return init  # type: ignore[no-any-return]


def _eq(self: Any, other: Any) -> Any:
    if type(other) is not type(self):
        return NotImplemented
    return self._all_of(self) == self._all_of(other)


def _hash(self: Any) -> int:
    return hash(self._all_of(self))


def _repr(self: Any) -> str:
    shown = (f"{f.name}={getattr(self, f.name)!r}" for f in fields(self) if f.repr)
    return f"{type(self).__qualname__}({', '.join(shown)})"


def _refuse_to_set(self: object, name: str, value: object) -> NoReturn:
    raise FrozenInstanceError(f"a {type(self).__name__} cannot change its {name}")


def _refuse_to_delete(self: object, name: str) -> NoReturn:
    raise FrozenInstanceError(f"a {type(self).__name__} cannot lose its {name}")


def _reduce(self: Any) -> tuple[object, ...]:
    return _again, (type(self), {f.name: getattr(self, f.name) for f in fields(self)})


def _again(cls: type[T], values: dict[str, object]) -> T:
    """A copied or unpickled record."""
    made = cls.__new__(cls)
    for name, value in values.items():
        object.__setattr__(made, name, value)
    return made
