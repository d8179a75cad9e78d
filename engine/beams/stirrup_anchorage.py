"""Anchorage of stirrups by their hooks, ACI 318, 25.7.1.3."""

from __future__ import annotations

import math

from catalogs import Bar
from engine.materials import Concrete

_LOW_YIELD = {"us": 40_000.0, "si": 280.0}  # [psi or MPa]
_COEFFICIENT = {"us": 0.014, "si": 0.17}


def embedment_of_hook(concrete: Concrete, bar: Bar, fyt: float) -> float:
    """Length that a stirrup needs between middepth and the outside of its hook.

    Parameters
    ----------
    concrete : Concrete
        Concrete of the web.
    bar : Bar
        Stirrup size.
    fyt : float
        Yield strength of the stirrups. [psi or MPa]

    Returns
    -------
    float
        Zero to No. 5 (16), and to No. 8 (25) with fyt up to 40 ksi (280 MPa), 25.7.1.3 (a);
        else 0.014 db fyt/(lambda sqrt(f'c)) (ACI 318M: 0.17), (b). [in or mm]
    """
    edition = concrete.edition
    if bar.diameter <= edition.small_bar or fyt <= _LOW_YIELD[edition.units]:
        return 0.0
    root = concrete.lightweight * math.sqrt(concrete.fc)
    return _COEFFICIENT[edition.units] * bar.diameter * fyt / root
