"""The command line: arguments in, exit code out; no engineering.

Exit codes: 0 every section has a layout that passes; 1 at least one has none, or a given
layout fails; 2 bad input or usage. Data go to standard output, talk to standard error.
"""

from __future__ import annotations

import io
import os
import sys
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from dataclasses import replace
from importlib.resources import files
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer
from rich.console import Console
from rich.text import Text

from catalogs import BUILTIN_CATALOGS, CatalogError, bar_catalog
from engine import EngineError
from optimizer._version import VERSION
from optimizer.errors import DefectError, JobError, OptimizerError
from optimizer.files import check_target, write_text
from optimizer.job import Job, parse_job, read_job
from optimizer.results import Progress

if TYPE_CHECKING:
    from optimizer.json_output import Result
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
_NARROWEST = 80

JobFile = Annotated[Path, typer.Argument(metavar="JOB", help="Job file (TOML).")]
JsonFile = Annotated[
    str | None,
    typer.Option(
        "--json",
        metavar="FILE",
        help="Also write the result as JSON; - prints it and nothing else.",
    ),
]
Plain = Annotated[bool, typer.Option("--plain", help="Draw with ASCII characters only.")]
Only = Annotated[
    list[str] | None,
    typer.Option("--only", metavar="MARK", help="Only the section of this mark; may be repeated."),
]
Show = Annotated[
    int | None,
    typer.Option("--show", metavar="N", min=1, help="Full check of line N instead of line 1."),
]
Brief = Annotated[bool, typer.Option("--brief", help="Short lists only, without checks.")]


class _ReaderGone(Exception):  # noqa: N818 - no error: the reader has seen enough
    """Whoever reads standard output has closed it (head, less)."""


class _DataConsole(Console):
    """Console for data whose reader may leave early."""

    def on_broken_pipe(self) -> None:
        """Stop quietly instead of exiting with 1, which means something else here."""
        raise _ReaderGone


def _print_version(value: bool) -> None:
    if value:
        typer.echo(f"cagewright {VERSION}")
        raise typer.Exit


