"""The command `options`: exit codes, what is printed and where, JSON, width, determinism."""

from __future__ import annotations

import json
import math
import re
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest
from rich.cells import cell_len

from optimizer import read_job
from optimizer.options import SectionOptions, options
from tests.command_line.complaints import assert_refused
from tests.command_line.program import (
    SMALL_JOB,
    SMALL_SI_JOB,
    environment,
    job_file,
    run_bytes,
    run_here,
)

US = SMALL_JOB + 'layers = ["4 #8", "2 #8"]\n'
SI = SMALL_SI_JOB + 'layers = ["4 25", "2 25"]\n'
WIDE_SIZES = '["#5", "#6", "#7", "#8", "#9", "#10", "#11"]'
ALL_LEVERS = US.replace('["#7", "#8"]', WIDE_SIZES) + (
    '[options]\nprices = "demo"\npalette = 3\ngrades = ["A615-80"]\n'
    'stirrups = ["#3"]\nwidths = ["12 in"]\ndepths = ["26 in"]\n'
)
FEW_LEVERS = US + '[options]\nprices = "demo"\npalette = 2\ngrades = ["A615-80"]\n'
ALL_LEVERS_SI = SI.replace('["22", "25"]', '["16", "19", "22", "25", "29"]') + (
    '[options]\nprices = "demo"\npalette = 2\ngrades = ["CSA-500W"]\n'
    'stirrups = ["10"]\nwidths = ["300 mm"]\ndepths = ["650 mm"]\n'
)
PRICES = """\
system = "us"
currency = "{currency}"
steel = 0.8
labour_rate = 60
concrete_price = {concrete}
formwork_price = 12
"""
SECTION = SMALL_JOB[SMALL_JOB.index("[[section]]") :]


def _with_second(text: str, mark: str, moment: str, layers: str = "") -> str:
    """Add a section of the same beam before the options."""
    more = SECTION.replace("B1", mark).replace("150 kip*ft", moment)
    more += f"layers = {layers}\n" if layers else ""
    head, options_key, rest = text.partition("[options]")
    return head + more + options_key + rest


def _lines(text: str, start: str) -> list[str]:
    return [line for line in text.splitlines() if line.startswith(start)]


def _words(text: str) -> str:
    """Text with its line breaks taken out, so that sentences can be looked for."""
    return " ".join(text.split())


# ---------------------------------------------------------------- exit codes


