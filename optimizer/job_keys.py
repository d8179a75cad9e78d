"""The keys of a job file: their types, ranges and defaults.

Every key of `[materials]`, `[bars]` and `[ranking]` may be repeated in a `[[section]]`, so
those three groups are classes that both levels share; in them None means "not given here".
"""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field, StrictBool, ValidationInfo

from engine import parse_quantity
from engine.errors import QuantityError
from engine.units import UnitSystem, plain
from optimizer.job_messages import quoted

MOST_SECTIONS = 2000
MOST_KEPT = 200
MOST_VARIANTS = 200


def quantity(
    kind: str, us: tuple[float, float, str], si: tuple[float, float, str], *, below: str = ""
) -> BeforeValidator:
    """Validator of a quantity.

    Each range is the least and greatest size and the unit of a plain number, in which the
    range is written too. What a negative value means may be said by `below`.
    """
    table = {"us": us, "si": si}

    def read(value: Any, info: ValidationInfo) -> float:
        system: UnitSystem = info.context["system"] if info.context else {}
        low, high, unit = table[system.name]
        size = parse_quantity(value, kind, system, unit)
        least = parse_quantity(low, kind, system, unit)
        most = parse_quantity(high, kind, system, unit)
        if not least <= abs(size) <= most or (size < 0 and kind != "moment"):
            got = f"{below}, got {quoted(value)}" if below and size < 0 else f"got {quoted(value)}"
            msg = f"{got}; allowed: {plain(low)} to {plain(high)} {unit}"
            if kind == "moment":
                msg += " in size, + sagging, - hogging"
            raise QuantityError(msg)
        return size

    return BeforeValidator(read)


def length(us: tuple[float, float], si: tuple[float, float]) -> BeforeValidator:
    """Validator of a length of the section, plain numbers in in or mm."""
    return quantity("length", (*us, "in"), (*si, "mm"))


def distance(us: tuple[float, float], si: tuple[float, float]) -> BeforeValidator:
    """Validator of a length of the floor, plain numbers in ft or m."""
    return quantity("length", (*us, "ft"), (*si, "m"))


SectionSize = Annotated[float, length((4, 600), (100, 15_000))]
Thickness = Annotated[float, length((1.5, 120), (40, 3000))]
StirrupSpacing = Annotated[float, length((1, 48), (25, 1200))]
Cover = Annotated[float, length((0.375, 12), (10, 300))]
Gap = Annotated[float, length((0, 24), (0, 600))]
PreferredGap = Annotated[float, length((0.1, 24), (2, 600))]
LayerGap = Annotated[float, length((1, 24), (25, 600))]
Aggregate = Annotated[float, length((0.25, 3), (6, 75))]
Span = Annotated[float, distance((2, 400), (0.6, 120))]
ClearDistance = Annotated[float, distance((0, 200), (0, 60))]
Moment = Annotated[float, quantity("moment", (0.01, 1e6, "kip*ft"), (0.01, 1.5e6, "kN*m"))]
ConcreteStrength = Annotated[float, quantity("stress", (500, 20e3, "psi"), (3, 140, "MPa"))]
YieldStrength = Annotated[float, quantity("stress", (20e3, 150e3, "psi"), (100, 1000, "MPa"))]
Modulus = Annotated[float, quantity("stress", (5e5, 12e6, "psi"), (4000, 80e3, "MPa"))]
Constant = Annotated[float, Field(ge=0, le=1000, allow_inf_nan=False, strict=True)]
Lightweight = Annotated[float, Field(ge=0.75, le=1.0, allow_inf_nan=False, strict=True)]
Name = Annotated[str, Field(min_length=1, max_length=60, strict=True)]
Names = Annotated[list[Name], Field(max_length=12)]
Layers = Annotated[list[Annotated[str, Field(strict=True, max_length=200)]], Field(min_length=1)]


class Keys(BaseModel):
    """A table of keys; any other key in it is an error."""

    model_config = ConfigDict(extra="forbid", frozen=True, populate_by_name=False)


class MaterialKeys(Keys):
    """Keys of `[materials]`."""

    fc: ConcreteStrength | None = None
    steel: Name | None = None
    fy: YieldStrength | None = None
    aggregate: Aggregate | None = None
    lightweight: (
        Annotated[float, Field(strict=True, ge=0.75, le=1.0, allow_inf_nan=False)] | None
    ) = Field(default=None, alias="lambda")
    Ec: Modulus | None = None


