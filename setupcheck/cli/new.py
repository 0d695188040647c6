"""`setupcheck new FILE`: a first job file from a few answers, or from an example."""

# Annotations are evaluated as they stand (no __future__ import): typer would have to compile each of them from its text.

import sys
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any, TypeVar

import typer
from typer.core import TyperCommand

from setupcheck.cli.writing import refuse_new, write_new
from setupcheck.errors import SetupcheckError

if TYPE_CHECKING:
    from setupcheck.starting.answers import Answers, Question
    from setupcheck.starting.kinds import Kind, Started

Text = str | None
LIST = "list"
"""What stands behind `--like` or `--kind` to have them listed; nothing does as well."""
Read = TypeVar("Read")


def _option(name: str, says: str) -> object:
    return typer.Option(f"--{name}", help=says, show_default=False)


class Command(TyperCommand):
    """`--like` or `--kind` with nothing behind it asks for the list."""

    def parse_args(self, ctx: Any, args: list[str]) -> list[str]:
        ends = [*args[1:], "--"][: len(args)]
        told = [
            [arg, LIST] if arg in ("--like", "--kind") and after.startswith("--") else [arg]
            for arg, after in zip(args, ends, strict=True)
        ]
        return super().parse_args(ctx, [arg for part in told for arg in part])


def command(
    file: Annotated[
        Path | None,
        typer.Argument(metavar="FILE", help="Job file to write (YAML); nothing is replaced.", show_default=False),
    ] = None,
    like: Annotated[Text, _option("like", "Copy this example; alone it lists them.")] = None,
    kind: Annotated[Text, _option("kind", "Kind of part; alone it lists them.")] = None,
    title: Annotated[Text, _option("title", "Title of the job.")] = None,
    job: Annotated[Text, _option("job", "Job number.")] = None,
    units: Annotated[Text, _option("units", "Units of the file, mm or in.")] = None,
    teeth: Annotated[Text, _option("teeth", "Count of teeth.")] = None,
    module: Annotated[Text, _option("module", "Module in mm, or 16 DP.")] = None,
    starts: Annotated[Text, _option("starts", "Starts of the worm.")] = None,
    worm_diameter: Annotated[Text, _option("worm-diameter", "Reference diameter of the worm.")] = None,
    hand: Annotated[Text, _option("hand", "Hand of the worm, right or left.")] = None,
    holes: Annotated[Text, _option("holes", "Count of holes.")] = None,
    circle: Annotated[Text, _option("circle", "Diameter of the circle of holes.")] = None,
    hole: Annotated[Text, _option("hole", "Diameter of a hole.")] = None,
    bore: Annotated[Text, _option("bore", "Bore with its fit, as in '32 H6'.")] = None,
    outside: Annotated[Text, _option("outside", "Outside diameter.")] = None,
    width: Annotated[Text, _option("width", "Width, length or thickness.")] = None,
    join: Annotated[Text, _option("join", "How it is joined: shrink, slide, none.")] = None,
    torque: Annotated[Text, _option("torque", "Torque the joint must carry.")] = None,
    tightest: Annotated[Text, _option("tightest", "Limit of the tightest requirement.")] = None,
    yes: Annotated[bool, typer.Option("--yes", help="Ask nothing: options, and defaults for the rest.")] = False,
) -> None:
    """Write a first job file, commented, that reviews at once. Never replaces a file. Exit 0 once it is written.

    Asks on a terminal. Without one, or with --yes, options and defaults stand.

    Example: setupcheck new wheel.yaml --kind worm-wheel --teeth 72 --bore '32 H5' --yes
    """
    given = {
        "teeth": teeth, "module": module, "starts": starts, "worm-diameter": worm_diameter, "hand": hand, "holes": holes,
        "circle": circle, "hole": hole, "bore": bore, "outside": outside, "width": width, "join": join, "torque": torque,
        "tightest": tightest,
    }  # fmt: skip
    said = {name: text for name, text in given.items() if text is not None}
    if LIST in (like, kind):
        _list(like is not None)
        return
    if file is None:
        raise SetupcheckError("the name of the file is missing. Write it as in setupcheck new wheel.yaml")
    refuse_new(file)
    asking = _Asking(asks=not yes and sys.stdin.isatty())
    try:
        if like is not None:
            started = _like(asking, file, like, title, job, {**said, **({"kind": kind} if kind else {})}, units)
        else:
            started = _asked(asking, file, kind, title, job, units, said)
    except (EOFError, KeyboardInterrupt):
        raise SetupcheckError("\nended before the last question; nothing was written") from None
    from setupcheck.report.started import as_started

    write_new(file, started.text)
    sys.stdout.write(as_started(started.review, str(file), started.text))


