"""Where results go: standard output, files, and a line of progress on standard error."""

from __future__ import annotations

import io
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from rich.console import Console
from rich.text import Text

from optimizer.errors import OutputError
from optimizer.files import check_target, write_bytes, write_text
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
def progress_line() -> Iterator[Progress]:
    """A line on standard error while a job of many sections runs in a terminal."""
    talk = Console(stderr=True, highlight=False)
    with talk.status("") as status:

        def tell(done: int, of: int, mark: str) -> None:
            status.update(Text(f"section {done + 1} of {of}: {mark}"))

        yield tell


@dataclass(frozen=True, slots=True, kw_only=True)
class OutputFiles:
    """Files that a command is asked to write beside its text."""

    json: str | None = None
    html: Path | None = None
    xlsx: Path | None = None
    dxf: Path | None = None
    csv: Path | None = None

    def check(self, job_file: Path | None = None) -> None:
        """Refuse an impossible place before the work, not after it."""
        sources = () if job_file is None else (job_file,)
        json = None if self.json in (None, "-") else Path(str(self.json))
        taken: set[Path] = set()
        for path in (json, self.html, self.xlsx, self.dxf, self.csv):
            if path is None:
                continue
            target = check_target(path, sources=sources)
            if target in taken:
                msg = f"{path}: named twice; allowed: a file of its own for each result"
                raise OutputError(msg)
            taken.add(target)

    def write(self, result: Result) -> bool:
        """Write all files; True if nothing else is to be printed."""
        # Each document brings its own heavy packages: only what is asked for is loaded.
        if self.html is not None:
            from optimizer.documents.page import page_html

            write_text(self.html, page_html(result))
        if self.xlsx is not None:
            from optimizer.documents.workbook import workbook_bytes

            write_bytes(self.xlsx, workbook_bytes(result))
        if self.dxf is not None:
            from optimizer.documents.section_drawing import drawing_dxf

            write_text(self.dxf, drawing_dxf(result))
        if self.csv is not None:
            write_text(self.csv, _csv(result))
        return self.json is not None and _put_json(result, self.json)


def _csv(result: Result) -> str:
    from optimizer.options import OptionsResult

    if isinstance(result, OptionsResult):
        from optimizer.documents.options_tables import trade_off_csv

        return trade_off_csv(result)
    from optimizer.documents.short_list_table import short_list_csv

    return short_list_csv(result)


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
        raise ReaderGoneError from None
    return True
