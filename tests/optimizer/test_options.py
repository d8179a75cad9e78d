"""Options against a drawn layout: what is chosen and why, what is said of the drawn one."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from itertools import pairwise

import pytest

from engine import CheckedLayout, check_layout
from optimizer import options as options_module
from optimizer import parse_job
from optimizer.errors import DefectError, JobError
from optimizer.job import Job
from optimizer.options import Option, OptionsResult, SectionOptions, options
from tests.optimizer.jobs import Keys, job_text

ALL_REASONS = {
    "lightest",
    "fewest bars",
    "most practical",
    "least labour",
    "one size",
    "one layer",
    "roomiest gaps",
}
DRAWN = {"us": '["4 #8", "2 #8"]', "si": '["4 25", "2 25"]'}


def _job(units: str = "us", given: Keys | None = None, **groups: Keys) -> Job:
    section = {"layers": DRAWN[units]} | dict(groups.get("section", {}))
    text = job_text(units, **{**groups, "section": section})
    lines = [f"{key} = {value}" for key, value in (given or {}).items()]
    return parse_job("\n".join([text, "[options]", *lines, ""]))


def _section(units: str = "us", given: Keys | None = None, **groups: Keys) -> SectionOptions:
    (section,) = options(_job(units, given, **groups)).sections
    return section


# Jobs of both systems and all editions, with few levers and many.
JOBS: dict[str, tuple[str, Keys, dict[str, Keys]]] = {
    "bars alone": ("us", {}, {}),
    "bars alone in SI": ("si", {}, {}),
    "narrow beam": ("us", {}, {"section": {"Mu": "220", "width": "12", "layers": '["4 #8"]'}}),
    "one size on the drawing": ("us", {"sizes": "false"}, {"section": {"Mu": "220"}}),
    "grades and stirrups": ("us", {"grades": '["A615-80"]', "stirrups": '["#3"]'}, {}),
    "prices": ("us", {"prices": '"demo"'}, {"section": {"Mu": "250"}}),
    "all levers": (
        "us",
        {
            "prices": '"demo"',
            "grades": '["A615-80", "A615-100"]',
            "stirrups": '["#3"]',
            "widths": "[12, 16]",
            "depths": "[22, 26]",
        },
        {},
    ),
    "all levers in SI, 318M-14": (
        "si",
        {
            "prices": '"demo"',
            "grades": '["A615-550"]',
            "stirrups": '["10"]',
            "widths": "[300]",
            "depths": "[650]",
        },
        {"head": {"code": '"ACI 318M-14"'}},
    ),
    "slab, hogging, bars opposite": (
        "us",
        {"prices": '"demo"', "widths": "[16]"},
        {
            "section": {
                "Mu": "-260",
                "slab": '{ thickness = "6 in", clear_left = 9, clear_right = 9, span = 27 }',
                "opposite": '["2 #6"]',
                "count_opposite": "true",
            }
        },
    ),
}


@pytest.fixture(params=JOBS, scope="module")
def found(request: pytest.FixtureRequest) -> SectionOptions:
    """Options of one of the jobs; frozen, so the tests share them."""
    units, given, groups = JOBS[request.param]
    return _section(units, given, **groups)


# ---------------------------------------------------------------- the set


def test_every_option_passes_and_is_numbered(found: SectionOptions) -> None:
    """The set is proved, in order of mass, and a check made afresh finds nothing against it."""
    assert found.proved
    assert [option.number for option in found.trade_off] == [*range(1, len(found.trade_off) + 1)]
    masses = [round(option.measures.mass, 6) for option in found.trade_off]
    assert masses == sorted(masses)
    for option in found.trade_off:
        afresh = check_layout(option.checked.section, option.checked.layout)
        assert afresh.ok
        assert afresh.phi_Mn >= afresh.section.demand
        assert option.rated.rank is None


def test_no_option_beats_another(found: SectionOptions) -> None:
    """Of two options none is at least as good in every figure and better in one."""

    def values(option: Option) -> list[float]:
        one = option.measures
        plain = [one.mass, one.bars, one.sizes, one.layers, one.labour]
        if one.cost is not None and one.carbon is not None:
            plain += [one.cost.typical, one.carbon.typical]
        return plain

    table = [values(option) for option in found.trade_off]
    for one in table:
        for other in table:
            worse = any(a > b * (1 + 1e-7) for a, b in zip(one, other, strict=True))
            better = any(a < b * (1 - 1e-7) for a, b in zip(one, other, strict=True))
            assert worse or not better


def test_the_drawn_layout_is_beaten_or_in_the_set(found: SectionOptions) -> None:
    """Drawn bars that pass and may be chosen are an option, or some option beats them."""
    one = found.drawn_measures
    assert found.drawn.checked.ok
    same = [
        option
        for option in found.trade_off
        if not option.levers and option.checked.layout == found.problem.drawn
    ]
    beaten = [
        option
        for option in found.trade_off
        if option.measures.mass <= one.mass
        and option.measures.bars <= one.bars
        and option.measures.labour <= one.labour
    ]
    assert same or beaten


def test_levers_of_an_option_are_what_differs(found: SectionOptions) -> None:
    """Each lever named is a real change, each change is named, and has to be agreed to."""
    drawn = found.problem.section
    for option in found.trade_off:
        section = option.checked.section
        different = {
            "steel": section.steel != drawn.steel,
            "stirrup": section.stirrup != drawn.stirrup,
            "width": section.outline.web != drawn.outline.web,
            "depth": section.outline.depth != drawn.outline.depth,
        }
        assert [key for key, _, _ in option.levers] == [key for key in different if different[key]]
        for key, before, after in option.levers:
            start = "grade" if key == "steel" else "web" if key == "width" else key
            (point,) = [text for text in option.accept if text.startswith(f"{start} ")]
            assert before in point
            assert after in point


def test_figures_of_an_option_are_its_own(found: SectionOptions) -> None:
    """The differences start from the drawn layout's figures and end at the option's."""
    for option in found.trade_off:
        rows = {row.name: row for row in option.differences}
        assert rows["steel mass"].drawn == found.drawn_measures.mass
        assert rows["steel mass"].option == option.measures.mass == option.checked.layout.mass
        assert rows["phi Mn"].drawn == found.drawn.checked.phi_Mn
        assert rows["phi Mn"].option == option.checked.phi_Mn
        assert rows["largest spacing, 24.3"].option == option.checked.largest_spacing
        assert ("placed cost" in rows) == (option.measures.cost is not None)


# ---------------------------------------------------------------- reasons


def _ratio(option: Option) -> float:
    """Least of gap over required gap, from the bars' positions."""
    ratios = []
    for layer in option.checked.placement.layers:
        bars = list(zip(layer.x, layer.diameters, strict=True))
        for (x1, d1), (x2, d2) in pairwise(bars):
            required = option.checked.section.required_gap(max(d1, d2))
            ratios.append((x2 - x1 - (d1 + d2) / 2) / required)
    return min(ratios)


