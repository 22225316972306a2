"""The verbs of flatprep for Python callers: the only place that joins the other packages.

A verb is imported when it is first asked for: checking drawings does not pay for the nesting search.
"""

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from flatprep.api.book import BookAsk, book
    from flatprep.api.lint import lint_job, lint_paths
    from flatprep.api.nest import Nested, nest_job
    from flatprep.api.pieces import ReadJob, read_job
    from flatprep.api.prepare import Prepared, prepare_job, write_prepared
    from flatprep.api.sheets import write_layout
    from flatprep.api.stored import stored_layout
    from flatprep.api.work import checklist_job, estimate_job
    from flatprep.job.load import JobOptions, load_job
    from flatprep.nest.problem import Budget
    from flatprep.practice.lookup import lookup

_HOME = {
    "BookAsk": "flatprep.api.book",
    "Budget": "flatprep.nest.problem",
    "JobOptions": "flatprep.job.load",
    "Nested": "flatprep.api.nest",
    "Prepared": "flatprep.api.prepare",
    "ReadJob": "flatprep.api.pieces",
    "book": "flatprep.api.book",
    "checklist_job": "flatprep.api.work",
    "estimate_job": "flatprep.api.work",
    "lint_job": "flatprep.api.lint",
    "lint_paths": "flatprep.api.lint",
    "load_job": "flatprep.job.load",
    "lookup": "flatprep.practice.lookup",
    "nest_job": "flatprep.api.nest",
    "prepare_job": "flatprep.api.prepare",
    "read_job": "flatprep.api.pieces",
    "stored_layout": "flatprep.api.stored",
    "write_layout": "flatprep.api.sheets",
    "write_prepared": "flatprep.api.prepare",
}

__all__ = [  # noqa: RUF022 - in the order of use
    "load_job",
    "JobOptions",
    "lint_paths",
    "lint_job",
    "read_job",
    "ReadJob",
    "Budget",
    "nest_job",
    "Nested",
    "write_layout",
    "stored_layout",
    "BookAsk",
    "book",
    "checklist_job",
    "estimate_job",
    "prepare_job",
    "Prepared",
    "write_prepared",
    "lookup",
]


def __getattr__(name: str) -> object:
    """Import a verb from its home."""
    if name not in _HOME:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    return getattr(import_module(_HOME[name]), name)


def __dir__() -> list[str]:
    """Name the verbs."""
    return sorted(__all__)
