"""Beam jobs: what the reader makes of each key, its defaults and its units."""

from __future__ import annotations

import math
from pathlib import Path

import pytest

from catalogs import bar_catalog
from engine import EDITIONS, Exposure
from engine.beams.spans import LoadCase, Overhang, PointLoad, SupportKind, UniformLoad
from optimizer.beams.problem import Analysis, Attached
from optimizer.beams.reader import parse_beam_job, read_beam_job
from optimizer.beams.sizes import nearest_bars
from optimizer.beams.starter import beam_starter
from tests.beams.jobs import beam_of, beam_text

COLUMN = {
    "us": '{ width = "16 in", depth = "20 in", height = "12 ft" }',
    "si": '{ width = "400 mm", depth = "500 mm", height = "3.6 m" }',
}


# ---------------------------------------------------------------- starters


@pytest.mark.parametrize("units", ["us", "si"])
def test_starter_is_a_job(units: str, tmp_path: Path) -> None:
    """The starter is read, from a file as from its text, and speaks the units it is for."""
    path = tmp_path / "beam.toml"
    path.write_text(beam_starter(units), encoding="utf-8")
    problem = read_beam_job(path)
    assert problem == parse_beam_job(beam_starter(units))
    assert problem.edition.units == units
    assert [span.mark for span in problem.beam.spans] == ["A-B", "B-C", "C-"]
    assert [section.mark for section in problem.sections] == ["A-B", "B-C", "C-"]


@pytest.mark.parametrize("units", ["us", "si"])
def test_starter_states_the_defaults(units: str) -> None:
    """The optional keys that the starter gives in [beam] are what holds without them."""
    text = beam_starter(units)
    defaults = [
        *("analysis", "stirrups", "stirrup_step", "hangers", "edge", "attached"),
        *("sustained", "stock", "length_step", "most_sizes"),
    ]
    lines = [line for line in text.splitlines() if line.partition(" =")[0] not in defaults]
    assert len(lines) == len(text.splitlines()) - len(defaults)
    assert parse_beam_job("\n".join(lines)) == parse_beam_job(text)


@pytest.mark.parametrize("units", ["us", "si"])
def test_starter_comments_are_keys(units: str) -> None:
    """A key that the starter shows as a comment can be uncommented, one at a time."""
    lines = beam_starter(units).splitlines()
    comments = [i for i, line in enumerate(lines) if line.startswith("# ") and " = " in line]
    assert len(comments) >= 9
    for number in comments:
        changed = [*lines]
        changed[number] = lines[number].removeprefix("# ")
        if changed[number].startswith("flange ="):
            changed = [line for line in changed if not line.startswith("slab =")]
        if changed[number].startswith("In place of loads"):
            continue
        assert parse_beam_job("\n".join(changed)).mark == "B12"


# ---------------------------------------------------------------- defaults


def test_defaults_in_inches() -> None:
    """What holds where a US job says nothing."""
    problem, catalog = beam_of(), bar_catalog("astm-inch")
    assert problem.title == ""
    assert problem.mark == "B1"
    assert problem.edition is EDITIONS["ACI 318-19"]
    assert problem.analysis is Analysis.ELASTIC
    assert problem.given == ()
    assert problem.redistribution == 0.0
    assert problem.stirrups == (catalog.bar("#3"), catalog.bar("#4"))
    assert problem.stirrup_steel == problem.sections[0].steel
    assert problem.stirrup_step == 1.0
    assert problem.hangers == (catalog.bar("#4"), catalog.bar("#5"))
    assert problem.skin == problem.flange_bar == catalog.bar("#4")
    assert not problem.perimeter
    assert not problem.closed_stirrups
    assert problem.attached is Attached.FLOOR
    assert problem.sustained == 0.25
    assert problem.stock == (240.0, 480.0, 720.0)
    assert problem.length_step == 1.0
    assert problem.most_sizes == 3
    assert problem.most_marks is None
    assert problem.work_limit == problem.ranking.work_limit == 30.0
    assert problem.ranking.by == "practical"
    assert [bar.designation for bar in problem.rules.sizes] == [f"#{n}" for n in range(5, 12)]


