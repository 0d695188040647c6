"""setupcheck: does the route, as planned, leave the teeth where the bore needs them?

From a job file to its verdict; `example` finds the jobs that come with the package:

>>> from setupcheck import as_records, example, load_job, review, vary
>>> job = load_job(example("rotator-worm-wheel"))
>>> found = review(job)
>>> found.verdict
'pass'
>>> [finding.rule for finding in found.evaluation.findings if finding.verdict == "fail"]
[]

Results are frozen records in mm and rad; a figure of a requirement stands under its own name:

>>> pitch = found.results["cumulative-pitch.wheel-teeth.spindle-bearings"]
>>> round(pitch.combined.worst.high * 1000.0, 1), round(pitch.stack.high * 1000.0, 1)
(35.6, 40.0)

What if an entry of the file were another, said by its path; the file stays as it is:

>>> tried = vary(found, {"setups.50.hold.centre.runout.measured": "9 um"})
>>> tried.before.verdict, tried.after.verdict
('pass', 'fail')

A whole drawer of jobs: one that cannot be read never stops the rest, and any `concurrent.futures.Executor` does the work:

>>> from setupcheck import review_many
>>> [one.verdict for one in review_many([example("index-plate"), "no-such-job.yaml"])]
['pass', 'unreadable']

`as_records` is what `setupcheck review --json` prints, as plain dicts and lists:

>>> records = as_records(found)
>>> records["format"], records["counts"]["fail"]
(1, 0)

Whatever is refused is a SetupcheckError, whose text says what is wrong and what would be right:

>>> import setupcheck
>>> try:
...     vary(job, {"setups.50.hold.centre.runout.measured": "9,5 um"})
... except setupcheck.SetupcheckError as wrong:
...     print(str(wrong).splitlines()[-1].split(": ", 1)[1])
'9,5 um' is not a length. Write a point for the decimal: 9.5 um
"""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from setupcheck.errors import JobError, Problem, RuleBookError, SetupcheckError
    from setupcheck.flow import ReadBack, Review, Varied, load_job, read_back, review, vary
    from setupcheck.jobfile.changing import Change
    from setupcheck.jobfile.reading import LoadedJob
    from setupcheck.many import Reviewed, review_many
    from setupcheck.quantities.gates import Gate
    from setupcheck.quantities.judged import Result
    from setupcheck.report.json import as_data as as_records
    from setupcheck.rulebook import Caution, Finding
    from setupcheck.shipped import example

__version__ = "0.1.0"
__all__ = [
    "Caution",
    "Change",
    "Finding",
    "Gate",
    "JobError",
    "LoadedJob",
    "Problem",
    "ReadBack",
    "Result",
    "Review",
    "Reviewed",
    "RuleBookError",
    "SetupcheckError",
    "Varied",
    "__version__",
    "as_records",
    "example",
    "load_job",
    "read_back",
    "review",
    "review_many",
    "vary",
]

_BEHIND = {
    "errors": ("JobError", "Problem", "RuleBookError", "SetupcheckError"),
    "flow": ("ReadBack", "Review", "Varied", "load_job", "read_back", "review", "vary"),
    "jobfile.changing": ("Change",),
    "jobfile.reading": ("LoadedJob",),
    "many": ("Reviewed", "review_many"),
    "quantities.gates": ("Gate",),
    "quantities.judged": ("Result",),
    "rulebook": ("Caution", "Finding"),
    "shipped": ("example",),
}
"""Module -> what of it stands behind the facade."""


def __getattr__(name: str) -> object:
    """What stands behind the facade is imported when it is asked for, so that the command's help starts at once."""
    from importlib import import_module

    if name == "as_records":
        from setupcheck.report.json import as_data

        return as_data
    for module, names in _BEHIND.items():
        if name in names:
            return getattr(import_module(f"setupcheck.{module}"), name)
    raise AttributeError(f"module 'setupcheck' has no attribute '{name}'")
