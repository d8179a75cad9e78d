"""Arguments and options that commands share."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

JobFile = Annotated[Path, typer.Argument(metavar="JOB", help="Job file (TOML).")]
JsonFile = Annotated[
    str | None,
    typer.Option(
        "--json",
        metavar="FILE",
        help="Also write the result as JSON; - prints it and nothing else.",
    ),
]
HtmlFile = Annotated[
    Path | None,
    typer.Option("--html", metavar="FILE", help="Also write one page to read and print."),
]
XlsxFile = Annotated[
    Path | None, typer.Option("--xlsx", metavar="FILE", help="Also write a workbook.")
]
DxfFile = Annotated[
    Path | None, typer.Option("--dxf", metavar="FILE", help="Also draw the sections to scale.")
]
CsvFile = Annotated[
    Path | None, typer.Option("--csv", metavar="FILE", help="Also write the list as a table.")
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
SaveFile = Annotated[
    Path | None,
    typer.Option("--save", metavar="FILE", help="Also keep the design for a later change."),
]
