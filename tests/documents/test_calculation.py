"""The worked check adds up to the engine's figures, and its printed numbers to its results."""

from __future__ import annotations

import re

import pytest

from engine import CheckedLayout, State, check_layout
from optimizer.documents.calculation import worked_check
from optimizer.documents.forces import cracked, forces
from optimizer.documents.lines import Line, compared
from tests.documents.page_jobs import checked, ranked
from tests.engine.builders import si_layout, si_section, us_layout, us_section


def layouts() -> list[CheckedLayout]:
    """Return layouts of all kinds: rectangles, flanges, counted bars, failing ones."""
    found = [item.layout.checked for units in ("us", "si") for item in checked(units).sections]
    for units in ("us", "si"):
        for section in ranked(units).sections:
            found += [item.checked for item in section.layouts]
    return found


LAYOUTS = layouts()


def line_of(layout: CheckedLayout, subject: str) -> Line:
    """Return the one line whose subject starts so."""
    lines = [line for part in worked_check(layout).parts for line in part.lines]
    (found,) = [line for line in lines if line.subject.startswith(subject)]
    return found


def test_kinds_of_layouts() -> None:
    """The layouts below reach every branch: displaced concrete, all strengths, all verdicts."""
    assert any(forces(item).displaced > 0.0 for item in LAYOUTS)
    assert {item.phi for item in LAYOUTS} >= {0.9, 0.65}
    assert any(0.65 < item.phi < 0.9 for item in LAYOUTS)
    states = {row.state for item in LAYOUTS for row in item.checks}
    assert states == set(State)


@pytest.mark.parametrize(
    "layout", LAYOUTS, ids=lambda item: f"{item.section.mark} {item.layout.label}"
)
def test_forces_balance_and_give_the_moment(layout: CheckedLayout) -> None:
    """Tension equals compression at the engine's c, and their moment is its Mn.

    The engine stops at 1e-12 of c; through the slopes of the forces 1e-9 is left for both sums.
    """
    found = forces(layout)
    assert found.steel == pytest.approx(found.concrete, rel=1e-9)
    assert found.moment == pytest.approx(layout.Mn, rel=1e-9)
    own = [bar for bar in found.bars if bar.own]
    assert sum(bar.area for bar in own) == pytest.approx(layout.As, rel=1e-12)
    assert sum(bar.area * bar.depth for bar in own) == pytest.approx(
        layout.As * layout.d, rel=1e-12
    )


@pytest.mark.parametrize(
    "layout", LAYOUTS, ids=lambda item: f"{item.section.mark} {item.layout.label}"
)
def test_service_stress_of_the_cracked_section(layout: CheckedLayout) -> None:
    """The page's n Ms (dt - x)/Icr is the engine's fs, where a service moment is given."""
    section = layout.section
    if section.Ms is None:
        assert line_of(layout, "Steel stress at service").formula == "f_{s} = (2/3) f_{y}"
        return
    state = cracked(layout, forces(layout).bars)
    n = section.steel.Es / section.concrete.Ec
    stress = n * abs(section.Ms) * (layout.dt - float(state.x[0])) / float(state.Icr[0])
    assert stress == pytest.approx(layout.service_stress, rel=1e-9)


_NUMBER = re.compile(r"−?\d+(?:\.\d+)?")


def evaluated(text: str) -> float:
    """Return what a line of numbers comes to when a reader types it into a calculator."""
    typed = text.replace("−", "-").replace("×", "*").replace("√", "sqrt ")
    typed = re.sub(r"sqrt (\d+(?:\.\d+)?)", r"(\1**0.5)", typed)
    typed = re.sub(r"(\d) \(", r"\1 * (", typed)
    assert re.fullmatch(r"[\d.+\-*/(), maxin]*", typed)
    return float(eval(typed, {"__builtins__": {}}, {"max": max, "min": min}))


# Printed to four digits each: a quotient or product of a few such numbers is good to 0.1 %, and
# the differences in these lines lose at most another factor of five.
_PRINTED = 5e-3
TYPED = (
    "Steel area", "Effective depth", "Depth of layer 1", "Depth of the block",
    "Depth of the neutral axis", "Nominal strength", "Least steel", "Layer 1, between",
    "Layer 1, tightest", "Largest spacing", "Modular ratio",
)  # fmt: skip


@pytest.mark.parametrize(
    "layout", LAYOUTS, ids=lambda item: f"{item.section.mark} {item.layout.label}"
)
def test_numbers_come_to_the_result(layout: CheckedLayout) -> None:
    """Typed into a calculator, the numbers of a line give its printed result."""
    lines = [line for part in worked_check(layout).parts for line in part.lines]
    typed = [line for line in lines if line.equal and line.subject.startswith(TYPED)]
    assert len(typed) >= 7
    for line in typed:
        result = float(_NUMBER.findall(line.result)[0].replace("−", "-"))
        assert evaluated(line.numbers) == pytest.approx(result, rel=_PRINTED), line.subject


def test_block_in_the_flange_by_hand() -> None:
    """4 #8 in 14 x 24 in: a = 3.16 x 60 000/(0.85 x 4000 x 14) = 3.983 in, c = a/0.85."""
    layout = check_layout(us_section(), us_layout("4 #8"))
    block = line_of(layout, "Depth of the block")
    assert block.numbers == "3.16 × 60000 / (0.85 × 4000 × 14)"
    assert block.result == "3.983 in"
    assert line_of(layout, "Depth of the neutral axis").result == "4.686 in"
    assert line_of(layout, "Net tensile strain").result == "0.01076 ≥ 0.00500"


def test_crack_control_by_hand() -> None:
    """2/3 fy = 280 MPa: s = min(380 - 2.5 x 52.7, 300) = 248.25 mm; printed to four digits."""
    layout = check_layout(si_section(), si_layout("4 25"))
    assert layout.section.stirrup.diameter == 12.7
    assert line_of(layout, "Steel stress at service").result == "280 MPa"
    result = float(line_of(layout, "Largest spacing").result.split()[0])
    assert result == pytest.approx(248.25, abs=0.0500001)


@pytest.mark.parametrize(
    "layout", LAYOUTS, ids=lambda item: f"{item.section.mark} {item.layout.label}"
)
def test_verdicts_are_those_of_the_rows(layout: CheckedLayout) -> None:
    """A line that belongs to a row carries its verdict; gaps may show it for each layer."""
    rows = {row.id: row for row in layout.checks}
    lines = [line for part in worked_check(layout).parts for line in part.lines if line.check]
    assert {line.check for line in lines} == set(rows)
    for line in lines:
        if line.check != "clear_gap":
            assert line.state is rows[line.check].state
    gaps = [line.state for line in lines if line.check == "clear_gap"]
    assert (State.FAILS in gaps) == (rows["clear_gap"].state is State.FAILS)


def test_comparison_parts_close_values() -> None:
    """Four digits are enough unless they would show a failing value equal to its limit."""
    assert compared(302.54, 300.0, "kip·ft", least=True, ok=True) == "302.5 ≥ 300 kip·ft"
    assert compared(299.999, 300.0, "kip·ft", least=True, ok=False) == "299.999 < 300 kip·ft"
    assert compared(10.0, 9.5, "in", least=False, ok=False) == "10 > 9.5 in"
    assert compared(9.0, 9.5, "in", least=False, ok=True) == "9 ≤ 9.5 in"