def test_defaults_in_millimetres() -> None:
    """What holds where a metric job says nothing."""
    problem, catalog = beam_of("si"), bar_catalog("astm-metric")
    assert problem.stirrups == (catalog.bar("10"), catalog.bar("13"))
    assert problem.hangers == (catalog.bar("13"), catalog.bar("16"))
    assert problem.skin == problem.flange_bar == catalog.bar("13")
    assert problem.stirrup_step == problem.length_step == 25.0
    assert problem.stock == (6000.0, 12_000.0, 18_000.0)


@pytest.mark.parametrize(
    ("catalog", "stirrups", "hangers", "skin"),
    [
        ("astm-metric", ["10", "13"], ["13", "16"], "13"),
        ("en10080", ["10", "12"], ["12", "16"], "12"),
        ("csa", ["10M", "15M"], ["10M", "15M"], "10M"),
    ],
)
def test_default_sizes_of_other_catalogues(
    catalog: str, stirrups: list[str], hangers: list[str], skin: str
) -> None:
    """The nearest sizes of the catalogue in use, none twice."""
    problem = beam_of("si", bars=f'catalog = "{catalog}"')
    assert [bar.designation for bar in problem.stirrups] == stirrups
    assert [bar.designation for bar in problem.hangers] == hangers
    assert problem.skin.designation == problem.flange_bar.designation == skin


def test_nearest_bars_at_the_end_of_a_catalogue() -> None:
    """Where no thicker size is left there are fewer."""
    catalog = bar_catalog("csa")
    assert [bar.designation for bar in nearest_bars(catalog, (55.0, 60.0))] == ["55M"]


# ---------------------------------------------------------------- keys of [beam]


def test_every_key_of_the_beam() -> None:
    """Each key reaches the problem."""
    problem = beam_of(
        beam="\n".join(
            (
                'exposure = "weather"',
                "redistribution = 0.10",
                'stirrups = ["#5", "#4"]',
                'stirrup_steel = "A615-40"',
                'stirrup_step = "0.5 in"',
                'hangers = ["#5", "#3"]',
                'skin_bar = "#3"',
                'flange_bar = "#5"',
                'edge = "perimeter"',
                'attached = "sensitive"',
                "sustained = 0.5",
                'stock = ["60 ft", "30 ft"]',
                'length_step = "3 in"',
                "most_sizes = 2",
                "most_marks = 9",
            )
        ),
        ranking='by = "lightest"\nwork_limit = 5',
        bars="max_layers = 3\nmax_sizes = 1\nsize_steps = 1",
    )
    assert problem.redistribution == 0.10
    assert [bar.designation for bar in problem.stirrups] == ["#4", "#5"]
    assert {section.stirrup.designation for section in problem.sections} == {"#4"}
    assert {section.exposure for section in problem.sections} == {Exposure.WEATHER}
    assert problem.stirrup_steel.fy == 40e3
    assert problem.sections[0].steel.fy == 60e3
    assert problem.stirrup_step == 0.5
    assert [bar.designation for bar in problem.hangers] == ["#3", "#5"]
    assert (problem.skin.designation, problem.flange_bar.designation) == ("#3", "#5")
    assert problem.perimeter
    assert problem.attached is Attached.SENSITIVE
    assert problem.sustained == 0.5
    assert problem.stock == (360.0, 720.0)
    assert problem.length_step == 3.0
    assert (problem.most_sizes, problem.most_marks) == (2, 9)
    assert (problem.ranking.by, problem.work_limit) == ("lightest", 5.0)
    rules = problem.rules
    assert (rules.max_layers, rules.max_sizes, rules.size_steps) == (3, 1, 1)


