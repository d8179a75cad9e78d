"""What may change against a drawn layout: switches, variants, and the keys that set them."""

from __future__ import annotations

from dataclasses import replace
from itertools import product
from pathlib import Path

import pytest

from engine import Layout
from optimizer import parse_job
from optimizer.errors import JobError
from optimizer.job import Job
from optimizer.levers import variants
from optimizer.problem import Levers, Problem
from optimizer.tradeoff import Unbeaten, trade_off
from tests.optimizer.jobs import Keys, job_text

DRAWN = {"us": '["4 #8", "2 #8"]', "si": '["4 25", "2 25"]'}
# A value of each lever other than the drawn one, as TOML has it.
GRADE = {"us": '["A615-80"]', "si": '["A615-550"]'}
STIRRUP = {"us": '["#3"]', "si": '["10"]'}
WIDTHS = {"us": '["12 in", 16]', "si": '["300 mm", 400]'}
DEPTHS = {"us": '["22 in", "2 ft 2 in"]', "si": '["550 mm", "0.65 m"]'}


def _job(units: str = "us", options: Keys | None = None, **groups: Keys) -> Job:
    """Read a job with a drawn layout and the given keys of `[options]`."""
    section = {"layers": DRAWN[units]} | dict(groups.get("section", {}))
    text = job_text(units, **{**groups, "section": section})
    lines = [f"{key} = {value}" for key, value in (options or {}).items()]
    return parse_job("\n".join([text, "[options]", *lines, ""]))


def _problem(units: str = "us", options: Keys | None = None, **groups: Keys) -> Problem:
    (problem,) = _job(units, options, **groups).problems
    return problem


def _found(problem: Problem) -> tuple[Unbeaten, ...]:
    found, proved = trade_off(variants(problem, problem.levers, None))
    assert proved
    return found


def _layouts(problem: Problem) -> list[Layout]:
    return [item.layout for item in _found(problem)]


# ---------------------------------------------------------------- switches of the bars


@pytest.mark.parametrize("units", ["us", "si"])
def test_no_lever_is_the_drawn_section_alone(units: str) -> None:
    """Without other grades, stirrups and outlines there is one variant, unchanged."""
    problem = _problem(units)
    (only,) = variants(problem, problem.levers, None)
    assert only.changes == ()
    assert only.problem.section == problem.section
    assert only.problem.rules == problem.rules
    assert problem.levers == Levers()
    assert problem.levers.combinations == 1


@pytest.mark.parametrize("units", ["us", "si"])
def test_sizes_off_keeps_the_drawn_sizes(units: str) -> None:
    """Off, only drawn sizes come; on, others do, and a lighter layout with them."""
    off, on = _problem(units, {"sizes": "false"}), _problem(units, {"sizes": "true"})
    assert off.drawn is not None
    drawn = set(off.drawn.sizes)
    kept, free = _layouts(off), _layouts(on)
    assert kept
    assert all(set(layout.sizes) <= drawn for layout in kept)
    assert any(not set(layout.sizes) <= drawn for layout in free)
    assert min(layout.mass for layout in free) < min(layout.mass for layout in kept)


def test_sizes_off_takes_sizes_that_the_job_does_not_list() -> None:
    """A drawn size outside the job's sizes is one that the drawing has: it may stay."""
    problem = _problem("us", {"sizes": "false"}, section={"sizes": '["#5"]'})
    assert {bar.designation for layout in _layouts(problem) for bar in layout.sizes} == {"#8"}


def test_sizes_off_puts_two_drawn_sizes_in_catalogue_order() -> None:
    """The rules list sizes smallest first, as the search needs them."""
    problem = _problem("us", {"sizes": "false"}, section={"layers": '["2 #9 + 2 #7", "2 #9"]'})
    (variant,) = variants(problem, problem.levers, None)
    assert [bar.designation for bar in variant.problem.rules.sizes] == ["#7", "#9"]
    assert any(len(layout.sizes) == 2 for layout in _layouts(problem))


