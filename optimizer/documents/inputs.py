"""What was asked, as the page repeats it: section, materials, bars allowed, ranking."""

from __future__ import annotations

from catalogs import PriceList
from engine import Flange, Section
from engine.units import plain
from optimizer.documents.wording import Figures, visible
from optimizer.levers import variants
from optimizer.problem import Problem, Ranking

Pair = tuple[str, str]


def section_inputs(section: Section) -> list[Pair]:
    """Demand, geometry and materials.

    Parameters
    ----------
    section : Section
        Section of the job.

    Returns
    -------
    list of (str, str)
        Name, which may hold ``_{...}``, and value.
    """
    figures = Figures(section.edition)
    concrete, steel = section.concrete, section.steel
    pairs = [("M_{u}", figures.moment(section.Mu, signed=True) + _bending(section))]
    if section.Ms is None:
        pairs.append(("M_{s}", "not given"))
    else:
        pairs.append(("M_{s}", figures.moment(section.Ms, signed=True)))
    pairs.append(("b_{w} × h", _product(section.outline.web, section.outline.depth, figures)))
    for name, flange in (("top", section.outline.top), ("bottom", section.outline.bottom)):
        if flange is not None:
            pairs.append((f"{name} flange", _flange(flange, section, figures)))
    pairs += [
        ("cover, to the stirrup", figures.length(section.cover)),
        ("stirrup", visible(section.stirrup.designation)),
        ("exposure", section.exposure.value + _taken(given=section.exposure_given)),
        ("f′_{c}", figures.of("stress", concrete.fc)),
        ("λ", plain(concrete.lightweight)),
        ("E_{c}", figures.of("stress", concrete.Ec) + _given(concrete.modulus)),
        ("steel", visible(steel.name) or "by its yield strength"),
        ("f_{y}", figures.of("stress", steel.fy)),
        ("aggregate, largest", figures.length(section.aggregate)),
        ("gap between layers", figures.length(section.layer_gap)),
    ]
    if section.min_gap > 0.0:
        pairs.append(("gap between bars, of the job", figures.length(section.min_gap)))
    if section.opposite is not None:
        counted = "counted as compression steel" if section.count_opposite else "not counted"
        pairs.append(("bars opposite", f"{visible(section.opposite.label)}, {counted}"))
    if section.clear_span is not None:
        pairs.append(("clear span", figures.length(section.clear_span)))
    if section.statically_determinate:
        pairs.append(("beam", "statically determinate (9.6.1.2)"))
    if not section.tension_controlled:
        pairs.append(("tension-controlled", "not asked for by the job"))
    return pairs


def _bending(section: Section) -> str:
    return " (sagging)" if section.sagging else " (hogging)"


def _taken(*, given: bool) -> str:
    return "" if given else " (taken, since the job gives none)"


def _given(value: float | None) -> str:
    return "" if value is None else " (given)"


def _product(one: float, other: float, figures: Figures) -> str:
    return f"{plain(one)} × {figures.length(other)}"


def _flange(flange: Flange, section: Section, figures: Figures) -> str:
    beyond = flange.width - section.outline.web
    left = beyond / 2 if flange.left is None else flange.left
    text = _product(flange.width, flange.thickness, figures)
    if abs(beyond - 2 * left) > 1e-9 * flange.width:
        text += f", {plain(left)} left and {plain(beyond - left)} right of the web"
    return text


def search_inputs(problem: Problem) -> list[Pair]:
    """Bars allowed and the order of the list.

    Parameters
    ----------
    problem : Problem
        Problem of the section.

    Returns
    -------
    list of (str, str)
        Name and value.
    """
    rules, ranking = problem.rules, problem.ranking
    variety = "any" if ranking.per_pattern is None else str(ranking.per_pattern)
    pairs = [
        ("sizes allowed", visible(", ".join(bar.designation for bar in rules.sizes))),
        ("most layers", str(rules.max_layers)),
        ("most sizes in a layout", str(rules.max_sizes)),
        ("most steps between them", str(rules.size_steps)),
        ("ranked by", ranking.by),
        ("most lines", str(ranking.keep)),
        ("most lines of a pattern", variety),
    ]
    return pairs + _slab(problem)


def lever_inputs(problem: Problem, prices: PriceList | None) -> list[Pair]:
    """What may change against a drawn layout, and with which prices.

    Parameters
    ----------
    problem : Problem
        Problem of the section, with its drawn layout.
    prices : PriceList or None
        Prices and carbon factors of the job.

    Returns
    -------
    list of (str, str)
        Name and value.
    """
    figures, levers = Figures(problem.section.edition), problem.levers
    rules = variants(problem, levers, prices)[0].problem.rules
    pairs = [
        ("sizes tried", visible(", ".join(bar.designation for bar in rules.sizes))),
        ("most layers", str(rules.max_layers)),
        ("most sizes in a layout", str(rules.max_sizes)),
        ("most steps between them", str(rules.size_steps)),
    ]
    for name, others in (
        ("grades tried besides", [visible(steel.name) for steel in levers.steels]),
        ("stirrups tried besides", [visible(bar.designation) for bar in levers.stirrups]),
        ("widths tried besides", [figures.length(width) for width in levers.widths]),
        ("depths tried besides", [figures.length(depth) for depth in levers.depths]),
    ):
        if others:
            pairs.append((name, ", ".join(others)))
    invented = " (INVENTED)" if prices is not None and prices.invented else ""
    pairs.append(("prices", "none" if prices is None else f"{visible(prices.name)}{invented}"))
    return pairs + _slab(problem)


def _slab(problem: Problem) -> list[Pair]:
    slab = problem.slab
    if slab is None:
        return []
    figures = Figures(problem.section.edition)
    text = (
        f"{plain(slab.thickness)} thick, clear {plain(slab.clear_left)} left,"
        f" {plain(slab.clear_right)} right, span {figures.length(slab.span)}"
    )
    return [("slab (6.3.2)", text)]


def score_terms(ranking: Ranking, figures: Figures) -> list[Pair]:
    """What each term of the score is, with the job's constants.

    Parameters
    ----------
    ranking : Ranking
        Constants.
    figures : Figures
        Units.

    Returns
    -------
    list of (str, str)
        Term and its meaning.
    """
    k = plain(ranking.labour_share)
    return [
        ("steel", f"mass × (1 + {k} r)/(1 + {k}), r the relative labour of fixing the size"),
        ("bars", f"{plain(ranking.per_bar)} for each bar"),
        ("layers", f"{plain(ranking.per_extra_layer)} for each layer beyond the first"),
        ("sizes", f"{plain(ranking.per_extra_size)} for each size beyond the first"),
        (
            "tight",
            f"{plain(ranking.tight_gap)} for each bar of a layer, times the share by which its"
            f" smallest gap is below {figures.length(ranking.preferred_gap)}",
        ),
    ]
