"""What stands above and below every new job file: where an editor finds the schema, and the cautions to answer."""

from __future__ import annotations

from collections.abc import Iterable

from setupcheck.rulebook import CautionLine

SCHEMA = "job.schema.json"


def modeline(*, schema: bool) -> str:
    """The line by which an editor finds the schema, if it lies beside the file; else how to make it."""
    if schema:
        return f"# yaml-language-server: $schema={SCHEMA}\n"
    return (
        f"# An editor can complete and check this file: write the schema beside it with `setupcheck schema -o {SCHEMA}`,\n"
        f"# and put this line on top:  # yaml-language-server: $schema={SCHEMA}\n"
    )


def to_check(cautions: Iterable[CautionLine]) -> str:
    """The stop-and-check cautions, as answers that are still comments: nobody but the planner answers them."""
    asked = dict.fromkeys((c.id, c.op) for c in cautions if c.severity == "stop-and-check" and not c.answered)
    if not asked:
        return ""
    lines = "".join(
        f"#   - {{caution: {name}{f', op: {op}' if op is not None else ''}, by: your initials, note: what was found}}\n"
        for name, op in asked
    )
    return (
        "\n# The review asks to stop and check these. Once one is done, take the # off its line and off `checked:`.\n"
        f"# checked:\n{lines}"
    )
