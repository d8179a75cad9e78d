"""Mass, labour, cost and carbon of a layout against sums made by hand.

Bars by ASTM A615/A615M Table 1: mass 1.043 lb/ft (#5), 2.044 (#7), 2.670 (#8), 5.313 (#11);
1.552 kg/m (16), 3.973 (25). Fixing labour relative to bars from 23 mm: 1.67 below 15 mm, 1.17 to
23 mm, from hours of 50, 35 and 30 h/t (a quantity surveyors' table, Malaysia 2024). A short ton is
2000 lb, a pound 0.45359237 kg, a foot 0.3048 m (exact, NIST SP 811). Prices are round and made up.
"""

from __future__ import annotations

from typing import Any

import pytest

from catalogs import BANDS, CatalogError, PriceList, Spread
from engine import Concrete, Flange, Layout, Outline, Section, Steel, edition
from optimizer.measures import Band, Measures, measure, per_bar_aims, section_aims
from tests.engine.builders import METRIC, inch_bar, si_layout, si_section, us_layout, us_section

EXACT = 1e-12  # relative: the same few products, added in another order
KG_PER_LB = 0.45359237
T_BEAM = Outline(web=14.0, depth=24.0, top=Flange(width=60.0, thickness=5.0))
US_PRICES: dict[str, Any] = {
    "name": "by hand",
    "currency": "USD",
    "system": "us",
    "invented": True,
    "steel": {("*", "*"): 0.80, ("A615-80", "*"): 0.90, ("*", "#5"): 0.85},
    "labour_rate": 60.0,
    "fixing_hours": Spread(low=10.0, typical=20.0, high=50.0, source="by hand"),
    "concrete_price": 189.0,
    "formwork_price": 12.0,
    "steel_carbon": Spread(low=700.0, typical=800.0, high=1000.0, source="by hand"),
    "concrete_carbon": Spread(low=250.0, typical=300.0, high=400.0, source="by hand"),
}
SI_PRICES: dict[str, Any] = {
    **US_PRICES,
    "system": "si",
    "steel": {("*", "*"): 1.50, ("*", "16"): 1.60, ("A615-80", "25"): 1.75},
    "labour_rate": 50.0,
    "concrete_price": 200.0,
    "formwork_price": 100.0,
}


def _us(**changes: Any) -> PriceList:
    return PriceList(**(US_PRICES | changes))


def _si(**changes: Any) -> PriceList:
    return PriceList(**(SI_PRICES | changes))


def _graded(name: str, fy: float, code: str = "ACI 318-19") -> Steel:
    return Steel(edition=edition(code), fy=fy, name=name)


def _bands(band: Band | None) -> tuple[float, float, float]:
    assert band is not None
    return band.low, band.typical, band.high


# ---------------------------------------------------------------- without prices


def test_plain_figures() -> None:
    """3 #8 + 2 #5 below 2 #8: 5 * 2.670 + 2 * 1.043 lb/ft, the small bars 1.17 as laborious."""
    found = measure(us_section(), us_layout("3 #8 + 2 #5", "2 #8"), None)
    assert found.mass == pytest.approx(13.35 + 2.086, rel=EXACT)
    assert found.labour == pytest.approx(13.35 + 1.17 * 2.086, rel=EXACT)
    assert (found.bars, found.sizes, found.layers) == (7, 2, 2)
    assert found.concrete == 14.0 * 24.0
    assert (found.cost, found.carbon) == (None, None)


def test_plain_figures_si() -> None:
    """4 No. 25 + 2 No. 13: 4 * 3.973 + 2 * 0.994 kg/m, the thin bars 1.67 as laborious."""
    found = measure(si_section(), si_layout("4 25 + 2 13"), None)
    assert found.mass == pytest.approx(15.892 + 1.988, rel=EXACT)
    assert found.labour == pytest.approx(15.892 + 1.67 * 1.988, rel=EXACT)
    assert (found.bars, found.sizes, found.layers) == (6, 2, 1)
    assert found.concrete == 350.0 * 600.0


def test_concrete_of_a_t_beam_is_gross() -> None:
    """60 x 5 + 14 x 19 in, nothing taken off for bars."""
    assert measure(us_section(outline=T_BEAM), us_layout("4 #8"), None).concrete == 566.0


# ---------------------------------------------------------------- with prices

