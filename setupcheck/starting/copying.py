"""A shipped job copied as a start: its title and number replaced, its answers to cautions taken back."""

from __future__ import annotations

import re

from setupcheck.errors import SetupcheckError, printable
from setupcheck.notation import nearest
from setupcheck.shipped import examples, shipped
from setupcheck.starting.checking import modeline, to_check
from setupcheck.starting.kinds import Started
from setupcheck.starting.layout import quoted_text

_INVENTED = re.compile(
    r"Invented scenario(?:: every figure is made up to teach, none was measured on a real part|, made up to teach)[.:]? ?(\w?)"
)
_CHECKED = re.compile(r"\n# Cautions of the kind \"stop and check\"[^\n]*\nchecked:\n(?:  - [^\n]*\n?)+")
_SCHEMA = "# yaml-language-server: $schema=../rules/job.schema.json\n"


def listed() -> list[tuple[str, str]]:
    """(name, title) of every shipped job."""
    return [(name, _said(shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8"), "title")) for name in examples()]


def known_example(name: str) -> str:
    """The name of a shipped job, as it is.

    Raises: SetupcheckError with the nearest and a list.
    """
    name = name.strip().removesuffix(".yaml").rpartition("/")[2]
    if name in examples():
        return name
    near = nearest(name, examples())
    said = f"'{printable(name[:60])}' is no example here. {f'Did you mean {near}? ' if near else ''}There are:"
    raise SetupcheckError("\n".join([said, *(f"  {one:<22}{title}" for one, title in listed())]))


def title_and_job(name: str) -> tuple[str, str]:
    """Title and job number of a shipped job."""
    text = shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8")
    return _said(text, "title"), _said(text, "job")


def copied(name: str, *, title: str, job: str, file: str, schema: bool = False) -> Started:
    """The shipped job with another title and number; its comments stay, but for the one on where it comes from.

    Its answers to the stop-and-check cautions become comments: nobody has checked this job.
    """
    from setupcheck.flow import review
    from setupcheck.jobfile.reading import read_job_text

    text = shipped(f"jobs/{name}.yaml").read_text(encoding="utf-8").removeprefix(_SCHEMA)
    text = _INVENTED.sub(lambda found: found[1].upper(), text, count=1).replace("# \n", "", 1).replace(" \n", "\n")
    text = re.sub(r"^title: .*$", lambda _: f"title: {quoted_text(title)}", text, count=1, flags=re.M)
    text = re.sub(r"^job: .*$", lambda _: f"job: {quoted_text(job)}", text, count=1, flags=re.M)
    made_from = f"# Made from the example {name}: every figure in it is made up, none was measured. Replace them all.\n"
    text = modeline(schema=schema) + made_from + _CHECKED.sub("", text).rstrip("\n") + "\n"
    found = review(read_job_text(text, file))
    return Started(text + to_check(found.evaluation.cautions), found)  # comments below change no figure


def _said(text: str, key: str) -> str:
    found = re.search(rf"^{key}: (.*)$", text, re.M)
    return found[1].strip() if found is not None else ""
