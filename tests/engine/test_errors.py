"""The tree of the engine's errors."""

from __future__ import annotations

import pytest

from engine import (
    EngineError,
    LayoutError,
    OutOfRangeError,
    QuantityError,
    UnknownEditionError,
)


@pytest.mark.parametrize("kind", [LayoutError, OutOfRangeError, QuantityError, UnknownEditionError])
def test_one_except_catches_all(kind: type[EngineError]) -> None:
    """Every error is an EngineError, and that a ValueError."""
    message = "what, which, allowed"
    with pytest.raises(EngineError, match=r"^what, which, allowed$"):
        raise kind(message)
    assert issubclass(kind, ValueError)


def test_out_of_range_names_its_parameter() -> None:
    """A caller can point at the key of its file."""
    assert OutOfRangeError("got 4 psi", what="fc").what == "fc"
    assert OutOfRangeError("got 4 psi").what == ""