def test_alternatives_are_found(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """0, nothing on standard error: the drawn layout, the options, the proof, the caution."""
    outcome = run_here(capsys, "options", str(job_file(tmp_path, US)))
    assert (outcome.code, outcome.err) == (0, "")
    assert "Drawn: 4 #8 / 2 #8, passes every check" in outcome.out
    assert "Proved: " in outcome.out
    assert "lightest" in outcome.out
    assert "To be agreed by the engineer of record:" in outcome.out
    assert "licensed design professional" in outcome.out


def test_no_alternative_and_a_drawn_layout_that_fails(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """1: nothing passes, and the drawn layout does not either."""
    path = job_file(tmp_path, US.replace("150 kip*ft", "600 kip*ft"))
    outcome = run_here(capsys, "options", str(path))
    assert (outcome.code, outcome.err) == (1, "")
    assert "The drawn layout FAILS: flexural_strength" in outcome.out
    assert "Proved: no layout within the levers passes every check." in _words(outcome.out)


def test_drawn_passes_and_no_alternative(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """0: the drawing stands although nothing else is possible within the levers."""
    text = US.replace('["#7", "#8"]', '["#5"]\nmax_layers = 1')
    outcome = run_here(capsys, "options", str(job_file(tmp_path, text)))
    assert outcome.code == 0
    assert "passes every check" in outcome.out
    assert "Proved: no layout within the levers passes every check." in _words(outcome.out)


def test_without_layers(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """2: a job of `rank` alone has nothing to be compared with; the key is named."""
    outcome = run_here(capsys, "options", str(job_file(tmp_path)))
    assert_refused(outcome, "layers")


def test_without_layers_in_the_section_chosen(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """2: `--only` leaves no drawn section."""
    path = job_file(tmp_path, _with_second(US, "B2", "150 kip*ft"))
    assert_refused(run_here(capsys, "options", str(path), "--only", "B2"), "layers")
    assert run_here(capsys, "options", str(path), "--only", "B1").code == 0


@pytest.mark.parametrize(
    ("line", "key"),
    [
        ("sizes = 1", "sizes"),
        ('prices = "gone.csv"', "prices"),
        ('grades = ["A615-75"]', "grades"),
        ("palette = 99", "palette"),
        ('widths = ["14 kip"]', "widths"),
    ],
)
def test_malformed_options(
    line: str, key: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """2: one message that names the key, nothing written."""
    path = job_file(tmp_path, f"{US}[options]\n{line}\n")
    outcome = run_here(capsys, "options", str(path), "--json", str(tmp_path / "out.json"))
    assert_refused(outcome, key, file=path.name)
    assert not (tmp_path / "out.json").exists()


def test_a_price_that_is_missing(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """2: a list without a price for a grade that is to be tried says so."""
    prices = (
        PRICES.format(currency="USD", concrete=200).replace("steel = 0.8\n", "")
        + '[[steel]]\ngrade = "A615-60"\nprice = 0.8\n'
    )
    (tmp_path / "own.toml").write_text(prices, encoding="utf-8")
    text = f'{US}[options]\nprices = "own.toml"\n'
    assert run_here(capsys, "options", str(job_file(tmp_path, text))).code == 0
    path = job_file(tmp_path, text + 'grades = ["A615-80"]\n')
    outcome = run_here(capsys, "options", str(path))
    assert (outcome.code, outcome.out) == (2, "")
    assert "own.toml: no steel price for" in outcome.err
    assert "A615-80" in outcome.err
    assert "Traceback" not in outcome.err


@pytest.mark.parametrize("line", ['widths = ["16 in"]', 'depths = ["26 in"]'])
def test_other_outlines_without_prices(
    line: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Width and depth steps need no price list."""
    outcome = run_here(capsys, "options", str(job_file(tmp_path, f"{US}[options]\n{line}\n")))
    assert (outcome.code, outcome.err) == (0, "")


def test_drawn_bars_that_overlap(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Twenty bars in a layer are no bad input: the drawn layout fails, and is said to."""
    path = job_file(tmp_path, SMALL_JOB + 'layers = ["20 #11"]\n')
    outcome = run_here(capsys, "options", str(path))
    assert outcome.err == ""
    assert "The drawn layout FAILS: " in outcome.out
    assert "clear_gap" in outcome.out


def test_nothing_is_said_of_the_arithmetic(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Little steel in a T-beam over a support, with a service moment: no warning of numpy."""
    text = SMALL_JOB.replace('"150 kip*ft"', '"-60 kip*ft"\nMs = "-40 kip*ft"')
    text = text.replace('"24 in"', '"40 in"').replace('["#7", "#8"]', '["#5", "#6"]')
    text += 'flange = { width = "60 in", thickness = "5 in" }\nlayers = ["2 #5"]\n'
    outcome = run_here(capsys, "options", str(job_file(tmp_path, text)))
    assert (outcome.code, outcome.err) == (0, "")


# ---------------------------------------------------------------- what is printed


def test_a_failing_drawn_layout_comes_first(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Right below the section's heading, with the rows, before any option; exit code 1."""
    path = job_file(tmp_path, SMALL_JOB + 'layers = ["2 #5"]\n')
    outcome = run_here(capsys, "options", str(path))
    assert outcome.code == 1
    place = outcome.out.index("The drawn layout FAILS: flexural_strength, minimum_steel")
    assert outcome.out.index("B1") < place < outcome.out.index("best at")
    assert "passes every check" not in outcome.out


def test_invented_prices_are_said_to_be(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The demo's prices are called invented; those of a user are not."""
    path = job_file(tmp_path, f'{US}[options]\nprices = "demo"\n')
    demo = run_here(capsys, "options", str(path)).out
    assert "Prices of list 'demo' are INVENTED" in demo
    assert "placed cost [DEMO/ft]" in demo
    own_list = PRICES.format(currency="USD", concrete=200)
    (tmp_path / "own.toml").write_text(own_list, encoding="utf-8")
    path = job_file(tmp_path, f'{US}[options]\nprices = "own.toml"\n')
    own = run_here(capsys, "options", str(path)).out
    assert "INVENTED" not in own
    assert "placed cost [USD/ft]" in own
    bare = run_here(capsys, "options", str(job_file(tmp_path, US))).out
    assert "INVENTED" not in bare
    assert "cost" not in bare


def test_a_misspelt_size_of_a_price_list_is_told(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Its bars get the price for all sizes: the reader hears of it; other sizes are no news."""
    entries = '[[steel]]\nprice = 0.8\n[[steel]]\nsize = "{size}"\nprice = 0.9\n'
    for size, told in (("#O8", True), ("#8", False)):
        prices = PRICES.format(currency="USD", concrete=200).replace("steel = 0.8\n", "")
        prices += entries.format(size=size)
        (tmp_path / "own.toml").write_text(prices, encoding="utf-8")
        path = job_file(tmp_path, f'{US}[options]\nprices = "own.toml"\n')
        outcome = run_here(capsys, "options", str(path))
        assert outcome.code == 0, outcome.err
        assert ("#O8, which no bar catalogue" in _words(outcome.out)) == told


def test_bands_and_order_are_told(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Each chosen option has its range of cost and carbon, each section whether the order stays."""
    path = job_file(tmp_path, ALL_LEVERS)
    text = run_here(capsys, "options", str(path)).out
    (section,) = options(read_job(path)).sections
    chosen = len(section.chosen)
    assert len(_lines(text, "placed cost with low and high factors: ")) == chosen > 1
    assert len(_lines(text, "carbon with low and high factors: ")) == chosen
    word = "keep" if section.order_survives else "do NOT keep"
    assert f" {word} their order with low and high factors" in _words(text)
    for option in section.chosen:
        cost = option.measures.cost
        assert cost is not None
        assert f"placed cost with low and high factors: {cost.low:.2f} to {cost.high:.2f}" in text


def test_every_chosen_option_is_shown_with_its_levers(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """A table each, headed by number and label; levers in the list, all points in full."""
    path = job_file(tmp_path, ALL_LEVERS)
    text = run_here(capsys, "options", str(path)).out
    (section,) = options(read_job(path)).sections
    for option in section.chosen:
        assert f"Option {option.number}: {option.checked.layout.label}\n" in text
        for point in option.accept:
            assert f"- {point}" in _words(text)
    assert f" all {len(section.trade_off)} layouts that no other " in _words(text)
    assert any(option.levers for option in section.chosen)


def test_not_proved_is_said(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """With so little work that some families are done and some are not, the report says so."""
    text = US.replace("keep = 3", "keep = 3\nwork_limit = 1e-6").replace("150 kip", "290 kip")
    path = job_file(tmp_path, text.replace('["#7", "#8"]', WIDE_SIZES))
    (section,) = options(read_job(path)).sections
    assert section.trade_off
    assert not section.proved
    outcome = run_here(capsys, "options", str(path))
    assert "NOT PROVED" in outcome.out
    assert "Proved:" not in outcome.out
    assert "work_limit" in outcome.out


def test_nothing_found_in_time_is_not_nothing_possible(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """If the work limit stopped the search at once, nobody is told that no layout passes."""
    text = US.replace("keep = 3", "keep = 3\nwork_limit = 1e-9")
    outcome = run_here(capsys, "options", str(job_file(tmp_path, text)))
    assert "NOT PROVED" in outcome.out


def test_palette_is_shown(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Sizes, totals, savings, and the layout of each section with the last choice."""
    text = _with_second(ALL_LEVERS, "B2", "330 kip*ft")
    text = _with_second(text, "B3 too weak", "700 kip*ft")
    path = job_file(tmp_path, text)
    outcome = run_here(capsys, "options", str(path))
    palette = options(read_job(path)).palette
    assert palette is not None
    place = outcome.out.index("Bar sizes for the whole job")
    shown = outcome.out[place:]
    assert "Left out, having no layout at all: B3 too weak" in shown
    assert len(palette.choices) > 1
    for choice in palette.choices:
        sizes = ", ".join(bar.designation for bar in choice.sizes)
        (line,) = [line for line in shown.splitlines() if line.startswith(f"{sizes} ")]
        assert f"{choice.total:.2f}" in line
        assert (f"{choice.saving:.2f}" in line) == (choice.limit > palette.choices[0].limit)
    for mark, candidate in zip(("B1", "B2"), palette.choices[-1].layouts, strict=True):
        assert f"  {mark}: {candidate.layout.label}\n" in shown


def test_palette_too_small(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Two sections without a common size and a palette of one: said in words."""
    text = _with_second(f"{US}[options]\npalette = 1\n", "B2", "150 kip*ft")
    head, _, rest = text.rpartition('stirrup = "#4"')
    text = head + 'sizes = ["#10"]\nstirrup = "#4"' + rest
    outcome = run_here(capsys, "options", str(job_file(tmp_path, text)))
    assert outcome.code == 0
    assert "No choice of up to 1 sizes serves every section." in outcome.out


# ---------------------------------------------------------------- width and characters

LONG = US.replace("Small job", "t" * 200).replace('"B1"', f'"{"M" * 80}"')
JOBS = {
    "bars alone": US,
    "SI": SI,
    "all levers": ALL_LEVERS,
    "all levers in SI": ALL_LEVERS_SI,
    "long mark and title": LONG,
    "long mark in the palette": f"{LONG}[options]\npalette = 2\n",
    "failing": SMALL_JOB + 'layers = ["8 #8", "2 #5"]\n',
    "no option": US.replace("150 kip*ft", "600 kip*ft"),
    "nine layers of two sizes": US.replace(
        '["4 #8", "2 #8"]', str(["2 #8 + 3 #7"] * 4 + ["2 #8 + 1 #5"] * 4)
    ),
    "great moment in SI": ALL_LEVERS_SI.replace("200 kN*m", "21000 kN*m")
    .replace('"350 mm"', '"1500 mm"')
    .replace('"600 mm"', '"2400 mm"')
    .replace('["300 mm"]', '["1600 mm"]')
    .replace('["650 mm"]', '["2500 mm"]')
    .replace('["16", "19", "22", "25", "29"]', '["36", "43", "57"]')
    .replace('["4 25", "2 25"]', '["12 57", "12 57"]'),
    "by strength": ALL_LEVERS.replace('steel = "A615-60"', 'fy = "60 ksi"'),
}


@pytest.mark.parametrize("name", JOBS)
@pytest.mark.parametrize("plain", [False, True], ids=["drawn", "plain"])
def test_fits_80_columns(
    name: str, plain: bool, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """No line is wider than 80 columns, no figure is cut; plain text is ASCII."""
    arguments = ["--plain"] if plain else []
    outcome = run_here(capsys, "options", str(job_file(tmp_path, JOBS[name])), *arguments)
    assert outcome.code in (0, 1), outcome.err
    assert [line for line in outcome.out.splitlines() if cell_len(line) > 80] == []
    assert "…" not in outcome.out
    assert outcome.out.isascii() or not plain


@pytest.mark.parametrize(("currency", "concrete"), [("USD", "200"), ("ABCDEFGH", "999999")])
def test_currencies_fit(
    currency: str, concrete: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Eight letters and costs of six figures are neither cut nor wider than the page."""
    prices = PRICES.format(currency=currency, concrete=concrete)
    (tmp_path / "own.toml").write_text(prices, encoding="utf-8")
    path = job_file(tmp_path, ALL_LEVERS.replace('"demo"', '"own.toml"'))
    outcome = run_here(capsys, "options", str(path))
    assert outcome.code == 0, outcome.err
    assert [line for line in outcome.out.splitlines() if cell_len(line) > 80] == []
    assert "…" not in outcome.out
    assert f"placed cost [{currency}/ft]" in _words(outcome.out)


def test_marks_are_shown_as_they_are(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A mark that looks like mark-up of the terminal comes out letter by letter."""
    text = f"{US.replace(chr(34) + 'B1', chr(34) + '[red]B1[/red]')}[options]\npalette = 1\n"
    outcome = run_here(capsys, "options", str(job_file(tmp_path, text)))
    assert outcome.out.count("[red]B1[/red]") == 2


# ---------------------------------------------------------------- JSON


def _no_constant(name: str) -> float:
    """Refuse NaN and Infinity, which are no JSON (RFC 8259, section 6)."""
    message = f"{name} in JSON"
    raise ValueError(message)


def _data(capsys: pytest.CaptureFixture[str], path: Path, *arguments: str) -> dict[str, Any]:
    outcome = run_here(capsys, "options", str(path), "--json", "-", *arguments)
    assert outcome.err == ""
    data: dict[str, Any] = json.loads(outcome.out, parse_constant=_no_constant)
    return data


def _numbers(value: Any) -> Iterator[float]:
    """All numbers at any depth."""
    if isinstance(value, dict):
        value = list(value.values())
    if isinstance(value, list):
        for item in value:
            yield from _numbers(item)
    elif isinstance(value, int | float):
        yield float(value)


TRADE = {
    "us": ("in", "in^2", "kip*ft", "lb/ft"),
    "si": ("mm", "mm^2", "kN*m", "kg/m"),
}
MOMENT = {"us": 12_000.0, "si": 1e6}  # inner units in one of the trade's
UNIT_OF = {"length": 0, "area": 1, "moment": 2, "mass_per_length": 3}


def _assert_section(data: dict[str, Any], section: SectionOptions, system: str) -> None:
    assert data["mark"] == section.problem.section.mark
    assert data["proved"] is section.proved
    assert data["order_survives"] is section.order_survives
    drawn = section.drawn.checked
    assert data["drawn"]["label"] == drawn.layout.label
    assert data["drawn"]["ok"] is drawn.ok
    assert data["drawn"]["phi_Mn"] == pytest.approx(drawn.phi_Mn / MOMENT[system], rel=1e-12)
    assert len(data["trade_off"]) == len(section.trade_off)
    for item, option in zip(data["trade_off"], section.trade_off, strict=True):
        assert item["number"] == option.number
        assert item["best_at"] == list(option.reasons)
        assert item["label"] == option.checked.layout.label
        assert [tuple(lever.values()) for lever in item["levers"]] == list(option.levers)
        assert item["to_be_agreed"] == list(option.accept)
        measures = item["measures"]
        assert measures["mass"] == item["mass_per_length"] == option.measures.mass
        assert measures["concrete"] == option.checked.section.outline.area
        if option.measures.cost is not None:
            assert (
                measures["cost"]["low"] <= measures["cost"]["typical"] <= measures["cost"]["high"]
            )
            assert measures["carbon"]["typical"] == option.measures.carbon.typical  # type: ignore[union-attr]
        else:
            assert measures["cost"] is measures["carbon"] is None
        for row, difference in zip(item["differences"], option.differences, strict=True):
            assert row["name"] == difference.name
            assert row["percent"] == difference.percent
            factor = MOMENT[system] if difference.kind == "moment" else 1.0
            for name in ("drawn", "option", "change"):
                value = getattr(difference, name)
                expected = None if value is None else pytest.approx(value / factor, rel=1e-12)
                assert row[name] == expected
            if difference.kind in UNIT_OF:
                assert row["unit"] == TRADE[system][UNIT_OF[difference.kind]]


@pytest.mark.parametrize("name", ["bars alone", "SI", "all levers", "all levers in SI", "failing",
                                  "no option"])  # fmt: skip
def test_json(name: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """What the Python result carries, finite, in the units of the trade."""
    path = job_file(tmp_path, JOBS[name])
    data, result = _data(capsys, path), options(read_job(path))
    assert (data["format"], data["version"]) == ("cagewright/options", 1)
    assert data["code"] == result.job.edition.name
    system = result.job.edition.units
    assert [data["units"][kind] for kind in UNIT_OF] == list(TRADE[system])
    assert "licensed design professional" in data["caution"]
    assert all(math.isfinite(number) for number in _numbers(data))
    for item, section in zip(data["sections"], result.sections, strict=True):
        _assert_section(item, section, system)
    if result.job.prices is None:
        assert data["prices"] is None
    else:
        assert data["prices"] == {"name": "demo", "currency": "DEMO", "invented": True}
    if result.palette is None:
        assert data["palette"] is None
    else:
        choices = result.palette.choices
        assert data["palette"]["proved"] is True
        assert [item["total"] for item in data["palette"]["choices"]] == [c.total for c in choices]
        assert [item["sizes"] for item in data["palette"]["choices"]] == [
            [bar.designation for bar in choice.sizes] for choice in choices
        ]


def test_json_of_hand_made_figures(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """6 #8 of 2.670 lb/ft and 0.79 in2 (ASTM A615 Table 1), Mu as the job gives it."""
    data = _data(capsys, job_file(tmp_path, US))
    (section,) = data["sections"]
    assert section["Mu"] == 150.0
    assert section["drawn"]["mass_per_length"] == pytest.approx(16.02, rel=1e-12)
    assert section["drawn"]["As"] == pytest.approx(4.74, rel=1e-12)
    assert section["drawn"]["measures"]["concrete"] == 336.0
    rows = {row["name"]: row for row in section["trade_off"][0]["differences"]}
    assert rows["steel mass"]["drawn"] == pytest.approx(16.02, rel=1e-12)
    assert rows["phi Mn"]["unit"] == "kip*ft"
    # 0.9 * 4.74 * 60 (20.833 - 5.975/2)/12 kip*ft.
    assert rows["phi Mn"]["drawn"] == pytest.approx(380.7, abs=0.05)
    assert rows["reserve over Mu"]["drawn"] == pytest.approx(100 * (380.7 / 150 - 1), abs=0.05)


def test_json_units_of_money_carbon_and_percent(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """A reader of the JSON alone has to know the unit of every row that has one."""
    data = _data(capsys, job_file(tmp_path, ALL_LEVERS))
    rows = {row["name"]: row["unit"] for row in data["sections"][0]["trade_off"][0]["differences"]}
    assert rows["placed cost"] == "DEMO/ft"
    assert rows["carbon"] == "kgCO2e/ft"
    assert rows["reserve over Mu"] == "%"


def test_json_file_beside_the_text(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The file holds what standard output would; the text is the same with and without it."""
    path, target = job_file(tmp_path, FEW_LEVERS), tmp_path / "out.json"
    text = run_here(capsys, "options", str(path))
    both = run_here(capsys, "options", str(path), "--json", str(target))
    assert both == text
    alone = run_here(capsys, "options", str(path), "--json", "-")
    assert alone.code == 0
    assert target.read_text(encoding="utf-8") == alone.out
    assert re.match(r"\{\n", alone.out)


def test_json_exit_code_when_nothing_passes(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """JSON alone has the exit code of the text."""
    path = job_file(tmp_path, JOBS["no option"])
    outcome = run_here(capsys, "options", str(path), "--json", "-")
    assert outcome.code == 1
    (section,) = json.loads(outcome.out)["sections"]
    assert (section["trade_off"], section["drawn"]["ok"], section["proved"]) == ([], False, True)


# ---------------------------------------------------------------- determinism


def test_bytes_do_not_depend_on_the_hash_seed(tmp_path: Path) -> None:
    """Text and JSON of two processes with different hash seeds are equal, byte for byte."""
    job_file(tmp_path, _with_second(FEW_LEVERS, "B2", "330 kip*ft", '["5 #8"]'))
    first, second = (
        run_bytes(
            "options",
            "job.toml",
            "--json",
            f"{seed}.json",
            cwd=tmp_path,
            env=environment(PYTHONHASHSEED=seed),
        )
        for seed in ("1", "2")
    )
    assert first.returncode == second.returncode == 0, first.stderr
    assert (first.stdout, first.stderr) == (second.stdout, second.stderr)
    assert len(first.stdout) > 2000
    assert (tmp_path / "1.json").read_bytes() == (tmp_path / "2.json").read_bytes()


def test_a_second_run_in_one_process_gives_the_same(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Nothing is carried over from run to run."""
    path = str(job_file(tmp_path, FEW_LEVERS))
    first = run_here(capsys, "options", path)
    assert first.code == 0
    assert run_here(capsys, "options", path) == first
