"""Errors of the application.

::

    OptimizerError (Exception)
    ├── JobError (ValueError)        the job file cannot be used: the user's to mend, exit code 2
    ├── OutputError (OSError)        a result cannot be written where it was asked for, exit code 2
    └── DefectError (RuntimeError)   the program contradicts itself: ours to mend
"""

from __future__ import annotations


class OptimizerError(Exception):
    """Anything the application refuses or stumbles over."""


class JobError(OptimizerError, ValueError):
    """A job that cannot be used; the message names the key and what is allowed."""


class OutputError(OptimizerError, OSError):
    """A file that cannot be written."""


class DefectError(OptimizerError, RuntimeError):
    """Two parts of the program disagree: never the user's fault."""