class BarKeys(Keys):
    """Keys of `[bars]`."""

    catalog: Annotated[str, Field(min_length=1, max_length=500, strict=True)] | None = None
    sizes: Annotated[list[Name], Field(min_length=1, max_length=60)] | None = None
    max_layers: Annotated[int, Field(strict=True, ge=1, le=4)] | None = None
    max_sizes: Annotated[int, Field(strict=True, ge=1, le=2)] | None = None
    size_steps: Annotated[int, Field(strict=True, ge=1, le=20)] | None = None
    layer_gap: LayerGap | None = None
    min_gap: Gap | None = None
    tension_controlled: StrictBool | None = None


class RankingKeys(Keys):
    """Keys of `[ranking]`."""

    by: Literal["practical", "lightest"] | None = None
    keep: Annotated[int, Field(strict=True, ge=1, le=MOST_KEPT)] | None = None
    variety: Literal["on", "off"] | None = None
    per_pattern: Annotated[int, Field(strict=True, ge=1, le=MOST_KEPT)] | None = None
    labour_share: Constant | None = None
    per_bar: Constant | None = None
    per_extra_layer: Constant | None = None
    per_extra_size: Constant | None = None
    tight_gap: Constant | None = None
    preferred_gap: PreferredGap | None = None
    work_limit: Annotated[float, Field(gt=0, le=3600, allow_inf_nan=False, strict=True)] | None = (
        None
    )


class OptionKeys(Keys):
    """Keys of `[options]`: what may change against a drawn layout."""

    sizes: StrictBool | None = None
    layers: StrictBool | None = None
    mixing: StrictBool | None = None
    grades: Names | None = None
    stirrups: Names | None = None
    widths: Annotated[list[SectionSize], Field(max_length=12)] | None = None
    depths: Annotated[list[SectionSize], Field(max_length=12)] | None = None


class JobOptionKeys(OptionKeys):
    """Keys of `[options]` that hold for the whole job."""

    prices: Annotated[str, Field(min_length=1, max_length=500, strict=True)] | None = None
    palette: Annotated[int, Field(strict=True, ge=1, le=12)] | None = None


class FlangeKeys(Keys):
    """A flange given by its size."""

    width: SectionSize
    thickness: Thickness
    side: Literal["both", "left", "right"] = "both"


class SpanSlabKeys(Keys):
    """A slab from which the flange follows, over a span known elsewhere."""

    thickness: Thickness
    clear_left: ClearDistance = 0.0
    clear_right: ClearDistance = 0.0


class SlabKeys(SpanSlabKeys):
    """A slab from which the flange follows."""

    span: Span


class SectionKeys(MaterialKeys, BarKeys, RankingKeys):
    """Keys of a `[[section]]`, with every key of the three groups."""

    mark: Annotated[str, Field(min_length=1, max_length=80, strict=True)]
    Mu: Moment
    Ms: Moment | None = None
    width: SectionSize
    depth: SectionSize
    cover: Cover
    stirrup: Name
    exposure: Literal["interior", "weather", "ground"] | None = None
    statically_determinate: StrictBool = False
    flange: FlangeKeys | None = None
    bottom_flange: FlangeKeys | None = None
    slab: SlabKeys | None = None
    span: Span | None = None
    stirrup_spacing: StirrupSpacing | None = None
    layers: Layers | None = None
    opposite: Layers | None = None
    count_opposite: StrictBool = False
    options: OptionKeys = OptionKeys()
    length: Span | None = None


class JobKeys(Keys):
    """Keys of the whole file."""

    title: Annotated[str, Field(max_length=200, strict=True)] = ""
    units: Literal["us", "si"] | None = None
    code: Annotated[str, Field(strict=True)]
    materials: MaterialKeys = MaterialKeys()
    bars: BarKeys = BarKeys()
    ranking: RankingKeys = RankingKeys()
    options: JobOptionKeys = JobOptionKeys()
    section: Annotated[list[SectionKeys], Field(min_length=1, max_length=MOST_SECTIONS)]
