"""What a planner answers: read in the job file's own notation, refused in its own words. Lengths mm, torques N mm."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Literal, TypeVar

from setupcheck.errors import SetupcheckError, printable
from setupcheck.notation import NotationError, Size, Units, bound, length, nearest, number, plain, size, torque
from setupcheck.record import record
from setupcheck.starting.layout import Measure

Value = float | str | Size
T = TypeVar("T")
LONGEST_ANSWER = 300
"""Characters of one answer. Source: our screening choice, above the longest title."""
SMALLEST_SIZE, LARGEST_SIZE = 1.0, 1000.0
"""Sizes of a workpiece that are taken [mm]. Source: our screening choice; the templates are made for bench-sized parts."""


@record
class Answers:
    """All answers of one part.

    kind    as in `worm-wheel`;  title, job  as they stand on the drawing;  units  of the file
    values  option without its dashes -> what was answered
    """

    kind: str
    title: str
    job: str
    units: Units
    values: Mapping[str, Value]

    @property
    def measure(self) -> Measure:
        """How sizes are written."""
        return Measure(self.units)

    def with_value(self, name: str, value: object) -> Answers:
        """The same with one more answer."""
        if not isinstance(value, float | str | Size):
            raise TypeError(f"{name} was read as {type(value).__name__}")
        return Answers(self.kind, self.title, self.job, self.units, {**self.values, name: value})

    def number(self, name: str) -> float:
        """A size [mm], count, or torque [N mm]."""
        value = self.values[name]
        return value.nominal if isinstance(value, Size) else float(value)

    def word(self, name: str) -> str:
        """A word out of a list."""
        return str(self.values[name])

    def size(self, name: str) -> Size:
        """A size with its class or limits [mm]."""
        value = self.values[name]
        return value if isinstance(value, Size) else Size(float(value))


@record
class Question:
    """One question.

    name      of the option, without its dashes;  asks  in a few words;  explains  in the trade's words
    read      from the text and the answers before it; raises SetupcheckError
    default   what stands if nothing is answered, from the answers before it
    """

    name: str
    asks: str
    explains: str
    read: Callable[[str, Answers], Value]
    default: Callable[[Answers], str]


def whole(low: int, high: int, example: int) -> Callable[[str, Answers], Value]:
    """A count between two ends."""

    def read(text: str, _: Answers) -> Value:
        value = _noted(lambda: number(text))
        if value != int(value) or not low <= value <= high:
            raise SetupcheckError(
                f"'{printable(text)}' is no count from {low} to {high}. Write a whole number, as in {example}"
            )
        return value

    return read


def in_size(smallest: float = SMALLEST_SIZE, largest: float = LARGEST_SIZE) -> Callable[[str, Answers], Value]:
    """A size of a workpiece [mm] between two ends."""

    def read(text: str, answers: Answers) -> Value:
        value = _noted(lambda: length(text, units=answers.units))
        return _within(text, value, smallest, largest, answers)

    return read


def in_module(text: str, answers: Answers) -> Value:
    """A module [mm]: `1.5` is always in mm, `16 DP` a diametral pitch.

    >>> in_module("1.5", Answers("spur-gear", "t", "j", "in", {}))
    1.5
    >>> in_module("16 DP", Answers("spur-gear", "t", "j", "in", {}))
    1.5875
    """
    if text.strip().upper().endswith("DP"):
        pitch = _noted(lambda: number(text.strip()[:-2].strip()))
        value = 25.4 / pitch if pitch > 0.0 else 0.0
    else:
        value = _noted(lambda: length(text, units="mm"))
    if not 0.3 <= value <= 12.0:
        raise SetupcheckError(
            f"'{printable(text)}' is no module from 0.3 mm to 12 mm. Write it as in 1.5, or 16 DP for a diametral pitch"
        )
    return value


def in_bore(text: str, answers: Answers) -> Value:
    """A bore with its class or limits."""
    value = _noted(lambda: size(text, units=answers.units))
    _within(text, value.nominal, SMALLEST_SIZE, 500.0, answers)
    if value.fit is not None and not value.fit[0].isupper():
        raise SetupcheckError(
            f"'{printable(text)}' has the class of a shaft. A bore takes a capital letter, as in "
            f"{answers.measure.exact(value.nominal)} {value.fit.upper()}"
        )
    if value.fit is None and value.lower is None:
        raise SetupcheckError(
            f"'{printable(text)}' says no fit. Write the class or the limits of the bore, as in "
            f"{answers.measure.exact(value.nominal)} H6"
        )
    deviations(value)
    return value


def deviations(of: Size) -> tuple[float, float]:
    """Lower and upper deviation of a size with a class or limits [mm].

    Raises: SetupcheckError for a class that the tables do not have.
    """
    from setupcheck.quantities.book import OutOfRange
    from setupcheck.quantities.fit_tables import limits

    if of.fit is None:
        return of.lower or 0.0, of.upper or 0.0
    try:
        found = limits(of.nominal, of.fit)
    except OutOfRange as why:
        raise SetupcheckError(f"{why}. Write a class as in H6, or limits as in 32 +0.016/0") from None
    return found.lower, found.upper


def in_torque(text: str, _: Answers) -> Value:
    """A torque, 0 or more [N mm]."""
    value = _noted(lambda: torque(text))
    if value < 0.0:
        raise SetupcheckError(f"'{printable(text)}' is below zero. Write 0 N m or more")
    return value


def in_limit(text: str, answers: Answers) -> Value:
    """A requirement's limit with its unit, kept as it is written; nothing for `plan`."""
    if text.strip() == "plan":
        return "plan"
    value = _noted(lambda: bound(text, units=answers.units))
    if value <= 0.0:
        raise SetupcheckError(f"'{printable(text)}' cannot be kept by any plan. Write a limit above zero, as in 40 um")
    return (
        f"{plain(round(value * 1000.0, 4))} um" if answers.units == "mm" else f"{plain(round(value / 0.0254, 5))} thou"
    )


