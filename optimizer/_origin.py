"""Guard of the three plain package names.

`catalogs`, `engine` and `optimizer` could be taken by another distribution in the same
environment, which would silently compute with foreign code. They belong side by side; this is
seen before anything of them is imported.
"""

from __future__ import annotations

import sys
from importlib.util import find_spec
from pathlib import Path


def foreign_package() -> str | None:
    """Say which of the packages is not ours, if one is not.

    Returns
    -------
    str or None
        A message that names both folders, or None if all is well.
    """
    home = Path(__file__).resolve().parent.parent
    for name in ("catalogs", "engine"):
        spec = find_spec(name)
        places = [] if spec is None else [Path(p) for p in spec.submodule_search_locations or ()]
        folder = places[0].resolve().parent if places else None
        if folder != home:
            return (
                f"cagewright: package {name} comes from {folder or 'nowhere'}, expected {home};"
                " hint: install Cagewright in an environment of its own"
            )
    return None


def stop_if_foreign() -> None:
    """End the process with a message if a package is not ours.

    Raises
    ------
    SystemExit
        With exit code 3; going on would compute with foreign code.
    """
    fault = foreign_package()
    if fault is not None:
        print(fault, file=sys.stderr)  # noqa: T201 - nothing else is loaded yet
        raise SystemExit(3)
