"""Start of the program: ``cagewright`` and ``python -m optimizer``."""

from __future__ import annotations

from optimizer.cli import run


def main() -> None:
    """Run the command line and end with its exit code."""
    raise SystemExit(run())


if __name__ == "__main__":
    main()
