"""The command that designs a whole beam."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import Annotated

import typer

from optimizer.cli_options import CsvFile, HtmlFile, JobFile, JsonFile, Plain, SaveFile, XlsxFile
from optimizer.job_messages import short
from optimizer.job_text import text_of
from optimizer.outputs import OutputFiles, data_view, status_line

DxfFile = Annotated[
    Path | None, typer.Option("--dxf", metavar="FILE", help="Also draw the beam to scale.")
]
Brief = Annotated[bool, typer.Option("--brief", help="Of the checks only what governs.")]


def beam_command(
    job_file: JobFile,
    json_file: JsonFile = None,
    html: HtmlFile = None,
    xlsx: XlsxFile = None,
    dxf: DxfFile = None,
    csv: CsvFile = None,
    save: SaveFile = None,
    brief: Brief = False,
    plain: Plain = False,
) -> None:
    """Design of a whole beam: bars with lengths, stirrups, schedule and cutting list."""
    files = OutputFiles(json=json_file, html=html, xlsx=xlsx, dxf=dxf, csv=csv, record=save)
    files.check(job_file)
    # The solver takes long to load and serves this command alone.
    from optimizer.beams.design import BeamDesign, design_beam
    from optimizer.beams.outputs import BeamDocuments, tables_of
    from optimizer.beams.reader import parse_beam_job
    from optimizer.beams.view import show_beam

    text, base = text_of(job_file), job_file.parent
    problem = parse_beam_job(text, name=short(job_file.name), base=base)
    files.check(job_file, *tables_of(text, base))
    with status_line() as tell:
        result = design_beam(problem, tell)
    designed = isinstance(result, BeamDesign)
    written = files if designed else replace(files, csv=None, record=None)
    if not written.write(BeamDocuments(result=result, text=text, base=base)):
        view = data_view(plain=plain)
        view.title(problem.title, problem.edition.name)
        show_beam(view, result, brief=brief)
    if not designed:
        for path in (csv, save):
            if path is not None:
                typer.echo(f"cagewright: {short(str(path))}: not written: no design", err=True)
    raise typer.Exit(0 if isinstance(result, BeamDesign) and result.ok else 1)
