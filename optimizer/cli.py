"""The command line: arguments in, exit code out; no engineering.

Exit codes: 0 every section has a layout that passes; 1 at least one has none, or a given
layout fails; 2 bad input or usage. Data go to standard output, talk to standard error.
"""

from __future__ import annotations

import os
import sys
from collections.abc import Callable, Mapping
from contextlib import suppress
from dataclasses import replace
from importlib.resources import files
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any, NoReturn

import typer

from catalogs import BUILTIN_CATALOGS, CatalogError, bar_catalog
from engine import EngineError
from optimizer._version import VERSION
from optimizer.beams.starter import beam_starter
from optimizer.cli_beam import beam_command
from optimizer.cli_options import (
    Brief,
    CsvFile,
    DxfFile,
    HtmlFile,
    JobFile,
    JsonFile,
    Only,
    Plain,
    SaveFile,
    Show,
    XlsxFile,
)
from optimizer.cli_respan import respan_command, show_demo_beam
from optimizer.errors import DefectError, JobError, OptimizerError
from optimizer.files import write_text
from optimizer.job import Job, parse_job, read_job
from optimizer.job_messages import short
from optimizer.job_text import parse_toml, text_of
from optimizer.outputs import (
    OutputFiles,
    ReaderGoneError,
    SectionDocuments,
    data_view,
    progress_line,
)
from optimizer.record import table_names

if TYPE_CHECKING:
    from optimizer.views import View

app = typer.Typer(
    name="cagewright",
    help="Picks the reinforcing bars of concrete beams: lightest practical layouts, proved and"
    " fully checked.",
    add_completion=False,
    no_args_is_help=True,
    pretty_exceptions_enable=False,
    rich_markup_mode=None,
)

_STARTERS = {"us": "starter_us.toml", "si": "starter_si.toml"}


def _print_version(value: bool) -> None:
    if value:
        typer.echo(f"cagewright {VERSION}")
        raise typer.Exit


@app.callback()
def _before_the_command(
    version_asked: Annotated[
        bool,
        typer.Option(
            "--version", callback=_print_version, is_eager=True, help="Print the version."
        ),
    ] = False,
    debug: Annotated[
        bool, typer.Option("--debug", help="Show a traceback if the program fails.")
    ] = False,
) -> None:
    """Options before the command."""


def _selected(job: Job, only: list[str] | None) -> Job:
    if not only:
        return job
    marks = [problem.section.mark for problem in job.problems]
    for mark in only:
        if mark not in marks:
            msg = f"--only: no section is marked {mark!r}; allowed: {', '.join(marks[:20])}"
            raise JobError(msg)
    return replace(
        job, problems=tuple(problem for problem in job.problems if problem.section.mark in only)
    )


@app.command("rank")
def rank_command(
    job_file: JobFile,
    json_file: JsonFile = None,
    html: HtmlFile = None,
    xlsx: XlsxFile = None,
    dxf: DxfFile = None,
    csv: CsvFile = None,
    show: Show = None,
    brief: Brief = False,
    only: Only = None,
    save: SaveFile = None,
    plain: Plain = False,
) -> None:
    """Ranked short list of bar layouts for every section of a job."""
    files = OutputFiles(json=json_file, html=html, xlsx=xlsx, dxf=dxf, csv=csv, record=save)
    files.check(job_file)
    text, base, name = text_of(job_file), job_file.parent, short(job_file.name)
    job = _selected(parse_job(text, name=name, base=base), only)
    keys = parse_toml(text, name)
    if save is not None:
        files.check(job_file, *(base / table for table in table_names(keys)))
    marks = [problem.section.mark for problem in job.problems]
    keys["section"] = [section for section in keys["section"] if section["mark"] in marks]
    _rank(job, files, show, brief, plain, keys, base)


def _deliver(
    job: Job,
    documents: SectionDocuments,
    files: OutputFiles,
    plain: bool,
    show: Callable[[View], None],
) -> NoReturn:
    """Write the files, print the report unless JSON takes its place, end with the exit code."""
    if not files.write(documents):
        view = data_view(plain=plain)
        view.title(job.title, job.edition.name)
        show(view)
        view.footer()
    raise typer.Exit(0 if documents.result.ok else 1)


def _rank(
    job: Job,
    files: OutputFiles,
    show: int | None,
    brief: bool,
    plain: bool,
    keys: Mapping[str, Any] | None = None,
    base: Path | None = None,
) -> NoReturn:
    from optimizer.results import rank

    with progress_line() as tell:
        result = rank(job, tell)

    def report(view: View) -> None:
        for section in result.sections:
            view.ranked(section, show=show, brief=brief)

    _deliver(job, SectionDocuments(result, keys, base), files, plain, report)


@app.command("check")
def check_command(
    job_file: JobFile,
    json_file: JsonFile = None,
    html: HtmlFile = None,
    xlsx: XlsxFile = None,
    dxf: DxfFile = None,
    csv: CsvFile = None,
    only: Only = None,
    plain: Plain = False,
) -> None:
    """Full check of the layouts given in a job (key `layers`)."""
    from optimizer.results import check

    files = OutputFiles(json=json_file, html=html, xlsx=xlsx, dxf=dxf, csv=csv)
    files.check(job_file)
    job = _selected(read_job(job_file), only)
    result = check(job)

    def report(view: View) -> None:
        for section in result.sections:
            view.checked_section(section)
        count = len(job.problems)
        skipped = count - len(result.sections)
        if skipped:
            view.say(f"{skipped} of {count} sections give no layers and were not checked.")

    _deliver(job, SectionDocuments(result), files, plain, report)