@pytest.mark.parametrize("units", ["us", "si"])
def test_layers_off_adds_no_layer(units: str) -> None:
    """Off, no layout has more layers than the drawn one; on, some have."""
    section = {
        "us": {"layers": '["4 #8"]', "width": "12", "Mu": "220", "sizes": '["#6", "#7", "#8"]'},
        "si": {"layers": '["4 25"]', "Mu": "380", "sizes": '["19", "22", "25"]'},
    }[units]
    off = _problem(units, {"layers": "false"}, section=section)
    on = _problem(units, {"layers": "true"}, section=section)
    assert {len(layout.layers) for layout in _layouts(off)} == {1}
    assert {len(layout.layers) for layout in _layouts(on)} == {1, 2}


def test_layers_off_does_not_raise_the_limit_of_the_job() -> None:
    """A drawing with three layers does not open three layers that the job's bars exclude."""
    three = {"layers": '["4 #7", "4 #7", "2 #7"]', "max_layers": "2"}
    problem = _problem("us", {"layers": "false"}, section=three)
    (variant,) = variants(problem, problem.levers, None)
    assert variant.problem.rules.max_layers == 2


@pytest.mark.parametrize("units", ["us", "si"])
def test_mixing_off_gives_one_size(units: str) -> None:
    """Off, every layout has one size; on, some have two."""
    off, on = _problem(units, {"mixing": "false"}), _problem(units, {"mixing": "true"})
    assert {len(layout.sizes) for layout in _layouts(off)} == {1}
    assert 2 in {len(layout.sizes) for layout in _layouts(on)}


def test_levers_do_not_touch_the_ranking_or_the_rest_of_the_rules() -> None:
    """Steps between sizes, the score and the demand stay those of the job."""
    options = {"sizes": "false", "layers": "false", "mixing": "false", "grades": GRADE["us"]}
    problem = _problem("us", options, section={"size_steps": "1", "keep": "4"})
    for variant in variants(problem, problem.levers, None):
        assert variant.problem.ranking == problem.ranking
        assert variant.problem.rules.size_steps == 1
        assert variant.problem.section.Mu == problem.section.Mu


# ---------------------------------------------------------------- variants of the section


CHANGED = {
    "us": [
        ("grades", GRADE, [("steel", "A615-60", "A615-80")]),
        ("stirrups", STIRRUP, [("stirrup", "#4", "#3")]),
        ("widths", WIDTHS, [("width", "14 in", "12 in"), ("width", "14 in", "16 in")]),
        ("depths", DEPTHS, [("depth", "24 in", "22 in"), ("depth", "24 in", "26 in")]),
    ],
    "si": [
        ("grades", GRADE, [("steel", "A615-420", "A615-550")]),
        ("stirrups", STIRRUP, [("stirrup", "13", "10")]),
        ("widths", WIDTHS, [("width", "350 mm", "300 mm"), ("width", "350 mm", "400 mm")]),
        ("depths", DEPTHS, [("depth", "600 mm", "550 mm"), ("depth", "600 mm", "650 mm")]),
    ],
}


@pytest.mark.parametrize(
    ("units", "key", "values", "changes"),
    [(units, *row) for units, rows in CHANGED.items() for row in rows],
)
def test_each_lever_alone(
    units: str, key: str, values: dict[str, str], changes: list[tuple[str, str, str]]
) -> None:
    """The drawn section comes first, then the others in their order, each named."""
    problem = _problem(units, {key: values[units]})
    found = variants(problem, problem.levers, None)
    assert [variant.changes for variant in found] == [(), *((change,) for change in changes)]
    assert found[0].problem.section == problem.section
    assert len({variant.problem.section for variant in found}) == len(found)


@pytest.mark.parametrize("units", ["us", "si"])
def test_all_levers_are_combined(units: str) -> None:
    """Every combination is there once, the drawn one first, with the values it names."""
    options = {"grades": GRADE[units], "stirrups": STIRRUP[units]}
    options |= {"widths": WIDTHS[units], "depths": DEPTHS[units]}
    problem = _problem(units, options)
    levers, drawn = problem.levers, problem.section
    found = variants(problem, levers, None)
    assert len(found) == levers.combinations == 2 * 2 * 3 * 3
    sections = [variant.problem.section for variant in found]
    expected = product(
        (drawn.steel, *levers.steels),
        (drawn.stirrup, *levers.stirrups),
        (drawn.outline.web, *levers.widths),
        (drawn.outline.depth, *levers.depths),
    )
    assert [
        (one.steel, one.stirrup, one.outline.web, one.outline.depth) for one in sections
    ] == list(expected)
    assert len({variant.changes for variant in found}) == len(found)
    # Everything else is the drawn section's.
    for section in sections:
        back = replace(section, steel=drawn.steel, stirrup=drawn.stirrup, outline=drawn.outline)
        assert back == drawn


