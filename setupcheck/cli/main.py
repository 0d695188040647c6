"""The command `setupcheck`: one file a command, errors caught once, here."""

from __future__ import annotations

import errno
import gc
import os
import sys
from typing import NoReturn

# One thread is enough for the small matrices here, and starting more would cost more than the whole review.
os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
# A command lives for a fraction of a second: looking for cycles while everything is being imported only delays it.
gc.set_threshold(200_000)

from setupcheck.cli import plugins  # noqa: E402

plugins.leave_out()

import typer  # noqa: E402

from setupcheck.cli import (  # noqa: E402
    contact,
    index,
    insert,
    new,
    readings,
    record,
    remedy,
    review,
    rules,
    schema,
    sheet,
    streams,
    vary,
    working,
)
from setupcheck.cli.telling import tell  # noqa: E402
from setupcheck.errors import SetupcheckError  # noqa: E402

NO_ROOM = (errno.ENOSPC, errno.EFBIG, getattr(errno, "EDQUOT", errno.ENOSPC), errno.EIO)
"""What the system says of an output that cannot be written where it goes."""

app = typer.Typer(
    name="setupcheck",
    rich_markup_mode=None,
    no_args_is_help=True,
    add_completion=True,
    pretty_exceptions_enable=False,
    help="Check the setups of one precise part before the first chip: what every holding adds, and whether it is too much.",
    epilog="Exit: 0 pass, 1 warn or open, 2 wrong use or unreadable job, 3 fail; of many jobs the highest, 130 after Ctrl-C.",
)
app.command("review")(review.command)
app.command("new", cls=new.Command)(new.command)
app.command("working")(working.command)
app.command("contact")(contact.command)
app.command("insert")(insert.command)
app.command("index")(index.command)
app.command("record")(record.command)
app.command("readings")(readings.command)
app.command("vary")(vary.command)
app.command("remedy")(remedy.command)
app.command("rules")(rules.command)
app.command("sheet")(sheet.command)
app.command("schema")(schema.command)
if "_SETUPCHECK_COMPLETE" in os.environ:  # a shell asks at the TAB key; no other start pays for it
    from setupcheck.cli import completing

    completing.attach(app)


@app.callback(invoke_without_command=True)
def options(version: bool = typer.Option(False, "--version", help="Print the version and stop.")) -> None:
    if version:
        from setupcheck import __version__

        typer.echo(f"setupcheck {__version__}")
        raise typer.Exit()


def run() -> None:
    """Run the command inside a process that goes on, or that wants to end in the usual way."""
    streams.settle()
    try:
        app()
    except SetupcheckError as wrong:
        tell(wrong)
        sys.exit(2)
    except BrokenPipeError:
        sys.stderr.close()
        sys.exit(1)
    except OSError as why:
        if why.errno not in NO_ROOM:
            raise
        sys.exit(_no_room(why))


def _no_room(why: OSError) -> int:
    """Says that what was to be printed found no room (a full disk behind `>`)."""
    print(f"the output cannot be written: {why.strerror}. Make room, or write it elsewhere", file=sys.stderr)
    return 2


# Python keeps its frames in chunks of 16 kB and hands one back as soon as it is empty: a loop that happens to call across
# the end of a chunk asks the system for memory at every pass, up to 4000 times in one review. A frame that says it needs
# more gets a larger chunk, and every call below it has room there. No memory is touched before it is used.
run.__code__ = run.__code__.replace(co_stacksize=16_000)


def run_and_leave() -> NoReturn:
    """Entry point of the console script: the process ends with its last line.

    Python would take down half a million objects first, one by one, and nothing here waits for that: no file is open, no
    thread runs. A profiler, which writes when Python ends, starts `run` instead.
    """
    code: object = 0
    try:
        run()
    except SystemExit as end:
        code = end.code
    if code is not None and not isinstance(code, int):
        raise SystemExit(code)
    for stream in (sys.stdout, sys.stderr):
        try:
            if stream is not None and not stream.closed:
                stream.flush()
        except BrokenPipeError:  # whoever read it has gone
            code = code or 1
        except OSError as why:
            if why.errno not in NO_ROOM:
                raise
            code = _no_room(why)
    os._exit(code or 0)
