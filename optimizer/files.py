"""Writing files whole or not at all."""

from __future__ import annotations

import os
import tempfile
from collections.abc import Sequence
from contextlib import suppress
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
    write_together([(path, data)], replace=replace)


def write_together(contents: Sequence[tuple[Path, bytes]], *, replace: bool = True) -> None:
    """Write several files, or none of them: a fault puts back what was there before.

    Parameters
    ----------
    contents : sequence of (Path, bytes)
        Files with their contents.
    replace : bool
        Whether existing files may be replaced.

    Raises
    ------
    OutputError
        If a file exists and must not be replaced, or cannot be written.
    """
    targets = [check_target(path, replace=replace) for path, _ in contents]
    staged: list[tuple[Path, Path, bytes | None]] = []
    moved = 0
    try:
        for target, (_, data) in zip(targets, contents, strict=True):
            before = target.read_bytes() if len(contents) > 1 and target.exists() else None
            staged.append((target, _beside(target, data), before))
        for target, temporary, _ in staged:
            temporary.replace(target)
            moved += 1
    except BaseException as error:
        # Each loop has stopped at the file that it could not deal with.
        at = moved if len(staged) == len(contents) else len(staged)
        for target, temporary, before in staged:
            temporary.unlink(missing_ok=True)
            if moved > 0 and len(staged) > 1:
                moved -= 1
                _put_back(target, before)
        if not isinstance(error, OSError | ValueError):
            raise
        msg = f"{short(str(contents[at][0]))}: cannot be written: {_reason(error)}"
        raise OutputError(msg) from None


def _beside(target: Path, data: bytes) -> Path:
    """Write a temporary file next to the one that it is to become."""
    mode = target.stat().st_mode & 0o777 if target.exists() else 0o666 & ~_umask()
    handle, name = tempfile.mkstemp(dir=target.parent, prefix=".cagewright-")
    temporary = Path(name)
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(data)
        temporary.chmod(mode)
    except BaseException:
        temporary.unlink(missing_ok=True)
        raise
    return temporary


def _put_back(target: Path, before: bytes | None) -> None:
    """Undo a replacement as far as the disk lets us; the first fault is what is reported."""
    with suppress(OSError):
        if before is None:
            target.unlink(missing_ok=True)
        else:
            target.write_bytes(before)


def _reason(error: Exception) -> str:
    reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
    return short(reason)


def _umask() -> int:
    """Permissions that the user does not want new files to have; only settable, so set back."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
