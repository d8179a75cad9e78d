"""The command that answers a change of a design made before."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated, NoReturn

import typer

from optimizer.change_request import Asked
from optimizer.cli_options import HtmlFile, JsonFile, Plain
from optimizer.errors import DefectError, JobError
from optimizer.job_messages import short
from optimizer.job_text import parse_toml
from optimizer.outputs import OutputFiles, data_view, progress_line, status_line
from optimizer.record import Record, read_record

if TYPE_CHECKING:
    from optimizer.beams.changed_beam import ChangedBeam
    from optimizer.beams.positions import DrawnBeam

RecordFile = Annotated[
    Path, typer.Argument(metavar="RECORD", help="Record that --save of beam or rank has written.")
]
Spans = Annotated[
    list[str] | None,
    typer.Option(
        "--span",
        metavar="MARK=LENGTH",
        help='New length of a span, "B-C=31 ft"; a range "B-C=24 ft..32 ft/1 ft" makes a table.',
    ),
]
Supports = Annotated[
    list[str] | None,
    typer.Option("--support", metavar="MARK=WIDTH", help='New width of a support, "B=24 in".'),
]
Loads = Annotated[
    list[str] | None,
    typer.Option(
        "--load", metavar="MARK.KEY=VALUE", help='New load of a span, "B-C.live=1.8 kip/ft".'
    ),
]
Strength = Annotated[
    str | None, typer.Option("--fc", metavar="STRENGTH", help="New strength of the concrete.")
]
Sets = Annotated[
    list[str] | None,
    typer.Option(
        "--set",
        metavar="MARK.KEY=VALUE",
        help="New value of any key of a span, support, section, or group such as beam.",
    ),
]
NewJob = Annotated[
    Path | None,
    typer.Option("--job", metavar="FILE", help="Job that takes the place of the record's."),
]
Locks = Annotated[
    list[str] | None,
    typer.Option("--lock", metavar="POSITION", help='Must stay as drawn, "B top"; repeatable.'),
]
SaveFile = Annotated[
    Path | None,
    typer.Option("--save", metavar="FILE", help="Also keep the chosen design as a record."),
]
Choice = Annotated[
    str,
    typer.Option(
        "--design",
        metavar="least|best|N",
        help="Design to draw and keep: with the least change, the best, or with N changes.",
    ),
]
CsvFile = Annotated[
    Path | None, typer.Option("--csv", metavar="FILE", help="Also write what changes as a table.")
]
Brief = Annotated[bool, typer.Option("--brief", help="Of the design only schedule and stirrups.")]


def respan_command(
    record_file: RecordFile,
    span: Spans = None,
    support: Supports = None,
    load: Loads = None,
    fc: Strength = None,
    set_: Sets = None,
    job: NewJob = None,
    lock: Locks = None,
    design: Choice = "least",
    save: SaveFile = None,
    json_file: JsonFile = None,
    html: HtmlFile = None,
    csv: CsvFile = None,
    plain: Plain = False,
    brief: Brief = False,
) -> None:
    """After a change: what still works, the least to change, and the best from scratch."""
    from optimizer.beams.respan_report import check_choice

    files = OutputFiles(json=json_file, html=html, csv=csv, record=save)
    files.check(record_file, *([] if job is None else [job]))
    asked = Asked(
        spans=tuple(span or ()),
        supports=tuple(support or ()),
        loads=tuple(load or ()),
        sets=tuple(set_ or ()),
        fc=fc,
        job=job,
    )
    choice, locked = check_choice(design), tuple(lock or ())
    record = read_record(record_file)
    if record.kind == "sections":
        _sections(record, record_file, asked, files, choice, locked, plain)
    _beam(record, record_file, asked, files, choice, locked, plain, brief)


def _beam(
    record: Record,
    path: Path,
    asked: Asked,
    files: OutputFiles,
    choice: str | int,
    locked: tuple[str, ...],
    plain: bool,
    brief: bool,
) -> NoReturn:
    # The solver takes long to load: bad input is told before.
    from optimizer.beams.changed_beam import changed_beam
    from optimizer.beams.record import drawn_of

    old = drawn_of(record)
    changed = changed_beam(record, path, asked)
    files.check(*changed.job.sources)
    if changed.span:
        _sweep(changed, old, files, choice, locked, plain)
    from optimizer.beams.respan import respan
    from optimizer.beams.respan_report import chosen_step
    from optimizer.beams.respan_view import show_respan
    from optimizer.respan_outputs import RespanDocuments

    with status_line() as tell:
        result = respan(changed.problem, old, locked, tell)
    step = chosen_step(result, choice)
    documents = RespanDocuments(result=result, choice=choice, step=step, job=changed.job)
    if not _possible(files, chosen=step is not None).write(documents):
        view = data_view(plain=plain)
        view.title(changed.problem.title, changed.problem.edition.name)
        show_respan(view, result, choice, brief=brief)
    _say_unwritten(files, chosen=step is not None)
    good = step is not None and step.design is not None and step.design.ok
    raise typer.Exit(0 if good else 1)


def _sweep(
    changed: ChangedBeam,
    old: DrawnBeam,
    files: OutputFiles,
    choice: str | int,
    locked: tuple[str, ...],
    plain: bool,
) -> NoReturn:
    refused = {"--save": files.record, "--lock": locked, "--design": choice != "least"}
    for option, given in refused.items():
        if given:
            msg = f"{option}: of no use with a range of lengths; hint: respan with one length"
            raise JobError(msg)
    from optimizer.beams.respan_view import show_sweep
    from optimizer.beams.sweep import sweep
    from optimizer.respan_outputs import SweepDocuments

    with status_line() as tell:
        result = sweep(changed.of_lengths, old, changed.span, tell)
    if not files.write(SweepDocuments(result=result)):
        view = data_view(plain=plain)
        view.title(changed.problem.title, changed.problem.edition.name)
        show_sweep(view, result)
    raise typer.Exit(0 if result.ok else 1)


def _sections(
    record: Record,
    path: Path,
    asked: Asked,
    files: OutputFiles,
    choice: str | int,
    locked: tuple[str, ...],
    plain: bool,
) -> NoReturn:
    from optimizer.beams.respan_view import show_sections
    from optimizer.changed_sections import changed_sections
    from optimizer.respan_outputs import SectionsRespanDocuments
    from optimizer.respan_sections import respan_sections
    from optimizer.sections_report import chosen_section_step

    changed = changed_sections(record, path, asked)
    files.check(*changed.keys.sources)
    with progress_line() as tell:
        result = respan_sections(changed.job, changed.layers, locked, tell)
    step = chosen_section_step(result, choice)
    documents = SectionsRespanDocuments(result=result, choice=choice, step=step, job=changed.keys)
    if not _possible(files, chosen=step is not None).write(documents):
        view = data_view(plain=plain)
        view.title(changed.job.title, changed.job.edition.name)
        show_sections(view, result, choice)
    _say_unwritten(files, chosen=step is not None)
    raise typer.Exit(0 if step is not None else 1)


def _possible(files: OutputFiles, *, chosen: bool) -> OutputFiles:
    """The files that can be written: without a chosen design no table and no record."""
    return files if chosen else OutputFiles(json=files.json, html=files.html)


def _say_unwritten(files: OutputFiles, *, chosen: bool) -> None:
    for path in () if chosen else (files.csv, files.record):
        if path is not None:
            typer.echo(f"cagewright: {short(str(path))}: not written: no design", err=True)


def show_demo_beam(text: str, span: str, length: str, *, brief: bool, plain: bool) -> None:
    """Design the beam of the demo, and again with one span longer.

    Parameters
    ----------
    text : str
        Its job.
    span : str
        Mark of the span that grows.
    length : str
        New length.
    brief : bool
        Whether of each design only schedule and stirrups are printed.
    plain : bool
        Whether to draw with ASCII characters only.
    """
    from optimizer.beams.changed_beam import changed_beam
    from optimizer.beams.design import BeamDesign, design_beam
    from optimizer.beams.positions import drawn
    from optimizer.beams.reader import parse_beam_keys
    from optimizer.beams.respan import respan
    from optimizer.beams.respan_view import show_respan
    from optimizer.beams.view import show_beam, show_schedule

    keys = parse_toml(text, "demo")
    problem = parse_beam_keys(keys, name="demo")
    record = Record(kind="beam", name="demo", job=keys, tables={}, design={})
    asked = Asked(spans=(f"{span}={length}",))
    changed = changed_beam(record, Path("demo"), asked)
    with status_line() as tell:
        before = design_beam(problem, tell)
        if not isinstance(before, BeamDesign):
            msg = "the beam of the demo has no design"
            raise DefectError(msg)
        result = respan(changed.problem, drawn(before), (), tell)
    view = data_view(plain=plain)
    view.title(problem.title, problem.edition.name)
    if brief:
        view.head_line(problem.mark)
        show_schedule(view, before)
    else:
        show_beam(view, before, brief=True)
        view.say()
    view.say(f"Then the span {span} grows to {length}.", "bold")
    view.say()
    show_respan(view, result, "least", brief=True)