def test_a_grade_beside_a_yield_strength_is_named() -> None:
    """A section given by fy alone shows its strength where a grade has a name."""
    text = job_text("us", ("steel",), materials={"fy": '"60 ksi"'}, section={"layers": DRAWN["us"]})
    (problem,) = parse_job(f"{text}[options]\ngrades = {GRADE['us']}\n").problems
    _, other = variants(problem, problem.levers, None)
    assert other.changes == (("steel", "fy 60000 psi", "A615-80"),)


def test_the_drawn_value_listed_again_is_no_variant() -> None:
    """A list of steps that holds the drawn value gives one variant for it."""
    options = {"widths": '["14 in", "16 in"]', "grades": '["A615-60"]', "stirrups": '["#4"]'}
    problem = _problem("us", options)
    found = variants(problem, problem.levers, None)
    assert [variant.changes for variant in found] == [(), (("width", "14 in", "16 in"),)]


@pytest.mark.parametrize(
    ("key", "values"),
    [
        ("grades", '["A615-80", "A615-80"]'),
        ("grades", '["A615-80", "A615-550"]'),
        ("stirrups", '["#3", "#3"]'),
        ("widths", '["16 in", 16.0]'),
        ("depths", '["26 in", "2 ft 2 in"]'),
    ],
)
def test_a_value_listed_twice_is_one_variant(key: str, values: str) -> None:
    """A repeated value adds nothing, so no layout is shown twice for it."""
    problem = _problem("us", {key: values})
    found = variants(problem, problem.levers, None)
    assert len({variant.changes for variant in found}) == len(found) == 2


@pytest.mark.parametrize(
    ("units", "key", "value", "named"),
    [
        ("us", "widths", "14 1/8 in", "14.125 in"),
        ("us", "depths", "24.0625 in", "24.0625 in"),
        ("si", "depths", "1066.8 mm", "1066.8 mm"),
    ],
)
def test_an_outline_is_named_as_it_is(units: str, key: str, value: str, named: str) -> None:
    """What is to be built is not rounded: 14 1/8 in is no 14.12 in."""
    problem = _problem(units, {key: f'["{value}"]'})
    _, other = variants(problem, problem.levers, None)
    ((_, _, after),) = other.changes
    assert after == named


def test_outlines_that_are_none_are_skipped() -> None:
    """A web wider than its flange, a beam shallower than it, one without room for bars."""
    flange = {"flange": '{ width = "20 in", thickness = "6 in" }'}
    # 4 in is less than two covers and two legs of the stirrup.
    options = {"widths": '["4 in", "18 in", "22 in"]', "depths": '["5 in", "26 in"]'}
    problem = _problem("us", options, section=flange)
    found = variants(problem, problem.levers, None)
    kept = [(one.problem.section.outline.web, one.problem.section.outline.depth) for one in found]
    assert kept == [(14.0, 24.0), (14.0, 26.0), (18.0, 24.0), (18.0, 26.0)]


def test_a_stirrup_that_leaves_no_room_is_skipped() -> None:
    """A 4.5 in web leaves 0.5 in between the legs of a No. 4 stirrup, none in a No. 8."""
    problem = _problem("us", {"stirrups": '["#3", "#8"]'}, section={"width": "4.5"})
    found = variants(problem, problem.levers, None)
    assert [variant.problem.section.stirrup.designation for variant in found] == ["#4", "#3"]


def test_a_stirrup_above_the_table_is_refused() -> None:
    """ACI 318-19 Table 25.3.2 ends at No. 8; a section's own #18 is refused, so is a lever."""
    with pytest.raises(JobError, match=r"options\.stirrups: .*#18"):
        _problem("us", {"stirrups": '["#18"]'})