def one_of(*words: str) -> Callable[[str, Answers], Value]:
    """A word out of a list."""

    def read(text: str, _: Answers) -> Value:
        word = text.strip()
        if word in words:
            return word
        near = nearest(word, words)
        raise SetupcheckError(
            f"'{printable(word)}' is not known here. {f'Did you mean {near}?' if near else f'Write {_listed(words)}'}"
        )

    return read


def read_answer(question: Question, text: str, answers: Answers) -> Value:
    """One answer.

    Raises: SetupcheckError with what to write.
    """
    if len(text) > LONGEST_ANSWER:
        raise SetupcheckError(f"that is {len(text)} characters. Write one line, as in {question.default(answers)}")
    return question.read(text, answers)


def units_of(text: str) -> Units:
    """The units of the file.

    Raises: SetupcheckError.
    """
    word: Literal["mm", "in"] | None = {"mm": "mm", "in": "in"}.get(text.strip())  # type: ignore[assignment]
    if word is None:
        raise SetupcheckError(f"'{printable(text[:40])}' is no unit of a job file. Write mm or in")
    return word


def _within(text: str, value: float, smallest: float, largest: float, answers: Answers) -> float:
    if not smallest - 1e-9 <= value <= largest + 1e-9:
        show = answers.measure.told
        raise SetupcheckError(
            f"'{printable(text)}' is outside what this part can have, {show(smallest)} to {show(largest)}"
        )
    return value


def _listed(words: tuple[str, ...]) -> str:
    return f"{', '.join(words[:-1])} or {words[-1]}" if len(words) > 1 else words[0]


def _noted(reading: Callable[[], T]) -> T:
    try:
        return reading()
    except NotationError as why:
        raise SetupcheckError(str(why)) from None
