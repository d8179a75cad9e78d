"""What the answer to a change is written as."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from optimizer.change_request import ChangedJob
from optimizer.errors import DefectError
from optimizer.record import record_text

if TYPE_CHECKING:
    from optimizer.beams.respan import Respan, Step
    from optimizer.beams.sweep import Sweep
    from optimizer.respan_sections import SectionsRespan, SectionStep


class _NoDocuments:
    """Kinds of documents that no answer to a change has."""

    __slots__ = ()

    def xlsx(self) -> bytes:
        """No workbook."""
        raise DefectError(_UNASKED)

    def dxf(self) -> str:
        """No drawing."""
        raise DefectError(_UNASKED)


_UNASKED = "a document was asked for that the command does not offer"


# Each document brings its own heavy packages: only what is asked for is loaded.


@dataclass(frozen=True, slots=True, kw_only=True)
class RespanDocuments(_NoDocuments):
    """Documents of a changed beam; table and record need a chosen design.

    Attributes
    ----------
    result : Respan
        Answer.
    choice : str or int
        Design that is chosen.
    step : Step or None
        Step that has it.
    job : ChangedJob
        Job after the change.
    """

    result: Respan
    choice: str | int
    step: Step | None
    job: ChangedJob

    def html(self) -> str:
        """Page to read and print."""
        from optimizer.documents.respan_page import respan_page

        return respan_page(self.result, self.choice)

    def csv(self) -> str:
        """What to mark up, as a table."""
        from optimizer.documents.markup_table import markup_csv

        if self.step is None:
            raise DefectError(_UNASKED)
        return markup_csv(self.result, self.step)

    def json(self, *, ascii_only: bool) -> str:
        """Everything as data."""
        from optimizer.beams.json_respan import respan_json

        return respan_json(self.result, self.choice, ascii_only=ascii_only)

    def record(self) -> bytes:
        """Record of the chosen design, that the next change starts from."""
        from optimizer.beams.record import record_of_keys

        if self.step is None or self.step.design is None:
            raise DefectError(_UNASKED)
        text = record_of_keys(self.job.keys, self.step.design, None, self.job.tables)
        return text.encode("utf-8")


@dataclass(frozen=True, slots=True, kw_only=True)
class SweepDocuments(_NoDocuments):
    """Documents of a sweep.

    Attributes
    ----------
    result : Sweep
        Sweep.
    """

    result: Sweep

    def html(self) -> str:
        """Page to read and print."""
        from optimizer.documents.respan_page import sweep_page

        return sweep_page(self.result)

    def csv(self) -> str:
        """All lengths as a table."""
        from optimizer.documents.markup_table import sweep_csv

        return sweep_csv(self.result)

    def json(self, *, ascii_only: bool) -> str:
        """Everything as data."""
        from optimizer.beams.json_respan import sweep_json

        return sweep_json(self.result, ascii_only=ascii_only)

    def record(self) -> bytes:
        """A sweep has no design of its own."""
        raise DefectError(_UNASKED)


@dataclass(frozen=True, slots=True, kw_only=True)
class SectionsRespanDocuments(_NoDocuments):
    """Documents of changed sections; table and record need a chosen step.

    Attributes
    ----------
    result : SectionsRespan
        Answer.
    choice : str or int
        Step that is chosen.
    step : SectionStep or None
        That step.
    job : ChangedJob
        Job after the change.
    """

    result: SectionsRespan
    choice: str | int
    step: SectionStep | None
    job: ChangedJob

    def html(self) -> str:
        """Page to read and print."""
        from optimizer.documents.respan_page import sections_page

        return sections_page(self.result, self.choice)

    def csv(self) -> str:
        """What to mark up, as a table."""
        from optimizer.documents.markup_table import sections_csv

        if self.step is None:
            raise DefectError(_UNASKED)
        return sections_csv(self.result, self.step)

    def json(self, *, ascii_only: bool) -> str:
        """Everything as data."""
        from optimizer.json_sections_respan import sections_json

        return sections_json(self.result, self.choice, ascii_only=ascii_only)

    def record(self) -> bytes:
        """Record of the chosen step, that the next change starts from."""
        from optimizer.sections_report import layers_after

        if self.step is None:
            raise DefectError(_UNASKED)
        layers = layers_after(self.result, self.step)
        design: Mapping[str, Any] = {
            "sections": {mark: {"layers": own} for mark, own in layers.items()}
        }
        text = record_text("sections", self.job.keys, None, design, self.job.tables)
        return text.encode("utf-8")
