"""Moments and shears by coefficients against print, simple statics and elastic analysis."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from engine.beams.coefficients import coefficient_demands, coefficient_faults
from engine.beams.envelopes import elastic_demands
from engine.beams.spans import FIXED, Beam, LoadCase, PointLoad, SupportKind, UniformLoad
from engine.editions import EDITIONS
from engine.errors import OutOfRangeError
from engine.outlines import Flange, Outline
from tests.beams.random_beams import MODULUS, plain_beam

US = EDITIONS["ACI 318-19"]
WIDTH, CLEAR, D, Q = 12.0, 240.0, 100.0, 150.0
L = CLEAR + WIDTH
WU = 1.2 * D + 1.6 * Q
SOFT = 1e9  # below 8 times 4 E I/L of the beams below [lbf*in]


def beam_of(
    spans: int,
    *,
    held: float = SOFT,
    kind: SupportKind = SupportKind.COLUMN,
    dead: float = D,
    live: float = Q,
) -> Beam:
    """Return equal spans whose end supports hold."""
    stiffness = (held, *[0.0] * (spans - 1), held)
    lengths = [L] * spans
    return plain_beam(lengths, dead=dead, live=live, width=WIDTH, stiffness=stiffness, kind=kind)


def faces(beam: Beam) -> list[tuple[float, float]]:
    """Return the hogging moments at the faces of each span per wu ln^2."""
    found = coefficient_demands(beam, US, sustained=0.0, modulus=MODULUS)
    unit = WU * CLEAR**2
    return [(-float(each.Mu_least[0]) / unit, -float(each.Mu_least[-1]) / unit) for each in found]


# ------------------------------------------------------------------- print


def test_mccormac_slab() -> None:
    """McCormac & Brown, 9th ed., Ex. 14.1: ln = 13 ft, 80 and 165 psf, spandrel ends.

    wu = 360 psf and 6084 ft-lb at the first interior support, for a strip of 1 ft; the other
    coefficients are those of its Table 14.1.
    """
    foot = 12.0
    beam = plain_beam(
        [14 * foot] * 4,
        dead=80 / foot,
        live=165 / foot,
        width=foot,
        stiffness=(1e5, 0.0, 0.0, 0.0, 1e5),
        kind=SupportKind.GIRDER,
        outline=Outline(web=foot, depth=5.6),
    )
    assert coefficient_faults(beam) == ()
    first, second, *_ = coefficient_demands(beam, US, sustained=0.0, modulus=MODULUS)
    assert -first.Mu_least[-1] / foot == pytest.approx(6084.0, rel=1e-12)
    unit = 360 * 13**2 * foot
    assert -first.Mu_least[0] == pytest.approx(unit / 24)
    assert first.Mu_most.max() == pytest.approx(unit / 14)
    assert second.Mu_most.max() == pytest.approx(unit / 16)
    assert -second.Mu_least[[0, -1]] == pytest.approx([unit / 11, unit / 11])
    assert first.Vu[[0, -1]] == pytest.approx([360 * 13 / 2, 1.15 * 360 * 13 / 2])
    assert second.Vu[[0, -1]] == pytest.approx([360 * 13 / 2, 360 * 13 / 2])


def test_hogging_coefficients() -> None:
    """ACI 318-19, Table 6.5.2: 1/16 at columns, 1/9 or 1/10 at first supports, else 1/11."""
    assert np.array(faces(beam_of(2))) == pytest.approx(
        np.array([[1 / 16, 1 / 9], [1 / 9, 1 / 16]])
    )
    expected = [[1 / 16, 1 / 10], [1 / 11, 1 / 11], [1 / 10, 1 / 16]]
    assert np.array(faces(beam_of(3))) == pytest.approx(np.array(expected))
    assert faces(beam_of(3, kind=SupportKind.GIRDER))[0][0] == pytest.approx(1 / 24)
    assert faces(beam_of(3, kind=SupportKind.WALL))[0][0] == pytest.approx(1 / 16)
    assert faces(beam_of(3, held=0.0))[0][0] == 0.0


def test_stiff_columns_take_a_twelfth() -> None:
    """Table 6.5.2: 1/12 where columns are more than 8 times as stiff as the beam."""
    inertia = beam_of(2).spans[0].gross_inertia
    limit = 8 * 4 * MODULUS * inertia / L
    assert faces(beam_of(2, held=limit * 0.999))[0][0] == pytest.approx(1 / 16)
    assert faces(beam_of(2, held=limit * 1.001))[0][0] == pytest.approx(1 / 12)
    girder = beam_of(2, held=FIXED, kind=SupportKind.GIRDER)
    assert faces(girder)[0] == pytest.approx((1 / 12, 1 / 9))


@pytest.mark.parametrize(("held", "coefficient"), [(SOFT, 1 / 14), (0.0, 1 / 11)])
def test_sagging_coefficients(held: float, coefficient: float) -> None:
    """Table 6.5.2: 1/14 with a held end, 1/11 with a free one, 1/16 inside."""
    first, inner, last = coefficient_demands(
        beam_of(3, held=held), US, sustained=0.0, modulus=MODULUS
    )
    unit = WU * CLEAR**2
    assert first.Mu_most.max() == pytest.approx(coefficient * unit)
    assert inner.Mu_most.max() == pytest.approx(unit / 16)
    assert last.Mu_most == pytest.approx(first.Mu_most[::-1])
    assert last.Mu_least == pytest.approx(first.Mu_least[::-1])
    assert last.Vu == pytest.approx(first.Vu[::-1])


def test_unequal_spans() -> None:
    """Hogging moments take the average clear span and the larger of two loads."""
    beam = plain_beam([L, 1.1 * L, L], dead=D, live=Q, width=WIDTH)
    spans = list(beam.spans)
    more = UniformLoad(case=LoadCase.DEAD, intensity=10.0, start=0.0, end=1.1 * L)
    spans[1] = replace(spans[1], loads=(*spans[1].loads, more))
    beam = replace(beam, spans=tuple(spans))
    first, inner, _ = coefficient_demands(beam, US, sustained=0.0, modulus=MODULUS)
    average = (CLEAR + 1.1 * L - WIDTH) / 2
    assert -first.Mu_least[-1] == pytest.approx((WU + 12.0) * average**2 / 10)
    assert -inner.Mu_least[0] == pytest.approx((WU + 12.0) * average**2 / 11)
    assert inner.Mu_most.max() == pytest.approx((WU + 12.0) * (1.1 * L - WIDTH) ** 2 / 16)
    assert first.Vu[-1] == pytest.approx(1.15 * WU * CLEAR / 2)


# ------------------------------------------------------------------- between the tables' places


def test_between_faces() -> None:
    """Parabola of all load about midspan; of dead load hung between the faces; live beyond."""
    found = coefficient_demands(beam_of(3), US, sustained=0.0, modulus=MODULUS)[1]
    y = found.x - WIDTH / 2
    most = WU * CLEAR**2 / 16 - WU * (y - CLEAR / 2) ** 2 / 2
    assert found.Mu_most == pytest.approx(np.maximum(most, 0.0))
    zero = CLEAR * (0.5 - math.sqrt(1 / 8))  # 0.146 ln, as trade tables have it (from memory)
    assert found.x[found.Mu_most > 0.0].min() - WIDTH / 2 == pytest.approx(zero, abs=3.0)
    assert zero / CLEAR == pytest.approx(0.146, abs=5e-4)
    least = -WU * CLEAR**2 / 11 + 1.2 * D * y * (CLEAR - y) / 2
    assert found.Mu_least == pytest.approx(np.minimum(least, 0.0))
    middle = len(y) // 2
    assert found.Vu[middle] == pytest.approx(1.6 * Q * CLEAR / 8)
    quarter = np.argmin(np.abs(y - CLEAR / 4))
    simple = 1.2 * D * CLEAR / 4 + 1.6 * Q * 0.75**2 * CLEAR / 2
    assert found.Vu[quarter] == pytest.approx(simple)
    straight = WU * np.abs(CLEAR / 2 - y)
    assert (found.Vu >= straight * (1 - 1e-12)).all()


def test_free_end_sags_up_to_its_support() -> None:
    """At an end that turns freely the sagging moment falls to zero at the face itself."""
    first, *_ = coefficient_demands(beam_of(3, held=0.0), US, sustained=0.0, modulus=MODULUS)
    y = first.x - WIDTH / 2
    assert first.Mu_most[0] == pytest.approx(0.0, abs=1e-6 * WU * CLEAR**2)
    assert first.Mu_most[1] > 0.0
    reach = math.sqrt(2 / 11) * CLEAR
    flat = (y >= reach * (1 - 1e-9)) & (y <= CLEAR / 2)
    assert flat.sum() > 2
    assert first.Mu_most[flat] == pytest.approx(WU * CLEAR**2 / 11)
    assert first.Mu_most[-1] == 0.0


def test_service_moments_have_the_same_shape() -> None:
    """With factors of one; dead load alone takes 1.4."""
    found = coefficient_demands(beam_of(3), US, sustained=0.0, modulus=MODULUS)[1]
    assert found.Ms_most.max() == pytest.approx((D + Q) * CLEAR**2 / 16)
    assert found.Ms_least[0] == pytest.approx(-(D + Q) * CLEAR**2 / 11)
    heavy = coefficient_demands(beam_of(3, live=0.0), US, sustained=0.0, modulus=MODULUS)[1]
    assert heavy.Mu_most.max() == pytest.approx(1.4 * D * CLEAR**2 / 16)
    assert heavy.Mu_least[0] == pytest.approx(-1.4 * D * CLEAR**2 / 11)
    assert heavy.Vu[0] == pytest.approx(1.4 * D * CLEAR / 2)


@pytest.mark.parametrize("spans", [2, 3, 5])
def test_deflections_are_elastic(spans: int) -> None:
    """Deflections and their moments are those of the elastic analysis."""
    beam = beam_of(spans)
    ours = coefficient_demands(beam, US, sustained=0.3, modulus=MODULUS)
    theirs = elastic_demands(beam, MODULUS, US, sustained=0.3)
    for mine, elastic in zip(ours, theirs, strict=True):
        assert mine.deflections is not None
        assert mine.deflections == elastic.deflections
        assert mine.deflections.total > 0.0


@pytest.mark.parametrize("live", [0.0, D, 2 * D, 3 * D])
def test_sagging_of_two_spans_covers_elastic_analysis(live: float) -> None:
    """On knife edges, where face and centreline are one, the coefficients' curve is above."""
    beam = plain_beam([L, L], dead=D, live=live, width=1e-3)
    mine, _ = coefficient_demands(beam, US, sustained=0.0, modulus=MODULUS)
    elastic, _ = elastic_demands(beam, MODULUS, US, sustained=0.0)
    at = np.interp(elastic.x, mine.x, mine.Mu_most)
    assert (at >= elastic.Mu_most - 2e-4 * mine.Mu_most.max()).all()