# Bars of 4 #8 / 2 #7 in lb/ft: 10.680 and 4.088. Hours a pound: hours / 2000 lb, times 1.17 for
# the #7, at 60 USD: low 0.30, typical 0.60, high 1.50 USD/lb for the #8.
_US_STEEL = {
    "low": 10.68 * (0.80 + 0.30) + 4.088 * (0.80 + 1.17 * 0.30),
    "typical": 10.68 * (0.80 + 0.60) + 4.088 * (0.80 + 1.17 * 0.60),
    "high": 10.68 * (0.80 + 1.50) + 4.088 * (0.80 + 1.17 * 1.50),
}


def test_cost_of_a_rectangle() -> None:
    """336 in2 are 336/3888 yd3 a foot: 16.33 USD; 14 + 48 in of formwork a foot: 62 USD."""
    cost = measure(us_section(), us_layout("4 #8", "2 #7"), _us()).cost
    rest = 336.0 / 3888.0 * 189.0 + 62.0 / 12.0 * 12.0
    assert rest == pytest.approx(78.333333, abs=5e-7)
    assert _bands(cost) == pytest.approx([rest + _US_STEEL[band] for band in BANDS], rel=EXACT)


def test_cost_of_a_t_beam() -> None:
    """566 in2 of concrete; soffit of 14 in and sides of 19 in below the slab: 52 in a foot."""
    cost = measure(us_section(outline=T_BEAM), us_layout("4 #8", "2 #7"), _us()).cost
    rest = 566.0 / 3888.0 * 189.0 + 52.0 / 12.0 * 12.0
    assert _bands(cost) == pytest.approx([rest + _US_STEEL[band] for band in BANDS], rel=EXACT)


def test_carbon() -> None:
    """336 in2 are 336/144 ft2 of 0.3048^3 m3 a foot; bars of 14.768 lb/ft are 6.699 kg/ft."""
    carbon = measure(us_section(), us_layout("4 #8", "2 #7"), _us()).carbon
    volume = 336.0 / 144.0 * 0.028316846592
    kilograms = 14.768 * KG_PER_LB
    assert _bands(carbon) == pytest.approx(
        [
            volume * 250.0 + kilograms * 0.700,
            volume * 300.0 + kilograms * 0.800,
            volume * 400.0 + kilograms * 1.000,
        ],
        rel=EXACT,
    )
    # By another way, the whole in metres: 0.21677 m2, a foot of it, and 6.699 kg.
    assert carbon is not None
    assert carbon.typical == pytest.approx(0.0254**2 * 336.0 * 0.3048 * 300.0 + 5.359, abs=5e-4)


def test_cost_and_carbon_si() -> None:
    """0.21 m3 of concrete, 1.55 m2 of formwork; 3 No. 25 and 2 No. 16, 11.919 and 3.104 kg/m."""
    found = measure(si_section(), si_layout("3 25 + 2 16"), _si())
    rest = 0.21 * 200.0 + 1.55 * 100.0
    expected = [
        rest + 11.919 * (1.50 + 0.05 * hours) + 3.104 * (1.60 + 1.17 * 0.05 * hours)
        for hours in (10.0, 20.0, 50.0)
    ]
    assert _bands(found.cost) == pytest.approx(expected, rel=EXACT)
    mass = 15.023 / 1000.0
    factors = ((250.0, 700.0), (300.0, 800.0), (400.0, 1000.0))
    expected = [0.21 * concrete + mass * steel for concrete, steel in factors]
    assert _bands(found.carbon) == pytest.approx(expected, rel=EXACT)


def test_cost_of_an_si_t_beam() -> None:
    """1500 x 120 + 350 x 480 mm: 0.348 m3; formwork 350 + 2 * 480 mm: 1.31 m2."""
    outline = Outline(web=350.0, depth=600.0, top=Flange(width=1500.0, thickness=120.0))
    cost = measure(si_section(outline=outline), si_layout("2 25"), _si()).cost
    bars = [7.946 * (1.50 + 0.05 * hours) for hours in (10.0, 20.0, 50.0)]
    rest = 0.348 * 200.0 + 1.31 * 100.0
    assert _bands(cost) == pytest.approx([rest + steel for steel in bars], rel=EXACT)


