"""A designed beam as a workbook (xlsx): schedule, stirrups, cutting, checks and envelopes."""

from __future__ import annotations

from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.documents.beam_envelopes_table import envelopes_table
from optimizer.documents.beam_schedule_table import schedule_table
from optimizer.documents.beam_tables import (
    bars_table,
    beam_checks_table,
    cutting_table,
    stirrups_table,
    summary_table,
)
from optimizer.documents.workbook import bytes_of_tables


def beam_workbook(result: BeamDesign | NoDesign) -> bytes:
    """Write a beam as a workbook.

    Parameters
    ----------
    result : BeamDesign or NoDesign
        Result of a beam job.

    Returns
    -------
    bytes
        Content of an xlsx file; equal results give equal bytes. Without a design: the summary
        with the reasons, and the envelopes of the demand.
    """
    tables = [summary_table(result)]
    if isinstance(result, BeamDesign):
        tables += [
            schedule_table(result),
            bars_table(result),
            stirrups_table(result),
            cutting_table(result),
            beam_checks_table(result),
        ]
    tables.append(envelopes_table(result))
    return bytes_of_tables(tables, result.problem.title)