def _typical(name: str) -> Callable[[Option], float]:
    def value(option: Option) -> float:
        band = getattr(option.measures, name)
        return float(band.typical)

    return value


BEST: dict[str, Callable[[Option], float]] = {
    "lightest": lambda option: option.measures.mass,
    "fewest bars": lambda option: option.measures.bars,
    "most practical": lambda option: option.rated.score.total,
    "least labour": lambda option: option.measures.labour,
    "one size": lambda option: option.rated.score.total if option.measures.sizes == 1 else math.inf,
    "one layer": lambda option: (
        option.rated.score.total if option.measures.layers == 1 else math.inf
    ),
    "roomiest gaps": lambda option: -_ratio(option),
    "cheapest": _typical("cost"),
    "lowest carbon": _typical("carbon"),
}


def test_reasons_are_right(found: SectionOptions) -> None:
    """Each reason belongs to one option, the best of the whole set at it."""
    priced = found.drawn_measures.cost is not None
    given = [reason for option in found.trade_off for reason in option.reasons]
    assert len(set(given)) == len(given)
    possible = ALL_REASONS | ({"cheapest", "lowest carbon"} if priced else set())
    for name in possible:
        value = BEST[name]
        least = min(value(option) for option in found.trade_off)
        holders = [option for option in found.trade_off if name in option.reasons]
        assert len(holders) == int(math.isfinite(least)), name
        for holder in holders:
            # Reasons compare figures of six decimals.
            assert value(holder) == pytest.approx(least, rel=0, abs=1e-6)
            equals = [one for one in found.trade_off if value(one) <= least + 1e-7]
            # Of equals the fewest levers, then the best score.
            fewest = min(len(one.levers) for one in equals)
            assert len(holder.levers) == fewest
            best = min(one.rated.score.total for one in equals if len(one.levers) == fewest)
            assert holder.rated.score.total == pytest.approx(best, rel=0, abs=1e-6)
    assert set(given) <= possible
    assert found.chosen == tuple(option for option in found.trade_off if option.reasons)
    assert found.chosen


