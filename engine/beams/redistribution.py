"""Redistribution of moments at supports, ACI 318, 6.6.5."""

from __future__ import annotations

LEAST_STRAIN = 0.0075
"""Net tensile strain from which moments may be redistributed, 6.6.5.1. [-]"""
LARGEST_SHARE = 0.20
"""Largest share by which a moment at a support may be changed, 6.6.5.3. [-]"""
_SHARE_PER_STRAIN = 10.0  # 1000 eps_t percent, 6.6.5.3 [-]


def strain_for_share(share: float) -> float:
    """Net tensile strain that the section where the moment is lowered has to reach.

    Parameters
    ----------
    share : float
        Share by which the moment is changed. [-]

    Returns
    -------
    float
        max(0.0075, share/10), 6.6.5.1 and 6.6.5.3. [-]
    """
    return max(LEAST_STRAIN, share / _SHARE_PER_STRAIN)
