"""The beam job to start from."""

from __future__ import annotations

from importlib.resources import files

STARTERS = {"us": "beam_us.toml", "si": "beam_si.toml"}


def beam_starter(units: str) -> str:
    """Return a commented beam job, invented and ready to be designed.

    Parameters
    ----------
    units : str
        ``us`` or ``si``.

    Returns
    -------
    str
        TOML.
    """
    return files("optimizer").joinpath("data", STARTERS[units]).read_text(encoding="utf-8")