@app.callback()
def _options(
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


def _view(*, plain: bool) -> View:
    """View on standard output, never narrower than what reports are made for."""
    from optimizer.views import View

    if isinstance(sys.stdout, io.TextIOWrapper):
        # A mark may hold characters that the terminal's encoding lacks.
        sys.stdout.reconfigure(errors="replace")
    console = _DataConsole(highlight=False, soft_wrap=False)
    if not console.is_terminal or console.width < _NARROWEST:
        console = _DataConsole(highlight=False, soft_wrap=False, width=_NARROWEST)
    return View(console, plain_text=plain or not _in_unicode())


def _in_unicode() -> bool:
    return "utf" in (getattr(sys.stdout, "encoding", None) or "").lower()


@contextmanager
def _progress() -> Iterator[Progress]:
    """A line on standard error while a job of many sections runs in a terminal."""
    talk = Console(stderr=True, highlight=False)
    with talk.status("") as status:

        def tell(done: int, of: int, mark: str) -> None:
            status.update(Text(f"section {done + 1} of {of}: {mark}"))

        yield tell


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


def _check_json(target: str | None, job_file: Path | None = None) -> None:
    """Refuse an impossible place before the work, not after it."""
    if target is not None and target != "-":
        check_target(Path(target), sources=() if job_file is None else (job_file,))


def _put_json(result: Result, target: str) -> bool:
    """Write JSON; True if nothing else is to be printed."""
    from optimizer.json_output import to_json

    if target != "-":
        write_text(Path(target), to_json(result))
        return False
    try:
        sys.stdout.write(to_json(result, ascii_only=not _in_unicode()))
        sys.stdout.flush()
    except BrokenPipeError:
        raise _ReaderGone from None
    return True


@app.command("rank")
def rank_command(
    job_file: JobFile,
    json_file: JsonFile = None,
    show: Show = None,
    brief: Brief = False,
    only: Only = None,
    plain: Plain = False,
) -> None:
    """Ranked short list of bar layouts for every section of a job."""
    _check_json(json_file, job_file)
    _rank(_selected(read_job(job_file), only), json_file, show, brief, plain)


def _rank(job: Job, json_file: str | None, show: int | None, brief: bool, plain: bool) -> None:
    from optimizer.results import rank

    with _progress() as tell:
        result = rank(job, tell)
    if json_file is not None and _put_json(result, json_file):
        raise typer.Exit(0 if result.ok else 1)
    view = _view(plain=plain)
    view.title(job.title, job.edition.name)
    for section in result.sections:
        view.ranked(section, show=show, brief=brief)
    view.footer()
    raise typer.Exit(0 if result.ok else 1)


@app.command("check")
def check_command(
    job_file: JobFile, json_file: JsonFile = None, only: Only = None, plain: Plain = False
) -> None:
    """Full check of the layouts given in a job (key `layers`)."""
    from optimizer.results import check

    _check_json(json_file, job_file)
    job = _selected(read_job(job_file), only)
    result = check(job)
    if json_file is not None and _put_json(result, json_file):
        raise typer.Exit(0 if result.ok else 1)
    view = _view(plain=plain)
    view.title(job.title, job.edition.name)
    for section in result.sections:
        view.checked_section(section)
    skipped = len(job.problems) - len(result.sections)
    if skipped:
        view.say(f"{skipped} of {len(job.problems)} sections give no layers and were not checked.")
    view.footer()
    raise typer.Exit(0 if result.ok else 1)


@app.command("options")
def options_command(
    job_file: JobFile, json_file: JsonFile = None, only: Only = None, plain: Plain = False
) -> None:
    """Alternatives to the layouts given in a job (key `layers`), and the sizes of the job."""
    from optimizer.options import options
    from optimizer.options_view import show_options

    _check_json(json_file, job_file)
    job = _selected(read_job(job_file), only)
    with _progress() as tell:
        result = options(job, tell)
    if json_file is not None and _put_json(result, json_file):
        raise typer.Exit(0 if result.ok else 1)
    view = _view(plain=plain)
    view.title(job.title, job.edition.name)
    show_options(view, result)
    view.footer()
    raise typer.Exit(0 if result.ok else 1)


def _packaged(name: str) -> str:
    return files("optimizer").joinpath("data", name).read_text(encoding="utf-8")


@app.command("demo")
def demo_command(
    json_file: JsonFile = None,
    show: Show = None,
    brief: Brief = False,
    plain: Plain = False,
    job_file: Annotated[
        Path | None,
        typer.Option(
            "--job", metavar="FILE", help="Write the demo's job file instead of running it."
        ),
    ] = None,
) -> None:
    """Rank the built-in, invented scenario from start to end."""
    text = _packaged("demo.toml")
    if job_file is not None:
        write_text(job_file, text, replace=False)
        typer.echo(f"{job_file} written; run: cagewright rank {job_file}")
        return
    _check_json(json_file)
    with suppress(typer.Exit):
        # One of the demo's sections has no layout on purpose; the demo itself went well.
        _rank(parse_job(text, name="demo"), json_file, show, brief, plain)


@app.command("new")
def new_command(
    path: Annotated[Path, typer.Argument(metavar="FILE", help="File to write.")],
    units: Annotated[str, typer.Option("--units", help="us or si.")] = "us",
) -> None:
    """Write a commented starter job."""
    if units not in _STARTERS:
        msg = f"--units: got {units!r}; allowed: {', '.join(_STARTERS)}"
        raise JobError(msg)
    write_text(path, _packaged(_STARTERS[units]), replace=False)
    typer.echo(f"{path} written; run: cagewright rank {path}")


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
    view = _view(plain=plain)
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
    except (_ReaderGone, BrokenPipeError):
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
