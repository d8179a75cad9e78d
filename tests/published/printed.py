"""Comparison with a printed figure, to the digits that are printed."""

from __future__ import annotations

from typing import Any

import pytest

_FLOATING = 1e-9  # a value that lies half a unit away to the last bit still agrees


def printed(text: str, *, units: float = 0.5) -> Any:
    """Make a figure that a computed value agrees with if it would print the same.

    Parameters
    ----------
    text : str
        The figure as printed, trailing zeros included; a thousands comma is allowed.
    units : float
        Tolerance in units of the last printed digit. Half a unit is correct rounding; more
        needs a reason beside the assertion. [-]

    Returns
    -------
    pytest.approx
        For use on the right of ``==``.
    """
    plain = text.replace(",", "")
    _, _, decimals = plain.partition(".")
    unit = 10.0 ** -len(decimals)
    value = float(plain)
    return pytest.approx(value, abs=units * unit + _FLOATING * abs(value))
