"""Strength, ductility, minimum steel and service stress of batches of layouts."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from engine import (
    BarGroups,
    Batch,
    Flange,
    Outline,
    assess,
    flexural_state,
    place,
    required_share,
)
from engine.service import service_stress
from tests.engine.builders import si_layout, si_section, us_layout, us_section

BLOCK = 3400.0 * 14.0  # 0.85 f'c b of the 14 in web, f'c = 4000 psi
TWO_LAYERS = us_layout("4 #8", "2 #8")


def capacity(area: float, d: float) -> float:
    """Return 0.9 Mn of tension-controlled Grade 60 bars with their centroid at d."""
    return 0.9 * area * 60_000 * (d - area * 60_000 / BLOCK / 2)


def test_batch_gathers_layouts() -> None:
    """Largest size first, missing layers are zero."""
    batch = Batch.of([us_layout("2 #9 + 2 #7", "2 #7"), us_layout("3 #8")])
    assert [bar.designation for bar in batch.bars] == ["#9", "#8", "#7"]
    np.testing.assert_array_equal(batch.counts, [[[2, 0, 2], [0, 0, 2]], [[0, 3, 0], [0, 0, 0]]])
    np.testing.assert_allclose(batch.quantity([1.00, 0.79, 0.60]), [4.4, 2.37], rtol=1e-14)


def test_figures_of_two_layers() -> None:
    """4 #8 / 2 #8 in 14 x 24 in: layers at 21.5 and 19.5 in."""
    found = assess(us_section(), Batch.of([TWO_LAYERS])).row(0)
    d = (4 * 21.5 + 2 * 19.5) / 6
    a = 4.74 * 60_000 / BLOCK
    assert found.As == pytest.approx(4.74, rel=1e-14)
    assert [found.dt, found.d] == pytest.approx([21.5, d], rel=1e-14)
    assert found.As_min == pytest.approx(200 * 14 * d / 60_000, rel=1e-12)
    assert [found.a, found.c] == pytest.approx([a, a / 0.85], rel=1e-12)
    assert found.eps_t == pytest.approx(0.003 * (21.5 - a / 0.85) / (a / 0.85), rel=1e-12)
    assert found.phi == 0.9
    assert found.Mn == pytest.approx(capacity(4.74, d) / 0.9, rel=1e-12)
    assert found.phi_Mn == pytest.approx(capacity(4.74, d), rel=1e-12)
    assert found.height == pytest.approx(2 + 1 + 1 + 1, rel=1e-14)
    assert (found.strong, found.ductile, found.enough_steel, found.stack_fits) == (True,) * 4


def test_mixed_sizes_act_at_their_own_depths() -> None:
    """Every bar of layer 1 rests on the stirrup: #9 at 21.436, #7 at 21.5625 in; dt between."""
    found = assess(us_section(), Batch.of([us_layout("2 #9 + 2 #7", "2 #7")])).row(0)
    d9, d7, upper = 22 - 0.564, 22 - 0.4375, 22 - 1.128 - 1 - 0.4375
    assert found.dt == pytest.approx((2.0 * d9 + 1.2 * d7) / 3.2, rel=1e-12)
    assert found.d == pytest.approx((2.0 * d9 + 1.2 * d7 + 1.2 * upper) / 4.4, rel=1e-12)
    assert found.phi_Mn == pytest.approx(capacity(4.4, found.d), rel=1e-12)


@pytest.mark.parametrize("layers", [("4 #8",), ("2 #9 + 2 #7", "2 #7"), ("3 #6", "3 #5", "2 #5")])
def test_height_agrees_with_placement(layers: tuple[str, ...]) -> None:
    """Two ways to the innermost bar surface."""
    section, layout = us_section(layer_gap=1.25), us_layout(*layers)
    found = assess(section, Batch.of([layout, us_layout("2 #3")])).row(0)
    assert found.height == pytest.approx(place(section, layout).height, rel=1e-12)


@pytest.mark.parametrize(("share", "strong"), [(1.0, True), (1.000001, False)])
def test_strength_at_its_limit(share: float, strong: bool) -> None:
    """Phi Mn equal to Mu is enough, a millionth less is not."""
    section = us_section(Mu=capacity(3.16, 21.5) * share)
    found = assess(section, Batch.of([us_layout("4 #8")]))
    assert found.strong.tolist() == [strong]
    assert found.passes.tolist() == [strong]