@app.command("options")
def options_command(
    job_file: JobFile,
    json_file: JsonFile = None,
    html: HtmlFile = None,
    xlsx: XlsxFile = None,
    dxf: DxfFile = None,
    csv: CsvFile = None,
    only: Only = None,
    plain: Plain = False,
) -> None:
    """Alternatives to the layouts given in a job (key `layers`), and the sizes of the job."""
    files = OutputFiles(json=json_file, html=html, xlsx=xlsx, dxf=dxf, csv=csv)
    files.check(job_file)
    _options(_selected(read_job(job_file), only), files, plain)


def _options(job: Job, files: OutputFiles, plain: bool) -> NoReturn:
    from optimizer.options import options
    from optimizer.options_view import show_options

    with progress_line() as tell:
        result = options(job, tell)
    _deliver(job, SectionDocuments(result), files, plain, lambda view: show_options(view, result))


app.command("beam")(beam_command)
app.command("respan")(respan_command)


def _packaged(name: str) -> str:
    return files("optimizer").joinpath("data", name).read_text(encoding="utf-8")


@app.command("demo")
def demo_command(
    json_file: JsonFile = None,
    show: Show = None,
    brief: Brief = False,
    plain: Plain = False,
    folder: Annotated[
        Path | None,
        typer.Option("--folder", metavar="DIR", help="Also write the page of the options there."),
    ] = None,
    job_file: Annotated[
        Path | None,
        typer.Option(
            "--job", metavar="FILE", help="Write the demo's job file instead of running it."
        ),
    ] = None,
) -> None:
    """Run the built-in, invented scenario: ranking, options, and a beam whose span grows."""
    text = _packaged("demo.toml")
    if job_file is not None:
        write_text(job_file, text, replace=False)
        typer.echo(f"{job_file} written; run: cagewright rank {job_file}")
        return
    files = OutputFiles(json=json_file)
    files.check()
    page = OutputFiles(html=None if folder is None else folder / "cagewright-demo.html")
    page.check()
    job = parse_job(text, name="demo")
    # One of the demo's sections has no layout on purpose; the demo itself went well.
    with suppress(typer.Exit):
        _rank(job, files, show, brief, plain)
    if json_file != "-":
        with suppress(typer.Exit):
            _options(job, page, plain)
        show_demo_beam(_packaged("demo_beam.toml"), "Q-P", "24 ft", brief=brief, plain=plain)


@app.command("new")
def new_command(
    path: Annotated[Path, typer.Argument(metavar="FILE", help="File to write.")],
    units: Annotated[str, typer.Option("--units", help="us or si.")] = "us",
    beam: Annotated[bool, typer.Option("--beam", help="A job of a whole beam.")] = False,
) -> None:
    """Write a commented starter job."""
    if units not in _STARTERS:
        msg = f"--units: got {units!r}; allowed: {', '.join(_STARTERS)}"
        raise JobError(msg)
    text = beam_starter(units) if beam else _packaged(_STARTERS[units])
    write_text(path, text, replace=False)
    typer.echo(f"{path} written; run: cagewright {'beam' if beam else 'rank'} {path}")


@app.command("bars")
def bars_command(
    catalog: Annotated[
        list[str] | None,
        typer.Option("--catalog", metavar="NAME", help="Only this catalogue, or a CSV file."),
    ] = None,
    plain: Plain = False,
) -> None:
    """Print the bar catalogues."""
    tables = [bar_catalog(name) for name in catalog or BUILTIN_CATALOGS]
    view = data_view(plain=plain)
    for table in tables:
        view.catalog(table)


def run(arguments: list[str] | None = None) -> int:
    """Run the command line.

    Parameters
    ----------
    arguments : list of str, optional
        Arguments; those of the process if left out.

    Returns
    -------
    int
        Exit code.
    """
    debug = "--debug" in (sys.argv[1:] if arguments is None else arguments)
    try:
        outcome = app(args=arguments, standalone_mode=False)
        sys.stdout.flush()
    except typer.Exit as stop:
        return stop.exit_code
    except typer.Abort:
        return 130
    except (ReaderGoneError, BrokenPipeError):
        _leave_stdout()
        return 0
    except Exception as error:
        if debug:
            raise
        return _fault(error)
    return int(outcome or 0)


def _leave_stdout() -> None:
    """Point standard output elsewhere, so that flushing it at exit does not complain."""
    with suppress(OSError, ValueError):
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def _fault(error: Exception) -> int:
    """Say what went wrong on standard error; 2 if it is the user's to mend, 3 if ours."""
    if isinstance(error, DefectError):
        return _say(f"defect: {error}; please report it with the job", 3)
    if isinstance(error, OptimizerError | EngineError | CatalogError):
        return _say(str(error), 2)
    show = getattr(error, "show", None)
    if show is not None:  # usage errors of the argument parser
        show()
        return int(getattr(error, "exit_code", 2))
    if isinstance(error, OSError):
        _leave_stdout()
        return _say(f"output: {error.strerror or error}", 2)
    text = f"defect: {type(error).__name__}: {error}; please report it with the job"
    return _say(f"{text}; --debug shows where", 3)


def _say(message: str, code: int) -> int:
    print(f"cagewright: {message}", file=sys.stderr)  # noqa: T201 - the one place that does
    return code
