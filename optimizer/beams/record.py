"""The record of a beam: written with its design, read back as a beam as drawn."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import asdict
from pathlib import Path
from typing import Annotated, Any

from pydantic import BaseModel, ConfigDict, Field, ValidationError

from optimizer.beams.design import BeamDesign
from optimizer.beams.positions import (
    DrawnBars,
    DrawnBeam,
    PlaceState,
    StirrupState,
    TopState,
    drawn,
)
from optimizer.errors import JobError
from optimizer.job_messages import short
from optimizer.job_text import parse_toml
from optimizer.record import Record, record_text

Length = Annotated[float, Field(gt=0, le=1e7, allow_inf_nan=False)]
Count = Annotated[int, Field(ge=0, le=100_000)]
Text = Annotated[str, Field(min_length=1, max_length=200)]


class _Part(BaseModel):
    model_config = ConfigDict(extra="forbid", frozen=True, strict=True)


class _Place(_Part):
    layers: Annotated[list[Text], Field(min_length=1, max_length=9)]
    run: Count


class _Stirrups(_Part):
    size: Text
    legs: Annotated[int, Field(ge=2, le=20)]
    spacings: Annotated[list[Length], Field(min_length=3, max_length=3)]
    ends: Annotated[list[Count], Field(min_length=2, max_length=2)]


class _Top(_Part):
    kind: Text
    size: Text


class _Bars(_Part):
    position: Text
    part: Text
    mark: Text
    size: Text
    shape: Text
    count: Count
    length: Length


class _Drawn(_Part):
    places: dict[str, _Place]
    stirrups: dict[str, _Stirrups]
    top: _Top
    bars: Annotated[list[_Bars], Field(max_length=5000)]
    cost: Annotated[float, Field(ge=0, allow_inf_nan=False)]
    mass: Annotated[float, Field(ge=0, allow_inf_nan=False)]


def beam_record(text: str, design: BeamDesign, base: Path | None) -> str:
    """Write the record of a designed beam.

    Parameters
    ----------
    text : str
        Text of the job.
    design : BeamDesign
        Its design.
    base : Path or None
        Folder that relative paths of the job start from.

    Returns
    -------
    str
        The record.
    """
    return record_of_keys(parse_toml(text, "job"), design, base)


def record_of_keys(
    job: Mapping[str, Any],
    design: BeamDesign,
    base: Path | None,
    tables: Mapping[str, str] | None = None,
) -> str:
    """Write the record of a designed beam from the keys of its job.

    Parameters
    ----------
    job : mapping
        Keys of the job.
    design : BeamDesign
        Its design.
    base : Path or None
        Folder that relative paths of the job start from.
    tables : mapping of str to str, optional
        Texts of tables that are known already.

    Returns
    -------
    str
        The record.
    """
    return record_text("beam", job, base, asdict(drawn(design)), tables)


def drawn_of(record: Record) -> DrawnBeam:
    """The beam that a record holds.

    Parameters
    ----------
    record : Record
        Record of a beam.

    Returns
    -------
    DrawnBeam
        Its positions and bars.

    Raises
    ------
    JobError
        If the record is of sections, or its design is damaged.
    """
    if record.kind != "beam":
        msg = f"{record.name}: a record of {record.kind}; expected that of a beam"
        raise JobError(msg)
    try:
        keys = _Drawn.model_validate(record.design, strict=False)
    except ValidationError as error:
        first = error.errors(include_url=False)[0]
        where = ".".join(short(str(part)) for part in first["loc"])
        msg = f"{record.name}: design.{where}: {first['msg']}; the record is damaged"
        raise JobError(msg) from None
    return DrawnBeam(
        places={
            mark: PlaceState(layers=tuple(item.layers), run=item.run)
            for mark, item in keys.places.items()
        },
        stirrups={
            mark: StirrupState(
                size=item.size,
                legs=item.legs,
                spacings=(item.spacings[0], item.spacings[1], item.spacings[2]),
                ends=(item.ends[0], item.ends[1]),
            )
            for mark, item in keys.stirrups.items()
        },
        top=TopState(kind=keys.top.kind, size=keys.top.size),
        bars=tuple(DrawnBars(**item.model_dump()) for item in keys.bars),
        cost=keys.cost,
        mass=keys.mass,
    )
