"""What an option changes against the drawn layout, as the page's templates take it."""

from __future__ import annotations

from dataclasses import dataclass

from optimizer.changes import Difference
from optimizer.documents.wording import Figures, visible
from optimizer.measures import BANDS, Band, Measures

_SYMBOLS = {"phi Mn": "φ M_{n}", "reserve over Mu": "reserve over M_{u}"}
_DECIMALS = {"moment": 1, "money": 2, "carbon": 2, "mass_per_length": 2, "percent": 1, "count": 0}
_NAUGHT = 1e-9  # of the drawn figure: what differs by less is the same sum added otherwise


@dataclass(frozen=True, slots=True, kw_only=True)
class DifferenceLine:
    """One figure drawn and of an option, as text; `name` may hold ``_{...}``."""

    name: str
    unit: str
    drawn: str
    option: str
    change: str
    percent: str


@dataclass(frozen=True, slots=True, kw_only=True)
class BandLine:
    """Money or carbon with low, typical and high factors; `name` says whose it is."""

    name: str
    unit: str
    values: list[str]


def difference_lines(
    differences: tuple[Difference, ...], figures: Figures, currency: str
) -> list[DifferenceLine]:
    """Write the figures of an option beside the drawn ones.

    Parameters
    ----------
    differences : tuple of Difference
        Rows of the option.
    figures : Figures
        Units.
    currency : str
        Currency of the prices; empty without prices.

    Returns
    -------
    list of DifferenceLine
        Rows with a figure on one side at least.
    """
    return [
        DifferenceLine(
            name=_SYMBOLS.get(row.name, row.name),
            unit=unit_of(row.kind, figures, currency),
            drawn=_figure(row.drawn, row.kind, figures),
            option=_figure(row.option, row.kind, figures),
            change=_change(row, figures),
            percent=_percent(row),
        )
        for row in differences
        if row.drawn is not None or row.option is not None
    ]


def band_lines(
    drawn: Measures, option: Measures, figures: Figures, currency: str
) -> list[BandLine]:
    """Write cost and carbon with the range that their uncertain factors give.

    Parameters
    ----------
    drawn, option : Measures
        Figures of both layouts.
    figures : Figures
        Units.
    currency : str
        Currency of the prices.

    Returns
    -------
    list of BandLine
        Drawn, option and change of each; empty without prices.
    """
    lines = []
    for kind, name, one, other in (
        ("money", "placed cost", drawn.cost, option.cost),
        ("carbon", "carbon", drawn.carbon, option.carbon),
    ):
        if one is None or other is None:
            continue
        unit = unit_of(kind, figures, currency)
        for who, band in (("drawn", one), ("option", other)):
            values = [f"{getattr(band, factor):.2f}" for factor in BANDS]
            lines.append(BandLine(name=f"{name}, {who}", unit=unit, values=values))
        changes = [_signed(getattr(other, factor) - getattr(one, factor), 2) for factor in BANDS]
        lines.append(BandLine(name=f"{name}, change", unit=unit, values=changes))
    return lines


def unit_of(kind: str, figures: Figures, currency: str) -> str:
    """Unit of a figure.

    Parameters
    ----------
    kind : str
        Kind of a `Difference`.
    figures : Figures
        Units.
    currency : str
        Currency of the prices.

    Returns
    -------
    str
        As the page writes it; empty for numbers of things.
    """
    per = "ft" if figures.system.name == "us" else "m"
    if kind == "money":
        return f"{visible(currency)}/{per}"
    if kind == "carbon":
        return f"kgCO₂e/{per}"
    return "%" if kind == "percent" else figures.unit(kind)


def range_of(band: Band, decimals: int) -> str:
    """Write the ends of a band.

    Parameters
    ----------
    band : Band
        Money or carbon.
    decimals : int
        Digits after the point.

    Returns
    -------
    str
        Low and high end with a dash between.
    """
    return f"{band.low:.{decimals}f}–{band.high:.{decimals}f}"


def _figure(value: float | None, kind: str, figures: Figures) -> str:
    if value is None:
        return "none"
    if kind not in _DECIMALS:
        return figures.bare(kind, value)
    return f"{figures.system.to_trade(kind, value):.{_DECIMALS[kind]}f}".replace("-", "−")


def _same(row: Difference) -> bool:
    return row.change is not None and abs(row.change) <= _NAUGHT * abs(row.drawn or 1.0)


def _change(row: Difference, figures: Figures) -> str:
    """Change with the decimals of the finer of both figures; a dash where nothing changes."""
    if row.change is None:
        return ""
    if _same(row):
        return "–"
    texts = (_figure(value, row.kind, figures) for value in (row.drawn, row.option))
    decimals = max(len(text.partition(".")[2]) for text in texts)
    return _signed(figures.system.to_trade(row.kind, row.change), decimals)


def _percent(row: Difference) -> str:
    if row.percent is None or _same(row):
        return ""
    return f"{_signed(row.percent, 1)} %"


def _signed(value: float, decimals: int) -> str:
    return f"{value:+.{decimals}f}".replace("-", "−")