def test_switches_of_the_beam() -> None:
    """The keys that exclude those of the test above."""
    problem = beam_of(beam='closed_stirrups = true\nanalysis = "coefficients"')
    assert problem.closed_stirrups
    assert problem.analysis is Analysis.COEFFICIENTS
    assert beam_of(beam='stirrup_fy = "50 ksi"').stirrup_steel.fy == 50e3


@pytest.mark.parametrize("word", ["roof", "floor", "sensitive", "tolerant"])
def test_what_the_deflection_limit_protects(word: str) -> None:
    """One word for each row of Table 24.2.2."""
    assert beam_of(beam=f'attached = "{word}"').attached.value == word


def test_sections_stand_ready_for_bars() -> None:
    """Sections carry materials, gaps and the clear span, and no bars at the other face."""
    problem = beam_of(
        materials='aggregate = "1 in"\nlambda = 0.85',
        bars='layer_gap = "1.5 in"\nmin_gap = "2 in"',
    )
    first, second = problem.sections
    assert first.clear_span == 28 * 12 - 18
    assert second.clear_span == 24 * 12 - 18
    for section in problem.sections:
        assert section.cover == 1.5
        assert section.stirrup.designation == "#3"
        assert section.Mu != 0.0
        assert section.Ms is None
        assert section.opposite is None
        assert not section.exposure_given
        assert (section.aggregate, section.layer_gap, section.min_gap) == (1.0, 1.5, 2.0)
        assert section.concrete.lightweight == 0.85
        assert section.outline is problem.beam.spans[problem.sections.index(section)].outline


# ---------------------------------------------------------------- outlines


def test_span_overrides_width_and_depth() -> None:
    """A span's own size, and the beam's where it has none."""
    spans = ('length = "28 ft"\nwidth = "16 in"', 'length = "24 ft"\ndepth = "20 in"')
    first, second = (section.outline for section in beam_of(spans=spans).sections)
    assert (first.web, first.depth) == (16.0, 24.0)
    assert (second.web, second.depth) == (14.0, 20.0)


def test_slab_follows_the_clear_span_of_each_span() -> None:
    """ACI 318-19, Table 6.3.2.1: least of 8h, sw/2 and ln/8, or 6h, sw/2 and ln/12."""
    slab = 'slab = { thickness = "6 in", clear_left = "20 ft", clear_right = "20 ft" }'
    spans = ('length = "28 ft"', 'length = "40 ft"')
    first, second = (section.outline for section in beam_of(beam=slab, spans=spans).sections)
    assert first.top is not None
    assert second.top is not None
    assert first.top.width == pytest.approx(14 + 2 * (336 - 18) / 8)
    assert second.top.width == pytest.approx(14 + 2 * 48)
    edge = beam_of(beam='slab = { thickness = "6 in", clear_left = "20 ft" }').sections[0]
    assert edge.outline.top is not None
    assert edge.outline.top.width == pytest.approx(14 + (336 - 18) / 12)
    assert edge.outline.top.left == pytest.approx((336 - 18) / 12)


def test_flange_of_a_span_takes_the_place_of_the_slab() -> None:
    """A span with a flange of its own needs no slab, and the other way round."""
    slab = 'slab = { thickness = "6 in", clear_left = "20 ft", clear_right = "20 ft" }'
    flange = 'flange = { width = "40 in", thickness = "4 in", side = "left" }'
    mixed = beam_of(beam=slab, spans=('length = "28 ft"\n' + flange, 'length = "24 ft"'))
    tops = [section.outline.top for section in mixed.sections]
    assert tops[0] is not None
    assert (tops[0].width, tops[0].thickness, tops[0].left) == (40.0, 4.0, 26.0)
    assert tops[1] is not None
    assert tops[1].thickness == 6.0
    other = beam_of(beam=flange, spans=('length = "28 ft"\n' + slab, 'length = "24 ft"'))
    assert [s.outline.top.thickness for s in other.sections if s.outline.top] == [6.0, 4.0]


