"""Strength and service stress of the enumeration against printed examples and closed formulas."""

from __future__ import annotations

import numpy as np
import pytest

from tests.exhaustive.cases import Case
from tests.exhaustive.mechanics import beta1, flexure, pack, service_stress
from tests.exhaustive.samples import si_case, us_case


def slice_forces(
    case: Case, bars: list[tuple[float, float, float]], c: float
) -> tuple[float, float]:
    """Return axial force and moment about the compression face from thin horizontal slices."""
    edge = min(beta1(case) * c, case.depth)
    count = 200_000
    y = (np.arange(count) + 0.5) * edge / count
    width = np.zeros(count)
    top = 0.0
    for strip_width, height in case.strips:
        width[(y >= top) & (y < top + height)] = strip_width
        top += height
    force = moment = 0.0
    every = [*bars, *((depth, area, db) for db, area, depth in case.opposite)]
    for depth, area, db in every:
        width[np.abs(y - depth) < db / 2] -= area / db
        modulus = 200_000.0 if case.si else 29e6
        stress = max(-case.fy, min(case.fy, modulus * 0.003 * (c - depth) / c))
        force += stress * area
        moment += stress * area * depth
    concrete = 0.85 * case.fc * width * edge / count
    return force + float(concrete.sum()), moment + float((concrete * y).sum())


def test_one_layer_equals_the_closed_formula() -> None:
    """Under-reinforced rectangle: Mn = As fy (d - a/2) with a = As fy/(0.85 fc b)."""
    result = flexure(us_case(), pack([[(21.5, 2.37, 1.0)], [(21.0, 1.58, 1.0)]], [21.5, 21.0]))
    for row, (d, area) in enumerate(((21.5, 2.37), (21.0, 1.58))):
        a = area * 60_000 / (0.85 * 4000 * 10)
        assert result.c[row] == pytest.approx(a / 0.85, rel=1e-12)
        assert result.Mn[row] == pytest.approx(area * 60_000 * (d - a / 2), rel=1e-12)
        assert result.eps_t[row] == pytest.approx(0.003 * (d * 0.85 / a - 1), rel=1e-12)
        assert result.phi[row] == 0.9


def test_printed_example_in_the_transition_zone() -> None:
    """McCormac & Brown, 9th ed., Ex. 3.3: 3 #11 in 12 in, a = 6.88 in, eps_t = 0.00256.

    phi by Table 21.2.2 with the printed strain: 0.65 + 0.25 (0.00256 - 0.002)/0.003 = 0.6967; half
    a unit of the strain's last digit is 0.0004 of it.
    """
    case = us_case(strips=((12.0, 18.0),), web=12.0, tension_width=12.0, depth=18.0, edition="14")
    result = flexure(case, pack([[(15.0, 4.68, 1.41)]], [15.0]))
    assert 0.85 * result.c[0] == pytest.approx(6.88, abs=0.005)
    assert result.eps_t[0] == pytest.approx(0.00256, abs=0.000005)
    assert result.phi[0] == pytest.approx(0.6967, abs=0.0004)


def test_printed_example_in_si() -> None:
    """McCormac & Brown, 9th ed., Ex. 2.10: 3 No. 25, 300 x 430 mm, a = 90 mm, Mn = 247.4 kN*m."""
    result = flexure(si_case(), pack([[(430.0, 1530.0, 25.4)]], [430.0]))
    assert 0.85 * result.c[0] == pytest.approx(90, abs=0.5)
    assert result.Mn[0] / 1e6 == pytest.approx(247.4, abs=0.05)


def test_printed_t_section_with_bars_in_rows() -> None:
    """Limbrunner & Aghayere, problem 3-9: 7 #11, flange 60 x 4 in, web 12 in, Mn = 1246 kip*ft.

    The block reaches into the web: C of the flange is 612 of 655.2 kip, the web carries the rest.
    """
    case = us_case(
        strips=((60.0, 4.0), (12.0, 26.0)), web=12.0, tension_width=12.0, depth=30.0, fc=3000.0
    )
    rows = [(23.5, 6.24, 1.41), (27.0, 4.68, 1.41)]  # 4 and 3 bars, centroid at 25 in
    result = flexure(case, pack([rows], [27.0]))
    assert result.Mn[0] / 12_000 == pytest.approx(1246, abs=0.5)
    assert 0.85 * result.c[0] == pytest.approx(4 + 43.2 / (0.85 * 3 * 12), rel=1e-9)


def test_compression_bars_displace_concrete() -> None:
    """The beam of McCormac & Brown, 9th ed., Ex. 5.7, with 0.85 fc deducted at the bars.

    Both yield: a = (4.25 * 60 + 2 * 2.55)/(2.55 * 14) = 7.286 in and
    Mn = 260.1 (24 - a/2) + 2 (60 - 2.55)(24 - 2.5) = 7765 kip*in, without the deduction 7789.
    """
    case = us_case(
        strips=((14.0, 27.0),),
        web=14.0,
        tension_width=14.0,
        depth=27.0,
        fc=3000.0,
        opposite=((1.128, 2.0, 2.5),),
        count_opposite=True,
    )
    result = flexure(case, pack([[(24.0, 6.25, 1.41)]], [24.0]))
    a = (4.25 * 60 + 2 * 2.55) / (2.55 * 14)
    expected = 2.55 * 14 * a * (24 - a / 2) + 2 * (60 - 2.55) * 21.5
    assert 0.85 * result.c[0] == pytest.approx(a, rel=1e-9)
    assert result.Mn[0] / 1000 == pytest.approx(expected, rel=1e-9)


