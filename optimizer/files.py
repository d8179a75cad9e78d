"""Writing files whole or not at all."""

from __future__ import annotations

import os
import tempfile
from pathlib import Path

from optimizer.errors import OutputError
from optimizer.job_messages import short


def check_target(path: Path, *, replace: bool = True, sources: tuple[Path, ...] = ()) -> Path:
    """See, before any work is done, whether a file can be written.

    Parameters
    ----------
    path : Path
        File to write.
    replace : bool
        Whether an existing file may be replaced.
    sources : tuple of Path
        Files that must not be overwritten: what the result is made from.

    Returns
    -------
    Path
        The file itself, links followed.

    Raises
    ------
    OutputError
        If the place is no place for a file.
    """
    shown = short(str(path))
    try:
        target = path.resolve()
        exists = target.exists()
        if target.is_dir():
            msg = f"{shown}: is a folder; expected a file name"
            raise OutputError(msg)
        if exists and not target.is_file():
            msg = f"{shown}: is no ordinary file; expected a file name"
            raise OutputError(msg)
        if exists and not replace:
            msg = f"{shown}: exists already; allowed: a new file; hint: choose another name"
            raise OutputError(msg)
        if exists and any(target == source.resolve() for source in sources):
            msg = f"{shown}: is what the result is made from; hint: choose another name"
            raise OutputError(msg)
        if not target.parent.is_dir():
            msg = f"{shown}: its folder does not exist; hint: make the folder first"
            raise OutputError(msg)
        if not os.access(target.parent, os.W_OK):
            msg = f"{shown}: its folder cannot be written to"
            raise OutputError(msg)
    except (OSError, ValueError) as error:
        if isinstance(error, OutputError):
            raise
        msg = f"{shown}: cannot be written: {_reason(error)}"
        raise OutputError(msg) from None
    return target


def write_text(path: Path, text: str, *, replace: bool = True) -> None:
    """Write a text file in UTF-8; see `write_bytes`.

    Parameters
    ----------
    path : Path
        File to write.
    text : str
        Its content; line ends are written as they are.
    replace : bool
        Whether an existing file may be replaced.

    Raises
    ------
    OutputError
        If the file exists and must not be replaced, or cannot be written.
    """
    try:
        data = text.encode("utf-8")
    except UnicodeEncodeError as error:
        msg = f"{short(str(path))}: cannot be written: {_reason(error)}"
        raise OutputError(msg) from None
    write_bytes(path, data, replace=replace)


def write_bytes(path: Path, data: bytes, *, replace: bool = True) -> None:
    """Write a file by way of a temporary one beside it.

    Parameters
    ----------
    path : Path
        File to write.
    data : bytes
        Its content.
    replace : bool
        Whether an existing file may be replaced.

    Raises
    ------
    OutputError
        If the file exists and must not be replaced, or cannot be written.
    """
    target = check_target(path, replace=replace)
    try:
        mode = target.stat().st_mode & 0o777 if target.exists() else 0o666 & ~_umask()
        handle, name = tempfile.mkstemp(dir=target.parent, prefix=".cagewright-")
        temporary = Path(name)
        try:
            with os.fdopen(handle, "wb") as file:
                file.write(data)
            temporary.chmod(mode)
            temporary.replace(target)
        except BaseException:
            temporary.unlink(missing_ok=True)
            raise
    except (OSError, ValueError) as error:
        msg = f"{short(str(path))}: cannot be written: {_reason(error)}"
        raise OutputError(msg) from None


def _reason(error: Exception) -> str:
    reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
    return short(reason)


def _umask() -> int:
    """Permissions that the user does not want new files to have; only settable, so set back."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