@given(st.floats(0.0, 1.0), st.floats(0.0, 1.0), st.floats(0.0, 1.0), st.integers(0, 2))
@settings(max_examples=50, deadline=None)
def test_hogging_is_on_the_safe_side(left: float, right: float, live: float, number: int) -> None:
    """No moments at the faces up to the tables', with any live load between, go below."""
    found = coefficient_demands(beam_of(3), US, sustained=0.0, modulus=MODULUS)[number]
    y = found.x - WIDTH / 2
    load = 1.2 * D + live * 1.6 * Q
    ends = left * found.Mu_least[0] * (1 - y / CLEAR) + right * found.Mu_least[-1] * y / CLEAR
    possible = ends + load * y * (CLEAR - y) / 2
    assert (possible >= found.Mu_least - 1e-9 * WU * CLEAR**2).all()


# ------------------------------------------------------------------- conditions


def test_no_faults() -> None:
    """Equal spans, spans at the limits and flanges of other widths are within 6.5.1."""
    assert coefficient_faults(beam_of(2)) == ()
    assert coefficient_faults(beam_of(2, live=3 * D)) == ()
    edge = plain_beam([L, 1.2 * CLEAR + WIDTH], dead=D, live=Q, width=WIDTH)
    assert coefficient_faults(edge) == ()
    flanged = [Outline(web=12.0, depth=24.0, top=Flange(width=w, thickness=5.0)) for w in (60, 70)]
    beam = beam_of(2)
    pairs = zip(beam.spans, flanged, strict=True)
    spans = tuple(replace(span, outline=outline) for span, outline in pairs)
    assert coefficient_faults(replace(beam, spans=spans)) == ()