# ---------------------------------------------------------------- supports


@pytest.mark.parametrize(
    ("lines", "stiffness"), [("", 0.0), ('ends = "free"', 0.0), ('ends = "fixed"', math.inf)]
)
def test_ends_of_a_support(lines: str, stiffness: float) -> None:
    """A support is free to rotate unless the job says otherwise."""
    assert beam_of(supports=(lines, "", "")).beam.supports[0].stiffness == stiffness


@pytest.mark.parametrize("units", ["us", "si"])
def test_stiffness_of_columns(units: str) -> None:
    """4EI/L with a fixed far end, 3EI/L with a pinned one (slope deflection), both added up."""
    below, above = COLUMN[units], COLUMN[units].replace("}", ', far = "pinned" }')
    lines = ("below = " + below, f'ends = "columns"\nbelow = {below}\nabove = {above}', "")
    one, two, none = (support.stiffness for support in beam_of(units, supports=lines).beam.supports)
    modulus = 57e3 * math.sqrt(4000) if units == "us" else 4700 * math.sqrt(28)
    width, depth, height = (16, 20, 144) if units == "us" else (400, 500, 3600)
    unit = modulus * width * depth**3 / 12 / height
    assert one == pytest.approx(4 * unit, rel=1e-12)
    assert two == pytest.approx(7 * unit, rel=1e-12)
    assert none == 0.0


def test_kind_and_width_of_supports() -> None:
    """A support is a column unless the job says otherwise."""
    lines = ("", 'kind = "wall"\nwidth = "10 in"', 'kind = "girder"')
    supports = beam_of(supports=lines).beam.supports
    kinds = [support.kind for support in supports]
    assert kinds == [SupportKind.COLUMN, SupportKind.WALL, SupportKind.GIRDER]
    assert [support.width for support in supports] == [18.0, 10.0, 18.0]


@pytest.mark.parametrize("mark", ["A2", "12", "A.1", "B'", "ABCDEFGH", "Ä"])
def test_marks_of_supports(mark: str) -> None:
    """Letters, digits, dots and apostrophes, up to eight of them."""
    text = beam_text().replace('mark = "B"', f'mark = "{mark}"')
    assert [span.mark for span in parse_beam_job(text).beam.spans] == [f"A-{mark}", f"{mark}-C"]


def test_cantilevers_at_both_ends() -> None:
    """Marks, kinds and clear ranges with a cantilever at each end."""
    spans = (
        'length = "6 ft"\ncantilever = "left"',
        'length = "28 ft"',
        'length = "5 ft"\ncantilever = "right"',
    )
    beam = beam_of(supports=("", ""), spans=spans).beam
    assert [span.mark for span in beam.spans] == ["-A", "A-B", "B-"]
    assert [span.overhang for span in beam.spans] == [
        Overhang.LEFT,
        Overhang.NONE,
        Overhang.RIGHT,
    ]
    assert [beam.clear_range(i) for i in range(3)] == [(0.0, 63.0), (9.0, 327.0), (9.0, 60.0)]


# ---------------------------------------------------------------- loads


def test_own_weight_is_that_of_the_web() -> None:
    """150 lbf/ft^3 or 24 kN/m^3 over web width times the whole depth, slab or not."""
    slab = 'slab = { thickness = "6 in", clear_left = "20 ft" }'
    for lines in ("", slab, "self_weight = true"):
        (load,) = beam_of(beam=lines).beam.spans[0].loads
        assert isinstance(load, UniformLoad)
        assert load.case is LoadCase.DEAD
        assert (load.start, load.end) == (0.0, 336.0)
        assert load.intensity * 12 == pytest.approx(150 * 14 * 24 / 144)
    (load,) = beam_of("si").beam.spans[0].loads
    assert isinstance(load, UniformLoad)
    assert load.intensity == pytest.approx(24 * 0.350 * 0.600)  # kN/m is N/mm
    (load,) = beam_of(beam='concrete_weight = "120 pcf"').beam.spans[0].loads
    assert isinstance(load, UniformLoad)
    assert load.intensity * 12 == pytest.approx(120 * 14 * 24 / 144)