def test_ductility_on_both_sides() -> None:
    """Grade 100 in 14 x 24 in: eps_t against eps_ty + 0.003 = 0.00645."""
    section = us_section(fy=100_000.0, Mu=1e6)
    found = assess(section, Batch.of([us_layout("3 #8"), us_layout("4 #8")]))
    c = np.array([2.37, 3.16]) * 100_000 / BLOCK / 0.85
    np.testing.assert_allclose(found.eps_t, 0.003 * (21.5 - c) / c, rtol=1e-12)
    assert found.ductile.tolist() == [True, False]


@pytest.mark.parametrize(("share", "enough"), [(0.999999, True), (1.000001, False)])
def test_four_thirds_exemption(share: float, enough: bool) -> None:
    """9.6.1.3: 0.62 in^2 is below 9.6.1.2 (1.51) but is 4/3 of what this moment needs."""
    moment = capacity(0.75 * 0.62, 24 - 2 - 0.3125) * share
    found = assess(us_section(Mu=moment), Batch.of([us_layout("2 #5")])).row(0)
    assert found.As < found.As_min
    assert found.strong
    assert found.enough_steel is enough


def test_stack_that_does_not_fit() -> None:
    """Between stirrups 8 in apart, 4 layers of #8 take 7 in, 5 take 9 in."""
    section = us_section(outline=Outline(web=14.0, depth=12.0), Mu=1e6)
    found = assess(section, Batch.of([us_layout(*["2 #8"] * 4), us_layout(*["2 #8"] * 5)]))
    assert found.stack_fits.tolist() == [True, False]
    assert not found.passes[1]


def test_counted_bars_opposite() -> None:
    """2 #6 at the top, 2.375 in deep, join the equilibrium; the layout's own figures stay."""
    plain = us_section()
    opposite = us_layout("2 #6")
    given = us_section(opposite=opposite)
    counted = us_section(opposite=opposite, count_opposite=True)
    batch = Batch.of([TWO_LAYERS])
    assert assess(given, batch).row(0) == assess(plain, batch).row(0)
    found = assess(counted, batch).row(0)
    bars = BarGroups(
        area=np.array([[3.16, 1.58, 0.88]]),
        depth=np.array([[21.5, 19.5, 2.375]]),
        diameter=np.array([[1.0, 1.0, 0.75]]),
    )
    state = flexural_state(plain.profile, plain.concrete, plain.steel, bars)
    assert found.Mn == pytest.approx(float(state.Mn[0]), rel=1e-12)
    assert found.As == pytest.approx(4.74, rel=1e-14)
    assert found.d == assess(plain, batch).row(0).d
    assert found.Mn > assess(plain, batch).row(0).Mn


def test_required_share_of_one_layer() -> None:
    """Closed form: 0.9 A fy (d - A fy/(2 0.85 f'c b)) = Mu."""
    moment = 2.5e6
    force = BLOCK * (21.5 - math.sqrt(21.5**2 - 2 * moment / 0.9 / BLOCK))
    found = required_share(us_section(Mu=moment), Batch.of([us_layout("4 #8"), us_layout("2 #8")]))
    expected = force / 60_000 / np.array([3.16, 1.58])
    np.testing.assert_allclose(found, expected, rtol=1e-9)
    assert found[0] < 1.0 < found[1]


def test_required_share_that_does_not_exist() -> None:
    """No amount of bars at 21.5 in carries 100 times the moment."""
    batch = Batch.of([us_layout("4 #8")])
    assert required_share(us_section(Mu=3e8), batch).tolist() == [math.inf]


