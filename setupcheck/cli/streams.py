"""What a command prints into a file or a pipe is UTF-8 with plain line ends on every system, and no letter stops it."""

from __future__ import annotations

import io
import os
import sys


def settle() -> None:
    """Settle both streams before anything is printed.

    A system with an older code page would put that into a file, with its own line ends: JSON that no reader takes. A terminal
    keeps its code page, and so does whoever sets PYTHONIOENCODING; a letter it lacks is then shown as a question mark.
    """
    for stream in (sys.stdout, sys.stderr):
        if not isinstance(stream, io.TextIOWrapper):
            continue
        elsewhere = stream.encoding.lower().replace("_", "-") != "utf-8"
        if not elsewhere and os.name != "nt":
            continue
        if stream.isatty() or "PYTHONIOENCODING" in os.environ:
            stream.reconfigure(errors="replace")
        else:
            stream.reconfigure(encoding="utf-8", errors="replace", newline="\n")