@pytest.mark.parametrize(
    ("units", "dead", "live", "sizes"),
    [
        ("us", '"1.2 kip/ft"', "0.9", (100.0, 75.0)),
        ("us", '"1200 plf"', '"0.9 klf"', (100.0, 75.0)),
        ("si", '"18 kN/m"', "13", (18.0, 13.0)),
    ],
)
def test_loads_over_the_whole_span(
    units: str, dead: str, live: str, sizes: tuple[float, float]
) -> None:
    """Loads in kip/ft or kN/m; plain numbers too."""
    length = '"28 ft"' if units == "us" else '"8 m"'
    lines = f"length = {length}\ndead = {dead}\nlive = {live}"
    span = beam_of(units, beam="self_weight = false", spans=(lines, lines)).beam.spans[1]
    uniform = [load for load in span.loads if isinstance(load, UniformLoad)]
    assert [load.case for load in uniform] == [LoadCase.DEAD, LoadCase.LIVE]
    assert [load.intensity for load in uniform] == pytest.approx(sizes, rel=1e-15)
    assert {(load.start, load.end) for load in uniform} == {(0.0, span.length)}


def test_loads_at_places() -> None:
    """Forces and partial loads, up to the very ends of the span; touching is no overlap."""
    loads = """loads = [
        { case = "live", force = "12 kip", at = "9 ft" },
        { case = "dead", force = 5, at = 28 },
        { case = "dead", uniform = "0.6 kip/ft", from = "4 ft", to = "12 ft" },
        { case = "dead", uniform = "0.3 kip/ft", from = "12 ft", to = "28 ft" },
        { case = "live", uniform = "0.6 kip/ft", from = "0 ft", to = "12 ft" },
    ]"""
    spans = ('length = "28 ft"\ndead = "1.2 kip/ft"\n' + loads, 'length = "24 ft"')
    found = beam_of(beam="self_weight = false", spans=spans).beam.spans[0].loads
    dead, live = LoadCase.DEAD, LoadCase.LIVE
    assert found == (
        UniformLoad(case=dead, intensity=100.0, start=0.0, end=336.0),
        PointLoad(case=live, force=12_000.0, at=108.0),
        PointLoad(case=dead, force=5000.0, at=336.0),
        UniformLoad(case=dead, intensity=50.0, start=48.0, end=144.0),
        UniformLoad(case=dead, intensity=25.0, start=144.0, end=336.0),
        UniformLoad(case=live, intensity=50.0, start=0.0, end=144.0),
    )


def test_load_of_zero_is_none() -> None:
    """Zero over the whole span is the same as no load."""
    spans = ('length = "28 ft"\ndead = 0\nlive = "0 kip/ft"', 'length = "24 ft"')
    assert beam_of(spans=spans) == beam_of(spans=('length = "28 ft"', 'length = "24 ft"'))


def test_same_beam_in_other_units() -> None:
    """The same lengths and loads written in another unit make the same problem."""
    spans = ('length = "28 ft"\ndead = "1.2 kip/ft"', 'length = "24 ft"')
    again = ('length = "336 in"\ndead = 1.2', "length = 24")
    assert beam_of(spans=spans) == beam_of(spans=again)


@pytest.mark.parametrize("code", list(EDITIONS))
def test_every_edition(code: str) -> None:
    """A beam in each edition, with the coefficients of that edition."""
    units = EDITIONS[code].units
    text = beam_text(units).splitlines()
    problem = parse_beam_job("\n".join([f'code = "{code}"', *text[1:]]))
    assert problem.edition is EDITIONS[code]
    assert {section.edition for section in problem.sections} == {EDITIONS[code]}
    assert problem.stirrup_steel.edition is EDITIONS[code]
