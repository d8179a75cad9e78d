"""Bottom bars of a span: which run on into the supports, and where the others stop."""

from __future__ import annotations

import math
from dataclasses import replace
from itertools import product

import numpy as np

from catalogs import Bar
from engine.beams.cutoffs import (
    extension,
)
from optimizer.beams.bottom_ends import BottomEnds, is_simple
from optimizer.beams.builder import runs_of, stopping_bars
from optimizer.beams.ends import EndRange, StopEnd, Stopping, fit, stop_ends
from optimizer.beams.listing import Fitted
from optimizer.beams.sag import cracked_inertias, deflections, stages, within_limit
from optimizer.beams.strengths import (
    run_hook_spacing,
    run_spacing,
)
from optimizer.beams.variants import Face, Piece, Role, Variant

_SLACK = 1e-6
_FAR = 1e9


class BottomBuilder(BottomEnds):
    """Variants of the bottom of one span, made of layouts of its place."""

    def variants(self, fitted: list[Fitted]) -> list[Variant]:
        """All variants of some layouts.

        Parameters
        ----------
        fitted : list of Fitted
            Layouts.

        Returns
        -------
        list of Variant
            Those that meet every rule of their own; none of a layout that deflects too much.
        """
        if not fitted:
            return []
        layouts = [item.layout for item in fitted]
        inertias = cracked_inertias(self.section, layouts)
        stiff = self._stiff_enough(inertias)
        found: list[Variant] = []
        for item, inertia, good in zip(fitted, inertias, stiff, strict=True):
            if good:
                found += self._of_layout(item, float(inertia))
            else:
                self.refuse("it deflects too much (24.2.2)")
        return found

    def _stiff_enough(self, inertias: np.ndarray) -> np.ndarray:
        unit = self.shared.shears[self.place.index].demand.deflections
        if unit is None or not unit.sagging:  # top bars decide where midspan hogs
            return np.ones(len(inertias), dtype=np.bool_)
        span = self.problem.beam.spans[self.place.index]
        found = deflections(self.section, unit, stages(self.section, span, unit, inertias))
        return within_limit(self.problem, span, found) <= 1.0 + _SLACK

    def _of_layout(self, fitted: Fitted, inertia: float) -> list[Variant]:
        bar = fitted.layout.layers[0].largest
        least = max(self.shared.frame.legs, self.rules.least_bars)
        found = []
        for run in runs_of(fitted, least):
            if not self._shares_hold(fitted, bar, run):
                self.refuse("too few of its bars run into the supports (9.7.3.8)")
                continue
            found += self._with_run(fitted, bar, run, inertia)
        return found

    def _shares_hold(self, fitted: Fitted, bar: Bar, run: int) -> bool:
        """Least shares of the largest sagging steel that run into the supports, 9.7.3.8."""
        share = self.rules.at_other_support
        for side in self.place.sides:
            if is_simple(side):
                share = max(share, self.rules.at_simple_support)
        return run * bar.area >= share * fitted.layout.area * (1 - _SLACK)

    def _with_run(self, fitted: Fitted, bar: Bar, run: int, inertia: float) -> list[Variant]:
        placement = fitted.placements[0]
        strength = self.strengths.of_run(bar, run)
        ld = self.developments.of(placement, 1, bar)
        spacing = run_spacing(placement, bar, run)
        hooks = run_hook_spacing(placement, bar, run)
        ends = [self.run_end(side, bar, run, ld, hooks) for side in self.place.sides]
        left, right = ends
        if left is None or right is None:
            self.refuse("its bars cannot be anchored or lapped at the supports")
            return []
        if not all(
            self.run_is_developed(side, anchor, strength, bar, ld)
            for side, (_, anchor) in zip(self.place.sides, (left, right), strict=True)
        ):
            self.refuse("its bars are not developed at the ends (9.7.3.1, 9.7.3.8.3)")
            return []
        extent = fit(left[0], right[0], self.shared.step)
        if extent is None:
            return []
        run_piece = Piece(
            face=Face.BOTTOM,
            role=Role.RUN,
            bar=bar,
            count=run,
            layer=1,
            start=extent[0],
            end=extent[1],
            surface=self.section.bar_face,
            hook_start=left[0].hooked,
            hook_end=right[0].hooked,
            develop_start=left[1].development,
            develop_end=right[1].development,
        )
        if not self.shared.from_stock([run_piece]):
            self.refuse("its bars are longer than the longest stock")
            return []
        stopping = stopping_bars(fitted, run)
        most_spacing = self.developments.spacing_for_grade(placement)
        if not stopping:
            return [self._variant(fitted, run, (run_piece,), (), most_spacing, inertia)]
        bars = Stopping(
            strong=fitted.phi_Mn[0],
            run=strength,
            service_limit=strength.service_limit(self.section, spacing),
            d=fitted.d[0],
            largest=max((other for _, other, _ in stopping), key=lambda item: item.diameter),
            ld=max(self.developments.of(placement, layer, other) for layer, other, _ in stopping),
            least=max(extension(fitted.d[0], other.diameter) for _, other, _ in stopping),
        )
        if strength.usable >= self.section.demand and bars.service_limit >= max(
            float(side.service.max()) for side in self.place.sides
        ):
            return []  # the bars that run on are enough: a layout of its own
        choices = [
            stop_ends(
                self.problem.edition,
                side,
                bars,
                farthest=side.face + self.past_face(side),
                nearest=side.face + self.rules.into_support,
                exempt=is_simple(side),
            )
            for side in self.place.sides
        ]
        found = []
        for pair in product(*choices):
            stops = self._stop_pieces(fitted, run, pair)
            if stops is not None:
                pieces = (run_piece, *stops)
                found.append(self._variant(fitted, run, pieces, pair, most_spacing, inertia))
        if not found:
            self.refuse("the bars that stop find no end within the rules (9.7.3)")
        return found

    def _stop_pieces(
        self, fitted: Fitted, run: int, pair: tuple[StopEnd, ...]
    ) -> tuple[Piece, ...] | None:
        left, right = self.place.sides
        start, end = left.at(pair[0].u), right.at(pair[1].u)
        limits = [side.at(side.face + self.room(side)) for side in (left, right)]
        extent = fit(EndRange(start, limits[0]), EndRange(end, limits[1]), self.shared.step)
        if extent is None:
            return None
        if not self.laps_clear(fitted, run, extent):
            return None
        both = [self.developments] * len(fitted.placements)
        return self.shared.stop_pieces(Face.BOTTOM, fitted, run, extent, both)

    def _variant(
        self,
        fitted: Fitted,
        run: int,
        pieces: tuple[Piece, ...],
        ends: tuple[StopEnd, ...],
        most_spacing: float,
        inertia: float,
    ) -> Variant:
        shared = self.shared
        d = fitted.d[0]
        cuts = tuple(
            cut
            for side, end in zip(self.place.sides, ends, strict=False)
            for cut in shared.need(side, d, [end], most_spacing).cuts
        )
        plain = shared.need(self.place.sides[0], d, (), most_spacing)
        return Variant(
            layout=fitted.layout,
            run=run,
            mode=None,
            cost=shared.cost(pieces, fitted.extra),
            pieces=pieces,
            needs=(replace(plain, cuts=cuts),),
            inertia=inertia,
            continuous=self._continuous(fitted),
        )

    def _continuous(self, fitted: Fitted) -> int:
        """Bars that have to be continuous with those of the next span, 9.7.7.1 and .2."""
        if not any(self.laps_at(side) for side in self.place.sides):
            return 0
        bar = fitted.layout.layers[0].largest
        share = self.rules.through_bottom * fitted.layout.area / bar.area
        return max(self.rules.least_bars, math.ceil(share - _SLACK))
