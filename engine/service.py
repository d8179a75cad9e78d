"""Service state of many layouts: steel stress and cracked inertia of the elastic section."""

from __future__ import annotations

import numpy as np

from engine.batch import Batch, Stacked, stacked_bars
from engine.crack_control import WITHOUT_ANALYSIS
from engine.cracked_section import CrackedSection, cracked_section
from engine.outlines import FloatArray
from engine.sections import Section


def service_stress(section: Section, batch: Batch) -> FloatArray:
    """Stress, at service, of the bars nearest the tension face, 24.3.2.1.

    Parameters
    ----------
    section : Section
        Section, with its service moment where that is known.
    batch : Batch
        Layouts at the section's tension face.

    Returns
    -------
    ndarray, shape (n,)
        From the elastic cracked section under Ms, at dt; or 2/3 fy without Ms. [psi or MPa]
    """
    if section.Ms is None:
        return np.full(len(batch.counts), WITHOUT_ANALYSIS * section.steel.fy)
    stacked = stacked_bars(section, batch)
    cracked = _cracked(section, stacked)
    n = section.steel.Es / section.concrete.Ec
    return n * abs(section.Ms) * (stacked.dt - cracked.x) / cracked.Icr


def cracked_inertia(section: Section, batch: Batch) -> FloatArray:
    """Second moment Icr of the cracked section of every layout.

    Parameters
    ----------
    section : Section
        Section with its compression face.
    batch : Batch
        Layouts at the section's tension face.

    Returns
    -------
    ndarray, shape (n,)
        Icr, opposite bars included where the section counts them. [in^4 or mm^4]
    """
    return _cracked(section, stacked_bars(section, batch)).Icr


def _cracked(section: Section, stacked: Stacked) -> CrackedSection:
    """Elastic cracked sections, steel transformed by n, and by n - 1 in compression."""
    n = section.steel.Es / section.concrete.Ec
    transformed = n * stacked.groups.area
    transformed[:, stacked.own :] *= (n - 1.0) / n
    return cracked_section(section.profile, transformed, stacked.groups.depth)
