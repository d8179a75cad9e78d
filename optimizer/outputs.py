"""Where results go: standard output, files, and a line of progress on standard error."""

from __future__ import annotations

import io
import sys
from collections.abc import Callable, Iterator, Mapping
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any, Protocol

from rich.console import Console
from rich.text import Text

from optimizer.errors import DefectError, OutputError
from optimizer.files import check_target, write_together
from optimizer.results import Progress

if TYPE_CHECKING:
    from optimizer.json_output import Result
    from optimizer.views import View

_NARROWEST = 80


class ReaderGoneError(Exception):
    """Whoever reads standard output has closed it (head, less)."""


class _DataConsole(Console):
    """Console for data whose reader may leave early."""

    def on_broken_pipe(self) -> None:
        """Stop quietly instead of exiting with 1, which means something else here."""
        raise ReaderGoneError


def data_view(*, plain: bool) -> View:
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
def status_line() -> Iterator[Callable[[str], None]]:
    """A line on standard error that says what is being done, in a terminal."""
    talk = Console(stderr=True, highlight=False)
    with talk.status("") as status:
        yield lambda text: status.update(Text(text))


@contextmanager
def progress_line() -> Iterator[Progress]:
    """A line on standard error while a job of many sections runs in a terminal."""
    with status_line() as say:

        def tell(done: int, of: int, mark: str) -> None:
            say(f"section {done + 1} of {of}: {mark}")

        yield tell


class Documents(Protocol):
    """What a result can be written as."""

    def html(self) -> str:
        """Page to read and print."""

    def xlsx(self) -> bytes:
        """Workbook."""

    def dxf(self) -> str:
        """Drawing to scale."""

    def csv(self) -> str:
        """List as a table."""

    def json(self, *, ascii_only: bool) -> str:
        """Everything as data."""

    def record(self) -> bytes:
        """What a later run starts from."""


@dataclass(frozen=True, slots=True, kw_only=True)
class OutputFiles:
    """Files that a command is asked to write beside its text."""

    json: str | None = None
    html: Path | None = None
    xlsx: Path | None = None
    dxf: Path | None = None
    csv: Path | None = None
    record: Path | None = None

    def check(self, *sources: Path) -> None:
        """Refuse an impossible place before the work, not after it.

        Parameters
        ----------
        *sources : Path
            Files that the result is made from.
        """
        json = None if self.json in (None, "-") else Path(str(self.json))
        taken: set[Path] = set()
        for path in (json, self.html, self.xlsx, self.dxf, self.csv, self.record):
            if path is None:
                continue
            target = check_target(path, sources=sources)
            if target in taken:
                msg = f"{path}: named twice; allowed: a file of its own for each result"
                raise OutputError(msg)
            taken.add(target)

    def write(self, documents: Documents) -> bool:
        """Write all files or none; True if nothing else is to be printed.

        Parameters
        ----------
        documents : Documents
            Contents, made as far as they are asked for.
        """
        contents: list[tuple[Path, bytes]] = []
        if self.html is not None:
            contents.append((self.html, _encoded(self.html, documents.html())))
        if self.xlsx is not None:
            contents.append((self.xlsx, documents.xlsx()))
        if self.dxf is not None:
            contents.append((self.dxf, _encoded(self.dxf, documents.dxf())))
        if self.csv is not None:
            contents.append((self.csv, _encoded(self.csv, documents.csv())))
        if self.record is not None:
            contents.append((self.record, documents.record()))
        if self.json is not None and self.json != "-":
            path = Path(self.json)
            contents.append((path, _encoded(path, documents.json(ascii_only=False))))
        write_together(contents)
        return self.json == "-" and _print_json(documents)


@dataclass(frozen=True, slots=True)
class SectionDocuments:
    """Documents of a job of sections.

    Attributes
    ----------
    result : RankResult, CheckResult or OptionsResult
        What they tell.
    keys : mapping or None
        Keys of the job, for a record of a ranking.
    base : Path or None
        Folder that relative paths of the job start from.
    """

    result: Result
    keys: Mapping[str, Any] | None = None
    base: Path | None = None

    # Each document brings its own heavy packages: only what is asked for is loaded.

    def html(self) -> str:
        """Page to read and print."""
        from optimizer.documents.page import page_html

        return page_html(self.result)

    def xlsx(self) -> bytes:
        """Workbook."""
        from optimizer.documents.workbook import workbook_bytes

        return workbook_bytes(self.result)

    def dxf(self) -> str:
        """Drawing to scale."""
        from optimizer.documents.section_drawing import drawing_dxf

        return drawing_dxf(self.result)

    def csv(self) -> str:
        """List as a table."""
        from optimizer.options import OptionsResult

        if isinstance(self.result, OptionsResult):
            from optimizer.documents.options_tables import trade_off_csv

            return trade_off_csv(self.result)
        from optimizer.documents.short_list_table import short_list_csv

        return short_list_csv(self.result)

    def json(self, *, ascii_only: bool) -> str:
        """Everything as data."""
        from optimizer.json_output import to_json

        return to_json(self.result, ascii_only=ascii_only)

    def record(self) -> bytes:
        """Record of the first line of each section, that a change starts from."""
        from optimizer.record import record_text
        from optimizer.respan_sections import drawn_sections
        from optimizer.results import RankResult

        if self.keys is None or not isinstance(self.result, RankResult):
            msg = "a record was asked for without a ranking of a job's keys"
            raise DefectError(msg)
        design = drawn_sections(self.result)
        return record_text("sections", self.keys, self.base, design).encode("utf-8")


def _encoded(path: Path, text: str) -> bytes:
    try:
        return text.encode("utf-8")
    except UnicodeEncodeError as error:
        msg = f"{path}: cannot be written: {error}"
        raise OutputError(msg) from None


def _print_json(documents: Documents) -> bool:
    try:
        sys.stdout.write(documents.json(ascii_only=not _in_unicode()))
        sys.stdout.flush()
    except BrokenPipeError:
        raise ReaderGoneError from None
    return True
