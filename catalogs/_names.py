"""Looking a name up among the names of a catalogue, and saying what is near it."""

import difflib
import re
from collections.abc import Iterable, Mapping
from typing import TypeVar

from catalogs.errors import UnknownNameError

Item = TypeVar("Item")

# Low enough that the digit of a short designation alone still finds it ("8" for "#8").
SIMILARITY = 0.5
LONGEST_SHOWN = 40


def key(name: str) -> str:
    """Form in which two spellings of a name are compared: no outer blanks, no case."""
    return name.strip().casefold()


def shown(value: str) -> str:
    """Quote a value for a message, cut where it would flood the screen."""
    return repr(value if len(value) <= LONGEST_SHOWN else value[:LONGEST_SHOWN] + "...")


def nearest(name: str, allowed: Iterable[str]) -> str | None:
    """Find the allowed name that was most likely meant, if there is one.

    The same number written another way ("No. 8", "8M") says more than likeness of letters.
    """
    names = list(allowed)
    digits = re.findall(r"\d+", name)
    same_number = [known for known in names if digits and re.findall(r"\d+", known) == digits]
    if len(same_number) == 1:
        return same_number[0]
    by_key = {key(known): known for known in names}
    # A very long text is no misspelling, and comparing it would only take time.
    close = difflib.get_close_matches(key(name)[:LONGEST_SHOWN], by_key, n=1, cutoff=SIMILARITY)
    return by_key[close[0]] if close else None


def find(what: str, name: str, items: Mapping[str, Item], also: str = "") -> Item:
    """Look up a name, ignoring case and outer blanks.

    Parameters
    ----------
    what : str
        What is looked up, for the message.
    name : str
        The name as given.
    items : mapping of str to item
        Everything that can be found, by its name as listed.
    also : str, optional
        What else would have been accepted, for the message.

    Returns
    -------
    item
        The entry of that name.

    Raises
    ------
    UnknownNameError
        If there is none; the message lists the allowed names and hints at the nearest.
    """
    for listed, item in items.items():
        if key(listed) == key(name):
            return item
    allowed = tuple(items)
    message = f"{what} {shown(name)} is not known; allowed: {', '.join(allowed)}{also}"
    guess = nearest(name, allowed)
    if guess is not None:
        message += f"; hint: the nearest name is {guess!r}"
    raise UnknownNameError(message, name=name, allowed=allowed)