def test_a_given_flange_stays_and_a_slab_follows_the_web() -> None:
    """ACI 318-19 Table 6.3.2.1: 14 + 2 * 40.5 = 95 in, by ln/8 = 40.5 in; 16 in web 97 in."""
    given = {"flange": '{ width = "60 in", thickness = "5 in", side = "left" }'}
    slab = {"slab": '{ thickness = "6 in", clear_left = 9, clear_right = 9, span = 27 }'}
    widths = {"widths": '["16 in"]'}
    one, other = _problem("us", widths, section=given), _problem("us", widths, section=slab)
    _, fixed = variants(one, one.levers, None)
    top = fixed.problem.section.outline.top
    assert top is not None
    assert (top.width, top.left) == (60.0, 44.0)
    drawn, follows = variants(other, other.levers, None)
    tops = [one.problem.section.outline.top for one in (drawn, follows)]
    # One side: least of 8 h = 48, sw/2 = 54 and ln/8 = 40.5 in.
    assert [top.width for top in tops if top is not None] == pytest.approx([95.0, 97.0])


def test_values_of_the_trade_off_have_one_length() -> None:
    """Bars and section speak of the same aims, in the same number, without prices."""
    problem = _problem("us", {"grades": GRADE["us"], "stirrups": STIRRUP["us"]})
    for variant in variants(problem, problem.levers, None):
        for bar in problem.rules.sizes:
            assert len(variant.aims.per_bar(bar)) == len(variant.aims.constant) == 3


@pytest.mark.parametrize("key", ["widths", "depths"])
@pytest.mark.parametrize("units", ["us", "si"])
def test_envelope_without_prices(units: str, key: str) -> None:
    """Other outlines can be tried without a price list; concrete is an aim of its own then."""
    problem = _problem(units, {key: {"widths": WIDTHS, "depths": DEPTHS}[key][units]})
    for variant in variants(problem, problem.levers, None):
        for bar in problem.rules.sizes:
            assert len(variant.aims.per_bar(bar)) == len(variant.aims.constant) == 4
    assert _found(problem)


# ---------------------------------------------------------------- keys of the job


def test_all_keys_in_the_job() -> None:
    """Each key of [options] reaches its lever, in in-lb units."""
    options = {"sizes": "false", "layers": "false", "mixing": "false", "grades": GRADE["us"]}
    options |= {"stirrups": STIRRUP["us"], "widths": WIDTHS["us"], "depths": DEPTHS["us"]}
    job = _job("us", options | {"prices": '"demo"', "palette": "3"})
    levers = job.problems[0].levers
    assert (levers.sizes, levers.layers, levers.mixing) == (False, False, False)
    assert [(steel.name, steel.fy) for steel in levers.steels] == [("A615-80", 80_000.0)]
    assert [bar.designation for bar in levers.stirrups] == ["#3"]
    assert levers.widths == (12.0, 16.0)
    assert levers.depths == (22.0, 26.0)
    assert levers.envelope
    assert job.palette == 3
    assert job.prices is not None
    assert (job.prices.system, job.prices.invented) == ("us", True)


def test_all_keys_in_the_job_si() -> None:
    """Each key of [options] reaches its lever, in SI units: 550 MPa by ASTM A615M."""
    options = {"sizes": "false", "layers": "false", "mixing": "false", "grades": GRADE["si"]}
    options |= {"stirrups": STIRRUP["si"], "widths": WIDTHS["si"], "depths": DEPTHS["si"]}
    job = _job("si", options | {"prices": '"demo"', "palette": "12"})
    levers = job.problems[0].levers
    assert (levers.sizes, levers.layers, levers.mixing) == (False, False, False)
    assert [steel.fy for steel in levers.steels] == [550.0]
    assert [bar.designation for bar in levers.stirrups] == ["10"]
    assert levers.widths == (300.0, 400.0)
    assert levers.depths == (550.0, 650.0)
    assert job.palette == 12
    assert job.prices is not None
    assert job.prices.system == "si"


OVERRIDES: dict[str, tuple[Keys, Keys]] = {
    "sizes": ({"us": "false", "si": "false"}, {"us": "true", "si": "true"}),
    "layers": ({"us": "false", "si": "false"}, {"us": "true", "si": "true"}),
    "mixing": ({"us": "false", "si": "false"}, {"us": "true", "si": "true"}),
    "grades": (GRADE, {"us": '["A706-80"]', "si": '["CSA-500W"]'}),
    "stirrups": (STIRRUP, {"us": '["#5"]', "si": '["16"]'}),
    "widths": (WIDTHS, {"us": '["18 in"]', "si": '["450 mm"]'}),
    "depths": (DEPTHS, {"us": '["28 in"]', "si": '["700 mm"]'}),
}


