"""The sheet: everything of a job on paper, one page an operation. One HTML file, nothing in it runs or is fetched."""

from __future__ import annotations

import re
from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING

from setupcheck.report.sheet.checks import OUTSIDE
from setupcheck.report.sheet.inline import inline, style_sheet
from setupcheck.report.sheet.pages import sheet_of

if TYPE_CHECKING:
    from jinja2 import Template
    from markupsafe import Markup

    from setupcheck.flow import ReadBack, Review

BETWEEN_STEPS = re.compile(r"(?<=[\w\]][._])(?=[^\W\d])")
"""Behind a dot or underscore between two words of a path, and in no number."""


def as_sheet(found: Review, read: ReadBack | None = None) -> str:
    """The sheet of a reviewed job as HTML, ending in a newline.

    read  a division test read back, drawn beside the prediction
    """
    from markupsafe import Markup

    told = _template().render(sheet=sheet_of(found, read), outside=OUTSIDE, drawing_style=Markup(style_sheet()))
    return "\n".join(line for line in (line.rstrip() for line in told.splitlines()) if line) + "\n"


def _coded(text: str) -> Markup:
    """Text with what stands between backticks set as code."""
    from markupsafe import Markup

    told = (Markup("<code>{}</code>" if i % 2 else "{}").format(part) for i, part in enumerate(text.split("`")))
    return Markup("").join(told)


def _pathed(text: str) -> Markup:
    """Text whose paths may go on in the next line behind a dot or an underscore, never within a word."""
    from markupsafe import Markup

    return Markup("<wbr>").join(BETWEEN_STEPS.split(text))


@cache
def _template() -> Template:
    """Text of the job reaches the page through autoescape alone; drawings escape what they hold themselves."""
    from jinja2 import Environment, FileSystemLoader, StrictUndefined
    from markupsafe import Markup

    here = FileSystemLoader(Path(__file__).parent)
    made = Environment(loader=here, autoescape=True, undefined=StrictUndefined, trim_blocks=True, lstrip_blocks=True)
    made.filters["drawn"] = lambda drawing: Markup(inline(drawing))
    made.filters["coded"] = _coded
    made.filters["pathed"] = _pathed
    return made.get_template("sheet.html")