def with_load(load: UniformLoad | PointLoad) -> Beam:
    """Put one more load on the first span."""
    beam = beam_of(2)
    first = replace(beam.spans[0], loads=(*beam.spans[0].loads, load))
    return replace(beam, spans=(first, *beam.spans[1:]))


def with_depth(depth: float) -> Beam:
    """Make the first span of another depth."""
    beam = beam_of(2)
    first = replace(beam.spans[0], outline=Outline(web=12.0, depth=depth))
    return replace(beam, spans=(first, *beam.spans[1:]))


FAULTY = {
    "one span": (beam_of(1), "6.5.1 (d)"),
    "cantilever": (plain_beam([L, L, 60.0], dead=D, hangs=(False, True)), "a cantilever"),
    "depth": (with_depth(20.0), "6.5.1 (a)"),
    "force": (with_load(PointLoad(case=LoadCase.DEAD, force=1.0, at=9.0)), "6.5.1 (b)"),
    "from": (
        with_load(UniformLoad(case=LoadCase.DEAD, intensity=1.0, start=1.0, end=L)),
        "6.5.1 (b)",
    ),
    "to": (
        with_load(UniformLoad(case=LoadCase.DEAD, intensity=1.0, start=0.0, end=L - 1.0)),
        "6.5.1 (b)",
    ),
    "up": (
        with_load(UniformLoad(case=LoadCase.LIVE, intensity=-2 * Q, start=0.0, end=L)),
        "loaded upwards",
    ),
    "live": (beam_of(2, live=3.01 * D), "live load of 301, more than 3 times"),
    "spans": (
        plain_beam([L, 1.21 * CLEAR + WIDTH], dead=D, width=WIDTH),
        "differ by more than 20 %",
    ),
}


@pytest.mark.parametrize("name", FAULTY)
def test_faults(name: str) -> None:
    """Each condition of 6.5.1 is named where it is not met, and the demands are refused."""
    beam, reason = FAULTY[name]
    faults = coefficient_faults(beam)
    assert any(reason in fault for fault in faults)
    with pytest.raises(OutOfRangeError, match=r"analysis: got a beam outside 6\.5") as caught:
        coefficient_demands(beam, US, sustained=0.0, modulus=MODULUS)
    assert all(fault in str(caught.value) for fault in faults)
