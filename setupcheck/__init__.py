"""setupcheck: does the route, as planned, leave the teeth where the bore needs them?

from setupcheck import load_job, review
result = review(load_job("job.yaml"))
result.verdict, result.evaluation.findings
"""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from setupcheck.errors import JobError, RuleBookError, SetupcheckError
    from setupcheck.flow import Review, load_job, review

__version__ = "0.1.0"
__all__ = ["JobError", "Review", "RuleBookError", "SetupcheckError", "__version__", "load_job", "review"]


def __getattr__(name: str) -> object:
    """What stands behind the facade is imported when it is asked for, so that the command's help starts at once."""
    if name in ("JobError", "RuleBookError", "SetupcheckError"):
        from setupcheck import errors

        return getattr(errors, name)
    if name in ("Review", "load_job", "review"):
        from setupcheck import flow

        return getattr(flow, name)
    raise AttributeError(f"module 'setupcheck' has no attribute '{name}'")
