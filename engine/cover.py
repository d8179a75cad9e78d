"""Specified concrete cover of cast-in-place beams, by exposure."""

from __future__ import annotations

from enum import Enum

from engine.editions import Edition


class Exposure(Enum):
    """Rows of the cover table: 20.6.1.3.1 in ACI 318-14, 20.5.1.3.1 in ACI 318-19."""

    INTERIOR = "interior"
    WEATHER = "weather"
    GROUND = "ground"

    @property
    def meaning(self) -> str:
        """The row in plain words."""
        return {
            Exposure.INTERIOR: "not exposed to weather or in contact with ground",
            Exposure.WEATHER: "exposed to weather or in contact with ground",
            Exposure.GROUND: "cast against and permanently in contact with ground",
        }[self]


def required_cover(edition: Edition, exposure: Exposure, diameter: float) -> float:
    """Least clear cover of one bar.

    Parameters
    ----------
    edition : Edition
        Edition of the code.
    exposure : Exposure
        Exposure of the face.
    diameter : float
        Diameter of the bar or stirrup. [in or mm]

    Returns
    -------
    float
        Required cover, beam rows of the table. [in or mm]
    """
    if exposure is Exposure.GROUND:
        return edition.cover_ground
    if exposure is Exposure.INTERIOR:
        return edition.cover_interior
    if diameter <= edition.small_bar:
        return edition.cover_weather_small
    return edition.cover_weather_large
