"""Errors of the engine.

::

    EngineError (ValueError)
    ├── QuantityError      a text that is not the quantity it should be
    ├── OutOfRangeError    a value outside the range of the clause that uses it
    ├── LayoutError        a bar layout that cannot be read or cannot be placed
    └── UnknownEditionError  a design code edition that is not carried here
"""

from __future__ import annotations


class EngineError(ValueError):
    """Anything the engine refuses; the message says what, which value and what is allowed."""


class QuantityError(EngineError):
    """A text or number that cannot be read as the quantity it stands for."""


class OutOfRangeError(EngineError):
    """A value outside the range of validity of the clause that uses it.

    Parameters
    ----------
    message : str
        What, which value, what is allowed.
    what : str
        Name of the parameter at fault, so that a caller can point at it.
    """

    def __init__(self, message: str, *, what: str = "") -> None:
        super().__init__(f"{what}: {message}" if what else message)
        self.message = message
        self.what = what


class LayoutError(EngineError):
    """A bar layout that cannot be read or does not fit into its section at all."""


class UnknownEditionError(EngineError):
    """An edition of the design code that is not carried."""
