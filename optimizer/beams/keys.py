"""The keys of a beam job: their types, ranges and defaults.

`[materials]`, `[bars]` and `[ranking]` are those of a job of sections. Where a key has no default
here, the reader has one that depends on the units or on the catalogue.
"""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, StrictBool

from optimizer.job_keys import (
    BarKeys,
    Cover,
    FlangeKeys,
    Keys,
    MaterialKeys,
    Name,
    RankingKeys,
    SectionSize,
    Span,
    SpanSlabKeys,
    YieldStrength,
    distance,
    length,
    quantity,
)

MOST_SPANS = 24
MOST_LOADS = 60
_DOWNWARDS = "downwards is positive"

SupportWidth = Annotated[float, length((2, 240), (50, 6000))]
ColumnSize = Annotated[float, length((4, 240), (100, 6000))]
ColumnHeight = Annotated[float, distance((2, 200), (0.6, 60))]
StirrupStep = Annotated[float, length((0.25, 6), (5, 150))]
LengthStep = Annotated[float, length((0.125, 12), (1, 300))]
StockLength = Annotated[float, distance((3, 120), (1, 36))]
Place = Annotated[float, distance((0, 400), (0, 120))]
Density = Annotated[float, quantity("density", (50, 300, "lbf/ft^3"), (8, 50, "kN/m^3"))]
Force = Annotated[
    float,
    quantity("force", (0.001, 1e5, "kip"), (0.005, 5e5, "kN"), below=_DOWNWARDS),
]
LineLoad = Annotated[
    float,
    quantity("force_per_length", (0, 1000, "kip/ft"), (0, 15_000, "kN/m"), below=_DOWNWARDS),
]
PartLoad = Annotated[
    float,
    quantity("force_per_length", (1e-4, 1000, "kip/ft"), (1e-3, 15_000, "kN/m"), below=_DOWNWARDS),
]
Redistribution = Annotated[float, Field(strict=True, ge=0, le=0.2, allow_inf_nan=False)]
Share = Annotated[float, Field(strict=True, ge=0, le=1, allow_inf_nan=False)]
BarNames = Annotated[list[Name], Field(min_length=1, max_length=12)]


class BeamKeys(Keys):
    """Keys of `[beam]`."""

    mark: Annotated[str, Field(min_length=1, max_length=40, strict=True)]
    cover: Cover
    exposure: Literal["interior", "weather", "ground"] | None = None
    width: SectionSize | None = None
    depth: SectionSize | None = None
    slab: SpanSlabKeys | None = None
    flange: FlangeKeys | None = None
    analysis: Literal["elastic", "coefficients"] | None = None
    redistribution: Redistribution = 0.0
    stirrups: BarNames | None = None
    stirrup_steel: Name | None = None
    stirrup_fy: YieldStrength | None = None
    stirrup_step: StirrupStep | None = None
    hangers: BarNames | None = None
    skin_bar: Name | None = None
    flange_bar: Name | None = None
    edge: Literal["interior", "perimeter"] = "interior"
    closed_stirrups: StrictBool = False
    attached: Literal["roof", "floor", "sensitive", "tolerant"] = "floor"
    sustained: Share = 0.25
    stock: Annotated[list[StockLength], Field(min_length=1, max_length=8)] | None = None
    length_step: LengthStep | None = None
    most_sizes: Annotated[int, Field(strict=True, ge=1, le=12)] = 3
    most_marks: Annotated[int, Field(strict=True, ge=1, le=500)] | None = None
    self_weight: StrictBool | None = None
    concrete_weight: Density | None = None


class ColumnKeys(Keys):
    """A column above or below a support."""

    width: ColumnSize
    depth: ColumnSize
    height: ColumnHeight
    far: Literal["fixed", "pinned"] = "fixed"


class SupportKeys(Keys):
    """Keys of a `[[support]]`."""

    mark: Annotated[str, Field(min_length=1, max_length=80, strict=True)]
    width: SupportWidth
    kind: Literal["column", "wall", "girder"] = "column"
    ends: Literal["free", "fixed", "columns"] | None = None
    ties: StrictBool = False
    below: ColumnKeys | None = None
    above: ColumnKeys | None = None


class LoadKeys(Keys):
    """A load on a part or at a place of a span: a force, or a uniform load."""

    case: Literal["dead", "live"]
    force: Force | None = None
    at: Place | None = None
    uniform: PartLoad | None = None
    start: Place | None = Field(default=None, alias="from")
    end: Place | None = Field(default=None, alias="to")


class SpanKeys(Keys):
    """Keys of a `[[span]]`."""

    length: Span
    cantilever: Literal["left", "right"] | None = None
    width: SectionSize | None = None
    depth: SectionSize | None = None
    slab: SpanSlabKeys | None = None
    flange: FlangeKeys | None = None
    dead: LineLoad | None = None
    live: LineLoad | None = None
    loads: Annotated[list[LoadKeys], Field(max_length=MOST_LOADS)] | None = None
    envelope: Annotated[str, Field(min_length=1, max_length=500, strict=True)] | None = None


class BeamJobKeys(Keys):
    """Keys of the whole file."""

    title: Annotated[str, Field(max_length=200, strict=True)] = ""
    units: Literal["us", "si"] | None = None
    code: Annotated[str, Field(strict=True)]
    materials: MaterialKeys = MaterialKeys()
    bars: BarKeys = BarKeys()
    ranking: RankingKeys = RankingKeys()
    beam: BeamKeys
    support: Annotated[list[SupportKeys], Field(min_length=1, max_length=MOST_SPANS + 1)]
    span: Annotated[list[SpanKeys], Field(min_length=1, max_length=MOST_SPANS)]