@pytest.mark.parametrize("units", ["us", "si"])
@pytest.mark.parametrize("key", OVERRIDES)
def test_a_section_overrides_the_job(units: str, key: str) -> None:
    """[section.options] wins over [options] for its key and leaves the others."""
    common, own = OVERRIDES[key]
    others = {name: values[units] for name, (values, _) in OVERRIDES.items()}
    text = f"{{ {key} = {own[units]} }}"
    mixed = _problem(units, others, section={"options": text}).levers
    job_wide = _problem(units, others).levers
    alone = _problem(units, {key: own[units]}).levers
    field = "steels" if key == "grades" else key
    assert getattr(mixed, field) == getattr(alone, field) != getattr(job_wide, field)
    assert replace(mixed, **{field: getattr(job_wide, field)}) == job_wide
    assert common[units] != own[units]


@pytest.mark.parametrize("key", ["grades", "stirrups", "widths", "depths"])
def test_a_section_may_take_a_lever_away(key: str) -> None:
    """An empty list in the section switches a list of the job off."""
    common, _ = OVERRIDES[key]
    problem = _problem("us", {key: common["us"]}, section={"options": f"{{ {key} = [] }}"})
    assert problem.levers == Levers()


def test_sections_have_their_own_levers() -> None:
    """One section's options do not reach the next."""
    text = job_text("us", section={"layers": DRAWN["us"], "options": '{ widths = ["16 in"] }'})
    second = job_text("us", section={"mark": '"B2"', "layers": DRAWN["us"]})
    text += second[second.index("[[section]]") :] + '[options]\ngrades = ["A615-80"]\n'
    one, two = (problem.levers for problem in parse_job(text).problems)
    assert (one.widths, two.widths) == ((16.0,), ())
    assert [steel.name for steel in one.steels] == [steel.name for steel in two.steels]


BAD: dict[str, tuple[Keys, str]] = {
    "switch as text": ({"sizes": '"off"'}, r"options\.sizes: got 'off'"),
    "switch as number": ({"layers": "0"}, r"options\.layers: got 0"),
    "switch as list": ({"mixing": "[]"}, r"options\.mixing: got \[\]"),
    "grade unknown": ({"grades": '["A615-75"]'}, r"options\.grades: .*'A615-75' is not known"),
    "grade as text": ({"grades": '"A615-80"'}, r"options\.grades: got 'A615-80'"),
    "grade empty": ({"grades": '[""]'}, r"options\.grades\.0: "),
    "grade as strength": ({"grades": "[80000]"}, r"options\.grades\.0: got 80000"),
    "thirteen grades": ({"grades": str(["A615-80"] * 13)}, r"options\.grades: "),
    "stirrup unknown": ({"stirrups": '["#99"]'}, r"options\.stirrups: .*'#99' is not known"),
    "stirrup metric": ({"stirrups": '["10M"]'}, r"options\.stirrups: .*'10M' is not known"),
    "width of other kind": ({"widths": '["12 psi"]'}, r"options\.widths\.0: got '12 psi'"),
    "width negative": ({"widths": "[-12]"}, r"options\.widths\.0: got -12"),
    "width of a mile": ({"widths": '["5280 ft"]'}, r"options\.widths\.0: .*allowed: 4 to 600 in"),
    "second width": ({"widths": '["12 in", "x"]'}, r"options\.widths\.1: got 'x'"),
    "width as number": ({"widths": "12"}, r"options\.widths: got 12"),
    "depth infinite": ({"depths": "[inf]"}, r"options\.depths\.0: got inf"),
    "depth without unit": ({"depths": '["26"]'}, r"options\.depths\.0: got '26' without a unit"),
    "thirteen depths": ({"depths": str(list(range(20, 33)))}, r"options\.depths: "),
    "palette of none": ({"palette": "0"}, r"options\.palette: got 0"),
    "palette of thirteen": ({"palette": "13"}, r"options\.palette: got 13"),
    "palette as real": ({"palette": "2.0"}, r"options\.palette: got 2\.0"),
    "palette as flag": ({"palette": "true"}, r"options\.palette: got true"),
    "prices unknown": ({"prices": '"real"'}, r"options\.prices: .*'real' is not known"),
    "prices absent": ({"prices": '"gone.toml"'}, r"options\.prices: .*gone\.toml"),
    "prices as table": ({"prices": "{ steel = 1 }"}, r"options\.prices: "),
    "prices empty": ({"prices": '""'}, r"options\.prices: "),
    "misspelt": ({"grade": '["A615-80"]'}, r"options\.grade: unknown key; .*did you mean grades"),
    "unlike any": ({"xyz": "1"}, r"options\.xyz: unknown key; allowed: sizes, layers, mixing"),
}  # fmt: skip