def test_no_layout_of_one_layer_or_one_size() -> None:
    """Where every option has two layers, none is called best with one."""
    section = {"sizes": '["#8"]', "Mu": "280", "width": "12", "layers": '["4 #8", "2 #8"]'}
    found = _section("us", {}, section=section)
    assert {option.measures.layers for option in found.trade_off} == {2}
    assert not any("one layer" in option.reasons for option in found.trade_off)
    assert any("one size" in option.reasons for option in found.trade_off)


# ---------------------------------------------------------------- the drawn layout


@pytest.mark.parametrize(
    ("layers", "broken"),
    [
        ('["4 #8"]', {"flexural_strength"}),
        ('["2 #5"]', {"flexural_strength", "minimum_steel"}),
        ('["8 #8"]', {"clear_gap"}),
        ('["3 #14"]', {"net_tensile_strain"}),
    ],
)
def test_a_drawn_layout_that_fails_is_said_to(layers: str, broken: set[str]) -> None:
    """Its rows say which rule, the result is not well; options are found all the same."""
    result = options(_job("us", {}, section={"layers": layers}))
    (found,) = result.sections
    assert {row.id for row in found.drawn.checked.checks if not row.ok} >= broken
    assert not found.drawn.checked.ok
    assert found.trade_off
    assert not result.ok


@pytest.mark.parametrize("layers", ['["20 #11"]', '["40 #8 + 39 #7", "12 #8"]'])
def test_a_drawn_layout_whose_bars_overlap(layers: str) -> None:
    """A drawing with far too many bars in a layer fails its gaps, and has options."""
    (found,) = options(_job("us", {}, section={"layers": layers})).sections
    assert "clear_gap" in {row.id for row in found.drawn.checked.checks if not row.ok}
    assert found.trade_off


def test_a_drawn_layout_that_is_best_is_an_option_without_changes() -> None:
    """Drawn as the lightest layout: every difference is zero, nothing has to be agreed to."""
    lightest = min(_section().trade_off, key=lambda option: option.measures.mass)
    texts = [layer.label for layer in lightest.checked.layout.layers]
    found = _section("us", {}, section={"layers": str(texts)})
    (same,) = [o for o in found.trade_off if o.checked.layout == found.problem.drawn]
    assert "lightest" in same.reasons
    assert same.accept == ()
    assert {row.change for row in same.differences} == {0.0}


def test_neither_drawn_nor_any_other() -> None:
    """Nothing passes: no option, and the result is not well."""
    result = options(_job("us", {}, section={"Mu": "900"}))
    (found,) = result.sections
    assert (found.trade_off, found.chosen, found.proved) == ((), (), True)
    assert not result.ok


def test_drawn_passes_but_the_levers_leave_nothing() -> None:
    """The job allows #5 in one layer alone, too weak: there is no option, the drawing stands."""
    section = {"layers": '["4 #8"]', "Mu": "250", "sizes": '["#5"]', "max_layers": "1"}
    result = options(_job("us", {}, section=section))
    (found,) = result.sections
    assert found.drawn.checked.ok
    assert found.trade_off == ()
    assert result.ok