class _Asking:
    """Asks where there is somebody to ask, else takes options and defaults."""

    def __init__(self, *, asks: bool) -> None:
        self.asks = asks

    def take(
        self, name: str, given: str | None, read: Callable[[str], Read], default: str, asks: str, explains: str
    ) -> tuple[str, Read]:
        """What was answered, and what it reads as. An option that cannot be ends the command; an answer is asked again."""
        if given is not None or not self.asks:
            text = default if given is None else given
            try:
                return text, read(text)
            except SetupcheckError as wrong:
                raise SetupcheckError(f"--{name}: {wrong}") from None
        from setupcheck.report.wording import wrap

        sys.stdout.write("\n".join(wrap(f"{asks}  ({explains})", rest="    ")) + "\n")
        while True:
            sys.stdout.write(f"  {name} [{default}]: ")
            sys.stdout.flush()
            line = sys.stdin.readline()
            if not line:
                raise EOFError
            text = line.strip() or default
            try:
                return text, read(text)
            except SetupcheckError as wrong:
                told = [line for part in str(wrong).splitlines() for line in wrap(part, first="  ", rest="  ")]
                sys.stdout.write("\n".join(told) + "\n")


def _list(examples: bool) -> None:
    from setupcheck.starting.copying import listed
    from setupcheck.starting.kinds import KINDS

    rows = listed() if examples else [(kind.name, kind.says) for kind in KINDS.values()]
    sys.stdout.write("".join(f"{name:<22}{says}\n" for name, says in rows))


def _title_and_job(asking: _Asking, title: str | None, job: str | None, usual: tuple[str, str]) -> tuple[str, str]:
    from setupcheck.starting.layout import checked_text

    def text(what: str) -> Callable[[str], str]:
        return lambda said: checked_text(said, what)

    _, head = asking.take("title", title, text("title"), usual[0], "What is it?", "title of the job, as on the drawing")
    _, number = asking.take("job", job, text("job number"), usual[1], "Job number?", "as it is filed in your shop")
    return head, number


def _like(
    asking: _Asking, file: Path, like: str, title: str | None, job: str | None, said: dict[str, str], units: str | None
) -> "Started":
    from setupcheck.starting.copying import copied, known_example, title_and_job

    name = known_example(like)
    extra = [*said, *(["units"] if units is not None else [])]
    if extra:
        raise SetupcheckError(
            f"--{extra[0]} does not go with --like: an example keeps its sizes. Change them in the file"
        )
    head, number = _title_and_job(asking, title, job, title_and_job(name))
    return copied(name, title=head, job=number, file=str(file), schema=_has_schema(file))


def _asked(
    asking: _Asking,
    file: Path,
    kind: str | None,
    title: str | None,
    job: str | None,
    units: str | None,
    said: dict[str, str],
) -> "Started":
    from setupcheck.starting.answers import Answers, read_answer, units_of
    from setupcheck.starting.kinds import KINDS, command_of, kind_of, start

    if asking.asks and kind is None:
        _list(examples=False)
    _, what = asking.take("kind", kind, kind_of, next(iter(KINDS)), "What kind of part?", "one of the above")
    _belongs(what, said)
    _, unit = asking.take(
        "units", units, units_of, "mm", "Which units?", "of sizes and positions in the file, mm or in"
    )
    head, number = _title_and_job(asking, title, job, (what.title, what.job))
    answers, texts = Answers(what.name, head, number, unit, {}), {}
    for question in what.questions():

        def read(text: str, question: "Question" = question, answers: "Answers" = answers) -> object:
            return read_answer(question, text, answers)

        text, value = asking.take(
            question.name, said.get(question.name), read, question.default(answers), question.asks, question.explains
        )
        texts[question.name] = text
        answers = answers.with_value(question.name, value)
    made_by = command_of(what, unit, texts)
    return start(answers, file=str(file), made_by=made_by, schema=_has_schema(file))


def _belongs(kind: "Kind", said: dict[str, str]) -> None:
    names = [question.name for question in kind.questions()]
    for name in said:
        if name not in names:
            raise SetupcheckError(
                f"--{name} does not belong to a {kind.name}. It takes {', '.join(f'--{one}' for one in names)}"
            )


def _has_schema(file: Path) -> bool:
    from setupcheck.starting.checking import SCHEMA

    return (file.parent / SCHEMA).is_file()
