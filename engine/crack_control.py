"""Spacing of the bars nearest the tension face, 24.3, and of skin steel, 9.7.2.3."""

from __future__ import annotations

from typing import overload

import numpy as np

from engine.editions import Edition
from engine.outlines import FloatArray

WITHOUT_ANALYSIS = 2.0 / 3.0
"""Steel stress over fy that 24.3.2.1 permits in place of a calculation. [-]"""


@overload
def largest_spacing(edition: Edition, fs: float, cc: float) -> float: ...
@overload
def largest_spacing(edition: Edition, fs: FloatArray, cc: float) -> FloatArray: ...
def largest_spacing(edition: Edition, fs: float | FloatArray, cc: float) -> float | FloatArray:
    """Largest centre-to-centre spacing of Table 24.3.2.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    fs : float or ndarray
        Steel stress at service loads. [psi or MPa]
    cc : float
        Least distance from the surface of the bars to the tension face. [in or mm]

    Returns
    -------
    float or ndarray
        Lesser of 15 (40000/fs) - 2.5 cc and 12 (40000/fs) [in]; of 380 (280/fs) - 2.5 cc and
        300 (280/fs) [mm] in ACI 318M.
    """
    ratio = edition.crack_reference / fs
    spacing = np.minimum(edition.crack_base * ratio - 2.5 * cc, edition.crack_cap * ratio)
    return float(spacing) if np.ndim(spacing) == 0 else spacing