def test_required_share_of_a_layout_past_ductility() -> None:
    """10 #11 in this T are too weak because phi has dropped: less of the same bars does it.

    Their phi Mn is 7.39e6 lbf in; at 74 % of the area, where phi is still 0.90, it is 7.73e6.
    """
    outline = Outline(web=16.0, depth=24.0, top=Flange(width=40.0, thickness=3.0))
    section = us_section(code="ACI 318-14", fc=3000.0, fy=40_000.0, outline=outline, Mu=7.45e6)
    batch = Batch.of([us_layout("10 #11")])
    assert not assess(section, batch).strong[0]
    (share,) = required_share(section, batch)
    assert share < 0.74
    lesser = Batch(
        bars=tuple(replace(bar, area=bar.area * share) for bar in batch.bars), counts=batch.counts
    )
    np.testing.assert_allclose(assess(section, lesser).phi_Mn, [7.45e6], rtol=1e-8)


@pytest.mark.parametrize("target", [1.05, 1.15, 1.19, 1.21, 1.23])
def test_required_share_close_to_the_end_of_ductility(target: float) -> None:
    """6 #11 in a T of Grade 80 stay tension-controlled up to 1.233 times their area."""
    outline = Outline(web=12.0, depth=24.0, top=Flange(width=60.0, thickness=6.0))
    section = us_section(fc=3000.0, fy=80_000.0, outline=outline, Mu=1.0)
    batch = Batch.of([us_layout("6 #11")])
    larger = Batch(
        bars=tuple(replace(bar, area=bar.area * target) for bar in batch.bars), counts=batch.counts
    )
    enough = assess(section, larger)
    assert enough.ductile.all()
    asked = replace(section, Mu=float(enough.phi_Mn[0]))
    np.testing.assert_allclose(required_share(asked, batch), [target], rtol=1e-7)


def test_required_share_cut_short(monkeypatch: pytest.MonkeyPatch) -> None:
    """After five steps of false position the share is close, and still returned."""
    section, batch = us_section(Mu=2.5e6), Batch.of([us_layout("4 #8")])
    exact = required_share(section, batch)
    monkeypatch.setattr("engine.assessment._STEPS", 5)
    np.testing.assert_allclose(required_share(section, batch), exact, rtol=0.05)


def test_service_stress_without_analysis() -> None:
    """24.3.2.1: two thirds of fy."""
    np.testing.assert_allclose(
        service_stress(us_section(), Batch.of([TWO_LAYERS])), [40_000.0], rtol=1e-14
    )


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_service_stress_of_one_layer(sign: float) -> None:
    """Fs = Ms/(As j d) with k = sqrt((n rho)^2 + 2 n rho) - n rho and j = 1 - k/3."""
    moment = 1.8e6
    section = us_section(Mu=sign * 3e6, Ms=sign * moment)
    ratio = 29e6 / (57_000 * math.sqrt(4000)) * 3.16 / (14 * 21.5)
    k = math.sqrt(ratio**2 + 2 * ratio) - ratio
    expected = moment / (3.16 * (1 - k / 3) * 21.5)
    found = service_stress(section, Batch.of([us_layout("4 #8")]))
    np.testing.assert_allclose(found, [expected], rtol=1e-12)


def test_service_stress_with_counted_bars_opposite() -> None:
    """The bars above the axis count n - 1 times: their concrete is there already."""
    section = us_section(Ms=1.8e6, opposite=us_layout("2 #6"), count_opposite=True)
    n = 29e6 / (57_000 * math.sqrt(4000))
    lower, upper = n * 3.16, (n - 1) * 0.88
    total = lower + upper
    x = (-total + math.sqrt(total**2 + 2 * 14 * (lower * 21.5 + upper * 2.375))) / 14
    inertia = 14 * x**3 / 3 + lower * (21.5 - x) ** 2 + upper * (x - 2.375) ** 2
    found = service_stress(section, Batch.of([us_layout("4 #8")]))
    np.testing.assert_allclose(found, [n * 1.8e6 * (21.5 - x) / inertia], rtol=1e-12)


def test_figures_in_millimetres() -> None:
    """4 No. 25 in 350 x 600 mm: d = 600 - 40 - 12.7 - 12.7."""
    found = assess(si_section(), Batch.of([si_layout("4 25")])).row(0)
    a = 2040 * 420 / (0.85 * 28 * 350)
    assert found.d == pytest.approx(534.6, rel=1e-14)
    assert found.Mn == pytest.approx(2040 * 420 * (534.6 - a / 2), rel=1e-12)
    assert found.As_min == pytest.approx(1.4 * 350 * 534.6 / 420, rel=1e-12)
