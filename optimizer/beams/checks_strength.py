"""Checks of strength along a beam: bending, shear, and the stirrups that carry it."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator

import numpy as np

from engine.beams.deep import is_deep
from engine.beams.shear import (
    PHI_SHEAR,
    concrete_shear,
    largest_steel_shear,
    least_stirrup_area,
    spacing_across,
    spacing_along,
    stirrup_shear,
)
from engine.beams.shear_rules import shear_rules
from engine.beams.spans import Overhang, PointLoad
from engine.beams.stirrup_anchorage import embedment_of_hook
from engine.check_row import State, ratio_of, verdict
from engine.outlines import FloatArray
from engine.units import plain
from optimizer.beams.check_row import BeamCheck
from optimizer.beams.checks_built import SLACK, Built
from optimizer.beams.frames import stirrup_yield
from optimizer.beams.plans import shear_at_depth

_NOTHING = 1e-6  # share of the span's largest moment that is no moment
_ROUNDING = 1e-6
_FIRST = {"us": 3.0, "si": 75.0}  # first stirrup from the face, common practice [in or mm]
_PRACTICE = "common practice"


def strength_rows(built: Built) -> Iterator[BeamCheck]:
    """Rows of bending and shear of all spans.

    Parameters
    ----------
    built : Built
        Finished beam.

    Yields
    ------
    BeamCheck
        `flexural_strength`, `shear_strength`, `shear_section`, `stirrup_area`,
        `stirrup_spacing`, `stirrup_legs`, `first_stirrup`, `stirrup_anchorage`, `deep_beam`.
    """
    for span in range(len(built.design.demands)):
        yield _flexure(built, span, sagging=True)
        yield _flexure(built, span, sagging=False)
        yield from _Shear(built, span).rows()
        yield _deep(built, span)


def _flexure(built: Built, span: int, *, sagging: bool) -> BeamCheck:
    """Phi Mn against Mu where it comes nearest, 9.5.1.1."""
    design = built.design
    beam, demand, strength = design.problem.beam, design.demands[span], built.strengths[span]
    own = beam.spans[span]
    where = f"{own.mark} {'sagging' if sagging else 'hogging'}"
    signed = demand.Mu_most if sagging else -demand.Mu_least
    Mu = np.interp(strength.x, demand.x, np.maximum(signed, 0.0))
    capacity = strength.sagging if sagging else strength.hogging
    scale = max(float(demand.Mu_most.max()), -float(demand.Mu_least.min()))
    counts = scale * _NOTHING < Mu
    # Before a free tip moment and strength vanish together: there bars end at their cover, and
    # the last depth is left out, as where 9.7.3.4 is applied to them.
    tip = design.frame.sections[span].cover + design.problem.length_step
    tip = max(tip, min(built.depth(span), beam.clear_length(span) / 4.0))
    note = "bars count with the share that is developed there (9.7.3.1)"
    if own.overhang is not Overhang.NONE:
        note += "; the last depth before the tip left out"
    if own.overhang is Overhang.LEFT:
        counts &= strength.x - strength.x[0] > tip + SLACK
    elif own.overhang is Overhang.RIGHT:
        counts &= strength.x[-1] - strength.x > tip + SLACK
    if not counts.any():
        return BeamCheck(
            id="flexural_strength",
            clause="9.5.1.1",
            where=where,
            state=State.NOT_APPLICABLE,
            note=f"no {'sagging' if sagging else 'hogging'} moment",
        )
    ratio = np.where(counts, Mu / np.maximum(capacity, 1e-12 * scale), 0.0)
    worst = int(np.argmax(ratio))
    x, Mn = float(strength.x[worst]), float(capacity[worst])
    return BeamCheck(
        id="flexural_strength",
        clause="9.5.1.1",
        where=where,
        at=beam.origins[span] + x,
        quantity="moment",
        demand=float(Mu[worst]),
        limit=Mn,
        ratio=ratio_of(float(Mu[worst]), Mn),
        state=verdict(float(ratio[worst]) <= 1.0 + _ROUNDING),
        note=note,
    )


class _Shear:
    """Shear of one span, at the stations of its demand and where the spacing changes."""

    def __init__(self, built: Built, span: int) -> None:
        design = built.design
        self.built, self.span = built, span
        self.problem, self.frame = design.problem, design.frame
        self.plan = design.stirrups[span]
        self.section = design.frame.sections[span]
        self.concrete, self.bw = self.section.concrete, self.section.outline.web
        self.mark = self.problem.beam.spans[span].mark
        self.fyt = stirrup_yield(self.problem)
        self.rules = shear_rules(self.problem.edition)
        self.d = built.depth(span)
        demand = design.demands[span]
        self.start = float(demand.x[0])
        (_, left), (_, right), _ = self.plan.zones
        edges = [self.start + at for at in (left, right) if 0.0 <= at <= self.plan.clear]
        self.x = np.unique(np.concatenate((demand.x, edges)))
        reduced = shear_at_depth(self.problem.beam, span, demand, self.d)
        self.taken_at_d = bool((reduced < demand.Vu).any())
        self.Vu = np.interp(self.x, demand.x, reduced)
        self.s = np.array([built.spacing(span, float(x) - self.start) for x in self.x])
        depth = np.full(len(self.x), self.d)
        self.Vc = concrete_shear(self.concrete, self.bw, depth)
        self.Vs = np.maximum(self.Vu / PHI_SHEAR - self.Vc, 0.0)

    def rows(self) -> Iterator[BeamCheck]:
        """All rows of the span."""
        depth = np.full(len(self.x), self.d)
        area = np.full(len(self.x), self.frame.leg_area)
        strength = PHI_SHEAR * (self.Vc + stirrup_shear(area, self.fyt, depth, self.s))
        note = f"d = {self._length(self.d)}"
        note += "; Vu near the faces taken at d (9.4.3.2)" if self.taken_at_d else "; Vu at faces"
        yield self._worst("shear_strength", "9.5.1.1", "force", self.Vu, strength, self._at(note))
        section = PHI_SHEAR * (self.Vc + largest_steel_shear(self.concrete, self.bw, depth))
        note = "largest Vu the section can take with any stirrups"
        yield self._worst("shear_section", "22.5.1.2", "force", self.Vu, section, self._at(note))
        least = least_stirrup_area(self.concrete, self.bw, self.s, self.fyt)
        note = f"{self.frame.label}; least stirrups run along the whole span"
        yield self._worst(
            "stirrup_area", self.rules.least_clause, "area", least, area, self._at(note)
        )
        along = spacing_along(self.concrete, self.bw, depth, self.Vs)
        yield self._worst(
            "stirrup_spacing", "9.7.6.2.2", "length", self.s, along, self._at("along the beam")
        )
        yield self._legs()
        yield self._first()
        yield self._anchorage()

    def _legs(self) -> BeamCheck:
        if not self.rules.limits_across:
            return self._plain("stirrup_legs", "9.7.6.2.2", "no limit in the 2014 editions")
        width = self.bw - 2.0 * self.section.cover - self.frame.stirrup.diameter
        apart = np.full(len(self.x), width / (self.frame.legs - 1))
        limit = spacing_across(self.concrete, self.bw, np.full(len(self.x), self.d), self.Vs)
        note = f"{self.frame.legs} legs, across the web"
        return self._worst("stirrup_legs", "9.7.6.2.2", "length", apart, limit, self._at(note))

    def _first(self) -> BeamCheck:
        beam = self.problem.beam
        held = (
            (beam.left_support(self.span), self.plan.first, 0.0),
            (beam.right_support(self.span), self.plan.last, self.plan.clear),
        )
        at_faces = [(first, at) for support, first, at in held if support is not None]
        first = max(first for first, _ in at_faces)
        ends = min(self.built.spacing(self.span, at) for _, at in at_faces)
        limit = max(ends / 2.0, _FIRST[self.problem.edition.units])
        return BeamCheck(
            id="first_stirrup",
            clause=_PRACTICE,
            where=self.mark,
            quantity="length",
            demand=first,
            limit=limit,
            ratio=ratio_of(first, limit),
            state=verdict(first <= limit + SLACK),
            note="from the face; half a spacing, or a little more where that is small",
        )

    def _anchorage(self) -> BeamCheck:
        need = embedment_of_hook(self.concrete, self.frame.stirrup, self.fyt)
        clause = "25.7.1.3"
        if need == 0.0:
            return self._plain("stirrup_anchorage", clause, "hooks around bars are enough (a)")
        room = self.section.outline.depth / 2.0 - self.section.cover
        return BeamCheck(
            id="stirrup_anchorage",
            clause=clause,
            where=self.mark,
            quantity="length",
            demand=need,
            limit=room,
            ratio=ratio_of(need, room),
            state=verdict(need <= room + SLACK),
            note="from middepth to the outside of the hook (b)",
        )

    def _length(self, value: float) -> str:
        return f"{plain(value)} {self.section.length_unit}"

    def _at(self, note: str) -> Callable[[int], str]:
        return lambda k: f"{note}; stirrups at {self._length(float(self.s[k]))}"

    def _plain(self, row: str, clause: str, note: str) -> BeamCheck:
        return BeamCheck(
            id=row, clause=clause, where=self.mark, state=State.NOT_APPLICABLE, note=note
        )

    def _worst(
        self,
        row: str,
        clause: str,
        quantity: str,
        demand: FloatArray,
        limit: FloatArray,
        note: Callable[[int], str],
    ) -> BeamCheck:
        """Row of the station where demand over limit is largest."""
        ratio = np.divide(demand, limit, out=np.full(len(demand), math.inf), where=limit > 0.0)
        k = int(np.argmax(ratio))
        return BeamCheck(
            id=row,
            clause=clause,
            where=self.mark,
            at=self.problem.beam.origins[self.span] + float(self.x[k]),
            quantity=quantity,
            demand=float(demand[k]),
            limit=float(limit[k]),
            ratio=ratio_of(float(demand[k]), float(limit[k])),
            state=verdict(float(ratio[k]) <= 1.0 + _ROUNDING),
            note=note(k),
        )


def _deep(built: Built, span: int) -> BeamCheck:
    """Whether 9.9 applies: then its other provisions come on top."""
    beam = built.design.problem.beam
    own = beam.spans[span]
    start, end = beam.clear_range(span)
    h, ln = own.outline.depth, end - start
    forces = [load.at - start for load in own.loads if isinstance(load, PointLoad)]
    if own.overhang is not Overhang.NONE:
        state, note = State.NOT_APPLICABLE, "cantilever: no second support for a strut"
    elif not is_deep(ln, h, forces):
        state, note = State.OK, f"ln/h = {plain(ln / h)}, no force within 2 h of a face"
    else:
        state = State.PROVIDE
        short = f"ln/h = {plain(ln / h)}" if ln <= 4.0 * h else "a force within 2 h of a face"
        note = f"{short}: a deep beam; check it by 9.9 (strut and tie, or non-linear strain) too"
    return BeamCheck(
        id="deep_beam",
        clause="9.9.1.1",
        where=own.mark,
        quantity="length",
        demand=4.0 * h,
        limit=ln,
        ratio=ratio_of(4.0 * h, ln),
        state=state,
        note=note,
    )