def test_the_price_of_grade_and_size_is_taken() -> None:
    """Grade, then size: 0.90 for #8 of A615-80, 0.85 for #5 of A615-60, 0.80 for its #8."""
    no_rest = _us(labour_rate=0.0, concrete_price=0.0, formwork_price=0.0)
    dear = us_section(steel=_graded("A615-80", 80_000.0))
    usual = us_section(steel=_graded("A615-60", 60_000.0))
    bare = us_section()
    assert bare.steel.name == ""
    for section, layout, expected in (
        (dear, us_layout("2 #8"), 5.340 * 0.90),
        (dear, us_layout("2 #5"), 2.086 * 0.90),
        (usual, us_layout("2 #8"), 5.340 * 0.80),
        (usual, us_layout("2 #5"), 2.086 * 0.85),
        (bare, us_layout("2 #8"), 5.340 * 0.80),
    ):
        cost = measure(section, layout, no_rest).cost
        assert _bands(cost) == pytest.approx([expected] * 3, rel=EXACT)


def test_metric_names_of_grades_have_the_same_price() -> None:
    """A615-550 is the metric name of A615-80: the price of its No. 25 is 1.75."""
    no_rest = _si(labour_rate=0.0, concrete_price=0.0, formwork_price=0.0)
    section = si_section(steel=_graded("A615-550", 550.0, "ACI 318M-19"))
    cost = measure(section, si_layout("2 25"), no_rest).cost
    assert _bands(cost) == pytest.approx([7.946 * 1.75] * 3, rel=EXACT)


@pytest.mark.parametrize("units", ["us", "si"])
def test_bands_are_in_order(units: str) -> None:
    """Low is at most typical, typical at most high; equal where the factors are."""
    section: Section = us_section() if units == "us" else si_section()
    layout: Layout = us_layout("4 #8") if units == "us" else si_layout("4 25")
    made = _us if units == "us" else _si
    found = measure(section, layout, made())
    for band in (found.cost, found.carbon):
        low, typical, high = _bands(band)
        assert low < typical < high
    flat = Spread(low=20.0, typical=20.0, high=20.0, source="by hand")
    sure = measure(section, layout, made(fixing_hours=flat))
    low, typical, high = _bands(sure.cost)
    assert low == typical == high
    assert sure.carbon == found.carbon


# ---------------------------------------------------------------- aims of the trade-off


def _sum(section: Section, layout: Layout, prices: PriceList | None) -> list[float]:
    """Aims of a layout as the trade-off adds them up."""
    per_bar = per_bar_aims(section, prices)
    values = list(section_aims(section, prices, envelope=False))
    for layer in layout.layers:
        for bar, count in layer.groups:
            values = [total + count * one for total, one in zip(values, per_bar(bar), strict=True)]
    return values


def _typical(found: Measures) -> list[float]:
    plain = [found.mass, float(found.bars), found.labour]
    if found.cost is None or found.carbon is None:
        return plain
    return [*plain, found.cost.typical, found.carbon.typical]


@pytest.mark.parametrize("priced", [False, True])
def test_aims_add_up_to_the_measures(priced: bool) -> None:
    """What the trade-off minimises is what is shown, in both systems."""
    us, si = us_section(outline=T_BEAM), si_section(steel=_graded("A615-80", 550.0, "ACI 318M-19"))
    for section, layout, prices in (
        (us, us_layout("3 #11 + 2 #9", "3 #9"), _us() if priced else None),
        (si, si_layout("4 25", "2 22"), _si() if priced else None),
    ):
        found = measure(section, layout, prices)
        assert _sum(section, layout, prices) == pytest.approx(_typical(found), rel=EXACT)


def test_concrete_is_an_aim_only_where_the_outline_may_change() -> None:
    """Without prices the outline's area comes last; with them it is in cost and carbon."""
    section = us_section()
    assert section_aims(section, None, envelope=False) == (0.0, 0.0, 0.0)
    assert section_aims(section, None, envelope=True) == (0.0, 0.0, 0.0, 336.0)
    with_prices = section_aims(section, _us(), envelope=True)
    assert with_prices == section_aims(section, _us(), envelope=False)
    assert with_prices[3] == pytest.approx(78.333333, abs=5e-7)


def test_strong_concrete_costs_the_same() -> None:
    """One price and one factor for all concrete: the list knows no strengths."""
    weak, strong = us_section(), us_section(fc=8000.0)
    assert weak.concrete == Concrete(edition=edition("ACI 318-19"), fc=4000.0)
    assert section_aims(weak, _us(), envelope=True) == section_aims(strong, _us(), envelope=True)


def test_bars_of_the_other_units_are_refused() -> None:
    """A price a pound is none for a metric bar."""
    with pytest.raises(CatalogError, match="system 'si'"):
        per_bar_aims(us_section(), _us())(METRIC.bar("25"))
    assert per_bar_aims(us_section(), _us())(inch_bar("#8"))[0] == 2.670