@pytest.mark.parametrize("name", BAD)
def test_malformed_keys_of_the_job(name: str) -> None:
    """The message names the key with its table, and the value."""
    options, message = BAD[name]
    with pytest.raises(JobError, match=message):
        _job("us", options)


@pytest.mark.parametrize("name", [name for name, (keys, _) in BAD.items() if "price" not in name
                                  and "palette" not in name and "unlike" not in name
                                  and len(keys) == 1])  # fmt: skip
def test_malformed_keys_of_a_section(name: str) -> None:
    """The same in a section, which the message names too."""
    ((key, value),) = BAD[name][0].items()
    with pytest.raises(JobError, match=rf'section 1 "B1", {BAD[name][1]}'):
        _job("us", {}, section={"options": f"{{ {key} = {value} }}"})


@pytest.mark.parametrize("key", ["prices", "palette"])
def test_keys_of_the_whole_job_are_none_of_a_section(key: str) -> None:
    """Prices and palette hold for the job; a section that gives them is refused."""
    value = '"demo"' if key == "prices" else "2"
    with pytest.raises(JobError, match=rf'section 1 "B1", options\.{key}: unknown key; allowed'):
        _job("us", {}, section={"options": f"{{ {key} = {value} }}"})


@pytest.mark.parametrize("where", ["job", "section"])
def test_options_are_a_table(where: str) -> None:
    """`options = 1` is no table."""
    section = {"options": "1"} if where == "section" else {}
    text = job_text("us", head={"options": "1"} if where == "job" else {}, section=section)
    with pytest.raises(JobError, match=r"options: got 1; expected a table of keys"):
        parse_job(text)


def test_grade_that_the_edition_does_not_take() -> None:
    """ACI 318-14 Table 20.2.2.4a ends at 80 ksi for flexure: A615-100 is refused."""
    with pytest.raises(JobError, match=r"options\.grades: got 'A615-100'; ACI 318-14"):
        _job("us", {"grades": '["A615-100"]'}, head={"code": '"ACI 318-14"'})


def test_prices_of_the_other_units(tmp_path: Path) -> None:
    """A list in SI units lies beside the job: a job in SI takes it, one in in-lb units does not."""
    prices = ["system = 'si'", "currency = 'EUR'", "labour_rate = 50.0", "concrete_price = 200"]
    prices += ["formwork_price = 100", "steel = 1.5"]
    (tmp_path / "p.toml").write_text("\n".join(prices), encoding="utf-8")
    si, us = (
        job_text(units, section={"layers": DRAWN[units]}) + "[options]\nprices = 'p.toml'\n"
        for units in ("si", "us")
    )
    taken = parse_job(si, base=tmp_path).prices
    assert taken is not None
    assert (taken.name, taken.currency, taken.invented) == ("p.toml", "EUR", False)
    with pytest.raises(JobError, match=r"options\.prices: .*p\.toml.*allowed"):
        parse_job(us, base=tmp_path)


def _numbers(first: int, count: int) -> str:
    return str([float(first + step) for step in range(count)])


def test_most_combinations() -> None:
    """200 combinations are taken, 2 x 4 x 5 x 5; one step more is refused with the number."""
    options = {"grades": GRADE["us"], "stirrups": '["#3", "#5", "#6"]'}
    options |= {"widths": _numbers(15, 4), "depths": _numbers(25, 4)}
    assert _problem("us", options).levers.combinations == 200
    options["depths"] = _numbers(25, 5)
    with pytest.raises(JobError, match=r'section 1 "B1", options: 240 combinations.*up to 200'):
        _problem("us", options)


def test_most_combinations_over_both_levels() -> None:
    """Lists of the job and of the section count together, where they meet."""
    with pytest.raises(JobError, match=r"options: 338 combinations"):
        _problem(
            "us",
            {"grades": GRADE["us"], "widths": _numbers(15, 12)},
            section={"options": f"{{ depths = {_numbers(25, 12)} }}"},
        )
