"""What a beam is written as, and the tables its job is made from."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from optimizer.beams.design import BeamDesign, NoDesign
from optimizer.errors import DefectError
from optimizer.job_text import parse_toml


def tables_of(text: str, base: Path) -> tuple[Path, ...]:
    """Files that a job reads beside its own: envelopes and a catalogue.

    Parameters
    ----------
    text : str
        Text of a job that can be read.
    base : Path
        Folder that relative paths start from.

    Returns
    -------
    tuple of Path
        The files, as far as they exist.
    """
    data = parse_toml(text, "job")
    named = [data.get("bars", {}).get("catalog"), *(span.get("envelope") for span in data["span"])]
    paths = [base / name for name in named if isinstance(name, str)]
    return tuple(path for path in paths if path.is_file())


@dataclass(frozen=True, slots=True, kw_only=True)
class BeamDocuments:
    """Documents of a beam; schedule and record need a design.

    Attributes
    ----------
    result : BeamDesign or NoDesign
        What they tell.
    text : str
        Text of the job.
    base : Path
        Folder that the job's relative paths start from.
    """

    result: BeamDesign | NoDesign
    text: str
    base: Path

    @property
    def design(self) -> BeamDesign:
        """The design."""
        if isinstance(self.result, NoDesign):
            msg = "a document was asked for without a design"
            raise DefectError(msg)
        return self.result

    # Each document brings its own heavy packages: only what is asked for is loaded.

    def html(self) -> str:
        """Page to read and print."""
        from optimizer.documents.beam_page import beam_page

        return beam_page(self.result)

    def xlsx(self) -> bytes:
        """Workbook."""
        from optimizer.documents.beam_workbook import beam_workbook

        return beam_workbook(self.result)

    def dxf(self) -> str:
        """Drawing to scale."""
        from optimizer.documents.beam_drawing import beam_drawing

        return beam_drawing(self.result)

    def csv(self) -> str:
        """Schedule as a table."""
        from optimizer.documents.beam_schedule_table import schedule_csv

        return schedule_csv(self.design)

    def json(self, *, ascii_only: bool) -> str:
        """Everything as data."""
        from optimizer.beams.json_beam import beam_json

        return beam_json(self.result, ascii_only=ascii_only)

    def record(self) -> bytes:
        """Record that a change starts from."""
        from optimizer.beams.record import beam_record

        return beam_record(self.text, self.design, self.base).encode("utf-8")
