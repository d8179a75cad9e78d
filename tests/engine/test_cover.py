"""Specified cover of beams: Table 20.6.1.3.1 (2014), 20.5.1.3.1 (2019)."""

from __future__ import annotations

import pytest

from engine import Exposure, edition
from engine.cover import required_cover
from tests.engine.builders import CODES, INCH, METRIC


@pytest.mark.parametrize("code", CODES[:2])
@pytest.mark.parametrize(
    ("exposure", "size", "cover"),
    [
        (Exposure.INTERIOR, "#3", 1.5),
        (Exposure.INTERIOR, "#18", 1.5),
        (Exposure.WEATHER, "#5", 1.5),
        (Exposure.WEATHER, "#6", 2.0),
        (Exposure.WEATHER, "#18", 2.0),
        (Exposure.GROUND, "#3", 3.0),
        (Exposure.GROUND, "#11", 3.0),
    ],
)
def test_cover_in_inches(code: str, exposure: Exposure, size: str, cover: float) -> None:
    """Every row, and both sides of #5/#6."""
    assert required_cover(edition(code), exposure, INCH.bar(size).diameter) == cover


@pytest.mark.parametrize("code", CODES[2:])
@pytest.mark.parametrize(
    ("exposure", "size", "cover"),
    [
        (Exposure.INTERIOR, "57", 40.0),
        (Exposure.WEATHER, "16", 40.0),
        (Exposure.WEATHER, "19", 50.0),
        (Exposure.GROUND, "10", 75.0),
    ],
)
def test_cover_in_millimetres(code: str, exposure: Exposure, size: str, cover: float) -> None:
    """Every row, and both sides of No. 16/19."""
    assert required_cover(edition(code), exposure, METRIC.bar(size).diameter) == cover


def test_exposures_in_words() -> None:
    """Job files name the rows by one word, notes spell them out."""
    assert [exposure.value for exposure in Exposure] == ["interior", "weather", "ground"]
    assert Exposure.INTERIOR.meaning == "not exposed to weather or in contact with ground"
    assert Exposure.WEATHER.meaning == "exposed to weather or in contact with ground"
    assert Exposure.GROUND.meaning == "cast against and permanently in contact with ground"
