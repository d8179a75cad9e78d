"""Writing files whole or not at all."""

from __future__ import annotations

import os
import tempfile
from pathlib import Path

from optimizer.errors import OutputError


def write_text(path: Path, text: str, *, replace: bool = True) -> None:
    """Write a text file by way of a temporary one beside it.

    Parameters
    ----------
    path : Path
        File to write.
    text : str
        Its content.
    replace : bool
        Whether an existing file may be replaced.

    Raises
    ------
    OutputError
        If the file exists and must not be replaced, or cannot be written.
    """
    if path.exists() and not replace:
        msg = f"{path}: exists already; allowed: a new file; hint: choose another name"
        raise OutputError(msg)
    if path.is_dir():
        msg = f"{path}: is a folder; expected a file name"
        raise OutputError(msg)
    try:
        handle, name = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}.")
        temporary = Path(name)
        try:
            with os.fdopen(handle, "w", encoding="utf-8", newline="\n") as file:
                file.write(text)
            temporary.chmod(0o644)
            temporary.replace(path)
        except BaseException:
            temporary.unlink(missing_ok=True)
            raise
    except (OSError, ValueError) as error:
        reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
        msg = f"{path}: cannot be written: {reason}"
        raise OutputError(msg) from None
