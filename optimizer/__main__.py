"""Start of the program: ``cagewright`` and ``python -m optimizer``."""

from __future__ import annotations

import sys
from pathlib import Path

import catalogs
import engine
import optimizer


def _origin_fault() -> str | None:
    """Why the three packages are not ours, if they are not.

    Their plain names could be taken by another distribution in the same environment, which
    would silently compute with foreign code. They belong side by side.
    """
    folders = {
        module.__name__: Path(module.__file__ or "").resolve().parent.parent
        for module in (catalogs, engine, optimizer)
    }
    home = folders["optimizer"]
    for name, folder in folders.items():
        if folder != home:
            return (
                f"cagewright: package {name} comes from {folder}, expected {home};"
                " hint: install Cagewright in an environment of its own"
            )
    return None


def main() -> None:
    """Check the packages' origin, then run the command line."""
    fault = _origin_fault()
    if fault is not None:
        print(fault, file=sys.stderr)  # noqa: T201
        raise SystemExit(3)
    from optimizer.cli import run

    raise SystemExit(run())


if __name__ == "__main__":
    main()