# ---------------------------------------------------------------- prices and bands


def test_without_prices_no_order_of_cost() -> None:
    """No cost, no carbon, nothing to survive."""
    found = _section()
    assert found.order_survives is None
    assert found.drawn_measures.cost is None
    assert all(option.measures.carbon is None for option in found.trade_off)


def _order(found: SectionOptions, band: str) -> list[int]:
    costs = [(round(getattr(o.measures.cost, band), 6), o.number) for o in found.trade_off]
    return [number for _, number in sorted(costs)]


@pytest.mark.parametrize(("Mu", "survives"), [("200", False), ("250", False), ("300", True)])
def test_order_with_low_and_high_factors(Mu: str, survives: bool) -> None:
    """Sorted by cost with low, typical and high fixing hours: the same order, or not."""
    found = _section("us", {"prices": '"demo"'}, section={"Mu": Mu})
    assert len(found.trade_off) > 2
    orders = {band: _order(found, band) for band in ("low", "typical", "high")}
    assert (orders["low"] == orders["typical"] == orders["high"]) is survives
    assert found.order_survives is survives


def test_order_survives_if_labour_is_free() -> None:
    """Fixing for nothing leaves one cost a layout, so every order is the same."""
    job = _job("us", {"prices": '"demo"'}, section={"Mu": "200"})
    assert job.prices is not None
    free = replace(job, prices=replace(job.prices, labour_rate=0.0))
    (found,) = options(free).sections
    assert found.order_survives is True
    for option in found.trade_off:
        cost = option.measures.cost
        assert cost is not None
        assert cost.low == cost.typical == cost.high


# ---------------------------------------------------------------- the whole job


def _two_sections(extra: str = "") -> str:
    """Text of a job whose second section is drawn and whose first is not."""
    text = job_text("us", section={"mark": '"not drawn"', "Mu": "200"})
    second = job_text("us", section={"mark": '"drawn"', "layers": DRAWN["us"]})
    return text + second[second.index("[[section]]") :] + f"[options]\n{extra}\n"


def test_only_drawn_sections_have_options() -> None:
    """A section without layers has no options, but is one of the palette."""
    told: list[tuple[int, int, str]] = []
    job = parse_job(_two_sections("palette = 2"))
    result = options(job, lambda done, of, mark: told.append((done, of, mark)))
    assert [item.problem.section.mark for item in result.sections] == ["drawn"]
    assert told == [(0, 1, "drawn")]
    assert result.palette is not None
    assert result.palette.marks == ("not drawn", "drawn")


def test_no_palette_unless_asked_for() -> None:
    """Without the key the whole job's sizes are not looked at."""
    assert options(parse_job(_two_sections())).palette is None


def test_no_section_drawn() -> None:
    """A job of `rank` alone is refused, with the key and an example."""
    with pytest.raises(JobError, match=r"layers: missing; .*layers = "):
        options(parse_job(job_text("us")))


def test_work_limit_is_told() -> None:
    """With next to no work the set is not called proved."""
    found = _section("us", {}, ranking={"work_limit": "1e-9"})
    assert not found.proved


def test_a_layout_that_the_check_refuses_is_a_defect(monkeypatch: pytest.MonkeyPatch) -> None:
    """Search and check have to agree; if not, nothing is shown."""
    job = _job()
    weak = _job("us", {}, section={"layers": '["2 #5"]'}).problems[0]
    assert weak.drawn is not None
    bad: CheckedLayout = check_layout(weak.section, weak.drawn)
    monkeypatch.setattr(options_module, "check_layouts", lambda _section, _layouts: [bad])
    with pytest.raises(DefectError, match=r"B1: search accepts .* refuses it: flexural_strength"):
        options(job)


def test_results_are_equal_on_a_second_run() -> None:
    """Nothing is carried over from run to run."""

    def run() -> OptionsResult:
        units, given, groups = JOBS["prices"]
        return options(_job(units, {**given, "palette": "2"}, **groups))

    first, second = run(), run()
    assert first.sections == second.sections
    assert first.palette == second.palette