@pytest.mark.parametrize(
    ("strips", "bars", "opposite"),
    [
        # The edge of the block cuts through the opposite bars.
        (((10.0, 24.0),), [(21.0, 2.0, 1.0)], ((1.0, 1.2, 3.6),)),
        # Two layers of tension bars lie near or above the neutral axis.
        (((10.0, 24.0),), [(21.0, 5.0, 1.41), (15.0, 5.0, 1.41), (9.0, 5.0, 1.41)], ()),
        # Flange at the compression face, web, flange at the tension face.
        (((18.0, 3.0), (8.0, 17.0), (14.0, 4.0)), [(21.0, 6.0, 1.27), (18.0, 3.0, 1.0)], ()),
    ],
)
def test_resultants_of_thin_slices_balance(
    strips: tuple[tuple[float, float], ...],
    bars: list[tuple[float, float, float]],
    opposite: tuple[tuple[float, float, float], ...],
) -> None:
    """200,000 slices find no axial force at c and the same moment.

    An edge of a strip or bar cut a slice (0.0001 in at most) too early or late, 10 in wide, shifts
    the concrete force by 0.85 * 4000 * 10 * 0.0001 = 3.4 lbf, within the depth of the section.
    """
    case = us_case(strips=strips, opposite=opposite, count_opposite=True)
    result = flexure(case, pack([bars], [bars[0][0]]))
    force, moment = slice_forces(case, bars, float(result.c[0]))
    assert abs(force) < 4
    assert -moment == pytest.approx(result.Mn[0], abs=4 * case.depth)


@pytest.mark.parametrize(
    ("fc", "expected"),
    [(3000.0, 0.85), (4000.0, 0.85), (5000.0, 0.80), (8000.0, 0.65), (10_000.0, 0.65)],
)
def test_beta1(fc: float, expected: float) -> None:
    """ACI 318-19, Table 22.2.2.4.3, at its break points and between."""
    assert beta1(us_case(fc=fc)) == pytest.approx(expected, abs=1e-12)


def test_phi_ends_where_the_edition_says() -> None:
    """Grade 80: full phi from 0.005 in 318-14, from eps_ty + 0.003 = 0.00576 in 318-19.

    The area is chosen for eps_t = 0.0052, c = 0.003/0.0082 * 20 in.
    """
    c = 0.003 / 0.0082 * 20
    groups = pack([[(20.0, 0.85 * 4000 * 10 * 0.85 * c / 80_000, 1.0)]], [20.0])
    old = flexure(us_case(fy=80_000.0, edition="14"), groups)
    new = flexure(us_case(fy=80_000.0, edition="19"), groups)
    assert old.eps_t[0] == pytest.approx(0.0052, rel=1e-9)
    assert old.phi[0] == 0.9
    eps_ty = 80 / 29_000
    assert new.phi[0] == pytest.approx(0.65 + 0.25 * (0.0052 - eps_ty) / 0.003, rel=1e-9)


def test_printed_service_stress() -> None:
    """McCormac & Brown, 9th ed., Ex. 2.3: b = 12, d = 17 in, 3.00 in^2, n = 9, 70 kip*ft.

    Printed 18,996 psi comes from x = 6.78 in and Icr = 4067 in^4, so a digit of those is allowed
    for: 0.005/10.22 + 0.5/4067 of the stress, 12 psi.
    """
    case = us_case(
        strips=((12.0, 20.0),),
        web=12.0,
        tension_width=12.0,
        depth=20.0,
        Ec=29e6 / 9,
        Ms=70 * 12_000.0,
    )
    stress = service_stress(case, pack([[(17.0, 3.0, 1.128)]], [17.0]))
    assert stress[0] == pytest.approx(18_996, abs=12)


def test_service_stress_with_counted_opposite_bars() -> None:
    """Closed root of b x^2/2 + (n-1) A'(x - d') = n A (d - x), n = 8, and its Icr."""
    b, d, area, n, other, near = 10.0, 21.0, 2.37, 8.0, 0.88, 2.5
    case = us_case(Ec=29e6 / n, Ms=1e6, opposite=((0.75, other, near),), count_opposite=True)
    linear = n * area + (n - 1) * other
    x = (-linear + (linear**2 + 2 * b * (n * area * d + (n - 1) * other * near)) ** 0.5) / b
    inertia = b * x**3 / 3 + n * area * (d - x) ** 2 + (n - 1) * other * (x - near) ** 2
    stress = service_stress(case, pack([[(d, area, 1.0)]], [d]))
    assert stress[0] == pytest.approx(n * 1e6 * (d - x) / inertia, rel=1e-9)


def test_service_stress_of_a_section_with_flanges() -> None:
    """The neutral axis lies in the web: S of 20 x 4 flange and 8 in web about x is that of bars."""
    case = us_case(strips=((20.0, 4.0), (8.0, 20.0)), Ec=29e6 / 8, Ms=2e6)
    linear, constant = 80 - 32 + 8 * 6.0, 80 * 2 - 32 * 2 + 8 * 6.0 * 21
    x = (-linear + (linear**2 + 2 * 8 * constant) ** 0.5) / 8
    assert x > 4
    inertia = 20 * x**3 / 3 - 12 * (x - 4) ** 3 / 3 + 48 * (21 - x) ** 2
    stress = service_stress(case, pack([[(21.0, 6.0, 1.41)]], [21.0]))
    assert stress[0] == pytest.approx(8 * 2e6 * (21 - x) / inertia, rel=1e-9)


def test_without_service_moment_two_thirds_of_yield() -> None:
    """ACI 318, 24.3.2.1 permits fs = 2/3 fy: 40,000 psi of Grade 60."""
    assert service_stress(us_case(), pack([[(21.0, 2.0, 1.0)]], [21.0]))[0] == pytest.approx(40_000)
