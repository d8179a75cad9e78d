"""Search, ranking and reports of reinforcing-bar layouts for concrete beam sections."""

from optimizer._origin import stop_if_foreign

stop_if_foreign()

from optimizer.errors import DefectError, JobError, OptimizerError, OutputError
from optimizer.job import Job, parse_job, read_job
from optimizer.results import (
    CheckedSection,
    CheckResult,
    RankedSection,
    RankResult,
    RatedLayout,
    check,
    rank,
)

__all__ = [
    "CheckResult",
    "CheckedSection",
    "DefectError",
    "Job",
    "JobError",
    "OptimizerError",
    "OutputError",
    "RankResult",
    "RankedSection",
    "RatedLayout",
    "check",
    "parse_job",
    "rank",
    "read_job",
]
