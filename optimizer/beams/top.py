"""Top bars over a support: how far they reach into the spans, with through bars or hangers."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

from catalogs import Bar
from engine.beams.anchorage import anchor_at_end, schedule_length, shortest_development
from engine.beams.redistribution import strain_for_share
from optimizer.beams.builder import Builder, runs_of
from optimizer.beams.ends import StopEnd, fit
from optimizer.beams.frames import per_length
from optimizer.beams.listing import Fitted
from optimizer.beams.modes import ModeBars
from optimizer.beams.places import Place
from optimizer.beams.sag import cracked_inertias
from optimizer.beams.top_ends import TopEnds
from optimizer.beams.variants import Face, Need, Piece, Role, TopKind, TopMode, Variant

_SLACK = 1e-6


class TopBuilder(TopEnds):
    """Variants of the top over one support.

    Parameters
    ----------
    shared : Builder
        What all places share.
    place : Place
        Top over the support.
    redistributed : bool
        Whether the moment here is lowered by redistribution.
    """

    def __init__(self, shared: Builder, place: Place, *, redistributed: bool) -> None:
        super().__init__(shared, place)
        self.redistributed = redistributed

    def corner_possible(self, bar: Bar) -> bool:
        """Whether bars of a size can end over the support at all.

        Parameters
        ----------
        bar : Bar
            Size of the bars in the corners.

        Returns
        -------
        bool
            False where the beam ends here and even the shortest development length and the
            widest hooks do not fit.
        """
        if len(self.place.sides) > 1:
            return True
        section = self.place.sides[0].section
        anchor = anchor_at_end(
            section,
            bar,
            width=self.support.width,
            ld=shortest_development(section, bar),
            spacing=math.inf,
            tied=self.support.ties,
        )
        if anchor is None:
            self.refuse("its bars cannot be anchored in the end support (25.4)")
        return anchor is not None

    def variants(self, fitted: list[Fitted], modes: Sequence[ModeBars]) -> list[Variant]:
        """All variants of some layouts under some arrangements of the top face.

        Parameters
        ----------
        fitted : list of Fitted
            Layouts.
        modes : sequence of ModeBars
            Arrangements, with their through bars.

        Returns
        -------
        list of Variant
            Those that meet every rule of their own.
        """
        found: list[Variant] = []
        inertias = self._inertias(fitted)
        for item, inertia in zip(fitted, inertias, strict=True):
            if not self._ductile_enough(item):
                self.refuse("it is not ductile enough for the redistribution (6.6.5)")
                continue
            before = len(found)
            for bars in modes:
                if bars.mode.kind is TopKind.THROUGH:
                    found += self._through(item, bars, inertia)
            hangers = [bars.mode for bars in modes if bars.mode.kind is TopKind.HANGERS]
            if hangers:
                found += self._with_hangers(item, hangers, inertia)
            if len(found) == before:
                self.refuse("its bars find no ends within the rules (9.7.3)")
        return found

    def _inertias(self, fitted: list[Fitted]) -> list[float]:
        """Icr at the support of a cantilever; zero elsewhere, where it is not asked for."""
        free = [side for side in self.place.sides if side.end_of_beam]
        if not free or not fitted:
            return [0.0] * len(fitted)
        layouts = [item.layout for item in fitted]
        return [float(value) for value in cracked_inertias(free[0].section, layouts)]

    def _ductile_enough(self, fitted: Fitted) -> bool:
        """Strain that redistribution asks of the bars finally chosen, 6.6.5."""
        if not self.redistributed:
            return True
        share = self.problem.redistribution
        return fitted.eps_t >= strain_for_share(share) * (1 - _SLACK)

    def _through(self, fitted: Fitted, bars: ModeBars, inertia: float) -> list[Variant]:
        bar = fitted.layout.layers[0].largest
        run = self.shared.frame.legs
        if bar != bars.mode.bar or fitted.layout.layers[0].groups[0][1] < run:
            return []
        # Through bars are anchored and lapped with one length for all layouts.
        longest = max(
            own.of(placement, 1, bar)
            for own, placement in zip(self.developments, fitted.placements, strict=True)
        )
        if longest > schedule_length(self.place.sides[0].section, bar) + _SLACK:
            return []
        if not self.through_bars_end_well(fitted, bars.pieces):
            return []
        if self.problem.perimeter and not self._share(fitted, bar, run, self.rules.through_top):
            return []
        enough = self._share(fitted, bar, run, self.rules.past_inflection)
        return [
            self._variant(fitted, run, bars.mode, stops, reaches, inertia)
            for stops, reaches in self.stops(fitted, bar, run, enough=enough)
            if self.laps_clear(fitted, run, bars.pieces, stops)
            and self.developed_at_tips(fitted, run, bars.pieces, reaches)
        ]

    def _with_hangers(
        self, fitted: Fitted, modes: Sequence[TopMode], inertia: float
    ) -> list[Variant]:
        if self.problem.perimeter:
            return []  # continuous top bars are spliced at midspan, 9.7.7.5
        bar = fitted.layout.layers[0].largest
        least = max(self.shared.frame.legs, self.rules.least_bars)
        found = []
        for run in runs_of(fitted, least):
            if not self._share(fitted, bar, run, self.rules.past_inflection):
                continue
            ranges = self.run_reaches(fitted, bar, run)
            if ranges is None:
                continue
            extent = fit(ranges[0], ranges[1], self.shared.step)
            if extent is None:
                continue
            long = Piece(
                face=Face.TOP,
                role=Role.RUN,
                bar=bar,
                count=run,
                layer=1,
                start=extent[0],
                end=extent[1],
                surface=self.place.sides[0].section.bar_face,
                hook_start=ranges[0].hooked,
                hook_end=ranges[1].hooked,
                develop_start=self.developed(fitted, bar, ranges[0], 0),
                develop_end=self.developed(fitted, bar, ranges[1], -1),
            )
            if not self.shared.from_stock([long]):
                self.refuse("its bars are longer than the longest stock")
                continue
            for stops, reaches in self.stops(fitted, bar, run, enough=True):
                one = self._variant(fitted, run, modes[0], (long, *stops), reaches, inertia)
                saved = self._saved(extent)
                found += [
                    replace(one, mode=mode, cost=one.cost - self._worth(mode, saved))
                    for mode in modes
                ]
        return found

    def _share(self, fitted: Fitted, bar: Bar, run: int, share: float) -> bool:
        return run * bar.area >= share * fitted.layout.area * (1 - _SLACK)

    def _saved(self, extent: tuple[float, float]) -> float:
        """Hangers that the long bars stand for, which are counted for the whole beam elsewhere.

        The length of all of them. [in or mm]
        """
        length = 0.0
        for direction, side in self.directions():
            if side is None or side.end_of_beam:
                continue
            face = side.origin
            length += (extent[1] - face) if direction > 0 else (face - extent[0])
        return length * self.shared.frame.legs

    def _worth(self, mode: TopMode, saved: float) -> float:
        """Cost of some length of hangers. [lb or kg]"""
        return saved * per_length(mode.bar, self.problem.ranking) / self.shared.unit

    def _variant(
        self,
        fitted: Fitted,
        run: int,
        mode: TopMode,
        pieces: tuple[Piece, ...],
        ends: tuple[StopEnd | None, StopEnd | None],
        inertia: float,
    ) -> Variant:
        shared = self.shared
        needs: list[Need] = []
        for index, (_, side) in enumerate(self.directions()):
            if side is None:
                continue
            number = self.number(index)
            end = ends[index]
            spacing = self.developments[number].spacing_for_grade(fitted.placements[number])
            cuts = [end] if end is not None else []
            needs.append(shared.need(side, fitted.d[number], cuts, spacing))
        return Variant(
            layout=fitted.layout,
            run=run,
            mode=mode,
            cost=shared.cost(pieces, fitted.extra),
            pieces=pieces,
            needs=tuple(needs),
            inertia=inertia,
        )
